//! The scales on which readings are compared: logarithmic where they are large, linear near zero.

use crate::glow::GlowWord;
use crate::readings::{Kind, Look, Meter, Reading};

/// What can be read, numbers and the look alike.
pub(crate) const QUANTITIES: usize = Kind::ALL.len() + 1;

/// Place of the look among them.
pub(crate) const LOOK: usize = Kind::ALL.len();

/// Half of the value at which a scale turns from linear to logarithmic: where a meter's last digits begin to rule.
const BENDS: [f64; QUANTITIES] = [1.0, 1.0, 1.0, 0.002, 0.5, 0.5, 50.0];

/// Relative standard deviation of the model itself, in the same order.
///
/// Over the time-domain checks the steady model was off by at most 1.1 % in current, 2.0 % in the bank's volts, 1.2 %
/// in the equipment's and 2.4 % in power; the rest is for equipment that is not quite of its family.
pub const MODEL: [f64; QUANTITIES] = [0.0, 0.025, 0.015, 0.015, 0.03, 0.0, 0.01];

/// A value on its scale.
pub(crate) fn scaled(place: usize, value: f64) -> f64 {
    libm::asinh(value / (2.0 * BENDS[place]))
}

/// The value back from its scale.
pub(crate) fn unscaled(place: usize, scaled: f64) -> f64 {
    2.0 * BENDS[place] * libm::sinh(scaled)
}

/// A small deviation of a value, on its scale.
pub(crate) fn scaled_deviation(place: usize, value: f64, deviation: f64) -> f64 {
    deviation / libm::hypot(value, 2.0 * BENDS[place])
}

/// Standard deviation on its scale of a reading taken with `meter` at a value: meter, and the supply's `drift`.
pub(crate) fn reading_deviation(kind: Kind, value: f64, meter: &Meter, drift: f64) -> f64 {
    let by_meter =
        Reading::new(kind, value.clamp(0.0, kind.most()), *meter).map_or(0.0, |one| one.deviation());
    let by_drift = if matches!(kind, Kind::PlugOhms | Kind::SupplyVolts) { 0.0 } else { drift * value };
    scaled_deviation(kind.index(), value, libm::hypot(by_meter, by_drift))
}

/// A look on its scale, with its standard deviation.
pub(crate) fn scaled_look(look: Look, rated_kelvin: f64) -> (f64, f64) {
    let (kelvin, deviation) = look.kelvin(rated_kelvin);
    // Anything below the Draper point looks the same: half of that range on the scale, not in kelvin.
    if look == Look::Word(GlowWord::Dark) {
        let ends = [300.0, kelvin * 2.0 - 300.0].map(|end| scaled(LOOK, end));
        return (f64::midpoint(ends[0], ends[1]), (ends[1] - ends[0]) / libm::sqrt(12.0));
    }
    (scaled(LOOK, kelvin), scaled_deviation(LOOK, kelvin, deviation))
}
