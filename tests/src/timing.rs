//! What the benches of the page share.

use anyhow::{Context, Result};

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
