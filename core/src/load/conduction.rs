//! The current pulse of a full-wave rectifier with a large reservoir behind a resistance.
//!
//! While the source `Vp cos(phi)` exceeds the held voltage `Vp cos(theta)`, the current is their difference over
//! the resistance; `theta` is half the conduction angle. All averages below are per half period, in units of
//! `Vp / R`. The large-capacitor limit of O. H. Schade, Proc. IRE 31 (1943) 341.

use core::f64::consts::{FRAC_PI_2, PI};

/// Half the conduction angle, and the pulse that goes with it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Pulse {
    /// Half the conduction angle, radian, 0 to pi/2.
    pub(crate) theta: f64,
    sin: f64,
    cos: f64,
}

impl Pulse {
    /// The pulse of half a conduction angle.
    pub(crate) fn at(theta: f64) -> Self {
        let (sin, cos) = libm::sincos(theta);
        Self { theta, sin, cos }
    }

    /// The pulse of an RMS current, in units of `Vp / R`; `None` above what a dead short would take.
    pub(crate) fn of_rms(rms: f64) -> Option<Self> {
        let square = rms * rms;
        if square > 0.5 {
            return None;
        }
        // From the two leading terms of the inverse of (4/15) t^5 (1 - 5/21 t^2 ...): within 0.5 % everywhere.
        let narrow = libm::pow(3.75 * PI * square, 0.2).max(1e-60);
        let guess = narrow * (1.0 + narrow * narrow / 21.0);
        Some(Self::refined(guess, |pulse| (square - pulse.mean_square(), pulse.mean_square_slope())))
    }

    /// Newton's method from a guess, for what `left` still lacks and the slope at which a wider pulse brings it.
    pub(super) fn refined(guess: f64, left: impl Fn(&Self) -> (f64, f64)) -> Self {
        let mut pulse = Self::at(guess.min(FRAC_PI_2));
        for _ in 0..NEWTON_STEPS {
            let (lacking, slope) = left(&pulse);
            let step = lacking / slope;
            let theta = (pulse.theta + step).clamp(0.1 * pulse.theta, FRAC_PI_2);
            if theta == pulse.theta {
                break;
            }
            pulse = Self::at(theta);
            // What is left is of the order of the square.
            if step.abs() < 1e-8 * theta {
                break;
            }
        }
        pulse
    }

    /// A guess within some 5 % at the half angle whose mean is `loading (cos t - 1 + room)`: where a light load charges
    /// in `t^3` and a heavy one leaves hardly any volts, half way between the two.
    pub(super) fn guess(loading: f64, room: f64) -> f64 {
        let light = 1.5 * PI * loading * room;
        let heavy = libm::sqrt(2.2 * room);
        let cube = heavy * heavy * heavy;
        libm::cbrt(light * cube / (light + cube))
    }

    /// How far to narrow this pulse until `(2/pi)(sin t - t cos t) = loading (cos t - drop)`. The difference of the sides
    /// rises and is convex in `t`, so Newton's method from the right never fails; with a `drop` that falls by `easing`
    /// an angle, it still rises.
    pub(super) fn balance_step(&self, loading: f64, drop: f64, easing: f64) -> f64 {
        let slope = self.mean_slope() + loading * self.sin;
        let gap = self.mean() - loading * (self.cos - drop);
        gap / (slope - loading * easing).max(0.02 * slope)
    }

    /// Held voltage over the crest.
    pub(crate) fn share(&self) -> f64 {
        self.cos
    }

    /// Slope of the held voltage against the angle, over the crest, but for the sign.
    pub(super) fn sin(&self) -> f64 {
        self.sin
    }

    /// `sin t - t cos t`, of which the mean is made.
    fn area(&self) -> f64 {
        let theta = self.theta;
        if theta < 1.0 {
            theta * theta * theta / 3.0 * alternating(theta * theta, &AREA)
        } else {
            self.sin - theta * self.cos
        }
    }

    /// Mean current.
    pub(crate) fn mean(&self) -> f64 {
        self.area() * 2.0 / PI
    }

    /// Growth of the mean with the angle.
    pub(super) fn mean_slope(&self) -> f64 {
        self.theta * self.sin * 2.0 / PI
    }

    /// Mean square of the current: `t (1 + 2 cos^2 t) - 1.5 sin 2t` over pi.
    pub(super) fn mean_square(&self) -> f64 {
        let theta = self.theta;
        let square = theta * theta;
        if theta < 0.5 {
            4.0 / 15.0 * square * square * theta * alternating(4.0 * square, &SQUARE) / PI
        } else {
            (theta * (1.0 + 2.0 * self.cos * self.cos) - 3.0 * self.sin * self.cos) / PI
        }
    }

    /// Growth of the mean square with the angle.
    pub(super) fn mean_square_slope(&self) -> f64 {
        4.0 * self.sin * self.area() / PI
    }

