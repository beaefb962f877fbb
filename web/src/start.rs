//! What the page opens with: the address first, then what was kept on this phone, then an example.

use lampladder_core::link::{self, LinkError};
use lampladder_core::setup::Setup;

use crate::bench::{Bench, Note, Stage};
use crate::browser::window::clock;
use crate::browser::{fragment, storage, theme};
use crate::climb::{Climb, equipment};
use crate::meter;
use crate::opening::{Mine, may_hold_more};
use crate::seen::Seen;
use crate::visit;
use crate::words::Words;

/// What is kept on this phone, as far as it can be read.
pub fn mine() -> Mine {
    Mine {
        setup: storage::read(storage::SETUP).and_then(|text| link::decode(&text).ok()),
        stock: storage::read(storage::STOCK).and_then(|text| link::decode_stock(&text).ok()),
        climb: storage::read(storage::CLIMB),
    }
}

/// The first state.
pub fn bench(words: &'static Words) -> Option<Bench> {
    let mut bench = opened(words, fragment::read().as_deref(), storage::read(storage::SETUP).as_deref())?;
    bench.theme = theme::kept();
    let meter = storage::read(storage::METER).and_then(|text| meter::from_kept(&text));
    bench.seen = Seen::new(meter.unwrap_or_default(), bench.words().numerals);
    remember(&mut bench, storage::read(storage::STOCK).as_deref(), storage::read(storage::CLIMB).as_deref());
    bench.climb.now = clock();
    if storage::read_for_visit(storage::ACCEPTED).is_some() {
        bench.stage = Stage::Bench;
    }
    if let Some(text) = storage::read_for_visit(storage::VISIT) {
        bench.tab = visit::front(&text);
    }
    Some(bench)
}

/// The state for an address and a kept text; bad ones fall back with a note and stay where they are.
pub fn opened(words: &'static Words, address: Option<&str>, kept: Option<&str>) -> Option<Bench> {
    let open = |text: &str| {
        let setup = link::decode(text)?;
        Bench::with(setup, words).map_err(LinkError::Refused)
    };
    let mut notes = Vec::new();
    let from_link =
        address.and_then(|text| open(text).map_err(|error| notes.push(Note::BadLink(error))).ok());
    let from_kept = kept.and_then(|text| {
        // What is kept and bad is no news while a good link is open; it stays as it is all the same.
        open(text)
            .map_err(|error| {
                if from_link.is_none() {
                    notes.push(Note::BadKept(error));
                }
            })
            .ok()
    });
    if let (Some(link), Some(kept)) = (&from_link, &from_kept)
        && link.setup != kept.setup
    {
        notes.push(Note::FromLink);
    }
    let mut bench = match from_link.or(from_kept) {
        Some(bench) => bench,
        None => Bench::with(Setup::example().ok()?, words).ok()?,
    };
    // Until something is changed the address stays: what is behind the set-up is nowhere else.
    let is_open =
        |text: &&str| may_hold_more(text) && !notes.iter().any(|note| matches!(note, Note::BadLink(_)));
    bench.link = address.filter(is_open).map(Into::into);
    bench.notes = notes;
    Some(bench)
}

/// Puts the kept lamps and the kept position in; what cannot be read stays where it is until something is changed.
pub fn remember(bench: &mut Bench, stock: Option<&str>, climb: Option<&str>) {
    match stock.map(link::decode_stock) {
        Some(Ok(stock)) => bench.drawer.stock = stock.into(),
        Some(Err(error)) => bench.notes.push(Note::BadKept(error)),
        None => {}
    }
    if let Some(climb) = climb {
        bench.climb = Climb::restored(climb, &equipment(&bench.setup));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;

    fn link_of(volts: f64) -> String {
        let mut setup = Setup::example().expect("in range");
        setup.supply = lampladder_core::supply::Supply::new(volts, 50.0, 0.0).expect("in range");
        link::encode(&setup)
    }

    fn volts(bench: &Bench) -> f64 {
        bench.setup.supply.volts()
    }

    #[test]
    fn the_address_comes_before_what_was_kept_and_that_before_the_example() {
        let (first, second) = (link_of(120.0), link_of(110.0));
        let opened = |address, kept| opened(english(), address, kept).expect("opens");
        let both = opened(Some(&first), Some(&second));
        assert_eq!((volts(&both), both.notes.as_slice()), (120.0, [Note::FromLink].as_slice()));
        assert!(opened(Some(&first), Some(&first)).notes.is_empty());
        assert_eq!(volts(&opened(None, Some(&second))), 110.0);
        let none = opened(None, None);
        assert_eq!((volts(&none), none.notes.len()), (230.0, 0));
    }

    #[test]
    fn bad_links_fall_back_and_say_so() {
        let good = link_of(110.0);
        for (bad, error) in
            [("9zzz", LinkError::Newer), ("junk", LinkError::Damaged), ("1", LinkError::Damaged)]
        {
            let bench = opened(english(), Some(bad), Some(&good)).expect("opens");
            assert_eq!((volts(&bench), bench.notes.as_slice()), (110.0, [Note::BadLink(error)].as_slice()));
            let bench = opened(english(), None, Some(bad)).expect("opens");
            assert_eq!((volts(&bench), bench.notes.as_slice()), (230.0, [Note::BadKept(error)].as_slice()));
        }
    }

    #[test]
    fn a_link_whose_parts_do_not_go_together_is_refused() {
        let mut setup = Setup::example().expect("in range");
        setup.supply = lampladder_core::supply::Supply::new(110.0, 0.0, 0.0).expect("in range");
        let bench = opened(english(), Some(&link::encode(&setup)), None).expect("opens");
        assert!(matches!(bench.notes[..], [Note::BadLink(LinkError::Refused(_))]));
    }
}
