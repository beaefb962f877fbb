//! The frame around an editor: a sheet over the page on a phone, a panel beside the loop on a wide screen. Its head
//! keeps the answer in view while a number is typed.

use std::cell::RefCell;
use std::rc::Rc;

use web_sys::Element;
use yew::{Html, NodeRef, function_component, html, use_effect_with, use_node_ref};

use super::bank::BankEditor;
use super::equipment::EquipmentEditor;
use super::supply::SupplyEditor;
use super::{PanelProps, send};
use crate::answers::brightest;
use crate::bench::{BenchHandle, Msg, Part};
use crate::browser::dialog::Opened;
use crate::parts::well::{Filament, Well, well};

/// The sheet; shown where a part is open.
#[function_component]
pub fn Sheet(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let node: NodeRef = use_node_ref();
    let part = bench.open;
    {
        let node = node.clone();
        let dispatcher = bench.dispatcher();
        use_effect_with(part, move |part| {
            let opened = part
                .and_then(|_| Opened::new(&node.cast::<Element>()?, move || dispatcher.dispatch(Msg::Close)));
            let opened = Rc::new(RefCell::new(opened));
            move || drop(opened.take())
        });
    }
    let Some(part) = part else { return Html::default() };
    let words = bench.words();
    let bench = bench.clone();
    html! {
        <dialog ref={node} class="sheet" aria-labelledby="sheet-title" data-testid="sheet">
            <div class="sheet-head">
                <h2 id="sheet-title" tabindex="-1">{ (words.part)(part) }</h2>
                { answer(&bench) }
                <button type="button" class="done" data-testid="done" onclick={send(&bench, Msg::Close)}>
                    { words.done }
                </button>
            </div>
            <div class="sheet-body">
                { match part {
                    Part::Supply => html! { <SupplyEditor {bench} /> },
                    Part::Bank => html! { <BankEditor {bench} /> },
                    Part::Equipment => html! { <EquipmentEditor {bench} /> },
                } }
            </div>
        </dialog>
    }
}

const SMALL: Well = Well { x: 0.0, y: 0.0, width: 44.0, height: 36.0 };

/// The answer in small.
fn answer(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition);
    let filament = match shown.and_then(brightest) {
        Some((_, lamp)) => Filament::Glowing(lamp.glow),
        None => Filament::Unknown,
    };
    html! {
        <p class={if bench.is_stale() { "answer is-stale" } else { "answer" }}>
            <svg viewBox="0 0 44 36" aria-hidden="true" focusable="false">{ well("sheet", SMALL, filament) }</svg>
            <span>
                <b>{ shown.map_or_else(|| words.none.to_owned(), |shown| words.numerals.value(&shown.amps, "A")) }</b>
                <small>
                    { if bench.is_stale() { words.stale_mark } else { (words.if_condition)(bench.condition) } }
                </small>
            </span>
        </p>
    }
}
