//! Numbers as the page shows them, compared with the core's.

use anyhow::{Context, Result, ensure};

/// Whether the first number in `unit` of a text (`0.14 A`, `143 mA`) is `value`, rounded to the digits shown.
///
/// # Errors
/// When the text holds no number in that unit, or another number.
pub fn ensure_shown(text: &str, value: f64, unit: &str) -> Result<()> {
    ensure_nth_shown(text, 0, value, unit)
}

/// As [`ensure_shown`], of the number in `unit` that `nth` others come before.
///
/// # Errors
/// As [`ensure_shown`].
pub fn ensure_nth_shown(text: &str, nth: usize, value: f64, unit: &str) -> Result<()> {
    let shown = all(text, unit);
    let number = shown.get(nth).with_context(|| format!("`{text}` has no number {nth} in {unit}"))?;
    ensure!(
        (number.value - value).abs() <= number.half,
        "the page shows `{text}`, the core says {value} {unit}"
    );
    // The page writes no more digits than the band supports, which may be one; but 0 would agree with anything.
    ensure!(number.half < 0.5 * value.abs(), "`{text}` shows too few digits of {value} {unit} to tell");
    Ok(())
}

/// A number in its base unit, with half a unit of its last digit.
struct Number {
    value: f64,
    half: f64,
}

fn all(text: &str, unit: &str) -> Vec<Number> {
    let mut found = Vec::new();
    let mut rest = text;
    while let Some(start) = rest.find(|letter: char| letter.is_ascii_digit()) {
        let from = &rest[start..];
        let end = from.find(|letter: char| !letter.is_ascii_digit() && letter != '.').unwrap_or(from.len());
        let (digits, after) = from.split_at(end);
        found.extend(number(digits, after, unit));
        rest = after;
    }
    found
}

fn number(digits: &str, after: &str, unit: &str) -> Option<Number> {
    let value: f64 = digits.parse().ok()?;
    let decimals = i32::try_from(digits.split_once('.').map_or(0, |(_, decimals)| decimals.len())).ok()?;
    let shown_unit = after.trim_start().split(|letter: char| !letter.is_alphanumeric()).next()?;
    let scale = match shown_unit.strip_suffix(unit)? {
        "" => 1.0,
        "m" => 1e-3,
        "k" => 1e3,
        _ => return None,
    };
    // And a hair for the rounding of decimal to binary.
    let half = 0.5 * scale * 0.1_f64.powi(decimals) * (1.0 + 1e-6);
    Some(Number { value: value * scale, half })
}

#[cfg(test)]
mod tests {
    use super::{ensure_nth_shown, ensure_shown};

    #[test]
    fn agrees_within_the_digits_shown_and_no_further() {
        for (text, value, unit) in [
            ("0.14 A", 0.1372, "A"),
            ("≈ 137\u{a0}mA", 0.1372, "A"),
            ("60 W lamp: 68\u{202f}V", 68.4, "V"),
            ("1.2 kV", 1234.0, "V"),
        ] {
            assert!(ensure_shown(text, value, unit).is_ok(), "{text}");
        }
        for (text, value, unit) in [
            ("0.14 A", 0.1472, "A"),
            ("0 A", 0.1372, "A"),
            ("68 V", 68.6, "V"),
            ("68", 68.0, "V"),
            ("– V", 0.0, "V"),
            ("68 VA", 68.0, "V"),
        ] {
            assert!(ensure_shown(text, value, unit).is_err(), "{text}");
        }
        let bar = "lamp 82 V, set 160 V · 70 %";
        assert!(ensure_nth_shown(bar, 1, 160.4, "V").is_ok());
        assert!(ensure_nth_shown(bar, 0, 160.4, "V").is_err());
        assert!(ensure_nth_shown(bar, 2, 160.4, "V").is_err());
    }
}
