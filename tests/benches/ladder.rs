//! How long a person waits for a ladder: twelve lamps of six ratings, and stocks beyond, for every family of equipment.
//!
//! `cargo bench -p lampladder-tests --bench ladder`. The target is 100 ms for the stock of twelve.

use std::hint::black_box;
use std::sync::LazyLock;
use std::time::{Duration, Instant};

use lampladder_core::family::Family;
use lampladder_core::ladder::{self, Limits};
use lampladder_core::lamp::Lamp;
use lampladder_core::plate::Plate;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;

/// The target of the issue, for the stock of twelve lamps.
const TARGET: Duration = Duration::from_millis(100);

/// Runs to average over, after one that warms the caches: some systems tell a thread's time in steps of 4 ms.
const RUNS: u32 = 10;

fn stock(watts: &[f64], count: f64) -> Stock {
    let lamps = watts.iter().map(|&watts| (Lamp::new(230.0, watts).expect("a lamp"), count));
    Stock::new(lamps).expect("a stock")
}

/// When the first plan began, where nothing better tells the time.
static BEGIN: LazyLock<Instant> = LazyLock::new(Instant::now);

/// Time that this thread has spent on a processor, or by the clock where the system does not tell: a machine that is
/// busy with something else makes the clock run, not the plan.
fn spent() -> Duration {
    let told = std::fs::read_to_string("/proc/thread-self/schedstat").ok();
    let nanoseconds = told.and_then(|text| text.split(' ').next()?.parse().ok());
    nanoseconds.map_or_else(|| BEGIN.elapsed(), Duration::from_nanos)
}

fn main() {
    // Cargo also asks benches for their tests; there are none.
    if std::env::args().any(|argument| argument == "--list" || argument == "--test") {
        return;
    }
    let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
    let stocks = [
        ("12 lamps, 6 ratings", stock(&[15.0, 25.0, 40.0, 60.0, 75.0, 100.0], 2.0)),
        ("4 lamps, 2 ratings", stock(&[25.0, 60.0], 2.0)),
        ("48 lamps, 8 ratings", stock(&[15.0, 25.0, 40.0, 60.0, 75.0, 100.0, 28.0, 53.0], 6.0)),
    ];
    let mut slowest = Duration::ZERO;
    for (index, (name, stock)) in stocks.iter().enumerate() {
        println!("{name}");
        for family in Family::ALL {
            let watts = if family == Family::UniversalMotor { 300.0 } else { 60.0 };
            let plate = Plate::new(family, 230.0, watts, None).expect("a plate");
            let planned = || ladder::plan(&supply, stock, &plate, &Limits::default());
            let rungs = planned().map_or(0, |ladder| ladder.rungs.len());
            let start = spent();
            for _ in 0..RUNS {
                let _ = black_box(planned());
            }
            let each = spent().saturating_sub(start) / RUNS;
            println!("  {:<22} {:>8.2} ms, {rungs} rungs", family.name(), 1e3 * each.as_secs_f64());
            if index == 0 {
                slowest = slowest.max(each);
            }
        }
    }
    let word = if slowest < TARGET { "within" } else { "OVER" };
    println!(
        "slowest with 12 lamps: {:.1} ms, {word} {} ms",
        1e3 * slowest.as_secs_f64(),
        TARGET.as_millis()
    );
}
