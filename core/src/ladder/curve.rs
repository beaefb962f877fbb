//! Amperes against volts of parallel groups, tabled once so that thousands of banks cost additions only.
//!
//! The table runs in the square root of the voltage, which spreads the first volts, where a filament warms up. Between
//! its nodes stands the cubic that has the curve's own values and slopes there (Hermite). Against the filament's own
//! equations it is off by less than [`ACCURACY`]; what a ladder reports is computed anew from those.

use alloc::vec::Vec;

use crate::filament::Filament;
use crate::roots::{self, Tolerance};

/// Greatest relative error of a tabled current (measured over lamps from 15 to 5000 W, see the test).
pub(super) const ACCURACY: f64 = 2e-5;

/// Intervals of the table.
const STEPS: usize = 128;

/// Amperes of a parallel group at volts from 0 to a greatest.
#[derive(Debug, Clone)]
pub(super) struct Curve {
    most_volts: f64,
    /// Amperes, and their growth over one step of the table, at every node.
    nodes: Vec<(f64, f64)>,
}

impl Curve {
    /// One filament, from 0 to `most_volts`.
    pub(super) fn of(filament: &Filament, most_volts: f64) -> Self {
        #[expect(clippy::cast_precision_loss, reason = "a node's number")]
        let node = |step: usize| {
            if step == 0 {
                return (0.0, 0.0);
            }
            let share = step as f64 / STEPS as f64;
            let point = filament.at_volts(most_volts * share * share);
            let amps = point.amps();
            // V = M u^2, so dI/du = 2 (I/u) dlnI/dlnV, over one step.
            (amps, 2.0 * amps * point.amps_slope() / point.volts_slope() / step as f64)
        };
        Self { most_volts, nodes: (0..=STEPS).map(node).collect() }
    }

    /// No lamp, up to `most_volts`.
    pub(super) fn empty(most_volts: f64) -> Self {
        Self { most_volts, nodes: alloc::vec![(0.0, 0.0); STEPS + 1] }
    }

    /// With another group in parallel, over the same range.
    pub(super) fn with(&self, other: &Self) -> Self {
        let sum = |(a, b): (&(f64, f64), &(f64, f64))| (a.0 + b.0, a.1 + b.1);
        Self { most_volts: self.most_volts, nodes: self.nodes.iter().zip(&other.nodes).map(sum).collect() }
    }

    /// The cubic of one interval at `t` from 0 to 1, and its slope.
    fn cubic(&self, interval: usize, t: f64) -> (f64, f64) {
        let ((a, slope_a), (b, slope_b)) = (self.nodes[interval], self.nodes[interval + 1]);
        let (square, bend) = (3.0 * (b - a) - 2.0 * slope_a - slope_b, slope_a + slope_b - 2.0 * (b - a));
        (a + t * (slope_a + t * (square + t * bend)), slope_a + t * (2.0 * square + t * 3.0 * bend))
    }

    /// Amperes at volts.
    pub(super) fn amps_at(&self, volts: f64) -> f64 {
        #[expect(clippy::cast_precision_loss, reason = "128")]
        let place = STEPS as f64 * libm::sqrt((volts / self.most_volts).clamp(0.0, 1.0));
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "from 0 to 128")]
        let interval = (place as usize).min(STEPS - 1);
        #[expect(clippy::cast_precision_loss, reason = "below 128")]
        let t = place - interval as f64;
        self.cubic(interval, t).0
    }

    /// Volts at amperes; the greatest where even that passes less.
    pub(super) fn volts_at(&self, amps: f64) -> f64 {
        let above = self.nodes.partition_point(|node| node.0 <= amps);
        if above > STEPS {
            return self.most_volts;
        }
        if above == 0 {
            return 0.0;
        }
        let interval = above - 1;
        let (a, b) = (self.nodes[interval].0, self.nodes[above].0);
        let share = (amps - a) / (b - a);
        // The first interval is nearly a parabola, the others nearly straight.
        let mut t = if interval == 0 { libm::sqrt(share) } else { share };
        for _ in 0..6 {
            let (value, slope) = self.cubic(interval, t);
            if slope <= 0.0 {
                break;
            }
            let step = (amps - value) / slope;
            t = (t + step).clamp(0.0, 1.0);
            if step.abs() < 1e-9 {
                break;
            }
        }
        #[expect(clippy::cast_precision_loss, reason = "at most 128")]
        let share = (interval as f64 + t) / STEPS as f64;
        self.most_volts * share * share
    }
}

