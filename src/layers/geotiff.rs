//! GeoTIFF: a grid of numbers that knows its place.
//!
//! One band of 32-bit floats in strips, each compressed on its own (deflate
//! after the floating-point predictor); NaN where there is no data, which the
//! tag GDAL_NODATA says too. A value stands for the cell around it
//! (PixelIsArea), so the corner given is that of the cell, not its centre.
//! Limits: what a TIFF holds, 4 GB.
//! Source: OGC 19-008r4, GeoTIFF 1.1; Adobe Photoshop TIFF Technical Note 3
//! (2005) for the predictor, from memory; the two GDAL tags are a convention.

use std::io::{Cursor, Write};

use flate2::Compression;
use flate2::write::ZlibEncoder;
use rayon::prelude::*;
use tiff::encoder::{DirectoryEncoder, TiffEncoder, TiffKindStandard};
use tiff::tags::Tag;

use super::LayerError;
use super::caution::CAUTION;
use crate::plan::crs::{Crs, GridSystem};

/// Rows compressed together.
const ROWS_A_STRIP: usize = 32;
/// GDAL_METADATA: a band's name and unit.
const GDAL_METADATA: Tag = Tag::Unknown(42112);
/// GeoKey value: see the citation or the other keys.
const USER_DEFINED: u16 = 32767;

/// What is written.
pub struct Picture<'a> {
    /// The system of its coordinates.
    pub crs: &'a Crs,
    /// Cells in a row.
    pub columns: usize,
    /// Row by row from the north-west; NaN where there is none.
    pub values: &'a [f32],
    /// The outer corner of the north-western cell, in the system's unit.
    pub corner: (f64, f64),
    /// The side of a cell, in the system's unit.
    pub cell: f64,
    /// What the values are, in a word of plain ASCII.
    pub name: &'a str,
    /// Their unit, in plain ASCII.
    pub unit: &'a str,
}

type Directory<'a, 'b> = DirectoryEncoder<'a, &'b mut Cursor<Vec<u8>>, TiffKindStandard>;

/// The picture as a file.
///
/// # Errors
/// [`LayerError::Raster`] where it is too large for a TIFF.
pub fn file(picture: &Picture<'_>) -> Result<Vec<u8>, LayerError> {
    let columns = picture.columns.max(1);
    let strips: Vec<Vec<u8>> = picture
        .values
        .par_chunks(columns * ROWS_A_STRIP)
        .map(|strip| compressed(strip, columns))
        .collect::<Result<_, _>>()
        .map_err(|error| LayerError::Raster(error.to_string()))?;
    write(picture, &strips).map_err(|error| LayerError::Raster(error.to_string()))
}

/// Puts strips and tags together.
fn write(picture: &Picture<'_>, strips: &[Vec<u8>]) -> tiff::TiffResult<Vec<u8>> {
    let mut file = Cursor::new(Vec::new());
    let mut encoder = TiffEncoder::new(&mut file)?;
    let mut directory = encoder.image_directory()?;
    let (mut offsets, mut lengths) = (Vec::new(), Vec::new());
    for strip in strips {
        offsets.push(u32::try_from(directory.write_data(strip.as_slice())?)?);
        lengths.push(u32::try_from(strip.len())?);
    }
    image_tags(&mut directory, picture)?;
    directory.write_tag(Tag::StripOffsets, offsets.as_slice())?;
    directory.write_tag(Tag::StripByteCounts, lengths.as_slice())?;
    place_tags(&mut directory, picture)?;
    directory.finish()?;
    Ok(file.into_inner())
}

/// What kind of picture it is.
fn image_tags(directory: &mut Directory<'_, '_>, picture: &Picture<'_>) -> tiff::TiffResult<()> {
    const DEFLATE: u16 = 8;
    const BLACK_IS_ZERO: u16 = 1;
    const FLOATING_POINT: u16 = 3;
    let columns = picture.columns.max(1);
    let rows = picture.values.len() / columns;
    directory.write_tag(Tag::ImageWidth, u32::try_from(columns)?)?;
    directory.write_tag(Tag::ImageLength, u32::try_from(rows)?)?;
    directory.write_tag(Tag::BitsPerSample, 32_u16)?;
    directory.write_tag(Tag::Compression, DEFLATE)?;
    directory.write_tag(Tag::PhotometricInterpretation, BLACK_IS_ZERO)?;
    directory.write_tag(Tag::ImageDescription, CAUTION)?;
    directory.write_tag(Tag::SamplesPerPixel, 1_u16)?;
    directory.write_tag(Tag::RowsPerStrip, u32::try_from(ROWS_A_STRIP)?)?;
    directory.write_tag(Tag::Predictor, FLOATING_POINT)?;
    directory.write_tag(Tag::SampleFormat, FLOATING_POINT)?;
    directory.write_tag(Tag::GdalNodata, "nan")?;
    let (name, unit) = (picture.name, picture.unit);
    let metadata = format!(
        "<GDALMetadata>\n  \
         <Item name=\"DESCRIPTION\" sample=\"0\" role=\"description\">{name}</Item>\n  \
         <Item name=\"UNITTYPE\" sample=\"0\" role=\"unittype\">{unit}</Item>\n\
         </GDALMetadata>\n"
    );
    directory.write_tag(GDAL_METADATA, metadata.as_str())
}

