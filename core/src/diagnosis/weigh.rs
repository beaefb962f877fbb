//! How well each bench of a forecast explains the readings.
//!
//! The likelihood of a condition is the mean over its benches of a normal density about each. A few hundred benches lie
//! further apart than a meter's error is wide, so each is widened into its neighbours by a part of the spread of all of
//! them, and drawn towards their mean by as much as the widening adds, which leaves mean and covariance as they were
//! (M. West, Journal of the Royal Statistical Society B 55 (1993) 409; the width after B. W. Silverman, Density
//! Estimation (1986), 4.3.2).

use alloc::vec::Vec;

use super::forecast::{Cluster, Forecast};
use super::scale::{LOOK, QUANTITIES, reading_deviation, scaled, scaled_look};
use crate::readings::{Behaviour, Kind, Readings};

/// What was read, on the scales of [`super::scale`].
pub(crate) struct Evidence {
    /// Which quantities, and in this order everything below.
    pub(crate) places: Vec<usize>,
    pub(crate) values: Vec<f64>,
    /// Standard deviations of reading alone.
    pub(crate) deviations: Vec<f64>,
    pub(crate) behaviour: Option<Behaviour>,
}

impl Evidence {
    pub(crate) fn new(forecast: &Forecast, readings: &Readings) -> Self {
        let mut evidence = Self {
            places: Vec::new(),
            values: Vec::new(),
            deviations: Vec::new(),
            behaviour: readings.behaviour(),
        };
        for reading in readings.numbers() {
            let kind = reading.kind();
            // The forecast was made for it.
            if kind == Kind::SupplyVolts && forecast.supply_is_read {
                continue;
            }
            let value = if kind == Kind::PlugOhms {
                reading.value().min(super::plug::OVERLOAD_OHMS)
            } else {
                reading.value()
            };
            evidence.places.push(kind.index());
            evidence.values.push(scaled(kind.index(), value));
            evidence.deviations.push(reading_deviation(kind, value, reading.meter(), readings.drift()));
        }
        if let Some(look) = readings.look() {
            let (value, deviation) = scaled_look(look, rated_kelvin(forecast));
            evidence.places.push(LOOK);
            evidence.values.push(value);
            evidence.deviations.push(deviation);
        }
        evidence
    }
}

pub(crate) fn rated_kelvin(forecast: &Forecast) -> f64 {
    forecast.setup().bank.groups()[0][0].rated_kelvin()
}

/// A cluster seen through some of its quantities: how far it widens its members, and the factor of the covariance of
/// one of them as read.
pub(crate) struct View<'a> {
    pub(crate) cluster: &'a Cluster,
    places: Vec<usize>,
    shrink: f64,
    /// Lower Cholesky factor.
    factor: [[f64; QUANTITIES]; QUANTITIES],
    ln_scale: f64,
}

impl<'a> View<'a> {
    /// `deviations` are those of reading alone, one a place.
    pub(crate) fn new(cluster: &'a Cluster, places: &[usize], deviations: &[f64]) -> Self {
        let square = bandwidth_square(cluster.members.len(), places.len());
        let mut factor = [[0.0; QUANTITIES]; QUANTITIES];
        let mut ln_scale = 0.0;
        for (row, &place) in places.iter().enumerate() {
            for (column, &other) in places.iter().enumerate().take(row + 1) {
                let mut sum = square * cluster.covariance(place, other);
                if row == column {
                    let (open, read) = (cluster.open[place], deviations[row]);
                    sum += open * open + read * read + LEAST_DEVIATION * LEAST_DEVIATION;
                }
                for k in 0..column {
                    sum -= factor[row][k] * factor[column][k];
                }
                factor[row][column] = if row == column {
                    libm::sqrt(sum.max(LEAST_DEVIATION * LEAST_DEVIATION))
                } else {
                    sum / factor[column][column]
                };
            }
            ln_scale += libm::log(factor[row][row]);
        }
        Self { cluster, places: places.to_vec(), shrink: libm::sqrt(1.0 - square), factor, ln_scale }
    }

    /// A member's value in a place, drawn towards the mean.
    fn centre(&self, member: &[f64; QUANTITIES], place: usize) -> f64 {
        let mean = self.cluster.mean[place];
        mean + self.shrink * (member[place] - mean)
    }

