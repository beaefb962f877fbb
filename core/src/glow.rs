//! What a filament at a temperature looks like: chromaticity, luminance, a colour for a screen, and a word.
//!
//! Spectral radiance is Planck's law times the measured spectral emissivity of tungsten; the observer is CIE
//! 1931. The display colour is a rendering choice, described at [`display_colour`].

use serde::{Deserialize, Serialize};

use crate::observer::{FIRST_NANOMETRE, LUMENS_PER_WATT, STEP_NANOMETRES, colour_matching};
use crate::tungsten::spectral_emissivity;

/// Second radiation constant h c / k, metre kelvin (exact in the SI of 2019, rounded to `f64`).
const SECOND_RADIATION: f64 = 1.438_776_877_503_933_4e-2;

/// First radiation constant for exitance, 2 pi h c^2, watt square metre (exact in the SI of 2019).
const FIRST_RADIATION: f64 = 3.741_771_852_192_758e-16;

/// Below this nothing glows to the eye: the Draper point, 798 K (J. W. Draper 1847).
pub const DRAPER_KELVIN: f64 = 798.0;

/// Filament temperature that stands for "full" where no lamp is given, kelvin.
pub const TYPICAL_RATED_KELVIN: f64 = 2800.0;

/// How bright and of which kind a glow is, from dark to beyond the rating.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum GlowWord {
    /// No visible light: under the Draper point.
    Dark,
    /// Only in a shaded place.
    Faint,
    /// Deep red.
    DullRed,
    /// Red to orange.
    Orange,
    /// Orange to yellow, still easy to look at.
    Amber,
    /// Yellow.
    Yellow,
    /// Within a few per cent of the rated temperature.
    Full,
    /// Above the rated temperature.
    OverFull,
}

impl GlowWord {
    /// Every word, from dark upwards.
    pub const ALL: [Self; 8] = [
        Self::Dark,
        Self::Faint,
        Self::DullRed,
        Self::Orange,
        Self::Amber,
        Self::Yellow,
        Self::Full,
        Self::OverFull,
    ];

    /// The word's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Dark => "dark",
            Self::Faint => "faint",
            Self::DullRed => "dull red",
            Self::Orange => "orange",
            Self::Amber => "amber",
            Self::Yellow => "yellow",
            Self::Full => "full",
            Self::OverFull => "over full",
        }
    }

    /// The filament temperatures, kelvin, to which this word belongs on a lamp rated for `rated_kelvin`: the
    /// inverse of [`Glow::word`]. Below the Draper point it starts at 300 K; above the rating it ends at 1.15 times
    /// that, where a lamp lasts minutes. Empty (the ends equal) for a word that a cool-running lamp never reaches.
    pub fn kelvins(self, rated_kelvin: f64) -> (f64, f64) {
        let (full, over) = (FULL_SHARE * rated_kelvin, OVER_SHARE * rated_kelvin);
        let between = |low: f64, high: f64| (low.min(full), high.min(full));
        match self {
            Self::Dark => (crate::tungsten::AMBIENT_KELVIN, DRAPER_KELVIN),
            Self::Faint => between(DRAPER_KELVIN, DULL_RED_KELVIN),
            Self::DullRed => between(DULL_RED_KELVIN, ORANGE_KELVIN),
            Self::Orange => between(ORANGE_KELVIN, AMBER_KELVIN),
            Self::Amber => between(AMBER_KELVIN, YELLOW_KELVIN),
            Self::Yellow => between(YELLOW_KELVIN, full),
            Self::Full => (full, over),
            Self::OverFull => (over, 1.15 * rated_kelvin),
        }
    }
}

/// What a filament looks like.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Glow {
    /// CIE 1931 chromaticity x.
    pub x: f64,
    /// CIE 1931 chromaticity y.
    pub y: f64,
    /// Luminance over that at the rating; 0 below the Draper point's reach is simply tiny.
    pub relative_luminance: f64,
    /// Colour for a screen, sRGB, one byte a channel.
    pub srgb: [u8; 3],
    /// The word for it.
    pub word: GlowWord,
}

impl Glow {
    /// The glow at `kelvin` of a filament that is rated for `rated_kelvin`.
    pub fn at(kelvin: f64, rated_kelvin: f64) -> Self {
        let here = tristimulus(kelvin, |nanometre| spectral_emissivity(nanometre, kelvin));
        let rated = tristimulus(rated_kelvin, |nanometre| spectral_emissivity(nanometre, rated_kelvin));
        let (x, y) = chromaticity(here);
        let relative_luminance = here[1] / rated[1];
        let srgb = if kelvin < DRAPER_KELVIN { [0; 3] } else { display_colour(here, rated) };
        Self { x, y, relative_luminance, srgb, word: word(kelvin, rated_kelvin) }
    }
}

