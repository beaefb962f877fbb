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

use serde::{Deserialize, Serialize};

use crate::condition::Condition;
use crate::family::Family;
use crate::readings::Readings;

/// One condition with its weight.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Ranked {
    /// The condition.
    pub condition: Condition,
    /// Its weight among the conditions of the family, 0 to 1; they add to one.
    pub weight: f64,
}

/// What to do with the next, larger bank.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
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
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::plate::Plate;
    use crate::readings::{Behaviour, Kind, Meter, Reading, Response};
    use crate::setup::Setup;

    fn setup(family: Family, watts: f64) -> Setup {
        let plate = Plate::new(family, 230.0, watts, None).expect("a common plate");
        Setup { plate, ..Setup::example().expect("the example") }
    }

    fn read(numbers: &[(Kind, f64)], behaviour: Option<Behaviour>) -> Readings {
        let mut readings = Readings::default();
        for &(kind, value) in numbers {
            readings.add(Reading::new(kind, value, Meter::usual()).expect("in range"));
        }
        readings.set_behaviour(behaviour);
        readings
    }

    fn found(setup: &Setup, readings: &Readings) -> Diagnosis {
        let supply = readings.get(Kind::SupplyVolts);
        let forecast = Forecast::complete(setup, supply, Response::TrueRms).expect("on the mains");
        let found = diagnose(&forecast, readings);
        assert!((found.ranking.iter().map(|one| one.weight).sum::<f64>() - 1.0).abs() < 1e-9);
        assert_eq!(found, diagnose(&forecast, readings));
        found
    }

    #[test]
    fn the_whole_supply_on_the_lamp_is_a_short() {
        let readings =
            read(&[(Kind::SupplyVolts, 231.0), (Kind::BankVolts, 231.0), (Kind::LoadVolts, 0.3)], None);
        let found = found(&setup(Family::TransformerSupply, 45.0), &readings);
        assert_eq!(found.ranking[0].condition, Condition::Shorted);
        assert_eq!(found.advice, Advice::Stop);
    }

    #[test]
    fn what_a_healthy_set_shows_lets_one_go_on() {
        let setup = setup(Family::TransformerSupply, 45.0);
        let shown =
            crate::expect::prospect(&setup, Condition::Healthy).expect("solvable").shown.expect("settles");
        let numbers = [(Kind::BankVolts, shown.bank_volts.value), (Kind::LoadVolts, shown.load_volts.value)];
        let found = found(&setup, &read(&numbers, Some(Behaviour::FlashThenDim)));
        assert_eq!(found.ranking[0].condition, Condition::Healthy);
        assert_eq!(found.advice, Advice::GoOn);
    }

    #[test]
    fn a_pulsing_converter_decides_nothing_and_asks_for_more() {
        let found = found(&setup(Family::SwitchMode, 90.0), &read(&[], Some(Behaviour::Pulsing)));
        assert!(found.explained);
        assert_eq!(found.advice, Advice::MeasureFirst);
        assert!(found.next.windows(2).all(|pair| pair[0].bits >= pair[1].bits));
    }

    #[test]
    fn volts_that_a_resistor_cannot_split_are_not_explained() {
        let numbers = [(Kind::SupplyVolts, 230.0), (Kind::BankVolts, 150.0), (Kind::LoadVolts, 150.0)];
        let found = found(&setup(Family::Heater, 100.0), &read(&numbers, None));
        assert!(!found.explained, "{found:?}");
        assert_eq!(found.advice, Advice::MeasureFirst);
    }

    #[test]
    fn nothing_read_leaves_the_prior_and_a_first_reading_with_its_meanings() {
        let setup = setup(Family::UniversalMotor, 500.0);
        let found = found(&setup, &Readings::default());
        let before = prior(Family::UniversalMotor);
        assert!((found.ranking[0].weight - before[0]).abs() < 1e-6);
        assert_eq!(found.advice, Advice::MeasureFirst);
        let first = &found.next[0];
        let probability: f64 = first.meanings.iter().map(|meaning| meaning.probability).sum();
        assert!(first.bits > 0.5 && (probability - 1.0).abs() < 1e-9, "{first:?}");
    }

    #[test]
    fn a_forecast_in_slices_is_the_same_forecast() {
        let setup = setup(Family::InductionMotor, 60.0);
        let whole = Forecast::complete(&setup, None, Response::TrueRms).expect("on the mains");
        let mut slices = Forecast::new(&setup, None, Response::TrueRms).expect("on the mains");
        while !slices.advance(60) {}
        let readings = read(&[(Kind::BankVolts, 40.0)], None);
        assert_eq!(diagnose(&whole, &readings), diagnose(&slices, &readings));
    }
}
