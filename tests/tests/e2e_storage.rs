//! What happens to what is kept: two windows at once, a browser that empties the storage, a reload, older versions.

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::page::{self, NOTE, field};
use lampladder_tests::surroundings;
use serde_json::json;

const KEPT: &str = "[data-testid=kept]";

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

fn keep_reading(browser: &Browser, volts: &str) -> Result<()> {
    browser.tap(&id("tab-seen"))?;
    browser.fill(&field("read-bank-volts"), volts)?;
    browser.tap(&id("keep"))?;
    browser.until(&format!("return document.querySelector('{KEPT}').textContent.includes('{volts}')"))
}

fn plate_watts(browser: &Browser) -> Result<String> {
    let watts = browser.value(&page::open_field(browser, "plate-watts")?)?;
    page::close(browser)?;
    Ok(watts)
}

/// The page comes back to the front.
const COME_BACK: &str = "document.dispatchEvent(new Event('visibilitychange', {bubbles: true}))";

#[test]
fn two_windows_share_lamps_and_log_and_tell_each_other_of_the_rest() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    keep_reading(&browser, "41")?;
    let first = browser.open_tab()?;
    page::enter(&browser, &site.url())?;
    browser.tap(&id("tab-seen"))?;
    browser.see(KEPT)?;
    keep_reading(&browser, "52")?;
    browser.tap(&id("tab-ladder"))?;
    browser.tap(&id("size-60-more"))?;
    browser.tap(&id("tab-expect"))?;
    page::fill(&browser, "plate-watts", "75")?;
    page::close(&browser)?;

    let second = browser.tab()?;
    browser.turn_to(first)?;
    browser.tap(&id("tab-expect"))?;
    browser.see(NOTE)?;
    ensure!(browser.text(NOTE)?.contains("window"), "{}", browser.text(NOTE)?);
    ensure!(plate_watts(&browser)? == "45", "the other window's set-up was forced on this one");
    browser.script(COME_BACK)?;
    browser.tap(&id("tab-seen"))?;
    browser.until(&format!("return document.querySelectorAll('{KEPT}').length === 2"))?;
    browser.tap(&id("tab-ladder"))?;
    browser.see(".size.is-owned")?;
    browser.tap(&id("use-kept"))?;
    browser.not_see(&id("use-kept"))?;
    browser.tap(&id("tab-expect"))?;
    ensure!(plate_watts(&browser)? == "75");
    // What is typed last is kept, and a reading that is deleted here is gone there.
    let kept = "Object.entries(localStorage).find(([key]) => key.startsWith('lampladder.setup'))[1]";
    let before = browser.script(&format!("return {kept}"))?;
    page::fill(&browser, "plate-watts", "80")?;
    page::close(&browser)?;
    browser.until(&format!("return {kept} !== {before}"))?;
    browser.tap(&id("tab-seen"))?;
    browser.see("[data-testid=seen][data-busy=false]")?;
    browser.tap(&id("delete"))?;
    browser.until(&format!("return document.querySelectorAll('{KEPT}').length === 1"))?;
    browser.turn_to(second)?;
    browser.open("about:blank")?;
    browser.open(&site.url())?;
    page::accept(&browser)?;
    browser.tap(&id("tab-expect"))?;
    ensure!(plate_watts(&browser)? == "80");
    browser.tap(&id("tab-seen"))?;
    browser.until(&format!("return document.querySelectorAll('{KEPT}').length === 1"))?;
    page::no_complaints(&browser)
}

#[test]
fn what_the_browser_throws_away_in_the_middle_of_a_ladder_is_kept_again() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    page::fill(&browser, "plate-watts", "75")?;
    page::close(&browser)?;
    keep_reading(&browser, "41")?;
    browser.tap(&id("tab-ladder"))?;
    browser.tap(&id("size-60-more"))?;
    browser.tap(&id("go-on"))?;
    browser.fill(&field("plug-ohms"), "45")?;
    let origin = browser.script("return location.origin")?;
    // Not the service workers: this is about what a person has kept.
    browser.devtools(
        "Storage.clearDataForOrigin",
        json!({"origin": origin, "storageTypes": "local_storage,indexeddb"}),
    )?;
    ensure!(browser.script("return localStorage.length")? == 0, "nothing was thrown away");
    browser.script(COME_BACK)?;
    browser.see(NOTE)?;
    browser.picture("emptied")?;
    browser.until("return localStorage.length > 3")?;
    // All of it, also in a new visit at the bare address.
    browser.until("return Object.keys(localStorage).some((key) => key.startsWith('lampladder.climb'))")?;
    browser.tap(&id("tab-seen"))?;
    browser.see(KEPT)?;
    browser.open_tab()?;
    page::enter(&browser, &site.url())?;
    ensure!(plate_watts(&browser)? == "75");
    browser.tap(&id("tab-ladder"))?;
    ensure!(browser.value(&field("plug-ohms"))? == "45");
    browser.tap(&id("tab-seen"))?;
    browser.see(KEPT)
}

#[test]
fn the_browser_is_asked_once_to_keep_things_and_not_before_there_is_anything() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let source =
        "window.asked = 0; navigator.storage.persist = async () => { window.asked += 1; return false; }";
    browser.devtools("Page.addScriptToEvaluateOnNewDocument", json!({"source": source}))?;
    page::enter(&browser, &site.url())?;
    page::fill(&browser, "plate-watts", "75")?;
    page::close(&browser)?;
    browser.tap(&id("tab-ladder"))?;
    ensure!(browser.script("return window.asked")? == 0, "asked before anything was kept");
    browser.tap(&id("size-60-more"))?;
    browser.until("return window.asked === 1")?;
    keep_reading(&browser, "41")?;
    browser.reload()?;
    page::accept(&browser)?;
    keep_reading(&browser, "52")?;
    browser.tap(&id("tab-ladder"))?;
    browser.tap(&id("size-60-more"))?;
    ensure!(browser.script("return window.asked")? == 0, "asked again");
    Ok(())
}

