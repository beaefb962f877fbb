//! A replay: what a person wants to see of the first seconds, and what is known of it so far. The runs themselves are
//! worked out by the reckoner ([`crate::reckoner::runs`]).

use std::rc::Rc;

use lampladder_core::condition::Condition;
use lampladder_core::family::Family;
use lampladder_core::fuse::Standard;
use lampladder_core::link;
use lampladder_core::setup::Setup;
use lampladder_core::switch_on::{Moment, Options, SwitchOn, SwitchOnError};
use serde::{Deserialize, Serialize};

use crate::reckoner::runs::{News, Wanted};

/// When in the mains cycle the switch closes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
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

    /// The same for the solver.
    pub const fn moment(self) -> Moment {
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

    /// The same as the reckoner is asked it.
    pub fn wanted(&self) -> Wanted {
        Wanted {
            setup: link::encode(&self.setup),
            fault: self.fault,
            closing: self.closing,
            seconds: self.seconds,
        }
    }
}

/// What became of one run.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
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

/// A replay as far as it is known.
#[derive(Debug)]
pub struct Show {
    /// What is shown.
    pub ask: Ask,
    /// Healthy, and the other condition.
    pub scenes: [Scene; 2],
    /// Milliseconds that the healthy run behind the lamps took.
    pub milliseconds: Option<f64>,
    /// Whether nothing more will come.
    pub done: bool,
}

impl Show {
    /// A replay that takes from an earlier one what is still true.
    pub fn new(ask: Ask, earlier: Option<&Self>) -> Self {
        let mut scenes = [Scene::new(Condition::Healthy), Scene::new(ask.fault)];
        if let Some(earlier) = earlier
            && (Ask { fault: ask.fault, ..earlier.ask.clone() }) == ask
        {
            for scene in &mut scenes {
                if let Some(same) = earlier.scenes.iter().find(|other| other.condition == scene.condition) {
                    *scene = same.clone();
                }
            }
        }
        Self { ask, scenes, milliseconds: None, done: false }
    }

    /// How far both can be shown, seconds.
    pub fn reach(&self) -> f64 {
        self.scenes.iter().map(|scene| scene.reach(self.ask.seconds)).fold(f64::INFINITY, f64::min)
    }

    /// Takes in what the reckoner has found.
    pub fn learn(&mut self, news: News) {
        let News { scene, straight, take, milliseconds, done } = news;
        self.done = done;
        let Some(scene) = self.scenes.get_mut(usize::from(scene)) else { return };
        if scene.condition == Condition::Healthy && !straight {
            self.milliseconds = Some(milliseconds);
        }
        *(if straight { &mut scene.straight } else { &mut scene.behind }) = Some(Rc::new(take));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::plate::Plate;

    fn ask(wish: &Wish) -> Ask {
        Ask::of(wish, &Rc::new(Setup::example().expect("in range")), Condition::Healthy)
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
}
