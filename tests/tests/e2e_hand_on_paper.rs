//! What is handed on outside of the page: the printed card, and kept readings in files and back.

use std::fs;
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};

use anyhow::{Context, Result, ensure};
use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use lampladder_core::family::Family;
use lampladder_core::hand_on::HandedOn;
use lampladder_core::ladder::{self, Limits};
use lampladder_core::lamp::Lamp;
use lampladder_core::link::{self, Spelling};
use lampladder_core::plate::Plate;
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_tests::browser::{Browser, PATIENCE};
use lampladder_tests::folder::Folder;
use lampladder_tests::page::{self, field};
use lampladder_tests::surroundings;
use serde_json::{Value, json};

const TAB: &str = "[data-testid=tab-hand-on]";
const TOLD: &str = "[data-testid=file-told]";
const ERROR: &str = "[data-testid=file-error]";
const KEPT: &str = "[data-testid=kept]";

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

fn start(url: &str) -> Result<Browser> {
    let browser = Browser::start()?;
    page::enter(&browser, url)?;
    Ok(browser)
}

/// The card as it is printed: pages, and width and height of the first in points.
fn printed(browser: &Browser, name: &str) -> Result<(usize, [f64; 2])> {
    let answer =
        browser.devtools("Page.printToPDF", json!({"preferCSSPageSize": true, "printBackground": true}))?;
    let bytes = STANDARD.decode(answer["data"].as_str().context("a document")?)?;
    if let Some(folder) = std::env::var_os("LAMPLADDER_SHOTS") {
        fs::write(Path::new(&folder).join(format!("{name}.pdf")), &bytes)?;
    }
    // Chromium leaves the tree of pages uncompressed: one object a page, each with its size.
    let text = String::from_utf8_lossy(&bytes);
    let pages = text.matches("/Type /Page\n").count();
    let boxed = text.split_once("/MediaBox [").context("a size")?.1.split(']').next().unwrap_or_default();
    let sides: Vec<f64> = boxed.split_whitespace().map(str::parse).collect::<Result<_, _>>()?;
    ensure!(sides.len() == 4, "{boxed}");
    Ok((pages, [sides[2], sides[3]]))
}

/// A5 in points, and how far Chromium rounds.
const A5: [f64; 2] = [148.0 / 25.4 * 72.0, 210.0 / 25.4 * 72.0];
const POINT: f64 = 1.0;

fn ensure_one_page(browser: &Browser, name: &str) -> Result<()> {
    let (pages, size) = printed(browser, name)?;
    ensure!(pages == 1, "{name}: {pages} pages");
    ensure!(
        size.iter().zip(A5).all(|(side, a5)| (side - a5).abs() < POINT),
        "{name}: {size:?} points, not A5"
    );
    Ok(())
}

/// What is to be read on paper.
fn on_paper(browser: &Browser) -> Result<String> {
    browser.devtools("Emulation.setEmulatedMedia", json!({"media": "print"}))?;
    let text = browser.script("return document.body.innerText")?;
    browser.devtools("Emulation.setEmulatedMedia", json!({"media": ""}))?;
    text.as_str().map(ToOwned::to_owned).context("a text")
}

