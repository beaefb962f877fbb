//! Kirchhoff's laws, the balance of power, and that no steady point is missed, on random circuits.

use lampladder_core::bank::Bank;
use lampladder_core::load::{Corrected, CorrectedSpec, Draw, Load, Mode, Rectifier};
use lampladder_core::steady::{self, Equilibrium, Outcome, Steady, SteadyError};
use lampladder_core::supply::Supply;
use lampladder_tests::random::{
    any_lamp, bank, cases, hungry, impedance, induction_motor, load, log_uniform, mains, mains_lamp,
    rectifier, supply,
};
use proptest::prelude::*;

/// The issue's own limits: Kirchhoff's residual over the supply, and the imbalance of power.
const KIRCHHOFF: f64 = 1e-9;
const POWER: f64 = 1e-6;

/// What six hundred midpoints of each smooth part of half a wave leave over.
const QUADRATURE: f64 = 1e-5;

/// The answer; none where a lamp would burn out or the load has no meaning on this supply, which are refusals.
fn solved(supply: &Supply, bank: &Bank, load: &Load) -> Option<Steady> {
    match steady::solve(supply, bank, load) {
        Ok(solved) => Some(solved),
        Err(SteadyError::FilamentMelts { .. } | SteadyError::Input(_)) => None,
        Err(other) => panic!("{other}"),
    }
}

/// Its steady points alone: how long a hunting one takes is no matter here.
fn points(supply: &Supply, bank: &Bank, load: &Load) -> Option<Vec<Equilibrium>> {
    match steady::equilibria(supply, bank, load) {
        Ok(points) => Some(points),
        Err(SteadyError::FilamentMelts { .. } | SteadyError::Input(_)) => None,
        Err(other) => panic!("{other}"),
    }
}

/// What holds at every steady point, whatever the load: the bank by Kirchhoff's laws, the loop by the balance of power,
/// which for a resistive bank is `Vs^2 = Vl^2 + (RI)^2 + 2RP` for any waveform.
fn check_point(supply: &Supply, bank: &Bank, point: &Equilibrium) -> Result<(), TestCaseError> {
    let volts = supply.volts();
    for number in [point.amps, point.bank_volts, point.load_volts, point.load_watts, point.load_power_factor]
    {
        prop_assert!(number.is_finite() && number >= 0.0, "{point:?}");
    }
    prop_assert!(point.load_power_factor <= 1.0);
    let mut chain = 0.0;
    let mut bank_watts = 0.0;
    for (group, lamps) in point.lamps.iter().zip(bank.groups()) {
        let amps: f64 = group.iter().map(|lamp| lamp.amps).sum();
        prop_assert!(
            (amps - point.amps).abs() <= KIRCHHOFF * point.amps.max(1e-9),
            "{amps} of {}",
            point.amps
        );
        for lamp in group {
            prop_assert!((lamp.volts - group[0].volts).abs() <= KIRCHHOFF * volts);
            prop_assert!((lamp.volts * lamp.amps - lamp.watts).abs() <= POWER * lamp.watts.max(1e-12));
            bank_watts += lamp.watts;
        }
        prop_assert_eq!(group.len(), lamps.len());
        chain += group[0].volts;
    }
    prop_assert!((chain - point.bank_volts).abs() <= KIRCHHOFF * volts, "{chain} of {}", point.bank_volts);
    prop_assert!((bank_watts - point.bank_volts * point.amps).abs() <= POWER * bank_watts.max(1e-12));
    let drop = point.bank_volts + supply.ohms() * point.amps;
    let square =
        point.load_volts.powi(2) + drop.powi(2) + 2.0 * drop * point.load_watts / point.amps.max(1e-300);
    let source = if point.amps > 0.0 { square.sqrt() } else { point.load_volts };
    prop_assert!((source / volts - 1.0).abs() <= KIRCHHOFF, "{source} V of {volts} V: {point:?}");
    Ok(())
}

