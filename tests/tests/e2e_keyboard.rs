//! All screens by keys alone, and with less motion.

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::keyboard::{ENTER, ESCAPE, RIGHT, SPACE, fill, press, push};
use lampladder_tests::page::{ACCEPT, AMPS, CAUTIONS, DONE, OPEN_CAUTIONS, field, message};
use lampladder_tests::{surroundings, walk};
use serde_json::json;

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

fn has_keyboard(browser: &Browser, css: &str) -> Result<()> {
    browser.until(&format!("return document.activeElement.matches({})", json!(css)))
}

#[test]
fn everything_is_done_by_keys_alone() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let browser = &browser;
    browser.open(&site.url())?;
    browser.see(ACCEPT)?;
    push(browser, ACCEPT, ENTER)?;
    browser.see(AMPS)?;

    // Each part's editor: in, a wrong value, a right one, out, and back where one was.
    for (part, name, value) in
        [("supply", "supply-volts", "120"), ("bank", "lamp-watts", "100"), ("equipment", "plate-watts", "60")]
    {
        let button = id(&format!("edit-{part}"));
        push(browser, &button, ENTER)?;
        browser.see(&field(name))?;
        fill(browser, &field(name), "nonsense")?;
        browser.see(&message(name))?;
        fill(browser, &field(name), value)?;
        browser.not_see(&message(name))?;
        if part == "bank" {
            press(browser, ESCAPE)?;
        } else {
            push(browser, DONE, ENTER)?;
        }
        browser.not_see(DONE)?;
        has_keyboard(browser, &button)?;
    }
    push(browser, &id("cell-shorted"), SPACE)?;
    browser.until("return document.querySelector('[data-testid=cell-shorted]').ariaPressed === 'true'")?;

    push(browser, &id("tab-ladder"), ENTER)?;
    push(browser, &id("size-60-more"), ENTER)?;
    push(browser, &id("size-25-more"), SPACE)?;
    push(browser, &id("go-on"), ENTER)?;
    fill(browser, &field("plug-ohms"), "45")?;
    push(browser, &id("go-on"), ENTER)?;
    browser.see(&id("use-bank-0"))?;
    push(browser, &id("use-bank-0"), ENTER)?;
    browser.see(&id("in-loop"))?;

    push(browser, &id("tab-seen"), ENTER)?;
    fill(browser, &field("read-bank-volts"), "67")?;
    push(browser, &id("look-orange"), SPACE)?;
    browser.see("[data-testid=seen][data-busy=false]")?;
    push(browser, &id("keep"), ENTER)?;
    browser.see(&id("kept"))?;

    push(browser, &id("tab-switch-on"), ENTER)?;
    browser.see("[data-testid=replay][data-busy=false]")?;
    let seconds = "return Number(document.querySelector('[data-testid=scrubber]').dataset.seconds)";
    push(browser, &id("scrubber"), RIGHT)?;
    browser.until("return document.querySelector('[data-testid=play]').dataset.state === 'still'")?;
    let before = browser.script(seconds)?.as_f64().context("a time")?;
    for _ in 0..10 {
        press(browser, RIGHT)?;
    }
    browser.until(&format!("{seconds} > {before}"))?;
    push(browser, &id("fuse"), ENTER)?;
    browser.see(&id("fuse-table"))?;
    push(browser, &id("tab-curve"), ENTER)?;
    browser.see(&id("chart"))?;

    push(browser, &id("theme"), SPACE)?;
    browser.until("return document.documentElement.dataset.theme === 'paper'")?;
    push(browser, OPEN_CAUTIONS, ENTER)?;
    browser.see(CAUTIONS)?;
    push(browser, ACCEPT, ENTER)?;
    browser.not_see(CAUTIONS)?;
    has_keyboard(browser, OPEN_CAUTIONS)
}

#[test]
fn nothing_moves_for_those_who_want_less_motion() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let feature = json!({"features": [{"name": "prefers-reduced-motion", "value": "reduce"}]});
    browser.devtools("Emulation.setEmulatedMedia", feature)?;
    let mut moving = Vec::new();
    let mut visit = |screen: &str| {
        let found = browser.script(
            "return document.getAnimations().filter((a) => a.playState === 'running' && a.effect.getTiming().duration > 0) \
               .map((a) => a.effect.target.className + ' ' + (a.animationName || a.transitionProperty))",
        )?;
        let found = found.as_array().context("a list")?.clone();
        moving.extend(found.iter().map(|one| format!("{screen}: {one}")));
        if screen == "switch-on" {
            let state = browser.attribute(&id("play"), "data-state")?;
            ensure!(state == "still" && browser.sees(&id("moments"))?, "it plays by itself");
        }
        Ok(())
    };
    walk::every_screen(&browser, &site.url(), &mut visit)?;
    ensure!(moving.is_empty(), "{moving:#?}");
    // The same question finds what moves where motion is welcome.
    browser.devtools("Emulation.setEmulatedMedia", json!({"features": []}))?;
    browser.tap(&id("tab-switch-on"))?;
    browser.see("[data-testid=replay][data-busy=false]")?;
    browser.not_see(&id("moments"))
}
