//! Tungsten: resistivity, total and spectral emissivity, heat capacity, from cited tables.
//!
//! All tables stand on one grid, 300 K to 3600 K in steps of 100 K, and are joined by a monotone piecewise
//! cubic (F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17 (1980) 238, with the harmonic-mean slopes of
//! F. N. Fritsch, J. Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300): no overshoot, continuous slope.

use core::fmt;

/// Ambient temperature, kelvin: where the tables and every cold lamp start.
pub const AMBIENT_KELVIN: f64 = 300.0;

/// Highest tabulated temperature, kelvin; tungsten melts at 3695 K.
pub const HIGHEST_KELVIN: f64 = 3600.0;

const STEP_KELVIN: f64 = 100.0;
const ROWS: usize = 34;

/// One property of tungsten against temperature.
#[derive(Clone, PartialEq)]
pub struct Table {
    values: [f64; ROWS],
    slopes: [f64; ROWS],
}

impl fmt::Debug for Table {
    /// Only its ends: a lamp that prints itself should fit on a screen.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "Table({} to {})", self.values[0], self.values[ROWS - 1])
    }
}

impl Table {
    const fn new(values: &[f64; ROWS]) -> Self {
        let mut slopes = [0.0; ROWS];
        let mut row = 1;
        while row < ROWS - 1 {
            let before = values[row] - values[row - 1];
            let after = values[row + 1] - values[row];
            slopes[row] = if before * after > 0.0 {
                2.0 * before * after / (before + after) / STEP_KELVIN
            } else {
                0.0
            };
            row += 1;
        }
        // One-sided ends: the parabola through the first three rows, which stays monotone for these tables.
        slopes[0] = (2.0 * (values[1] - values[0]) - (values[2] - values[0]) / 2.0) / STEP_KELVIN;
        let last = ROWS - 1;
        slopes[last] =
            (2.0 * (values[last] - values[last - 1]) - (values[last] - values[last - 2]) / 2.0) / STEP_KELVIN;
        Self { values: *values, slopes }
    }

    /// The value at `kelvin`; below and above the table, the value at its end.
    pub fn at(&self, kelvin: f64) -> f64 {
        self.values[0] + self.above_ambient(kelvin - AMBIENT_KELVIN).0
    }

    /// The value at 300 K + `rise` less the value at 300 K, without cancellation for a small `rise`, and the slope
    /// there, per kelvin.
    pub fn above_ambient(&self, rise: f64) -> (f64, f64) {
        let rise = rise.clamp(0.0, HIGHEST_KELVIN - AMBIENT_KELVIN);
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "clamped to the table just above"
        )]
        let row = ((rise / STEP_KELVIN) as usize).min(ROWS - 2);
        #[expect(clippy::cast_precision_loss, reason = "a row number below 34")]
        let t = rise / STEP_KELVIN - row as f64;
        let (y0, y1) = (self.values[row], self.values[row + 1]);
        let (m0, m1) = (self.slopes[row] * STEP_KELVIN, self.slopes[row + 1] * STEP_KELVIN);
        let step = y1 - y0;
        let (square, cube) = (3.0 * step - 2.0 * m0 - m1, m0 + m1 - 2.0 * step);
        let in_row = t * (m0 + t * (square + t * cube));
        let slope = (m0 + t * (2.0 * square + t * 3.0 * cube)) / STEP_KELVIN;
        ((y0 - self.values[0]) + in_row, slope)
    }
}

/// Electrical resistivity, micro-ohm centimetre.
///
/// W. E. Forsythe, A. G. Worthing, Astrophysical Journal 61 (1925) 146; the same digits in the CRC Handbook of
/// Chemistry and Physics, 60th ed. (1979), p. E-381 (read second hand).
pub static RESISTIVITY: Table = Table::new(&[
    5.65, 8.06, 10.56, 13.23, 16.09, 19.0, 21.94, 24.93, 27.94, 30.98, 34.08, 37.19, 40.36, 43.55, 46.78,
    50.05, 53.35, 56.67, 60.06, 63.48, 66.91, 70.39, 73.91, 77.49, 81.04, 84.7, 88.33, 92.04, 95.76, 99.54,
    103.3, 107.2, 111.1, 115.0,
]);

/// Electrical resistivity, micro-ohm centimetre: the second opinion, used for the width of the bands.
///
/// G. K. White, M. L. Minges, Int. J. Thermophysics 18 (1997) 1269, from its polynomial (read second hand).
pub static RESISTIVITY_1997: Table = Table::new(&[
    5.4702, 7.8806, 10.4070, 13.0407, 15.7733, 18.5969, 21.5042, 24.4882, 27.5426, 30.6616, 33.8397, 37.0722,
    40.3545, 43.6829, 47.0539, 50.4648, 53.9130, 57.3968, 60.9147, 64.4659, 68.0500, 71.6671, 75.3178,
    79.0032, 82.7250, 86.4852, 90.2865, 94.1320, 98.0253, 101.9704, 105.9721, 110.0354, 114.1659, 118.3697,
]);

