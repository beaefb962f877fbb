//! Every steady operating point of supply, bank and load, and whether it holds.
//!
//! The search runs in one variable, the temperature of the bank's first filament: at each temperature the bank
//! has one current and one resistance, and the load says whether it wants more or less than that. Loads whose
//! wanted current falls as the bank heats cross once; a constant power crosses twice or never, either side of one
//! hump; a turning motor is searched in its slip.

mod hungry;
mod sketch;
mod turning;

use alloc::vec::Vec;
use core::fmt;

pub(crate) use sketch::{Sketch, Sketched, Warm, sketch};

use serde::{Deserialize, Serialize};

use crate::bank::{Bank, BankPoint, Step, Walk};
use crate::error::InputError;
use crate::filament::Filament;
use crate::lamp::LampState;
use crate::load::{Feed, Load, Mode, Near};
use crate::roots::{self, Root, Tolerance};
use crate::supply::Supply;
use crate::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN};

/// One steady operating point. Volts and amperes are RMS, or DC.
#[derive(Debug, Clone, PartialEq)]
pub struct Equilibrium {
    /// Whether a small disturbance dies away.
    pub stable: bool,
    /// In which of several ways the load works here.
    pub mode: Mode,
    /// Current in the loop, amperes.
    pub amps: f64,
    /// Volts across the bank.
    pub bank_volts: f64,
    /// Volts across the load.
    pub load_volts: f64,
    /// Real power into the load, watts.
    pub load_watts: f64,
    /// Power factor of the load; 1 where no current flows.
    pub load_power_factor: f64,
    /// DC volts on the load's reservoir, where it has one.
    pub load_dc_volts: Option<f64>,
    /// Every lamp, in the order of the bank.
    pub lamps: Vec<Vec<LampState>>,
    /// Logarithm of wanted over actual current: what the search left over.
    pub residual: f64,
    /// Evaluations of the bank's curve that the search took; the states of the lamps are one more.
    pub evaluations: u32,
}

/// What the circuit does in the end.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum Outcome {
    /// It comes to rest at a stable point.
    Settles,
    /// The load starts, pulls its own input down, stops and starts again; [`crate::hunt::pulse`] says how.
    Hunts,
    /// The load's input never reaches the voltage at which it starts.
    DoesNotStart,
}

/// All steady points, in order of rising current, and the outcome.
#[derive(Debug, Clone, PartialEq)]
pub struct Steady {
    /// What the circuit does in the end.
    pub outcome: Outcome,
    /// Every steady point, stable or not.
    pub equilibria: Vec<Equilibrium>,
}

impl Steady {
    /// The stable point that equipment which was off comes to, if it settles: the mode in which it begins where that
    /// lasts, else the lowest current.
    pub fn settled(&self) -> Option<&Equilibrium> {
        settled(&self.equilibria)
    }
}

/// [`Steady::settled`] of points in order of rising current.
pub(crate) fn settled(equilibria: &[Equilibrium]) -> Option<&Equilibrium> {
    let mut stable = equilibria.iter().filter(|point| point.stable);
    stable.clone().find(|point| point.mode.is_first()).or_else(|| stable.next())
}

/// Why there is no answer.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum SteadyError {
    /// A number that has no meaning here.
    Input(InputError),
    /// A filament would pass 3600 K, where tungsten is about to melt.
    FilamentMelts {
        /// Which group of the bank.
        group: usize,
        /// Which lamp of the group.
        lamp: usize,
    },
}

impl From<InputError> for SteadyError {
    fn from(error: InputError) -> Self {
        Self::Input(error)
    }
}

impl fmt::Display for SteadyError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Input(error) => error.fmt(f),
            Self::FilamentMelts { group, lamp } => {
                write!(
                    f,
                    "lamp {} of group {} would burn out: its filament passes 3600 K",
                    lamp + 1,
                    group + 1
                )
            }
        }
    }
}

impl core::error::Error for SteadyError {}

/// More Newton steps than crossing the whole span of temperature by clamped ones takes.
const MOST_STEPS: u32 = 60;

/// Finds every steady point.
///
/// Accuracy: the current at each point agrees with what the load wants to 1e-10. A bank of one lamp with a load
/// that has one point takes about eight evaluations of the lamp's curve.
///
/// # Errors
/// A load that has no meaning on this supply; a lamp that would burn out.
pub fn solve(supply: &Supply, bank: &Bank, load: &Load) -> Result<Steady, SteadyError> {
    let equilibria = equilibria(supply, bank, load)?;
    let outcome = if equilibria.iter().any(|point| point.stable && point.mode != Mode::Off) {
        Outcome::Settles
    } else if equilibria.iter().any(|point| point.mode == Mode::Off) {
        Outcome::DoesNotStart
    } else {
        Outcome::Hunts
    };
    Ok(Steady { outcome, equilibria })
}

