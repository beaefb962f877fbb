//! Every bank that a stock makes within the limits: parallel groups of up to six lamps, and series pairs of groups.

use alloc::vec::Vec;
use core::cmp::Ordering;

use super::curve::{self, ACCURACY, Curve};
use super::limits::Limits;
use crate::bank::Bank;
use crate::error::InputError;
use crate::roots::{self, Tolerance};
use crate::stock::Stock;
use crate::supply::Supply;

/// Most lamps in a bank of a ladder: more holders than that are seldom wired up, and the choice grows with every one
/// (design value).
pub const MOST_LAMPS: u8 = 6;

/// How many of each kind of the stock.
pub(super) type Counts = [u8; Stock::MOST_KINDS];

/// A parallel group.
#[derive(Debug, Clone)]
pub(super) struct Group {
    pub(super) counts: Counts,
    size: u8,
    curve: Curve,
    /// Volts that the weakest of its lamps stands.
    stands_volts: f64,
    /// Volts at which the first of its lamps is more than a holder stands.
    heats_volts: f64,
}

/// A bank by its groups.
#[derive(Debug, Clone, Copy)]
pub(super) struct Candidate {
    first: u32,
    second: Option<u32>,
    /// How many lamps.
    lamps: u8,
    /// Amperes into a dead short.
    pub(super) short_amps: f64,
}

impl Candidate {
    /// Whether it has two groups.
    const fn is_chain(&self) -> bool {
        self.second.is_some()
    }

    /// How much there is to wire: lamps, and one more for a chain.
    pub(super) fn wiring(&self) -> u32 {
        u32::from(self.lamps) + u32::from(self.is_chain())
    }
}

/// The banks in order of rising short-circuit current, and why others are left out.
#[derive(Debug)]
pub(super) struct Pool {
    groups: Vec<Group>,
    pub(super) candidates: Vec<Candidate>,
    /// Whether any bank was left out only for the heat in a holder.
    pub(super) some_too_hot: bool,
}

impl Pool {
    /// All banks of the stock that keep every lamp and every holder within its limits on a dead short.
    pub(super) fn of(supply: &Supply, stock: &Stock, limits: &Limits) -> Self {
        let spec = limits.spec();
        let risen = supply.volts() * (1.0 + spec.supply_rise);
        let kinds: Vec<Group> = stock
            .kinds()
            .iter()
            .enumerate()
            .map(|(kind, owned)| {
                let lamp = owned.lamp();
                let curve = Curve::of(lamp.filament(), risen);
                let mut counts = Counts::default();
                counts[kind] = 1;
                let stands_volts = lamp.rated_volts() * (1.0 + spec.lamp_overvoltage);
                let hot = lamp.rated_watts() > spec.holder_watts;
                let heats_volts = if hot { volts_of_watts(&curve, spec.holder_watts, risen) } else { risen };
                Group { counts, size: 1, curve, stands_volts, heats_volts }
            })
            .collect();
        let most: Vec<u8> = stock.kinds().iter().map(crate::stock::Owned::count).collect();
        let groups = groups(&kinds, &most, risen);
        let mut pool = Self { groups, candidates: Vec::new(), some_too_hot: false };
        for first in 0..pool.groups.len() {
            pool.consider(supply, risen, first, None);
            for second in first..pool.groups.len() {
                let (a, b) = (&pool.groups[first], &pool.groups[second]);
                // Groups stand in order of size: the others are larger still.
                if a.size + b.size > MOST_LAMPS {
                    break;
                }
                let owned = (0..most.len()).all(|kind| a.counts[kind] + b.counts[kind] <= most[kind]);
                if owned {
                    pool.consider(supply, risen, first, Some(second));
                }
            }
        }
        pool.candidates.sort_by(compare);
        pool
    }

    /// Takes in one bank, if it keeps within the limits.
    fn consider(&mut self, supply: &Supply, risen: f64, first: usize, second: Option<usize>) {
        let (a, b) = (&self.groups[first], second.map(|second| &self.groups[second]));
        let curves = (&a.curve, b.map(|group| &group.curve));
        let within = |volts: f64, most: f64| volts <= most * (1.0 + ACCURACY);
        // Where every lamp stands the whole supply, nothing has to be asked.
        let robust = within(risen, a.stands_volts) && b.is_none_or(|b| within(risen, b.stands_volts));
        if !robust {
            // A stiff supply: what its own resistance takes is the lamps' to bear on another socket.
            let high = curve::shorted(curves.0, curves.1, risen, 0.0);
            let stands = within(high.first_volts, a.stands_volts)
                && b.is_none_or(|b| within(high.second_volts, b.stands_volts));
            if !stands {
                return;
            }
        }
        let short = curve::shorted(curves.0, curves.1, supply.volts(), supply.ohms());
        let cool = within(short.first_volts, a.heats_volts)
            && b.is_none_or(|b| within(short.second_volts, b.heats_volts));
        if !cool {
            self.some_too_hot = true;
            return;
        }
        let lamps = a.size + b.map_or(0, |b| b.size);
        #[expect(clippy::cast_possible_truncation, reason = "fewer groups than a u32 counts")]
        let index = |group: usize| group as u32;
        self.candidates.push(Candidate {
            first: index(first),
            second: second.map(index),
            lamps,
            short_amps: short.amps,
        });
    }

