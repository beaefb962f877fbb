//! Which single lamp would improve a ladder most.

use serde::{Deserialize, Serialize};

use super::limits::Limits;
use super::pool::Pool;
use super::search::{Path, Question};
use crate::lamp::Lamp;
use crate::steady::SteadyError;
use crate::stock::Stock;
use crate::supply::Supply;

/// A printed rating.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Rating {
    /// Volts.
    pub volts: f64,
    /// Watts.
    pub watts: f64,
}

/// A lamp to look for.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Missing {
    /// What should be printed on it.
    pub rating: Rating,
    /// What it would change.
    pub gain: Gain,
}

/// What one lamp more would change.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
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
pub(super) fn usual_volts(supply: &Supply, limits: &Limits) -> f64 {
    let supply = supply.volts();
    let spec = limits.spec();
    let away = |volts: f64| libm::fabs(libm::log(volts / supply));
    let stands = |volts: &f64| supply * (1.0 + spec.supply_rise) <= volts * (1.0 + spec.lamp_overvoltage);
    let nearest = USUAL_VOLTS.into_iter().filter(stands).min_by(|a, b| away(*a).total_cmp(&away(*b)));
    // Too far off a usual one, the supply's own volts say what is needed.
    nearest.filter(|&volts| away(volts) < FAR_OFF).unwrap_or(supply)
}

/// Logarithm of a ratio of voltages that is no tolerance any more.
const FAR_OFF: f64 = 0.2;

/// Every usual rating that a lamp to look for may have.
pub(super) fn usual_ratings(supply: &Supply, limits: &Limits) -> impl Iterator<Item = Rating> + use<> {
    let volts = usual_volts(supply, limits);
    let holder_watts = limits.spec().holder_watts;
    USUAL_WATTS
        .into_iter()
        .filter(move |&watts| watts <= holder_watts)
        .map(move |watts| Rating { volts, watts })
}

/// What one lamp more of a rating changes; `now` is the ladder without it, where there is one.
pub(super) fn gain_of(
    question: &Question<'_>,
    stock: &Stock,
    now: Option<Reached>,
    rating: Rating,
) -> Result<Option<Gain>, SteadyError> {
    let mut more = stock.clone();
    if more.add(Lamp::new(rating.volts, rating.watts)?, 1.0).is_err() {
        return Ok(None);
    }
    let pool = Pool::of(question.supply, &more, question.limits);
    let Ok(path) = question.path(&pool, &more)? else { return Ok(None) };
    let then = Reached::of(&path);
    let close = question.limits.spec().close_share;
    Ok(match now {
        None => Some(Gain::Possible { share: then.share }),
        Some(now) if then.share > now.share + close => Some(Gain::Closer { share: then.share }),
        Some(now) if then.rungs < now.rungs && then.share >= now.share - close => {
            Some(Gain::Fewer { rungs: then.rungs })
        }
        Some(now) if now.share == 0.0 && then.short_amps > STRONGER * now.short_amps => {
            Some(Gain::Stronger { short_amps: then.short_amps })
        }
        Some(_) => None,
    })
}

/// What of a ladder is compared.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Reached {
    /// How many rungs.
    pub(super) rungs: usize,
    /// Volts at healthy equipment behind the last, over the supply's.
    pub(super) share: f64,
    /// Amperes that the last passes into a dead short.
    pub(super) short_amps: f64,
}

impl Reached {
    pub(super) fn of(path: &Path) -> Self {
        Self { rungs: path.rungs.len(), share: path.share, short_amps: path.last_amps() }
    }
}

/// A bank stronger by less than this changes nothing for equipment that does not run (design value).
const STRONGER: f64 = 1.1;

impl Gain {
    /// Whether it is worth more than another of the same ladder: one that is closer by more than `close_share`
    /// ([`super::LimitsSpec::close_share`]) before fewer rungs, and these before a stronger bank.
    pub fn beats(&self, other: &Self, close_share: f64) -> bool {
        let rank = |gain: &Self| match gain {
            Self::Possible { .. } => 3,
            Self::Closer { .. } => 2,
            Self::Fewer { .. } => 1,
            Self::Stronger { .. } => 0,
        };
        match (self, other) {
            (Self::Possible { share }, Self::Possible { share: known })
            | (Self::Closer { share }, Self::Closer { share: known }) => *share > known + close_share,
            (Self::Fewer { rungs }, Self::Fewer { rungs: known }) => rungs < known,
            (Self::Stronger { short_amps }, Self::Stronger { short_amps: known }) => {
                *short_amps > STRONGER * known
            }
            _ => rank(self) > rank(other),
        }
    }
}

/// The lamp of a usual rating that improves the ladder of `stock` most, if any does; among equals the fewest watts.
pub(super) fn best_addition(
    question: &Question<'_>,
    stock: &Stock,
    now: Option<Reached>,
) -> Result<Option<Missing>, SteadyError> {
    let close = question.limits.spec().close_share;
    let mut best: Option<Missing> = None;
    for rating in usual_ratings(question.supply, question.limits) {
        let Some(gain) = gain_of(question, stock, now, rating)? else { continue };
        if best.is_none_or(|known| gain.beats(&known.gain, close)) {
            best = Some(Missing { rating, gain });
        }
    }
    Ok(best)
}
