//! The ladder, as a person climbs it: from opening the page to the first rung, on to the next, away and back.

use std::cell::Cell;

use anyhow::{Context, Result, ensure};
use lampladder_core::family::Family;
use lampladder_core::ladder::{self, Ladder, Limits};
use lampladder_core::lamp::Lamp;
use lampladder_core::link;
use lampladder_core::plate::Plate;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_tests::browser::Browser;
use lampladder_tests::numbers::ensure_shown;
use lampladder_tests::page::{self, ACCEPT, AMPS, CAUTIONS, DONE, field, message};
use lampladder_tests::{accessibility, surroundings};

const TAB: &str = "[data-testid=tab-ladder]";
const GO_ON: &str = "[data-testid=go-on]";
const REFUSED: &str = "[data-testid=ladder-refused]";
const RUNG: &str = "[data-testid=step-rung-0]";

/// From opening the page to the first rung.
const MOST_TAPS: usize = 12;

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

fn planned(plate_watts: f64, lamps: &[(f64, f64)]) -> Result<Ladder> {
    let supply = Supply::new(230.0, 50.0, 0.0)?;
    let plate = Plate::new(Family::TransformerSupply, 230.0, plate_watts, None)?;
    let mut stock = Stock::default();
    for &(watts, count) in lamps {
        stock.add(Lamp::new(230.0, watts)?, count)?;
    }
    Ok(ladder::plan(&supply, &stock, &plate, &Limits::default())?)
}

/// Counts what a finger does.
struct Finger<'a> {
    browser: &'a Browser,
    taps: Cell<usize>,
}

impl<'a> Finger<'a> {
    const fn new(browser: &'a Browser) -> Self {
        Self { browser, taps: Cell::new(0) }
    }

    fn tap(&self, css: &str) -> Result<()> {
        self.browser.tap(css)?;
        self.taps.set(self.taps.get() + 1);
        Ok(())
    }

    /// A tap into the field; the rest is keys.
    fn fill(&self, css: &str, text: &str) -> Result<()> {
        self.tap(css)?;
        self.browser.fill(css, text)
    }
}

/// From the open page to the rungs for two lamps of 60 W and one of 25 W.
fn climb(finger: &Finger<'_>) -> Result<()> {
    let browser = finger.browser;
    browser.see(ACCEPT)?;
    // The cautions stand before the program; a tap counts once it does something.
    browser.until("return document.querySelector('[data-testid=accept]') !== null")?;
    finger.tap(ACCEPT)?;
    browser.not_see(CAUTIONS)?;
    finger.tap(TAB)?;
    finger.tap(&id("ladder-equipment"))?;
    browser.see(&field("plate-watts"))?;
    finger.fill(&field("plate-watts"), "35")?;
    finger.tap(DONE)?;
    browser.not_see(DONE)?;
    finger.tap(&id("size-60-more"))?;
    finger.tap(&id("size-60-more"))?;
    finger.tap(&id("size-25-more"))?;
    // To the checks, which can be left out, and on to the first rung.
    finger.tap(GO_ON)?;
    browser.see(&id("skipped"))?;
    finger.tap(GO_ON)?;
    browser.see(&id("use-bank-0"))
}

/// Types other plate watts, from the ladder.
fn plate(browser: &Browser, watts: &str) -> Result<()> {
    browser.tap(&id("ladder-equipment"))?;
    browser.see(&field("plate-watts"))?;
    browser.fill(&field("plate-watts"), watts)?;
    page::close(browser)
}

