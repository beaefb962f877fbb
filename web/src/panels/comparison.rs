//! Healthy, overloaded and shorted side by side, as they would look; a tap shows one on the loop.

use lampladder_core::condition::Condition;
use lampladder_core::steady::Outcome;
use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::answers::brightest;
use crate::bench::{Bench, BenchHandle, Msg};
use crate::describe::full;
use crate::parts::well::{Filament, Well, well};

const CELL: Well = Well { x: 0.0, y: 0.0, width: 96.0, height: 54.0 };

/// The three cells.
#[function_component]
pub fn Comparison(props: &PanelProps) -> Html {
    let words = props.bench.words();
    html! {
        <div class="cells" role="group" aria-label={words.conditions}>
            { for props.bench.answers.all().iter().map(|(condition, _)| cell(&props.bench, *condition)) }
        </div>
    }
}

fn cell(handle: &BenchHandle, condition: Condition) -> Html {
    let bench: &Bench = handle;
    let words = bench.words();
    let name = condition.name();
    let shown = bench.answers.shown(condition);
    let lamp = shown.and_then(brightest).map(|(_, lamp)| lamp);
    let filament = match lamp {
        Some(lamp) => Filament::Glowing(lamp.glow),
        None if bench.answers.melting(condition).is_some() => Filament::Broken,
        None => Filament::Unknown,
    };
    let value = |pick: fn(&lampladder_core::expect::Shown) -> f64| shown.map(|shown| full(pick(shown)));
    html! {
        <button type="button" class="cell" data-testid={format!("cell-{name}")}
            aria-pressed={if bench.condition == condition { "true" } else { "false" }}
            data-amps={value(|shown| shown.amps.value)} data-bank-volts={value(|shown| shown.bank_volts.value)}
            data-load-volts={value(|shown| shown.load_volts.value)} data-glow={lamp.map(|lamp| lamp.glow.word.name())}
            onclick={send(handle, Msg::Show(condition))}>
            <strong>{ (words.condition)(condition) }</strong>
            <svg viewBox="0 0 96 54" aria-hidden="true" focusable="false">
                { well(&format!("cell-{name}"), CELL, filament) }
            </svg>
            if let (Some(shown), Some(lamp)) = (shown, lamp) {
                <span class="word">{ (words.glow)(lamp.glow.word) }</span>
                <span class="figures">
                    <b>{ words.numerals.value(&shown.bank_volts, "V") }</b>{ " " }
                    <b>{ words.numerals.value(&shown.amps, "A") }</b>
                </span>
            } else if filament == Filament::Broken {
                <span class="word">{ words.burnt }</span>
            } else if matches!(bench.answers.outcome(condition), Some(Outcome::Hunts { .. })) {
                <span class="word">{ words.pulsing }</span>
            } else {
                <span class="word">{ words.none }</span>
            }
        </button>
    }
}
