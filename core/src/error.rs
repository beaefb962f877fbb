//! What can be wrong with an input: the field, the value and the range that is allowed.

use core::fmt;

use serde::{Deserialize, Serialize};

use crate::condition::Condition;
use crate::detail::Detail;

/// A property that a person or a request can set, named as in the JSON contract.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Field {
    /// RMS or DC potential difference, volts.
    Volts,
    /// Real power, watts.
    Watts,
    /// Current, amperes.
    Amps,
    /// Supply frequency, hertz; 0 is direct current.
    Hertz,
    /// Resistance, ohms.
    Ohms,
    /// Reactance at the supply frequency, ohms.
    ReactanceOhms,
    /// Power factor, 0 to 1.
    PowerFactor,
    /// Printed luminous flux, lumens.
    Lumens,
    /// Resistance measured on the cold lamp, ohms.
    ColdOhms,
    /// Measured volts and amperes of a lamp.
    Points,
    /// Filament temperature at the rating, kelvin.
    RatedKelvin,
    /// Share of the input carried away by the filling gas at the rating.
    GasShare,
    /// A filament temperature, kelvin.
    Kelvin,
    /// Reservoir capacitance, farads.
    Farads,
    /// Resistance in series with a rectifier, ohms.
    SeriesOhms,
    /// Forward voltage of the conducting diodes together, volts.
    DiodeVolts,
    /// DC voltage above which a switch-mode supply starts, volts.
    StartVolts,
    /// DC voltage below which a switch-mode supply stops, volts.
    StopVolts,
    /// The lamps in use.
    Bank,
    /// Seconds before a converter starts.
    RestartSeconds,
    /// How many lamps.
    Count,
    /// Apparent power, volt-amperes.
    VoltAmps,
    /// A class default of a family of equipment.
    Details,
    /// A state that equipment can be in.
    Condition,
    /// A duration, seconds.
    Seconds,
    /// Times or distance of samples, seconds.
    SampleSeconds,
    /// Angle of the mains at which the switch closes, degrees.
    SwitchDegrees,
    /// Flux left in a core, over the crest of its rated flux.
    Remanence,
    /// Relative error that a solver may leave.
    Tolerance,
    /// Rated current of a fuse, amperes.
    RatedAmps,
    /// Sheet of a fuse standard.
    Sheet,
    /// The lamps that a person owns.
    Stock,
    /// Watts that a lamp holder stands.
    HolderWatts,
    /// Short-circuit current of the first rung over the plate's current.
    FirstShare,
    /// Supply volts times short-circuit current that any equipment stands.
    FirstLeastWatts,
    /// Supply volts times short-circuit current that no first rung exceeds.
    FirstMostWatts,
    /// Short-circuit current of a rung over that of the one before.
    Growth,
    /// How far the supply may rise above its volts, over these.
    SupplyRise,
    /// How far a lamp may be driven above its rated volts, over these.
    LampOvervoltage,
    /// Differences of voltage that nobody can tell, over the supply's.
    CloseShare,
    /// Least voltage worth having at the equipment, over the supply's.
    LeastShare,
    /// Length of the lead, metres.
    Metres,
    /// A reading of the supply's volts.
    SupplyVolts,
    /// A reading of the volts across the bank.
    BankVolts,
    /// A reading of the volts across the equipment.
    LoadVolts,
    /// A reading of the equipment's real power, watts.
    LoadWatts,
    /// A reading of the resistance across the unplugged equipment's plug, ohms.
    PlugOhms,
    /// Part of a meter's accuracy, per cent of what it shows.
    Percent,
    /// Part of a meter's accuracy, counts of its last digit.
    Digits,
    /// The most that a meter counts to.
    Counts,
    /// What the supply does between readings, per cent.
    DriftPercent,
    /// All readings together.
    Readings,
}

impl Field {
    /// The property's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Volts => "volts",
            Self::Watts => "watts",
            Self::Amps => "amps",
            Self::Hertz => "hertz",
            Self::Ohms => "ohms",
            Self::ReactanceOhms => "reactance_ohms",
            Self::PowerFactor => "power_factor",
            Self::Lumens => "lumens",
            Self::ColdOhms => "cold_ohms",
            Self::Points => "points",
            Self::RatedKelvin => "rated_kelvin",
            Self::GasShare => "gas_share",
            Self::Kelvin => "kelvin",
            Self::Farads => "farads",
            Self::SeriesOhms => "series_ohms",
            Self::DiodeVolts => "diode_volts",
            Self::StartVolts => "start_volts",
            Self::StopVolts => "stop_volts",
            Self::Bank => "bank",
            Self::RestartSeconds => "restart_seconds",
            Self::Count => "count",
            Self::VoltAmps => "volt_amps",
            Self::Details => "details",
            Self::Condition => "condition",
            Self::Seconds => "seconds",
            Self::SampleSeconds => "sample_seconds",
            Self::SwitchDegrees => "switch_degrees",
            Self::Remanence => "remanence",
            Self::Tolerance => "tolerance",
            Self::RatedAmps => "rated_amps",
            Self::Sheet => "sheet",
            Self::Stock => "stock",
            Self::HolderWatts => "holder_watts",
            Self::FirstShare => "first_share",
            Self::FirstLeastWatts => "first_least_watts",
            Self::FirstMostWatts => "first_most_watts",
            Self::Growth => "growth",
            Self::SupplyRise => "supply_rise",
            Self::LampOvervoltage => "lamp_overvoltage",
            Self::CloseShare => "close_share",
            Self::LeastShare => "least_share",
            Self::Metres => "metres",
            Self::SupplyVolts => "supply_volts",
            Self::BankVolts => "bank_volts",
            Self::LoadVolts => "load_volts",
            Self::LoadWatts => "load_watts",
            Self::PlugOhms => "plug_ohms",
            Self::Percent => "percent",
            Self::Digits => "digits",
            Self::Counts => "counts",
            Self::DriftPercent => "drift_percent",
            Self::Readings => "readings",
        }
    }

    /// The SI unit symbol; empty for a ratio or a count.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::Metres => "m",
            Self::Volts
            | Self::DiodeVolts
            | Self::StartVolts
            | Self::StopVolts
            | Self::SupplyVolts
            | Self::BankVolts
            | Self::LoadVolts => "V",
            Self::Watts
            | Self::HolderWatts
            | Self::FirstLeastWatts
            | Self::FirstMostWatts
            | Self::LoadWatts => "W",
            Self::Amps | Self::RatedAmps => "A",
            Self::Hertz => "Hz",
            Self::Ohms | Self::ReactanceOhms | Self::ColdOhms | Self::SeriesOhms | Self::PlugOhms => "Ω",
            Self::Lumens => "lm",
            Self::RatedKelvin | Self::Kelvin => "K",
            Self::Farads => "F",
            Self::VoltAmps => "VA",
            Self::RestartSeconds | Self::Seconds | Self::SampleSeconds => "s",
            Self::SwitchDegrees => "°",
            Self::Percent | Self::DriftPercent => "%",
            _ => "",
        }
    }
}

