//! The lamps in use: a series chain of parallel groups.

mod walk;

use alloc::vec::Vec;

pub(crate) use walk::{Step, Walk};

use crate::error::{Field, InputError, within};
use crate::filament::Filament;
use crate::lamp::{Lamp, LampState, Tables};
use crate::tungsten::AMBIENT_KELVIN;

/// A series chain of parallel groups of lamps, one to eight lamps in all.
#[derive(Debug, Clone, PartialEq)]
pub struct Bank {
    groups: Vec<Vec<Lamp>>,
    chain: walk::Chain,
}

/// Where a bank stands. Volts and amperes are RMS, or DC.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BankPoint {
    /// Volts across the whole chain.
    pub volts: f64,
    /// Amperes through it.
    pub amps: f64,
    /// The hottest filament, kelvin.
    pub hottest_kelvin: f64,
}

impl BankPoint {
    /// Resistance, ohms.
    pub fn ohms(&self) -> f64 {
        self.volts / self.amps
    }
}

impl Bank {
    /// Most lamps in one bank.
    pub const MOST_LAMPS: usize = 8;

    /// A chain of groups; each group holds one or more lamps in parallel.
    ///
    /// # Errors
    /// [`Field::Bank`] where there is no lamp, an empty group, or more than eight lamps.
    pub fn new(groups: Vec<Vec<Lamp>>) -> Result<Self, InputError> {
        let smallest = groups.iter().map(Vec::len).min().unwrap_or(0);
        let total: usize = groups.iter().map(Vec::len).sum();
        let count = if smallest == 0 { 0 } else { total };
        #[expect(clippy::cast_precision_loss, reason = "a count of lamps for a message")]
        let (value, high) = (count as f64, Self::MOST_LAMPS as f64);
        within(Field::Bank, value, 1.0, high)?;
        Ok(Self::of(groups))
    }

    /// One to eight lamps, no group empty.
    fn of(groups: Vec<Vec<Lamp>>) -> Self {
        let chain = walk::Chain::of(&groups);
        Self { groups, chain }
    }

    /// A bank of one lamp.
    pub fn single(lamp: Lamp) -> Self {
        Self::of(alloc::vec![alloc::vec![lamp]])
    }

    /// The chain of groups.
    pub fn groups(&self) -> &[Vec<Lamp>] {
        &self.groups
    }

    /// How many lamps.
    pub fn lamp_count(&self) -> usize {
        self.groups.iter().map(Vec::len).sum()
    }

    /// Resistance with every filament at 300 K, ohms.
    pub fn cold_ohms(&self) -> f64 {
        self.groups
            .iter()
            .map(|group| 1.0 / group.iter().map(|lamp| 1.0 / lamp.cold_ohms()).sum::<f64>())
            .sum()
    }

    /// The same bank with every lamp replaced by its [`Lamp::variant`].
    #[must_use]
    pub fn variant(&self, index: usize) -> Self {
        let groups = self.groups.iter().map(|group| group.iter().map(|lamp| lamp.variant(index)).collect());
        Self::of(groups.collect())
    }

    /// The same bank with every lamp replaced by its [`Lamp::moved`], all the same way: lamps of one bank tend to come
    /// out of one box.
    pub(crate) fn moved(&self, deviations: [f64; 3], tables: Tables) -> Self {
        let moved = |group: &Vec<Lamp>| group.iter().map(|lamp| lamp.moved(deviations, tables)).collect();
        Self::of(self.groups.iter().map(moved).collect())
    }

    /// The bank where its hottest filament is at `kelvin`.
    pub fn at_hottest_kelvin(&self, kelvin: f64) -> BankPoint {
        let rise = kelvin - AMBIENT_KELVIN;
        if rise <= 0.0 {
            return self.at_volts(0.0);
        }
        let span = Filament::ln_rise_span();
        let walk = Walk::new(self);
        let found = crate::roots::decreasing_from(
            |x| libm::log(rise / (walk.to(x).hottest_kelvin - AMBIENT_KELVIN)),
            span,
            libm::log(rise).min(span.1),
            crate::roots::Tolerance { x: 1e-10, residual: 1e-10 },
        );
        walk.to(found.map_or(span.1, |root| root.x))
    }

