//! The page without a pointer: keys only, as they come from a keyboard.

use anyhow::{Result, bail, ensure};
use serde_json::json;

use crate::browser::Browser;

/// Most steps from one control to another: once around a long page.
const MOST_STEPS: usize = 150;

/// A key of a keyboard: its name, its code for Windows, and the text that it makes.
pub type Key = (&'static str, u32, &'static str);

/// To the next control.
pub const TAB: Key = ("Tab", 9, "");
/// Presses a button.
pub const ENTER: Key = ("Enter", 13, "\r");
/// Presses a button, too.
pub const SPACE: Key = (" ", 32, " ");
/// A step to the right.
pub const RIGHT: Key = ("ArrowRight", 39, "");
/// Closes what lies in front.
pub const ESCAPE: Key = ("Escape", 27, "");

/// Presses a key and lets it go.
///
/// # Errors
/// When the browser is gone.
pub fn press(browser: &Browser, (name, code, text): Key) -> Result<()> {
    let mut key = json!({"type": "keyDown", "key": name, "code": name, "windowsVirtualKeyCode": code});
    if text.is_empty() {
        key["type"] = json!("rawKeyDown");
    } else {
        key["text"] = json!(text);
    }
    browser.devtools("Input.dispatchKeyEvent", key.clone())?;
    key["type"] = json!("keyUp");
    browser.devtools("Input.dispatchKeyEvent", key)?;
    Ok(())
}

/// Types a text into what has the keyboard, over what stands there.
///
/// # Errors
/// When the browser is gone.
pub fn type_text(browser: &Browser, text: &str) -> Result<()> {
    browser.script("document.activeElement.select()")?;
    browser.devtools("Input.insertText", json!({"text": text}))?;
    Ok(())
}

/// What has the keyboard, and what is wrong with how that is shown: it must be in the window, under nothing else, and
/// have a mark around it.
const FOCUS: &str = "
    const e = document.activeElement, box = e.getBoundingClientRect();
    const wrong = [];
    if (e === document.body) return ['body', wrong];
    const name = e.dataset.testid || e.id || e.tagName;
    if (box.bottom < 0 || box.top > innerHeight || box.right < 0 || box.left > innerWidth) wrong.push('out of the window');
    else {
        // The middle of what is in the window.
        const x = (Math.max(box.left, 0) + Math.min(box.right, innerWidth)) / 2;
        const y = (Math.max(box.top, 0) + Math.min(box.bottom, innerHeight)) / 2;
        const top = document.elementFromPoint(x, y);
        if (top && !e.contains(top) && !top.contains(e)) wrong.push(`under ${top.className || top.tagName}`);
    }
    const marked = (s) => (s.outlineStyle !== 'none' && parseFloat(s.outlineWidth) > 1) || s.boxShadow !== 'none';
    const around = e.closest('.typed');
    if (!/^H[12]$/.test(e.tagName) && !marked(getComputedStyle(e)) && !(around && marked(getComputedStyle(around)))) wrong.push('no mark');
    return [name, wrong];";

/// Goes from control to control until one that matches has the keyboard; every one on the way must be well in sight.
///
/// # Errors
/// When it is not reached, or one on the way cannot be seen to have the keyboard.
pub fn reach(browser: &Browser, css: &str) -> Result<()> {
    let there = format!("return document.activeElement.matches({})", json!(css));
    let mut way = Vec::new();
    for _ in 0..MOST_STEPS {
        if browser.script(&there)? == true {
            return Ok(());
        }
        press(browser, TAB)?;
        let (name, wrong): (String, Vec<String>) = serde_json::from_value(browser.script(FOCUS)?)?;
        ensure!(wrong.is_empty(), "on the way to `{css}`: {name} is {}", wrong.join(", "));
        way.push(name);
    }
    bail!("`{css}` is not reached by keys; on the way were {way:?}")
}

/// Reaches a control and presses it.
///
/// # Errors
/// As [`reach`].
pub fn push(browser: &Browser, css: &str, key: Key) -> Result<()> {
    reach(browser, css)?;
    press(browser, key)
}

/// Reaches a field and types into it.
///
/// # Errors
/// As [`reach`].
pub fn fill(browser: &Browser, css: &str, text: &str) -> Result<()> {
    reach(browser, css)?;
    type_text(browser, text)
}
