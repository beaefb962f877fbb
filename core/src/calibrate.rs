//! Fitting a lamp to what was measured on it.
//!
//! Weighted least squares over (ln watts, rated temperature, gas share), where the defaults count as
//! observations with their own standard deviation, by Gauss-Newton steps; the covariance of the result is the
//! inverse of the normal matrix (JCGM 100:2008, annex H.3). With nothing measured it returns the defaults.

use crate::filament::{Filament, Shape};
use crate::lamp::{Lamp, Point};
use crate::tungsten::STANDARD;

/// Relative standard deviation of an ohmmeter reading of a cold lamp: 1 % of meter and 2 K of room.
pub(crate) const COLD_OHMS_DEVIATION: f64 = 0.012;

/// Relative standard deviation of a measured current at a measured voltage, both meters together, and what the
/// model leaves out at low voltage (heat carried off by the leads).
pub(crate) const POINT_DEVIATION: f64 = 0.02;

/// A direction without spread: its parameter was given as exact.
const EXACT: f64 = 1e-9;

/// What was measured.
pub(crate) struct Evidence<'a> {
    pub(crate) cold_ohms: Option<f64>,
    pub(crate) points: &'a [Point],
}

/// The best shape, and the Cholesky factor (lower) of the covariance of its parameters.
pub(crate) struct Fitted {
    pub(crate) shape: Shape,
    pub(crate) spread: [[f64; 3]; 3],
}

/// A shape moved by (ln watts, kelvin, gas share), kept where the model holds.
pub(crate) fn shifted(shape: Shape, step: [f64; 3]) -> Shape {
    Shape {
        volts: shape.volts,
        watts: shape.watts * libm::exp(step[0].clamp(-0.5, 0.5)),
        kelvin: (shape.kelvin + step[1]).clamp(Lamp::RATED_KELVIN.0, Lamp::RATED_KELVIN.1),
        gas_share: (shape.gas_share + step[2]).clamp(Lamp::GAS_SHARE.0, Lamp::GAS_SHARE.1),
    }
}

/// Fits `start`, whose parameters have standard `deviations`, to the evidence.
pub(crate) fn fit(start: Shape, deviations: [f64; 3], evidence: &Evidence<'_>) -> Fitted {
    let deviations = deviations.map(|deviation| deviation.max(EXACT));
    if evidence.cold_ohms.is_none() && evidence.points.is_empty() {
        let mut spread = [[0.0; 3]; 3];
        for (axis, row) in spread.iter_mut().enumerate() {
            row[axis] = deviations[axis];
        }
        return Fitted { shape: start, spread };
    }
    // In units of the deviations, the prior is the identity matrix.
    let mut z = [0.0_f64; 3];
    let mut normal = identity();
    // Stay where the shape is not clamped, or the slopes vanish and the step runs away.
    let low_share = (Lamp::GAS_SHARE.0 - start.gas_share) / deviations[2];
    let high_share = (Lamp::GAS_SHARE.1 - start.gas_share) / deviations[2] - DIFFERENCE;
    let place = |z: [f64; 3]| shifted(start, core::array::from_fn(|axis| z[axis] * deviations[axis]));
    for _ in 0..MOST_STEPS {
        normal = identity();
        let mut gradient = z.map(|value| -value);
        let here = Filament::new(place(z), &STANDARD);
        let nearby: [Filament; 3] = core::array::from_fn(|axis| {
            let mut moved = z;
            moved[axis] += DIFFERENCE;
            Filament::new(place(moved), &STANDARD)
        });
        let mut observe = |predicted: &dyn Fn(&Filament) -> f64, measured: f64, deviation: f64| {
            let base = libm::log(predicted(&here));
            let residual = (libm::log(measured) - base) / deviation;
            let slopes: [f64; 3] = core::array::from_fn(|axis| {
                (libm::log(predicted(&nearby[axis])) - base) / DIFFERENCE / deviation
            });
            for row in 0..3 {
                gradient[row] += slopes[row] * residual;
                for column in 0..3 {
                    normal[row][column] += slopes[row] * slopes[column];
                }
            }
        };
        if let Some(ohms) = evidence.cold_ohms {
            observe(&Filament::cold_ohms, ohms, COLD_OHMS_DEVIATION);
        }
        for point in evidence.points {
            observe(&|filament| filament.at_volts(point.volts).amps(), point.amps, POINT_DEVIATION);
        }
        let step = bounded_step(&normal, gradient, (low_share - z[2], high_share - z[2]));
        for axis in 0..3 {
            // A stride of at most two deviations keeps far-off evidence from overshooting.
            z[axis] += step[axis].clamp(-2.0, 2.0);
        }
        if step.iter().all(|value| value.abs() < CONVERGED) {
            break;
        }
    }
    Fitted { shape: place(z), spread: inverse_factor(&cholesky(&normal), deviations) }
}

const MOST_STEPS: usize = 30;
const DIFFERENCE: f64 = 1e-4;
const CONVERGED: f64 = 1e-6;

fn identity() -> [[f64; 3]; 3] {
    [[1.0, 0.0, 0.0], [0.0, 1.0, 0.0], [0.0, 0.0, 1.0]]
}

