//! The readings that a person keeps: what is stored of each, and what becomes of them here. How they are stored is in
//! [`crate::browser::log`].

use std::rc::Rc;

use lampladder_core::condition::Condition;
use lampladder_core::diagnosis::Advice;
use lampladder_core::glow::GlowWord;
use lampladder_core::readings::{Behaviour, Kind, MeterSpec};
use serde::{Deserialize, Serialize};

/// Version of [`Record`]. A record of a higher one is left alone.
pub const VERSION: u32 = 1;

/// One switch-on, as it was read.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Record {
    /// [`VERSION`] when it was stored.
    pub version: u32,
    /// Milliseconds since 1970 at which it was kept; no two records share it.
    pub id: f64,
    /// The bench with its bank, as in a link.
    pub setup: String,
    /// The rung of the ladder, where one was climbed.
    pub rung: Option<u32>,
    /// The meter.
    pub meter: MeterSpec,
    /// What it showed, SI.
    pub numbers: Vec<(Kind, f64)>,
    /// What the brightest lamp looked like.
    pub look: Option<GlowWord>,
    /// What it did over time.
    pub behaviour: Option<Behaviour>,
    /// What the readings came to at the time.
    pub verdict: Option<Verdict>,
    /// What the person wrote beside it.
    pub note: String,
}

/// What readings came to.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Verdict {
    /// What to do.
    pub advice: Advice,
    /// The condition that led.
    pub leader: Condition,
    /// Its weight, 0 to 1.
    pub weight: f64,
}

/// Why the log is not stored.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Trouble {
    /// The browser stores nothing for the page.
    Forbidden,
    /// There is no room left.
    Full,
    /// The program that stores it cannot be had.
    Lost,
}

/// One step from what is stored to what is to be stored.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Change {
    /// This record, in place of the one of the same number.
    Put(Record),
    /// The record of this number goes.
    Delete(f64),
}

/// What is asked of the store.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Order {
    /// Everything.
    List,
    /// These changes, all or none.
    Change(Vec<Change>),
}

/// What the store answers.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum News {
    /// The records that can be read, and how many cannot.
    Listed(Vec<Record>, usize),
    /// The changes are stored.
    Stored,
    /// They are not.
    Refused(Trouble),
}

/// Records, the newest first.
pub type Records = Rc<Vec<Rc<Record>>>;

/// What has been kept.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Log {
    /// Whether anybody has asked for it: it is not read before.
    pub wanted: bool,
    /// What there is of it.
    pub records: Records,
    /// How many records are of a newer version.
    pub foreign: usize,
    /// What the store holds; `None` before it has been asked.
    pub stored: Option<Records>,
    /// Why it is not stored.
    pub trouble: Option<Trouble>,
    /// Whether the store is to be asked again: another window of the page may have changed it.
    pub stale: bool,
    /// Readings from elsewhere, which wait until it is known what the store holds.
    pub coming: Vec<Record>,
    /// Whether they come from a link.
    pub from_link: bool,
    /// What became of the last that came.
    pub adopted: Option<Adopted>,
}

/// What became of readings from elsewhere.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Adopted {
    /// How many are new here.
    pub added: usize,
    /// How many were here already.
    pub known: usize,
}

impl Record {
    /// Whether it is the very same reading, whatever was written beside it and whatever it came to.
    pub fn is_same_reading(&self, other: &Self) -> bool {
        (&self.setup, self.rung, self.meter, &self.numbers)
            == (&other.setup, other.rung, other.meter, &other.numbers)
            && (self.look, self.behaviour) == (other.look, other.behaviour)
    }
}

impl Log {
    /// Somebody looks at it again.
    pub fn look_again(&mut self) {
        self.stale = self.stored.is_some();
    }

    /// The store has been emptied: all is to be put in again.
    pub fn store_again(&mut self) {
        if self.stored.is_some() {
            self.stored = Some(Records::default());
        }
    }

    /// Puts in a record; a number that is taken moves on to the next.
    pub fn add(&mut self, mut record: Record) {
        while self.records.iter().any(|other| other.id == record.id) {
            record.id += 1.0;
        }
        self.insert(Rc::new(record));
    }

