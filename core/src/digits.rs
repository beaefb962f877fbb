//! Decimal digits to a number.
//!
//! The standard library reads any number of digits exactly; its table of powers of five is 11 KB of the page's first
//! load that no packing makes smaller. People type a few digits, and those are read exactly here, too.

/// Most digits that are looked at: as many as fit into 64 bits.
const MOST_DIGITS: u32 = 19;

/// The number in `text`: digits with at most one point, and an exponent behind an `e`; times ten to the `exponent`.
///
/// Correctly rounded for up to 19 digits and up to 21 decimals; beyond, to 1e-15 of the value. `None` for anything
/// else, and for what is too large for an `f64`.
pub(crate) fn read(text: &str, exponent: i32) -> Option<f64> {
    let unsigned = text.trim_start_matches(['-', '+']);
    if text.len() - unsigned.len() > 1 {
        return None;
    }
    let (plain, tail) = match unsigned.split_once(['e', 'E']) {
        Some((plain, tail)) => (plain, tail.parse().ok()?),
        None => (unsigned, 0),
    };
    let mut mantissa: u64 = 0;
    let mut exponent = exponent.checked_add(tail)?;
    let (mut count, mut digits, mut point) = (0, 0, false);
    for byte in plain.bytes() {
        match byte {
            b'.' if !point => point = true,
            b'0'..=b'9' => {
                digits += 1;
                if count < MOST_DIGITS {
                    mantissa = mantissa * 10 + u64::from(byte - b'0');
                    count += u32::from(mantissa > 0);
                    exponent = exponent.checked_sub(i32::from(point))?;
                } else {
                    exponent = exponent.checked_add(i32::from(!point))?;
                }
            }
            _ => return None,
        }
    }
    let value = scaled(mantissa, exponent);
    let value = if text.starts_with('-') { -value } else { value };
    (digits > 0 && value.is_finite()).then_some(value)
}

/// `mantissa` times ten to the `exponent`.
fn scaled(mantissa: u64, exponent: i32) -> f64 {
    /// Most decimals for which the quotient below has bits enough to round once.
    const MOST_DECIMALS: u32 = 21;
    if mantissa == 0 {
        return 0.0;
    }
    let whole = u128::from(mantissa);
    let power = 10_u128.checked_pow(exponent.unsigned_abs());
    #[expect(clippy::cast_precision_loss, reason = "each is the one rounding")]
    match power {
        Some(power) if exponent >= 0 && whole.checked_mul(power).is_some() => (whole * power) as f64,
        Some(power) if exponent < 0 && exponent.unsigned_abs() <= MOST_DECIMALS => {
            let shift = whole.leading_zeros();
            let dividend = whole << shift;
            // What is left over can only break a tie, so one bit stands for it.
            let quotient = (dividend / power) | u128::from(!dividend.is_multiple_of(power));
            libm::ldexp(quotient as f64, -shift.cast_signed())
        }
        _ => mantissa as f64 * libm::pow(10.0, f64::from(exponent)),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn reads_numbers_and_nothing_else() {
        for text in
            ["0", "1", "0.1", ".5", "5.", "1e3", "1.5E-3", "-7", "+7", "123456789012345678", "0.000001"]
        {
            assert_eq!(read(text, 0), text.parse().ok(), "{text}");
        }
        for text in ["", ".", "-", "--1", "1.2.3", "e5", "1e", "1e999", "0x1", "1 2", "inf", "1e99999999999"]
        {
            assert_eq!(read(text, 0), None, "{text}");
        }
        assert_eq!(read("160", -3), Some(0.16));
        let rough = read("1e300", 0).expect("a number");
        assert!((rough / 1e300 - 1.0).abs() < 1e-14);
    }

    proptest! {
        #[test]
        fn agrees_with_the_standard_library(mantissa in 0..=u64::MAX / 10, decimals in 0..=21_i32) {
            let text = alloc::format!("{mantissa}e-{decimals}");
            prop_assert_eq!(read(&text, 0), text.parse().ok());
        }

        #[test]
        fn agrees_on_every_float_that_is_written_out(value in 1e-6..1e6_f64) {
            prop_assert_eq!(read(&alloc::format!("{value}"), 0), Some(value));
        }
    }
}
