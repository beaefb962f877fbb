//! How the draw of a kind of equipment grows with its voltage, for the extrapolation to full supply.

use crate::family::Family;

/// Exponents, least and greatest, of real power against voltage from behind a bank up to full supply, for equipment that
/// is doing the same thing at both.
///
/// A resistor has 2, a constant power 0, tungsten 1.5 to 1.6 (the exponent of a lamp's watts, published, with the part
/// that falls behind at low voltage). A transformer supply with resistive draw is close to 2, less for diode drops and
/// more for a core that saturates; a converter's losses leave it a little above or below 0; a motor's load torque
/// decides (design values, no source).
pub const fn growth(family: Family) -> (f64, f64) {
    match family {
        Family::Heater | Family::Measured => (1.95, 2.05),
        Family::Lamp => (1.4, 1.65),
        Family::TransformerSupply => (1.8, 2.5),
        Family::ValveTransformer | Family::ValveSeries => (1.4, 2.4),
        Family::SwitchMode | Family::SwitchModeCorrected | Family::CrtSet => (-0.1, 0.2),
        Family::UniversalMotor => (1.2, 2.2),
        Family::InductionMotor => (0.0, 2.4),
        Family::Plain => (0.0, 2.1),
    }
}
