//! The ladder as a checklist: lamps, checks before power, rungs, the bare mains, and the wait after power.

use core::cmp::Ordering;

use lampladder_core::ladder::{LadderError, Limits, WayForward};

use super::advice::wrong_fields;
use super::after::after;
use super::checks::{all_done, checks, checks_short};
use super::drawer::{drawer, drawer_short, rating};
use super::rung::{mains, rung, rung_short};
use super::send;
use crate::bench::{Bench, BenchHandle, Msg, Part};
use crate::climb::{Move, Stand};
use crate::describe;
use crate::parts::el::{El, button, el, truth};
use crate::parts::picture::sign;
use crate::words::ladder::Progress;

/// The panel.
pub fn ladder(bench: &BenchHandle) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let (setup, climb) = (&bench.setup, &bench.climb);
    let family = setup.plate.family();
    let what = texts.for_what(
        &describe::size(setup, words),
        words.family(family).noun,
        &describe::supply(setup, words),
    );
    let change = button("change", "ladder-equipment", send(bench, Msg::Open(Part::Equipment)))
        .put("aria-label", words.change(Part::Equipment, &what))
        .text(words.edit.change);
    let stale = bench.is_stale().then(|| note("stale", words.stale(&wrong_fields(bench))));
    let restarted = climb.restarted.then(|| note("restarted", texts.restarted.to_owned()));
    let warning = |warning| el("li").text(words.warning(warning));
    let spec = *Limits::default().spec();
    let keeps = texts.keeps(
        &words.numerals.quantity(spec.holder_watts, "W"),
        &words.numerals.percent(spec.supply_rise),
        &words.numerals.plain(spec.growth),
    );
    el("section")
        .class("ladder")
        .set("aria-labelledby", "ladder-title")
        .test("ladder")
        .set("data-busy", truth(climb.known.plan.is_none() && !climb.known.lost))
        .set("data-complete", truth(climb.refused().is_some() || climb.known.missing.is_some()))
        .put("data-milliseconds", describe::full(climb.known.milliseconds))
        .with(el("h2").set("id", "ladder-title").text(texts.title))
        .with(el("p").class("ladder-for").with(el("span").text(what)).with(change))
        .maybe(stale)
        .maybe(restarted)
        .with(el("ul").class("warnings").each(family.warnings().iter().copied().map(warning)))
        .with(el("ol").class("steps").each(steps(bench)))
        .with(el("p").class("hint").text(keeps))
        .with(el("p").class("hint").text(words.assumes(&describe::assumed(setup, words))))
}

fn note(testid: &'static str, text: String) -> El {
    el("p").class("told").set("role", "status").test(testid).text(text)
}

fn steps(bench: &BenchHandle) -> Vec<El> {
    let texts = bench.words().ladder();
    let mut all = vec![
        step(bench, Stand::Lamps, drawer_short(bench), drawer),
        step(bench, Stand::Checks, checks_short(bench), checks),
    ];
    match bench.climb.rungs() {
        Some(plan) => all.extend((0..plan.rungs.len()).map(|index| {
            step(bench, Stand::Rung(index), rung_short(bench, index), |bench| rung(bench, index))
        })),
        None => all.push(step(bench, Stand::Rung(0), none_short(bench), |bench| {
            vec![refused(bench).unwrap_or_else(|| el("p").text(none_short(bench)))]
        })),
    }
    all.push(step(bench, Stand::Mains, texts.mains_short.to_owned(), mains));
    all.push(step(bench, Stand::After, texts.measure_first.to_owned(), after));
    all
}

/// Why no rung is known.
fn none_short(bench: &Bench) -> String {
    let words = bench.words();
    match bench.climb.refused() {
        _ if bench.climb.known.lost => words.reckoner_lost.to_owned(),
        Some(error) => words.ladder().refused(error),
        None => words.ladder().working.to_owned(),
    }
}

