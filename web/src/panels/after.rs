//! After power: measure before touching, and how long a reservoir takes at the least.

use lampladder_core::precheck::{AfterPower, DISCHARGE_LIMITS, Discharge, DischargeLimit, Wait};

use super::send;
use crate::bench::{Bench, BenchHandle, Msg};
use crate::browser::window::clock;
use crate::climb::Move;
use crate::draft::Slot;
use crate::entry::Entry;
use crate::parts::el::{El, button, el, place};
use crate::parts::field;
use crate::parts::table::{row_head, table, whole};
use crate::words::Words;

/// The reservoir that is typed.
fn reservoir(bench: &Bench) -> Option<Discharge> {
    let climb = &bench.climb;
    let farads = climb.number(Entry::Farads)?;
    let bleed = climb.read(Entry::BleedOhms).ok()?;
    let volts =
        climb.read(Entry::StartVolts).ok()?.unwrap_or_else(|| Discharge::most_volts(&bench.setup.supply));
    Discharge::new(farads, bleed, volts).ok()
}

/// The wait.
pub(super) fn after(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let texts = words.ladder();
    let typed = |entry, hint: String| field::plain(bench, Slot::Entry(entry), hint);
    // Rounded up to tens of volts: it is the most that there can be.
    let most = (Discharge::most_volts(&bench.setup.supply) / 10.0).ceil() * 10.0;
    let start = texts.start_hint(&words.numerals.quantity(most, "V"));
    let waits = reservoir(bench).map(|reservoir| reservoir.after_power());
    let afresh = button("offer", "afresh", send(bench, Move::Afresh.into())).text(texts.afresh);
    vec![
        el("p").class("error").test("measure-first").text(texts.measure_first),
        el("p").class("hint").text(texts.after_means),
        typed(Entry::Farads, texts.farads_hint.to_owned()),
        typed(Entry::BleedOhms, texts.bleed_hint.to_owned()),
        typed(Entry::StartVolts, start),
        place(waits.map(|waits| waited(bench, &waits))),
        afresh,
    ]
}

/// Seconds, minutes or hours, rounded up: nobody waits too short by our rounding.
fn duration(seconds: f64, words: &Words) -> String {
    let (value, unit) = match seconds {
        s if s <= 120.0 => (s, "s"),
        s if s <= 7200.0 => (s / 60.0, "min"),
        s => (s / 3600.0, "h"),
    };
    words.numerals.quantity(value.ceil(), unit)
}

fn waited(bench: &BenchHandle, after: &AfterPower) -> El {
    let words = bench.words();
    let texts = words.ladder();
    let row = |(limit, wait): &(DischargeLimit, Wait)| {
        let wait = match wait {
            Wait::Seconds { slowest, .. } => duration(*slowest, words),
            Wait::Unknown => texts.wait_unknown.to_owned(),
        };
        let asked = texts.quoted(limit.standard, limit.standing);
        el("tr")
            .with(
                row_head(words.numerals.quantity(limit.volts, "V"))
                    .with(el("small").text(texts.place(limit.place))),
            )
            .with(whole(wait))
            .with(el("td").text(asked))
    };
    el("div")
        .test("waits")
        .with(table(&texts.wait_heads, after.waits.iter().map(row).collect()))
        .with(place(countdown(bench, after)))
}

/// Counts down to the lowest of the limits, at the tolerances' worst.
fn countdown(bench: &BenchHandle, after: &AfterPower) -> Option<El> {
    let words = bench.words();
    let texts = words.ladder();
    let lowest = DISCHARGE_LIMITS.iter().map(|limit| limit.volts).fold(f64::MAX, f64::min);
    let (_, wait) = after.waits.iter().find(|(limit, _)| limit.volts == lowest)?;
    let Wait::Seconds { slowest, .. } = *wait else { return None };
    let volts = words.numerals.quantity(lowest, "V");
    let Some(off) = bench.climb.off else {
        let dispatcher = bench.dispatcher();
        let begin = yew::Callback::from(move |_| dispatcher.dispatch(Msg::Climb(Move::Off(Some(clock())))));
        return Some(button("go-on", "power-off", begin).text(texts.power_off));
    };
    let left = slowest - (bench.climb.now - off).max(0.0) / 1000.0;
    let text =
        if left > 0.0 { texts.counting(&duration(left, words), &volts) } else { texts.counted(&volts) };
    Some(
        el("div")
            .class("count")
            .test("countdown")
            .put("data-seconds", words.numerals.fixed(left.max(0.0), 0))
            .with(el("p").set("role", "timer").with(el("b").text(text)))
            .with(el("p").class("error").text(texts.measure_first))
            .with(
                button("offer", "stop-counting", send(bench, Move::Off(None).into()))
                    .text(texts.stop_counting),
            ),
    )
}