#[test]
fn a_reload_in_the_middle_of_typing_loses_nothing() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    page::fill(&browser, "lamp-watts", "sixty")?;
    page::close(&browser)?;
    browser.tap(&id("tab-seen"))?;
    browser.fill(&field("read-amps"), "160 apples")?;
    browser.tap(&id("behaves-pulsing"))?;
    browser.reload()?;
    page::accept(&browser)?;
    ensure!(browser.attribute(page::FRONT, "data-testid")? == "tab-seen");
    ensure!(browser.value(&field("read-amps"))? == "160 apples");
    browser.see(&page::message("read-amps"))?;
    ensure!(browser.attribute(&id("behaves-pulsing"), "aria-pressed")? == "true");
    browser.tap(&id("tab-expect"))?;
    ensure!(browser.value(&page::open_field(&browser, "lamp-watts")?)? == "sixty");
    browser.see(&page::message("lamp-watts"))?;
    // Another visit begins afresh.
    browser.open_tab()?;
    page::enter(&browser, &site.url())?;
    ensure!(browser.attribute(page::FRONT, "data-testid")? == "tab-expect");
    ensure!(browser.value(&page::open_field(&browser, "lamp-watts")?)? == "60");
    Ok(())
}

#[test]
fn a_measured_lamp_that_was_tapped_away_is_put_back() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.tap(&id("tab-ladder"))?;
    browser.tap(&id("size-60-more"))?;
    browser.see("[data-testid=ladder][data-complete=true]")?;
    browser.tap("[data-testid=measure] summary")?;
    browser.tap(&id("measure-0"))?;
    browser.fill(&field("spare-lamp-cold-ohms"), "62")?;
    browser.fill(&field("spare-point-0-volts"), "40")?;
    browser.fill(&field("spare-point-0-amps"), "0.105")?;
    browser.tap(&id("put-lamp"))?;
    browser.see(&id("size-other-0-less"))?;
    let stock = "Object.entries(localStorage).find(([key]) => key.startsWith('lampladder.stock'))[1]";
    let before = browser.script(&format!("return {stock}"))?;
    browser.tap(&id("size-other-0-less"))?;
    browser.not_see(&id("size-other-0-less"))?;
    browser.see(&id("put-back"))?;
    browser.picture("put-back")?;
    ensure!(browser.text(&id("put-back"))?.contains("60"), "{}", browser.text(&id("put-back"))?);
    browser.tap(&id("put-back"))?;
    browser.see(&id("size-other-0-less"))?;
    browser.not_see(&id("put-back"))?;
    browser.until(&format!("return {stock} === {before}")).context("what is kept is not as before")
}

/// What the first version of the page left in the storage, under names without the page's folder.
const OF_OLD: [(&str, &str); 5] = [
    ("lampladder.setup", "1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAJYBAAAAAACH"),
    ("lampladder.stock", "s1AgAuAQAMAQABAAEAfAAAAAEACAEA0gH9AQAuAQAMAQAAAQ4"),
    (
        "lampladder.climb",
        "1\n1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAJYBAAAAAACH\n2 0 0 0 1 0\n\n\n\n\n\n\n\n45\n\n\n",
    ),
    ("lampladder.meter", "1 0.8 3 2000 a"),
    ("lampladder.theme", "dusk"),
];

#[test]
fn what_the_first_version_has_kept_is_still_there() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    // A file of the page's host that runs no program.
    browser.open(&format!("{}manifest.webmanifest", site.url()))?;
    for (name, text) in OF_OLD {
        browser.script(&format!("localStorage.setItem({}, {})", json!(name), json!(text)))?;
    }
    let record = json!({
        "version": 1, "id": 1_796_132_707_222_u64, "setup": OF_OLD[0].1, "rung": 1,
        "meter": {"percent": 0.8, "digits": 3, "counts": 2000, "response": "Averaging"},
        "numbers": [["BankVolts", 28]], "look": "DullRed",
        "verdict": {"advice": "GoOn", "leader": "Idle", "weight": 1}, "note": "hums",
    });
    let put = "const done = arguments[1]; const open = indexedDB.open('lampladder.log'); \
        open.onupgradeneeded = () => open.result.createObjectStore('readings', {keyPath: 'id'}); \
        open.onsuccess = () => { const db = open.result; const t = db.transaction('readings', 'readwrite'); \
          t.objectStore('readings').put(arguments[0]); t.oncomplete = () => { db.close(); done(true) } }";
    browser.script_later(put, vec![record])?;
    browser.console()?;
    page::enter(&browser, &site.url())?;
    ensure!(plate_watts(&browser)? == "75");
    ensure!(browser.script("return document.documentElement.dataset.theme")? == "dusk");
    browser.tap(&id("tab-ladder"))?;
    browser.see("[data-testid=ladder][data-complete=true]")?;
    browser.see(&id("in-loop"))?;
    ensure!(browser.attribute(&id("step-rung-0"), "data-progress")? == "now");
    browser.tap(&id("step-checks"))?;
    ensure!(browser.value(&field("plug-ohms"))? == "45");
    browser.tap(&id("step-lamps"))?;
    browser.see(&id("size-other-0-less"))?;
    browser.tap(&id("tab-seen"))?;
    browser.see(KEPT)?;
    ensure!(browser.value(&id("note-text"))? == "hums");
    browser.tap(&id("meter"))?;
    ensure!(browser.value(&field("meter-percent"))? == "0.8");
    ensure!(browser.attribute(&id("averaging"), "aria-pressed")? == "true");
    page::no_complaints(&browser)
}
