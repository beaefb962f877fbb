//! Where things are on the page, and the steps that most tests begin with.
//!
//! Only `data-testid` attributes are used to find things; their names are all in this file.

use std::time::Instant;

use anyhow::{Result, ensure};

use crate::browser::{Browser, PATIENCE};

/// The cautions.
pub const CAUTIONS: &str = "[data-testid=cautions]";
/// Accepts the cautions, or closes them again.
pub const ACCEPT: &str = "[data-testid=accept]";
/// The line that is always in view.
pub const REMINDER: &str = "[data-testid=reminder]";
/// Opens the cautions again.
pub const OPEN_CAUTIONS: &str = "[data-testid=open-cautions]";
/// Closes the editor of a part.
pub const DONE: &str = "[data-testid=done]";
/// What is said about a link that cannot be read, or about storage that cannot be used.
pub const NOTE: &str = "[data-testid=note]";
/// The caution that a lamp is over its rated voltage.
pub const LAMP_CAUTION: &str = "[data-testid=lamp-caution]";
/// The one sentence to act on, and what it assumes.
pub const ADVICE: &str = "[data-testid=advice]";
/// The current, in the middle of the loop.
pub const AMPS: &str = "[data-testid=result-amps]";
/// The panel that is in front, in the list of panels.
pub const FRONT: &str = "[data-testid^=tab-][aria-current=page]";
/// The bar with the voltages across lamps and equipment, in this order.
pub const VOLTAGES: &str = "[data-testid=voltage-bar]";

/// One of the three cells of the comparison: `healthy`, `overloaded`, `shorted`.
pub fn cell(condition: &str) -> String {
    format!("[data-testid=cell-{condition}]")
}

/// An input, by the name of its field: `supply-volts`, `lamp-volts`, `lamp-watts`, `plate-volts`, `plate-watts`, …
pub fn field(name: &str) -> String {
    format!("[data-testid=field-{name}]")
}

/// The message beside a field.
pub fn message(name: &str) -> String {
    format!("[data-testid=error-{name}]")
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
    // The panel in front may be any: it is the one of the last visit.
    while !browser.sees(FRONT)? {
        if start.elapsed() > PATIENCE {
            // This says why.
            return browser.see(FRONT);
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
        let part = match name.split_once('-') {
            Some(("supply", _)) => "supply",
            Some(("plate", _)) => "equipment",
            _ => "bank",
        };
        browser.tap(&format!("[data-testid=edit-{part}]"))?;
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
    if browser.sees(DONE)? {
        browser.tap(DONE)?;
        browser.not_see(DONE)?;
    }
    Ok(())
}

/// Fails if the console holds anything: a panic of the program ends there, and so does what the browser refuses.
///
/// # Errors
/// What it holds.
pub fn no_complaints(browser: &Browser) -> Result<()> {
    let console = browser.console()?;
    ensure!(console.is_empty(), "the console holds complaints: {console:?}");
    Ok(())
}
