//! The files of a built page, by name.

use std::fs;
use std::path::{Path, PathBuf};

use anyhow::{Context, Result};

/// All files below a folder, sorted by name; names are relative and use `/`.
///
/// # Errors
/// When a folder cannot be read.
pub fn below(folder: &Path) -> Result<Vec<(String, PathBuf)>> {
    let mut found = Vec::new();
    let mut folders = vec![folder.to_path_buf()];
    while let Some(next) = folders.pop() {
        for entry in fs::read_dir(&next).with_context(|| format!("{} cannot be read", next.display()))? {
            let path = entry?.path();
            if path.is_dir() {
                folders.push(path);
            } else {
                let relative = path.strip_prefix(folder)?.components();
                let name: Vec<_> =
                    relative.map(|part| part.as_os_str().to_string_lossy().into_owned()).collect();
                found.push((name.join("/"), path));
            }
        }
    }
    found.sort();
    Ok(found)
}
