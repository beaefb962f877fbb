//! Motors against worked examples of textbooks, alone and behind a bank of lamps.
//!
//! The numbers of both books are from memory: the digits were seen in no document here. They hang together so tightly
//! (each answer follows from the data by the book's own equations) that a wrong one would show.

use std::f64::consts::PI;

use lampladder_core::bank::Bank;
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{InductionMotor, InductionMotorSpec, Load, UniversalMotor, UniversalMotorSpec};
use lampladder_core::steady::{self, Equilibrium};
use lampladder_core::supply::Supply;
use lampladder_core::switch_on::{Options, Sample, straight};

/// The books round to three or four digits.
const ROUNDED: f64 = 2e-3;

#[track_caller]
fn assert_near(ours: f64, books: f64, share: f64) {
    assert!((ours / books - 1.0).abs() <= share, "{ours}, in the book {books}");
}

/// `count` equal lamps in parallel, and their resistance together at a current, ohms.
fn bank(watts: f64, count: usize, amps: f64) -> (Bank, f64) {
    let bank = Bank::new(vec![vec![Lamp::new(230.0, watts).expect("a size"); count]]).expect("up to eight");
    let ohms = bank.at_amps(amps).ohms();
    (bank, ohms)
}

/// The volts of the supply that leaves `volts` to a load of this power factor behind a resistance, by phasors.
fn behind(ohms: f64, amps: f64, volts: f64, power_factor: f64) -> f64 {
    let across = volts * (1.0 - power_factor.powi(2)).sqrt();
    (volts * power_factor + ohms * amps).hypot(across)
}

fn points(supply: &Supply, bank: &Bank, load: &Load) -> Vec<Equilibrium> {
    steady::solve(supply, bank, load).expect("solvable").equilibria
}

// Series motor: B. L. Theraja, A. K. Theraja, A Textbook of Electrical Technology, vol. II, AC and DC Machines, chapter
// "Single-Phase Motors", section on universal motors, worked example (from memory, the number of the example not):
// 250 W, 220 V, 50 Hz, 20 ohm and 0.4 H. On 220 V direct current it takes 1.0 A at 2000 r/min. On 220 V alternating
// current, taking 1.0 A again: 1605 r/min, power factor 0.82 lagging, 160.5 W developed, 0.955 N m.

const SERIES_OHMS: f64 = 20.0;
const SERIES_HENRIES: f64 = 0.4;
/// Back-EMF on direct current: 220 V - 1 A x 20 ohm; at 1 A and the full 2000 r/min so many ohms.
const SPEED_OHMS: f64 = 200.0;

/// The motor, against a load whose torque grows with the square of speed and is the book's at `speed`, over 2000 r/min.
fn series_motor(speed: f64) -> UniversalMotor {
    UniversalMotor::new(UniversalMotorSpec {
        ohms: SERIES_OHMS,
        reactance_ohms: 2.0 * PI * 50.0 * SERIES_HENRIES,
        speed_ohms: SPEED_OHMS,
        standing_watts: 0.0,
        // 1 A makes a torque of 200 W at 2000 r/min, whatever the speed.
        windage_watts: SPEED_OHMS / (speed * speed),
        // Heavy enough to turn evenly, though torque pulses twice a period.
        joules: 100.0,
    })
    .expect("in range")
}

fn last(supply: &Supply, load: &Load) -> Sample {
    let run = straight(supply, load, &Options { seconds: 6.0, ..Options::default() }).expect("runs");
    run.samples.last().expect("an end").clone()
}

#[test]
fn a_series_motor_slows_on_alternating_current_as_in_the_textbook() {
    let motor = series_motor(1605.0 / 2000.0);
    // Behind lamps: the supply is raised by what four 100 W lamps take at the book's 1 A.
    let (lamps, ohms) = bank(100.0, 4, 1.0);
    let supply = Supply::new(behind(ohms, 1.0, 220.0, 0.82), 50.0, 0.0).expect("in range");
    let found = points(&supply, &lamps, &Load::UniversalMotor(motor));
    assert_eq!(found.len(), 1);
    let point = &found[0];
    assert!(point.stable);
    assert_near(point.amps, 1.0, ROUNDED);
    assert_near(point.load_volts, 220.0, ROUNDED);
    // Two digits in the book.
    assert!((point.load_power_factor - 0.82).abs() < 0.005, "{}", point.load_power_factor);
    let speed = motor.speed(point.amps);
    assert_near(2000.0 * speed, 1605.0, ROUNDED);
    let developed = point.load_watts - point.amps.powi(2) * SERIES_OHMS;
    assert_near(developed, 160.5, 2.0 * ROUNDED);
    assert_near(developed / (2.0 * PI * 2000.0 / 60.0 * speed), 0.955, 2.0 * ROUNDED);
}

#[test]
fn a_series_motor_comes_to_the_textbooks_speeds_by_itself() {
    // In the time domain, from standstill, with no lamp; its RMS values over one period are good to half a per cent.
    const TIME: f64 = 5e-3;
    let direct = Supply::new(220.0, 0.0, 0.0).expect("in range");
    let end = last(
        &direct,
        &Load::UniversalMotor(
            UniversalMotor::new(UniversalMotorSpec { reactance_ohms: 0.0, ..*series_motor(1.0).spec() })
                .expect("in range"),
        ),
    );
    assert_near(end.amps_rms, 1.0, TIME);
    assert_near(end.load_speed.expect("a motor"), 1.0, TIME);
    let mains = Supply::new(220.0, 50.0, 0.0).expect("in range");
    let end = last(&mains, &Load::UniversalMotor(series_motor(1605.0 / 2000.0)));
    assert_near(end.amps_rms, 1.0, TIME);
    assert_near(end.load_speed.expect("a motor"), 1605.0 / 2000.0, TIME);
}

