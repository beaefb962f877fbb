//! How much wider than its standard uncertainty a 95 % interval is, when rectangular distributions are among the causes.

use crate::band::{Band, COVERAGE};

/// Excess kurtosis of a rectangular distribution.
pub(crate) const RECTANGULAR: f64 = -1.2;

/// Excess kurtosis of a normal distribution.
pub(crate) const NORMAL: f64 = 0.0;

/// Coverage factor of a 95 % interval from the excess kurtosis of the combination.
///
/// The parabola through three exact values: 1.960 for a normal distribution, 1.902 for the triangular sum of two equal
/// rectangular ones (kurtosis -0.6), 1.645 for a single rectangular one (kurtosis -1.2), for which JCGM 100:2008,
/// G.2 and table G.1 say that a factor of 1.96 is too wide.
pub fn factor(kurtosis: f64) -> f64 {
    const TRIANGULAR: f64 = 1.901_8;
    const ONE_RECTANGLE: f64 = 1.645_4;
    let x = (kurtosis / RECTANGULAR).clamp(0.0, 1.0);
    // Lagrange's form at x = 0, 1/2, 1.
    COVERAGE * (1.0 - 2.0 * x) * (1.0 - x)
        + TRIANGULAR * 4.0 * x * (1.0 - x)
        + ONE_RECTANGLE * x * (2.0 * x - 1.0)
}

/// Gathers what independent causes do to one value: the law of propagation of uncertainty (JCGM 100:2008, 5.1.2), each
/// sensitivity by finite differences of one standard uncertainty up and down (5.1.3, note 2), the two sides apart.
///
/// Inputs that are correlated are handled by their common causes (F.1.2.3): a cause that moves several inputs moves
/// them together here, so no covariances are left over.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Gathered {
    value: f64,
    down: f64,
    up: f64,
    square: f64,
    fourth: f64,
}

impl Gathered {
    pub(crate) const fn around(value: f64) -> Self {
        Self { value, down: 0.0, up: 0.0, square: 0.0, fourth: 0.0 }
    }

    /// A cause of some kurtosis whose movement by one standard uncertainty gives the two `ends`.
    pub(crate) fn cause(&mut self, kurtosis: f64, ends: [f64; 2]) {
        let moves = ends.map(|end| end - self.value);
        if !moves.iter().all(|by| by.is_finite()) {
            return;
        }
        let up = moves[0].max(moves[1]).max(0.0);
        let down = moves[0].min(moves[1]).min(0.0);
        self.up += up * up;
        self.down += down * down;
        let square = 0.5 * (moves[0] * moves[0] + moves[1] * moves[1]);
        self.square += square;
        self.fourth += kurtosis * square * square;
    }

    pub(crate) fn deviation(&self) -> f64 {
        libm::sqrt(self.square)
    }

    pub(crate) fn estimate(&self) -> Estimate {
        let kurtosis = if self.square > 0.0 { self.fourth / (self.square * self.square) } else { 0.0 };
        let factor = factor(kurtosis);
        Estimate {
            band: Band {
                value: self.value,
                low: self.value - factor * libm::sqrt(self.down),
                high: self.value + factor * libm::sqrt(self.up),
            },
            deviation: self.deviation(),
        }
    }
}

/// The uncertainty of a `value` from what each independent cause does to it: the excess kurtosis of the cause (0 normal,
/// -1.2 rectangular), and the values that one standard uncertainty up and down gives. An end that is no number is passed
/// over with its cause.
///
/// ```
/// use lampladder_core::readings::combined;
/// let estimate = combined(10.0, &[(0.0, [13.0, 7.0]), (0.0, [14.0, 6.0])]);
/// assert_eq!(estimate.deviation, 5.0);
/// ```
pub fn combined(value: f64, causes: &[(f64, [f64; 2])]) -> Estimate {
    let mut gathered = Gathered::around(value);
    for &(kurtosis, ends) in causes {
        gathered.cause(kurtosis, ends);
    }
    gathered.estimate()
}

/// A value with its standard uncertainty and its 95 % interval.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Estimate {
    /// Best estimate and 95 % interval.
    pub band: Band,
    /// Standard uncertainty.
    pub deviation: f64,
}

impl Estimate {
    /// The same, kept inside what physics allows.
    pub(crate) const fn inside(self, low: f64, high: f64) -> Self {
        let Band { value, low: lower, high: upper } = self.band;
        let band =
            Band { value: value.clamp(low, high), low: lower.clamp(low, high), high: upper.clamp(low, high) };
        Self { band, ..self }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_factor_meets_its_three_exact_values_and_never_exceeds_the_normal_one_by_much() {
        assert_eq!(factor(NORMAL), COVERAGE);
        assert!((factor(-0.6) - 1.9018).abs() < 1e-12 && (factor(RECTANGULAR) - 1.6454).abs() < 1e-12);
        assert!((0..=12).all(|step| factor(-0.1 * f64::from(step)) < COVERAGE + 0.01));
    }

    #[test]
    fn equal_causes_add_in_quadrature() {
        let mut gathered = Gathered::around(10.0);
        gathered.cause(NORMAL, [13.0, 7.0]);
        gathered.cause(NORMAL, [14.0, 6.0]);
        let estimate = gathered.estimate();
        assert_eq!(estimate.deviation, 5.0);
        assert!((estimate.band.high - 10.0 - 5.0 * COVERAGE).abs() < 1e-12);
    }
}
