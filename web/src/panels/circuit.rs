//! The circuit as what it is: one closed loop of supply, lamps and equipment. Every part of it is a button.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use yew::{Html, function_component, html};

use super::bank_drawing::{TOP, bank_drawing};
use super::{PanelProps, send};
use crate::bench::{Bench, Msg, Part};
use crate::describe;
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
#[function_component]
pub fn Circuit(props: &PanelProps) -> Html {
    let bench = &*props.bench;
    let words = bench.words();
    let plan = plan(&bench.setup.bank);
    let supply = describe::supply(&bench.setup, words);
    let bank = describe::bank(&bench.setup, words);
    let short_bank = describe::short_bank(&bench.setup, words);
    let size = describe::size(&bench.setup, words);
    let part = |part: Part, class: &'static str, testid: &'static str, shown: &str, heard: &str| {
        html! {
            <button type="button" {class} data-testid={testid} aria-label={(words.change)(part, heard)}
                aria-expanded={if bench.open == Some(part) { "true" } else { "false" }}
                onclick={send(&props.bench, Msg::Open(part))}>
                <span class="tag">{ shown }</span>
            </button>
        }
    };
    let volts = words.numerals.quantity(bench.setup.supply.volts(), "V");
    let family = (words.family)(bench.setup.plate.family()).name;
    html! {
        <section class={plan.class} aria-label={(words.circuit)(&supply, &bank, &size)}>
            <svg viewBox={format!("0 0 {} {}", n(WIDTH), n(plan.height))} aria-hidden="true" focusable="false">
                { wires(&plan) }
                { supply_sign(&plan, bench.setup.supply.is_direct()) }
                { equipment(&plan, bench) }
                { bank_drawing(bench, plan.bank_height) }
            </svg>
            { part(Part::Supply, "part part-supply", "edit-supply", &volts, &supply) }
            { part(Part::Bank, "part part-bank", "edit-bank", &short_bank, &bank) }
            { part(Part::Equipment, "part part-load", "edit-equipment", &size, &format!("{family}, {size}")) }
            { reading(bench) }
        </section>
    }
}

/// The answer, in the middle of the loop.
fn reading(bench: &Bench) -> Html {
    let words = bench.words();
    let shown = bench.answers.shown(bench.condition);
    let condition = (words.if_condition)(bench.condition);
    let testid = "result-amps";
    html! {
        <p class="reading">
            if let Some(shown) = shown {
                <b data-testid={testid} data-value={describe::full(shown.amps.value)}
                    data-low={describe::full(shown.amps.low)} data-high={describe::full(shown.amps.high)}>
                    { words.numerals.value(&shown.amps, "A") }
                </b>
                <span>{ words.numerals.range(&shown.amps, "A") }</span>
            } else {
                <b data-testid={testid}>{ words.none }</b>
            }
            <span class={if bench.condition == Condition::Healthy { "" } else { "alarm" }}>{ condition }</span>
            if bench.is_stale() { <span class="stale-mark" data-testid="stale">{ words.stale_mark }</span> }
        </p>
    }
}

fn wires(plan: &Plan) -> Html {
    let top = TOP + plan.bank_height / 2.0;
    let bottom = plan.height - 12.0;
    let path = format!(
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
    html! {
        <>
            <path class="wire" d={path} />
            <path class="arrow" d={arrow} />
        </>
    }
}

fn supply_sign(plan: &Plan, direct: bool) -> Html {
    let (x, y) = (SUPPLY_X, plan.centre);
    let sign = if direct {
        format!(
            "M {a} {y1} h 30 M {a} {y2} h 7 m 4.5 0 h 7 m 4.5 0 h 7",
            a = n(x - 15.0),
            y1 = n(y - 9.0),
            y2 = n(y - 1.0)
        )
    } else {
        format!("M {} {} q 8 -17 16 0 t 16 0", n(x - 16.0), n(y - 4.0))
    };
    let top = TOP + plan.bank_height / 2.0;
    html! {
        <>
            <circle class="body" cx={n(x)} cy={n(y)} r="31" />
            <path class="wire" d={sign} />
            // The lamps belong in the line conductor; a direct source has a plus there.
            <text class="terminal" x={n(x - 12.0)} y={n(top + 15.0)}>{ if direct { "+" } else { "L" } }</text>
            <text class="terminal" x={n(x - 12.0)} y={n(plan.height - 14.0)}>{ if direct { "−" } else { "N" } }</text>
        </>
    }
}

fn equipment(plan: &Plan, bench: &Bench) -> Html {
    let (x, y) = (LOAD_X, plan.centre);
    html! {
        <>
            <rect class="body" x={n(x - 39.0)} y={n(y - 33.0)} width="78" height="66" rx="12" />
            <g transform={format!("translate({} {})", n(x - 27.0), n(y - 27.0))}>
                <g transform="scale(1.12)">{ picture::family(bench.setup.plate.family()) }</g>
            </g>
        </>
    }
}
