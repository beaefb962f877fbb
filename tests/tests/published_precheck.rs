//! The checks before and after power against the published limits, and the ladder against what the trade knows.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::detail::Standing;
use lampladder_core::family::Family;
use lampladder_core::ladder::{self, Limits};
use lampladder_core::lamp::Lamp;
use lampladder_core::load::Load;
use lampladder_core::plate::Plate;
use lampladder_core::precheck::{
    self, Caveat, Class, DISCHARGE_LIMITS, Discharge, First, Limit, PlugFinding, Quantity, Sense, Verdict,
    Wait,
};
use lampladder_core::steady;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_tests::reference;

/// Numbers copied from a table into code must be the table's.
const COPIED: f64 = 1e-12;

fn unit(name: &str) -> f64 {
    match name {
        "ohm" => 1.0,
        "megohm" => 1e6,
        "milliamp" => 1e-3,
        other => panic!("no unit {other}"),
    }
}

/// The core's limit for a row of the table.
fn limit_for(quantity: &str, equipment: &str) -> Option<Limit> {
    match (quantity, equipment) {
        ("protective conductor resistance", "class I, lead up to 5 m") => {
            precheck::protective_conductor_ohms(5.0).ok()
        }
        ("protective conductor resistance", "any lead") => precheck::protective_conductor_ohms(1000.0).ok(),
        ("insulation resistance", "class I") => Some(precheck::insulation_ohms(Class::One, false)),
        ("insulation resistance", "class I with heating elements") => {
            Some(precheck::insulation_ohms(Class::One, true))
        }
        ("insulation resistance", "class II") => Some(precheck::insulation_ohms(Class::Two, false)),
        ("insulation resistance", "class III") => Some(precheck::insulation_ohms(Class::Three, false)),
        ("protective conductor current", "class I") => precheck::leakage_amps(Class::One),
        ("touch current", "class II") => precheck::leakage_amps(Class::Two),
        _ => None,
    }
}

#[test]
fn limits_before_power_are_the_published_ones_with_their_status() {
    // EN 50678 / EN 50699, published second hand.
    let rows = reference::appliance_test();
    assert_eq!(rows.len(), 9);
    let mut compared = 0;
    for row in rows {
        assert_eq!(row.status, "published second hand");
        let value = row.limit * unit(&row.unit);
        if row.sense == "add" {
            assert_eq!(row.equipment, "each further 7.5 m of lead");
            let ohms = |metres: f64| precheck::protective_conductor_ohms(metres).expect("a lead").value;
            for further in 1..=7 {
                let longer = 5.0 + 7.5 * f64::from(further);
                assert!((ohms(longer) - ohms(longer - 7.5) - value).abs() < COPIED, "{longer} m");
            }
            compared += 1;
            continue;
        }
        let limit = limit_for(&row.quantity, &row.equipment)
            .unwrap_or_else(|| panic!("no limit for {} of {}", row.quantity, row.equipment));
        assert!((limit.value / value - 1.0).abs() < COPIED, "{}: {}", row.equipment, limit.value);
        let sense = if row.sense == "min" { Sense::AtLeast } else { Sense::AtMost };
        assert_eq!(limit.sense, sense, "{}", row.equipment);
        assert_eq!(limit.standing, Standing::Published);
        assert_eq!(limit.citation, "EN 50678 / EN 50699");
        assert_eq!(limit.caveat, Caveat::CheckStandardAndLocalCode);
        // The limit itself passes; a little on the wrong side of it does not.
        let worse = if sense == Sense::AtLeast { 0.99 } else { 1.01 };
        assert_eq!(limit.judge(value), Ok(Verdict::Within));
        assert_eq!(limit.judge(value * worse), Ok(Verdict::Outside));
        compared += 1;
    }
    assert_eq!(compared, 9);
    assert_eq!(precheck::insulation_ohms(Class::Two, false).quantity, Quantity::Insulation);
}

#[test]
fn limits_after_power_are_the_published_ones_with_their_status() {
    let rows = reference::capacitor_discharge();
    assert_eq!(rows.len(), DISCHARGE_LIMITS.len());
    for (row, limit) in rows.iter().zip(DISCHARGE_LIMITS) {
        assert_eq!(
            (row.standard.as_str(), row.limit, row.seconds),
            (limit.standard, limit.volts, limit.seconds)
        );
        let standing = match row.status.as_str() {
            "published second hand" => Standing::Published,
            "limit from memory" => Standing::Memory,
            other => panic!("no standing for {other}"),
        };
        assert_eq!(limit.standing, standing, "{}", row.condition);
        assert_eq!(limit.caveat, Caveat::CheckStandardAndLocalCode);
    }
}

