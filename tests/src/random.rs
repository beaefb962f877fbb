//! Random lamps, banks, supplies, loads and plates for the laws.
#![expect(
    clippy::missing_panics_doc,
    reason = "every number drawn is in range; a refusal is a bug to be seen"
)]

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::diagnosis::Advice;
use lampladder_core::error::Field;
use lampladder_core::family::Family;
use lampladder_core::glow::GlowWord;
use lampladder_core::hand_on::{HandedOn, Position, PositionSpec, Step};
use lampladder_core::kept::{Kept, KeptSpec, Verdict};
use lampladder_core::lamp::{Fill, Lamp, LampSpec, Point};
use lampladder_core::load::{Draw, Impedance, InductionMotor, Load, Rectifier, RectifierSpec};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::precheck::Class;
use lampladder_core::readings::{Behaviour, Kind, MeterSpec, Response};
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use proptest::prelude::*;
use proptest::test_runner::Config;

/// How many cases a law is tried on: `usual`, or `LAMPLADDER_CASES` for a long run.
pub fn cases(usual: u32) -> Config {
    let asked = std::env::var("LAMPLADDER_CASES").ok().and_then(|text| text.parse().ok());
    // Failing cases belong into a named test of their own, not into a file beside this one.
    Config { cases: asked.unwrap_or(usual), failure_persistence: None, ..Config::default() }
}

/// Evenly spread in the logarithm.
pub fn log_uniform(low: f64, high: f64) -> impl Strategy<Value = f64> + Clone {
    (low.ln()..high.ln()).prop_map(f64::exp)
}

/// Any lamp that can be described.
pub fn any_lamp() -> impl Strategy<Value = Lamp> {
    let rating = (log_uniform(1.0, 500.0), log_uniform(0.05, 5000.0));
    let fill =
        prop_oneof![Just(None), Just(Some(Fill::Gas)), Just(Some(Fill::Vacuum)), Just(Some(Fill::Halogen))];
    let known = (prop::option::of(1500.0..3400.0), prop::option::of(0.0..0.5));
    (rating, fill, known).prop_map(|((volts, watts), fill, (rated_kelvin, gas_share))| {
        let spec = LampSpec { volts, watts, fill, rated_kelvin, gas_share, ..LampSpec::default() };
        Lamp::from_spec(spec).expect("every number is in range")
    })
}

/// A lamp for the mains, of a stock size or not.
pub fn mains_lamp() -> impl Strategy<Value = Lamp> {
    let watts = prop_oneof![
        prop::sample::select(&[15.0, 25.0, 40.0, 60.0, 75.0, 100.0, 150.0, 200.0][..]),
        log_uniform(5.0, 1000.0)
    ];
    (prop_oneof![Just(230.0), 200.0..260.0], watts)
        .prop_map(|(volts, watts)| Lamp::new(volts, watts).expect("every number is in range"))
}

/// One to eight lamps of a kind, grouped at random.
pub fn bank(lamp: impl Strategy<Value = Lamp>) -> impl Strategy<Value = Bank> {
    prop::collection::vec(prop::collection::vec(lamp, 1..=4), 1..=3).prop_map(|mut groups| {
        let mut left = Bank::MOST_LAMPS;
        groups.retain_mut(|group| {
            group.truncate(left);
            left -= group.len();
            !group.is_empty()
        });
        Bank::new(groups).expect("one to eight lamps")
    })
}

/// A mains, 50 or 60 Hz, stiff or weak.
pub fn mains() -> impl Strategy<Value = Supply> {
    (80.0..250.0, prop_oneof![Just(50.0), Just(60.0)], prop_oneof![Just(0.0), log_uniform(0.01, 100.0)])
        .prop_map(|(volts, hertz, ohms)| Supply::new(volts, hertz, ohms).expect("in range"))
}

/// A mains or a battery.
pub fn supply() -> impl Strategy<Value = Supply> {
    prop_oneof![3 => mains(), 1 => (10.0..250.0).prop_map(|volts| Supply::new(volts, 0.0, 0.0).expect("in range"))]
}

/// A constant-power draw behind a rectifier, that never stops by itself.
pub fn hungry() -> impl Strategy<Value = Rectifier> {
    let shunt = prop::option::of(log_uniform(300.0, 1e6));
    let numbers =
        (log_uniform(0.01, 2000.0), prop_oneof![Just(0.0), log_uniform(0.01, 100.0)], 0.0..3.0, shunt);
    numbers.prop_map(|(watts, series_ohms, diode_volts, shunt_ohms)| {
        let draw = Draw::Watts { watts, start_volts: 1.0, stop_volts: 0.0, restart_seconds: 0.0 };
        Rectifier::new(RectifierSpec { farads: 1e-4, series_ohms, diode_volts, draw, shunt_ohms })
            .expect("in range")
    })
}

