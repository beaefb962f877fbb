//! How a lamp pulses in front of a switch-mode supply that starts, pulls its own input down, stops and starts again.
//!
//! By the time domain itself ([`crate::switch_on`]), from cold until pulses no longer change. Close to the
//! point at which a supply would just keep running, any average over the mains cycle is off by whole seconds: there the
//! reservoir sinks ever more slowly, and the ripple decides.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use crate::bank::Bank;
use crate::load::Load;
use crate::supply::Supply;
use crate::switch_on::{Moment, Options, Progress, Run, Sample};

/// How long a search may go on: simulated seconds, and steps, some 20 ms of computing.
const LONGEST_SECONDS: f64 = 20.0;
const MOST_STEPS: u32 = 20_000;

/// Steps between two looks at the record.
const SLICE: u32 = 200;

/// Pulses this close, relatively, are alike.
const ALIKE: f64 = 0.02;

/// Short pulses hardly differ from the one before while the filament still warms: a pulse must be like the one so many
/// seconds earlier, too.
const SETTLING_SECONDS: f64 = 1.0;

/// Pulses that beat with the mains are never alike: then the mean of so many is taken.
const MANY: usize = 8;

/// Relative error allowed in one step: a period needs no more.
const TOLERANCE: f64 = 1e-3;

/// How a lamp pulses in front of a supply that hunts.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Pulse {
    /// Time from one start to the next, seconds.
    pub period_seconds: f64,
    /// Highest temperature of every lamp within it, kelvin, group after group in the order of the bank.
    pub brightest_kelvin: Vec<f64>,
    /// Lowest temperature of every lamp within it, kelvin.
    pub dimmest_kelvin: Vec<f64>,
}

impl Pulse {
    /// What the record of a run shows between two times.
    fn between(samples: &[Sample], from: f64, to: f64, period_seconds: f64) -> Self {
        // Pulses within a mains cycle fall between two samples: a filament hardly follows them, so a few more will do.
        let spacing = samples.get(1).map_or(0.0, |second| second.seconds);
        let from = from.min(to - 4.0 * spacing);
        let within = |sample: &&Sample| (from..=to).contains(&sample.seconds);
        let lamps = samples.first().map_or(0, |sample| sample.lamp_kelvin.len());
        let kelvins = |lamp: usize| samples.iter().filter(within).map(move |sample| sample.lamp_kelvin[lamp]);
        Self {
            period_seconds,
            brightest_kelvin: (0..lamps).map(|lamp| kelvins(lamp).fold(0.0, f64::max)).collect(),
            dimmest_kelvin: (0..lamps).map(|lamp| kelvins(lamp).fold(f64::MAX, f64::min)).collect(),
        }
    }
}

/// How the lamps pulse in front of a load whose [`crate::steady::Outcome`] is that it hunts; `None` where no period is
/// seen in 20 s, or ripple keeps it running although the average would not. Some milliseconds of computing, against the
/// microseconds of the outcome itself.
pub fn pulse(supply: &Supply, bank: &Bank, load: &Load) -> Option<Pulse> {
    // A degauss thermistor takes tens of seconds to get warm behind a lamp, and little changes once it is.
    let warm = match load {
        Load::Degauss(degauss) => &Load::Rectifier(*degauss.warm()),
        other => other,
    };
    let options = Options {
        seconds: LONGEST_SECONDS,
        moment: Moment::Degrees(0.0),
        tolerance: TOLERANCE,
        ..Options::default()
    };
    let mut run = Run::new(supply, Some(bank), warm, &options).ok()?;
    for _ in 0..MOST_STEPS / SLICE {
        let progress = run.advance(SLICE).ok()?;
        let starts = run.starts();
        if let [.., first, second, third] = *starts {
            let (before, last) = (second - first, third - second);
            let alike = |other: f64| libm::fabs(last / other - 1.0) < ALIKE;
            let earlier = starts.windows(2).rev().find(|pair| pair[1] <= third - SETTLING_SECONDS);
            if alike(before) && earlier.is_some_and(|pair| alike(pair[1] - pair[0])) {
                return Some(Pulse::between(run.samples(), second, third, 0.5 * (before + last)));
            }
        }
        if let Some(from) = starts.len().checked_sub(MANY + 1).filter(|from| starts[*from] > SETTLING_SECONDS)
        {
            let (first, last) = (starts[from], starts[from + MANY]);
            #[expect(clippy::cast_precision_loss, reason = "eight")]
            let mean = (last - first) / MANY as f64;
            return Some(Pulse::between(run.samples(), first, last, mean));
        }
        if progress == Progress::Done {
            break;
        }
    }
    None
}