#[test]
fn the_card_is_one_page_with_cautions_set_up_rungs_and_code() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    browser.prefer("dark")?;
    browser.tap(TAB)?;
    browser.see(&id("no-rungs"))?;
    browser.see(&id("code"))?;
    ensure_one_page(&browser, "card-empty")?;

    browser.tap(&id("tab-ladder"))?;
    for lamp in ["size-60-more", "size-60-more", "size-25-more", "size-100-more", "size-100-more"] {
        browser.tap(&id(lamp))?;
    }
    browser.tap(TAB)?;
    browser.not_see(&id("no-rungs"))?;
    browser.see(&id("code"))?;
    ensure!(!browser.sees(&id("card"))?, "the card is for paper only");
    ensure_one_page(&browser, "card")?;
    let text = on_paper(&browser)?;
    // Nothing of the page but the card.
    for other in ["Expect", "Print the card", "http", "Copy", "Overloaded"] {
        ensure!(!text.contains(other), "`{other}` is printed: {text}");
    }
    for caution in
        ["does not isolate", "residual-current device", "Capacitors stay charged", "microwave", "competent"]
    {
        ensure!(text.contains(caution), "the card does not say `{caution}`: {text}");
    }
    ensure!(
        text.contains("Transformer set, 45\u{a0}W, plate 230\u{a0}V, on 230\u{a0}V 50\u{a0}Hz"),
        "{text}"
    );

    // The rungs are core's, with what healthy equipment shows.
    let mut stock = Stock::default();
    for (watts, count) in [(60.0, 2.0), (25.0, 1.0), (100.0, 2.0)] {
        stock.add(Lamp::new(230.0, watts)?, count)?;
    }
    let plate = Plate::new(Family::TransformerSupply, 230.0, 45.0, None)?;
    let planned = ladder::plan(&Supply::new(230.0, 50.0, 0.0)?, &stock, &plate, &Limits::default())?;
    let rows = browser.script(
        "return [...document.querySelectorAll('[data-testid=card] tbody tr')].map((r) => [...r.children].map((c) => c.textContent))",
    )?;
    let rows = rows.as_array().context("rows")?;
    ensure!(rows.len() == planned.rungs.len() + 1, "{} rows for {} rungs", rows.len(), planned.rungs.len());
    for (row, rung) in rows.iter().zip(&planned.rungs) {
        let shown = rung.healthy.shown.as_ref().context("it settles")?;
        for (column, band) in [(3, &shown.bank_volts), (4, &shown.amps)] {
            let cell = row[column].as_str().context("a cell")?;
            let (number, unit) = cell.split_once('\u{a0}').context("a unit")?;
            let scale = if unit.starts_with('m') { 1e-3 } else { 1.0 };
            let ends: Vec<f64> = number.split('\u{2013}').map(str::parse).collect::<Result<_, _>>()?;
            // Written with the digits that the band bears: off by half of the last at most, 5 % of the band's end.
            let near = |written: f64, end: f64| (written * scale - end).abs() <= 0.05 * band.high;
            ensure!(
                near(ends[0], band.low) && near(*ends.last().context("an end")?, band.high),
                "{cell}: {band:?}"
            );
        }
        ensure!((6..9).all(|box_| row[box_] == ""), "the boxes are not empty: {row}");
    }
    let covers = browser.script(
        "const c = document.querySelector('[data-testid=card] svg'); return c.getAttribute('viewBox')",
    )?;
    ensure!(covers.is_string(), "there is no code on the card");

    // The longest ladder that hundreds of stocks and kinds of equipment came to: five rungs.
    let lamps = [15.0, 100.0, 200.0].map(|watts| Lamp::new(230.0, watts).map(|lamp| (lamp, 4.0)));
    let stock = Stock::new(lamps.into_iter().collect::<Result<Vec<_>, _>>()?)?;
    let plate = Plate::new(Family::CrtSet, 230.0, 20.0, None)?;
    let handed = HandedOn { stock: Some(stock), ..HandedOn::only(Setup { plate, ..Setup::example()? }) };
    browser.open("about:blank")?;
    browser.open(&format!("{}#{}", site.url(), link::encode_all(&handed, Spelling::Letters)?))?;
    page::accept(&browser)?;
    browser.see(page::NOTE)?;
    browser.tap(TAB)?;
    browser.until("return document.querySelectorAll('[data-testid=card] tbody tr').length === 6")?;
    browser.see(&id("code"))?;
    ensure_one_page(&browser, "card-long")?;
    // Other languages take more room.
    for tag in ["de", "fr", "es"] {
        browser.choose(&id("language"), tag)?;
        browser.until(&format!("return document.documentElement.lang === '{tag}'"))?;
        browser.until("return document.querySelectorAll('[data-testid=card] tbody tr').length === 6")?;
        ensure_one_page(&browser, &format!("card-long-{tag}"))?;
        browser.script("window.scrollTo(0, 0); return 1")?;
        browser.picture(&format!("hand-on-{tag}"))?;
    }
    page::no_complaints(&browser)
}