    /// The lamp whose temperature drives [`Self::at_ln_rise`].
    fn lead(&self) -> &Filament {
        self.groups[0][0].filament()
    }

    /// The bank with its first filament at a logarithm of the rise above ambient.
    pub fn at_ln_rise(&self, ln_rise: f64) -> BankPoint {
        Walk::new(self).to(ln_rise)
    }

    /// A first guess of the logarithm of the lead's rise when the bank takes about `volts`.
    pub(crate) fn guess_ln_rise(&self, volts: f64) -> f64 {
        #[expect(clippy::cast_precision_loss, reason = "at most eight groups")]
        let share = volts / self.groups.len() as f64;
        self.lead().guess_ln_rise(share / self.groups[0][0].rated_volts())
    }

    /// The bank at a current, amperes; cold for anything that is not above 0.
    pub fn at_amps(&self, amps: f64) -> BankPoint {
        if amps > 0.0 { Walk::new(self).to_amps(amps) } else { COLD }
    }

    /// The bank at a voltage across the whole chain; beyond what melts a filament, the hottest point; cold for anything
    /// that is not above 0.
    pub fn at_volts(&self, volts: f64) -> BankPoint {
        if volts.is_nan() || volts <= 0.0 {
            return COLD;
        }
        let walk = Walk::new(self);
        let span = Filament::ln_rise_span();
        let found = crate::roots::decreasing_from(
            |x| libm::log(volts / walk.to(x).volts),
            span,
            self.guess_ln_rise(volts),
            crate::roots::Tolerance::FINE,
        );
        walk.to(found.map_or(span.1, |root| root.x))
    }

    /// Every lamp's state at a current through the chain, in the order of [`Self::groups`].
    pub fn lamps_at_amps(&self, amps: f64) -> Vec<Vec<LampState>> {
        if amps > 0.0 {
            let walk = Walk::new(self);
            walk.to_amps(amps);
            return walk.lamps();
        }
        let cold = LampState { volts: 0.0, amps: 0.0, watts: 0.0, kelvin: AMBIENT_KELVIN };
        self.groups.iter().map(|group| alloc::vec![cold; group.len()]).collect()
    }
}

/// A bank without current.
const COLD: BankPoint = BankPoint { volts: 0.0, amps: 0.0, hottest_kelvin: AMBIENT_KELVIN };

#[cfg(test)]
mod tests {
    use super::*;
    use alloc::vec;

    fn lamp(watts: f64) -> Lamp {
        Lamp::new(230.0, watts).expect("a stock size")
    }

    #[test]
    fn parallel_lamps_add_and_series_lamps_share() {
        let one = lamp(60.0).at_volts(230.0).amps;
        let pair = Bank::new(vec![vec![lamp(60.0), lamp(60.0)]]).expect("two lamps");
        assert!((pair.at_volts(230.0).amps / one - 2.0).abs() < 1e-9);
        let chain = Bank::new(vec![vec![lamp(60.0)], vec![lamp(60.0)]]).expect("two lamps");
        assert!((chain.at_volts(460.0).amps / one - 1.0).abs() < 1e-9);
    }

    #[test]
    fn a_mixed_bank_obeys_kirchhoff() {
        let bank = Bank::new(vec![vec![lamp(60.0), lamp(25.0)], vec![lamp(100.0)]]).expect("three lamps");
        let point = bank.at_volts(230.0);
        let states = bank.lamps_at_amps(point.amps);
        assert!((states[0][0].amps + states[0][1].amps - point.amps).abs() < 1e-9 * point.amps);
        assert!((states[0][0].volts + states[1][0].volts - 230.0).abs() < 1e-8);
        assert!((bank.at_amps(point.amps).volts - 230.0).abs() < 1e-8);
    }

    #[test]
    fn an_empty_group_or_a_ninth_lamp_is_refused() {
        assert!(Bank::new(vec![]).is_err());
        assert!(Bank::new(vec![vec![lamp(60.0)], vec![]]).is_err());
        assert!(Bank::new(vec![vec![lamp(60.0); 9]]).is_err());
    }
}
