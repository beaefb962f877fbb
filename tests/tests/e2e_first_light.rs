//! The main job, as a person does it: cautions, a lamp, a rating plate, an answer; then the network goes away.

use anyhow::{Context, Result, ensure};
use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::expect::{Shown, prospect};
use lampladder_core::family::Family;
use lampladder_core::lamp::Lamp;
use lampladder_core::link;
use lampladder_core::plate::Plate;
use lampladder_core::setup::Setup;
use lampladder_core::supply::Supply;
use lampladder_tests::browser::Browser;
use lampladder_tests::numbers::{ensure_nth_shown, ensure_shown};
use lampladder_tests::page::{self, ACCEPT, AMPS, CAUTIONS, OPEN_CAUTIONS, REMINDER, VOLTAGES, cell};
use lampladder_tests::surroundings;

fn setup(lamp_watts: f64, plate_watts: f64) -> Result<Setup> {
    Ok(Setup {
        supply: Supply::new(230.0, 50.0, 0.0)?,
        bank: Bank::single(Lamp::new(230.0, lamp_watts)?),
        plate: Plate::new(Family::TransformerSupply, 230.0, plate_watts, None)?,
    })
}

/// What the core says that healthy equipment shows.
fn healthy(setup: &Setup) -> Result<Shown> {
    prospect(setup, Condition::Healthy)?.shown.context("the core finds a steady state")
}

/// Fails unless the page's main answer is the core's.
fn ensure_answers(browser: &Browser, setup: &Setup) -> Result<()> {
    let shown = healthy(setup)?;
    ensure_shown(&browser.text(AMPS)?, shown.amps.value, "A")?;
    let voltages = browser.text(VOLTAGES)?;
    ensure_nth_shown(&voltages, 0, shown.bank_volts.value, "V")?;
    ensure_nth_shown(&voltages, 1, shown.load_volts.value, "V")?;
    for condition in [Condition::Healthy, Condition::Overloaded, Condition::Shorted] {
        let shown = prospect(setup, condition)?.shown.context("the core finds a steady state")?;
        let cell = cell(condition.name());
        let text = browser.text(&cell)?;
        ensure_shown(&text, shown.bank_volts.value, "V")?;
        ensure_shown(&text, shown.amps.value, "A")?;
        for (name, value) in [
            ("data-amps", shown.amps.value),
            ("data-bank-volts", shown.bank_volts.value),
            ("data-load-volts", shown.load_volts.value),
        ] {
            let held: f64 = browser.attribute(&cell, name)?.parse()?;
            // The same core in WebAssembly gives the same bits; the attribute has nine decimals of them.
            ensure!((held - value).abs() <= 0.501e-9, "{condition:?} {name}: {held}, the core says {value}");
        }
    }
    Ok(())
}

/// Types the numbers of a set-up with one lamp.
fn type_in(browser: &Browser, setup: &Setup) -> Result<()> {
    let lamp = &setup.bank.groups()[0][0];
    for (name, value) in [
        ("supply-volts", setup.supply.volts()),
        ("lamp-volts", lamp.rated_volts()),
        ("lamp-watts", lamp.rated_watts()),
        ("plate-volts", setup.plate.volts()),
        ("plate-watts", setup.plate.watts()),
    ] {
        page::fill(browser, name, &value.to_string())?;
    }
    page::close(browser)
}

fn linked(browser: &Browser) -> Result<Setup> {
    let url = browser.url()?;
    let (_, fragment) = url.split_once('#').with_context(|| format!("{url} has no fragment"))?;
    link::decode(fragment).with_context(|| format!("the core cannot read `{fragment}`"))
}

