//! Protective conductor, insulation and leakage: limits of the tests after repair, by class.
//!
//! The digits were read in documents that quote EN 50678 and EN 50699, not in the standards themselves.

use crate::detail::Standing;
use crate::error::{Field, InputError, within};

/// Class of protection against electric shock (IEC 61140).
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Class {
    /// A protective conductor holds what can be touched at earth.
    One,
    /// Double or reinforced insulation; no protective conductor.
    Two,
    /// Extra-low voltage from a safe source.
    Three,
}

impl Class {
    /// Every class.
    pub const ALL: [Self; 3] = [Self::One, Self::Two, Self::Three];
}

/// What is measured.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Quantity {
    /// From the plug's earth contact to metal that can be touched, ohms.
    ProtectiveConductor,
    /// From line and neutral together to earth or to metal that can be touched, ohms.
    Insulation,
    /// In the protective conductor, amperes.
    ProtectiveConductorCurrent,
    /// From metal that can be touched to earth, amperes.
    TouchCurrent,
}

/// Which side of the limit passes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Sense {
    /// The limit or less.
    AtMost,
    /// The limit or more.
    AtLeast,
}

/// What must be said beside a limit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Caveat {
    /// Check the standard and your local code: the digits were read second hand, and codes differ.
    CheckStandardAndLocalCode,
}

/// One limit. Ohms or amperes by its [`Quantity`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Limit {
    /// What is measured.
    pub quantity: Quantity,
    /// The limit, in the SI unit.
    pub value: f64,
    /// Which side of it passes.
    pub sense: Sense,
    /// The standards that it is quoted from.
    pub citation: &'static str,
    /// How it is known.
    pub standing: Standing,
    /// What must be said beside it.
    pub caveat: Caveat,
}

/// Where a reading stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Verdict {
    /// On the side that passes this one test.
    Within,
    /// On the other side: do not apply power.
    Outside,
}

/// Tests after repair, and recurrent tests.
const CITATION: &str = "EN 50678 / EN 50699";

impl Limit {
    const fn new(quantity: Quantity, value: f64, sense: Sense) -> Self {
        Self {
            quantity,
            value,
            sense,
            citation: CITATION,
            standing: Standing::Published,
            caveat: Caveat::CheckStandardAndLocalCode,
        }
    }

    /// A reading (0 to 1e12, ohms or amperes) against the limit.
    ///
    /// # Errors
    /// Not finite or out of range.
    pub fn judge(&self, reading: f64) -> Result<Verdict, InputError> {
        let field = match self.quantity {
            Quantity::ProtectiveConductor | Quantity::Insulation => Field::Ohms,
            Quantity::ProtectiveConductorCurrent | Quantity::TouchCurrent => Field::Amps,
        };
        let reading = within(field, reading, 0.0, 1e12)?;
        let passes = match self.sense {
            Sense::AtMost => reading <= self.value,
            Sense::AtLeast => reading >= self.value,
        };
        Ok(if passes { Verdict::Within } else { Verdict::Outside })
    }
}

/// Longest lead of the basic limit, metres.
const BASIC_METRES: f64 = 5.0;
/// Limit up to there, ohms.
const BASIC_OHMS: f64 = 0.3;
/// Each further length, metres.
const FURTHER_METRES: f64 = 7.5;
/// What it adds, ohms.
const FURTHER_OHMS: f64 = 0.1;
/// The limit of any lead, ohms.
const MOST_OHMS: f64 = 1.0;

/// The protective conductor of class I equipment with a lead of `lead_metres` (0 to 1000): 0.3 ohm up to 5 m, 0.1 ohm
/// more for each further 7.5 m begun, 1 ohm at most (EN 50678 / EN 50699, published second hand).
///
/// # Errors
/// Not finite or out of range.
pub fn protective_conductor_ohms(lead_metres: f64) -> Result<Limit, InputError> {
    let metres = within(Field::Metres, lead_metres, 0.0, 1000.0)?;
    let further = libm::ceil(((metres - BASIC_METRES) / FURTHER_METRES).max(0.0));
    let ohms = (BASIC_OHMS + FURTHER_OHMS * further).min(MOST_OHMS);
    Ok(Limit::new(Quantity::ProtectiveConductor, ohms, Sense::AtMost))
}

/// Insulation of equipment of a class: 1 megohm (I; 0.3 with heating elements), 2 (II), 0.25 (III)
/// (EN 50678 / EN 50699, published second hand).
pub const fn insulation_ohms(class: Class, heating_elements: bool) -> Limit {
    let ohms = match (class, heating_elements) {
        (Class::One, false) => 1.0e6,
        (Class::One, true) => 0.3e6,
        (Class::Two, _) => 2.0e6,
        (Class::Three, _) => 0.25e6,
    };
    Limit::new(Quantity::Insulation, ohms, Sense::AtLeast)
}

/// Leakage of equipment that is on: 3.5 mA in the protective conductor (I), 0.5 mA to the touch (II)
/// (EN 50678 / EN 50699, published second hand); none is quoted for class III.
pub const fn leakage_amps(class: Class) -> Option<Limit> {
    match class {
        Class::One => Some(Limit::new(Quantity::ProtectiveConductorCurrent, 3.5e-3, Sense::AtMost)),
        Class::Two => Some(Limit::new(Quantity::TouchCurrent, 0.5e-3, Sense::AtMost)),
        Class::Three => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_longer_lead_may_have_more_up_to_an_ohm() {
        for (metres, ohms) in [(0.0, 0.3), (5.0, 0.3), (5.1, 0.4), (12.5, 0.4), (12.6, 0.5), (500.0, 1.0)] {
            let limit = protective_conductor_ohms(metres).expect("a lead");
            assert!((limit.value - ohms).abs() < 1e-12, "{metres} m: {}", limit.value);
        }
        assert!(protective_conductor_ohms(-1.0).is_err());
    }

    #[test]
    fn a_reading_passes_on_one_side() {
        let insulation = insulation_ohms(Class::Two, false);
        assert_eq!(insulation.judge(5e6), Ok(Verdict::Within));
        assert_eq!(insulation.judge(1e6), Ok(Verdict::Outside));
        assert!(insulation.judge(f64::NAN).is_err());
        let touch = leakage_amps(Class::Two).expect("quoted");
        assert_eq!(touch.judge(0.6e-3), Ok(Verdict::Outside));
    }
}
