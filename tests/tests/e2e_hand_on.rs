//! Handing a bench on, without a server: the link, its code read back by a camera's means, and what both open elsewhere.

use anyhow::{Context, Result, ensure};
use lampladder_core::hand_on::{HandedOn, Step};
use lampladder_core::lamp::Lamp;
use lampladder_core::link;
use lampladder_core::readings::Kind;
use lampladder_core::stock::Stock;
use lampladder_tests::browser::{Browser, PATIENCE};
use lampladder_tests::page::{self, NOTE, field};
use lampladder_tests::{accessibility, surroundings};
use serde_json::json;
use xtask::site::Site;

const TAB: &str = "[data-testid=tab-hand-on]";
const LINK: &str = "[data-testid=link]";
const CODE: &str = "[data-testid=code]";
const LADDER: &str = "[data-testid=tab-ladder]";
const GO_ON: &str = "[data-testid=go-on]";
const KEPT: &str = "[data-testid=kept]";

fn id(name: &str) -> String {
    format!("[data-testid={name}]")
}

/// A bench of a 35 W set on its second rung, with two lamps of 60 W and one of 25 W.
fn climb(browser: &Browser) -> Result<()> {
    browser.tap(LADDER)?;
    browser.tap(&id("ladder-equipment"))?;
    browser.see(&field("plate-watts"))?;
    browser.fill(&field("plate-watts"), "35")?;
    page::close(browser)?;
    for lamp in ["size-60-more", "size-60-more", "size-25-more"] {
        browser.tap(&id(lamp))?;
    }
    browser.tap(GO_ON)?;
    browser.see(&field("insulation-ohms"))?;
    browser.fill(&field("insulation-ohms"), "OL")?;
    browser.fill(&field("plug-ohms"), "1k2")?;
    browser.tap(GO_ON)?;
    browser.see(&id("use-bank-0"))?;
    browser.tap(GO_ON)?;
    browser.see(&id("use-bank-1"))?;
    let before = browser.script("return location.hash")?;
    browser.tap(&id("use-bank-1"))?;
    browser.see(&id("in-loop"))?;
    // The address follows with the next frame.
    browser.until(&format!("return location.hash !== {before}"))
}

fn keep_a_reading(browser: &Browser, volts: &str) -> Result<()> {
    browser.tap(&id("tab-seen"))?;
    browser.fill(&field(&format!("read-{}", Kind::BankVolts.field().name().replace('_', "-"))), volts)?;
    browser.until("return document.querySelector('[data-testid=seen]').dataset.busy === 'false'")?;
    browser.tap(&id("keep"))?;
    browser.see(KEPT)?;
    until_stored(browser)
}

/// The link on the panel, once it is the newest.
fn link_on(browser: &Browser) -> Result<String> {
    browser.see(LINK)?;
    browser.value(LINK)
}

fn held(link: &str) -> Result<HandedOn> {
    let (_, fragment) = link.split_once('#').context("a fragment")?;
    Ok(link::decode_all(fragment)?)
}

/// What a camera reads on the screen: every code that is in view.
fn codes(browser: &Browser) -> Result<Vec<String>> {
    let picture = browser.screenshot()?;
    let mut reader = png::Decoder::new(std::io::Cursor::new(picture)).read_info()?;
    let mut bytes = vec![0; reader.output_buffer_size().context("a size")?];
    let info = reader.next_frame(&mut bytes)?;
    let (width, samples) = (usize::try_from(info.width)?, info.color_type.samples());
    let height = usize::try_from(info.height)?;
    let grey = |x: usize, y: usize| bytes[(y * width + x) * samples + 1];
    let mut image = rqrr::PreparedImage::prepare_from_greyscale(width, height, grey);
    image.detect_grids().iter().map(|grid| Ok(grid.decode()?.1)).collect()
}

/// The code on the panel, read from the screen in both lights.
fn scanned(browser: &Browser) -> Result<String> {
    browser.see(CODE)?;
    browser
        .script(&format!("document.querySelector('{CODE}').scrollIntoView({{block: 'center'}}); return 1"))?;
    let mut read = Vec::new();
    for scheme in ["dark", "light"] {
        browser.prefer(scheme)?;
        browser.picture(&format!("hand-on-code-{scheme}"))?;
        read.push(codes(browser)?);
    }
    ensure!(read[0].len() == 1 && read[0] == read[1], "the codes on the screen: {read:?}");
    Ok(read.remove(0).remove(0))
}

