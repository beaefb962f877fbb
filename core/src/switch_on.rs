//! The first seconds after the switch closes, in the time domain.
//!
//! Every filament of the bank, and whatever in the load has a memory (reservoir, flux, current, speed, temperature), is
//! a variable of one system of differential equations, solved from cold with error control. Diodes and converters
//! switch at edges that are found inside a step, so that the system is smooth within each step.
//!
//! # Method
//! The explicit pair of J. R. Dormand and P. J. Prince, J. Comput. Appl. Math. 6 (1980) 19; where its steps are held back
//! by stability alone (a small reservoir straight on the mains, a blocked shaft), the linearly implicit RODAS of
//! E. Hairer and G. Wanner, Solving Ordinary Differential Equations II, 2nd ed. (Springer 1996), IV.10. Edges are roots
//! of the continuous extension, after T. R. Chandrupatla, Advances in Engineering Software 28 (1997) 145. Steps end at
//! every zero and crest of the supply, so that no crest is stepped over.
//!
//! # Accuracy
//! At the default tolerance temperatures agree with a far finer solution within 0.1 %, peak currents within 0.2 % and
//! RMS currents within 0.5 % of the peak; the energy of the lamps balances within 0.1 %. The model's own error is larger:
//! the thermal mass of a lamp follows from a coil factor that is known to some 10 %.
//!
//! # Simplifications
//! Filaments are lumped: no ends, no lag along the wire. Supplies have a resistance and no inductance. Where the class
//! defaults end (heat in valve cathodes and thermistors, saturation of a core, friction at standstill), the parts say
//! which design value they use.

mod body;
mod branch;
mod bridge;
mod build;
mod circuit;
mod core_flux;
mod explicit;
mod motor;
mod record;
mod rosenbrock;
mod run;
mod stepper;
mod thermistor;
mod worst;

use alloc::vec::Vec;
use core::fmt;

pub use run::{Progress, Run};

use serde::{Deserialize, Serialize};

use crate::bank::Bank;
use crate::error::{Field, InputError, within};
use crate::load::Load;
use crate::supply::Supply;

/// When in the mains cycle the switch closes.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Moment {
    /// At this angle after a rising zero of the voltage, degrees (-360 to 360): 90 is the crest.
    Degrees(f64),
    /// At the angle that gives the highest peak current.
    Worst,
}

/// What to simulate, and how finely to report it.
#[derive(Debug, Clone, PartialEq)]
pub struct Options {
    /// How long, seconds (0 to 300 s, and no more than 20,000 periods of the mains).
    pub seconds: f64,
    /// When the switch closes; of no effect on direct current.
    pub moment: Moment,
    /// Distance of the samples, seconds; 0 for half a period of the mains, or more where that would be over 2000
    /// samples.
    pub sample_seconds: f64,
    /// Further times at which to sample, rising, seconds.
    pub at: Vec<f64>,
    /// Flux left in a transformer's core, over the crest of its rated flux (-1 to 1).
    pub remanence: f64,
    /// Relative error allowed in one step (1e-10 to 1e-2).
    pub tolerance: f64,
}

impl Default for Options {
    fn default() -> Self {
        Self {
            seconds: 3.0,
            moment: Moment::Degrees(90.0),
            sample_seconds: 0.0,
            at: Vec::new(),
            remanence: 0.0,
            tolerance: 1e-4,
        }
    }
}

impl Options {
    /// Allowed durations, seconds.
    pub const SECONDS: (f64, f64) = (0.0, 300.0);
    /// Most periods of the mains in one run.
    pub const MOST_PERIODS: f64 = 20_000.0;

    fn check(&self, supply: &Supply) -> Result<(), InputError> {
        let most = if supply.is_direct() {
            Self::SECONDS.1
        } else {
            Self::SECONDS.1.min(Self::MOST_PERIODS / supply.hertz())
        };
        within(Field::Seconds, self.seconds, Self::SECONDS.0, most)?;
        within(Field::SampleSeconds, self.sample_seconds, 0.0, Self::SECONDS.1)?;
        let mut earliest = 0.0;
        for &at in &self.at {
            within(Field::SampleSeconds, at, earliest, self.seconds)?;
            earliest = at;
        }
        within(Field::Remanence, self.remanence, -1.0, 1.0)?;
        within(Field::Tolerance, self.tolerance, 1e-10, 1e-2)?;
        if let Moment::Degrees(degrees) = self.moment {
            within(Field::SwitchDegrees, degrees, -360.0, 360.0)?;
        }
        Ok(())
    }
}

