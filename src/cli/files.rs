//! Reading and writing files: sizes are limited, a table never comes from outside the case's folder, and a file is written
//! whole or not at all.

use super::exit::Stop;
use crate::input::{Source, decode};
use std::io::Write;
use std::path::{Path, PathBuf};

/// Largest file that is read.
const MOST_BYTES: u64 = 4 * 1024 * 1024;
/// Most files of a folder of correlations.
const MOST_FILES: usize = 200;

fn refused(path: &Path, why: impl Into<String>) -> Stop {
    Stop::File { path: path.to_owned(), why: why.into() }
}

/// A text file, UTF-8, of limited size.
pub fn read_text(path: &Path) -> Result<String, Stop> {
    let meta = std::fs::metadata(path).map_err(|e| refused(path, format!("cannot be read: {e}")))?;
    if meta.is_dir() {
        return Err(refused(path, "is a folder; name a file"));
    }
    if meta.len() > MOST_BYTES {
        return Err(refused(path, format!("is larger than {} MiB, the most that is read", MOST_BYTES >> 20)));
    }
    let bytes = std::fs::read(path).map_err(|e| refused(path, format!("cannot be read: {e}")))?;
    decode(&name_of(path), &bytes).map_err(Stop::Input)
}

/// The table beside a case: its name is a plain file name already, and a link may not lead out of the folder either.
pub fn read_beside(case: &Path, name: &str) -> Result<String, Stop> {
    let folder = folder_of(case);
    let path = folder.join(name);
    let real = |p: &Path| {
        p.canonicalize().map_err(|e| refused(p, format!("cannot be read: {e}; it is looked for beside the case")))
    };
    if real(&path)?.parent() != Some(real(&folder)?.as_path()) {
        return Err(refused(&path, "leads out of the case's folder; put the table beside the case"));
    }
    read_text(&path)
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
    paths.iter().map(|path| read_text(path).map(|text| Source { name: name_of(path), text })).collect()
}

/// Writes a file whole or not at all: a temporary file in the same folder takes its place only when complete.
pub fn write_whole(path: &Path, bytes: &[u8]) -> Result<(), Stop> {
    let failed = |e: std::io::Error| refused(path, format!("cannot be written: {e}"));
    let mut temporary = tempfile::NamedTempFile::new_in(folder_of(path)).map_err(failed)?;
    temporary.write_all(bytes).and_then(|()| temporary.flush()).map_err(failed)?;
    temporary.persist(path).map_err(|e| failed(e.error))?;
    Ok(())
}

/// Writes a new file; one that exists is left alone.
pub fn write_new(path: &Path, bytes: &[u8]) -> Result<(), Stop> {
    if path.exists() {
        return Err(refused(path, "exists already and is not overwritten; choose another folder"));
    }
    write_whole(path, bytes)
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
