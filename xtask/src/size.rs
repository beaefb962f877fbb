//! `cargo xtask size`: what a first load weighs, and what is fetched after it.

use std::fs;
use std::path::Path;

use anyhow::{Result, bail};
use xtask::{files, site};

use crate::page;

/// Gzipped bytes of everything that a first visit loads before it answers. One bar of signal is some 30 kB/s: five
/// seconds.
const FIRST_LOAD: usize = 150_000;
/// Gzipped bytes of what is fetched after the first answer, while a person reads: what it came to when it was written
/// down, and 5 %.
const AFTERWARDS: usize = 250_000;
/// How the names of its files begin.
const LATER: [&str; 3] = ["reckoner-", "rest-", "later-"];
/// Gzipped bytes of the icons for a home screen: no first answer waits for them.
const ICONS: usize = 32_000;

pub(crate) fn size(arguments: &[String]) -> Result<()> {
    if !arguments.is_empty() {
        bail!("usage: cargo xtask size");
    }
    let over = report(&page::build()?)?;
    if over > 0 {
        bail!("{over} bytes over the budget");
    }
    Ok(())
}

/// Prints the tables, and gives the bytes over the budgets. Every file of the folder counts once, for the service worker
/// fetches them all.
pub(crate) fn report(folder: &Path) -> Result<usize> {
    let mut all = Vec::new();
    for (name, path) in files::below(folder)? {
        let bytes = fs::read(path)?;
        all.push((name, bytes.len(), site::compress(&bytes)?.len()));
    }
    let (icons, all): (Vec<_>, Vec<_>) = all.into_iter().partition(|(name, ..)| name.starts_with("icons/"));
    let (later, first): (Vec<_>, Vec<_>) = all
        .into_iter()
        .partition(|(name, ..)| LATER.iter().any(|later| name.starts_with(later)) || is_spare(name));
    Ok(table("the first load", &first, FIRST_LOAD)
        + table("fetched after the first answer", &later, AFTERWARDS)
        + table("icons for a home screen", &icons, ICONS))
}

/// Whether a file holds the texts of a language that an English reader never asks for: a first load has one of them.
fn is_spare(name: &str) -> bool {
    name.starts_with("words-") && !name.starts_with("words-en-")
}

fn table(what: &str, files: &[(String, usize, usize)], budget: usize) -> usize {
    println!("{:>10} {:>10}  {what}", "bytes", "gzipped");
    for (name, bytes, small) in files {
        println!("{bytes:>10} {small:>10}  {name}");
    }
    let bytes: usize = files.iter().map(|(_, bytes, _)| bytes).sum();
    let small: usize = files.iter().map(|(.., small)| small).sum();
    println!("{bytes:>10} {small:>10}  {what}, all; budget {budget} gzipped\n");
    small.saturating_sub(budget)
}
