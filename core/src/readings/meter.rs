//! A meter's accuracy, and one reading taken with it.

use serde::{Deserialize, Serialize};

use crate::error::{Field, InputError, within};

/// What a reading is of.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Kind {
    /// Volts of the supply, RMS or DC.
    SupplyVolts,
    /// Volts across the bank.
    BankVolts,
    /// Volts across the equipment.
    LoadVolts,
    /// Amperes in the loop.
    Amps,
    /// Real power into the equipment, watts: a plug-in meter between bank and equipment.
    LoadWatts,
    /// Ohms across the plug of the unplugged, switched-on equipment.
    PlugOhms,
}

impl Kind {
    /// Every kind.
    pub const ALL: [Self; 6] =
        [Self::SupplyVolts, Self::BankVolts, Self::LoadVolts, Self::Amps, Self::LoadWatts, Self::PlugOhms];

    /// The property that it is a reading of, with its name and unit.
    pub const fn field(self) -> Field {
        match self {
            Self::SupplyVolts => Field::SupplyVolts,
            Self::BankVolts => Field::BankVolts,
            Self::LoadVolts => Field::LoadVolts,
            Self::Amps => Field::Amps,
            Self::LoadWatts => Field::LoadWatts,
            Self::PlugOhms => Field::PlugOhms,
        }
    }

    /// Greatest reading that is allowed, in the unit of its field; the least is 0.
    pub const fn most(self) -> f64 {
        match self {
            // Milliamperes typed without their unit must be answered by what they contradict.
            Self::SupplyVolts | Self::BankVolts | Self::LoadVolts | Self::Amps => 1000.0,
            Self::LoadWatts => 20_000.0,
            Self::PlugOhms => 1e9,
        }
    }

    /// The finest last digit that a cheap meter has for it: ranges of 200 V, 2 A, 200 W and 200 ohm, 2000 counts.
    const fn finest_step(self) -> f64 {
        match self {
            Self::Amps => 0.001,
            _ => 0.1,
        }
    }

    pub(crate) const fn is_volts(self) -> bool {
        matches!(self, Self::SupplyVolts | Self::BankVolts | Self::LoadVolts)
    }

    pub(crate) const fn index(self) -> usize {
        self as usize
    }
}

/// How a meter makes one number of a waveform.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Response {
    /// The root of the mean square, direct part included.
    #[default]
    TrueRms,
    /// The mean of the absolute value times 1.1107, which is the RMS of a sinusoid only.
    Averaging,
}

/// The numbers of a [`Meter`].
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct MeterSpec {
    /// Per cent of what it shows (above 0, to 30).
    pub percent: f64,
    /// Counts of the last digit (0 to 100).
    pub digits: f64,
    /// The most that it counts to (100 to 1e7): 2000 for "3 1/2 digits".
    pub counts: f64,
    /// What it makes of a waveform.
    pub response: Response,
}

impl Default for MeterSpec {
    /// The commonest cheap meter's AC volts: 1 % + 5 digits, 2000 counts (common practice, no source).
    fn default() -> Self {
        Self { percent: 1.0, digits: 5.0, counts: 2000.0, response: Response::TrueRms }
    }
}

/// A meter with its accuracy: `percent` of the reading + `digits` of the last place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Meter {
    spec: MeterSpec,
}

impl Meter {
    /// Allowed per cent.
    pub const PERCENT: (f64, f64) = (1e-4, 30.0);
    /// Allowed digits.
    pub const DIGITS: (f64, f64) = (0.0, 100.0);
    /// Allowed counts.
    pub const COUNTS: (f64, f64) = (100.0, 1e7);

    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first that is not finite or out of range; no meter has an accuracy of 0 %.
    pub fn new(spec: MeterSpec) -> Result<Self, InputError> {
        within(Field::Percent, spec.percent, Self::PERCENT.0, Self::PERCENT.1)?;
        within(Field::Digits, spec.digits, Self::DIGITS.0, Self::DIGITS.1)?;
        within(Field::Counts, spec.counts, Self::COUNTS.0, Self::COUNTS.1)?;
        Ok(Self { spec })
    }

    /// The commonest cheap meter: the default numbers.
    pub fn usual() -> Self {
        Self { spec: MeterSpec::default() }
    }

    /// The numbers.
    pub const fn spec(&self) -> &MeterSpec {
        &self.spec
    }

    /// Value of one count of the last digit when it shows `value`: the range that counts just far enough, in decades
    /// from the finest one.
    pub fn step(&self, kind: Kind, value: f64) -> f64 {
        let mut step = kind.finest_step();
        while step * self.spec.counts <= value {
            step *= 10.0;
        }
        step
    }
}

/// One number read from one meter.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Reading {
    kind: Kind,
    value: f64,
    meter: Meter,
}

impl Reading {
    /// A reading of `value` (from 0; volts to 1000, amperes to 1000, watts to 20 000, ohms to 1e9, which stands for
    /// "overload").
    ///
    /// # Errors
    /// Not finite or out of range, by the name of the kind.
    pub fn new(kind: Kind, value: f64, meter: Meter) -> Result<Self, InputError> {
        let value = within(kind.field(), value, 0.0, kind.most())?;
        Ok(Self { kind, value, meter })
    }

    /// What it is of.
    pub const fn kind(&self) -> Kind {
        self.kind
    }

    /// What the meter showed, SI.
    pub const fn value(&self) -> f64 {
        self.value
    }

    /// The meter.
    pub const fn meter(&self) -> &Meter {
        &self.meter
    }

    /// Value of one count of the last digit.
    pub fn step(&self) -> f64 {
        self.meter.step(self.kind, self.value)
    }

    /// Largest error that the meter's accuracy allows, in two parts: of the range's gain, and of the last digits.
    /// Half a count is the least, since the display rounds.
    pub fn limits(&self) -> (f64, f64) {
        let spec = self.meter.spec();
        (spec.percent / 100.0 * self.value, spec.digits.max(0.5) * self.step())
    }

    /// Standard uncertainty from the meter alone: each part of the accuracy is a limit without further knowledge, hence
    /// a rectangular distribution, `a / sqrt 3` (JCGM 100:2008, 4.3.7); the parts are independent.
    pub fn deviation(&self) -> f64 {
        let (gain, digits) = self.limits();
        libm::sqrt((gain * gain + digits * digits) / 3.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_meter_of_2000_counts_changes_its_range_at_200_volts() {
        let meter = Meter::new(MeterSpec::default()).expect("a common meter");
        for (value, step) in [(0.0, 0.1), (67.0, 0.1), (199.9, 0.1), (200.0, 1.0), (233.0, 1.0)] {
            assert_eq!(meter.step(Kind::BankVolts, value), step, "{value}");
        }
        let reading = Reading::new(Kind::SupplyVolts, 233.0, meter).expect("in range");
        assert_eq!(reading.limits(), (0.01 * 233.0, 5.0));
    }

    #[test]
    fn no_meter_is_exact_and_no_reading_negative() {
        let none = MeterSpec { percent: 0.0, ..MeterSpec::default() };
        assert!(matches!(Meter::new(none), Err(InputError::OutOfRange { field: Field::Percent, .. })));
        let meter = Meter::new(MeterSpec::default()).expect("a common meter");
        assert!(Reading::new(Kind::BankVolts, -1.0, meter).is_err());
        assert!(Reading::new(Kind::BankVolts, f64::NAN, meter).is_err());
    }
}
