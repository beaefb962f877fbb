//! Class defaults: what the rating plate does not print and the model needs.

use serde::{Deserialize, Serialize};

/// One number that a family needs beside its plate.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Detail {
    /// Magnetising current at plate volts, over plate watts per volt.
    MagnetisingShare,
    /// Core loss at plate volts over plate watts.
    CoreShare,
    /// Winding resistance over the plate's V^2/W.
    WindingShare,
    /// Seconds in which the load discharges the reservoir.
    ReservoirSeconds,
    /// Heater power over plate watts.
    HeaterShare,
    /// Watts of a free-running motor over plate watts.
    NoLoadShare,
    /// Current of a standing motor at plate volts over its rated current.
    StallMultiple,
    /// Watts when idle over plate watts.
    IdleShare,
    /// DC volts above which a switch-mode supply starts.
    StartVolts,
    /// DC volts below which a switch-mode supply stops.
    StopVolts,
    /// Reservoir, microfarads per watt.
    MicrofaradsPerWatt,
    /// Resistance ahead of a rectifier, ohms.
    SeriesOhms,
    /// Cold resistance of the degauss thermistor with its coil, ohms.
    DegaussColdOhms,
    /// Current through the warm degauss thermistor, amperes.
    DegaussWarmAmps,
    /// Heat that trips the degauss thermistor, watts.
    DegaussTripWatts,
    /// Torque that a standing motor must overcome over its rated torque.
    BreakawayShare,
    /// Resistance measured across the plug, ohms.
    MeasuredOhms,
    /// Seconds that a stopped converter waits before it starts again.
    RestartSeconds,
}

impl Detail {
    /// Every detail.
    pub const ALL: [Self; 18] = [
        Self::MagnetisingShare,
        Self::CoreShare,
        Self::WindingShare,
        Self::ReservoirSeconds,
        Self::HeaterShare,
        Self::NoLoadShare,
        Self::StallMultiple,
        Self::IdleShare,
        Self::StartVolts,
        Self::StopVolts,
        Self::MicrofaradsPerWatt,
        Self::SeriesOhms,
        Self::DegaussColdOhms,
        Self::DegaussWarmAmps,
        Self::DegaussTripWatts,
        Self::BreakawayShare,
        Self::MeasuredOhms,
        Self::RestartSeconds,
    ];

    /// The detail's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::MagnetisingShare => "magnetising_share",
            Self::CoreShare => "core_share",
            Self::WindingShare => "winding_share",
            Self::ReservoirSeconds => "reservoir_seconds",
            Self::HeaterShare => "heater_share",
            Self::NoLoadShare => "no_load_share",
            Self::StallMultiple => "stall_multiple",
            Self::IdleShare => "idle_share",
            Self::StartVolts => "start_volts",
            Self::StopVolts => "stop_volts",
            Self::MicrofaradsPerWatt => "microfarads_per_watt",
            Self::SeriesOhms => "series_ohms",
            Self::DegaussColdOhms => "degauss_cold_ohms",
            Self::DegaussWarmAmps => "degauss_warm_amps",
            Self::DegaussTripWatts => "degauss_trip_watts",
            Self::BreakawayShare => "breakaway_share",
            Self::MeasuredOhms => "measured_ohms",
            Self::RestartSeconds => "restart_seconds",
        }
    }

    /// The SI unit symbol; empty for a ratio.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::ReservoirSeconds | Self::RestartSeconds => "s",
            Self::StartVolts | Self::StopVolts => "V",
            Self::MicrofaradsPerWatt => "µF/W",
            Self::SeriesOhms | Self::DegaussColdOhms | Self::MeasuredOhms => "Ω",
            Self::DegaussWarmAmps => "A",
            Self::DegaussTripWatts => "W",
            _ => "",
        }
    }
}

/// How a default is known.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Standing {
    /// Read in a document that quotes the source.
    Published,
    /// Remembered, seen in no document.
    Memory,
    /// Chosen for this program.
    Design,
}

/// A class default with its allowed range.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ClassDefault {
    /// Which number.
    pub detail: Detail,
    /// Its value where nothing better is known.
    pub value: f64,
    /// Least allowed value.
    pub low: f64,
    /// Greatest allowed value.
    pub high: f64,
    /// How it is known.
    pub standing: Standing,
}

impl ClassDefault {
    pub(crate) const fn new(detail: Detail, value: f64, (low, high): (f64, f64), standing: Standing) -> Self {
        Self { detail, value, low, high, standing }
    }
}
