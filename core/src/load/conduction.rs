//! The current pulse of a full-wave rectifier with a large reservoir behind a resistance.
//!
//! While the source `Vp cos(phi)` exceeds the held voltage `Vp cos(theta)`, the current is their difference over
//! the resistance; `theta` is half the conduction angle. All averages below are per half period, in units of
//! `Vp / R`. The large-capacitor limit of O. H. Schade, Proc. IRE 31 (1943) 341.

use core::f64::consts::{FRAC_PI_2, PI};

/// Half the conduction angle, radian, and the pulse that goes with it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Pulse {
    /// Half the conduction angle, 0 to pi/2.
    pub(crate) theta: f64,
}

impl Pulse {
    /// The pulse that charges up to a held voltage of `share` of the crest (0 to 1).
    pub(crate) fn holding(share: f64) -> Self {
        Self { theta: libm::acos(share.clamp(0.0, 1.0)) }
    }

    /// The pulse of an RMS current, in units of `Vp / R`; `None` above what a dead short would take.
    pub(crate) fn of_rms(rms: f64) -> Option<Self> {
        let wanted = PI * rms * rms;
        if wanted > FRAC_PI_2 {
            return None;
        }
        // From the two leading terms of the inverse of (4/15) t^5 (1 - 5/21 t^2 ...): within 0.5 % everywhere.
        let narrow = libm::pow(3.75 * wanted, 0.2).max(1e-60);
        let mut theta = (narrow * (1.0 + narrow * narrow / 21.0)).min(FRAC_PI_2);
        for _ in 0..NEWTON_STEPS {
            let step = (wanted - square(theta)) / (4.0 * libm::sin(theta) * mean(theta));
            theta = (theta + step).min(FRAC_PI_2);
            // What is left is of the order of the square.
            if step.abs() < 1e-9 * theta {
                break;
            }
        }
        Some(Self { theta })
    }

    /// Held voltage over the crest.
    pub(crate) fn share(self) -> f64 {
        libm::cos(self.theta)
    }

    /// Mean current.
    pub(crate) fn mean(self) -> f64 {
        mean(self.theta) * 2.0 / PI
    }

    /// RMS current.
    pub(crate) fn rms(self) -> f64 {
        libm::sqrt(square(self.theta) / PI)
    }

    /// Amplitude of the fundamental, in phase with the source.
    pub(crate) fn fundamental(self) -> f64 {
        let theta = self.theta;
        // theta - sin theta cos theta = (2 theta - sin 2 theta) / 2
        let angle = 2.0 * theta;
        let excess = if angle < SERIES_BELOW { series(angle, |_| 1.0, 1) } else { angle - libm::sin(angle) };
        excess / PI
    }
}

const NEWTON_STEPS: usize = 12;

/// Below this angle the closed forms cancel and their power series are summed instead.
const SERIES_BELOW: f64 = 1.0;

/// `sin t - t cos t`, which times 2/pi is the mean.
fn mean(theta: f64) -> f64 {
    if theta < SERIES_BELOW {
        series(theta, |k| 2.0 * k, 1)
    } else {
        libm::sin(theta) - theta * libm::cos(theta)
    }
}

/// `t (1 + 2 cos^2 t) - 1.5 sin 2t`, which over pi is the mean square.
fn square(theta: f64) -> f64 {
    let angle = 2.0 * theta;
    if angle < SERIES_BELOW {
        series(angle, |k| k - 1.0, 2)
    } else {
        theta * (2.0 + libm::cos(angle)) - 1.5 * libm::sin(angle)
    }
}

/// `sum over k of ± weight(k) x^(2k+1) / (2k+1)!` from k = `first`, the first term positive.
fn series(x: f64, weight: impl Fn(f64) -> f64, first: u32) -> f64 {
    let mut term = x;
    let mut sum = 0.0;
    for k in 1..=12_u32 {
        let n = f64::from(2 * k);
        term *= -x * x / (n * (n + 1.0));
        if k >= first {
            sum += weight(f64::from(k)) * term;
        }
    }
    if first % 2 == 1 { -sum } else { sum }
}

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
            let pulse = Pulse { theta };
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
    fn the_angle_comes_back_from_the_rms() {
        for theta in [1e-6, 1e-3, 0.1, 0.5, 1.0, 1.5, FRAC_PI_2] {
            let back = Pulse::of_rms(Pulse { theta }.rms().min(libm::sqrt(0.5))).expect("below a short");
            assert!((back.theta / theta - 1.0).abs() < 1e-9, "{theta}: {}", back.theta);
        }
        assert_eq!(Pulse::of_rms(0.8), None);
    }
}
