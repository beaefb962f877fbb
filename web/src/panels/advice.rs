//! The one sentence to act on, what it assumes, and the cautions about the lamps themselves.

use lampladder_core::band::Band;
use lampladder_core::condition::Condition;
use lampladder_core::family::{Unsuitable, Warning};

use crate::advice::{Advice, Caution, advice, cautions};
use crate::bench::Bench;
use crate::describe;
use crate::parts::el::{El, el};

/// The sentence.
pub fn advice_panel(bench: &Bench) -> El {
    let words = bench.words();
    let (main, rest) = sentence(bench);
    let line = |class, testid, text: String| el("p").class(class).test(testid).text(text);
    let stale = bench.is_stale().then(|| line("stale", "stale-note", words.stale(&wrong_fields(bench))));
    let overdriven = cautions(&bench.setup, &bench.answers)
        .into_iter()
        .map(|caution| line("caution", "lamp-caution", caution_text(bench, caution)));
    let plate = &bench.setup.plate;
    let too_powerful = plate
        .is_too_powerful()
        .then(|| line("caution", "too-powerful", words.refuse_equipment(Unsuitable::TooPowerful).to_owned()));
    // The others are in the equipment's editor, or are the sentence itself when they come true.
    let first = plate
        .family()
        .warnings()
        .iter()
        .filter(|warning| matches!(warning, Warning::LiveChassis | Warning::TubeVoltage))
        .map(|warning| line("first", "warning", words.warning(*warning).to_owned()));
    el("section")
        .class("advice")
        .set("aria-live", "polite")
        .test("advice")
        .maybe(stale)
        .maybe(too_powerful)
        .each(overdriven)
        .with(el("p").with(el("b").text(main)).text(" ").text(rest))
        .each(first)
        .with(line("assumes", "assumes", words.assumes(&describe::assumed(&bench.setup, words))))
}

/// Names of the fields that are wrong, each once.
pub fn wrong_fields(bench: &Bench) -> String {
    let mut names: Vec<&str> = Vec::new();
    for (slot, _) in &bench.faults {
        let name = bench.words().slot(*slot);
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
            (words.burns_out(&describe::lamp(&bench.setup, place, words), condition), String::new())
        }
        Advice::Pulses => {
            let period =
                bench.pulse(Condition::Healthy).map(|pulse| words.numerals.duration(pulse.period_seconds));
            (words.pulses(period.as_deref()), String::new())
        }
        Advice::Stands { glow } => {
            let glow = words.glow_range(glow.0, glow.1);
            (words.stands(&glow), words.larger.to_owned())
        }
        Advice::LooksShorted => (words.looks_shorted.to_owned(), words.larger.to_owned()),
        Advice::DoesNotStart => (words.does_not_start.to_owned(), String::new()),
        Advice::HardToTell => (words.hard_to_tell.to_owned(), String::new()),
        Advice::Watch { glow, limit_amps, brighter } => {
            let amps = bench.answers.shown(Condition::Healthy).map(|shown| shown.amps);
            let amps_text = amps.map_or_else(String::new, |band| words.numerals.value(&band, "A"));
            let glow = words.glow_range(glow.0, glow.1);
            let off = if let Some(word) = brighter {
                words.off_if_brighter(word)
            } else {
                let half = amps.map_or(0.0, |band| band.high - band.value);
                let limit = Band { value: limit_amps, low: limit_amps - half, high: limit_amps + half };
                words.off_if_more(&words.numerals.value(&limit, "A"))
            };
            (words.expect(&glow, &amps_text), off)
        }
    }
}

fn caution_text(bench: &Bench, caution: Caution) -> String {
    let words = bench.words();
    let Caution::OverRated { place, condition, share, life } = caution;
    let lamp = describe::lamp(&bench.setup, place, words);
    let life = describe::life(life, words, false);
    words.over_rated(&lamp, condition, &words.numerals.percent(share), &life)
}
