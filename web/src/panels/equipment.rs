//! The equipment's editor: its family by picture, its rating plate, and what else may be known of it.

use lampladder_core::detail::Detail;
use lampladder_core::family::{Family, Unsuitable};
use yew::{Callback, Html, MouseEvent, function_component, html, use_state_eq};

use super::{PanelProps, send};
use crate::bench::{BenchHandle, Msg, Refused};
use crate::draft::Slot;
use crate::parts::choice::{Choice, choices};
use crate::parts::field::Field;
use crate::parts::picture;

const UNSUITABLE: [(Unsuitable, &str); 3] = [
    (Unsuitable::MicrowaveOven, "refused-microwave"),
    (Unsuitable::Medical, "refused-medical"),
    (Unsuitable::ThreePhase, "refused-three-phase"),
];

/// Family and plate.
#[function_component]
pub fn EquipmentEditor(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let family = bench.draft.family;
    let choosing = use_state_eq(|| false);
    let toggle = {
        let choosing = choosing.clone();
        move |_: MouseEvent| choosing.set(!*choosing)
    };
    let names = (words.family)(family);
    let field = |slot| html! { <Field bench={bench.clone()} {slot} /> };
    html! {
        <>
            <button type="button" class="family-now" data-testid="choose-family" onclick={toggle}
                aria-expanded={if *choosing { "true" } else { "false" }}>
                { drawing(family) }
                <span><b>{ names.name }</b><small>{ names.examples }</small></span>
                <i>{ words.edit.change }</i>
            </button>
            if *choosing {
                { families(bench, &Callback::from(move |()| choosing.set(false))) }
                <h3>{ words.edit.not_for }</h3>
                { choices(words.edit.not_for, refusals(bench)) }
            }
            if let Some(Refused::Equipment(kind)) = bench.refused {
                <p class="error" role="alert" data-testid="refusal">{ (words.refuse_equipment)(kind) }</p>
            }
            if family == Family::Measured {
                { field(Slot::Detail(Detail::MeasuredOhms)) }
            } else {
                { field(Slot::PlateWatts) }
                { field(Slot::PlateVolts) }
            }
            { more(bench) }
            <ul class="warnings">
                { for family.warnings().iter().map(|warning| html! { <li>{ (words.warning)(*warning) }</li> }) }
            </ul>
        </>
    }
}

fn drawing(family: Family) -> Html {
    html! { <svg viewBox="0 0 48 36" aria-hidden="true" focusable="false">{ picture::family(family) }</svg> }
}

fn families(bench: &BenchHandle, chosen: &Callback<()>) -> Html {
    let words = bench.words();
    html! {
        <div class="families" role="group" aria-label={words.edit.what}>
            { for Family::ALL.into_iter().map(|family| {
                let (dispatcher, chosen) = (bench.dispatcher(), chosen.clone());
                html! {
                    <button type="button" class="family" data-testid={format!("family-{}", family.name())}
                        aria-pressed={if family == bench.draft.family { "true" } else { "false" }}
                        onclick={move |_| { dispatcher.dispatch(Msg::Family(family)); chosen.emit(()); }}>
                        { drawing(family) }
                        <b>{ (words.family)(family).name }</b>
                    </button>
                }
            }) }
        </div>
    }
}

fn refusals(bench: &BenchHandle) -> Vec<Choice> {
    let choice = |(kind, testid): (Unsuitable, &str)| Choice {
        text: (bench.words().unsuitable_equipment)(kind).to_owned(),
        chosen: false,
        testid: testid.to_owned(),
        onclick: send(bench, Msg::Refuse(Refused::Equipment(kind))),
    };
    UNSUITABLE.map(choice).to_vec()
}

/// The rest of the plate, and the class defaults that stand where nothing is known.
fn more(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let family = bench.draft.family;
    let usual = (words.edit.power_factor_hint)(&words.numerals.plain(family.usual_power_factor()));
    let field = |slot, hint: String| html! { <Field bench={bench.clone()} {slot} {hint} steps={false} /> };
    let details = family.details().iter().filter(|default| default.detail != Detail::MeasuredOhms);
    let none_printed = family == Family::Measured;
    html! {
        <details class="more">
            <summary>{ words.edit.plate_more }</summary>
            if none_printed {
                { field(Slot::PlateVolts, String::new()) }
            } else {
                { field(Slot::PlateAmps, words.edit.optional.to_owned()) }
                { field(Slot::PlateVoltAmps, words.edit.optional.to_owned()) }
                { field(Slot::PlatePowerFactor, usual) }
            }
            { for details.map(|default| {
                let hint = (words.edit.default_hint)(&words.numerals.quantity(default.value, default.detail.unit()));
                field(Slot::Detail(default.detail), hint)
            }) }
        </details>
    }
}
