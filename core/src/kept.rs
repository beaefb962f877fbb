//! A switch-on whose readings somebody kept: what was read, on which bench, and what it came to.

mod table;

use alloc::string::String;

pub use table::{HEADS, table};

use crate::condition::Condition;
use crate::diagnosis::Advice;
use crate::error::{Field, InputError, within};
use crate::glow::GlowWord;
use crate::readings::{Behaviour, Kind, Meter, MeterSpec, Reading};
use crate::setup::Setup;

/// What was kept, as a person or a file gives it.
#[derive(Debug, Clone, PartialEq)]
pub struct KeptSpec {
    /// Milliseconds since 1970 began in Greenwich.
    pub milliseconds: f64,
    /// The bench.
    pub setup: Setup,
    /// The rung of the ladder, from 1, where one was climbed.
    pub rung: Option<u32>,
    /// The meter.
    pub meter: MeterSpec,
    /// What it showed, SI, in the order of [`Kind::ALL`].
    pub numbers: [Option<f64>; Kind::ALL.len()],
    /// What the brightest lamp looked like.
    pub look: Option<GlowWord>,
    /// What it did over time.
    pub behaviour: Option<Behaviour>,
    /// What the readings came to at the time.
    pub verdict: Option<Verdict>,
    /// What the person wrote beside it.
    pub note: String,
}

/// What readings came to.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Verdict {
    /// What to do.
    pub advice: Advice,
    /// The condition that led.
    pub leader: Condition,
    /// Its weight, 0 to 1.
    pub weight: f64,
}

/// A kept reading that makes sense.
#[derive(Debug, Clone, PartialEq)]
pub struct Kept {
    spec: KeptSpec,
}

impl Kept {
    /// Allowed seconds since 1970: what a date of ECMAScript can be (ECMA-262, time values).
    pub const SECONDS: (f64, f64) = (0.0, 8.64e12);
    /// Allowed rungs: more than any ladder has.
    pub const RUNGS: (f64, f64) = (1.0, 99.0);
    /// Most characters of a note.
    pub const NOTE: usize = 500;

    /// Checks and keeps it.
    ///
    /// # Errors
    /// The first number that is not finite or out of range: [`Field::Seconds`] for the time, [`Field::Count`] for the
    /// rung and for the characters of the note, the meter's and the reading's own fields, [`Field::Percent`] for the
    /// weight.
    pub fn from_spec(mut spec: KeptSpec) -> Result<Self, InputError> {
        spec.milliseconds = libm::floor(spec.milliseconds);
        within(Field::Seconds, spec.milliseconds / 1000.0, Self::SECONDS.0, Self::SECONDS.1)?;
        if let Some(rung) = spec.rung {
            within(Field::Count, f64::from(rung), Self::RUNGS.0, Self::RUNGS.1)?;
        }
        let meter = Meter::new(spec.meter)?;
        for (kind, value) in Kind::ALL.into_iter().zip(spec.numbers) {
            if let Some(value) = value {
                Reading::new(kind, value, meter)?;
            }
        }
        if let Some(verdict) = spec.verdict {
            within(Field::Percent, 100.0 * verdict.weight, 0.0, 100.0)?;
        }
        #[expect(clippy::cast_precision_loss, reason = "a count of characters for a message")]
        let (characters, most) = (spec.note.chars().count() as f64, Self::NOTE as f64);
        within(Field::Count, characters, 0.0, most)?;
        Ok(Self { spec })
    }

    /// What was kept.
    pub const fn spec(&self) -> &KeptSpec {
        &self.spec
    }
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;

    pub(crate) fn example() -> KeptSpec {
        KeptSpec {
            milliseconds: 1_796_128_200_123.0,
            setup: Setup::example().expect("in range"),
            rung: Some(2),
            meter: MeterSpec::default(),
            numbers: [Some(231.0), Some(67.5), None, Some(0.16), None, None],
            look: Some(GlowWord::DullRed),
            behaviour: Some(Behaviour::FlashThenDim),
            verdict: Some(Verdict { advice: Advice::GoOn, leader: Condition::Healthy, weight: 0.8734 }),
            note: String::from("hums \u{201e}a little\u{201c}"),
        }
    }

    #[test]
    fn an_impossible_number_is_refused_by_its_name() {
        assert_eq!(Kept::from_spec(example()).as_ref().map(Kept::spec), Ok(&example()));
        let refused = |change: fn(&mut KeptSpec)| {
            let mut spec = example();
            change(&mut spec);
            Kept::from_spec(spec).map_err(|error| error.field())
        };
        assert_eq!(refused(|spec| spec.milliseconds = -1.0), Err(Field::Seconds));
        assert_eq!(refused(|spec| spec.milliseconds = f64::NAN), Err(Field::Seconds));
        assert_eq!(refused(|spec| spec.rung = Some(0)), Err(Field::Count));
        assert_eq!(refused(|spec| spec.numbers[1] = Some(1e300)), Err(Field::BankVolts));
        assert_eq!(refused(|spec| spec.numbers[3] = Some(-0.1)), Err(Field::Amps));
        assert_eq!(refused(|spec| spec.meter.percent = 0.0), Err(Field::Percent));
        assert_eq!(refused(|spec| spec.note = "x".repeat(501)), Err(Field::Count));
        let weight = |spec: &mut KeptSpec| {
            spec.verdict = spec.verdict.map(|verdict| Verdict { weight: 1.5, ..verdict });
        };
        assert_eq!(refused(weight), Err(Field::Percent));
    }
}
