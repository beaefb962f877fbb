//! What the benches of the page share.

use anyhow::{Context, Result};
use serde_json::json;

use crate::browser::Browser;

/// How many times slower than this machine: about a cheap phone.
pub const THROTTLE: u32 = 6;

/// Prints the spread and gives the median.
///
/// # Errors
/// Where there is nothing to print.
pub fn report(what: &str, mut times: Vec<f64>) -> Result<f64> {
    times.sort_by(f64::total_cmp);
    let at = |share: usize| times.get((times.len() - 1) * share / 100).copied().context("no times");
    let (median, late, worst) = (at(50)?, at(95)?, at(100)?);
    println!("{what:<24} median {median:6.1} ms   95 % {late:6.1} ms   worst {worst:6.1} ms");
    Ok(median)
}

/// Throttles the page and runs `work`; prints the longest time without a frame meanwhile, which is what a person who
/// types would feel.
///
/// # Errors
/// When the browser is gone, or `work` fails.
pub fn while_watching_frames(browser: &Browser, work: impl FnOnce() -> Result<()>) -> Result<()> {
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": THROTTLE}))?;
    browser.script(
        "window.gap = 0; let last = performance.now(); \
         const frame = (now) => { window.gap = Math.max(window.gap, now - last); last = now; requestAnimationFrame(frame); }; \
         requestAnimationFrame((now) => { last = now; requestAnimationFrame(frame); }); return true",
    )?;
    work()?;
    let gap = browser.script("return window.gap")?.as_f64().context("a gap")?;
    println!("longest time without a frame meanwhile, page throttled {THROTTLE} times: {gap:.0} ms");
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": 1}))?;
    Ok(())
}
