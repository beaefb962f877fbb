//! The first seconds in figures: the surge behind the lamps and without them, moment by moment, and what a fuse does.

use lampladder_core::fuse::{Fuse, Judgement, Standard};
use lampladder_core::switch_on::{MAINS_OHMS, SwitchOn};

use super::stage::lamps;
use super::switch_on::wish;
use crate::bench::{Bench, BenchHandle};
use crate::charts::seconds::{IN_A_TABLE, marks};
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, button, el, truth};
use crate::parts::table::{row_head, table, whole};
use crate::replay::{Scene, Show, Wish};
use crate::story;

/// All tables.
pub(super) fn tables(bench: &BenchHandle, show: &Show) -> [El; 3] {
    [figures(bench, show), moments(bench, show), fuse(bench, show)]
}

/// One cell for each of the two conditions; a dash where there is nothing to say.
fn cells(bench: &Bench, show: &Show, name: &'static str, text: impl Fn(&Scene) -> Option<String>) -> El {
    let none = || String::from(bench.words().none);
    let cell = |scene: &Scene| whole(text(scene).unwrap_or_else(none));
    el("tr").with(row_head(name)).each(show.scenes.iter().map(cell))
}

fn straight(scene: &Scene) -> Option<&SwitchOn> {
    scene.straight.as_ref()?.run.as_ref()
}

fn figures(bench: &Bench, show: &Show) -> El {
    let words = bench.words();
    let (texts, numerals) = (words.replay(), words.numerals);
    let row = |name, text: &dyn Fn(&Scene) -> Option<String>| cells(bench, show, name, text);
    let heat = |run: &SwitchOn| numerals.about(run.i2t_amp2_seconds, "A²s");
    let last = |scene: &Scene| scene.whole()?.samples.last().cloned();
    let mut rows = vec![
        row(texts.peak, &|scene| Some(numerals.about(scene.whole()?.peak_amps, "A"))),
        row(texts.peak_after, &|scene| Some(numerals.duration(scene.whole()?.peak_seconds))),
        row(texts.heat, &|scene| scene.whole().map(heat)),
        row(texts.settles, &|scene| {
            let settled = scene.whole()?.settle_seconds.map(|seconds| numerals.duration(seconds));
            Some(settled.unwrap_or_else(|| texts.unsettled(&numerals.quantity(show.ask.seconds, "s"))))
        }),
    ];
    if show.scenes.iter().any(|scene| scene.whole().is_some_and(|run| run.pulse_seconds().is_some())) {
        rows.push(row(texts.pulse, &|scene| Some(numerals.duration(scene.whole()?.pulse_seconds()?))));
    }
    rows.push(row(texts.last_amps, &|scene| Some(numerals.about(last(scene)?.amps_rms, "A"))));
    rows.push(row(texts.last_volts, &|scene| Some(numerals.about(last(scene)?.load_volts_rms, "V"))));
    if show.scenes.iter().any(|scene| last(scene).is_some_and(|last| last.load_dc_volts.is_some())) {
        rows.push(row(texts.last_dc, &|scene| Some(numerals.about(last(scene)?.load_dc_volts?, "V"))));
    }
    rows.push(row(texts.straight_peak, &|scene| Some(numerals.about(straight(scene)?.peak_amps, "A"))));
    rows.push(row(texts.straight_heat, &|scene| straight(scene).map(heat)));
    rows.push(row(texts.saved, &|scene| {
        let ratio = straight(scene)?.peak_amps / scene.whole()?.peak_amps;
        // Without any current there is nothing to compare.
        ratio.is_finite().then(|| {
            if ratio < 1.05 { String::from(texts.same) } else { texts.times_less(&numerals.ratio(ratio)) }
        })
    }));
    let ohms = if show.ask.setup.supply.ohms() > 0.0 { show.ask.setup.supply.ohms() } else { MAINS_OHMS };
    el("div")
        .with(el("h2").text(texts.surge))
        .with(table(&heads(bench, show, ""), rows).test("surge"))
        .with(el("p").class("hint").text(texts.straight_means(&numerals.short_quantity(ohms, "Ω"))))
}

fn heads(bench: &Bench, show: &Show, first: &'static str) -> [&'static str; 3] {
    let name = |scene: &Scene| bench.words().condition(scene.condition);
    [first, name(&show.scenes[0]), name(&show.scenes[1])]
}

