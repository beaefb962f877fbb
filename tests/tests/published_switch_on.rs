//! The first seconds against published inrush, closed forms and trade facts.

use std::f64::consts::{PI, SQRT_2};

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::family::Family;
use lampladder_core::fuse::{Fuse, Standard, Verdict};
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Impedance, Load, PowerSupply, PowerSupplySpec};
use lampladder_core::plate::Plate;
use lampladder_core::supply::Supply;
use lampladder_core::switch_on::{Moment, Options, SwitchOn, simulate, straight};
use lampladder_tests::reference::{equipment_behaviour, lamp_inrush};

fn mains(volts: f64) -> Supply {
    let hertz = if volts < 170.0 { 60.0 } else { 50.0 };
    Supply::new(volts, hertz, 0.0).expect("in range")
}

fn lamp(volts: f64, watts: f64) -> Lamp {
    Lamp::new(volts, watts).expect("a stock size")
}

/// A lamp straight on its rated voltage, sampled every millisecond.
fn alone(lamp: &Lamp) -> SwitchOn {
    let options = Options { seconds: 1.0, sample_seconds: 1e-3, ..Options::default() };
    let bank = Bank::single(lamp.clone());
    simulate(&mains(lamp.rated_volts()), &bank, &Load::Short, &options).expect("runs")
}

/// How many times the rated resistance's current a lamp would take at a temperature: the envelope of the inrush.
fn multiple(lamp: &Lamp, kelvin: f64) -> f64 {
    let ohms = |kelvin: f64| lamp.filament().at_rise(kelvin - 300.0).ohms;
    ohms(lamp.rated_kelvin()) / ohms(kelvin)
}

/// Low and high of a row of the equipment table.
fn range(item: &str) -> (f64, f64) {
    let row = equipment_behaviour().into_iter().find(|row| row.item == item);
    let row = row.unwrap_or_else(|| panic!("{item}: no such row"));
    (row.low.parse().expect("low"), row.high.parse().expect("high"))
}

/// Two published tables of tungsten's resistivity differ by so much between cold and hot.
const TABLES: f64 = 0.05;

#[test]
fn inrush_is_ten_to_fifteen_times_the_rated_current() {
    let rows = lamp_inrush();
    let general = rows.iter().find(|row| row.volts.is_none()).expect("a row for any lamp");
    let low = general.multiple_of_rated_current_low.expect("low") * (1.0 - TABLES);
    let high = general.multiple_high.expect("high") * (1.0 + TABLES);
    for (volts, watts) in
        [(230.0, 25.0), (230.0, 40.0), (230.0, 60.0), (230.0, 100.0), (120.0, 60.0), (120.0, 100.0)]
    {
        let run = alone(&lamp(volts, watts));
        let times = run.peak_amps / (SQRT_2 * watts / volts);
        assert!((low..=high).contains(&times), "{volts} V {watts} W: {times}");
    }
    let row = rows.iter().find(|row| row.volts == Some(230.0)).expect("a row for 230 V");
    let run = alone(&lamp(230.0, 100.0));
    let times = run.peak_amps / (SQRT_2 * 100.0 / 230.0);
    assert!((times / row.multiple_high.expect("a multiple") - 1.0).abs() <= TABLES, "{times}");
}

/// "Near" and "about" of the published notes on time. The wire that belongs to a rating is known to some 25 % of its
/// mass: a published wire of 46 um and 0.58 m (120 V 60 W) has 7 % more than ours, while the published 0.13 s to 90 % of
/// the light would want some 15 % less. The two contradict each other; the coil factor of 0.65 lies between.
const MASS: f64 = 0.25;

