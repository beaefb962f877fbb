//! `cargo xtask size`: what a first load weighs.

use std::fs;
use std::path::Path;

use anyhow::{Result, bail};
use xtask::{files, site};

use crate::page;

/// Gzipped bytes of everything that a first visit loads. One bar of signal is some 30 kB/s: five seconds.
const BUDGET: usize = 150_000;

pub(crate) fn size(arguments: &[String]) -> Result<()> {
    if !arguments.is_empty() {
        bail!("usage: cargo xtask size");
    }
    let over = report(&page::build()?)?;
    if over > 0 {
        bail!("the first load is {over} bytes over its budget of {BUDGET}");
    }
    Ok(())
}

/// Prints the table, and gives the bytes over the budget. Every file of the folder counts, for the service worker
/// fetches them all.
pub(crate) fn report(folder: &Path) -> Result<usize> {
    println!("{:>10} {:>10}  file", "bytes", "gzipped");
    let (mut raw_sum, mut small_sum) = (0, 0);
    for (name, path) in files::below(folder)? {
        let bytes = fs::read(path)?;
        let small = site::compress(&bytes)?.len();
        println!("{:>10} {small:>10}  {name}", bytes.len());
        raw_sum += bytes.len();
        small_sum += small;
    }
    println!("{raw_sum:>10} {small_sum:>10}  all files of the first load; budget {BUDGET} gzipped");
    Ok(small_sum.saturating_sub(BUDGET))
}
