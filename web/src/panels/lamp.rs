//! The editor of one lamp: its kind, what is printed on it, and what else is known.

use lampladder_core::lamp::Fill;
use lampladder_core::quantity;

use super::send;
use super::supply::{more, quick};
use crate::bench::{BenchHandle, MOST_POINTS, Msg, Refused, Unsuitable};
use crate::describe;
use crate::draft::{LampPart, Slot};
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, el, place};
use crate::parts::field;
use crate::step::{STOCK_WATTS, USUAL_VOLTS};

const UNSUITABLE: [(Unsuitable, &str); 3] = [
    (Unsuitable::Led, "kind-led"),
    (Unsuitable::CompactFluorescent, "kind-compact-fluorescent"),
    (Unsuitable::CarbonFilament, "kind-carbon-filament"),
];

/// The lamp under edit.
pub fn lamp_editor(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let slot = |part| Slot::Lamp(bench.lamp, part);
    let mut all = vec![
        choices(words.edit.sizes, quick(bench, slot(LampPart::Watts), &STOCK_WATTS, "watts")),
        el("div")
            .class("pair")
            .with(field::stepped(bench, slot(LampPart::Watts)))
            .with(field::stepped(bench, slot(LampPart::Volts))),
    ];
    all.push(place(lamp_volts(bench)));
    all.push(el("h3").text(words.edit.kind));
    all.push(kinds(bench));
    let refused = match bench.refused {
        Some(Refused::Lamp(kind)) => Some(refusal(words.refusal(kind))),
        _ => None,
    };
    all.push(place(refused));
    all.push(place(life(bench)));
    let known = more(words.edit.lamp_more).maybe(filling(bench));
    let known = known
        .with(field::plain(bench, slot(LampPart::Lumens), words.edit.optional))
        .with(field::plain(bench, slot(LampPart::ColdOhms), words.edit.optional));
    all.push(points(bench, known));
    all
}

/// Why something was refused.
pub fn refusal(text: &'static str) -> El {
    el("p").class("error").set("role", "alert").test("refusal").text(text)
}

/// Lamps of the supply's own voltage, in one tap, where this one is for another.
fn lamp_volts(bench: &BenchHandle) -> Option<El> {
    let slot = Slot::Lamp(bench.lamp, LampPart::Volts);
    let now = quantity::parse(bench.draft.text(slot), slot.field()).ok();
    let supply = bench.setup.supply.volts();
    if now == Some(supply) {
        return None;
    }
    // The two worlds of mains: a lamp from either can be in the box.
    let near = |volts: &f64| (*volts < 150.0) == (supply < 150.0);
    let mut offered: Vec<f64> = USUAL_VOLTS.into_iter().filter(near).collect();
    if !offered.contains(&supply) {
        offered.push(supply);
    }
    Some(choices(bench.words().edit.usual_volts, quick(bench, slot, &offered, "lamp-volts")))
}

pub(super) fn kinds(bench: &BenchHandle) -> El {
    let words = bench.words();
    let fill = bench.draft.lamp(bench.lamp).and_then(|lamp| lamp.fill);
    let halogen = fill == Some(Fill::Halogen);
    let choice = |text: &str, chosen: bool, testid: &str, msg: Msg| Choice {
        text: text.to_owned(),
        chosen,
        testid: testid.to_owned(),
        click: send(bench, msg),
    };
    let mut all = vec![
        choice(words.edit.ordinary, !halogen, "kind-ordinary", Msg::Fill(None)),
        choice(words.fill(Some(Fill::Halogen)), halogen, "kind-halogen", Msg::Fill(Some(Fill::Halogen))),
    ];
    all.extend(UNSUITABLE.map(|(kind, testid)| {
        choice(words.unsuitable(kind), false, testid, Msg::Refuse(Refused::Lamp(kind)))
    }));
    choices(words.edit.kind, all)
}

/// What the operating point does to this lamp.
fn life(bench: &BenchHandle) -> Option<El> {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition).filter(|_| !bench.is_stale())?;
    let lamp = shown.lamps.get(bench.lamp.group)?.get(bench.lamp.lamp)?;
    Some(
        el("p")
            .class("hint")
            .test("lamp-life")
            .text(words.table.life)
            .text(" ")
            .text(words.if_condition(bench.condition))
            .text(": ")
            .with(el("b").text(describe::life(lamp.life, words, false))),
    )
}

pub(super) fn filling(bench: &BenchHandle) -> Option<El> {
    let words = bench.words();
    let now = bench.draft.lamp(bench.lamp).and_then(|lamp| lamp.fill);
    if now == Some(Fill::Halogen) {
        return None;
    }
    let choice = |(fill, testid): (Option<Fill>, &str)| Choice {
        text: words.fill(fill).to_owned(),
        chosen: now == fill,
        testid: testid.to_owned(),
        click: send(bench, Msg::Fill(fill)),
    };
    let all = [(None, "fill-auto"), (Some(Fill::Vacuum), "fill-vacuum"), (Some(Fill::Gas), "fill-gas")];
    let name = el("h3").text(words.edit.filling);
    Some(el("div").with(name).with(choices(words.edit.filling, all.map(choice).to_vec())))
}

pub(super) fn points(bench: &BenchHandle, known: El) -> El {
    let edit = &bench.words().edit;
    let count = bench.draft.lamp(bench.lamp).map_or(0, |lamp| lamp.points.len());
    let point = |index| {
        let typed = |part| field::plain(bench, Slot::Lamp(bench.lamp, part), "");
        let remove = button("close", format!("remove-point-{index}"), send(bench, Msg::RemovePoint(index)))
            .put("aria-label", edit.remove_point(index + 1))
            .text("×");
        el("div")
            .class("pair point")
            .with(typed(LampPart::PointVolts(index)))
            .with(typed(LampPart::PointAmps(index)))
            .with(remove)
    };
    let add = || button("offer", "add-point", send(bench, Msg::AddPoint)).text(edit.add_point);
    known.with(el("h3").text(edit.points)).each((0..count).map(point)).maybe((count < MOST_POINTS).then(add))
}
