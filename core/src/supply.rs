//! The mains, or a DC source.

use crate::error::{Field, InputError, within};

/// A sinusoidal or direct voltage behind a source resistance.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Supply {
    volts: f64,
    hertz: f64,
    ohms: f64,
}

impl Supply {
    /// Allowed RMS volts.
    pub const VOLTS: (f64, f64) = (1.0, 500.0);
    /// Allowed frequencies, hertz, other than 0.
    pub const HERTZ: (f64, f64) = (10.0, 1000.0);
    /// Allowed source resistance, ohms.
    pub const OHMS: (f64, f64) = (0.0, 10_000.0);

    /// A supply of `volts` RMS (1 to 500 V) at `hertz` (10 to 1000 Hz, or 0 for direct current) behind `ohms`
    /// (0 to 10 kilo-ohm).
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(volts: f64, hertz: f64, ohms: f64) -> Result<Self, InputError> {
        let volts = within(Field::Volts, volts, Self::VOLTS.0, Self::VOLTS.1)?;
        let lowest = if hertz == 0.0 { 0.0 } else { Self::HERTZ.0 };
        let hertz = within(Field::Hertz, hertz, lowest, Self::HERTZ.1)?;
        let ohms = within(Field::Ohms, ohms, Self::OHMS.0, Self::OHMS.1)?;
        Ok(Self { volts, hertz, ohms })
    }

    /// RMS volts, or DC volts.
    pub const fn volts(&self) -> f64 {
        self.volts
    }

    /// Frequency, hertz; 0 is direct current.
    pub const fn hertz(&self) -> f64 {
        self.hertz
    }

    /// Source resistance, ohms.
    pub const fn ohms(&self) -> f64 {
        self.ohms
    }

    /// Whether this is direct current.
    pub fn is_direct(&self) -> bool {
        self.hertz == 0.0
    }
}
