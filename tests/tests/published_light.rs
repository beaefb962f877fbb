//! Light against published figures: chromaticity of Planck radiators, the observer's integral, the Draper point.

use lampladder_core::glow::{Glow, GlowWord, TYPICAL_RATED_KELVIN, chromaticity, tristimulus};
use lampladder_core::observer::LUMENS_PER_WATT;
use lampladder_core::tungsten::STEFAN_BOLTZMANN;
use lampladder_tests::reference;

/// The reference integrates the observer at 1 nm, the core at 5 nm: a tenth of the smallest difference that an eye tells
/// apart, about 0.002.
const CHROMATICITY: f64 = 2e-4;

/// The same difference of steps, in the luminous efficacy.
const EFFICACY: f64 = 1e-3;

/// J. W. Draper 1847: solids begin to glow at 977 F, 798 K.
const DRAPER_KELVIN: f64 = 798.0;

#[test]
fn planck_radiators_have_their_published_chromaticity_and_efficacy() {
    for row in reference::planckian() {
        let xyz = tristimulus(row.kelvin, |_| 1.0);
        let (x, y) = chromaticity(xyz);
        assert!((x - row.x).abs() < CHROMATICITY, "{} K: x {x} {}", row.kelvin, row.x);
        assert!((y - row.y).abs() < CHROMATICITY, "{} K: y {y} {}", row.kelvin, row.y);
        let efficacy = LUMENS_PER_WATT * xyz[1] / (STEFAN_BOLTZMANN * row.kelvin.powi(4));
        let published = row.lumen_per_watt_of_radiation;
        assert!((efficacy / published - 1.0).abs() < EFFICACY, "{} K: {efficacy} {published}", row.kelvin);
    }
}

#[test]
fn planck_radiators_agree_with_an_independent_crate() {
    let theirs = colorimetry::observer::Observer::Cie1931;
    for kelvin in [1500.0, 2000.0, 2400.0, 2856.0, 3200.0] {
        let (x, y) = chromaticity(tristimulus(kelvin, |_| 1.0));
        let [their_x, their_y] = theirs.xyz_planckian_locus(kelvin).chromaticity().to_array();
        assert!((x - their_x).abs() < CHROMATICITY, "{kelvin} K: {x} {their_x}");
        assert!((y - their_y).abs() < CHROMATICITY, "{kelvin} K: {y} {their_y}");
    }
}

#[test]
fn nothing_glows_below_the_draper_point() {
    for kelvin in 300..798 {
        let glow = Glow::at(f64::from(kelvin), TYPICAL_RATED_KELVIN);
        assert_eq!((glow.word, glow.srgb), (GlowWord::Dark, [0; 3]), "{kelvin} K");
    }
    // "About 800 K": within 20 K above, something shows.
    let above = Glow::at(DRAPER_KELVIN + 20.0, TYPICAL_RATED_KELVIN);
    assert_ne!(above.word, GlowWord::Dark);
    assert_ne!(above.srgb, [0; 3], "a word for it, but a black screen");
}

#[test]
fn a_brighter_filament_is_never_drawn_darker() {
    let lightness = |kelvin: f64| {
        let [r, g, b] = Glow::at(kelvin, TYPICAL_RATED_KELVIN).srgb.map(f64::from);
        0.2126 * r + 0.7152 * g + 0.0722 * b
    };
    let mut last = 0.0;
    for kelvin in (300..=3600).step_by(10) {
        let now = lightness(f64::from(kelvin));
        // One step of one channel of 255 may round down.
        assert!(now >= last - 1.0, "{kelvin} K: {now} after {last}");
        last = now;
    }
}
