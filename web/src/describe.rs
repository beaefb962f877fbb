//! A set-up and its results as text in the words of a language, for several panels.

use lampladder_core::condition::OVERLOAD;
use lampladder_core::detail::Detail;
use lampladder_core::family::Family;
use lampladder_core::lamp::Lamp;
use lampladder_core::setup::Setup;

use crate::draft::Place;
use crate::format::Numerals;
use crate::words::{Alike, Assumed, Words};

/// Volts and frequency of the supply.
pub fn supply(setup: &Setup, words: &Words) -> String {
    let volts = words.numerals.quantity(setup.supply.volts(), "V");
    if setup.supply.is_direct() {
        format!("{volts} {}", words.direct)
    } else {
        format!("{volts} {}", words.numerals.quantity(setup.supply.hertz(), "Hz"))
    }
}

/// The bank as wired.
pub fn bank(setup: &Setup, words: &Words) -> String {
    lamps(setup.bank.groups(), words)
}

/// Lamps as wired, group by group.
pub fn lamps(groups: &[Vec<Lamp>], words: &Words) -> String {
    let alike = |group: &Vec<Lamp>| {
        let mut all: Vec<Alike> = Vec::new();
        for lamp in group {
            let watts = words.numerals.plain(lamp.rated_watts());
            match all.iter_mut().find(|alike| alike.watts == watts) {
                Some(alike) => alike.count += 1,
                None => all.push(Alike { count: 1, watts }),
            }
        }
        all
    };
    let groups: Vec<_> = groups.iter().map(alike).collect();
    words.bank(&groups)
}

/// How large the equipment is, in the one number that it goes by.
pub fn size(setup: &Setup, words: &Words) -> String {
    let plate = &setup.plate;
    if plate.family() == Family::Measured {
        words.numerals.quantity(plate.detail(Detail::MeasuredOhms), "Ω")
    } else {
        // Watts that follow from printed amperes have a tail of digits that nobody printed.
        words.numerals.short_quantity(plate.watts(), "W")
    }
}

/// The bank on a small label.
pub fn short_bank(setup: &Setup, words: &Words) -> String {
    let text = bank(setup, words);
    if text.chars().count() > LABEL { words.lamps(setup.bank.lamp_count()) } else { text }
}

/// Most characters that a label on the loop holds in one line.
const LABEL: usize = 18;

/// One lamp by its place and rating.
pub fn lamp(setup: &Setup, place: Place, words: &Words) -> String {
    let lamp = setup.bank.groups().get(place.group).and_then(|group| group.get(place.lamp));
    let rating = lamp.map_or_else(String::new, |lamp| {
        let volts = words.numerals.quantity(lamp.rated_volts(), "V");
        format!("{volts} {}", words.numerals.quantity(lamp.rated_watts(), "W"))
    });
    words.lamp(place, setup.bank.lamp_count() == 1, &rating)
}

/// What the results take for granted.
pub fn assumed(setup: &Setup, words: &Words) -> Assumed {
    let Setup { plate, .. } = setup;
    let family = plate.family();
    let (least, most) = family.healthy_shares();
    let numerals = words.numerals;
    // A transformer's is what comes of its magnetising current, not an input.
    let power_factor = (family == Family::Plain)
        .then(|| plate.power_factor().map_or((family.usual_power_factor(), false), |value| (value, true)));
    Assumed {
        supply: supply(setup, words),
        bank: bank(setup, words),
        family: words.family(family).noun,
        plate_volts: numerals.quantity(plate.volts(), "V"),
        size: size(setup, words),
        shares: format!("{}\u{2013}{}", numerals.fixed(least * 100.0, 0), numerals.percent(most)),
        power_factor: power_factor.map(|(value, printed)| (numerals.plain(value), printed)),
        overload: numerals.plain(OVERLOAD),
    }
}

/// A lamp's life as a range of ratios, in a sentence or in a table.
pub fn life((least, most): (f64, f64), words: &Words, short: bool) -> String {
    let least = words.numerals.ratio(least);
    // Core cuts the ratio at a thousand.
    if most >= 1000.0 {
        words.life_over(&least, short)
    } else {
        words.life(&least, &words.numerals.ratio(most), short)
    }
}

/// A number in full, for whoever reads the page by program.
pub fn full(value: f64) -> String {
    Numerals { decimal: '.' }.fixed(value, 9).replace('\u{2212}', "-")
}