    /// Volts across every group at a current, for [`Self::drop_volts`]: thousands of banks share a few hundred groups.
    pub(super) fn group_volts(&self, amps: f64) -> Vec<f64> {
        self.groups.iter().map(|group| group.curve.volts_at(amps)).collect()
    }

    /// Volts across a bank at the current of `group_volts`; at least the supply's where it cannot pass that much.
    pub(super) fn drop_volts(group_volts: &[f64], candidate: &Candidate) -> f64 {
        let at = |group: u32| group_volts[group as usize];
        at(candidate.first) + candidate.second.map_or(0.0, at)
    }

    /// How many of each kind, group by group.
    pub(super) fn counts(&self, candidate: &Candidate) -> Vec<Counts> {
        let indices = core::iter::once(candidate.first).chain(candidate.second);
        indices.map(|group| self.groups[group as usize].counts).collect()
    }

    /// The bank itself.
    pub(super) fn bank(&self, candidate: &Candidate, stock: &Stock) -> Result<Bank, InputError> {
        let group = |counts: &Counts| {
            let kinds = stock.kinds().iter().zip(counts);
            kinds
                .flat_map(|(owned, &count)| core::iter::repeat_n(owned.lamp().clone(), usize::from(count)))
                .collect()
        };
        Bank::new(self.counts(candidate).iter().map(group).collect())
    }
}

/// Rising short-circuit current; equal ones in an order that depends on the stock alone.
fn compare(a: &Candidate, b: &Candidate) -> Ordering {
    a.short_amps
        .total_cmp(&b.short_amps)
        .then_with(|| (a.lamps, a.first, a.second).cmp(&(b.lamps, b.first, b.second)))
}

/// Every parallel group of up to six lamps, in order of size.
fn groups(kinds: &[Group], most: &[u8], risen: f64) -> Vec<Group> {
    let nothing = Group {
        counts: Counts::default(),
        size: 0,
        curve: Curve::empty(risen),
        stands_volts: f64::INFINITY,
        heats_volts: f64::INFINITY,
    };
    // Each group of one size, with one more lamp of its last kind or a later one: every group once.
    let mut all = Vec::new();
    let mut layer = alloc::vec![(0, nothing)];
    for size in 1..=MOST_LAMPS {
        let mut next = Vec::new();
        for (last, group) in &layer {
            for kind in *last..kinds.len() {
                if group.counts[kind] == most[kind] {
                    continue;
                }
                let one = &kinds[kind];
                let mut counts = group.counts;
                counts[kind] += 1;
                let joined = Group {
                    counts,
                    size,
                    curve: group.curve.with(&one.curve),
                    stands_volts: group.stands_volts.min(one.stands_volts),
                    heats_volts: group.heats_volts.min(one.heats_volts),
                };
                next.push((kind, joined));
            }
        }
        all.extend(layer.drain(..).map(|(_, group)| group).filter(|group| group.size > 0));
        layer = next;
    }
    all.extend(layer.into_iter().map(|(_, group)| group));
    all
}

/// Volts at which a curve takes `watts`, at most `most_volts`.
fn volts_of_watts(curve: &Curve, watts: f64, most_volts: f64) -> f64 {
    let left = |volts: f64| watts - volts * curve.amps_at(volts);
    let tolerance = Tolerance { x: 1e-9 * most_volts, residual: 1e-9 * watts };
    let found = roots::between(left, (0.0, watts), (most_volts, left(most_volts)), tolerance);
    found.map_or(most_volts, |root| root.x)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::ladder::limits::LimitsSpec;
    use crate::lamp::Lamp;

    fn pool(lamps: &[(f64, f64, f64)], spec: LimitsSpec) -> Pool {
        let lamp = |&(volts, watts, count)| (Lamp::new(volts, watts).expect("a lamp"), count);
        let stock = Stock::new(lamps.iter().map(lamp)).expect("a stock");
        let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
        Pool::of(&supply, &stock, &Limits::new(spec).expect("limits"))
    }

    #[test]
    fn every_bank_is_there_once() {
        // Of two alike and one other: alone 5 (A, AA, B, AB, AAB), in pairs A-A, A-B, AA-B, A-AB.
        let found = pool(&[(230.0, 60.0, 2.0), (230.0, 25.0, 1.0)], LimitsSpec::default());
        assert_eq!(found.candidates.len(), 9);
        // Seven alike: alone 1 to 6, in pairs with 1 to 3 beside as many or more, six at most.
        let found = pool(&[(230.0, 60.0, 7.0)], LimitsSpec::default());
        assert_eq!(found.candidates.len(), 6 + 5 + 3 + 1);
    }

    #[test]
    fn lamps_for_half_the_voltage_stand_in_equal_pairs_only() {
        let found = pool(&[(120.0, 60.0, 2.0), (120.0, 25.0, 1.0)], LimitsSpec::default());
        // A pair of 60 W, and none that gives a 25 W lamp more than its share.
        assert_eq!(found.candidates.len(), 1);
        assert!(found.candidates[0].is_chain());
    }

    #[test]
    fn a_lamp_too_hot_for_its_holder_serves_only_where_it_stays_cooler() {
        let found = pool(&[(230.0, 150.0, 2.0)], LimitsSpec::default());
        assert!(found.some_too_hot);
        assert_eq!(found.candidates.len(), 1);
        assert!(found.candidates[0].is_chain());
    }
}