#[test]
fn a_new_user_gets_to_the_first_rung_in_few_taps_and_comes_back_to_it() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    let finger = Finger::new(&browser);
    climb(&finger)?;
    finger.tap(&id("use-bank-0"))?;
    browser.see(&id("in-loop"))?;
    println!("{} taps from the open page to the first rung in the loop", finger.taps.get());
    ensure!(finger.taps.get() <= MOST_TAPS, "{} taps", finger.taps.get());
    browser.picture("ladder-first-rung")?;

    // It is the core's first rung, and the loop is that rung.
    let ladder = planned(35.0, &[(60.0, 2.0), (25.0, 1.0)])?;
    let first = &ladder.rungs[0];
    let shown = first.healthy.shown.as_ref().context("a radio settles")?;
    let url = browser.url()?;
    let (_, fragment) = url.split_once('#').context("a fragment")?;
    ensure!(link::decode(fragment)?.bank == first.bank, "the loop holds another bank");
    for index in 0..ladder.rungs.len() {
        browser.see(&id(&format!("step-rung-{index}")))?;
    }
    ensure!(!browser.sees(&id(&format!("step-rung-{}", ladder.rungs.len())))?, "a rung too many");
    browser.tap("[data-testid=tab-expect]")?;
    browser.see(AMPS)?;
    ensure_shown(&browser.text(AMPS)?, shown.amps.value, "A")?;

    // The phone sleeps and the page is loaded again.
    browser.tap(TAB)?;
    browser.tap(GO_ON)?;
    browser.see(&id("use-bank-1"))?;
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    browser.see(&id("use-bank-1"))?;
    for (step, progress) in
        [("step-lamps", "done"), ("step-rung-0", "done"), ("step-rung-1", "now"), ("step-after", "next")]
    {
        ensure!(browser.attribute(&id(step), "data-progress")? == progress, "{step} is not {progress}");
    }
    browser.picture("ladder-resumed")?;
    // Other equipment is another climb.
    plate(&browser, "80")?;
    browser.see(&id("restarted"))?;
    ensure!(browser.attribute(RUNG, "data-progress")? == "now");
    page::no_complaints(&browser)
}

#[test]
fn what_makes_no_ladder_is_said_with_a_way_forward() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.tap(TAB)?;
    // No lamp.
    browser.see(REFUSED)?;
    ensure!(browser.text(REFUSED)?.contains(" W lamp"), "{}", browser.text(REFUSED)?);
    // Lamps of the wrong voltage, and fewer than none.
    browser.tap(&id("another-lamp"))?;
    browser.fill(&field("spare-lamp-volts"), "24")?;
    browser.fill(&field("spare-lamp-watts"), "21")?;
    for wrong in ["-2", "1.5", "many", "1e300"] {
        browser.fill(&field("count"), wrong)?;
        browser.see(&message("count"))?;
        browser.tap(&id("put-lamp"))?;
        ensure!(browser.value(&field("count"))? == wrong, "what was typed is lost");
        browser.see(&id("form-another"))?;
    }
    browser.picture("ladder-bad-count")?;
    browser.fill(&field("count"), "2")?;
    browser.tap(&id("put-lamp"))?;
    browser.not_see(&id("form-another"))?;
    browser.see(REFUSED)?;
    let said = browser.text(REFUSED)?;
    ensure!(said.contains("230") && said.contains(" W lamp"), "{said}");
    // More than any bank gives.
    browser.tap(&id("size-100-more"))?;
    plate(&browser, "2000")?;
    browser.see(REFUSED)?;
    browser.picture("ladder-refused")?;
    ensure!(browser.text(REFUSED)?.len() > said.len() / 2, "{}", browser.text(REFUSED)?);
    page::no_complaints(&browser)
}

