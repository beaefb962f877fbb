//! The reducer, natively: what people type, and what becomes of it.
#![cfg(not(target_arch = "wasm32"))]

use lampladder_core::condition::Condition;
use lampladder_core::detail::Detail;
use lampladder_core::error::{Field, InputError};
use lampladder_core::family::Family;
use lampladder_core::glow::GlowWord;
use lampladder_core::hunt::Pulse;
use lampladder_core::lamp::Fill;
use lampladder_core::link;
use lampladder_core::quantity::QuantityError;
use lampladder_core::readings::Kind;
use lampladder_core::setup::Setup;
use lampladder_web::advice::{Advice, Caution, advice, cautions};
use lampladder_web::bench::{Bench, Msg, Note, Part, Refused, Unsuitable};
use lampladder_web::draft::{Fault, LampPart, Place, Slot};
use lampladder_web::reckoner::pulses::News;
use lampladder_web::seen::Deed;
use lampladder_web::words::english;

fn bench() -> Bench {
    Bench::with(Setup::example().expect("in range"), english()).expect("goes together")
}

fn typed(slot: Slot, text: &str) -> Msg {
    Msg::Type(slot, text.to_owned())
}

fn lamp(part: LampPart) -> Slot {
    Slot::Lamp(Place::default(), part)
}

fn after(messages: impl IntoIterator<Item = Msg>) -> Bench {
    messages.into_iter().fold(bench(), Bench::after)
}

#[test]
fn typing_gives_a_new_answer() {
    let before = bench();
    let after = after([typed(lamp(LampPart::Watts), "100 W"), typed(Slot::PlateWatts, "80")]);
    assert!(!after.is_stale() && after.edited);
    assert_eq!(after.setup.bank.groups()[0][0].rated_watts(), 100.0);
    assert_eq!(after.setup.plate.watts(), 80.0);
    let amps = |bench: &Bench| bench.answers.shown(Condition::Healthy).expect("settles").amps.value;
    assert!(amps(&after) > amps(&before));
}

#[test]
fn a_bad_number_is_kept_and_the_last_answer_stays() {
    let before = bench();
    for (text, fault) in [
        ("", Fault::Text(QuantityError::Empty { field: Field::Volts })),
        ("abc", Fault::Text(QuantityError::NotANumber { field: Field::Volts })),
        ("NaN", Fault::Text(QuantityError::NotANumber { field: Field::Volts })),
    ] {
        let after = bench().after(typed(Slot::SupplyVolts, text));
        assert_eq!(after.draft.text(Slot::SupplyVolts), text);
        assert_eq!(after.fault(Slot::SupplyVolts), Some(&fault), "{text}");
        assert_eq!((&after.setup, &after.answers), (&before.setup, &before.answers));
    }
    for text in ["0", "-5", "1e300"] {
        let after = bench().after(typed(Slot::SupplyVolts, text));
        let fault = after.fault(Slot::SupplyVolts);
        assert!(matches!(fault, Some(Fault::Number(InputError::OutOfRange { .. }))), "{text}");
        let mended = after.after(typed(Slot::SupplyVolts, "120"));
        assert!(!mended.is_stale());
        assert_eq!(mended.setup.supply.volts(), 120.0);
    }
}

#[test]
fn readings_are_no_part_of_the_set_up() {
    let read = Slot::Reading(Kind::BankVolts);
    let after = after([typed(read, "sixty"), typed(Slot::Reading(Kind::Amps), "0,16 A")]);
    assert_eq!((after.text(read), after.edited, after.is_stale()), ("sixty", false, false));
    assert!(after.fault(read).is_some() && after.fault(Slot::Reading(Kind::Amps)).is_none());
    assert_eq!(after.setup, bench().setup);
    let taken = after.seen.taken(&after.setup);
    assert_eq!(taken.numbers, [None, None, None, Some(0.16), None, None]);
    assert_eq!(taken.setup, link::encode(&after.setup));
}

#[test]
fn whether_a_bare_number_is_doubtful_follows_the_lamps() {
    let amps = Slot::Reading(Kind::Amps);
    let doubted = after([typed(amps, "1.5")]);
    assert_eq!(doubted.fault(amps), Some(&Fault::NoUnit));
    assert_eq!(doubted.text(amps), "1.5");
    let larger = doubted.after(typed(lamp(LampPart::Watts), "300"));
    assert_eq!(larger.fault(amps), None);
    let answered = after([typed(amps, "1.5"), typed(amps, "1.5 A")]);
    assert_eq!(answered.fault(amps), None);
}

