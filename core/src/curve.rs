//! Points of the two curves whose crossing is an equilibrium, for drawing them.

use alloc::vec::Vec;

use crate::band::{Band, COVERAGE, Spread};
use crate::bank::Bank;
use crate::lamp::Lamp;
use crate::load::{Load, Mode};
use crate::steady::{self, SteadyError};
use crate::supply::Supply;

/// A bank's 95 % band of current at a voltage across the whole chain, amperes.
///
/// As in [`crate::expect::prospect`], all lamps are taken to differ the same way.
pub fn bank_amps(bank: &Bank, volts: f64) -> Band {
    let value = bank.at_volts(volts).amps;
    let mut spread = Spread::around(value);
    let ends: [f64; Lamp::VARIANTS] = core::array::from_fn(|index| bank.variant(index).at_volts(volts).amps);
    for pair in ends[..6].chunks(2) {
        spread.cause(COVERAGE, [pair[0], pair[1]]);
    }
    for &other_table in &ends[6..] {
        spread.cause(1.0, [other_table, 2.0 * value - other_table]);
    }
    let band = spread.band();
    Band { low: band.low.max(0.0), ..band }
}

/// One branch of what a load leaves to the bank.
#[derive(Debug, Clone, PartialEq)]
pub struct LoadLine {
    /// In which of its ways the load works along it.
    pub mode: Mode,
    /// Bank volts and amperes, in order of rising bank volts.
    pub points: Vec<(f64, f64)>,
}

/// What a load leaves to the bank: where it would stand with other lamps.
///
/// `points` lamps of the supply's voltage stand in for the bank in turn, in even ratios from a thousandth of its size
/// to a thousand times it. Since a hot filament is a resistor within the cycle, all equilibria lie on the same lines
/// whatever the lamp, so these lines meet the bank's own curve exactly at its equilibria.
///
/// # Errors
/// A load that has no meaning on this supply.
pub fn load_lines(
    supply: &Supply,
    bank: &Bank,
    load: &Load,
    points: u16,
) -> Result<Vec<LoadLine>, SteadyError> {
    /// Half the width of the sweep: the logarithm of a thousand.
    const SPAN: f64 = 6.907_755_278_982_137;
    load.check(supply)?;
    let middle = supply.volts() * bank.at_volts(supply.volts()).amps;
    let last = f64::from(points.max(2) - 1);
    let mut lines: Vec<LoadLine> = Vec::new();
    for step in 0..points {
        let watts = middle * libm::exp(SPAN * (2.0 * f64::from(step) / last - 1.0));
        let Ok(lamp) = Lamp::new(supply.volts(), watts) else { continue };
        // A stand-in that finds no steady point adds nothing to the line.
        let Ok(solved) = steady::solve(supply, &Bank::single(lamp), load) else { continue };
        for point in solved.equilibria {
            let at = (point.bank_volts, point.amps);
            match lines.iter_mut().find(|line| line.mode == point.mode) {
                Some(line) => {
                    // In order as they come, which costs the page less than sorting.
                    let place = line.points.partition_point(|known| known.0 < at.0);
                    line.points.insert(place, at);
                }
                None => lines.push(LoadLine { mode: point.mode, points: alloc::vec![at] }),
            }
        }
    }
    Ok(lines)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::condition::Condition;
    use crate::setup::Setup;

    #[test]
    fn the_two_curves_cross_at_the_equilibrium() {
        let Setup { supply, bank, plate } = Setup::example().expect("in range");
        let load = plate.load(Condition::Healthy, 1.0).expect("a radio");
        let lines = load_lines(&supply, &bank, &load, 100).expect("alternating current");
        assert_eq!(lines.len(), 1);
        let excess = |&(volts, amps): &(f64, f64)| amps - bank.at_volts(volts).amps;
        let crossing: Vec<_> = lines[0]
            .points
            .windows(2)
            .filter(|pair| excess(&pair[0]) > 0.0 && excess(&pair[1]) <= 0.0)
            .collect();
        let solved = steady::solve(&supply, &bank, &load).expect("solvable");
        let point = solved.settled().expect("settles");
        assert_eq!(crossing.len(), 1);
        assert!((crossing[0][0].0..=crossing[0][1].0).contains(&point.bank_volts));
    }

    #[test]
    fn a_bank_of_one_has_the_band_of_its_lamp() {
        let lamp = Lamp::new(230.0, 60.0).expect("a stock size");
        let band = bank_amps(&Bank::single(lamp.clone()), 80.0);
        let own = crate::expect::lamp_amps(&lamp, 80.0);
        assert!((band.low / own.low - 1.0).abs() < 1e-6 && (band.high / own.high - 1.0).abs() < 1e-6);
    }
}
