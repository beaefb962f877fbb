//! Kinds of equipment: one file a family, which knows its conditions, its class defaults and how to build the load.
//!
//! A class default is a number that the rating plate does not print. Each has a range, a source, and can be
//! changed by the person ([`Detail`]).

mod crt_set;
mod heater;
mod induction_motor;
mod lamp_load;
mod measured;
mod plain;
mod switch_mode;
mod transformer_supply;
mod universal_motor;
mod valve_set;
mod warning;

pub use warning::{MOST_BANK_AMPS, Unsuitable, Warning};

use serde::{Deserialize, Serialize};

use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail};
use crate::error::InputError;
use crate::load::Load;
use crate::plate::Plate;

/// A kind of equipment, by what it does to the circuit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Family {
    /// A mains transformer, rectifier and reservoir: most radios and amplifiers.
    TransformerSupply,
    /// A valve set with a mains transformer.
    ValveTransformer,
    /// A valve set whose heaters stand in one string across the mains.
    ValveSeries,
    /// A switch-mode supply without power-factor correction: chargers, small adapters.
    SwitchMode,
    /// A switch-mode supply with power-factor correction: computers, larger sets.
    SwitchModeCorrected,
    /// A set with a picture tube: a degauss coil and thermistor beside a switch-mode supply.
    CrtSet,
    /// A motor with brushes: drills, mixers, vacuum cleaners.
    UniversalMotor,
    /// A motor without brushes: fans, pumps, record players.
    InductionMotor,
    /// A resistor: kettle, iron, soldering iron.
    Heater,
    /// An incandescent lamp.
    Lamp,
    /// Anything of which only volts, watts and power factor are known.
    Plain,
    /// A resistance measured across the plug.
    Measured,
}

/// What one family's file tells of it.
pub(crate) struct Card {
    pub(crate) name: &'static str,
    pub(crate) conditions: &'static [Condition],
    /// Least and greatest power of a healthy one over the plate's.
    pub(crate) healthy_shares: (f64, f64),
    pub(crate) usual_power_factor: f64,
    pub(crate) details: &'static [ClassDefault],
    pub(crate) build: fn(&Plate, Condition, f64) -> Result<Load, InputError>,
}

impl Family {
    /// Every family, in the order in which a bench meets them.
    pub const ALL: [Self; 12] = [
        Self::TransformerSupply,
        Self::ValveTransformer,
        Self::ValveSeries,
        Self::SwitchMode,
        Self::SwitchModeCorrected,
        Self::CrtSet,
        Self::UniversalMotor,
        Self::InductionMotor,
        Self::Heater,
        Self::Lamp,
        Self::Plain,
        Self::Measured,
    ];

    pub(crate) const fn card(self) -> &'static Card {
        match self {
            Self::TransformerSupply => &transformer_supply::CARD,
            Self::ValveTransformer => &valve_set::TRANSFORMER,
            Self::ValveSeries => &valve_set::SERIES,
            Self::SwitchMode => &switch_mode::PLAIN,
            Self::SwitchModeCorrected => &switch_mode::CORRECTED,
            Self::CrtSet => &crt_set::CARD,
            Self::UniversalMotor => &universal_motor::CARD,
            Self::InductionMotor => &induction_motor::CARD,
            Self::Heater => &heater::CARD,
            Self::Lamp => &lamp_load::CARD,
            Self::Plain => &plain::CARD,
            Self::Measured => &measured::CARD,
        }
    }

    /// The family's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        self.card().name
    }

    /// The conditions that this family can be in: healthy first, then the likeliest faults.
    pub const fn conditions(self) -> &'static [Condition] {
        self.card().conditions
    }

    /// Least and greatest power of a healthy one over the plate's.
    ///
    /// Heaters: -10 % to +5 % (the usual limits of appliance standards, from memory). Most others: a plate states
    /// the most that is drawn, so 30 % below to 10 % above (design value, no source).
    pub const fn healthy_shares(self) -> (f64, f64) {
        self.card().healthy_shares
    }

    /// Usual power factor at full voltage, where the plate prints none. Each family's file names its source.
    pub const fn usual_power_factor(self) -> f64 {
        self.card().usual_power_factor
    }

    /// The class defaults of this family.
    pub const fn details(self) -> &'static [ClassDefault] {
        self.card().details
    }

    /// The class default of one detail, if the family has it.
    pub fn detail(self, detail: Detail) -> Option<&'static ClassDefault> {
        self.details().iter().find(|default| default.detail == detail)
    }
}
