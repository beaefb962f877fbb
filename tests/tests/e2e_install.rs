//! The page on a home screen, and the page among others on its host.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::folder::Folder;
use lampladder_tests::page;
use lampladder_tests::surroundings::{self, PREFIX};
use serde_json::{Value, json};
use xtask::files;
use xtask::site::Site;

/// What Chromium has against installing the page, and the name that the app would go by.
fn judged(browser: &Browser) -> Result<(Vec<Value>, String)> {
    let manifest = browser.devtools("Page.getAppManifest", json!({}))?;
    let found = browser.devtools("Page.getInstallabilityErrors", json!({}))?;
    let mut errors = manifest["errors"].as_array().context("a list")?.clone();
    errors.extend(found["installabilityErrors"].as_array().context("a list")?.iter().cloned());
    let app = browser.devtools("Page.getAppId", json!({}))?;
    Ok((errors, app["appId"].as_str().unwrap_or_default().to_owned()))
}

/// A copy of the page with another manifest.
fn copy_with(manifest: &Value, to: &Path) -> Result<()> {
    for (name, file) in files::below(&surroundings::page()?)? {
        let target = to.join(name);
        fs::create_dir_all(target.parent().context("a folder")?)?;
        fs::copy(file, target)?;
    }
    Ok(fs::write(to.join("manifest.webmanifest"), manifest.to_string())?)
}

#[test]
fn the_browser_finds_nothing_against_installing_it() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    let (errors, app) = judged(&browser)?;
    ensure!(errors.is_empty(), "{errors:#?}");
    // The name has the path in it: two copies on one host are two apps.
    ensure!(app == site.url(), "{app}");

    // It does find fault where there is one, and an `id` would make all copies on a host one app.
    let text = fs::read_to_string(surroundings::page()?.join("manifest.webmanifest"))?;
    let mut manifest: Value = serde_json::from_str(&text)?;
    manifest["icons"] = json!([]);
    manifest["id"] = json!("./");
    let folder = Folder::new("manifest")?;
    copy_with(&manifest, folder.path())?;
    let other = Site::start(folder.path(), PREFIX, 0)?;
    browser.open(&other.url())?;
    browser.see(page::CAUTIONS)?;
    let (errors, app) = judged(&browser)?;
    ensure!(!errors.is_empty() && app != other.url(), "{errors:#?} {app}");
    Ok(())
}
