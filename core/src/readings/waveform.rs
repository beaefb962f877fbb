//! What an averaging meter misses on a distorted waveform.
//!
//! Such a meter shows `pi / (2 sqrt 2)` times the mean of the absolute value, which is the RMS of a sinusoid. Behind a
//! bank, equipment with a rectifier and reservoir takes its current in pulses, `cos phi - cos theta` over a conduction
//! angle of `2 theta`, and its voltage is a sinusoid clipped at the reservoir: both averages are closed forms.

use core::f64::consts::{FRAC_PI_2, PI, SQRT_2};

use crate::family::Family;
use crate::load::Pulse;

/// RMS over mean of a rectified sinusoid.
const SINE_FORM: f64 = PI / (2.0 * SQRT_2);

/// What is known of the waveform behind the bank.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
#[non_exhaustive]
pub enum Waveform {
    /// Heaters, lamps, motors, corrected supplies: every meter agrees.
    Sine,
    /// A rectifier and reservoir: half the conduction angle between 40 and 80 degrees, which covers sets that take
    /// from a twentieth to all but a fifth of what a short would behind the same bank (derived).
    Pulses,
    /// Either.
    #[default]
    Unknown,
}

impl Waveform {
    /// Half the conduction angle, least and greatest, radian.
    pub(crate) const fn half_angles(self) -> (f64, f64) {
        const DEGREE: f64 = PI / 180.0;
        match self {
            Self::Sine => (FRAC_PI_2, FRAC_PI_2),
            Self::Pulses => (40.0 * DEGREE, 80.0 * DEGREE),
            Self::Unknown => (40.0 * DEGREE, 90.0 * DEGREE),
        }
    }
}

/// What is known of the waveform from the kind of equipment alone, whatever condition it is in: a sinusoid where nothing
/// rectifies, else either (a set with a rectifier takes pulses while it works, and a sinusoid when it is shorted).
pub const fn usual_waveform(family: Family) -> Waveform {
    match family {
        Family::Heater
        | Family::Lamp
        | Family::Measured
        | Family::UniversalMotor
        | Family::InductionMotor
        | Family::SwitchModeCorrected => Waveform::Sine,
        _ => Waveform::Unknown,
    }
}

/// True RMS of a current in pulses, and of the voltage across a bank that carries it, over what an averaging meter
/// shows; 1 at a half angle of 90 degrees, 1.48 at 40.
pub fn current_factor(half_angle: f64) -> f64 {
    let pulse = Pulse::at(half_angle.clamp(1e-3, FRAC_PI_2));
    pulse.rms() / pulse.mean() / SINE_FORM
}

/// True RMS of the equipment's voltage over what an averaging meter shows: below 1, since a clipped sinusoid is nearer
/// to a square; 1 where nothing is clipped.
pub fn load_volts_factor(half_angle: f64) -> f64 {
    let theta = half_angle.clamp(0.0, FRAC_PI_2 - 1e-3);
    let (sin, cos) = (libm::sin(theta), libm::cos(theta));
    // Clipped at cos theta while |phi| < theta; the sinusoid itself for the rest.
    let mean = (2.0 / PI) * (theta * cos + 1.0 - sin);
    let square = (2.0 / PI) * (theta * cos * cos + 0.5 * (FRAC_PI_2 - theta - sin * cos));
    libm::sqrt(square) / mean / SINE_FORM
}

/// True RMS over what an averaging meter shows where only one half wave passes: `sqrt 2`.
pub const HALF_WAVE_FACTOR: f64 = SQRT_2;

/// The same of the equipment's voltage there: one half wave in full, the other divided between the equipment's resistance
/// and the bank's, whose ratio is `share`.
pub fn half_wave_load_factor(share: f64) -> f64 {
    let divided = share.max(0.0) / (1.0 + share.max(0.0));
    SQRT_2 * libm::sqrt(1.0 + divided * divided) / (1.0 + divided)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_sinusoid_is_read_right_and_pulses_too_low() {
        assert!((current_factor(FRAC_PI_2) - 1.0).abs() < 1e-12);
        assert!((load_volts_factor(0.0) - 1.0).abs() < 1e-12);
        let narrow = current_factor(Waveform::Pulses.half_angles().0);
        assert!((1.4..1.6).contains(&narrow), "{narrow}");
        // A square wave reads 11 % too high.
        assert!((load_volts_factor(FRAC_PI_2) - 1.0 / SINE_FORM).abs() < 1e-3);
    }
}
