//! What no ladder may break, for random stocks, plates, supplies and limits; and the same ladders as an exhaustive search
//! of every sequence of every bank, on stocks small enough for one.
//!
//! `LAMPLADDER_CASES=20000 cargo test --release -p lampladder-tests --test laws_ladder` is the long run.

use std::cmp::Ordering;

use lampladder_core::bank::Bank;
use lampladder_core::family::Family;
use lampladder_core::ladder::{
    self, Gain, Ladder, LadderError, Limits, LimitsSpec, MOST_LAMPS, Missing, Reason, Step,
};
use lampladder_core::lamp::Lamp;
use lampladder_core::load::{Load, Mode};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::steady;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use proptest::prelude::*;

/// The ladder's own accuracy (its tables are good to 2e-5, and a limit can be met by sums of two), doubled.
const SLACK: f64 = 1e-4;

/// What the solver leaves over.
const SOLVED: f64 = 1e-9;

fn short_amps(supply: &Supply, bank: &Bank) -> f64 {
    let solved = steady::solve(supply, bank, &Load::Short).expect("within ratings");
    solved.settled().expect("a short settles").amps
}

/// Whether a dead short overdrives no lamp on a risen supply and overheats no holder.
fn keeps_within(supply: &Supply, bank: &Bank, limits: &LimitsSpec, slack: f64) -> bool {
    let risen = bank.at_volts(supply.volts() * (1.0 + limits.supply_rise));
    let stands = bank.groups().iter().zip(bank.lamps_at_amps(risen.amps)).all(|(group, states)| {
        group.iter().zip(states).all(|(lamp, state)| {
            state.volts <= lamp.rated_volts() * (1.0 + limits.lamp_overvoltage) * (1.0 + slack)
        })
    });
    let states = bank.lamps_at_amps(short_amps(supply, bank));
    let cool = bank.groups().iter().zip(states).all(|(group, states)| {
        group.iter().zip(states).all(|(lamp, state)| {
            lamp.rated_watts().min(state.watts) <= limits.holder_watts * (1.0 + 3.0 * slack)
        })
    });
    stands && cool
}

fn assert_lawful(case: &Case, ladder: &Ladder) {
    let Case { supply, stock, plate, limits } = case;
    let spec = limits.spec();
    assert!(!ladder.rungs.is_empty());
    let mut before: Option<f64> = None;
    for rung in &ladder.rungs {
        // Nothing that the stock does not hold, and nothing twice.
        let kinds = stock.kinds();
        assert!(rung.counts.iter().all(|group| group.len() == kinds.len()));
        for (kind, owned) in kinds.iter().enumerate() {
            let used: u32 = rung.counts.iter().map(|group| u32::from(group[kind])).sum();
            assert!(used <= u32::from(owned.count()), "{used} of {}", owned.count());
        }
        assert!(rung.bank.lamp_count() <= usize::from(MOST_LAMPS));
        assert!((1..=2).contains(&rung.bank.groups().len()));
        for (group, counts) in rung.bank.groups().iter().zip(&rung.counts) {
            let named: Vec<&Lamp> = kinds
                .iter()
                .zip(counts)
                .flat_map(|(owned, &count)| std::iter::repeat_n(owned.lamp(), usize::from(count)))
                .collect();
            assert_eq!(named, group.iter().collect::<Vec<_>>());
        }
        // The rules.
        let short = short_amps(supply, &rung.bank);
        assert!((rung.short_amps / short - 1.0).abs() < SOLVED);
        assert!(keeps_within(supply, &rung.bank, spec, SLACK));
        match before {
            None => {
                let limit = limits.first(supply, plate).amps;
                assert!(short <= limit * (1.0 + SLACK), "{short} A of {limit} A");
                assert!(matches!(rung.reason, Reason::First { .. } | Reason::Only { .. }));
            }
            Some(before) => {
                assert!(short <= spec.growth * before * (1.0 + SLACK), "{before} A to {short} A");
                assert!(short > before, "{before} A to {short} A");
            }
        }
        before = Some(short);
        if let Some(shown) = &rung.healthy.shown {
            // A dead short is the most that a bank ever passes.
            assert!(shown.amps.value <= short * (1.0 + SOLVED));
            assert!(shown.amps.low <= shown.amps.value && shown.amps.value <= shown.amps.high);
        }
    }
    // The bare mains come last, and are the person's decision.
    assert!(matches!(ladder.steps().last(), Some(Step::FullMains(_))));
    assert_eq!(ladder.full_mains.decision, ladder::Decision::Persons);
    assert_eq!(
        Some(ladder.full_mains.last_short_amps),
        before.map(|_| ladder.rungs[ladder.rungs.len() - 1].short_amps)
    );
}

