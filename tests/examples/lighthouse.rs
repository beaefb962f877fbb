//! What Lighthouse says of the page, and how soon a second visit without a network can be used.
//!
//! Run by `cargo xtask bench lighthouse`, which names Lighthouse's program. Its usual settings are a phone's: slow 4G
//! and a processor four times slower, both by calculation. The second visit is timed here: the server is stopped, the
//! page throttled 6 times (its service worker, which Chromium cannot throttle from there, not).

use std::fs;
use std::process::Command;

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::folder::Folder;
use lampladder_tests::timing::{THROTTLE, report};
use lampladder_tests::{page, surroundings};
use serde_json::{Value, json};
use xtask::site::Site;

/// Visits without a server that are timed.
const VISITS: usize = 7;
/// Milliseconds until such a visit can be used; the median must be below.
const BUDGET: f64 = 500.0;
/// Milliseconds to the largest paint.
const PAINT: f64 = 1200.0;
/// Milliseconds for which the page is deaf at its start.
const BLOCKED: f64 = 50.0;
/// Points of 100 in each category.
const SCORE: f64 = 100.0;

const CATEGORIES: [&str; 3] = ["performance", "accessibility", "best-practices"];
const FLAGS: &str = "--headless --no-sandbox --disable-gpu --disable-quic --no-first-run \
                     --disable-background-networking --disable-component-update --disable-sync --disable-dev-shm-usage";

/// Runs in every new document, before anything else in it: takes the time at which something is there.
const RECORDER: &str = "
    window.there = {};
    const look = () => {
        for (const name of ['accept', 'result-amps'])
            if (!(name in window.there) && document.querySelector(`[data-testid=${name}]`))
                window.there[name] = performance.now();
    };
    new MutationObserver(look).observe(document, {subtree: true, childList: true});";

fn main() -> Result<()> {
    let mut site = surroundings::site()?;
    let mut short = judge(&site)?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    site.stop();
    browser.devtools("Page.addScriptToEvaluateOnNewDocument", json!({"source": RECORDER}))?;
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": THROTTLE}))?;
    let fresh = visits(&browser, "accept", "sessionStorage.clear()", "offline, to the accept button")?;
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": 1}))?;
    page::accept(&browser)?;
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": THROTTLE}))?;
    let again = visits(&browser, "result-amps", "", "offline, to the first result")?;
    println!("{VISITS} visits each, page throttled {THROTTLE} times, no server");
    if fresh.max(again) >= BUDGET {
        short.push(format!("a second visit takes over {BUDGET} ms"));
    }
    ensure!(short.is_empty(), "short of what is wanted:\n{}", short.join("\n"));
    Ok(())
}

fn visits(browser: &Browser, name: &str, before: &str, what: &str) -> Result<f64> {
    let mut times = Vec::new();
    for _ in 0..VISITS {
        browser.script(before)?;
        browser.reload()?;
        browser.until(&format!("return '{name}' in window.there"))?;
        let time = browser.script(&format!("return window.there['{name}']"))?;
        times.push(time.as_f64().context("a time")?);
    }
    report(what, times)
}

/// Prints Lighthouse's figures and gives those that are short of what is wanted.
fn judge(site: &Site) -> Result<Vec<String>> {
    let program =
        std::env::var_os("LAMPLADDER_LIGHTHOUSE").context("run this by `cargo xtask bench lighthouse`")?;
    let folder = Folder::new("lighthouse")?;
    let file = folder.path().join("report.json");
    let status = Command::new("node")
        .arg(program)
        .arg(site.url())
        .args(["--quiet", "--output=json", "--no-enable-error-reporting"])
        .arg(format!("--only-categories={}", CATEGORIES.join(",")))
        .arg(format!("--output-path={}", file.display()))
        .arg(format!("--chrome-flags={FLAGS}"))
        .status()
        .context("node cannot be started")?;
    ensure!(status.success(), "Lighthouse failed");
    let found: Value = serde_json::from_str(&fs::read_to_string(file)?)?;
    let mut short = Vec::new();
    for name in CATEGORIES {
        let score = found["categories"][name]["score"].as_f64().context("a score")? * 100.0;
        println!("{name:<24} {score:3.0} of 100");
        if score < SCORE {
            short.push(format!("{name}: {}", lost(&found, name)));
        }
    }
    for (name, most) in [("largest-contentful-paint", PAINT), ("total-blocking-time", BLOCKED)] {
        let time = found["audits"][name]["numericValue"].as_f64().context("a time")?;
        println!("{name:<24} {time:.0} ms");
        if time >= most {
            short.push(format!("{name}: {time:.0} ms, over {most}"));
        }
    }
    for name in ["cumulative-layout-shift", "speed-index"] {
        println!("{name:<24} {}", found["audits"][name]["displayValue"].as_str().unwrap_or("none"));
    }
    println!("Lighthouse {}, {}", found["lighthouseVersion"], found["userAgent"]);
    Ok(short)
}

/// What cost points in a category.
fn lost(found: &Value, category: &str) -> String {
    let references = found["categories"][category]["auditRefs"].as_array().into_iter().flatten();
    let names = references.filter_map(|one| one["id"].as_str());
    let bad = names.filter(|name| found["audits"][*name]["score"].as_f64().is_some_and(|score| score < 0.9));
    bad.collect::<Vec<_>>().join(", ")
}
