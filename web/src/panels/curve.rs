//! The bank's curve and the equipment's, meeting where the circuit settles; a chart, and the same in tables.

use lampladder_core::band::Band;
use lampladder_core::condition::Condition;
use lampladder_core::curve::bank_amps;
use yew::{Html, function_component, html, use_effect_with, use_memo, use_node_ref, use_state_eq};

use super::PanelProps;
use crate::bench::Bench;
use crate::browser::window::{Listener, width};
use crate::charts::curve::{Curves, draw};
use crate::charts::ink::Ink;

/// Rows of the bank's own table.
const ROWS: u8 = 8;

/// The curves.
#[function_component]
pub fn CurvePanel(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let table = words.table;
    let canvas = use_node_ref();
    let curves =
        use_memo((bench.setup.clone(), bench.answers.clone()), |(setup, answers)| Curves::of(setup, answers));
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
        let curves = curves.clone();
        let language = bench.language;
        let ink = Ink::now();
        use_effect_with((curves, ink, language, *size), move |(curves, ink, language, _)| {
            if let Some(canvas) = canvas.cast() {
                // A chart that cannot be drawn leaves the tables, which say the same.
                let _ = draw(&canvas, curves, ink, language.words());
            }
        });
    }
    html! {
        <section class="curve" aria-labelledby="curve-title">
            <h2 id="curve-title">{ table.curve }</h2>
            <canvas ref={canvas} role="img" aria-label={table.chart} data-testid="chart"></canvas>
            <p class="hint">{ table.curve_means }</p>
            { crossings(bench) }
            { bank_table(bench) }
        </section>
    }
}

fn crossings(bench: &Bench) -> Html {
    let words = bench.words();
    let table = words.table;
    let row = |condition: Condition| {
        let Some(shown) = bench.answers.shown(condition) else {
            return html! { <><td>{ words.none }</td><td>{ words.none }</td><td>{ words.none }</td></> };
        };
        let cell = |band: &Band, unit: &str| {
            html! {
                <td><b>{ words.numerals.value(band, unit) }</b><small>{ words.numerals.bare_range(band, unit) }</small></td>
            }
        };
        html! { <>{ cell(&shown.bank_volts, "V") }{ cell(&shown.amps, "A") }{ cell(&shown.load_volts, "V") }</> }
    };
    html! {
        <>
            <h3>{ table.meet }</h3>
            <div class="scroll">
                <table data-testid="crossings">
                    <thead><tr>
                        <th scope="col">{ table.condition }</th>
                        <th scope="col">{ table.bank_volts }</th>
                        <th scope="col">{ table.amps }</th>
                        <th scope="col">{ table.load_volts }</th>
                    </tr></thead>
                    <tbody>
                        { for bench.answers.all().iter().map(|(condition, _)| html! {
                            <tr><th scope="row">{ (words.condition)(*condition) }</th>{ row(*condition) }</tr>
                        }) }
                    </tbody>
                </table>
            </div>
        </>
    }
}

fn bank_table(bench: &Bench) -> Html {
    let words = bench.words();
    let table = words.table;
    let supply = bench.setup.supply.volts();
    let volts = (1..=ROWS).map(|row| supply * f64::from(row) / f64::from(ROWS));
    html! {
        <>
            <h3>{ table.bank_curve }</h3>
            <div class="scroll">
                <table data-testid="bank-curve">
                    <thead><tr>
                        <th scope="col">{ table.bank_volts }</th>
                        <th scope="col">{ table.amps }</th>
                        <th scope="col">{ table.band }</th>
                    </tr></thead>
                    <tbody>
                        { for volts.map(|volts| {
                            let band = bank_amps(&bench.setup.bank, volts);
                            html! {
                                <tr>
                                    <th scope="row">{ words.numerals.value(&Band::exact(volts), "V") }</th>
                                    <td><b>{ words.numerals.value(&band, "A") }</b></td>
                                    <td>{ words.numerals.range(&band, "A") }</td>
                                </tr>
                            }
                        }) }
                    </tbody>
                </table>
            </div>
        </>
    }
}
