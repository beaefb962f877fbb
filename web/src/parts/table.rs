//! Tables of figures.

use lampladder_core::band::Band;

use super::el::{El, el};
use crate::words::Words;

/// A table under its column heads, in a frame of its own where it is too wide.
pub fn table(heads: &[&'static str], rows: Vec<El>) -> El {
    // A corner without a text heads nothing.
    let head =
        |text: &'static str| if text.is_empty() { el("td") } else { el("th").set("scope", "col").text(text) };
    let head = el("tr").each(heads.iter().map(|text| head(text)));
    let table = el("table").with(el("thead").with(head)).with(el("tbody").each(rows));
    // A keyboard reaches what can be scrolled.
    el("div").class("scroll").set("tabindex", "0").with(table)
}

/// The head of a row.
pub fn row_head(text: impl Into<yew::AttrValue>) -> El {
    el("th").set("scope", "row").text(text)
}

/// A value over its band; a dash where there is none.
pub fn banded(band: Option<&Band>, unit: &str, words: &Words) -> El {
    match band {
        Some(band) => el("td")
            .with(el("b").text(words.numerals.value(band, unit)))
            .with(el("small").text(words.numerals.bare_range(band, unit))),
        None => el("td").text(words.none),
    }
}

/// A text that stays on one line.
pub fn whole(text: String) -> El {
    el("td").class("whole").text(text)
}