#[derive(Debug, Clone)]
struct Case {
    supply: Supply,
    stock: Stock,
    plate: Plate,
    limits: Limits,
}

const WATTS: [f64; 12] = [7.0, 15.0, 25.0, 28.0, 40.0, 42.0, 60.0, 75.0, 100.0, 150.0, 200.0, 500.0];

fn supplies() -> impl Strategy<Value = Supply> {
    let volts = prop_oneof![
        4 => 207.0..253.0_f64,
        2 => 100.0..130.0_f64,
        1 => 12.0..50.0_f64,
        1 => 1.0..500.0_f64
    ];
    let hertz = prop_oneof![4 => Just(50.0), 2 => Just(60.0), 1 => Just(0.0)];
    let ohms = prop_oneof![3 => Just(0.0), 1 => 0.0..3.0_f64, 1 => 0.0..200.0_f64];
    (volts, hertz, ohms).prop_map(|(volts, hertz, ohms)| Supply::new(volts, hertz, ohms).expect("in range"))
}

/// Lamps mostly for the supply, some for half of it, some for anything.
fn stocks(volts: f64) -> impl Strategy<Value = Stock> {
    let rated = prop_oneof![
        6 => Just(volts),
        2 => (0.9 * volts)..(1.1 * volts),
        2 => Just(0.5 * volts),
        1 => Just(12.0),
        1 => Just(230.0)
    ];
    let lamp = (rated, prop::sample::select(&WATTS[..]), 0_u8..4);
    prop::collection::vec(lamp, 0..6).prop_map(|lamps| {
        let lamps = lamps.into_iter().map(|(volts, watts, count)| {
            (Lamp::new(f64::clamp(volts, 1.0, 500.0), watts).expect("in range"), f64::from(count))
        });
        Stock::new(lamps).expect("few kinds")
    })
}

fn plates(volts: f64) -> impl Strategy<Value = Plate> {
    let rated = prop_oneof![6 => Just(volts), 2 => (0.85 * volts)..(1.2 * volts), 1 => Just(230.0)];
    (prop::sample::select(&Family::ALL[..]), rated, 0.7..7.5_f64).prop_map(|(family, volts, ln_watts)| {
        let watts = Some(ln_watts.exp());
        let spec = PlateSpec { watts, ..PlateSpec::new(family, f64::clamp(volts, 1.0, 500.0)) };
        Plate::from_spec(spec).expect("in range")
    })
}

fn limits() -> impl Strategy<Value = Limits> {
    let changed = (0.3..3.0_f64, 5.0..30.0_f64, 60.0..300.0_f64, 1.3..4.0_f64, 0.0..0.2_f64, 0.0..0.3_f64)
        .prop_flat_map(
            |(first_share, first_least_watts, first_most_watts, growth, supply_rise, lamp_overvoltage)| {
                (30.0..600.0_f64, 0.0..0.1_f64, 0.0..0.9_f64).prop_map(
                    move |(holder_watts, close_share, least_share)| {
                        let spec = LimitsSpec {
                            first_share,
                            first_least_watts,
                            first_most_watts,
                            growth,
                            supply_rise,
                            lamp_overvoltage,
                            holder_watts,
                            close_share,
                            least_share,
                        };
                        Limits::new(spec).expect("in range")
                    },
                )
            },
        );
    prop_oneof![1 => Just(Limits::default()), 1 => changed]
}

fn cases() -> impl Strategy<Value = Case> {
    supplies().prop_flat_map(|supply| {
        (Just(supply), stocks(supply.volts()), plates(supply.volts()), limits())
            .prop_map(|(supply, stock, plate, limits)| Case { supply, stock, plate, limits })
    })
}