/// Lower Cholesky factor; the matrix is the identity plus a sum of squares, hence positive definite.
fn cholesky(matrix: &[[f64; 3]; 3]) -> [[f64; 3]; 3] {
    let mut factor = [[0.0; 3]; 3];
    for row in 0..3 {
        for column in 0..=row {
            let mut sum = matrix[row][column];
            for k in 0..column {
                sum -= factor[row][k] * factor[column][k];
            }
            factor[row][column] =
                if row == column { libm::sqrt(sum.max(EXACT)) } else { sum / factor[column][column] };
        }
    }
    factor
}

/// The Gauss-Newton step with the last axis kept between two bounds: where it would pass one it goes up to it, and the
/// others take the best step that goes with that.
fn bounded_step(normal: &[[f64; 3]; 3], mut gradient: [f64; 3], (low, high): (f64, f64)) -> [f64; 3] {
    let free = solve(&cholesky(normal), gradient);
    // Not `clamp`: with an exact share both bounds can lie on one side of zero by rounding.
    let held = free[2].min(high).max(low);
    if held == free[2] {
        return free;
    }
    let mut matrix = *normal;
    for axis in 0..2 {
        gradient[axis] -= matrix[axis][2] * held;
        matrix[axis][2] = 0.0;
        matrix[2][axis] = 0.0;
    }
    matrix[2][2] = 1.0;
    gradient[2] = held;
    solve(&cholesky(&matrix), gradient)
}

/// Solves `L L' x = b`.
fn solve(factor: &[[f64; 3]; 3], b: [f64; 3]) -> [f64; 3] {
    let mut y = [0.0; 3];
    for row in 0..3 {
        let known: f64 = (0..row).map(|k| factor[row][k] * y[k]).sum();
        y[row] = (b[row] - known) / factor[row][row];
    }
    let mut x = [0.0; 3];
    for row in (0..3).rev() {
        let known: f64 = (row + 1..3).map(|k| factor[k][row] * x[k]).sum();
        x[row] = (y[row] - known) / factor[row][row];
    }
    x
}

/// A factor of the inverse of `L L'`, scaled back from units of the deviations.
fn inverse_factor(factor: &[[f64; 3]; 3], deviations: [f64; 3]) -> [[f64; 3]; 3] {
    let mut inverse = [[0.0; 3]; 3];
    for axis in 0..3 {
        let mut unit = [0.0; 3];
        unit[axis] = 1.0;
        let column = solve(factor, unit);
        for row in 0..3 {
            inverse[row][axis] = column[row];
        }
    }
    let mut spread = cholesky(&inverse);
    for (row, deviation) in spread.iter_mut().zip(deviations) {
        for value in row {
            *value *= deviation;
        }
    }
    spread
}

#[cfg(test)]
mod tests {
    use super::*;

    const START: Shape = Shape { volts: 230.0, watts: 100.0, kelvin: 2800.0, gas_share: 0.17 };
    const DEVIATIONS: [f64; 3] = [0.026, 80.0, 0.06];

    fn fit_to(evidence: &Evidence<'_>) -> Fitted {
        fit(START, DEVIATIONS, evidence)
    }

    #[test]
    fn nothing_measured_changes_nothing() {
        let fitted = fit_to(&Evidence { cold_ohms: None, points: &[] });
        assert_eq!(fitted.shape, START);
        assert_eq!(fitted.spread[1][1], 80.0);
    }

    #[test]
    fn a_share_at_its_bound_leaves_the_others_at_their_best() {
        // Found at random: a gas share at its upper bound once dragged the temperature to where no point agreed.
        let start = Shape { volts: 1.0, watts: 0.087, kelvin: 2750.0, gas_share: 0.499 };
        let deviations = [0.046, 200.0, 0.21];
        let truth = Filament::new(Shape { kelvin: 3127.0, gas_share: 0.5, ..start }, &STANDARD);
        let points: [Point; 3] =
            [0.5, 0.7, 0.07].map(|volts| Point { volts, amps: truth.at_volts(volts).amps() });
        let off = |shape: Shape| -> f64 {
            let filament = Filament::new(shape, &STANDARD);
            points.iter().map(|p| libm::pow(filament.at_volts(p.volts).amps() / p.amps - 1.0, 2.0)).sum()
        };
        let fitted = fit(start, deviations, &Evidence { cold_ohms: None, points: &points });
        assert!(off(fitted.shape) < off(start), "{} {}", off(fitted.shape), off(start));
    }

    #[test]
    fn points_of_another_lamp_lead_to_it_and_narrow_the_spread() {
        let truth = Filament::new(Shape { kelvin: 2700.0, gas_share: 0.10, ..START }, &STANDARD);
        let points: [Point; 6] = [15.0, 40.0, 80.0, 120.0, 180.0, 230.0]
            .map(|volts| Point { volts, amps: truth.at_volts(volts).amps() });
        let fitted = fit_to(&Evidence { cold_ohms: Some(truth.cold_ohms()), points: &points });
        for point in points {
            let amps = Filament::new(fitted.shape, &STANDARD).at_volts(point.volts).amps();
            // Half of the stated meter error: the pull of the defaults that remains.
            assert!((amps / point.amps - 1.0).abs() < 0.5 * POINT_DEVIATION, "{} V", point.volts);
        }
        let gas: f64 = fitted.spread[2].iter().map(|value| value * value).sum();
        assert!(libm::sqrt(gas) < 0.5 * 0.06);
    }
}
