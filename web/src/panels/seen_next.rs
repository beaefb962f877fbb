//! What to read next, and what each outcome would mean.

use lampladder_core::band::Band;
use lampladder_core::diagnosis::{Candidate, Diagnosis, Next, Seen};
use lampladder_core::glow::GlowWord;

use super::seen::share;
use crate::bench::Bench;
use crate::parts::el::{El, el};
use crate::parts::table::{row_head, table};
use crate::words::seen::Outcomes;

/// Below this a reading is not worth the walk, bits (design value).
const WORTH: f64 = 0.05;

/// Readings that may put another condition first.
fn worthwhile(diagnosis: &Diagnosis) -> impl Iterator<Item = &Next> {
    diagnosis.next.iter().filter(|next| next.bits >= WORTH && next.meanings.len() > 1)
}

/// The next reading in a line.
pub(super) fn next_line(bench: &Bench, diagnosis: &Diagnosis) -> Option<El> {
    let texts = bench.words().seen();
    let first = worthwhile(diagnosis).next()?;
    let name = texts.candidate(first.candidate);
    Some(el("p").class("next-line").test("next-line").text(texts.next_line(name)))
}

/// The next reading with its outcomes.
pub(super) fn next(bench: &Bench, diagnosis: &Diagnosis) -> El {
    let words = bench.words();
    let texts = words.seen();
    let body = el("div").test("next").with(el("h2").text(texts.next));
    let mut all = worthwhile(diagnosis);
    let Some(first) = all.next() else { return body.with(el("p").class("hint").text(texts.nothing_next)) };
    let others: Vec<&str> = all.map(|next| texts.candidate(next.candidate)).collect();
    let rows = first.meanings.iter().map(|meaning| {
        let outcomes = outcomes(bench, first.candidate, meaning.outcome);
        el("tr")
            .with(row_head(texts.outcomes(&outcomes)))
            .with(el("td").text(texts.leads(words.condition(meaning.leader), &share(bench, meaning.weight))))
    });
    let name = el("p")
        .class("next-name")
        .set("data-next", first.candidate.name())
        .with(el("b").text(texts.candidate(first.candidate)));
    let otherwise =
        (!others.is_empty()).then(|| el("p").class("hint").text(texts.otherwise(&others.join(", "))));
    body.with(name).with(table(&[texts.if_it, texts.then], rows.collect())).maybe(otherwise)
}

fn outcomes(bench: &Bench, candidate: Candidate, seen: Seen) -> Outcomes {
    let (low, high) = match seen {
        Seen::Between { low, high } => (low, high),
        Seen::Behaves(behaviour) => return Outcomes::Is(bench.words().seen().behaves(behaviour)),
        _ => return Outcomes::Any,
    };
    let text = |value: f64| match candidate {
        Candidate::Number(kind) => border(bench, value, kind.field().unit()),
        _ => bench.words().glow(glow(bench, value)).to_owned(),
    };
    match (low > 0.0, high.is_finite()) {
        (false, false) => Outcomes::Any,
        (false, true) => Outcomes::Below(text(high)),
        (true, false) => Outcomes::Above(text(low)),
        (true, true) => Outcomes::Between(text(low), text(high)),
    }
}

/// A border between outcomes, of which a few hundredths matter to nobody.
fn border(bench: &Bench, value: f64, unit: &str) -> String {
    bench.words().numerals.value(&Band { value, low: value * 0.96, high: value * 1.04 }, unit)
}

/// The word for the brightest lamp at a temperature: it is judged by the bank's first, as in core.
fn glow(bench: &Bench, kelvin: f64) -> GlowWord {
    bench.setup.bank.groups()[0][0].glow(kelvin).word
}
