//! The choice of the rungs among all banks of a pool.
//!
//! 1. *Reach.* In order of short-circuit current, the banks that can be reached with one rung, two, three … lie in
//!    adjoining intervals: the first ends at the limit of the first rung, each next at `growth` times the strongest
//!    bank before.
//! 2. *Closest.* A bank of any make gives the equipment what its resistance at the equipment's current allows. So of
//!    two banks the one with less voltage at that current brings it closer, and the best is found by asking that of
//!    all banks in the table, and solving for one bank a round.
//! 3. *Close enough.* The weakest imagined lamp that comes within `close_share` of the best leaves one point, amperes
//!    and volts; a bank comes as close when its curve passes below that point.
//! 4. *Rungs.* Among those, the fewest rungs; then the least wiring (every lamp on every rung, a chain counting as one
//!    more); then the least short-circuit current of the last; then, from the last to the first, the rung that comes
//!    nearest to even steps. A rung's predecessors are all banks of the interval before from some current on, so the
//!    least wiring up to each bank follows from a running minimum.

use super::curve::ACCURACY;
use super::limits::Limits;
use super::pool::{Candidate, Pool};
use crate::bank::Bank;
use crate::lamp::Lamp;
use crate::load::Load;
use crate::plate::Plate;
use crate::steady::{self, Equilibrium, SteadyError};
use crate::stock::Stock;
use crate::supply::Supply;
use alloc::vec::Vec;

/// What a search is about.
#[derive(Debug, Clone, Copy)]
pub(super) struct Question<'a> {
    pub(super) supply: &'a Supply,
    pub(super) plate: &'a Plate,
    pub(super) healthy: &'a Load,
    pub(super) limits: &'a Limits,
}

/// The rungs that a search found.
#[derive(Debug, Clone)]
pub(super) struct Path {
    pub(super) rungs: Vec<Candidate>,
    /// Volts at the healthy equipment behind the last over the supply's; 0 where it does not run.
    pub(super) share: f64,
}

impl Path {
    /// Short-circuit current of the last rung, amperes.
    pub(super) fn last_amps(&self) -> f64 {
        self.rungs.last().map_or(0.0, |rung| rung.short_amps)
    }
}

/// Why a search found none.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum Blocked {
    /// No bank keeps within the ratings.
    NoBank,
    /// The weakest bank passes too much for a first rung.
    FirstTooStrong { least_amps: f64 },
}

