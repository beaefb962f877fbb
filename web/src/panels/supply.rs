//! The supply's editor.

use lampladder_core::quantity;
use yew::{Html, function_component, html};

use super::{PanelProps, send};
use crate::bench::{BenchHandle, Msg};
use crate::draft::Slot;
use crate::parts::choice::{Choice, choices};
use crate::parts::field::Field;
use crate::step::USUAL_VOLTS;

/// Usual frequencies; 0 is direct current.
const USUAL_HERTZ: [f64; 3] = [50.0, 60.0, 0.0];

/// Volts, frequency, and more for those who know more.
#[function_component]
pub fn SupplyEditor(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let volts = quick(bench, Slot::SupplyVolts, &USUAL_VOLTS, "volts");
    let hertz = quick(bench, Slot::SupplyHertz, &USUAL_HERTZ, "hertz");
    html! {
        <>
            { choices(words.edit.usual_volts, volts) }
            <Field bench={bench.clone()} slot={Slot::SupplyVolts} />
            { follow(bench) }
            { choices(words.edit.usual_hertz, hertz) }
            <Field bench={bench.clone()} slot={Slot::SupplyHertz} steps={false} />
            <details class="more" open={!bench.draft.text(Slot::SupplyOhms).trim_matches('0').is_empty()}>
                <summary>{ words.more }</summary>
                <Field bench={bench.clone()} slot={Slot::SupplyOhms} hint={words.edit.ohms_hint} />
            </details>
        </>
    }
}

/// Buttons that put a number into a field.
pub fn quick(bench: &BenchHandle, slot: Slot, all: &[f64], name: &str) -> Vec<Choice> {
    let words = bench.words();
    let now = quantity::parse(bench.draft.text(slot), slot.field()).ok();
    let choice = |&value: &f64| {
        let typed = words.numerals.plain(value);
        let direct = slot == Slot::SupplyHertz && value == 0.0;
        Choice {
            text: if direct {
                words.direct.to_owned()
            } else {
                words.numerals.quantity(value, slot.field().unit())
            },
            chosen: now == Some(value),
            testid: format!("quick-{name}-{typed}"),
            onclick: send(bench, Msg::Type(slot, typed)),
        }
    };
    all.iter().map(choice).collect()
}

/// Offers to take the supply's voltage for lamps and plate, where they are for another.
fn follow(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let volts = bench.setup.supply.volts();
    if bench.fault(Slot::SupplyVolts).is_some() {
        return Html::default();
    }
    let differs = |text: &str| quantity::parse(text, Slot::SupplyVolts.field()).ok() != Some(volts);
    let lamps_differ = bench.draft.groups.iter().flatten().any(|lamp| differs(&lamp.volts));
    if !lamps_differ && !differs(bench.draft.text(Slot::PlateVolts)) {
        return Html::default();
    }
    html! {
        <button type="button" class="offer" data-testid="follow-supply" onclick={send(bench, Msg::FollowSupply)}>
            { (words.edit.follow)(&words.numerals.quantity(volts, "V")) }
        </button>
    }
}
