//! Readings in Chromium: typed and tapped, judged, kept over a reload, and refused where they cannot be.

use anyhow::{Context, Result, ensure};
use lampladder_core::condition::Condition;
use lampladder_core::diagnosis::{Forecast, diagnose};
use lampladder_core::expect::prospect;
use lampladder_core::readings::{
    Kind, Meter, Reading, Readings, Response, Taking, growth, interpret, usual_waveform,
};
use lampladder_core::setup::Setup;
use lampladder_tests::browser::Browser;
use lampladder_tests::page::{self, message};
use lampladder_tests::{accessibility, surroundings};
use serde_json::json;

const TAB: &str = "[data-testid=tab-seen]";
const VERDICT: &str = "[data-testid=verdict]";
const BECAUSE: &str = "[data-testid=because]";
const KEPT: &str = "[data-testid=kept]";
const NOTE: &str = "[data-testid=note-text]";
const CLASH: &str = "[data-testid=clash]";

fn part(testid: &str) -> String {
    format!("[data-testid={testid}]")
}

/// Waits until the answer is that to what is typed.
fn ready(browser: &Browser) -> Result<()> {
    browser.see("[data-testid=seen][data-busy=false]")
}

fn read(browser: &Browser, kind: Kind, text: &str) -> Result<()> {
    let name = format!("read-{}", kind.field().name().replace('_', "-"));
    browser.fill(&page::field(&name), text)
}

/// The sentence and what it rests on, once they are the newest; they never promise anything.
fn sentence(browser: &Browser) -> Result<String> {
    ready(browser)?;
    let text = format!("{} {}", browser.text(VERDICT)?, browser.text(BECAUSE)?);
    ensure!(!text.to_lowercase().contains("safe"), "{text}");
    Ok(text)
}

fn ensure_says(browser: &Browser, words: &[&str]) -> Result<()> {
    let text = sentence(browser)?;
    for word in words {
        ensure!(text.contains(word), "no `{word}` in: {text}");
    }
    Ok(())
}

fn number(browser: &Browser, css: &str, name: &str) -> Result<f64> {
    let text = browser.attribute(css, name)?;
    text.parse().with_context(|| format!("{css} {name} is `{text}`"))
}

fn start(url: &str) -> Result<Browser> {
    let browser = Browser::start()?;
    page::enter(&browser, url)?;
    browser.tap(TAB)?;
    ready(&browser)?;
    Ok(browser)
}

#[test]
fn a_healthy_a_shorted_and_a_hunting_set_get_their_sentences() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    ensure_says(&browser, &["Measure first", "Nothing is read", "Next:"])?;

    let setup = Setup::example()?;
    let shown = prospect(&setup, Condition::Healthy)?.shown.context("settles")?;
    let (bank, load) = (shown.bank_volts.value.round(), shown.load_volts.value.round());
    read(&browser, Kind::SupplyVolts, "230 V")?;
    read(&browser, Kind::BankVolts, &format!("{bank},0"))?;
    read(&browser, Kind::LoadVolts, &format!(" {load} V"))?;
    browser.tap(&part("behaves-flash-then-dim"))?;
    ensure_says(&browser, &["Go on", "healthy"])?;
    browser.picture("seen-healthy")?;

    // Chromium computes what the core computes natively.
    let mut readings =
        Readings::new(Taking { waveform: usual_waveform(setup.plate.family()), ..Taking::default() })?;
    for (kind, value) in [(Kind::SupplyVolts, 230.0), (Kind::BankVolts, bank), (Kind::LoadVolts, load)] {
        readings.add(Reading::new(kind, value, Meter::usual())?);
    }
    readings.set_behaviour(Some(lampladder_core::readings::Behaviour::FlashThenDim));
    let found = interpret(&setup.bank, &readings, growth(setup.plate.family())).context("one set")?;
    for (name, estimate) in [
        ("number-amps", found.amps),
        ("number-watts", found.load_watts),
        ("number-power-factor", found.load_power_factor),
        ("number-full-watts", found.full_watts),
    ] {
        let band = estimate.context("known")?.band;
        for (end, mine) in [("data-value", band.value), ("data-low", band.low), ("data-high", band.high)] {
            let shown = number(&browser, &part(name), end)?;
            ensure!((shown - mine).abs() <= 0.501e-9, "{name} {end}: page {shown}, core {mine}");
        }
    }
    let forecast = Forecast::complete(&setup, readings.get(Kind::SupplyVolts), Response::TrueRms)?;
    let leader = diagnose(&forecast, &readings).ranking[0];
    let weight = number(&browser, &part("weight-healthy"), "data-value")?;
    ensure!(leader.condition == Condition::Healthy && (weight - leader.weight).abs() <= 1e-6, "{weight}");

    read(&browser, Kind::BankVolts, "231")?;
    read(&browser, Kind::LoadVolts, "0.3")?;
    browser.tap(&part("behaves-steady"))?;
    ensure_says(&browser, &["Stop", "unplug", "shorted"])?;
    browser.picture("seen-shorted")?;

    browser.tap(&part("empty"))?;
    browser.tap("[data-testid=tab-expect]")?;
    page::fill(&browser, "plate-watts", "90")?;
    browser.tap(&part("choose-family"))?;
    browser.tap(&part("family-switch-mode"))?;
    page::close(&browser)?;
    browser.tap(TAB)?;
    browser.tap(&part("behaves-pulsing"))?;
    ensure_says(&browser, &["Measure first", "starts again", "larger lamps"])?;
    browser.picture("seen-hunting")?;
    page::no_complaints(&browser)
}