/// Luminous exitance of tungsten at `kelvin`, lumen per square metre of filament.
pub fn luminous_exitance(kelvin: f64) -> f64 {
    LUMENS_PER_WATT * tristimulus(kelvin, |nanometre| spectral_emissivity(nanometre, kelvin))[1]
}

/// CIE 1931 tristimulus values of a radiator at `kelvin`, as exitance in W/m² (Y times 683 is in lm/m²).
///
/// The trapezoid rule over 5 nm rows: within 0.1 % of 1 nm rows above 800 K, where the integrand is smooth.
pub fn tristimulus(kelvin: f64, emissivity: impl Fn(f64) -> f64) -> [f64; 3] {
    let mut sums = [0.0; 3];
    for (row, matching) in colour_matching().enumerate() {
        #[expect(clippy::cast_precision_loss, reason = "a row number below 81")]
        let nanometre = FIRST_NANOMETRE + STEP_NANOMETRES * row as f64;
        let metre = nanometre * 1e-9;
        let planck = FIRST_RADIATION
            / (metre * metre * metre * metre * metre)
            / libm::expm1(SECOND_RADIATION / (metre * kelvin));
        let exitance = planck * emissivity(nanometre) * STEP_NANOMETRES * 1e-9;
        for (sum, weight) in sums.iter_mut().zip(matching) {
            *sum += exitance * weight;
        }
    }
    sums
}

/// Chromaticity coordinates x and y of tristimulus values.
pub fn chromaticity([x, y, z]: [f64; 3]) -> (f64, f64) {
    let sum = x + y + z;
    (x / sum, y / sum)
}

/// The colour that a screen should show in a dark well for a filament `here`, when `rated` is the same filament
/// at its rating.
///
/// - Brightness: lightness falls with the cube root of luminance (CIE L*), but the range from the Draper point
///   to full is some ten decades, so the shown luminance is `Y^0.25`, which keeps a dull red visible in a well
///   and a full lamp at white.
/// - Colour: an eye that has looked at the lamp is half adapted to it; the white point lies halfway, in
///   reciprocal temperature, between a 2800 K tungsten lamp and D65. (Von Kries scaling in the Bradford space.)
/// - Colours outside sRGB are moved towards grey of equal luminance until they fit.
pub fn display_colour(here: [f64; 3], rated: [f64; 3]) -> [u8; 3] {
    let relative = (here[1] / rated[1]).max(0.0);
    // Linear sRGB of the adapted colour at unit luminance.
    let unit = here.map(|value| value / here[1].max(f64::MIN_POSITIVE));
    let linear = to_linear_srgb(adapt(unit));
    let shown = libm::pow(relative, 0.25).min(1.0);
    // Towards grey of luminance 1 until no channel is negative.
    let least = linear[0].min(linear[1]).min(linear[2]);
    let fade = if least < 0.0 { 1.0 / (1.0 - least) } else { 1.0 };
    let mut scaled = linear.map(|channel| (1.0 + fade * (channel - 1.0)) * shown);
    let most = scaled[0].max(scaled[1]).max(scaled[2]);
    if most > 1.0 {
        // Too bright for the screen at this hue: keep the hue and let it bleach towards white a little.
        let bleach = (1.0 - 1.0 / most) * 0.5;
        scaled = scaled.map(|channel| (channel / most) * (1.0 - bleach) + bleach);
    }
    scaled.map(encode)
}

/// Tristimulus of the half-adapted white: the Planckian radiator midway in mired between 2800 K (357 mired) and
/// 6504 K (154 mired), 3915 K (derived).
const ADAPTED_WHITE: [f64; 3] = [1.013_6, 1.0, 0.624_1];

/// Tristimulus of D65 (CIE 15).
const D65: [f64; 3] = [0.950_47, 1.0, 1.088_83];

/// Bradford cone response (K. M. Lam 1985), from XYZ.
const BRADFORD: [[f64; 3]; 3] =
    [[0.8951, 0.2664, -0.1614], [-0.7502, 1.7135, 0.0367], [0.0389, -0.0685, 1.0296]];

