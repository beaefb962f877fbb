//! Meter readings: what they say about current, power and power factor, with uncertainty.
//!
//! # The lamp as a meter
//! The bank's volts give its current through the lamps' own curve. Any other current (a clamp, an ammeter, the glow) is
//! combined with it by weights of inverse variance.
//!
//! # Three voltmeters
//! Within a cycle the bank is a resistance `Rb`, so for any waveform `vs = vb + vl` gives
//! `P = (Vs^2 - Vb^2 - Vl^2) / (2 Rb)`: the mean of `vb vl / Rb` (W. E. Ayrton, W. E. Sumpner, Proceedings of the Royal
//! Society 49 (1891) 424). With `Rb = Vb / I` the power factor `P / (Vl I) = (Vs^2 - Vb^2 - Vl^2) / (2 Vb Vl)` needs
//! neither current nor lamp.
//!
//! # Uncertainty
//! By JCGM 100:2008, from root causes that are independent: each meter's accuracy, what the supply does between
//! readings, the three directions in which a lamp differs from the usual, the other published tables of tungsten, the
//! eye, and an averaging meter's waveform. `Rb` and `I` both come from `Vb` and from the same lamp; each cause moves
//! both together, which is how their correlation is taken in (F.1.2.3).

mod contradiction;
mod coverage;
mod found;
mod growth;
mod inputs;
mod meter;
mod waveform;

pub use contradiction::{Contradiction, MOST_DEVIATIONS, Refused, Rule};
pub use coverage::{Estimate, combined, factor as coverage_factor};
pub use found::{Found, interpret};
pub use growth::growth;
pub use meter::{Kind, Meter, MeterSpec, Reading, Response};
pub use waveform::{
    HALF_WAVE_FACTOR, Waveform, current_factor, half_wave_load_factor, load_volts_factor, usual_waveform,
};

use serde::{Deserialize, Serialize};

use crate::error::{Field, InputError, within};
use crate::glow::GlowWord;
use crate::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN};

/// A look at the bank's brightest lamp.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum Look {
    /// The word that fits.
    Word(GlowWord),
    /// A temperature, by comparison with drawn lamps, kelvin (300 to 3600).
    Kelvin(f64),
}

/// Relative standard uncertainty of a filament temperature from a glance: neighbours on a scale of drawn lamps that
/// are 15 % of temperature apart are now and then confused (design value, no source).
const GLANCE: f64 = 0.07;

impl Look {
    /// Temperature and its standard uncertainty, kelvin, on a lamp rated for `rated_kelvin`: a word's own range taken
    /// as rectangular, and what a glance is worth.
    pub fn kelvin(self, rated_kelvin: f64) -> (f64, f64) {
        match self {
            Self::Word(word) => {
                let (low, high) = word.kelvins(rated_kelvin);
                let middle = f64::midpoint(low, high);
                let glance = GLANCE * middle;
                (middle, libm::sqrt((high - low) * (high - low) / 12.0 + glance * glance))
            }
            Self::Kelvin(kelvin) => (kelvin, GLANCE * kelvin),
        }
    }

    /// Least and greatest temperature that may look so, by so many `deviations` of a glance, kelvin.
    pub(crate) fn ends(self, rated_kelvin: f64, deviations: f64) -> [f64; 2] {
        let (low, high) = match self {
            Self::Word(word) => word.kelvins(rated_kelvin),
            Self::Kelvin(kelvin) => (kelvin, kelvin),
        };
        let by = GLANCE * deviations;
        [low * (1.0 - by), high * (1.0 + by)].map(|end| end.clamp(AMBIENT_KELVIN, HIGHEST_KELVIN))
    }
}

/// What the lamp does in the first seconds after switch-on.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Behaviour {
    /// The same from the first half second on, dark or bright.
    Steady,
    /// A flash, then dimmer.
    FlashThenDim,
    /// Slowly brighter over many seconds.
    SlowRise,
    /// Again and again.
    Pulsing,
}

impl Behaviour {
    /// Every behaviour.
    pub const ALL: [Self; 4] = [Self::Steady, Self::FlashThenDim, Self::SlowRise, Self::Pulsing];

    /// The behaviour's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Steady => "steady",
            Self::FlashThenDim => "flash-then-dim",
            Self::SlowRise => "slow-rise",
            Self::Pulsing => "pulsing",
        }
    }
}

/// How the readings were taken.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Taking {
    /// Standard deviation of the supply from one reading to the next, per cent (0 to 20): 0 for several meters read at
    /// once.
    pub drift_percent: f64,
    /// Whether one meter took all voltages: readings on the same range then share its error of gain.
    pub one_meter: bool,
    /// What is known of the waveform; it matters to averaging meters only.
    pub waveform: Waveform,
}

impl Default for Taking {
    /// One meter moved from place to place within a minute or two: 0.3 % (design value, no source).
    fn default() -> Self {
        Self { drift_percent: 0.3, one_meter: true, waveform: Waveform::Unknown }
    }
}

/// Everything that was read at one switch-on: at most one reading of each kind, a look and a behaviour.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Readings {
    numbers: [Option<Reading>; Kind::ALL.len()],
    look: Option<Look>,
    behaviour: Option<Behaviour>,
    taking: Taking,
}

impl Readings {
    /// Nothing read yet.
    ///
    /// # Errors
    /// A drift that is not finite or out of range.
    pub fn new(taking: Taking) -> Result<Self, InputError> {
        within(Field::DriftPercent, taking.drift_percent, 0.0, 20.0)?;
        Ok(Self { taking, ..Self::default() })
    }

    /// Adds a reading, in place of an earlier one of the same kind.
    pub const fn add(&mut self, reading: Reading) {
        self.numbers[reading.kind().index()] = Some(reading);
    }

    /// Takes a reading back.
    pub const fn remove(&mut self, kind: Kind) {
        self.numbers[kind.index()] = None;
    }

    /// Adds a look at the bank's brightest lamp, or takes it back.
    ///
    /// # Errors
    /// A temperature that is not finite or out of range.
    pub fn set_look(&mut self, look: Option<Look>) -> Result<(), InputError> {
        if let Some(Look::Kelvin(kelvin)) = look {
            within(Field::Kelvin, kelvin, AMBIENT_KELVIN, HIGHEST_KELVIN)?;
        }
        self.look = look;
        Ok(())
    }

    /// Adds what the lamp does over time, or takes it back.
    pub const fn set_behaviour(&mut self, behaviour: Option<Behaviour>) {
        self.behaviour = behaviour;
    }

    /// The reading of a kind.
    pub const fn get(&self, kind: Kind) -> Option<&Reading> {
        self.numbers[kind.index()].as_ref()
    }

    /// Every number that was read, in the order of [`Kind::ALL`].
    pub fn numbers(&self) -> impl Iterator<Item = &Reading> {
        self.numbers.iter().flatten()
    }

    /// The look at the bank's brightest lamp.
    pub const fn look(&self) -> Option<Look> {
        self.look
    }

    /// What the lamp does over time.
    pub const fn behaviour(&self) -> Option<Behaviour> {
        self.behaviour
    }

    /// How they were taken.
    pub const fn taking(&self) -> &Taking {
        &self.taking
    }

    /// Relative standard deviation of the supply between readings.
    pub(crate) fn drift(&self) -> f64 {
        self.taking.drift_percent / 100.0
    }

    /// Whether nothing was read.
    pub fn is_empty(&self) -> bool {
        self.numbers().next().is_none() && self.look.is_none() && self.behaviour.is_none()
    }
}
