//! Where things are on the page, and the steps that most tests begin with.
//!
//! Only `data-testid` attributes are used to find things; their names are all in this file.

use std::time::Instant;

use anyhow::Result;

use crate::browser::{Browser, PATIENCE};

/// The cautions, and the button that accepts them.
pub const CAUTIONS: &str = "[data-testid=cautions]";
/// Accepts the cautions.
pub const ACCEPT: &str = "[data-testid=accept]";
/// The one line that is always in view, and opens the cautions again.
pub const REMINDER: &str = "[data-testid=reminder]";

/// What is said about a link that cannot be read, or about storage that cannot be used.
pub const NOTICE: &str = "[data-testid=notice]";
/// The caution that a lamp is over its rated voltage.
pub const OVER_RATED: &str = "[data-testid=over-rated]";
/// Closes the editor of a part.
pub const CLOSE: &str = "[data-testid=close]";

/// An input, by the name of its field: `supply-volts`, `lamp-volts`, `lamp-watts`, `plate-volts`, `plate-watts`.
pub fn field(name: &str) -> String {
    format!("[data-testid={name}]")
}

/// The message beside a field.
pub fn message(name: &str) -> String {
    format!("[data-testid=error-{name}]")
}

/// A number of the answer: `amps`, `bank-volts`, `load-volts`.
pub fn answer(name: &str) -> String {
    format!("[data-testid=answer-{name}]")
}

/// Opens the page and accepts the cautions.
///
/// # Errors
/// When there are none, or they stay.
pub fn enter(browser: &Browser, url: &str) -> Result<()> {
    browser.open(url)?;
    browser.see(CAUTIONS)?;
    accept(browser)
}

/// Accepts the cautions unless they have been accepted before, and waits for the answer.
///
/// # Errors
/// When no answer comes.
pub fn accept(browser: &Browser) -> Result<()> {
    let start = Instant::now();
    while !browser.sees(&answer("amps"))? {
        if start.elapsed() > PATIENCE {
            // This says why.
            return browser.see(&answer("amps"));
        }
        // The cautions stand in the HTML; until the program has started, a tap does nothing, and where they have
        // been accepted before, the program takes them away, maybe in the middle of the tap.
        if browser.sees(ACCEPT)? {
            let _ = browser.tap(ACCEPT);
        }
    }
    browser.not_see(CAUTIONS)
}

/// Makes a field visible by opening the part of the circuit that it belongs to; gives its selector.
///
/// # Errors
/// When it does not show.
pub fn open_field(browser: &Browser, name: &str) -> Result<String> {
    let css = field(name);
    if !browser.sees(&css)? {
        close(browser)?;
        let (part, _) = name.split_once('-').unwrap_or((name, ""));
        browser.tap(&format!("[data-testid=part-{part}]"))?;
        browser.see(&css)?;
    }
    Ok(css)
}

/// Types into a field, wherever it is.
///
/// # Errors
/// When it does not show or takes no text.
pub fn fill(browser: &Browser, name: &str, text: &str) -> Result<()> {
    let css = open_field(browser, name)?;
    browser.fill(&css, text)
}

/// Closes an editor that covers the answer, if one is open.
///
/// # Errors
/// When it stays open.
pub fn close(browser: &Browser) -> Result<()> {
    if browser.sees(CLOSE)? {
        browser.tap(CLOSE)?;
        browser.not_see(CLOSE)?;
    }
    Ok(())
}
