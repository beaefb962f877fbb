//! Every screen in both themes and at two sizes: nothing for the accessibility checker to find, and pictures to look
//! at when `LAMPLADDER_SHOTS` names a folder.

use anyhow::Result;
use lampladder_tests::accessibility::{self, look};
use lampladder_tests::browser::Browser;
use lampladder_tests::page::{self, ACCEPT, CAUTIONS, OPEN_CAUTIONS};
use lampladder_tests::surroundings;

#[test]
fn every_screen_passes_the_accessibility_checker_in_both_themes() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.see(ACCEPT)?;
    look(&browser, "cautions")?;
    page::accept(&browser)?;
    look(&browser, "main")?;
    browser.tap("[data-testid=tab-curve]")?;
    browser.see("[data-testid=chart]")?;
    look(&browser, "curve")?;
    browser.tap("[data-testid=tab-expect]")?;
    for name in ["supply-volts", "lamp-watts", "plate-watts"] {
        let css = page::open_field(&browser, name)?;
        look(&browser, name)?;
        browser.fill(&css, "nonsense")?;
        browser.see(&page::message(name))?;
        look(&browser, &format!("{name}-refused"))?;
        browser.fill(&css, "100")?;
        page::close(&browser)?;
    }
    browser.tap(OPEN_CAUTIONS)?;
    browser.see(CAUTIONS)?;
    look(&browser, "cautions-again")
}

#[test]
fn what_can_be_tapped_is_as_big_as_a_thumb_needs() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    for name in [None, Some("supply-volts"), Some("lamp-watts"), Some("plate-watts")] {
        if let Some(name) = name {
            page::open_field(&browser, name)?;
        }
        accessibility::ensure_thumbs(&browser, &format!("{name:?} open"))?;
        page::close(&browser)?;
    }
    Ok(())
}
