//! How long three seconds of a lamp, a bridge and a reservoir take: the core, two ODE crates at equal error, scipy.
//!
//! Everybody gives the same: filament temperature and RMS current every half period. The crates integrate the squared
//! current as a third variable for that, and get the lamp's curves from a table of 1 K, which costs next to nothing.
//! `LAMPLADDER_PYTHON` names a Python with scipy; without it that row is left out.

use std::f64::consts::PI;
use std::time::Instant;

use ivp::prelude::{FirstOrderSystem, Ivp, Method};
use lampladder_core::bank::Bank;
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Draw, Load, Rectifier, RectifierSpec};
use lampladder_core::supply::Supply;
use lampladder_core::switch_on::{Options, SwitchOn, simulate};
use lampladder_core::wire::Wire;
use lampladder_tests::golden::FixedLamp;
use ode_solvers::{Dop853, Dopri5, OutputType, SVector, System};

const SECONDS: f64 = 3.0;
const GRID: f64 = 0.01;
const CREST: f64 = 230.0 * std::f64::consts::SQRT_2;
const OMEGA: f64 = 2.0 * PI * 50.0;
const FARADS: f64 = 100e-6;
const SERIES_OHMS: f64 = 1.0;
const DIODE_VOLTS: f64 = 1.4;
const DRAW_OHMS: f64 = 1300.0;

/// The same lamp as the first of the oracle's cases with a bridge.
fn lamp() -> Lamp {
    FixedLamp { volts: 230.0, watts: 60.0, rated_kelvin: 2690.0, gas_share: 0.20 }.into()
}

/// Resistance, heat lost and heat capacity, every kelvin from 300 K.
#[derive(Clone)]
struct Curves(Vec<[f64; 3]>);

impl Curves {
    fn of(lamp: &Lamp) -> Self {
        let wire = Wire::of(lamp.filament());
        let row = |rise: i32| {
            let point = lamp.filament().at_rise(f64::from(rise));
            [point.ohms, point.watts, wire.joules_per_kelvin(300.0 + f64::from(rise))]
        };
        Self((0..=3300).map(row).collect())
    }

    fn at(&self, kelvin: f64) -> [f64; 3] {
        let place = (kelvin - 300.0).clamp(0.0, 3299.0);
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "clamped to the table")]
        let row = place as usize;
        #[expect(clippy::cast_precision_loss, reason = "a row number")]
        let share = place - row as f64;
        let (low, high) = (&self.0[row], &self.0[row + 1]);
        std::array::from_fn(|index| low[index] + share * (high[index] - low[index]))
    }
}

/// Kelvin, DC volts, integral of the squared current.
#[derive(Clone)]
struct Equations(Curves);

impl Equations {
    fn slopes(&self, seconds: f64, state: [f64; 3]) -> [f64; 3] {
        let [kelvin, dc_volts, _] = state;
        let [ohms, lost, capacity] = self.0.at(kelvin);
        let source = (CREST * (OMEGA * seconds + PI / 2.0).sin()).abs();
        let amps = ((source - dc_volts - DIODE_VOLTS) / (ohms + SERIES_OHMS)).max(0.0);
        let square = amps * amps;
        [(square * ohms - lost) / capacity, (amps - dc_volts / DRAW_OHMS) / FARADS, square]
    }
}

impl System<f64, SVector<f64, 3>> for Equations {
    fn system(&self, seconds: f64, state: &SVector<f64, 3>, slopes: &mut SVector<f64, 3>) {
        *slopes = self.slopes(seconds, [state[0], state[1], state[2]]).into();
    }
}

impl FirstOrderSystem for Equations {
    fn derivative(&self, seconds: f64, state: &[f64], slopes: &mut [f64]) {
        slopes.copy_from_slice(&self.slopes(seconds, [state[0], state[1], state[2]]));
    }
}

/// Points of the grid, and an end a little beyond it: one crate loses the output that falls on its last instant.
const POINTS: usize = 301;
const BEYOND: f64 = SECONDS + 1e-4;

