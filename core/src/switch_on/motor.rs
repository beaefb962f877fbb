//! Motors in the time domain: current, and speed over the rated or synchronous one.
//!
//! With `E` the energy of the rotor at full speed and torques in watts at that speed, `2 E dn/dt = torque - load`.
//! Friction turns its sign with the speed, over a small range about standstill instead of by a jump.

use super::branch::{At, Line};
use crate::load::{InductionMotorSpec, UniversalMotorSpec};

/// Speed, over full speed, within which friction has its full size.
const CREEP: f64 = 0.003;

/// Speed by which a shaft that has broken loose has only its turning friction left.
const LOOSE: f64 = 0.03;

/// A series motor with brushes: `V = i (R + K n) + L di/dt`, torque `K i^2`, load `a + b n^2`.
#[derive(Debug, Clone, Copy)]
pub(super) struct Brushed {
    pub(super) spec: UniversalMotorSpec,
    /// Inductance and the place of the current, where there is one.
    pub(super) coil: Option<(f64, usize)>,
    pub(super) speed_at: usize,
}

impl Brushed {
    fn ohms(&self, here: At) -> f64 {
        // A trial of the solver may step below standstill, where the machine would be a generator.
        self.spec.ohms + self.spec.speed_ohms * here.state[self.speed_at].max(0.0)
    }

    pub(super) fn line(&self, here: At) -> Line {
        match self.coil {
            Some((_, at)) => Line::source(here.state[at]),
            None => Line::resistor(super::branch::siemens(self.ohms(here))),
        }
    }

    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let amps = self.line(here).amps(volts);
        if let Some((henries, at)) = self.coil {
            slope[at] = (volts - self.ohms(here) * amps) / henries;
        }
        let speed = here.state[self.speed_at];
        let load = self.spec.standing_watts * libm::tanh(speed / CREEP)
            + self.spec.windage_watts * speed * speed.abs();
        slope[self.speed_at] = (self.spec.speed_ohms * amps * amps - load) / (2.0 * self.spec.joules);
    }
}

/// An induction motor by its equivalent circuit: stator resistance and leakage, then the magnetising inductance beside
/// rotor leakage and `R2 / slip`. Its variables are the currents of stator and rotor, and the speed.
#[derive(Debug, Clone, Copy)]
pub(super) struct Squirrel {
    spec: InductionMotorSpec,
    /// Stator leakage, magnetising and rotor leakage inductance, henry.
    henries: [f64; 3],
    pub(super) at: usize,
    pub(super) rotor_at: usize,
    pub(super) speed_at: usize,
}

/// Least leakage over the magnetising inductance: without any, the currents of stator and rotor would be one.
const LEAST_LEAKAGE: f64 = 1e-4;

/// Least slip: at synchronous speed the rotor carries nothing.
const LEAST_SLIP: f64 = 1e-4;

/// A breakaway torque beyond this many times all others is a blocked shaft.
const BLOCKED: f64 = 1e6;

impl Squirrel {
    pub(super) fn new(spec: InductionMotorSpec, omega: f64, places: [usize; 3]) -> Self {
        let magnetising = spec.magnetising_ohms / omega;
        let leakage = |ohms: f64| (ohms / omega).max(LEAST_LEAKAGE * magnetising);
        let henries = [leakage(spec.stator_reactance_ohms), magnetising, leakage(spec.rotor_reactance_ohms)];
        let [at, rotor_at, speed_at] = places;
        Self { spec, henries, at, rotor_at, speed_at }
    }

    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let (amps, rotor_amps, speed) =
            (here.state[self.at], here.state[self.rotor_at], here.state[self.speed_at]);
        let rotor_ohms = self.spec.rotor_ohms / (1.0 - speed).max(LEAST_SLIP);
        let [stator, magnetising, rotor] = self.henries;
        // [L1 + Lm, -Lm; -Lm, Lm + L2] d(i1, i2)/dt = (v - R1 i1, -R2/s i2), by Cramer's rule.
        let determinant = stator * magnetising + stator * rotor + magnetising * rotor;
        let drive = volts - self.spec.stator_ohms * amps;
        let brake = rotor_ohms * rotor_amps;
        slope[self.at] = (drive * (magnetising + rotor) - brake * magnetising) / determinant;
        slope[self.rotor_at] = (drive * magnetising - brake * (stator + magnetising)) / determinant;
        let torque = rotor_ohms * rotor_amps * rotor_amps;
        let turning = self.spec.steady_watts;
        let breakaway = self.spec.breakaway_watts.min(BLOCKED * (turning + self.spec.windage_watts + 1.0));
        let ratio = speed / LOOSE;
        let standing = turning + (breakaway - turning).max(0.0) * libm::exp(-ratio * ratio);
        let load = standing * libm::tanh(speed / CREEP) + self.spec.windage_watts * speed * speed.abs();
        slope[self.speed_at] = (torque - load) / (2.0 * self.spec.joules);
    }
}
