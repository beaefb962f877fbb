//! The runs of a replay: healthy and in another condition, behind the lamps and straight on the mains, the ones that
//! are watched first.

use std::collections::VecDeque;

use lampladder_core::condition::Condition;
use lampladder_core::link::{self, LinkError};
use lampladder_core::setup::Setup;
use lampladder_core::switch_on::{Energy, Options, Progress, Run, Sample, SwitchOn, SwitchOnError};
use serde::{Deserialize, Serialize};

use super::{Answer, Clock, Step, Task};
use crate::replay::{Closing, SPANS, Take};

/// A replay that is wanted.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Wanted {
    /// The bench, as in a link.
    pub setup: String,
    /// The condition beside the healthy one.
    pub fault: Condition,
    /// When the switch closes.
    pub closing: Closing,
    /// How long, seconds.
    pub seconds: f64,
}

/// What became of one run.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct News {
    /// 0 for healthy, 1 for the other condition.
    pub scene: u8,
    /// Whether straight on the mains.
    pub straight: bool,
    /// The run.
    pub take: Take,
    /// Milliseconds spent on it.
    pub milliseconds: f64,
    /// Whether nothing more will come.
    pub done: bool,
}

/// From here on a long run may be watched while the rest is worked out, seconds.
const ENOUGH: f64 = SPANS[0];

/// Steps of the solver between two looks at the clock.
const STEPS: u32 = 60;

/// One run at work.
#[derive(Debug)]
struct Job {
    condition: Condition,
    straight: bool,
    run: Option<Run>,
    /// Kept once it is complete: the next replay may want it again.
    whole: Option<Take>,
    milliseconds: f64,
}

/// The four runs of a replay.
#[derive(Debug)]
pub struct Runs {
    wanted: Wanted,
    setup: Setup,
    jobs: Vec<Job>,
    /// Known from before, still to be told.
    known: VecDeque<usize>,
    /// What is left: which job, and up to when.
    left: VecDeque<(usize, f64)>,
}

impl Runs {
    /// Work that takes from an earlier one what is still true.
    ///
    /// # Errors
    /// A bench that cannot be read.
    pub fn new(wanted: Wanted, earlier: Option<Self>) -> Result<Self, LinkError> {
        let setup = link::decode(&wanted.setup)?;
        let mut kept = match earlier {
            Some(earlier) if (Wanted { fault: wanted.fault, ..earlier.wanted.clone() }) == wanted => {
                earlier.jobs
            }
            _ => Vec::new(),
        };
        kept.retain(|job| job.whole.is_some());
        let (mut jobs, mut known) = (Vec::new(), VecDeque::new());
        let (mut left, mut later) = (VecDeque::new(), VecDeque::new());
        for (straight, condition) in [
            (false, Condition::Healthy),
            (false, wanted.fault),
            (true, Condition::Healthy),
            (true, wanted.fault),
        ] {
            let index = jobs.len();
            let same = kept.iter().position(|job| job.straight == straight && job.condition == condition);
            if let Some(same) = same {
                known.push_back(index);
                jobs.push(kept.swap_remove(same));
                continue;
            }
            if !straight && wanted.seconds > ENOUGH {
                left.push_back((index, ENOUGH));
            }
            later.push_back((index, wanted.seconds));
            jobs.push(Job { condition, straight, run: None, whole: None, milliseconds: 0.0 });
        }
        left.append(&mut later);
        Ok(Self { wanted, setup, jobs, known, left })
    }

    fn news(&self, index: usize, take: Take) -> Step {
        let job = &self.jobs[index];
        let done = self.known.is_empty() && self.left.is_empty();
        let news = News {
            scene: u8::from(index % 2 == 1),
            straight: job.straight,
            take,
            milliseconds: job.milliseconds,
            done,
        };
        let news = Answer::Replay(Box::new(news));
        if done { Step::Last(news) } else { Step::News(news) }
    }
}

impl Task for Runs {
    fn go_on(&mut self, clock: Clock<'_>) -> Step {
        if let Some(index) = self.known.pop_front()
            && let Some(take) = self.jobs[index].whole.clone()
        {
            return self.news(index, take);
        }
        let Some(&(index, until)) = self.left.front() else { return Step::Over };
        let began = clock();
        let job = &mut self.jobs[index];
        let outcome = go_on(job, &self.wanted, &self.setup, until);
        job.milliseconds += clock() - began;
        let take = match outcome {
            Ok(None) => return Step::More,
            Ok(Some(run)) => Take { run: Some(run), stopped: None, complete: until >= self.wanted.seconds },
            Err(error) => Take { run: job.run.take().map(Run::finish), stopped: Some(error), complete: true },
        };
        self.left.pop_front();
        if take.complete {
            job.whole = Some(take.clone());
            // One that melts early leaves nothing more to do for its later part.
            self.left.retain(|(other, _)| *other != index);
        }
        self.news(index, take)
    }
}

