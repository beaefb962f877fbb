//! One of a few: a row of big buttons.

use yew::{Callback, MouseEvent};

use super::el::{El, button, el, truth};

/// One button of the row.
#[derive(Debug, Clone, PartialEq)]
pub struct Choice {
    /// Its text.
    pub text: String,
    /// Whether it is the one that stands.
    pub chosen: bool,
    /// For tests of the whole page.
    pub testid: String,
    /// What happens.
    pub click: Callback<MouseEvent>,
}

/// A row of choices with a name.
pub fn choices(name: &'static str, all: Vec<Choice>) -> El {
    let row = el("div").class("choices").set("role", "group").set("aria-label", name);
    row.each(all.into_iter().map(|choice| {
        button("choice", choice.testid, choice.click)
            .set("aria-pressed", truth(choice.chosen))
            .text(choice.text)
    }))
}
