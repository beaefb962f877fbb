//! What a repairer sees: the meter, its readings as typed, the look of the lamp, and what has been kept of it. Pure.

use lampladder_core::glow::GlowWord;
use lampladder_core::link;
use lampladder_core::quantity;
use lampladder_core::readings::{Behaviour, Kind, Meter, MeterSpec, Reading, Response};
use lampladder_core::setup::Setup;

use crate::doubt::{is_bare, is_doubtful};
use crate::draft::{Fault, MeterPart, Slot};
use crate::format::Numerals;
use crate::log::{Log, Record, Records, Trouble, VERSION, Verdict};
use crate::meter::written;
use crate::reckoner::diagnosis::Taken;

/// Most changes that can be taken back.
const UNDOS: usize = 20;

/// The readings of one switch-on, as typed and tapped.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Sheet {
    /// What was typed, in the order of [`Kind::ALL`].
    pub numbers: [String; Kind::ALL.len()],
    /// What the brightest lamp looks like.
    pub look: Option<GlowWord>,
    /// What it does over time.
    pub behaviour: Option<Behaviour>,
}

/// Something to take back.
#[derive(Debug, Clone, PartialEq)]
enum Before {
    Records(Records),
    /// With the number of the record whose note was being written.
    Note(Records, f64),
    Sheet(Sheet),
}

/// What a repairer sees.
#[derive(Debug, Clone, PartialEq)]
pub struct Seen {
    /// Per cent, digits and counts as typed.
    pub meter: [String; 3],
    /// The last valid meter.
    pub spec: MeterSpec,
    /// Whether the meter is laid out.
    pub meter_open: bool,
    /// The readings.
    pub sheet: Sheet,
    /// The rung, from 1, whose lamps were in the loop when they were last kept.
    pub rung: Option<u32>,
    /// What has been kept.
    pub log: Log,
    /// What is wrong with what is typed.
    pub faults: Vec<(Slot, Fault)>,
    before: Vec<Before>,
}

/// What is done to it.
#[derive(Debug, Clone, PartialEq)]
pub enum Deed {
    /// Another meter: per cent, digits and counts.
    Meter(MeterSpec),
    /// What it makes of a waveform.
    Response(Response),
    /// Lay out the meter, or put it away.
    ShowMeter,
    /// A glow was tapped.
    Look(GlowWord),
    /// A behaviour was tapped.
    Behave(Behaviour),
    /// All readings go.
    Empty,
    /// The log is wanted.
    WantLog,
    /// Keep the readings: milliseconds since 1970, what they came to.
    Keep(f64, Option<Verdict>),
    /// Write beside a record.
    Note(f64, String),
    /// A record goes.
    Delete(f64),
    /// The last change is taken back.
    Undo,
    /// The store holds this, and so many records of a newer version.
    Learn(Vec<Record>, usize),
    /// It holds these now.
    Stored(Records),
    /// It does not take the last change.
    Trouble(Trouble),
    /// Somebody looks at the log again.
    LookAgain,
    /// Readings come from elsewhere: from a link, or from a file.
    Adopt(Vec<Record>, bool),
}

impl Seen {
    /// Nothing seen yet, through this meter.
    pub fn new(spec: MeterSpec, numerals: Numerals) -> Self {
        Self {
            meter: written(&spec, numerals),
            spec,
            meter_open: false,
            sheet: Sheet::default(),
            rung: None,
            log: Log::default(),
            faults: Vec::new(),
            before: Vec::new(),
        }
    }

    /// What stands in one of its fields; `None` for a field of the bench.
    pub fn text(&self, slot: Slot) -> Option<&str> {
        match slot {
            Slot::Reading(kind) => Some(&self.sheet.numbers[kind as usize]),
            Slot::Meter(part) => Some(&self.meter[part as usize]),
            _ => None,
        }
    }

    /// Puts a text into one of its fields.
    pub fn set(&mut self, slot: Slot, text: String) {
        match slot {
            Slot::Reading(kind) => self.sheet.numbers[kind as usize] = text,
            Slot::Meter(part) => self.meter[part as usize] = text,
            _ => {}
        }
    }

