//! Where a circuit can come to rest in more than one way: every way, and what decides between them.

use lampladder_core::glow::Glow;
use lampladder_core::steady::Equilibrium;

use crate::answers::brighter;
use crate::bench::Bench;
use crate::describe::full;
use crate::parts::el::{El, el};
use crate::parts::well::{Filament, Well, lone};
use crate::words::fill;

const WELL: Well = Well { x: 0.0, y: 0.0, width: 96.0, height: 54.0 };

/// The ways of the condition on the loop; nothing where there is but one.
pub fn points(bench: &Bench) -> Option<El> {
    let words = bench.words();
    let stable = bench.answers.stable(bench.condition);
    if stable.len() < 2 {
        return None;
    }
    let condition = words.if_condition(bench.condition);
    let ways = stable.into_iter().enumerate().map(|(index, point)| way(bench, index, point));
    let list = el("ul").class("ways").each(ways);
    Some(el("section").test("ways").with(el("h2").text(words.ways(condition))).with(list))
}

fn way(bench: &Bench, index: usize, point: &Equilibrium) -> El {
    let words = bench.words();
    let mode = words.mode(point.mode);
    let glow = brightest(bench, point);
    let filament = glow.map_or(Filament::Unknown, Filament::Glowing);
    let glow = glow.map_or(words.none, |glow| words.glow(glow.word));
    let volts = words.numerals.about(point.bank_volts, "V");
    let amps = words.numerals.about(point.amps, "A");
    let figures = fill(words.way, &[glow, &volts, &amps]);
    let text = el("p").with(el("b").text(mode.name)).text(figures).text(" ").text(mode.decides);
    el("li")
        .test(point.mode.name())
        .put("data-amps", full(point.amps))
        .with(lone(&format!("way-{index}"), "0 0 96 54", WELL, filament))
        .with(text)
}

/// The glow of the lamp that is brightest against its own rating.
fn brightest(bench: &Bench, point: &Equilibrium) -> Option<Glow> {
    let groups = bench.setup.bank.groups().iter().zip(&point.lamps);
    let glows = groups
        .flat_map(|(group, states)| group.iter().zip(states).map(|(lamp, state)| lamp.glow(state.kelvin)));
    glows.reduce(|best, other| brighter(best, other, |glow| *glow))
}
