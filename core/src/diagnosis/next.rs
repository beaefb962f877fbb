//! Which reading to take next: the one from which most is to be learnt.
//!
//! Expected information of D. V. Lindley, Annals of Mathematical Statistics 27 (1956) 986: the entropy of the conditions
//! now, less its mean over the outcomes that the reading may have.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use super::forecast::Forecast;
use super::scale::{LOOK, reading_deviation, scaled_deviation, unscaled};
use super::weigh::{Evidence, Member, View, Weighed};
use crate::condition::Condition;
use crate::readings::{Behaviour, Kind, Meter, Readings};

/// What could be read next.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Candidate {
    /// A number on a meter.
    Number(Kind),
    /// The lamp's glow, by comparison.
    Look,
    /// What the lamp does over time.
    Behaviour,
}

impl Candidate {
    /// The candidate's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Number(kind) => kind.field().name(),
            Self::Look => "glow",
            Self::Behaviour => "behaviour",
        }
    }
}

/// One range of outcomes, and what it would mean.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Meaning {
    /// The outcomes.
    pub outcome: Seen,
    /// How likely they are, 0 to 1.
    pub probability: f64,
    /// The condition that would lead.
    pub leader: Condition,
    /// Its weight then, on average.
    pub weight: f64,
}

/// Outcomes of a reading.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Seen {
    /// A number between two, SI; from 0 and to infinity at the ends.
    Between {
        /// Least.
        low: f64,
        /// Greatest.
        high: f64,
    },
    /// A behaviour.
    Behaves(Behaviour),
}

/// A reading that could be taken next.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Next {
    /// Which.
    pub candidate: Candidate,
    /// Expected information about the condition, bits.
    pub bits: f64,
    /// What its outcomes would mean, in rising order.
    pub meanings: Vec<Meaning>,
}

/// Outcomes that are tried of each candidate.
const OUTCOMES: usize = 32;

/// Benches that stand for all of them while outcomes are tried: enough that a condition of half a per cent has one.
const STANDING: usize = 384;

/// The benches themselves where they are few; else as many of equal weight, picked at even steps of it.
fn standing(members: &[Member]) -> Vec<Member> {
    if members.len() <= STANDING {
        return members.to_vec();
    }
    #[expect(clippy::cast_precision_loss, reason = "a few hundred")]
    let all = STANDING as f64;
    let mut found = Vec::with_capacity(STANDING);
    let mut passed = 0.0;
    for member in members {
        passed += member.weight;
        #[expect(clippy::cast_precision_loss, reason = "a few hundred")]
        while found.len() < STANDING && (found.len() as f64 + 0.5) < passed * all {
            found.push(Member { weight: 1.0 / all, ..*member });
        }
    }
    found
}

/// Every reading that was not taken yet, the most telling first.
pub(crate) fn candidates(
    forecast: &Forecast,
    readings: &Readings,
    evidence: &Evidence,
    weighed: &Weighed,
) -> Vec<Next> {
    let meter = readings.numbers().next().map_or_else(Meter::usual, |reading| *reading.meter());
    let members = standing(&weighed.members);
    let mut found = Vec::new();
    for kind in Kind::ALL {
        let known = kind == Kind::SupplyVolts && forecast.supply_is_read;
        if readings.get(kind).is_none() && !known {
            let deviation = |value: f64| reading_deviation(kind, value, &meter, readings.drift());
            found.push(number(forecast, evidence, &members, kind.index(), &deviation));
        }
    }
    if readings.look().is_none() {
        // A word's range and a glance.
        let deviation = |kelvin: f64| scaled_deviation(LOOK, kelvin, 0.1 * kelvin);
        found.push(number(forecast, evidence, &members, LOOK, &deviation));
    }
    if readings.behaviour().is_none() {
        found.push(behaviour(forecast, weighed));
    }
    found.sort_by(|a, b| b.bits.total_cmp(&a.bits));
    found
}

fn entropy(weights: &[f64]) -> f64 {
    weights.iter().filter(|weight| **weight > 0.0).map(|weight| -weight * libm::log2(*weight)).sum()
}

fn leader(weights: &[f64]) -> (usize, f64) {
    let most = weights.iter().enumerate().max_by(|a, b| a.1.total_cmp(b.1));
    most.map_or((0, 0.0), |(place, weight)| (place, *weight))
}

/// A member's expectation of the candidate.
struct Expected {
    condition: usize,
    weight: f64,
    value: f64,
    deviation: f64,
}

