//! A number to type, with its unit, its steppers, and what is wrong with it right under it.

use yew::{Callback, InputEvent};

use super::el::{El, button, el, truth};
use crate::bench::{BenchHandle, Msg};
use crate::browser::input;
use crate::draft::{LampPart, MeterPart, Place, Slot};
use crate::panels::send;

/// A field's name in addresses of elements; lamp fields exist for the lamp under edit only.
pub fn slug(slot: Slot) -> String {
    if let Slot::Lamp(Place::SPARE, part) = slot {
        // Beside the bank's editor on a wide screen.
        return format!("spare-{}", slug(Slot::Lamp(Place::default(), part)));
    }
    let plain = match slot {
        Slot::SupplyVolts => "supply-volts",
        Slot::SupplyHertz => "supply-hertz",
        Slot::SupplyOhms => "supply-ohms",
        Slot::PlateVolts => "plate-volts",
        Slot::PlateWatts => "plate-watts",
        Slot::PlateAmps => "plate-amps",
        Slot::PlateVoltAmps => "plate-volt-amps",
        Slot::PlatePowerFactor => "plate-power-factor",
        Slot::Entry(entry) => entry.slug(),
        Slot::Detail(detail) => return format!("detail-{}", detail.name().replace('_', "-")),
        Slot::Lamp(_, LampPart::Volts) => "lamp-volts",
        Slot::Lamp(_, LampPart::Watts) => "lamp-watts",
        Slot::Lamp(_, LampPart::Lumens) => "lamp-lumens",
        Slot::Lamp(_, LampPart::ColdOhms) => "lamp-cold-ohms",
        Slot::Reading(kind) => return format!("read-{}", kind.field().name().replace('_', "-")),
        Slot::Meter(MeterPart::Percent) => "meter-percent",
        Slot::Meter(MeterPart::Digits) => "meter-digits",
        Slot::Meter(MeterPart::Counts) => "meter-counts",
        Slot::Lamp(_, LampPart::PointVolts(index)) => return format!("point-{index}-volts"),
        Slot::Lamp(_, LampPart::PointAmps(index)) => return format!("point-{index}-amps"),
    };
    plain.to_owned()
}

/// A field with steppers.
pub fn stepped(bench: &BenchHandle, slot: Slot) -> El {
    field(bench, slot, true, String::new())
}

/// A field without, and with a remark beside its name.
pub fn plain(bench: &BenchHandle, slot: Slot, hint: impl Into<String>) -> El {
    field(bench, slot, false, hint.into())
}

fn field(bench: &BenchHandle, slot: Slot, steps: bool, hint: String) -> El {
    let words = bench.words();
    let slug = slug(slot);
    let (id, error_id) = (format!("in-{slug}"), format!("err-{slug}"));
    let fault = bench.wrong(slot);
    let label = el("label").put("for", id.clone()).text(words.slot(slot));
    let label = if hint.is_empty() { label } else { label.with(el("small").text(hint)) };
    let stepper = |up: bool, sign: &'static str, name: &'static str| {
        steps.then(|| {
            button("stepper", format!("step-{slug}-{name}"), send(bench, Msg::Step(slot, up)))
                .put("aria-label", words.step(slot, up))
                .text(sign)
        })
    };
    let typed = el("span")
        .class("typed")
        .with(entry(bench, slot, &slug, id, &error_id))
        .with(el("span").class("unit").set("aria-hidden", "true").text(slot.unit()));
    let error = fault.map(|fault| {
        el("p")
            .class("error")
            .put("id", error_id)
            .set("role", "alert")
            .put("data-testid", format!("error-{slug}"))
            .text(words.fault(slot, &fault))
    });
    let entry = el("div").class("entry").maybe(stepper(false, "−", "less")).with(typed);
    el("div").class("field").with(label).with(entry.maybe(stepper(true, "+", "more"))).maybe(error)
}

fn entry(bench: &BenchHandle, slot: Slot, slug: &str, id: String, error_id: &str) -> El {
    let dispatcher = bench.dispatcher();
    let typed = Callback::from(move |event: InputEvent| {
        if let Some(text) = input::text(&event) {
            dispatcher.dispatch(Msg::Type(slot, text));
        }
    });
    let wrong = bench.wrong(slot).is_some();
    let entry = el("input")
        .put("id", id)
        .set("type", "text")
        .set("inputmode", "decimal")
        .set("autocomplete", "off")
        .set("autocorrect", "off")
        .set("spellcheck", "false")
        .set("maxlength", "40")
        .put("data-testid", format!("field-{slug}"))
        .set("aria-invalid", truth(wrong))
        .value(bench.text(slot).to_owned())
        .typed(typed);
    if wrong { entry.put("aria-describedby", error_id.to_owned()) } else { entry }
}
