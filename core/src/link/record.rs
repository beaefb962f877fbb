//! The bytes of a record, as the `postcard` format lays them down: whole numbers seven bits to a byte, the low ones
//! first, an option as 0 or as 1 and its value, a list as its length and its items.
//!
//! A general reader of any record came to a third of the link's code; this one knows the few shapes that there are.
//! The tests hold it against the `postcard` crate.

use alloc::vec::Vec;

use super::LinkError;
use super::decimal::Decimal;

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
                // Signs alternate, so that small numbers are short on both sides of zero.
                self.whole(((digits << 1) ^ (digits >> 63)).cast_unsigned());
                self.byte(exponent.cast_unsigned());
            }
            Decimal::Bits(bits) => {
                self.byte(1);
                self.whole(bits);
            }
        }
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
                let zigzag = self.whole()?;
                let digits = (zigzag >> 1).cast_signed() ^ -(zigzag & 1).cast_signed();
                Decimal::Short { digits, exponent: self.byte()?.cast_signed() }
            }
            1 => Decimal::Bits(self.whole()?),
            _ => return None,
        };
        decimal.to_f64()
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
