//! The bytes of a record, as the `postcard` format lays them down: whole numbers seven bits to a byte, the low ones
//! first, an option as 0 or as 1 and its value, a list as its length and its items.
//!
//! A general reader of any record came to a third of the link's code; this one knows the few shapes that there are.
//! The tests hold it against the `postcard` crate.

use alloc::vec::Vec;

use super::LinkError;
use super::decimal::Decimal;

/// What stands for the power 10^0 in a packed number; one less for each power below.
const PACKED_ZERO: i8 = 18;
/// What stands before the eight bytes of a packed number that is no short decimal.
const PACKED_BITS: u8 = 37;

/// A record that is being written.
#[derive(Debug, Default)]
pub(super) struct Writer(Vec<u8>);

impl Writer {
    pub(super) fn finish(self) -> Vec<u8> {
        self.0
    }

    pub(super) fn byte(&mut self, byte: u8) {
        self.0.push(byte);
    }

    /// A whole number.
    pub(super) fn whole(&mut self, mut value: u64) {
        while value > 0x7f {
            self.byte(value.to_le_bytes()[0] | 0x80);
            value >>= 7;
        }
        self.byte(value.to_le_bytes()[0]);
    }

    /// The length of a list.
    pub(super) fn length(&mut self, items: usize) {
        self.whole(items as u64);
    }

    pub(super) fn number(&mut self, value: f64) {
        match Decimal::from(value) {
            Decimal::Short { digits, exponent } => {
                self.byte(0);
                self.signed(digits);
                self.byte(exponent.cast_unsigned());
            }
            Decimal::Bits(bits) => {
                self.byte(1);
                self.whole(bits);
            }
        }
    }

    /// A number as version 2 writes it: one byte for the power of ten and for what is no short decimal.
    pub(super) fn packed(&mut self, value: f64) {
        match Decimal::from(value) {
            Decimal::Short { digits, exponent } => {
                self.byte(exponent.wrapping_add(PACKED_ZERO).cast_unsigned());
                self.signed(digits);
            }
            Decimal::Bits(bits) => {
                self.byte(PACKED_BITS);
                self.bytes(&bits.to_le_bytes());
            }
        }
    }

    /// Numbers of which some may be missing: one byte, a bit for each that is there, then these, packed.
    pub(super) fn optionals(&mut self, values: &[Option<f64>]) {
        let bit = |(place, value): (usize, &Option<f64>)| u8::from(value.is_some()) << place;
        self.byte(values.iter().enumerate().map(bit).fold(0, |all, bit| all | bit));
        for value in values.iter().flatten() {
            self.packed(*value);
        }
    }

    pub(super) fn bytes(&mut self, bytes: &[u8]) {
        self.0.extend_from_slice(bytes);
    }

    /// Signs alternate, so that small numbers are short on both sides of zero.
    fn signed(&mut self, digits: i64) {
        self.whole(((digits << 1) ^ (digits >> 63)).cast_unsigned());
    }

    pub(super) fn optional(&mut self, value: Option<f64>) {
        self.byte(value.is_some().into());
        if let Some(value) = value {
            self.number(value);
        }
    }
}

/// What is left of a record to read. Every reading fails cleanly where the record ends or holds something else.
#[derive(Debug)]
pub(super) struct Reader<'a> {
    left: &'a [u8],
    newer: bool,
}

impl<'a> Reader<'a> {
    pub(super) const fn new(bytes: &'a [u8]) -> Self {
        Self { left: bytes, newer: false }
    }

    /// What a failed reading means.
    pub(super) const fn error(&self) -> LinkError {
        if self.newer { LinkError::Newer } else { LinkError::Damaged }
    }

    #[inline(never)]
    pub(super) fn byte(&mut self) -> Option<u8> {
        let (first, rest) = self.left.split_first()?;
        self.left = rest;
        Some(*first)
    }

    /// A byte that stands for one of a few things. One that stands for nothing here was written by a newer version.
    pub(super) fn one_of<T: Copy>(&mut self, codes: &[(T, u8)]) -> Option<T> {
        let code = self.byte()?;
        let found = codes.iter().find(|(_, known)| *known == code);
        self.newer |= found.is_none();
        Some(found?.0)
    }

    /// A whole number of 64 bits.
    #[inline(never)]
    pub(super) fn whole(&mut self) -> Option<u64> {
        let mut value = 0;
        for place in (0..64).step_by(7) {
            let byte = self.byte()?;
            let bits = u64::from(byte & 0x7f);
            value |= bits << place;
            if (value >> place) != bits {
                break;
            }
            if byte & 0x80 == 0 {
                return Some(value);
            }
        }
        None
    }

    /// The length of a list: no more than the bytes that are left, for each item takes one at least.
    pub(super) fn length(&mut self) -> Option<usize> {
        let items = usize::try_from(self.whole()?).ok()?;
        (items <= self.left.len()).then_some(items)
    }