#[test]
fn a_reading_is_kept_with_the_set_up_of_its_time() {
    let kept = after([
        typed(Slot::Reading(Kind::BankVolts), "28"),
        Msg::Seen(Deed::Look(GlowWord::DullRed)),
        Msg::Seen(Deed::Keep(1e12, None)),
        typed(lamp(LampPart::Watts), "100"),
    ]);
    let record = &kept.seen.log.records[0];
    let setup = link::decode(&record.setup).expect("a link");
    assert_eq!(setup.bank.groups()[0][0].rated_watts(), 60.0);
    // No ladder is known yet.
    assert_eq!((record.rung, record.look), (None, Some(GlowWord::DullRed)));
    let undone = kept.after(Msg::Seen(Deed::Undo));
    assert!(undone.seen.log.records.is_empty());
    assert_eq!(undone.setup.bank.groups()[0][0].rated_watts(), 100.0);
}

#[test]
fn every_wrong_field_is_named_at_once() {
    let after = after([
        typed(Slot::SupplyVolts, "x"),
        typed(lamp(LampPart::Watts), ""),
        typed(Slot::PlateWatts, "-1"),
        typed(Slot::PlatePowerFactor, "7"),
    ]);
    for slot in [Slot::SupplyVolts, lamp(LampPart::Watts), Slot::PlateWatts] {
        assert!(after.fault(slot).is_some(), "{slot:?}");
    }
}

#[test]
fn lamps_are_added_beside_and_after_and_taken_out() {
    let after =
        after([Msg::AddParallel, typed(Slot::Lamp(Place { group: 0, lamp: 1 }, LampPart::Watts), "25")]);
    let after = after.after(Msg::AddSeries);
    let shape: Vec<usize> = after.setup.bank.groups().iter().map(Vec::len).collect();
    assert_eq!((shape, after.lamp), (vec![2, 1], Place { group: 1, lamp: 0 }));
    // A twin takes over what is printed.
    assert_eq!(after.setup.bank.groups()[1][0].rated_watts(), 25.0);
    let full = (0..9).fold(after.clone(), |bench, _| bench.after(Msg::AddSeries));
    assert_eq!(full.setup.bank.lamp_count(), 8);
    let one = (0..9).fold(full, |bench, _| bench.after(Msg::Remove));
    assert_eq!((one.setup.bank.lamp_count(), one.lamp), (1, Place::default()));
    assert!(!one.is_stale());
}

#[test]
fn places_that_are_not_there_are_no_panic() {
    let nowhere = Place { group: 7, lamp: 7 };
    let messages = [
        Msg::Choose(nowhere),
        Msg::AddParallel,
        Msg::AddSeries,
        Msg::Remove,
        Msg::AddPoint,
        Msg::RemovePoint(3),
        Msg::Fill(Some(Fill::Vacuum)),
        typed(Slot::Lamp(nowhere, LampPart::Watts), "1"),
        Msg::Step(Slot::Lamp(nowhere, LampPart::PointAmps(9)), true),
    ];
    assert_eq!(after(messages).setup, bench().setup);
}

#[test]
fn unsuitable_lamps_do_not_enter_the_bank() {
    let refused = bench().after(Msg::Refuse(Refused::Lamp(Unsuitable::Led)));
    assert_eq!(refused.refused, Some(Refused::Lamp(Unsuitable::Led)));
    assert_eq!((&refused.draft, refused.edited), (&bench().draft, false));
    let halogen = refused.after(Msg::Fill(Some(Fill::Halogen)));
    assert_eq!((halogen.refused, halogen.setup.bank.groups()[0][0].fill()), (None, Fill::Halogen));
}

#[test]
fn measured_points_name_the_one_that_is_wrong() {
    let point = |index| [LampPart::PointVolts(index), LampPart::PointAmps(index)].map(lamp);
    let ([v0, a0], [v1, a1]) = (point(0), point(1));
    let after = after([
        Msg::AddPoint,
        Msg::AddPoint,
        typed(v0, "67"),
        typed(a0, "0,16 A"),
        typed(v1, "120"),
        typed(a1, "19 A"),
    ]);
    assert!(after.fault(a1).is_some() && after.fault(a0).is_none() && after.fault(v1).is_none());
    let mended = after.after(typed(a1, "190 mA"));
    assert!(!mended.is_stale());
    assert_eq!(mended.setup.bank.groups()[0][0].spec().points.len(), 2);
}

#[test]
fn a_transformer_on_direct_current_is_refused_beside_the_frequency() {
    let after = bench().after(typed(Slot::SupplyHertz, "0"));
    let fault = after.fault(Slot::SupplyHertz);
    assert!(matches!(fault, Some(Fault::Number(InputError::NeedsAlternating { .. }))));
    let heater = after.after(Msg::Family(Family::Heater));
    assert!(!heater.is_stale() && heater.setup.supply.is_direct());
}

#[test]
fn class_defaults_of_another_family_wait_in_their_fields() {
    let after = after([typed(Slot::Detail(Detail::CoreShare), "0.1"), Msg::Family(Family::Heater)]);
    assert!(!after.is_stale());
    let back = after.after(Msg::Family(Family::TransformerSupply));
    assert_eq!(back.setup.plate.detail(Detail::CoreShare), 0.1);
    let wrong = back.after(typed(Slot::Detail(Detail::CoreShare), "7"));
    assert!(wrong.fault(Slot::Detail(Detail::CoreShare)).is_some());
}

