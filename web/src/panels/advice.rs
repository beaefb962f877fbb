//! The one sentence to act on, what it assumes, and the cautions about the lamps themselves.

use lampladder_core::band::Band;
use lampladder_core::plate::Condition;
use yew::{Html, function_component, html};

use super::PanelProps;
use crate::advice::{Advice, Caution, advice, cautions};
use crate::bench::Bench;
use crate::describe;

/// The sentence.
#[function_component]
pub fn AdvicePanel(props: &PanelProps) -> Html {
    let bench = &*props.bench;
    let words = bench.words();
    let (main, rest) = sentence(bench);
    html! {
        <section class="advice" aria-live="polite" data-testid="advice">
            if bench.is_stale() {
                <p class="stale" data-testid="stale-note">{ (words.stale)(&wrong_fields(bench)) }</p>
            }
            { for cautions(&bench.setup, &bench.answers).into_iter().map(|caution| html! {
                <p class="caution" data-testid="lamp-caution">{ caution_text(bench, caution) }</p>
            }) }
            <p><b>{ main }</b>{ " " }{ rest }</p>
            <p class="assumes" data-testid="assumes">{ (words.assumes)(&describe::assumed(&bench.setup, words)) }</p>
        </section>
    }
}

/// Names of the fields that are wrong, each once.
pub fn wrong_fields(bench: &Bench) -> String {
    let mut names: Vec<&str> = Vec::new();
    for (slot, _) in &bench.faults {
        let name = (bench.words().slot)(*slot);
        if !names.contains(&name) {
            names.push(name);
        }
    }
    names.join(", ")
}

fn sentence(bench: &Bench) -> (String, String) {
    let words = bench.words();
    match advice(&bench.answers) {
        Advice::BurnsOut(place, condition) => {
            ((words.burns_out)(&describe::lamp(&bench.setup, place, words), condition), String::new())
        }
        Advice::Pulses { seconds } => {
            let band = Band { value: seconds, low: seconds * 0.7, high: seconds * 1.3 };
            ((words.pulses)(&words.numerals.value(&band, "s")), String::new())
        }
        Advice::DoesNotStart => (words.does_not_start.to_owned(), String::new()),
        Advice::HardToTell => (words.hard_to_tell.to_owned(), String::new()),
        Advice::Watch { glow, limit_amps, brighter } => {
            let amps = bench.answers.shown(Condition::Healthy).map(|shown| shown.amps);
            let amps_text = amps.map_or_else(String::new, |band| words.numerals.value(&band, "A"));
            let glow = (words.glow_range)(glow.0, glow.1);
            let off = match brighter {
                Some(word) => (words.off_if_brighter)(word),
                None => {
                    let half = amps.map_or(0.0, |band| band.high - band.value);
                    let limit = Band { value: limit_amps, low: limit_amps - half, high: limit_amps + half };
                    (words.off_if_more)(&words.numerals.value(&limit, "A"))
                }
            };
            ((words.expect)(&glow, &amps_text), off)
        }
    }
}

fn caution_text(bench: &Bench, caution: Caution) -> String {
    let words = bench.words();
    let Caution::OverRated { place, condition, share, life } = caution;
    let lamp = describe::lamp(&bench.setup, place, words);
    let life = describe::life(life, words, false);
    (words.over_rated)(&lamp, condition, &words.numerals.percent(share), &life)
}