/// Seconds in the ordinary run; `LAMPLADDER_CASES` for the long one.
fn config() -> ProptestConfig {
    let cases = std::env::var("LAMPLADDER_CASES").ok().and_then(|text| text.parse().ok());
    ProptestConfig { cases: cases.unwrap_or(150), failure_persistence: None, ..ProptestConfig::default() }
}

proptest! {
    #![proptest_config(config())]

    #[test]
    fn no_rung_breaks_a_rule_uses_a_lamp_twice_or_exceeds_the_stock(case in cases()) {
        match ladder::plan(&case.supply, &case.stock, &case.plate, &case.limits) {
            Ok(ladder) => assert_lawful(&case, &ladder),
            Err(error) => {
                assert!(!error.ways().is_empty(), "{error}");
                assert!(!error.to_string().is_empty());
            }
        }
    }
}

#[test]
fn the_missing_lamp_is_the_best_of_those_asked_one_by_one_and_does_what_it_promises() {
    let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
    let limits = Limits::default();
    let stock = small(&[(230.0, 60.0, 2.0), (230.0, 25.0, 1.0)]);
    let mut found = 0;
    for family in Family::ALL {
        let plate = Plate::new(family, 230.0, 45.0, None).expect("a plate");
        let Ok(ladder) = ladder::plan(&supply, &stock, &plate, &limits) else { continue };
        let rungs = ladder::plan_rungs(&supply, &stock, &plate, &limits).expect("the same");
        assert_eq!((rungs.missing, &rungs.rungs), (None, &ladder.rungs));
        let mut best: Option<Missing> = None;
        for rating in ladder::usual_ratings(&supply, &limits) {
            let gain = ladder::gain_of(&supply, &stock, &plate, &limits, (&rungs, rating)).expect("a rating");
            let Some(gain) = gain else { continue };
            if best.is_none_or(|known| gain.beats(&known.gain, limits.spec().close_share)) {
                best = Some(Missing { rating, gain });
            }
        }
        assert_eq!(ladder.missing, best, "{}", family.name());
        let Some(Missing { rating, gain }) = best else { continue };
        let mut more = stock.clone();
        more.add(Lamp::new(rating.volts, rating.watts).expect("a lamp"), 1.0).expect("one more");
        let then = ladder::plan_rungs(&supply, &more, &plate, &limits).expect("a better one");
        let last = &then.rungs[then.rungs.len() - 1];
        match gain {
            Gain::Closer { share } => {
                let shown = last.healthy.shown.as_ref().expect("it runs");
                assert!((shown.load_volts.value / (230.0 * share) - 1.0).abs() < SOLVED);
            }
            Gain::Fewer { rungs } => assert_eq!(then.rungs.len(), rungs),
            Gain::Stronger { short_amps } => assert!((last.short_amps / short_amps - 1.0).abs() < SLACK),
            other => panic!("{other:?} where there is a ladder"),
        }
        found += 1;
    }
    assert!(found > 6, "only {found}");
}

/// A bank of the exhaustive search.
struct Exact {
    bank: Bank,
    short_amps: f64,
    load_volts: f64,
    wiring: usize,
}

/// Every parallel group and every pair of them, by counting through all ways to give each lamp to one group, the other
/// or none.
fn every_bank(case: &Case) -> Vec<Exact> {
    let lamps: Vec<&Lamp> = case
        .stock
        .kinds()
        .iter()
        .flat_map(|owned| std::iter::repeat_n(owned.lamp(), usize::from(owned.count())))
        .collect();
    let healthy = case.plate.load(lampladder_core::condition::Condition::Healthy, 1.0).expect("a plate");
    let mut found: Vec<Exact> = Vec::new();
    for mut code in 0..3_usize.pow(u32::try_from(lamps.len()).expect("few")) {
        let mut groups: [Vec<Lamp>; 2] = [Vec::new(), Vec::new()];
        for lamp in &lamps {
            if code % 3 > 0 {
                groups[code % 3 - 1].push((*lamp).clone());
            }
            code /= 3;
        }
        let [first, second] = groups;
        if first.is_empty() || first.len() + second.len() > usize::from(MOST_LAMPS) {
            continue;
        }
        let groups = if second.is_empty() { vec![first] } else { vec![first, second] };
        let wiring = groups.iter().map(Vec::len).sum::<usize>() + groups.len() - 1;
        let mirrored: Vec<_> = groups.iter().rev().cloned().collect();
        if found.iter().any(|known| known.bank.groups() == groups || known.bank.groups() == mirrored) {
            continue;
        }
        let bank = Bank::new(groups).expect("up to six");
        if !keeps_within(&case.supply, &bank, case.limits.spec(), 0.0) {
            continue;
        }
        let point = steady::solve(&case.supply, &bank, &healthy).expect("a circuit");
        let idle = |mode: Mode| matches!(mode, Mode::Off | Mode::Standing | Mode::DegaussCold);
        let running = point.settled().filter(|point| !idle(point.mode));
        let load_volts = running.map_or(0.0, |point| point.load_volts);
        let short_amps = short_amps(&case.supply, &bank);
        found.push(Exact { bank, short_amps, load_volts, wiring });
    }
    found
}

