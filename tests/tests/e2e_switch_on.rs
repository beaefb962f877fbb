//! The first seconds in Chromium: worked out beside the page, replayed, and without a server.

use anyhow::{Context, Result, ensure};
use lampladder_core::condition::Condition;
use lampladder_core::setup::Setup;
use lampladder_core::switch_on::{Moment, Options, simulate};
use lampladder_tests::browser::Browser;
use lampladder_tests::page;
use lampladder_tests::{accessibility, surroundings};

const TAB: &str = "[data-testid=tab-switch-on]";
const READY: &str = "[data-testid=replay][data-busy=false]";

fn scene(which: &str) -> String {
    format!("[data-testid=scene-{which}]")
}

/// An attribute of a scene as a number.
fn number(browser: &Browser, css: &str, name: &str) -> Result<f64> {
    let text = browser.attribute(css, name)?;
    text.parse().with_context(|| format!("{css} {name} is `{text}`"))
}

/// Goes to the last moment.
fn go_to_the_end(browser: &Browser) -> Result<()> {
    browser.script(
        "const s = document.querySelector('[data-testid=scrubber]'); \
         const set = Object.getOwnPropertyDescriptor(HTMLInputElement.prototype, 'value').set; \
         set.call(s, s.max); s.dispatchEvent(new Event('input', {bubbles: true})); return true",
    )?;
    browser.until("return document.querySelector('[data-testid=play]').dataset.state === 'still'")
}

#[test]
fn healthy_and_shorted_are_replayed_as_core_works_them_out() -> Result<()> {
    let mut site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    // The reckoner has not been asked for anything yet: it must have been kept all the same.
    site.stop();
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    browser.see(READY)?;
    go_to_the_end(&browser)?;
    let setup = Setup::example()?;
    for (which, condition) in [("healthy", Condition::Healthy), ("other", Condition::Shorted)] {
        let load = setup.plate.load(condition, 1.0)?;
        let options = Options { moment: Moment::Degrees(90.0), ..Options::default() };
        let run = simulate(&setup.supply, &setup.bank, &load, &options)?;
        let last = run.samples.last().context("samples")?;
        let css = scene(which);
        ensure!(browser.attribute(&css, "data-condition")? == condition.name());
        for (name, mine) in [("data-kelvin", last.lamp_kelvin[0]), ("data-amps", last.amps_rms)] {
            let shown = number(&browser, &css, name)?;
            ensure!((shown - mine).abs() <= 1e-6 * mine, "{condition:?} {name}: page {shown}, core {mine}");
        }
    }
    let table = browser.text("[data-testid=surge]")?;
    ensure!(table.contains('A') && table.contains("A²s"), "{table}");
    Ok(())
}

#[test]
fn a_stalled_page_says_why_when_the_reckoner_cannot_be_had() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.script("document.querySelector('meta[name=reckoner]').content = './nothing.js'; return true")?;
    browser.tap(TAB)?;
    browser.until(
        "return document.querySelector('[data-testid=story]').innerText.includes('could not be loaded')",
    )?;
    // The rest of the page goes on.
    browser.tap("[data-testid=tab-expect]")?;
    browser.see(page::AMPS)
}

#[test]
fn typing_while_it_plays_loses_nothing() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    // Wide: the loop and the replay are in view together.
    browser.resize(1280, 800)?;
    browser.tap(TAB)?;
    browser.see(READY)?;
    let before = browser.attribute("[data-testid=replay]", "data-milliseconds")?;
    page::fill(&browser, "lamp-watts", "100")?;
    page::close(&browser)?;
    // The typing has to rest before it is worked out anew, which may be over before anybody looks: no two runs take
    // the very same time.
    browser.until(&format!(
        "const e = document.querySelector('[data-testid=replay]'); \
         return e.dataset.busy === 'false' && e.dataset.milliseconds !== '{before}' && e.dataset.milliseconds > 0"
    ))?;
    go_to_the_end(&browser)?;
    let amps = number(&browser, &scene("other"), "data-amps")?;
    // A 100 W lamp straight at 230 V.
    ensure!((amps - 100.0 / 230.0).abs() < 0.01 * amps, "{amps}");
    ensure!(browser.attribute("[data-testid=result-amps]", "data-value")?.parse::<f64>()? > 0.0);
    Ok(())
}

#[test]
fn the_panel_passes_the_accessibility_checker() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.tap(TAB)?;
    browser.see(READY)?;
    browser.script(
        "document.querySelector('[data-testid=fuse]').scrollIntoView({block: 'center'}); return true",
    )?;
    browser.tap("[data-testid=fuse]")?;
    browser.see("[data-testid=fuse-table]")?;
    go_to_the_end(&browser)?;
    // At its ends the page shows no control that is half under a bar.
    browser.script("scrollTo(0, document.documentElement.scrollHeight); return true")?;
    accessibility::look(&browser, "switch-on-fuse")?;
    browser.script("scrollTo(0, 0); return true")?;
    accessibility::look(&browser, "switch-on")
}