#[test]
fn a_kept_reading_is_there_after_a_reload_and_each_change_can_be_taken_back() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    read(&browser, Kind::BankVolts, "28,5 V")?;
    browser.tap(&part("look-dull-red"))?;
    ready(&browser)?;
    browser.tap(&part("keep"))?;
    browser.see(KEPT)?;
    browser.fill(NOTE, "hums a little")?;
    // The number of the test's own reading of the store, once it has both.
    stored(&browser, "hums a little", 1)?;
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    browser.see(KEPT)?;
    let text = browser.text(KEPT)?;
    ensure!(text.contains("28.5") && text.contains("dull red") && text.contains("60"), "{text}");
    ensure!(browser.value(NOTE)? == "hums a little");

    browser.tap(&part("delete"))?;
    browser.not_see(KEPT)?;
    stored(&browser, "", 0)?;
    browser.tap(&part("undo"))?;
    browser.see(KEPT)?;
    stored(&browser, "hums a little", 1)?;
    browser.picture("seen-kept")?;

    // The meter is chosen once.
    browser.tap(&part("meter"))?;
    browser.tap(&part("meter-1"))?;
    browser.tap(&part("averaging"))?;
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    ensure_says(&browser, &["0.8 % + 3", "averaging"])?;
    page::no_complaints(&browser)
}

/// All records as they are in the database.
const ALL_STORED: &str = "const done = arguments[arguments.length - 1]; const open = indexedDB.open('lampladder.log ' + new URL('./', location.href).pathname); \
    open.onerror = () => done(null); \
    open.onsuccess = () => { const db = open.result; \
      const all = db.transaction('readings').objectStore('readings').getAll(); \
      all.onsuccess = () => { db.close(); done(all.result) } }";

/// Waits until the database holds so many records, of which the first has this note.
fn stored(browser: &Browser, note: &str, count: usize) -> Result<()> {
    let begun = std::time::Instant::now();
    loop {
        let all = browser.script_later(ALL_STORED, Vec::new())?;
        let all = all.as_array().context("a list")?;
        if all.len() == count && all.first().is_none_or(|one| one["note"] == note) {
            return Ok(());
        }
        ensure!(begun.elapsed() < lampladder_tests::browser::PATIENCE, "the database holds {all:?}");
    }
}

#[test]
fn records_of_a_newer_page_are_left_alone_and_told_of() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    read(&browser, Kind::BankVolts, "28")?;
    browser.tap(&part("keep"))?;
    stored(&browser, "", 1)?;
    let put = "const done = arguments[arguments.length - 1]; const open = indexedDB.open('lampladder.log ' + new URL('./', location.href).pathname); \
        open.onsuccess = () => { const db = open.result; const t = db.transaction('readings', 'readwrite'); \
          t.objectStore('readings').put({version: 2, id: 5, wonder: [1, 2]}); \
          t.objectStore('readings').put({version: 1, id: 6, damaged: true}); \
          t.oncomplete = () => { db.close(); done(true) } }";
    browser.script_later(put, Vec::new())?;
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    browser.see(&part("log-foreign"))?;
    ensure!(browser.text(&part("log-foreign"))?.contains('2'));
    browser.tap(&part("delete"))?;
    browser.not_see(KEPT)?;
    stored(&browser, "", 2).or_else(|_| stored_foreign(&browser))
}

