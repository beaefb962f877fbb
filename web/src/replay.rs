//! The runs that a replay is made of: healthy and in another condition, behind the lamps and straight on the mains,
//! worked out a slice at a time so that typing never waits.

use std::rc::Rc;

use lampladder_core::condition::Condition;
use lampladder_core::family::Family;
use lampladder_core::fuse::Standard;
use lampladder_core::setup::Setup;
use lampladder_core::switch_on::{Energy, Moment, Options, Progress, Run, Sample, SwitchOn, SwitchOnError};

/// When in the mains cycle the switch closes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Closing {
    /// At the crest of the voltage.
    Crest,
    /// At its zero.
    Zero,
    /// Where the peak current is highest.
    Worst,
}

impl Closing {
    /// Every one.
    pub const ALL: [Self; 3] = [Self::Crest, Self::Zero, Self::Worst];

    const fn moment(self) -> Moment {
        match self {
            Self::Crest => Moment::Degrees(90.0),
            Self::Zero => Moment::Degrees(0.0),
            Self::Worst => Moment::Worst,
        }
    }
}

/// How long a replay may last, seconds.
pub const SPANS: [f64; 3] = [3.0, 10.0, 30.0];

/// What a person wants to see of the first seconds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Wish {
    /// The condition beside the healthy one; `None` until it is chosen.
    pub fault: Option<Condition>,
    /// When the switch closes.
    pub closing: Closing,
    /// How long, seconds; `None` for what suits the equipment.
    pub seconds: Option<f64>,
    /// Whether the first half second plays slowly.
    pub slow: bool,
    /// Whether the fuse is looked at.
    pub fuse_open: bool,
    /// The fuse's standard.
    pub standard: Standard,
    /// Its rated amperes.
    pub rated_amps: f64,
}

impl Default for Wish {
    fn default() -> Self {
        Self {
            fault: None,
            closing: Closing::Crest,
            seconds: None,
            slow: false,
            fuse_open: false,
            standard: Standard::Iec60127Sheet3,
            rated_amps: 1.0,
        }
    }
}

/// One replay: what is to be run.
#[derive(Debug, Clone, PartialEq)]
pub struct Ask {
    /// The bench.
    pub setup: Rc<Setup>,
    /// The condition beside the healthy one.
    pub fault: Condition,
    /// When the switch closes.
    pub closing: Closing,
    /// How long, seconds.
    pub seconds: f64,
}

impl Ask {
    /// What a wish comes to on a bench, of which the loop shows a condition.
    pub fn of(wish: &Wish, setup: &Rc<Setup>, shown: Condition) -> Self {
        let family = setup.plate.family();
        let fits = |condition: &Condition| {
            *condition != Condition::Healthy && family.conditions().contains(condition)
        };
        let fault = wish.fault.filter(fits).or(Some(shown).filter(fits)).unwrap_or(Condition::Shorted);
        // Heaters take their time.
        let usual = match family {
            Family::ValveTransformer | Family::ValveSeries => SPANS[2],
            _ => SPANS[0],
        };
        let most = if setup.supply.is_direct() {
            Options::SECONDS.1
        } else {
            Options::MOST_PERIODS / setup.supply.hertz()
        };
        let seconds = wish.seconds.unwrap_or(usual).min(most);
        Self { setup: Rc::clone(setup), fault, closing: wish.closing, seconds }
    }
}

/// What became of one run.
#[derive(Debug, Clone, PartialEq)]
pub struct Take {
    /// The run, as far as it came; `None` where it could not begin.
    pub run: Option<SwitchOn>,
    /// Why it ended early.
    pub stopped: Option<SwitchOnError>,
    /// Whether it is over.
    pub complete: bool,
}

/// One condition.
#[derive(Debug, Clone, PartialEq)]
pub struct Scene {
    /// Which.
    pub condition: Condition,
    /// Behind the lamps.
    pub behind: Option<Rc<Take>>,
    /// Straight on the mains.
    pub straight: Option<Rc<Take>>,
}

impl Scene {
    const fn new(condition: Condition) -> Self {
        Self { condition, behind: None, straight: None }
    }

    /// The run behind the lamps, as far as it is known.
    pub fn run(&self) -> Option<&SwitchOn> {
        self.behind.as_ref()?.run.as_ref()
    }