/// The circuit at one time. RMS values are over the period of the mains that ends there, with nothing flowing before
/// the switch closed; on direct current they are the values themselves.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Sample {
    /// Time since the switch closed, seconds.
    pub seconds: f64,
    /// Temperature of every lamp, kelvin, group after group in the order of the bank.
    pub lamp_kelvin: Vec<f64>,
    /// Current, amperes RMS.
    pub amps_rms: f64,
    /// Volts RMS across the load.
    pub load_volts_rms: f64,
    /// Volts on the load's reservoir, where it has one.
    pub load_dc_volts: Option<f64>,
    /// Temperature of the lamp or heater in the load, where it has one, kelvin.
    pub load_kelvin: Option<f64>,
    /// Speed of a motor in the load over its rated or synchronous speed, where it has one.
    pub load_speed: Option<f64>,
}

/// Integral of the squared current from the start to a time.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Heating {
    /// Time since the switch closed, seconds.
    pub seconds: f64,
    /// Ampere squared seconds.
    pub amp2_seconds: f64,
}

/// Where the energy of all lamps of the bank went.
#[derive(Debug, Clone, Copy, Default, PartialEq, Serialize, Deserialize)]
pub struct Energy {
    /// Taken from the circuit, joule.
    pub into_lamps_joules: f64,
    /// Still in the filaments at the end, joule.
    pub stored_joules: f64,
    /// Radiated and conducted away, joule.
    pub lost_joules: f64,
}

/// The first seconds.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct SwitchOn {
    /// Angle at which the switch closed, degrees.
    pub switch_degrees: f64,
    /// Highest instantaneous current, amperes.
    pub peak_amps: f64,
    /// When it flowed, seconds.
    pub peak_seconds: f64,
    /// Integral of the squared current over the first 0.1 s.
    pub i2t_amp2_seconds: f64,
    /// When every lamp was within 1 % of its final rise and the current within 2 % of its final value, seconds; `None`
    /// where that was not before the last fifth of the run.
    pub settle_seconds: Option<f64>,
    /// Samples on the grid, the first at 0 s.
    pub samples: Vec<Sample>,
    /// Samples at [`Options::at`].
    pub asked: Vec<Sample>,
    /// The squared current's integral: at every step of the first 0.2 s, then at every sample.
    pub heating: Vec<Heating>,
    /// When a converter in the load started, seconds.
    pub starts: Vec<f64>,
    /// The lamps' energy.
    pub energy: Energy,
    /// Steps taken.
    pub steps: u32,
    /// Evaluations of the circuit's equations.
    pub evaluations: u64,
}

impl SwitchOn {
    /// Time between the last two starts of a converter, seconds, where it started at least three times.
    pub fn pulse_seconds(&self) -> Option<f64> {
        match self.starts.as_slice() {
            [_, .., before, last] => Some(last - before),
            _ => None,
        }
    }
}

/// Why there is no answer.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum SwitchOnError {
    /// A number that has no meaning here.
    Input(InputError),
    /// A filament passes 3600 K, where tungsten is about to melt.
    FilamentMelts {
        /// Which group of the bank.
        group: usize,
        /// Which lamp of the group.
        lamp: usize,
        /// When, seconds.
        seconds: f64,
    },
    /// The solver met more changes than it may take steps for.
    TooManySteps {
        /// How far it came, seconds.
        seconds: f64,
    },
}

impl From<InputError> for SwitchOnError {
    fn from(error: InputError) -> Self {
        Self::Input(error)
    }
}

impl fmt::Display for SwitchOnError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Input(error) => error.fmt(f),
            Self::FilamentMelts { group, lamp, seconds } => {
                let (group, lamp) = (group + 1, lamp + 1);
                write!(
                    f,
                    "lamp {lamp} of group {group} would burn out after {seconds:.3} s: its filament passes 3600 K"
                )
            }
            Self::TooManySteps { seconds } => {
                write!(f, "this circuit changes too fast to follow beyond {seconds:.6} s")
            }
        }
    }
}

impl core::error::Error for SwitchOnError {}

