//! The page on a home screen, and the page among others on its host.

use std::fs;

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::copy;
use lampladder_tests::folder::Folder;
use lampladder_tests::page;
use lampladder_tests::surroundings::{self, PREFIX};
use serde_json::{Value, json};
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
    copy::page_to(folder.path())?;
    fs::write(folder.path().join("manifest.webmanifest"), manifest.to_string())?;
    let other = Site::start(folder.path(), PREFIX, 0)?;
    browser.open(&other.url())?;
    browser.see(page::CAUTIONS)?;
    let (errors, app) = judged(&browser)?;
    ensure!(!errors.is_empty() && app != other.url(), "{errors:#?} {app}");
    Ok(())
}

/// What a copy of the page keeps and shows: plate watts, lamps owned, kept readings.
fn shown(browser: &Browser) -> Result<(String, bool, usize)> {
    browser.tap("[data-testid=tab-expect]")?;
    let watts = browser.value(&page::open_field(browser, "plate-watts")?)?;
    page::close(browser)?;
    browser.tap("[data-testid=tab-ladder]")?;
    let owned = browser.sees(".size.is-owned")?;
    browser.tap("[data-testid=tab-seen]")?;
    browser.see("[data-testid=seen][data-busy=false]")?;
    browser.until("return document.querySelector('[data-testid=log]') !== null")?;
    let kept = browser.script("return document.querySelectorAll('[data-testid=kept]').length")?;
    Ok((watts, owned, usize::try_from(kept.as_u64().context("a number")?)?))
}

#[test]
fn two_copies_on_one_host_leave_each_other_alone() -> Result<()> {
    let folder = Folder::new("copies")?;
    for name in ["one", "two"] {
        copy::page_to(&folder.path().join(name))?;
    }
    let mut site = Site::start(folder.path(), "/", 0)?;
    let (one, two) = (format!("{}one/", site.url()), format!("{}two/", site.url()));
    let browser = Browser::start()?;
    page::enter(&browser, &one)?;
    browser.until_offline_ready()?;
    page::fill(&browser, "plate-watts", "75")?;
    page::close(&browser)?;
    browser.tap("[data-testid=tab-ladder]")?;
    browser.tap("[data-testid=size-60-more]")?;
    browser.tap("[data-testid=tab-seen]")?;
    browser.fill(&page::field("read-bank-volts"), "67")?;
    browser.tap("[data-testid=keep]")?;
    browser.see("[data-testid=kept]")?;
    ensure!(shown(&browser)? == ("75".to_owned(), true, 1));

    // The other one knows nothing of all this, not even that the cautions were accepted.
    browser.open(&two)?;
    browser.see(page::CAUTIONS)?;
    page::accept(&browser)?;
    browser.until_offline_ready()?;
    let (watts, owned, kept) = shown(&browser)?;
    ensure!(watts != "75" && !owned && kept == 0, "{watts} {owned} {kept}");
    browser.tap("[data-testid=tab-expect]")?;
    page::fill(&browser, "plate-watts", "30")?;
    page::close(&browser)?;

    // A new version of one is no news for the other, and both go on without a server.
    copy::make_version(&folder.path().join("two"), 2)?;
    browser
        .script("return navigator.serviceWorker.getRegistration().then((r) => r.update()).then(() => 1)")?;
    browser.see("[data-testid=use-new]")?;
    browser.tap("[data-testid=use-new]")?;
    browser.until("return document.documentElement.dataset.build === '2'")?;
    site.stop();
    browser.open(&one)?;
    page::accept(&browser)?;
    ensure!(shown(&browser)? == ("75".to_owned(), true, 1));
    ensure!(browser.script("return document.documentElement.dataset.build === undefined")? == true);
    browser.open(&two)?;
    page::accept(&browser)?;
    ensure!(shown(&browser)?.0 == "30");
    Ok(())
}