/// A slice of one run; its result once it has come so far.
fn go_on(
    job: &mut Job,
    wanted: &Wanted,
    setup: &Setup,
    until: f64,
) -> Result<Option<SwitchOn>, SwitchOnError> {
    let run = match &mut job.run {
        Some(run) => run,
        none => {
            let load = setup.plate.load(job.condition, 1.0)?;
            let options =
                Options { seconds: wanted.seconds, moment: wanted.closing.moment(), ..Options::default() };
            let bank = (!job.straight).then_some(&setup.bank);
            none.insert(Run::new(&setup.supply, bank, &load, &options)?)
        }
    };
    match run.advance(STEPS)? {
        Progress::Done => Ok(job.run.take().map(Run::finish)),
        Progress::Reached(seconds) if seconds >= until => Ok(Some(so_far(run.samples()))),
        _ => Ok(None),
    }
}

/// A run of which nothing is known yet but what there is to see.
fn so_far(samples: &[Sample]) -> SwitchOn {
    SwitchOn {
        switch_degrees: 0.0,
        peak_amps: 0.0,
        peak_seconds: 0.0,
        i2t_amp2_seconds: 0.0,
        settle_seconds: None,
        samples: samples.to_vec(),
        asked: Vec::new(),
        heating: Vec::new(),
        starts: Vec::new(),
        energy: Energy::default(),
        steps: 0,
        evaluations: 0,
    }
}

/// All that there is to tell of a replay.
#[cfg(test)]
pub(crate) fn everything(wanted: Wanted) -> Vec<News> {
    let mut runs = Runs::new(wanted, None).expect("a link of ours");
    let mut all = Vec::new();
    while all.last().is_none_or(|news: &News| !news.done) {
        if let Step::News(Answer::Replay(news)) | Step::Last(Answer::Replay(news)) = runs.go_on(&|| 0.0) {
            all.push(*news);
        }
    }
    all
}

#[cfg(test)]
mod tests {
    use std::rc::Rc;

    use super::*;
    use crate::replay::{Ask, Show, Wish};
    use lampladder_core::bank::Bank;
    use lampladder_core::lamp::Lamp;

    fn example() -> Rc<Setup> {
        Rc::new(Setup::example().expect("in range"))
    }

    fn ask(wish: &Wish) -> Ask {
        Ask::of(wish, &example(), Condition::Healthy)
    }

    /// Goes on until `enough`, and tells a page.
    fn tell(runs: &mut Runs, show: &mut Show, enough: impl Fn(&Show) -> bool) {
        while !enough(show) {
            match runs.go_on(&|| 0.0) {
                Step::News(Answer::Replay(news)) | Step::Last(Answer::Replay(news)) => show.learn(*news),
                Step::Over => break,
                _ => {}
            }
        }
    }

    fn finished(ask: &Ask) -> (Runs, Show) {
        let mut runs = Runs::new(ask.wanted(), None).expect("a link of ours");
        let mut show = Show::new(ask.clone(), None);
        tell(&mut runs, &mut show, |show| show.done);
        (runs, show)
    }

    #[test]
    fn all_four_runs_come_to_an_end_and_another_fault_keeps_the_healthy_ones() {
        let (runs, show) = finished(&ask(&Wish::default()));
        assert!(show.scenes.iter().all(|scene| scene.whole().is_some() && scene.straight.is_some()));
        assert_eq!(show.reach(), 3.0);
        let other = ask(&Wish { fault: Some(Condition::Overloaded), ..Wish::default() });
        let mut next = Runs::new(other.wanted(), Some(runs)).expect("a link of ours");
        assert_eq!((next.known.len(), next.left.len()), (2, 2));
        let mut second = Show::new(other, Some(&show));
        assert_eq!(second.scenes[0], show.scenes[0]);
        assert!(second.scenes[1].behind.is_none());
        tell(&mut next, &mut second, |show| show.done);
        assert!(second.scenes.iter().all(|scene| scene.whole().is_some() && scene.straight.is_some()));
        assert_eq!(second.scenes[0], show.scenes[0]);
        let slower = ask(&Wish { closing: Closing::Zero, ..Wish::default() });
        assert_eq!(Runs::new(slower.wanted(), Some(next)).expect("a link of ours").left.len(), 4);
    }

    #[test]
    fn a_long_replay_can_be_watched_before_it_is_complete() {
        let ask = ask(&Wish { seconds: Some(10.0), ..Wish::default() });
        let mut runs = Runs::new(ask.wanted(), None).expect("a link of ours");
        let mut show = Show::new(ask, None);
        tell(&mut runs, &mut show, |show| show.reach() > 0.0);
        assert!(show.reach() >= 3.0 && show.reach() < 4.0 && !show.done);
        assert!(show.scenes[0].whole().is_none());
        tell(&mut runs, &mut show, |show| show.done);
        assert_eq!(show.reach(), 10.0);
    }

    #[test]
    fn a_lamp_that_burns_out_ends_its_own_run_only() {
        let mut setup = (*example()).clone();
        setup.bank = Bank::single(Lamp::new(24.0, 60.0).expect("in range"));
        let (_, show) = finished(&Ask { setup: Rc::new(setup), ..ask(&Wish::default()) });
        assert!(matches!(show.scenes[1].stopped(), Some(SwitchOnError::FilamentMelts { .. })));
        assert!(show.scenes[1].run().is_some_and(|run| !run.samples.is_empty()));
        assert_eq!(show.reach(), 3.0);
    }
}
