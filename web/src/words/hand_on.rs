//! The texts of the panel that hands a bench on, and of the printed card.

use super::reader::catalogue;
use super::{Words, fill, pick};
use crate::draft::{Fault, MeterPart, Slot};
use crate::reckoner::links::records::{Unread, Wrong};
use lampladder_core::error::InputError;
use lampladder_core::readings::Kind;

catalogue! {
    /// All texts of the panel.
    pub struct HandOnWords in "hand_on." {
        title, means, with_ladder, with_log, link, copy, copied, not_copied, share, long, too_long, working, code,
        code_means, too_large, card, card_means, no_rungs, print, readings, none, csv, json, read, saved,
        not_saved, added, refused,
        wrong [shape, newer, bench, number],
        unread [broken, foreign, newer],
        large, no_file, empty_file,
    }
    groups {
        /// Texts of the printed card.
        card_words: CardWords,
    }
}

catalogue! {
    /// Texts of the printed card.
    pub struct CardWords in "card." {
        title,
        caution [live, line, charged, not_for],
        equipment, checks, looked,
        head [rung, lamps, glow, volts, amps, stop, read_volts, read_amps, read_glow],
        mains, scan, notes,
    }
}

impl HandOnWords {
    /// Kept readings go along; how many there are.
    pub fn with_log(&self, count: usize) -> String {
        fill(self.with_log, &[&count.to_string()])
    }

    /// The link is long: its characters.
    pub fn long(&self, characters: usize) -> String {
        fill(self.long, &[&characters.to_string()])
    }

    /// What became of the readings of a file.
    pub fn added(&self, added: usize, known: usize) -> String {
        fill(self.added, &[&added.to_string(), &known.to_string()])
    }

    /// How many were refused; the place of the first, and what is wrong with it.
    pub fn refused(&self, count: usize, place: usize, wrong: &Wrong, words: &Words) -> String {
        let what = match wrong {
            Wrong::Shape => pick(&self.wrong, 0).to_owned(),
            Wrong::Newer => pick(&self.wrong, 1).to_owned(),
            Wrong::Bench(_) => pick(&self.wrong, 2).to_owned(),
            Wrong::Number(error) => self.number(error, words),
        };
        fill(self.refused, &[&count.to_string(), &place.to_string(), &what])
    }

    /// A number by the name of its field, where a field of the page is for it.
    fn number(&self, error: &InputError, words: &Words) -> String {
        let field = error.field();
        let kind = Kind::ALL.into_iter().find(|kind| kind.field() == field).map(Slot::Reading);
        let part = MeterPart::ALL.into_iter().find(|part| part.field() == field).map(Slot::Meter);
        kind.or(part)
            .map_or_else(|| pick(&self.wrong, 3).to_owned(), |slot| words.fault(slot, &Fault::Number(*error)))
    }

    /// Why nothing of a file was read.
    pub fn unread(&self, why: Unread) -> &'static str {
        pick(&self.unread, why as usize)
    }

    /// A file is too large: its megabytes, and the most.
    pub fn large(&self, megabytes: &str, most: &str) -> String {
        fill(self.large, &[megabytes, most])
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;
    use lampladder_core::error::Field;

    #[test]
    fn an_impossible_number_is_told_with_its_range() {
        let words = english();
        let error = InputError::OutOfRange { field: Field::BankVolts, value: 1e300, low: 0.0, high: 1000.0 };
        let told = words.hand_on().refused(2, 7, &Wrong::Number(error), words);
        assert!(told.contains('2') && told.contains('7') && told.contains("1000\u{a0}V"), "{told}");
        let other = words.hand_on().refused(
            1,
            1,
            &Wrong::Number(InputError::NotFinite { field: Field::Seconds }),
            words,
        );
        assert!(other.ends_with(words.hand_on().wrong[3]), "{other}");
    }
}