#[test]
fn every_family_answers_and_comes_back_from_its_text() {
    for family in Family::ALL {
        let after = bench().after(Msg::Family(family));
        assert!(!after.is_stale(), "{family:?}: {:?}", after.faults);
        let again = Bench::with((*after.setup).clone(), english()).expect("goes together");
        assert_eq!(again.draft.read().as_ref(), Ok(&*after.setup), "{family:?}");
    }
}

#[test]
fn lamps_for_another_supply_are_cautioned_about() {
    let low = bench().after(typed(lamp(LampPart::Volts), "12"));
    assert!(matches!(advice(&low.answers), Advice::BurnsOut(..)));
    let over = bench().after(typed(Slot::SupplyVolts, "250"));
    let found = cautions(&over.setup, &over.answers);
    assert!(matches!(found[..], [Caution::OverRated { condition: Condition::Shorted, .. }]), "{found:?}");
    assert!(cautions(&bench().setup, &bench().answers).is_empty());
    assert!(matches!(advice(&bench().answers), Advice::Watch { .. }));
}

#[test]
fn a_family_without_the_condition_on_the_loop_shows_healthy() {
    let after = after([Msg::Show(Condition::Overloaded), Msg::Family(Family::Lamp)]);
    assert_eq!(after.condition, Condition::Healthy);
}

#[test]
fn what_arrives_replaces_what_was_typed_and_clears_old_notes() {
    let edited =
        after([typed(Slot::SupplyVolts, "x"), Msg::Tell(Note::FromLink), Msg::Tell(Note::NothingKept)]);
    let arrived = edited.after(Msg::Link(link::encode(&Setup::example().expect("in range"))));
    assert_eq!((arrived.is_stale(), arrived.edited), (false, false));
    assert_eq!(arrived.notes, [Note::NothingKept]);
}

#[test]
fn editors_open_and_close() {
    let open = after([Msg::Open(Part::Equipment), Msg::ChooseFamily]);
    assert!(open.choosing);
    let closed = open.after(Msg::Close);
    assert_eq!((closed.open, closed.choosing), (None, false));
}

#[test]
fn the_other_conditions_are_asked_about_one_by_one() {
    let mut bench = bench();
    let family = bench.setup.plate.family();
    let mut asked = 0;
    while bench.answers.unasked(family).is_some() {
        bench = bench.after(Msg::AskFurther);
        asked += 1;
    }
    assert_eq!(bench.answers.asked().count(), family.conditions().len());
    assert_eq!(asked + bench.answers.all().len(), family.conditions().len());
    // What is looked at stays so while somebody types.
    bench = bench.after(Msg::Show(Condition::ShortedDiode)).after(typed(Slot::PlateWatts, "50"));
    assert_eq!(bench.condition, Condition::ShortedDiode);
    assert!(bench.answers.shown(Condition::ShortedDiode).is_some());
    assert!(bench.answers.get(Condition::LeakyReservoir).is_none());
    let bench = bench.after(Msg::Family(Family::Heater));
    assert_eq!(bench.condition, Condition::Healthy);
}

#[test]
fn a_motor_that_stands_or_turns_has_two_ways_to_come_to_rest() {
    // Among larger and larger lamps there is a stretch where a standing motor stays standing and a turning one turns.
    let two = (1..=8_u32).find(|count| {
        let mut bench = bench().after(Msg::Family(Family::InductionMotor));
        for _ in 1..*count {
            bench = bench.after(Msg::AddParallel);
        }
        bench.answers.stable(Condition::Healthy).len() == 2
    });
    assert!(two.is_some());
}

#[test]
fn a_pulse_is_taken_for_the_set_up_that_it_was_worked_out_for() {
    let hunting = bench().after(Msg::Family(Family::SwitchMode));
    assert_eq!(hunting.unpulsed(), [Condition::Healthy, Condition::Overloaded]);
    let pulse = Pulse { period_seconds: 0.8, brightest_kelvin: vec![1900.0], dimmest_kelvin: vec![700.0] };
    let news = |setup: &Setup| {
        Msg::Pulse(News {
            setup: link::encode(setup),
            condition: Condition::Healthy,
            pulse: Some(pulse.clone()),
        })
    };
    let told = hunting.clone().after(news(&hunting.setup));
    assert_eq!(told.pulse(Condition::Healthy), Some(&pulse));
    assert_eq!(told.unpulsed(), [Condition::Overloaded]);
    let changed = told.after(typed(Slot::PlateWatts, "40"));
    assert_eq!(changed.pulse(Condition::Healthy), None);
    assert_eq!(changed.after(news(&hunting.setup)).pulse(Condition::Healthy), None);
}