/// A step's name in sentences.
pub(super) fn name(bench: &Bench, stand: Stand) -> String {
    let texts = bench.words().ladder();
    match stand {
        Stand::Lamps => texts.lamps.to_owned(),
        Stand::Checks => texts.checks.to_owned(),
        Stand::Rung(index) => match bench.climb.rungs() {
            Some(plan) => texts.rung(index + 1, plan.rungs.len()),
            None => texts.rungs.to_owned(),
        },
        Stand::Mains => texts.mains.to_owned(),
        Stand::After => texts.after.to_owned(),
    }
}

fn step(bench: &BenchHandle, stand: Stand, short: String, body: impl FnOnce(&BenchHandle) -> Vec<El>) -> El {
    let texts = bench.words().ladder();
    let (class, progress, mark) = match stand.cmp(&bench.climb.at) {
        Ordering::Less if stand == Stand::Checks && !all_done(bench) => {
            ("step is-left", Progress::LeftOut, "M12 5 V13 M12 18 V18.5")
        }
        Ordering::Less => ("step is-done", Progress::Done, "M4.5 12.5 L10 18 L20 6.5"),
        Ordering::Equal => ("step is-now", Progress::Now, "M8 5 L18 12 L8 19 Z"),
        Ordering::Greater => ("step is-next", Progress::Next, "M6 12 H18"),
    };
    let slug = match stand {
        Stand::Lamps => String::from("step-lamps"),
        Stand::Checks => String::from("step-checks"),
        Stand::Rung(index) => format!("step-rung-{index}"),
        Stand::Mains => String::from("step-mains"),
        Stand::After => String::from("step-after"),
    };
    let open = bench.climb.open == Some(stand);
    let title = el("span").with(el("b").text(name(bench, stand))).with(el("small").text(short));
    let head = button("step-head", slug.clone(), send(bench, Move::Open(stand).into()))
        .set("aria-expanded", truth(open))
        .set("data-progress", slug_of(progress))
        .with(el("span").class("step-mark").with(sign(mark)))
        .with(title)
        .with(el("i").text(texts.progress(progress)));
    let row = el("li").class(class).key(slug).with(head);
    if open { row.with(el("div").class("step-body").each(body(bench))) } else { row }
}

const fn slug_of(progress: Progress) -> &'static str {
    match progress {
        Progress::Done => "done",
        Progress::LeftOut => "left-out",
        Progress::Now => "now",
        Progress::Next => "next",
    }
}

/// The button to the step after, where this one is due.
pub(super) fn go_on(bench: &BenchHandle, stand: Stand, ready: bool) -> Option<El> {
    if bench.climb.at != stand {
        return None;
    }
    let next = bench.climb.next(stand)?;
    let text = bench.words().ladder().go_on(&name(bench, next));
    let go_on = button("go-on", "go-on", send(bench, Move::GoOn.into())).text(text);
    Some(if ready { go_on } else { go_on.set("disabled", "disabled") })
}

/// Why there is no ladder, and the ways forward.
pub(super) fn refused(bench: &Bench) -> Option<El> {
    let texts = bench.words().ladder();
    let error = bench.climb.refused()?;
    let lamp = |way: &WayForward| match way {
        WayForward::AddLamp(lamp) => rating(bench, lamp.volts, lamp.watts),
        WayForward::AddTwin(kind) => {
            let owned = bench.drawer.stock.kinds().get(*kind);
            owned.map_or_else(String::new, |owned| {
                rating(bench, owned.lamp().rated_volts(), owned.lamp().rated_watts())
            })
        }
        _ => String::new(),
    };
    let ways = error.ways();
    let way = |way: &WayForward| el("li").text(texts.way(way, &lamp(way)));
    // What is not owned yet is no error.
    let class = if matches!(error, LadderError::EmptyStock { .. }) { "told" } else { "error" };
    Some(
        el("div")
            .class(class)
            .set("role", "status")
            .test("ladder-refused")
            .with(el("p").text(texts.refused(error)))
            .with(el("ul").each(ways.iter().map(way))),
    )
}