/// Total hemispherical emissivity.
///
/// CRC Handbook of Chemistry and Physics, 60th ed. (1979), p. E-381, to 3000 K (read second hand); the six rows
/// above continue it with the rise of [`EMISSIVITY_1999`], scaled to meet it at 3000 K (derived).
#[expect(clippy::approx_constant, reason = "0.318 is a tabulated emissivity, not 1/pi")]
pub static EMISSIVITY: Table = Table::new(&[
    0.032, 0.042, 0.053, 0.064, 0.076, 0.088, 0.101, 0.114, 0.128, 0.143, 0.158, 0.175, 0.192, 0.207, 0.222,
    0.236, 0.249, 0.26, 0.27, 0.279, 0.288, 0.296, 0.303, 0.311, 0.318, 0.323, 0.329, 0.334, 0.3406, 0.3468,
    0.3526, 0.3581, 0.3632, 0.3679,
]);

/// Total hemispherical emissivity: the second opinion, used for the width of the bands.
///
/// T. Matsumoto, A. Cezairliyan, D. Basak, Int. J. Thermophysics 20 (1999) 943, joined to the fit of the ITER
/// materials handbook (read second hand).
pub static EMISSIVITY_1999: Table = Table::new(&[
    0.0185, 0.0344, 0.0499, 0.0651, 0.0799, 0.0943, 0.1085, 0.1222, 0.1356, 0.1487, 0.1614, 0.1737, 0.1857,
    0.1973, 0.2086, 0.2196, 0.2302, 0.2404, 0.2503, 0.2598, 0.2690, 0.2778, 0.2863, 0.2944, 0.3021, 0.3095,
    0.3166, 0.3233, 0.3297, 0.3357, 0.3413, 0.3466, 0.3516, 0.3561,
]);

/// Molar heat capacity at constant pressure, joule per mole and kelvin; see [`heat_capacity`].
static MOLAR_HEAT_CAPACITY: Table = Table::new(&[
    24.313, 24.928, 25.359, 25.79, 26.229, 26.669, 27.112, 27.564, 28.017, 28.472, 28.93, 29.393, 29.862,
    30.334, 30.807, 31.284, 31.765, 32.254, 32.744, 33.238, 33.736, 34.233, 34.736, 35.246, 36.192, 37.447,
    39.12, 41.003, 43.43, 46.024, 48.953, 52.3, 56.484, 61.714,
]);

/// Molar mass, kilogram per mole (IUPAC standard atomic weight 183.84).
const KILOGRAM_PER_MOLE: f64 = 0.183_84;

/// Density at room temperature, kilogram per cubic metre (CRC Handbook).
pub const DENSITY: f64 = 19_250.0;

/// Stefan-Boltzmann constant, W m^-2 K^-4 (CODATA 2018, exact in the SI of 2019).
pub const STEFAN_BOLTZMANN: f64 = 5.670_374_419e-8;

/// Heat capacity at constant pressure, joule per kilogram and kelvin.
///
/// M. W. Chase, NIST-JANAF Thermochemical Tables, 4th ed. (1998) (read second hand), over the molar mass.
pub fn heat_capacity(kelvin: f64) -> f64 {
    MOLAR_HEAT_CAPACITY.at(kelvin) / KILOGRAM_PER_MOLE
}

/// Resistivity and emissivity that belong together in one lamp model.
#[derive(Debug, PartialEq)]
pub struct Properties {
    /// Resistivity, micro-ohm centimetre.
    pub resistivity: &'static Table,
    /// Total hemispherical emissivity.
    pub emissivity: &'static Table,
}

impl Properties {
    /// Exitance `eps sigma T^4` at 300 K + `rise` less that at 300 K, W/m², free of cancellation, and its slope,
    /// W/m² per kelvin.
    pub fn exitance_above_ambient(&self, rise: f64) -> (f64, f64) {
        let kelvin = AMBIENT_KELVIN + rise;
        let (more, slope) = self.emissivity.above_ambient(rise);
        let emissivity = self.emissivity.values[0] + more;
        let square = kelvin * kelvin;
        let fourth_powers = rise * (kelvin + AMBIENT_KELVIN) * (square + SQUARE_AMBIENT);
        let exitance = emissivity * fourth_powers + more * SQUARE_AMBIENT * SQUARE_AMBIENT;
        let growth = (slope * kelvin + 4.0 * emissivity) * square * kelvin;
        (STEFAN_BOLTZMANN * exitance, STEFAN_BOLTZMANN * growth)
    }
}

