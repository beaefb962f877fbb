//! The frame around an editor: a sheet over the page on a phone, a panel beside the loop on a wide screen. Its head
//! keeps the answer in view while a number is typed.

use web_sys::Element;
use yew::{Html, Properties, function_component, use_effect_with, use_node_ref};

use super::bank::bank_editor;
use super::equipment::equipment_editor;
use super::send;
use super::supply::supply_editor;
use crate::answers::brightest;
use crate::bench::{BenchHandle, Msg, Part};
use crate::browser::dialog::Opened;
use crate::parts::el::{El, button, el};
use crate::parts::well::{Filament, Well, lone};

/// What the sheet needs.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct SheetProps {
    /// The state.
    pub bench: BenchHandle,
}

/// The sheet; shown where a part is open.
#[function_component]
pub fn Sheet(props: &SheetProps) -> Html {
    let bench = &props.bench;
    let node = use_node_ref();
    {
        let (node, dispatcher) = (node.clone(), bench.dispatcher());
        use_effect_with(bench.open, move |part| {
            let close = move || dispatcher.dispatch(Msg::Close);
            let opened = part.and_then(|_| Opened::new(&node.cast::<Element>()?, close));
            move || drop(opened)
        });
    }
    let Some(part) = bench.open else { return Html::default() };
    let words = bench.words();
    let title = el("h2").set("id", "sheet-title").set("tabindex", "-1").text(words.part(part));
    let done = button("done", "done", send(bench, Msg::Close)).text(words.done);
    let body = el("div").class("sheet-body").each(match part {
        Part::Supply => supply_editor(bench),
        Part::Bank => bank_editor(bench),
        Part::Equipment => equipment_editor(bench),
    });
    el("dialog")
        .at(node)
        .class("sheet")
        .set("aria-labelledby", "sheet-title")
        .test("sheet")
        .with(el("div").class("sheet-head").with(title).with(answer(bench)).with(done))
        .with(body)
        .html()
}

const SMALL: Well = Well { x: 0.0, y: 0.0, width: 44.0, height: 36.0 };

/// The answer in small.
fn answer(bench: &BenchHandle) -> El {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition);
    let lamp = shown.and_then(brightest);
    let filament = lamp.map_or(Filament::Unknown, |(_, lamp)| Filament::Glowing(lamp.glow));
    let amps = shown.map_or_else(|| words.none.to_owned(), |shown| words.numerals.value(&shown.amps, "A"));
    let (class, remark) = if bench.is_stale() {
        ("answer is-stale", words.stale_mark)
    } else {
        ("answer", words.if_condition(bench.condition))
    };
    el("p")
        .class(class)
        .with(lone("sheet", "0 0 44 36", SMALL, filament))
        .with(el("span").with(el("b").text(amps)).with(el("small").text(remark)))
}
