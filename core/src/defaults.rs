//! What an incandescent lamp of a printed rating usually is, and how far a real one may be from that.

use crate::lamp::Fill;

/// Lowest rated volts of a lamp for the mains.
const MAINS_VOLTS: f64 = 90.0;

/// Between these lie the two families of published flux tables, 120 V and 230 V.
const BETWEEN_MAINS_VOLTS: f64 = 170.0;

/// Watts and lumens of 230 V lamps.
///
/// Commission Regulation (EC) 244/2009, table of claimed equivalence (published); the last row continues its
/// slope (derived).
const LUMENS_230: [(f64, f64); 8] = [
    (15.0, 119.0),
    (25.0, 217.0),
    (40.0, 410.0),
    (60.0, 702.0),
    (75.0, 920.0),
    (100.0, 1326.0),
    (150.0, 2137.0),
    (200.0, 3009.0),
];

/// Watts and lumens of 120 V lamps: the equivalence printed on lamp packages (published second hand).
const LUMENS_120: [(f64, f64); 5] =
    [(40.0, 450.0), (60.0, 800.0), (75.0, 1100.0), (100.0, 1600.0), (150.0, 2600.0)];

/// The usual fill: vacuum for the smallest lamps, gas above (common practice, no source).
pub(crate) fn fill(volts: f64, watts: f64) -> Fill {
    let small = if volts >= MAINS_VOLTS { watts <= 25.0 } else { watts / volts <= 0.3 };
    if small { Fill::Vacuum } else { Fill::Gas }
}

/// Usual share of the input that the gas carries away at the rating.
///
/// A thin wire loses more: the film's loss goes with the wire's length, hardly with its diameter (Langmuir
/// 1912). The law `0.17 (0.435 A / I)^0.4`, at most 0.20, runs through the values of common 230 V lamps and
/// through 13.5 % for 60 W and 11.5 % for 100 W at 120 V (IES Lighting Handbook, from memory) within the
/// stated spread.
pub(crate) fn gas_share(fill: Fill, volts: f64, watts: f64) -> f64 {
    let ordinary = (0.17 * libm::pow(0.435 * volts / watts, 0.4)).clamp(0.04, 0.20);
    let gas = match fill {
        Fill::Vacuum => 0.0,
        Fill::Gas => ordinary,
        // Denser gas in a small capsule, on a hotter wire: half as much (design value, no source).
        Fill::Halogen => 0.5 * ordinary,
    };
    (gas + end_share(volts)).min(MOST_SHARE)
}

/// Greatest default of the gas share, short of what the model takes, so that its spread goes both ways.
const MOST_SHARE: f64 = 0.4;

/// Usual share of the input that the filament's ends lose to its leads at the rating, counted as gas loss.
///
/// A pair of ends costs about the same voltage in every lamp (I. Langmuir and others, Physical
/// Review 35 (1930) 478, from memory). Two measured vacuum lamps need 1.0 V each: a share of 0.40 at 2.5 V (New
/// Physics: Sae Mulli 73 (2023) 127, table 2) and of 0.08 at about 12 V (open student laboratory data). In lamps
/// for the mains it is lost in the spread of the rest.
fn end_share(volts: f64) -> f64 {
    if volts >= MAINS_VOLTS { 0.0 } else { (1.0 / volts).min(0.3) }
}

/// Usual luminous flux of a mains lamp, lumens, where a published table reaches it.
pub(crate) fn lumens(fill: Fill, volts: f64, watts: f64) -> Option<f64> {
    if volts < MAINS_VOLTS || matches!(fill, Fill::Halogen) {
        return None;
    }
    let table: &[(f64, f64)] = if volts < BETWEEN_MAINS_VOLTS { &LUMENS_120 } else { &LUMENS_230 };
    // Interpolated, and continued at the ends, along straight lines of log lumens against log watts.
    let upper = table.iter().position(|row| row.0 >= watts).unwrap_or(table.len() - 1).max(1);
    let ((w0, l0), (w1, l1)) = (table[upper - 1], table[upper]);
    let slope = libm::log(l1 / l0) / libm::log(w1 / w0);
    Some(l0 * libm::pow(watts / w0, slope.clamp(1.0, 1.5)))
}

/// Usual filament temperature at the rating where no flux table reaches, kelvin.
///
/// Halogen and low-voltage figures are design values from memory; indicator lamps are built for long life and
/// run cool: three measured ones give 2050 to 2150 K from their hot and cold resistance (open bench
/// measurements, published second hand).
pub(crate) fn kelvin(fill: Fill, volts: f64, _watts: f64) -> f64 {
    match fill {
        Fill::Halogen if volts >= MAINS_VOLTS => 2900.0,
        Fill::Halogen => 3050.0,
        Fill::Gas => 2750.0,
        Fill::Vacuum => 2200.0,
    }
}

/// Standard deviation of the watts of a new lamp: the limits of IEC 60064, 4 % + 0.5 W (from memory), taken as a
/// rectangular distribution (JCGM 100:2008, 4.3.7).
pub(crate) fn watts_deviation(watts: f64) -> f64 {
    (0.04 * watts + 0.5_f64.min(0.04 * watts)) / SQRT_3
}

/// Standard deviation of the filament temperature, kelvin: 80 K for mains lamps; low-voltage lamps are made for
/// lives from hours to decades, so 200 K (design values, no source).
pub(crate) fn kelvin_deviation(fill: Fill, volts: f64) -> f64 {
    if volts >= MAINS_VOLTS || matches!(fill, Fill::Halogen) { 80.0 } else { 200.0 }
}

/// Standard deviation of the gas share: 0.06 (design value, no source); in a vacuum what supports carry away, 0.03;
/// and half of what the ends lose, which depends on leads that nobody describes.
pub(crate) fn gas_share_deviation(fill: Fill, volts: f64) -> f64 {
    let gas = if matches!(fill, Fill::Vacuum) { 0.03 } else { 0.06 };
    gas + 0.5 * end_share(volts)
}

/// Square root of 3.
const SQRT_3: f64 = 1.732_050_807_568_877_2;
