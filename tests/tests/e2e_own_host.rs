//! The page asks nothing of any other host, ever, and its policy forbids that it could.

use std::fs;

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::folder::Folder;
use lampladder_tests::page;
use lampladder_tests::surroundings::{self, PREFIX};
use lampladder_tests::walk;
use serde_json::json;
use xtask::files;
use xtask::site::Site;

/// What Chromium asks for itself, whatever page is open: its maker's services and its distributor's start page.
const THE_BROWSERS: [&str; 5] = ["google.com", "googleapis.com", "gstatic.com", "gvt1.com", "duckduckgo.com"];

/// Whether a line of the proxy's is the browser's own: `host:443` or `http://host/…`.
fn is_the_browsers(asked: &str) -> bool {
    let host = asked.trim_start_matches("http://").split(['/', ':']).next().unwrap_or_default();
    THE_BROWSERS.iter().any(|own| host == *own || host.ends_with(&format!(".{own}")))
}

/// What the proxy was asked for by anybody but the browser itself.
fn asked_elsewhere(proxy: &Site) -> Vec<String> {
    proxy.asked().into_iter().filter(|asked| !is_the_browsers(asked)).collect()
}

#[test]
fn nothing_is_asked_of_any_other_host_on_any_screen() -> Result<()> {
    let site = surroundings::site()?;
    // Whatever is not for this machine goes to this proxy, from the page as from its workers: it writes all down.
    let folder = Folder::new("proxy")?;
    let proxy = Site::start(folder.path(), PREFIX, 0)?;
    let browser = Browser::start_behind(&proxy.url())?;
    let mut screens = 0;
    let mut visit = |_: &str| {
        screens += 1;
        Ok(())
    };
    walk::every_screen(&browser, &site.url(), &mut visit)?;
    browser.until_offline_ready()?;
    browser.reload()?;
    page::accept(&browser)?;
    ensure!(screens > 15, "only {screens} screens were seen");
    let elsewhere = asked_elsewhere(&proxy);
    ensure!(elsewhere.is_empty(), "asked elsewhere: {elsewhere:?}");

    let own = site.url();
    let requests = browser.requests()?;
    ensure!(requests.iter().any(|url| url.contains("_bg.wasm")), "the log is blind: {requests:?}");
    let foreign: Vec<_> = requests
        .iter()
        // Chromium's own first tab (chrome:) and data: addresses leave no machine.
        .filter(|url| (url.starts_with("http") || url.starts_with("ws")) && !url.starts_with(&own))
        .collect();
    ensure!(foreign.is_empty(), "asked elsewhere: {foreign:?}");
    let asked = site.asked();
    let outside: Vec<_> = asked.iter().filter(|path| !path.starts_with(PREFIX)).collect();
    ensure!(outside.is_empty(), "asked above its own path: {outside:?}");
    page::no_complaints(&browser)?;

    // The proxy would have seen it: the browser asks it for a page of another host.
    let _ = browser.open("http://other.example/");
    let elsewhere = asked_elsewhere(&proxy);
    ensure!(elsewhere.first().is_some_and(|first| first == "http://other.example/"), "{elsewhere:?}");
    Ok(())
}

#[test]
fn no_file_of_the_page_holds_an_address_of_another_host() -> Result<()> {
    let mut addresses = Vec::new();
    let mut bytes_read = 0;
    for (name, path) in files::below(&surroundings::page()?)? {
        let bytes = fs::read(path)?;
        bytes_read += bytes.len();
        let text = String::from_utf8_lossy(&bytes);
        for (at, _) in text.match_indices("://") {
            let host: String = text[at + 3..].chars().take_while(|one| !"/\"' <>".contains(*one)).collect();
            // Names of SVG and its kin look like addresses; nobody asks for them.
            if !host.starts_with("www.w3.org") {
                addresses.push(format!("{name}: ://{host}"));
            }
        }
    }
    ensure!(bytes_read > 100_000, "there is hardly a page");
    ensure!(addresses.is_empty(), "{addresses:#?}");
    Ok(())
}

#[test]
fn the_policy_forbids_other_hosts_and_inline_script() -> Result<()> {
    let page = fs::read_to_string(surroundings::page()?.join("index.html"))?;
    let (_, policy) = page.split_once("Content-Security-Policy\" content=\"").context("no policy")?;
    let policy = policy.split('"').next().context("no end")?;
    ensure!(policy.starts_with("default-src 'none';"), "{policy}");
    let sources: Vec<&str> = policy.split(';').flat_map(|rule| rule.split_whitespace().skip(1)).collect();
    let allowed = ["'none'", "'self'", "'wasm-unsafe-eval'"];
    let other: Vec<_> = sources.iter().filter(|source| !allowed.contains(source)).collect();
    ensure!(other.is_empty(), "the policy allows {other:?}");

    // And it is obeyed.
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.script(
        "const s = document.createElement('script'); s.textContent = 'window.inline = true'; \
         document.head.append(s); document.body.setAttribute('style', 'opacity: .5')",
    )?;
    let refused =
        browser.script("return fetch('https://other.example/').then(() => 'answered', () => 'refused')")?;
    ensure!(refused == "refused" && browser.script("return window.inline === undefined")? == true);
    ensure!(browser.script("return getComputedStyle(document.body).opacity")? == json!("1"));
    ensure!(!browser.console()?.is_empty(), "the browser did not say that it refused");
    Ok(())
}
