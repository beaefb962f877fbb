//! The equipment's editor: its family by picture, its rating plate, and what else may be known of it.

use lampladder_core::detail::Detail;
use lampladder_core::family::{Family, Unsuitable};

use super::lamp::refusal;
use super::send;
use super::supply::more;
use crate::bench::{BenchHandle, Msg, Refused};
use crate::draft::Slot;
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, drawing, el, place, truth};
use crate::parts::{field, picture};

const UNSUITABLE: [(Unsuitable, &str); 3] = [
    (Unsuitable::MicrowaveOven, "refused-microwave"),
    (Unsuitable::Medical, "refused-medical"),
    (Unsuitable::ThreePhase, "refused-three-phase"),
];

/// Family and plate.
pub fn equipment_editor(bench: &BenchHandle) -> Vec<El> {
    let words = bench.words();
    let family = bench.draft.family;
    let names = words.family(family);
    let now = button("family-now", "choose-family", send(bench, Msg::ChooseFamily))
        .set("aria-expanded", truth(bench.choosing))
        .with(family_picture(family))
        .with(el("span").with(el("b").text(names.name)).with(el("small").text(names.examples)))
        .with(el("i").text(words.edit.change));
    let mut all = vec![now];
    if bench.choosing {
        all.push(families(bench));
        all.push(el("h3").text(words.edit.not_for));
        all.push(choices(words.edit.not_for, refusals(bench)));
    }
    let refused = match bench.refused {
        Some(Refused::Equipment(kind)) => Some(refusal(words.refuse_equipment(kind))),
        _ => None,
    };
    all.push(place(refused));
    if family == Family::Measured {
        all.push(field::stepped(bench, Slot::Detail(Detail::MeasuredOhms)));
    } else {
        all.push(field::stepped(bench, Slot::PlateWatts));
        all.push(field::stepped(bench, Slot::PlateVolts));
    }
    all.push(rest_of_plate(bench));
    let warning = |warning| el("li").text(words.warning(warning));
    all.push(el("ul").class("warnings").each(family.warnings().iter().copied().map(warning)));
    all
}

fn family_picture(family: Family) -> El {
    drawing("0 0 48 36").with(picture::family(family))
}

fn families(bench: &BenchHandle) -> El {
    let words = bench.words();
    let one = |family: Family| {
        button("family", format!("family-{}", family.name()), send(bench, Msg::Family(family)))
            .set("aria-pressed", truth(family == bench.draft.family))
            .with(family_picture(family))
            .with(el("b").text(words.family(family).name))
    };
    let all = el("div").class("families").set("role", "group").set("aria-label", words.edit.what);
    all.each(Family::ALL.map(one))
}

fn refusals(bench: &BenchHandle) -> Vec<Choice> {
    let choice = |(kind, testid): (Unsuitable, &str)| Choice {
        text: bench.words().unsuitable_equipment(kind).to_owned(),
        chosen: false,
        testid: testid.to_owned(),
        click: send(bench, Msg::Refuse(Refused::Equipment(kind))),
    };
    UNSUITABLE.map(choice).to_vec()
}

/// The rest of the plate, and the class defaults that stand where nothing is known.
fn rest_of_plate(bench: &BenchHandle) -> El {
    let words = bench.words();
    let family = bench.draft.family;
    let rest = more(words.edit.plate_more);
    let rest = if family == Family::Measured {
        rest.with(field::plain(bench, Slot::PlateVolts, ""))
    } else {
        let usual = words.edit.power_factor_hint(&words.numerals.plain(family.usual_power_factor()));
        rest.with(field::plain(bench, Slot::PlateAmps, words.edit.optional))
            .with(field::plain(bench, Slot::PlateVoltAmps, words.edit.optional))
            .with(field::plain(bench, Slot::PlatePowerFactor, usual))
    };
    let details = family.details().iter().filter(|default| default.detail != Detail::MeasuredOhms);
    rest.each(details.map(|default| {
        let value = words.numerals.quantity(default.value, default.detail.unit());
        field::plain(bench, Slot::Detail(default.detail), words.edit.default_hint(&value))
    }))
}
