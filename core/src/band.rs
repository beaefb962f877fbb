//! A number with the interval that holds it 95 times in 100.

use serde::{Deserialize, Serialize};

/// Coverage factor of a 95 % interval of a normal distribution (JCGM 100:2008, table G.1).
pub const COVERAGE: f64 = 1.96;

/// A value with its 95 % interval.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Band {
    /// Best estimate.
    pub value: f64,
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
}

impl Band {
    /// A value without spread.
    pub const fn exact(value: f64) -> Self {
        Self { value, low: value, high: value }
    }
}

/// Gathers how far independent causes move a value, up and down apart, and adds them in quadrature
/// (JCGM 100:2008, 5.1, with finite differences for the sensitivities, as 5.1.3 note 2 allows).
#[derive(Debug, Clone, Copy)]
pub(crate) struct Spread {
    value: f64,
    down: f64,
    up: f64,
}

impl Spread {
    pub(crate) const fn around(value: f64) -> Self {
        Self { value, down: 0.0, up: 0.0 }
    }

    /// A cause whose movement by `factor` ends of its distribution gives the two `ends`.
    pub(crate) fn cause(&mut self, factor: f64, ends: [f64; 2]) {
        let moves = ends.map(|end| factor * (end - self.value));
        let up = moves[0].max(moves[1]).max(0.0);
        let down = moves[0].min(moves[1]).min(0.0);
        self.up += up * up;
        self.down += down * down;
    }

    pub(crate) fn band(&self) -> Band {
        Band {
            value: self.value,
            low: self.value - libm::sqrt(self.down),
            high: self.value + libm::sqrt(self.up),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn independent_causes_add_in_quadrature() {
        let mut spread = Spread::around(10.0);
        spread.cause(1.0, [13.0, 7.0]);
        spread.cause(1.0, [14.0, 6.0]);
        assert_eq!(spread.band(), Band { value: 10.0, low: 5.0, high: 15.0 });
    }
}