    /// RMS current.
    pub(crate) fn rms(&self) -> f64 {
        libm::sqrt(self.mean_square())
    }

    /// Amplitude of the fundamental, in phase with the source: `2t - sin 2t` over pi.
    pub(crate) fn fundamental(&self) -> f64 {
        let square = 4.0 * self.theta * self.theta;
        if self.theta < 0.5 {
            square * self.theta / 3.0 * alternating(square, &FUNDAMENTAL) / PI
        } else {
            2.0 * (self.theta - self.sin * self.cos) / PI
        }
    }

    /// Growth of the fundamental with the angle.
    pub(super) fn fundamental_slope(&self) -> f64 {
        4.0 * self.sin * self.sin / PI
    }
}

const NEWTON_STEPS: usize = 30;

/// `1 - a x (1 - b x (1 - ...))`: where the closed forms cancel, at small angles, their power series are summed instead.
fn alternating(x: f64, ratios: &[f64; 8]) -> f64 {
    ratios.iter().rev().fold(1.0, |sum, ratio| 1.0 - ratio * x * sum)
}

/// Ratios of neighbouring terms of `sin t - t cos t` against `t^2`: 1 / (2k (2k + 3)). Eight leave 1e-16 at t = 1.
const AREA: [f64; 8] =
    [1.0 / 10.0, 1.0 / 28.0, 1.0 / 54.0, 1.0 / 88.0, 1.0 / 130.0, 1.0 / 180.0, 1.0 / 238.0, 1.0 / 304.0];

/// The same of `x - sin x`: 1 / ((2k + 2) (2k + 3)).
const FUNDAMENTAL: [f64; 8] =
    [1.0 / 20.0, 1.0 / 42.0, 1.0 / 72.0, 1.0 / 110.0, 1.0 / 156.0, 1.0 / 210.0, 1.0 / 272.0, 1.0 / 342.0];

/// The same of the mean square against `(2t)^2`: (k + 1) / (k (2k + 4) (2k + 5)).
const SQUARE: [f64; 8] = [
    1.0 / 21.0,
    1.0 / 48.0,
    2.0 / 165.0,
    1.25 / 156.0,
    1.0 / 175.0,
    7.0 / 1632.0,
    8.0 / 2394.0,
    1.125 / 420.0,
];

#[cfg(test)]
mod tests {
    use super::*;

    /// The three averages by the midpoint rule, straight from the waveform.
    fn by_quadrature(theta: f64) -> (f64, f64, f64) {
        let steps = 20_000;
        let width = 2.0 * theta / f64::from(steps);
        let mut sums = (0.0, 0.0, 0.0);
        for step in 0..steps {
            let phi = -theta + (f64::from(step) + 0.5) * width;
            let current = libm::cos(phi) - libm::cos(theta);
            sums.0 += current * width / PI;
            sums.1 += current * current * width / PI;
            sums.2 += current * libm::cos(phi) * width * 2.0 / PI;
        }
        (sums.0, libm::sqrt(sums.1), sums.2)
    }

    #[test]
    fn closed_forms_match_the_waveform() {
        for theta in [1e-3, 0.05, 0.3, 0.49, 0.51, 0.99, 1.01, 1.3, FRAC_PI_2] {
            let pulse = Pulse::at(theta);
            let (mean, rms, fundamental) = by_quadrature(theta);
            // 20,000 midpoints leave about 1e-8; the waveform's own cancellation at 1e-3 rad leaves 1e-7.
            for (closed, numeric) in
                [(pulse.mean(), mean), (pulse.rms(), rms), (pulse.fundamental(), fundamental)]
            {
                assert!((closed / numeric - 1.0).abs() < 1e-6, "{theta}: {closed} {numeric}");
            }
        }
    }

    #[test]
    fn the_pulse_balances_over_the_whole_range() {
        for loading in [1e-9, 1e-4, 0.01, 0.3, 1.0, 30.0, 1e4] {
            for drop in [0.0, 0.01, 0.5, 0.99] {
                let mut pulse = Pulse::at(Pulse::guess(loading, 1.0 - drop).min(FRAC_PI_2));
                for _ in 0..5 {
                    pulse = Pulse::at(pulse.theta - pulse.balance_step(loading, drop, 0.0));
                }
                let gap = pulse.mean() - loading * (pulse.share() - drop);
                assert!(gap.abs() < 1e-12 * (1.0 + loading), "{loading} {drop}: {gap}");
            }
        }
    }

    #[test]
    fn the_angle_comes_back_from_the_rms() {
        for theta in [1e-6, 1e-3, 0.1, 0.5, 1.0, 1.5, FRAC_PI_2] {
            let back = Pulse::of_rms(Pulse::at(theta).rms().min(libm::sqrt(0.5))).expect("below a short");
            assert!((back.theta / theta - 1.0).abs() < 1e-9, "{theta}: {}", back.theta);
        }
        assert_eq!(Pulse::of_rms(0.8), None);
    }
}
