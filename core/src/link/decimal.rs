//! A number as people write it: few digits and a power of ten, two or three bytes in a link.

/// A decimal fraction, or the bits of a number that is none with at most 15 digits.
#[derive(Debug, Clone, Copy, PartialEq)]
#[cfg_attr(test, derive(serde::Serialize, serde::Deserialize))]
pub(super) enum Decimal {
    /// `digits * 10^exponent`.
    Short { digits: i64, exponent: i8 },
    /// Any other number.
    Bits(u64),
}

/// Powers of ten that an `f64` holds exactly reach 10^22; one division or multiplication by them rounds once, so
/// the very number that a decimal parser would give comes back.
const MOST_EXPONENT: i8 = 18;
const LEAST_EXPONENT: i8 = -MOST_EXPONENT;

/// Greatest count of digits whose every value an `f64` holds exactly.
const MOST_DIGITS: f64 = 999_999_999_999_999.0;

impl From<f64> for Decimal {
    fn from(value: f64) -> Self {
        for places in 0..=MOST_EXPONENT {
            let scaled = libm::round(value * power(places));
            if scaled.abs() > MOST_DIGITS {
                break;
            }
            #[expect(clippy::cast_possible_truncation, reason = "an integer of at most 15 digits")]
            let (mut digits, mut exponent) = (scaled as i64, -places);
            if Self::value(digits, exponent) == Some(value) && value.to_bits() != (-0.0_f64).to_bits() {
                while digits != 0 && digits % 10 == 0 && exponent < MOST_EXPONENT {
                    digits /= 10;
                    exponent += 1;
                }
                return Self::Short { digits, exponent };
            }
        }
        Self::Bits(value.to_bits())
    }
}

impl Decimal {
    fn value(digits: i64, exponent: i8) -> Option<f64> {
        #[expect(
            clippy::cast_precision_loss,
            reason = "exact up to 15 digits; a forged longer one merely rounds"
        )]
        let digits = digits as f64;
        match exponent {
            0..=MOST_EXPONENT => Some(digits * power(exponent)),
            LEAST_EXPONENT..0 => Some(digits / power(-exponent)),
            _ => None,
        }
    }

    /// The number; `None` for an exponent that this program never writes.
    pub(super) fn to_f64(self) -> Option<f64> {
        match self {
            Self::Short { digits, exponent } => Self::value(digits, exponent),
            Self::Bits(bits) => Some(f64::from_bits(bits)),
        }
    }
}

fn power(exponent: i8) -> f64 {
    (0..exponent).fold(1.0, |product, _| product * 10.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn typed_numbers_are_short_and_all_numbers_come_back() {
        for (value, digits, exponent) in
            [(230.0, 23, 1), (0.16, 16, -2), (0.0, 0, 0), (8.5, 85, -1), (-40.0, -4, 1), (1e-4, 1, -4)]
        {
            assert_eq!(Decimal::from(value), Decimal::Short { digits, exponent });
        }
        for value in [1.0 / 3.0, 1e300, -0.0, f64::MIN_POSITIVE, 0.1 + 0.2, 123_456_789.012_345] {
            assert_eq!(Decimal::from(value).to_f64().map(f64::to_bits), Some(value.to_bits()));
        }
    }
}
