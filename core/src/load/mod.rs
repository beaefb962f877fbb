//! The equipment as the circuit sees it: one file a kind of circuit, one enum over them.
//!
//! Within a mains cycle a hot filament is a constant resistor, so a load stands behind a sinusoidal (or direct)
//! voltage and one resistance. Each kind answers two questions about that: does it want more or less current than
//! the lamps give ([`Load::excess`]), and what does it show when they agree ([`Load::terminal`]).

mod conduction;
mod corrected;
mod degauss;
mod half_short;
mod impedance;
mod induction_motor;
mod power_supply;
mod rectifier;
mod universal_motor;

use alloc::boxed::Box;
use alloc::vec::Vec;

pub(crate) use conduction::Pulse;
pub use corrected::{Corrected, CorrectedSpec};
pub use degauss::Degauss;
pub use half_short::HalfShort;
pub use impedance::Impedance;
pub use induction_motor::{InductionMotor, InductionMotorSpec};
pub(crate) use power_supply::Near;
pub use power_supply::{PowerSupply, PowerSupplySpec};
pub use rectifier::{Draw, Rectifier, RectifierSpec};
pub use universal_motor::{UniversalMotor, UniversalMotorSpec};

use crate::error::{Field, InputError};
use crate::lamp::Lamp;
use crate::supply::Supply;

/// What the bank and the supply offer to the load.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Feed {
    /// RMS or DC volts of the supply.
    pub volts: f64,
    /// Frequency, hertz; 0 is direct current.
    pub hertz: f64,
    /// Resistance of bank and source together, ohms.
    pub ohms: f64,
    /// RMS or DC amperes that hold the bank at that resistance.
    pub amps: f64,
}

/// What the load's two terminals show.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Terminal {
    /// RMS or DC volts.
    pub volts: f64,
    /// Real power, watts.
    pub watts: f64,
    /// DC volts on the reservoir, where there is one.
    pub dc_volts: Option<f64>,
}

impl Terminal {
    /// From the real power alone: `Vs^2 = Vl^2 + (R I)^2 + 2 R P`, which holds for any waveform because the bank is
    /// resistive within the cycle.
    fn from_power(feed: &Feed, watts: f64, dc_volts: Option<f64>) -> Self {
        let drop = feed.ohms * feed.amps;
        let square = feed.volts * feed.volts - drop * drop - 2.0 * feed.ohms * watts;
        Self { volts: libm::sqrt(square.max(0.0)), watts, dc_volts }
    }
}

/// The equipment being brought up.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Load {
    /// No resistance at all.
    Short,
    /// No path.
    Open,
    /// Resistance and reactance in series.
    Impedance(Impedance),
    /// Another lamp.
    Lamp(Box<Lamp>),
    /// A bridge rectifier with a reservoir, straight on the mains.
    Rectifier(Rectifier),
    /// A transformer supply, or the heaters and rectifier of a valve set.
    PowerSupply(Box<PowerSupply>),
    /// A winding that one half wave meets.
    HalfShort(HalfShort),
    /// A switch-mode supply with power-factor correction.
    Corrected(Corrected),
    /// A degauss circuit beside a switch-mode supply.
    Degauss(Degauss),
    /// A motor with brushes.
    UniversalMotor(UniversalMotor),
    /// A motor without brushes.
    InductionMotor(InductionMotor),
}

/// In which of several ways a load works at a steady point.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Mode {
    /// The only one it has.
    Only,
    /// A converter that has not started.
    Off,
    /// A motor that stands.
    Standing,
    /// A motor that turns.
    Turning,
    /// A degauss thermistor that stays cold.
    DegaussCold,
    /// A degauss thermistor that has tripped.
    DegaussWarm,
}

impl Mode {
    /// The mode's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Only => "only",
            Self::Off => "off",
            Self::Standing => "standing",
            Self::Turning => "turning",
            Self::DegaussCold => "degauss-cold",
            Self::DegaussWarm => "degauss-warm",
        }
    }

    /// Whether equipment that was off begins in it.
    pub(crate) const fn is_first(self) -> bool {
        matches!(self, Self::Off | Self::Standing | Self::DegaussCold)
    }
}

/// The thresholds of a constant-power load, DC volts.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Thresholds {
    pub(crate) start_volts: f64,
    pub(crate) stop_volts: f64,
    pub(crate) restart_seconds: f64,
}

/// What a constant-power load would get at a feed, over what it wants, and by how much that grows with ln amperes and
/// with ln ohms of the feed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Served {
    pub(crate) share: f64,
    pub(crate) by_amps: f64,
    pub(crate) by_ohms: f64,
}

impl Served {
    /// Nothing, and more current would bring something.
    pub(crate) const TOO_LITTLE: Self = Self { share: 0.0, by_amps: 1.0, by_ohms: 0.0 };
    /// Nothing, and less current would bring something.
    pub(crate) const TOO_MUCH: Self = Self { share: 0.0, by_amps: -1.0, by_ohms: 0.0 };
}

/// A mismatch that stands for "far too much" or "far too little": logarithms of current ratios stay well below.
const FAR: f64 = 60.0;

