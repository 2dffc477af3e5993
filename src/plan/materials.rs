//! The aquifer materials that a plan can name: published ranges, built into
//! the program from the files of `aquifers/`.
//!
//! A typical value is the geometric mean of its published range, since
//! conductivity spreads over decades (common practice, no source). It is a
//! place to begin, never a substitute for a pumping test.
//! Adding a material is one file in `aquifers/` and one line in [`FILES`].

use std::sync::LazyLock;

use serde::Deserialize;

use crate::site::Conductivity;

use super::units::{self, Dimension};

/// Each material's key and file.
const FILES: [(&str, &str); 13] = [
    (
        "clean-gravel",
        include_str!("../../aquifers/clean-gravel.toml"),
    ),
    (
        "alluvial-gravel",
        include_str!("../../aquifers/alluvial-gravel.toml"),
    ),
    (
        "glacial-outwash",
        include_str!("../../aquifers/glacial-outwash.toml"),
    ),
    (
        "coarse-sand",
        include_str!("../../aquifers/coarse-sand.toml"),
    ),
    (
        "medium-sand",
        include_str!("../../aquifers/medium-sand.toml"),
    ),
    ("fine-sand", include_str!("../../aquifers/fine-sand.toml")),
    ("silty-sand", include_str!("../../aquifers/silty-sand.toml")),
    ("sandstone", include_str!("../../aquifers/sandstone.toml")),
    (
        "carbonate-rock",
        include_str!("../../aquifers/carbonate-rock.toml"),
    ),
    (
        "karst-limestone",
        include_str!("../../aquifers/karst-limestone.toml"),
    ),
    (
        "fractured-rock",
        include_str!("../../aquifers/fractured-rock.toml"),
    ),
    (
        "weathered-granite",
        include_str!("../../aquifers/weathered-granite.toml"),
    ),
    (
        "permeable-basalt",
        include_str!("../../aquifers/permeable-basalt.toml"),
    ),
];

/// What is published of one material.
#[derive(Clone, Debug)]
pub struct Material {
    /// What a plan calls it.
    pub key: String,
    /// What a person calls it.
    pub name: String,
    /// Hydraulic conductivity.
    pub conductivity: ConductivityRange,
    /// Porosity, as a share of the volume, where it is known.
    pub porosity: Option<ShareRange>,
    /// Specific yield, as a share of the volume, where it is known.
    pub specific_yield: Option<ShareRange>,
    /// Where the conductivity was published.
    pub source: String,
    /// Where porosity and specific yield were published.
    pub porosity_source: Option<String>,
    /// What a planner should keep in mind.
    pub caution: String,
}

/// A published range of conductivity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ConductivityRange {
    /// Its lower end.
    pub least: Conductivity,
    /// Its upper end.
    pub most: Conductivity,
}

impl ConductivityRange {
    /// The geometric mean of its ends.
    pub fn typical(self) -> Conductivity {
        Conductivity::from_si((self.least.si() * self.most.si()).sqrt())
    }
}

/// A published range of a share of the volume, 0 to 1.
#[derive(Clone, Copy, Debug, PartialEq, Deserialize)]
pub struct ShareRange {
    /// Its lower end.
    pub least: f64,
    /// Its upper end.
    pub most: f64,
}

/// A file of `aquifers/`.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct MaterialFile {
    name: String,
    conductivity: WrittenRange,
    porosity: Option<ShareRange>,
    specific_yield: Option<ShareRange>,
    source: String,
    porosity_source: Option<String>,
    caution: String,
}

/// A range in the units in which it was published.
#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct WrittenRange {
    least: String,
    most: String,
}

/// The materials, in the order in which they are listed.
pub fn materials() -> &'static [Material] {
    static MATERIALS: LazyLock<Vec<Material>> = LazyLock::new(|| {
        // A test holds that every file is sound.
        let read = |(key, text): &(&str, &str)| read(key, text).ok();
        FILES.iter().filter_map(read).collect()
    });
    &MATERIALS
}

fn read(key: &str, text: &str) -> Result<Material, String> {
    let file: MaterialFile = toml::from_str(text).map_err(|error| format!("{key}: {error}"))?;
    let conductivity = |text: &str| {
        units::parse(text, Dimension::Conductivity)
            .map(Conductivity::from_si)
            .map_err(|error| format!("{key}: {text}: {error}"))
    };
    Ok(Material {
        key: key.to_owned(),
        name: file.name,
        conductivity: ConductivityRange {
            least: conductivity(&file.conductivity.least)?,
            most: conductivity(&file.conductivity.most)?,
        },
        porosity: file.porosity,
        specific_yield: file.specific_yield,
        source: file.source,
        porosity_source: file.porosity_source,
        caution: file.caution,
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_material_file_is_sound_and_every_range_runs_upward() {
        for (key, text) in FILES {
            let material = read(key, text).unwrap();
            assert!(
                material.conductivity.least < material.conductivity.most,
                "{key}"
            );
            for range in [material.porosity, material.specific_yield]
                .into_iter()
                .flatten()
            {
                assert!(0.0 <= range.least && range.least < range.most && range.most < 1.0);
            }
        }
        assert_eq!(materials().len(), FILES.len());
    }

    #[test]
    fn every_file_of_the_folder_is_built_in() {
        let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/aquifers");
        let mut keys: Vec<_> = std::fs::read_dir(folder)
            .unwrap()
            .map(|entry| {
                entry
                    .unwrap()
                    .path()
                    .file_stem()
                    .unwrap()
                    .to_str()
                    .unwrap()
                    .to_owned()
            })
            .collect();
        keys.sort();
        let mut listed = FILES.map(|(key, _)| key);
        listed.sort();
        assert_eq!(keys, listed);
    }
}