    fn insert(&mut self, record: Rc<Record>) {
        let records = Rc::make_mut(&mut self.records);
        let at = records.iter().position(|other| other.id < record.id).unwrap_or(records.len());
        records.insert(at, record);
    }

    /// Takes in readings from elsewhere, as soon as it is known what there is. One that is here already is left as it is,
    /// and a different one of the same number moves on to the next: nothing that was here is lost.
    pub fn adopt(&mut self, records: Vec<Record>, from_link: bool) {
        self.wanted = true;
        self.from_link = from_link;
        self.adopted = None;
        self.coming.extend(records);
        self.settle();
    }

    /// Goes on with what waits, if it is known what there is.
    fn settle(&mut self) {
        if self.stored.is_none() && self.trouble.is_none() {
            return;
        }
        for mut record in core::mem::take(&mut self.coming) {
            let adopted = self.adopted.get_or_insert(Adopted { added: 0, known: 0 });
            loop {
                match self.records.iter().find(|other| other.id == record.id) {
                    Some(other) if other.is_same_reading(&record) => {
                        adopted.known += 1;
                        break;
                    }
                    Some(_) => record.id += 1.0,
                    None => {
                        adopted.added += 1;
                        self.insert(Rc::new(record));
                        break;
                    }
                }
            }
        }
    }

    /// The store does not take the last change.
    pub fn fail(&mut self, trouble: Trouble) {
        self.trouble = Some(trouble);
        self.settle();
    }

    /// Takes in what is stored; what has been kept, changed or deleted here meanwhile stays so.
    pub fn learn(&mut self, stored: Vec<Record>, foreign: usize) {
        self.foreign = foreign;
        self.trouble = None;
        self.stale = false;
        let known = self.stored.take().unwrap_or_default();
        let stored: Vec<Rc<Record>> = stored.into_iter().map(Rc::new).collect();
        let same = |all: &[Rc<Record>], id: f64| all.iter().position(|other| other.id == id);
        // What is here as it was stored goes with the store.
        let untouched = |record: &Rc<Record>| known.contains(record);
        if self.records.iter().any(|record| untouched(record) && !stored.contains(record)) {
            Rc::make_mut(&mut self.records).retain(|record| !untouched(record) || stored.contains(record));
        }
        for record in &stored {
            let deleted_here = known.contains(record);
            if same(&self.records, record.id).is_none() && !deleted_here {
                self.insert(Rc::clone(record));
            }
        }
        self.stored = Some(Rc::new(stored));
        self.settle();
    }

    /// Writes beside a record.
    pub fn note(&mut self, id: f64, text: String) {
        if let Some(record) = Rc::make_mut(&mut self.records).iter_mut().find(|record| record.id == id) {
            Rc::make_mut(record).note = text;
        }
    }

    /// Takes a record out.
    pub fn delete(&mut self, id: f64) {
        Rc::make_mut(&mut self.records).retain(|record| record.id != id);
    }
}

