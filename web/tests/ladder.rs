//! The drawer and the checklist, natively: what people tap and type, and what becomes of it.
#![cfg(not(target_arch = "wasm32"))]

use lampladder_core::error::{Field, InputError};
use lampladder_core::ladder::LadderError;
use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_core::link;
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use lampladder_core::supply::Supply;
use lampladder_web::bench::{Bench, Msg, Note, Part, Stage, Tab};
use lampladder_web::climb::{Climb, Move, Stand, equipment};
use lampladder_web::draft::{Fault, LampPart, Place, Slot};
use lampladder_web::drawer::{Form, Shelf};
use lampladder_web::entry::Entry;
use lampladder_web::reckoner::{Answer, Ask, Desk};
use lampladder_web::seen::Deed;
use lampladder_web::start;
use lampladder_web::words::english;

fn bench() -> Bench {
    let bench = Bench::with(Setup::example().expect("in range"), english()).expect("goes together");
    Bench { stage: Stage::Bench, tab: Tab::Ladder, ..bench }
}

fn after(bench: Bench, messages: impl IntoIterator<Item = Msg>) -> Bench {
    messages.into_iter().fold(bench, Bench::after)
}

fn more(watts: f64) -> Msg {
    Shelf::More(watts).into()
}

fn entry(entry: Entry, text: &str) -> Msg {
    Msg::Type(Slot::Entry(entry), text.to_owned())
}

fn spare(part: LampPart, text: &str) -> Msg {
    Msg::Type(Slot::Lamp(Place::SPARE, part), text.to_owned())
}

/// What the reckoner says to what the bench wants.
fn reckoned(bench: Bench) -> Bench {
    let mut desk = Desk::default();
    desk.put(1, Ask::Ladder(bench.wanted().expect("somebody looks")));
    let mut bench = bench;
    while desk.is_busy() {
        if let Some((_, Answer::Ladder(news))) = desk.go_on(&|| 0.0) {
            bench = bench.after(Move::Learn(news).into());
        }
    }
    bench
}

/// A radio, two lamps of 60 W and one of 25 W, and the rungs for them.
fn stocked() -> Bench {
    reckoned(after(bench(), [more(60.0), more(60.0), more(25.0)]))
}

#[test]
fn a_tap_is_a_lamp_and_the_rungs_are_core_s() {
    let bench = stocked();
    assert_eq!(bench.drawer.stock.lamp_count(), 3);
    assert_eq!((bench.drawer.count(230.0, 60.0), bench.drawer.count(230.0, 25.0)), (2, 1));
    let plan = bench.climb.rungs().expect("a ladder");
    let limits = lampladder_core::ladder::Limits::default();
    let Setup { supply, plate, .. } = &*bench.setup;
    let ladder =
        lampladder_core::ladder::plan(supply, &bench.drawer.stock, plate, &limits).expect("a ladder");
    assert_eq!(plan.rungs.len(), ladder.rungs.len());
    for (index, rung) in ladder.rungs.iter().enumerate() {
        assert_eq!(bench.rung_groups(index).as_deref(), Some(rung.bank.groups()));
        assert_eq!(plan.rungs[index].short_amps, rung.short_amps);
    }
    assert_eq!(bench.climb.known.missing, Some(ladder.missing));
}

#[test]
fn lamps_are_taken_out_one_by_one_down_to_none() {
    let bench =
        after(stocked(), [Shelf::Less(60.0).into(), Shelf::LessOf(1).into(), Shelf::Less(60.0).into()]);
    assert!(bench.drawer.stock.is_empty());
    let bench = after(bench, [Shelf::Less(60.0).into(), Shelf::LessOf(7).into(), Shelf::MoreOf(7).into()]);
    let bench = reckoned(bench);
    assert!(bench.drawer.stock.is_empty());
    let refused = bench.climb.refused().expect("no ladder without lamps");
    assert!(matches!(refused, LadderError::EmptyStock { .. }) && !refused.ways().is_empty());
}