    /// The same once it is complete.
    pub fn whole(&self) -> Option<&SwitchOn> {
        self.behind.as_ref().filter(|take| take.complete)?.run.as_ref()
    }

    /// Why the run behind the lamps ended early.
    pub fn stopped(&self) -> Option<SwitchOnError> {
        self.behind.as_ref()?.stopped
    }

    /// How far it can be shown, seconds.
    fn reach(&self, seconds: f64) -> f64 {
        match &self.behind {
            // A run that ended early is shown to its end, and what is broken then stays so.
            Some(take) if take.complete => seconds,
            _ => self.run().and_then(|run| run.samples.last()).map_or(0.0, |sample| sample.seconds),
        }
    }
}

/// From here on a long run may be watched while the rest is worked out, seconds.
const ENOUGH: f64 = SPANS[0];

/// One run at work.
#[derive(Debug)]
struct Job {
    scene: usize,
    straight: bool,
    run: Option<Run>,
    milliseconds: f64,
}

/// The runs of a replay, finished and at work.
#[derive(Debug)]
pub struct Work {
    /// What is run.
    pub ask: Ask,
    /// Healthy, and the other condition.
    pub scenes: [Scene; 2],
    jobs: Vec<Job>,
    /// What is left: which job, and up to when.
    left: Vec<(usize, f64)>,
}

impl Work {
    /// Work that takes from an earlier one what is still true.
    pub fn new(ask: Ask, earlier: Option<&Self>) -> Self {
        let mut scenes = [Scene::new(Condition::Healthy), Scene::new(ask.fault)];
        if let Some(earlier) = earlier
            && (Ask { fault: ask.fault, ..earlier.ask.clone() }) == ask
        {
            for scene in &mut scenes {
                let same = earlier.scenes.iter().find(|other| other.condition == scene.condition);
                if let Some(same) = same {
                    let complete = |take: &Option<Rc<Take>>| take.clone().filter(|take| take.complete);
                    scene.behind = complete(&same.behind);
                    scene.straight = complete(&same.straight);
                }
            }
        }
        let mut jobs = Vec::new();
        let (mut first, mut then) = (Vec::new(), Vec::new());
        for (straight, scene) in [(false, 0), (false, 1), (true, 0), (true, 1)] {
            let known = if straight { &scenes[scene].straight } else { &scenes[scene].behind };
            if known.is_some() {
                continue;
            }
            if !straight && ask.seconds > ENOUGH {
                first.push((jobs.len(), ENOUGH));
            }
            then.push((jobs.len(), ask.seconds));
            jobs.push(Job { scene, straight, run: None, milliseconds: 0.0 });
        }
        first.append(&mut then);
        first.reverse();
        Self { ask, scenes, jobs, left: first }
    }

    /// Whether everything is worked out.
    pub fn is_done(&self) -> bool {
        self.left.is_empty()
    }

    /// How far both can be shown, seconds.
    pub fn reach(&self) -> f64 {
        self.scenes.iter().map(|scene| scene.reach(self.ask.seconds)).fold(f64::INFINITY, f64::min)
    }

    /// Milliseconds spent on the healthy run behind the lamps.
    pub fn milliseconds(&self) -> Option<f64> {
        self.jobs.iter().find(|job| job.scene == 0 && !job.straight).map(|job| job.milliseconds)
    }

    /// Goes on for a slice; whether there is something new to show.
    pub fn advance(&mut self, steps: u32, clock: impl Fn() -> f64) -> bool {
        let Some(&(index, until)) = self.left.last() else { return false };
        let began = clock();
        let job = &mut self.jobs[index];
        let condition = self.scenes[job.scene].condition;
        let news = match go_on(job, &self.ask, condition, steps, until) {
            Ok(None) => None,
            Ok(Some(run)) => {
                Some(Take { run: Some(run), stopped: None, complete: until >= self.ask.seconds })
            }
            Err(error) => {
                let run = job.run.take().map(Run::finish);
                Some(Take { run, stopped: Some(error), complete: true })
            }
        };
        job.milliseconds += clock() - began;
        let Some(take) = news else { return false };
        let (straight, complete) = (job.straight, take.complete);
        let scene = &mut self.scenes[job.scene];
        *(if straight { &mut scene.straight } else { &mut scene.behind }) = Some(Rc::new(take));
        self.left.pop();
        if complete {
            // One that melts early leaves nothing more to do for its later part.
            self.left.retain(|(other, _)| *other != index);
        }
        true
    }
}