/// The first seconds of a load behind a bank.
///
/// # Errors
/// An option out of range; a load that has no meaning on this supply; a lamp that would burn out; a circuit that
/// changes too fast to follow.
///
/// ```
/// use lampladder_core::{bank::Bank, lamp::Lamp, load::Load, supply::Supply};
/// use lampladder_core::switch_on::{Options, simulate};
/// let supply = Supply::new(230.0, 50.0, 0.0)?;
/// let bank = Bank::single(Lamp::new(230.0, 100.0)?);
/// let shorted = simulate(&supply, &bank, &Load::Short, &Options::default())?;
/// assert!(shorted.peak_amps > 5.0 && shorted.samples.last().is_some_and(|end| end.amps_rms < 0.5));
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn simulate(
    supply: &Supply,
    bank: &Bank,
    load: &Load,
    options: &Options,
) -> Result<SwitchOn, SwitchOnError> {
    Run::new(supply, Some(bank), load, options)?.complete()
}

/// The first seconds of the same load straight on the mains: what the lamp saves it from.
///
/// A supply without resistance of its own is given [`MAINS_OHMS`], or nothing would limit the current.
///
/// # Errors
/// As [`simulate`].
pub fn straight(supply: &Supply, load: &Load, options: &Options) -> Result<SwitchOn, SwitchOnError> {
    Run::new(supply, None, load, options)?.complete()
}

