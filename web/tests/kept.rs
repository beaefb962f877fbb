//! What earlier versions of the page have kept is read by this one. The texts are golden: as they were written then.
#![cfg(not(target_arch = "wasm32"))]

use lampladder_core::family::Family;
use lampladder_core::link;
use lampladder_core::readings::{MeterSpec, Response};
use lampladder_web::bench::{Bench, Msg, Note, Shared};
use lampladder_web::climb::{Stand, equipment};
use lampladder_web::drawer::{Form, Shelf};
use lampladder_web::log::Record;
use lampladder_web::meter;
use lampladder_web::start::{opened, remember};
use lampladder_web::words::english;

const SETUP: &str = "1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAJYBAAAAAACH";
const STOCK: &str = "s1AgAuAQAMAQABAAEAfAAAAAEACAEA0gH9AQAuAQAMAQAAAQ4";
const CLIMB: &str = "1\n1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAJYBAAAAAACH\n2 0 0 0 1 0\n\n\n\n\n\n\n\n45\n\n\n";
const METER: &str = "1 0.8 3 2000 a";
/// An object of the database, as JSON.
const RECORD: &str = r#"{"version":1,"id":1796132707222,"setup":"1AC4BAAoBAAAAAQEALgEADAEAAAIALgEBAJYBAAAAAACH",
  "rung":1,"meter":{"percent":0.8,"digits":3,"counts":2000,"response":"Averaging"},"numbers":[["BankVolts",28]],
  "look":"DullRed","verdict":{"advice":"GoOn","leader":"Idle","weight":1},"note":"hums"}"#;

fn bench() -> Bench {
    let mut bench = opened(english(), None, Some(SETUP)).expect("opens");
    remember(&mut bench, Some(STOCK), Some(CLIMB));
    bench
}

#[test]
fn set_up_lamps_position_and_meter_of_the_first_version_are_read() {
    let bench = bench();
    assert!(bench.notes.is_empty(), "{:?}", bench.notes);
    assert_eq!(bench.setup.plate.family(), Family::TransformerSupply);
    assert_eq!((bench.setup.plate.watts(), bench.setup.supply.volts()), (75.0, 230.0));
    let owned: Vec<(f64, u8, bool)> = bench
        .drawer
        .stock
        .kinds()
        .iter()
        .map(|owned| (owned.lamp().rated_watts(), owned.count(), owned.lamp().spec().cold_ohms.is_some()))
        .collect();
    assert_eq!(owned, [(60.0, 1, true), (60.0, 1, false)]);
    assert_eq!(bench.climb.at, Stand::Rung(0));
    assert_eq!(bench.climb.kept(&equipment(&bench.setup)), CLIMB);
    let spec = meter::from_kept(METER).expect("a meter");
    assert_eq!(spec, MeterSpec { percent: 0.8, digits: 3.0, counts: 2000.0, response: Response::Averaging });
}

#[test]
fn a_record_of_the_first_version_is_read() {
    let record: Record = serde_json::from_str(RECORD).expect("a record");
    assert_eq!((record.version, record.numbers.len(), record.note.as_str()), (1, 1, "hums"));
    assert!(link::decode(&record.setup).is_ok());
}

#[test]
fn another_window_shares_its_lamps_and_only_tells_of_the_rest() {
    let mut bench = opened(english(), None, None).expect("opens");
    bench = bench.after(Shelf::More(25.0).into()).after(Shelf::Form(Form::Measure(0)).into());
    bench = bench.after(Msg::Elsewhere(Shared::Stock, STOCK.to_owned()));
    // The lamp that was being measured is no longer owned; what was typed of it is.
    assert_eq!((bench.drawer.stock.kinds().len(), bench.drawer.form), (2, Form::Another));
    assert!(bench.notes.is_empty());
    let own = link::encode(&bench.setup);
    bench = bench.after(Msg::Elsewhere(Shared::Setup, own));
    assert!(bench.notes.is_empty(), "it is the same here");
    bench = bench.after(Msg::Elsewhere(Shared::Setup, SETUP.to_owned()));
    assert_eq!(bench.notes, [Note::Elsewhere]);
    let same = bench.climb.kept(&equipment(&bench.setup));
    bench = bench.after(Msg::Elsewhere(Shared::Climb, same));
    assert!(bench.notes.is_empty());
    bench = bench.after(Msg::Elsewhere(Shared::Stock, String::from("junk")));
    assert_eq!(bench.drawer.stock.kinds().len(), 2);
}

#[test]
fn an_emptied_storage_has_everything_kept_again() {
    let bench = bench();
    assert!(!(bench.edited || bench.drawer.edited || bench.climb.edited));
    let bench = bench.after(Msg::Emptied);
    assert!(bench.edited && bench.drawer.edited && bench.climb.edited);
    assert_eq!((bench.emptied, bench.notes.as_slice()), (1, [Note::Emptied].as_slice()));
}

#[test]
fn a_kind_that_was_tapped_away_comes_back_until_something_else_is_changed() {
    let mut bench = bench();
    let before = bench.drawer.stock.clone();
    bench = bench.after(Shelf::LessOf(0).into());
    assert_eq!(bench.drawer.stock.kinds().len(), 1);
    assert!(bench.drawer.gone().is_some_and(|lamp| lamp.spec().cold_ohms.is_some()));
    let back = bench.clone().after(Shelf::PutBack.into());
    assert_eq!((&back.drawer.stock, back.drawer.gone()), (&before, None));
    bench = bench.after(Shelf::More(100.0).into());
    assert!(bench.drawer.gone().is_none());
    let count = bench.drawer.stock.kinds().len();
    bench = bench.after(Shelf::PutBack.into());
    assert_eq!(bench.drawer.stock.kinds().len(), count, "there is nothing to put back");
}
