//! What is typed or tapped and belongs to this visit: it outlives a reload of the page, such as the one to a new version.
//! Pure.
//!
//! Lines of text: a version; panel, look and behaviour as numbers; the readings as typed; then the fields of a set-up
//! that cannot be read yet, each with its place in the bank (`-` where it has none), its name and its text.

use lampladder_core::detail::Detail;
use lampladder_core::glow::GlowWord;
use lampladder_core::readings::{Behaviour, Kind};

use crate::bench::{Bench, Msg, Tab};
use crate::draft::{Draft, LampPart, Place, Slot};
use crate::parts::field::slug;

/// What the text begins with.
const VERSION: &str = "1";
const TABS: [Tab; 6] = [Tab::Expect, Tab::Ladder, Tab::Seen, Tab::SwitchOn, Tab::Curve, Tab::HandOn];
const PLAIN: [Slot; 8] = [
    Slot::SupplyVolts,
    Slot::SupplyHertz,
    Slot::SupplyOhms,
    Slot::PlateVolts,
    Slot::PlateWatts,
    Slot::PlateAmps,
    Slot::PlateVoltAmps,
    Slot::PlatePowerFactor,
];
const OF_A_LAMP: [LampPart; 4] = [LampPart::Volts, LampPart::Watts, LampPart::Lumens, LampPart::ColdOhms];

/// The fields of a set-up; measured points are left out.
fn slots(draft: &Draft) -> Vec<Slot> {
    let mut all = PLAIN.to_vec();
    all.extend(Detail::ALL.map(Slot::Detail));
    for (group, lamps) in draft.groups.iter().enumerate() {
        for lamp in 0..lamps.len() {
            all.extend(OF_A_LAMP.map(|part| Slot::Lamp(Place { group, lamp }, part)));
        }
    }
    all
}

/// The place and the name of a field.
fn name(slot: Slot) -> String {
    match slot {
        Slot::Lamp(place, _) => format!("{}.{} {}", place.group, place.lamp, slug(slot)),
        _ => format!("- {}", slug(slot)),
    }
}

/// Where something is in a list, from 1; 0 for nothing.
fn number<T: PartialEq>(all: &[T], one: Option<&T>) -> usize {
    one.and_then(|one| all.iter().position(|other| other == one)).map_or(0, |at| at + 1)
}

/// The visit as a text.
pub fn kept(bench: &Bench) -> String {
    let sheet = &bench.seen.sheet;
    let tab = number(&TABS, Some(&bench.tab));
    let look = number(&GlowWord::ALL, sheet.look.as_ref());
    let behaviour = number(&Behaviour::ALL, sheet.behaviour.as_ref());
    let mut text = format!("{VERSION}\n{tab} {look} {behaviour}");
    for typed in &sheet.numbers {
        text = text + "\n" + typed;
    }
    if bench.is_stale() {
        // What can be read is kept as the set-up; this is what a person has typed beyond it.
        let valid = Draft::of(&bench.setup, bench.words().numerals);
        for slot in slots(&bench.draft) {
            let typed = bench.draft.text(slot);
            if typed != valid.text(slot) {
                text = text + "\n" + &name(slot) + " " + typed;
            }
        }
    }
    text
}

/// The panel that was in front: the page opens with it, and with the rest when its program has come.
pub fn front(text: &str) -> Tab {
    let digit = text.strip_prefix("1\n").and_then(|text| text.bytes().next()).unwrap_or_default();
    TABS.get(usize::from(digit.wrapping_sub(b'1'))).copied().unwrap_or(Tab::Expect)
}

/// The state with all else of a kept visit in it; what cannot be read is left out.
#[must_use]
pub fn restored(mut bench: Bench, text: &str) -> Bench {
    let mut lines = text.split('\n');
    if lines.next() != Some(VERSION) {
        return bench;
    }
    let mut taps = lines.next().unwrap_or_default().split(' ').skip(1);
    let mut index = || taps.next()?.parse::<usize>().ok()?.checked_sub(1);
    bench.seen.sheet.look = index().and_then(|at| GlowWord::ALL.get(at)).copied();
    bench.seen.sheet.behaviour = index().and_then(|at| Behaviour::ALL.get(at)).copied();
    for kind in Kind::ALL {
        bench.seen.set(Slot::Reading(kind), lines.next().unwrap_or_default().to_owned());
    }
    bench.seen.reread(&bench.setup);
    for line in lines {
        let found = slots(&bench.draft).into_iter().find_map(|slot| {
            let typed = line.strip_prefix(&name(slot))?.strip_prefix(' ')?;
            Some((slot, typed.to_owned()))
        });
        if let Some((slot, typed)) = found {
            bench = bench.after(Msg::Type(slot, typed));
        }
    }
    bench
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;
    use lampladder_core::setup::Setup;

    fn bench() -> Bench {
        Bench::with(Setup::example().expect("in range"), english()).expect("opens")
    }

    #[test]
    fn what_is_typed_and_tapped_comes_back() {
        let mut before = bench();
        for (slot, text) in [
            (Slot::Reading(Kind::BankVolts), "67,5 V"),
            (Slot::Reading(Kind::Amps), "about 3"),
            (Slot::SupplyVolts, "two hundred  and 30"),
            (Slot::PlateWatts, "75"),
            (Slot::Lamp(Place::default(), LampPart::Watts), ""),
        ] {
            before = before.after(Msg::Type(slot, text.to_owned()));
        }
        before.tab = Tab::Seen;
        before.seen.sheet.look = Some(GlowWord::Amber);
        before.seen.sheet.behaviour = Some(Behaviour::Pulsing);
        let text = kept(&before);
        let after = restored(Bench { tab: front(&text), ..bench() }, &text);
        assert_eq!(after.seen.sheet, before.seen.sheet);
        assert_eq!((after.tab, after.is_stale()), (Tab::Seen, true));
        assert_eq!(after.draft, before.draft);
        assert_eq!(after.faults, before.faults);
    }

    #[test]
    fn an_empty_visit_and_one_that_cannot_be_read_change_nothing() {
        let plain = bench();
        for text in [
            kept(&plain).as_str(),
            "",
            "2\n3 1 1",
            "1",
            "1\n9 99 x",
            "1\n1 0 0\n\n\n\n\n\n\n7.7 lamp-watts 5",
        ] {
            let after = restored(Bench { tab: front(text), ..bench() }, text);
            assert_eq!((&after.draft, &after.seen.sheet), (&plain.draft, &plain.seen.sheet), "{text}");
            assert_eq!((after.tab, after.is_stale(), after.edited), (Tab::Expect, false, false), "{text}");
        }
    }

    #[test]
    fn a_visit_of_the_first_version_is_read() {
        // As the first page with visits wrote it.
        let text = "1\n3 4 2\n230\n67 V\n\n160 mA\n\n45\n- supply-volts lots";
        let after = restored(bench(), text);
        assert_eq!((front(text), after.seen.sheet.look), (Tab::Seen, Some(GlowWord::Orange)));
        assert_eq!(after.seen.sheet.behaviour, Some(Behaviour::FlashThenDim));
        assert_eq!(after.seen.sheet.numbers, ["230", "67 V", "", "160 mA", "", "45"]);
        assert_eq!(after.text(Slot::SupplyVolts), "lots");
    }
}
