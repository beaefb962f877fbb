//! What a pulsing lamp looks like at its brightest.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::glow::Glow;

use crate::answers::brighter;
use crate::bench::Bench;
use crate::draft::Place;
use crate::parts::well::Filament;

/// The flare of the lamp at a place in a condition, with how long it is to the next, seconds.
pub fn flare(bench: &Bench, condition: Condition, place: Place) -> Option<(Glow, f64)> {
    let pulse = bench.pulse(condition)?;
    let groups = bench.setup.bank.groups();
    let index = groups.iter().take(place.group).map(Vec::len).sum::<usize>() + place.lamp;
    let lamp = groups.get(place.group)?.get(place.lamp)?;
    Some((lamp.glow(*pulse.brightest_kelvin.get(index)?), pulse.period_seconds))
}

/// The flare of the lamp that becomes the brightest.
pub fn brightest(bench: &Bench, condition: Condition) -> Option<(Glow, f64)> {
    let flares = places(&bench.setup.bank).filter_map(|place| flare(bench, condition, place));
    flares.reduce(|best, other| brighter(best, other, |(glow, _)| *glow))
}

/// A flare as a filament: still for those who want stillness.
pub fn filament((glow, seconds): (Glow, f64), still: bool) -> Filament {
    if still { Filament::Glowing(glow) } else { Filament::Pulsing { glow, seconds } }
}

fn places(bank: &Bank) -> impl Iterator<Item = Place> {
    let groups = bank.groups().iter().enumerate();
    groups.flat_map(|(group, lamps)| (0..lamps.len()).map(move |lamp| Place { group, lamp }))
}
