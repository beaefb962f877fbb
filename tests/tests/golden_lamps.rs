//! Lamps, banks and glow against the independent scripts of `tests/oracle/`.

use lampladder_core::glow::{Glow, TYPICAL_RATED_KELVIN};
use lampladder_core::lamp::{Lamp, LampSpec};
use lampladder_core::load::{Draw, Impedance, Load, Rectifier, RectifierSpec};
use lampladder_core::steady::{self, Equilibrium};
use lampladder_core::supply::Supply;
use lampladder_core::wire::Wire;
use lampladder_tests::golden::{FixedLamp, agree, bank, cases};
use lampladder_tests::lamps::lamp_from;
use serde::Deserialize;

/// Same equations, same tables: the golden files keep ten digits.
const SAME_EQUATIONS: f64 = 1e-8;

/// The oracle integrates light at 1 nm, the core at 5 nm (published limit of the core: 0.1 %).
const LIGHT: f64 = 1e-3;

/// The oracle splines the observer between its rows; the core adds up the rows.
const CHROMATICITY: f64 = 2e-4;

#[derive(Deserialize)]
struct Curve {
    #[serde(flatten)]
    lamp: FixedLamp,
    cold_ohms: f64,
    wire_metres: f64,
    wire_diameter_metres: f64,
    rated_joules_per_kelvin: f64,
    rated_lumens: f64,
    states: Vec<State>,
}

#[derive(Deserialize)]
struct State {
    volts: f64,
    amps: f64,
    kelvin: f64,
}

#[test]
fn curves_wires_and_lumens_agree() {
    for case in cases::<Curve>("lamp_curves.json") {
        let what = format!("{} V {} W", case.lamp.volts, case.lamp.watts);
        let lamp = Lamp::from(case.lamp);
        agree(lamp.cold_ohms(), case.cold_ohms, SAME_EQUATIONS, &what);
        let wire = Wire::of(lamp.filament());
        agree(wire.metres, case.wire_metres, SAME_EQUATIONS, &what);
        agree(wire.diameter_metres, case.wire_diameter_metres, SAME_EQUATIONS, &what);
        let capacity = wire.joules_per_kelvin(lamp.rated_kelvin());
        agree(capacity, case.rated_joules_per_kelvin, SAME_EQUATIONS, &what);
        agree(lamp.lumens(lamp.rated_kelvin()), case.rated_lumens, LIGHT, &what);
        assert!(case.states.len() >= 9, "{what}");
        for golden in case.states {
            let what = format!("{what} at {} V", golden.volts);
            let state = lamp.at_volts(golden.volts);
            // Near ambient the oracle's plain differences of fourth powers lose digits that the core keeps.
            let tolerance = if golden.kelvin < 310.0 { 1e-6 } else { SAME_EQUATIONS };
            agree(state.amps, golden.amps, tolerance, &what);
            agree(state.kelvin, golden.kelvin, tolerance, &what);
        }
    }
}

#[derive(Deserialize)]
struct Default {
    volts: f64,
    watts: f64,
    lumens: f64,
    gas_share: f64,
    rated_kelvin: f64,
}

#[test]
fn printed_lumens_lead_to_the_same_temperature() {
    for case in cases::<Default>("lamp_defaults.json") {
        let Default { volts, watts, lumens, gas_share, rated_kelvin } = case;
        let (lumens, gas_share) = (Some(lumens), Some(gas_share));
        let lamp = lamp_from(LampSpec { volts, watts, lumens, gas_share, ..LampSpec::default() });
        // Flux goes with the eighth power or more of temperature.
        agree(lamp.rated_kelvin(), rated_kelvin, LIGHT / 8.0, &format!("{volts} V {watts} W"));
    }
}

#[derive(Deserialize)]
struct Linear {
    supply_volts: f64,
    supply_ohms: f64,
    bank: Vec<Vec<FixedLamp>>,
    ohms: f64,
    reactance_ohms: f64,
    amps: f64,
    bank_volts: f64,
    load_volts: f64,
    load_watts: f64,
    lamps: Vec<Vec<State>>,
}

fn only(supply: &Supply, groups: &[Vec<FixedLamp>], load: &Load) -> Equilibrium {
    let mut solved = steady::solve(supply, &bank(groups), load).expect("a circuit that exists");
    assert_eq!(solved.equilibria.len(), 1);
    solved.equilibria.remove(0)
}

#[test]
fn banks_before_linear_loads_agree() {
    for (index, case) in cases::<Linear>("banks.json").iter().enumerate() {
        let what = format!("case {index}");
        let supply = Supply::new(case.supply_volts, 50.0, case.supply_ohms).expect("a mains");
        let load = Load::Impedance(Impedance::new(case.ohms, case.reactance_ohms).expect("in range"));
        let found = only(&supply, &case.bank, &load);
        agree(found.amps, case.amps, SAME_EQUATIONS, &what);
        agree(found.bank_volts, case.bank_volts, SAME_EQUATIONS, &what);
        // A short has no volts to compare relatively.
        assert!((found.load_volts - case.load_volts).abs() < SAME_EQUATIONS * case.supply_volts, "{what}");
        assert!((found.load_watts - case.load_watts).abs() < SAME_EQUATIONS * 100.0, "{what}");
        for (ours, golden) in found.lamps.iter().flatten().zip(case.lamps.iter().flatten()) {
            agree(ours.volts, golden.volts, SAME_EQUATIONS, &what);
            agree(ours.amps, golden.amps, SAME_EQUATIONS, &what);
            agree(ours.kelvin, golden.kelvin, SAME_EQUATIONS, &what);
        }
    }
}

#[derive(Deserialize)]
struct Hungry {
    supply_volts: f64,
    bank: Vec<Vec<FixedLamp>>,
    watts: f64,
    amps: Vec<f64>,
}

#[test]
fn both_points_of_a_constant_power_agree() {
    for (index, case) in cases::<Hungry>("constant_power.json").iter().enumerate() {
        let supply = Supply::new(case.supply_volts, 0.0, 0.0).expect("a source");
        let draw = Draw::Watts { watts: case.watts, start_volts: 1.0, stop_volts: 0.0, restart_seconds: 0.0 };
        let spec = RectifierSpec { farads: 1e-4, series_ohms: 0.0, diode_volts: 0.0, draw, shunt_ohms: None };
        let load = Load::Rectifier(Rectifier::new(spec).expect("in range"));
        let solved = steady::solve(&supply, &bank(&case.bank), &load).expect("a circuit that exists");
        let amps: Vec<f64> = solved.equilibria.iter().map(|point| point.amps).collect();
        assert_eq!(amps.len(), case.amps.len(), "case {index}: {amps:?} {:?}", case.amps);
        for (ours, &golden) in amps.iter().zip(&case.amps) {
            // Near the most that the bank yields the two points are ill-conditioned: the root of a difference.
            agree(*ours, golden, 1e-6, &format!("case {index}"));
        }
    }
}

#[derive(Deserialize)]
struct Light {
    kelvin: f64,
    x: f64,
    y: f64,
    relative_luminance: f64,
}

#[test]
fn the_light_of_tungsten_agrees() {
    for case in cases::<Light>("glow.json") {
        let what = format!("{} K", case.kelvin);
        let glow = Glow::at(case.kelvin, TYPICAL_RATED_KELVIN);
        assert!((glow.x - case.x).abs() < CHROMATICITY, "{what}: {} {}", glow.x, case.x);
        assert!((glow.y - case.y).abs() < CHROMATICITY, "{what}: {} {}", glow.y, case.y);
        agree(glow.relative_luminance, case.relative_luminance, LIGHT, &what);
    }
}
