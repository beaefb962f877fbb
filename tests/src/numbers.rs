//! Numbers as the page shows them, compared with the core's.

use anyhow::{Context, Result, ensure};

/// Whether the first number of a text (`0.14 A`, `143 mA`, `1.2 kV`) is `value`, rounded to the digits shown.
///
/// # Errors
/// When the text holds no number with a unit, or another number.
pub fn ensure_shown(text: &str, value: f64, unit: &str) -> Result<()> {
    let (number, decimals, scale) =
        read(text, unit).with_context(|| format!("no number in {unit} in `{text}`"))?;
    // Half a unit of the last digit, and a hair for the rounding of decimal to binary.
    let half = 0.5 * scale * 0.1_f64.powi(decimals) * (1.0 + 1e-6);
    ensure!((number - value).abs() <= half, "the page shows `{text}`, the core says {value} {unit}");
    // The page writes no more digits than the band supports, which may be one; but 0 would agree with anything.
    ensure!(half < 0.5 * value.abs(), "`{text}` shows too few digits of {value} {unit} to tell");
    Ok(())
}

/// The number in the base unit, its decimals, and the size of the unit that it is shown in.
fn read(text: &str, unit: &str) -> Option<(f64, i32, f64)> {
    let digit = |letter: char| letter.is_ascii_digit();
    let start = text.find(digit)?;
    let text = text.get(start..)?;
    let end = text.find(|letter: char| !digit(letter) && letter != '.').unwrap_or(text.len());
    let number: f64 = text[..end].parse().ok()?;
    let decimals = text[..end].split_once('.').map_or(0, |(_, after)| after.len());
    let shown_unit = text[end..].trim_start().split(|letter: char| !letter.is_alphanumeric()).next()?;
    let scale = match shown_unit.strip_suffix(unit)? {
        "" => 1.0,
        "m" => 1e-3,
        "µ" | "μ" => 1e-6,
        "k" => 1e3,
        _ => return None,
    };
    Some((number * scale, i32::try_from(decimals).ok()?, scale))
}

#[cfg(test)]
mod tests {
    use super::ensure_shown;

    #[test]
    fn agrees_within_the_digits_shown_and_no_further() {
        for (text, value, unit) in [
            ("0.14 A", 0.1372, "A"),
            ("≈ 137 mA", 0.1372, "A"),
            ("68\u{202f}V", 68.4, "V"),
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
        ] {
            assert!(ensure_shown(text, value, unit).is_err(), "{text}");
        }
    }
}
