//! A degauss thermistor in the time domain: a few ohms until it has taken up its heat, then thousands.

use super::branch::At;

/// A thermistor whose resistance jumps when it gets hot; its variable is its rise above ambient over the rise at which
/// it trips.
///
/// Below the trip it keeps its cold resistance; beyond, the logarithm of the resistance grows with the temperature, so
/// that at full mains voltage it comes to rest at the warm resistance. It loses heat in proportion to its rise.
#[derive(Debug, Clone, Copy)]
pub(super) struct Thermistor {
    cold_ohms: f64,
    trip_watts: f64,
    /// Growth of the resistance's logarithm with the variable, beyond 1.
    growth: f64,
    pub(super) at: usize,
}

/// Heat in the thermistor at the trip, joule: a ceramic disc of some 3 g, 0.5 J/(g K), 80 K above ambient (design
/// value, no source).
const TRIP_JOULES: f64 = 120.0;

/// Width of the bend from constant to growing resistance, over the rise at the trip: ceramics do not turn at a point.
const BEND: f64 = 0.05;

impl Thermistor {
    /// The thermistor of `cold_ohms` that stays cold up to `trip_watts` and is left with `warm_ohms` at `volts`.
    pub(super) fn new(cold_ohms: f64, trip_watts: f64, warm_ohms: f64, volts: f64, at: usize) -> Self {
        let held_watts = volts * volts / warm_ohms;
        // A warm state that loses no more than the cold one would be none: then let it rest half as hot again.
        let rest = (held_watts / trip_watts).max(1.5);
        let growth = libm::log((warm_ohms / cold_ohms).max(2.0)) / (rest - 1.0);
        Self { cold_ohms, trip_watts, growth, at }
    }

    pub(super) fn siemens(&self, here: At) -> f64 {
        let past = (here.state[self.at] - 1.0) / BEND;
        // A smooth ramp: ln(1 + e^x), which is x where that would overflow.
        let ramp = BEND * if past > 30.0 { past } else { libm::log1p(libm::exp(past)) };
        // More than nine decades no ceramic reaches.
        libm::exp(-(self.growth * ramp).min(20.0)) / self.cold_ohms
    }

    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let heated = volts * volts * self.siemens(here);
        slope[self.at] = (heated - self.trip_watts * here.state[self.at]) / TRIP_JOULES;
    }
}
