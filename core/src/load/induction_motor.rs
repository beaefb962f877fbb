//! An induction motor by its equivalent circuit, running or standing.
//!
//! `Z(s) = R1 + jX1 + jXm || (R2/s + jX2)`; torque in watts at synchronous speed is `|I2|^2 R2/s`. (A. E.
//! Fitzgerald, C. Kingsley, S. D. Umans, Electric Machinery, chapter on polyphase induction machines.) A capacitor-run
//! or shaded-pole motor is treated as the one rotating field that drives it.

use super::{FAR, Impedance, Load};
use crate::complex::Complex;
use crate::error::{Field, InputError, within};

/// The numbers that describe an [`InductionMotor`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct InductionMotorSpec {
    /// Stator resistance, ohms (1e-6 to 1e6).
    pub stator_ohms: f64,
    /// Stator leakage reactance, ohms (0 to 1e6).
    pub stator_reactance_ohms: f64,
    /// Magnetising reactance, ohms (1e-3 to 1e9).
    pub magnetising_ohms: f64,
    /// Rotor resistance referred to the stator, ohms (1e-6 to 1e6).
    pub rotor_ohms: f64,
    /// Rotor leakage reactance referred to the stator, ohms (0 to 1e6).
    pub rotor_reactance_ohms: f64,
    /// Load torque while turning, at synchronous speed: a constant part, watts (0 to 1e6).
    pub steady_watts: f64,
    /// Load torque while turning: what grows with the square of speed, watts (0 to 1e6).
    pub windage_watts: f64,
    /// Torque that a standing shaft must overcome, watts at synchronous speed (0 to 1e12; huge for a blocked one).
    pub breakaway_watts: f64,
    /// Energy of the rotor and what it drives at synchronous speed, joules; only the first seconds depend on it.
    pub joules: f64,
}

/// An induction motor; see the module's text.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct InductionMotor {
    spec: InductionMotorSpec,
}

impl InductionMotor {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(spec: InductionMotorSpec) -> Result<Self, InputError> {
        within(Field::Ohms, spec.stator_ohms, 1e-6, 1e6)?;
        within(Field::ReactanceOhms, spec.stator_reactance_ohms, 0.0, 1e6)?;
        within(Field::ReactanceOhms, spec.magnetising_ohms, 1e-3, 1e9)?;
        within(Field::Ohms, spec.rotor_ohms, 1e-6, 1e6)?;
        within(Field::ReactanceOhms, spec.rotor_reactance_ohms, 0.0, 1e6)?;
        within(Field::Watts, spec.steady_watts, 0.0, 1e6)?;
        within(Field::Watts, spec.windage_watts, 0.0, 1e6)?;
        within(Field::Watts, spec.breakaway_watts, 0.0, 1e12)?;
        within(Field::Watts, spec.joules, 1e-6, 1e9)?;
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &InductionMotorSpec {
        &self.spec
    }

    fn rotor(&self, slip: f64) -> Complex {
        Complex::new(self.spec.rotor_ohms / slip, self.spec.rotor_reactance_ohms)
    }

    /// Impedance at a slip (1 standing, 0 synchronous), ohms.
    pub fn impedance(&self, slip: f64) -> Complex {
        let spec = &self.spec;
        let magnetising = Complex::new(0.0, spec.magnetising_ohms);
        Complex::new(spec.stator_ohms, spec.stator_reactance_ohms) + magnetising.parallel(self.rotor(slip))
    }

    /// Torque at a slip with `amps` RMS in the stator, watts at synchronous speed.
    pub fn torque_watts(&self, slip: f64, amps: f64) -> f64 {
        let magnetising = Complex::new(0.0, self.spec.magnetising_ohms);
        let rotor = self.rotor(slip);
        let rotor_amps = amps * (magnetising.magnitude() / (magnetising + rotor).magnitude());
        rotor_amps * rotor_amps * rotor.real
    }

    /// Load torque while turning at a slip, watts at synchronous speed.
    pub fn load_watts(&self, slip: f64) -> f64 {
        let speed = 1.0 - slip;
        self.spec.steady_watts + self.spec.windage_watts * speed * speed
    }

    /// A slip below which no steady point can lie on a supply of `volts`: nothing that stands ahead of the rotor raises
    /// its voltage, so its torque is at most `V^2 s / R2`, while the load's is at least `(1 - 2 s)` of that at full speed.
    pub(crate) fn least_slip(&self, volts: f64) -> f64 {
        let load = self.load_watts(0.0);
        0.999 * load / (volts * volts / self.spec.rotor_ohms + 2.0 * load)
    }

    /// The motor at a frozen slip, as a linear load.
    pub(crate) fn frozen(&self, slip: f64) -> Load {
        let impedance = self.impedance(slip);
        // The numbers were checked: an impedance made of them is in range too, or is as good as open.
        Impedance::new(impedance.real, impedance.imaginary).map_or(Load::Open, Load::Impedance)
    }

    /// Logarithm of load torque over motor torque: positive where it slows down.
    pub(crate) fn slowing(&self, slip: f64, amps: f64) -> f64 {
        libm::log(self.load_watts(slip) / self.torque_watts(slip, amps)).clamp(-FAR, FAR)
    }

    /// Whether the torque of a standing motor at `amps` leaves it standing.
    pub(crate) fn stays_standing(&self, amps: f64) -> bool {
        self.torque_watts(1.0, amps) <= self.spec.breakaway_watts
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_textbook_motor_takes_its_textbook_current() {
        // S. J. Chapman, Electric Machinery Fundamentals, worked example of a 460 V, 25 hp, 60 Hz, four-pole motor
        // (from memory): R1 0.641, R2 0.332, X1 1.106, X2 0.464, Xm 26.3 ohm a phase; at a slip of 2.2 % and
        // 460/sqrt 3 V a phase it takes 18.88 A at a power factor of 0.833.
        let motor = InductionMotor::new(InductionMotorSpec {
            stator_ohms: 0.641,
            stator_reactance_ohms: 1.106,
            magnetising_ohms: 26.3,
            rotor_ohms: 0.332,
            rotor_reactance_ohms: 0.464,
            steady_watts: 0.0,
            windage_watts: 1.0,
            breakaway_watts: 0.0,
            joules: 1.0,
        })
        .expect("in range");
        let impedance = motor.impedance(0.022);
        let amps = 460.0 / libm::sqrt(3.0) / impedance.magnitude();
        // The book rounds to four digits.
        assert!((amps - 18.88).abs() < 0.02, "{amps}");
        assert!((impedance.real / impedance.magnitude() - 0.833).abs() < 0.001);
        // What the stator does not turn into heat crosses the air gap.
        let torque = 3.0 * motor.torque_watts(0.022, amps);
        let input = 3.0 * amps * amps * impedance.real;
        let stator = 3.0 * amps * amps * 0.641;
        assert!((torque + stator - input).abs() < 1e-9 * input);
    }
}
