//! The parts that may follow a set-up in version 2: lamps that there are, position on the ladder, kept readings. Codes are
//! for ever.
//!
//! Stock: a list of lamps, each with a count. Position: step, and the rung of a rung; class; metres of lead; looked over;
//! the checks. Readings, each: what differs from the bench before; milliseconds since 1970; the rung, 0 for none; what
//! differs from the meter before; the numbers; look, behaviour, advice, 0 for none, and after an advice the leading
//! condition and its weight; the note.

use alloc::string::String;
use alloc::vec::Vec;

use super::LinkError;
use super::record::{Reader, Writer};
use super::v1::{self, Groups, code_of};
use super::v2::{self, Behind, Lamps, Part};
use crate::condition::Condition;
use crate::diagnosis::Advice;
use crate::glow::GlowWord;
use crate::hand_on::{HandedOn, Position, PositionSpec, Step};
use crate::kept::{Kept, KeptSpec, Verdict};
use crate::precheck::Class;
use crate::readings::{Behaviour, Kind, MeterSpec, Response};
use crate::setup::Setup;
use crate::stock::Stock;

/// Step and its code for ever; a rung's number follows.
const STEPS: [(Step, u8); 5] =
    [(Step::Lamps, 0), (Step::Checks, 1), (Step::Rung(0), 2), (Step::Mains, 3), (Step::After, 4)];

const CLASSES: [(Class, u8); 3] = [(Class::One, 1), (Class::Two, 2), (Class::Three, 3)];

const LOOKS: [(Option<GlowWord>, u8); 9] = [
    (None, 0),
    (Some(GlowWord::Dark), 1),
    (Some(GlowWord::Faint), 2),
    (Some(GlowWord::DullRed), 3),
    (Some(GlowWord::Orange), 4),
    (Some(GlowWord::Amber), 5),
    (Some(GlowWord::Yellow), 6),
    (Some(GlowWord::Full), 7),
    (Some(GlowWord::OverFull), 8),
];

const BEHAVIOURS: [(Option<Behaviour>, u8); 5] = [
    (None, 0),
    (Some(Behaviour::Steady), 1),
    (Some(Behaviour::FlashThenDim), 2),
    (Some(Behaviour::SlowRise), 3),
    (Some(Behaviour::Pulsing), 4),
];

const ADVICE: [(Option<Advice>, u8); 4] =
    [(None, 0), (Some(Advice::GoOn), 1), (Some(Advice::Stop), 2), (Some(Advice::MeasureFirst), 3)];

const CONDITIONS: [(Condition, u8); 12] = [
    (Condition::Healthy, 1),
    (Condition::Idle, 2),
    (Condition::Working, 3),
    (Condition::Overloaded, 4),
    (Condition::Shorted, 5),
    (Condition::OpenCircuit, 6),
    (Condition::LeakyReservoir, 7),
    (Condition::ShortedReservoir, 8),
    (Condition::ShortedDiode, 9),
    (Condition::ShortedWinding, 10),
    (Condition::OutputConducting, 11),
    (Condition::Stalled, 12),
];

const RESPONSES: [(Response, u8); 2] = [(Response::TrueRms, 0), (Response::Averaging, 1)];

/// What of a bench is written out: nothing that is as before.
const SAME: u8 = 0;
const OTHER_BANK: u8 = 1;
const OTHER_BENCH: u8 = 2;
const BENCHES: [(u8, u8); 3] = [(SAME, 0), (OTHER_BANK, 1), (OTHER_BENCH, 2)];

const METERS: [(bool, u8); 2] = [(false, 0), (true, 1)];

pub(super) fn stock(stock: &Stock) -> Vec<u8> {
    let mut to = Writer::default();
    let mut lamps = Lamps::default();
    to.length(stock.kinds().len());
    for owned in stock.kinds() {
        lamps.write(&mut to, owned.lamp().spec());
        to.byte(owned.count());
    }
    to.finish()
}

fn read_stock(from: &mut Reader<'_>) -> Option<v1::Kinds> {
    let mut kinds = Vec::new();
    let mut lamps = Lamps::default();
    for _ in 0..from.length()? {
        kinds.push((lamps.read(from)?, from.byte()?));
        // Refuse a crowd before it takes room.
        if kinds.len() > Stock::MOST_KINDS {
            return None;
        }
    }
    from.finish()?;
    Some(kinds)
}

pub(super) fn position(position: &Position) -> Vec<u8> {
    let spec = position.spec();
    let mut to = Writer::default();
    if let Step::Rung(rung) = spec.step {
        to.byte(code_of(&STEPS, &Step::Rung(0)));
        to.byte(rung);
    } else {
        to.byte(code_of(&STEPS, &spec.step));
    }
    to.byte(code_of(&CLASSES, &spec.class));
    to.packed(spec.lead_metres);
    to.byte(spec.looked_over.into());
    to.optionals(&spec.checks);
    to.finish()
}

fn read_position(from: &mut Reader<'_>) -> Option<PositionSpec> {
    let mut step = from.one_of(&STEPS)?;
    if let Step::Rung(rung) = &mut step {
        *rung = from.byte()?;
    }
    let (class, lead_metres) = (from.one_of(&CLASSES)?, from.packed()?);
    let looked_over = from.some()?;
    let mut checks = [None; 6];
    from.optionals(checks.each_mut())?;
    from.finish()?;
    Some(PositionSpec { step, class, lead_metres, looked_over, checks })
}

