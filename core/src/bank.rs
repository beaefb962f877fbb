//! The lamps in use: a series chain of parallel groups.

use alloc::vec::Vec;

use crate::error::{Field, InputError, within};
use crate::filament::Filament;
use crate::lamp::{Lamp, LampState};

/// A series chain of parallel groups of lamps, one to eight lamps in all.
#[derive(Debug, Clone, PartialEq)]
pub struct Bank {
    groups: Vec<Vec<Lamp>>,
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
        Ok(Self { groups })
    }

    /// A bank of one lamp.
    pub fn single(lamp: Lamp) -> Self {
        Self { groups: alloc::vec![alloc::vec![lamp]] }
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
        Self { groups: groups.collect() }
    }

    /// Volts at which the first group to reach its rating does so, when the bank stands alone: the highest
    /// supply voltage that overdrives no lamp of a shorted set.
    pub fn rated_volts(&self) -> f64 {
        let group_rating =
            |group: &Vec<Lamp>| group.iter().map(Lamp::rated_volts).fold(f64::INFINITY, f64::min);
        let least_amps = self
            .groups
            .iter()
            .map(|group| group_amps(group, group_rating(group)))
            .fold(f64::INFINITY, f64::min);
        self.at_amps(least_amps).volts
    }

    /// The lamp whose temperature drives [`Self::at_ln_rise`].
    fn lead(&self) -> &Filament {
        self.groups[0][0].filament()
    }

    /// The bank with its first filament at a logarithm of the rise above ambient. Volts and amperes both grow
    /// with it, so it is the one variable in which to search. A bank of one lamp costs one evaluation.
    pub fn at_ln_rise(&self, ln_rise: f64) -> BankPoint {
        let lead = self.lead().at_ln_rise(ln_rise);
        let group_volts = lead.volts();
        let mut hottest = lead.rise;
        let mut amps = lead.amps();
        let first = &self.groups[0];
        for_each_kind(&first[1..], first[0].filament(), |filament, known, count| {
            let point = known.map_or_else(|| filament.at_volts(group_volts), |()| lead);
            hottest = hottest.max(point.rise);
            amps += count * point.amps();
        });
        let mut volts = group_volts;
        for group in &self.groups[1..] {
            if group == first {
                volts += group_volts;
                continue;
            }
            let (more_volts, rise) = group_at_amps(group, amps);
            volts += more_volts;
            hottest = hottest.max(rise);
        }
        BankPoint { volts, amps, hottest_kelvin: crate::tungsten::AMBIENT_KELVIN + hottest }
    }

    /// The logarithm of the lead's rise at a current, amperes.
    pub(crate) fn ln_rise_at_amps(&self, amps: f64) -> f64 {
        let (volts, _) = group_at_amps(&self.groups[0], amps);
        libm::log(self.lead().at_volts(volts).rise).max(Filament::ln_rise_span().0)
    }

    /// A first guess of the logarithm of the lead's rise when the bank takes about `volts`.
    pub(crate) fn guess_ln_rise(&self, volts: f64) -> f64 {
        #[expect(clippy::cast_precision_loss, reason = "at most eight groups")]
        let share = volts / self.groups.len() as f64;
        self.lead().guess_ln_rise(share / self.groups[0][0].rated_volts())
    }

    /// The bank at a current, amperes.
    pub fn at_amps(&self, amps: f64) -> BankPoint {
        let mut volts = 0.0;
        let mut hottest: f64 = 0.0;
        for group in &self.groups {
            let (more_volts, rise) = group_at_amps(group, amps);
            volts += more_volts;
            hottest = hottest.max(rise);
        }
        BankPoint { volts, amps, hottest_kelvin: crate::tungsten::AMBIENT_KELVIN + hottest }
    }

    /// The bank at a voltage across the whole chain; beyond what melts a filament, the hottest point.
    pub fn at_volts(&self, volts: f64) -> BankPoint {
        if volts.is_nan() || volts <= 0.0 {
            return BankPoint { volts: 0.0, amps: 0.0, hottest_kelvin: crate::tungsten::AMBIENT_KELVIN };
        }
        let span = Filament::ln_rise_span();
        let found = crate::roots::decreasing_from(
            |x| libm::log(volts / self.at_ln_rise(x).volts),
            span,
            self.guess_ln_rise(volts),
            crate::roots::Tolerance::FINE,
        );
        self.at_ln_rise(found.map_or(span.1, |root| root.x))
    }

    /// Every lamp's state at a current through the chain, in the order of [`Self::groups`].
    pub fn lamps_at_amps(&self, amps: f64) -> Vec<Vec<LampState>> {
        self.groups
            .iter()
            .map(|group| {
                if let [lamp] = group.as_slice() {
                    return alloc::vec![lamp.at_amps(amps)];
                }
                let (volts, _) = group_at_amps(group, amps);
                group.iter().map(|lamp| lamp.at_volts(volts)).collect()
            })
            .collect()
    }
}

