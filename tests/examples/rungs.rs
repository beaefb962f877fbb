//! How long a ladder takes in Chromium.
//!
//! Run by `cargo xtask bench rungs`. It is worked out in a worker, which Chromium does not throttle: what is printed is
//! the time in the worker, and six times that.

use anyhow::{Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::timing::{THROTTLE, report, while_watching_frames};
use lampladder_tests::{page, surroundings};

/// Milliseconds for twelve lamps of six ratings, throttled.
const BUDGET: f64 = 600.0;
const RUNS: usize = 7;

const RATINGS: [u32; 6] = [25, 40, 60, 75, 100, 150];

fn main() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    browser.tap("[data-testid=tab-ladder]")?;
    let tap = |watts: u32, which: &str| browser.tap(&format!("[data-testid=size-{watts}-{which}]"));
    for watts in RATINGS {
        tap(watts, "more")?;
        tap(watts, "more")?;
    }
    let spent = "document.querySelector('[data-testid=ladder]').dataset.milliseconds";
    // The rungs come first, the lamp that would help most after them.
    let complete = "document.querySelector('[data-testid=ladder]').dataset.complete === 'true'";
    // No two runs take the very same time.
    let again = |which: &str| -> Result<()> {
        let before = browser.script(&format!("return {spent}"))?;
        tap(150, which)?;
        browser.until(&format!("return {complete} && {spent} > 0 && {spent} !== {before}"))
    };
    let mut times = Vec::new();
    for _ in 0..RUNS {
        // One lamp less, and back: the whole stock is planned anew.
        again("less")?;
        again("more")?;
        let text = browser.attribute("[data-testid=ladder]", "data-milliseconds")?;
        times.push(text.parse::<f64>()? * f64::from(THROTTLE));
    }
    let median = report("12 lamps, times 6", times)?;
    while_watching_frames(&browser, || again("less"))?;
    println!("{}", browser.script("return navigator.userAgent")?);
    ensure!(median < BUDGET, "{median:.0} ms is over the budget of {BUDGET} ms");
    Ok(())
}
