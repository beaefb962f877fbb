//! Points of the two curves whose crossing is an equilibrium, for drawing them.

use alloc::vec::Vec;

use crate::band::{Band, COVERAGE, Spread};
use crate::bank::Bank;
use crate::lamp::Lamp;
use crate::load::{Feed, Load};
use crate::supply::Supply;

/// A bank's 95 % band of current at a voltage across the whole chain, amperes.
///
/// As in [`crate::expect::prospect`], all lamps are taken to differ the same way.
pub fn bank_amps(bank: &Bank, volts: f64) -> Band {
    let value = bank.at_volts(volts).amps;
    let mut spread = Spread::around(value);
    let ends: [f64; Lamp::VARIANTS] =
        core::array::from_fn(|index| bank.variant(index).at_volts(volts).amps);
    for pair in ends[..6].chunks(2) {
        spread.cause(COVERAGE, [pair[0], pair[1]]);
    }
    for &other_table in &ends[6..] {
        spread.cause(1.0, [other_table, 2.0 * value - other_table]);
    }
    let band = spread.band();
    Band { low: band.low.max(0.0), ..band }
}

/// What a load leaves to the bank, as (bank volts, amperes), in order of rising bank volts.
///
/// A plain resistance stands in for the bank and is swept over six decades around the bank's own; since a hot
/// filament is a resistor within the cycle, this curve meets the bank's own curve exactly at the equilibria. It
/// holds for loads whose current depends on the feeding voltage and resistance alone, which is all but a rectifier
/// with a constant-power draw.
pub fn load_line(supply: &Supply, bank: &Bank, load: &Load, points: u16) -> Vec<(f64, f64)> {
    /// Half the width of the sweep: the logarithm of a thousand.
    const SPAN: f64 = 6.907_755_278_982_137;
    let middle = bank.at_volts(supply.volts()).ohms();
    let last = f64::from(points.max(2) - 1);
    let along = (0..points).map(|step| {
        let ohms = middle * libm::exp(SPAN * (2.0 * f64::from(step) / last - 1.0));
        let total = ohms + supply.ohms();
        let amps = supply.volts() / total;
        let feed = Feed { volts: supply.volts(), hertz: supply.hertz(), ohms: total, amps };
        let amps = amps * libm::exp(load.excess(&feed));
        (ohms * amps, amps)
    });
    along.collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::plate::Condition;
    use crate::setup::Setup;
    use crate::steady;

    #[test]
    fn the_two_curves_cross_at_the_equilibrium() {
        let Setup { supply, bank, plate } = Setup::example().expect("in range");
        let load = plate.load(Condition::Healthy, 1.0).expect("a radio");
        let line = load_line(&supply, &bank, &load, 400);
        let excess = |&(volts, amps): &(f64, f64)| amps - bank.at_volts(volts).amps;
        let crossing: Vec<_> =
            line.windows(2).filter(|pair| excess(&pair[0]) > 0.0 && excess(&pair[1]) <= 0.0).collect();
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