fn stored_foreign(browser: &Browser) -> Result<()> {
    let all = browser.script_later(ALL_STORED, Vec::new())?;
    ensure!(all[0]["wonder"] == json!([1, 2]) && all[1]["damaged"] == true && all[2].is_null(), "{all}");
    Ok(())
}

#[test]
fn a_full_phone_is_said_to_be_full_and_the_log_stays_on_the_page() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    let origin = browser.script("return location.origin")?;
    browser.devtools("Storage.overrideQuotaForOrigin", json!({"origin": origin, "quotaSize": 1}))?;
    read(&browser, Kind::BankVolts, "28")?;
    browser.tap(&part("keep"))?;
    browser.see(KEPT)?;
    browser.see(&part("log-trouble"))?;
    let text = browser.text(&part("log-trouble"))?;
    ensure!(text.contains("room"), "{text}");
    browser.picture("seen-full")?;
    browser.devtools("Storage.overrideQuotaForOrigin", json!({"origin": origin}))?;
    // The next change takes what was left with it.
    browser.fill(NOTE, "x")?;
    browser.not_see(&part("log-trouble"))?;
    stored(&browser, "x", 1)
}

#[test]
fn bad_readings_are_answered_where_they_stand_and_stay() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    for text in ["sixty", "-5", "1e300", "60 A", "1..5"] {
        read(&browser, Kind::BankVolts, text)?;
        browser.see(&message("read-bank-volts")).with_context(|| format!("`{text}`"))?;
        ensure!(browser.value(&page::field("read-bank-volts"))? == text);
        ensure!(sentence(&browser)?.contains("Left out"));
    }
    read(&browser, Kind::BankVolts, "")?;
    browser.not_see(&message("read-bank-volts"))?;

    // Amperes or milliamperes.
    read(&browser, Kind::Amps, "160")?;
    browser.see(&message("read-amps"))?;
    browser.picture("seen-unit")?;
    ensure!(browser.value(&page::field("read-amps"))? == "160");
    browser.tap(&part("meaning-1"))?;
    browser.not_see(&message("read-amps"))?;
    ensure!(browser.value(&page::field("read-amps"))? == "160 mA");
    ready(&browser)?;
    let amps = number(&browser, &part("number-amps"), "data-value")?;
    ensure!((amps - 0.16).abs() < 1e-3, "{amps}");

    // More across the lamps than there is.
    read(&browser, Kind::Amps, "")?;
    read(&browser, Kind::SupplyVolts, "230")?;
    read(&browser, Kind::BankVolts, "290")?;
    ensure_says(&browser, &["Measure first", "cannot belong together"])?;
    let text = browser.text(CLASH)?;
    ensure!(text.contains("290") && text.contains("230"), "{text}");
    read(&browser, Kind::BankVolts, "60")?;
    read(&browser, Kind::LoadVolts, "60")?;
    ensure_says(&browser, &["cannot belong together"])?;
    browser.until("return document.querySelector('[data-testid=clash]').innerText.includes('120')")?;
    browser.picture("seen-clash")?;
    read(&browser, Kind::LoadVolts, "200")?;
    browser.not_see(CLASH)?;

    // No meter is exact.
    browser.tap(&part("meter"))?;
    browser.fill(&page::field("meter-percent"), "0")?;
    browser.see(&message("meter-percent"))?;
    ensure!(browser.value(&page::field("meter-percent"))? == "0");
    browser.fill(&page::field("meter-percent"), "0,5 %")?;
    page::no_complaints(&browser)
}

#[test]
fn the_panel_passes_the_accessibility_checker() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    accessibility::look(&browser, "seen-empty")?;
    read(&browser, Kind::SupplyVolts, "230")?;
    read(&browser, Kind::BankVolts, "67")?;
    read(&browser, Kind::Amps, "160")?;
    browser.tap(&part("look-orange"))?;
    browser.tap(&part("meter"))?;
    ready(&browser)?;
    browser.tap(&part("keep"))?;
    browser.see(KEPT)?;
    accessibility::look(&browser, "seen-full-page")?;
    accessibility::ensure_thumbs(&browser, "seen")?;
    for (name, css) in [("look", "look-dark"), ("weights", "next"), ("log", "kept")] {
        let css = part(css);
        for (width, height) in [(360, 640), (1280, 800)] {
            browser.resize(width, height)?;
            browser.script(&format!(
                "document.querySelector('{css}').scrollIntoView({{block: 'center'}}); return true"
            ))?;
            browser.picture(&format!("seen-{name}-{width}"))?;
        }
    }
    Ok(())
}
