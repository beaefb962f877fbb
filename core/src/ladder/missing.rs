//! Which single lamp would improve a ladder most.

use super::pool::Pool;
use super::search::{Blocked, Path, Question};
use crate::lamp::Lamp;
use crate::steady::SteadyError;
use crate::stock::Stock;

/// A printed rating.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rating {
    /// Volts.
    pub volts: f64,
    /// Watts.
    pub watts: f64,
}

/// A lamp to look for.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Missing {
    /// What should be printed on it.
    pub rating: Rating,
    /// What it would change.
    pub gain: Gain,
}

/// What one lamp more would change.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum Gain {
    /// There would be a ladder at all.
    Possible {
        /// Volts at healthy equipment behind its last rung, over the supply's.
        share: f64,
    },
    /// The last rung would come closer to working voltage.
    Closer {
        /// Volts at healthy equipment behind it, over the supply's.
        share: f64,
    },
    /// The equipment runs behind no bank, with or without it; the strongest bank would be stronger.
    Stronger {
        /// What that bank would pass into a dead short, amperes.
        short_amps: f64,
    },
    /// It would take fewer rungs.
    Fewer {
        /// How many.
        rungs: usize,
    },
}

/// Watts of the lamps that shops and drawers have (the rows of the flux tables for 120 and 230 V).
const USUAL_WATTS: [f64; 8] = [15.0, 25.0, 40.0, 60.0, 75.0, 100.0, 150.0, 200.0];

/// Volts for which lamps are made (IEC 60038 nominal voltages and those before it, vehicle batteries; common practice).
const USUAL_VOLTS: [f64; 11] = [6.0, 12.0, 24.0, 36.0, 48.0, 100.0, 110.0, 120.0, 220.0, 230.0, 240.0];

/// The voltage that a lamp for this supply should have printed on it.
pub(super) fn usual_volts(question: &Question<'_>) -> f64 {
    let supply = question.supply.volts();
    let spec = question.limits.spec();
    let away = |volts: f64| libm::fabs(libm::log(volts / supply));
    let stands = |volts: &f64| supply * (1.0 + spec.supply_rise) <= volts * (1.0 + spec.lamp_overvoltage);
    let nearest = USUAL_VOLTS.into_iter().filter(stands).min_by(|a, b| away(*a).total_cmp(&away(*b)));
    // Too far off a usual one, the supply's own volts say what is needed.
    nearest.filter(|&volts| away(volts) < FAR_OFF).unwrap_or(supply)
}

/// Logarithm of a ratio of voltages that is no tolerance any more.
const FAR_OFF: f64 = 0.2;

/// The lamp of a usual rating that improves the ladder of `stock` most, if any does.
///
/// A ladder where there was none comes before a last rung that is closer by more than `close_share`, and that before
/// fewer rungs; among equals the fewest watts.
pub(super) fn best_addition(
    question: &Question<'_>,
    stock: &Stock,
    now: Option<&Path>,
) -> Result<Option<Missing>, SteadyError> {
    let volts = usual_volts(question);
    let spec = question.limits.spec();
    let mut best: Option<(Path, f64)> = None;
    for watts in USUAL_WATTS.into_iter().filter(|&watts| watts <= spec.holder_watts) {
        let mut more = stock.clone();
        if more.add(Lamp::new(volts, watts)?, 1.0).is_err() {
            continue;
        }
        let pool = Pool::of(question.supply, &more, question.limits);
        let found: Result<Path, Blocked> = question.path(&pool, &more)?;
        if let Ok(path) = found
            && best
                .as_ref()
                .map(|(known, _)| known)
                .or(now)
                .is_none_or(|known| gain(known, &path, spec.close_share).is_some())
        {
            best = Some((path, watts));
        }
    }
    Ok(best.and_then(|(path, watts)| {
        let gain = match now {
            None => Some(Gain::Possible { share: path.share }),
            Some(now) => gain(now, &path, spec.close_share),
        };
        gain.map(|gain| Missing { rating: Rating { volts, watts }, gain })
    }))
}

/// What `path` has over `known`.
fn gain(known: &Path, path: &Path, close_share: f64) -> Option<Gain> {
    if path.share > known.share + close_share {
        Some(Gain::Closer { share: path.share })
    } else if path.rungs.len() < known.rungs.len() && path.share >= known.share - close_share {
        Some(Gain::Fewer { rungs: path.rungs.len() })
    } else if known.share == 0.0 && path.last_amps() > STRONGER * known.last_amps() {
        Some(Gain::Stronger { short_amps: path.last_amps() })
    } else {
        None
    }
}

/// A bank stronger by less than this changes nothing for equipment that does not run (design value).
const STRONGER: f64 = 1.1;
