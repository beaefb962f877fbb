//! Answers of the independent Python scripts of `tests/oracle/`, kept in `tests/golden/`.
//!
//! `cargo xtask oracle` computes them afresh.

use lampladder_core::bank::Bank;
use lampladder_core::lamp::{Lamp, LampSpec};
use serde::Deserialize;
use serde::de::DeserializeOwned;

use crate::lamps::lamp_from;
use crate::reference::folder;

/// The cases of a golden file.
///
/// # Panics
/// Where the file is missing or is not what its test expects.
pub fn cases<T: DeserializeOwned>(name: &str) -> Vec<T> {
    let path = folder("golden").join(name);
    let text = std::fs::read_to_string(&path)
        .unwrap_or_else(|error| panic!("{}: {error}; `cargo xtask oracle` writes it", path.display()));
    let cases: Vec<T> =
        serde_json::from_str(&text).unwrap_or_else(|error| panic!("{}: {error}", path.display()));
    assert!(!cases.is_empty(), "{} has no cases", path.display());
    cases
}

/// A lamp by the four numbers that fix it.
#[derive(Debug, Clone, Copy, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FixedLamp {
    /// Rated volts.
    pub volts: f64,
    /// Rated watts.
    pub watts: f64,
    /// Filament temperature at the rating.
    pub rated_kelvin: f64,
    /// Gas share at the rating.
    pub gas_share: f64,
}

impl From<FixedLamp> for Lamp {
    fn from(FixedLamp { volts, watts, rated_kelvin, gas_share }: FixedLamp) -> Self {
        lamp_from(LampSpec {
            volts,
            watts,
            rated_kelvin: Some(rated_kelvin),
            gas_share: Some(gas_share),
            ..LampSpec::default()
        })
    }
}

/// A bank of such lamps.
///
/// # Panics
/// Where the core refuses it.
pub fn bank(groups: &[Vec<FixedLamp>]) -> Bank {
    let groups = groups.iter().map(|group| group.iter().map(|&lamp| lamp.into()).collect()).collect();
    Bank::new(groups).unwrap_or_else(|error| panic!("a bank that exists: {error}"))
}

/// Asserts that two numbers agree relatively.
///
/// # Panics
/// Where they do not, with `what` and both.
#[track_caller]
pub fn agree(ours: f64, golden: f64, tolerance: f64, what: &str) {
    let off = (ours - golden).abs() / golden.abs().max(f64::MIN_POSITIVE);
    assert!(off <= tolerance, "{what}: core {ours}, oracle {golden}, apart by {off:.2e} of {tolerance:.0e}");
}
