//! The page in each of its languages, without a network: cautions, every screen, an editor; nothing of the English
//! left over, nothing wider than a small phone, nothing for the accessibility checker to find.

use std::collections::HashSet;

use anyhow::{Context, Result, ensure};
use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use lampladder_tests::accessibility;
use lampladder_tests::browser::Browser;
use lampladder_tests::folder::Folder;
use lampladder_tests::walk::every_screen;
use lampladder_tests::{page, surroundings};
use serde_json::json;
use xtask::files;
use xtask::site::Site;
use xtask::words::catalogue;

/// The languages beside English.
const OTHERS: [&str; 3] = ["de", "fr", "es"];
/// The list of languages in the header.
const LIST: &str = "[data-testid=language]";
/// All that can be read on the screen, fields' hints and names for those who hear it among it.
const READABLE: &str = "return [document.title, document.body.innerText, \
    ...[...document.querySelectorAll('[aria-label]')].map((e) => e.getAttribute('aria-label'))].join('\\n')";

/// Words that do not fit into a line and go on in the next: by the boxes of each word's letters.
/// Where a word says itself how it is parted, it may be.
const BROKEN: &str = "const all = []; \
    const walk = document.createTreeWalker(document.body, NodeFilter.SHOW_TEXT); \
    for (let node; (node = walk.nextNode());) { \
      if (!node.parentElement.checkVisibility()) continue; \
      for (const word of node.data.matchAll(/[\\p{L}\\p{N}\\u00AD]{2,}/gu)) { \
        if (word[0].includes('\\u00AD')) continue; \
        const range = document.createRange(); \
        range.setStart(node, word.index); range.setEnd(node, word.index + word[0].length); \
        const tops = new Set([...range.getClientRects()].map((box) => Math.round(box.top))); \
        if (tops.size > 1) all.push(word[0]); \
      } \
    } \
    return all";

fn catalogue_of(tag: &str) -> Result<Vec<(String, String)>> {
    let file = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("../web/words/{tag}.txt"));
    let text = std::fs::read_to_string(&file).with_context(|| format!("{}", file.display()))?;
    let entries = catalogue::entries(&text).map_err(|bad| anyhow::anyhow!("{tag}, line {}", bad.line))?;
    Ok(entries.into_iter().map(|(key, text)| (key.to_owned(), text.to_owned())).collect())
}

/// English texts that this language says otherwise: the longest piece between the places of each, if it is long enough
/// to be told from a number or a name.
fn english_only(tag: &str) -> Result<Vec<String>> {
    let others: HashSet<String> = catalogue_of(tag)?.into_iter().map(|(_, text)| text).collect();
    let pieces =
        catalogue_of("en")?.into_iter().filter(|(_, text)| !others.contains(text)).filter_map(|(_, text)| {
            let piece = text.split(['{', '}', '|']).max_by_key(|piece| piece.len())?.trim().to_owned();
            (piece.len() >= 12 && piece.contains(' ')).then_some(piece)
        });
    Ok(pieces.collect())
}

/// Chooses a language over the cautions, as a person does who cannot read the one that is there.
fn choose_over_cautions(browser: &Browser, tag: &str) -> Result<()> {
    browser.tap(&format!("[data-language={tag}]"))?;
    browser.until(&format!(
        "return document.documentElement.lang === '{tag}' && \
         document.querySelector('#cautions-{tag}').getBoundingClientRect().height > 0"
    ))
}

