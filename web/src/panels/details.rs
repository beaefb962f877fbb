//! Everything that the comparison knows, in figures: bands, power, each lamp's filament and life, assumptions.

use lampladder_core::condition::{Condition, OVERLOAD};
use lampladder_core::expect::LampShown;

use super::comparison::other_conditions;
use super::points::points;
use crate::bench::{Bench, BenchHandle};
use crate::describe;
use crate::draft::Place;
use crate::parts::el::{El, el};
use crate::parts::table::{banded, row_head, table, whole};

/// The details.
pub fn details(bench: &BenchHandle) -> El {
    let words = bench.words();
    let heads = &words.table;
    let several = bench.setup.bank.lamp_count() > 1;
    let conditions: Vec<Condition> = bench.answers.asked().collect();
    let mut lamp_heads = vec![heads.condition];
    if several {
        lamp_heads.push(heads.lamp);
    }
    lamp_heads.extend([heads.volts, heads.glow, heads.kelvin, heads.short_life]);
    let lines = words.assumptions(&describe::assumed(&bench.setup, words)).into_iter();
    let lines = lines.chain([words.band_note.to_owned(), words.life_source.to_owned()]);
    el("section")
        .class("details")
        .set("aria-labelledby", "details-title")
        .maybe(points(bench))
        .maybe(other_conditions(bench))
        .with(el("h2").set("id", "details-title").text(heads.details))
        .with(table(
            &[heads.condition, heads.amps, heads.short_bank_volts, heads.short_load_volts, heads.load_watts],
            conditions.iter().map(|condition| row(bench, *condition)).collect(),
        ))
        .with(el("h2").text(heads.every_lamp))
        .with(table(
            &lamp_heads,
            conditions.iter().flat_map(|condition| lamp_rows(bench, *condition, several)).collect(),
        ))
        .with(el("h2").text(heads.assumed))
        .with(el("ul").each(lines.map(|line| el("li").text(line))))
}

fn row(bench: &Bench, condition: Condition) -> El {
    let words = bench.words();
    let shown = bench.answers.shown(condition);
    let means = words.condition_means(condition, &words.numerals.plain(OVERLOAD));
    el("tr")
        .with(row_head(words.condition(condition)).with(el("small").text(means)))
        .with(banded(shown.map(|shown| &shown.amps), "A", words))
        .with(banded(shown.map(|shown| &shown.bank_volts), "V", words))
        .with(banded(shown.map(|shown| &shown.load_volts), "V", words))
        .with(banded(shown.map(|shown| &shown.load_watts), "W", words))
}

fn lamp_rows(bench: &Bench, condition: Condition, several: bool) -> Vec<El> {
    let words = bench.words();
    let Some(shown) = bench.answers.shown(condition) else { return Vec::new() };
    let row = |place: Place, lamp: &LampShown| {
        let named = several.then(|| el("td").text(describe::lamp(&bench.setup, place, words)));
        let glow = words.glow_range(lamp.dimmest.word, lamp.brightest.word);
        el("tr")
            .with(row_head(words.condition(condition)))
            .maybe(named)
            .with(whole(words.numerals.fixed(lamp.state.volts, 0) + "\u{a0}V"))
            .with(el("td").text(glow))
            .with(whole(words.numerals.bare_range(&lamp.kelvin, "K")))
            .with(whole(describe::life(lamp.life, words, true)).test("life"))
    };
    let mut rows = Vec::new();
    for (group, lamps) in shown.lamps.iter().enumerate() {
        rows.extend(lamps.iter().enumerate().map(|(lamp, shown)| row(Place { group, lamp }, shown)));
    }
    rows
}
