//! The equipment as the circuit sees it: one file a family, one enum over them.
//!
//! Within a mains cycle a hot filament is a constant resistor, so a load stands behind a sinusoidal (or direct)
//! voltage and one resistance. Each family answers two questions about that: does it want more or less current
//! than the lamps give ([`Load::excess`]), and what does it show when they agree ([`Load::terminal`]).

mod conduction;
mod impedance;
mod rectifier;
mod transformer;

pub(crate) use conduction::Pulse;
pub use impedance::Impedance;
pub use rectifier::{Draw, Rectifier, RectifierSpec};
pub use transformer::{Transformer, TransformerSpec};

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
    Lamp(alloc::boxed::Box<Lamp>),
    /// A bridge rectifier with a reservoir, straight on the mains.
    Rectifier(Rectifier),
    /// A mains transformer with a rectifier and a reservoir behind it.
    Transformer(Transformer),
}

/// A mismatch that stands for "far too much" or "far too little": logarithms of current ratios stay well below.
const FAR: f64 = 60.0;

impl Load {
    /// Logarithm of the current that the load would take over the current that the bank stands at: positive where
    /// it wants more. Falls through zero, with rising bank temperature, at every equilibrium of the slow kind.
    pub(crate) fn excess(&self, feed: &Feed) -> f64 {
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
            Self::Transformer(transformer) => transformer.excess(feed),
        }
    }

    /// What the terminals show where [`Self::excess`] vanishes.
    pub(crate) fn terminal(&self, feed: &Feed) -> Terminal {
        match self {
            Self::Short => Terminal { volts: 0.0, watts: 0.0, dc_volts: None },
            Self::Open => Terminal { volts: feed.volts, watts: 0.0, dc_volts: None },
            Self::Impedance(impedance) => impedance.terminal(feed),
            Self::Lamp(_) => {
                let volts = feed.volts - feed.ohms * feed.amps;
                Terminal { volts, watts: volts * feed.amps, dc_volts: None }
            }
            Self::Rectifier(rectifier) => rectifier.terminal(feed),
            Self::Transformer(transformer) => transformer.terminal(feed),
        }
    }

    /// Whether the wanted current can cross the bank's more than once.
    pub(crate) fn may_have_several(&self) -> bool {
        matches!(self, Self::Rectifier(rectifier) if rectifier.is_constant_power())
    }

    /// Refuses a load that has no meaning on this supply.
    pub(crate) fn check(&self, supply: &Supply) -> Result<(), InputError> {
        let refused = match self {
            Self::Impedance(impedance) if impedance.reactance_ohms() != 0.0 => Some(Field::ReactanceOhms),
            Self::Transformer(_) => Some(Field::Hertz),
            _ => None,
        };
        match refused {
            Some(field) if supply.is_direct() => Err(InputError::NeedsAlternating { field }),
            _ => Ok(()),
        }
    }
}