/// The name under which the phone keeps something, in JavaScript.
fn key(name: &str) -> String {
    format!("'lampladder.{name} ' + new URL('./', location.href).pathname")
}

/// What the phone keeps under a name, once it does.
fn stored(browser: &Browser, name: &str) -> Result<serde_json::Value> {
    let kept = format!("return localStorage.getItem({})", key(name));
    browser.until(&kept)?;
    browser.script(&kept)
}

/// Waits until the database holds a reading; it must not be opened before the page has made it.
fn until_stored(browser: &Browser) -> Result<()> {
    let count = "const done = arguments[arguments.length - 1]; const name = 'lampladder.log ' + new URL('./', location.href).pathname; indexedDB.databases().then((all) => { \
        if (!all.some((one) => one.name === name)) return done(0); \
        const open = indexedDB.open(name); open.onsuccess = () => { const db = open.result; \
          if (!db.objectStoreNames.contains('readings')) { db.close(); return done(0); } \
          const all = db.transaction('readings').objectStore('readings').count(); \
          all.onsuccess = () => { db.close(); done(all.result) } } })";
    let begun = std::time::Instant::now();
    while browser.script_later(count, Vec::new())? == 0 {
        ensure!(begun.elapsed() < PATIENCE, "no reading is stored");
    }
    Ok(())
}

#[test]
fn a_bench_is_handed_on_without_a_server_and_is_the_same_elsewhere() -> Result<()> {
    let mut site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    climb(&browser)?;
    let address = browser.url()?;
    let (address, fragment) = address.split_once('#').context("a fragment")?;
    let setup = link::decode(fragment)?;
    let port: u16 = url::Url::parse(address)?.port().context("a port")?;
    // From here on nobody serves.
    site.stop();
    browser.reload()?;
    page::accept(&browser)?;
    browser.tap(TAB)?;
    let link = link_on(&browser)?;
    let handed = held(&link)?;
    let stock = Stock::new([(Lamp::new(230.0, 60.0)?, 2.0), (Lamp::new(230.0, 25.0)?, 1.0)])?;
    ensure!(handed.setup == setup && handed.stock == Some(stock) && handed.log.is_empty(), "{handed:?}");
    let position = *handed.position.as_ref().context("a position")?.spec();
    ensure!(position.step == Step::Rung(1), "{position:?}");
    ensure!(position.checks[..3] == [None, Some(f64::INFINITY), Some(1200.0)], "{position:?}");
    ensure!(link.len() <= 200, "{} characters", link.len());

    let code = scanned(&browser)?;
    let version: u8 = browser.attribute(CODE, "data-version")?.parse()?;
    println!("{} characters, version {version} with lamps and position", link.len());
    ensure!(version <= 8, "version {version}");
    ensure!(code.split_once('#').context("a fragment")?.0 == address, "{code}");
    ensure!(held(&code)? == handed, "the code holds something else");
    // Without lamps and position.
    browser.tap(&id("with-ladder"))?;
    browser.until(&format!("return document.querySelector('{LINK}').value.length < {}", link.len()))?;
    let alone = link_on(&browser)?;
    ensure!(held(&alone)? == HandedOn::only(setup), "{alone}");
    println!("{} characters, version {} alone", alone.len(), browser.attribute(CODE, "data-version")?);
    page::no_complaints(&browser)?;

    // A colleague's phone, with lamps and a climb of its own.
    let site = Site::start(&surroundings::page()?, surroundings::PREFIX, port)?;
    let other = Browser::start()?;
    page::enter(&other, &site.url())?;
    other.tap(LADDER)?;
    other.tap(&id("size-100-more"))?;
    other.tap(GO_ON)?;
    let own = ["stock", "climb"].map(|name| stored(&other, name));
    let [Ok(own_stock), Ok(own_climb)] = own else { anyhow::bail!("nothing is stored") };
    other.open("about:blank")?;
    other.open(&code)?;
    page::accept(&other)?;
    other.see(NOTE)?;
    opened(&other)?;
    other.picture("hand-on-opened")?;
    // It is the same after a reload, and nothing of the colleague's own is lost.
    other.reload()?;
    page::accept(&other)?;
    opened(&other)?;
    ensure!(stored(&other, "stock")? == own_stock && stored(&other, "climb")? == own_climb);
    other.tap(&id("use-kept"))?;
    other.not_see(&id("step-rung-1"))?;
    ensure!(other.attribute(&id("step-checks"), "data-progress")? == "now");
    ensure!(stored(&other, "stock")? == own_stock && stored(&other, "climb")? == own_climb);
    // Once something is changed, what the link brought is the colleague's own.
    other.open("about:blank")?;
    other.open(&link)?;
    page::accept(&other)?;
    opened(&other)?;
    other.tap(GO_ON)?;
    other.until(&format!("return localStorage.getItem({}) !== {own_stock}", key("stock")))?;
    // The address follows with the next frame.
    other.until("return location.hash.startsWith('#1')")?;
    other.reload()?;
    page::accept(&other)?;
    other.tap(LADDER)?;
    other.see(&id("step-mains"))?;
    ensure!(other.attribute(&id("step-rung-1"), "data-progress")? == "done");
    page::no_complaints(&other)
}