/// Kelvin and RMS amperes every half period, from the second one on.
type Path = Vec<[f64; 2]>;

fn path_of(states: &[[f64; 3]]) -> Path {
    states
        .windows(3)
        .map(|three| [three[2][0], ((three[2][2] - three[0][2]) / 0.02).max(0.0).sqrt()])
        .collect()
}

fn path_of_run(run: &SwitchOn) -> Path {
    run.samples[2..].iter().map(|sample| [sample.lamp_kelvin[0], sample.amps_rms]).collect()
}

/// The largest relative error of either.
fn error(path: &Path, exact: &Path) -> f64 {
    if path.len() != exact.len() {
        return f64::INFINITY;
    }
    let pairs = path.iter().flatten().zip(exact.iter().flatten());
    pairs.map(|(ours, exact)| (ours / exact - 1.0).abs()).fold(0.0, f64::max)
}

/// The best of several times, in seconds, and the last path.
fn timed(times: u32, mut run: impl FnMut() -> Path) -> (f64, Path) {
    let mut best = f64::INFINITY;
    let mut path = Path::new();
    for _ in 0..times {
        let start = Instant::now();
        path = run();
        best = best.min(start.elapsed().as_secs_f64());
    }
    (best, path)
}

fn ours(tolerance: f64) -> SwitchOn {
    let supply = Supply::new(230.0, 50.0, 0.0).expect("in range");
    let rectifier = Rectifier::new(RectifierSpec {
        farads: FARADS,
        series_ohms: SERIES_OHMS,
        diode_volts: DIODE_VOLTS,
        draw: Draw::Ohms(DRAW_OHMS),
        shunt_ohms: None,
    });
    let load = Load::Rectifier(rectifier.expect("in range"));
    let options = Options { seconds: SECONDS, tolerance, ..Options::default() };
    simulate(&supply, &Bank::single(lamp()), &load, &options).expect("runs")
}

