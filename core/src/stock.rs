//! The lamps that a person owns.

use alloc::vec::Vec;

use crate::error::{Field, InputError, within};
use crate::lamp::Lamp;

/// Lamps of one kind, and how many there are.
#[derive(Debug, Clone, PartialEq)]
pub struct Owned {
    lamp: Lamp,
    count: u8,
}

impl Owned {
    /// The lamp.
    pub const fn lamp(&self) -> &Lamp {
        &self.lamp
    }

    /// How many of it, 1 to 99.
    pub const fn count(&self) -> u8 {
        self.count
    }
}

/// A stock of lamps: kinds in the order in which they were first named, equal ones counted together.
///
/// It may be empty: then [`crate::ladder::plan`] says which lamp to begin with.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Stock {
    kinds: Vec<Owned>,
}

impl Stock {
    /// Allowed count of one kind.
    pub const COUNT: (f64, f64) = (0.0, 99.0);
    /// Most kinds: every one multiplies the banks that are looked at.
    pub const MOST_KINDS: usize = 12;

    /// A stock from lamps with counts as a person gives them; a count of 0 is a lamp not owned.
    ///
    /// Two lamps are of one kind when the same things are known of them ([`Lamp`]'s equality), so that a lamp that has
    /// been measured stands apart from its unmeasured twins.
    ///
    /// # Errors
    /// [`Field::Count`] negative, above 99 or no whole number; [`Field::Stock`] of more than twelve kinds.
    ///
    /// ```
    /// use lampladder_core::{lamp::Lamp, stock::Stock};
    /// let stock = Stock::new([(Lamp::new(230.0, 60.0)?, 2.0), (Lamp::new(230.0, 25.0)?, 1.0)])?;
    /// assert_eq!(stock.lamp_count(), 3);
    /// # Ok::<(), lampladder_core::error::InputError>(())
    /// ```
    pub fn new(lamps: impl IntoIterator<Item = (Lamp, f64)>) -> Result<Self, InputError> {
        let mut stock = Self::default();
        for (lamp, count) in lamps {
            stock.add(lamp, count)?;
        }
        Ok(stock)
    }

    /// Adds `count` of a lamp.
    ///
    /// # Errors
    /// As [`Self::new`]; the stock is then as before.
    pub fn add(&mut self, lamp: Lamp, count: f64) -> Result<(), InputError> {
        let count = Self::count(count)?;
        if count == 0 {
            return Ok(());
        }
        if let Some(known) = self.kinds.iter_mut().find(|known| known.lamp == lamp) {
            known.count = Self::count(f64::from(known.count) + f64::from(count))?;
            return Ok(());
        }
        #[expect(clippy::cast_precision_loss, reason = "a count of kinds for a message")]
        let (value, high) = ((self.kinds.len() + 1) as f64, Self::MOST_KINDS as f64);
        within(Field::Stock, value, 0.0, high)?;
        self.kinds.push(Owned { lamp, count });
        Ok(())
    }

    /// A count as a person gives it, checked.
    ///
    /// # Errors
    /// [`Field::Count`] negative, above 99 or no whole number.
    pub fn count(value: f64) -> Result<u8, InputError> {
        let value = within(Field::Count, value, Self::COUNT.0, Self::COUNT.1)?;
        if libm::floor(value) != value {
            return Err(InputError::NotWhole { field: Field::Count, value });
        }
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "whole, from 0 to 99")]
        let count = value as u8;
        Ok(count)
    }

    /// The kinds, in the order in which they were first named.
    pub fn kinds(&self) -> &[Owned] {
        &self.kinds
    }

    /// Whether there is no lamp.
    pub fn is_empty(&self) -> bool {
        self.kinds.is_empty()
    }

    /// How many lamps in all.
    pub fn lamp_count(&self) -> usize {
        self.kinds.iter().map(|owned| usize::from(owned.count)).sum()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn lamp(watts: f64) -> Lamp {
        Lamp::new(230.0, watts).expect("a stock size")
    }

    #[test]
    fn equal_lamps_are_counted_together_and_none_is_no_kind() {
        let stock =
            Stock::new([(lamp(60.0), 1.0), (lamp(25.0), 0.0), (lamp(60.0), 2.0)]).expect("three lamps");
        assert_eq!(stock.kinds().len(), 1);
        assert_eq!(stock.kinds()[0].count(), 3);
        assert!(Stock::default().is_empty());
    }

    #[test]
    fn a_count_that_is_none_is_refused() {
        for count in [-1.0, 100.0] {
            let refused = Stock::new([(lamp(60.0), count)]).expect_err("no count");
            assert_eq!(refused.field(), Field::Count);
        }
        let half = InputError::NotWhole { field: Field::Count, value: 1.5 };
        assert_eq!(Stock::new([(lamp(60.0), 1.5)]), Err(half));
        assert!(Stock::new([(lamp(60.0), f64::NAN)]).is_err());
        let mut many = Stock::new([(lamp(60.0), 99.0)]).expect("many");
        assert!(many.add(lamp(60.0), 1.0).is_err());
        assert_eq!(many.lamp_count(), 99);
        let crowd = (1..=13_u8).map(|kind| (lamp(10.0 * f64::from(kind)), 1.0));
        assert_eq!(Stock::new(crowd).map_err(|error| error.field()), Err(Field::Stock));
    }
}