/// A rectifier with any draw.
pub fn rectifier() -> impl Strategy<Value = Rectifier> {
    let draw = prop_oneof![
        log_uniform(10.0, 1e6).prop_map(Draw::Ohms),
        log_uniform(1e-3, 3.0).prop_map(Draw::Amps),
        (log_uniform(0.1, 500.0), 60.0..200.0, 0.3..1.0).prop_map(|(watts, start_volts, share)| {
            Draw::Watts { watts, start_volts, stop_volts: share * start_volts, restart_seconds: 0.1 }
        }),
    ];
    let rest = (log_uniform(1e-6, 1e-2), 0.0..50.0, 0.0..5.0, prop::option::of(log_uniform(100.0, 1e6)));
    (draw, rest).prop_map(|(draw, (farads, series_ohms, diode_volts, shunt_ohms))| {
        Rectifier::new(RectifierSpec { farads, series_ohms, diode_volts, draw, shunt_ohms })
            .expect("in range")
    })
}

/// An induction motor from its plate, healthy, idle or overloaded, easy or hard to move.
pub fn induction_motor() -> impl Strategy<Value = InductionMotor> {
    let rating = (prop_oneof![Just(230.0), 100.0..250.0], log_uniform(1.0, 2000.0), 0.3..0.95);
    let kind = (
        prop::sample::select(&[Condition::Healthy, Condition::Idle, Condition::Overloaded][..]),
        1.5..10.0,
        0.0..3.0,
    );
    (rating, kind).prop_map(|((volts, watts, power_factor), (condition, stall, breakaway))| {
        let spec = PlateSpec {
            watts: Some(watts),
            power_factor: Some(power_factor),
            details: vec![(Detail::StallMultiple, stall), (Detail::BreakawayShare, breakaway)],
            ..PlateSpec::new(Family::InductionMotor, volts)
        };
        let load = Plate::from_spec(spec).and_then(|plate| plate.load(condition, 1.0));
        let Ok(Load::InductionMotor(motor)) = load else { panic!("a motor") };
        motor
    })
}

/// A linear load.
pub fn impedance() -> impl Strategy<Value = Impedance> {
    let reactance =
        prop_oneof![Just(0.0), log_uniform(0.1, 1e5), log_uniform(0.1, 1e5).prop_map(|ohms| -ohms)];
    (prop_oneof![Just(0.0), log_uniform(0.01, 1e6)], reactance)
        .prop_map(|(ohms, reactance)| Impedance::new(ohms, reactance).expect("in range"))
}

/// Equipment from its plate, in any condition that its family has.
pub fn equipment() -> impl Strategy<Value = (Plate, Condition, Load)> {
    let rating = (prop_oneof![Just(230.0), 100.0..250.0], log_uniform(1.0, 2000.0));
    (prop::sample::select(&Family::ALL[..]), rating, any::<prop::sample::Index>()).prop_map(
        |(family, (volts, watts), index)| {
            let plate = Plate::new(family, volts, watts, None).expect("in range");
            let condition = *index.get(family.conditions());
            let load = plate.load(condition, 1.0).expect("one of its own");
            (plate, condition, load)
        },
    )
}

/// Any load.
pub fn load() -> impl Strategy<Value = Load> {
    prop_oneof![
        1 => Just(Load::Short),
        1 => Just(Load::Open),
        3 => impedance().prop_map(Load::Impedance),
        1 => mains_lamp().prop_map(|lamp| Load::Lamp(Box::new(lamp))),
        4 => rectifier().prop_map(Load::Rectifier),
        6 => equipment().prop_map(|(_, _, load)| load),
    ]
}

/// A lamp with everything on it that a person can enter.
pub fn described_lamp() -> impl Strategy<Value = Lamp> {
    let extras = (
        prop::option::of(0.5..20.0),
        prop::option::of(8.0..16.0),
        prop::collection::vec((0.01..1.2, -0.1..0.1), 0..4),
    );
    (any_lamp(), extras).prop_map(|(lamp, (lumens_per_watt, hot_over_cold, points))| {
        let (volts, watts) = (lamp.rated_volts(), lamp.rated_watts());
        let point = |(share, off): (f64, f64)| {
            let state = lamp.at_volts(share * volts);
            Point { volts: state.volts, amps: state.amps * (1.0 + off) }
        };
        let spec = LampSpec {
            lumens: lumens_per_watt.map(|value| value * watts),
            cold_ohms: hot_over_cold.map(|ratio| volts * volts / watts / ratio),
            points: points.into_iter().map(point).collect(),
            ..lamp.spec().clone()
        };
        // An extreme lamp can take a point out of its own range; then it goes without.
        Lamp::from_spec(spec).unwrap_or(lamp)
    })
}

