//! Where readings are typed and tapped: the numbers, the drawn lamps, the behaviours, the meter.

use lampladder_core::glow::GlowWord;
use lampladder_core::readings::{Behaviour, Kind, MeterSpec, Response};

use super::send;
use crate::bench::{BenchHandle, Msg};
use crate::doubt::meanings;
use crate::draft::{Fault, MeterPart, Slot};
use crate::meter::METERS;
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, el, place, truth};
use crate::parts::field;
use crate::parts::well::{Filament, Well, lone};
use crate::seen::Deed;

const LAMP: Well = Well { x: 0.0, y: 0.0, width: 64.0, height: 44.0 };

/// All of it; `doubts` are readings whose unit has to be asked for, `deeds` what can be done with them.
pub(super) fn sheet(bench: &BenchHandle, doubts: &[Kind], deeds: El) -> Vec<El> {
    let texts = bench.words().seen();
    let fields = Kind::ALL.map(|kind| reading(bench, kind, doubts.contains(&kind)));
    vec![
        el("h2").text(texts.readings),
        el("div").class("readings").each(fields),
        el("h2").text(texts.look),
        el("p").class("hint").text(texts.look_hint),
        looks(bench),
        el("h2").text(texts.behaviour),
        choices(texts.behaviour, behaviours(bench)),
        deeds,
        meter(bench),
    ]
}

/// A field, and under it the question for its unit where there is one.
fn reading(bench: &BenchHandle, kind: Kind, doubted: bool) -> El {
    let slot = Slot::Reading(kind);
    let asked = doubted || bench.fault(slot) == Some(&Fault::NoUnit);
    let question = asked.then(|| {
        let text = bench.text(slot);
        let all = meanings(kind, text).into_iter().enumerate().map(|(index, meaning)| Choice {
            text: meaning.clone(),
            chosen: false,
            testid: format!("meaning-{index}"),
            click: send(bench, Msg::Type(slot, meaning)),
        });
        choices(bench.words().slot(slot), all.collect())
    });
    el("div").with(field::plain(bench, slot, bench.words().seen().how(kind))).with(place(question))
}

/// Lamps from dark to more than full, as this one would look.
fn looks(bench: &BenchHandle) -> El {
    let words = bench.words();
    let lamp = &bench.setup.bank.groups()[0][0];
    let row = el("div").class("looks").set("role", "group").set("aria-label", words.seen().look);
    row.each(GlowWord::ALL.into_iter().filter_map(|word| {
        let (low, high) = word.kelvins(lamp.rated_kelvin());
        // A lamp that runs cool never gets there.
        if low >= high {
            return None;
        }
        let glow = lamp.glow(f64::midpoint(low, high));
        let name = word.name().replace(' ', "-");
        let drawn = lone(&format!("look-{name}"), "0 0 64 44", LAMP, Filament::Glowing(glow));
        Some(
            button("look", format!("look-{name}"), send(bench, Msg::Seen(Deed::Look(word))))
                .set("aria-pressed", truth(bench.seen.sheet.look == Some(word)))
                .with(drawn)
                .with(el("span").text(words.glow(word))),
        )
    }))
}

fn behaviours(bench: &BenchHandle) -> Vec<Choice> {
    let choice = |one: Behaviour| Choice {
        text: bench.words().seen().behaves(one).to_owned(),
        chosen: bench.seen.sheet.behaviour == Some(one),
        testid: format!("behaves-{}", one.name()),
        click: send(bench, Msg::Seen(Deed::Behave(one))),
    };
    Behaviour::ALL.map(choice).to_vec()
}

/// The meter: chosen once, then a line.
fn meter(bench: &BenchHandle) -> El {
    let words = bench.words();
    let texts = words.seen();
    let spec = bench.seen.spec;
    let line = |percent: f64, digits: f64, counts: f64| {
        let plain = |value| words.numerals.plain(value);
        texts.meter_line(&plain(percent), &plain(digits), &plain(counts))
    };
    let open = bench.seen.meter_open;
    let head = button("disclose", "meter", send(bench, Msg::Seen(Deed::ShowMeter)))
        .set("aria-expanded", truth(open))
        .with(el("span").text(texts.meter))
        .with(el("small").text(line(spec.percent, spec.digits, spec.counts)));
    let section = el("div").class("meter").with(el("h2").with(head));
    if !open {
        return section;
    }
    let usual = METERS.iter().enumerate().map(|(index, &(percent, digits, counts))| {
        let meter = MeterSpec { percent, digits, counts, response: spec.response };
        Choice {
            text: line(percent, digits, counts),
            chosen: spec == meter,
            testid: format!("meter-{index}"),
            click: send(bench, Msg::Seen(Deed::Meter(meter))),
        }
    });
    let responses = [Response::TrueRms, Response::Averaging].map(|response| Choice {
        text: texts.averaging(response == Response::Averaging).to_owned(),
        chosen: spec.response == response,
        testid: String::from(if response == Response::Averaging { "averaging" } else { "true-rms" }),
        click: send(bench, Msg::Seen(Deed::Response(response))),
    });
    section
        .with(choices(texts.meter, usual.collect()))
        .each(MeterPart::ALL.map(|part| field::plain(bench, Slot::Meter(part), "")))
        .with(choices(texts.meter, responses.to_vec()))
        .with(el("p").class("hint").text(texts.averaging_means))
}
