//! The reckoner: a second program beside the page, for whatever takes longer than a frame.
//!
//! It runs in a worker of the browser, so that typing never waits for it, and it is fetched after the first answer, so
//! that a first load stays small. Page and reckoner exchange [`Ask`]s and [`Answer`]s as bytes; how they travel is in
//! [`crate::browser::reckoner`]. Here is what the reckoner does with them, without any browser.
//!
//! For each [`Subject`] only the newest question counts: a [`Desk`] drops the work for an older one.

pub mod diagnosis;
pub mod ladder;
pub mod links;
pub mod pulses;
pub mod runs;
pub mod unknown;

use serde::{Deserialize, Serialize};

use crate::log;

/// What is asked. The newest of a subject replaces the one before.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Ask {
    /// The first seconds.
    Replay(runs::Wanted),
    /// How lamps pulse.
    Pulses(pulses::Wanted),
    /// What readings mean.
    Diagnosis(diagnosis::Taken),
    /// Something of the stored log: no work, but the reckoner's program has room for what it takes.
    Log(log::Order),
    /// The rungs.
    Ladder(ladder::Wanted),
    /// A lamp without a legible rating.
    Unknown(unknown::Measured),
    /// Handing on.
    Links(links::Wanted),
}

/// What is answered: once, or piece by piece.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Answer {
    /// One run of a replay.
    Replay(Box<runs::News>),
    /// How the lamps pulse in one condition.
    Pulse(Box<pulses::News>),
    /// What readings mean.
    Diagnosis(Box<diagnosis::News>),
    /// What has become of the stored log.
    Log(Box<log::News>),
    /// A piece of the ladder.
    Ladder(Box<ladder::News>),
    /// The ratings that fit.
    Unknown(unknown::Fits),
    /// What is handed on, or was.
    Links(Box<links::News>),
    /// The question cannot be read: page and reckoner are of different versions.
    Unreadable,
}

/// What a question is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Subject {
    /// The first seconds.
    Replay,
    /// How lamps pulse.
    Pulses,
    /// What readings mean.
    Diagnosis,
    /// The stored log.
    Log,
    /// The ladder.
    Ladder,
    /// A lamp without a legible rating.
    Unknown,
    /// The link of the bench.
    Link,
    /// What a link holds.
    Opening,
    /// Readings in files.
    Files,
}

impl Ask {
    /// What it is about.
    pub const fn subject(&self) -> Subject {
        match self {
            Self::Replay(_) => Subject::Replay,
            Self::Pulses(_) => Subject::Pulses,
            Self::Diagnosis(_) => Subject::Diagnosis,
            Self::Log(_) => Subject::Log,
            Self::Ladder(_) => Subject::Ladder,
            Self::Unknown(_) => Subject::Unknown,
            Self::Links(links::Wanted::Link(_)) => Subject::Link,
            Self::Links(links::Wanted::Open(..)) => Subject::Opening,
            Self::Links(_) => Subject::Files,
        }
    }
}

/// Numbers the questions, so that a late answer to an old one is known as such.
pub type Number = u32;

/// Milliseconds of a clock that never goes back.
pub type Clock<'a> = &'a dyn Fn() -> f64;

/// What a stretch of work has come to.
#[derive(Debug)]
pub enum Step {
    /// Nothing to tell yet.
    More,
    /// Something to tell, and more to do.
    News(Answer),
    /// The last of it.
    Last(Answer),
    /// There was nothing to do.
    Over,
}

/// Work that goes on a stretch at a time, some milliseconds each.
pub trait Task {
    /// Goes on.
    fn go_on(&mut self, clock: Clock<'_>) -> Step;
}

/// One question at work. What is finished stays: the next question may begin where it ended.
#[derive(Debug)]
struct Seat<T> {
    number: Number,
    busy: bool,
    task: T,
}

/// What is at work.
#[derive(Debug, Default)]
pub struct Desk {
    replay: Option<Seat<runs::Runs>>,
    pulses: Option<Seat<pulses::Pulsing>>,
    diagnosis: Option<Seat<diagnosis::Diagnosing>>,
    ladder: Option<Seat<ladder::Climb>>,
    unknown: Option<Seat<unknown::Search>>,
}

impl Desk {
    /// Takes a question; an answer where there is one at once.
    pub fn put(&mut self, number: Number, ask: Ask) -> Option<Answer> {
        let taken = match ask {
            Ask::Links(wanted) => {
                return Some(
                    links::answer(&wanted).map_or(Answer::Unreadable, |news| Answer::Links(Box::new(news))),
                );
            }
            Ask::Replay(wanted) => {
                let earlier = self.replay.take().map(|seat| seat.task);
                runs::Runs::new(wanted, earlier)
                    .map(|task| self.replay = Some(Seat::new(number, task)))
                    .is_ok()
            }
            Ask::Pulses(wanted) => {
                pulses::Pulsing::new(wanted).map(|task| self.pulses = Some(Seat::new(number, task))).is_ok()
            }
            // That is for whoever has a store.
            Ask::Log(_) => false,
            Ask::Diagnosis(taken) => {
                let earlier = self.diagnosis.take().map(|seat| seat.task);
                diagnosis::Diagnosing::new(taken, earlier)
                    .map(|task| self.diagnosis = Some(Seat::new(number, task)))
                    .is_ok()
            }
            Ask::Ladder(wanted) => {
                ladder::Climb::new(&wanted).map(|task| self.ladder = Some(Seat::new(number, task))).is_ok()
            }
            Ask::Unknown(measured) => {
                self.unknown = Some(Seat::new(number, unknown::Search::new(measured)));
                true
            }
        };
        if taken { None } else { Some(Answer::Unreadable) }
    }