/// Why an input was refused.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum InputError {
    /// Not a finite number.
    NotFinite {
        /// The refused property.
        field: Field,
    },
    /// A number outside what is allowed.
    OutOfRange {
        /// The refused property.
        field: Field,
        /// What was given.
        value: f64,
        /// Least allowed value.
        low: f64,
        /// Greatest allowed value.
        high: f64,
    },
    /// Two properties that cannot both be true.
    Conflict {
        /// The refused property.
        field: Field,
        /// What was given.
        value: f64,
        /// The property it contradicts.
        with: Field,
        /// The limit that the other property sets.
        limit: f64,
    },
    /// A property that is needed and was not given.
    Missing {
        /// The missing property.
        field: Field,
    },
    /// A class default that this family of equipment does not have.
    Unknown {
        /// The refused detail.
        detail: Detail,
    },
    /// A class default outside what is allowed.
    DetailOutOfRange {
        /// The refused detail.
        detail: Detail,
        /// What was given.
        value: f64,
        /// Least allowed value.
        low: f64,
        /// Greatest allowed value.
        high: f64,
    },
    /// A condition that this family of equipment does not have.
    Unlikely {
        /// The refused condition.
        condition: Condition,
    },
    /// A number of things that is no whole number.
    NotWhole {
        /// The refused property.
        field: Field,
        /// What was given.
        value: f64,
    },
    /// A reactance or a transformer on direct current.
    NeedsAlternating {
        /// The refused property.
        field: Field,
    },
}

impl InputError {
    /// The refused property.
    pub const fn field(&self) -> Field {
        match *self {
            Self::NotFinite { field }
            | Self::OutOfRange { field, .. }
            | Self::Conflict { field, .. }
            | Self::Missing { field }
            | Self::NotWhole { field, .. }
            | Self::NeedsAlternating { field } => field,
            Self::Unknown { .. } | Self::DetailOutOfRange { .. } => Field::Details,
            Self::Unlikely { .. } => Field::Condition,
        }
    }
}

impl fmt::Display for InputError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let name = self.field().name();
        match *self {
            Self::NotFinite { .. } => write!(f, "{name} must be a finite number"),
            Self::OutOfRange { field, value, low, high } => {
                let gap = if field.unit().is_empty() { "" } else { " " };
                write!(f, "{name} must be from {low} to {high}{gap}{}, not {value:?}", field.unit())
            }
            Self::DetailOutOfRange { detail, value, low, high } => {
                let gap = if detail.unit().is_empty() { "" } else { " " };
                write!(
                    f,
                    "{} must be from {low} to {high}{gap}{}, not {value:?}",
                    detail.name(),
                    detail.unit()
                )
            }
            Self::Missing { .. } => write!(f, "{name} is missing"),
            Self::NotWhole { value, .. } => write!(f, "{name} must be a whole number, not {value:?}"),
            Self::Unknown { detail } => write!(f, "this family has no {}", detail.name()),
            Self::Unlikely { condition } => write!(f, "this family is never {}", condition.name()),
            Self::Conflict { field, value, with, limit } => write!(
                f,
                "{name} of {value:?} {} contradicts {}, which allows at most {limit:?}",
                field.unit(),
                with.name()
            ),
            Self::NeedsAlternating { .. } => write!(f, "{name} has no meaning on direct current (0 Hz)"),
        }
    }
}

impl core::error::Error for InputError {}

/// Passes a number that is finite and inside `low..=high`.
///
/// # Errors
/// [`InputError::NotFinite`] and [`InputError::OutOfRange`].
#[inline(never)]
pub fn within(field: Field, value: f64, low: f64, high: f64) -> Result<f64, InputError> {
    if !value.is_finite() {
        return Err(InputError::NotFinite { field });
    }
    if (low..=high).contains(&value) {
        Ok(value)
    } else {
        Err(InputError::OutOfRange { field, value, low, high })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use alloc::string::ToString;

    #[test]
    fn a_refusal_names_field_range_and_value() {
        let refused = within(Field::Watts, 1e300, 0.05, 5000.0).expect_err("far out of range");
        assert_eq!(refused.to_string(), "watts must be from 0.05 to 5000 W, not 1e300");
        assert_eq!(
            within(Field::PowerFactor, f64::NAN, 0.0, 1.0),
            Err(InputError::NotFinite { field: Field::PowerFactor })
        );
    }
}
