//! Numbers as people type them: `40`, `40 W`, `0,16 A`, `160 mA`, `1k2`.

use alloc::string::String;
use core::fmt;

use crate::digits;
use crate::error::Field;

/// Why a typed text is no number of the wanted kind.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
#[non_exhaustive]
pub enum QuantityError {
    /// Nothing was typed.
    Empty {
        /// The property that was asked for.
        field: Field,
    },
    /// Not a number.
    NotANumber {
        /// The property that was asked for.
        field: Field,
    },
    /// A number with the unit of something else.
    WrongUnit {
        /// The property that was asked for.
        field: Field,
    },
}

impl QuantityError {
    /// The property that was asked for.
    pub const fn field(&self) -> Field {
        match *self {
            Self::Empty { field } | Self::NotANumber { field } | Self::WrongUnit { field } => field,
        }
    }
}

impl fmt::Display for QuantityError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let name = self.field().name();
        match self {
            Self::Empty { .. } => write!(f, "{name} is empty"),
            Self::NotANumber { .. } => write!(f, "{name} is not a number"),
            Self::WrongUnit { field } => write!(f, "{name} is measured in {}", field.unit()),
        }
    }
}

impl core::error::Error for QuantityError {}

/// Longest text that is looked at, bytes.
const LONGEST: usize = 40;

/// Reads a typed text as a number in the SI unit of `field`.
///
/// A comma or a point may part the decimals; groups may be parted by spaces, apostrophes, or whichever of comma
/// and point comes first when both occur. An SI prefix may stand before the unit, alone, or in place of the
/// decimal point. The unit may be left out. The range is not checked here.
///
/// # Errors
/// Nothing typed, not a number, or a foreign unit.
///
/// ```
/// use lampladder_core::{error::Field, quantity::parse};
/// assert_eq!(parse("0,16 A", Field::Amps), Ok(0.16));
/// assert_eq!(parse("160 mA", Field::Amps), Ok(0.16));
/// assert_eq!(parse("1k2", Field::Ohms), Ok(1200.0));
/// ```
pub fn parse(text: &str, field: Field) -> Result<f64, QuantityError> {
    let text = text.trim();
    if text.is_empty() {
        return Err(QuantityError::Empty { field });
    }
    let not_a_number = QuantityError::NotANumber { field };
    if text.len() > LONGEST {
        return Err(not_a_number);
    }
    let (number, tail) = split_number(text);
    let mut number = plain_digits(&number).ok_or(not_a_number)?;
    let (exponent, rest) = strip_unit(tail, field).ok_or(QuantityError::WrongUnit { field })?;
    if !rest.is_empty() {
        // A prefix in place of the decimal point: 1k2, 4R7.
        let whole = !number.contains('.') && rest.bytes().all(|byte| byte.is_ascii_digit());
        if !whole || number.contains(['e', 'E']) {
            return Err(if number.is_empty() { not_a_number } else { QuantityError::WrongUnit { field } });
        }
        number.push('.');
        number.push_str(rest);
    }
    // The prefix goes into the one rounding: 160 mA must be the very number 0.16.
    digits::read(&number, exponent).ok_or(not_a_number)
}

/// The leading part that can belong to a number, and what follows it.
fn split_number(text: &str) -> (String, &str) {
    let mut number = String::new();
    let mut end = 0;
    for (at, character) in text.char_indices() {
        let minus = matches!(character, '-' | '\u{2212}' | '+');
        let after_e = number.ends_with(['e', 'E']);
        let exponent = matches!(character, 'e' | 'E')
            && number.ends_with(|last: char| last.is_ascii_digit())
            && text[at + 1..].starts_with(|next: char| next.is_ascii_digit() || matches!(next, '-' | '+'));
        let accepted = character.is_ascii_digit()
            || matches!(character, '.' | ',')
            || exponent
            || (minus && (number.is_empty() || after_e));
        if accepted {
            number.push(if character == '\u{2212}' { '-' } else { character });
        } else if !is_gap(character) {
            break;
        }
        end = at + character.len_utf8();
    }
    (number, text[end..].trim())
}

fn is_gap(character: char) -> bool {
    character.is_whitespace() || matches!(character, '\'' | '\u{2019}' | '_')
}

