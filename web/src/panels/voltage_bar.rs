//! How lamps and equipment part the supply's voltage; where the two add to more than it, they overlap.

use yew::{Html, function_component, html, use_state_eq};

use super::PanelProps;
use crate::parts::svg::n;

/// From here on the two voltages visibly add to more than the supply.
const OVERLAP: f64 = 1.01;

/// The bar, and on a tap the reason why it looks as it does.
#[function_component]
pub fn VoltageBar(props: &PanelProps) -> Html {
    let bench = &props.bench;
    let words = bench.words();
    let open = use_state_eq(|| false);
    let Some(shown) = bench.answers.shown(bench.condition) else { return Html::default() };
    let supply = bench.setup.supply.volts();
    let share = |volts: f64| (volts / supply).clamp(0.0, 1.0);
    let (lamp, load) = (share(shown.bank_volts.value), share(shown.load_volts.value));
    let overlaps = lamp + load > OVERLAP;
    let bank_text = words.numerals.value(&shown.bank_volts, "V");
    let load_text = words.numerals.value(&shown.load_volts, "V");
    let supply_text = words.numerals.quantity(supply, "V");
    let why = if overlaps { words.overlap } else { words.adds_up };
    let several = bench.setup.bank.lamp_count() > 1;
    let toggle = {
        let open = open.clone();
        move |_| open.set(!*open)
    };
    let from = 1000.0 * (1.0 - load);
    let to = 1000.0 * lamp;
    html! {
        <div class="split">
            <button type="button" class="split-bar" data-testid="voltage-bar" onclick={toggle}
                aria-expanded={if *open { "true" } else { "false" }} aria-controls="split-why">
                <span class="split-names">
                    <span>{ (words.across_bank)(several) }{ " " }<b>{ bank_text.clone() }</b></span>
                    if overlaps { <i class="split-why">{ words.why }</i> }
                    <span>{ words.across_load }{ " " }<b>{ load_text.clone() }</b>{ " · " }{ words.numerals.percent(shown.load_volts.value / supply) }</span>
                </span>
                <svg viewBox="0 0 1000 34" preserveAspectRatio="none" aria-hidden="true" focusable="false">
                    <defs>
                        <pattern id="hatch" width="14" height="34" patternUnits="userSpaceOnUse">
                            <path class="hatch" d="M-4 34 L10 0 M10 34 L24 0" />
                        </pattern>
                    </defs>
                    <rect class="bar-load" x={n(from)} y="0" width={n(1000.0 - from)} height="34" />
                    <rect class="bar-lamp" x="0" y="0" width={n(to)} height="34" />
                    if overlaps && to > from {
                        <rect class="bar-both" x={n(from)} y="0" width={n(to - from)} height="34" />
                        <rect fill="url(#hatch)" x={n(from)} y="0" width={n(to - from)} height="34" />
                    }
                </svg>
            </button>
            <p class="why" id="split-why" data-testid="voltage-why" hidden={!*open}>
                { why(&bank_text, &load_text, &supply_text) }
            </p>
        </div>
    }
}