/// Calls `f` once for each run of equal filaments with how many there are; `known` where they equal `first`.
fn for_each_kind(lamps: &[Lamp], first: &Filament, mut f: impl FnMut(&Filament, Option<()>, f64)) {
    let mut rest = lamps;
    while let Some(lamp) = rest.first() {
        let run = rest.iter().take_while(|other| other.filament() == lamp.filament()).count();
        #[expect(clippy::cast_precision_loss, reason = "at most eight lamps")]
        f(lamp.filament(), (lamp.filament() == first).then_some(()), run as f64);
        rest = &rest[run..];
    }
}

/// Amperes that a parallel group passes at a voltage.
fn group_amps(group: &[Lamp], volts: f64) -> f64 {
    let mut amps = 0.0;
    for_each_kind(group, group[0].filament(), |filament, _, count| {
        amps += count * filament.at_volts(volts).amps();
    });
    amps
}

/// Volts across a parallel group at a current, and the hottest rise in it.
fn group_at_amps(group: &[Lamp], amps: f64) -> (f64, f64) {
    let first = group[0].filament();
    if group.iter().all(|lamp| lamp.filament() == first) {
        #[expect(clippy::cast_precision_loss, reason = "at most eight lamps")]
        let point = first.at_amps(amps / group.len() as f64);
        return (point.volts(), point.rise);
    }
    if amps.is_nan() || amps <= 0.0 {
        return (0.0, 0.0);
    }
    // Newton for all filaments at once: along their slopes, one common voltage brings the wanted current.
    let rated_amps: f64 = group.iter().map(|lamp| lamp.rated_watts() / lamp.rated_volts()).sum();
    let share = libm::pow(amps / rated_amps, 1.85);
    let (low, high) = Filament::ln_rise_span();
    let mut rises = [0.0; Bank::MOST_LAMPS];
    for (rise, lamp) in rises.iter_mut().zip(group) {
        *rise = lamp.filament().guess_ln_rise(share * group[0].rated_volts() / lamp.rated_volts());
    }
    let mut ln_volts = 0.0;
    let mut hottest: f64 = 0.0;
    for _ in 0..MOST_STEPS {
        let mut points = [first.at_rise(0.0); Bank::MOST_LAMPS];
        // sum of I (1 + g (v - v_k)) = amps, with v_k = ln volts of filament k and g = d ln I / d ln V.
        let (mut total, mut slope, mut weighted) = (0.0, 0.0, 0.0);
        for ((point, lamp), &rise) in points.iter_mut().zip(group).zip(&rises) {
            *point = lamp.filament().at_ln_rise(rise);
            let gain = point.amps() * point.amps_slope() / point.volts_slope();
            total += point.amps();
            slope += gain;
            weighted += gain * libm::log(point.volts());
        }
        ln_volts = (amps - total + weighted) / slope;
        let mut largest: f64 = 0.0;
        for (rise, point) in rises.iter_mut().zip(&points).take(group.len()) {
            let step = ((ln_volts - libm::log(point.volts())) / point.volts_slope()).clamp(-3.0, 3.0);
            let moved = (*rise + step).clamp(low, high);
            largest = largest.max((moved - *rise).abs());
            *rise = moved;
            hottest = hottest.max(libm::exp(moved));
        }
        if largest < CONVERGED {
            break;
        }
        hottest = 0.0;
    }
    (libm::exp(ln_volts), hottest)
}

/// More steps than crossing the whole span of temperature by clamped ones takes.
const MOST_STEPS: usize = 60;

/// A Newton step this small leaves an error of its square, below the last bits.
const CONVERGED: f64 = 1e-7;

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