/// Digits with at most one point, group marks removed.
fn plain_digits(number: &str) -> Option<String> {
    let last_mark = number.rfind(['.', ',']);
    let both = number.contains('.') && number.contains(',');
    let mut out = String::new();
    for (at, character) in number.char_indices() {
        match character {
            '.' | ',' if Some(at) == last_mark => out.push('.'),
            '.' | ',' if both => {}
            '.' | ',' => return None,
            _ => out.push(character),
        }
    }
    out.bytes().any(|byte| byte.is_ascii_digit()).then_some(out)
}

/// Takes an SI prefix and the unit of `field` off the front; gives the power of ten and what is left.
fn strip_unit(tail: &str, field: Field) -> Option<(i32, &str)> {
    let names = unit_names(field);
    let strip_name = |text: &'_ str| -> Option<usize> {
        names
            .iter()
            .filter(|name| text.get(..name.len()).is_some_and(|head| head.eq_ignore_ascii_case(name)))
            .map(|name| name.len())
            .max()
    };
    if tail.is_empty() {
        return Some((0, tail));
    }
    if let Some(length) = strip_name(tail) {
        return Some((0, tail[length..].trim_start()));
    }
    let prefix = tail.chars().next()?;
    let exponent = match prefix {
        'p' => -12,
        'n' => -9,
        'u' | 'µ' | 'μ' => -6,
        'm' => -3,
        'k' | 'K' => 3,
        'M' => 6,
        _ => return None,
    };
    let after = tail[prefix.len_utf8()..].trim_start();
    let length = strip_name(after).unwrap_or(0);
    let rest = after[length..].trim_start();
    rest.bytes().all(|byte| byte.is_ascii_digit()).then_some((exponent, rest))
}

fn unit_names(field: Field) -> &'static [&'static str] {
    match field.unit() {
        "V" => &["V", "volt", "volts"],
        "W" => &["W", "watt", "watts"],
        "A" => &["A", "amp", "amps", "ampere"],
        "Hz" => &["Hz"],
        "Ω" => &["Ω", "Ω", "ohm", "ohms", "R"],
        "lm" => &["lm"],
        "K" => &["K"],
        "F" => &["F"],
        "%" => &["%"],
        _ => &["x"],
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn reads_what_people_type() {
        let cases = [
            ("40", Field::Watts, 40.0),
            (" 40 W ", Field::Watts, 40.0),
            ("40w", Field::Watts, 40.0),
            ("1,5 kW", Field::Watts, 1500.0),
            ("0,16 A", Field::Amps, 0.16),
            ("160 mA", Field::Amps, 0.16),
            ("160m", Field::Amps, 0.16),
            (".16", Field::Amps, 0.16),
            ("1k2", Field::Ohms, 1200.0),
            ("4R7", Field::Ohms, 4.7),
            ("1M", Field::Ohms, 1e6),
            ("35 Ω", Field::Ohms, 35.0),
            ("100 µF", Field::Farads, 100e-6),
            ("100uF", Field::Farads, 100e-6),
            ("1.234,5 V", Field::Volts, 1234.5),
            ("1,234.5 V", Field::Volts, 1234.5),
            ("1 234 V", Field::Volts, 1234.0),
            ("1e3", Field::Volts, 1000.0),
            ("-5", Field::Watts, -5.0),
            ("\u{2212}5", Field::Watts, -5.0),
            ("0,7", Field::PowerFactor, 0.7),
        ];
        for (text, field, value) in cases {
            assert_eq!(parse(text, field), Ok(value), "{text}");
        }
    }

    #[test]
    fn refuses_what_is_no_number_of_that_kind() {
        for text in ["", "  "] {
            assert_eq!(parse(text, Field::Watts), Err(QuantityError::Empty { field: Field::Watts }));
        }
        for text in
            ["1.2.3", "e5", "-", "NaN", "inf", "1e999", "١٢", "9999999999999999999999999999999999999999999"]
        {
            assert!(parse(text, Field::Watts).is_err(), "{text}");
        }
        for text in ["40 A", "40 lm", "40 W W", "4 kk", "1k2k"] {
            assert_eq!(
                parse(text, Field::Watts),
                Err(QuantityError::WrongUnit { field: Field::Watts }),
                "{text}"
            );
        }
    }
}
