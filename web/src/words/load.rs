//! Turns a catalogue into words.

use super::catalogue;
use super::page::{Later, Words};
use super::reader::{Lines, Malformed};

/// Reads the first part of a catalogue as it is fetched: the texts alone, a line each. [`Words::complete`] takes the other.
///
/// The words of a language live as long as the page.
///
/// # Errors
/// [`Malformed`]: too few texts, too many, or an empty one.
pub fn read(texts: String) -> Result<&'static Words, Malformed> {
    let mut lines = Lines::of(texts.leak());
    let words = Box::leak(Box::new(const { Words::empty() }));
    words.read(&mut lines);
    lines.finish()?;
    Ok(words)
}

/// English, for tests: nothing of the page calls this, so that no language is part of the program.
///
/// # Panics
/// Where web/words/en.txt is not what the program expects.
pub fn english() -> &'static Words {
    static ENGLISH: std::sync::OnceLock<&'static Words> = std::sync::OnceLock::new();
    ENGLISH.get_or_init(|| of(include_str!("../../words/en.txt")))
}

/// The keys of all texts, in the order of the catalogues. For tests, as [`english`].
pub fn keys() -> Vec<&'static str> {
    let mut keys = Vec::new();
    Words::keys(&mut keys);
    Later::keys(&mut keys);
    keys
}

fn of(text: &str) -> &'static Words {
    let entries = catalogue::entries(text).expect("lines of keys and texts");
    for (index, key) in keys().iter().enumerate() {
        assert_eq!(entries.get(index).map(|(key, _)| key), Some(key), "the {index}. key of the catalogue");
    }
    let (first, later) = catalogue::parts(&entries);
    let words = read(catalogue::texts(first)).expect("as many texts as keys");
    words.complete(catalogue::texts(later)).expect("as many texts as keys");
    words
}
