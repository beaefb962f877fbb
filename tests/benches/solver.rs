//! How long a steady point takes, beside general root finders on the same equation and beside a brute-force scan.
//!
//! `cargo bench -p lampladder-tests --bench solver`; `cargo xtask bench` also finds a Python for the live scipy row.

use std::cell::Cell;
use std::hint::black_box;
use std::time::{Duration, Instant};

use lampladder_core::bank::Bank;
use lampladder_core::family::Family;
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Corrected, CorrectedSpec, Impedance, Load};
use lampladder_core::plate::Plate;
use lampladder_core::steady;
use lampladder_core::supply::Supply;
use lampladder_tests::golden::{FixedLamp, cases};
use serde::Deserialize;

const SUPPLY_VOLTS: f64 = 230.0;

/// Loads behind the one lamp, ohms: from nearly a short to nearly nothing, the same as the Python script's.
const LOADS_OHMS: [f64; 5] = [100.0, 300.0, 529.0, 1000.0, 3000.0];

fn main() {
    one_lamp_and_a_resistor();
    all_equilibria();
}

/// The fastest of many short rounds: what the machine can do when nothing else wants it.
fn time(mut f: impl FnMut()) -> Duration {
    const ROUND: Duration = Duration::from_micros(100);
    const TOGETHER: Duration = Duration::from_millis(40);
    let start = Instant::now();
    f();
    let once = start.elapsed().max(Duration::from_nanos(20));
    let repeats = u32::try_from(ROUND.as_nanos() / once.as_nanos()).unwrap_or(1).max(1);
    let mut best = once;
    let begin = Instant::now();
    while begin.elapsed() < TOGETHER {
        let start = Instant::now();
        for _ in 0..repeats {
            f();
        }
        best = best.min(start.elapsed() / repeats);
    }
    best
}

fn micros(duration: Duration) -> f64 {
    duration.as_secs_f64() * 1e6
}

#[derive(Deserialize)]
struct Recorded {
    microseconds_per_solve: f64,
    function_calls_per_solve: f64,
    lamp: FixedLamp,
}

fn one_lamp_and_a_resistor() {
    let recorded = cases::<Recorded>("brentq_timing.json").remove(0);
    let lamp = Lamp::from(recorded.lamp);
    let supply = Supply::new(SUPPLY_VOLTS, 50.0, 0.0).expect("a mains");
    let bank = Bank::single(lamp.clone());
    let load = |ohms| Load::Impedance(Impedance::new(ohms, 0.0).expect("in range"));

    let mut evaluations = 0;
    let mut most = 0;
    for ohms in LOADS_OHMS {
        let point = &steady::solve(&supply, &bank, &load(ohms)).expect("solvable").equilibria[0];
        assert!(point.residual.abs() < 1e-9, "{}", point.residual);
        evaluations += point.evaluations;
        most = most.max(point.evaluations);
    }
    let ours = time(|| {
        for ohms in LOADS_OHMS {
            black_box(steady::solve(&supply, &bank, &load(black_box(ohms))).expect("solvable"));
        }
    }) / 5;

    // The same curve and the same residual, searched over the kelvin between the ends of the table.
    let calls = Cell::new(0_u32);
    let peer = |ohms: f64| {
        let left = |kelvin: f64| {
            calls.set(calls.get() + 1);
            let point = lamp.filament().at_rise(kelvin - 300.0);
            point.amps() * (point.ohms + ohms) / SUPPLY_VOLTS - 1.0
        };
        let mut stop = roots::SimpleConvergency { eps: 1e-9, max_iter: 100 };
        roots::find_root_brent(300.0 + 1e-9, 3600.0, left, &mut stop).expect("bracketed")
    };
    for ohms in LOADS_OHMS {
        black_box(peer(ohms));
    }
    let peer_calls = f64::from(calls.get()) / 5.0;
    let peers = time(|| {
        for ohms in LOADS_OHMS {
            black_box(peer(black_box(ohms)));
        }
    }) / 5;

    println!("\none lamp before a resistor, to 1e-9 of the supply, mean of {} loads", LOADS_OHMS.len());
    println!("{:<52}{:>12}{:>12}{:>9}", "", "evaluations", "us", "ratio");
    let row = |name: &str, evaluations: f64, micros_taken: f64| {
        println!("{name:<52}{evaluations:>12.1}{micros_taken:>12.2}{:>9.2}", micros_taken / micros(peers));
    };
    row("steady::solve, every lamp's state included", f64::from(evaluations) / 5.0, micros(ours));
    row("crate roots 0.0.8, find_root_brent, the root alone", peer_calls, micros(peers));
    row("scipy brentq, recorded", recorded.function_calls_per_solve, recorded.microseconds_per_solve);
    match live_brentq() {
        Some(live) => row("scipy brentq, now", live.function_calls_per_solve, live.microseconds_per_solve),
        None => println!(
            "scipy brentq, now: no Python with scipy (set LAMPLADDER_PYTHON, or use cargo xtask bench)"
        ),
    }
    println!("most evaluations at any of these loads: {most} (limit 12)");
}

