//! What `cargo xtask test e2e` tells the tests about where things are.

use std::env;
use std::path::PathBuf;

use anyhow::{Context, Result, ensure};
use xtask::site::Site;

/// Where the page is put in the tests: below the root, since that is where many static hosts have room.
pub const PREFIX: &str = "/some/where/";

fn given(name: &str) -> Result<PathBuf> {
    env::var_os(name)
        .filter(|value| !value.is_empty())
        .map(PathBuf::from)
        .with_context(|| format!("{name} is not set: run these tests by `cargo xtask test e2e`"))
}

/// The folder of the release page.
///
/// # Errors
/// When the tests were started without xtask, or the folder holds no page.
pub fn page() -> Result<PathBuf> {
    let folder = given("LAMPLADDER_DIST")?;
    ensure!(folder.join("index.html").is_file(), "{} holds no page", folder.display());
    Ok(folder)
}

/// A server of the release page, on a free port, under [`PREFIX`].
///
/// # Errors
/// As [`page`], or when no port is to be had.
pub fn site() -> Result<Site> {
    Ok(Site::start(&page()?, PREFIX, 0)?)
}

/// Chromium and its driver.
pub(crate) fn browser() -> Result<(PathBuf, PathBuf)> {
    Ok((given("CHROME")?, given("CHROMEDRIVER")?))
}

/// The text of the accessibility checker.
pub(crate) fn axe() -> Result<String> {
    let file = given("LAMPLADDER_AXE")?;
    std::fs::read_to_string(&file).with_context(|| format!("{} cannot be read", file.display()))
}

/// Where to put pictures of the screens, when somebody wants to look at them.
pub(crate) fn pictures() -> Option<PathBuf> {
    given("LAMPLADDER_SHOTS").ok()
}
