//! A set-up as a short text for a URL fragment, and back; and with it what else one colleague hands on to another.
//!
//! The first character is the version. Versions 1 and 2 are followed by base64url (RFC 4648, section 5, unpadded) of a
//! record and one check byte, version 3 by the record and check byte of version 2 in digits. Version 1 holds a set-up, in
//! the `postcard` format; version 2 is shorter, and may hold the lamps that there are, the position on the ladder and
//! kept readings as well. Decoders are kept for ever: a link once shared stays readable.

mod decimal;
mod letters;
mod numerals;
mod parts;
mod record;
mod v1;
mod v2;

use alloc::string::String;
use alloc::vec::Vec;
use core::fmt;

use serde::{Deserialize, Serialize};

use crate::error::InputError;
use crate::hand_on::HandedOn;
use crate::setup::Setup;
use crate::stock::Stock;

/// Longest text that is looked at: the fullest bench, eight lamps with 64 measured points each, takes 16,000.
pub const LONGEST: usize = 20_000;

/// The same with everything that may be handed on: the fullest bench and stock, and some thousand kept readings.
pub const LONGEST_HANDED_ON: usize = 120_000;

/// How a link that is handed on is spelt.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Spelling {
    /// Letters and digits: the shortest text.
    Letters,
    /// Digits only: the smallest code for a camera.
    Digits,
}

/// Why a text is no set-up.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum LinkError {
    /// Nothing there.
    Empty,
    /// Longer than any link this program makes.
    TooLong,
    /// Made by a newer version of this program.
    Newer,
    /// Cut short, or changed on the way.
    Damaged,
    /// Readable, with a number that is out of range.
    Refused(InputError),
}

impl fmt::Display for LinkError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Empty => f.write_str("the link holds no set-up"),
            Self::TooLong => f.write_str("the link is too long"),
            Self::Newer => f.write_str("the link was made by a newer version"),
            Self::Damaged => f.write_str("the link is cut short or damaged"),
            Self::Refused(error) => write!(f, "the link holds a refused value: {error}"),
        }
    }
}

impl core::error::Error for LinkError {}

/// The set-up as a text of URL-safe characters, to stand behind `#`.
///
/// The same set-up gives the same text, and [`decode`] gives the very same set-up back.
pub fn encode(setup: &Setup) -> String {
    written("1", v1::encode(setup))
}

/// The set-up in a text, with or without the leading `#`; what else it may hold is only looked over.
///
/// # Errors
/// Anything but a whole link of a known version with numbers in range; never a panic, whatever the text.
pub fn decode(text: &str) -> Result<Setup, LinkError> {
    let (version, bytes) = read(bare(text), LONGEST)?;
    if version == '1' { v1::decode(&bytes) } else { v2::decode(&bytes).map(|(setup, _)| setup) }
}

/// All that is handed on as a text of URL-safe characters, to stand behind `#`.
///
/// The same gives the same text, and [`decode_all`] gives the very same back.
///
/// # Errors
/// [`LinkError::TooLong`]: more readings than a link carries.
pub fn encode_all(handed: &HandedOn, spelling: Spelling) -> Result<String, LinkError> {
    let mut record = v2::encode(handed);
    record.push(check(&record));
    let mut text = String::new();
    match spelling {
        Spelling::Letters => {
            text.push('2');
            letters::write(&mut text, &record);
        }
        Spelling::Digits => {
            text.push('3');
            numerals::write(&mut text, &record);
        }
    }
    if text.len() > LONGEST_HANDED_ON { Err(LinkError::TooLong) } else { Ok(text) }
}

/// All that a text holds, with or without the leading `#`.
///
/// # Errors
/// As [`decode`], for the parts behind the set-up too.
pub fn decode_all(text: &str) -> Result<HandedOn, LinkError> {
    let (version, bytes) = read(bare(text), LONGEST)?;
    if version == '1' {
        return v1::decode(&bytes).map(HandedOn::only);
    }
    let (setup, parts) = v2::decode(&bytes)?;
    parts::decode(setup, parts)
}

fn bare(text: &str) -> &str {
    text.trim().trim_start_matches('#')
}

/// What a text of a stock begins with, so that nobody takes it for a set-up.
const STOCK: char = 's';

/// A stock as a text of URL-safe characters, for the phone to keep: `s`, the version, and the rest as in a link.
///
/// The same stock gives the same text, and [`decode_stock`] gives the very same stock back.
pub fn encode_stock(stock: &Stock) -> String {
    written("s1", v1::encode_stock(stock))
}

