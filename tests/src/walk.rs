//! A walk over every screen of the page, for tests that look at all of them.

use anyhow::Result;

use crate::browser::Browser;
use crate::page::{self, ACCEPT, CAUTIONS, OPEN_CAUTIONS, field};

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

fn to_tab(browser: &Browser, name: &str) -> Result<()> {
    browser.tap(&id(&format!("tab-{name}")))?;
    browser.see(&id(&format!("tab-{name}")))
}

/// Opens the page at an address and goes over all its screens; `visit` is told the name of each.
///
/// # Errors
/// When a screen does not come, or `visit` fails.
pub fn every_screen(browser: &Browser, url: &str, visit: &mut dyn FnMut(&str) -> Result<()>) -> Result<()> {
    browser.open(url)?;
    browser.see(ACCEPT)?;
    visit("cautions")?;
    page::accept(browser)?;
    visit("expect")?;
    browser.tap(&id("voltage-bar"))?;
    visit("expect-why")?;
    browser.tap(&id("voltage-bar"))?;
    for name in ["supply-volts", "lamp-watts", "plate-watts"] {
        let css = page::open_field(browser, name)?;
        visit(name)?;
        browser.fill(&css, "nonsense")?;
        browser.see(&page::message(name))?;
        visit(&format!("{name}-refused"))?;
        browser.fill(&css, "60")?;
        if name == "plate-watts" {
            browser.tap(&id("choose-family"))?;
            visit("families")?;
        }
        browser.fill(&css, if name == "supply-volts" { "230" } else { "60" })?;
        page::close(browser)?;
    }
    ladder(browser, visit)?;
    seen(browser, visit)?;
    to_tab(browser, "switch-on")?;
    browser.see("[data-testid=replay][data-busy=false]")?;
    visit("switch-on")?;
    browser.tap(&id("fuse"))?;
    browser.see(&id("fuse-table"))?;
    visit("switch-on-fuse")?;
    to_tab(browser, "curve")?;
    browser.see(&id("chart"))?;
    visit("curve")?;
    browser.tap(OPEN_CAUTIONS)?;
    browser.see(CAUTIONS)?;
    visit("cautions-again")?;
    browser.tap(ACCEPT)?;
    browser.not_see(CAUTIONS)
}

fn ladder(browser: &Browser, visit: &mut dyn FnMut(&str) -> Result<()>) -> Result<()> {
    to_tab(browser, "ladder")?;
    for size in ["size-60-more", "size-60-more", "size-25-more"] {
        browser.tap(&id(size))?;
    }
    browser.see("[data-testid=ladder][data-complete=true]")?;
    browser.tap(&id("another-lamp"))?;
    visit("ladder-lamps")?;
    browser.tap(&id("another-lamp"))?;
    browser.tap(&id("unknown-lamp"))?;
    browser.fill(&field("unknown-cold-ohms"), "62")?;
    browser.fill(&field("unknown-volts"), "100")?;
    browser.fill(&field("unknown-amps"), "0.17")?;
    browser.see(&id("fit-0"))?;
    visit("ladder-unknown")?;
    browser.tap(&id("unknown-lamp"))?;
    browser.tap(&id("go-on"))?;
    browser.see(&id("skipped"))?;
    browser.fill(&field("plug-ohms"), "45")?;
    visit("ladder-checks")?;
    browser.tap(&id("go-on"))?;
    browser.see(&id("use-bank-0"))?;
    visit("ladder-rung")?;
    for step in ["step-mains", "step-after"] {
        browser.tap(&id(step))?;
        visit(&format!("ladder-{step}"))?;
    }
    Ok(())
}

fn seen(browser: &Browser, visit: &mut dyn FnMut(&str) -> Result<()>) -> Result<()> {
    to_tab(browser, "seen")?;
    visit("seen-empty")?;
    browser.fill(&field("read-supply-volts"), "230")?;
    browser.fill(&field("read-bank-volts"), "67")?;
    browser.fill(&field("read-amps"), "160")?;
    browser.tap(&id("look-orange"))?;
    browser.tap(&id("meter"))?;
    browser.see("[data-testid=seen][data-busy=false]")?;
    browser.tap(&id("keep"))?;
    browser.see(&id("kept"))?;
    visit("seen")
}