/// Where a dead short leaves a chain of one or two groups.
#[derive(Debug, Clone, Copy)]
pub(super) struct Shorted {
    /// Volts across the first group.
    pub(super) first_volts: f64,
    /// Volts across the second, 0 without one.
    pub(super) second_volts: f64,
    /// Amperes.
    pub(super) amps: f64,
}

/// A chain of one group or two on `volts` behind a source of `ohms`.
pub(super) fn shorted(first: &Curve, second: Option<&Curve>, volts: f64, ohms: f64) -> Shorted {
    let left = |first_volts: f64, amps: f64| (volts - first_volts - ohms * amps).max(0.0);
    let at = |first_volts: f64| {
        let amps = first.amps_at(first_volts);
        let second_volts = if second.is_some() { left(first_volts, amps) } else { 0.0 };
        Shorted { first_volts, second_volts, amps }
    };
    if second.is_none() && ohms == 0.0 {
        return at(volts);
    }
    // What the second group would pass of what the first leaves it, over what the first passes: falling.
    let excess = |first_volts: f64| match second {
        Some(second) => {
            let amps = first.amps_at(first_volts);
            second.amps_at(left(first_volts, amps)) - amps
        }
        None => volts - first_volts - ohms * first.amps_at(first_volts),
    };
    let (start, end) = (excess(0.0), excess(volts));
    let tolerance = Tolerance { x: 1e-9 * volts, residual: 1e-9 * start.min(-end) };
    let found = roots::between(excess, (0.0, start), (volts, end), tolerance);
    at(found.map_or(volts, |root| root.x))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::bank::Bank;
    use crate::lamp::Lamp;

    #[test]
    fn the_table_is_as_close_as_it_says() {
        for (volts, watts) in [(230.0, 15.0), (230.0, 60.0), (230.0, 5000.0), (120.0, 100.0), (12.0, 21.0)] {
            let lamp = Lamp::new(volts, watts).expect("a lamp");
            let curve = Curve::of(lamp.filament(), 1.1 * volts);
            let mut worst: f64 = 0.0;
            for step in 1..=1000 {
                let here = 1.1 * volts * f64::from(step) / 1000.0;
                let amps = lamp.at_volts(here).amps;
                worst = worst.max((curve.amps_at(here) / amps - 1.0).abs());
                assert!((curve.volts_at(curve.amps_at(here)) / here - 1.0).abs() < 1e-6, "{here} V");
            }
            assert!(worst < ACCURACY, "{volts} V {watts} W: {worst:e}");
        }
    }

    #[test]
    fn a_shorted_chain_is_the_banks_own_point() {
        let lamps = [25.0, 60.0, 100.0].map(|watts| Lamp::new(230.0, watts).expect("a lamp"));
        let curves = [0, 1, 2].map(|kind| Curve::of(lamps[kind].filament(), 253.0));
        let pair = curves[0].with(&curves[2]);
        let bank =
            alloc::vec![alloc::vec![lamps[0].clone(), lamps[2].clone()], alloc::vec![lamps[1].clone()]];
        let own = Bank::new(bank).expect("three lamps").at_volts(230.0);
        let found = shorted(&pair, Some(&curves[1]), 230.0, 0.0);
        assert!((found.amps / own.amps - 1.0).abs() < ACCURACY);
        // 10 ohm of source take their part.
        let behind = shorted(&pair, Some(&curves[1]), 230.0, 10.0);
        let sum = behind.first_volts + behind.second_volts + 10.0 * behind.amps;
        assert!((sum - 230.0).abs() < 1e-6);
    }
}