fn number(
    forecast: &Forecast,
    evidence: &Evidence,
    members: &[Member],
    place: usize,
    deviation: &dyn Fn(f64) -> f64,
) -> Next {
    let mut places = evidence.places.clone();
    places.push(place);
    let views: Vec<View<'_>> = forecast
        .clusters()
        .iter()
        .map(|cluster| {
            let mut deviations = evidence.deviations.clone();
            deviations.push(deviation(unscaled(place, cluster.mean[place])));
            View::new(cluster, &places, &deviations)
        })
        .collect();
    let expected: Vec<Expected> = members
        .iter()
        .map(|member| {
            let view = &views[member.cluster];
            let bench = &view.cluster.members[member.index];
            let z = view.whitened(bench, &evidence.values);
            let (value, deviation) = view.last_given(bench, &z);
            Expected { condition: view.cluster.condition, weight: member.weight, value, deviation }
        })
        .collect();
    let mut outcomes = outcomes(&expected);
    outcomes.sort_by(f64::total_cmp);
    let conditions = forecast.conditions().len();
    let mut before = alloc::vec![0.0; conditions];
    for one in &expected {
        before[one.condition] += one.weight;
    }
    let mut after = 0.0;
    let mut meanings: Vec<Meaning> = Vec::new();
    #[expect(clippy::cast_precision_loss, reason = "a few dozen")]
    let probability = 1.0 / outcomes.len().max(1) as f64;
    for (index, &outcome) in outcomes.iter().enumerate() {
        let weights = weights_given(&expected, outcome, conditions);
        after += probability * entropy(&weights);
        let (first, weight) = leader(&weights);
        let leader = forecast.conditions()[first];
        let unscale = |scaled: f64| unscaled(place, scaled).max(0.0);
        let border =
            index.checked_sub(1).map_or(0.0, |before| unscale(f64::midpoint(outcomes[before], outcome)));
        match meanings.last_mut() {
            Some(last) if last.leader == leader => {
                last.weight = (last.weight * last.probability + weight * probability)
                    / (last.probability + probability);
                last.probability += probability;
            }
            _ => {
                if let Some(Meaning { outcome: Seen::Between { high, .. }, .. }) = meanings.last_mut() {
                    *high = border;
                }
                let outcome = Seen::Between { low: border, high: f64::INFINITY };
                meanings.push(Meaning { outcome, probability, leader, weight });
            }
        }
    }
    let candidate = Kind::ALL.get(place).map_or(Candidate::Look, |&kind| Candidate::Number(kind));
    Next { candidate, bits: (entropy(&before) - after).max(0.0), meanings }
}

/// Outcomes of equal probability: benches picked at even steps of their weight, each a little off its middle.
fn outcomes(expected: &[Expected]) -> Vec<f64> {
    /// Middles of four equal parts of a normal distribution's probability, in deviations.
    const OFF: [f64; 4] = [-1.15, 0.32, 1.15, -0.32];
    let mut found = Vec::with_capacity(OUTCOMES);
    let mut passed = 0.0;
    for one in expected {
        passed += one.weight;
        #[expect(clippy::cast_precision_loss, reason = "a few dozen")]
        while found.len() < OUTCOMES && (found.len() as f64 + 0.5) < passed * OUTCOMES as f64 {
            found.push(one.value + one.deviation * OFF[found.len() % 4]);
        }
    }
    found
}

fn weights_given(expected: &[Expected], outcome: f64, conditions: usize) -> Vec<f64> {
    let mut weights = alloc::vec![0.0; conditions];
    for one in expected {
        let z = (outcome - one.value) / one.deviation;
        if z * z < 60.0 {
            weights[one.condition] += one.weight / one.deviation * libm::exp(-0.5 * z * z);
        }
    }
    let total: f64 = weights.iter().sum();
    if total > 0.0 {
        for weight in &mut weights {
            *weight /= total;
        }
    }
    weights
}

fn behaviour(forecast: &Forecast, weighed: &Weighed) -> Next {
    let mut after = 0.0;
    let mut meanings = Vec::new();
    for seen in Behaviour::ALL {
        let mut weights = alloc::vec![0.0; weighed.conditions.len()];
        for member in &weighed.members {
            let cluster = &forecast.clusters()[member.cluster];
            weights[cluster.condition] += member.weight * cluster.behaviours[seen as usize];
        }
        let probability: f64 = weights.iter().sum();
        if probability <= 0.0 {
            continue;
        }
        for weight in &mut weights {
            *weight /= probability;
        }
        after += probability * entropy(&weights);
        let (first, weight) = leader(&weights);
        let leader = forecast.conditions()[first];
        meanings.push(Meaning { outcome: Seen::Behaves(seen), probability, leader, weight });
    }
    let bits = (entropy(&weighed.conditions) - after).max(0.0);
    Next { candidate: Candidate::Behaviour, bits, meanings }
}