fn keep(browser: &Browser, volts: &str, note: &str) -> Result<()> {
    browser.tap(&id("tab-seen"))?;
    let before = browser.script(&format!("return document.querySelectorAll('{KEPT}').length"))?;
    browser.fill(&field("read-bank-volts"), volts)?;
    browser.until("return document.querySelector('[data-testid=seen]').dataset.busy === 'false'")?;
    browser.tap(&id("keep"))?;
    browser.until(&format!("return document.querySelectorAll('{KEPT}').length > {before}"))?;
    browser.fill(&id("note-text"), note)
}

/// Taps a button that saves a file, and waits for it: the browser makes an empty one first.
fn saved(browser: &Browser, folder: &Folder, button: &str, name: &str) -> Result<PathBuf> {
    let path = folder.path().join(name);
    browser.devtools(
        "Browser.setDownloadBehavior",
        json!({"behavior": "allow", "downloadPath": folder.path().display().to_string()}),
    )?;
    browser.tap(&id(button))?;
    let begun = Instant::now();
    while fs::metadata(&path).map_or(0, |file| file.len()) == 0 {
        ensure!(begun.elapsed() < PATIENCE, "{name} is not saved");
        std::thread::sleep(Duration::from_millis(20));
    }
    Ok(path)
}

fn count(browser: &Browser, expected: usize) -> Result<()> {
    browser.tap(&id("tab-seen"))?;
    browser.until(&format!("return document.querySelectorAll('{KEPT}').length === {expected}"))
}

#[test]
fn readings_go_into_files_and_come_back_once() -> Result<()> {
    let mut site = surroundings::site()?;
    let url = site.url();
    let browser = start(&url)?;
    let folder = Folder::new("files")?;
    browser.tap(TAB)?;
    ensure!(browser.attribute(&id("save-csv"), "disabled").is_ok(), "there is nothing to save yet");
    keep(&browser, "28,5 V", "hums, \"a little\"")?;
    keep(&browser, "60", "=SUM(A1)")?;
    browser.until_offline_ready()?;
    let other = start(&url)?;
    keep(&other, "99", "my own")?;
    other.until_offline_ready()?;
    site.stop();
    browser.tap(TAB)?;
    let table = fs::read_to_string(saved(&browser, &folder, "save-csv", "lampladder-readings.csv")?)?;
    let mut reader = csv::Reader::from_reader(table.as_bytes());
    let heads = reader.headers()?.clone();
    let rows: Vec<csv::StringRecord> = reader.records().collect::<Result<_, _>>()?;
    let cell = |row: usize, head: &str| -> Result<String> {
        Ok(rows[row][heads.iter().position(|other| other == head).context("a head")?].to_owned())
    };
    ensure!(rows.len() == 2, "{table}");
    ensure!(cell(1, "read_lamps_V")? == "28.5" && cell(0, "read_lamps_V")? == "60", "{table}");
    ensure!(cell(1, "note")? == "hums, \"a little\"" && cell(0, "note")? == "'=SUM(A1)", "{table}");
    ensure!(cell(0, "kept_utc")?.ends_with('Z') && cell(0, "lamps")? == "60 W 230 V", "{table}");

    let file = saved(&browser, &folder, "save-json", "lampladder-readings.json")?;
    let json: Value = serde_json::from_str(&fs::read_to_string(&file)?)?;
    ensure!(json["format"] == "lampladder-readings" && json["version"] == 1, "{json}");
    ensure!(json["readings"].as_array().context("a list")?.len() == 2, "{json}");

    // On another phone, twice.
    for told in ["added: 2. Here already: 0", "added: 0. Here already: 2"] {
        other.tap(TAB)?;
        other.choose_file(&id("file"), &file)?;
        other.until(&format!("return document.querySelector('{TOLD}').innerText.includes('{told}')"))?;
        count(&other, 3)?;
    }
    other.reload()?;
    page::accept(&other)?;
    count(&other, 3)?;
    page::no_complaints(&browser)?;
    page::no_complaints(&other)
}