#[test]
fn cautions_come_before_everything_and_need_no_program() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.forbid_scripts(true)?;
    browser.open(&site.url())?;
    let text = browser.words(CAUTIONS)?.to_lowercase();
    for word in ["isolat", "shock", "fuse", "capacitor", "unattended", "microwave"] {
        ensure!(text.contains(word), "the cautions do not speak of `{word}` without the program: {text}");
    }
    browser.picture("cautions-without-program")?;

    browser.forbid_scripts(false)?;
    browser.open(&site.url())?;
    browser.see(CAUTIONS)?;
    browser.see(ACCEPT)?;
    ensure!(!browser.sees(AMPS)?, "an answer shows before the cautions are accepted");
    browser.picture("cautions")?;
    browser.tap(ACCEPT)?;
    browser.not_see(CAUTIONS)?;
    browser.see(AMPS)?;

    // One tap away, from a line that never leaves.
    browser.see(REMINDER)?;
    browser.script("window.scrollTo(0, document.documentElement.scrollHeight)")?;
    ensure!(browser.is_in_window(REMINDER)?, "the reminder scrolls out of view");
    ensure!(browser.is_in_window(OPEN_CAUTIONS)?, "the way back to the cautions scrolls out of view");
    browser.tap(OPEN_CAUTIONS)?;
    browser.see(CAUTIONS)?;
    browser.tap(ACCEPT)?;
    browser.not_see(CAUTIONS)
}

#[test]
fn sixty_watt_lamp_with_a_radio_then_without_a_server() -> Result<()> {
    let mut site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    // Something else first, or a page that knew only its example would do.
    let other = setup(100.0, 80.0)?;
    type_in(&browser, &other)?;
    ensure_answers(&browser, &other)?;
    let radio = setup(60.0, 45.0)?;
    type_in(&browser, &radio)?;
    ensure_answers(&browser, &radio)?;
    ensure!(linked(&browser)? == radio, "the address does not hold the set-up");
    browser.picture("radio")?;

    // A colleague's phone gets the link of another set-up than the page starts with.
    type_in(&browser, &other)?;
    let colleague = Browser::start()?;
    page::enter(&colleague, &browser.url()?)?;
    ensure_answers(&colleague, &other)?;
    ensure!(linked(&colleague)? == other, "the link was changed by opening it");
    ensure!(colleague.value(&page::open_field(&colleague, "lamp-watts")?)?.starts_with("100"));
    drop(colleague);

    type_in(&browser, &radio)?;
    browser.until_offline_ready()?;
    site.stop();
    browser.reload()?;
    page::accept(&browser)?;
    ensure_answers(&browser, &radio).context("after the server stopped")?;
    // Kept on the phone: the bare address, without the link, brings the same set-up.
    browser.open("about:blank")?;
    browser.open(&site.url())?;
    page::accept(&browser)?;
    ensure_answers(&browser, &radio).context("at the bare address, without a server")?;
    type_in(&browser, &other)?;
    ensure_answers(&browser, &other).context("computed without a server")
}

#[test]
fn the_main_answer_needs_no_scrolling_on_a_small_phone() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    let cells = ["healthy", "overloaded", "shorted"].map(cell);
    for part in [AMPS, VOLTAGES, REMINDER, OPEN_CAUTIONS].into_iter().chain(cells.iter().map(String::as_str))
    {
        ensure!(browser.is_in_window(part)?, "{part} is not within 360 x 640");
    }
    let wide = browser.script("return document.documentElement.scrollWidth > window.innerWidth")?;
    ensure!(wide == false, "the page is wider than the phone");
    Ok(())
}

#[test]
fn a_panel_is_shown_from_its_beginning() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    // Every panel is longer than the screen.
    for tab in ["ladder", "seen", "switch-on", "curve", "hand-on", "expect"] {
        browser.until("return document.documentElement.scrollHeight > innerHeight + 100")?;
        browser.script("scrollTo(0, 100); return true")?;
        browser.until("return scrollY > 0")?;
        browser.script(&format!("document.querySelector('[data-testid=tab-{tab}]').click(); return true"))?;
        browser.until("return scrollY === 0")?;
    }
    Ok(())
}
