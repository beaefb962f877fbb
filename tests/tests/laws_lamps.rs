//! Laws that every lamp and every typed number obeys, on random ones.

use lampladder_core::bank::Bank;
use lampladder_core::error::Field;
use lampladder_core::expect;
use lampladder_core::glow::Glow;
use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_core::load::{Draw, Impedance, Rectifier, RectifierSpec};
use lampladder_core::plate::Plate;
use lampladder_core::quantity;
use lampladder_core::supply::Supply;
use lampladder_core::wire::Wire;
use lampladder_tests::random::{any_lamp, cases, log_uniform};
use proptest::prelude::*;

/// Rounding of a search that ends at 1e-13.
const SEARCHED: f64 = 1e-11;

proptest! {
    #![proptest_config(cases(400))]

    #[test]
    fn more_volts_are_more_amps_watts_heat_and_light(lamp in any_lamp(), share in log_uniform(1e-9, 1.2), step in log_uniform(1e-6, 1.0)) {
        let (low, high) = (lamp.at_volts(share * lamp.rated_volts()), lamp.at_volts(share * (1.0 + step) * lamp.rated_volts()));
        prop_assert!(high.amps >= low.amps * (1.0 - SEARCHED), "{low:?} {high:?}");
        prop_assert!(high.watts >= low.watts * (1.0 - SEARCHED));
        prop_assert!(high.kelvin >= low.kelvin * (1.0 - SEARCHED));
        prop_assert!(lamp.lumens(high.kelvin) >= lamp.lumens(low.kelvin) * (1.0 - 1e-9));
        // A filament's resistance never falls.
        prop_assert!(high.volts * low.amps >= low.volts * high.amps * (1.0 - SEARCHED));
    }

    #[test]
    fn the_same_point_is_found_from_volts_amps_and_kelvin(lamp in any_lamp(), share in log_uniform(1e-6, 1.0)) {
        let state = lamp.at_volts(share * lamp.rated_volts());
        prop_assert!((state.volts / (share * lamp.rated_volts()) - 1.0).abs() < SEARCHED, "{state:?}");
        prop_assert!((state.volts * state.amps / state.watts - 1.0).abs() < SEARCHED, "watts are volts times amperes");
        let again = lamp.at_amps(state.amps);
        prop_assert!((again.volts / state.volts - 1.0).abs() < 1e-10, "{state:?} {again:?}");
        if state.kelvin > 310.0 {
            let again = lamp.at_kelvin(state.kelvin).expect("on the curve");
            prop_assert!((again.amps / state.amps - 1.0).abs() < 1e-10, "{state:?} {again:?}");
        }
    }

    #[test]
    fn the_rating_is_on_the_curve_and_the_cold_end_is_ohmic(lamp in any_lamp()) {
        let rated = lamp.at_volts(lamp.rated_volts());
        // Calibration may move the watts; nothing was measured here.
        prop_assert!((rated.watts / lamp.rated_watts() - 1.0).abs() < 1e-9);
        prop_assert!((rated.kelvin - lamp.rated_kelvin()).abs() < 1e-5);
        let cold = lamp.at_volts(1e-9 * lamp.rated_volts());
        prop_assert!((cold.volts / cold.amps / lamp.cold_ohms() - 1.0).abs() < 1e-6);
        let ratio = lamp.rated_volts().powi(2) / lamp.rated_watts() / lamp.cold_ohms();
        prop_assert!((6.0..20.0).contains(&ratio), "hot over cold {ratio}");
    }

    #[test]
    fn bands_hold_their_value_and_variants_are_lamps(lamp in any_lamp(), share in log_uniform(1e-3, 1.1)) {
        let volts = share * lamp.rated_volts();
        let band = expect::lamp_amps(&lamp, volts);
        prop_assert!(0.0 <= band.low && band.low <= band.value && band.value <= band.high, "{band:?}");
        prop_assert!(band.high.is_finite());
        for index in 0..Lamp::VARIANTS + 2 {
            let state = lamp.variant(index).at_volts(volts);
            prop_assert!(state.amps.is_finite() && state.amps > 0.0, "{index}: {state:?}");
        }
        let wire = Wire::of(lamp.filament());
        prop_assert!(wire.metres > 0.0 && wire.metres.is_finite() && wire.diameter_metres > 0.0);
        prop_assert!(wire.joules_per_kelvin(1000.0) > 0.0);
    }

    #[test]
    fn every_glow_can_be_drawn(kelvin in 300.0..3600.0, rated in 1500.0..3400.0) {
        let glow = Glow::at(kelvin, rated);
        prop_assert!(glow.x.is_finite() && glow.y.is_finite() && glow.relative_luminance >= 0.0);
        prop_assert!((0.3..0.75).contains(&glow.x) && (0.2..0.45).contains(&glow.y), "{glow:?}");
    }

    #[test]
    fn points_of_a_real_curve_lead_back_to_it(
        lamp in any_lamp(),
        shares in prop::collection::vec(0.02..1.05, 3..12),
        by_kelvin in -100.0_f64..100.0,
    ) {
        // What was measured is a lamp like ours, some degrees off.
        let other = LampSpec { rated_kelvin: Some((lamp.rated_kelvin() + by_kelvin).clamp(1500.0, 3400.0)), gas_share: Some(lamp.gas_share()), ..lamp.spec().clone() };
        let other = Lamp::from_spec(other).expect("in range");
        let points: Vec<Point> = shares.iter().map(|share| other.at_volts(share * lamp.rated_volts())).map(|state| Point { volts: state.volts, amps: state.amps }).collect();
        let fitted = Lamp::from_spec(LampSpec { points: points.clone(), rated_kelvin: None, ..lamp.spec().clone() });
        let fitted = fitted.expect("in range");
        let off = |lamp: &Lamp| points.iter().map(|point| (lamp.at_volts(point.volts).amps / point.amps).ln().powi(2)).sum::<f64>();
        let before = Lamp::from_spec(LampSpec { points: Vec::new(), rated_kelvin: None, ..lamp.spec().clone() }).expect("in range");
        // Never worse than the defaults, but for what lies far below a meter's error.
        prop_assert!(off(&fitted) <= off(&before) + 1e-4, "{} {}", off(&fitted), off(&before));
    }

    #[test]
    fn constructors_refuse_junk_and_panic_at_nothing(
        a in any::<f64>(), b in any::<f64>(), c in any::<f64>(), d in any::<f64>(), e in any::<f64>(),
    ) {
        if let Ok(lamp) = Lamp::new(a, b) {
            prop_assert!((1.0..=500.0).contains(&a) && (0.05..=5000.0).contains(&b));
            prop_assert!(lamp.at_volts(c).amps.is_finite(), "{c:?}");
            prop_assert!(lamp.at_amps(d).volts.is_finite(), "{d:?}");
            prop_assert!(lamp.at_kelvin(e).is_ok() == (300.0..=3600.0).contains(&e));
        }
        let spec = LampSpec {
            volts: 230.0, watts: 60.0, lumens: Some(a), cold_ohms: Some(b), rated_kelvin: Some(c), gas_share: Some(d),
            points: vec![Point { volts: a, amps: e }], ..LampSpec::default()
        };
        if let Ok(lamp) = Lamp::from_spec(spec) {
            prop_assert!(lamp.at_volts(100.0).amps.is_finite());
        }
        let _ = Supply::new(a, b, c);
        let _ = Impedance::new(a, b);
        let _ = Impedance::from_rating(a, b, c);
        for draw in [Draw::Ohms(d), Draw::Amps(d), Draw::Watts { watts: a, start_volts: b, stop_volts: c, restart_seconds: e }] {
            let _ = Rectifier::new(RectifierSpec { farads: a, series_ohms: b, diode_volts: c, draw, shunt_ohms: Some(e) });
        }
        for family in lampladder_core::family::Family::ALL {
            if let Ok(plate) = Plate::new(family, a, b, Some(c)) {
                prop_assert!(plate.watts().is_finite());
            }
        }
        let bank = Bank::single(Lamp::new(230.0, 60.0).expect("a stock size"));
        prop_assert!(bank.at_volts(a).amps.is_finite(), "{a:?}");
        prop_assert!(bank.at_amps(b).volts.is_finite(), "{b:?}");
        prop_assert!(c.is_nan() || bank.at_ln_rise(c).volts.is_finite(), "{c:?}");
    }

    #[test]
    fn typed_text_is_read_or_refused(text in any::<String>(), field in 0..3) {
        let field = [Field::Volts, Field::Amps, Field::Ohms][usize::try_from(field).expect("small")];
        if let Ok(value) = quantity::parse(&text, field) {
            prop_assert!(!value.is_nan());
        }
    }

    #[test]
    fn typed_numbers_come_back(value in log_uniform(1e-6, 1e9), comma in any::<bool>()) {
        let text = format!("{value}");
        let text = if comma { text.replace('.', ",") } else { text };
        let read = quantity::parse(&format!("{text} V"), Field::Volts).expect("a number");
        prop_assert!((read / value - 1.0).abs() < 1e-12, "{text}: {read}");
    }
}