/// Seconds until `volts` by the printed values.
fn printed(reservoir: &Discharge, volts: f64) -> f64 {
    match reservoir.wait(volts).expect("a voltage") {
        Wait::Seconds { printed, .. } => printed,
        Wait::Unknown => panic!("it has a bleed resistor"),
    }
}

#[test]
fn the_wait_is_the_closed_form_and_what_a_step_by_step_discharge_takes() {
    // The last digits of one logarithm.
    const CLOSED: f64 = 1e-12;
    // Steps of a ten-thousandth of RC, second order: an error of its square.
    const STEPPED: f64 = 1e-6;
    for (farads, ohms, start) in [(100e-6, 220e3, 325.0), (47e-9, 1e6, 358.0), (4.7e-3, 2.2e3, 63.0)] {
        let reservoir = Discharge::new(farads, Some(ohms), start).expect("a reservoir");
        for volts in [60.0, 34.0, 0.01 * start] {
            let seconds = printed(&reservoir, volts);
            let closed = ohms * farads * (start / volts).ln();
            assert!((seconds / closed - 1.0).abs() < CLOSED, "{seconds} s");
            // i = V/R, dV = -i dt/C, by midpoint steps.
            let step = 1e-4 * ohms * farads;
            let (mut here, mut time) = (start, 0.0);
            while here > volts {
                let middle = here - 0.5 * step * here / ohms / farads;
                let next = here - step * middle / ohms / farads;
                // The last step is cut where it meets the limit.
                let part = if next < volts { (here - volts) / (here - next) } else { 1.0 };
                time += part * step;
                here = next;
            }
            assert!((time / seconds - 1.0).abs() < STEPPED, "{time} s, not {seconds} s");
        }
    }
}

#[test]
fn a_textbook_discharge() {
    // P. Horowitz, W. Hill, The Art of Electronics, 2nd ed., 1.13 (from memory): after one time constant 37 % are left,
    // and after five it is within 1 % of its final value. 100 uF and 10 kilo-ohm make 1 s.
    let reservoir = Discharge::new(100e-6, Some(10e3), 100.0).expect("a reservoir");
    assert!((reservoir.volts_after(1.0) - 37.0).abs() < 0.5, "{} V", reservoir.volts_after(1.0));
    assert!(reservoir.volts_after(5.0) < 1.0 && reservoir.volts_after(4.0) > 1.0);
    // Half-life 0.69 time constants (ln 2).
    assert!((printed(&reservoir, 50.0) - 0.693).abs() < 0.001);
    // Measure before touching, whatever the time says, and also where nothing is left to wait for.
    let empty = Discharge::new(100e-6, Some(10e3), 0.0).expect("an empty one");
    for one in [reservoir, empty] {
        assert_eq!(one.after_power().first, First::MeasureBeforeTouching);
    }
}

fn mains() -> Supply {
    Supply::new(230.0, 50.0, 0.0).expect("a mains")
}

fn lamp(watts: f64) -> Lamp {
    Lamp::new(230.0, watts).expect("a stock size")
}

#[test]
fn lamps_in_parallel_raise_the_limit() {
    // Common practice, no source. In a ladder of equal lamps a stronger parallel rung has more of them.
    let stock = Stock::new([(lamp(60.0), 6.0)]).expect("six");
    let plate = Plate::new(Family::Plain, 230.0, 150.0, None).expect("a plate");
    let ladder = ladder::plan(&mains(), &stock, &plate, &Limits::default()).expect("a ladder");
    assert!(ladder.rungs.len() > 1);
    let plain: Vec<_> = ladder.rungs.iter().filter(|rung| rung.bank.groups().len() == 1).collect();
    assert!(plain.windows(2).all(|pair| pair[0].bank.lamp_count() < pair[1].bank.lamp_count()));
    for rung in plain {
        let count = f64::from(u32::try_from(rung.bank.lamp_count()).expect("six at most"));
        let each = rung.short_amps / count;
        assert!((each / lamp(60.0).at_volts(230.0).amps - 1.0).abs() < 1e-9);
    }
}