// Induction motor: S. J. Chapman, Electric Machinery Fundamentals, 4th ed. (2005), chapter 7, examples 7-3 and 7-5 (from
// memory): 460 V, 25 hp, 60 Hz, four poles, star-connected, ohms per phase R1 0.641, R2 0.332, X1 1.106, X2 0.464, XM
// 26.3. 7-3: at a slip of 2.2 %: 18.88 A at a power factor of 0.833 lagging, input 12,530 W, stator copper 685 W, air gap
// 11,845 W, induced torque 62.8 N m at 188.5 rad/s. 7-5: pull-out torque 229 N m at a slip of 0.198, starting torque 104 N m;
// with twice the rotor resistance the slip of the pull-out doubles and the motor starts with 170 N m.

/// 460 V over the root of three.
const PHASE_VOLTS: f64 = 265.58;
const SYNCHRONOUS: f64 = 188.5;

/// The motor, held by a torque that does not depend on speed; watts of one phase at synchronous speed.
fn induction_motor(steady_watts: f64) -> InductionMotor {
    InductionMotor::new(InductionMotorSpec {
        stator_ohms: 0.641,
        stator_reactance_ohms: 1.106,
        magnetising_ohms: 26.3,
        rotor_ohms: 0.332,
        rotor_reactance_ohms: 0.464,
        steady_watts,
        windage_watts: 0.0,
        breakaway_watts: 0.0,
        joules: 100.0,
    })
    .expect("in range")
}

/// Torque straight on the book's supply, newton metres of all three phases.
fn newton_metres(motor: &InductionMotor, slip: f64) -> f64 {
    3.0 * motor.torque_watts(slip, PHASE_VOLTS / motor.impedance(slip).magnitude()) / SYNCHRONOUS
}

#[test]
fn an_induction_motor_takes_its_textbook_current_and_power() {
    let motor = induction_motor(1.0);
    let impedance = motor.impedance(0.022);
    let amps = PHASE_VOLTS / impedance.magnitude();
    assert_near(amps, 18.88, ROUNDED);
    assert!((impedance.real / impedance.magnitude() - 0.833).abs() < 1e-3);
    assert_near(3.0 * amps * amps * impedance.real, 12_530.0, 2.0 * ROUNDED);
    assert_near(3.0 * amps * amps * 0.641, 685.0, 2.0 * ROUNDED);
    assert_near(3.0 * motor.torque_watts(0.022, amps), 11_845.0, 2.0 * ROUNDED);
    assert_near(newton_metres(&motor, 0.022), 62.8, 2.0 * ROUNDED);
}

#[test]
fn an_induction_motor_pulls_out_and_starts_as_in_the_textbook() {
    // The book replaces the stator by a Thevenin equivalent whose reactance it takes as X1 itself, 1.106 ohm; by its own
    // circuit it is 1.075 ohm. Ours is exact and hence 1 to 3 % stronger: the book's rounding, not our error.
    const ROUGH: f64 = 0.03;
    let pull_out = |motor: &InductionMotor| {
        let slips = (1..=1000).map(|step| f64::from(step) / 1000.0);
        let torques = slips.map(|slip| (slip, newton_metres(motor, slip)));
        torques.max_by(|a, b| a.1.total_cmp(&b.1)).expect("a thousand")
    };
    let motor = induction_motor(1.0);
    let (slip, torque) = pull_out(&motor);
    assert_near(torque, 229.0, ROUGH);
    assert_near(slip, 0.198, ROUGH);
    assert_near(newton_metres(&motor, 1.0), 104.0, ROUGH);
    let doubled = InductionMotorSpec { rotor_ohms: 2.0 * 0.332, ..*motor.spec() };
    let doubled = InductionMotor::new(doubled).expect("in range");
    let (slip_doubled, torque_doubled) = pull_out(&doubled);
    assert_near(torque_doubled, torque, 1e-3);
    // To the step of the sweep.
    assert!((slip_doubled - 2.0 * slip).abs() <= 2e-3, "{slip_doubled} {slip}");
    assert_near(newton_metres(&doubled, 1.0), 170.0, ROUGH);
}

#[test]
fn the_solver_finds_the_textbooks_slip_behind_lamps() {
    // One phase behind eight 1000 W lamps, the supply raised by what they take at the book's current; the torque is the
    // book's. The textbook's point must be among the steady ones, and it must hold.
    let (lamps, ohms) = bank(1000.0, 8, 18.88);
    let supply = Supply::new(behind(ohms, 18.88, PHASE_VOLTS, 0.833), 60.0, 0.0).expect("in range");
    let motor = induction_motor(11_845.0 / 3.0);
    let found = points(&supply, &lamps, &Load::InductionMotor(motor));
    let near = |point: &&Equilibrium| (point.amps / 18.88 - 1.0).abs() < 2.0 * ROUNDED;
    let point = found.iter().find(near).unwrap_or_else(|| panic!("{found:#?}"));
    assert!(point.stable);
    assert_near(point.load_volts, PHASE_VOLTS, 2.0 * ROUNDED);
    assert!((point.load_power_factor - 0.833).abs() < 2e-3, "{}", point.load_power_factor);
    assert_near(3.0 * point.load_watts, 12_530.0, 3.0 * ROUNDED);
}
