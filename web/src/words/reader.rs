//! Reads a catalogue's texts into fields, one after the other, in the order in which the fields are written down.

use crate::format::Numerals;

/// A catalogue that does not hold the texts of this program.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Malformed {
    /// The first line that is missing, empty or too many, from 1.
    pub line: usize,
}

/// How a language counts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Plural {
    /// The numbers that are singular, between spaces: "1", or "0 1" in French.
    singular: &'static str,
}

impl Plural {
    /// Nothing is singular.
    pub(super) const NONE: Self = Self { singular: "" };

    /// The variant of a text for so many: "{0} lamp|{0} lamps".
    pub fn of(self, text: &'static str, count: usize) -> &'static str {
        let count = count.to_string();
        let one = self.singular.split(' ').any(|number| number == count);
        match text.split_once('|') {
            Some((singular, plural)) => {
                if one {
                    singular
                } else {
                    plural
                }
            }
            None => text,
        }
    }
}

/// The texts of a catalogue, a line each.
#[derive(Debug)]
pub(super) struct Lines {
    rest: &'static str,
    taken: usize,
    bad: Option<usize>,
    /// How its numbers are written.
    pub(super) numerals: Numerals,
    /// How it counts.
    pub(super) plural: Plural,
}

impl Lines {
    /// Lines whose numbers are written and counted as those of other texts.
    pub(super) const fn like(numerals: Numerals, plural: Plural, text: &'static str) -> Self {
        Self { rest: text, taken: 0, bad: None, numerals, plural }
    }

    /// From the first line on. The second and third say how numbers are written, which all groups of texts need.
    pub(super) fn of(text: &'static str) -> Self {
        let mut head = text.split('\n').skip(1);
        let decimal = head.next().and_then(|line| line.chars().next()).unwrap_or('.');
        let singular = head.next().unwrap_or_default();
        Self::like(Numerals { decimal }, Plural { singular }, text)
    }

    /// The next text, and so on, for each place.
    #[inline(never)]
    pub(super) fn fill(&mut self, places: &mut [&'static str]) {
        for place in places {
            let (line, rest) = self.rest.split_once('\n').unwrap_or((self.rest, ""));
            self.rest = rest;
            self.taken += 1;
            if line.is_empty() && self.bad.is_none() {
                self.bad = Some(self.taken);
            }
            *place = line;
        }
    }

    /// Whether every text was there, and no more.
    ///
    /// # Errors
    /// [`Malformed`], with the first bad line.
    pub(super) fn finish(self) -> Result<(), Malformed> {
        match self.bad {
            Some(line) => Err(Malformed { line }),
            None if !self.rest.is_empty() => Err(Malformed { line: self.taken + 1 }),
            None => Ok(()),
        }
    }
}

/// A group of texts: a struct whose fields are read from a catalogue in the order in which they stand. A plain field is
/// one text under the key `prefix` + its name; a field with names in brackets is as many texts, an enumeration, under
/// `prefix` + its name + `.` + each. What stands after `groups` is read after that; after `later`, when it has come. What
/// a text is for, and what fills its places, is told in web/words/en.txt.
macro_rules! catalogue {
    (
        $(#[$meta:meta])*
        pub struct $name:ident in $prefix:literal {
            $( $field:ident $( [ $($key:ident),+ $(,)? ] )? , )*
        }
        $( groups { $( $(#[$about:meta])* $group:ident : $kind:ty , )+ } )?
        $( later { $(#[$told:meta])* $later:ident : $part:ty , } )?
    ) => {
        $(#[$meta])*
        #[derive(Debug, Clone)]
        pub struct $name {
            /// How numbers are written.
            pub numerals: $crate::format::Numerals,
            /// How things are counted.
            pub plural: $crate::words::reader::Plural,
            $(
                #[doc = concat!("`", $prefix, stringify!($field), "` of the catalogues.")]
                pub $field: $crate::words::reader::kind!($($($key)+)?),
            )*
            $($( $(#[$about])* pub $group: $kind, )+)?
            $( $(#[$told])* $later: std::sync::OnceLock<&'static $part>, )?
        }

        impl $name {
            /// Without a text. Reading fills it place by place, which is a fifth of the code of making it field by field.
            pub(super) const fn empty() -> Self {
                Self {
                numerals: $crate::format::Numerals { decimal: '.' },
                plural: $crate::words::reader::Plural::NONE,
                $( $field: $crate::words::reader::empty!($($($key)+)?), )*
                $($( $group: <$kind>::empty(), )+)?
                $( $later: std::sync::OnceLock::new(), )?
                }
            }

            /// Reads it.
            pub(super) fn read(&mut self, lines: &mut $crate::words::reader::Lines) {
                self.numerals = lines.numerals;
                self.plural = lines.plural;
                $( lines.fill($crate::words::reader::places!(self $field $($($key)+)?)); )*
                $($( self.$group.read(lines); )+)?
            }

            /// The keys of its texts, in their order.
            pub(super) fn keys(keys: &mut Vec<&'static str>) {
                $( $crate::words::reader::name!(keys $prefix $field $($($key)+)?); )*
                $($( <$kind>::keys(keys); )+)?
            }
        }
    };
}

macro_rules! kind {
    () => { &'static str };
    ($($key:ident)+) => { [&'static str; [$(stringify!($key)),+].len()] };
}

macro_rules! empty {
    () => { "" };
    ($($key:ident)+) => { [""; [$(stringify!($key)),+].len()] };
}

macro_rules! places {
    ($words:ident $field:ident) => {
        std::slice::from_mut(&mut $words.$field)
    };
    ($words:ident $field:ident $($key:ident)+) => {
        &mut $words.$field
    };
}

macro_rules! name {
    ($keys:ident $prefix:literal $field:ident) => { $keys.push(concat!($prefix, stringify!($field))) };
    ($keys:ident $prefix:literal $field:ident $($key:ident)+) => {
        $keys.extend([$(concat!($prefix, stringify!($field), ".", stringify!($key))),+])
    };
}

pub(super) use {catalogue, empty, kind, name, places};

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_bad_catalogue_is_refused_with_its_line() {
        let read = |text: &'static str| {
            let mut lines = Lines::of(text);
            let mut texts = [""; 3];
            lines.fill(&mut texts);
            lines.finish().map(|()| texts)
        };
        assert_eq!(read("en\n.\n1"), Ok(["en", ".", "1"]));
        assert_eq!(read("en\n.\n1\n"), Ok(["en", ".", "1"]));
        assert_eq!(read("en\n.").map_err(|bad| bad.line), Err(3));
        assert_eq!(read("en\n\n1").map_err(|bad| bad.line), Err(2));
        assert_eq!(read("en\n.\n1\nmore").map_err(|bad| bad.line), Err(4));
        assert_eq!(read("").map_err(|bad| bad.line), Err(1));
    }

    #[test]
    fn each_language_counts_its_own_way() {
        let english = Plural { singular: "1" };
        let french = Plural { singular: "0 1" };
        let text = "lamp|lamps";
        assert_eq!([0, 1, 2, 10].map(|count| english.of(text, count)), ["lamps", "lamp", "lamps", "lamps"]);
        assert_eq!([0, 1, 2, 11].map(|count| french.of(text, count)), ["lamp", "lamp", "lamps", "lamps"]);
        assert_eq!(english.of("lamps", 1), "lamps");
    }
}