#[test]
fn a_dead_short_never_draws_more_than_the_banks_own_current() {
    // Common practice, no source: and nothing else draws more either, whatever is wrong with the equipment.
    let stock = Stock::new([(lamp(60.0), 2.0), (lamp(25.0), 1.0)]).expect("three");
    for family in Family::ALL {
        let plate = Plate::new(family, 230.0, 45.0, None).expect("a plate");
        let Ok(ladder) = ladder::plan(&mains(), &stock, &plate, &Limits::default()) else { continue };
        for rung in &ladder.rungs {
            let own = rung.bank.at_volts(230.0).amps;
            assert!((rung.short_amps / own - 1.0).abs() < 1e-9);
            for &condition in family.conditions() {
                let load = plate.load(condition, 1.0).expect("a condition");
                let solved = steady::solve(&mains(), &rung.bank, &load).expect("a circuit");
                for point in solved.equilibria {
                    assert!(point.amps <= own * (1.0 + 1e-9), "{} {}", family.name(), condition.name());
                }
            }
        }
    }
}

#[test]
fn a_hair_dryers_fan_alone_can_want_more_than_a_100_watt_lamp_gives() {
    // Common practice, no source. A fan motor of 150 W on its own, without the heater; at work it moves air.
    let fan = Plate::new(Family::UniversalMotor, 230.0, 150.0, None).expect("a fan");
    let working = fan.load(Condition::Working, 1.0).expect("a motor at work");
    let solved = steady::solve(&mains(), &Bank::single(lamp(100.0)), &working).expect("a circuit");
    let point = solved.settled().expect("it turns");
    // It wants 0.67 A, and a 100 W lamp never passes more than 0.43 A.
    assert!(fan.rated_amps() > lamp(100.0).at_volts(230.0).amps);
    assert!(point.load_volts < 0.6 * 230.0, "{} V", point.load_volts);
    // With its heater the dryer is beyond any sensible bank.
    let dryer = Plate::new(Family::Heater, 230.0, 1500.0, None).expect("a dryer");
    let stock = Stock::new([(lamp(100.0), 6.0)]).expect("six");
    let refused = ladder::plan(&mains(), &stock, &dryer, &Limits::default()).expect_err("too much");
    assert!(!refused.ways().is_empty());
}

#[test]
fn the_first_rung_of_a_radio_is_a_lamp_of_about_its_watts() {
    // Common practice, no source: begin with a lamp of about the equipment's own watts.
    let stock = Stock::new([(lamp(60.0), 2.0), (lamp(25.0), 1.0)]).expect("three");
    let radio = Plate::new(Family::TransformerSupply, 230.0, 45.0, None).expect("a radio");
    let ladder = ladder::plan(&mains(), &stock, &radio, &Limits::default()).expect("a ladder");
    let first = &ladder.rungs[0];
    assert_eq!(first.bank.lamp_count(), 1);
    assert_eq!(first.bank.groups()[0][0].rated_watts(), 60.0);
    let short = steady::solve(&mains(), &first.bank, &Load::Short).expect("a circuit");
    assert!(short.settled().is_some_and(|point| point.amps <= radio.rated_amps()));
}

#[test]
fn windings_and_heaters_read_as_published() {
    // Published second hand: a degauss thermistor of 7 to 14 ohm; derived: valve heaters at 0.14 to 0.20 of hot.
    let set = Plate::new(Family::CrtSet, 230.0, 80.0, None).expect("a set");
    let low = precheck::across_plug(&set).expect("ranges")[0];
    assert_eq!((low.finding, low.low_ohms), (PlugFinding::Healthy, 7.0));
    let rows = reference::equipment_behaviour();
    let ratio = rows.iter().find(|row| row.item == "valve heater cold over hot resistance").expect("a row");
    let (least, most): (f64, f64) =
        (ratio.low.parse().expect("a number"), ratio.high.parse().expect("a number"));
    let plate = Plate::new(Family::ValveSeries, 230.0, 50.0, None).expect("a set");
    let hot = 230.0 * 230.0 / (0.6 * 50.0);
    for ohms in [least * hot, most * hot] {
        let ranges = precheck::across_plug(&plate).expect("ranges");
        let reading = precheck::judge(&ranges, ohms).expect("a reading");
        assert_eq!(reading.findings, [PlugFinding::Healthy], "{ohms} ohm");
    }
}
