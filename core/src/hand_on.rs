//! A bench as one colleague hands it on to another: the set-up, and what may go with it.

use alloc::vec::Vec;

use crate::error::{Field, InputError, within};
use crate::kept::Kept;
use crate::precheck::Class;
use crate::setup::Setup;
use crate::stock::Stock;

/// All that is handed on.
#[derive(Debug, Clone, PartialEq)]
pub struct HandedOn {
    /// The bench.
    pub setup: Setup,
    /// The lamps that there are.
    pub stock: Option<Stock>,
    /// How far somebody has come on the ladder.
    pub position: Option<Position>,
    /// Readings that were kept.
    pub log: Vec<Kept>,
}

impl HandedOn {
    /// A set-up and nothing else.
    pub const fn only(setup: Setup) -> Self {
        Self { setup, stock: None, position: None, log: Vec::new() }
    }
}

/// A step of the bring-up, in order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Step {
    /// The lamps that there are.
    Lamps,
    /// What is checked before power.
    Checks,
    /// A rung, from 0. A ladder that has fewer begins again.
    Rung(u8),
    /// The bare mains.
    Mains,
    /// After power.
    After,
}

/// Where somebody stands on the ladder, and what the checks showed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PositionSpec {
    /// The step that is due; those before it are done.
    pub step: Step,
    /// The equipment's class of protection.
    pub class: Class,
    /// Length of its lead, metres.
    pub lead_metres: f64,
    /// Whether it has been looked over.
    pub looked_over: bool,
    /// Protective conductor, insulation, across the plug: ohms, infinite for a meter over its range; the reservoir,
    /// farads; what empties it, ohms; the volts to which it was charged.
    pub checks: [Option<f64>; 6],
}

/// A position that makes sense.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Position {
    spec: PositionSpec,
}

impl Position {
    /// Allowed length of a lead, metres.
    pub const METRES: (f64, f64) = (0.0, 1000.0);

    /// What each of the checks may be: the field, the least, the greatest, and whether a meter may be over its range.
    pub const CHECKS: [(Field, f64, f64, bool); 6] = [
        (Field::Ohms, 0.0, 1e12, false),
        (Field::Ohms, 0.0, 1e12, true),
        (Field::Ohms, 0.0, 1e12, true),
        (Field::Farads, 1e-12, 10.0, false),
        (Field::Ohms, 1.0, 1e12, false),
        (Field::Volts, 0.0, 1e5, false),
    ];

    /// Checks and keeps it.
    ///
    /// # Errors
    /// The first number that is not finite or out of range.
    pub fn from_spec(spec: PositionSpec) -> Result<Self, InputError> {
        within(Field::Metres, spec.lead_metres, Self::METRES.0, Self::METRES.1)?;
        for (value, (field, low, high, over_range)) in spec.checks.into_iter().zip(Self::CHECKS) {
            if let Some(value) = value
                && !(over_range && value == f64::INFINITY)
            {
                within(field, value, low, high)?;
            }
        }
        Ok(Self { spec })
    }

    /// What it says.
    pub const fn spec(&self) -> &PositionSpec {
        &self.spec
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn only_some_meters_can_be_over_their_range() {
        let spec = PositionSpec {
            step: Step::Rung(1),
            class: Class::Two,
            lead_metres: 5.0,
            looked_over: true,
            checks: [Some(0.2), Some(f64::INFINITY), Some(1200.0), Some(1e-4), None, Some(325.0)],
        };
        assert_eq!(Position::from_spec(spec).as_ref().map(Position::spec), Ok(&spec));
        let mut wrong = spec;
        wrong.checks[0] = Some(f64::INFINITY);
        assert_eq!(Position::from_spec(wrong), Err(InputError::NotFinite { field: Field::Ohms }));
        let far = PositionSpec { lead_metres: -1.0, ..spec };
        assert_eq!(Position::from_spec(far).map_err(|error| error.field()), Err(Field::Metres));
    }
}
