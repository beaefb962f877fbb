//! What lamp and meter should show in each condition of the equipment, with 95 % bands.

use alloc::vec::Vec;

use crate::band::{Band, COVERAGE, Spread};
use crate::condition::Condition;
use crate::glow::Glow;
use crate::lamp::{Lamp, LampState};
use crate::setup::Setup;
use crate::steady::{self, Equilibrium, Outcome, SteadyError};

/// The prospect for one condition.
#[derive(Debug, Clone, PartialEq)]
pub struct Prospect {
    /// The condition that was assumed.
    pub condition: Condition,
    /// What the circuit does in the end.
    pub outcome: Outcome,
    /// Every steady point, in order of rising current, without bands.
    pub equilibria: Vec<Equilibrium>,
    /// What shows at the point it settles at; `None` where it does not settle.
    pub shown: Option<Shown>,
}

/// What lamp and meter show, with bands.
#[derive(Debug, Clone, PartialEq)]
pub struct Shown {
    /// Amperes in the loop, RMS or DC.
    pub amps: Band,
    /// Volts across the bank.
    pub bank_volts: Band,
    /// Volts across the equipment.
    pub load_volts: Band,
    /// Real power into the equipment, watts.
    pub load_watts: Band,
    /// Every lamp, in the order of the bank.
    pub lamps: Vec<Vec<LampShown>>,
}

/// One lamp as it would look.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LampShown {
    /// Its operating point.
    pub state: LampState,
    /// Filament temperature, kelvin.
    pub kelvin: Band,
    /// The glow at the best estimate.
    pub glow: Glow,
    /// The glow at the dim end of the band.
    pub dimmest: Glow,
    /// The glow at the bright end of the band.
    pub brightest: Glow,
    /// Life over the life at rated voltage, least and greatest; see [`life_ratio`].
    pub life: (f64, f64),
}

/// Exponents of lamp life against voltage, from -16 to -12.
///
/// D. G. Fink, H. W. Beaty, Standard Handbook for Electrical Engineers, 11th ed. (1978), p. 22-8 (read second hand).
pub const LIFE_EXPONENTS: (f64, f64) = (-16.0, -12.0);

/// Range of lamp life over rated life at a share of the rated voltage.
///
/// The published range of exponents holds near the rating; far below, a lamp's life is set by its handling, so the
/// ratio is capped at a thousand.
pub fn life_ratio(share_of_rated_volts: f64) -> (f64, f64) {
    let at = |exponent| libm::pow(share_of_rated_volts.max(1e-3), exponent).min(1000.0);
    let (a, b) = (at(LIFE_EXPONENTS.0), at(LIFE_EXPONENTS.1));
    (a.min(b), a.max(b))
}

/// What `setup` would show in `condition`.
///
/// The band is 95 % and holds the spread of the lamps (all lamps of the bank taken to differ the same way, which is
/// the worse case), the disagreement between the published tables of tungsten, and the spread of what healthy
/// equipment takes. The supply voltage is taken as entered.
///
/// # Errors
/// As [`steady::solve`].
pub fn prospect(setup: &Setup, condition: Condition) -> Result<Prospect, SteadyError> {
    let Setup { supply, bank, plate } = setup;
    let load = plate.load(condition, 1.0)?;
    let solved = steady::solve(supply, bank, &load)?;
    let Some(best) = solved.settled().cloned() else {
        return Ok(Prospect {
            condition,
            outcome: solved.outcome,
            equilibria: solved.equilibria,
            shown: None,
        });
    };
    let settled = |points: &[Equilibrium]| steady::settled(points).cloned();
    let mut spreads = Spreads::around(&best);
    let lamp_ends: Vec<Option<Equilibrium>> = (0..Lamp::VARIANTS)
        .map(|index| settled(&steady::equilibria(supply, &bank.variant(index), &load).ok()?))
        .collect();
    for pair in lamp_ends[..6].chunks(2) {
        spreads.cause(COVERAGE, [pair[0].as_ref(), pair[1].as_ref()]);
    }
    for other_table in &lamp_ends[6..] {
        // The truth may lie on either side of our table as far as the other one does.
        spreads.mirrored(other_table.as_ref());
    }
    let (least, most) = plate.family().healthy_shares();
    let drawing = |share| -> Option<Equilibrium> {
        settled(&steady::equilibria(supply, bank, &plate.load(condition, share).ok()?).ok()?)
    };
    let load_ends = [drawing(least), drawing(most)];
    spreads.cause(1.0, [load_ends[0].as_ref(), load_ends[1].as_ref()]);
    let shown = spreads.shown(setup, &best);
    Ok(Prospect { condition, outcome: solved.outcome, equilibria: solved.equilibria, shown: Some(shown) })
}

/// The spreads of everything that is shown, moved together.
struct Spreads<'a> {
    best: &'a Equilibrium,
    amps: Spread,
    bank_volts: Spread,
    load_volts: Spread,
    load_watts: Spread,
    kelvins: Vec<Spread>,
}

