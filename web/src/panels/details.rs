//! Everything that the comparison knows, in figures: bands, power, each lamp's filament and life, assumptions.

use lampladder_core::condition::Condition;
use lampladder_core::expect::Shown;
use yew::{Html, function_component, html};

use super::PanelProps;
use crate::bench::Bench;
use crate::describe;
use crate::draft::Place;

/// The details.
#[function_component]
pub fn Details(props: &PanelProps) -> Html {
    let bench = &*props.bench;
    let words = bench.words();
    let table = words.table;
    let several = bench.setup.bank.lamp_count() > 1;
    html! {
        <section class="details" aria-labelledby="details-title">
            <h2 id="details-title">{ table.details }</h2>
            <div class="scroll">
                <table>
                    <thead><tr>
                        <th scope="col">{ table.condition }</th>
                        <th scope="col">{ table.amps }</th>
                        <th scope="col">{ table.short_bank_volts }</th>
                        <th scope="col">{ table.short_load_volts }</th>
                        <th scope="col">{ table.load_watts }</th>
                    </tr></thead>
                    <tbody>{ for bench.answers.all().iter().map(|(condition, _)| row(bench, *condition)) }</tbody>
                </table>
            </div>
            <h2>{ table.every_lamp }</h2>
            <div class="scroll">
                <table>
                    <thead><tr>
                        <th scope="col">{ table.condition }</th>
                        if several { <th scope="col">{ table.lamp }</th> }
                        <th scope="col">{ table.volts }</th>
                        <th scope="col">{ table.glow }</th>
                        <th scope="col">{ table.kelvin }</th>
                        <th scope="col">{ table.short_life }</th>
                    </tr></thead>
                    <tbody>{ for bench.answers.all().iter().map(|(condition, _)| lamp_rows(bench, *condition)) }</tbody>
                </table>
            </div>
            <h2>{ table.assumed }</h2>
            <ul>
                { for (words.assumptions)(&describe::assumed(&bench.setup, words)).into_iter().map(|line| html! {
                    <li>{ line }</li>
                }) }
                <li>{ words.band_note }</li>
                <li>{ words.life_source }</li>
            </ul>
        </section>
    }
}

fn row(bench: &Bench, condition: Condition) -> Html {
    let words = bench.words();
    let name = (words.condition)(condition);
    let range = |pick: fn(&Shown) -> &lampladder_core::band::Band, unit: &str| {
        let Some(shown) = bench.answers.shown(condition) else { return html! { <td>{ words.none }</td> } };
        let band = pick(shown);
        html! {
            <td><b>{ words.numerals.value(band, unit) }</b><small>{ words.numerals.bare_range(band, unit) }</small></td>
        }
    };
    html! {
        <tr>
            <th scope="row">
                { name }
                <small>{ (words.condition_means)(condition, &words.numerals.plain(lampladder_core::condition::OVERLOAD)) }</small>
            </th>
            { range(|shown| &shown.amps, "A") }
            { range(|shown| &shown.bank_volts, "V") }
            { range(|shown| &shown.load_volts, "V") }
            { range(|shown| &shown.load_watts, "W") }
        </tr>
    }
}

fn lamp_rows(bench: &Bench, condition: Condition) -> Html {
    let words = bench.words();
    let Some(shown) = bench.answers.shown(condition) else { return Html::default() };
    let lamps = shown.lamps.iter().enumerate().flat_map(|(group, lamps)| {
        lamps.iter().enumerate().map(move |(lamp, shown)| (Place { group, lamp }, shown))
    });
    html! {
        { for lamps.map(|(place, lamp)| html! {
            <tr>
                <th scope="row">{ (words.condition)(condition) }</th>
                if bench.setup.bank.lamp_count() > 1 { <td>{ describe::lamp(&bench.setup, place, words) }</td> }
                <td>{ words.numerals.fixed(lamp.state.volts, 0) }{ "\u{a0}V" }</td>
                <td>{ (words.glow_range)(lamp.dimmest.word, lamp.brightest.word) }</td>
                <td class="whole">{ words.numerals.range(&lamp.kelvin, "K") }</td>
                <td class="whole" data-testid="life">{ describe::life(lamp.life, words, true) }</td>
            </tr>
        }) }
    }
}