/// The stock in a text that [`encode_stock`] made.
///
/// # Errors
/// Anything but a whole text of a known version with numbers in range; never a panic, whatever the text.
pub fn decode_stock(text: &str) -> Result<Stock, LinkError> {
    let text = text.trim();
    if text.is_empty() {
        return Err(LinkError::Empty);
    }
    let text = text.strip_prefix(STOCK).ok_or(LinkError::Damaged)?;
    if text.starts_with(|version| matches!(version, '2'..='9')) {
        return Err(LinkError::Newer);
    }
    // Twelve kinds of 64 points each are half as long again as the fullest bench.
    v1::decode_stock(&read(text, 2 * LONGEST)?.1)
}

/// A version, and a record with its check byte.
fn written(version: &str, mut record: Vec<u8>) -> String {
    record.push(check(&record));
    let mut text = String::from(version);
    letters::write(&mut text, &record);
    text
}

/// Version and record of a text; `longest` is for version 1.
fn read(text: &str, longest: usize) -> Result<(char, Vec<u8>), LinkError> {
    let mut characters = text.chars();
    let version = characters.next().ok_or(LinkError::Empty)?;
    let longest = match version {
        '1' => longest,
        '2' | '3' => LONGEST_HANDED_ON,
        '4'..='9' => return Err(LinkError::Newer),
        _ => return Err(LinkError::Damaged),
    };
    if text.len() > longest {
        return Err(LinkError::TooLong);
    }
    let read = if version == '3' { numerals::read } else { letters::read };
    let mut bytes = read(characters.as_str()).ok_or(LinkError::Damaged)?;
    let last = bytes.pop().ok_or(LinkError::Damaged)?;
    if check(&bytes) == last { Ok((version, bytes)) } else { Err(LinkError::Damaged) }
}

/// CRC-8 with the polynomial x^8 + x^2 + x + 1 (ITU-T I.432.1): finds every single changed character and all but
/// one in 256 of other damage.
fn check(bytes: &[u8]) -> u8 {
    bytes.iter().fold(0xff, |crc, &byte| {
        (0..8).fold(crc ^ byte, |crc, _| if crc & 0x80 == 0 { crc << 1 } else { (crc << 1) ^ 0x07 })
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_example_comes_back_and_is_short() {
        let setup = Setup::example().expect("in range");
        let text = encode(&setup);
        assert_eq!(decode(&text), Ok(setup.clone()));
        assert_eq!(decode(&alloc::format!("#{text}")), Ok(setup));
        assert!(text.len() < 45, "{text}");
    }

    #[test]
    fn a_stock_comes_back_and_is_no_set_up() {
        let lamp = |watts| crate::lamp::Lamp::new(230.0, watts).expect("a lamp");
        let measured = crate::lamp::LampSpec { cold_ohms: Some(61.5), ..lamp(60.0).spec().clone() };
        let measured = crate::lamp::Lamp::from_spec(measured).expect("a lamp");
        let stock =
            Stock::new([(lamp(60.0), 2.0), (measured, 1.0), (lamp(25.0), 99.0)]).expect("three kinds");
        let text = encode_stock(&stock);
        assert_eq!(decode_stock(&text), Ok(stock));
        assert_eq!(decode_stock(&encode_stock(&Stock::default())), Ok(Stock::default()));
        assert_eq!(decode(&text), Err(LinkError::Damaged));
        assert_eq!(decode_stock(&encode(&Setup::example().expect("in range"))), Err(LinkError::Damaged));
        for cut in 1..text.len() {
            assert!(decode_stock(&text[..cut]).is_err(), "cut at {cut}");
        }
        assert_eq!(decode_stock(" "), Err(LinkError::Empty));
        assert_eq!(decode_stock("s2abc"), Err(LinkError::Newer));
    }

    #[test]
    fn damage_is_found() {
        let text = encode(&Setup::example().expect("in range"));
        for cut in 1..text.len() {
            assert!(decode(&text[..cut]).is_err(), "cut at {cut}");
        }
        assert_eq!(decode(""), Err(LinkError::Empty));
        assert_eq!(decode("4abc"), Err(LinkError::Newer));
        assert_eq!(decode("2abc"), Err(LinkError::Damaged));
        assert_eq!(decode("3123"), Err(LinkError::Damaged));
        assert_eq!(decode("caution"), Err(LinkError::Damaged));
        assert_eq!(decode(&"1".repeat(LONGEST + 1)), Err(LinkError::TooLong));
    }
}