#[test]
fn bad_files_are_answered_beside_the_button_and_change_nothing() -> Result<()> {
    let site = surroundings::site()?;
    let browser = start(&site.url())?;
    let folder = Folder::new("files")?;
    keep(&browser, "28", "")?;
    browser.tap(TAB)?;
    let good = saved(&browser, &folder, "save-json", "lampladder-readings.json")?;
    let good: Value = serde_json::from_str(&fs::read_to_string(good)?)?;
    let one = &good["readings"][0];
    let changed = |change: &dyn Fn(&mut Value)| {
        let mut one = one.clone();
        change(&mut one);
        json!({"format": "lampladder-readings", "version": 1, "readings": [one]}).to_string()
    };
    let cases: Vec<(&str, String, &str)> = vec![
        ("foreign", json!({"readings": [1, 2]}).to_string(), "no readings of this page"),
        ("list", json!([one]).to_string(), "no readings of this page"),
        ("nothing", String::from("null"), "no readings of this page"),
        ("empty", String::new(), "no whole JSON"),
        ("cut", good.to_string()[..60].to_owned(), "no whole JSON"),
        ("binary", String::from("\u{0}\u{1}PNG"), "no whole JSON"),
        (
            "newer",
            json!({"format": "lampladder-readings", "version": 2, "readings": []}).to_string(),
            "newer version",
        ),
        ("record-newer", changed(&|one| one["version"] = json!(2)), "newer version"),
        ("huge-number", changed(&|one| one["numbers"][0][1] = json!(1e300)), "1000\u{a0}V"),
        ("negative", changed(&|one| one["numbers"][0][1] = json!(-4)), "1000\u{a0}V"),
        ("text", changed(&|one| one["numbers"][0][1] = json!("much")), "something is missing"),
        ("no-meter", changed(&|one| one["meter"] = Value::Null), "something is missing"),
        ("exact-meter", changed(&|one| one["meter"]["percent"] = json!(0)), "30\u{a0}%"),
        ("bench", changed(&|one| one["setup"] = json!("1junk")), "bench cannot be read"),
        ("time", changed(&|one| one["id"] = json!(-1)), "out of range"),
        (
            "not-a-record",
            json!({"format": "lampladder-readings", "version": 1, "readings": [5]}).to_string(),
            "something is missing",
        ),
    ];
    for (name, text, told) in cases {
        let path = folder.path().join(format!("{name}.json"));
        fs::write(&path, text)?;
        browser.choose_file(&id("file"), &path)?;
        browser
            .until(&format!(
                "const e = document.querySelector('{ERROR}'); return e && e.innerText.includes('{told}')"
            ))
            .with_context(|| format!("{name}: {:?}", browser.text(TOLD)))?;
        // A good one in between, so that the next message is a new one.
        let path = folder.path().join("lampladder-readings.json");
        browser.choose_file(&id("file"), &path)?;
        browser
            .until(&format!("return document.querySelector('{TOLD}').innerText.includes('already: 1')"))?;
    }
    // 50 MB, and a bad reading between good ones.
    let large = folder.path().join("large.json");
    fs::File::create(&large)?.set_len(50_000_000)?;
    browser.choose_file(&id("file"), &large)?;
    browser.until(&format!(
        "const e = document.querySelector('{ERROR}'); return e && e.innerText.includes('50 MB')"
    ))?;
    browser.picture("hand-on-large-file")?;
    count(&browser, 1)?;
    browser.tap(TAB)?;
    let mixed = folder.path().join("mixed.json");
    let other = |id: u32, volts: f64| {
        let mut one = one.clone();
        one["id"] = json!(id);
        one["numbers"][0][1] = json!(volts);
        one
    };
    let readings = json!([other(1, 30.0), other(2, 1e9), other(3, 31.0)]);
    fs::write(
        &mixed,
        json!({"format": "lampladder-readings", "version": 1, "readings": readings}).to_string(),
    )?;
    browser.choose_file(&id("file"), &mixed)?;
    browser.until(&format!("return document.querySelector('{TOLD}').innerText.includes('added: 2')"))?;
    ensure!(
        browser.text(ERROR)?.contains("Not taken: 1. The first of these is reading 2"),
        "{}",
        browser.text(ERROR)?
    );
    browser.picture("hand-on-mixed-file")?;
    count(&browser, 3)?;
    page::no_complaints(&browser)
}
