//! The editor of one lamp: its kind, what is printed on it, and what else is known.

use lampladder_core::lamp::Fill;
use lampladder_core::quantity;
use yew::{Html, function_component, html};

use super::supply::quick;
use super::{PanelProps, send};
use crate::bench::{BenchHandle, MOST_POINTS, Msg, Refused, Unsuitable};
use crate::describe;
use crate::draft::{LampPart, Slot};
use crate::parts::choice::{Choice, choices};
use crate::parts::field::Field;
use crate::step::{STOCK_WATTS, USUAL_VOLTS};

const UNSUITABLE: [(Unsuitable, &str); 3] = [
    (Unsuitable::Led, "kind-led"),
    (Unsuitable::CompactFluorescent, "kind-compact-fluorescent"),
    (Unsuitable::CarbonFilament, "kind-carbon-filament"),
];

/// The lamp under edit.
#[function_component]
pub fn LampEditor(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let slot = |part| Slot::Lamp(bench.lamp, part);
    let field = |part, hint: &'static str, steps: bool| {
        html! { <Field bench={bench.clone()} slot={slot(part)} {hint} {steps} /> }
    };
    html! {
        <>
            { choices(words.edit.sizes, quick(bench, slot(LampPart::Watts), &STOCK_WATTS, "watts")) }
            <div class="pair">
                { field(LampPart::Watts, "", true) }
                { field(LampPart::Volts, "", true) }
            </div>
            { lamp_volts(bench) }
            <h3>{ words.edit.kind }</h3>
            { kinds(bench) }
            if let Some(Refused::Lamp(kind)) = bench.refused {
                <p class="error" role="alert" data-testid="refusal">{ (words.refusal)(kind) }</p>
            }
            { life(bench) }
            <details class="more">
                <summary>{ words.edit.lamp_more }</summary>
                { filling(bench) }
                { field(LampPart::Lumens, words.edit.optional, false) }
                { field(LampPart::ColdOhms, words.edit.optional, false) }
                { points(bench) }
            </details>
        </>
    }
}

/// Lamps of the supply's own voltage, in one tap, where this one is for another.
fn lamp_volts(bench: &BenchHandle) -> Html {
    let slot = Slot::Lamp(bench.lamp, LampPart::Volts);
    let now = quantity::parse(bench.draft.text(slot), slot.field()).ok();
    let supply = bench.setup.supply.volts();
    if now == Some(supply) {
        return Html::default();
    }
    // The two worlds of mains: a lamp from either can be in the box.
    let near = |volts: &&f64| (**volts < 150.0) == (supply < 150.0);
    let mut offered: Vec<f64> = USUAL_VOLTS.iter().filter(near).copied().collect();
    if !offered.contains(&supply) {
        offered.push(supply);
    }
    choices(bench.words().edit.usual_volts, quick(bench, slot, &offered, "lamp-volts"))
}

fn kinds(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let fill = bench.draft.lamp(bench.lamp).and_then(|lamp| lamp.fill);
    let halogen = fill == Some(Fill::Halogen);
    let mut all = vec![
        Choice {
            text: words.edit.ordinary.to_owned(),
            chosen: !halogen,
            testid: String::from("kind-ordinary"),
            onclick: send(bench, Msg::Fill(None)),
        },
        Choice {
            text: (words.fill)(Some(Fill::Halogen)).to_owned(),
            chosen: halogen,
            testid: String::from("kind-halogen"),
            onclick: send(bench, Msg::Fill(Some(Fill::Halogen))),
        },
    ];
    all.extend(UNSUITABLE.map(|(kind, testid)| Choice {
        text: (words.unsuitable)(kind).to_owned(),
        chosen: false,
        testid: testid.to_owned(),
        onclick: send(bench, Msg::Refuse(Refused::Lamp(kind))),
    }));
    choices(words.edit.kind, all)
}

/// What the operating point does to this lamp.
fn life(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition);
    let Some(lamp) = shown.and_then(|shown| shown.lamps.get(bench.lamp.group)?.get(bench.lamp.lamp)) else {
        return Html::default();
    };
    if bench.is_stale() {
        return Html::default();
    }
    html! {
        <p class="hint" data-testid="lamp-life">
            { words.table.life }{ " " }{ (words.if_condition)(bench.condition) }{ ": " }
            <b>{ describe::life(lamp.life, words, false) }</b>
        </p>
    }
}

fn filling(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let now = bench.draft.lamp(bench.lamp).and_then(|lamp| lamp.fill);
    if now == Some(Fill::Halogen) {
        return Html::default();
    }
    let choice = |(fill, testid): (Option<Fill>, &str)| Choice {
        text: (words.fill)(fill).to_owned(),
        chosen: now == fill,
        testid: testid.to_owned(),
        onclick: send(bench, Msg::Fill(fill)),
    };
    let all = [(None, "fill-auto"), (Some(Fill::Vacuum), "fill-vacuum"), (Some(Fill::Gas), "fill-gas")];
    html! {
        <>
            <h3>{ words.edit.filling }</h3>
            { choices(words.edit.filling, all.map(choice).to_vec()) }
        </>
    }
}

fn points(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let edit = words.edit;
    let count = bench.draft.lamp(bench.lamp).map_or(0, |lamp| lamp.points.len());
    let field =
        |part| html! { <Field bench={bench.clone()} slot={Slot::Lamp(bench.lamp, part)} steps={false} /> };
    html! {
        <>
            <h3>{ edit.points }</h3>
            { for (0..count).map(|index| html! {
                <div class="pair point">
                    { field(LampPart::PointVolts(index)) }
                    { field(LampPart::PointAmps(index)) }
                    <button type="button" class="close" aria-label={(edit.remove_point)(index + 1)}
                        data-testid={format!("remove-point-{index}")}
                        onclick={send(bench, Msg::RemovePoint(index))}>{ "×" }</button>
                </div>
            }) }
            if count < MOST_POINTS {
                <button type="button" class="offer" data-testid="add-point" onclick={send(bench, Msg::AddPoint)}>
                    { edit.add_point }
                </button>
            }
        </>
    }
}