    /// Does something.
    pub fn act(&mut self, deed: Deed, setup: &Setup, numerals: Numerals) {
        match deed {
            Deed::Meter(spec) => self.meter = written(&spec, numerals),
            Deed::Response(response) => self.spec.response = response,
            Deed::ShowMeter => self.meter_open = !self.meter_open,
            Deed::Look(word) => self.sheet.look = (self.sheet.look != Some(word)).then_some(word),
            Deed::Behave(one) => self.sheet.behaviour = (self.sheet.behaviour != Some(one)).then_some(one),
            Deed::Empty => {
                let sheet = core::mem::take(&mut self.sheet);
                self.remember(Before::Sheet(sheet));
            }
            Deed::LookAgain => self.log.look_again(),
            Deed::WantLog => self.log.wanted = true,
            Deed::Keep(id, verdict) => {
                self.remember(Before::Records(self.log.records.clone()));
                self.log.add(self.record(id, verdict, setup));
            }
            Deed::Note(id, text) => {
                // One note is one change, however many keys it took.
                if !matches!(self.before.last(), Some(Before::Note(_, other)) if *other == id) {
                    self.remember(Before::Note(self.log.records.clone(), id));
                }
                self.log.note(id, text);
            }
            Deed::Delete(id) => {
                self.remember(Before::Records(self.log.records.clone()));
                self.log.delete(id);
            }
            Deed::Undo => match self.before.pop() {
                Some(Before::Records(records) | Before::Note(records, _)) => self.log.records = records,
                Some(Before::Sheet(sheet)) => self.sheet = sheet,
                None => {}
            },
            Deed::Learn(records, foreign) => {
                let known = Records::clone(&self.log.records);
                self.log.learn(records, foreign);
                // Going back to before they were known would delete them.
                if known != self.log.records {
                    self.before.retain(|before| matches!(before, Before::Sheet(_)));
                }
            }
            Deed::Stored(records) => {
                self.log.stored = Some(records);
                self.log.trouble = None;
            }
            Deed::Trouble(trouble) => self.log.fail(trouble),
            Deed::Adopt(records, from_link) => {
                // Going back to before they came would delete them.
                self.before.retain(|before| matches!(before, Before::Sheet(_)));
                self.log.adopt(records, from_link);
            }
        }
    }

    fn remember(&mut self, before: Before) {
        if self.before.len() >= UNDOS {
            self.before.remove(0);
        }
        self.before.push(before);
    }

    /// Whether there is anything to take back.
    pub const fn can_undo(&self) -> bool {
        !self.before.is_empty()
    }

    /// Whether nothing is typed or tapped.
    pub fn is_empty(&self) -> bool {
        self.sheet == Sheet::default()
    }

    /// Reads what is typed; what cannot be read is left out, and told beside its field.
    pub fn reread(&mut self, setup: &Setup) {
        self.faults.clear();
        self.read_meter();
        for kind in Kind::ALL {
            if let Err(fault) = self.number(kind, setup) {
                self.faults.push((Slot::Reading(kind), fault));
            }
        }
    }

    fn read_meter(&mut self) {
        let mut read = [0.0; 3];
        let mut whole = true;
        for part in MeterPart::ALL {
            let slot = Slot::Meter(part);
            match quantity::parse(&self.meter[part as usize], slot.field()) {
                Ok(value) => read[part as usize] = value,
                Err(error) => {
                    whole = false;
                    self.faults.push((slot, Fault::Text(error)));
                }
            }
        }
        let [percent, digits, counts] = read;
        let spec = MeterSpec { percent, digits, counts, response: self.spec.response };
        if whole {
            match Meter::new(spec) {
                Ok(_) => self.spec = spec,
                Err(error) => {
                    let refused = MeterPart::ALL.into_iter().find(|part| part.field() == error.field());
                    let slot = Slot::Meter(refused.unwrap_or(MeterPart::Percent));
                    self.faults.push((slot, Fault::Number(error)));
                }
            }
        }
    }