#[test]
fn lamps_of_the_wrong_voltage_and_plates_beyond_any_bank_are_refused_with_a_way() {
    let far = after(
        bench(),
        [Shelf::Form(Form::Another).into(), spare(LampPart::Volts, "24"), spare(LampPart::Watts, "21")],
    );
    let far = reckoned(far.after(Shelf::Put.into()));
    assert!(matches!(far.climb.refused(), Some(LadderError::NoLampFits { .. })), "{:?}", far.climb.refused());
    let kettle = after(
        stocked(),
        [
            Msg::Family(lampladder_core::family::Family::Heater),
            Msg::Type(Slot::PlateWatts, "2000".to_owned()),
        ],
    );
    let kettle = reckoned(kettle);
    let refused = kettle.climb.refused().expect("no ladder for a kettle");
    assert!(!refused.ways().is_empty(), "{refused:?}");
}

#[test]
fn a_typed_lamp_goes_in_and_a_bad_count_says_so_beside_its_field() {
    let bench = after(
        bench(),
        [
            Shelf::Form(Form::Another).into(),
            spare(LampPart::Watts, "52 W"),
            entry(Entry::Count, "-2"),
            Shelf::Put.into(),
        ],
    );
    assert!(bench.drawer.stock.is_empty());
    let wrong = bench.wrong(Slot::Entry(Entry::Count));
    assert!(matches!(wrong, Some(Fault::Number(InputError::OutOfRange { field: Field::Count, .. }))));
    let said = bench.words().fault(Slot::Entry(Entry::Count), &wrong.expect("wrong"));
    assert!(said.contains("How many") && said.contains("99"), "{said}");
    // What was typed is still there.
    assert_eq!(bench.text(Slot::Lamp(Place::SPARE, LampPart::Watts)), "52 W");
    let bench = after(bench, [entry(Entry::Count, "3"), Shelf::Put.into()]);
    assert_eq!(bench.drawer.count(230.0, 52.0), 3);
    assert_eq!((bench.drawer.form, bench.text(Slot::Entry(Entry::Count))), (Form::None, ""));
    // None of this is a change of the set-up.
    assert!(!bench.edited && !bench.is_stale());
}

#[test]
fn an_empty_rating_is_a_fault_only_once_it_is_put_in() {
    let form = after(bench(), [Shelf::Form(Form::Another).into()]);
    let watts = Slot::Lamp(Place::SPARE, LampPart::Watts);
    assert_eq!(form.wrong(watts), None);
    let pressed = form.after(Shelf::Put.into());
    assert!(matches!(pressed.wrong(watts), Some(Fault::Text(_))));
    let nonsense = after(bench(), [Shelf::Form(Form::Another).into(), spare(LampPart::Watts, "sixty")]);
    assert!(nonsense.wrong(watts).is_some());
}

#[test]
fn twelve_kinds_are_the_most() {
    let crowd = (1..=13).flat_map(|kind: u8| {
        [
            Shelf::Form(Form::Another).into(),
            spare(LampPart::Watts, &(10 + kind).to_string()),
            Shelf::Put.into(),
        ]
    });
    let bench = after(bench(), crowd);
    assert_eq!(bench.drawer.stock.kinds().len(), 12);
    assert_eq!(bench.drawer.refused.map(|error| error.field()), Some(Field::Stock));
}

#[test]
fn one_of_two_lamps_is_measured_and_stands_apart() {
    let lamp = Lamp::new(230.0, 60.0).expect("a stock size");
    let numbers = |value: f64| format!("{value:.4}");
    let bench = after(
        stocked(),
        [
            Shelf::Form(Form::Measure(0)).into(),
            spare(LampPart::ColdOhms, &numbers(lamp.cold_ohms())),
            spare(LampPart::PointVolts(0), "40"),
            spare(LampPart::PointAmps(0), &numbers(lamp.at_volts(40.0).amps)),
        ],
    );
    assert_eq!(bench.lamp, Place::SPARE);
    let bench = bench.after(Shelf::Put.into());
    assert_eq!(bench.drawer.count(230.0, 60.0), 1);
    assert_eq!(bench.drawer.stock.lamp_count(), 3);
    let measured = bench.drawer.stock.kinds().iter().find(|owned| owned.lamp().spec().cold_ohms.is_some());
    assert_eq!(measured.map(|owned| (owned.count(), owned.lamp().rated_watts())), Some((1, 60.0)));
    // The bank's editor is for lamps of the bank again.
    assert_eq!((bench.lamp, bench.draft.lamp_count()), (Place::default(), 1));
}