/// The way from some records to others.
pub fn changes(from: &Records, to: &Records) -> Vec<Change> {
    let put = to.iter().filter(|record| !from.contains(record)).map(|record| Change::Put((**record).clone()));
    let gone = from.iter().filter(|record| to.iter().all(|other| other.id != record.id));
    put.chain(gone.map(|record| Change::Delete(record.id))).collect()
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;

    pub(crate) fn record(id: f64) -> Record {
        Record {
            version: VERSION,
            id,
            setup: String::from("1"),
            rung: None,
            meter: MeterSpec::default(),
            numbers: vec![(Kind::BankVolts, 28.0)],
            look: None,
            behaviour: None,
            verdict: None,
            note: String::new(),
        }
    }

    fn ids(log: &Log) -> Vec<f64> {
        log.records.iter().map(|record| record.id).collect()
    }

    #[test]
    fn the_newest_is_first_and_no_two_share_a_number() {
        let mut log = Log::default();
        log.add(record(5.0));
        log.add(record(9.0));
        log.add(record(5.0));
        assert_eq!(ids(&log), [9.0, 6.0, 5.0]);
    }

    #[test]
    fn what_is_stored_joins_what_was_kept_before_it_was_known() {
        let mut log = Log { trouble: Some(Trouble::Lost), ..Log::default() };
        log.add(record(7.0));
        log.learn(vec![record(3.0), record(7.0), record(8.0)], 2);
        assert_eq!((ids(&log), log.foreign, log.trouble), (vec![8.0, 7.0, 3.0], 2, None));
        let stored = log.stored.clone().expect("known");
        assert!(changes(&stored, &log.records).is_empty());
        log.delete(3.0);
        assert_eq!(changes(&stored, &log.records), [Change::Delete(3.0)]);
    }

    #[test]
    fn what_another_window_has_changed_comes_in_and_what_is_changed_here_stays() {
        let noted = |id: f64, note: &str| Record { note: note.to_owned(), ..record(id) };
        let mut log = Log::default();
        log.learn([1.0, 2.0, 3.0, 4.0, 5.0].map(record).to_vec(), 0);
        log.note(1.0, String::from("mine"));
        log.delete(2.0);
        log.add(record(7.0));
        log.look_again();
        assert!(log.stale);
        // There: 3 is deleted, 4 is written beside, 6 is new.
        log.learn(vec![record(1.0), record(2.0), noted(4.0, "theirs"), record(5.0), record(6.0)], 0);
        assert_eq!((ids(&log), log.stale), (vec![7.0, 6.0, 5.0, 4.0, 1.0], false));
        let notes: Vec<&str> = log.records.iter().map(|record| record.note.as_str()).collect();
        assert_eq!(notes, ["", "", "", "theirs", "mine"]);
        let stored = log.stored.clone().expect("known");
        let left = [Change::Put(record(7.0)), Change::Put(noted(1.0, "mine")), Change::Delete(2.0)];
        assert_eq!(changes(&stored, &log.records), left);
    }

    #[test]
    fn an_emptied_store_gets_everything_again() {
        let mut log = Log::default();
        log.store_again();
        assert!(log.stored.is_none(), "what has not been read cannot be put again");
        log.learn(vec![record(1.0), record(2.0)], 0);
        log.store_again();
        let stored = log.stored.clone().expect("known to be empty");
        assert_eq!(changes(&stored, &log.records).len(), 2);
    }

    #[test]
    fn readings_from_elsewhere_wait_for_the_store_and_none_is_lost_or_doubled() {
        let mut log = Log::default();
        let other = |id: f64, volts: f64| Record { numbers: vec![(Kind::BankVolts, volts)], ..record(id) };
        log.adopt(vec![record(5.0), other(7.0, 99.0), other(9.0, 1.0)], false);
        assert!(log.wanted && log.records.is_empty() && log.adopted.is_none());
        let noted = Record { note: String::from("mine"), ..record(5.0) };
        log.learn(vec![noted.clone(), record(7.0)], 0);
        assert_eq!(log.adopted, Some(Adopted { added: 2, known: 1 }));
        assert_eq!(ids(&log), [9.0, 8.0, 7.0, 5.0]);
        assert_eq!(*log.records[3], noted);
        // The same once more, where its number has moved on.
        log.adopt(vec![other(7.0, 99.0)], false);
        assert_eq!((log.adopted, log.records.len()), (Some(Adopted { added: 0, known: 1 }), 4));
        // A phone that stores nothing shows them all the same.
        let mut log = Log::default();
        log.adopt(vec![record(5.0)], true);
        log.fail(Trouble::Forbidden);
        assert_eq!(ids(&log), [5.0]);
    }

    #[test]
    fn changes_lead_from_one_state_to_the_other_and_touch_nothing_else() {
        let mut log = Log::default();
        for id in [1.0, 2.0, 3.0] {
            log.add(record(id));
        }
        let before = Rc::clone(&log.records);
        assert!(changes(&before, &log.records).is_empty());
        log.note(2.0, String::from("hums"));
        log.delete(1.0);
        log.add(record(4.0));
        let noted = Record { note: String::from("hums"), ..record(2.0) };
        let expected = [Change::Put(record(4.0)), Change::Put(noted), Change::Delete(1.0)];
        assert_eq!(changes(&before, &log.records), expected);
        assert_eq!(changes(&log.records, &before).len(), 3);
    }

    #[test]
    fn notes_and_deletions_of_what_is_not_there_change_nothing() {
        let mut log = Log::default();
        log.add(record(1.0));
        let before = log.clone();
        log.note(2.0, String::from("x"));
        log.delete(2.0);
        assert_eq!(log, before);
    }
}
