//! The bank's editor: the lamps as they are wired, and the one under edit.

use lampladder_core::bank::Bank;
use yew::{Html, function_component, html};

use super::lamp::LampEditor;
use super::{PanelProps, send};
use crate::bench::{BenchHandle, Msg};
use crate::draft::{Place, Slot};
use crate::parts::well::{Filament, Well, well};

const SMALL: Well = Well { x: 0.0, y: 0.0, width: 52.0, height: 34.0 };

/// The lamps.
#[function_component]
pub fn BankEditor(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let edit = words.edit;
    let count = bench.draft.lamp_count();
    let full = count >= Bank::MOST_LAMPS;
    html! {
        <>
            <div class="chain" role="group" aria-label={edit.as_wired}>
                { for bench.draft.groups.iter().enumerate().map(|(group, lamps)| html! {
                    <div class="chain-group">
                        { for (0..lamps.len()).map(|lamp| lamp_button(bench, Place { group, lamp })) }
                    </div>
                }) }
            </div>
            <div class="actions">
                <button type="button" data-testid="add-parallel" disabled={full} onclick={send(bench, Msg::AddParallel)}>
                    { sign("M4 7 H20 M4 17 H20 M4 7 V17 M20 7 V17 M1 12 H4 M20 12 H23") }{ edit.add_parallel }
                </button>
                <button type="button" data-testid="add-series" disabled={full} onclick={send(bench, Msg::AddSeries)}>
                    { sign("M1 12 H4 M10 12 H14 M20 12 H23 M4 8 h6 v8 h-6 z M14 8 h6 v8 h-6 z") }{ edit.add_series }
                </button>
                <button type="button" data-testid="remove-lamp" disabled={count < 2} onclick={send(bench, Msg::Remove)}>
                    { sign("M5 12 H19") }{ edit.remove }
                </button>
            </div>
            if full { <p class="hint">{ edit.full }</p> }
            <LampEditor bench={bench.clone()} />
        </>
    }
}

fn sign(path: &'static str) -> Html {
    html! {
        <svg class="sign" viewBox="0 0 24 24" aria-hidden="true" focusable="false">
            <path class="drawing" d={path} />
        </svg>
    }
}

fn lamp_button(bench: &BenchHandle, place: Place) -> Html {
    let words = bench.words();
    let Some(lamp) = bench.draft.lamp(place) else { return Html::default() };
    // The drawing is of the last valid set-up, whose bank may be another one.
    let same = bench.setup.bank.groups().len() == bench.draft.groups.len();
    let state = bench
        .answers
        .shown(bench.condition)
        .filter(|_| same)
        .and_then(|shown| shown.lamps.get(place.group)?.get(place.lamp));
    let filament = state.map_or(Filament::Unknown, |lamp| Filament::Glowing(lamp.glow));
    let wrong = bench.faults.iter().any(|(slot, _)| matches!(slot, Slot::Lamp(other, _) if *other == place));
    let rating = format!("{}\u{a0}W", lamp.watts.trim().trim_end_matches(['W', 'w']).trim_end());
    let chosen = bench.lamp == place;
    html! {
        <button type="button" class={if wrong { "bulb is-wrong" } else { "bulb" }}
            aria-pressed={if chosen { "true" } else { "false" }}
            aria-label={(words.lamp)(place, false, &rating)}
            data-testid={format!("lamp-{}-{}", place.group, place.lamp)} onclick={send(bench, Msg::Choose(place))}>
            <svg viewBox="0 0 52 34" aria-hidden="true" focusable="false">
                { well(&format!("edit-{}-{}", place.group, place.lamp), SMALL, filament) }
            </svg>
            <span>{ rating }{ if wrong { " !" } else { "" } }</span>
        </button>
    }
}
