//! How long a charged reservoir takes to fall below published limits.
//!
//! `v = V0 exp(-t/(R C))`, so `t = R C ln(V0/v)`. A switched-off converter draws nothing: only the bleed resistor
//! counts, and it may be broken. So a time is the least to wait, not leave to touch.

use super::First;
use super::limits::Caveat;
use crate::detail::Standing;
use crate::error::{Field, InputError, within};
use crate::supply::Supply;

/// Where a limit holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum DischargePlace {
    /// The pins of a plug with more than 0.1 µF across the line.
    PlugPins,
    /// Live parts after switching off.
    LiveParts,
    /// Plug pins that are bare once pulled.
    ExposedPins,
    /// What an ordinary person can reach, 300 nF or more.
    Accessible,
}

/// A voltage, and the time after which a standard wants it reached.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DischargeLimit {
    /// The standard that it is quoted from.
    pub standard: &'static str,
    /// Where it holds.
    pub place: DischargePlace,
    /// Volts, of the crest where the capacitor stands across the line.
    pub volts: f64,
    /// Within how many seconds the standard wants it.
    pub seconds: f64,
    /// How it is known.
    pub standing: Standing,
    /// What must be said beside it.
    pub caveat: Caveat,
}

const fn limit(
    standard: &'static str,
    place: DischargePlace,
    (volts, seconds): (f64, f64),
    standing: Standing,
) -> DischargeLimit {
    DischargeLimit { standard, place, volts, seconds, standing, caveat: Caveat::CheckStandardAndLocalCode }
}

/// The limits, each with how it is known.
pub const LIMITS: [DischargeLimit; 4] = [
    limit("IEC 60335-1", DischargePlace::PlugPins, (34.0, 1.0), Standing::Published),
    limit("IEC 60204-1", DischargePlace::LiveParts, (60.0, 5.0), Standing::Published),
    limit("IEC 60204-1", DischargePlace::ExposedPins, (60.0, 1.0), Standing::Published),
    limit("IEC 62368-1", DischargePlace::Accessible, (60.0, 2.0), Standing::Memory),
];

/// A reservoir and what empties it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Discharge {
    farads: f64,
    bleed_ohms: Option<f64>,
    start_volts: f64,
}

/// How much longer it can take than the printed values say: 20 % of capacitance and 10 % of resistance, common
/// tolerances of both (design value).
const SLOWEST: f64 = 1.2 * 1.1;

/// How long until a voltage.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Wait {
    /// Seconds by the printed values, and at their tolerances' worst.
    Seconds {
        /// By the printed values.
        printed: f64,
        /// With 20 % more capacitance and 10 % more resistance.
        slowest: f64,
    },
    /// No bleed resistor: it may hold its charge for days.
    Unknown,
}

/// What holds after power has been taken away.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AfterPower {
    /// What comes first, whatever the times say.
    pub first: First,
    /// The wait until each of [`LIMITS`].
    pub waits: [(DischargeLimit, Wait); 4],
}

impl Discharge {
    /// A reservoir of `farads` (1e-12 to 10) charged to `start_volts` (0 to 100 kV), emptied by `bleed_ohms`
    /// (1 to 1e12), if by anything.
    ///
    /// # Errors
    /// The first that is not finite or out of range.
    pub fn new(farads: f64, bleed_ohms: Option<f64>, start_volts: f64) -> Result<Self, InputError> {
        let farads = within(Field::Farads, farads, 1e-12, 10.0)?;
        let bleed_ohms = bleed_ohms.map(|ohms| within(Field::Ohms, ohms, 1.0, 1e12)).transpose()?;
        let start_volts = within(Field::Volts, start_volts, 0.0, 1e5)?;
        Ok(Self { farads, bleed_ohms, start_volts })
    }

    /// The most to which a supply charges a reservoir without a transformer: its crest, 10 % up (IEC 60038).
    pub fn most_volts(supply: &Supply) -> f64 {
        let crest = if supply.is_direct() { 1.0 } else { core::f64::consts::SQRT_2 };
        1.1 * crest * supply.volts()
    }

    /// Volts left after `seconds` (0 and up) by the printed values; all of them without a bleed resistor.
    pub fn volts_after(&self, seconds: f64) -> f64 {
        match self.bleed_ohms {
            Some(ohms) => self.start_volts * libm::exp(-seconds.max(0.0) / (ohms * self.farads)),
            None => self.start_volts,
        }
    }

    /// The wait until `volts`: none where it stands lower already.
    ///
    /// # Errors
    /// [`Field::Volts`] not from 1e-3 to 100 kV: it never reaches 0.
    pub fn wait(&self, volts: f64) -> Result<Wait, InputError> {
        within(Field::Volts, volts, 1e-3, 1e5).map(|volts| self.wait_until(volts))
    }

    fn wait_until(&self, volts: f64) -> Wait {
        if self.start_volts <= volts {
            return Wait::Seconds { printed: 0.0, slowest: 0.0 };
        }
        self.bleed_ohms.map_or(Wait::Unknown, |ohms| {
            let printed = ohms * self.farads * libm::log(self.start_volts / volts);
            Wait::Seconds { printed, slowest: SLOWEST * printed }
        })
    }

    /// Everything that holds after power has been taken away.
    pub fn after_power(&self) -> AfterPower {
        let waits = LIMITS.map(|limit| (limit, self.wait_until(limit.volts)));
        AfterPower { first: First::MeasureBeforeTouching, waits }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_wait_ends_at_the_limit() {
        let reservoir = Discharge::new(100e-6, Some(220e3), 325.0).expect("a reservoir");
        let after = reservoir.after_power();
        assert_eq!(after.first, First::MeasureBeforeTouching);
        for (limit, wait) in after.waits {
            let Wait::Seconds { printed, slowest } = wait else { panic!("it has a bleed resistor") };
            assert!((reservoir.volts_after(printed) / limit.volts - 1.0).abs() < 1e-12);
            assert!(slowest > printed);
        }
    }

    #[test]
    fn without_a_bleed_resistor_nobody_knows() {
        let reservoir = Discharge::new(100e-6, None, 325.0).expect("a reservoir");
        assert_eq!(reservoir.wait(60.0), Ok(Wait::Unknown));
        assert_eq!(reservoir.volts_after(1e6), 325.0);
        let low = Discharge::new(100e-6, None, 12.0).expect("a small one");
        assert_eq!(low.wait(60.0), Ok(Wait::Seconds { printed: 0.0, slowest: 0.0 }));
        assert!(low.wait(0.0).is_err());
    }
}
