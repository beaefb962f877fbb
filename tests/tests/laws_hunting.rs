//! The period of a hunting supply as the steady solver gives it, against runs of the time domain that are finer, longer
//! and begin at another moment.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::family::Family;
use lampladder_core::hunt;
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Corrected, CorrectedSpec, Load};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::steady::{self, Outcome};
use lampladder_core::supply::Supply;
use lampladder_core::switch_on::{Moment, Options, simulate};
use lampladder_tests::random::{cases, log_uniform, mains};
use proptest::prelude::*;

/// The stated band: starts fall on crests of the mains, so that pulses differ by a period of it; and some beat.
const SHARE: f64 = 0.05;

fn converter() -> impl Strategy<Value = Load> {
    let family = prop::sample::select(&[Family::SwitchMode, Family::SwitchModeCorrected][..]);
    let condition = prop::sample::select(&[Condition::Healthy, Condition::Overloaded][..]);
    let details = (prop::sample::select(&[0.0, 0.02, 0.1, 0.6, 2.0][..]), log_uniform(0.1, 20.0), 0.1..50.0);
    (family, condition, log_uniform(5.0, 300.0), details).prop_map(|(family, condition, watts, details)| {
        let details = vec![
            (Detail::RestartSeconds, details.0),
            (Detail::MicrofaradsPerWatt, details.1),
            (Detail::SeriesOhms, details.2),
        ];
        let spec = PlateSpec { watts: Some(watts), details, ..PlateSpec::new(family, 230.0) };
        Plate::from_spec(spec).and_then(|plate| plate.load(condition, 1.0)).expect("in range")
    })
}

#[test]
fn a_supply_below_the_start_voltage_starts_behind_no_lamps_at_all() {
    // The class default starts at 99 V on the reservoir, some 71 V of mains.
    for family in [Family::SwitchMode, Family::SwitchModeCorrected] {
        let adapter = Plate::new(family, 230.0, 20.0, None).expect("a plate");
        let load = adapter.load(Condition::Healthy, 1.0).expect("its own");
        for watts in [15.0, 200.0, 5000.0] {
            let bank = Bank::single(Lamp::new(230.0, watts).expect("a lamp"));
            let outcome = |volts: f64| {
                let supply = Supply::new(volts, 50.0, 0.0).expect("in range");
                let solved = steady::solve(&supply, &bank, &load).expect("solvable");
                let dc_volts = solved.settled().and_then(|point| point.load_dc_volts);
                (solved.outcome, dc_volts)
            };
            let (below, dc_volts) = outcome(65.0);
            assert_eq!(below, Outcome::DoesNotStart, "{watts} W");
            // What is told with it: the reservoir's volts, which stay below the start.
            assert!(dc_volts.is_some_and(|volts| volts > 85.0 && volts < 99.0), "{dc_volts:?}");
            assert_ne!(outcome(75.0).0, Outcome::DoesNotStart, "{watts} W");
        }
    }
}

/// What can be called the period of the later half of all pulses, seconds: the middle one, and the mean of an even number;
/// none where there are fewer than three.
///
/// Most trains are even, and both are the same. Starts fall on crests of the mains, though: a long pulse and a short one
/// can take turns, which the mean tells; and many short ones can be followed by a pause, which the middle one tells.
fn simulated(supply: &Supply, bank: &Bank, load: &Load, seconds: f64) -> Option<[f64; 2]> {
    let options =
        Options { seconds, moment: Moment::Degrees(50.0), sample_seconds: seconds, ..Options::default() };
    let starts = simulate(supply, bank, load, &options).ok()?.starts;
    let gaps: Vec<f64> = starts.windows(2).map(|pair| pair[1] - pair[0]).collect();
    let mut late = gaps.get(gaps.len() / 2..).filter(|late| late.len() > 1)?.to_vec();
    let even = &late[late.len() % 2..];
    #[expect(clippy::cast_precision_loss, reason = "a few pulses")]
    let mean = even.iter().sum::<f64>() / even.len() as f64;
    late.sort_by(f64::total_cmp);
    Some([late[late.len() / 2], mean])
}

