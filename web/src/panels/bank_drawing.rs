//! A bank as it is wired: a row of groups, each a stack of lamps between two rails, every lamp in its own well.

use lampladder_core::lamp::Lamp;

use crate::bench::Bench;
use crate::browser::window::wants_stillness;
use crate::draft::Place;
use crate::flare;
use crate::format::Numerals;
use crate::parts::el::{El, drawing, el};
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
const ROOM: (f64, f64) = (50.0, 20.0);

/// A bank to be drawn.
pub(super) struct Drawn<'a> {
    /// Its lamps.
    pub(super) groups: &'a [Vec<Lamp>],
    /// What each of them does.
    pub(super) filament: &'a dyn Fn(Place) -> Filament,
    /// A name that no other drawing of the page has.
    pub(super) name: &'a str,
    /// How its figures are written.
    pub(super) numerals: Numerals,
}

/// The loop's bank, `height` high.
pub(super) fn bank_drawing(bench: &Bench, height: f64) -> El {
    let shown = bench.answers.shown(bench.condition);
    let filament = |place: Place| {
        let flare = flare::flare(bench, bench.condition, place);
        match shown.and_then(|shown| shown.lamps.get(place.group)?.get(place.lamp)) {
            Some(lamp) => Filament::Glowing(lamp.glow),
            None if flare.is_some() => {
                flare.map_or(Filament::Unknown, |flare| flare::filament(flare, wants_stillness()))
            }
            None if bench.answers.melting(bench.condition) == Some(place) => Filament::Broken,
            None => Filament::Unknown,
        }
    };
    let drawn = Drawn {
        groups: bench.setup.bank.groups(),
        filament: &filament,
        name: "loop",
        numerals: bench.words().numerals,
    };
    drawn.row(height)
}

#[expect(clippy::cast_precision_loss, reason = "at most eight lamps")]
fn count(number: usize) -> f64 {
    number as f64
}

impl Drawn<'_> {
    /// A drawing of its own, with the wire that it stands in.
    pub(super) fn alone(&self) -> El {
        let height = match self.groups.iter().map(Vec::len).max() {
            None | Some(0 | 1) => 54.0,
            Some(2) => 74.0,
            _ => 104.0,
        };
        let middle = n(TOP + height / 2.0);
        drawing("60 0 240 60")
            .class("wired")
            .put("viewBox", format!("60 0 240 {}", n(height + 2.0 * TOP)))
            .with(el("path").class("wire").put("d", format!("M 60 {middle} H 300")))
            .with(self.row(height))
    }

    fn row(&self, height: f64) -> El {
        let columns = count(self.groups.len());
        let gap = if columns > 3.0 { 6.0 } else { 12.0 };
        let width = ((WIDTH - gap * (columns - 1.0)) / columns).min(WIDEST);
        let left = MIDDLE - 0.5 * (width * columns + gap * (columns - 1.0));
        el("g").each(self.groups.iter().enumerate().map(|(column, group)| {
            let x = left + count(column) * (width + gap);
            self.stack(column, group, Well { x, y: TOP, width, height })
        }))
    }

    /// One group in its room.
    fn stack(&self, column: usize, group: &[Lamp], room: Well) -> El {
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
        let wire = |path: String| el("path").class("wire").put("d", path);
        let mut stack = el("g");
        if parallel {
            let (first, last) = (n(first), n(last));
            // The loop's own wire must not shine through between the lamps.
            let blank = format!("M {left} {first} H {right} V {last} H {left} Z");
            stack = stack
                .with(el("path").class("blank").put("d", blank))
                .with(wire(format!("M {left} {first} V {last} M {right} {first} V {last}")));
        }
        for (row, lamp) in group.iter().enumerate() {
            let y = middle(count(row));
            if parallel {
                stack = stack.with(wire(format!("M {left} {} H {right}", n(y))));
            }
            let at = Well { x: room.x + inset, y: y - height / 2.0, width, height };
            stack = stack.with(self.one(Place { group: column, lamp: row }, lamp, at));
        }
        stack
    }

    fn one(&self, place: Place, lamp: &Lamp, at: Well) -> El {
        let mixed = self.groups.iter().flatten().any(|other| other != lamp);
        let room = at.width >= ROOM.0 && at.height >= ROOM.1;
        let name = format!("{}-{}-{}", self.name, place.group, place.lamp);
        well(&name, at, (self.filament)(place)).maybe((mixed && room).then(|| {
            el("text")
                .class("rating")
                .put("x", n(at.x + at.width - 4.0))
                .put("y", n(at.y + at.height - 4.0))
                .text(self.numerals.plain(lamp.rated_watts()))
        }))
    }
}
