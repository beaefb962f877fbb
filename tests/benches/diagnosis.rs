//! How long a diagnosis takes, and how honest its weights are over thousands of made-up benches.

use std::time::Instant;

use lampladder_core::diagnosis::{Forecast, diagnose};
use lampladder_core::family::Family;
use lampladder_core::plate::Plate;
use lampladder_core::readings::{Kind, Meter, Reading, Readings, Response};
use lampladder_core::setup::Setup;
use lampladder_tests::reliability::tally;

fn main() {
    println!("{:24} {:>10} {:>14} {:>14}", "family", "conditions", "forecast, ms", "diagnosis, ms");
    for family in Family::ALL {
        let setup = Setup {
            plate: Plate::new(family, 230.0, 60.0, None).expect("a common plate"),
            ..Setup::example().expect("the example")
        };
        let mut readings = Readings::default();
        for (kind, value) in [(Kind::SupplyVolts, 233.0), (Kind::BankVolts, 67.0), (Kind::LoadVolts, 190.0)] {
            readings.add(Reading::new(kind, value, Meter::usual()).expect("in range"));
        }
        let best = |work: &mut dyn FnMut()| {
            (0..5)
                .map(|_| {
                    let start = Instant::now();
                    work();
                    start.elapsed().as_secs_f64() * 1e3
                })
                .fold(f64::INFINITY, f64::min)
        };
        let supply = readings.get(Kind::SupplyVolts);
        let complete = || Forecast::complete(&setup, supply, Response::TrueRms).expect("on the mains");
        let forecast = best(&mut || drop(std::hint::black_box(complete())));
        let ready = complete();
        let diagnosis = best(&mut || drop(std::hint::black_box(diagnose(&ready, &readings))));
        println!("{:24} {:>10} {forecast:>14.1} {diagnosis:>14.1}", family.name(), family.conditions().len());
    }
    // LAMPLADDER_BENCHES sets another number for a quick look.
    let benches =
        std::env::var("LAMPLADDER_BENCHES").ok().and_then(|text| text.parse().ok()).unwrap_or(10_000);
    println!("\n{benches} made-up benches from start 1");
    tally(1, benches).print();
}