proptest! {
    #![proptest_config(cases(40))]

    #[test]
    fn the_period_of_hunting_is_that_of_the_time_domain(
        supply in mains(), watts in log_uniform(10.0, 200.0), load in converter(),
    ) {
        let bank = Bank::single(Lamp::new(230.0, watts).expect("a lamp"));
        let Ok(solved) = steady::solve(&supply, &bank, &load) else { return Ok(()) };
        prop_assume!(solved.outcome == Outcome::Hunts);
        let Some(pulse) = hunt::pulse(&supply, &bank, &load) else { return Ok(()) };
        let period = pulse.period_seconds;
        let (dim, bright) = (pulse.dimmest_kelvin[0], pulse.brightest_kelvin[0]);
        prop_assert!(299.0 < dim && dim <= bright && bright < 3600.0, "{pulse:?}");
        let Some(theirs) = simulated(&supply, &bank, &load, (20.0 * period + 1.0).min(30.0)) else { return Ok(()) };
        let near = |theirs: &f64| (period - theirs).abs() <= 1.0 / supply.hertz() + SHARE * theirs;
        prop_assert!(theirs.iter().any(near), "{period} s, in the time domain {theirs:?} s");
    }
}

#[test]
fn long_and_short_pulses_that_take_turns_have_their_mean_as_period() {
    let spec = CorrectedSpec {
        watts: 46.788_507_371_651_235,
        start_volts: 99.0,
        stop_volts: 81.0,
        restart_seconds: 0.6,
        farads: 3.755_211_758_230_547_3e-6,
    };
    let load = Load::Corrected(Corrected::new(spec).expect("in range"));
    let supply = Supply::new(168.095_599_165_171_2, 50.0, 0.0).expect("in range");
    let bank = Bank::single(Lamp::new(230.0, 125.709_405_455_245_4).expect("a lamp"));
    let options = Options { seconds: 6.0, moment: Moment::Degrees(50.0), ..Options::default() };
    let starts = simulate(&supply, &bank, &load, &options).expect("simulated").starts;
    let gaps: Vec<f64> = starts.windows(2).skip(3).map(|pair| pair[1] - pair[0]).collect();
    let far = |pair: &[f64]| (pair[1] - pair[0]).abs() > 0.2;
    assert!(gaps.len() > 2 && gaps.windows(2).all(far), "{gaps:?}");
    let period = hunt::pulse(&supply, &bank, &load).expect("it pulses").period_seconds;
    assert!((period - 0.73).abs() < 0.02, "{period}, of {gaps:?}");
}

#[test]
fn an_adapter_behind_a_small_lamp_pulses_with_a_known_period_and_none_is_invented() {
    let bank = Bank::single(Lamp::new(230.0, 25.0).expect("a lamp"));
    let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
    let adapter = Plate::new(Family::SwitchMode, 230.0, 60.0, None).expect("a plate");
    let load = adapter.load(Condition::Healthy, 1.0).expect("its own");
    assert_eq!(steady::solve(&supply, &bank, &load).expect("solvable").outcome, Outcome::Hunts);
    let period = hunt::pulse(&supply, &bank, &load).expect("it pulses").period_seconds;
    // It can not be shorter than the wait before each start.
    assert!(period > 0.6 && period < 2.0, "{period}");
    let theirs = simulated(&supply, &bank, &load, 10.0).expect("it pulses");
    assert!(theirs.iter().all(|theirs| (period - theirs).abs() < 0.02), "{period} {theirs:?}");
    // Behind a lamp that can hardly charge so much, the wait is beyond the search: no number rather than a wrong one.
    let details = vec![(Detail::MicrofaradsPerWatt, 20.0), (Detail::RestartSeconds, 10.0)];
    let spec = PlateSpec { watts: Some(300.0), details, ..PlateSpec::new(Family::SwitchMode, 230.0) };
    let slow =
        Plate::from_spec(spec).and_then(|plate| plate.load(Condition::Healthy, 1.0)).expect("in range");
    assert_eq!(steady::solve(&supply, &bank, &slow).expect("solvable").outcome, Outcome::Hunts);
    assert_eq!(hunt::pulse(&supply, &bank, &slow), None);
}
