//! What has been kept: a button to keep, and a list to look through.

use lampladder_core::diagnosis::Advice;
use lampladder_core::link;
use yew::{Callback, InputEvent};

use super::seen::{Heard, share};
use super::send;
use crate::bench::{BenchHandle, Msg};
use crate::browser::{clock, input};
use crate::describe;
use crate::draft::Slot;
use crate::log::Record;
use crate::parts::el::{El, button, el};
use crate::seen::Deed;

/// What to do with the readings; `heard` is what they came to, if that is known.
pub(super) fn deeds(bench: &BenchHandle, heard: Option<&Heard>) -> El {
    let texts = bench.words().seen();
    let log = &bench.seen.log;
    let verdict = heard.and_then(Heard::verdict);
    let keep = {
        let dispatcher = bench.dispatcher();
        let click =
            Callback::from(move |_| dispatcher.dispatch(Msg::Seen(Deed::Keep(clock::since_1970(), verdict))));
        button("done keep", "keep", click).text(texts.keep)
    };
    let keep = if bench.seen.is_empty() { keep.set("disabled", "") } else { keep };
    let undo = bench
        .seen
        .can_undo()
        .then(|| button("offer", "undo", send(bench, Msg::Seen(Deed::Undo))).text(texts.undo));
    let empty = button("offer", "empty", send(bench, Msg::Seen(Deed::Empty))).text(texts.clear);
    let empty = if bench.seen.is_empty() { empty.set("disabled", "") } else { empty };
    let kept = (!log.records.is_empty()).then(|| el("p").class("hint").text(texts.kept(log.records.len())));
    let trouble =
        log.trouble.map(|trouble| el("p").class("error").test("log-trouble").text(texts.trouble(trouble)));
    let status = el("div").set("role", "status").maybe(kept).maybe(trouble);
    el("div").with(el("div").class("deeds").with(keep).with(empty).maybe(undo)).with(status)
}

/// The list of what has been kept.
pub(super) fn log(bench: &BenchHandle) -> El {
    let texts = bench.words().seen();
    let log = &bench.seen.log;
    let foreign =
        (log.foreign > 0).then(|| el("p").class("hint").test("log-foreign").text(texts.foreign(log.foreign)));
    let empty = log.records.is_empty().then(|| el("p").class("hint").text(texts.log_empty));
    el("div")
        .class("log")
        .with(el("h2").text(texts.log))
        .maybe(foreign)
        .maybe(empty)
        .with(el("ol").class("kept").test("log").each(log.records.iter().map(|record| entry(bench, record))))
}

fn entry(bench: &BenchHandle, record: &Record) -> El {
    let words = bench.words();
    let texts = words.seen();
    let id = record.id;
    let time = clock::local(id, words.tag);
    let bank = link::decode(&record.setup).map(|setup| describe::bank(&setup, words)).unwrap_or_default();
    let mut place = vec![bank];
    place.extend(record.rung.map(|rung| texts.rung(rung)));
    let mut seen: Vec<String> = record
        .numbers
        .iter()
        .map(|(kind, value)| {
            format!(
                "{} {}",
                words.slot(Slot::Reading(*kind)),
                words.numerals.short_quantity(*value, kind.field().unit())
            )
        })
        .collect();
    seen.extend(record.look.map(|word| words.glow(word).to_owned()));
    seen.extend(record.behaviour.map(|one| texts.behaved(one).to_owned()));
    let verdict = record.verdict.map_or_else(
        || String::from(texts.unjudged),
        |verdict| {
            let weight = share(bench, verdict.weight);
            let deed = match verdict.advice {
                Advice::GoOn => texts.go_on,
                Advice::Stop => texts.stop,
                _ => texts.measure_first,
            };
            format!("{deed} {}", texts.leads(words.condition(verdict.leader), &weight))
        },
    );
    let delete = button("close", "delete", send(bench, Msg::Seen(Deed::Delete(id))))
        .put("aria-label", texts.delete(&time))
        .text("×");
    let name = format!("note-{}", words.numerals.plain(id));
    let dispatcher = bench.dispatcher();
    let typed = Callback::from(move |event: InputEvent| {
        if let Some(text) = input::text(&event) {
            dispatcher.dispatch(Msg::Seen(Deed::Note(id, text)));
        }
    });
    let note = el("input")
        .put("id", name.clone())
        .set("type", "text")
        .set("autocomplete", "off")
        .set("maxlength", "200")
        .test("note-text")
        .value(record.note.clone())
        .typed(typed);
    el("li")
        .test("kept")
        .with(el("p").class("when").with(el("b").text(time)).text(" ").text(place.join(", ")).with(delete))
        .with(el("p").test("kept-readings").text(seen.join(" · ")))
        .with(el("p").class("judged").text(verdict))
        .with(el("label").put("for", name).text(texts.note))
        .with(el("span").class("typed").with(note))
}
