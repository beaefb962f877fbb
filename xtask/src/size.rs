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
const AFTERWARDS: usize = 358_700;
/// How the names of its files begin.
const LATER: [&str; 3] = ["reckoner-", "rest-", "later-"];
/// How the names of the files with the texts of a first screen begin, a file a language.
const LANGUAGE: &str = "words-";
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
    let language = heaviest_language(&all);
    let (later, first): (Vec<_>, Vec<_>) = all.into_iter().partition(|(name, ..)| {
        LATER.iter().any(|later| name.starts_with(later))
            || (name.starts_with(LANGUAGE) && Some(name) != language.as_ref())
    });
    Ok(table("the first load", &first, FIRST_LOAD)
        + table("fetched after the first answer", &later, AFTERWARDS)
        + table("icons for a home screen", &icons, ICONS))
}

/// The texts of the language that weighs most: a first load has one language, whichever it is.
fn heaviest_language(all: &[(String, usize, usize)]) -> Option<String> {
    let texts = all.iter().filter(|(name, ..)| name.starts_with(LANGUAGE));
    texts.max_by_key(|(.., small)| *small).map(|(name, ..)| name.clone())
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
