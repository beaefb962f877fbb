//! The angle of the mains at which switching on gives the highest peak current.

use alloc::boxed::Box;

use super::SwitchOnError;
use super::run::{Given, Progress, Run};

/// Angles tried first, evenly over half a turn or, where the polarity matters, a whole one.
const COARSE: u32 = 24;

/// Golden-section steps after that: the bracket of 15 or 30 degrees shrinks to about 1 degree.
const FINE: u32 = 7;

/// How long each trial runs, periods of the mains: the peak of every kind of load falls into the first few.
const PERIODS: f64 = 3.0;

/// Part of the wider side to step into: 2 minus the golden ratio.
const GOLDEN: f64 = 0.381_966_011_250_105_1;

/// A search in progress.
#[derive(Debug, Clone)]
pub(super) struct Search {
    given: Box<Given>,
    trial: Option<(f64, Box<Run>)>,
    tried: u32,
    turn: f64,
    best: (f64, f64),
    /// Bracket around the best angle, once the coarse round is over.
    bracket: (f64, f64),
}

impl Search {
    pub(super) fn new(given: &Given) -> Self {
        let mut given = given.clone();
        given.options.seconds = given.options.seconds.min(PERIODS / given.supply.hertz());
        given.options.at.clear();
        // Only a core that remembers a polarity tells the two half waves apart.
        let turn = if given.options.remanence == 0.0 { 180.0 } else { 360.0 };
        let given = Box::new(given);
        Self { given, trial: None, tried: 0, turn, best: (0.0, -1.0), bracket: (0.0, 0.0) }
    }

    /// Goes on for at most `left` steps; the worst angle once it is known, degrees.
    pub(super) fn advance(&mut self, left: &mut u32) -> Result<Option<f64>, SwitchOnError> {
        while self.tried < COARSE + FINE {
            let degrees = self.next();
            let (degrees, mut run) = match self.trial.take() {
                Some(trial) => trial,
                None => (degrees, Box::new(Run::at((*self.given).clone(), degrees, None))),
            };
            // A slice is a whole budget or enough for a trial: these are short.
            if run.advance(*left)? != Progress::Done {
                *left = 0;
                self.trial = Some((degrees, run));
                return Ok(None);
            }
            *left = left.saturating_sub(run.steps());
            self.learn(degrees, run.peak().1);
            if *left == 0 {
                return Ok(None);
            }
        }
        Ok(Some(self.best.0))
    }

    fn next(&self) -> f64 {
        if self.tried < COARSE {
            return self.turn * f64::from(self.tried) / f64::from(COARSE);
        }
        let (low, high) = self.bracket;
        if high - self.best.0 > self.best.0 - low {
            self.best.0 + GOLDEN * (high - self.best.0)
        } else {
            self.best.0 - GOLDEN * (self.best.0 - low)
        }
    }

    fn learn(&mut self, degrees: f64, peak_amps: f64) {
        let better = peak_amps > self.best.1;
        if self.tried < COARSE {
            if better {
                self.best = (degrees, peak_amps);
            }
            let step = self.turn / f64::from(COARSE);
            self.bracket = (self.best.0 - step, self.best.0 + step);
        } else {
            let after = degrees > self.best.0;
            let bound = if better { self.best.0 } else { degrees };
            if better {
                self.best = (degrees, peak_amps);
            }
            if after == better {
                self.bracket.0 = bound;
            } else {
                self.bracket.1 = bound;
            }
        }
        self.tried += 1;
    }
}