impl Question<'_> {
    /// The rungs from a pool's banks.
    pub(super) fn path(&self, pool: &Pool, stock: &Stock) -> Result<Result<Path, Blocked>, SteadyError> {
        let Some(weakest) = pool.candidates.first() else { return Ok(Err(Blocked::NoBank)) };
        let ends = self.reach(pool);
        let Some(&end) = ends.last() else {
            return Ok(Err(Blocked::FirstTooStrong { least_amps: weakest.short_amps }));
        };
        let wiring = self.wiring(&pool.candidates, &ends);
        let (best, point) = self.closest(pool, stock, &pool.candidates[..end])?;
        let Some(point) = point else {
            let rungs = self.climb(&pool.candidates, &ends, &wiring, best);
            return Ok(Ok(Path { rungs, share: 0.0 }));
        };
        let (last, load_volts) = self.last(pool, stock, &ends, &wiring, (best, point.load_volts))?;
        let rungs = self.climb(&pool.candidates, &ends, &wiring, last);
        Ok(Ok(Path { rungs, share: load_volts / self.supply.volts() }))
    }

    /// The ends of the intervals of banks that one rung reaches, two, three …; empty where none can be the first.
    fn reach(&self, pool: &Pool) -> Vec<usize> {
        let banks = &pool.candidates;
        let mut ends = Vec::new();
        let mut limit = self.limits.first(self.supply, self.plate).amps;
        let mut before = 0;
        loop {
            let end = banks.partition_point(|bank| bank.short_amps <= limit * (1.0 + ACCURACY));
            if end == before {
                return ends;
            }
            ends.push(end);
            // The same words as in `steps`, so that no bank is reached here that has no step below it there.
            limit = self.limits.spec().growth * banks[end - 1].short_amps;
            before = end;
        }
    }

    /// Where healthy equipment settles behind a bank, if it does.
    fn settled(&self, bank: &Bank) -> Result<Option<Equilibrium>, SteadyError> {
        let points = steady::equilibria(self.supply, bank, self.healthy)?;
        Ok(steady::settled(&points).cloned())
    }

    /// The same, if it runs there.
    pub(super) fn running(&self, bank: &Bank) -> Result<Option<Equilibrium>, SteadyError> {
        Ok(self.settled(bank)?.filter(runs))
    }

    /// The least wiring of the rungs up to and with each reachable bank.
    fn wiring(&self, banks: &[Candidate], ends: &[usize]) -> Vec<u32> {
        let growth = self.limits.spec().growth;
        let mut wiring: Vec<u32> = Vec::with_capacity(ends.last().copied().unwrap_or(0));
        let mut before = 0..0;
        for &end in ends {
            let level = before.end..end;
            // The least from each bank of the interval before up to that interval's end.
            let mut least: Vec<u32> = wiring[before.clone()].to_vec();
            for index in (1..least.len()).rev() {
                least[index - 1] = least[index - 1].min(least[index]);
            }
            for bank in &banks[level.clone()] {
                let own = bank.wiring();
                let enough = |below: &Candidate| steps(growth, below, bank);
                let first = banks[before.clone()].partition_point(|below| !enough(below));
                wiring.push(own + least.get(first).copied().unwrap_or(0));
            }
            before = level;
        }
        wiring
    }

    /// The reachable bank that brings the equipment closest, and where that settles.
    fn closest(
        &self,
        pool: &Pool,
        stock: &Stock,
        reachable: &[Candidate],
    ) -> Result<(usize, Option<Equilibrium>), SteadyError> {
        // What cannot pass the plate's current at all is judged at nearly what the strongest passes.
        let strongest = reachable.len() - 1;
        let most_amps = 0.9 * reachable[strongest].short_amps;
        let mut amps = self.plate.rated_amps().clamp(0.01 * most_amps, most_amps);
        let mut best: Option<(usize, Equilibrium)> = None;
        for _ in 0..MOST_ROUNDS {
            let volts = pool.group_volts(amps);
            let drop = |index: &usize| Pool::drop_volts(&volts, &reachable[*index]);
            let found = (0..reachable.len()).min_by(|a, b| drop(a).total_cmp(&drop(b)));
            let found = found.unwrap_or(strongest);
            let Some(point) = self.running(&pool.bank(&reachable[found], stock)?)? else {
                if best.is_some() || amps == most_amps {
                    break;
                }
                // It runs nowhere here: ask at more current, where a stronger bank shows.
                amps = (2.0 * amps).min(most_amps);
                continue;
            };
            let known = best.as_ref().map_or(0.0, |(_, known)| known.load_volts);
            if point.load_volts <= known * (1.0 + ACCURACY) {
                break;
            }
            amps = point.amps;
            best = Some((found, point));
        }
        Ok(best.map_or((strongest, None), |(found, point)| (found, Some(point))))
    }

    /// The best last rung among those that come close enough to the closest, and the equipment's volts there.
    fn last(
        &self,
        pool: &Pool,
        stock: &Stock,
        ends: &[usize],
        wiring: &[u32],
        (best, most_volts): (usize, f64),
    ) -> Result<(usize, f64), SteadyError> {
        let wanted = most_volts - self.limits.spec().close_share * self.supply.volts();
        let Some((amps, edge_volts)) = self.weakest_enough(wanted)? else { return Ok((best, most_volts)) };
        let volts = pool.group_volts(amps);
        let passes = |index: &usize| {
            Pool::drop_volts(&volts, &pool.candidates[*index]) <= edge_volts * (1.0 + 10.0 * ACCURACY)
        };
        let mut start = 0;
        for &end in ends {
            let mut close: Vec<usize> = (start..end).filter(passes).collect();
            // The banks stand in order of their current already.
            close.sort_by_key(|&index| wiring[index]);
            // The table chooses, the solver confirms.
            for index in close.into_iter().take(MOST_ROUNDS) {
                let point = self.running(&pool.bank(&pool.candidates[index], stock)?)?;
                if let Some(point) = point.filter(|point| point.load_volts >= wanted) {
                    return Ok((index, point.load_volts));
                }
            }
            start = end;
        }
        Ok((best, most_volts))
    }

    /// Amperes and volts of the weakest imagined lamp behind which healthy equipment gets `wanted` volts.
    fn weakest_enough(&self, wanted: f64) -> Result<Option<(f64, f64)>, SteadyError> {
        let (mut low, mut high) = (libm::log(LEAST_WATTS), libm::log(MOST_WATTS));
        let enough = |point: &Equilibrium| runs(point) && point.load_volts >= wanted;
        let Some(mut weakest) = self.behind(high)?.filter(enough) else {
            return Ok(None);
        };
        let mut short_of = None;
        for _ in 0..HALVINGS {
            let middle = f64::midpoint(low, high);
            match self.behind(middle)? {
                Some(point) if enough(&point) => {
                    high = middle;
                    weakest = point;
                }
                other => {
                    low = middle;
                    short_of = other;
                }
            }
        }
        // Where it comes to run in another way at this very lamp, what counts is the point at which it does so.
        let edge = short_of.filter(|point| point.mode != weakest.mode).unwrap_or(weakest);
        Ok(Some((edge.amps, edge.bank_volts)))
    }

    /// Where healthy equipment settles behind an imagined lamp for the supply's volts.
    fn behind(&self, ln_watts: f64) -> Result<Option<Equilibrium>, SteadyError> {
        let lamp = Lamp::new(self.supply.volts(), libm::exp(ln_watts))?;
        self.settled(&Bank::single(lamp))
    }

    /// The rungs up to the bank `last`.
    fn climb(&self, banks: &[Candidate], ends: &[usize], wiring: &[u32], last: usize) -> Vec<Candidate> {
        let growth = self.limits.spec().growth;
        let first_amps = self.limits.first(self.supply, self.plate).amps;
        let mut rungs = alloc::vec![banks[last]];
        let mut wanted = wiring[last] - banks[last].wiring();
        for below in (0..ends.partition_point(|&end| end <= last)).rev() {
            let above = rungs[rungs.len() - 1];
            let start = if below == 0 { 0 } else { ends[below - 1] };
            #[expect(clippy::cast_precision_loss, reason = "a few rungs")]
            let even = libm::log(above.short_amps / first_amps) / (below + 1) as f64;
            let uneven = |bank: &Candidate| libm::fabs(libm::log(above.short_amps / bank.short_amps) - even);
            let chosen = (start..ends[below])
                .filter(|&index| wiring[index] == wanted && steps(growth, &banks[index], &above))
                .min_by(|&a, &b| uneven(&banks[a]).total_cmp(&uneven(&banks[b])));
            let Some(chosen) = chosen else { break };
            wanted -= banks[chosen].wiring();
            rungs.push(banks[chosen]);
        }
        rungs.reverse();
        rungs
    }
}

/// Whether equipment runs at a point: a converter that stays off, a motor that stands and a degauss thermistor that
/// starves the set beside it do not.
pub(super) const fn runs(point: &Equilibrium) -> bool {
    !point.mode.is_first()
}

/// Whether the current of one bank is no more than `growth` times that of the one below.
fn steps(growth: f64, below: &Candidate, above: &Candidate) -> bool {
    above.short_amps <= growth * below.short_amps * (1.0 + ACCURACY)
}

/// More rounds than the search for the closest bank needs: each moves the current less than the one before.
const MOST_ROUNDS: usize = 12;

/// Watts of the imagined lamps: from less than any equipment to more than any bank.
const LEAST_WATTS: f64 = 0.1;
const MOST_WATTS: f64 = 4900.0;

/// Halvings of their logarithm: to 1e-5, what the table resolves.
const HALVINGS: usize = 20;
