//! Copies of the built page that a test may change.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result, ensure};
use xtask::files;

use crate::surroundings;

/// Copies the page into a folder.
///
/// # Errors
/// When the page is not there, or the folder cannot be written to.
pub fn page_to(folder: &Path) -> Result<()> {
    for (name, file) in files::below(&surroundings::page()?)? {
        let target = folder.join(name);
        fs::create_dir_all(target.parent().context("a folder")?)?;
        fs::copy(file, target)?;
    }
    Ok(())
}

/// Makes another version of a copy: its document says `data-build`, and its service worker has another version.
///
/// # Errors
/// When the copy is not as it should be.
pub fn make_version(folder: &Path, build: u32) -> Result<()> {
    let change = |name: &str, from: &str, to: &str| -> Result<()> {
        let text = fs::read_to_string(folder.join(name))?;
        ensure!(text.contains(from), "{name} holds no `{from}`");
        Ok(fs::write(folder.join(name), text.replacen(from, to, 1))?)
    };
    change("index.html", "<html lang=\"en\"", &format!("<html data-build=\"{build}\" lang=\"en\""))?;
    change("sw.js", "const VERSION = \"", &format!("const VERSION = \"{build}-"))
}