/// The colleague stands where the other one stood.
fn opened(other: &Browser) -> Result<()> {
    other.tap(LADDER)?;
    other.see(&id("in-loop"))?;
    ensure!(other.attribute(&id("step-rung-1"), "data-progress")? == "now");
    ensure!(other.attribute(&id("step-rung-0"), "data-progress")? == "done");
    Ok(())
}

#[test]
fn kept_readings_go_along_only_if_wanted_and_none_is_lost_or_doubled() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    keep_a_reading(&browser, "28,5 V")?;
    browser.fill(&id("note-text"), "hums a little")?;
    browser.tap(TAB)?;
    ensure!(held(&link_on(&browser)?)?.log.is_empty(), "readings go along unasked");
    let short = link_on(&browser)?.len();
    browser.tap(&id("with-log"))?;
    browser.until(&format!("return document.querySelector('{LINK}').value.length > {short}"))?;
    let link = link_on(&browser)?;
    let kept = held(&link)?.log;
    ensure!(kept.len() == 1 && kept[0].spec().note == "hums a little", "{kept:?}");
    ensure!(kept[0].spec().numbers[Kind::BankVolts as usize] == Some(28.5), "{kept:?}");
    browser.picture("hand-on-with-log")?;

    let other = Browser::start()?;
    page::enter(&other, &site.url())?;
    keep_a_reading(&other, "60")?;
    other.open("about:blank")?;
    other.open(&link)?;
    page::accept(&other)?;
    other.until(&format!(
        "return [...document.querySelectorAll('{NOTE}')].some((e) => e.innerText.includes('here: 1'))"
    ))?;
    for _ in 0..2 {
        other.tap(&id("tab-seen"))?;
        other.until(&format!("return document.querySelectorAll('{KEPT}').length === 2"))?;
        other.reload()?;
        page::accept(&other)?;
    }
    page::no_complaints(&other)
}

#[test]
fn bad_links_say_what_is_wrong_with_them() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.tap(TAB)?;
    let link = link_on(&browser)?;
    for (link, word) in [
        (link[..link.len() - 3].to_owned(), "damaged"),
        (link.replace("#2", "#5"), "newer"),
        (format!("{}#3123", site.url()), "damaged"),
    ] {
        browser.open("about:blank")?;
        browser.open(&link)?;
        page::accept(&browser)?;
        browser.see(NOTE)?;
        ensure!(browser.text(NOTE)?.contains(word), "{link}: {}", browser.text(NOTE)?);
    }
    page::no_complaints(&browser)
}

