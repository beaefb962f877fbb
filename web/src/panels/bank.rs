//! The bank's editor: the lamps as they are wired, and the one under edit.

use lampladder_core::bank::Bank;

use super::lamp::lamp_editor;
use super::send;
use crate::bench::{BenchHandle, Msg};
use crate::draft::{LampDraft, Place, Slot};
use crate::parts::el::{El, button, el, truth};
use crate::parts::picture::sign;
use crate::parts::well::{Filament, Well, lone};

const SMALL: Well = Well { x: 0.0, y: 0.0, width: 52.0, height: 34.0 };

/// The lamps.
pub fn bank_editor(bench: &BenchHandle) -> Vec<El> {
    let edit = &bench.words().edit;
    let count = bench.draft.lamp_count();
    let full = count >= Bank::MOST_LAMPS;
    let chain = el("div").class("chain").set("role", "group").set("aria-label", edit.as_wired).each(
        bench.draft.groups.iter().enumerate().map(|(group, lamps)| {
            let place = |(lamp, draft)| lamp_button(bench, Place { group, lamp }, draft);
            el("div").class("chain-group").each(lamps.iter().enumerate().map(place))
        }),
    );
    let action = |msg: Msg, testid: &'static str, path: &'static str, text: &'static str, off: bool| {
        let action = button("action", testid, send(bench, msg)).with(sign(path)).text(text);
        if off { action.set("disabled", "disabled") } else { action }
    };
    let parallel = "M4 7 H20 M4 17 H20 M4 7 V17 M20 7 V17 M1 12 H4 M20 12 H23";
    let series = "M1 12 H4 M10 12 H14 M20 12 H23 M4 8 h6 v8 h-6 z M14 8 h6 v8 h-6 z";
    let actions = el("div")
        .class("actions")
        .with(action(Msg::AddParallel, "add-parallel", parallel, edit.add_parallel, full))
        .with(action(Msg::AddSeries, "add-series", series, edit.add_series, full))
        .with(action(Msg::Remove, "remove-lamp", "M5 12 H19", edit.remove, count < 2));
    let mut all = vec![chain, actions];
    if full {
        all.push(el("p").class("hint").text(edit.full));
    }
    all.extend(lamp_editor(bench));
    all
}

fn lamp_button(bench: &BenchHandle, place: Place, lamp: &LampDraft) -> El {
    let words = bench.words();
    // The drawing is of the last valid set-up, whose bank may be another one.
    let same = bench.setup.bank.groups().len() == bench.draft.groups.len();
    let shown = bench.answers.shown(bench.condition).filter(|_| same);
    let state = shown.and_then(|shown| shown.lamps.get(place.group)?.get(place.lamp));
    let filament = state.map_or(Filament::Unknown, |lamp| Filament::Glowing(lamp.glow));
    let wrong = bench.faults.iter().any(|(slot, _)| matches!(slot, Slot::Lamp(other, _) if *other == place));
    let (class, mark) = if wrong { ("bulb is-wrong", " !") } else { ("bulb", "") };
    // What is heard holds what is seen, to the letter: who speaks to the phone says what stands on the button.
    let watts = lamp.watts.trim().trim_end_matches(['W', 'w']).trim_end();
    let rating = format!("{watts}\u{a0}W{mark}");
    let name = format!("lamp-{}-{}", place.group, place.lamp);
    let heard = words.lamp(place, false, &rating);
    button(class, name.clone(), send(bench, Msg::Choose(place)))
        .set("aria-pressed", truth(bench.lamp == place))
        .put("aria-label", heard)
        .with(lone(&name, "0 0 52 34", SMALL, filament))
        .with(el("span").text(rating))
}
