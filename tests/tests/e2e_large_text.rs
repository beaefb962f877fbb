//! Letters twice as large on a small phone: nothing is cut off, nothing lies over anything else, nothing needs to be
//! scrolled sideways.

use anyhow::{Result, ensure};
use lampladder_tests::browser::Browser;
use lampladder_tests::large::{enlarge, ensure_readable};
use lampladder_tests::{surroundings, walk};

const TWICE: f64 = 2.0;

#[test]
fn every_screen_can_be_read_with_letters_twice_as_large() -> Result<()> {
    let site = surroundings::site()?;
    let browser = Browser::start()?;
    let mut bad = Vec::new();
    let mut visit = |screen: &str| {
        enlarge(&browser, TWICE)?;
        browser.picture(&format!("large-{screen}"))?;
        if let Err(found) = ensure_readable(&browser, screen) {
            bad.push(format!("{found:#}"));
        }
        Ok(())
    };
    walk::every_screen(&browser, &site.url(), &mut visit)?;
    ensure!(bad.is_empty(), "{}", bad.join("\n"));
    Ok(())
}
