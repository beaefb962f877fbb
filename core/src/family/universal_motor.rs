//! Motors with brushes: drills, mixers, vacuum cleaners.
//!
//! From the plate: `|Z| = V / I` at work, reactance from the power factor (0.9 to 0.98 at work, from memory), winding
//! resistance from the current of the standing motor (4 to 8 times rated, from memory), the rest is back-EMF. Healthy
//! means running free: nobody puts a tool to work at its first power-up.

use super::Card;
use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Impedance, Load, UniversalMotor, UniversalMotorSpec};
use crate::plate::Plate;
use crate::roots::{self, Tolerance};

pub(super) static CARD: Card = Card {
    name: "universal-motor",
    conditions: &[
        Condition::Healthy,
        Condition::Working,
        Condition::Stalled,
        Condition::Overloaded,
        Condition::ShortedWinding,
        Condition::Shorted,
        Condition::OpenCircuit,
    ],
    // Of the watts of the free-running motor: gears, grease and brushes differ (design value).
    healthy_shares: (0.6, 1.5),
    usual_power_factor: 0.98,
    details: &[
        ClassDefault::new(Detail::NoLoadShare, 0.35, (0.05, 0.9), Standing::Design),
        ClassDefault::new(Detail::StallMultiple, 4.0, (1.5, 12.0), Standing::Memory),
    ],
    build,
};

/// Part of a load torque that is there at standstill; the rest grows with the square of speed (design value).
const STANDING_PART: f64 = 0.3;

/// Times the rated torque of a motor whose bearings bind (design value).
const BINDING: f64 = 1.6;

/// Seconds of rated power stored in the turning rotor (design value).
const ROTOR_SECONDS: f64 = 0.2;

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let factor = plate.assumed_power_factor();
    let rated_amps = plate.watts() / (plate.volts() * factor);
    let rated = plate.volts() / rated_amps;
    let reactance_ohms = rated * libm::sqrt((1.0 - factor) * (1.0 + factor));
    let standing = rated / plate.detail(Detail::StallMultiple);
    let square = standing * standing - reactance_ohms * reactance_ohms;
    // A printed power factor can leave no room for the multiple: then the windings are next to nothing.
    let ohms = libm::sqrt(square.max(0.0)).max(0.02 * rated);
    let speed_ohms = (rated * factor - ohms).max(0.02 * rated);
    let rated_watts = speed_ohms * rated_amps * rated_amps;
    let turning = |torque: f64, speed_ohms: f64| {
        UniversalMotor::new(UniversalMotorSpec {
            ohms,
            reactance_ohms,
            speed_ohms,
            standing_watts: STANDING_PART * torque * rated_watts,
            windage_watts: (1.0 - STANDING_PART) * torque * rated_watts,
            joules: ROTOR_SECONDS * rated_watts,
        })
    };
    let motor = match condition {
        Condition::Working => turning(1.0, speed_ohms),
        Condition::Overloaded => turning(BINDING, speed_ohms),
        Condition::Stalled => turning(1.0, 0.0),
        Condition::ShortedWinding => {
            return Impedance::new(0.5 * ohms, 0.25 * reactance_ohms).map(Load::Impedance);
        }
        _ => {
            let wanted = share * plate.detail(Detail::NoLoadShare) * plate.watts();
            let excess = |ln_torque: f64| {
                let taken = turning(libm::exp(ln_torque), speed_ohms)
                    .map_or(f64::NAN, |motor| motor.watts_at(plate.volts(), 50.0));
                libm::log(wanted / taken)
            };
            let found =
                roots::decreasing_from(excess, (-12.0, 1.0), -1.5, Tolerance { x: 1e-10, residual: 1e-10 });
            turning(found.map_or(0.2, |root| libm::exp(root.x)), speed_ohms)
        }
    };
    motor.map(Load::UniversalMotor)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;

    fn watts(condition: Condition) -> f64 {
        let plate = Plate::new(Family::UniversalMotor, 230.0, 500.0, None).expect("a drill");
        let Ok(Load::UniversalMotor(motor)) = plate.load(condition, 1.0) else { panic!("a motor") };
        motor.watts_at(230.0, 50.0)
    }

    #[test]
    fn at_full_voltage_it_takes_what_the_plate_and_the_defaults_say() {
        assert!((watts(Condition::Working) / 500.0 - 1.0).abs() < 1e-6);
        assert!((watts(Condition::Healthy) / 175.0 - 1.0).abs() < 1e-6);
        assert!(watts(Condition::Overloaded) > 550.0);
    }
}
