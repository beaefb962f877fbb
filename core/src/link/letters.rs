//! Bytes as letters that an address carries unchanged: base64url, RFC 4648, section 5, without padding.

use alloc::string::String;
use alloc::vec::Vec;

const LETTERS: &[u8; 64] = b"ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_";

/// Appends the letters of some bytes: four for three bytes, two or three for what is left.
pub(super) fn write(text: &mut String, bytes: &[u8]) {
    for three in bytes.chunks(3) {
        let bits = (0..3).fold(0, |bits, at| bits << 8 | u32::from(three.get(at).copied().unwrap_or(0)));
        for at in 0..=three.len() {
            text.push(char::from(LETTERS[(bits >> (18 - 6 * at)) as usize & 63]));
        }
    }
}

/// The bytes of some letters; `None` for any other character, and for letters that [`write`] never ends with.
pub(super) fn read(text: &str) -> Option<Vec<u8>> {
    let mut bytes = Vec::with_capacity(text.len());
    let (mut bits, mut count) = (0_u32, 0);
    for letter in text.bytes() {
        let value = match letter {
            b'A'..=b'Z' => letter - b'A',
            b'a'..=b'z' => letter - b'a' + 26,
            b'0'..=b'9' => letter - b'0' + 52,
            b'-' => 62,
            b'_' => 63,
            _ => return None,
        };
        bits = bits << 6 | u32::from(value);
        count += 6;
        if count >= 8 {
            count -= 8;
            bytes.push((bits >> count).to_le_bytes()[0]);
            bits &= (1 << count) - 1;
        }
    }
    // A letter that begins no byte, or bits that are left and not zero.
    (count < 6 && bits == 0).then_some(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;
    use base64ct::{Base64UrlUnpadded, Encoding};
    use proptest::prelude::*;

    #[test]
    fn the_test_vectors_of_the_rfc() {
        // RFC 4648, section 10; no padding here.
        for (plain, letters) in [
            ("", ""),
            ("f", "Zg"),
            ("fo", "Zm8"),
            ("foo", "Zm9v"),
            ("foob", "Zm9vYg"),
            ("foobar", "Zm9vYmFy"),
        ] {
            let mut text = String::new();
            write(&mut text, plain.as_bytes());
            assert_eq!(text, letters);
            assert_eq!(read(letters).as_deref(), Some(plain.as_bytes()));
        }
    }

    proptest! {
        #[test]
        fn agrees_with_the_base64ct_crate(bytes in prop::collection::vec(any::<u8>(), 0..50), text in "[A-Za-z0-9_=+/-]{0,9}") {
            let mut letters = String::new();
            write(&mut letters, &bytes);
            prop_assert_eq!(&letters, &Base64UrlUnpadded::encode_string(&bytes));
            prop_assert_eq!(read(&letters), Some(bytes));
            prop_assert_eq!(read(&text), Base64UrlUnpadded::decode_vec(&text).ok());
        }
    }
}
