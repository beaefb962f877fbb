//! The circuit as what it is: one closed loop of supply, lamps and equipment. Every part of it is a button.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::steady::Outcome;

use super::bank_drawing::{TOP, bank_drawing};
use super::send;
use crate::bench::{Bench, BenchHandle, Msg, Part};
use crate::describe;
use crate::flare;
use crate::parts::el::{El, button, drawing, el, truth};
use crate::parts::picture;
use crate::parts::svg::n;

/// Heights of the drawing, user units; static/circuit.css has the same figures for the buttons on it.
struct Plan {
    class: &'static str,
    bank_height: f64,
    height: f64,
    /// Of supply and equipment.
    centre: f64,
}

/// The drawing's width.
const WIDTH: f64 = 360.0;
/// Where supply and equipment stand.
const SUPPLY_X: f64 = 54.0;
const LOAD_X: f64 = 306.0;

fn plan(bank: &Bank) -> Plan {
    let rows = bank.groups().iter().map(Vec::len).max().unwrap_or(1);
    match rows {
        _ if bank.lamp_count() == 1 => {
            Plan { class: "loop loop-single", bank_height: 72.0, height: 190.0, centre: 106.0 }
        }
        0 | 1 => Plan { class: "loop loop-row", bank_height: 58.0, height: 190.0, centre: 106.0 },
        2 => Plan { class: "loop loop-two", bank_height: 74.0, height: 206.0, centre: 118.0 },
        _ => Plan { class: "loop loop-many", bank_height: 100.0, height: 232.0, centre: 138.0 },
    }
}

/// The loop.
pub fn circuit(bench: &BenchHandle) -> El {
    let words = bench.words();
    let plan = plan(&bench.setup.bank);
    let supply = describe::supply(&bench.setup, words);
    let bank = describe::bank(&bench.setup, words);
    let size = describe::size(&bench.setup, words);
    let volts = words.numerals.quantity(bench.setup.supply.volts(), "V");
    let family = words.family(bench.setup.plate.family()).name;
    let part = |part: Part, class: &'static str, testid: &'static str, shown: String, heard: &str| {
        button(class, testid, send(bench, Msg::Open(part)))
            .put("aria-label", words.change(part, heard))
            .set("aria-expanded", truth(bench.open == Some(part)))
            .with(el("span").class("tag").text(shown))
    };
    let picture = drawing("0 0 360 190")
        .put("viewBox", format!("0 0 {} {}", n(WIDTH), n(plan.height)))
        .with(wires(&plan, bench.setup.supply.is_direct()))
        .with(equipment(&plan, bench))
        .with(bank_drawing(bench, plan.bank_height));
    let short_bank = describe::short_bank(&bench.setup, words);
    el("section")
        .class(plan.class)
        .put("aria-label", words.circuit(&supply, &bank, &size))
        .with(picture)
        .with(part(Part::Supply, "part part-supply", "edit-supply", volts, &supply))
        .with(part(Part::Bank, "part part-bank", "edit-bank", short_bank, &bank))
        .with(part(
            Part::Equipment,
            "part part-load",
            "edit-equipment",
            size.clone(),
            &format!("{family}, {size}"),
        ))
        .with(reading(bench))
}

/// The answer, in the middle of the loop.
fn reading(bench: &Bench) -> El {
    let words = bench.words();
    let amps = bench.answers.shown(bench.condition).map(|shown| &shown.amps);
    let number = el("b").test("result-amps");
    let number = match amps {
        Some(amps) => number
            .put("data-value", describe::full(amps.value))
            .put("data-low", describe::full(amps.low))
            .put("data-high", describe::full(amps.high))
            .text(words.numerals.value(amps, "A")),
        None if bench.answers.outcome(bench.condition) == Some(Outcome::Hunts) => number.text(words.pulsing),
        None => number.text(words.none),
    };
    let range = match amps {
        Some(amps) => Some(words.numerals.range(amps, "A")),
        None => flare::brightest(bench, bench.condition)
            .map(|(glow, seconds)| words.pulse(&words.numerals.duration(seconds), glow.word)),
    };
    let range = range.map(|range| el("span").text(range));
    let class = if bench.condition == Condition::Healthy { "condition" } else { "condition alarm" };
    el("p")
        .class("reading")
        .with(number)
        .maybe(range)
        .with(el("span").class(class).text(words.if_condition(bench.condition)))
        .maybe(bench.is_stale().then(|| el("span").class("stale-mark").test("stale").text(words.stale_mark)))
}

/// The loop's wire, and the supply on it.
fn wires(plan: &Plan, direct: bool) -> El {
    let top = TOP + plan.bank_height / 2.0;
    let bottom = plan.height - 12.0;
    let wire = format!(
        "M {sx} {centre} V {t14} a 14 14 0 0 1 14 -14 H {lx14} a 14 14 0 0 1 14 14 V {b14} a 14 14 0 0 1 -14 14 H {sx14} \
         a 14 14 0 0 1 -14 -14 Z",
        sx = n(SUPPLY_X),
        centre = n(plan.centre),
        t14 = n(top + 14.0),
        lx14 = n(LOAD_X - 14.0),
        b14 = n(bottom - 14.0),
        sx14 = n(SUPPLY_X + 14.0),
    );
    let arrow = format!("M {} {} l 11 -5.5 v 11 z", n(WIDTH / 2.0 - 5.0), n(bottom));
    let sign = if direct {
        "M -15 -9 h 30 M -15 -1 h 7 m 4.5 0 h 7 m 4.5 0 h 7"
    } else {
        "M -16 -4 q 8 -17 16 0 t 16 0"
    };
    let circle = "M -31 0 a 31 31 0 1 0 62 0 a 31 31 0 1 0 -62 0";
    let source = el("g")
        .put("transform", format!("translate({} {})", n(SUPPLY_X), n(plan.centre)))
        .with(path("body", circle))
        .with(path("wire", sign));
    // The lamps belong in the line conductor; a direct source has a plus there.
    let (line, neutral) = if direct { ("+", "−") } else { ("L", "N") };
    let terminal = |y: f64, text: &'static str| {
        el("text").class("terminal").put("x", n(SUPPLY_X - 12.0)).put("y", n(y)).text(text)
    };
    el("g")
        .with(el("path").class("wire").put("d", wire))
        .with(el("path").class("arrow").put("d", arrow))
        .with(source)
        .with(terminal(top + 15.0, line))
        .with(terminal(plan.height - 14.0, neutral))
}

fn path(class: &'static str, path: &'static str) -> El {
    el("path").class(class).set("d", path)
}

fn equipment(plan: &Plan, bench: &Bench) -> El {
    let symbol = el("g")
        .set("transform", "translate(-27 -27) scale(1.12)")
        .with(picture::family(bench.setup.plate.family()));
    el("g")
        .put("transform", format!("translate({} {})", n(LOAD_X), n(plan.centre)))
        .with(path(
            "body",
            "M -27 -33 h 54 a 12 12 0 0 1 12 12 v 42 a 12 12 0 0 1 -12 12 h -54 a 12 12 0 0 1 -12 -12 v -42 a 12 12 0 0 1 \
             12 -12 z",
        ))
        .with(symbol)
}
