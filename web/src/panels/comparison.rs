//! The conditions side by side, as they would look; a tap shows one on the loop.

use lampladder_core::condition::Condition;
use lampladder_core::steady::Outcome;

use super::send;
use crate::answers::{brightest, others};
use crate::bench::{BenchHandle, Msg};
use crate::browser::window::wants_stillness;
use crate::describe::full;
use crate::flare;
use crate::parts::el::{El, button, el, truth};
use crate::parts::well::{Filament, Well, lone};

const CELL: Well = Well { x: 0.0, y: 0.0, width: 96.0, height: 54.0 };

/// Healthy, overloaded and shorted.
pub fn comparison(bench: &BenchHandle) -> El {
    cells(bench, bench.words().conditions, bench.answers.all().iter().map(|(condition, _)| *condition))
}

/// What else this kind of equipment can have.
pub fn other_conditions(bench: &BenchHandle) -> Option<El> {
    let words = bench.words();
    let all: Vec<Condition> = others(bench.setup.plate.family()).collect();
    if all.is_empty() {
        return None;
    }
    let section = el("section").class("others").with(el("h2").text(words.other_conditions));
    Some(section.with(cells(bench, words.other_conditions, all.into_iter())))
}

fn cells(bench: &BenchHandle, name: &'static str, all: impl Iterator<Item = Condition>) -> El {
    let all = all.map(|condition| cell(bench, condition));
    el("div").class("cells").set("role", "group").set("aria-label", name).each(all)
}

fn cell(bench: &BenchHandle, condition: Condition) -> El {
    let words = bench.words();
    let name = condition.name();
    let shown = bench.answers.shown(condition);
    let lamp = shown.and_then(brightest).map(|(_, lamp)| lamp);
    let flare = flare::brightest(bench, condition);
    let filament = match lamp {
        Some(lamp) => Filament::Glowing(lamp.glow),
        None if flare.is_some() => {
            flare.map_or(Filament::Unknown, |flare| flare::filament(flare, wants_stillness()))
        }
        None if bench.answers.melting(condition).is_some() => Filament::Broken,
        None => Filament::Unknown,
    };
    let word = match (lamp, bench.answers.outcome(condition)) {
        (Some(lamp), _) => words.glow(lamp.glow.word),
        (None, Some(Outcome::Hunts)) => words.pulsing,
        (None, _) if filament == Filament::Broken => words.burnt,
        (None, None) => words.coming,
        _ => words.none,
    };
    let cell = button("cell", format!("cell-{name}"), send(bench, Msg::Show(condition)))
        .set("aria-pressed", truth(bench.condition == condition))
        .with(el("strong").text(words.condition(condition)))
        .with(lone(name, "0 0 96 54", CELL, filament))
        .with(el("span").class("word").text(word));
    if let Some((glow, seconds)) = flare {
        let every = words.every(&words.numerals.duration(seconds));
        let figures = el("span").class("figures").with(el("b").text(every));
        return cell.put("data-period", full(seconds)).set("data-glow", glow.word.name()).with(figures);
    }
    let (Some(shown), Some(lamp)) = (shown, lamp) else { return cell };
    let figures = el("span")
        .class("figures")
        .with(el("b").text(words.numerals.value(&shown.bank_volts, "V")))
        .text(" ")
        .with(el("b").text(words.numerals.value(&shown.amps, "A")));
    cell.put("data-amps", full(shown.amps.value))
        .put("data-bank-volts", full(shown.bank_volts.value))
        .put("data-load-volts", full(shown.load_volts.value))
        .set("data-glow", lamp.glow.word.name())
        .with(figures)
}
