//! The gates, row by row with their sources, and one maker's melting heat.
//!
//! Read in makers' data sheets that declare the sheets of IEC 60127-2 and UL 248-14, none of them the standard's own
//! text; the rows keep the order of the reference tables, against which a test holds them.

use super::Gate;
use super::Status;
use super::Status::{Declared, Memory, SecondHand};

const fn gate(
    rated_amps: (f64, f64),
    multiple: f64,
    least_seconds: Option<f64>,
    most_seconds: Option<f64>,
    status: Status,
) -> Gate {
    Gate { rated_amps, multiple, least_seconds, most_seconds, status }
}

/// IEC 60127-2 sheet 1, quick-acting, high breaking capacity: rated amperes, multiple, least and most seconds.
pub(super) static SHEET_1: [Gate; 13] = [
    gate((0.05, 6.3), 1.5, Some(3600.0), None, Memory),
    gate((1.0, 4.0), 2.1, None, Some(1800.0), Declared),
    gate((1.0, 4.0), 2.75, Some(0.01), Some(2.0), Declared),
    gate((1.0, 4.0), 4.0, Some(0.003), Some(0.3), Declared),
    gate((1.0, 4.0), 10.0, None, Some(0.02), Declared),
    gate((5.0, 6.3), 2.1, None, Some(1800.0), Declared),
    gate((5.0, 6.3), 2.75, Some(0.01), Some(3.0), Declared),
    gate((5.0, 6.3), 4.0, Some(0.003), Some(0.3), Declared),
    gate((5.0, 6.3), 10.0, None, Some(0.02), Declared),
    gate((8.0, 10.0), 2.1, None, Some(1800.0), Declared),
    gate((8.0, 10.0), 2.75, Some(0.04), Some(20.0), Declared),
    gate((8.0, 10.0), 4.0, Some(0.01), Some(1.0), Declared),
    gate((8.0, 10.0), 10.0, None, Some(0.03), Declared),
];

/// IEC 60127-2 sheet 2, quick-acting, low breaking capacity: rated amperes, multiple, least and most seconds.
pub(super) static SHEET_2: [Gate; 15] = [
    gate((0.4, 6.3), 1.5, Some(3600.0), None, Declared),
    gate((0.4, 6.3), 2.1, None, Some(1800.0), Declared),
    gate((0.4, 6.3), 2.75, Some(0.05), Some(2.0), Declared),
    gate((0.4, 6.3), 4.0, Some(0.01), Some(0.3), Declared),
    gate((0.4, 6.3), 10.0, None, Some(0.02), Declared),
    gate((8.0, 10.0), 1.5, Some(1800.0), None, Declared),
    gate((8.0, 10.0), 2.1, None, Some(1800.0), Declared),
    gate((8.0, 10.0), 2.75, Some(0.05), Some(2.0), Declared),
    gate((8.0, 10.0), 4.0, Some(0.01), Some(0.4), Declared),
    gate((8.0, 10.0), 10.0, None, Some(0.04), Declared),
    gate((0.032, 0.1), 1.5, Some(3600.0), None, Memory),
    gate((0.032, 0.1), 2.1, None, Some(1800.0), Memory),
    gate((0.032, 0.1), 2.75, Some(0.01), Some(0.5), Memory),
    gate((0.032, 0.1), 4.0, Some(0.003), Some(0.1), Memory),
    gate((0.032, 0.1), 10.0, None, Some(0.02), Memory),
];

/// IEC 60127-2 sheet 3, time-lag, low breaking capacity: rated amperes, multiple, least and most seconds.
pub(super) static SHEET_3: [Gate; 11] = [
    gate((0.063, 0.1), 1.5, Some(3600.0), None, Declared),
    gate((0.063, 0.1), 2.1, None, Some(120.0), Declared),
    gate((0.063, 0.1), 2.75, Some(0.2), Some(10.0), Declared),
    gate((0.063, 0.1), 4.0, Some(0.04), Some(3.0), Declared),
    gate((0.063, 0.1), 10.0, Some(0.01), Some(0.3), Declared),
    gate((0.125, 6.3), 1.5, Some(3600.0), None, Declared),
    gate((0.125, 6.3), 2.1, None, Some(120.0), Declared),
    gate((0.125, 6.3), 2.75, Some(0.6), Some(10.0), Declared),
    gate((0.125, 6.3), 4.0, Some(0.15), Some(3.0), Declared),
    gate((0.125, 6.3), 10.0, Some(0.02), Some(0.3), Declared),
    gate((8.0, 15.0), 1.5, Some(1800.0), None, Declared),
];

