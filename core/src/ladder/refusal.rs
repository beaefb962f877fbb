//! Why there is no ladder, and the way forward.

use alloc::vec::Vec;
use core::fmt;

use serde::{Deserialize, Serialize};

use super::missing::{Missing, Rating};
use crate::error::InputError;
use crate::family::{Family, Unsuitable};
use crate::steady::SteadyError;

/// Why there is no ladder.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum LadderError {
    /// No lamp in the stock.
    EmptyStock {
        /// The lamp to begin with.
        first: Option<Missing>,
    },
    /// Every bank would overdrive a lamp on this supply.
    NoLampFits {
        /// The supply's volts.
        supply_volts: f64,
        /// A kind of the stock of which two in series would stand it, where only one is owned.
        twin: Option<usize>,
        /// What should be printed on a lamp.
        rating: Rating,
    },
    /// Every bank within the lamps' ratings makes more heat than a holder stands.
    TooHot {
        /// What a holder stands, watts.
        holder_watts: f64,
        /// What should be printed on a lamp.
        rating: Rating,
    },
    /// The weakest bank passes more than the first rung may.
    FirstTooStrong {
        /// What it passes into a dead short, amperes.
        least_amps: f64,
        /// What the first rung may pass, amperes.
        limit_amps: f64,
        /// The lamp that makes a ladder possible.
        missing: Option<Missing>,
    },
    /// The supply is well above what the plate says; no lamp helps where little current flows.
    SupplyTooHigh {
        /// The supply's volts.
        supply_volts: f64,
        /// The plate's volts.
        plate_volts: f64,
    },
    /// The supply never reaches the voltage at which the equipment starts, bank or no bank.
    NeverStarts {
        /// The supply's volts.
        supply_volts: f64,
    },
    /// Six lamps of what a holder stands leave it less than is worth having.
    BeyondAnyBank {
        /// Volts at healthy equipment behind them over the supply's; 0 where it does not run.
        share: f64,
        /// Its family.
        family: Family,
    },
    /// Not for a series lamp at all.
    Unsuitable {
        /// Why.
        reason: Unsuitable,
        /// Its family.
        family: Family,
    },
    /// The circuit has no answer.
    Circuit(SteadyError),
}

/// What a person can do.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum WayForward {
    /// Find this lamp.
    AddLamp(Rating),
    /// Find a second lamp of this kind of the stock and put the two in series.
    AddTwin(usize),
    /// Use holders that stand more, and say so.
    StrongerHolders,
    /// Decide that the equipment stands more than its plate's current when shorted.
    RaiseFirstLimit,
    /// Use a transformer for the plate's voltage.
    MatchTheVoltage,
    /// Change what the plate leaves open, such as the voltage at which it starts.
    CheckThePlate,
    /// Take off what it drives or feeds, and bring up the rest.
    DisconnectItsLoad,
    /// Measure its element, winding and insulation instead: that tells more than a lamp.
    MeasureInstead,
    /// A variable isolating transformer with an ammeter, raised by hand.
    VariableTransformer,
    /// Somebody trained for it.
    Specialist,
}

impl LadderError {
    /// What a person can do, the likeliest first; never empty.
    pub fn ways(&self) -> Vec<WayForward> {
        use WayForward as Way;
        let lamp = |missing: &Option<Missing>| missing.map(|missing| Way::AddLamp(missing.rating));
        match self {
            Self::EmptyStock { first } => alloc::vec![lamp(first).unwrap_or(Way::CheckThePlate)],
            Self::NoLampFits { twin, rating, .. } => {
                twin.map(Way::AddTwin).into_iter().chain([Way::AddLamp(*rating)]).collect()
            }
            Self::TooHot { rating, .. } => alloc::vec![Way::AddLamp(*rating), Way::StrongerHolders],
            Self::FirstTooStrong { missing, .. } => {
                lamp(missing).into_iter().chain([Way::RaiseFirstLimit]).collect()
            }
            Self::SupplyTooHigh { .. } => alloc::vec![Way::MatchTheVoltage],
            Self::NeverStarts { .. } => alloc::vec![Way::CheckThePlate, Way::MatchTheVoltage],
            Self::BeyondAnyBank { family, .. }
            | Self::Unsuitable { family, reason: Unsuitable::TooPowerful } => instead(*family),
            Self::Unsuitable { .. } => alloc::vec![Way::Specialist],
            Self::Circuit(_) => alloc::vec![Way::CheckThePlate],
        }
    }
}

/// What to do with equipment of a family that no sensible bank runs (common practice, no source).
fn instead(family: Family) -> Vec<WayForward> {
    use WayForward as Way;
    match family {
        // Element and insulation are all there is to it.
        Family::Heater | Family::Lamp | Family::Measured => alloc::vec![Way::MeasureInstead],
        Family::UniversalMotor | Family::InductionMotor => {
            alloc::vec![Way::DisconnectItsLoad, Way::MeasureInstead, Way::VariableTransformer]
        }
        _ => alloc::vec![Way::DisconnectItsLoad, Way::VariableTransformer, Way::MeasureInstead],
    }
}

impl From<SteadyError> for LadderError {
    fn from(error: SteadyError) -> Self {
        Self::Circuit(error)
    }
}

impl From<InputError> for LadderError {
    fn from(error: InputError) -> Self {
        Self::Circuit(SteadyError::Input(error))
    }
}

impl fmt::Display for LadderError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::EmptyStock { .. } => f.write_str("the stock holds no lamp"),
            Self::NoLampFits { supply_volts, rating, .. } => write!(
                f,
                "every bank of this stock would overdrive a lamp on {supply_volts} V; a lamp for {} V would not",
                rating.volts
            ),
            Self::TooHot { holder_watts, .. } => {
                write!(f, "every bank of this stock makes more heat than holders of {holder_watts} W stand")
            }
            Self::FirstTooStrong { least_amps, limit_amps, .. } => write!(
                f,
                "the weakest bank passes {least_amps:.3} A into a short, more than the {limit_amps:.3} A of a first rung"
            ),
            Self::SupplyTooHigh { supply_volts, plate_volts } => {
                write!(f, "the supply of {supply_volts} V is too much for a plate of {plate_volts} V")
            }
            Self::NeverStarts { supply_volts } => {
                write!(f, "the equipment does not start at {supply_volts} V, whatever the bank")
            }
            Self::BeyondAnyBank { share, .. } => {
                write!(
                    f,
                    "no sensible bank runs it: six lamps leave it {:.0} % of the voltage",
                    100.0 * share
                )
            }
            Self::Unsuitable { .. } => {
                f.write_str("not for a series lamp: it takes more than any bank passes")
            }
            Self::Circuit(error) => error.fmt(f),
        }
    }
}

impl core::error::Error for LadderError {}
