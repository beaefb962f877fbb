//! One of a few: a row of big buttons.

use yew::{Callback, Html, MouseEvent, html};

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
    pub onclick: Callback<MouseEvent>,
}

/// A row of choices with a name.
pub fn choices(name: &'static str, all: Vec<Choice>) -> Html {
    html! {
        <div class="choices" role="group" aria-label={name}>
            { for all.into_iter().map(|choice| html! {
                <button type="button" class="choice" aria-pressed={if choice.chosen { "true" } else { "false" }}
                    data-testid={choice.testid} onclick={choice.onclick}>{ choice.text }</button>
            }) }
        </div>
    }
}
