//! The one place that turns numbers into text: with a unit, and no more digits than the band supports.
//!
//! The standard library's way of printing an `f64` costs 6 KB of the first load; whole numbers and a decimal mark
//! cost nothing.

use lampladder_core::band::Band;

/// How a language writes numbers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Numerals {
    /// The decimal mark.
    pub decimal: char,
}

/// Between a number and its unit: a space that does not break.
const GAP: char = '\u{a0}';

/// Volts and amperes below this are none: no bench meter shows them.
const NOTHING: f64 = 5e-5;

/// Most decimals that are ever written.
const MOST_PLACES: i32 = 9;

impl Numerals {
    /// A number with a fixed count of decimals; a negative count rounds to tens, hundreds and so on.
    pub fn fixed(self, value: f64, places: i32) -> String {
        let places = places.clamp(-MOST_PLACES, MOST_PLACES);
        let scaled = (value * ten(places)).round();
        if !scaled.is_finite() || scaled.abs() >= 1e15 {
            return String::from("?");
        }
        #[expect(clippy::cast_possible_truncation, reason = "checked to be below 1e15")]
        let mut digits = (scaled.abs() as i64).to_string();
        for _ in places..0 {
            if digits != "0" {
                digits.push('0');
            }
        }
        if let Ok(places) = usize::try_from(places)
            && places > 0
        {
            while digits.len() <= places {
                digits.insert(0, '0');
            }
            digits.insert(digits.len() - places, self.decimal);
        }
        if scaled < 0.0 {
            digits.insert(0, '\u{2212}');
        }
        digits
    }

    /// A number as a person would type it: the fewest decimals that give it back, or nine.
    pub fn plain(self, value: f64) -> String {
        let exact = |places: &i32| {
            let scale = ten(*places);
            ((value * scale).round() / scale - value).abs() <= value.abs() * 1e-15
        };
        let places = (0..=MOST_PLACES).find(exact).unwrap_or(MOST_PLACES);
        self.fixed(value, places)
    }

    /// The best estimate, rounded as its band asks.
    pub fn value(self, band: &Band, unit: &str) -> String {
        let (scale, prefix) = prefix(band.value, unit);
        with_unit(self.fixed(band.value * scale, places(band, scale)), prefix, unit)
    }

    /// The ends of the band, rounded alike; the value alone where it has no band.
    pub fn range(self, band: &Band, unit: &str) -> String {
        let (_, prefix) = prefix(band.value, unit);
        with_unit(self.bare_range(band, unit), prefix, unit)
    }

    /// The same without its unit, for tables that have the unit elsewhere.
    pub fn bare_range(self, band: &Band, unit: &str) -> String {
        let (scale, _) = prefix(band.value, unit);
        let places = places(band, scale);
        let low = self.fixed(band.low * scale, places);
        let high = self.fixed(band.high * scale, places);
        if low == high { low } else { low + "\u{2013}" + &high }
    }

    /// A share as a whole number of per cent.
    pub fn percent(self, share: f64) -> String {
        self.fixed(share * 100.0, 0) + "\u{a0}%"
    }

    /// A number with its unit, as a person would type it.
    pub fn quantity(self, value: f64, unit: &str) -> String {
        with_unit(self.plain(value), "", unit)
    }

    /// A value of which nothing is known better than a tenth.
    ///
    /// The first seconds have no band of their own: cold lamps, and reservoirs, differ by that much.
    pub fn about(self, value: f64, unit: &str) -> String {
        let value = if value.abs() < NOTHING { 0.0 } else { value };
        self.value(&Band { value, low: value * 0.9, high: value * 1.1 }, unit)
    }

    /// A duration, as a person would count it: one digit, or two from 1 to 3.
    pub fn duration(self, seconds: f64) -> String {
        let (scale, prefix) = prefix(seconds, "s");
        let value = seconds * scale;
        let first = exponent(value);
        let more = i32::from(value < 3.0 * ten(first));
        let digits = ten(more - first);
        with_unit(self.plain((value * digits).round() / digits), prefix, "s")
    }

    /// A limit, to three digits and no more decimals than it needs.
    pub fn short(self, value: f64) -> String {
        let rounded = ten(2 - exponent(value));
        self.plain((value * rounded).round() / rounded)
    }

    /// The same with its unit.
    pub fn short_quantity(self, value: f64, unit: &str) -> String {
        with_unit(self.short(value), "", unit)
    }

    /// A ratio, to two digits.
    pub fn ratio(self, ratio: f64) -> String {
        self.fixed(ratio, 1 - exponent(ratio))
    }
}

/// Milliamperes below a tenth of an ampere, as meters have it, and milliseconds; kilohms and megohms; no prefix for the
/// rest.
fn prefix(value: f64, unit: &str) -> (f64, &'static str) {
    match (unit, value.abs()) {
        ("A" | "s", size) if size < 0.0995 => (1000.0, "m"),
        ("Ω", size) if size >= 999_500.0 => (1e-6, "M"),
        ("Ω", size) if size >= 999.5 => (1e-3, "k"),
        _ => (1.0, ""),
    }
}

fn with_unit(mut text: String, prefix: &str, unit: &str) -> String {
    if !unit.is_empty() {
        text.push(GAP);
        text.push_str(prefix);
        text.push_str(unit);
    }
    text
}