/// Resistance of a mains outlet where none is given, ohms: the resistive part of the reference impedance of
/// IEC 60725 for a single-phase outlet (0.4 + j0.25 ohm at 50 Hz, from memory).
pub const MAINS_OHMS: f64 = 0.4;

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;
    use crate::lamp::Lamp;
    use crate::load::{Draw, Impedance, Rectifier, RectifierSpec};
    use crate::plate::Plate;
    use alloc::vec;

    fn mains() -> Supply {
        Supply::new(230.0, 50.0, 0.0).expect("in range")
    }

    fn lamp(watts: f64) -> Lamp {
        Lamp::new(230.0, watts).expect("a stock size")
    }

    fn bridge(farads: f64, draw: Draw) -> Load {
        let spec = RectifierSpec { farads, series_ohms: 1.0, diode_volts: 1.4, draw, shunt_ohms: None };
        Load::Rectifier(Rectifier::new(spec).expect("in range"))
    }

    #[test]
    fn slices_of_any_size_give_the_same_bits() {
        let bank = Bank::single(lamp(60.0));
        let load = bridge(100e-6, Draw::Ohms(1300.0));
        let options = Options { seconds: 0.2, moment: Moment::Worst, ..Options::default() };
        let whole = simulate(&mains(), &bank, &load, &options).expect("runs");
        let mut run = Run::new(&mains(), Some(&bank), &load, &options).expect("runs");
        while run.advance(7).expect("runs") != Progress::Done {}
        assert_eq!(run.finish(), whole);
    }

    #[test]
    fn a_second_of_nothing_is_an_answer() {
        let options = Options { seconds: 0.0, ..Options::default() };
        let run = simulate(&mains(), &Bank::single(lamp(60.0)), &Load::Short, &options).expect("an answer");
        assert_eq!(run.samples.len(), 1);
        assert_eq!(run.settle_seconds, None);
    }

    #[test]
    fn options_out_of_range_are_refused() {
        let bank = Bank::single(lamp(60.0));
        let refused = |options: Options| match simulate(&mains(), &bank, &Load::Short, &options) {
            Err(SwitchOnError::Input(error)) => error.field(),
            Err(other) => panic!("{other}"),
            Ok(_) => panic!("it ran"),
        };
        let usual = Options::default;
        assert_eq!(refused(Options { seconds: 1e9, ..usual() }), Field::Seconds);
        assert_eq!(refused(Options { seconds: f64::NAN, ..usual() }), Field::Seconds);
        assert_eq!(refused(Options { seconds: -1.0, ..usual() }), Field::Seconds);
        assert_eq!(refused(Options { at: vec![0.2, 0.1], ..usual() }), Field::SampleSeconds);
        assert_eq!(refused(Options { at: vec![3.5], ..usual() }), Field::SampleSeconds);
        assert_eq!(refused(Options { moment: Moment::Degrees(1e3), ..usual() }), Field::SwitchDegrees);
        assert_eq!(refused(Options { remanence: 2.0, ..usual() }), Field::Remanence);
        assert_eq!(refused(Options { tolerance: 0.0, ..usual() }), Field::Tolerance);
        let direct = Supply::new(230.0, 0.0, 0.0).expect("in range");
        let coil = Load::Impedance(Impedance::new(10.0, 10.0).expect("in range"));
        assert!(matches!(simulate(&direct, &bank, &coil, &usual()), Err(SwitchOnError::Input(_))));
    }

    #[test]
    fn an_overdriven_lamp_burns_out_at_a_time() {
        let bank = Bank::new(vec![vec![lamp(60.0)], vec![Lamp::new(24.0, 2.0).expect("in range")]]);
        let run = simulate(&mains(), &bank.expect("two lamps"), &Load::Short, &Options::default());
        match run {
            Err(SwitchOnError::FilamentMelts { group: 1, lamp: 0, seconds }) => {
                assert!(seconds > 0.0 && seconds < 1.0, "{seconds}");
            }
            Err(other) => panic!("{other}"),
            Ok(_) => panic!("it held"),
        }
    }

    #[test]
    fn alike_lamps_share_one_variable_and_mixed_ones_do_not() {
        let options = Options { seconds: 0.3, ..Options::default() };
        let kelvins = |groups| {
            let bank = Bank::new(groups).expect("lamps");
            let run = simulate(&mains(), &bank, &Load::Short, &options).expect("runs");
            run.samples.last().expect("an end").lamp_kelvin.clone()
        };
        let pair = kelvins(vec![vec![lamp(60.0), lamp(60.0)], vec![lamp(60.0), lamp(60.0)]]);
        assert!(pair.iter().all(|kelvin| kelvin.to_bits() == pair[0].to_bits()));
        let single = kelvins(vec![vec![lamp(60.0)], vec![lamp(60.0)]]);
        // The same equations in another order of rounding.
        assert!((single[0] - pair[0]).abs() < 1e-6);
        let mixed = kelvins(vec![vec![lamp(60.0), lamp(25.0)], vec![lamp(100.0)]]);
        assert!(mixed[0] > mixed[2] && mixed[1] != mixed[0], "{mixed:?}");
    }

    #[test]
    fn extremes_end_in_time() {
        let bank = Bank::single(lamp(60.0));
        let giant = Bank::single(lamp(5000.0));
        let converter =
            Draw::Watts { watts: 40.0, start_volts: 100.0, stop_volts: 100.0, restart_seconds: 0.0 };
        for farads in [1e-9, 1e-6, 1.0] {
            for draw in [Draw::Ohms(1e-3), Draw::Ohms(1300.0), Draw::Ohms(1e9), Draw::Amps(0.1), converter] {
                for hertz in [0.0, 10.0, 1000.0] {
                    let supply = Supply::new(230.0, hertz, 0.0).expect("in range");
                    let options = Options { seconds: 0.3, ..Options::default() };
                    let load = bridge(farads, draw);
                    for run in [
                        simulate(&supply, &bank, &load, &options),
                        simulate(&supply, &giant, &load, &options),
                        straight(&supply, &load, &options),
                    ] {
                        // A converter whose reservoir holds microseconds of its draw chatters, and is refused.
                        let chatters = draw == converter && farads < 1e-5;
                        let run = match run {
                            Err(SwitchOnError::TooManySteps { .. }) if chatters => continue,
                            run => run.unwrap_or_else(|error| panic!("{farads} {draw:?} {hertz}: {error}")),
                        };
                        // A step takes a microsecond: none of these may need a second of work for a second.
                        assert!(run.steps < 200_000, "{farads} {draw:?} {hertz}: {} steps", run.steps);
                        assert!(run.samples.iter().all(|sample| sample.amps_rms.is_finite()));
                    }
                }
            }
        }
    }

    #[test]
    fn every_family_in_every_condition_runs_behind_a_lamp_and_straight() {
        let bank = Bank::single(lamp(100.0));
        let options = Options { seconds: 1.0, ..Options::default() };
        for family in Family::ALL {
            let plate = Plate::new(family, 230.0, 60.0, None).expect("a plate");
            for &condition in family.conditions() {
                let load = plate.load(condition, 1.0).expect("a load");
                let name = (family.name(), condition.name());
                let behind = simulate(&mains(), &bank, &load, &options);
                let behind = behind.unwrap_or_else(|error| panic!("{name:?}: {error}"));
                let bare = straight(&mains(), &load, &options);
                let bare = bare.unwrap_or_else(|error| panic!("{name:?}: {error}"));
                assert!(behind.peak_amps <= bare.peak_amps * 1.001, "{name:?}: the lamp made it worse");
                let Energy { into_lamps_joules, stored_joules, lost_joules } = behind.energy;
                let balance = stored_joules + lost_joules - into_lamps_joules;
                // A thousandth, as promised.
                assert!(balance.abs() <= 1e-3 * into_lamps_joules, "{name:?}: {:?}", behind.energy);
            }
        }
    }
}
