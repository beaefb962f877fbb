//! One rung: how its bank is wired, what healthy equipment shows, why it stands here, when to go on and when to stop.

use lampladder_core::glow::Glow;
use lampladder_core::ladder::{GoOn, Stop};

use super::bank_drawing::Drawn;
use super::ladder::go_on;
use super::send;
use crate::bench::{Bench, BenchHandle, Msg, Tab};
use crate::climb::{Move, Stand};
use crate::describe;
use crate::draft::Place;
use crate::parts::el::{El, button, el, place};
use crate::parts::well::Filament;
use crate::reckoner::ladder::Rung;
use crate::words::Words;
use crate::words::ladder::Expected;

fn known(bench: &Bench, index: usize) -> Option<&Rung> {
    bench.climb.rungs()?.rungs.get(index)
}

/// What healthy equipment shows, where it settles.
pub(super) fn expected(rung: &Rung, words: &Words) -> Option<Expected> {
    let shown = rung.shown.as_ref()?;
    let GoOn::Between { least, most } = rung.signs.go_on else { return None };
    Some(Expected {
        glow: words.glow_range(least.glow, most.glow),
        amps: words.numerals.range(&shown.amps, "A"),
        bank_volts: words.numerals.range(&shown.bank_volts, "V"),
        load_volts: words.numerals.range(&shown.load_volts, "V"),
    })
}

/// The rung in a few words: its bank, and what shows.
pub(super) fn rung_short(bench: &Bench, index: usize) -> String {
    let words = bench.words();
    let (Some(rung), Some(groups)) = (known(bench, index), bench.rung_groups(index)) else {
        return String::new();
    };
    let bank = describe::lamps(&groups, words);
    match expected(rung, words) {
        Some(expected) => words.ladder().expected_short(&bank, &expected),
        None => bank,
    }
}

/// The rung.
pub(super) fn rung(bench: &BenchHandle, index: usize) -> Vec<El> {
    let words = bench.words();
    let texts = words.ladder();
    let (Some(rung), Some(groups)) = (known(bench, index), bench.rung_groups(index)) else {
        return Vec::new();
    };
    let filament = |at: Place| {
        let lamp = groups.get(at.group).and_then(|group| group.get(at.lamp));
        let kelvin = rung.shown.as_ref().and_then(|shown| shown.kelvins.get(at.group)?.get(at.lamp));
        match (lamp, kelvin) {
            (Some(lamp), Some(kelvin)) => Filament::Glowing(Glow::at(*kelvin, lamp.rated_kelvin())),
            _ => Filament::Unknown,
        }
    };
    let drawn = Drawn {
        groups: &groups,
        filament: &filament,
        name: &format!("rung-{index}"),
        numerals: words.numerals,
    };
    let line =
        |head: &'static str, text: String| el("div").with(el("dt").text(head)).with(el("dd").text(text));
    let healthy = expected(rung, words).map(|expected| line(texts.if_healthy, texts.expected(&expected)));
    let short = words.numerals.about(rung.short_amps, "A");
    let signs = &rung.signs;
    let fault = signs.stop.as_ref().map_or("", |stop| words.if_condition(stop.fault));
    let stop = texts.stop_if(signs.stop.as_ref(), &levels(&signs.go_on, signs.stop.as_ref(), words), fault);
    let names: Vec<&str> = signs.hidden.iter().map(|fault| words.condition(*fault)).collect();
    let hidden = (!names.is_empty()).then(|| el("p").class("hint").text(texts.hidden(&names)));
    let lines = el("dl")
        .class("signs")
        .maybe(healthy)
        .with(line(texts.go_on_when, texts.go_on_if(&signs.go_on)).class("sign-go"))
        .with(line(texts.stop_when, stop).class("sign-stop"));
    let last = bench.climb.rungs().is_some_and(|plan| index + 1 == plan.rungs.len());
    let falls_short = bench.climb.rungs().and_then(|plan| plan.falls_short).filter(|_| last);
    let falls_short = falls_short.map(|share| {
        el("p").class("told").test("falls-short").text(texts.falls_short(&words.numerals.percent(share)))
    });
    let used = if bench.is_in_loop(index) {
        el("div")
            .class("in-loop")
            .with(el("span").test("in-loop").text(texts.in_loop))
            .with(button("change", "to-readings", send(bench, Msg::Go(Tab::Seen))).text(texts.to_readings))
    } else {
        button("offer", format!("use-bank-{index}"), send(bench, Move::Use(index).into()))
            .text(texts.use_bank)
    };
    let behind = bench.climb.at > Stand::Rung(index);
    let back = behind.then(|| {
        button("offer", format!("back-{index}"), send(bench, Move::Back(Stand::Rung(index)).into()))
            .text(texts.back_here)
    });
    vec![
        drawn.alone(),
        used,
        lines,
        el("p").class("why").text(texts.why(&rung.reason, &short)),
        place(hidden),
        place(falls_short),
        place(go_on(bench, Stand::Rung(index), true)),
        place(back),
    ]
}

/// From where on a fault shows: what tells it from healthy equipment. A limit has no band of its own; two digits are
/// what a meter in a hurry gives.
fn levels(go_on: &GoOn, stop: Option<&Stop>, words: &Words) -> Vec<String> {
    let Some(from) = stop.map(|stop| stop.from) else { return Vec::new() };
    let amps = words.numerals.about(from.amps, "A");
    let volts = words.numerals.about(from.bank_volts, "V");
    let mut all = vec![words.ladder().across_lamps(&volts)];
    let most = if let GoOn::Between { most, .. } = go_on { Some(most) } else { None };
    // What healthy equipment may show as well is no sign.
    if most.is_none_or(|most| words.numerals.about(most.amps, "A") != amps) {
        all.push(amps);
    }
    if most.is_none_or(|most| from.glow > most.glow) {
        all.push(words.glow(from.glow).to_owned());
    }
    all
}

/// The bare mains.
pub(super) fn mains(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let last = bench.climb.rungs().and_then(|plan| plan.rungs.last());
    let last = last.map_or_else(|| words.none.to_owned(), |rung| words.numerals.about(rung.short_amps, "A"));
    let rated = words.numerals.about(bench.setup.plate.rated_amps(), "A");
    let means = words.ladder().mains_means(&rated, &last);
    vec![el("p").class("told").text(means), place(go_on(bench, Stand::Mains, true))]
}