#[test]
fn the_lamp_is_lit_when_the_published_notes_say() {
    // 230 V 100 W: near nominal by 0.05 s.
    let big = lamp(230.0, 100.0);
    let run = alone(&big);
    let at = |run: &SwitchOn, milliseconds: usize| run.samples[milliseconds].lamp_kelvin[0];
    assert!(multiple(&big, at(&run, 50)) < 1.0 + MASS, "{}", multiple(&big, at(&run, 50)));
    // 120 V 100 W: current steady at about 0.10 s, 90 % of the light after about 0.13 s.
    let bright = lamp(120.0, 100.0);
    let run = alone(&bright);
    let times = multiple(&bright, at(&run, 100));
    assert!(times < 1.10, "still {times} times at 0.10 s");
    let full = bright.lumens(at(&run, 1000));
    let lit = run.samples.iter().find(|sample| bright.lumens(sample.lamp_kelvin[0]) > 0.9 * full);
    let lit = lit.expect("it lights").seconds;
    assert!((lit / 0.13 - 1.0).abs() <= MASS, "90 % of the light after {lit} s");
}

#[test]
fn trade_fact_the_zero_is_soft_the_crest_is_hard_and_the_surge_is_soon_over() {
    // Common practice, no source.
    let one = lamp(230.0, 100.0);
    let at = |degrees: f64| {
        let options = Options { seconds: 0.5, moment: Moment::Degrees(degrees), ..Options::default() };
        simulate(&mains(230.0), &Bank::single(one.clone()), &Load::Short, &options).expect("runs")
    };
    let peaks: Vec<f64> = (0..=6).map(|step| at(15.0 * f64::from(step)).peak_amps).collect();
    assert!(peaks.windows(2).all(|pair| pair[0] < pair[1]), "{peaks:?}");
    let options = Options { seconds: 0.5, moment: Moment::Worst, ..Options::default() };
    let worst = simulate(&mains(230.0), &Bank::single(one.clone()), &Load::Short, &options).expect("runs");
    assert!((worst.switch_degrees - 90.0).abs() < 2.0, "{}", worst.switch_degrees);
    // "Over in a fraction of a second, before an ordinary fuse reacts": even a quick one of twice the current holds.
    assert!(worst.settle_seconds.expect("settles") < 0.25);
    let quick = Fuse::new(Standard::Iec60127Sheet2, 1.0).expect("a rating");
    assert_eq!(quick.judge(&worst).verdict, Verdict::Holds);
}

/// A supply resistance alone in front of a coil or capacitor: the closed form is exact, so the solver's own error shows.
const CLOSED: f64 = 2e-3;

#[test]
fn a_coil_follows_its_closed_form() {
    let (ohms, reactance) = (2.0, 30.0);
    let supply = Supply::new(230.0, 50.0, ohms).expect("in range");
    let load = Load::Impedance(Impedance::new(0.0, reactance).expect("in range"));
    for degrees in [0.0, 30.0, 90.0, 135.0] {
        let options = Options {
            seconds: 0.1,
            moment: Moment::Degrees(degrees),
            sample_seconds: 1e-3,
            ..Options::default()
        };
        let run = straight(&supply, &load, &options).expect("runs");
        let omega = 2.0 * PI * 50.0;
        let (size, lag) = (ohms.hypot(reactance), (reactance / ohms).atan());
        let phase = degrees.to_radians();
        let exact = |seconds: f64| {
            let decay = (-seconds * ohms * omega / reactance).exp();
            230.0 * SQRT_2 / size * ((omega * seconds + phase - lag).sin() - (phase - lag).sin() * decay)
        };
        let peak = (0..100_000).map(|step| exact(1e-6 * f64::from(step)).abs()).fold(0.0, f64::max);
        assert!((run.peak_amps / peak - 1.0).abs() < CLOSED, "{degrees}: {} {peak}", run.peak_amps);
        let i2t: f64 = (0..100_000).map(|step| exact(1e-6 * (f64::from(step) + 0.5)).powi(2) * 1e-6).sum();
        assert!((run.i2t_amp2_seconds / i2t - 1.0).abs() < CLOSED, "{degrees}: {i2t}");
    }
}

