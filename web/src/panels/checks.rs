//! The checks before power: a look, protective conductor, insulation, ohms across the plug. Each can be left out, and
//! that is said.

use lampladder_core::family::Family;
use lampladder_core::precheck::{
    self, Class, Limit, PlugFinding, Sense, Verdict, insulation_ohms, protective_conductor_ohms,
};

use super::ladder::go_on;
use super::send;
use crate::bench::{Bench, BenchHandle, Msg};
use crate::climb::{LEADS, Move, Stand};
use crate::draft::Slot;
use crate::entry::{Entry, OVER_RANGE};
use crate::format::Numerals;
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, el, place, truth};
use crate::parts::field;

/// The instrument checks that this equipment wants.
fn wanted(bench: &Bench) -> impl Iterator<Item = Entry> + use<> {
    // Class II has no protective conductor.
    let protective = (bench.climb.class == Class::One).then_some(Entry::ProtectiveOhms);
    protective.into_iter().chain([Entry::InsulationOhms, Entry::PlugOhms])
}

/// How many are done, of how many; with the look.
fn counted(bench: &Bench) -> (usize, usize) {
    let done = wanted(bench).filter(|entry| bench.climb.number(*entry).is_some()).count();
    (done + usize::from(bench.climb.looked), wanted(bench).count() + 1)
}

/// Whether none was left out.
pub(super) fn all_done(bench: &Bench) -> bool {
    let (done, all) = counted(bench);
    done == all
}

/// The checks in a few words.
pub(super) fn checks_short(bench: &Bench) -> String {
    let (done, all) = counted(bench);
    bench.words().ladder().checks_done(done, all)
}

fn limit(bench: &Bench, entry: Entry) -> Option<Limit> {
    match entry {
        Entry::ProtectiveOhms => protective_conductor_ohms(*LEADS.get(bench.climb.lead)?).ok(),
        Entry::InsulationOhms => {
            let heats = matches!(bench.setup.plate.family(), Family::Heater);
            Some(insulation_ohms(bench.climb.class, heats))
        }
        _ => None,
    }
}

fn verdict(bench: &Bench, entry: Entry) -> Option<Verdict> {
    // A meter over its range has more than any limit.
    let reading = bench.climb.number(entry)?.min(1e12);
    limit(bench, entry)?.judge(reading).ok()
}

/// Whether a reading forbids power.
fn forbids(bench: &Bench) -> bool {
    let outside = |entry| verdict(bench, entry) == Some(Verdict::Outside);
    let shorted =
        plug(bench).is_some_and(|reading| reading.findings.first() == Some(&PlugFinding::ShortedInput));
    wanted(bench).any(outside) || shorted
}

fn plug(bench: &Bench) -> Option<precheck::PlugReading> {
    precheck::judge(bench.climb.known.plug.as_ref()?, bench.climb.number(Entry::PlugOhms)?).ok()
}

/// The checks.
pub(super) fn checks(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let texts = words.ladder();
    let climb = &bench.climb;
    let looked = button("tick", "looked-over", send(bench, Move::Looked.into()))
        .set("role", "checkbox")
        .set("aria-checked", truth(climb.looked))
        .with(el("i").set("aria-hidden", "true").text(if climb.looked { "✓" } else { "" }))
        .with(el("span").text(texts.looked));
    let class = |class: Class| Choice {
        text: texts.class_name(class).to_owned(),
        chosen: class == climb.class,
        testid: format!("class-{}", texts.class_name(class)),
        click: send(bench, Move::Class(class).into()),
    };
    let classes = choices(texts.class, Class::ALL.map(class).to_vec());
    let lead = |(index, metres): (usize, &f64)| Choice {
        text: texts.lead_name(&words.numerals.quantity(*metres, "m")),
        chosen: index == climb.lead,
        testid: format!("lead-{index}"),
        click: send(bench, Move::Lead(index).into()),
    };
    let leads = (climb.class == Class::One).then(|| {
        let all = LEADS.iter().enumerate().map(lead).collect();
        el("div").with(el("h3").text(texts.lead)).with(choices(texts.lead, all))
    });
    let protective = (climb.class == Class::One).then(|| limited(bench, Entry::ProtectiveOhms));
    let skipped: Vec<&str> = (!climb.looked)
        .then_some(texts.looked_short)
        .into_iter()
        .chain(
            wanted(bench)
                .filter(|entry| climb.number(*entry).is_none())
                .map(|entry| words.slot(Slot::Entry(entry))),
        )
        .collect();
    let skipped = (!skipped.is_empty() && climb.at <= Stand::Checks)
        .then(|| el("p").class("told").test("skipped").text(texts.skipped(&skipped.join(", "))));
    let forbidden = forbids(bench);
    let alarm =
        forbidden.then(|| el("p").class("error").set("role", "alert").test("forbidden").text(texts.forbids));
    let on = if forbidden && climb.at == Stand::Checks {
        Some(button("offer", "go-on", send(bench, Move::GoOn.into())).text(texts.all_the_same))
    } else {
        go_on(bench, Stand::Checks, true)
    };
    vec![
        el("p").class("told").text(texts.unplugged),
        looked,
        el("h3").text(texts.class),
        classes,
        el("p").class("hint").text(texts.class_means(climb.class)),
        place(leads),
        place(protective),
        limited(bench, Entry::InsulationOhms),
        across_plug(bench),
        place(alarm),
        place(skipped),
        place(on),
    ]
}

