//! Whatever is typed, linked or forbidden: a message where it belongs, nothing lost, no blank page.

use anyhow::{Context, Result, ensure};
use lampladder_core::link;
use lampladder_core::setup::Setup;
use lampladder_tests::browser::Browser;
use lampladder_tests::page::{self, AMPS, NOTE, message};
use lampladder_tests::surroundings;
use serde_json::json;

/// What no field takes, whatever it is for. The last is what a cat on the keyboard types.
const NONSENSE: [&str; 9] =
    ["0", "-60", "1e300", "", "sixty", "NaN", "60 V W", "1..5", "999999999999999999999999999999999999"];

#[test]
fn nonsense_in_a_field_is_answered_beside_it_and_stays_to_be_corrected() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    for name in ["supply-volts", "lamp-watts", "plate-watts"] {
        let css = page::open_field(&browser, name)?;
        let good = browser.value(&css)?;
        for text in NONSENSE {
            browser.fill(&css, text)?;
            browser.see(&message(name)).with_context(|| format!("`{text}` in {name}"))?;
            let said = browser.text(&message(name))?;
            ensure!(said.trim().len() > 5, "`{text}` in {name} is answered by `{said}`");
            ensure!(browser.value(&css)? == text, "what was typed into {name} is lost");
        }
        browser.fill(&css, &good)?;
        browser.not_see(&message(name))?;
        page::close(&browser)?;
        browser.see(AMPS)?;
    }
    page::no_complaints(&browser)
}

#[test]
fn a_lamp_for_another_voltage_is_cautioned() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.not_see(page::LAMP_CAUTION)?;
    // Somewhat over its rating when the equipment is shorted: a caution. Far over: the one sentence to act on.
    page::fill(&browser, "lamp-volts", "200")?;
    page::close(&browser)?;
    browser.see(page::LAMP_CAUTION)?;
    browser.picture("over-rated")?;
    let before = browser.text(page::ADVICE)?;
    page::fill(&browser, "lamp-volts", "12")?;
    page::close(&browser)?;
    browser.picture("burns-out")?;
    let advice = browser.text(page::ADVICE)?;
    ensure!(advice != before && advice.contains("12"), "nobody is told what becomes of the lamp: {advice}");
    page::no_complaints(&browser)
}

#[test]
fn a_link_that_cannot_be_read_says_so_and_leaves_what_was_there() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    page::fill(&browser, "plate-watts", "123")?;
    page::close(&browser)?;
    let good = link::encode(&Setup::example()?);
    let cut: String = good.chars().take(good.chars().count() / 2).collect();
    for broken in ["nonsense", "%00%ff", "1", "zzzz", &cut, &format!("{good}A"), &"A".repeat(5000)] {
        browser.open("about:blank")?;
        browser.open(&format!("{}#{broken}", site.url()))?;
        let context = || format!("link `{}`", broken.get(..20).unwrap_or(broken));
        browser.see(NOTE).with_context(context)?;
        browser.see(AMPS).with_context(context)?;
        let css = page::open_field(&browser, "plate-watts")?;
        ensure!(browser.value(&css)?.starts_with("123"), "a bad link destroyed what was kept");
    }
    page::no_complaints(&browser)
}

#[test]
fn storage_that_is_full_or_forbidden_only_costs_the_keeping() -> Result<()> {
    let site = surroundings::site()?;
    for (name, script) in [
        (
            "full",
            "Storage.prototype.setItem = () => { throw new DOMException('full', 'QuotaExceededError'); };",
        ),
        (
            "forbidden",
            "Object.defineProperty(window, 'localStorage', {get() { throw new DOMException('no', 'SecurityError'); }}); \
             Object.defineProperty(window, 'indexedDB', {get() { throw new DOMException('no', 'SecurityError'); }});",
        ),
    ] {
        let browser = Browser::start()?;
        browser.devtools("Page.addScriptToEvaluateOnNewDocument", json!({"source": script}))?;
        page::enter(&browser, &site.url()).with_context(|| format!("storage {name}"))?;
        page::fill(&browser, "plate-watts", "77")?;
        page::close(&browser)?;
        browser.see(AMPS)?;
        browser.see(NOTE).with_context(|| format!("storage {name}: nobody is told"))?;
        // The address still holds it all.
        browser.reload()?;
        page::accept(&browser)?;
        let css = page::open_field(&browser, "plate-watts")?;
        ensure!(browser.value(&css)?.starts_with("77"), "storage {name}: the address lost it");
        page::no_complaints(&browser)?;
    }
    Ok(())
}

#[test]
fn a_number_is_read_as_people_write_it() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    page::fill(&browser, "plate-watts", "45")?;
    page::close(&browser)?;
    let expected = browser.text(AMPS)?;
    page::fill(&browser, "plate-watts", "200")?;
    page::close(&browser)?;
    ensure!(browser.text(AMPS)? != expected, "the answer does not follow the field");
    for same in ["45 W", "45,0", " 45.00 ", "0,045 kW", "45000 mW"] {
        page::fill(&browser, "plate-watts", same)?;
        page::close(&browser)?;
        let shown = browser.text(AMPS)?;
        ensure!(shown == expected, "`{same}` gives {shown}, `45` {expected}");
    }
    page::no_complaints(&browser)
}
