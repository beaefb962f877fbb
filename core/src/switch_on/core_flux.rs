//! A transformer's core in the time domain: its flux, with saturation and remanence.

use core::f64::consts::{FRAC_1_SQRT_2, SQRT_2};

use super::branch::At;

/// A magnetising branch, referred to the primary; its variable is the flux linkage over its crest at the rating.
///
/// As in the steady solver it stands beside the rectifier's windings. The primary's resistance is in series with it
/// here, because it is what limits the current of a full core.
#[derive(Debug, Clone, Copy)]
pub(super) struct Core {
    pub(super) primary_ohms: f64,
    pub(super) magnetising: Magnetising,
    pub(super) at: usize,
}

/// Magnetising current against flux, and flux against time.
#[derive(Debug, Clone, Copy)]
pub(super) struct Magnetising {
    /// Crest of the flux linkage at the rating, volt second.
    rated_flux: f64,
    /// Amperes at the crest of the rated flux in the unsaturated core.
    linear_amps: f64,
    /// Amperes that saturation adds there.
    knee_amps: f64,
    /// Rise of the current with the flux beyond [`FULL`], amperes per rated crest.
    air_amps: f64,
}

/// Share of the rated magnetising current that an unsaturated core would take, as in the steady solver.
const LINEAR: f64 = 0.6;
const KNEE: f64 = 1.0 - LINEAR;

/// Flux over its rated crest from which on the core adds nothing and the slope stays: silicon iron saturates at 2.0 T,
/// and small transformers are run at about 1.4 T (design values, no source).
const FULL: f64 = 1.4;

/// Reactance of the winding in air over the resistance of all windings: what an ordinary core at the class defaults has by
/// its own law (derived), so that only leaner cores differ.
const AIR: f64 = 0.73;

/// RMS of `sin^9`, and the mean of `sin * sin^9`.
const NINTH: f64 = 0.430_662_955_284_857_9;
const COMMON: f64 = 63.0 / 256.0;

impl Magnetising {
    /// The core that takes `amps` RMS at `volts` RMS and `omega` radian per second: the steady solver's law in the time
    /// domain. Its current is `linear x + knee x^9` over a sinusoidal flux `x`, the first with 0.6, the second with 0.4
    /// of the RMS, scaled so that both together have the whole.
    ///
    /// Beyond [`FULL`] its slope is that of the law or, where that is more, of the winding in air, whose reactance goes
    /// with its resistance `winding_ohms`: a strip-wound core takes little before it is full, and then a great deal.
    pub(super) fn of(volts: f64, amps: f64, omega: f64, winding_ohms: f64) -> Self {
        let together = LINEAR * LINEAR + KNEE * KNEE + 2.0 * LINEAR * KNEE * COMMON / (FRAC_1_SQRT_2 * NINTH);
        let unit = amps / libm::sqrt(together);
        let (linear_amps, knee_amps) = (unit * LINEAR / FRAC_1_SQRT_2, unit * KNEE / NINTH);
        let in_air = if winding_ohms > 0.0 { SQRT_2 * volts / (AIR * winding_ohms) } else { 0.0 };
        Self {
            rated_flux: SQRT_2 * volts / omega,
            linear_amps,
            knee_amps,
            air_amps: (linear_amps + 9.0 * knee_amps * eighth(FULL)).max(in_air),
        }
    }

    /// Amperes at a flux over its rated crest.
    fn amps(&self, flux: f64) -> f64 {
        let inside = flux.clamp(-FULL, FULL);
        inside * (self.linear_amps + self.knee_amps * eighth(inside)) + self.air_amps * (flux - inside)
    }
}

fn eighth(x: f64) -> f64 {
    let square = x * x;
    square * square * square * square
}

impl Core {
    pub(super) fn amps(&self, here: At) -> f64 {
        self.magnetising.amps(here.state[self.at])
    }

    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        slope[self.at] = (volts - self.primary_ohms * self.amps(here)) / self.magnetising.rated_flux;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_current_over_a_sinusoidal_flux_has_its_rms() {
        let core = Magnetising::of(230.0, 0.05, 314.0, 100.0);
        let steps = 3600;
        let square: f64 = (0..steps)
            .map(|step| core.amps(libm::sin(core::f64::consts::PI * f64::from(step) / 1800.0)))
            .map(|amps| amps * amps)
            .sum();
        assert!((libm::sqrt(square / f64::from(steps)) / 0.05 - 1.0).abs() < 1e-9);
    }

    #[test]
    fn current_and_slope_are_continuous_where_the_core_is_full() {
        let core = Magnetising::of(230.0, 0.05, 314.0, 100.0);
        let slope = |x: f64| (core.amps(x + 1e-6) - core.amps(x - 1e-6)) / 2e-6;
        assert!((core.amps(FULL + 1e-9) / core.amps(FULL - 1e-9) - 1.0).abs() < 1e-6);
        assert!((slope(FULL + 1e-5) / slope(FULL - 1e-5) - 1.0).abs() < 1e-3);
        assert_eq!(core.amps(-2.0), -core.amps(2.0));
    }
}
