//! A number to type, with its unit, its steppers, and what is wrong with it right under it.

use yew::{AttrValue, Callback, Html, InputEvent, Properties, function_component, html};

use crate::bench::{BenchHandle, Msg};
use crate::browser::input;
use crate::draft::{LampPart, Slot};

/// What a field needs.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct FieldProps {
    /// The state.
    pub bench: BenchHandle,
    /// Which field.
    pub slot: Slot,
    /// Whether it has steppers.
    #[prop_or(true)]
    pub steps: bool,
    /// A remark beside its name.
    #[prop_or_default]
    pub hint: AttrValue,
}

/// A field's name in addresses of elements; lamp fields exist for the lamp under edit only.
pub fn slug(slot: Slot) -> String {
    let plain = match slot {
        Slot::SupplyVolts => "supply-volts",
        Slot::SupplyHertz => "supply-hertz",
        Slot::SupplyOhms => "supply-ohms",
        Slot::PlateVolts => "plate-volts",
        Slot::PlateWatts => "plate-watts",
        Slot::PlateAmps => "plate-amps",
        Slot::PlateVoltAmps => "plate-volt-amps",
        Slot::PlatePowerFactor => "plate-power-factor",
        Slot::Detail(detail) => return format!("detail-{}", detail.name().replace('_', "-")),
        Slot::Lamp(_, LampPart::Volts) => "lamp-volts",
        Slot::Lamp(_, LampPart::Watts) => "lamp-watts",
        Slot::Lamp(_, LampPart::Lumens) => "lamp-lumens",
        Slot::Lamp(_, LampPart::ColdOhms) => "lamp-cold-ohms",
        Slot::Lamp(_, LampPart::PointVolts(index)) => return format!("point-{index}-volts"),
        Slot::Lamp(_, LampPart::PointAmps(index)) => return format!("point-{index}-amps"),
    };
    plain.to_owned()
}

/// The field.
#[function_component]
pub fn Field(props: &FieldProps) -> Html {
    let FieldProps { bench, slot, steps, hint } = props;
    let slot = *slot;
    let words = bench.words();
    let slug = slug(slot);
    let id = format!("in-{slug}");
    let error_id = format!("err-{slug}");
    let fault = bench.fault(slot);
    let dispatcher = bench.dispatcher();
    let oninput = Callback::from(move |event: InputEvent| {
        if let Some(text) = input::text(&event) {
            dispatcher.dispatch(Msg::Type(slot, text));
        }
    });
    let stepper = |up: bool| {
        let dispatcher = bench.dispatcher();
        html! {
            <button type="button" class="stepper" aria-label={(words.step)(slot, up)}
                data-testid={format!("step-{slug}-{}", if up { "more" } else { "less" })}
                onclick={move |_| dispatcher.dispatch(Msg::Step(slot, up))}>
                { if up { "+" } else { "−" } }
            </button>
        }
    };
    html! {
        <div class="field">
            <label for={id.clone()}>
                { (words.slot)(slot) }
                if !hint.is_empty() { <small>{ hint }</small> }
            </label>
            <div class="entry">
                if *steps { { stepper(false) } }
                <span class="typed">
                    <input {id} type="text" inputmode="decimal" autocomplete="off" autocorrect="off" spellcheck="false"
                        maxlength="40" data-testid={format!("field-{slug}")} value={bench.draft.text(slot).to_owned()}
                        aria-invalid={if fault.is_some() { "true" } else { "false" }}
                        aria-describedby={fault.map(|_| error_id.clone())} {oninput} />
                    <span class="unit" aria-hidden="true">{ slot.unit() }</span>
                </span>
                if *steps { { stepper(true) } }
            </div>
            if let Some(fault) = fault {
                <p class="error" id={error_id} role="alert" data-testid={format!("error-{slug}")}>
                    { (words.fault)(slot, fault) }
                </p>
            }
        </div>
    }
}
