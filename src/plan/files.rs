//! Reads files no larger than a plan can be, and their text.

use std::fs::File;
use std::io::{self, Read};
use std::ops::Range;
use std::path::Path;

use super::fault::Fault;
use super::source::Place;

/// The largest plan or layer that is read, bytes.
pub(super) const LARGEST_FILE: u64 = 64 * 1024 * 1024;

/// Where the layers that a plan names come from.
pub(super) enum LayerStore<'l> {
    /// Files, relative to this folder.
    Folder(&'l Path),
    /// Built into a program: each its name and its text.
    BuiltIn(&'l [(&'l str, &'l str)]),
}

impl LayerStore<'_> {
    /// The bytes of the layer that a plan names.
    pub(super) fn load(&self, layer: &str) -> io::Result<Vec<u8>> {
        match self {
            Self::Folder(folder) => {
                let path = folder.join(layer);
                // Asked before it is opened: opening a pipe waits for a writer.
                let kind = std::fs::metadata(&path)?.file_type();
                if !kind.is_file() && !kind.is_dir() {
                    return Err(io::Error::other("it is a pipe or a device, not a file"));
                }
                read(&path)
            }
            Self::BuiltIn(layers) => {
                let found = layers.iter().find(|(name, _)| *name == layer);
                let text = found.map(|(_, text)| text.as_bytes().to_vec());
                text.ok_or_else(|| io::Error::other("it is not built in"))
            }
        }
    }

    /// The layer as a person finds it from where the program was started.
    pub(super) fn shown_path(&self, layer: &str) -> String {
        match self {
            Self::Folder(folder) if *folder != Path::new(".") => {
                folder.join(layer).display().to_string()
            }
            _ => layer.to_owned(),
        }
    }
}

/// The bytes of a file of at most 64 MB.
pub(super) fn read(path: &Path) -> io::Result<Vec<u8>> {
    let file = File::open(path)?;
    if file.metadata()?.is_dir() {
        return Err(io::Error::other("it is a folder, not a file"));
    }
    let mut bytes = Vec::new();
    file.take(LARGEST_FILE + 1).read_to_end(&mut bytes)?;
    if bytes.len() as u64 > LARGEST_FILE {
        return Err(io::Error::other("it is larger than 64 MB"));
    }
    Ok(bytes)
}

/// The text of bytes; where they are not UTF-8, what can be shown of it and
/// the range of the first bad byte in that.
pub(super) fn text_of(bytes: Vec<u8>) -> (String, Option<Range<usize>>) {
    match String::from_utf8(bytes) {
        Ok(text) => (text, None),
        Err(error) => {
            let bad = error.utf8_error().valid_up_to();
            let text = String::from_utf8_lossy(error.as_bytes()).into_owned();
            (
                text,
                Some(bad..bad + char::REPLACEMENT_CHARACTER.len_utf8()),
            )
        }
    }
}

pub(super) fn not_utf8(place: Place, name: String) -> Fault {
    let what = format!("{name} is not UTF-8 text");
    let help = "save the file with the encoding UTF-8";
    Fault::new(place, what, help).label("this byte is not UTF-8")
}
