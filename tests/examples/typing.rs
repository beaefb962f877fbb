//! How long a person waits for a new result after a keystroke, with the processor throttled 6 times.
//!
//! Run by `cargo xtask bench typing`. Real keys go through Chromium's input queue; in the page, a listener takes the
//! time of the key's event, and an observer the times when the answer's text has changed and when it has been drawn.

use anyhow::{Context, Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::timing::{THROTTLE, report};
use lampladder_tests::{page, surroundings};
use serde_json::{Value, json};

const KEYS: usize = 40;
/// Milliseconds from the key to the changed answer; the median must be below.
const BUDGET: f64 = 50.0;

const RECORDER: &str = "
    const css = arguments[0];
    const answer = () => { const e = document.querySelector(css); return e.dataset.value + e.textContent; };
    const input = document.querySelector(arguments[1]);
    window.recorded = [];
    let [start, shown] = [null, answer()];
    // On the window and in the first phase, or the page would have answered before this hears of the key.
    window.addEventListener('input', (event) => { start = event.timeStamp; }, true);
    // The whole page is watched, for the element of the answer may be another one afterwards.
    new MutationObserver(() => {
        if (start === null || answer() === shown) return;
        const [from, changed] = [start, performance.now()];
        [start, shown] = [null, answer()];
        requestAnimationFrame(() => setTimeout(() => {
            window.recorded.push([changed - from, performance.now() - from]);
        }));
    }).observe(document.body, {subtree: true, childList: true, characterData: true, attributes: true});
    input.focus(); input.select(); arguments[2](null);";

fn main() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    page::enter(&browser, &site.url())?;
    browser.until_offline_ready()?;
    let input = page::open_field(&browser, "plate-watts")?;
    browser.script_later(RECORDER, vec![json!(page::AMPS), json!(input)])?;
    browser.devtools("Emulation.setCPUThrottlingRate", json!({"rate": THROTTLE}))?;
    // The first key replaces the selected text; then the second digit comes and goes: 45, 4, 45, 4 … watts.
    for count in 0..KEYS {
        let mut key = match count {
            0 => json!({"type": "keyDown", "key": "4", "text": "4", "windowsVirtualKeyCode": 52}),
            odd if odd % 2 == 1 => {
                json!({"type": "keyDown", "key": "5", "text": "5", "windowsVirtualKeyCode": 53})
            }
            _ => json!({"type": "rawKeyDown", "key": "Backspace", "windowsVirtualKeyCode": 8}),
        };
        browser.devtools("Input.dispatchKeyEvent", key.clone())?;
        key["type"] = json!("keyUp");
        browser.devtools("Input.dispatchKeyEvent", key)?;
        browser
            .until(&format!("return window.recorded.length > {count}"))
            .context("the answer does not change")?;
    }
    let recorded: Vec<[f64; 2]> = serde_json::from_value(browser.script("return window.recorded")?)?;
    ensure!(recorded.len() == KEYS, "{KEYS} keys, {} answers", recorded.len());
    let changed = report("key to changed answer", recorded.iter().map(|times| times[0]).collect())?;
    report("key to drawn answer", recorded.iter().map(|times| times[1]).collect())?;
    let agent: Value = browser.script("return navigator.userAgent")?;
    println!("{KEYS} keys, processor throttled {THROTTLE} times, {agent}");
    ensure!(changed < BUDGET, "the median of {changed:.1} ms is over the budget of {BUDGET} ms");
    Ok(())
}
