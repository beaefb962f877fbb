//! The form of a catalogue, web/words/*.txt: lines `key = text`, remarks after `#`, empty lines.
//!
//! The page fetches the texts alone; `cargo xtask stamp`, which takes keys and remarks out, compiles this very file.

/// A line that is none of these.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Unreadable {
    /// Which one, from 1.
    pub line: usize,
}

/// The keys and texts in their order.
///
/// # Errors
/// [`Unreadable`]: no ` = `, no text, or a space at either end of one, which no editor would show.
pub fn entries(catalogue: &str) -> Result<Vec<Entry<'_>>, Unreadable> {
    let mut entries = Vec::new();
    for (index, line) in catalogue.lines().enumerate() {
        if line.is_empty() || line.starts_with('#') {
            continue;
        }
        let unreadable = Unreadable { line: index + 1 };
        let (key, text) = line.split_once(" = ").ok_or(unreadable)?;
        let spaced = |part: &str| part.is_empty() || part.starts_with(' ') || part.ends_with(' ');
        if spaced(key) || spaced(text) {
            return Err(unreadable);
        }
        entries.push((key, text));
    }
    Ok(entries)
}

/// How the first key of the later part begins.
const LATER: &str = "replay.";

/// A key and its text.
pub type Entry<'a> = (&'a str, &'a str);

/// What the first screen needs, and what is fetched with the panels beyond it.
pub fn parts<'a, 'b>(entries: &'a [Entry<'b>]) -> (&'a [Entry<'b>], &'a [Entry<'b>]) {
    let first = entries.iter().position(|(key, _)| key.starts_with(LATER));
    entries.split_at(first.unwrap_or(entries.len()))
}

/// The texts alone, as the page reads them.
pub fn texts(entries: &[Entry<'_>]) -> String {
    entries.iter().map(|(_, text)| *text).collect::<Vec<_>>().join("\n")
}

/// The numbered places of a text, sorted, each once; of each variant where it counts.
pub fn places(text: &str) -> Vec<char> {
    let place = |rest: &str| rest.split_once('}')?.0.chars().next();
    let mut places: Vec<char> = text.split('{').skip(1).filter_map(place).collect();
    places.sort_unstable();
    places.dedup();
    places
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn remarks_and_empty_lines_are_left_out() {
        let read = entries("# of the page\n\na.b = one = {1} and {0}\nc = two\n");
        assert_eq!(read, Ok(vec![("a.b", "one = {1} and {0}"), ("c", "two")]));
        assert_eq!(texts(&read.expect("reads")), "one = {1} and {0}\ntwo");
        assert_eq!(places("one = {1} and {0}, {1}"), ['0', '1']);
    }

    #[test]
    fn other_lines_are_refused_by_number() {
        for (bad, line) in
            [("a = b\nc", 2), ("a =  b", 1), ("a = b ", 1), (" a = b", 1), ("\n\na = ", 3), ("a=b", 1)]
        {
            assert_eq!(entries(bad), Err(Unreadable { line }), "{bad:?}");
        }
    }
}
