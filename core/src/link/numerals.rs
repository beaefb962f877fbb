//! Bytes as decimal digits, for a code that a camera reads: there a digit takes ten thirds of a bit, where a letter takes
//! eight.
//!
//! Seven bytes make 17 digits, and fewer at the end as many as they need. Two check digits follow, such that all digits as
//! one number leave 1 when divided by 97 (ISO 7064, MOD 97-10): any one wrong digit is found, and any two neighbours
//! that have changed places.

use alloc::string::String;
use alloc::vec::Vec;

/// Digits that so many bytes take.
const DIGITS: [usize; 8] = [0, 3, 5, 8, 10, 13, 15, 17];

const MODULUS: u64 = 97;

/// Appends the digits of some bytes.
pub(super) fn write(text: &mut String, bytes: &[u8]) {
    let mut left = 0;
    for chunk in bytes.chunks(7) {
        let mut value = chunk.iter().fold(0, |value, &byte| value << 8 | u64::from(byte));
        let mut digits = [0_u8; 17];
        let digits = &mut digits[..DIGITS[chunk.len()]];
        for digit in digits.iter_mut().rev() {
            *digit = (value % 10).to_le_bytes()[0];
            value /= 10;
        }
        for digit in digits {
            text.push(char::from(b'0' + *digit));
            left = (left * 10 + u64::from(*digit)) % MODULUS;
        }
    }
    let check = MODULUS + 1 - left * 100 % MODULUS;
    text.push(char::from(b'0' + (check / 10).to_le_bytes()[0]));
    text.push(char::from(b'0' + (check % 10).to_le_bytes()[0]));
}

/// The bytes of some digits; `None` for any text that [`write`] never makes.
pub(super) fn read(text: &str) -> Option<Vec<u8>> {
    let mut left = 0;
    for digit in text.bytes() {
        left = (left * 10 + u64::from(digit.is_ascii_digit().then_some(digit)? - b'0')) % MODULUS;
    }
    let (digits, check) = text.as_bytes().split_at_checked(text.len().checked_sub(2)?)?;
    // Of the two numbers that leave the same, one is written.
    if left != 1 || !(b"02"..=b"98").contains(&<&[u8; 2]>::try_from(check).ok()?) {
        return None;
    }
    let mut bytes = Vec::with_capacity(digits.len() * 7 / 17 + 1);
    for chunk in digits.chunks(17) {
        let count = DIGITS.iter().position(|&digits| digits == chunk.len())?;
        let value = chunk.iter().fold(0, |value, &digit| value * 10 + u64::from(digit - b'0'));
        if value >> (8 * count) != 0 {
            return None;
        }
        bytes.extend_from_slice(&value.to_be_bytes()[8 - count..]);
    }
    Some(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn digits(bytes: &[u8]) -> String {
        let mut text = String::new();
        write(&mut text, bytes);
        text
    }

    #[test]
    fn every_group_takes_the_fewest_digits_that_hold_it() {
        for (bytes, &digits) in DIGITS.iter().enumerate().skip(1) {
            let exponent = u32::try_from(digits).expect("small");
            assert!(10_u128.pow(exponent) >= 1 << (8 * bytes), "{bytes} bytes");
            assert!(10_u128.pow(exponent - 1) < 1 << (8 * bytes), "{bytes} bytes");
        }
    }

    #[test]
    fn the_check_is_that_of_the_standard() {
        // Worked by hand: "A" is 65, so 065; 6500 = 97 * 67 + 1, so 98 - 1; and 6597 = 97 * 68 + 1.
        assert_eq!(digits(b"A"), "06597");
        assert_eq!(digits(&[]), "98");
        assert_eq!(read("01"), None);
        // The example of the standard's users: an account of the United Kingdom, GB82 WEST 1234 5698 7654 32, with its
        // letters as numbers and its first four characters last, leaves 1 (from memory).
        let account = "3214282912345698765432161182";
        let left = account.bytes().fold(0, |left, digit| (left * 10 + u64::from(digit - b'0')) % MODULUS);
        assert_eq!(left, 1);
    }

    proptest! {
        #[test]
        fn bytes_come_back_and_a_wrong_digit_does_not(
            bytes in prop::collection::vec(any::<u8>(), 0..60),
            at in any::<prop::sample::Index>(),
            by in 1..10_u8,
        ) {
            let text = digits(&bytes);
            prop_assert_eq!(read(&text), Some(bytes));
            let at = at.index(text.len());
            let mut wrong = text.clone().into_bytes();
            wrong[at] = b'0' + (wrong[at] - b'0' + by) % 10;
            prop_assert_eq!(read(core::str::from_utf8(&wrong).expect("digits")), None);
            if at + 1 < text.len() && text.as_bytes()[at] != text.as_bytes()[at + 1] {
                let mut swapped = text.clone().into_bytes();
                swapped.swap(at, at + 1);
                prop_assert_eq!(read(core::str::from_utf8(&swapped).expect("digits")), None);
            }
            prop_assert_eq!(read(&text[..text.len() - 1]), None);
        }

        #[test]
        fn what_is_read_is_what_is_written(text in "[0-9]{0,40}") {
            if let Some(bytes) = read(&text) {
                prop_assert_eq!(digits(&bytes), text);
            }
        }
    }
}
