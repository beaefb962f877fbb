//! Motors without brushes: fans, pumps, record players, compressors.
//!
//! The equivalent circuit from the plate: the standing motor takes 5 to 8 times the rated current (published second
//! hand) at 55 degrees of lag (design value), stator and rotor alike; slip and magnetising reactance are those that give
//! the plate's current and power factor at rated voltage.

use super::Card;
use crate::complex::Complex;
use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Impedance, InductionMotor, InductionMotorSpec, Load};
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "induction-motor",
    conditions: &[
        Condition::Healthy,
        Condition::Idle,
        Condition::Overloaded,
        Condition::Stalled,
        Condition::ShortedWinding,
        Condition::Shorted,
        Condition::OpenCircuit,
    ],
    healthy_shares: (0.7, 1.1),
    // Shaded-pole motors 0.5 to 0.65 (from memory), larger ones more.
    usual_power_factor: 0.65,
    details: &[
        ClassDefault::new(Detail::StallMultiple, 5.0, (1.5, 10.0), Standing::Published),
        ClassDefault::new(Detail::BreakawayShare, 0.25, (0.0, 3.0), Standing::Design),
    ],
    build,
};

/// Lag of the standing motor's current, as cosine and sine.
const STANDING_LAG: (f64, f64) = (0.573_6, 0.819_2);

/// Part of a fan's torque that does not fall with speed (design value).
const STEADY_PART: f64 = 0.15;

/// Seconds of rated power stored in the rotor and what it drives (design value: 0.5 to 3 s to start is published).
const ROTOR_SECONDS: f64 = 0.5;

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let factor = plate.assumed_power_factor();
    let rated_amps = plate.watts() / (plate.volts() * factor);
    let rated = plate.volts() / rated_amps;
    let half = 0.5 * rated / plate.detail(Detail::StallMultiple);
    let (ohms, reactance) = (half * STANDING_LAG.0, half * STANDING_LAG.1);
    let (slip, magnetising_ohms) = match_plate(rated, factor, ohms, reactance);
    let motor = |steady_watts, windage_watts, breakaway_watts| {
        InductionMotor::new(InductionMotorSpec {
            stator_ohms: ohms,
            stator_reactance_ohms: reactance,
            magnetising_ohms,
            rotor_ohms: ohms,
            rotor_reactance_ohms: reactance,
            steady_watts,
            windage_watts,
            breakaway_watts,
            joules: ROTOR_SECONDS * plate.watts(),
        })
    };
    let bare = motor(0.0, 1.0, 0.0)?;
    let rated_watts = bare.torque_watts(slip, plate.volts() / bare.impedance(slip).magnitude());
    let times = match condition {
        Condition::Idle => 0.1,
        Condition::Overloaded => 1.6,
        _ => share,
    };
    let torque = times * rated_watts;
    let speed = 1.0 - slip;
    let standing = bare.impedance(1.0);
    match condition {
        Condition::Stalled => Impedance::new(standing.real, standing.imaginary).map(Load::Impedance),
        Condition::ShortedWinding => {
            Impedance::new(0.5 * standing.real, 0.25 * standing.imaginary).map(Load::Impedance)
        }
        _ => motor(
            STEADY_PART * torque,
            (1.0 - STEADY_PART) * torque / (speed * speed),
            times * plate.detail(Detail::BreakawayShare) * rated_watts,
        )
        .map(Load::InductionMotor),
    }
}

/// Slip and magnetising reactance that give the plate's impedance, by repeated correction of the rotor branch behind
/// the stator's drop.
fn match_plate(rated: f64, factor: f64, ohms: f64, reactance: f64) -> (f64, f64) {
    let sine = libm::sqrt((1.0 - factor) * (1.0 + factor)).max(0.05);
    // Take the stator away from the plate's impedance; what is left is the magnetising reactance beside the rotor.
    let inner =
        Complex::new((rated * factor - ohms).max(0.1 * rated), (rated * sine - reactance).max(1e-3 * rated));
    let admittance = inner.reciprocal();
    // Conductance g = r / (r^2 + x^2) for r = R2/s: the larger root is the small slip.
    let g = admittance.real;
    let discriminant = (1.0 - 4.0 * g * g * reactance * reactance).max(0.0);
    let r = (1.0 + libm::sqrt(discriminant)) / (2.0 * g);
    let rotor = Complex::new(r, reactance).reciprocal();
    let susceptance = (rotor.imaginary - admittance.imaginary).max(1e-3 / rated);
    ((ohms / r).clamp(1e-4, 0.9), 1.0 / susceptance)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;

    #[test]
    fn at_full_voltage_it_takes_what_the_plate_says() {
        let plate = Plate::new(Family::InductionMotor, 230.0, 60.0, None).expect("a fan");
        let Ok(Load::InductionMotor(motor)) = plate.load(Condition::Healthy, 1.0) else { panic!("a motor") };
        // Find the running slip by bisection on the torques.
        let amps = |slip: f64| 230.0 / motor.impedance(slip).magnitude();
        let (mut low, mut high) = (1e-6, 0.3);
        for _ in 0..60 {
            let slip = f64::midpoint(low, high);
            let pulls = motor.torque_watts(slip, amps(slip)) > motor.load_watts(slip);
            if pulls { high = slip } else { low = slip }
        }
        let impedance = motor.impedance(low);
        let watts = amps(low) * amps(low) * impedance.real;
        assert!((watts / 60.0 - 1.0).abs() < 1e-6, "{watts} W at a slip of {low}");
        assert!((impedance.real / impedance.magnitude() / 0.65 - 1.0).abs() < 1e-6);
        let standing = 230.0 / motor.impedance(1.0).magnitude() / (60.0 / 230.0 / 0.65);
        // Published: 5 to 8; the magnetising branch beside the rotor adds a little to the default of 5.
        assert!((4.9..5.6).contains(&standing), "{standing}");
    }
}