    #[inline(never)]
    pub(super) fn number(&mut self) -> Option<f64> {
        let decimal = match self.byte()? {
            0 => {
                let digits = self.signed()?;
                Decimal::Short { digits, exponent: self.byte()?.cast_signed() }
            }
            1 => Decimal::Bits(self.whole()?),
            _ => return None,
        };
        decimal.to_f64()
    }

    fn signed(&mut self) -> Option<i64> {
        let zigzag = self.whole()?;
        Some((zigzag >> 1).cast_signed() ^ -(zigzag & 1).cast_signed())
    }

    /// A number as version 2 writes it.
    #[inline(never)]
    pub(super) fn packed(&mut self) -> Option<f64> {
        let head = self.byte()?;
        let decimal = match head {
            0..PACKED_BITS => {
                Decimal::Short { digits: self.signed()?, exponent: head.cast_signed() - PACKED_ZERO }
            }
            PACKED_BITS => {
                let bytes = self.bytes(8)?.try_into().ok()?;
                Decimal::Bits(u64::from_le_bytes(bytes))
            }
            _ => return None,
        };
        decimal.to_f64()
    }

    /// Numbers of which some may be missing. A bit for one more was written by a newer version.
    pub(super) fn optionals<const N: usize>(&mut self, places: [&mut Option<f64>; N]) -> Option<()> {
        let there = self.byte()?;
        if u32::from(there) >> N != 0 {
            return self.meets_newer();
        }
        for (bit, place) in places.into_iter().enumerate() {
            if there >> bit & 1 != 0 {
                *place = Some(self.packed()?);
            }
        }
        Some(())
    }

    /// So many bytes as they are.
    pub(super) fn bytes(&mut self, count: usize) -> Option<&'a [u8]> {
        let (bytes, rest) = self.left.split_at_checked(count)?;
        self.left = rest;
        Some(bytes)
    }

    /// Something stands here that only a newer version writes.
    pub(super) const fn meets_newer<T>(&mut self) -> Option<T> {
        self.newer = true;
        None
    }

    /// Whether nothing is left.
    pub(super) const fn is_done(&self) -> bool {
        self.left.is_empty()
    }

    /// Whether something optional follows.
    pub(super) fn some(&mut self) -> Option<bool> {
        match self.byte()? {
            0 => Some(false),
            1 => Some(true),
            _ => None,
        }
    }

    /// Puts what is there, if anything, into `place`.
    #[inline(never)]
    pub(super) fn optional(&mut self, place: &mut Option<f64>) -> Option<()> {
        if self.some()? {
            *place = Some(self.number()?);
        }
        Some(())
    }

    /// Nothing may be left.
    pub(super) fn finish(&self) -> Option<()> {
        self.left.is_empty().then_some(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn the_bytes_are_those_of_the_postcard_crate(whole: u64, number: f64, typed in -99_999..99_999_i32, some: bool) {
            let typed = f64::from(typed) / 100.0;
            let list = [number, typed, -0.0].map(Decimal::from);
            let theirs = postcard::to_allocvec(&(whole, list, some.then_some(list[1]), list.as_slice()));
            let mut writer = Writer::default();
            writer.whole(whole);
            for number in [number, typed, -0.0] {
                writer.number(number);
            }
            writer.optional(some.then_some(typed));
            writer.length(3);
            for number in [number, typed, -0.0] {
                writer.number(number);
            }
            let ours = writer.finish();
            prop_assert_eq!(&Ok(ours.clone()), &theirs);
            let mut reader = Reader::new(&ours);
            prop_assert_eq!(reader.whole(), Some(whole));
            for number in [number, typed, -0.0] {
                prop_assert_eq!(reader.number().map(f64::to_bits), Some(number.to_bits()));
            }
            let mut place = None;
            prop_assert_eq!(reader.optional(&mut place), Some(()));
            prop_assert_eq!(place, some.then_some(typed));
            prop_assert_eq!(reader.length(), Some(3));
        }

        #[test]
        fn reads_what_the_postcard_crate_reads(bytes in prop::collection::vec(any::<u8>(), 0..14)) {
            let theirs = postcard::take_from_bytes::<u64>(&bytes);
            let mut reader = Reader::new(&bytes);
            prop_assert_eq!(reader.whole(), theirs.as_ref().ok().map(|(value, _)| *value));
            if let Ok((_, rest)) = theirs {
                prop_assert_eq!(reader.left, rest);
            }
            let theirs = postcard::take_from_bytes::<Option<Decimal>>(&bytes).ok().and_then(|(number, _)| {
                number.map_or(Some(None), |number| number.to_f64().map(Some))
            });
            let mut place = None;
            let ours = Reader::new(&bytes).optional(&mut place).map(|()| place.map(f64::to_bits));
            prop_assert_eq!(ours, theirs.map(|number| number.map(f64::to_bits)));
        }
    }
}
