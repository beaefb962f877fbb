//! A new version of the page is offered, never forced, and loses nothing.

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::copy;
use lampladder_tests::folder::Folder;
use lampladder_tests::page::{self, field};
use lampladder_tests::surroundings::PREFIX;
use serde_json::json;
use xtask::site::Site;

const USE: &str = "[data-testid=use-new]";
const BUILD: &str = "return document.documentElement.dataset.build || ''";

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

/// Counts how often the page is loaded from now on.
fn count_loads(browser: &Browser) -> Result<()> {
    let source = "sessionStorage.loads = Number(sessionStorage.loads || 0) + 1";
    browser.devtools("Page.addScriptToEvaluateOnNewDocument", json!({"source": source}))?;
    Ok(())
}

fn look_for_updates(browser: &Browser) -> Result<()> {
    browser
        .script("return navigator.serviceWorker.getRegistration().then((r) => r.update()).then(() => 1)")?;
    Ok(())
}

/// A served copy with a page open on it that works without a network.
fn opened(browser: &Browser, folder: &Folder) -> Result<Site> {
    copy::page_to(folder.path())?;
    let site = Site::start(folder.path(), PREFIX, 0)?;
    page::enter(browser, &site.url())?;
    browser.until_offline_ready()?;
    Ok(site)
}

#[test]
fn a_new_version_waits_until_it_is_wanted_and_everything_is_still_there() -> Result<()> {
    let folder = Folder::new("update")?;
    let browser = Browser::start()?;
    let _site = opened(&browser, &folder)?;
    ensure!(!browser.sees(USE)?, "the first version is no new one");

    // In the middle of a ladder, with readings that are not kept and a field that cannot be read.
    page::fill(&browser, "plate-watts", "75")?;
    page::close(&browser)?;
    browser.tap(&id("tab-ladder"))?;
    browser.tap(&id("size-60-more"))?;
    browser.tap(&id("size-25-more"))?;
    browser.tap(&id("go-on"))?;
    browser.fill(&field("plug-ohms"), "45")?;
    browser.tap(&id("go-on"))?;
    browser.see(&id("use-bank-0"))?;
    browser.tap(&id("tab-expect"))?;
    page::fill(&browser, "supply-volts", "lots")?;
    page::close(&browser)?;
    browser.tap(&id("tab-seen"))?;
    browser.fill(&field("read-bank-volts"), "67,5")?;
    browser.tap(&id("look-orange"))?;

    count_loads(&browser)?;
    browser.script("window.mark = 1; scrollTo(0, 0)")?;
    copy::make_version(folder.path(), 2)?;
    look_for_updates(&browser)?;
    browser.see(USE)?;
    browser.picture("update")?;
    let text = browser.text(page::NOTE)?;
    ensure!(text.contains("ladder"), "{text}");
    ensure!(browser.script("return window.mark")? == 1, "the new version was forced on the page");

    browser.tap(USE)?;
    browser.until(&format!("{BUILD}=== '2'"))?;
    page::accept(&browser)?;
    ensure!(browser.script("return sessionStorage.loads")? == "1", "loaded more than once");
    ensure!(!browser.sees(USE)?, "the new version is offered once more");
    browser.see(&field("read-bank-volts")).context("another panel is in front")?;
    ensure!(browser.value(&field("read-bank-volts"))? == "67,5");
    ensure!(browser.attribute(&id("look-orange"), "aria-pressed")? == "true");
    browser.tap(&id("tab-ladder"))?;
    browser.see(&id("use-bank-0"))?;
    ensure!(browser.attribute(&id("step-rung-0"), "data-progress")? == "now");
    browser.tap(&id("step-checks"))?;
    ensure!(browser.value(&field("plug-ohms"))? == "45");
    browser.tap(&id("tab-expect"))?;
    ensure!(browser.value(&page::open_field(&browser, "supply-volts")?)? == "lots");
    browser.see(&page::message("supply-volts"))?;
    page::close(&browser)?;
    ensure!(browser.value(&page::open_field(&browser, "plate-watts")?)? == "75");
    page::no_complaints(&browser)
}

#[test]
fn it_is_looked_for_when_the_page_comes_back_after_a_day() -> Result<()> {
    let folder = Folder::new("update")?;
    let browser = Browser::start()?;
    let _site = opened(&browser, &folder)?;
    copy::make_version(folder.path(), 2)?;
    let come_back = "document.dispatchEvent(new Event('visibilitychange'))";
    let found = "return navigator.serviceWorker.getRegistration().then((r) => r.waiting !== null || r.installing !== null)";
    browser.script(come_back)?;
    ensure!(browser.script(found)? == false, "it was looked for at once");
    browser.script("const now = Date.now; Date.now = () => now() + 25 * 3600 * 1000")?;
    browser.script(come_back)?;
    browser.see(USE)?;
    let text = browser.text(page::NOTE)?;
    ensure!(!text.contains("ladder"), "nobody is on the ladder: {text}");
    // It is still offered after a reload, which changes nothing.
    browser.reload()?;
    page::accept(&browser)?;
    browser.see(USE)?;
    ensure!(browser.script(BUILD)? == "");
    Ok(())
}

#[test]
fn a_window_under_which_the_version_changes_is_told_and_not_reloaded() -> Result<()> {
    let folder = Folder::new("update")?;
    let browser = Browser::start()?;
    let site = opened(&browser, &folder)?;
    browser.script("window.mark = 1")?;
    let first = browser.open_tab()?;
    page::enter(&browser, &site.url())?;
    copy::make_version(folder.path(), 2)?;
    look_for_updates(&browser)?;
    browser.see(USE)?;
    browser.tap(USE)?;
    browser.until(&format!("{BUILD}=== '2'"))?;
    browser.turn_to(first)?;
    browser.see(USE)?;
    ensure!(browser.script("return window.mark")? == 1 && browser.script(BUILD)? == "");
    browser.tap(USE)?;
    browser.until(&format!("{BUILD}=== '2'")).context("the first window does not follow")
}