fn look(browser: &Browser, tag: &str, screen: &str, english: &[String]) -> Result<()> {
    let lang = browser.script("return document.documentElement.lang")?;
    ensure!(lang == tag, "{screen}: the document says {lang}");
    let read = browser.script(READABLE)?;
    let read = read.as_str().context("text")?;
    for text in english {
        ensure!(!read.contains(text.as_str()), "{tag}, {screen}: still English: {text}");
    }
    for place in ["{0}", "{1}", "{2}", "{3}", "{4}"] {
        ensure!(!read.contains(place), "{tag}, {screen}: a place was left empty:\n{read}");
    }
    let widths = browser.script(
        "const e = document.scrollingElement; return [e.scrollWidth, e.clientWidth, \
         [...document.querySelectorAll('button, .tab, .choice, .cell > *')].filter((e) => e.scrollWidth > e.clientWidth + 1 \
           && e.clientWidth > 0 && getComputedStyle(e).display !== 'inline').map((e) => e.innerText)]",
    )?;
    ensure!(widths[0].as_f64() <= widths[1].as_f64(), "{tag}, {screen}: wider than the phone: {widths}");
    ensure!(
        widths[2].as_array().is_some_and(Vec::is_empty),
        "{tag}, {screen}: does not fit where it stands: {}",
        widths[2]
    );
    // What sticks under the header knows how high that is.
    let lines = browser.script(
        "const e = document.querySelector('[data-testid=reminder]'); if (!e || !e.checkVisibility()) return 1; \
         const range = document.createRange(); range.selectNodeContents(e); \
         return new Set([...range.getClientRects()].map((box) => Math.round(box.top))).size",
    )?;
    ensure!(lines == 1, "{tag}, {screen}: the reminder takes {lines} lines");
    let broken = browser.script(BROKEN)?;
    ensure!(broken.as_array().is_some_and(Vec::is_empty), "{tag}, {screen}: broken words: {broken}");
    browser.picture(&format!("{tag}-{screen}"))
}

fn check_in_both_lights(browser: &Browser, tag: &str, screen: &str) -> Result<()> {
    // High enough that no bar at its edge covers half a button, which axe-core takes for a small one.
    browser.resize(360, 4000)?;
    for scheme in ["light", "dark"] {
        browser.prefer(scheme)?;
        accessibility::check(browser, &format!("{tag}, {screen}, {scheme}"))?;
    }
    browser.prefer("light")
}

fn every_screen_in(tag: &str) -> Result<()> {
    let mut site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.resize(360, 640)?;
    browser.open(&site.url())?;
    browser.until_offline_ready()?;
    site.stop();
    browser.reload()?;
    choose_over_cautions(&browser, tag)?;
    let english = english_only(tag)?;
    ensure!(english.len() > 300, "only {} texts to look for", english.len());
    every_screen(&browser, &site.url(), &mut |screen| {
        look(&browser, tag, screen, &english)?;
        check_in_both_lights(&browser, tag, screen)?;
        if ["expect", "seen", "ladder-lamps", "switch-on"].contains(&screen) {
            browser.resize(1280, 800)?;
            look(&browser, tag, &format!("{screen}-wide"), &english)?;
        }
        browser.resize(360, 640)
    })?;
    browser.tap("[data-testid=tab-hand-on]")?;
    look(&browser, tag, "hand-on", &english)?;
    check_in_both_lights(&browser, tag, "hand-on")?;
    browser.resize(360, 640)?;
    ensure_card(&browser, tag)?;
    page::no_complaints(&browser)
}

#[test]
fn german_without_a_network() -> Result<()> {
    every_screen_in("de")
}

#[test]
fn french_without_a_network() -> Result<()> {
    every_screen_in("fr")
}

#[test]
fn spanish_without_a_network() -> Result<()> {
    every_screen_in("es")
}

#[test]
fn another_language_takes_effect_at_once_and_loses_nothing_that_was_typed() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    let reminder = browser.text(page::REMINDER)?;
    let css = page::open_field(&browser, "lamp-watts")?;
    browser.fill(&css, "12.5x")?;
    page::close(&browser)?;
    let mut seen = HashSet::from([reminder.clone()]);
    for tag in OTHERS {
        browser.choose(LIST, tag)?;
        let expected =
            catalogue_of(tag)?.into_iter().find(|(key, _)| key == "reminder").context("a reminder")?.1;
        browser.until(&format!(
            "return document.querySelector('{}').innerText === {}",
            page::REMINDER,
            serde_json::Value::from(expected.as_str())
        ))?;
        ensure!(seen.insert(expected), "{tag} reads like another language");
        ensure!(browser.script("return document.documentElement.lang")? == tag);
        let css = page::open_field(&browser, "lamp-watts")?;
        ensure!(browser.value(&css)? == "12.5x", "{tag}: what was typed has gone");
        page::close(&browser)?;
    }
    // It is kept for the next visit, and a mended field is read with either decimal mark.
    browser.reload()?;
    page::accept(&browser)?;
    ensure!(browser.script("return document.documentElement.lang")? == "es");
    page::fill(&browser, "lamp-watts", "62,5")?;
    page::close(&browser)?;
    browser.choose(LIST, "en")?;
    browser.until(&format!(
        "return document.querySelector('{}').innerText === {}",
        page::REMINDER,
        serde_json::Value::from(reminder)
    ))?;
    let css = page::open_field(&browser, "lamp-watts")?;
    ensure!(browser.value(&css)?.replace(',', ".") == "62.5");
    Ok(())
}