    /// Whether there is anything to do.
    pub fn is_busy(&self) -> bool {
        self.ladder.as_ref().is_some_and(|seat| seat.busy)
            || self.unknown.as_ref().is_some_and(|seat| seat.busy)
            || self.diagnosis.as_ref().is_some_and(|seat| seat.busy)
            || self.pulses.as_ref().is_some_and(|seat| seat.busy)
            || self.replay.as_ref().is_some_and(|seat| seat.busy)
    }

    /// Goes on for a stretch; what there is to tell. What is short goes first.
    pub fn go_on(&mut self, clock: Clock<'_>) -> Option<(Number, Answer)> {
        if let Some(seat) = self.ladder.as_mut().filter(|seat| seat.busy) {
            return seat.go_on(clock);
        }
        if let Some(seat) = self.unknown.as_mut().filter(|seat| seat.busy) {
            return seat.go_on(clock);
        }
        if let Some(seat) = self.diagnosis.as_mut().filter(|seat| seat.busy) {
            return seat.go_on(clock);
        }
        if let Some(seat) = self.pulses.as_mut().filter(|seat| seat.busy) {
            return seat.go_on(clock);
        }
        self.replay.as_mut().and_then(|seat| seat.go_on(clock))
    }
}

impl<T: Task> Seat<T> {
    const fn new(number: Number, task: T) -> Self {
        Self { number, busy: true, task }
    }

    fn go_on(&mut self, clock: Clock<'_>) -> Option<(Number, Answer)> {
        if !self.busy {
            return None;
        }
        let (busy, answer) = match self.task.go_on(clock) {
            Step::More => (true, None),
            Step::News(answer) => (true, Some(answer)),
            Step::Last(answer) => (false, Some(answer)),
            Step::Over => (false, None),
        };
        self.busy = busy;
        answer.map(|answer| (self.number, answer))
    }
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use super::*;
    use crate::replay::{self, Wish};
    use lampladder_core::condition::Condition;
    use lampladder_core::setup::Setup;

    fn replay() -> Ask {
        let setup = Rc::new(Setup::example().expect("in range"));
        Ask::Replay(replay::Ask::of(&Wish::default(), &setup, Condition::Healthy).wanted())
    }

    #[test]
    fn a_newer_question_takes_the_place_of_the_older() {
        let mut desk = Desk::default();
        assert!(!desk.is_busy() && desk.put(1, replay()).is_none() && desk.is_busy());
        assert!(desk.put(2, replay()).is_none());
        let mut told = 0;
        while desk.is_busy() {
            if let Some((number, _)) = desk.go_on(&|| 0.0) {
                assert_eq!(number, 2);
                told += 1;
            }
        }
        assert_eq!(told, 4);
    }

    #[test]
    fn short_work_does_not_wait_for_a_replay() {
        let setup = lampladder_core::link::encode(&Setup::example().expect("in range"));
        let stock = lampladder_core::link::encode_stock(&lampladder_core::stock::Stock::default());
        let mut desk = Desk::default();
        desk.put(1, replay());
        desk.put(2, Ask::Ladder(ladder::Wanted { setup, stock }));
        let first = desk.go_on(&|| 0.0);
        assert!(matches!(first, Some((2, Answer::Ladder(_)))), "{first:?}");
        assert!(desk.is_busy());
    }

    #[test]
    fn questions_and_answers_survive_the_way() {
        let ask = replay();
        let bytes = postcard::to_allocvec(&(7 as Number, &ask)).expect("in memory");
        assert_eq!(postcard::from_bytes::<(Number, Ask)>(&bytes).expect("whole"), (7, ask.clone()));
        let mut desk = Desk::default();
        desk.put(7, ask);
        let answer = loop {
            if let Some(answer) = desk.go_on(&|| 0.0) {
                break answer;
            }
        };
        let bytes = postcard::to_allocvec(&answer).expect("in memory");
        assert_eq!(postcard::from_bytes::<(Number, Answer)>(&bytes).expect("whole"), answer);
    }

    #[test]
    fn a_bench_of_another_version_is_said_to_be_so() {
        let Ask::Replay(wanted) = replay() else { panic!("not a replay") };
        let other = Ask::Replay(runs::Wanted { setup: String::from("9zzz"), ..wanted });
        let mut desk = Desk::default();
        assert_eq!(desk.put(1, other), Some(Answer::Unreadable));
        assert!(!desk.is_busy());
    }
}
