//! How lamps and equipment part the supply's voltage; where the two add to more than it, they overlap.

use super::send;
use crate::bench::{BenchHandle, Msg};
use crate::parts::el::{El, button, drawing, el, truth};
use crate::parts::svg::n;

/// From here on the two voltages visibly add to more than the supply.
const OVERLAP: f64 = 1.01;

/// The bar, and on a tap the reason why it looks as it does.
pub fn voltage_bar(bench: &BenchHandle) -> Option<El> {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition)?;
    let supply = bench.setup.supply.volts();
    let share = |volts: f64| (volts / supply).clamp(0.0, 1.0);
    let (lamp, load) = (share(shown.bank_volts.value), share(shown.load_volts.value));
    let overlaps = lamp + load > OVERLAP;
    let bank_text = words.numerals.value(&shown.bank_volts, "V");
    let load_text = words.numerals.value(&shown.load_volts, "V");
    let explanation = words.split(overlaps, &bank_text, &load_text, &words.numerals.quantity(supply, "V"));
    let several = bench.setup.bank.lamp_count() > 1;
    let names = el("span")
        .class("split-names")
        .with(el("span").text(words.across_bank(several)).text(" ").with(el("b").text(bank_text)))
        .maybe(overlaps.then(|| el("i").class("split-why").text(words.why)))
        .with(
            el("span")
                .text(words.across_load)
                .text(" ")
                .with(el("b").text(load_text))
                .text(" · ")
                .text(words.numerals.percent(shown.load_volts.value / supply)),
        );
    let bar = button("split-bar", "voltage-bar", send(bench, Msg::Why))
        .set("aria-expanded", truth(bench.why))
        .set("aria-controls", "split-why")
        .with(names)
        .with(pieces(1000.0 * lamp, 1000.0 * (1.0 - load)));
    let why = el("p").class("why").set("id", "split-why").test("voltage-why").text(explanation);
    Some(el("div").class("split").with(bar).with(if bench.why { why } else { why.set("hidden", "hidden") }))
}

/// The lamps' piece from the left, up to `lamp`; the equipment's from `load` to the right; both in thousandths.
fn pieces(lamp: f64, load: f64) -> El {
    let piece = |class: &'static str, from: f64, to: f64| {
        el("rect").class(class).put("x", n(from)).set("height", "34").put("width", n((to - from).max(0.0)))
    };
    let pattern = el("pattern")
        .set("id", "hatch")
        .set("width", "14")
        .set("height", "34")
        .set("patternUnits", "userSpaceOnUse")
        .with(el("path").class("hatch").set("d", "M-4 34 L10 0 M10 34 L24 0"));
    drawing("0 0 1000 34")
        .set("preserveAspectRatio", "none")
        .with(pattern)
        .with(piece("bar-lamp", 0.0, lamp))
        .with(piece("bar-both", load, lamp))
        .with(piece("bar-hatch", load, lamp).set("fill", "url(#hatch)"))
}