#[test]
fn checks_are_judged_and_the_wait_is_counted() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let finger = Finger::new(&browser);
    browser.open(&site.url())?;
    climb(&finger)?;
    browser.tap(&id("step-checks"))?;
    browser.fill(&field("protective-ohms"), "0.2")?;
    browser.see(&id("verdict-protective-ohms"))?;
    browser.fill(&field("insulation-ohms"), "0.4M")?;
    browser.see(&id("forbidden"))?;
    browser.tap(&id("over-insulation-ohms"))?;
    browser.not_see(&id("forbidden"))?;
    browser.fill(&field("plug-ohms"), "0.3")?;
    browser.see(&id("forbidden"))?;
    ensure!(browser.text(&id("verdict-plug-ohms"))?.to_lowercase().contains("short"));
    browser.fill(&field("plug-ohms"), "60")?;
    browser.not_see(&id("forbidden"))?;
    browser.tap(&id("looked-over"))?;
    browser.not_see(&id("skipped"))?;
    for text in ["-1", "a lot"] {
        browser.fill(&field("plug-ohms"), text)?;
        browser.see(&message("plug-ohms"))?;
    }
    browser.fill(&field("plug-ohms"), "")?;
    browser.not_see(&message("plug-ohms"))?;

    browser.tap(&id("step-after"))?;
    browser.see(&id("measure-first"))?;
    browser.fill(&field("reservoir-farads"), "100 µF")?;
    browser.see(&id("waits"))?;
    ensure!(!browser.sees(&id("power-off"))?, "nobody knows how long it takes without a bleed resistor");
    browser.fill(&field("bleed-ohms"), "220k")?;
    browser.tap(&id("power-off"))?;
    let left = || -> Result<f64> { Ok(browser.attribute(&id("countdown"), "data-seconds")?.parse()?) };
    // t = R C ln(V0 / 34 V), both a fifth and a tenth large: 1.32 * 22 s * ln(358 V / 34 V).
    let whole = 1.32 * 22.0 * (1.1 * 230.0 * std::f64::consts::SQRT_2 / 34.0).ln();
    ensure!((left()? - whole).abs() < 3.0, "{} s, not {whole}", left()?);
    let first = left()?;
    browser.until(&format!(
        "return +document.querySelector('[data-testid=countdown]').dataset.seconds <= {} ",
        first - 2.0
    ))?;
    // The clock goes on while the page is away.
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    // The rungs come in above it.
    browser.until("return document.querySelector('[data-testid=ladder]').dataset.busy === 'false'")?;
    browser.tap(&id("step-after"))?;
    ensure!(left()? <= first - 2.0 && left()? > first - 60.0, "{} s after {first} s", left()?);
    ensure!(browser.text(&id("measure-first"))?.contains("Measure before touching"));
    page::no_complaints(&browser)
}

#[test]
fn every_step_passes_the_accessibility_checker_in_both_themes() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    climb(&Finger::new(&browser))?;
    let steps = ["step-lamps", "step-checks", "step-rung-0", "step-rung-1", "step-mains", "step-after"];
    for step in steps {
        if browser.attribute(&id(step), "aria-expanded")? == "false" {
            browser.tap(&id(step))?;
        }
        if step == "step-lamps" {
            browser.tap(&id("another-lamp"))?;
        }
        if step == "step-after" {
            browser.fill(&field("reservoir-farads"), "100u")?;
            browser.fill(&field("bleed-ohms"), "220k")?;
        }
        look(&browser, step)?;
        if step == "step-lamps" {
            browser.tap("[data-testid=measure] summary")?;
            browser.tap(&id("measure-0"))?;
            browser.see(&id("form-measure"))?;
            browser.fill(&field("spare-lamp-cold-ohms"), "62")?;
            browser.fill(&field("spare-point-0-volts"), "40")?;
            browser.fill(&field("spare-point-0-amps"), "0.105")?;
            browser.see(&id("shrinkage"))?;
            look(&browser, "ladder-measure")?;
            browser.tap(&id("unknown-lamp"))?;
            browser.fill(&field("unknown-cold-ohms"), "62")?;
            browser.fill(&field("unknown-volts"), "100")?;
            browser.fill(&field("unknown-amps"), "0.17")?;
            browser.see(&id("fit-0"))?;
            look(&browser, "ladder-unknown")?;
            browser.tap(&id("unknown-lamp"))?;
        }
    }
    page::no_complaints(&browser)
}

/// Checks and pictures the screen as it stands, in each size and theme, and whether a thumb can hit what is on it.
fn look(browser: &Browser, screen: &str) -> Result<()> {
    browser.script("document.querySelector('[aria-expanded=true].step-head').scrollIntoView()")?;
    accessibility::look(browser, screen)?;
    accessibility::ensure_thumbs(browser, screen)
}