#[test]
fn a_capacitor_follows_its_closed_form() {
    // On direct current: i = V/R e^(-t/RC), hence i2t = V^2 C / (2 R) (1 - e^(-2t/RC)).
    // On alternating current the reactance fixes C: at the crest, into an empty capacitor, the peak is V/R at once.
    let (ohms, reactance) = (20.0, 31.83);
    let supply = Supply::new(230.0, 50.0, ohms).expect("in range");
    let load = Load::Impedance(Impedance::new(0.0, -reactance).expect("in range"));
    let options = Options { seconds: 0.1, moment: Moment::Degrees(40.0), ..Options::default() };
    let run = straight(&supply, &load, &options).expect("runs");
    let omega = 2.0 * PI * 50.0;
    let (size, lead) = (ohms.hypot(reactance), (reactance / ohms).atan());
    let phase = 40.0_f64.to_radians();
    let crest = 230.0 * SQRT_2;
    // Steady part plus the decay that starts the capacitor empty.
    let missing = crest / ohms * phase.sin() - crest / size * (phase + lead).sin();
    let exact = |seconds: f64| {
        crest / size * (omega * seconds + phase + lead).sin()
            + missing * (-seconds * omega * reactance / ohms).exp()
    };
    let peak = (0..100_000).map(|step| exact(1e-6 * f64::from(step)).abs()).fold(0.0, f64::max);
    // A milliohm stands for the joint of a capacitor without resistance of its own.
    assert!((run.peak_amps / peak - 1.0).abs() < CLOSED, "{} {peak}", run.peak_amps);
    let i2t: f64 = (0..100_000).map(|step| exact(1e-6 * (f64::from(step) + 0.5)).powi(2) * 1e-6).sum();
    assert!((run.i2t_amp2_seconds / i2t - 1.0).abs() < CLOSED, "{} {i2t}", run.i2t_amp2_seconds);
}

/// A core of 45 W alone: nothing behind its rectifier but 100 V of diodes, which the inrush is not about.
fn core(magnetising_share: f64, winding_share: f64) -> Load {
    let rated_ohms = 230.0 * 230.0 / 45.0;
    let supply = PowerSupply::new(PowerSupplySpec {
        rated_volts: 230.0,
        magnetising_amps: magnetising_share * 45.0 / 230.0,
        core_ohms: rated_ohms / 0.05,
        heater_watts: 0.0,
        winding_ohms: winding_share * rated_ohms,
        diode_volts: 100.0,
        half_wave: false,
        farads: 1e-9,
        draw_ohms: 1e9,
    });
    Load::PowerSupply(Box::new(supply.expect("in range")))
}

fn inrush(load: &Load, degrees: f64, remanence: f64) -> SwitchOn {
    let options = Options { seconds: 0.2, moment: Moment::Degrees(degrees), remanence, ..Options::default() };
    straight(&mains(230.0), load, &options).expect("runs")
}

#[test]
fn a_transformer_is_worst_at_the_zero_and_takes_what_is_published() {
    // The class defaults' core, peak over the crest of the rated current; remanence up to 0.3. Beyond, it takes more:
    // 17 times at 0.6. The air reactance behind this is a design value, so the check is one of the whole, not of it.
    let (low, high) = range("transformer magnetising inrush");
    let rated = SQRT_2 * 45.0 / 230.0;
    for remanence in [0.0, 0.3] {
        let run = inrush(&core(0.25, 0.06), 0.0, remanence);
        let times = run.peak_amps / rated;
        assert!((low..=high).contains(&times), "{remanence}: {times}");
        // The flux is highest at the end of the first half wave.
        assert!((0.007..0.0105).contains(&run.peak_seconds), "{}", run.peak_seconds);
    }
    // Worst at the zero: over the first period a switch at the crest lets through next to nothing.
    let first_period = |degrees: f64| inrush(&core(0.25, 0.06), degrees, 0.0).samples[2].amps_rms;
    let at: Vec<f64> = (0..=6).map(|step| first_period(15.0 * f64::from(step))).collect();
    assert!(at.windows(2).all(|pair| pair[0] > pair[1]) && at[6] < 0.1 * at[0], "{at:?}");
    // A toroid: little magnetising current, half the windings' resistance, the remanence of a strip-wound core; over its
    // operating current RMS.
    let (low, high) = range("toroidal transformer inrush");
    for remanence in [0.3, 0.6, 0.8] {
        let times = inrush(&core(0.02, 0.03), 0.0, remanence).peak_amps / (45.0 / 230.0);
        assert!((low..=high).contains(&times), "toroid {remanence}: {times}");
    }
}