/// Any bench.
pub fn setup() -> impl Strategy<Value = Setup> {
    (supply(), bank(described_lamp()), equipment(), prop::option::of(log_uniform(0.5, 1.0))).prop_map(
        |(supply, bank, (plate, ..), power_factor)| {
            let spec = PlateSpec { power_factor, ..plate.spec().clone() };
            let plate = Plate::from_spec(spec).unwrap_or(plate);
            Setup { supply, bank, plate }
        },
    )
}

/// Any lamps that a person owns.
pub fn stock() -> impl Strategy<Value = Stock> {
    prop::collection::vec((described_lamp(), 1..=99_u8), 0..=Stock::MOST_KINDS).prop_map(|lamps| {
        let mut stock = Stock::default();
        for (lamp, count) in lamps {
            // Two alike can come to more than a hundred: then there are the first of them.
            let _ = stock.add(lamp, count.into());
        }
        stock
    })
}

/// Any position on the ladder.
pub fn position() -> impl Strategy<Value = Position> {
    let step = prop_oneof![
        Just(Step::Lamps),
        Just(Step::Checks),
        any::<u8>().prop_map(Step::Rung),
        Just(Step::Mains),
        Just(Step::After)
    ];
    let check = |(_, low, high, over_range): (Field, f64, f64, bool)| {
        let number = log_uniform(low.max(1e-3), high);
        let over = if over_range { f64::INFINITY } else { high };
        prop::option::of(prop_oneof![3 => number, 1 => Just(low), 1 => Just(over)])
    };
    let [a, b, c, d, e, f] = Position::CHECKS.map(check);
    let class = prop::sample::select(&Class::ALL[..]);
    (step, class, 0.0..100.0, any::<bool>(), (a, b, c, d, e, f)).prop_map(
        |(step, class, lead_metres, looked_over, (a, b, c, d, e, f))| {
            let checks = [a, b, c, d, e, f];
            Position::from_spec(PositionSpec { step, class, lead_metres, looked_over, checks })
                .expect("in range")
        },
    )
}

/// Any reading that a person keeps, on this bench or on another.
pub fn kept(bench: Setup) -> impl Strategy<Value = Kept> {
    let other_bank =
        (Just(bench.clone()), bank(described_lamp())).prop_map(|(bench, bank)| Setup { bank, ..bench });
    let bench = prop_oneof![4 => Just(bench), 2 => other_bank, 1 => setup()];
    let number =
        |kind: Kind| prop::option::of(prop_oneof![0.0..kind.most(), (0..9999_u16).prop_map(f64::from)]);
    let numbers = Kind::ALL.map(|kind| number(kind).boxed());
    let meter = prop_oneof![
        Just(MeterSpec::default()),
        (0.1..3.0, 0..9_u8, prop::sample::select(&[2000.0, 6000.0][..]), any::<bool>()).prop_map(
            |(percent, digits, counts, averaging)| {
                let response = if averaging { Response::Averaging } else { Response::TrueRms };
                MeterSpec { percent, digits: digits.into(), counts, response }
            }
        )
    ];
    let verdict = (
        prop::sample::select(&[Advice::GoOn, Advice::Stop, Advice::MeasureFirst][..]),
        prop::sample::select(&Condition::ALL[..]),
        0.0..=1.0,
    );
    let verdict =
        prop::option::of(verdict.prop_map(|(advice, leader, weight)| Verdict { advice, leader, weight }));
    let look = prop::option::of(prop::sample::select(&GlowWord::ALL[..]));
    let behaviour = prop::option::of(prop::sample::select(&Behaviour::ALL[..]));
    let rest = (meter, numbers, look, behaviour, verdict, ".{0,30}");
    (bench, 0..8_640_000_000_000_000_u64, prop::option::of(1..=99_u32), rest).prop_map(
        |(setup, milliseconds, rung, (meter, numbers, look, behaviour, verdict, note))| {
            #[expect(clippy::cast_precision_loss, reason = "below 2^53")]
            let milliseconds = milliseconds as f64;
            // A whole number above what the kind allows is none of its readings.
            let numbers =
                core::array::from_fn(|at| numbers[at].filter(|value| *value <= Kind::ALL[at].most()));
            Kept::from_spec(KeptSpec {
                milliseconds,
                setup,
                rung,
                meter,
                numbers,
                look,
                behaviour,
                verdict,
                note,
            })
            .expect("in range")
        },
    )
}

/// Anything that one colleague hands on to another.
pub fn handed_on() -> impl Strategy<Value = HandedOn> {
    setup().prop_flat_map(|setup| {
        let log = prop::collection::vec(kept(setup.clone()), 0..4);
        (Just(setup), prop::option::of(stock()), prop::option::of(position()), log)
            .prop_map(|(setup, stock, position, log)| HandedOn { setup, stock, position, log })
    })
}
