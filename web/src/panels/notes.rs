//! What is to be told once: a bad link, nothing kept.

use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::bench::{Msg, Note};
use crate::start;

/// The notes.
#[function_component]
pub fn Notes(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    html! {
        <div class="notes" role="status">
            { for bench.notes.iter().map(|note| html! {
                <p class="note" data-testid="note">
                    <span>{ (words.note)(*note) }</span>
                    if *note == Note::FromLink {
                        if let Some(kept) = start::kept() {
                            <button type="button" data-testid="use-kept" onclick={send(bench, Msg::Arrive(kept))}>
                                { words.use_kept }
                            </button>
                        }
                    }
                    <button type="button" class="close" aria-label={words.dismiss} data-testid="dismiss"
                        onclick={send(bench, Msg::Dismiss(*note))}>{ "×" }</button>
                </p>
            }) }
        </div>
    }
}
