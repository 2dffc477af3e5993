//! Joins the edges, carries their free ends on, finds the aquifers that hold
//! the wells, and names their shapes.
//!
//! Method: everything is stretched to an isotropic aquifer first (`frame`).
//! Line ends within 1 mm are joined (`scene`), free ends carried on
//! (`extend`), all strokes cut at their crossings (`arrangement`), and the
//! face of every well found (`faces`). The sides of each face (`boundary`) are
//! compared with the shapes that have a closed form (`recognise`, `named`),
//! their pieces and stages set (`pieces`, `stages`), and wells and neighbours put in place (`placement`).
//! Every other outline with a river, or closed by barriers, becomes a general
//! boundary (`assemble`, `general`). `region` and `clip` answer where an
//! outline lies; of a general one `finder` and `window` do.
//! Limits: at most 4000 straight pieces; sides count as parallel or square to
//! within 1 mm over the plan's extent; circles are not stretched; open outlines
//! of barriers alone without images, and edges with the aquifer on both banks
//! (`slits`), are refused by name.

mod arrangement;
mod assemble;
mod banks;
mod boundary;
mod chords;
mod circle;
mod clip;
mod clogged;
mod cutting;
mod drain;
mod drawn;
mod error;
mod examine;
mod extend;
mod faces;
mod finder;
mod frame;
mod general;
mod heading;
mod infinity;
mod inside;
mod join;
mod limits;
mod lines;
mod named;
mod names;
mod nearest;
mod pieces;
mod placement;
mod reaches;
mod recognise;
mod refuse;
mod region;
mod scene;
mod shape;
mod slits;
mod stages;
mod stroke;
mod walk;
mod window;
mod words;

pub use error::{Named, OutlineError};
pub use frame::{Frame, Stretch};
pub use general::{Boundary, BoundaryChain, BoundarySide, Condition, Curve, Opening};
pub use shape::{Axis, Kind, Piece, Shape, argument_in_wedge};

use std::sync::Arc;

use crate::site::{Refusal, Site};

/// One aquifer: the part of the plane that holds some of the wells.
#[derive(Clone, Debug)]
pub struct Outline {
    /// Site to canonical coordinates.
    pub frame: Frame,
    /// The named shape, in the canonical frame.
    pub shape: Shape,
    /// For each canonical side the pieces that make it, in order along it and
    /// without gaps.
    pub sides: Vec<Vec<Piece>>,
    /// The wells it holds, by index in `Site::wells`.
    pub wells: Vec<usize>,
    /// The neighbours it holds, by index in `Site::neighbours`.
    pub neighbours: Vec<usize>,
    /// The sides of a general outline; none where the shape has a closed form.
    pub boundary: Option<Arc<Boundary>>,
    /// Finds places among them.
    finder: Option<Arc<finder::Finder>>,
}

/// Which outlines are recognised by name.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Naming {
    /// All that have a closed form.
    ClosedForms,
    /// Those without a river, and those with an influence radius.
    NoRivers,
}

/// The aquifers that hold the wells, in the order of their first wells.
///
/// # Errors
/// Every fault of the plan's geometry in one go: see `OutlineError`.
pub fn find(site: &Site) -> Result<Vec<Outline>, Vec<Refusal>> {
    found(site, Naming::ClosedForms)
}

/// As `find`, but every outline with a river, where the plan gives no influence
/// radius, is a general one: so that closed forms and the general solver can
/// be compared.
///
/// # Errors
/// As `find`.
pub fn find_unnamed(site: &Site) -> Result<Vec<Outline>, Vec<Refusal>> {
    found(site, Naming::NoRivers)
}

fn found(site: &Site, naming: Naming) -> Result<Vec<Outline>, Vec<Refusal>> {
    let found = faultless(site, naming);
    found.map_err(|errors| errors.into_iter().map(Refusal::from).collect())
}

/// The aquifers, or everything that is wrong.
fn faultless(site: &Site, naming: Naming) -> Result<Vec<Outline>, Vec<OutlineError>> {
    let wild = limits::wild_numbers(site);
    let mut errors = limits::lacks(site);
    if !wild.is_empty() {
        errors.extend(wild);
        return Err(errors);
    }
    let outlines = match outlines(site, naming) {
        Ok(outlines) => outlines,
        Err(others) => {
            errors.extend(others);
            Vec::new()
        }
    };
    if errors.is_empty() {
        Ok(outlines)
    } else {
        Err(errors)
    }
}

/// The outlines of a site whose numbers are finite.
fn outlines(site: &Site, naming: Naming) -> Result<Vec<Outline>, Vec<OutlineError>> {
    let (scene, mut faults) = scene::Scene::read(site);
    faults.extend(drawn::faults(site, &scene.strokes));
    if !faults.is_empty() {
        return Err(faults);
    }
    let strokes = extend::strokes(&scene);
    let arrangement = arrangement::Arrangement::of(&scene, &strokes);
    let faces = faces::Faces::of(site, &scene, arrangement);
    placement::outlines(site, &scene, &strokes, &faces, naming)
}
