//! Where things are: the checkout, and the cache of tools outside it.

use std::env;
use std::fs;
use std::path::{Path, PathBuf};

use anyhow::{Context, Result};

/// The root of the checkout: cargo says where this package lies, Trunk starts its hook in the root, and failing both
/// it is where this program was compiled.
pub(crate) fn root() -> PathBuf {
    let packages =
        [env::var_os("CARGO_MANIFEST_DIR").map(PathBuf::from), Some(env!("CARGO_MANIFEST_DIR").into())];
    let [run, compiled] = packages.map(|package| Some(package?.parent()?.to_path_buf()));
    let here = env::current_dir().ok();
    [run, here, compiled]
        .into_iter()
        .flatten()
        .find(|root| root.join("Trunk.toml").is_file())
        .unwrap_or_default()
}

/// The built page.
pub(crate) fn dist() -> PathBuf {
    root().join("dist")
}

/// The folder of tools: outside the checkout, so that a fresh clone finds them again.
pub(crate) fn cache() -> Result<PathBuf> {
    if let Some(folder) = set("LAMPLADDER_CACHE") {
        return Ok(folder.into());
    }
    if let Some(folder) = set("XDG_CACHE_HOME") {
        return Ok(Path::new(&folder).join("lampladder"));
    }
    let home =
        set("HOME").or_else(|| set("USERPROFILE")).context("neither LAMPLADDER_CACHE nor HOME is set")?;
    Ok(Path::new(&home).join(".cache").join("lampladder"))
}

/// The names, without their suffix, of the Rust files in a folder of the checkout.
pub(crate) fn rust_files(folder: &str) -> Result<Vec<String>> {
    let folder = root().join(folder);
    let mut names = Vec::new();
    for entry in fs::read_dir(&folder).with_context(|| format!("{} cannot be read", folder.display()))? {
        let path = entry?.path();
        if path.extension().is_some_and(|suffix| suffix == "rs") {
            names.extend(path.file_stem().map(|stem| stem.to_string_lossy().into_owned()));
        }
    }
    names.sort();
    Ok(names)
}

/// The first program of this name on PATH.
pub(crate) fn on_path(program: &str) -> Option<PathBuf> {
    let path = env::var_os("PATH")?;
    env::split_paths(&path).map(|folder| folder.join(program)).find(|file| file.is_file())
}

/// An environment variable that is set to something.
pub(crate) fn set(name: &str) -> Option<String> {
    env::var(name).ok().filter(|value| !value.is_empty())
}
