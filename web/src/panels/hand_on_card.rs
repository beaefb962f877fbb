//! The bench card: one page of paper with the cautions, the set-up, the rungs with boxes to fill in, and the code.

use lampladder_core::precheck::Class;

use super::hand_on_code::drawn;
use super::rung::expected;
use crate::bench::{Bench, BenchHandle};
use crate::describe;
use crate::draft::Slot;
use crate::entry::Entry;
use crate::parts::el::{El, el};
use crate::reckoner::links::Code;

/// The card.
pub(super) fn card(bench: &BenchHandle, code: Option<&Code>) -> El {
    let words = bench.words();
    let texts = &words.hand_on().card_words;
    let cautions = el("ul").each(texts.caution.iter().map(|text| el("li").text(*text)));
    let assumes = words.assumes(&describe::assumed(&bench.setup, words));
    let left = el("div").with(el("p").text(texts.notes)).with(el("p").class("card-assumes").text(assumes));
    let code = code.map(|code| {
        el("div")
            .class("card-code")
            .with(drawn(code, words.hand_on().code_means))
            .with(el("p").text(texts.scan))
    });
    el("div")
        .class("card")
        .test("card")
        .with(el("h3").text(texts.title))
        .with(cautions)
        .with(el("p").class("card-for").text(equipment(bench)))
        .with(el("p").class("card-checks").with(el("b").text(texts.checks)).each(boxes(bench)))
        .with(rungs(bench))
        .with(el("div").class("card-foot").with(left).maybe(code))
}

fn equipment(bench: &Bench) -> String {
    let words = bench.words();
    let setup = &bench.setup;
    let family = words.family(setup.plate.family()).name;
    let volts = words.numerals.quantity(setup.plate.volts(), "V");
    let with = [family, &describe::size(setup, words), &volts, &describe::supply(setup, words)];
    crate::words::fill(words.hand_on().card_words.equipment, &with)
}

/// The checks before power, to be filled in.
fn boxes(bench: &Bench) -> Vec<El> {
    let words = bench.words();
    let protective = (bench.climb.class == Class::One).then_some(Entry::ProtectiveOhms);
    let measured = protective.into_iter().chain([Entry::InsulationOhms, Entry::PlugOhms]);
    let name = |entry: Entry| words.slot(Slot::Entry(entry));
    let tick = el("span").class("card-tick").text(words.hand_on().card_words.looked);
    let fields = measured.map(|entry| el("span").class("card-box").text(name(entry)).with(el("i").text("Ω")));
    core::iter::once(tick).chain(fields).collect()
}

/// The rungs with what healthy equipment shows, and the bare mains.
fn rungs(bench: &Bench) -> El {
    let words = bench.words();
    let texts = &words.hand_on().card_words;
    let cell = |text: String| el("td").text(text);
    let empty = || el("td").class("card-empty");
    let head = el("tr").each(texts.head.iter().map(|text| el("th").set("scope", "col").text(*text)));
    let row = |index: usize| {
        let rung = bench.climb.rungs()?.rungs.get(index)?;
        let lamps = describe::lamps(&bench.rung_groups(index)?, words);
        let none = || words.none.to_owned();
        let shown = expected(rung, words);
        let (glow, volts, amps) = shown
            .map_or_else(|| (none(), none(), none()), |shown| (shown.glow, shown.bank_volts, shown.amps));
        let stop =
            rung.signs.stop.as_ref().map_or_else(none, |stop| words.numerals.about(stop.from.amps, "A"));
        Some(
            el("tr")
                .with(el("th").set("scope", "row").text((index + 1).to_string()))
                .each([lamps, glow, volts, amps, stop].map(cell))
                .each([empty(), empty(), empty()]),
        )
    };
    let count = bench.climb.rungs().map_or(0, |plan| plan.rungs.len());
    let rated = words.numerals.about(bench.setup.plate.rated_amps(), "A");
    let dash = || cell(words.none.to_owned());
    let mains = el("tr")
        .with(el("th").set("scope", "row").text("="))
        .with(cell(texts.mains.to_owned()))
        .with(dash())
        .with(dash())
        .with(cell(rated))
        .with(dash())
        .each([empty(), empty(), empty()]);
    el("table").with(el("thead").with(head)).with(el("tbody").each((0..count).filter_map(row)).with(mains))
}
