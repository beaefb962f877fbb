//! The point at which the circuit settles, to a few parts in ten thousand and nothing else: for the thousands of
//! circuits that a diagnosis compares.

use super::turning::LEAST_SLIP;
use super::{Circuit, SteadyError};
use crate::bank::{Bank, Walk};
use crate::filament::Filament;
use crate::load::{InductionMotor, Load, Mode, Near, Terminal};
use crate::roots::{self, Tolerance};
use crate::supply::Supply;

/// Far below what any meter tells apart.
const COARSE: Tolerance = Tolerance { x: 1e-5, residual: 1e-4 };

/// Steps over the range of a load that may have several points.
const STEPS: u32 = 14;

/// Where the circuit settles, without its lamps.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Sketch {
    pub(crate) mode: Mode,
    pub(crate) amps: f64,
    pub(crate) bank_volts: f64,
    pub(crate) hottest_kelvin: f64,
    pub(crate) load_volts: f64,
    pub(crate) load_watts: f64,
    pub(crate) load_dc_volts: Option<f64>,
}

/// What becomes of the circuit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) enum Sketched {
    Settles(Sketch),
    /// It starts, stops and starts again.
    Hunts,
    /// It is on and never starts.
    DoesNotStart(Sketch),
}

/// Where a similar circuit settled: the next search begins there.
#[derive(Debug, Clone)]
pub(crate) struct Warm {
    near: Near,
    ln_rise: Option<f64>,
    ln_slip: Option<f64>,
}

impl Default for Warm {
    fn default() -> Self {
        Self { near: Near::coarse(), ln_rise: None, ln_slip: None }
    }
}

/// The point at which equipment that was off settles, as [`super::Steady::settled`] finds it, but coarsely.
///
/// # Errors
/// As [`super::solve`].
pub(crate) fn sketch(
    supply: &Supply,
    bank: &Bank,
    load: &Load,
    warm: &mut Warm,
) -> Result<Sketched, SteadyError> {
    load.check(supply)?;
    let near = warm.near.clone();
    let found =
        found(&Circuit { supply, bank, walk: &Walk::new(bank), near: &near, load, mode: Mode::Only }, warm);
    warm.near = near;
    found
}

fn found(circuit: &Circuit<'_>, warm: &mut Warm) -> Result<Sketched, SteadyError> {
    match circuit.load {
        Load::InductionMotor(motor) => {
            let standing = motor.frozen(1.0);
            let point = Circuit { load: &standing, mode: Mode::Standing, ..*circuit }.coarse_point(warm)?;
            if motor.stays_standing(point.amps) {
                return Ok(Sketched::Settles(point));
            }
            Ok(Sketched::Settles(turning(circuit, motor, warm)?.unwrap_or(point)))
        }
        Load::Degauss(degauss) => {
            let cold = Load::Impedance(*degauss.cold());
            let point = Circuit { load: &cold, mode: Mode::DegaussCold, ..*circuit }.coarse_point(warm)?;
            if degauss.stays_cold(point.amps) {
                return Ok(Sketched::Settles(point));
            }
            let load = Load::Rectifier(*degauss.warm());
            Circuit { load: &load, mode: Mode::DegaussWarm, ..*circuit }.sketched(warm)
        }
        _ => circuit.sketched(warm),
    }
}

/// The running point of least slip.
fn turning(
    circuit: &Circuit<'_>,
    motor: &InductionMotor,
    warm: &mut Warm,
) -> Result<Option<Sketch>, SteadyError> {
    let at = |ln_slip: f64, warm: &mut Warm| {
        let load = motor.frozen(libm::exp(ln_slip));
        Circuit { load: &load, mode: Mode::Turning, ..*circuit }.coarse_point(warm)
    };
    let span = (libm::log(LEAST_SLIP), 0.0);
    let mut inner = warm.clone();
    let mut slowing = |ln_slip: f64| {
        at(ln_slip, &mut inner).map_or(f64::NAN, |point| motor.slowing(libm::exp(ln_slip), point.amps))
    };
    let found = match warm.ln_slip {
        Some(guess) => roots::decreasing_from(&mut slowing, span, guess, COARSE),
        None => None,
    };
    let found = found.or_else(|| first_falling(&mut slowing, (-8.0, 0.0)));
    let Some(root) = found else { return Ok(None) };
    warm.ln_slip = Some(root.x);
    at(root.x, &mut inner).map(Some)
}

/// The first root at which a function turns from positive to negative, in even steps.
fn first_falling(mut f: impl FnMut(f64) -> f64, (low, high): (f64, f64)) -> Option<roots::Root> {
    let width = (high - low) / f64::from(STEPS);
    let mut before = (low, f(low));
    for step in 1..=STEPS {
        let x = low + width * f64::from(step);
        let here = (x, f(x));
        if before.1 > 0.0 && here.1 <= 0.0 {
            return roots::between(f, before, here, COARSE);
        }
        before = here;
    }
    None
}