/// Every way to solve it with a crate: its name, and the path at a tolerance and a longest step.
type Way = (&'static str, fn(&Equations, f64, f64) -> Path);

const START: [f64; 3] = [300.0, 0.0, 0.0];
/// Absolute tolerances are relative ones of these sizes.
const SIZE: f64 = 1.0;

fn dopri5(equations: &Equations, tolerance: f64, longest: f64) -> Path {
    let mut solver = Dopri5::from_param(
        equations.clone(),
        0.0,
        BEYOND,
        GRID,
        START.into(),
        tolerance,
        SIZE * tolerance,
        0.9,
        0.04,
        0.2,
        10.0,
        longest,
        0.0,
        1_000_000,
        1_000_000_000,
        OutputType::Dense,
    );
    let done = solver.integrate().is_ok();
    let states: Vec<[f64; 3]> =
        solver.y_out().iter().take(POINTS).map(|state| [state[0], state[1], state[2]]).collect();
    if done { path_of(&states) } else { Path::new() }
}

fn dop853(equations: &Equations, tolerance: f64, longest: f64) -> Path {
    let mut solver = Dop853::from_param(
        equations.clone(),
        0.0,
        BEYOND,
        GRID,
        START.into(),
        tolerance,
        SIZE * tolerance,
        0.9,
        0.0,
        0.333,
        6.0,
        longest,
        0.0,
        1_000_000,
        1_000_000_000,
        OutputType::Dense,
    );
    let done = solver.integrate().is_ok();
    let states: Vec<[f64; 3]> =
        solver.y_out().iter().take(POINTS).map(|state| [state[0], state[1], state[2]]).collect();
    if done { path_of(&states) } else { Path::new() }
}

fn ivp_with(method: Method, equations: &Equations, tolerance: f64, longest: f64) -> Path {
    let grid = (0..=300).map(|step| f64::from(step) * GRID).collect();
    let solved = Ivp::first_order(equations, 0.0, SECONDS, &START)
        .method(method)
        .rtol(tolerance)
        .atol(SIZE * tolerance)
        .max_step(longest)
        .max_steps(1_000_000)
        .t_eval(grid)
        .solve();
    let Ok(solution) = solved else { return Path::new() };
    path_of(&solution.y.iter().map(|state| [state[0], state[1], state[2]]).collect::<Vec<_>>())
}

const WAYS: [Way; 5] = [
    ("ode_solvers 0.6, Dopri5", dopri5),
    ("ode_solvers 0.6, Dop853", dop853),
    ("ivp 0.6, DOPRI5", |equations, tolerance, longest| {
        ivp_with(Method::DOPRI5, equations, tolerance, longest)
    }),
    ("ivp 0.6, DOP853", |equations, tolerance, longest| {
        ivp_with(Method::DOP853, equations, tolerance, longest)
    }),
    ("ivp 0.6, LSODA", |equations, tolerance, longest| {
        ivp_with(Method::LSODA, equations, tolerance, longest)
    }),
];

fn scipy() -> Option<f64> {
    let python = std::env::var_os("LAMPLADDER_PYTHON")?;
    let script = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("oracle/switch_on.py");
    let output =
        std::process::Command::new(python).arg(script).args(["--time", "bridge and reservoir"]).output();
    let output = output.ok()?;
    let text = String::from_utf8_lossy(&output.stdout);
    let seconds = text.lines().last().and_then(|line| line.trim().parse().ok());
    if seconds.is_none() {
        println!(
            "  scipy: {}",
            String::from_utf8_lossy(&output.stderr).lines().last().unwrap_or("no answer")
        );
    }
    seconds
}

fn main() {
    println!(
        "3 s of a 60 W lamp, a bridge and 100 uF at 230 V 50 Hz; error: the largest of kelvin and RMS amperes"
    );
    let exact = path_of_run(&ours(1e-9));
    let row = |name: &str, tolerance: f64, error: f64, seconds: f64, base: f64| {
        let ratio = seconds / base;
        println!("  {name:<28} {tolerance:>9.0e} {error:>9.1e} {:>10.3} ms {ratio:>9.1}", seconds * 1e3);
    };
    println!("  {:<28} {:>9} {:>9} {:>13} {:>9}", "", "tolerance", "error", "time", "times ours");
    let usual = Options::default().tolerance;
    let (base, path) = timed(40, || path_of_run(&ours(usual)));
    let our_error = error(&path, &exact);
    row("lampladder", usual, our_error, base, base);
    let equations = Equations(Curves::of(&lamp()));
    // Their own limit: the same equations, solved as finely as this crate can.
    let theirs = dopri5(&equations, 1e-11, 1e-4);
    println!(
        "  the crates' equations differ from ours by {:.1e}: curves read between rows",
        error(&theirs, &exact)
    );
    for (name, way) in WAYS {
        let mut best: Option<(f64, f64, f64)> = None;
        for exponent in 4..=20 {
            let tolerance = 10.0_f64.powf(-f64::from(exponent) / 2.0);
            for longest in [1e-3, 5e-3, SECONDS] {
                let (seconds, path) = timed(1, || way(&equations, tolerance, longest));
                let found = error(&path, &theirs);
                if found <= our_error && best.is_none_or(|(_, _, known)| seconds < 1.3 * known) {
                    let (seconds, _) = timed(20, || way(&equations, tolerance, longest));
                    if best.is_none_or(|(_, _, known)| seconds < known) {
                        best = Some((tolerance, found, seconds));
                    }
                }
            }
        }
        match best {
            Some((tolerance, found, seconds)) => row(name, tolerance, found, seconds, base),
            None => println!("  {name:<28} never within that error"),
        }
    }
    match scipy() {
        Some(seconds) => row("scipy 1.17, LSODA", 1e-6, f64::NAN, seconds, base),
        None => println!("  scipy: set LAMPLADDER_PYTHON"),
    }
}