    /// A reading; `None` where nothing is typed.
    fn number(&self, kind: Kind, setup: &Setup) -> Result<Option<f64>, Fault> {
        let text = &self.sheet.numbers[kind as usize];
        if text.trim().is_empty() {
            return Ok(None);
        }
        let value = quantity::parse(text, kind.field()).map_err(Fault::Text)?;
        let reading = Reading::new(kind, value, Meter::usual()).map_err(Fault::Number)?;
        if is_bare(text) && is_doubtful(kind, value, setup) {
            return Err(Fault::NoUnit);
        }
        Ok(Some(reading.value()))
    }

    fn values(&self, setup: &Setup) -> [Option<f64>; Kind::ALL.len()] {
        Kind::ALL.map(|kind| self.number(kind, setup).ok().flatten())
    }

    /// The question for the reckoner.
    pub fn taken(&self, setup: &Setup) -> Taken {
        Taken {
            setup: link::encode(setup),
            meter: self.spec,
            numbers: self.values(setup),
            look: self.sheet.look,
            behaviour: self.sheet.behaviour,
        }
    }

    fn record(&self, id: f64, verdict: Option<Verdict>, setup: &Setup) -> Record {
        let numbers = Kind::ALL.into_iter().zip(self.values(setup));
        Record {
            version: VERSION,
            id,
            setup: link::encode(setup),
            rung: self.rung,
            meter: self.spec,
            numbers: numbers.filter_map(|(kind, value)| Some((kind, value?))).collect(),
            look: self.sheet.look,
            behaviour: self.sheet.behaviour,
            verdict,
            note: String::new(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::doubt::meanings;
    use crate::meter::PLAIN;

    fn setup() -> Setup {
        Setup::example().expect("in range")
    }

    fn seen(typed: &[(Kind, &str)]) -> Seen {
        let mut seen = Seen::new(MeterSpec::default(), PLAIN);
        for (kind, text) in typed {
            seen.set(Slot::Reading(*kind), (*text).to_owned());
        }
        seen.reread(&setup());
        seen
    }

    #[test]
    fn readings_are_typed_as_people_write_them() {
        let seen = seen(&[
            (Kind::SupplyVolts, "231 V"),
            (Kind::BankVolts, "67,5"),
            (Kind::Amps, "160 mA"),
            (Kind::PlugOhms, "1k2"),
            (Kind::LoadWatts, " "),
        ]);
        assert!(seen.faults.is_empty(), "{:?}", seen.faults);
        let numbers = seen.taken(&setup()).numbers;
        assert_eq!(numbers, [Some(231.0), Some(67.5), None, Some(0.16), None, Some(1200.0)]);
    }

    #[test]
    fn what_cannot_be_read_is_left_out_and_stays_in_its_field() {
        let seen =
            seen(&[(Kind::BankVolts, "sixty"), (Kind::LoadVolts, "1e300"), (Kind::SupplyVolts, "230")]);
        let slots: Vec<Slot> = seen.faults.iter().map(|(slot, _)| *slot).collect();
        assert_eq!(slots, [Slot::Reading(Kind::BankVolts), Slot::Reading(Kind::LoadVolts)]);
        assert_eq!(seen.text(slots[0]), Some("sixty"));
        assert_eq!(seen.taken(&setup()).numbers[..3], [Some(230.0), None, None]);
    }

    #[test]
    fn a_bare_number_that_is_off_a_thousandfold_is_asked_about_and_answered_by_a_unit() {
        // A 60 W lamp passes a quarter of an ampere.
        for (kind, text, doubtful) in [
            (Kind::Amps, "160", true),
            (Kind::Amps, "0.16", false),
            (Kind::Amps, "160 mA", false),
            (Kind::Amps, "160 A", false),
            (Kind::Amps, "0,3", false),
            (Kind::PlugOhms, "1.2", true),
            (Kind::PlugOhms, "1.2 kΩ", false),
            (Kind::PlugOhms, "1.2 Ω", false),
            (Kind::PlugOhms, "45", false),
            (Kind::BankVolts, "160", false),
        ] {
            let seen = seen(&[(kind, text)]);
            let asked = seen.faults == [(Slot::Reading(kind), Fault::NoUnit)];
            assert_eq!(asked, doubtful, "{text}: {:?}", seen.faults);
            assert_eq!(seen.values(&setup())[kind as usize].is_none(), doubtful);
        }
        for (kind, [first, second]) in
            [(Kind::Amps, ["160 A", "160 mA"]), (Kind::PlugOhms, ["160 Ω", "160 kΩ"])]
        {
            assert_eq!(meanings(kind, " 160 "), [first, second]);
        }
    }

    #[test]
    fn a_meter_of_no_per_cent_is_refused_and_the_last_one_stays() {
        let mut seen = seen(&[]);
        seen.set(Slot::Meter(MeterPart::Percent), String::from("0,5"));
        seen.reread(&setup());
        assert_eq!((seen.spec.percent, seen.faults.len()), (0.5, 0));
        for text in ["0", "", "x", "31", "1 V"] {
            seen.set(Slot::Meter(MeterPart::Percent), text.to_owned());
            seen.reread(&setup());
            assert_eq!(seen.faults.len(), 1, "{text}");
            assert_eq!(seen.faults[0].0, Slot::Meter(MeterPart::Percent));
            assert_eq!(seen.spec.percent, 0.5);
        }
        let good = MeterSpec { percent: 0.8, digits: 3.0, counts: 6000.0, ..MeterSpec::default() };
        seen.act(Deed::Meter(good), &setup(), PLAIN);
        seen.act(Deed::Response(Response::Averaging), &setup(), PLAIN);
        seen.reread(&setup());
        assert_eq!(seen.spec, MeterSpec { response: Response::Averaging, ..good });
    }

    #[test]
    fn a_second_tap_takes_back_what_the_first_said() {
        let mut seen = seen(&[]);
        let setup = setup();
        seen.act(Deed::Look(GlowWord::Orange), &setup, PLAIN);
        seen.act(Deed::Behave(Behaviour::Steady), &setup, PLAIN);
        assert_eq!(seen.taken(&setup).look, Some(GlowWord::Orange));
        seen.act(Deed::Look(GlowWord::Amber), &setup, PLAIN);
        seen.act(Deed::Look(GlowWord::Amber), &setup, PLAIN);
        seen.act(Deed::Behave(Behaviour::Steady), &setup, PLAIN);
        assert!(seen.is_empty());
    }

    #[test]
    fn a_kept_reading_has_its_bench_and_each_change_is_taken_back() {
        let mut seen = seen(&[(Kind::BankVolts, "28"), (Kind::Amps, "nonsense")]);
        let setup = setup();
        let act = |seen: &mut Seen, deed| seen.act(deed, &setup, PLAIN);
        seen.rung = Some(2);
        act(&mut seen, Deed::Keep(5.0, None));
        let kept = seen.log.records[0].clone();
        assert_eq!((kept.rung, kept.numbers.as_slice()), (Some(2), [(Kind::BankVolts, 28.0)].as_slice()));
        assert_eq!(link::decode(&kept.setup).as_ref(), Ok(&setup));
        for text in ["h", "hu", "hum"] {
            act(&mut seen, Deed::Note(5.0, text.to_owned()));
        }
        act(&mut seen, Deed::Empty);
        act(&mut seen, Deed::Delete(5.0));
        assert!(seen.is_empty() && seen.log.records.is_empty());
        act(&mut seen, Deed::Undo);
        assert_eq!(seen.log.records[0].note, "hum");
        act(&mut seen, Deed::Undo);
        assert_eq!(seen.text(Slot::Reading(Kind::BankVolts)), Some("28"));
        act(&mut seen, Deed::Undo);
        assert_eq!(seen.log.records[0].note, "");
        act(&mut seen, Deed::Undo);
        assert!(seen.log.records.is_empty() && !seen.can_undo());
        act(&mut seen, Deed::Undo);
    }

    #[test]
    fn what_was_stored_before_is_not_undone() {
        let mut seen = seen(&[(Kind::BankVolts, "28")]);
        let setup = setup();
        seen.act(Deed::Keep(5.0, None), &setup, PLAIN);
        let old = Record { id: 1.0, ..(*seen.log.records[0]).clone() };
        seen.act(Deed::Learn(vec![old], 0), &setup, PLAIN);
        seen.act(Deed::Undo, &setup, PLAIN);
        assert_eq!(seen.log.records.len(), 2);
    }
}