/// The points of [`solve`], in order of rising current, without the outcome: where there is none, the period of the
/// hunting costs far more than the points, and a search over banks has no use for it.
///
/// # Errors
/// As [`solve`].
pub fn equilibria(supply: &Supply, bank: &Bank, load: &Load) -> Result<Vec<Equilibrium>, SteadyError> {
    load.check(supply)?;
    let mut equilibria = Vec::new();
    let walk = Walk::new(bank);
    for (mode, load) in load.modes() {
        let circuit = Circuit { supply, bank, walk: &walk, near: &Near::fine(), load: &load, mode };
        for point in circuit.points()? {
            // In order as they come: a handful, for which the library's sorting is 4 KB of the page.
            let place = equilibria.partition_point(|known: &Equilibrium| known.amps < point.amps);
            equilibria.insert(place, point);
        }
    }
    equilibria.retain(|point| load.lasts(point.mode, point.amps));
    Ok(equilibria)
}

struct Circuit<'a> {
    supply: &'a Supply,
    bank: &'a Bank,
    walk: &'a Walk<'a>,
    near: &'a Near,
    load: &'a Load,
    mode: Mode,
}

impl Circuit<'_> {
    /// Every steady point of this mode.
    fn points(&self) -> Result<Vec<Equilibrium>, SteadyError> {
        if matches!(self.load, Load::Open) {
            return Ok(alloc::vec![self.open_point()]);
        }
        if let Some(thresholds) = self.load.thresholds()
            && self.open_dc_volts() < thresholds.start_volts
        {
            let off = Equilibrium {
                mode: Mode::Off,
                load_dc_volts: Some(self.open_dc_volts()),
                ..self.open_point()
            };
            return Ok(alloc::vec![off]);
        }
        if let Load::InductionMotor(motor) = self.load {
            return self.turning_points(motor);
        }
        if !self.load.may_have_several() {
            return Ok(alloc::vec![self.point_at(self.one_root()?)?]);
        }
        let Some(pair) = self.hungry_points(Tolerance::FINE)? else { return Ok(Vec::new()) };
        let mut points = alloc::vec![self.point_at(pair.rising)?, self.point_at(pair.falling)?];
        // A hotter bank leaves less on the falling side, so that it heats the more. On the rising side it returns, and so
        // does the reservoir where, at a frozen bank, more current brings more.
        points[1].stable = false;
        points.retain(|point| self.keeps_running(point));
        Ok(points)
    }

    /// DC volts to which an idle reservoir charges.
    fn open_dc_volts(&self) -> f64 {
        let (volts, hertz) = (self.supply.volts(), self.supply.hertz());
        match self.load {
            Load::Rectifier(rectifier) => rectifier.open_volts(volts, hertz),
            _ if hertz == 0.0 => volts,
            _ => core::f64::consts::SQRT_2 * volts,
        }
    }

    fn feed(&self, bank: &BankPoint) -> Feed {
        Feed {
            volts: self.supply.volts(),
            hertz: self.supply.hertz(),
            ohms: bank.ohms() + self.supply.ohms(),
            amps: bank.amps,
        }
    }

    fn excess(&self, ln_rise: f64) -> f64 {
        self.load.excess(&self.feed(&self.walk.to(ln_rise)), self.near)
    }

    fn one_root(&self) -> Result<Root, SteadyError> {
        self.one_root_from(self.bank.guess_ln_rise(0.5 * self.supply.volts()), Tolerance::FINE)
    }

    fn one_root_from(&self, guess: f64, tolerance: Tolerance) -> Result<Root, SteadyError> {
        if let Some(impedance) = self.load.linear() {
            return self.linear_root(impedance, guess, tolerance);
        }
        roots::decreasing_from(|x| self.excess(x), Filament::ln_rise_span(), guess, tolerance)
            .ok_or_else(|| self.melts(Filament::ln_rise_span().1))
    }

    /// Newton's method before a linear load: with the bank's own slopes at hand, three or four evaluations. In these
    /// logarithms the curve is nearly straight, so that a clamped step cannot run away.
    fn linear_root(
        &self,
        impedance: (f64, f64),
        guess: f64,
        tolerance: Tolerance,
    ) -> Result<Root, SteadyError> {
        let (low, high) = Filament::ln_rise_span();
        let mut x = guess.clamp(low, high);
        for evaluations in 1..=MOST_STEPS {
            let (residual, step) = self.linear_step(impedance, &self.walk.step_to(x));
            let next = (x + step).clamp(low, high);
            if residual.abs() <= tolerance.residual || (next - x).abs() <= tolerance.x && next < high {
                return Ok(Root { x, residual, evaluations });
            }
            if next == x {
                break;
            }
            x = next;
        }
        Err(self.melts(high))
    }

    /// Logarithm of the current that a linear load would take over that of the bank, and Newton's step from here.
    fn linear_step(&self, (ohms, reactance): (f64, f64), step: &Step) -> (f64, f64) {
        let bank_ohms = step.point.ohms();
        let in_phase = bank_ohms + self.supply.ohms() + ohms;
        let square = in_phase * in_phase + reactance * reactance;
        let residual = libm::log(self.supply.volts() / (step.point.amps * libm::sqrt(square)));
        let slope = step.amps_slope + in_phase * bank_ohms * (step.volts_slope - step.amps_slope) / square;
        (residual, (residual / slope).clamp(-3.0, 3.0))
    }

    /// Which lamp ends the search at the top of the span.
    fn melts(&self, ln_rise: f64) -> SteadyError {
        self.walk.to(ln_rise);
        melting(&self.walk.lamps()).unwrap_or(SteadyError::FilamentMelts { group: 0, lamp: 0 })
    }

    fn point_at(&self, root: Root) -> Result<Equilibrium, SteadyError> {
        let bank = self.walk.to(root.x);
        let lamps = self.walk.lamps();
        if let Some(error) = melting(&lamps) {
            return Err(error);
        }
        let feed = self.feed(&bank);
        let terminal = self.load.terminal(&feed, self.near);
        let apparent = terminal.volts * bank.amps;
        Ok(Equilibrium {
            mode: self.mode,
            stable: !self.load.may_have_several() || self.load.served(&feed).by_amps > 0.0,
            amps: bank.amps,
            bank_volts: bank.volts,
            load_volts: terminal.volts,
            load_watts: terminal.watts,
            load_power_factor: if apparent > 0.0 { (terminal.watts / apparent).min(1.0) } else { 1.0 },
            load_dc_volts: terminal.dc_volts,
            lamps,
            residual: root.residual,
            evaluations: root.evaluations,
        })
    }

    /// A point below the voltage at which a converter stops is none.
    fn keeps_running(&self, point: &Equilibrium) -> bool {
        let crest = if self.supply.is_direct() { 1.0 } else { core::f64::consts::SQRT_2 };
        let dc_volts = point.load_dc_volts.unwrap_or(crest * point.load_volts);
        self.load.thresholds().is_none_or(|thresholds| dc_volts >= thresholds.stop_volts)
    }

    fn open_point(&self) -> Equilibrium {
        let cold = LampState { volts: 0.0, amps: 0.0, watts: 0.0, kelvin: AMBIENT_KELVIN };
        Equilibrium {
            stable: true,
            mode: self.mode,
            amps: 0.0,
            bank_volts: 0.0,
            load_volts: self.supply.volts(),
            load_watts: 0.0,
            load_power_factor: 1.0,
            load_dc_volts: None,
            lamps: self.bank.groups().iter().map(|group| group.iter().map(|_| cold).collect()).collect(),
            residual: 0.0,
            evaluations: 0,
        }
    }
}