/// Where it is.
fn place_tags(directory: &mut Directory<'_, '_>, picture: &Picture<'_>) -> tiff::TiffResult<()> {
    let (x, y) = picture.corner;
    let keys = GeoKeys::of(picture.crs);
    directory.write_tag(
        Tag::ModelPixelScaleTag,
        [picture.cell, picture.cell, 0.0].as_slice(),
    )?;
    directory.write_tag(Tag::ModelTiepointTag, [0.0, 0.0, 0.0, x, y, 0.0].as_slice())?;
    directory.write_tag(Tag::GeoKeyDirectoryTag, keys.directory().as_slice())?;
    if !keys.doubles.is_empty() {
        directory.write_tag(Tag::GeoDoubleParamsTag, keys.doubles.as_slice())?;
    }
    directory.write_tag(Tag::GeoAsciiParamsTag, keys.text.as_str())
}

/// The keys that say which coordinate system it is.
#[derive(Default)]
struct GeoKeys {
    /// Key, tag of its value (0: here), count, value or place in the tag.
    entries: Vec<[u16; 4]>,
    doubles: Vec<f64>,
    text: String,
}

impl GeoKeys {
    /// The keys of a grid, in rising order as the standard asks.
    fn of(crs: &Crs) -> Self {
        const PROJECTED: u16 = 1;
        const PIXEL_IS_AREA: u16 = 1;
        let mut keys = Self::default();
        keys.short(1024, PROJECTED);
        keys.short(1025, PIXEL_IS_AREA);
        keys.text(1026, &crs.name());
        match crs.system() {
            GridSystem::Epsg(code) => {
                // The list of checked systems holds 16-bit codes alone.
                keys.short(3072, u16::try_from(code).unwrap_or(USER_DEFINED));
            }
            GridSystem::Local {
                longitude_deg,
                latitude_deg,
            } => keys.transverse_mercator(&crs.name(), longitude_deg, latitude_deg),
        }
        keys
    }

    /// Transverse Mercator on WGS 84, in metres, scale 1, nothing false.
    fn transverse_mercator(&mut self, name: &str, longitude_deg: f64, latitude_deg: f64) {
        const WGS_84: u16 = 4326;
        const DEGREE: u16 = 9102;
        const TRANSVERSE_MERCATOR: u16 = 1;
        const METRE: u16 = 9001;
        self.short(2048, WGS_84);
        self.short(2054, DEGREE);
        self.short(3072, USER_DEFINED);
        self.text(3073, name);
        self.short(3074, USER_DEFINED);
        self.short(3075, TRANSVERSE_MERCATOR);
        self.short(3076, METRE);
        self.double(3080, longitude_deg);
        self.double(3081, latitude_deg);
        self.double(3082, 0.0);
        self.double(3083, 0.0);
        self.double(3092, 1.0);
    }

    fn short(&mut self, key: u16, value: u16) {
        self.entries.push([key, 0, 1, value]);
    }

    fn double(&mut self, key: u16, value: f64) {
        let place = self.doubles.len() as u16;
        self.entries.push([key, 34736, 1, place]);
        self.doubles.push(value);
    }

    /// A text of the tag, ended by a bar; what is not plain ASCII, which the
    /// tag cannot hold, becomes a question mark.
    fn text(&mut self, key: u16, value: &str) {
        let plain = |letter: char| match letter {
            ' '..='{' | '}' | '~' => letter,
            _ => '?',
        };
        let start = self.text.len() as u16;
        self.text.extend(value.chars().map(plain).chain(['|']));
        let count = self.text.len() as u16 - start;
        self.entries.push([key, 34737, count, start]);
    }

    /// The tag GeoKeyDirectory: its header, then four numbers a key.
    fn directory(&self) -> Vec<u16> {
        let header = [1, 1, 1, self.entries.len() as u16];
        header
            .into_iter()
            .chain(self.entries.iter().copied().flatten())
            .collect()
    }
}

/// Rows of numbers, predicted and deflated.
fn compressed(strip: &[f32], columns: usize) -> std::io::Result<Vec<u8>> {
    let mut encoder = ZlibEncoder::new(Vec::new(), Compression::default());
    for row in strip.chunks(columns) {
        encoder.write_all(&predicted(row))?;
    }
    encoder.finish()
}

/// A row after the floating-point predictor: all first (most significant)
/// bytes, then all second ones and so on, each byte less the one before it.
fn predicted(row: &[f32]) -> Vec<u8> {
    let mut before = 0_u8;
    (0..4)
        .flat_map(|place| {
            row.iter()
                .map(move |value| (value.to_bits() >> (24 - 8 * place)) as u8)
        })
        .map(|byte| {
            let difference = byte.wrapping_sub(before);
            before = byte;
            difference
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 1.0 is 3F 80 00 00 and 2.0 is 40 00 00 00 in IEEE 754.
    #[test]
    fn a_row_is_sorted_by_the_place_of_its_bytes_and_made_differences() {
        let planes = [0x3f_u8, 0x40, 0x80, 0x00, 0x00, 0x00, 0x00, 0x00];
        let mut before = 0;
        let expected = planes.map(|byte| {
            let difference = byte.wrapping_sub(before);
            before = byte;
            difference
        });
        assert_eq!(predicted(&[1.0, 2.0]), expected);
    }
}