proptest! {
    #![proptest_config(cases(300))]

    #[test]
    fn every_steady_point_of_any_load_obeys_kirchhoff(supply in supply(), bank in bank(mains_lamp()), load in load()) {
        let Some(solved) = solved(&supply, &bank, &load) else { return Ok(()) };
        for point in &solved.equilibria {
            check_point(&supply, &bank, point)?;
        }
        for pair in solved.equilibria.windows(2) {
            prop_assert!(pair[0].amps <= pair[1].amps, "in order of rising current");
        }
        match solved.outcome {
            Outcome::Settles => prop_assert!(solved.settled().is_some()),
            Outcome::Hunts => prop_assert!(solved.equilibria.iter().all(|point| !point.stable)),
            Outcome::DoesNotStart => prop_assert!(solved.equilibria.iter().all(|point| point.amps == 0.0)),
            _ => {}
        }
    }

    #[test]
    fn any_lamps_at_all_obey_kirchhoff(supply in supply(), bank in bank(any_lamp()), load in impedance()) {
        // Lamps of 1 V beside lamps of 500 V: most would burn out and are refused, the rest must still be right.
        let Some(solved) = solved(&supply, &bank, &Load::Impedance(load)) else { return Ok(()) };
        for point in &solved.equilibria {
            check_point(&supply, &bank, point)?;
        }
    }

    #[test]
    fn phasors_close_before_a_linear_load(supply in mains(), bank in bank(mains_lamp()), load in impedance()) {
        let Some(solved) = solved(&supply, &bank, &Load::Impedance(load)) else { return Ok(()) };
        prop_assert_eq!(solved.equilibria.len(), 1);
        let point = &solved.equilibria[0];
        let in_phase = point.bank_volts + point.amps * (supply.ohms() + load.ohms());
        let closed = in_phase.hypot(point.amps * load.reactance_ohms());
        prop_assert!((closed / supply.volts() - 1.0).abs() < KIRCHHOFF, "{closed} of {}", supply.volts());
    }

    #[test]
    fn the_waveform_itself_has_the_current_and_power_of_a_rectifier(
        supply in mains(), bank in bank(mains_lamp()), rectifier in rectifier(),
    ) {
        let Some(solved) = solved(&supply, &bank, &Load::Rectifier(rectifier)) else { return Ok(()) };
        for point in solved.equilibria.iter().filter(|point| point.amps > 0.0) {
            let wave = waveform(&supply, point, &rectifier);
            prop_assert!((wave.amps / point.amps - 1.0).abs() < QUADRATURE, "{wave:?} {point:?}");
            prop_assert!((wave.volts / point.load_volts - 1.0).abs() < QUADRATURE, "{wave:?} {point:?}");
            prop_assert!((wave.watts / point.load_watts - 1.0).abs() < 2.0 * QUADRATURE, "{wave:?} {point:?}");
            let dc_volts = point.load_dc_volts.expect("a reservoir");
            let drawn = match rectifier.spec().draw {
                Draw::Ohms(ohms) => dc_volts / ohms,
                Draw::Watts { watts, .. } => watts / dc_volts,
                // Gives way in the last per cent of the voltage.
                Draw::Amps(amps) if dc_volts > 0.02 * supply.volts() => amps,
                _ => wave.mean_amps,
            };
            prop_assert!((wave.mean_amps / drawn - 1.0).abs() < QUADRATURE, "{wave:?}, drawn {drawn}");
        }
    }
}

/// What a current at an instant adds up to.
#[derive(Debug, Default)]
struct Wave {
    amps: f64,
    volts: f64,
    watts: f64,
    mean_amps: f64,
}

/// Half a period of the circuit around a rectifier that holds its DC voltage, instant by instant.
fn waveform(supply: &Supply, point: &Equilibrium, rectifier: &Rectifier) -> Wave {
    const STEPS: u32 = 600;
    let spec = rectifier.spec();
    let before = point.bank_volts / point.amps + supply.ohms();
    let held = point.load_dc_volts.expect("a reservoir") + spec.diode_volts;
    let shunt = spec.shunt_ohms.map_or(0.0, |ohms| 1.0 / ohms);
    let mut wave = Wave::default();
    // Without the rectifier the terminals would stand at `idle`, behind `inner`. It conducts between two angles, so that
    // each of the three parts is smooth, however narrow the pulse.
    let inner = before / (1.0 + before * shunt);
    let crest = std::f64::consts::SQRT_2 * supply.volts() / (1.0 + before * shunt);
    let begins = (held / crest).min(1.0).asin();
    let ends = std::f64::consts::PI - begins;
    for (from, to) in [(0.0, begins), (begins, ends), (ends, std::f64::consts::PI)] {
        for step in 0..STEPS {
            let angle = from + (f64::from(step) + 0.5) / f64::from(STEPS) * (to - from);
            let idle = crest * angle.sin();
            let rectified = ((idle - held) / (inner + spec.series_ohms)).max(0.0);
            let volts = idle - rectified * inner;
            let amps = rectified + volts * shunt;
            let weight = (to - from) / std::f64::consts::PI / f64::from(STEPS);
            wave.amps += weight * amps * amps;
            wave.volts += weight * volts * volts;
            wave.watts += weight * volts * amps;
            wave.mean_amps += weight * rectified;
        }
    }
    Wave { amps: wave.amps.sqrt(), volts: wave.volts.sqrt(), ..wave }
}

