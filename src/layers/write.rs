//! Writes all files of a run at once, or none.
//!
//! Everything is written and flushed to a folder beside the target, which
//! then takes the target's place in one step of the file system. Until that
//! step the last run's files stand untouched, whatever stops the program.
//! Where the target holds files that are not a run's, or the file system
//! cannot exchange folders, the finished files are moved in one by one; each
//! then replaces its forerunner in one step, and nothing else is touched.

use std::ffi::OsStr;
use std::fs::{self, File};
use std::io::{self, Write};
use std::path::{Path, PathBuf};

/// A file of a run, not yet written.
pub struct OutputFile {
    /// Its name within the output folder.
    pub name: &'static str,
    /// Its content.
    pub bytes: Vec<u8>,
}

/// Why the files of a run could not be written.
#[derive(Debug, thiserror::Error)]
pub enum WriteError {
    /// The target is there, but no folder.
    #[error("{} is a file, not a folder; choose another --out", .0.display())]
    NotAFolder(PathBuf),
    /// The system refused.
    #[error("cannot {what} {}: {reason}", .path.display())]
    System {
        /// What was tried.
        what: &'static str,
        /// On which path.
        path: PathBuf,
        /// What the system says.
        reason: io::Error,
    },
}

/// Writes the files into a folder, which is made where it is not there.
///
/// # Errors
/// [`WriteError`]; the folder is then as it was, unless the fault came while
/// finished files were moved in one by one.
pub fn write_all(folder: &Path, files: &[OutputFile]) -> Result<(), WriteError> {
    let exists = folder.exists();
    if exists && !folder.is_dir() {
        return Err(WriteError::NotAFolder(folder.to_owned()));
    }
    // A link to a folder: what it leads to is replaced, not the link.
    let target = if exists {
        fs::canonicalize(folder).map_err(failed("open", folder))?
    } else {
        std::path::absolute(folder).map_err(failed("find", folder))?
    };
    let (Some(parent), Some(name)) = (target.parent(), target.file_name()) else {
        return write_into(&target, &target, files);
    };
    fs::create_dir_all(parent).map_err(failed("make", parent))?;
    if !exists || (only_ours(&target, files) && !is_in_use(&target)) {
        let staged = stage(parent, name, files)?;
        return take_place(staged, &target, exists);
    }
    write_into(&target, &target, files)
}

/// Writes the files into a new folder in `parent`.
fn stage(
    parent: &Path,
    name: &OsStr,
    files: &[OutputFile],
) -> Result<tempfile::TempDir, WriteError> {
    let mut prefix = std::ffi::OsString::from(".");
    prefix.push(name);
    prefix.push("-");
    let mut builder = tempfile::Builder::new();
    builder.prefix(&prefix);
    #[cfg(unix)]
    builder.permissions(std::os::unix::fs::PermissionsExt::from_mode(0o777));
    let staged = builder
        .tempdir_in(parent)
        .map_err(failed("make a folder in", parent))?;
    for file in files {
        write_file(&staged.path().join(file.name), &file.bytes)?;
    }
    flush_folder(staged.path());
    Ok(staged)
}

/// Puts a finished folder in the target's place.
fn take_place(staged: tempfile::TempDir, target: &Path, exists: bool) -> Result<(), WriteError> {
    if !exists {
        fs::rename(staged.path(), target).map_err(failed("make", target))?;
        // Its path is gone; there is nothing left to remove.
        let _ = staged.keep();
    } else if exchange(staged.path(), target).is_ok() {
        // What is staged now are the last run's files.
        staged
            .close()
            .map_err(failed("remove the last files of", target))?;
    } else {
        move_files(staged.path(), target)?;
    }
    if let Some(parent) = target.parent() {
        flush_folder(parent);
    }
    Ok(())
}

/// Writes files to hidden names in a folder, then moves each into place.
fn write_into(staging: &Path, target: &Path, files: &[OutputFile]) -> Result<(), WriteError> {
    let staged = tempfile::Builder::new()
        .prefix(".mirrorwell-")
        .tempdir_in(staging)
        .map_err(failed("write in", staging))?;
    for file in files {
        write_file(&staged.path().join(file.name), &file.bytes)?;
    }
    move_files(staged.path(), target)
}

/// Moves every file of one folder into another, in the order of names.
fn move_files(from: &Path, to: &Path) -> Result<(), WriteError> {
    let entries = fs::read_dir(from).map_err(failed("read", from))?;
    let mut paths: Vec<PathBuf> = entries.flatten().map(|entry| entry.path()).collect();
    paths.sort();
    for path in paths {
        if let Some(name) = path.file_name() {
            let place = to.join(name);
            fs::rename(&path, &place).map_err(failed("replace", &place))?;
        }
    }
    flush_folder(to);
    Ok(())
}

/// Writes one file and waits until it is on the disk.
fn write_file(path: &Path, bytes: &[u8]) -> Result<(), WriteError> {
    let write = || -> io::Result<()> {
        let mut file = File::create_new(path)?;
        file.write_all(bytes)?;
        file.sync_all()
    };
    write().map_err(failed("write", path))
}

/// Waits until a folder's entries are on the disk, where the system can.
fn flush_folder(folder: &Path) {
    // Not every file system lets a folder be flushed; the files are.
    if let Ok(folder) = File::open(folder) {
        let _ = folder.sync_all();
    }
}

/// Whether a folder holds nothing but files of a run.
fn only_ours(folder: &Path, files: &[OutputFile]) -> bool {
    let Ok(entries) = fs::read_dir(folder) else {
        return false;
    };
    entries.into_iter().all(|entry| {
        entry.is_ok_and(|entry| {
            let name = entry.file_name();
            let is_file = entry.file_type().is_ok_and(|kind| kind.is_file());
            is_file && files.iter().any(|file| OsStr::new(file.name) == name)
        })
    })
}

/// Whether the program, or whoever started it, stands in a folder: it must
/// then stay the same folder.
fn is_in_use(folder: &Path) -> bool {
    std::env::current_dir()
        .and_then(fs::canonicalize)
        .is_ok_and(|here| here.starts_with(folder))
}

/// Exchanges two folders in one step.
#[cfg(target_os = "linux")]
fn exchange(a: &Path, b: &Path) -> io::Result<()> {
    use rustix::fs::{CWD, RenameFlags, renameat_with};
    let permissions = fs::metadata(b)?.permissions();
    fs::set_permissions(a, permissions)?;
    Ok(renameat_with(CWD, a, CWD, b, RenameFlags::EXCHANGE)?)
}

/// Other systems have no such step.
#[cfg(not(target_os = "linux"))]
fn exchange(_: &Path, _: &Path) -> io::Result<()> {
    Err(io::ErrorKind::Unsupported.into())
}

/// Turns a system's refusal into an error that says what was tried.
fn failed(what: &'static str, path: &Path) -> impl FnOnce(io::Error) -> WriteError {
    let path = path.to_owned();
    move |reason| WriteError::System { what, path, reason }
}
