//! A lamp from its rating against published lamps: resistance, trade facts, exponents, flux, temperature, wire.

use lampladder_core::expect;
use lampladder_core::filament::{Filament, Shape};
use lampladder_core::glow::luminous_exitance;
use lampladder_core::lamp::{Fill, Lamp, LampSpec};
use lampladder_core::tungsten::{
    AMBIENT_KELVIN, OTHER_EMISSIVITY, OTHER_RESISTIVITY, Properties, STANDARD, STEFAN_BOLTZMANN,
};
use lampladder_core::wire::Wire;
use lampladder_tests::lamps::{band, fill, lamp, lamp_from};
use lampladder_tests::reference;

#[track_caller]
fn inside((low, high): (f64, f64), published: f64, rounding: f64, what: &str) {
    assert!(
        (low - rounding..=high + rounding).contains(&published),
        "{what}: {published} is outside {low}..{high} by more than {rounding}"
    );
}

#[test]
fn cold_and_hot_resistance_are_the_published_ones() {
    // Published second hand, the source in each row; two digits, so half a unit in the second place.
    for row in reference::cold_and_hot_resistance() {
        let ours = lamp(row.volts, row.watts, fill(&row.fill));
        let what = format!("{} V {} W, {}", row.volts, row.watts, row.citation);
        let hot = ours.at_volts(row.volts);
        // The rating itself gives the hot resistance: 110 V 60 W is 202 ohms, printed as 200.
        assert!((hot.volts / hot.amps / row.hot_ohms - 1.0).abs() < 0.01, "{what}");
        if row.citation.contains("right after running") {
            // That ohmmeter met a filament still warm, so its 18 ohms bound ours from above; ours has 18 ohms at
            // 380 K, some seconds after switch-off.
            assert!(ours.cold_ohms() < row.cold_ohms, "{what}");
            let warm = ours.at_kelvin(450.0).expect("in range");
            assert!(warm.volts / warm.amps > row.cold_ohms, "{what}");
        } else {
            inside(band(&ours, Lamp::cold_ohms), row.cold_ohms, 0.05 * row.cold_ohms.log10(), &what);
        }
    }
}

#[test]
fn a_100_watt_230_volt_lamp_is_what_the_trade_knows() {
    // Common practice, no source: about 35 ohms cold, so about 6.6 A at the first instant; hot less than a tenth.
    const ABOUT: f64 = 0.1;
    let ours = lamp(230.0, 100.0, Fill::Gas);
    assert!((ours.cold_ohms() / 35.0 - 1.0).abs() < ABOUT, "{}", ours.cold_ohms());
    let first = 230.0 / ours.cold_ohms();
    assert!((first / 6.6 - 1.0).abs() < ABOUT, "{first}");
    assert!(ours.at_volts(230.0).amps < 0.1 * first);
}

#[test]
fn a_100_watt_230_volt_lamp_passes_what_the_trade_reads() {
    // Common practice, no source: in series with a small motor tool on 233 V it had 67 V across it at 0.23 A under
    // load, 28 V at 0.16 A idling. Two digits each.
    // Well inside the band, too: the last digit of the ammeter and a twentieth of the reading.
    const READ: f64 = 0.05;
    let ours = lamp(230.0, 100.0, Fill::Gas);
    for (volts, amps) in [(67.0, 0.23), (28.0, 0.16)] {
        let expected = expect::lamp_amps(&ours, volts);
        inside((expected.low, expected.high), amps, 0.0, &format!("{volts} V"));
        assert!((expected.value - amps).abs() < 0.005 + READ * amps, "{volts} V: {}", expected.value);
    }
}

/// Exponent of a quantity against voltage, from 5 % below to 5 % above the rating: the span over which the handbooks
/// mean it, and wide enough that the rounding of the third digit of the emissivity table does not show.
fn exponent(lamp: &Lamp, quantity: impl Fn(&Lamp, f64) -> f64) -> f64 {
    let (below, above) = (0.95 * lamp.rated_volts(), 1.05 * lamp.rated_volts());
    (quantity(lamp, above) / quantity(lamp, below)).ln() / (above / below).ln()
}

fn lumens(lamp: &Lamp, volts: f64) -> f64 {
    lamp.lumens(lamp.at_volts(volts).kelvin)
}

/// Correlated colour temperature of the light by the cubic fit in Color Res. Appl. 17 (1992) 142.
fn colour_kelvin(lamp: &Lamp, volts: f64) -> f64 {
    let glow = lamp.glow(lamp.at_volts(volts).kelvin);
    let n = (glow.x - 0.3320) / (0.1858 - glow.y);
    ((449.0 * n + 3525.0) * n + 6823.3) * n + 5520.33
}