#[test]
fn an_induction_motor_starts_in_the_published_time_and_current() {
    let (low, high) = range("induction motor locked rotor");
    let plate = Plate::new(Family::InductionMotor, 230.0, 60.0, None).expect("a fan");
    let rated = 60.0 / 230.0 / plate.assumed_power_factor();
    let options = Options { seconds: 4.0, ..Options::default() };
    let run = |condition| {
        let load = plate.load(condition, 1.0).expect("a load");
        straight(&mains(230.0), &load, &options).expect("runs")
    };
    let locked = run(Condition::Stalled).samples.last().expect("an end").amps_rms / rated;
    assert!((low..=high).contains(&locked), "{locked}");
    // "0.5-3 s to start".
    let settles = run(Condition::Healthy).settle_seconds.expect("it starts");
    assert!((0.5..=3.0).contains(&settles), "{settles}");
}

#[test]
fn a_degauss_circuit_dies_away_as_published() {
    let (low, high) = range("degauss thermistor residual after 180 s");
    let plate = Plate::new(Family::CrtSet, 230.0, 80.0, None).expect("a set");
    // Open at the supply's side: what remains is the thermistor's. Idle, the set itself takes some 50 mA.
    let load = plate.load(Condition::Idle, 0.02).expect("a load");
    let options = Options { seconds: 180.0, at: vec![0.02, 1.0, 180.0], ..Options::default() };
    let run = straight(&mains(230.0), &load, &options).expect("runs");
    let milliamps: Vec<f64> = run.asked.iter().map(|sample| 1e3 * sample.amps_rms).collect();
    assert!(milliamps[0] > 5000.0 && milliamps[1] < 500.0, "{milliamps:?}");
    assert!((low..=high).contains(&milliamps[2]), "{milliamps:?}");
}

#[test]
fn the_end_of_the_run_is_the_steady_point() {
    // Two ways to the same answer: the closed forms of the steady solver, and time itself.
    for (family, watts, seconds) in [
        (Family::TransformerSupply, 45.0, 3.0),
        (Family::ValveSeries, 60.0, 60.0),
        (Family::SwitchMode, 25.0, 12.0),
        (Family::Heater, 60.0, 5.0),
        (Family::Plain, 60.0, 5.0),
        (Family::Lamp, 60.0, 5.0),
    ] {
        let load =
            Plate::new(family, 230.0, watts, None).and_then(|plate| plate.load(Condition::Healthy, 1.0));
        let load = load.expect("a load");
        let bank = Bank::single(lamp(230.0, 100.0));
        let options = Options { seconds, ..Options::default() };
        let run = simulate(&mains(230.0), &bank, &load, &options).expect("runs");
        let steady = lampladder_core::steady::solve(&mains(230.0), &bank, &load).expect("solvable");
        let steady = steady.settled().expect("settles");
        let end = run.samples.last().expect("an end");
        // Ripple, harmonics of the magnetising current and the last seconds of warming are left out of the closed forms.
        let off = end.lamp_kelvin[0] / steady.lamps[0][0].kelvin - 1.0;
        assert!(off.abs() < 0.01, "{}: {off}", family.name());
        assert!((end.load_volts_rms / steady.load_volts - 1.0).abs() < 0.01, "{}", family.name());
    }
}
