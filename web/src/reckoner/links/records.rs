//! Kept readings from elsewhere: each is held against what a reading can be before it joins the log.

use lampladder_core::error::InputError;
use lampladder_core::kept::{self, Kept, KeptSpec};
use lampladder_core::link::{self, LinkError};
use lampladder_core::readings::Kind;
use serde::{Deserialize, Serialize};

use crate::log::{Record, VERSION, Verdict};

/// What a file of ours is called in itself.
pub const FORMAT: &str = "lampladder-readings";
/// Version of the file. A file of a higher one is refused.
pub const FILE_VERSION: u32 = 1;

/// Why nothing of a file can be read.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Unread {
    /// No JSON: cut short, damaged, or something else altogether.
    Broken,
    /// JSON of some other program.
    Foreign,
    /// Made by a newer version of this program.
    Newer,
}

/// What was found in a file.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Found {
    /// The readings that are fine.
    pub records: Vec<Record>,
    /// How many are not.
    pub refused: usize,
    /// The first of these: its place in the file, from 1, and what is wrong with it.
    pub first: Option<(usize, Wrong)>,
}

/// What is wrong with a reading of a file.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub enum Wrong {
    /// It is not a reading at all: something is missing, or of another kind.
    Shape,
    /// It is of a newer version.
    Newer,
    /// Its bench cannot be read.
    Bench(LinkError),
    /// A number cannot be.
    Number(InputError),
}

impl Found {
    /// Takes in what was read of the next place, `None` for what is no reading of this version; and the version that it
    /// says it has.
    pub fn take(&mut self, record: Option<Record>, version: Option<f64>) {
        let place = self.records.len() + self.refused + 1;
        let newer = version.is_some_and(|version| version > f64::from(VERSION));
        let wrong = if newer { Wrong::Newer } else { Wrong::Shape };
        let checked = record.ok_or(wrong).and_then(|record| kept(&record).map(|_| record));
        match checked {
            Ok(record) => self.records.push(record),
            Err(wrong) => {
                self.refused += 1;
                self.first = self.first.or(Some((place, wrong)));
            }
        }
    }
}

/// A record, checked.
///
/// # Errors
/// What is wrong with it.
pub fn kept(record: &Record) -> Result<Kept, Wrong> {
    if record.version > VERSION {
        return Err(Wrong::Newer);
    }
    let setup = link::decode(&record.setup).map_err(Wrong::Bench)?;
    let mut numbers = [None; Kind::ALL.len()];
    for (kind, value) in &record.numbers {
        // No reading is there twice.
        if numbers[*kind as usize].replace(*value).is_some() {
            return Err(Wrong::Shape);
        }
    }
    let verdict = |verdict: Verdict| kept::Verdict {
        advice: verdict.advice,
        leader: verdict.leader,
        weight: verdict.weight,
    };
    let spec = KeptSpec {
        milliseconds: record.id,
        setup,
        rung: record.rung,
        meter: record.meter,
        numbers,
        look: record.look,
        behaviour: record.behaviour,
        verdict: record.verdict.map(verdict),
        note: record.note.clone(),
    };
    Kept::from_spec(spec).map_err(Wrong::Number)
}

/// A kept reading as it is stored.
pub(super) fn record(kept: &Kept) -> Record {
    let spec = kept.spec();
    let verdict = |verdict: kept::Verdict| Verdict {
        advice: verdict.advice,
        leader: verdict.leader,
        weight: verdict.weight,
    };
    let numbers = Kind::ALL.into_iter().zip(spec.numbers);
    Record {
        version: VERSION,
        id: spec.milliseconds,
        setup: link::encode(&spec.setup),
        rung: spec.rung,
        meter: spec.meter,
        numbers: numbers.filter_map(|(kind, value)| Some((kind, value?))).collect(),
        look: spec.look,
        behaviour: spec.behaviour,
        verdict: spec.verdict.map(verdict),
        note: spec.note.clone(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::log::tests::record as plain;
    use lampladder_core::error::Field;
    use lampladder_core::setup::Setup;

    fn good() -> Record {
        Record { setup: link::encode(&Setup::example().expect("in range")), ..plain(5.0) }
    }

    #[test]
    fn a_record_comes_back_from_core() {
        let verdict = Verdict {
            advice: lampladder_core::diagnosis::Advice::Stop,
            leader: lampladder_core::condition::Condition::Shorted,
            weight: 0.9,
        };
        let all = Record {
            rung: Some(3),
            look: Some(lampladder_core::glow::GlowWord::Full),
            behaviour: Some(lampladder_core::readings::Behaviour::Steady),
            verdict: Some(verdict),
            note: String::from("x"),
            ..good()
        };
        assert_eq!(record(&kept(&all).expect("fine")), all);
    }

    #[test]
    fn each_record_is_judged_by_itself_and_the_first_bad_one_is_named() {
        let mut found = Found::default();
        let huge = Record { numbers: vec![(Kind::BankVolts, 1e300)], ..good() };
        let twice = Record { numbers: vec![(Kind::BankVolts, 1.0), (Kind::BankVolts, 2.0)], ..good() };
        for record in [
            Some(good()),
            Some(huge),
            None,
            Some(Record { version: 2, ..good() }),
            Some(Record { setup: String::from("junk"), ..good() }),
            Some(twice),
            Some(Record { id: f64::NAN, ..good() }),
            Some(Record { id: 6.0, ..good() }),
        ] {
            found.take(record, None);
        }
        assert_eq!((found.records.len(), found.refused), (2, 6));
        let Some((2, Wrong::Number(error))) = found.first else { panic!("{:?}", found.first) };
        assert_eq!(error.field(), Field::BankVolts);
        let mut newer = Found::default();
        newer.take(None, Some(2.0));
        assert_eq!(newer.first, Some((1, Wrong::Newer)));
        assert_eq!(kept(&Record { setup: String::new(), ..good() }), Err(Wrong::Bench(LinkError::Empty)));
    }
}
