//! Checks with an instrument: before power is applied, and after it has been taken away.
//!
//! # Before power
//! - Protective conductor, insulation, leakage: limits by class ([`Limit`]). None was read in the standard itself, so
//!   every one carries [`Caveat::CheckStandardAndLocalCode`].
//! - Resistance across the plug against what plate and family predict ([`across_plug`]): it finds a shorted input and a
//!   broken path before any lamp does.
//!
//! # After power
//! - How long a reservoir takes to fall below each published limit ([`Discharge`]). The time says how long to wait, and
//!   never that it is over: [`AfterPower::first`] is to measure, always.
//!
//! # Out of scope
//! Whether anything may be touched.

mod discharge;
mod limits;
mod plug;

pub use discharge::{
    AfterPower, Discharge, DischargeLimit, DischargePlace, LIMITS as DISCHARGE_LIMITS, Wait,
};
pub use limits::{
    Caveat, Class, Limit, Quantity, Sense, Verdict, insulation_ohms, leakage_amps, protective_conductor_ohms,
};
pub use plug::{Path, PlugFinding, PlugRange, PlugReading, across_plug, judge};

/// What comes first after power is taken away.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum First {
    /// Measure before touching.
    MeasureBeforeTouching,
}