/// Decimals that a band supports: the last digit is worth no more than the way to the nearer end of the band, and
/// there are three significant digits at most, as no bench meter has more to say.
fn places(band: &Band, scale: f64) -> i32 {
    let value = band.value * scale;
    let three = if value == 0.0 { 0 } else { 2 - exponent(value) };
    let (up, down) = ((band.high - band.value) * scale, (band.value - band.low) * scale);
    // An end that coincides with the value is a limit (nothing below zero), not knowledge.
    let tiny = value.abs() * 1e-6;
    let half = if up.min(down) > tiny { up.min(down) } else { up.max(down) };
    if half.is_nan() || half <= tiny { three } else { three.min(-exponent(half)) }
}

/// The power of ten of the first significant digit, within twenty decades of one; 0 for zero and for no number.
pub(crate) fn exponent(value: f64) -> i32 {
    let value = value.abs();
    let mut exponent = 0;
    if !value.is_finite() || value == 0.0 {
        return exponent;
    }
    while exponent < 20 && value >= ten(exponent + 1) {
        exponent += 1;
    }
    while exponent > -20 && value < ten(exponent) {
        exponent -= 1;
    }
    exponent
}

/// A power of ten: a few multiplications in place of 2 KB for any power of anything.
pub(crate) fn ten(exponent: i32) -> f64 {
    let power = (0..exponent.unsigned_abs()).fold(1.0, |power, _| power * 10.0);
    if exponent < 0 { 1.0 / power } else { power }
}

#[cfg(test)]
mod tests {
    use super::*;

    const ENGLISH: Numerals = Numerals { decimal: '.' };

    fn band(value: f64, half: f64) -> Band {
        Band { value, low: value - half, high: value + half }
    }

    #[test]
    fn digits_follow_the_band() {
        let uneven = Band { value: 67.2, low: 47.0, high: 74.4 };
        let cases = [
            (band(0.1523, 0.032), "A", "0.15\u{a0}A", "0.12\u{2013}0.18\u{a0}A"),
            (band(0.1523, 0.012), "A", "0.15\u{a0}A", "0.14\u{2013}0.16\u{a0}A"),
            (band(82.3, 4.2), "V", "82\u{a0}V", "78\u{2013}87\u{a0}V"),
            (band(82.3, 41.0), "V", "80\u{a0}V", "40\u{2013}120\u{a0}V"),
            (uneven, "V", "67\u{a0}V", "47\u{2013}74\u{a0}V"),
            (band(1234.0, 30.0), "Ω", "1.23\u{a0}kΩ", "1.20\u{2013}1.26\u{a0}kΩ"),
            (band(0.0123, 0.002), "A", "12\u{a0}mA", "10\u{2013}14\u{a0}mA"),
            (band(229.96, 0.01), "V", "230\u{a0}V", "230\u{a0}V"),
            (Band::exact(230.0), "V", "230\u{a0}V", "230\u{a0}V"),
            (Band { value: 0.0, low: 0.0, high: 0.0 }, "V", "0\u{a0}V", "0\u{a0}V"),
        ];
        for (band, unit, value, range) in cases {
            assert_eq!(ENGLISH.value(&band, unit), value);
            assert_eq!(ENGLISH.range(&band, unit), range);
        }
    }

    #[test]
    fn plain_numbers_come_back() {
        for (value, text) in [
            (230.0, "230"),
            (0.05, "0.05"),
            (1.5, "1.5"),
            (0.0, "0"),
            (20_000.0, "20000"),
            (-3.25, "\u{2212}3.25"),
        ] {
            assert_eq!(ENGLISH.plain(value), text);
        }
        assert_eq!(Numerals { decimal: ',' }.plain(0.16), "0,16");
    }

    #[test]
    fn nothing_that_is_no_number_is_written_as_one() {
        for value in [f64::NAN, f64::INFINITY, 1e300] {
            assert_eq!(ENGLISH.fixed(value, 2), "?");
        }
        let lost = Band { value: f64::NAN, low: f64::NAN, high: f64::NAN };
        assert_eq!(ENGLISH.value(&lost, "V"), "?\u{a0}V");
    }

    #[test]
    fn what_is_known_to_a_tenth_has_two_digits() {
        for (value, text) in [
            (5.274, "5.3\u{a0}A"),
            (0.1523, "0.15\u{a0}A"),
            (0.0213, "21\u{a0}mA"),
            (813.2, "810\u{a0}A"),
            (1e-9, "0\u{a0}mA"),
        ] {
            assert_eq!(ENGLISH.about(value, "A"), text);
        }
        for (seconds, text) in
            [(0.27, "0.27"), (0.34, "0.3"), (0.2, "0.2"), (18.9, "19"), (4.6, "5"), (30.0, "30")]
        {
            assert_eq!(ENGLISH.duration(seconds), format!("{text}\u{a0}s"));
        }
        assert_eq!(ENGLISH.duration(0.0613), "60\u{a0}ms");
        assert_eq!(ENGLISH.duration(0.0), "0\u{a0}ms");
    }

    #[test]
    fn ratios_have_two_digits() {
        assert_eq!(ENGLISH.ratio(2.345), "2.3");
        assert_eq!(ENGLISH.ratio(0.456), "0.46");
        assert_eq!(ENGLISH.ratio(567.0), "570");
    }
}
