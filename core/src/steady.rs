//! Every steady operating point of supply, bank and load, and whether it holds.
//!
//! The search runs in one variable, the temperature of the bank's first filament: at each temperature the bank
//! has one current and one resistance, and the load says whether it wants more or less than that. Loads whose
//! wanted current falls as the bank heats cross once; a constant power can cross twice or never, so its whole
//! range is sampled and every dip that comes close to zero is followed down.

mod sketch;

use alloc::vec::Vec;
use core::fmt;

pub(crate) use sketch::{Sketch, Sketched, Warm, sketch};

use crate::bank::{Bank, BankPoint, Walk};
use crate::complex::Complex;
use crate::error::InputError;
use crate::filament::Filament;
use crate::hunt;
use crate::lamp::LampState;
use crate::load::{Feed, InductionMotor, Load, Mode};
use crate::roots::{self, Root, Tolerance};
use crate::scan;
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
    /// The load starts, pulls its own input down, stops and starts again.
    Hunts {
        /// Time from one start to the next, seconds.
        period_seconds: f64,
    },
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
#[derive(Debug, Clone, Copy, PartialEq)]
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

/// Samples over the range of a load that may have several points.
const SAMPLES: u32 = 10;

/// Relative step of a numerical slope.
const NUDGE: f64 = 1e-6;

/// How closely the bank is settled for each slip that a motor is tried at: the slip found is as good, and at it the
/// bank is settled again, finely.
const SETTLED: Tolerance = Tolerance { x: 1e-10, residual: 1e-8 };

/// More Newton steps than crossing the whole span of temperature by clamped ones takes.
const MOST_STEPS: u32 = 60;

/// Least slip of a motor that is looked at.
const LEAST_SLIP: f64 = 1e-6;

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
        Outcome::Hunts {
            period_seconds: hunt::period_seconds(supply, bank, load).unwrap_or(hunt::LONGEST_SECONDS),
        }
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
        let circuit = Circuit { supply, bank, walk: &walk, load: &load, mode };
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
        let mut points = Vec::new();
        for scan::Crossing { x, residual, evaluations, .. } in self.all_roots()? {
            points.push(self.point_at(Root { x, residual, evaluations })?);
        }
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
        self.load.excess(&self.feed(&self.walk.to(ln_rise)))
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
        (ohms, reactance): (f64, f64),
        guess: f64,
        tolerance: Tolerance,
    ) -> Result<Root, SteadyError> {
        let (low, high) = Filament::ln_rise_span();
        let mut x = guess.clamp(low, high);
        for evaluations in 1..=MOST_STEPS {
            let step = self.walk.step_to(x);
            let bank_ohms = step.point.ohms();
            let in_phase = bank_ohms + self.supply.ohms() + ohms;
            let square = in_phase * in_phase + reactance * reactance;
            let residual = libm::log(self.supply.volts() / (step.point.amps * libm::sqrt(square)));
            let slope =
                step.amps_slope + in_phase * bank_ohms * (step.volts_slope - step.amps_slope) / square;
            let next = (x + (residual / slope).clamp(-3.0, 3.0)).clamp(low, high);
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

    /// Every root from the least possible current up to what a dead short would take.
    fn all_roots(&self) -> Result<Vec<scan::Crossing>, SteadyError> {
        let hottest = Circuit { load: &Load::Short, ..*self }.one_root()?;
        // No power comes from less current than if all of it stood at the supply's voltage.
        let least_amps = 0.99 * self.load.least_watts() / self.supply.volts();
        let low = self.bank.ln_rise_at_amps(least_amps).min(hottest.x - 1.0);
        Ok(scan::all(|x| self.excess(x), (low, hottest.x), SAMPLES))
    }

    /// Every steady point of a turning motor. At one bank temperature two slips can take the same current, so this
    /// search runs in the slip, with the bank settled for each.
    fn turning_points(&self, motor: &InductionMotor) -> Result<Vec<Equilibrium>, SteadyError> {
        let mut guess = self.bank.guess_ln_rise(0.5 * self.supply.volts());
        let mut settle = |slip: f64| {
            let circuit = Circuit { load: &motor.frozen(slip), ..*self };
            let root = circuit.one_root_from(guess, SETTLED);
            if let Ok(root) = root {
                guess = root.x;
            }
            root
        };
        let slowing = |ln_slip: f64| {
            let slip = libm::exp(ln_slip);
            settle(slip).map_or(f64::NAN, |root| motor.slowing(slip, self.walk.to(root.x).amps))
        };
        let roots = scan::all(slowing, (libm::log(LEAST_SLIP), 0.0), SAMPLES);
        let mut points = Vec::new();
        for root in roots {
            let slip = libm::exp(root.x);
            let load = motor.frozen(slip);
            let circuit = Circuit { load: &load, ..*self };
            let settled = circuit.one_root()?;
            let point = circuit.point_at(Root { evaluations: root.evaluations, ..settled })?;
            // At a frozen bank a faster shaft must find less torque to spare, and so it must with a settled one.
            let ohms = point.bank_volts / point.amps + self.supply.ohms();
            let frozen = |slip: f64| {
                let total = motor.impedance(slip) + Complex::new(ohms, 0.0);
                motor.slowing(slip, self.supply.volts() / total.magnitude())
            };
            let fast = frozen(slip * (1.0 + NUDGE)) < frozen(slip * (1.0 - NUDGE));
            points.push(Equilibrium { stable: fast && root.falling, ..point });
        }
        Ok(points)
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
        let terminal = self.load.terminal(&feed);
        let apparent = terminal.volts * bank.amps;
        Ok(Equilibrium {
            mode: self.mode,
            stable: !self.load.may_have_several() || self.is_stable(root.x, &feed),
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

    /// Stable where the fast state returns (at a frozen bank, more current lowers what the load wants) and the
    /// slow one does (a hotter bank leaves the load wanting less than the bank needs to stay hot).
    fn is_stable(&self, ln_rise: f64, feed: &Feed) -> bool {
        let here = self.load.excess(feed);
        let more = Feed { amps: feed.amps * (1.0 + NUDGE), ..*feed };
        let fast = self.load.excess(&more) < here;
        let slow = self.excess(ln_rise + NUDGE) < self.excess(ln_rise - NUDGE);
        fast && slow
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
