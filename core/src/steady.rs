//! Every steady operating point of supply, bank and load, and whether it holds.
//!
//! The search runs in one variable, the temperature of the bank's first filament: at each temperature the bank
//! has one current and one resistance, and the load says whether it wants more or less than that. Loads whose
//! wanted current falls as the bank heats cross once; a constant power can cross twice or never, so its whole
//! range is sampled and every dip that comes close to zero is followed down.

use alloc::vec::Vec;
use core::fmt;

use crate::bank::{Bank, BankPoint};
use crate::error::{Field, InputError};
use crate::filament::Filament;
use crate::hunt;
use crate::lamp::LampState;
use crate::load::{Draw, Feed, Load};
use crate::roots::{self, Root, Sample, Tolerance};
use crate::supply::Supply;
use crate::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN};

/// One steady operating point. Volts and amperes are RMS, or DC.
#[derive(Debug, Clone, PartialEq)]
pub struct Equilibrium {
    /// Whether a small disturbance dies away.
    pub stable: bool,
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
    /// Evaluations of the bank's curve that it took.
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
    /// The stable point that a circuit reaches from its lowest current, if it settles.
    pub fn settled(&self) -> Option<&Equilibrium> {
        self.equilibria.iter().find(|point| point.stable)
    }
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
const SAMPLES: u32 = 40;

/// Finds every steady point.
///
/// Accuracy: the current at each point agrees with what the load wants to 1e-11. A bank of one lamp with a load
/// that has one point takes about eight evaluations of the lamp's curve.
///
/// # Errors
/// A load that has no meaning on this supply; a lamp that would burn out.
pub fn solve(supply: &Supply, bank: &Bank, load: &Load) -> Result<Steady, SteadyError> {
    load.check(supply)?;
    let circuit = Circuit { supply, bank, load };
    if matches!(load, Load::Open) {
        let point = circuit.open_point();
        return Ok(Steady { outcome: Outcome::Settles, equilibria: alloc::vec![point] });
    }
    if let Load::Rectifier(rectifier) = load
        && let Draw::Watts { start_volts, .. } = rectifier.spec().draw
        && rectifier.open_volts(supply.volts(), supply.hertz()) < start_volts
    {
        let mut point = circuit.open_point();
        point.load_dc_volts = Some(rectifier.open_volts(supply.volts(), supply.hertz()));
        return Ok(Steady { outcome: Outcome::DoesNotStart, equilibria: alloc::vec![point] });
    }
    let roots = if load.may_have_several() { circuit.all_roots()? } else { alloc::vec![circuit.one_root()?] };
    let mut equilibria = Vec::with_capacity(roots.len());
    for root in roots {
        equilibria.push(circuit.point_at(root)?);
    }
    equilibria.retain(|point| circuit.keeps_running(point));
    let outcome = if equilibria.iter().any(|point| point.stable) {
        Outcome::Settles
    } else {
        Outcome::Hunts {
            period_seconds: hunt::period_seconds(supply, bank, load).unwrap_or(hunt::LONGEST_SECONDS),
        }
    };
    Ok(Steady { outcome, equilibria })
}

struct Circuit<'a> {
    supply: &'a Supply,
    bank: &'a Bank,
    load: &'a Load,
}

