//! The supply's editor.

use lampladder_core::quantity;

use super::send;
use crate::bench::{BenchHandle, Msg};
use crate::draft::Slot;
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, el, place};
use crate::parts::field;
use crate::step::USUAL_VOLTS;

/// Usual frequencies; 0 is direct current.
const USUAL_HERTZ: [f64; 3] = [50.0, 60.0, 0.0];

/// Volts, frequency, and more for those who know more.
pub fn supply_editor(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let mut all = vec![
        choices(words.edit.usual_volts, quick(bench, Slot::SupplyVolts, &USUAL_VOLTS, "volts")),
        field::stepped(bench, Slot::SupplyVolts),
    ];
    all.push(place(follow(bench)));
    all.push(choices(words.edit.usual_hertz, quick(bench, Slot::SupplyHertz, &USUAL_HERTZ, "hertz")));
    all.push(field::plain(bench, Slot::SupplyHertz, ""));
    all.push(more(words.more).with(field::plain(bench, Slot::SupplyOhms, words.edit.ohms_hint)));
    all
}

/// What only some people know.
pub fn more(title: &'static str) -> El {
    el("details").class("more").with(el("summary").text(title))
}

/// Buttons that put a number into a field.
pub fn quick(bench: &BenchHandle, slot: Slot, all: &[f64], name: &str) -> Vec<Choice> {
    let words = bench.words();
    let now = quantity::parse(bench.draft.text(slot), slot.field()).ok();
    let choice = |&value: &f64| {
        let typed = words.numerals.plain(value);
        let direct = slot == Slot::SupplyHertz && value == 0.0;
        Choice {
            text: if direct { words.direct.to_owned() } else { words.numerals.quantity(value, slot.unit()) },
            chosen: now == Some(value),
            testid: format!("quick-{name}-{typed}"),
            click: send(bench, Msg::Type(slot, typed)),
        }
    };
    all.iter().map(choice).collect()
}

/// Offers to take the supply's voltage for lamps and plate, where they are for another.
fn follow(bench: &BenchHandle) -> Option<El> {
    let words = bench.words();
    let volts = bench.setup.supply.volts();
    let differs = |text: &str| quantity::parse(text, Slot::SupplyVolts.field()).ok() != Some(volts);
    let lamps_differ = bench.draft.groups.iter().flatten().any(|lamp| differs(&lamp.volts));
    let worth_it = lamps_differ || differs(bench.draft.text(Slot::PlateVolts));
    (worth_it && bench.fault(Slot::SupplyVolts).is_none()).then(|| {
        button("offer", "follow-supply", send(bench, Msg::FollowSupply))
            .text(words.edit.follow(&words.numerals.quantity(volts, "V")))
    })
}