impl Load {
    /// Logarithm of the current that the load would take over the current that the bank stands at, or a quantity of
    /// the same sign: positive where, at the bank's resistance, the load would come to take more. Searches of the load's
    /// own start from `near` those of a similar feed.
    pub(crate) fn excess(&self, feed: &Feed, near: &Near) -> f64 {
        match self {
            Self::Short => libm::log(feed.volts / (feed.ohms * feed.amps)),
            Self::Open => -FAR,
            Self::Impedance(impedance) => impedance.excess(feed),
            Self::Lamp(lamp) => {
                let left = feed.volts - feed.ohms * feed.amps;
                if left <= 0.0 {
                    return -FAR;
                }
                libm::log(lamp.filament().at_volts(left).amps() / feed.amps)
            }
            Self::Rectifier(rectifier) => rectifier.excess(feed),
            Self::PowerSupply(supply) => supply.excess(feed, near),
            Self::HalfShort(short) => short.excess(feed),
            Self::Corrected(corrected) => -libm::log(corrected.served(feed).share.max(libm::exp(-FAR))),
            Self::Degauss(degauss) => degauss.warm().excess(feed),
            Self::UniversalMotor(motor) => motor.excess(feed),
            Self::InductionMotor(motor) => motor.frozen(1.0).excess(feed, near),
        }
    }

    /// Resistance and reactance of a load whose current is in proportion to its voltage.
    pub(crate) const fn linear(&self) -> Option<(f64, f64)> {
        match self {
            Self::Short => Some((0.0, 0.0)),
            Self::Impedance(impedance) => Some((impedance.ohms(), impedance.reactance_ohms())),
            _ => None,
        }
    }

    /// What the terminals show where [`Self::excess`] vanishes.
    pub(crate) fn terminal(&self, feed: &Feed, near: &Near) -> Terminal {
        match self {
            Self::Short => Terminal { volts: 0.0, watts: 0.0, dc_volts: None },
            Self::Open => Terminal { volts: feed.volts, watts: 0.0, dc_volts: None },
            Self::Impedance(impedance) => impedance.terminal(feed),
            // In phase with the bank: their volts simply add.
            Self::Lamp(_) | Self::Corrected(_) => {
                let volts = feed.volts - feed.ohms * feed.amps;
                Terminal { volts, watts: volts * feed.amps, dc_volts: None }
            }
            Self::Rectifier(rectifier) => rectifier.terminal(feed),
            Self::PowerSupply(supply) => supply.terminal(feed, near),
            Self::HalfShort(short) => short.terminal(feed),
            Self::Degauss(degauss) => degauss.warm().terminal(feed),
            Self::UniversalMotor(motor) => motor.terminal(feed),
            Self::InductionMotor(motor) => motor.frozen(1.0).terminal(feed, near),
        }
    }

    /// The modes in which the load can work, each with the plainer load that it then is.
    pub(crate) fn modes(&self) -> Vec<(Mode, Self)> {
        match self {
            Self::InductionMotor(motor) => {
                alloc::vec![(Mode::Standing, motor.frozen(1.0)), (Mode::Turning, self.clone())]
            }
            Self::Degauss(degauss) => alloc::vec![
                (Mode::DegaussCold, Self::Impedance(*degauss.cold())),
                (Mode::DegaussWarm, Self::Rectifier(*degauss.warm())),
            ],
            _ => alloc::vec![(Mode::Only, self.clone())],
        }
    }

    /// Whether a mode lasts at a current, amperes RMS.
    pub(crate) fn lasts(&self, mode: Mode, amps: f64) -> bool {
        match (self, mode) {
            (Self::InductionMotor(motor), Mode::Standing) => motor.stays_standing(amps),
            (Self::Degauss(degauss), Mode::DegaussCold) => degauss.stays_cold(amps),
            _ => true,
        }
    }

    /// Whether what the load wants can cross the bank's current more than once.
    pub(crate) fn may_have_several(&self) -> bool {
        match self {
            Self::Rectifier(rectifier) => rectifier.is_constant_power(),
            Self::Corrected(_) => true,
            _ => false,
        }
    }

    /// What a constant-power load would get.
    pub(crate) fn served(&self, feed: &Feed) -> Served {
        match self {
            Self::Rectifier(rectifier) => rectifier.served(feed),
            Self::Corrected(corrected) => corrected.served(feed),
            _ => Served::TOO_MUCH,
        }
    }

    /// What a constant-power load must at least take, watts: no steady point lies below that power over the supply's
    /// voltage.
    pub(crate) fn least_watts(&self) -> f64 {
        match self {
            Self::Rectifier(rectifier) => match rectifier.spec().draw {
                Draw::Watts { watts, .. } => watts,
                _ => 0.0,
            },
            Self::Corrected(corrected) => corrected.spec().watts,
            _ => 0.0,
        }
    }

    /// Start and stop volts, where the load has them.
    pub(crate) fn thresholds(&self) -> Option<Thresholds> {
        match self {
            Self::Rectifier(rectifier) => match rectifier.spec().draw {
                Draw::Watts { start_volts, stop_volts, restart_seconds, .. } => {
                    Some(Thresholds { start_volts, stop_volts, restart_seconds })
                }
                _ => None,
            },
            Self::Corrected(corrected) => {
                let CorrectedSpec { start_volts, stop_volts, restart_seconds, .. } = *corrected.spec();
                Some(Thresholds { start_volts, stop_volts, restart_seconds })
            }
            Self::Degauss(degauss) => Self::Rectifier(*degauss.warm()).thresholds(),
            _ => None,
        }
    }

    /// Refuses a load that has no meaning on this supply.
    pub(crate) fn check(&self, supply: &Supply) -> Result<(), InputError> {
        let refused = match self {
            Self::Impedance(impedance) if impedance.reactance_ohms() != 0.0 => Some(Field::ReactanceOhms),
            Self::PowerSupply(front) if front.spec().magnetising_amps > 0.0 => Some(Field::Hertz),
            Self::InductionMotor(_) => Some(Field::Hertz),
            _ => None,
        };
        match refused {
            Some(field) if supply.is_direct() => Err(InputError::NeedsAlternating { field }),
            _ => Ok(()),
        }
    }
}
