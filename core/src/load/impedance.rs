//! Resistance and reactance in series: heaters, and anything of which only volts, watts and power factor are known.

use super::{Feed, Terminal};
use crate::error::{Field, InputError, within};

/// A linear load at the supply frequency.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Impedance {
    ohms: f64,
    reactance_ohms: f64,
}

impl Impedance {
    /// Greatest allowed resistance or reactance, ohms.
    pub const MOST_OHMS: f64 = 1e9;

    /// `ohms` (0 to 1e9) in series with `reactance_ohms` (-1e9 to 1e9, negative for a capacitor).
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(ohms: f64, reactance_ohms: f64) -> Result<Self, InputError> {
        let ohms = within(Field::Ohms, ohms, 0.0, Self::MOST_OHMS)?;
        let reactance_ohms = within(Field::ReactanceOhms, reactance_ohms, -Self::MOST_OHMS, Self::MOST_OHMS)?;
        Ok(Self { ohms, reactance_ohms })
    }

    /// The impedance that takes `watts` at `volts` with a lagging `power_factor`:
    /// `|Z| = V^2 pf / W`, `R = |Z| pf`.
    ///
    /// # Errors
    /// The first property that is not finite or out of range (watts above 0, power factor 0.01 to 1).
    pub fn from_rating(volts: f64, watts: f64, power_factor: f64) -> Result<Self, InputError> {
        let volts = within(Field::Volts, volts, 1.0, 1000.0)?;
        let watts = within(Field::Watts, watts, 1e-3, 1e6)?;
        let power_factor = within(Field::PowerFactor, power_factor, 0.01, 1.0)?;
        let magnitude = volts * volts * power_factor / watts;
        let across = libm::sqrt((1.0 - power_factor) * (1.0 + power_factor));
        Self::new(magnitude * power_factor, magnitude * across)
    }

    /// Resistance, ohms.
    pub const fn ohms(&self) -> f64 {
        self.ohms
    }

    /// Reactance, ohms; negative for a capacitor.
    pub const fn reactance_ohms(&self) -> f64 {
        self.reactance_ohms
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        libm::log(feed.volts / (feed.amps * libm::hypot(feed.ohms + self.ohms, self.reactance_ohms)))
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        Terminal {
            volts: feed.amps * libm::hypot(self.ohms, self.reactance_ohms),
            watts: feed.amps * feed.amps * self.ohms,
            dc_volts: None,
        }
    }
}