#[test]
fn current_power_and_light_follow_the_handbook_exponents() {
    /// Half a unit of the digits as printed: 0.55 and 0.541, 1.6 and 1.54, 3.4 and 3.38.
    const CURRENT: f64 = 0.005;
    const POWER: f64 = 0.05;
    const LIGHT: f64 = 0.05;
    let lamps = [
        (Fill::Gas, [(230.0, 60.0), (230.0, 100.0), (120.0, 60.0), (120.0, 100.0)].as_slice()),
        (Fill::Vacuum, [(230.0, 25.0), (120.0, 25.0)].as_slice()),
    ];
    for row in reference::rating_exponents() {
        let (rounding, quantity): (f64, fn(&Lamp, f64) -> f64) = match row.quantity.as_str() {
            "current" => (CURRENT, |lamp, volts| lamp.at_volts(volts).amps),
            "power" => (POWER, |lamp, volts| lamp.at_volts(volts).watts),
            // The shape of the light does not change with voltage: intensity goes as the flux does.
            "lumens" | "luminous intensity low" | "luminous intensity high" => (LIGHT, lumens),
            _ => continue,
        };
        for (kind, ratings) in lamps {
            // "Any" lamp of the handbook is the ordinary gas-filled one: its 0.55 for the current is not the 0.58
            // that the other handbook gives for vacuum lamps alone.
            if row.fill != kind.name() && (row.fill != "any" || kind != Fill::Gas) {
                continue;
            }
            for &(volts, watts) in ratings {
                let band = band(&lamp(volts, watts, kind), |lamp| exponent(lamp, quantity));
                let what = format!("{} of {volts} V {watts} W, {}", row.quantity, row.status);
                inside(band, row.exponent, rounding, &what);
            }
        }
    }
}

#[test]
fn colour_temperature_follows_the_handbook_exponent_in_gas_filled_lamps() {
    // Fink and Beaty 1978: 0.42, for any lamp (published second hand). Half a unit in the second place.
    const COLOUR: f64 = 0.005;
    let published = reference::rating_exponents();
    let published =
        published.iter().find(|row| row.quantity == "colour temperature").expect("a row").exponent;
    for (volts, watts) in [(230.0, 60.0), (230.0, 100.0), (120.0, 60.0), (120.0, 100.0)] {
        let ours = lamp(volts, watts, Fill::Gas);
        let band = band(&ours, |lamp| exponent(lamp, colour_kelvin));
        inside(band, published, COLOUR, &format!("{volts} V {watts} W"));
    }
    // It cannot hold for a vacuum lamp, whose power all goes as eps T^4, with eps rising, to the exponent 4.7 or so:
    // with the power exponent 1.58 that leaves 1.58 / 4.7 = 0.34 for the filament and 0.35 for its colour.
    let vacuum = exponent(&lamp(120.0, 25.0, Fill::Vacuum), colour_kelvin);
    assert!((0.33..0.37).contains(&vacuum), "{vacuum}");
    assert!(1.58 / published < 4.0, "the published pair would need less than a grey body radiates");
}

#[test]
fn halogen_light_rises_as_the_text_says() {
    // Text on halogen lamps (published second hand): +5 % voltage, about +15 % light, an exponent of 2.95.
    let ours = lamp(230.0, 300.0, Fill::Halogen);
    let band = band(&ours, |lamp| (lumens(lamp, 1.05 * 230.0) / lumens(lamp, 230.0) - 1.0) * 100.0);
    // "About 15 %": half a per cent.
    inside(band, 15.0, 0.5, "light at +5 %");
}

#[test]
fn flux_by_wattage_is_within_a_tenth_of_the_regulation() {
    /// The issue's own limit.
    const FLUX: f64 = 0.10;
    for row in reference::flux_230().iter().filter(|row| (25.0..=200.0).contains(&row.watts)) {
        let ours = Lamp::new(230.0, row.watts).expect("a stock size");
        let flux = ours.lumens(ours.rated_kelvin());
        assert!((flux / row.lumens - 1.0).abs() < FLUX, "{} W: {flux} {}", row.watts, row.lumens);
    }
    for row in reference::flux_120() {
        let ours = Lamp::new(120.0, row.watts).expect("a stock size");
        let flux = ours.lumens(ours.rated_kelvin());
        assert!((flux / row.published - 1.0).abs() < FLUX, "{} W: {flux} {}", row.watts, row.published);
        // Catalogue values, from memory.
        assert!((flux / row.from_memory - 1.0).abs() < FLUX, "{} W: {flux} {}", row.watts, row.from_memory);
    }
}

