//! Which condition of the equipment explains the readings, how sure that is, and what to read next.
//!
//! Every condition of the family is a hypothesis. A [`Forecast`] draws benches of each (supply, lamps, plate share,
//! class defaults and severity of the fault within their spreads, by [`sobol`]), solves them, and keeps the readings
//! that each would give. [`diagnose`] weighs the benches by how well they explain what was read (likelihood times
//! prior, Bayes), adds them up by condition, and asks of every reading not yet taken what it would tell
//! ([`Next`]). The readings count as independent of each other, given the bench: what the gain of one meter has
//! in common is left out, which makes the weights a little less sure than they could be.
//!
//! The weights are honest for benches drawn from the same spreads (the calibration test holds them to it). They know
//! nothing of faults that no condition describes: for those there is [`Diagnosis::explained`]. And no weight says that
//! anything may be touched.

mod behaviour;
mod forecast;
mod next;
mod normal;
mod plug;
mod scale;
pub mod sobol;
pub mod spread;
mod weigh;

use alloc::vec::Vec;

pub use behaviour::behaviours;
pub use forecast::{Ending, Forecast};
pub use next::{Candidate, Meaning, Next, Seen};
pub use scale::MODEL as MODEL_DEVIATIONS;

use crate::condition::Condition;
use crate::family::Family;
use crate::readings::Readings;

/// One condition with its weight.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Ranked {
    /// The condition.
    pub condition: Condition,
    /// Its weight among the conditions of the family, 0 to 1; they add to one.
    pub weight: f64,
}

/// What to do with the next, larger bank.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Advice {
    /// The readings are what equipment without a fault gives: the next bank may be wired.
    GoOn,
    /// They are what a fault gives: unplug and look for it.
    Stop,
    /// They do not tell, or nothing explains them: read more before anything else.
    MeasureFirst,
}

impl Advice {
    /// The advice's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::GoOn => "go-on",
            Self::Stop => "stop",
            Self::MeasureFirst => "measure-first",
        }
    }
}

/// What the readings mean.
#[derive(Debug, Clone, PartialEq)]
pub struct Diagnosis {
    /// Every condition of the family, the weightiest first.
    pub ranking: Vec<Ranked>,
    /// Whether any bench of any condition comes near the readings. Where none does, the weights compare poor
    /// explanations with poorer ones: none of these explains it.
    pub explained: bool,
    /// Probability that readings of the best bench would lie as far off as these do.
    pub fit: f64,
    /// What to do.
    pub advice: Advice,
    /// The readings that were not taken yet, the most telling first.
    pub next: Vec<Next>,
}

/// Weight together from which conditions decide the advice (design value: one wrong in ten, and an open mind below).
pub const DECIDED: f64 = 0.9;

/// Fit below which nothing explains the readings (design value: one true bench in a thousand, and fewer, since the best
/// of many benches is looked at).
pub const UNEXPLAINED: f64 = 1e-3;

/// Whether a condition is no fault.
pub const fn is_fault(condition: Condition) -> bool {
    !matches!(condition, Condition::Healthy | Condition::Idle | Condition::Working)
}

/// Weights of a family's conditions before anything is read, in its order, which is healthy first, then the likeliest
/// faults: 1, 1/2, 1/3 and so on, over their sum (design value, no source).
pub fn prior(family: Family) -> Vec<f64> {
    let count = u32::try_from(family.conditions().len()).unwrap_or(1);
    let total: f64 = (1..=count).map(|rank| 1.0 / f64::from(rank)).sum();
    (1..=count).map(|rank| 1.0 / f64::from(rank) / total).collect()
}

/// What `readings` mean, by a forecast for the same bench and the same reading of the supply.
pub fn diagnose(forecast: &Forecast, readings: &Readings) -> Diagnosis {
    diagnose_from(forecast, readings, &prior(forecast.setup().plate.family()))
}

/// The same, from other weights before anything is read: one a condition, in the family's order; only their ratios count.
pub fn diagnose_from(forecast: &Forecast, readings: &Readings, prior: &[f64]) -> Diagnosis {
    let conditions = forecast.conditions();
    let prior: Vec<f64> =
        (0..conditions.len()).map(|place| prior.get(place).copied().unwrap_or(0.0).max(1e-9)).collect();
    let evidence = weigh::Evidence::new(forecast, readings);
    let weighed = weigh::weigh(forecast, &prior, &evidence);
    let mut ranking: Vec<Ranked> = conditions
        .iter()
        .zip(&weighed.conditions)
        .map(|(&condition, &weight)| Ranked { condition, weight })
        .collect();
    ranking.sort_by(|a, b| b.weight.total_cmp(&a.weight));
    #[expect(clippy::cast_precision_loss, reason = "a handful")]
    let degrees = evidence.places.len() as f64;
    let fit = normal::chi_square_tail(weighed.least_square, degrees).min(weighed.behaviour_share);
    let explained = fit >= UNEXPLAINED;
    let faults: f64 = ranking.iter().filter(|one| is_fault(one.condition)).map(|one| one.weight).sum();
    let advice = match faults {
        _ if !explained || readings.is_empty() => Advice::MeasureFirst,
        faults if faults >= DECIDED => Advice::Stop,
        faults if faults <= 1.0 - DECIDED => Advice::GoOn,
        _ => Advice::MeasureFirst,
    };
    let next = next::candidates(forecast, readings, &evidence, &weighed);
    Diagnosis { ranking, explained, fit, advice, next }
}