/// What the chart shows, for those who cannot see it.
fn moments(bench: &Bench, show: &Show) -> El {
    let words = bench.words();
    let texts = words.replay();
    let lamps = lamps(bench);
    let rows = marks(show.ask.seconds, IN_A_TABLE).into_iter().map(|seconds| {
        let cell = |scene: &Scene| {
            let run =
                scene.run().filter(|run| run.samples.last().is_some_and(|last| last.seconds >= seconds));
            let Some(sample) = run.and_then(|run| story::at(run, seconds)) else {
                return el("td").text(words.none);
            };
            let bright = story::brightest(&sample, &lamps).unwrap_or_default();
            let glow = lamps[bright].glow(sample.lamp_kelvin.get(bright).copied().unwrap_or_default());
            let amps = words.numerals.about(sample.amps_rms, "A");
            let volts = words.numerals.about(sample.load_volts_rms, "V");
            el("td")
                .with(el("b").text(words.glow(glow.word)))
                .with(el("small").text(texts.figures(&amps, &volts)))
        };
        let head = row_head(words.numerals.duration(seconds));
        el("tr").with(head).each(show.scenes.iter().map(cell))
    });
    el("div")
        .with(el("h2").text(texts.moment_by_moment))
        .with(table(&heads(bench, show, texts.time_column), rows.collect()).test("moments-table"))
}

/// Preferred rated currents, amperes: the series of IEC 60127, and what else is sold in the UL range.
const RATED: [f64; 29] = [
    0.05, 0.063, 0.08, 0.1, 0.125, 0.16, 0.2, 0.25, 0.315, 0.4, 0.5, 0.63, 0.8, 1.0, 1.25, 1.6, 2.0, 2.5,
    3.15, 4.0, 5.0, 6.3, 7.0, 8.0, 10.0, 12.0, 15.0, 20.0, 30.0,
];

/// The next rated current of a standard, up or down; the same at the end.
fn next(standard: Standard, amps: f64, up: bool) -> f64 {
    let mut fits = RATED.into_iter().filter(|rated| Fuse::new(standard, *rated).is_ok());
    let found = if up { fits.find(|rated| *rated > amps) } else { fits.rfind(|rated| *rated < amps) };
    found.unwrap_or(amps)
}

/// The same current in another standard, or the nearest that it has.
fn fitting(standard: Standard, amps: f64) -> f64 {
    if Fuse::new(standard, amps).is_ok() {
        return amps;
    }
    let (up, down) = (next(standard, amps, true), next(standard, amps, false));
    if up == amps { down } else { up }
}

fn fuse(bench: &BenchHandle, show: &Show) -> El {
    let words = bench.words();
    let texts = words.replay();
    let now = bench.wish;
    let head = button("disclose", "fuse", wish(bench, Wish { fuse_open: !now.fuse_open, ..now }))
        .set("aria-expanded", truth(now.fuse_open))
        .text(texts.fuse);
    let section = el("div").class("fuse").with(el("h2").with(head));
    if !now.fuse_open {
        return section;
    }
    let standards = Standard::ALL.map(|standard| Choice {
        text: texts.standard(standard).to_owned(),
        chosen: standard == now.standard,
        testid: format!("fuse-{}", texts.standard(standard)),
        click: wish(bench, Wish { standard, rated_amps: fitting(standard, now.rated_amps), ..now }),
    });
    let step = |up: bool| {
        let testid = if up { "fuse-more" } else { "fuse-less" };
        let rated_amps = next(now.standard, now.rated_amps, up);
        button("stepper", testid, wish(bench, Wish { rated_amps, ..now }))
            .set("aria-label", texts.rated_step(up))
            .text(if up { "+" } else { "−" })
    };
    let rated = el("p")
        .class("rated")
        .with(el("span").text(texts.rated))
        .with(step(false))
        .with(el("b").set("aria-live", "polite").text(words.numerals.quantity(now.rated_amps, "A")))
        .with(step(true));
    section
        .with(choices(texts.standards, standards.to_vec()))
        .with(el("p").class("hint").text(texts.standard_means(now.standard)))
        .with(rated)
        .each(verdicts(bench, show))
}

fn verdicts(bench: &Bench, show: &Show) -> Vec<El> {
    let texts = bench.words().replay();
    let Ok(fuse) = Fuse::new(bench.wish.standard, bench.wish.rated_amps) else { return Vec::new() };
    let judged = |run: Option<&SwitchOn>| run.map(|run| fuse.judge(run));
    let verdict = |judged: Option<Judgement>| Some(texts.verdict(judged?.verdict).to_owned());
    let rows = vec![
        cells(bench, show, texts.behind, |scene| verdict(judged(scene.whole()))),
        cells(bench, show, texts.straight, |scene| verdict(judged(straight(scene)))),
    ];
    let status = fuse.gates().iter().map(|gate| gate.status).max();
    let status = status.unwrap_or(lampladder_core::fuse::Status::Memory);
    vec![
        table(&heads(bench, show, ""), rows).test("fuse-table"),
        el("p").class("hint").text(texts.fuse_note(status)),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_fuse_keeps_to_the_sizes_of_its_standard() {
        assert_eq!(next(Standard::Iec60127Sheet3, 1.0, true), 1.25);
        assert_eq!(next(Standard::Iec60127Sheet3, 0.063, false), 0.063);
        assert_eq!(fitting(Standard::Iec60127Sheet1, 20.0), 10.0);
        assert_eq!(fitting(Standard::Iec60127Sheet5, 0.05), 0.125);
        for standard in Standard::ALL {
            assert!(Fuse::new(standard, fitting(standard, Wish::default().rated_amps)).is_ok());
        }
    }
}