const SQUARE_AMBIENT: f64 = AMBIENT_KELVIN * AMBIENT_KELVIN;

/// The tables that every lamp uses.
pub static STANDARD: Properties = Properties { resistivity: &RESISTIVITY, emissivity: &EMISSIVITY };

/// The other resistivity with the standard emissivity.
pub static OTHER_RESISTIVITY: Properties =
    Properties { resistivity: &RESISTIVITY_1997, emissivity: &EMISSIVITY };

/// The other emissivity with the standard resistivity.
pub static OTHER_EMISSIVITY: Properties =
    Properties { resistivity: &RESISTIVITY, emissivity: &EMISSIVITY_1999 };

/// Wavelengths of [`SPECTRAL_EMISSIVITY`], nanometre.
const SPECTRAL_NANOMETRES: [f64; 8] = [375.0, 400.0, 425.0, 450.0, 500.0, 600.0, 700.0, 800.0];

/// Spectral emissivity at 1600, 2000, 2400 and 2800 K, a row for each of [`SPECTRAL_NANOMETRES`].
///
/// CRC Handbook, 60th ed., p. E-381, after J. C. De Vos, Physica 20 (1954) 690 (read second hand).
const SPECTRAL_EMISSIVITY: [[f64; 4]; 8] = [
    [0.4800, 0.4740, 0.4680, 0.4610],
    [0.4810, 0.4740, 0.4680, 0.4600],
    [0.4790, 0.4720, 0.4660, 0.4580],
    [0.4770, 0.4690, 0.4630, 0.4550],
    [0.4680, 0.4620, 0.4550, 0.4470],
    [0.4560, 0.4480, 0.4420, 0.4340],
    [0.4450, 0.4380, 0.4300, 0.4200],
    [0.4300, 0.4190, 0.4080, 0.3990],
];

/// Spectral emissivity of tungsten for visible light, 375 to 800 nm.
///
/// Bilinear between the measurements; outside 1600 to 2800 K the nearest measured temperature, since its slope
/// with temperature (under 1 % per 100 K) changes no colour that an eye could tell.
pub fn spectral_emissivity(nanometre: f64, kelvin: f64) -> f64 {
    let nanometre = nanometre.clamp(SPECTRAL_NANOMETRES[0], SPECTRAL_NANOMETRES[7]);
    let row = (1..7).rev().find(|&row| nanometre >= SPECTRAL_NANOMETRES[row]).unwrap_or(0);
    let along =
        (nanometre - SPECTRAL_NANOMETRES[row]) / (SPECTRAL_NANOMETRES[row + 1] - SPECTRAL_NANOMETRES[row]);
    let position = ((kelvin - 1600.0) / 400.0).clamp(0.0, 3.0);
    let column = if position >= 2.0 { 2 } else { usize::from(position >= 1.0) };
    #[expect(clippy::cast_precision_loss, reason = "0, 1 or 2")]
    let across = position - column as f64;
    let in_row = |row: usize| {
        let pair = &SPECTRAL_EMISSIVITY[row][column..=column + 1];
        pair[0] + across * (pair[1] - pair[0])
    };
    in_row(row) + along * (in_row(row + 1) - in_row(row))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn tables_pass_through_their_rows_and_never_turn_back() {
        for table in [&RESISTIVITY, &RESISTIVITY_1997, &EMISSIVITY, &EMISSIVITY_1999, &MOLAR_HEAT_CAPACITY] {
            for (row, kelvin) in (300..=3600).step_by(100).enumerate() {
                let tabulated = table.values[row];
                assert!((table.at(f64::from(kelvin)) - tabulated).abs() <= 1e-12 * tabulated.abs());
            }
            let mut last = 0.0;
            for kelvin in 300..=3600 {
                let value = table.at(f64::from(kelvin));
                assert!(value >= last, "falls at {kelvin} K");
                last = value;
            }
        }
    }

    #[test]
    fn a_small_rise_keeps_its_digits() {
        let rise = 1e-9;
        let (exitance, slope) = STANDARD.exitance_above_ambient(rise);
        assert!((exitance / rise / slope - 1.0).abs() < 1e-9);
        let coarse = STANDARD.exitance_above_ambient(1e-3).0 / 1e-3;
        assert!((slope / coarse - 1.0).abs() < 1e-4);
    }

    #[test]
    fn spectral_emissivity_meets_the_measurements() {
        assert_eq!(spectral_emissivity(500.0, 2000.0), 0.4620);
        assert_eq!(spectral_emissivity(800.0, 2800.0), 0.3990);
        assert_eq!(spectral_emissivity(550.0, 1000.0), f64::midpoint(0.4680, 0.4560));
    }
}