/// Its inverse.
const BRADFORD_INVERSE: [[f64; 3]; 3] = [
    [0.986_992_9, -0.147_054_3, 0.159_962_7],
    [0.432_305_3, 0.518_360_3, 0.049_291_2],
    [-0.008_528_7, 0.040_042_8, 0.968_486_7],
];

/// XYZ to linear sRGB (IEC 61966-2-1).
const SRGB: [[f64; 3]; 3] = [
    [3.240_454_2, -1.537_138_5, -0.498_531_4],
    [-0.969_266, 1.876_010_8, 0.041_556],
    [0.055_643_4, -0.204_025_9, 1.057_225_2],
];

fn times(matrix: &[[f64; 3]; 3], vector: [f64; 3]) -> [f64; 3] {
    matrix.map(|row| row[0] * vector[0] + row[1] * vector[1] + row[2] * vector[2])
}

fn adapt(xyz: [f64; 3]) -> [f64; 3] {
    let from = times(&BRADFORD, ADAPTED_WHITE);
    let to = times(&BRADFORD, D65);
    let mut cone = times(&BRADFORD, xyz);
    for channel in 0..3 {
        cone[channel] *= to[channel] / from[channel];
    }
    times(&BRADFORD_INVERSE, cone)
}

fn to_linear_srgb(xyz: [f64; 3]) -> [f64; 3] {
    times(&SRGB, xyz)
}

/// sRGB transfer function (IEC 61966-2-1) to a byte.
fn encode(linear: f64) -> u8 {
    let linear = linear.clamp(0.0, 1.0);
    let value =
        if linear <= 0.003_130_8 { 12.92 * linear } else { 1.055 * libm::pow(linear, 1.0 / 2.4) - 0.055 };
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "rounded into 0..=255 by the clamp above"
    )]
    let byte = libm::round(value * 255.0) as u8;
    byte
}

/// Where the words change, kelvin; and, from yellow on, over the rated temperature.
const DULL_RED_KELVIN: f64 = 1000.0;
const ORANGE_KELVIN: f64 = 1300.0;
const AMBER_KELVIN: f64 = 1700.0;
const YELLOW_KELVIN: f64 = 2150.0;
const FULL_SHARE: f64 = 0.94;
const OVER_SHARE: f64 = 1.02;

/// The word for a temperature: absolute up to orange, since the eye names a dim filament by its hue; against the
/// rating above, since a bright one is named by how far from full it is.
fn word(kelvin: f64, rated_kelvin: f64) -> GlowWord {
    let share = kelvin / rated_kelvin;
    match kelvin {
        _ if share > OVER_SHARE => GlowWord::OverFull,
        _ if share > FULL_SHARE => GlowWord::Full,
        k if k < DRAPER_KELVIN => GlowWord::Dark,
        k if k < DULL_RED_KELVIN => GlowWord::Faint,
        k if k < ORANGE_KELVIN => GlowWord::DullRed,
        k if k < AMBER_KELVIN => GlowWord::Orange,
        k if k < YELLOW_KELVIN => GlowWord::Amber,
        _ => GlowWord::Yellow,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn words_rise_with_temperature() {
        let mut last = GlowWord::Dark;
        for kelvin in (300..3600).step_by(20) {
            let word = Glow::at(f64::from(kelvin), 2800.0).word;
            assert!(word >= last, "{kelvin} K is {word:?} after {last:?}");
            last = word;
        }
        assert_eq!(last, GlowWord::OverFull);
        assert_eq!(Glow::at(790.0, 2800.0).word, GlowWord::Dark);
    }

    #[test]
    fn a_word_belongs_to_its_temperatures() {
        for word in GlowWord::ALL {
            let (low, high) = word.kelvins(2700.0);
            assert_eq!(Glow::at(f64::midpoint(low, high), 2700.0).word, word);
        }
    }

    #[test]
    fn the_screen_is_black_when_cold_and_nearly_white_at_the_rating() {
        assert_eq!(Glow::at(300.0, 2800.0).srgb, [0, 0, 0]);
        let full = Glow::at(2800.0, 2800.0);
        assert_eq!(full.relative_luminance, 1.0);
        assert!(full.srgb[0] > 250 && full.srgb[2] > 120, "{:?}", full.srgb);
        let dull = Glow::at(1100.0, 2800.0).srgb;
        assert!(dull[0] > 2 * dull[1] && dull[1] >= dull[2], "{dull:?}");
    }
}
