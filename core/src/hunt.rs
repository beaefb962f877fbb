//! How fast a switch-mode supply pulses that starts, pulls its own input down, stops and starts again.
//!
//! By the time domain itself ([`crate::switch_on`]), from cold until two pulses in a row take the same time. Close to the
//! point at which a supply would just keep running, any average over the mains cycle is off by whole seconds: there the
//! reservoir sinks ever more slowly, and the ripple decides.

use crate::bank::Bank;
use crate::load::Load;
use crate::supply::Supply;
use crate::switch_on::{Moment, Options, Progress, Run};

/// How long a search may go on: simulated seconds, and steps, some 20 ms of computing.
const LONGEST_SECONDS: f64 = 20.0;
const MOST_STEPS: u32 = 20_000;

/// Steps between two looks at the record.
const SLICE: u32 = 200;

/// Two pulses this close, relatively, are alike.
const ALIKE: f64 = 0.02;

/// Pulses that beat with the mains are never alike: then the mean of so many is taken.
const MANY: usize = 8;

/// Relative error allowed in one step: a period needs no more.
const TOLERANCE: f64 = 1e-3;

/// Time from one start to the next, seconds; `None` where that is not seen in 20 s, or it never stops.
pub(crate) fn period_seconds(supply: &Supply, bank: &Bank, load: &Load) -> Option<f64> {
    // A degauss thermistor takes tens of seconds to get warm behind a lamp, and little changes once it is.
    let warm = match load {
        Load::Degauss(degauss) => &Load::Rectifier(*degauss.warm()),
        other => other,
    };
    let options = Options {
        seconds: LONGEST_SECONDS,
        moment: Moment::Degrees(0.0),
        sample_seconds: LONGEST_SECONDS,
        tolerance: TOLERANCE,
        ..Options::default()
    };
    let mut run = Run::new(supply, Some(bank), warm, &options).ok()?;
    for _ in 0..MOST_STEPS / SLICE {
        let progress = run.advance(SLICE).ok()?;
        let starts = run.starts();
        if let [.., first, second, third] = *starts {
            let (before, last) = (second - first, third - second);
            if libm::fabs(last / before - 1.0) < ALIKE {
                return Some(0.5 * (before + last));
            }
        }
        if let Some(from) = starts.len().checked_sub(MANY + 1).filter(|from| *from > 0) {
            #[expect(clippy::cast_precision_loss, reason = "eight")]
            return Some((starts[starts.len() - 1] - starts[from]) / MANY as f64);
        }
        if progress == Progress::Done {
            break;
        }
    }
    None
}
