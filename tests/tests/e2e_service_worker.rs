//! The service worker of static/sw.js, with a small page of this test's own in place of Lampladder.
//!
//! It is told apart from the page so that each of its promises can be broken on purpose: another version, a file
//! that is missing, caches of other pages on the same host.

use std::fs;
use std::path::Path;

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::folder::Folder;
use lampladder_tests::surroundings::PREFIX;
use serde_json::json;
use xtask::site::Site;
use xtask::stamp;

/// Writes version `number` of a page of four files, as a build would leave it.
fn build(folder: &Path, number: u32) -> Result<()> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).parent().context("tests lies in the workspace")?;
    let sources = stamp::Sources::of(root)?;
    for old in fs::read_dir(folder)? {
        fs::remove_file(old?.path())?;
    }
    let page = format!(
        "<!DOCTYPE html><html lang=en><title>t</title><link rel=icon href=data:,><p id=version>{number}</p>\
         <script src=\"part-000000000000000{number}.js\"></script>\
         <script type=\"module\">navigator.serviceWorker.register(\"./sw.js\", {{updateViaCache: \"none\"}});</script>"
    );
    fs::write(folder.join("index.html"), page)?;
    fs::write(folder.join(format!("part-000000000000000{number}.js")), format!("window.part = {number};\n"))?;
    fs::write(folder.join("plain.txt"), format!("text {number}\n"))?;
    ensure!(
        stamp::finish(folder, &sources, true)? == 4,
        "page, part, text and the script taken out of the page"
    );
    Ok(())
}

/// The addresses in this page's caches, relative to it, and the caches' names.
fn kept(browser: &Browser) -> Result<(Vec<String>, Vec<String>)> {
    let body = "const done = arguments[0]; (async () => { const names = await caches.keys(); const all = []; \
                for (const name of names) if (name.startsWith('lampladder ' + location.href.split('#')[0].split('?')[0])) \
                  for (const r of await (await caches.open(name)).keys()) all.push(r.url.replace(location.href, '')); \
                return [all.sort(), names.sort()]; })().then(done)";
    Ok(serde_json::from_value(browser.script_later(body, Vec::new())?)?)
}

const WAITING: &str = "return (async () => !!(await navigator.serviceWorker.getRegistration()).waiting)()";

#[test]
fn keeps_exactly_its_files_and_answers_without_a_server() -> Result<()> {
    let folder = Folder::new("worker")?;
    build(folder.path(), 1)?;
    let mut site = Site::start(folder.path(), PREFIX, 0)?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.until_offline_ready()?;

    let (files, caches) = kept(&browser)?;
    ensure!(files.len() == 4 && caches.len() == 1, "{files:?} {caches:?}");
    ensure!(files[0].is_empty() && files.contains(&"plain.txt".to_owned()), "{files:?}");
    ensure!(!files.iter().any(|name| name == "sw.js" || name == "index.html"), "{files:?}");
    // What the host has beside those files is none of the worker's business.
    fs::write(folder.path().join("later.txt"), "not of this build")?;
    ensure!(browser.script("return fetch('later.txt').then((r) => r.text())")? == "not of this build");
    ensure!(kept(&browser)?.0.len() == 4, "an unlisted file was kept");

    site.stop();
    for address in ["", "?utm=1", "#v1-abc", "index.html", "some/other/place"] {
        browser.open(&format!("{}{address}", site.url()))?;
        browser.see("#version").with_context(|| format!("offline, at `{address}`"))?;
    }
    browser.open(&format!("{}#x", site.url()))?;
    browser.reload()?;
    ensure!(browser.text("#version")? == "1" && browser.script("return window.part")? == 1);
    ensure!(browser.script("return fetch('plain.txt').then((r) => r.text())")? == "text 1\n");
    ensure!(
        browser.script("return fetch('later.txt').then(() => 'answered', () => 'refused')")? == "refused"
    );
    Ok(())
}

