//! The wire inside: its length, diameter and heat capacity, for the first seconds after switch-on.

use core::f64::consts::PI;

use crate::filament::Filament;
use crate::tungsten::{DENSITY, STANDARD, heat_capacity};

/// Share of the wire's surface that radiates outwards from its coil: 0.6 to 0.7 for coiled filaments (design
/// value, no source).
const COIL_SHARE: f64 = 0.65;

/// A filament's wire, uncoiled.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wire {
    /// Length, metre.
    pub metres: f64,
    /// Diameter, metre.
    pub diameter_metres: f64,
}

impl Wire {
    /// The wire whose resistance and radiation at the rating are the filament's:
    /// `R0 = rho(T0) L / (pi d^2 / 4)` and `(1-g) W0 = s pi d L M(T0)`, `s` = 0.65.
    pub fn of(filament: &Filament) -> Self {
        let shape = filament.shape();
        let resistivity = STANDARD.resistivity.at(shape.kelvin) * 1e-8;
        let exitance = STANDARD.exitance_above_ambient(shape.kelvin - crate::tungsten::AMBIENT_KELVIN).0;
        let length_over_area = shape.volts * shape.volts / shape.watts / resistivity;
        let surface = (1.0 - shape.gas_share) * shape.watts / (COIL_SHARE * exitance);
        // L = k pi d^2 / 4 and surface = pi d L, hence d^3 = 4 surface / (k pi^2).
        let diameter_metres = libm::cbrt(4.0 * surface / (length_over_area * PI * PI));
        Self { metres: surface / (PI * diameter_metres), diameter_metres }
    }

    /// Mass, kilogram.
    pub fn kilograms(&self) -> f64 {
        DENSITY * self.metres * PI * self.diameter_metres * self.diameter_metres / 4.0
    }

    /// Heat capacity at a temperature, joule per kelvin.
    pub fn joules_per_kelvin(&self, kelvin: f64) -> f64 {
        self.kilograms() * heat_capacity(kelvin)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::lamp::Lamp;

    #[test]
    fn a_120_volt_60_watt_wire_has_its_published_size() {
        // Encyclopedia entry on the incandescent lamp (published second hand): 46 um thick, 0.58 m long.
        let wire = Wire::of(Lamp::new(120.0, 60.0).expect("a stock size").filament());
        assert!((wire.diameter_metres / 46e-6 - 1.0).abs() < 0.2, "{}", wire.diameter_metres);
        assert!((wire.metres / 0.58 - 1.0).abs() < 0.2, "{}", wire.metres);
    }
}
