//! Every kind of equipment on the page: chosen by a tap, each of its conditions shown as core works it out.

use anyhow::{Context, Result, ensure};
use lampladder_core::expect::prospect;
use lampladder_core::family::Family;
use lampladder_core::link;
use lampladder_core::plate::Plate;
use lampladder_core::setup::Setup;
use lampladder_core::steady::Outcome;
use lampladder_tests::accessibility::look;
use lampladder_tests::browser::Browser;
use lampladder_tests::{page, surroundings};

/// Chooses a kind of equipment by its picture.
fn choose(browser: &Browser, family: Family) -> Result<()> {
    for name in ["edit-equipment", "choose-family"] {
        browser.tap(&format!("[data-testid={name}]"))?;
    }
    let css = format!("[data-testid=family-{}]", family.name());
    browser.see(&css)?;
    // It may lie further down in the list.
    browser.script(&format!(
        "document.querySelector('{css}').scrollIntoView({{block: 'center'}}); return true"
    ))?;
    browser.tap(&css)?;
    page::close(browser)
}

#[test]
fn every_family_and_condition_is_shown_as_core_works_it_out() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    let example = Setup::example()?;
    for family in Family::ALL {
        choose(&browser, family)?;
        // One more condition a frame.
        let count = family.conditions().len();
        browser.until(&format!(
            "return document.querySelectorAll('[data-testid^=cell-] .word').length === {count} && \
             [...document.querySelectorAll('[data-testid^=cell-] .word')].every((e) => e.innerText !== '…')"
        ))?;
        let plate = Plate::new(family, example.plate.volts(), example.plate.watts(), None);
        // Measured equipment has ohms in the place of watts; the page keeps its own example of them.
        let Ok(plate) = plate else { continue };
        let setup = Setup { plate, ..example.clone() };
        for &condition in family.conditions() {
            let css = page::cell(condition.name());
            let expected = prospect(&setup, condition).map_err(|error| anyhow::anyhow!("{error}"))?;
            match (&expected.shown, expected.outcome) {
                (Some(shown), _) => {
                    let amps: f64 = browser.attribute(&css, "data-amps")?.parse()?;
                    let off = (amps - shown.amps.value).abs();
                    ensure!(
                        off <= 1e-6 * shown.amps.value + 1e-9,
                        "{family:?} {condition:?}: page {amps}, core {shown:?}"
                    );
                }
                (None, Outcome::Hunts) => {
                    browser.until(&format!("return document.querySelector('{css}').dataset.period > 0"))?;
                }
                (None, _) => ensure!(!browser.text(&css)?.is_empty()),
            }
        }
    }
    Ok(())
}

#[test]
fn hunting_is_a_lamp_that_pulses_at_its_period_or_stands_where_stillness_is_wanted() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    choose(&browser, Family::SwitchMode)?;
    let css = page::cell("healthy");
    browser.until(&format!("return document.querySelector('{css}').dataset.period > 0"))?;
    let period: f64 = browser.attribute(&css, "data-period")?.parse()?;
    let shown = browser.attribute(&format!("{css} animate"), "dur")?;
    let shown: f64 = shown.trim_end_matches('s').parse().context("a duration")?;
    ensure!((shown - period).abs() < 0.01 * period, "{shown} s for {period} s");
    ensure!(browser.text(page::ADVICE)?.contains("about every"), "{}", browser.text(page::ADVICE)?);
    look(&browser, "hunting")
}

#[test]
fn two_ways_to_come_to_rest_are_both_shown() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    choose(&browser, Family::InductionMotor)?;
    // Larger and larger lamps, until a motor that turns would go on turning and one that stands would stand.
    for watts in ["75", "100", "150", "200", "250", "300"] {
        page::fill(&browser, "lamp-watts", watts)?;
        page::close(&browser)?;
        if browser.sees("[data-testid=ways]")? {
            let ways = browser.text("[data-testid=ways]")?;
            ensure!(ways.contains("Standing still") && ways.contains("Turning"), "{ways}");
            return look(&browser, "two-ways");
        }
    }
    anyhow::bail!("no lamp leaves a choice")
}

#[test]
fn a_first_answer_waits_for_nothing_that_is_fetched_after_it() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let example = Setup::example()?;
    for family in Family::ALL {
        let plate = Plate::new(family, example.plate.volts(), example.plate.watts(), None);
        let Ok(plate) = plate else { continue };
        let link = link::encode(&Setup { plate, ..example.clone() });
        // Another address alone would not start the program anew.
        browser.open("about:blank")?;
        browser.open(&format!("{}#{link}", site.url()))?;
        page::accept(&browser)?;
        let html = "document.documentElement.dataset";
        browser.until(&format!("return {html}.rest === 'whole'"))?;
        let waits = browser.script(&format!("return {html}.restWaits ?? 0"))?;
        ensure!(waits == 0, "{family:?}: a mark in web/rest.txt is one too many");
    }
    Ok(())
}