/// The printed card keeps to one page.
fn ensure_card(browser: &Browser, tag: &str) -> Result<()> {
    browser.see("[data-testid=code]")?;
    let printed =
        browser.devtools("Page.printToPDF", json!({"preferCSSPageSize": true, "printBackground": true}))?;
    let bytes = STANDARD.decode(printed["data"].as_str().context("a document")?)?;
    if let Some(folder) = std::env::var_os("LAMPLADDER_SHOTS") {
        std::fs::write(std::path::Path::new(&folder).join(format!("{tag}-card.pdf")), &bytes)?;
    }
    // Chromium leaves the tree of pages uncompressed.
    let pages = String::from_utf8_lossy(&bytes).matches("/Type /Page\n").count();
    ensure!(pages == 1, "{tag}: the card has {pages} pages");
    Ok(())
}

#[test]
fn a_first_visit_is_in_the_language_of_the_browser() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let agent = browser.script("return navigator.userAgent")?;
    for (asked, tag) in [("pt-BR,fr-CH,de", "fr"), ("de-AT", "de"), ("ja,pt", "en")] {
        browser.devtools(
            "Emulation.setUserAgentOverride",
            json!({"userAgent": agent, "acceptLanguage": asked}),
        )?;
        browser.open("about:blank")?;
        browser.open(&site.url())?;
        browser.see(page::ACCEPT)?;
        let told = browser.script("return [document.documentElement.lang, ...navigator.languages]")?;
        ensure!(told[0] == tag, "{asked}: {told}");
        let expected = catalogue_of(tag)?.into_iter().find(|(key, _)| key == "accept").context("a text")?.1;
        let text = browser.text(page::ACCEPT)?;
        // The driver tells every space as a plain one.
        ensure!(text == expected.replace('\u{a0}', " "), "{asked}: {text}");
    }
    Ok(())
}

#[test]
fn without_the_program_each_language_of_the_cautions_is_a_link_away() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    browser.forbid_scripts(true)?;
    browser.open(&site.url())?;
    let english = browser.words(page::CAUTIONS)?;
    ensure!(english.contains("It limits; it does not protect."), "{english}");
    for (tag, caution) in [
        ("de", "Sie begrenzt; sie schützt nicht."),
        ("fr", "elle ne protège pas."),
        ("es", "Limita; no protege."),
    ] {
        ensure!(!browser.words(page::CAUTIONS)?.contains(caution), "{tag} stands there unasked");
        browser.tap(&format!("[data-language={tag}]"))?;
        let text = browser.words(page::CAUTIONS)?;
        ensure!(text.contains(caution), "{tag} is not a link away: {text}");
    }
    Ok(())
}

/// A server of the page without the texts of a language.
fn site_without(tag: &str) -> Result<(Folder, Site)> {
    let folder = Folder::new("wordless")?;
    for (name, path) in files::below(&surroundings::page()?)? {
        if !name.starts_with(&format!("words-{tag}-")) {
            let copy = folder.path().join(name);
            std::fs::create_dir_all(copy.parent().context("a folder")?)?;
            std::fs::copy(path, copy)?;
        }
    }
    let site = Site::start(folder.path(), surroundings::PREFIX, 0)?;
    Ok((folder, site))
}

#[test]
fn texts_that_cannot_be_fetched_leave_the_cautions_and_what_was_there() -> Result<()> {
    let (_folder, site) = site_without("en")?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.see(".starting.is-lost .late")?;
    let text = browser.text(page::CAUTIONS)?;
    ensure!(text.contains("It has not started.") && text.contains("It limits"), "{text}");
    ensure!(!browser.sees(page::ACCEPT)?, "a program without texts has started");

    let (_folder, site) = site_without("fr")?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    let reminder = browser.text(page::REMINDER)?;
    browser.choose(LIST, "fr")?;
    browser.see(page::NOTE)?;
    ensure!(browser.text(page::NOTE)?.contains("could not be loaded"), "{}", browser.text(page::NOTE)?);
    ensure!(browser.text(page::REMINDER)? == reminder && browser.value(LIST)? == "en");
    // Another one is still to be had.
    browser.choose(LIST, "de")?;
    browser.not_see(page::NOTE)
}
