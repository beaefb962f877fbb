//! A picture-tube set: a degauss coil with its thermistor, beside a switch-mode supply.
//!
//! Cold, the thermistor is a few ohms and takes nearly all the current; when enough heat has gone into it, its
//! resistance jumps and only milliamperes remain. A series lamp can pass too little to warm it: then the set looks
//! shorted although it is not.

use super::{Impedance, Rectifier};
use crate::error::{Field, InputError, within};

/// Degauss circuit and supply, side by side.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Degauss {
    cold: Impedance,
    trip_watts: f64,
    warm: Rectifier,
}

impl Degauss {
    /// `cold_ohms` of thermistor and coil (0.1 to 1000), the heat `trip_watts` (0.01 to 100) that the cold thermistor
    /// can lose and stay cold, and the `warm` supply whose shunt is the warm thermistor.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(cold_ohms: f64, trip_watts: f64, warm: Rectifier) -> Result<Self, InputError> {
        within(Field::Ohms, cold_ohms, 0.1, 1000.0)?;
        within(Field::Watts, trip_watts, 0.01, 100.0)?;
        Ok(Self { cold: Impedance::new(cold_ohms, 0.0)?, trip_watts, warm })
    }

    /// The load while the thermistor is cold; the supply beside it is starved.
    pub const fn cold(&self) -> &Impedance {
        &self.cold
    }

    /// Heat that trips the thermistor, watts.
    pub const fn trip_watts(&self) -> f64 {
        self.trip_watts
    }

    /// The load once the thermistor is warm.
    pub const fn warm(&self) -> &Rectifier {
        &self.warm
    }

    /// Whether a current leaves the thermistor cold for good.
    pub(crate) fn stays_cold(&self, amps: f64) -> bool {
        amps * amps * self.cold.ohms() <= self.trip_watts
    }
}