/// Watts that a constant-power load gets at a current through the bank; none where its reservoir would be empty.
type Yields<'a> = dyn Fn(f64) -> Option<f64> + 'a;

/// Every current at which a sweep of 1500 steps sees the watts cross; and whether the sweep can be trusted: no turning
/// point of the curve lies so close to the watts that two crossings could hide in one step.
fn brute_force(yields: &Yields<'_>, most_amps: f64, watts: f64) -> (Vec<f64>, bool) {
    const STEPS: u32 = 1500;
    // Evenly in the logarithm over the lowest decades, where no power lives, then evenly.
    let amps = |step: u32| {
        let share = f64::from(step) / f64::from(STEPS);
        if share < 0.2 {
            most_amps * 0.02 * ((share - 0.2) * 60.0).exp()
        } else {
            most_amps * (0.02 + 0.98 * (share - 0.2) / 0.8)
        }
    };
    let curve: Vec<(f64, f64)> = (0..=STEPS)
        .map(|step| (amps(step), yields(amps(step)).map_or(-1.0, |yielded| yielded / watts - 1.0)))
        .collect();
    let turning = |three: &&[(f64, f64)]| (three[1].1 - three[0].1) * (three[2].1 - three[1].1) <= 0.0;
    let clear = curve.windows(3).filter(turning).all(|three| three[1].1.abs() > 1e-3);
    let crossed = curve.windows(2).filter(|pair| pair[0].1 * pair[1].1 < 0.0);
    (crossed.map(|pair| 0.5 * (pair[0].0 + pair[1].0)).collect(), clear)
}

fn compare(points: &[Equilibrium], found: &[f64], clear: bool, most_amps: f64) -> Result<(), TestCaseError> {
    if !clear {
        return Ok(());
    }
    let ours: Vec<f64> = points.iter().map(|point| point.amps).filter(|&amps| amps > 0.0).collect();
    prop_assert_eq!(ours.len(), found.len(), "core {:?}, sweep {:?}", ours, found);
    for (core, sweep) in ours.iter().zip(found) {
        prop_assert!((core - sweep).abs() < 1e-3 * most_amps + 0.05 * core, "core {core}, sweep {sweep}");
    }
    Ok(())
}

proptest! {
    #![proptest_config(cases(24))]

    #[test]
    fn no_point_of_a_hungry_rectifier_is_missed(supply in supply(), bank in bank(mains_lamp()), rectifier in hungry()) {
        let load = Load::Rectifier(rectifier);
        let Some(ours) = points(&supply, &bank, &load) else { return Ok(()) };
        let spec = rectifier.spec();
        let Draw::Watts { watts, .. } = spec.draw else { return Ok(()) };
        let most_amps = bank.at_volts(supply.volts()).amps;
        let yields = |amps: f64| {
            let before = bank.at_amps(amps).volts / amps + supply.ohms();
            let shunt = spec.shunt_ohms.map_or(0.0, |ohms| 1.0 / ohms);
            // Thevenin's equivalent of what stands ahead of the rectifier.
            let open = 1.0 / (1.0 + before * shunt);
            let inner = before * open + spec.series_ohms;
            if supply.hertz() == 0.0 {
                let rectified = amps - (supply.volts() - amps * before) * shunt;
                let dc_volts = supply.volts() * open - rectified * inner - spec.diode_volts;
                return (dc_volts > 0.0 && rectified > 0.0).then_some(dc_volts * rectified);
            }
            let crest = std::f64::consts::SQRT_2 * supply.volts() * open;
            let theta = angle_of(amps, std::f64::consts::SQRT_2 * supply.volts() * open * shunt, open * crest / inner)?;
            let dc_volts = crest * theta.cos() - spec.diode_volts;
            let mean = 2.0 / std::f64::consts::PI * crest / inner * (theta.sin() - theta * theta.cos());
            (dc_volts > 0.0).then_some(dc_volts * mean)
        };
        let (found, clear) = brute_force(&yields, most_amps, watts);
        compare(&ours, &found, clear, most_amps)?;
    }

    #[test]
    fn no_point_of_a_corrected_supply_is_missed(supply in supply(), bank in bank(mains_lamp()), watts in log_uniform(0.01, 2000.0)) {
        let load = Load::Corrected(Corrected::new(CorrectedSpec { watts, start_volts: 1.0, stop_volts: 0.0, restart_seconds: 0.1, farads: 1e-4 }).expect("in range"));
        let Some(ours) = points(&supply, &bank, &load) else { return Ok(()) };
        let most_amps = bank.at_volts(supply.volts()).amps;
        let yields = |amps: f64| Some(amps * (supply.volts() - bank.at_amps(amps).volts - amps * supply.ohms()));
        let (found, clear) = brute_force(&yields, most_amps, watts);
        compare(&ours, &found, clear, most_amps)?;
    }
}