/// Ohms as a repairer says them.
fn ohms(value: f64, numerals: Numerals) -> String {
    let (scale, unit) = match value {
        v if v >= 1e6 => (1e6, "MΩ"),
        v if v >= 1e3 => (1e3, "kΩ"),
        _ => (1.0, "Ω"),
    };
    numerals.short_quantity(value / scale, unit)
}

/// A reading with its limit and what comes of it.
fn limited(bench: &BenchHandle, entry: Entry) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let Some(limit) = limit(bench, entry) else { return el("div") };
    let hint = texts.limit(limit.sense == Sense::AtLeast, &ohms(limit.value, words.numerals));
    let verdict = verdict(bench, entry).map(|verdict| {
        let within = verdict == Verdict::Within;
        said(entry, within, texts.verdict(within))
    });
    el("div")
        .class("check")
        .with(typed(bench, entry, hint))
        .with(place(verdict))
        .with(el("p").class("hint").text(texts.quoted(limit.citation, limit.standing)))
}

/// What a reading comes to; the one that forbids is an alarm.
fn said(entry: Entry, good: bool, text: impl Into<yew::AttrValue>) -> El {
    el("p")
        .class(if good { "kept" } else { "error" })
        .set("role", "status")
        .put("data-testid", format!("verdict-{}", entry.slug()))
        .text(text)
}

/// A field, with a button for a meter over its range.
fn typed(bench: &BenchHandle, entry: Entry, hint: String) -> El {
    let field = field::plain(bench, Slot::Entry(entry), hint);
    if !entry.has_over_range() {
        return field;
    }
    let msg = Msg::Type(Slot::Entry(entry), OVER_RANGE.to_owned());
    let over = button("choice", format!("over-{}", entry.slug()), send(bench, msg))
        .text(bench.words().ladder().over_range);
    el("div").class("over").with(field).with(over)
}

fn across_plug(bench: &BenchHandle) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let healthy = bench.climb.known.plug.map(|[healthy, ..]| healthy);
    let hint = healthy.map_or_else(String::new, |range| {
        let low = ohms(range.low_ohms, words.numerals);
        let high = range.high_ohms.is_finite().then(|| ohms(range.high_ohms, words.numerals));
        texts.plug_expect(&low, high.as_deref(), range.path)
    });
    let verdict = plug(bench).map(|reading| {
        let healthy = reading.findings.first() == Some(&PlugFinding::Healthy);
        let text = if reading.findings.is_empty() {
            texts.plug_between(reading.below_healthy).to_owned()
        } else {
            texts.plug_found(&reading.findings)
        };
        said(Entry::PlugOhms, healthy, text)
    });
    el("div").class("check").with(typed(bench, Entry::PlugOhms, hint)).with(place(verdict)).with(
        el("p")
            .class("hint")
            .text(texts.plug_how)
            .text(" ")
            .text(healthy.map_or("", |range| texts.plug_source(range.standing))),
    )
}