#[test]
fn temperature_and_flux_belong_together() {
    // The default temperature comes from the flux, so the two tables check each other: with the temperatures of the
    // lighting handbook (from memory) the flux must be that of the catalogues (from memory).
    /// 80 K, the stated standard deviation, are a quarter of the flux at these temperatures.
    const FLUX: f64 = 0.25;
    for row in reference::flux_120() {
        let rows = reference::filament_temperature();
        let listed = rows.iter().find(|other| other.watts == row.watts && other.status == "from memory");
        let spec = LampSpec {
            volts: 120.0,
            watts: row.watts,
            rated_kelvin: Some(listed.expect("listed").kelvin),
            ..LampSpec::default()
        };
        let ours = lamp_from(spec);
        let flux = ours.lumens(ours.rated_kelvin());
        assert!((flux / row.from_memory - 1.0).abs() < FLUX, "{} W: {flux} {}", row.watts, row.from_memory);
    }
}

#[test]
fn filament_temperatures_are_the_published_ones() {
    for row in reference::filament_temperature() {
        let ours = lamp(row.volts, row.watts, fill(&row.fill));
        let what = format!("{} V {} W, {}", row.volts, row.watts, row.status);
        // 80 K is the stated standard uncertainty; the band is 1.96 of them.
        inside((ours.rated_kelvin() - 157.0, ours.rated_kelvin() + 157.0), row.kelvin, 0.0, &what);
    }
}

#[test]
fn a_120_volt_60_watt_filament_has_its_published_wire() {
    // Encyclopedia entry on the incandescent lamp (published second hand): 46 um thick, 0.58 m long.
    /// The issue's own limit.
    const WIRE: f64 = 0.20;
    let wire = Wire::of(lamp(120.0, 60.0, Fill::Gas).filament());
    assert!((wire.diameter_metres / 46e-6 - 1.0).abs() < WIRE, "{}", wire.diameter_metres);
    assert!((wire.metres / 0.58 - 1.0).abs() < WIRE, "{}", wire.metres);
}

/// The lamp as somebody would model it who owns another table of tungsten: the same rating and the same lumens, hence
/// another temperature. Found here by bisection, with no code of the core's search.
fn remodelled(lamp: &Lamp, tungsten: &'static Properties) -> Filament {
    let efficacy = |kelvin: f64, tables: &Properties| {
        luminous_exitance(kelvin) / (tables.emissivity.at(kelvin) * STEFAN_BOLTZMANN * kelvin.powi(4))
    };
    let wanted = efficacy(lamp.rated_kelvin(), &STANDARD);
    let (mut low, mut high) = (1500.0, 3500.0);
    while high - low > 1e-6 {
        let middle = 0.5 * (low + high);
        if efficacy(middle, tungsten) < wanted { low = middle } else { high = middle }
    }
    Filament::new(Shape { kelvin: low, ..lamp.filament().shape() }, tungsten)
}

static OTHER_BOTH: Properties =
    Properties { resistivity: OTHER_RESISTIVITY.resistivity, emissivity: OTHER_EMISSIVITY.emissivity };

#[test]
fn the_other_published_tables_lie_inside_the_band() {
    let ratings = [(230.0, 25.0), (230.0, 60.0), (230.0, 100.0), (230.0, 200.0), (120.0, 60.0), (12.0, 21.0)];
    for (volts, watts) in ratings {
        let ours = Lamp::new(volts, watts).expect("a stock size");
        for (name, tables) in
            [("resistivity", &OTHER_RESISTIVITY), ("emissivity", &OTHER_EMISSIVITY), ("both", &OTHER_BOTH)]
        {
            // At the same temperature, and with the temperature that the lumens give under the other tables.
            for other in [ours.filament().with_tungsten(tables), remodelled(&ours, tables)] {
                for share in [0.001, 0.01, 0.05, 0.1, 0.2, 0.3, 0.5, 0.7, 0.9, 1.0, 1.1] {
                    let at = share * volts;
                    let stated = expect::lamp_amps(&ours, at);
                    let what = format!("{volts} V {watts} W, other {name}, at {at} V");
                    inside((stated.low, stated.high), other.at_volts(at).amps(), 1e-9, &what);
                }
            }
        }
        let warm = ours.at_kelvin(AMBIENT_KELVIN + 1.0).expect("in range");
        assert!((warm.volts / warm.amps / ours.cold_ohms() - 1.0).abs() < 0.01);
    }
}
