//! The eye: the CIE 1931 2-degree standard observer, 380 to 780 nm at 5 nm.
//!
//! Values as general colour libraries ship them (read second hand); the tests hold them against one.

/// First wavelength, nanometre.
pub const FIRST_NANOMETRE: f64 = 380.0;

/// Distance between rows, nanometre.
pub const STEP_NANOMETRES: f64 = 5.0;

/// Luminous efficacy of light at 540 THz, lumen per watt (defining constant of the SI).
pub const LUMENS_PER_WATT: f64 = 683.0;

/// Rows of the table.
const ROWS: usize = 81;

/// Colour-matching functions x, y, z, a row for each wavelength; y is the luminous efficiency V(lambda).
///
/// Kept as whole numbers of the last decimal, which pack to half the size of an `f64` with its digits that look random.
pub fn colour_matching() -> impl ExactSizeIterator<Item = [f64; 3]> {
    #[expect(
        clippy::cast_precision_loss,
        reason = "below 2^53, so that one division gives the printed number"
    )]
    COUNTS.iter().map(|row| row.map(|count| count as f64 / DECIMALS))
}

/// The last decimal that the table has.
const DECIMALS: f64 = 1e10;

static COUNTS: [[u64; 3]; ROWS] = counted(&COLOUR_MATCHING);

const fn counted(values: &[[f64; 3]; ROWS]) -> [[u64; 3]; ROWS] {
    let mut counts = [[0; 3]; ROWS];
    let mut at = 0;
    while at < 3 * ROWS {
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "positive, and below 2^53"
        )]
        let count = (values[at / 3][at % 3] * DECIMALS + 0.5) as u64;
        counts[at / 3][at % 3] = count;
        at += 1;
    }
    counts
}

const COLOUR_MATCHING: [[f64; 3]; ROWS] = [
    [0.001_368, 0.000_039, 0.006_450_001],
    [0.002_236, 0.000_064, 0.010_549_99],
    [0.004_243, 0.00012, 0.020_050_01],
    [0.00765, 0.000_217, 0.03621],
    [0.01431, 0.000_396, 0.067_850_01],
    [0.02319, 0.00064, 0.1102],
    [0.04351, 0.00121, 0.2074],
    [0.07763, 0.00218, 0.3713],
    [0.13438, 0.004, 0.6456],
    [0.21477, 0.0073, 1.039_050_1],
    [0.2839, 0.0116, 1.3856],
    [0.3285, 0.01684, 1.62296],
    [0.34828, 0.023, 1.74706],
    [0.34806, 0.0298, 1.7826],
    [0.3362, 0.038, 1.77211],
    [0.3187, 0.048, 1.7441],
    [0.2908, 0.06, 1.6692],
    [0.2511, 0.0739, 1.5281],
    [0.19536, 0.09098, 1.28764],
    [0.1421, 0.1126, 1.0419],
    [0.09564, 0.13902, 0.812_950_1],
    [0.057_950_01, 0.1693, 0.6162],
    [0.03201, 0.20802, 0.46518],
    [0.0147, 0.2586, 0.3533],
    [0.0049, 0.323, 0.272],
    [0.0024, 0.4073, 0.2123],
    [0.0093, 0.503, 0.1582],
    [0.0291, 0.6082, 0.1117],
    [0.06327, 0.71, 0.078_249_99],
    [0.1096, 0.7932, 0.057_250_01],
    [0.1655, 0.862, 0.04216],
    [0.225_749_9, 0.914_850_1, 0.02984],
    [0.2904, 0.954, 0.0203],
    [0.3597, 0.9803, 0.0134],
    [0.433_449_9, 0.994_950_1, 0.008_749_999],
    [0.512_050_1, 1.0, 0.005_749_999],
    [0.5945, 0.995, 0.0039],
    [0.6784, 0.9786, 0.002_749_999],
    [0.7621, 0.952, 0.0021],
    [0.8425, 0.9154, 0.0018],
    [0.9163, 0.87, 0.001_650_001],
    [0.9786, 0.8163, 0.0014],
    [1.0263, 0.757, 0.0011],
    [1.0567, 0.6949, 0.001],
    [1.0622, 0.631, 0.0008],
    [1.0456, 0.5668, 0.0006],
    [1.0026, 0.503, 0.00034],
    [0.9384, 0.4412, 0.00024],
    [0.854_449_9, 0.381, 0.00019],
    [0.7514, 0.321, 0.0001],
    [0.6424, 0.265, 0.00005],
    [0.5419, 0.217, 0.00003],
    [0.4479, 0.175, 0.00002],
    [0.3608, 0.1382, 0.00001],
    [0.2835, 0.107, 0.0],
    [0.2187, 0.0816, 0.0],
    [0.1649, 0.061, 0.0],
    [0.1212, 0.04458, 0.0],
    [0.0874, 0.032, 0.0],
    [0.0636, 0.0232, 0.0],
    [0.04677, 0.017, 0.0],
    [0.0329, 0.01192, 0.0],
    [0.0227, 0.00821, 0.0],
    [0.01584, 0.005_723, 0.0],
    [0.011_359_16, 0.004_102, 0.0],
    [0.008_110_916, 0.002_929, 0.0],
    [0.005_790_346, 0.002_091, 0.0],
    [0.004_109_457, 0.001_484, 0.0],
    [0.002_899_327, 0.001_047, 0.0],
    [0.002_049_19, 0.00074, 0.0],
    [0.001_439_971, 0.00052, 0.0],
    [0.000_999_949_3, 0.000_361_1, 0.0],
    [0.000_690_078_6, 0.000_249_2, 0.0],
    [0.000_476_021_3, 0.000_171_9, 0.0],
    [0.000_332_301_1, 0.00012, 0.0],
    [0.000_234_826_1, 0.000_084_8, 0.0],
    [0.000_166_150_5, 0.00006, 0.0],
    [0.000_117_413, 0.000_042_4, 0.0],
    [0.000_083_075, 0.00003, 0.0],
    [0.000_058_707, 0.000_021_2, 0.0],
    [0.000_041_51, 0.000_014_99, 0.0],
];

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_rows_are_the_printed_numbers() {
        assert!(colour_matching().eq(COLOUR_MATCHING));
    }
}
