//! A path that conducts in one direction only: a winding behind a rectifier with one shorted diode.
//!
//! Every other half wave meets the winding resistance alone; the charging pulses of the other half are small beside
//! it and are left out. A transformer's core, magnetised in one direction by this, saturates and takes more still.

use core::f64::consts::FRAC_1_SQRT_2;

use super::{Feed, Terminal};
use crate::error::{Field, InputError, within};

/// A resistance that one half wave meets, ohms.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HalfShort {
    ohms: f64,
}

impl HalfShort {
    /// `ohms` from 0 to 1e9.
    ///
    /// # Errors
    /// Not finite or out of range.
    pub fn new(ohms: f64) -> Result<Self, InputError> {
        Ok(Self { ohms: within(Field::Ohms, ohms, 0.0, 1e9)? })
    }

    /// The resistance, ohms.
    pub const fn ohms(&self) -> f64 {
        self.ohms
    }

    /// Conducting half the time, an RMS current is `1/sqrt 2` of the full one.
    pub(super) fn excess(self, feed: &Feed) -> f64 {
        let conducting = if feed.hertz == 0.0 { 1.0 } else { FRAC_1_SQRT_2 };
        libm::log(conducting * feed.volts / ((feed.ohms + self.ohms) * feed.amps))
    }

    pub(super) fn terminal(self, feed: &Feed) -> Terminal {
        Terminal::from_power(feed, feed.amps * feed.amps * self.ohms, None)
    }
}