pub(super) fn log(all: &[Kept], bench: &Setup) -> Vec<u8> {
    let mut to = Writer::default();
    let (mut bench, mut meter) = (bench, MeterSpec::default());
    to.length(all.len());
    for kept in all {
        let spec = kept.spec();
        if spec.setup == *bench {
            to.byte(SAME);
        } else if (&spec.setup.supply, &spec.setup.plate) == (&bench.supply, &bench.plate) {
            to.byte(OTHER_BANK);
            v2::write_bank(&mut to, &spec.setup);
        } else {
            to.byte(OTHER_BENCH);
            v2::write_setup(&mut to, &spec.setup);
        }
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "whole, from 0 to 8.64e15"
        )]
        to.whole(spec.milliseconds as u64);
        to.whole(spec.rung.unwrap_or(0).into());
        to.byte((spec.meter != meter).into());
        if spec.meter != meter {
            for number in [spec.meter.percent, spec.meter.digits, spec.meter.counts] {
                to.packed(number);
            }
            to.byte(code_of(&RESPONSES, &spec.meter.response));
        }
        to.optionals(&spec.numbers);
        to.byte(code_of(&LOOKS, &spec.look));
        to.byte(code_of(&BEHAVIOURS, &spec.behaviour));
        to.byte(code_of(&ADVICE, &spec.verdict.map(|verdict| verdict.advice)));
        if let Some(verdict) = spec.verdict {
            to.byte(code_of(&CONDITIONS, &verdict.leader));
            to.packed(verdict.weight);
        }
        to.length(spec.note.len());
        to.bytes(spec.note.as_bytes());
        (bench, meter) = (&spec.setup, spec.meter);
    }
    to.finish()
}

/// A kept reading that was read, without its bench.
struct Row {
    bench: Bench,
    milliseconds: u64,
    rung: u64,
    meter: MeterSpec,
    numbers: [Option<f64>; Kind::ALL.len()],
    look: Option<GlowWord>,
    behaviour: Option<Behaviour>,
    verdict: Option<Verdict>,
    note: String,
}

enum Bench {
    Same,
    Bank(Groups),
    Whole(v1::Parts),
}

fn read_log(from: &mut Reader<'_>) -> Option<Vec<Row>> {
    let mut rows = Vec::new();
    let mut meter = MeterSpec::default();
    for _ in 0..from.length()? {
        let row = read_row(from, meter)?;
        meter = row.meter;
        rows.push(row);
    }
    from.finish()?;
    Some(rows)
}

fn read_row(from: &mut Reader<'_>, mut meter: MeterSpec) -> Option<Row> {
    let bench = match from.one_of(&BENCHES)? {
        SAME => Bench::Same,
        OTHER_BANK => Bench::Bank(v2::read_bank(from)?),
        _ => Bench::Whole(v2::read_setup(from)?),
    };
    let (milliseconds, rung) = (from.whole()?, from.whole()?);
    if from.one_of(&METERS)? {
        let (percent, digits, counts) = (from.packed()?, from.packed()?, from.packed()?);
        meter = MeterSpec { percent, digits, counts, response: from.one_of(&RESPONSES)? };
    }
    let mut numbers = [None; Kind::ALL.len()];
    from.optionals(numbers.each_mut())?;
    let (look, behaviour) = (from.one_of(&LOOKS)?, from.one_of(&BEHAVIOURS)?);
    let verdict = match from.one_of(&ADVICE)? {
        Some(advice) => Some(Verdict { advice, leader: from.one_of(&CONDITIONS)?, weight: from.packed()? }),
        None => None,
    };
    let length = from.length()?;
    let note = String::from(core::str::from_utf8(from.bytes(length)?).ok()?);
    Some(Row { bench, milliseconds, rung, meter, numbers, look, behaviour, verdict, note })
}

impl Row {
    /// The kept reading; `bench` is the one before, and becomes this one's.
    fn build(self, bench: &mut Setup) -> Result<Kept, LinkError> {
        match self.bench {
            Bench::Same => {}
            Bench::Bank(groups) => bench.bank = v1::build_bank(groups)?,
            Bench::Whole(parts) => *bench = v1::build(parts)?,
        }
        #[expect(clippy::cast_precision_loss, reason = "what an f64 cannot hold is out of range")]
        let milliseconds = self.milliseconds as f64;
        // A rung of 0 is none; a forged one beyond 32 bits is refused with the greatest.
        let rung = (self.rung > 0).then(|| u32::try_from(self.rung).unwrap_or(u32::MAX));
        let spec = KeptSpec {
            milliseconds,
            setup: bench.clone(),
            rung,
            meter: self.meter,
            numbers: self.numbers,
            look: self.look,
            behaviour: self.behaviour,
            verdict: self.verdict,
            note: self.note,
        };
        Kept::from_spec(spec).map_err(LinkError::Refused)
    }
}

/// A set-up and the parts behind it, read.
pub(super) fn decode(setup: Setup, parts: Behind<'_>) -> Result<HandedOn, LinkError> {
    let mut handed = HandedOn::only(setup);
    for (part, bytes) in parts {
        let mut from = Reader::new(bytes);
        match part {
            Part::Stock => {
                let Some(kinds) = read_stock(&mut from) else { return Err(from.error()) };
                handed.stock = Some(v1::build_stock(kinds)?);
            }
            Part::Position => {
                let Some(spec) = read_position(&mut from) else { return Err(from.error()) };
                handed.position = Some(Position::from_spec(spec).map_err(LinkError::Refused)?);
            }
            Part::Log => {
                let Some(rows) = read_log(&mut from) else { return Err(from.error()) };
                let mut bench = handed.setup.clone();
                handed.log = rows.into_iter().map(|row| row.build(&mut bench)).collect::<Result<_, _>>()?;
            }
        }
    }
    Ok(handed)
}