/// Every lawful sequence of `length` banks, as indices.
fn sequences(case: &Case, banks: &[Exact], length: usize) -> Vec<Vec<usize>> {
    let first = case.limits.first(&case.supply, &case.plate).amps;
    let growth = case.limits.spec().growth;
    let mut all: Vec<Vec<usize>> =
        (0..banks.len()).filter(|&bank| banks[bank].short_amps <= first).map(|bank| vec![bank]).collect();
    for _ in 1..length {
        all = all
            .into_iter()
            .flat_map(|sequence| {
                let here = banks[sequence[sequence.len() - 1]].short_amps;
                let next = (0..banks.len()).filter(move |&bank| {
                    (here * (1.0 + SOLVED)..=growth * here).contains(&banks[bank].short_amps)
                });
                next.map(move |bank| [sequence.as_slice(), &[bank]].concat()).collect::<Vec<_>>()
            })
            .collect();
    }
    all
}

/// The numbers by which one sequence is better than another of the same length, the least first.
fn key(case: &Case, banks: &[Exact], sequence: &[usize]) -> Vec<f64> {
    let first = case.limits.first(&case.supply, &case.plate).amps;
    let amps = |place: usize| banks[sequence[place]].short_amps;
    let wiring: usize = sequence.iter().map(|&bank| banks[bank].wiring).sum();
    let wiring = f64::from(u32::try_from(wiring).expect("few"));
    let mut key = vec![wiring, amps(sequence.len() - 1)];
    for place in (1..sequence.len()).rev() {
        let even = (amps(place) / first).ln() / f64::from(u32::try_from(place).expect("few"));
        key.push(((amps(place) / amps(place - 1)).ln() - even).abs());
    }
    key
}

/// The best ladder by looking at all of them.
fn exhaustive(case: &Case) -> Option<Vec<Exact>> {
    let mut banks = every_bank(case);
    let longest = banks.len();
    let close = case.limits.spec().close_share * case.supply.volts();
    // What can be reached at all, whatever the number of rungs.
    let first = case.limits.first(&case.supply, &case.plate).amps;
    banks.sort_by(|a, b| a.short_amps.total_cmp(&b.short_amps));
    let mut reach = first;
    let mut best: f64 = -1.0;
    for bank in &banks {
        if bank.short_amps <= reach {
            reach = reach.max(case.limits.spec().growth * bank.short_amps);
            best = best.max(bank.load_volts);
        }
    }
    let better = |a: &Vec<usize>, b: &Vec<usize>| {
        let (a, b) = (key(case, &banks, a), key(case, &banks, b));
        a.iter().zip(&b).map(|(a, b)| a.total_cmp(b)).find(|order| order.is_ne()).unwrap_or(Ordering::Equal)
    };
    let found = (1..=longest).find_map(|length| {
        sequences(case, &banks, length)
            .into_iter()
            .filter(|sequence| banks[sequence[length - 1]].load_volts >= best - close)
            .min_by(better)
    })?;
    let mut banks: Vec<Option<Exact>> = banks.into_iter().map(Some).collect();
    Some(found.into_iter().map(|bank| banks[bank].take().expect("each once")).collect())
}

