//! Opening what a colleague hands on: all of it is there, and nothing that was here is lost.

use lampladder_core::hand_on::HandedOn;
use lampladder_core::lamp::Lamp;
use lampladder_core::link::{self, Spelling, encode_all};
use lampladder_core::readings::{Kind, MeterSpec};
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_web::bench::{Bench, Msg, Note};
use lampladder_web::climb::{Climb, Move, Stand, equipment};
use lampladder_web::draft::Slot;
use lampladder_web::drawer::Shelf;
use lampladder_web::log::Record;
use lampladder_web::opening::Mine;
use lampladder_web::reckoner::links::Opened;
use lampladder_web::seen::Deed;
use lampladder_web::start;
use lampladder_web::words::english;

fn setup(volts: f64) -> Setup {
    Setup { supply: Supply::new(volts, 50.0, 0.0).expect("in range"), ..Setup::example().expect("in range") }
}

fn stock(watts: f64) -> Stock {
    Stock::new([(Lamp::new(230.0, watts).expect("a stock size"), 2.0)]).expect("two lamps")
}

fn link_of(volts: f64) -> String {
    encode_all(&HandedOn::only(setup(volts)), Spelling::Digits).expect("short")
}

fn climb(at: Stand, setup: &Setup) -> String {
    let mut climb = Climb::restored("", "");
    climb.at = at;
    climb.kept(&equipment(setup))
}

/// A phone with lamps and a climb of its own, which opens a link.
fn opened() -> Bench {
    let mut bench =
        start::opened(english(), Some(&link_of(120.0)), Some(&link::encode(&setup(110.0)))).expect("opens");
    start::remember(
        &mut bench,
        Some(&link::encode_stock(&stock(25.0))),
        Some(&climb(Stand::Mains, &setup(110.0))),
    );
    bench
}

fn more() -> Opened {
    Opened {
        stock: Some(link::encode_stock(&stock(60.0))),
        climb: Some(climb(Stand::Rung(1), &setup(120.0))),
        log: Vec::new(),
    }
}

fn record(id: f64) -> Record {
    Record {
        version: 1,
        id,
        setup: link::encode(&setup(230.0)),
        rung: None,
        meter: MeterSpec::default(),
        numbers: vec![(Kind::BankVolts, 28.0)],
        look: None,
        behaviour: None,
        verdict: None,
        note: String::new(),
    }
}

#[test]
fn lamps_and_position_are_those_of_the_link_and_nothing_is_stored_yet() {
    let bench = opened();
    assert!(bench.link.is_some() && bench.notes == [Note::FromLink]);
    let bench = bench.after(Msg::Opened(Box::new(more())));
    assert_eq!((&*bench.drawer.stock, bench.climb.at), (&stock(60.0), Stand::Rung(1)));
    assert_eq!(bench.notes, [Note::LadderFromLink]);
    assert!(!bench.edited && !bench.drawer.edited && !bench.climb.edited);
    assert!(bench.link.is_some(), "a reload opens it again");
    // Looking at things changes nothing.
    let bench = bench.after(Move::Open(Stand::Lamps).into());
    assert!(bench.link.is_some() && !bench.climb.edited);
}

#[test]
fn the_first_change_makes_all_of_it_the_persons_own() {
    for change in
        [Msg::Type(Slot::SupplyVolts, String::from("121")), Move::Looked.into(), Shelf::LessOf(0).into()]
    {
        let bench = opened().after(Msg::Opened(Box::new(more()))).after(change.clone());
        assert!(bench.edited && bench.drawer.edited && bench.climb.edited, "{change:?}");
        assert!(bench.link.is_none(), "{change:?}");
    }
}

#[test]
fn the_persons_own_comes_back() {
    let mine = Mine {
        setup: Some(setup(110.0)),
        stock: Some(stock(25.0)),
        climb: Some(climb(Stand::Mains, &setup(110.0))),
    };
    let bench = opened().after(Msg::Opened(Box::new(more()))).after(Msg::Reclaim(Box::new(mine)));
    assert_eq!(*bench.setup, setup(110.0));
    assert_eq!((&*bench.drawer.stock, bench.climb.at), (&stock(25.0), Stand::Mains));
    assert!(bench.link.is_none() && bench.notes.is_empty());
    assert!(!bench.edited && !bench.drawer.edited && !bench.climb.edited);
}

#[test]
fn what_is_changed_before_the_rest_is_read_is_kept() {
    let bench = opened().after(Msg::Type(Slot::SupplyVolts, String::from("121")));
    let bench = bench.after(Msg::Opened(Box::new(more())));
    assert_eq!((bench.setup.supply.volts(), &*bench.drawer.stock), (121.0, &stock(25.0)));
    assert!(bench.notes.contains(&Note::LinkHalfRead));
}

#[test]
fn a_link_without_more_is_a_set_up_as_ever() {
    let bench = opened().after(Msg::Opened(Box::default()));
    assert!(bench.link.is_none());
    assert_eq!((&*bench.drawer.stock, bench.notes.as_slice()), (&stock(25.0), [Note::FromLink].as_slice()));
}

#[test]
fn readings_of_a_link_join_the_log_and_are_told_of_once() {
    let opened = opened()
        .after(Msg::Opened(Box::new(Opened { log: vec![record(5.0), record(6.0)], ..Opened::default() })));
    assert!(opened.seen.log.wanted, "the store is asked first");
    let bench = opened.after(Msg::Seen(Deed::Learn(vec![record(5.0)], 0)));
    assert_eq!(bench.seen.log.records.len(), 2);
    assert!(bench.notes.contains(&Note::ReadingsFromLink(1, 1)));
    let again =
        bench.clone().after(Msg::Opened(Box::new(Opened { log: vec![record(6.0)], ..Opened::default() })));
    assert_eq!((again.seen.log.records.len(), again.notes), (2, bench.notes.clone()));
}

#[test]
fn a_link_in_the_address_of_an_open_page_overwrites_nothing() {
    let bench = opened().after(Msg::Link(link_of(230.0)));
    let climbed = bench.after(Move::GoOn.into());
    assert!(climbed.climb.edited);
    let bench = climbed.after(Msg::Link(link_of(120.0)));
    assert_eq!(bench.setup.supply.volts(), 120.0);
    assert!(!bench.climb.edited && !bench.drawer.edited && bench.link.is_some());
    let bench = bench.after(Msg::Link(String::from("2junk")));
    assert_eq!(bench.setup.supply.volts(), 120.0);
    assert!(matches!(bench.notes.last(), Some(Note::BadLink(_))));
}
