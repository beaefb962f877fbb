//! The bank as it is wired: a row of groups, each a stack of lamps between two rails, every lamp in its own well.

use lampladder_core::lamp::Lamp;
use yew::{Html, html};

use crate::bench::Bench;
use crate::draft::Place;
use crate::parts::svg::n;
use crate::parts::well::{Filament, Well, well};

/// Top edge of the bank, user units.
pub(super) const TOP: f64 = 3.0;
/// Its middle, and how wide it may be.
const MIDDLE: f64 = 180.0;
const WIDTH: f64 = 186.0;
/// A well's greatest width.
const WIDEST: f64 = 100.0;
/// From this size on there is room for a lamp's watts in its well.
const ROOM: (f64, f64) = (36.0, 18.0);

/// The bank, `height` high.
pub(super) fn bank_drawing(bench: &Bench, height: f64) -> Html {
    let groups = bench.setup.bank.groups();
    let columns = count(groups.len());
    let gap = if columns > 3.0 { 6.0 } else { 12.0 };
    let width = ((WIDTH - gap * (columns - 1.0)) / columns).min(WIDEST);
    let left = MIDDLE - 0.5 * (width * columns + gap * (columns - 1.0));
    html! {
        { for groups.iter().enumerate().map(|(column, group)| {
            let x = left + count(column) * (width + gap);
            stack(bench, column, group, Well { x, y: TOP, width, height })
        }) }
    }
}

#[expect(clippy::cast_precision_loss, reason = "at most eight lamps")]
fn count(number: usize) -> f64 {
    number as f64
}

/// One group in its room.
fn stack(bench: &Bench, column: usize, group: &[Lamp], room: Well) -> Html {
    let rows = count(group.len());
    let parallel = group.len() > 1;
    let between = if rows > 4.0 { 3.0 } else { 5.0 };
    let most = (room.height - between * (rows - 1.0)) / rows;
    let inset = if parallel { (room.width * 0.08).min(8.0) } else { 0.0 };
    let width = room.width - 2.0 * inset;
    // A chain of eight leaves each lamp a strip: better small than stretched.
    let height = most.min(width * 1.5).min(if parallel { width * 0.6 } else { f64::MAX });
    let top = room.y + (room.height - height * rows - between * (rows - 1.0)) / 2.0;
    let middle = |row: f64| top + row * (height + between) + height / 2.0;
    let (left, right) = (n(room.x), n(room.x + room.width));
    let (first, last) = (middle(0.0), middle(rows - 1.0));
    html! {
        <g>
            if parallel {
                // The loop's own wire must not shine through between the lamps.
                <rect class="blank" x={left.clone()} y={n(first)} width={n(room.width)} height={n(last - first)} />
                <path class="wire" d={format!("M {left} {0} V {1} M {right} {0} V {1}", n(first), n(last))} />
            }
            { for group.iter().enumerate().map(|(row, lamp)| {
                let y = middle(count(row));
                let at = Well { x: room.x + inset, y: y - height / 2.0, width, height };
                html! {
                    <>
                        if parallel { <path class="wire" d={format!("M {left} {} H {right}", n(y))} /> }
                        { one(bench, Place { group: column, lamp: row }, lamp, at) }
                    </>
                }
            }) }
        </g>
    }
}

fn one(bench: &Bench, place: Place, lamp: &Lamp, at: Well) -> Html {
    let shown = bench.answers.shown(bench.condition);
    let filament = match shown.and_then(|shown| shown.lamps.get(place.group)?.get(place.lamp)) {
        Some(lamp) => Filament::Glowing(lamp.glow),
        None if bench.answers.melting(bench.condition) == Some(place) => Filament::Broken,
        None => Filament::Unknown,
    };
    let mixed = bench.setup.bank.groups().iter().flatten().any(|other| other != lamp);
    let room = at.width >= ROOM.0 && at.height >= ROOM.1;
    html! {
        <>
            { well(&format!("loop-{}-{}", place.group, place.lamp), at, filament) }
            if mixed && room {
                <text class="rating" x={n(at.x + at.width - 4.0)} y={n(at.y + at.height - 4.0)}>
                    { bench.words().numerals.plain(lamp.rated_watts()) }
                </text>
            }
        </>
    }
}
