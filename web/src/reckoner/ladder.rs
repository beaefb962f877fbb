//! The ladder: the rungs first, then, one rating after the other, the lamp that would improve them most.

use lampladder_core::band::Band;
use lampladder_core::ladder::{self, Gain, Ladder, LadderError, Limits, Missing, Rating, Reason, Signs};
use lampladder_core::link::{self, LinkError};
use lampladder_core::precheck::{PlugRange, across_plug};
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use serde::{Deserialize, Serialize};

use super::{Answer, Clock, Step, Task};

/// A ladder that is wanted.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Wanted {
    /// The bench, as in a link; its bank is of no account.
    pub setup: String,
    /// The lamps, as the phone keeps them.
    pub stock: String,
}

/// What is known of a ladder.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct News {
    /// What it is.
    pub found: Found,
    /// Milliseconds spent on it so far.
    pub milliseconds: f64,
}

/// A piece of it.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Found {
    /// The rungs, or why there are none; and what an ohmmeter shows across the plug.
    Plan(Result<Plan, LadderError>, Option<[PlugRange; 3]>),
    /// The single lamp that would improve it most.
    Missing(Option<Missing>),
}

/// The rungs.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Plan {
    /// In order, at least one.
    pub rungs: Vec<Rung>,
    /// Volts at healthy equipment behind the last over the supply's, where that is too little to run it.
    pub falls_short: Option<f64>,
}

/// One rung.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Rung {
    /// How many of each kind of the stock, group by group: the bank.
    pub counts: Vec<Vec<u8>>,
    /// Amperes into a dead short.
    pub short_amps: f64,
    /// What healthy equipment shows, where it settles.
    pub shown: Option<Shown>,
    /// Why it stands here.
    pub reason: Reason,
    /// When to go on and when to stop.
    pub signs: Signs,
}

/// What healthy equipment shows on a rung.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Shown {
    /// Amperes in the loop.
    pub amps: Band,
    /// Volts across the bank.
    pub bank_volts: Band,
    /// Volts across the equipment.
    pub load_volts: Band,
    /// Every lamp's filament, kelvin, in the order of the bank.
    pub kelvins: Vec<Vec<f64>>,
}

impl Plan {
    fn of(ladder: &Ladder) -> Self {
        let rung = |rung: &ladder::Rung| Rung {
            counts: rung.counts.clone(),
            short_amps: rung.short_amps,
            shown: rung.healthy.shown.as_ref().map(|shown| Shown {
                amps: shown.amps,
                bank_volts: shown.bank_volts,
                load_volts: shown.load_volts,
                kelvins: shown
                    .lamps
                    .iter()
                    .map(|group| group.iter().map(|lamp| lamp.state.kelvin).collect())
                    .collect(),
            }),
            reason: rung.reason,
            signs: rung.signs.clone(),
        };
        Self { rungs: ladder.rungs.iter().map(rung).collect(), falls_short: ladder.falls_short }
    }
}

/// A ladder at work.
#[derive(Debug)]
pub struct Climb {
    setup: Setup,
    stock: Stock,
    ladder: Option<Ladder>,
    /// Ratings that are still to be tried, in falling watts.
    left: Vec<Rating>,
    best: Option<Missing>,
    milliseconds: f64,
}

impl Climb {
    /// Work that has not begun.
    ///
    /// # Errors
    /// A bench or a stock that cannot be read.
    pub fn new(wanted: &Wanted) -> Result<Self, LinkError> {
        let (setup, stock) = (link::decode(&wanted.setup)?, link::decode_stock(&wanted.stock)?);
        Ok(Self { setup, stock, ladder: None, left: Vec::new(), best: None, milliseconds: 0.0 })
    }

    fn work(&mut self) -> Option<(Found, bool)> {
        let Setup { supply, plate, .. } = &self.setup;
        let limits = Limits::default();
        let Some(ladder) = &self.ladder else {
            let planned = ladder::plan_rungs(supply, &self.stock, plate, &limits);
            let plan = planned.as_ref().map(Plan::of).map_err(|error| *error);
            let last = planned.is_err();
            if let Ok(ladder) = planned {
                self.left = ladder::usual_ratings(supply, &limits);
                self.left.reverse();
                self.ladder = Some(ladder);
            }
            return Some((Found::Plan(plan, across_plug(plate).ok()), last));
        };
        if let Some(rating) = self.left.pop() {
            let gain = ladder::gain_of(supply, &self.stock, plate, &limits, (ladder, rating));
            let close = limits.spec().close_share;
            let better = |gain: &Gain| self.best.is_none_or(|best| gain.beats(&best.gain, close));
            if let Some(gain) = gain.ok().flatten().filter(better) {
                self.best = Some(Missing { rating, gain });
            }
        }
        self.left.is_empty().then_some((Found::Missing(self.best), true))
    }
}

impl Task for Climb {
    fn go_on(&mut self, clock: Clock<'_>) -> Step {
        let began = clock();
        let found = self.work();
        self.milliseconds += clock() - began;
        let Some((found, last)) = found else { return Step::More };
        let news = Answer::Ladder(Box::new(News { found, milliseconds: self.milliseconds }));
        if last { Step::Last(news) } else { Step::News(news) }
    }
}

/// All that there is to tell of a ladder.
#[cfg(test)]
pub(crate) fn everything(wanted: &Wanted) -> Vec<News> {
    let mut climb = Climb::new(wanted).expect("a link of ours");
    let mut all = Vec::new();
    loop {
        match climb.go_on(&|| 0.0) {
            Step::News(Answer::Ladder(news)) => all.push(*news),
            Step::Last(Answer::Ladder(news)) => {
                all.push(*news);
                return all;
            }
            _ => {}
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::lamp::Lamp;

    fn stock(lamps: &[(f64, f64)]) -> Stock {
        let lamps =
            lamps.iter().map(|&(watts, count)| (Lamp::new(230.0, watts).expect("a stock size"), count));
        Stock::new(lamps).expect("a stock")
    }

    fn wanted(stock: &Stock) -> Wanted {
        let setup = Setup::example().expect("in range");
        Wanted { setup: link::encode(&setup), stock: link::encode_stock(stock) }
    }

    #[test]
    fn the_pieces_together_are_what_core_plans() {
        let stock = stock(&[(60.0, 2.0), (25.0, 1.0)]);
        let all = everything(&wanted(&stock));
        let Setup { supply, plate, .. } = Setup::example().expect("in range");
        let ladder = ladder::plan(&supply, &stock, &plate, &Limits::default()).expect("a ladder");
        let [News { found: Found::Plan(Ok(plan), Some(_)), .. }, News { found: Found::Missing(missing), .. }] =
            &all[..]
        else {
            panic!("{all:?}")
        };
        assert_eq!(plan, &Plan::of(&ladder));
        assert!(plan.rungs.len() > 1);
        assert_eq!(missing, &ladder.missing);
    }

    #[test]
    fn no_lamp_is_no_ladder_but_a_way_forward() {
        let all = everything(&wanted(&Stock::default()));
        let [News { found: Found::Plan(Err(error), plug), .. }] = &all[..] else { panic!("{all:?}") };
        assert!(matches!(error, LadderError::EmptyStock { first: Some(_) }));
        // What the ohmmeter shows does not hang on the lamps.
        assert!(plug.is_some());
    }

    #[test]
    fn a_bench_or_a_stock_of_another_version_is_refused() {
        let good = wanted(&Stock::default());
        assert!(Climb::new(&Wanted { setup: String::from("9zzz"), ..good.clone() }).is_err());
        assert!(Climb::new(&Wanted { stock: String::from("s9zz"), ..good }).is_err());
    }
}