#[test]
fn an_illegible_lamp_is_identified_and_taken_in_as_measured() {
    let lamp = Lamp::new(230.0, 60.0).expect("a stock size");
    let bench = after(
        bench(),
        [
            Shelf::Form(Form::Unknown).into(),
            entry(Entry::ColdOhms, &format!("{:.2}", lamp.cold_ohms())),
            entry(Entry::GlowVolts, "100"),
        ],
    );
    assert_eq!(bench.measured(), None);
    let bench = after(bench, [entry(Entry::GlowAmps, &format!("{:.4}", lamp.at_volts(100.0).amps))]);
    let mut desk = Desk::default();
    desk.put(1, Ask::Unknown(bench.measured().expect("complete")));
    let Some((1, Answer::Unknown(fits))) = desk.go_on(&|| 0.0) else { panic!("no answer") };
    let bench = bench.after(Shelf::Fits(fits).into());
    let bench = bench.after(Shelf::Take(0).into());
    let owned = &bench.drawer.stock.kinds()[0];
    assert!((owned.lamp().rated_watts() / 60.0 - 1.0).abs() < 0.2);
    assert!(owned.lamp().spec().cold_ohms.is_some() && owned.lamp().spec().points.len() == 1);
    // A fit that is not there changes nothing.
    assert_eq!(bench.clone().after(Shelf::Take(9).into()).drawer, bench.drawer);
}

#[test]
fn the_checklist_goes_from_the_lamps_to_the_mains_and_the_wait() {
    let mut bench = stocked();
    let rungs = bench.climb.rungs().expect("a ladder").rungs.len();
    let mut seen = vec![bench.climb.at];
    for _ in 0..rungs + 4 {
        bench = bench.after(Move::GoOn.into());
        seen.push(bench.climb.at);
    }
    let mut steps = vec![Stand::Lamps, Stand::Checks];
    steps.extend((0..rungs).map(Stand::Rung));
    steps.extend([Stand::Mains, Stand::After, Stand::After]);
    assert_eq!(seen, steps);
    let back = after(bench, [Move::Back(Stand::Rung(0)).into()]);
    assert_eq!((back.climb.at, back.climb.open), (Stand::Rung(0), Some(Stand::Rung(0))));
    // Nobody jumps ahead.
    assert_eq!(back.after(Move::Back(Stand::After).into()).climb.at, Stand::Rung(0));
}

#[test]
fn a_rung_s_lamps_go_into_the_loop() {
    let bench = after(stocked(), [Move::Use(0).into()]);
    assert!(bench.is_in_loop(0) && bench.edited && !bench.is_stale());
    // A reading that is kept then belongs to it; behind other lamps it belongs to none.
    let kept = bench.clone().after(Msg::Seen(Deed::Keep(1e12, None)));
    assert_eq!(kept.seen.log.records[0].rung, Some(1));
    let other = Slot::Lamp(Place::default(), LampPart::Watts);
    let kept = kept.after(Msg::Type(other, String::from("77"))).after(Msg::Seen(Deed::Keep(2e12, None)));
    assert_eq!(kept.seen.log.records[0].rung, None);
    assert_eq!(Some(bench.setup.bank.groups()), bench.rung_groups(0).as_deref());
    // The ladder is still the ladder: it does not hang on what stands in the loop.
    assert!(bench.climb.rungs().is_some());
    assert_eq!(bench.clone().after(Move::Use(99).into()).setup, bench.setup);
}

#[test]
fn other_equipment_or_other_lamps_begin_at_the_first_rung_again() {
    let second = after(stocked(), [Move::GoOn.into(), Move::GoOn.into(), Move::GoOn.into()]);
    assert_eq!(second.climb.at, Stand::Rung(1));
    for change in [
        Msg::Type(Slot::PlateWatts, "8".to_owned()),
        Msg::Type(Slot::SupplyVolts, "240".to_owned()),
        more(40.0),
    ] {
        let changed = second.clone().after(change);
        assert_eq!(changed.climb.at, Stand::Rung(0));
        assert!(changed.climb.restarted && changed.climb.known.plan.is_none());
    }
    // Digit by digit is as good as at once.
    let typed = ["8", "80"].map(|watts| Msg::Type(Slot::PlateWatts, watts.to_owned()));
    assert!(after(second.clone(), typed).climb.restarted);
    // A bad number changes nothing yet.
    let stale = second.clone().after(Msg::Type(Slot::PlateWatts, "x".to_owned()));
    assert_eq!((stale.climb.at, stale.climb.known.plan.is_some()), (Stand::Rung(1), true));
}