#[test]
fn a_new_version_waits_until_the_page_asks_for_it() -> Result<()> {
    let folder = Folder::new("worker")?;
    build(folder.path(), 1)?;
    let site = Site::start(folder.path(), PREFIX, 0)?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.until_offline_ready()?;
    // Caches of another page on the host, and of another copy of this one, whose path only begins like ours.
    let others = ["other", "lampladder elsewhere 1"];
    for name in others {
        browser.script(&format!("return caches.open({}).then(() => 1)", json!(name)))?;
    }

    build(folder.path(), 2)?;
    browser.reload()?;
    ensure!(browser.text("#version")? == "1", "the new version was forced on the page");
    browser.until(WAITING)?;
    browser.reload()?;
    ensure!(browser.text("#version")? == "1", "a reload alone must not change versions");
    ensure!(kept(&browser)?.1.len() == 4, "both versions are kept while one waits");

    browser.script(
        "return navigator.serviceWorker.getRegistration().then((r) => { r.waiting.postMessage({type: 'something else'}); })",
    )?;
    browser.until(WAITING)?;
    browser.script(
        "window.changed = false; navigator.serviceWorker.addEventListener('controllerchange', () => { window.changed = true; }); \
         return navigator.serviceWorker.getRegistration().then((r) => { r.waiting.postMessage({type: 'take-over'}); })",
    )?;
    browser.until("return window.changed")?;
    browser.until_offline_ready()?;
    browser.reload()?;
    ensure!(browser.text("#version")? == "2" && browser.script("return window.part")? == 2);
    let (files, caches) = kept(&browser)?;
    ensure!(files.len() == 4 && caches.len() == 3, "the old cache goes, others stay: {files:?} {caches:?}");
    ensure!(others.iter().all(|name| caches.iter().any(|cache| cache == name)), "{caches:?}");
    Ok(())
}

#[test]
fn a_version_with_a_file_missing_is_never_used() -> Result<()> {
    let folder = Folder::new("worker")?;
    build(folder.path(), 1)?;
    let mut site = Site::start(folder.path(), PREFIX, 0)?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.until_offline_ready()?;

    build(folder.path(), 2)?;
    fs::remove_file(folder.path().join("plain.txt"))?;
    let outcome = browser.script_later(
        "const done = arguments[0]; navigator.serviceWorker.getRegistration().then((r) => { \
           r.addEventListener('updatefound', () => { const w = r.installing; \
             w.addEventListener('statechange', () => done(w.state)); }); r.update(); })",
        Vec::new(),
    )?;
    ensure!(outcome == "redundant", "{outcome}");
    site.stop();
    browser.reload()?;
    ensure!(browser.text("#version")? == "1");
    Ok(())
}

#[test]
fn asks_nothing_of_other_hosts_and_leaves_them_alone() -> Result<()> {
    let folder = Folder::new("worker")?;
    build(folder.path(), 1)?;
    let site = Site::start(folder.path(), PREFIX, 0)?;
    let elsewhere = Site::start(folder.path(), PREFIX, 0)?;
    let browser = Browser::start()?;
    browser.open(&site.url())?;
    browser.until_offline_ready()?;
    browser.requests()?;
    let other = format!("{}plain.txt", elsewhere.url());
    // Another host gives no leave to read, so the answer is opaque; that it was asked at all shows that the worker
    // let the request through.
    browser.script(&format!("return fetch({}, {{mode: 'no-cors'}}).then(() => 1)", json!(other)))?;
    ensure!(elsewhere.asked() == [format!("{PREFIX}plain.txt")], "{:?}", elsewhere.asked());
    ensure!(kept(&browser)?.0.len() == 4, "an answer of another host was kept");
    // The log that later tests rely on to find requests to other hosts does show this one.
    ensure!(browser.requests()?.contains(&other), "the log of requests is blind");
    ensure!(site.asked().iter().all(|path| path.starts_with(PREFIX)), "{:?}", site.asked());
    Ok(())
}