/// A slice of one run; its result once it has come so far.
fn go_on(
    job: &mut Job,
    ask: &Ask,
    condition: Condition,
    steps: u32,
    until: f64,
) -> Result<Option<SwitchOn>, SwitchOnError> {
    let run = match &mut job.run {
        Some(run) => run,
        none => {
            let setup = &ask.setup;
            let load = setup.plate.load(condition, 1.0)?;
            let options =
                Options { seconds: ask.seconds, moment: ask.closing.moment(), ..Options::default() };
            let bank = (!job.straight).then_some(&setup.bank);
            none.insert(Run::new(&setup.supply, bank, &load, &options)?)
        }
    };
    match run.advance(steps)? {
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

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::bank::Bank;
    use lampladder_core::lamp::Lamp;
    use lampladder_core::plate::Plate;

    fn ask(wish: &Wish) -> Ask {
        Ask::of(wish, &Rc::new(Setup::example().expect("in range")), Condition::Healthy)
    }

    fn finished(mut work: Work) -> Work {
        while !work.is_done() {
            work.advance(500, || 0.0);
        }
        work
    }

    #[test]
    fn a_wish_that_does_not_fit_the_equipment_falls_back() {
        assert_eq!(ask(&Wish::default()).fault, Condition::Shorted);
        let stalled = Wish { fault: Some(Condition::Stalled), ..Wish::default() };
        assert_eq!(ask(&stalled).fault, Condition::Shorted);
        let setup = Rc::new(Setup::example().expect("in range"));
        assert_eq!(Ask::of(&Wish::default(), &setup, Condition::Overloaded).fault, Condition::Overloaded);
        let plate = Plate::new(Family::ValveSeries, 230.0, 60.0, None).expect("in range");
        let valves = Rc::new(Setup { plate, ..(*setup).clone() });
        assert_eq!(Ask::of(&Wish::default(), &valves, Condition::Healthy).seconds, 30.0);
    }

    #[test]
    fn all_four_runs_come_to_an_end_and_another_fault_keeps_the_healthy_ones() {
        let work = finished(Work::new(ask(&Wish::default()), None));
        assert!(work.scenes.iter().all(|scene| scene.whole().is_some() && scene.straight.is_some()));
        assert_eq!(work.reach(), 3.0);
        let other = ask(&Wish { fault: Some(Condition::Overloaded), ..Wish::default() });
        let next = Work::new(other, Some(&work));
        assert_eq!(next.scenes[0], work.scenes[0]);
        assert_eq!((next.jobs.len(), next.scenes[1].behind.is_none()), (2, true));
        let slower = ask(&Wish { closing: Closing::Zero, ..Wish::default() });
        assert_eq!(Work::new(slower, Some(&work)).jobs.len(), 4);
    }

    #[test]
    fn a_long_replay_can_be_watched_before_it_is_complete() {
        let mut work = Work::new(ask(&Wish { seconds: Some(10.0), ..Wish::default() }), None);
        while work.reach() == 0.0 {
            work.advance(500, || 0.0);
        }
        assert!(work.reach() >= 3.0 && work.reach() < 4.0 && !work.is_done());
        assert!(work.scenes[0].whole().is_none());
        assert_eq!(finished(work).reach(), 10.0);
    }

    #[test]
    fn a_lamp_that_burns_out_ends_its_own_run_only() {
        let mut ask = ask(&Wish::default());
        let mut setup = (*ask.setup).clone();
        setup.bank = Bank::single(Lamp::new(24.0, 60.0).expect("in range"));
        ask.setup = Rc::new(setup);
        let work = finished(Work::new(ask, None));
        assert!(matches!(work.scenes[1].stopped(), Some(SwitchOnError::FilamentMelts { .. })));
        assert!(work.scenes[1].run().is_some_and(|run| !run.samples.is_empty()));
        assert_eq!(work.reach(), 3.0);
    }
}