/// The Python script's figure of this very moment.
fn live_brentq() -> Option<Recorded> {
    let python = std::env::var_os("LAMPLADDER_PYTHON")?;
    let script = concat!(env!("CARGO_MANIFEST_DIR"), "/oracle/brentq_timing.py");
    let output = std::process::Command::new(python).args([script, "--print"]).output().ok()?;
    serde_json::from_slice(&output.stdout).ok()
}

fn stock(watts: f64) -> Lamp {
    Lamp::new(230.0, watts).expect("a stock size")
}

fn banks() -> [(&'static str, Bank); 4] {
    let bank = |groups: &[&[f64]]| {
        let groups = groups.iter().map(|group| group.iter().map(|&watts| stock(watts)).collect()).collect();
        Bank::new(groups).expect("one to four lamps")
    };
    [
        ("60", bank(&[&[60.0]])),
        ("60+60+60+60", bank(&[&[60.0, 60.0, 60.0, 60.0]])),
        ("40+60+100+150", bank(&[&[40.0, 60.0, 100.0, 150.0]])),
        ("(60+100) (40+150)", bank(&[&[60.0, 100.0], &[40.0, 150.0]])),
    ]
}

fn all_equilibria() {
    println!("\nall equilibria, us: the slowest condition of each family (limit 50)");
    let banks = banks();
    print!("{:<24}", "bank, W");
    for (name, _) in &banks {
        print!("{name:>28}");
    }
    println!();
    let supply = Supply::new(SUPPLY_VOLTS, 50.0, 0.0).expect("a mains");
    for family in Family::ALL {
        let plate = Plate::new(family, 230.0, 60.0, None).expect("in range");
        print!("{:<24}", family.name());
        for (_, bank) in &banks {
            let slowest = family
                .conditions()
                .iter()
                .map(|&condition| {
                    let load = plate.load(condition, 1.0).expect("one of its own");
                    (time(|| drop(black_box(steady::equilibria(&supply, bank, &load)))), condition)
                })
                .max_by_key(|slowest| slowest.0)
                .expect("every family has a condition");
            print!("{:>28}", format!("{:.1} {}", micros(slowest.0), slowest.1.name()));
        }
        println!();
    }
    let watts = 20.0;
    let spec =
        CorrectedSpec { watts, start_volts: 90.0, stop_volts: 0.0, restart_seconds: 0.1, farads: 1e-4 };
    let hungry = Load::Corrected(Corrected::new(spec).expect("in range"));
    print!("{:<24}", "20 W corrected");
    for (_, bank) in &banks {
        print!("{:>28.1}", micros(time(|| drop(black_box(steady::equilibria(&supply, bank, &hungry))))));
    }
    print!("\n{:<24}", "by a sweep of 1000");
    for (_, bank) in &banks {
        print!(
            "{:>28.1}",
            micros(time(|| {
                black_box(sweep(bank, watts));
            }))
        );
    }
    println!();
}

/// The crossings of a constant power by brute force: a thousand currents, and no root refined.
fn sweep(bank: &Bank, watts: f64) -> usize {
    let most_amps = bank.at_volts(SUPPLY_VOLTS).amps;
    let left = |step: u32| {
        let amps = most_amps * f64::from(step) / 1000.0;
        amps * (SUPPLY_VOLTS - bank.at_amps(amps).volts) - watts
    };
    let signs: Vec<bool> = (1..=1000).map(|step| left(step) > 0.0).collect();
    signs.windows(2).filter(|pair| pair[0] != pair[1]).count()
}