impl Circuit<'_> {
    fn feed(&self, bank: &BankPoint) -> Feed {
        Feed {
            volts: self.supply.volts(),
            hertz: self.supply.hertz(),
            ohms: bank.ohms() + self.supply.ohms(),
            amps: bank.amps,
        }
    }

    fn excess(&self, ln_rise: f64) -> f64 {
        self.load.excess(&self.feed(&self.bank.at_ln_rise(ln_rise)))
    }

    fn one_root(&self) -> Result<Root, SteadyError> {
        let guess = self.bank.guess_ln_rise(0.5 * self.supply.volts());
        roots::decreasing_from(|x| self.excess(x), Filament::ln_rise_span(), guess, Tolerance::FINE)
            .ok_or_else(|| self.melts(Filament::ln_rise_span().1))
    }

    /// Every root from next to no current up to what a dead short would take.
    fn all_roots(&self) -> Result<Vec<Root>, SteadyError> {
        let hottest = Circuit { load: &Load::Short, ..*self }.one_root()?;
        // Twenty e-folds of temperature rise are nine decades of power: below, no constant power lives.
        let low = hottest.x - 20.0;
        let width = 20.0 / f64::from(SAMPLES);
        let mut samples: Vec<Sample> = (0..=SAMPLES)
            .map(|step| {
                let x = low + width * f64::from(step);
                (x, self.excess(x))
            })
            .collect();
        let mut evaluations = hottest.evaluations + SAMPLES + 1;
        // Two crossings can hide between samples: follow every dip that stays above zero, and every hump below.
        let mut index = 1;
        while index + 1 < samples.len() {
            let (left, here, right) = (samples[index - 1], samples[index], samples[index + 1]);
            let sign = here.1.signum();
            let dips = here.1 * sign <= left.1 * sign && here.1 * sign <= right.1 * sign;
            if dips && left.1 * sign > 0.0 && right.1 * sign > 0.0 {
                let (lowest, cost) =
                    lowest(|x| sign * self.excess(x), left.0, (here.0, sign * here.1), right.0);
                evaluations += cost;
                let found = (lowest.0, sign * lowest.1);
                if found.1 * sign < 0.0 {
                    let after = usize::from(found.0 > here.0);
                    samples.insert(index + after, found);
                    index += 1;
                }
            }
            index += 1;
        }
        let mut found = Vec::new();
        for pair in samples.windows(2) {
            if let Some(root) = crossing(|x| self.excess(x), pair[0], pair[1]) {
                evaluations += root.evaluations - 2;
                found.push(root);
            }
        }
        for root in &mut found {
            root.evaluations = evaluations;
        }
        Ok(found)
    }

    /// Which lamp ends the search at the top of the span.
    fn melts(&self, ln_rise: f64) -> SteadyError {
        let states = self.bank.lamps_at_amps(self.bank.at_ln_rise(ln_rise).amps);
        melting(&states).unwrap_or(SteadyError::FilamentMelts { group: 0, lamp: 0 })
    }

    fn point_at(&self, root: Root) -> Result<Equilibrium, SteadyError> {
        let bank = self.bank.at_ln_rise(root.x);
        let lamps = self.bank.lamps_at_amps(bank.amps);
        if let Some(error) = melting(&lamps) {
            return Err(error);
        }
        let feed = self.feed(&bank);
        let terminal = self.load.terminal(&feed);
        let apparent = terminal.volts * bank.amps;
        Ok(Equilibrium {
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
        const NUDGE: f64 = 1e-6;
        let here = self.load.excess(feed);
        let more = Feed { amps: feed.amps * (1.0 + NUDGE), ..*feed };
        let fast = self.load.excess(&more) < here;
        let slow = self.excess(ln_rise + NUDGE) < self.excess(ln_rise - NUDGE);
        fast && slow
    }

    /// A point below the voltage at which a converter stops is none.
    fn keeps_running(&self, point: &Equilibrium) -> bool {
        match self.load {
            Load::Rectifier(rectifier) => match rectifier.spec().draw {
                Draw::Watts { stop_volts, .. } => {
                    point.load_dc_volts.is_some_and(|volts| volts >= stop_volts)
                }
                _ => true,
            },
            _ => true,
        }
    }

    fn open_point(&self) -> Equilibrium {
        let cold = LampState { volts: 0.0, amps: 0.0, watts: 0.0, kelvin: AMBIENT_KELVIN };
        Equilibrium {
            stable: true,
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

fn crossing(f: impl FnMut(f64) -> f64, start: Sample, end: Sample) -> Option<Root> {
    if start.1 == 0.0 {
        return Some(Root { x: start.0, residual: 0.0, evaluations: 2 });
    }
    // An end that is exactly zero belongs to the next interval.
    if end.1 == 0.0 { None } else { roots::between(f, start, end, Tolerance::FINE) }
}

/// The lowest sample that golden-section search finds in a valley, stopping as soon as it is below zero, and how
/// many evaluations it took.
fn lowest(mut f: impl FnMut(f64) -> f64, mut left: f64, mut here: Sample, mut right: f64) -> (Sample, u32) {
    /// Part of the wider side to step into: 2 minus the golden ratio.
    const GOLDEN: f64 = 0.381_966_011_250_105_1;
    let mut evaluations = 0;
    while here.1 >= 0.0 && right - left > 1e-7 && evaluations < 60 {
        let to_right = right - here.0 > here.0 - left;
        let x = here.0 + if to_right { GOLDEN * (right - here.0) } else { -GOLDEN * (here.0 - left) };
        let probe = (x, f(x));
        evaluations += 1;
        if probe.1 < here.1 {
            if to_right {
                left = here.0;
            } else {
                right = here.0;
            }
            here = probe;
        } else if to_right {
            right = x;
        } else {
            left = x;
        }
    }
    (here, evaluations)
}

/// The first property of a request that [`solve`] would refuse, for callers that check before they show.
pub fn refused_field(error: &SteadyError) -> Field {
    match error {
        SteadyError::Input(error) => error.field(),
        SteadyError::FilamentMelts { .. } => Field::Volts,
    }
}
