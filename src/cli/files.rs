//! Reading and writing files: sizes are limited, a table never comes from outside the case's folder, and a file is written
//! whole or not at all.

use super::exit::Stop;
use crate::input::{Source, decode};
use std::io::{Read, Write};
use std::path::{Path, PathBuf};

/// Largest case, and largest file of correlations.
pub const MOST_CASE_BYTES: u64 = 1024 * 1024;
/// Largest loads table.
pub const MOST_TABLE_BYTES: u64 = 4 * 1024 * 1024;
/// Most files of a folder of correlations.
const MOST_FILES: usize = 200;

fn refused(path: &Path, why: impl Into<String>) -> Stop {
    Stop::File { path: path.to_owned(), why: why.into() }
}

/// A text file, UTF-8, of limited size.
pub fn read_text(path: &Path, most_bytes: u64) -> Result<String, Stop> {
    decode(&name_of(path), &read_bytes(path, most_bytes)?).map_err(Stop::Input)
}

/// The bytes of a regular file. Devices and pipes have no size and may never end, and a file may grow while it is read: so both
/// its kind is asked for and the bytes are counted.
fn read_bytes(path: &Path, most_bytes: u64) -> Result<Vec<u8>, Stop> {
    let unreadable = |e: std::io::Error| refused(path, format!("cannot be read: {e}"));
    let meta = std::fs::metadata(path).map_err(unreadable)?;
    if meta.is_dir() {
        return Err(refused(path, "is a folder; name a file"));
    }
    if !meta.is_file() {
        return Err(refused(path, "is a device or a pipe; name an ordinary file"));
    }
    let mut bytes = Vec::new();
    open(path).and_then(|file| file.take(most_bytes + 1).read_to_end(&mut bytes)).map_err(unreadable)?;
    if bytes.len() as u64 > most_bytes {
        return Err(refused(path, format!("is larger than {} MiB, the most that is read", most_bytes >> 20)));
    }
    Ok(bytes)
}

#[expect(clippy::disallowed_types, reason = "the one place where a file is opened to be read")]
fn open(path: &Path) -> std::io::Result<std::fs::File> {
    std::fs::File::open(path)
}

/// Where the table of a case is.
pub fn beside(case: &Path, name: &str) -> PathBuf {
    folder_of(case).join(name)
}

/// The table beside a case: its name is a plain file name already, and a link may not lead out of the folder either.
pub fn read_beside(case: &Path, name: &str) -> Result<String, Stop> {
    let path = beside(case, name);
    let real = |p: &Path| {
        p.canonicalize().map_err(|e| refused(p, format!("cannot be read: {e}; it is looked for beside the case")))
    };
    let table = real(&path)?;
    if table.parent() != Some(real(&folder_of(case))?.as_path()) {
        return Err(refused(&path, "leads out of the case's folder; put the table beside the case"));
    }
    // The place that was judged is the one that is read; messages keep the name that the case uses.
    decode(&name_of(&path), &read_bytes(&table, MOST_TABLE_BYTES)?).map_err(Stop::Input)
}

/// Name and text of every correlation file (.toml) of a folder, sorted by name.
pub fn read_correlations(dir: &Path) -> Result<Vec<Source>, Stop> {
    let entries = std::fs::read_dir(dir).map_err(|e| refused(dir, format!("cannot be read: {e}")))?;
    let mut paths: Vec<PathBuf> = entries
        .filter_map(|entry| entry.ok().map(|e| e.path()))
        .filter(|path| path.extension().is_some_and(|e| e == "toml"))
        .collect();
    paths.sort();
    if paths.is_empty() {
        return Err(refused(dir, "holds no .toml file"));
    }
    if paths.len() > MOST_FILES {
        return Err(refused(dir, format!("holds more than {MOST_FILES} .toml files")));
    }
    paths.iter().map(|path| read_text(path, MOST_CASE_BYTES).map(|text| Source { name: name_of(path), text })).collect()
}

/// Files that are complete in temporary files beside their targets and not yet in their places. Dropped without
/// [`Staged::commit`], nothing remains of them.
#[derive(Default)]
pub struct Staged {
    files: Vec<(PathBuf, tempfile::NamedTempFile)>,
}

