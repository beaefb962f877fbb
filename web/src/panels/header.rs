//! The header: the name, the light, the cautions; and the reminder that never leaves.

use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::bench::{Msg, Theme};
use crate::browser::theme;
use crate::parts::picture;

/// Id of the button that brings the cautions back.
pub const CAUTIONS_BUTTON: &str = "open-cautions";

/// The header.
#[function_component]
pub fn Header(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let next = match bench.theme {
        Theme::Auto => Theme::Paper,
        Theme::Paper => Theme::Dusk,
        Theme::Dusk => Theme::Auto,
    };
    let light = (words.theme)(bench.theme);
    html! {
        <header class="top">
            <h1 class="wordmark">{ picture::mark() }<span>{ "lamp" }<i>{ "ladder" }</i></span></h1>
            <button type="button" class="round" data-testid="theme" data-value={theme::name(bench.theme)}
                aria-label={light} title={light} onclick={send(bench, Msg::Light(next))}>
                { picture::light(bench.theme) }
            </button>
            <button type="button" class="warn" id={CAUTIONS_BUTTON} data-testid="open-cautions"
                onclick={send(bench, Msg::Cautions)}>
                { picture::caution() }{ words.cautions }
            </button>
            <p class="reminder" data-testid="reminder">{ words.reminder }</p>
        </header>
    }
}