/// IEC 60127-2 sheet 5, time-lag, high breaking capacity: rated amperes, multiple, least and most seconds.
pub(super) static SHEET_5: [Gate; 21] = [
    gate((0.125, 0.8), 1.5, Some(3600.0), None, Declared),
    gate((0.125, 0.8), 2.1, None, Some(1800.0), Declared),
    gate((0.125, 0.8), 2.75, Some(0.25), Some(80.0), Declared),
    gate((0.125, 0.8), 4.0, Some(0.05), Some(5.0), Declared),
    gate((0.125, 0.8), 10.0, Some(0.005), Some(0.15), Declared),
    gate((1.0, 3.15), 1.5, Some(3600.0), None, Declared),
    gate((1.0, 3.15), 2.1, None, Some(1800.0), Declared),
    gate((1.0, 3.15), 2.75, Some(0.75), Some(80.0), Declared),
    gate((1.0, 3.15), 4.0, Some(0.095), Some(5.0), Declared),
    gate((1.0, 3.15), 10.0, Some(0.01), Some(0.15), Declared),
    gate((4.0, 6.3), 1.5, Some(3600.0), None, Declared),
    gate((4.0, 6.3), 2.1, None, Some(1800.0), Declared),
    gate((4.0, 6.3), 2.75, Some(0.75), Some(80.0), Declared),
    gate((4.0, 6.3), 4.0, Some(0.15), Some(5.0), Declared),
    gate((4.0, 6.3), 10.0, Some(0.01), Some(0.15), Declared),
    gate((8.0, 20.0), 1.5, Some(1800.0), None, Declared),
    gate((8.0, 20.0), 2.1, None, Some(1800.0), Declared),
    gate((8.0, 20.0), 2.75, Some(0.75), Some(80.0), Declared),
    gate((8.0, 20.0), 4.0, Some(0.15), Some(5.0), Declared),
    gate((8.0, 20.0), 10.0, Some(0.01), Some(0.15), Declared),
    gate((4.0, 6.3), 10.0, Some(0.02), Some(0.15), Declared),
];

/// How many of [`UL_248`] hold for fuses without time delay too.
pub(super) const UL_248_PLAIN: usize = 5;

/// UL 248-14. To carry its rating without end is [`super::Fuse::held_multiple`]'s own floor; the row keeps its source.
pub(super) static UL_248: [Gate; 7] = [
    gate((0.0, 60.0), 1.0, None, None, SecondHand),
    gate((0.0, 60.0), 1.35, None, Some(3600.0), SecondHand),
    gate((0.0, 30.0), 2.0, None, Some(120.0), SecondHand),
    gate((35.0, 60.0), 2.0, None, Some(240.0), SecondHand),
    gate((0.0, 30.0), 1.1, Some(14400.0), None, Memory),
    gate((0.0, 3.0), 2.0, Some(5.0), None, Memory),
    gate((3.1, 30.0), 2.0, Some(12.0), None, Memory),
];

/// Rated amperes, cold ohms and melting ampere squared seconds of one maker's 5 x 20 mm time-lag series (published second
/// hand).
pub(super) static MELTING: [(f64, f64, f64); 16] = [
    (0.2, 1.6, 0.35),
    (0.25, 1.05, 0.555),
    (0.315, 0.848, 1.14),
    (0.4, 0.535, 1.35),
    (0.5, 0.37, 2.9),
    (0.63, 0.275, 4.8),
    (0.8, 0.165, 9.42),
    (1.0, 0.117, 19.2),
    (1.25, 0.081, 27.15),
    (1.6, 0.055, 44.2),
    (2.0, 0.044, 92.7),
    (2.5, 0.03, 138.0),
    (3.15, 0.022, 226.5),
    (4.0, 0.017, 202.0),
    (5.0, 0.011, 314.0),
    (6.3, 0.008, 600.0),
];
