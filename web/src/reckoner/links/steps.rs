//! The position on the ladder: as the phone keeps it, with texts as typed, and as it is handed on, in numbers.

use lampladder_core::hand_on::{Position, PositionSpec, Step};
use lampladder_core::setup::Setup;

use crate::climb::{Climb, LEADS, Stand, equipment};
use crate::entry::{Entry, OVER_RANGE};
use crate::format::Numerals;

/// The checks that are handed on, in core's order.
const CHECKS: [Entry; 6] = [
    Entry::ProtectiveOhms,
    Entry::InsulationOhms,
    Entry::PlugOhms,
    Entry::Farads,
    Entry::BleedOhms,
    Entry::StartVolts,
];

/// What stands in a kept climb; what is typed and is no number stays behind.
pub(super) fn position(kept: &str, setup: &Setup) -> Option<Position> {
    let climb = Climb::restored(kept, &equipment(setup));
    let step = match climb.at {
        Stand::Lamps => Step::Lamps,
        Stand::Checks => Step::Checks,
        Stand::Rung(rung) => Step::Rung(u8::try_from(rung).ok()?),
        Stand::Mains => Step::Mains,
        Stand::After => Step::After,
    };
    let spec = PositionSpec {
        step,
        class: climb.class,
        lead_metres: LEADS[climb.lead],
        looked_over: climb.looked,
        checks: CHECKS.map(|entry| climb.number(entry)),
    };
    Position::from_spec(spec).ok()
}

/// The climb, as the phone keeps it.
pub(super) fn climb(position: &Position, setup: &Setup, decimal: char) -> String {
    let spec = position.spec();
    let at = match spec.step {
        Step::Lamps => Stand::Lamps,
        Step::Checks => Stand::Checks,
        Step::Rung(rung) => Stand::Rung(rung.into()),
        Step::Mains => Stand::Mains,
        Step::After => Stand::After,
    };
    // The next longer one of those that there are: the limit is the wider, and nobody is sent to look for a fault.
    let lead = LEADS.iter().position(|metres| *metres >= spec.lead_metres).unwrap_or(LEADS.len() - 1);
    let mut climb = Climb { at, class: spec.class, lead, looked: spec.looked_over, ..Climb::default() };
    for (entry, value) in CHECKS.into_iter().zip(spec.checks) {
        if let Some(value) = value {
            climb.set(entry, &text(entry, value, Numerals { decimal }));
        }
    }
    climb.kept(&equipment(setup))
}

fn text(entry: Entry, value: f64, numerals: Numerals) -> String {
    match entry {
        _ if value == f64::INFINITY => String::from(OVER_RANGE),
        // No person writes the zeros.
        Entry::Farads => numerals.plain(value * 1e6) + " µF",
        _ => numerals.plain(value),
    }
}