    /// The differences of `values` from a member, made independent and of unit deviation.
    pub(crate) fn whitened(&self, member: &[f64; QUANTITIES], values: &[f64]) -> [f64; QUANTITIES] {
        let mut z = [0.0; QUANTITIES];
        for (row, &value) in values.iter().enumerate() {
            let mut sum = value - self.centre(member, self.places[row]);
            for k in 0..row {
                sum -= self.factor[row][k] * z[k];
            }
            z[row] = sum / self.factor[row][row];
        }
        z
    }

    /// What a member expects of the last place when the ones before are as `z` says: value and standard deviation.
    pub(crate) fn last_given(&self, member: &[f64; QUANTITIES], z: &[f64; QUANTITIES]) -> (f64, f64) {
        let last = self.places.len() - 1;
        let mut value = self.centre(member, self.places[last]);
        for k in 0..last {
            value += self.factor[last][k] * z[k];
        }
        (value, self.factor[last][last])
    }
}

/// Keeps a covariance from vanishing where every bench agrees.
const LEAST_DEVIATION: f64 = 1e-4;

/// Silverman's bandwidth for `count` points, squared, as a part of the covariance. The quantities are one curve seen in
/// several ways, so more than two of them count as two.
fn bandwidth_square(count: usize, quantities: usize) -> f64 {
    if quantities == 0 || count < 2 {
        return 0.0;
    }
    #[expect(clippy::cast_precision_loss, reason = "at most 65 536 benches")]
    let (count, d) = (count as f64, quantities.min(2) as f64);
    let width = libm::pow(4.0 / ((d + 2.0) * count), 1.0 / (d + 4.0));
    (width * width).min(0.9)
}

/// One bench that counts.
#[derive(Clone, Copy)]
pub(crate) struct Member {
    pub(crate) cluster: usize,
    pub(crate) index: usize,
    /// Weight among all; they add to one.
    pub(crate) weight: f64,
}

/// The benches with their weights.
pub(crate) struct Weighed {
    pub(crate) members: Vec<Member>,
    /// Weight of each condition; they add to one.
    pub(crate) conditions: Vec<f64>,
    /// Square of the distance of the nearest bench, in deviations.
    pub(crate) least_square: f64,
    /// Likelihood of the behaviour, averaged over the conditions as the numbers leave them; 1 where none was seen.
    pub(crate) behaviour_share: f64,
}

/// Members lighter than this, over the heaviest, are left out of what follows.
const NEGLIGIBLE: f64 = 1e-7;

/// Weighs every bench; `prior` is the weight of each condition before anything was read.
pub(crate) fn weigh(forecast: &Forecast, prior: &[f64], evidence: &Evidence) -> Weighed {
    let mut logs: Vec<(usize, usize, f64)> = Vec::new();
    let mut least_square = f64::INFINITY;
    for (place, cluster) in forecast.clusters().iter().enumerate() {
        let view = View::new(cluster, &evidence.places, &evidence.deviations);
        #[expect(clippy::cast_precision_loss, reason = "at most 65 536 benches")]
        let count = cluster.members.len() as f64;
        let before = libm::log(prior[cluster.condition] * forecast.share(cluster) / count) - view.ln_scale;
        for (index, member) in cluster.members.iter().enumerate() {
            let z = view.whitened(member, &evidence.values);
            let square: f64 = z.iter().map(|one| one * one).sum();
            least_square = least_square.min(square);
            logs.push((place, index, before - 0.5 * square));
        }
    }
    let most = logs.iter().map(|one| one.2).fold(f64::NEG_INFINITY, f64::max);
    let mut conditions = alloc::vec![0.0; prior.len()];
    let mut members = Vec::new();
    let (mut total, mut without) = (0.0, 0.0);
    for (cluster, index, log) in logs {
        let weight = libm::exp(log - most);
        if weight < NEGLIGIBLE || !weight.is_finite() {
            continue;
        }
        let one = &forecast.clusters()[cluster];
        without += weight;
        let weight = evidence.behaviour.map_or(weight, |seen| weight * one.behaviours[seen as usize]);
        conditions[one.condition] += weight;
        total += weight;
        members.push(Member { cluster, index, weight });
    }
    for member in &mut members {
        member.weight /= total;
    }
    for weight in &mut conditions {
        *weight /= total;
    }
    let behaviour_share = if evidence.behaviour.is_some() { total / without } else { 1.0 };
    Weighed { members, conditions, least_square, behaviour_share }
}
