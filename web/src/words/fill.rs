//! Fills the numbered places of a text, `{0}` to `{9}`, with texts.

/// A text with its places filled. A place without a text of its own stays as it is, and so does any other brace.
pub fn fill(text: &str, with: &[&str]) -> String {
    let mut filled = String::with_capacity(text.len());
    let mut rest = text;
    while let Some(at) = rest.find('{') {
        let (before, brace) = rest.split_at(at);
        filled.push_str(before);
        let piece = match brace.as_bytes() {
            [_, digit @ b'0'..=b'9', b'}', ..] => with.get(usize::from(digit - b'0')),
            _ => None,
        };
        let taken = if let Some(piece) = piece {
            filled.push_str(piece);
            "{0}".len()
        } else {
            filled.push('{');
            "{".len()
        };
        rest = brace.get(taken..).unwrap_or_default();
    }
    filled.push_str(rest);
    filled
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_are_filled_in_any_order_and_more_than_once() {
        assert_eq!(fill("{0} and {1}", &["a", "b"]), "a and b");
        assert_eq!(fill("{1}, {0}, {1}", &["ä", "🔥"]), "🔥, ä, 🔥");
        assert_eq!(fill("{0}", &["{1}", "no"]), "{1}");
        assert_eq!(fill("", &[]), "");
    }

    #[test]
    fn other_braces_stay() {
        for text in ["{", "{}", "{0", "{10}", "{a}", "}{", "{ä}", "a {2} b"] {
            assert_eq!(fill(text, &["x", "y"]), text);
        }
    }
}
