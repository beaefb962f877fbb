//! A series motor with brushes: its back-EMF is in phase with its current and grows with it and with speed, so to
//! the circuit it is a resistance that grows with speed.
//!
//! `V = I (R + K n + jX)`, torque `K I^2`, against a load torque `a + b n^2`; speed `n` is 1 at the rating, torque
//! is in watts at that speed. (The unsaturated series machine of A. E. Fitzgerald, C. Kingsley, S. D. Umans,
//! Electric Machinery, chapter on single-phase motors.)

use super::{Feed, Terminal};
use crate::error::{Field, InputError, within};

/// The numbers that describe a [`UniversalMotor`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UniversalMotorSpec {
    /// Winding and brush resistance, ohms (0 to 1e6).
    pub ohms: f64,
    /// Reactance at the supply frequency, ohms (0 to 1e6); nothing on direct current.
    pub reactance_ohms: f64,
    /// Resistance that stands for the back-EMF at rated speed, ohms (0 for a blocked shaft, to 1e6).
    pub speed_ohms: f64,
    /// Load torque at standstill, watts at rated speed (0 to 1e6).
    pub standing_watts: f64,
    /// Growth of the load torque with the square of speed, watts at rated speed (1e-9 to 1e6).
    pub windage_watts: f64,
    /// Energy of the rotor at rated speed, joules (1e-6 to 1e6); only the first seconds depend on it.
    pub joules: f64,
}

/// A series motor; see the module's text.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UniversalMotor {
    spec: UniversalMotorSpec,
}

impl UniversalMotor {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(spec: UniversalMotorSpec) -> Result<Self, InputError> {
        within(Field::Ohms, spec.ohms, 0.0, 1e6)?;
        within(Field::ReactanceOhms, spec.reactance_ohms, 0.0, 1e6)?;
        within(Field::Ohms, spec.speed_ohms, 0.0, 1e6)?;
        within(Field::Watts, spec.standing_watts, 0.0, 1e6)?;
        within(Field::Watts, spec.windage_watts, 1e-9, 1e6)?;
        within(Field::Watts, spec.joules, 1e-6, 1e6)?;
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &UniversalMotorSpec {
        &self.spec
    }

    /// Speed over rated speed at which the torque of a current meets the load, 0 where it does not move it.
    pub fn speed(&self, amps: f64) -> f64 {
        let left = self.spec.speed_ohms * amps * amps - self.spec.standing_watts;
        if left > 0.0 { libm::sqrt(left / self.spec.windage_watts) } else { 0.0 }
    }

    fn ohms(&self, amps: f64) -> f64 {
        self.spec.ohms + self.spec.speed_ohms * self.speed(amps)
    }

    fn reactance(&self, feed: &Feed) -> f64 {
        if feed.hertz == 0.0 { 0.0 } else { self.spec.reactance_ohms }
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        let magnitude = libm::hypot(feed.ohms + self.ohms(feed.amps), self.reactance(feed));
        libm::log(feed.volts / (feed.amps * magnitude))
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        let ohms = self.ohms(feed.amps);
        Terminal {
            volts: feed.amps * libm::hypot(ohms, self.reactance(feed)),
            watts: feed.amps * feed.amps * ohms,
            dc_volts: None,
        }
    }

    /// Real power straight on a supply of `volts`, watts.
    pub(crate) fn watts_at(&self, volts: f64, hertz: f64) -> f64 {
        let at = |amps: f64| Feed { volts, hertz, ohms: 0.0, amps };
        let stalled = volts / libm::hypot(self.spec.ohms.max(1e-9), self.reactance(&at(1.0)));
        let found = crate::roots::decreasing_from(
            |ln_amps| self.excess(&at(libm::exp(ln_amps))),
            (libm::log(stalled) - 30.0, libm::log(stalled) + 1e-9),
            libm::log(stalled) - 1.5,
            crate::roots::Tolerance::FINE,
        );
        let amps = found.map_or(stalled, |root| libm::exp(root.x));
        self.terminal(&at(amps)).watts
    }
}