impl Staged {
    /// Takes one more file. Whatever can fail while writing fails here, before any target is touched.
    pub fn add(&mut self, path: &Path, bytes: &[u8]) -> Result<(), Stop> {
        if self.files.iter().any(|(other, _)| same_file(other, path)) {
            return Err(refused(path, "is named twice; give each output a file of its own"));
        }
        let existing = std::fs::metadata(path).ok();
        if existing.as_ref().is_some_and(|meta| !meta.is_file()) {
            return Err(refused(path, "is not an ordinary file and cannot be replaced; name another file"));
        }
        let failed = |e: std::io::Error| refused(path, format!("cannot be written: {e}"));
        // The message speaks of the folder that the user named, not of the temporary file in it.
        let mut temporary = temporary_in(&folder_of(path)).map_err(|e| match e.kind() {
            std::io::ErrorKind::NotFound => refused(path, "cannot be written: its folder does not exist"),
            std::io::ErrorKind::PermissionDenied => {
                refused(path, "cannot be written: its folder does not take new files")
            }
            _ => failed(e),
        })?;
        temporary.write_all(bytes).and_then(|()| temporary.flush()).map_err(failed)?;
        if let Some(meta) = existing {
            std::fs::set_permissions(temporary.path(), meta.permissions()).map_err(failed)?;
        }
        self.files.push((path.to_owned(), temporary));
        Ok(())
    }

    /// Puts every file in its place, over what was there.
    pub fn commit(self) -> Result<(), Stop> {
        self.files.into_iter().try_for_each(|(path, temporary)| {
            temporary.persist(&path).map_err(|e| refused(&path, format!("cannot be written: {}", e.error)))?;
            Ok(())
        })
    }

    /// Puts every file in its place if none of them exists; otherwise none is written.
    pub fn commit_new(self) -> Result<(), Stop> {
        let exists = |path: &Path| refused(path, "exists already and is not overwritten; choose another folder");
        if let Some((path, _)) = self.files.iter().find(|(path, _)| path.symlink_metadata().is_ok()) {
            return Err(exists(path));
        }
        self.files.into_iter().try_for_each(|(path, temporary)| {
            // Asked again by the file system itself: another run may have been quicker.
            temporary.persist_noclobber(&path).map_err(|e| match e.error.kind() {
                std::io::ErrorKind::AlreadyExists => exists(&path),
                _ => refused(&path, format!("cannot be written: {}", e.error)),
            })?;
            Ok(())
        })
    }
}

/// A temporary file that others may read as they may any new file; without asking, only its owner could.
fn temporary_in(folder: &Path) -> std::io::Result<tempfile::NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        // The process's mask takes away what it must.
        builder.permissions(std::fs::Permissions::from_mode(0o666));
    }
    builder.tempfile_in(folder)
}

/// Refuses an output that would replace an input.
pub fn spare(output: &Path, input: &Path, what: &str) -> Result<(), Stop> {
    if same_file(output, input) {
        return Err(refused(output, format!("is {what} itself and is not overwritten; name another file")));
    }
    Ok(())
}

/// True if two paths lead to one file, whether it exists or not.
fn same_file(a: &Path, b: &Path) -> bool {
    let real =
        |p: &Path| p.canonicalize().or_else(|_| folder_of(p).canonicalize().map(|folder| folder.join(name_of(p)))).ok();
    a == b || matches!((real(a), real(b)), (Some(a), Some(b)) if a == b)
}

/// Makes a folder with its parents.
pub fn make_folder(path: &Path) -> Result<(), Stop> {
    std::fs::create_dir_all(path).map_err(|e| refused(path, format!("cannot be made: {e}")))
}

fn folder_of(path: &Path) -> PathBuf {
    match path.parent() {
        Some(parent) if !parent.as_os_str().is_empty() => parent.to_owned(),
        _ => PathBuf::from("."),
    }
}

/// The last part of a path, for messages and reports.
pub fn name_of(path: &Path) -> String {
    path.file_name().map_or_else(|| path.display().to_string(), |name| name.to_string_lossy().into_owned())
}