#[test]
fn everything_comes_back_after_a_reload() {
    let before = after(
        stocked(),
        [
            Move::GoOn.into(),
            Move::Looked.into(),
            Move::Lead(2).into(),
            entry(Entry::PlugOhms, "40"),
            entry(Entry::Farads, "100 µF"),
            Move::GoOn.into(),
            Move::GoOn.into(),
            Move::Off(Some(1_790_000_000_123.0)).into(),
        ],
    );
    let key = equipment(&before.setup);
    let (stock, climb) = (link::encode_stock(&before.drawer.stock), before.climb.kept(&key));
    let mut again = bench();
    start::remember(&mut again, Some(&stock), Some(&climb));
    assert_eq!(again.drawer.stock, before.drawer.stock);
    assert_eq!(again.climb.kept(&key), climb);
    assert_eq!((again.climb.at, again.climb.off), (Stand::Rung(1), before.climb.off));
    assert_eq!(again.climb.number(Entry::Farads), Some(100e-6));
    assert!(again.climb.looked && !again.climb.edited);
    // A rung that the ladder no longer has is the first one.
    let longer = climb.replacen("\n2 1 ", "\n2 9 ", 1);
    let mut lost = bench();
    start::remember(&mut lost, Some(&stock), Some(&longer));
    assert_eq!(lost.climb.at, Stand::Rung(9));
    assert_eq!(reckoned(lost).climb.at, Stand::Rung(0));
}

#[test]
fn a_position_belongs_to_its_equipment_and_damage_is_no_panic() {
    let before = after(stocked(), [Move::GoOn.into(), Move::GoOn.into()]);
    let kept = before.climb.kept(&equipment(&before.setup));
    let mut other = Setup::example().expect("in range");
    other.supply = Supply::new(120.0, 60.0, 0.0).expect("in range");
    assert_eq!(Climb::restored(&kept, &equipment(&other)), Climb::default());
    for cut in 0..kept.len() {
        let _ = Climb::restored(&kept[..cut], &equipment(&before.setup));
    }
    for bad in ["", "2\n", "1\nx\n0 0 0 0 0 0", "1\n\n9 99999999999999999999 9 9 9"] {
        assert_eq!(Climb::restored(bad, &equipment(&before.setup)), Climb::default());
    }
    let mut bench = bench();
    start::remember(&mut bench, Some("s9newer"), None);
    assert!(matches!(bench.notes[..], [Note::BadKept(_)]));
    assert!(bench.drawer.stock.is_empty() && !bench.drawer.edited);
}

#[test]
fn the_bank_s_editor_closes_the_drawer_s_form() {
    let form = after(bench(), [Shelf::Form(Form::Another).into(), Msg::AddPoint]);
    assert_eq!((form.draft.spare.points.len(), form.edited), (1, false));
    // A bank has no such place.
    let same = after(form.clone(), [Msg::AddParallel, Msg::AddSeries, Msg::Remove]);
    assert_eq!(same.draft.groups, form.draft.groups);
    let sheet = form.after(Msg::Open(Part::Bank));
    assert_eq!((sheet.lamp, sheet.drawer.form), (Place::default(), Form::None));
}

#[test]
fn a_measured_lamp_is_kept_whole() {
    let lamp = Lamp::new(230.0, 60.0).expect("a stock size");
    let spec = LampSpec {
        cold_ohms: Some(lamp.cold_ohms()),
        points: vec![Point { volts: 40.0, amps: lamp.at_volts(40.0).amps }],
        ..lamp.spec().clone()
    };
    let stock = Stock::new([(Lamp::from_spec(spec).expect("a lamp"), 1.0)]).expect("a stock");
    let mut bench = bench();
    start::remember(&mut bench, Some(&link::encode_stock(&stock)), None);
    assert_eq!(*bench.drawer.stock, stock);
}