/// The first lamp that stands at the end of the curve.
fn melting(states: &[Vec<LampState>]) -> Option<SteadyError> {
    states.iter().enumerate().find_map(|(group, lamps)| {
        let lamp = lamps.iter().position(|state| state.kelvin > HIGHEST_KELVIN - 1e-6)?;
        Some(SteadyError::FilamentMelts { group, lamp })
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::lamp::Lamp;
    use crate::load::Impedance;

    #[test]
    fn one_lamp_before_a_resistor_takes_at_most_twelve_evaluations() {
        let supply = Supply::new(230.0, 50.0, 0.0).expect("the mains");
        for watts in [15.0, 60.0, 200.0] {
            let bank = Bank::single(Lamp::new(230.0, watts).expect("a stock size"));
            for ohms in [0.1, 1.0, 30.0, 529.0, 3000.0, 1e5, 1e7] {
                let load = Load::Impedance(Impedance::new(ohms, 0.0).expect("in range"));
                let solved = solve(&supply, &bank, &load).expect("solvable");
                let [point] = solved.equilibria.as_slice() else { panic!("one point") };
                assert!(point.evaluations <= 12, "{watts} W, {ohms} ohm: {}", point.evaluations);
                let left_over = point.bank_volts + point.load_volts - 230.0;
                assert!(left_over.abs() < 1e-9 * 230.0, "{watts} W, {ohms} ohm: {left_over} V");
            }
        }
    }
}
