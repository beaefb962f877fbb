//! Complex numbers for phasors and impedances: the four operations that the motors need.

use core::ops::Add;

/// A complex number.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Complex {
    /// Real part; of an impedance, the resistance.
    pub real: f64,
    /// Imaginary part; of an impedance, the reactance.
    pub imaginary: f64,
}

impl Complex {
    /// From its parts.
    pub const fn new(real: f64, imaginary: f64) -> Self {
        Self { real, imaginary }
    }

    /// Absolute value.
    pub fn magnitude(self) -> f64 {
        libm::hypot(self.real, self.imaginary)
    }

    /// One over it.
    #[must_use]
    pub fn reciprocal(self) -> Self {
        let square = self.real * self.real + self.imaginary * self.imaginary;
        Self { real: self.real / square, imaginary: -self.imaginary / square }
    }

    /// Two impedances side by side.
    #[must_use]
    pub fn parallel(self, other: Self) -> Self {
        (self.reciprocal() + other.reciprocal()).reciprocal()
    }
}

impl Add for Complex {
    type Output = Self;

    fn add(self, other: Self) -> Self {
        Self { real: self.real + other.real, imaginary: self.imaginary + other.imaginary }
    }
}
