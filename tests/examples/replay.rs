//! How long the first seconds take to work out in Chromium, and how smoothly they are replayed with the processor
//! throttled 6 times.
//!
//! Run by `cargo xtask bench replay`. The runs are worked out in a worker, which Chromium does not throttle: what is
//! printed is the time in the worker, and six times that.

use anyhow::{Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::timing::{THROTTLE, report};
use lampladder_tests::{page, surroundings};
use serde_json::json;

/// Milliseconds for 3 s of the healthy set, throttled.
const BUDGET: f64 = 150.0;
/// Frames a second, the median over the replay.
const FRAMES: f64 = 30.0;
const RUNS: usize = 5;

const READY: &str = "[data-testid=replay][data-busy=false]";

/// The times of the frames in which the healthy scene has changed.
const RECORDER: &str = "
    window.recorded = [];
    const scene = () => document.querySelector('[data-testid=scene-healthy]')?.dataset.kelvin;
    const play = () => document.querySelector('[data-testid=play]')?.dataset.state;
    let last = scene();
    const look = (now) => {
        if (play() !== 'playing' && window.recorded.length > 1) { window.ended = true; return; }
        if (scene() !== last) { last = scene(); window.recorded.push(now); }
        requestAnimationFrame(look);
    };
    requestAnimationFrame(look);
    return true";

fn main() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    let mut worked = Vec::new();
    for _ in 0..RUNS {
        browser.reload()?;
        page::accept(&browser)?;
        browser.tap("[data-testid=tab-switch-on]")?;
        browser.see(READY)?;
        let spent: f64 = browser.attribute("[data-testid=replay]", "data-milliseconds")?.parse()?;
        worked.push(spent * f64::from(THROTTLE));
    }
    let spent = report("3 s worked out, times 6", worked)?;
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": THROTTLE}))?;
    browser.until("return document.querySelector('[data-testid=play]').dataset.state === 'still'")?;
    browser.script(RECORDER)?;
    browser.tap("[data-testid=play]")?;
    browser.until("return window.ended === true")?;
    let times: Vec<f64> = serde_json::from_value(browser.script("return window.recorded")?)?;
    let between: Vec<f64> = times.windows(2).map(|pair| pair[1] - pair[0]).collect();
    let median = report("between two frames", between)?;
    let agent = browser.script("return navigator.userAgent")?;
    println!("{:.0} frames a second, page throttled {THROTTLE} times, {agent}", 1000.0 / median);
    ensure!(spent < BUDGET, "{spent:.0} ms is over the budget of {BUDGET} ms");
    ensure!(1000.0 / median >= FRAMES, "fewer than {FRAMES} frames a second");
    Ok(())
}