impl Circuit<'_> {
    fn sketched(&self, warm: &mut Warm) -> Result<Sketched, SteadyError> {
        if matches!(self.load, Load::Open) {
            return Ok(Sketched::Settles(self.sketch_open(None)));
        }
        if let Some(thresholds) = self.load.thresholds()
            && self.open_dc_volts() < thresholds.start_volts
        {
            return Ok(Sketched::DoesNotStart(self.sketch_open(Some(self.open_dc_volts()))));
        }
        if !self.load.may_have_several() {
            return self.coarse_point(warm).map(Sketched::Settles);
        }
        let Some(pair) = self.hungry_points(COARSE)? else { return Ok(Sketched::Hunts) };
        let point = self.sketch_at(pair.rising.x);
        let crest = if self.supply.is_direct() { 1.0 } else { core::f64::consts::SQRT_2 };
        let dc_volts = point.load_dc_volts.unwrap_or(crest * point.load_volts);
        let runs = self.load.thresholds().is_none_or(|thresholds| dc_volts >= thresholds.stop_volts);
        Ok(if runs { Sketched::Settles(point) } else { Sketched::Hunts })
    }

    fn coarse_point(&self, warm: &mut Warm) -> Result<Sketch, SteadyError> {
        let guess = warm.ln_rise.unwrap_or_else(|| self.bank.guess_ln_rise(0.5 * self.supply.volts()));
        let root = if self.load.linear().is_some() {
            self.one_root_from(guess, COARSE)?
        } else {
            let span = Filament::ln_rise_span();
            roots::decreasing_from(|x| self.excess(x), span, guess, COARSE)
                .ok_or_else(|| self.melts(span.1))?
        };
        warm.ln_rise = Some(root.x);
        Ok(self.sketch_at(root.x))
    }

    fn sketch_at(&self, ln_rise: f64) -> Sketch {
        let bank = self.walk.to(ln_rise);
        let Terminal { volts, watts, dc_volts } = self.load.terminal(&self.feed(&bank), self.near);
        Sketch {
            mode: self.mode,
            amps: bank.amps,
            bank_volts: bank.volts,
            hottest_kelvin: bank.hottest_kelvin,
            load_volts: volts,
            load_watts: watts,
            load_dc_volts: dc_volts,
        }
    }

    fn sketch_open(&self, load_dc_volts: Option<f64>) -> Sketch {
        Sketch {
            mode: if load_dc_volts.is_some() { Mode::Off } else { self.mode },
            amps: 0.0,
            bank_volts: 0.0,
            hottest_kelvin: crate::tungsten::AMBIENT_KELVIN,
            load_volts: self.supply.volts(),
            load_watts: 0.0,
            load_dc_volts,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;
    use crate::lamp::Lamp;
    use crate::plate::Plate;
    use crate::steady::{Outcome, solve};

    /// Ten times what the search leaves over: watts go with up to the third power of the bank's temperature.
    const CLOSE: f64 = 3e-3;

    #[test]
    fn a_sketch_is_where_the_full_solution_settles() {
        let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
        for family in Family::ALL {
            let plate = Plate::new(family, 230.0, 60.0, None).expect("a common plate");
            for lamp in [40.0, 100.0] {
                let bank = Bank::single(Lamp::new(230.0, lamp).expect("a stock size"));
                for &condition in family.conditions() {
                    let load = plate.load(condition, 0.9).expect("in range");
                    let what = (family, condition, lamp);
                    let full = solve(&supply, &bank, &load).expect("solvable");
                    let quick = sketch(&supply, &bank, &load, &mut Warm::default()).expect("solvable");
                    match (full.outcome, quick) {
                        (Outcome::Settles, Sketched::Settles(point)) => {
                            let best = full.settled().expect("it settles");
                            for (ours, theirs) in [
                                (point.amps, best.amps),
                                (point.bank_volts, best.bank_volts),
                                (point.load_volts, best.load_volts),
                            ] {
                                // Of the shorted ones next to nothing is left, at which they agree absolutely.
                                let off = (ours - theirs).abs() / theirs.abs().max(0.1);
                                assert!(off < CLOSE, "{what:?}: {ours} {theirs}");
                            }
                            assert_eq!(point.mode, best.mode, "{what:?}");
                        }
                        (Outcome::Hunts, Sketched::Hunts)
                        | (Outcome::DoesNotStart, Sketched::DoesNotStart(_)) => {}
                        (full, quick) => panic!("{what:?}: {full:?} {quick:?}"),
                    }
                }
            }
        }
    }
}
