//! Equipment that a series lamp misleads on, and equipment that it must not be used for.

use serde::{Deserialize, Serialize};

use super::Family;

/// What must be said before any number about a family.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Warning {
    /// A healthy one can pulse behind a lamp: it starts, pulls its own input down and stops.
    Hunts,
    /// It can stand still on reduced voltage, and heats while it stands.
    StandsAndHeats,
    /// Its chassis is connected to the mains.
    LiveChassis,
    /// Its picture tube keeps tens of kilovolts after the plug is pulled.
    TubeVoltage,
    /// It can look shorted behind a small lamp, because the lamp cannot warm its degauss thermistor.
    LooksShorted,
    /// Its reservoir holds the crest of the mains after the plug is pulled.
    ChargedReservoir,
    /// It can start without warning when a fault clears, or as the next lamp is wired.
    MovingParts,
}

/// Equipment that is refused, by its reason.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Unsuitable {
    /// Lethal stored energy at kilovolts, whatever limits its input.
    MicrowaveOven,
    /// Its users' lives hang on tests that this method does not make.
    Medical,
    /// One lamp in one conductor says nothing about the other two.
    ThreePhase,
    /// Heaters and motors of kilowatts: a bank that passes enough is no limit any more.
    TooPowerful,
}

impl Unsuitable {
    /// Every kind.
    pub const ALL: [Self; 4] = [Self::MicrowaveOven, Self::Medical, Self::ThreePhase, Self::TooPowerful];
}

/// Amperes above which no sensible bank brings equipment near its working voltage: eight 200 W lamps at 230 V.
pub const MOST_BANK_AMPS: f64 = 7.0;

impl Family {
    /// What must be said first about this family.
    pub const fn warnings(self) -> &'static [Warning] {
        match self {
            Self::TransformerSupply | Self::ValveTransformer => &[Warning::ChargedReservoir],
            Self::ValveSeries => &[Warning::LiveChassis, Warning::ChargedReservoir],
            Self::SwitchMode | Self::SwitchModeCorrected => &[Warning::Hunts, Warning::ChargedReservoir],
            Self::CrtSet => &[
                Warning::TubeVoltage,
                Warning::LiveChassis,
                Warning::LooksShorted,
                Warning::Hunts,
                Warning::ChargedReservoir,
            ],
            Self::UniversalMotor => &[Warning::MovingParts],
            Self::InductionMotor => &[Warning::StandsAndHeats, Warning::MovingParts],
            Self::Heater | Self::Lamp | Self::Plain | Self::Measured => &[],
        }
    }
}