/// Half the conduction angle of a pulse that makes this RMS current beside a sinusoid of `idle` at its crest, where the
/// pulse itself brings `unit` at most; by bisection of the textbook formulas.
fn angle_of(amps: f64, idle: f64, unit: f64) -> Option<f64> {
    let wanted = std::f64::consts::PI * amps.powi(2);
    let made = |theta: f64| {
        // Below a tenth of a radian the formulas cancel: their leading terms.
        let (own, cross) = if theta < 0.1 {
            (
                4.0 / 15.0 * theta.powi(5) * (1.0 - 5.0 / 21.0 * theta.powi(2)),
                4.0 / 3.0 * theta.powi(3) * (1.0 - 0.2 * theta.powi(2)),
            )
        } else {
            let own = theta * (1.0 + 2.0 * theta.cos().powi(2)) - 1.5 * (2.0 * theta).sin();
            (own, 2.0 * theta - (2.0 * theta).sin())
        };
        std::f64::consts::FRAC_PI_2 * idle.powi(2) + idle * unit * cross + unit.powi(2) * own
    };
    let (mut low, mut high) = (0.0, std::f64::consts::FRAC_PI_2);
    if wanted < made(low) || wanted > made(high) {
        return None;
    }
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if made(middle) < wanted { low = middle } else { high = middle }
    }
    Some(0.5 * (low + high))
}

/// Amperes that settle behind a bank before an impedance, by the secant method from where they settled last.
fn settled_amps(supply: &Supply, bank: &Bank, ohms: f64, reactance: f64, near: f64) -> f64 {
    let left = |ln_amps: f64| {
        let amps = ln_amps.exp();
        let in_phase = bank.at_amps(amps).volts / amps + supply.ohms() + ohms;
        (supply.volts() / (amps * in_phase.hypot(reactance))).ln()
    };
    let (mut before, mut here) = (near.ln() + 0.01, near.ln());
    let (mut left_before, mut left_here) = (left(before), left(here));
    for _ in 0..60 {
        if left_here.abs() < 1e-11 || here == before {
            break;
        }
        let next = here - left_here * (here - before) / (left_here - left_before);
        (before, left_before) = (here, left_here);
        (here, left_here) = (next, left(next));
    }
    here.exp()
}

proptest! {
    #![proptest_config(cases(24))]

    #[test]
    fn no_point_of_a_turning_motor_is_missed(supply in mains(), bank in bank(mains_lamp()), motor in induction_motor()) {
        const STEPS: u32 = 400;
        let Some(ours) = points(&supply, &bank, &Load::InductionMotor(motor)) else { return Ok(()) };
        // A sweep of slips, evenly in the logarithm up to 0.1 and evenly from there.
        let slip = |step: u32| {
            let share = f64::from(step) / f64::from(STEPS);
            if share < 0.4 { 0.1 * (20.0 * (share - 0.4)).exp() } else { 0.1 + 0.9 * (share - 0.4) / 0.6 }
        };
        let mut amps = 0.5 * bank.at_volts(supply.volts()).amps;
        let curve: Vec<(f64, f64)> = (0..=STEPS)
            .map(|step| {
                let impedance = motor.impedance(slip(step));
                amps = settled_amps(&supply, &bank, impedance.real, impedance.imaginary, amps);
                let slip = slip(step);
                (amps, (motor.load_watts(slip) / motor.torque_watts(slip, amps)).ln())
            })
            .collect();
        let turning = |three: &&[(f64, f64)]| (three[1].1 - three[0].1) * (three[2].1 - three[1].1) <= 0.0;
        let clear = curve.windows(3).filter(turning).all(|three| three[1].1.abs() > 3e-3)
            // A root next to standstill may lie on either side of it.
            && curve[curve.len() - 1].1.abs() > 1e-3;
        if clear {
            let mut found: Vec<f64> =
                curve.windows(2).filter(|two| two[0].1 * two[1].1 < 0.0).map(|two| 0.5 * (two[0].0 + two[1].0)).collect();
            found.sort_by(f64::total_cmp);
            let ours: Vec<f64> =
                ours.iter().filter(|point| point.mode == Mode::Turning).map(|point| point.amps).collect();
            prop_assert_eq!(ours.len(), found.len(), "core {:?}, sweep {:?}", ours, found);
            for (core, sweep) in ours.iter().zip(&found) {
                prop_assert!((core / sweep - 1.0).abs() < 0.05, "core {core}, sweep {sweep}");
            }
        }
    }
}