#[test]
fn copying_and_sharing_are_there_where_the_browser_has_them() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    let permissions = json!({"permissions": ["clipboardReadWrite", "clipboardSanitizedWrite"]});
    browser.devtools("Browser.grantPermissions", permissions)?;
    browser.script(
        "Object.defineProperty(navigator, 'share', {value: undefined, configurable: true}); return 1",
    )?;
    browser.tap(TAB)?;
    let link = link_on(&browser)?;
    ensure!(!browser.sees(&id("share"))?, "there is nothing to share with");
    browser.tap(&id("copy"))?;
    browser.until("return document.querySelector('[data-testid=copied]').innerText === 'Copied.'")?;
    let read = "const done = arguments[arguments.length - 1]; navigator.clipboard.readText().then(done, (e) => done(String(e)))";
    ensure!(browser.script_later(read, Vec::new())? == link.as_str());
    // A browser without a clipboard.
    browser.script(
        "Object.defineProperty(navigator, 'clipboard', {value: undefined, configurable: true}); return 1",
    )?;
    browser.tap(&id("copy"))?;
    browser.until("return document.querySelector('[data-testid=copied]').innerText.includes('selected')")?;
    let selected = format!(
        "const e = document.querySelector('{LINK}'); \
         return document.activeElement === e && e.value.slice(e.selectionStart, e.selectionEnd)"
    );
    ensure!(browser.script(&selected)? == link.as_str());
    // A phone that shares.
    browser.script(
        "Object.defineProperty(navigator, 'share', {value: (what) => { window.shared = what; return Promise.reject(1); }}); \
         return 1",
    )?;
    browser.tap(&id("tab-expect"))?;
    browser.tap(TAB)?;
    browser.see(&id("share"))?;
    browser.tap(&id("share"))?;
    ensure!(browser.script("return window.shared.url")? == link.as_str());
    page::no_complaints(&browser)
}

#[test]
fn a_link_with_many_readings_is_said_to_be_too_long() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    keep_a_reading(&browser, "28")?;
    // The same reading a hundred and then ten thousand times, each with a note.
    let many = |count: u32| {
        format!(
            "const done = arguments[arguments.length - 1]; const open = indexedDB.open('lampladder.log ' + new URL('./', location.href).pathname); \
             open.onsuccess = () => {{ const db = open.result; const t = db.transaction('readings', 'readwrite'); \
               const s = t.objectStore('readings'); const all = s.getAll(); all.onsuccess = () => {{ const one = all.result[0]; \
                 for (let i = 0; i < {count}; i++) s.put({{...one, id: 1000 + i, note: 'hums a little ' + i}}); }}; \
               t.oncomplete = () => {{ db.close(); done(true) }} }}"
        )
    };
    for (count, css) in [(100, "code-too-large"), (5000, "link-too-long")] {
        browser.script_later(&many(count), Vec::new())?;
        browser.reload()?;
        page::accept(&browser)?;
        browser.tap(TAB)?;
        browser.until(
            "return document.querySelector('[data-testid=with-log]').innerText.includes('00') \
                       || document.querySelector('[data-testid=with-log]').innerText.includes('01')",
        )?;
        browser.tap(&id("with-log"))?;
        browser.see(&id(css))?;
        ensure!(browser.text(&id(css))?.contains("JSON"), "{}", browser.text(&id(css))?);
        browser.picture(&format!("hand-on-{css}"))?;
    }
    page::no_complaints(&browser)
}

#[test]
fn the_panel_passes_the_accessibility_checker_and_is_reached_by_keys() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    climb(&browser)?;
    keep_a_reading(&browser, "28")?;
    browser.tap(TAB)?;
    browser.see(CODE)?;
    accessibility::look(&browser, "hand-on")?;
    accessibility::ensure_thumbs(&browser, "hand-on")?;
    browser.resize(360, 640)?;
    for name in ["copy", "code", "print", "read-json"] {
        browser.script(&format!(
            "document.querySelector('{}').scrollIntoView({{block: 'center'}}); return 1",
            id(name)
        ))?;
        browser.picture(&format!("hand-on-at-{name}"))?;
    }
    // Whatever is in the panel gets the keyboard, in the order in which it stands.
    browser.script(&format!("document.querySelector('{}').focus(); return 1", id("with-ladder")))?;
    for name in ["with-log", "link", "copy", "print", "save-csv", "save-json", "read-json"] {
        browser.devtools(
            "Input.dispatchKeyEvent",
            json!({"type": "keyDown", "key": "Tab", "code": "Tab", "windowsVirtualKeyCode": 9}),
        )?;
        browser.devtools(
            "Input.dispatchKeyEvent",
            json!({"type": "keyUp", "key": "Tab", "code": "Tab", "windowsVirtualKeyCode": 9}),
        )?;
        let at = browser
            .script("return document.activeElement.dataset.testid || document.activeElement.outerHTML")?;
        if at == "share" {
            continue;
        }
        ensure!(at == name, "{at} has the keyboard, not {name}");
    }
    page::no_complaints(&browser)
}