fn small(lamps: &[(f64, f64, f64)]) -> Stock {
    let lamps = lamps.iter().map(|&(volts, watts, count)| (Lamp::new(volts, watts).expect("a lamp"), count));
    Stock::new(lamps).expect("a stock")
}

#[test]
fn an_exhaustive_search_of_small_stocks_finds_the_same_ladders() {
    let stocks = [
        small(&[(230.0, 60.0, 2.0), (230.0, 25.0, 1.0)]),
        small(&[(230.0, 15.0, 1.0), (230.0, 40.0, 1.0), (230.0, 100.0, 2.0)]),
        small(&[(230.0, 100.0, 4.0)]),
        small(&[(120.0, 60.0, 2.0), (120.0, 40.0, 2.0)]),
        small(&[(240.0, 25.0, 1.0), (220.0, 75.0, 2.0), (130.0, 60.0, 2.0)]),
    ];
    // Every combination meets every other value somewhere: five stocks, three plates, four sets of limits.
    let usual = LimitsSpec::default();
    let limits = [
        usual,
        LimitsSpec { close_share: 0.0, ..usual },
        LimitsSpec { growth: 1.6, close_share: 0.05, ..usual },
        LimitsSpec { first_share: 0.5, holder_watts: 60.0, least_share: 0.0, ..usual },
    ];
    let mut compared = 0;
    for (row, family) in Family::ALL.into_iter().enumerate() {
        for (column, watts) in [12.0, 45.0, 180.0].into_iter().enumerate() {
            for (place, stock) in stocks.iter().enumerate() {
                // Half of them: where the equipment hunts, the exact search takes its time.
                if (row + column + place) % 2 == 1 {
                    continue;
                }
                let spec = limits[(row + 2 * column + place) % limits.len()];
                let case = Case {
                    supply: Supply::new(230.0, 50.0, 0.4).expect("a mains"),
                    stock: stock.clone(),
                    plate: Plate::new(family, 230.0, watts, None).expect("a plate"),
                    limits: Limits::new(spec).expect("in range"),
                };
                compared += u32::from(compare(&case));
            }
        }
    }
    assert!(compared > 50, "only {compared} ladders were compared");
}

/// Whether there was a ladder to compare.
fn compare(case: &Case) -> bool {
    let name = || {
        let lamps: Vec<_> =
            case.stock.kinds().iter().map(|kind| (kind.lamp().rated_watts(), kind.count())).collect();
        let (family, watts) = (case.plate.family().name(), case.plate.watts());
        format!("{family} of {watts} W from {lamps:?} within {:?}", case.limits.spec())
    };
    let planned = ladder::plan(&case.supply, &case.stock, &case.plate, &case.limits);
    let best = exhaustive(case);
    match (planned, best) {
        (Ok(ladder), Some(best)) => {
            let runs = best.last().is_some_and(|bank| bank.load_volts > 0.0);
            if !runs {
                // Nothing runs: any reachable bank is as close as any other, and the ladder goes up to the strongest.
                assert!(ladder.falls_short.is_some(), "{}", name());
                return true;
            }
            let planned: Vec<f64> = ladder.rungs.iter().map(|rung| rung.short_amps).collect();
            let wanted: Vec<f64> = best.iter().map(|bank| bank.short_amps).collect();
            let same = |group: &[Vec<Lamp>], other: &[Vec<Lamp>]| {
                let mirrored: Vec<_> = other.iter().rev().cloned().collect();
                group == other || group == mirrored
            };
            let equal = ladder.rungs.len() == best.len()
                && ladder
                    .rungs
                    .iter()
                    .zip(&best)
                    .all(|(rung, bank)| same(rung.bank.groups(), bank.bank.groups()));
            assert!(equal, "{}: {planned:?}, not {wanted:?}", name());
            true
        }
        // Refused for the stock, or for what the equipment is.
        (Err(LadderError::FirstTooStrong { .. } | LadderError::NoLampFits { .. }), None)
        | (Err(LadderError::BeyondAnyBank { .. } | LadderError::Unsuitable { .. }), _) => false,
        (planned, best) => {
            panic!("{}: {planned:?}, not {:?}", name(), best.map(|best| best.len()))
        }
    }
}
