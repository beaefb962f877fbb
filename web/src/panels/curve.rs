//! The bank's curve and the equipment's, meeting where the circuit settles; a chart, and the same in tables.

use std::rc::Rc;

use lampladder_core::band::Band;
use lampladder_core::curve::bank_amps;
use lampladder_core::setup::Setup;
use yew::{
    Html, Properties, function_component, html, use_effect_with, use_memo, use_node_ref, use_state_eq,
};

use crate::answers::Answers;
use crate::bench::{Bench, Theme};
use crate::browser::window::{Listener, width};
use crate::charts::curve::{Curves, draw};
use crate::charts::ink::Ink;
use crate::parts::el::{El, el};
use crate::parts::table::{banded, row_head, table};
use crate::words::Words;

/// Rows of the bank's own table.
const ROWS: u8 = 8;

/// The panel.
pub fn curve(bench: &Bench) -> El {
    let heads = &bench.words().table;
    let chart = html! {
        <Chart setup={bench.setup.clone()} answers={bench.answers.clone()} theme={bench.theme} words={bench.words} />
    };
    el("section")
        .class("curve")
        .set("aria-labelledby", "curve-title")
        .with(el("h2").set("id", "curve-title").text(heads.curve))
        .node(chart)
        .with(el("p").class("hint").text(heads.curve_means))
        .with(el("h3").text(heads.meet))
        .with(crossings(bench))
        .with(el("h3").text(heads.bank_curve))
        .with(bank_table(bench))
}

fn crossings(bench: &Bench) -> El {
    let words = bench.words();
    let heads = &words.table;
    let rows = bench.answers.all().iter().map(|(condition, _)| {
        let shown = bench.answers.shown(*condition);
        el("tr")
            .with(row_head(words.condition(*condition)))
            .with(banded(shown.map(|shown| &shown.bank_volts), "V", words))
            .with(banded(shown.map(|shown| &shown.amps), "A", words))
            .with(banded(shown.map(|shown| &shown.load_volts), "V", words))
    });
    let columns = [heads.condition, heads.bank_volts, heads.amps, heads.load_volts];
    table(&columns, rows.collect()).test("crossings")
}

fn bank_table(bench: &Bench) -> El {
    let words = bench.words();
    let heads = &words.table;
    let supply = bench.setup.supply.volts();
    let rows = (1..=ROWS).map(|row| {
        let volts = supply * f64::from(row) / f64::from(ROWS);
        let band = bank_amps(&bench.setup.bank, volts);
        el("tr")
            .with(row_head(words.numerals.value(&Band::exact(volts), "V")))
            .with(el("td").with(el("b").text(words.numerals.value(&band, "A"))))
            .with(el("td").text(words.numerals.range(&band, "A")))
    });
    table(&[heads.bank_volts, heads.amps, heads.band], rows.collect()).test("bank-curve")
}

/// What the chart shows.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct ChartProps {
    /// The set-up.
    pub setup: Rc<Setup>,
    /// The answers to it.
    pub answers: Rc<Answers>,
    /// In which light.
    pub theme: Theme,
    /// In which language.
    pub words: &'static Words,
}

/// The chart: drawn in an effect, on a canvas as fine as the screen.
#[function_component]
pub fn Chart(props: &ChartProps) -> Html {
    let canvas = use_node_ref();
    let words = props.words;
    let curves =
        use_memo((props.setup.clone(), props.answers.clone()), |(setup, answers)| Curves::of(setup, answers));
    let size = use_state_eq(width);
    {
        let size = size.clone();
        use_effect_with((), move |()| {
            let listener = Listener::on_window("resize", move |_| size.set(width()));
            move || drop(listener)
        });
    }
    {
        let canvas = canvas.clone();
        let drawn = (curves, props.theme, words, *size, Ink::now());
        use_effect_with(drawn, move |(curves, _, words, _, _)| {
            if let Some(canvas) = canvas.cast() {
                // A chart that cannot be drawn leaves the tables, which say the same. The colours are read here, after
                // the light of the page has been set.
                let _ = draw(&canvas, curves, &Ink::now(), words);
            }
        });
    }
    let chart = el("canvas").at(canvas).set("role", "img").test("chart");
    chart.set("aria-label", words.table.chart).html()
}