impl<'a> Spreads<'a> {
    fn around(best: &'a Equilibrium) -> Self {
        Self {
            best,
            amps: Spread::around(best.amps),
            bank_volts: Spread::around(best.bank_volts),
            load_volts: Spread::around(best.load_volts),
            load_watts: Spread::around(best.load_watts),
            kelvins: best.lamps.iter().flatten().map(|lamp| Spread::around(lamp.kelvin)).collect(),
        }
    }

    /// An end that has no steady point says nothing and is passed over.
    fn cause(&mut self, factor: f64, ends: [Option<&Equilibrium>; 2]) {
        let [a, b] = ends.map(|end| end.unwrap_or(self.best));
        self.amps.cause(factor, [a.amps, b.amps]);
        self.bank_volts.cause(factor, [a.bank_volts, b.bank_volts]);
        self.load_volts.cause(factor, [a.load_volts, b.load_volts]);
        self.load_watts.cause(factor, [a.load_watts, b.load_watts]);
        let lamps = a.lamps.iter().flatten().zip(b.lamps.iter().flatten());
        for (spread, (a, b)) in self.kelvins.iter_mut().zip(lamps) {
            spread.cause(factor, [a.kelvin, b.kelvin]);
        }
    }

    fn mirrored(&mut self, end: Option<&Equilibrium>) {
        let Some(end) = end else { return };
        let mirror = |value: f64, moved: f64| [moved, 2.0 * value - moved];
        let best = self.best;
        self.amps.cause(1.0, mirror(best.amps, end.amps));
        self.bank_volts.cause(1.0, mirror(best.bank_volts, end.bank_volts));
        self.load_volts.cause(1.0, mirror(best.load_volts, end.load_volts));
        self.load_watts.cause(1.0, mirror(best.load_watts, end.load_watts));
        let lamps = best.lamps.iter().flatten().zip(end.lamps.iter().flatten());
        for (spread, (best, end)) in self.kelvins.iter_mut().zip(lamps) {
            spread.cause(1.0, mirror(best.kelvin, end.kelvin));
        }
    }

    fn shown(&self, setup: &Setup, best: &Equilibrium) -> Shown {
        let most_volts = setup.supply.volts();
        let positive = |spread: &Spread, most: f64| {
            let band = spread.band();
            Band { low: band.low.max(0.0), high: band.high.min(most), ..band }
        };
        let mut kelvins = self.kelvins.iter();
        let lamps = setup.bank.groups().iter().zip(&best.lamps).map(|(group, states)| {
            let shown = group.iter().zip(states).zip(kelvins.by_ref()).map(|((lamp, state), spread)| {
                let band = spread.band();
                let kelvin = Band { low: band.low.max(crate::tungsten::AMBIENT_KELVIN), ..band };
                LampShown {
                    state: *state,
                    kelvin,
                    glow: lamp.glow(state.kelvin),
                    dimmest: lamp.glow(kelvin.low),
                    brightest: lamp.glow(kelvin.high),
                    life: life_ratio(state.volts / lamp.rated_volts()),
                }
            });
            shown.collect()
        });
        let lamps = lamps.collect();
        Shown {
            amps: positive(&self.amps, f64::MAX),
            bank_volts: positive(&self.bank_volts, most_volts),
            load_volts: positive(&self.load_volts, f64::MAX),
            load_watts: positive(&self.load_watts, f64::MAX),
            lamps,
        }
    }
}

/// A lamp's 95 % band of current at a voltage, amperes.
pub fn lamp_amps(lamp: &Lamp, volts: f64) -> Band {
    let mut spread = Spread::around(lamp.at_volts(volts).amps);
    let ends: [f64; Lamp::VARIANTS] = core::array::from_fn(|index| lamp.variant(index).at_volts(volts).amps);
    for pair in ends[..6].chunks(2) {
        spread.cause(COVERAGE, [pair[0], pair[1]]);
    }
    for &other_table in &ends[6..] {
        spread.cause(1.0, [other_table, 2.0 * spread.band().value - other_table]);
    }
    let band = spread.band();
    Band { low: band.low.max(0.0), ..band }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bands_hold_their_value_and_order_the_conditions() {
        let setup = Setup::example().expect("in range");
        let shown: Vec<Shown> = [Condition::Healthy, Condition::Overloaded, Condition::Shorted]
            .into_iter()
            .map(|condition| prospect(&setup, condition).expect("solvable").shown.expect("settles"))
            .collect();
        for pair in shown.windows(2) {
            assert!(pair[0].amps.value < pair[1].amps.value);
            assert!(pair[0].lamps[0][0].state.kelvin < pair[1].lamps[0][0].state.kelvin);
        }
        for one in &shown {
            assert!(one.amps.low < one.amps.value && one.amps.value < one.amps.high);
        }
        assert!((shown[2].bank_volts.value - 230.0).abs() < 1e-6);
    }

    #[test]
    fn life_at_the_rating_is_the_rating() {
        assert_eq!(life_ratio(1.0), (1.0, 1.0));
        let (least, most) = life_ratio(1.05);
        // 5 % over: life falls to 46 to 56 % by the published exponents.
        assert!((0.45..0.47).contains(&least) && (0.55..0.57).contains(&most), "{least} {most}");
    }
}
