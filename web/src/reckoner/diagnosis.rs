//! The diagnosis: which condition of the equipment explains the readings, what they say in numbers, what to read next.

use lampladder_core::band::Band;
use lampladder_core::diagnosis::{Diagnosis, Forecast, diagnose};
use lampladder_core::glow::GlowWord;
use lampladder_core::link;
use lampladder_core::readings::{
    Behaviour, Contradiction, Found, Kind, Look, Meter, MeterSpec, Reading, Readings, Taking, growth,
    interpret, usual_waveform,
};
use lampladder_core::setup::Setup;
use serde::{Deserialize, Serialize};

use super::{Answer, Clock, Step, Task};

/// What was read on a bench.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Taken {
    /// The bench, as in a link.
    pub setup: String,
    /// The meter that took every number.
    pub meter: MeterSpec,
    /// What it showed, SI, in the order of [`Kind::ALL`].
    pub numbers: [Option<f64>; Kind::ALL.len()],
    /// What the brightest lamp looks like.
    pub look: Option<GlowWord>,
    /// What it does over time.
    pub behaviour: Option<Behaviour>,
}

/// What follows from the numbers alone.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Quantity {
    /// Current, amperes.
    Amps,
    /// Real power into the equipment, watts.
    LoadWatts,
    /// Power factor of the equipment.
    PowerFactor,
    /// Volts across the equipment, where they were not read.
    LoadVolts,
    /// Volts over amperes of the equipment, ohms.
    LoadOhms,
    /// Current at full supply, amperes.
    FullAmps,
    /// Power at full supply, watts.
    FullWatts,
}

/// The answer.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct News {
    /// What there is to say.
    pub outcome: Outcome,
    /// Milliseconds spent on it.
    pub milliseconds: f64,
}

/// What there is to say.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Outcome {
    /// The readings can belong together.
    Told {
        /// The conditions with their weights, and the most telling readings that are left.
        diagnosis: Diagnosis,
        /// The numbers with their 95 % bands.
        numbers: Vec<(Quantity, Band)>,
    },
    /// They cannot, and why.
    Contradicts(Vec<Contradiction>),
    /// There is nothing to compare them with: this bench cannot be, or every condition burns its lamps out.
    NothingToCompare,
}

/// Readings to take next that are told of.
const NEXT: usize = 3;

/// Benches solved between two looks at the clock.
const BENCHES: u32 = 8;

/// A diagnosis at work. The forecast stays for the next one: it depends on the bench, the meter and the supply only.
#[derive(Debug)]
pub struct Diagnosing {
    taken: Taken,
    setup: Setup,
    readings: Readings,
    forecast: Option<Forecast>,
    interpreted: Option<Vec<(Quantity, Band)>>,
    milliseconds: f64,
}

/// The question cannot be read.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Unreadable;

impl Diagnosing {
    /// Work that takes over an earlier one's forecast where it still holds.
    ///
    /// # Errors
    /// A bench or a number that cannot be: page and reckoner are of different versions.
    pub fn new(taken: Taken, earlier: Option<Self>) -> Result<Self, Unreadable> {
        let setup = link::decode(&taken.setup).map_err(|_| Unreadable)?;
        let readings = readings(&taken, &setup).ok_or(Unreadable)?;
        let supply = Kind::SupplyVolts as usize;
        let same = |earlier: &Self| {
            let other = &earlier.taken;
            other.setup == taken.setup
                && other.meter == taken.meter
                && other.numbers[supply] == taken.numbers[supply]
        };
        let forecast = earlier.filter(same).and_then(|earlier| earlier.forecast);
        Ok(Self { taken, setup, readings, forecast, interpreted: None, milliseconds: 0.0 })
    }

    fn slice(&mut self) -> Option<Outcome> {
        let Some(numbers) = &self.interpreted else {
            let growth = growth(self.setup.plate.family());
            match interpret(&self.setup.bank, &self.readings, growth) {
                Ok(found) => self.interpreted = Some(told(&found, &self.readings)),
                Err(refused) => return Some(Outcome::Contradicts(refused.contradictions)),
            }
            return None;
        };
        let forecast = match &mut self.forecast {
            Some(forecast) => forecast,
            none => {
                let supply = self.readings.get(Kind::SupplyVolts);
                match Forecast::new(&self.setup, supply, self.taken.meter.response) {
                    Ok(forecast) => none.insert(forecast),
                    Err(_) => return Some(Outcome::NothingToCompare),
                }
            }
        };
        if !forecast.is_complete() && !forecast.advance(BENCHES) {
            return None;
        }
        let mut diagnosis = diagnose(forecast, &self.readings);
        diagnosis.next.truncate(NEXT);
        let numbers = numbers.clone();
        let weighed = diagnosis.ranking.iter().all(|one| one.weight.is_finite());
        Some(if weighed { Outcome::Told { diagnosis, numbers } } else { Outcome::NothingToCompare })
    }
}

impl Task for Diagnosing {
    fn go_on(&mut self, clock: Clock<'_>) -> Step {
        let began = clock();
        let outcome = self.slice();
        self.milliseconds += clock() - began;
        let milliseconds = self.milliseconds;
        outcome.map_or(Step::More, |outcome| {
            Step::Last(Answer::Diagnosis(Box::new(News { outcome, milliseconds })))
        })
    }
}

/// The readings as core has them.
fn readings(taken: &Taken, setup: &Setup) -> Option<Readings> {
    let meter = Meter::new(taken.meter).ok()?;
    let waveform = usual_waveform(setup.plate.family());
    let mut readings = Readings::new(Taking { waveform, ..Taking::default() }).ok()?;
    for (kind, value) in Kind::ALL.into_iter().zip(taken.numbers) {
        if let Some(value) = value {
            readings.add(Reading::new(kind, value, meter).ok()?);
        }
    }
    readings.set_look(taken.look.map(Look::Word)).ok()?;
    readings.set_behaviour(taken.behaviour);
    Some(readings)
}

/// What follows from the numbers, in the order in which it is told.
fn told(found: &Found, readings: &Readings) -> Vec<(Quantity, Band)> {
    let load_volts = found.load_volts.filter(|_| readings.get(Kind::LoadVolts).is_none());
    let all = [
        (Quantity::Amps, found.amps),
        (Quantity::LoadWatts, found.load_watts),
        (Quantity::PowerFactor, found.load_power_factor),
        (Quantity::LoadVolts, load_volts),
        (Quantity::LoadOhms, found.load_ohms),
        (Quantity::FullAmps, found.full_amps),
        (Quantity::FullWatts, found.full_watts),
    ];
    all.into_iter().filter_map(|(quantity, estimate)| Some((quantity, estimate?.band))).collect()
}

/// The outcome of a question.
#[cfg(test)]
pub(crate) fn outcome(taken: Taken) -> Outcome {
    let mut work = Diagnosing::new(taken, None).expect("a link of ours");
    loop {
        match work.go_on(&|| 0.0) {
            Step::Last(Answer::Diagnosis(news)) => return news.outcome,
            Step::More => {}
            other => panic!("{other:?}"),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::condition::Condition;
    use lampladder_core::diagnosis::Advice;
    use lampladder_core::readings::Rule;

    fn taken(volts: [Option<f64>; 3]) -> Taken {
        let [supply, bank, load] = volts;
        Taken {
            setup: link::encode(&Setup::example().expect("in range")),
            meter: MeterSpec::default(),
            numbers: [supply, bank, load, None, None, None],
            look: None,
            behaviour: None,
        }
    }

    #[test]
    fn a_short_is_told_with_the_current_that_the_lamp_gives() {
        let Outcome::Told { diagnosis, numbers } = outcome(taken([Some(231.0), Some(231.0), Some(0.2)]))
        else {
            panic!("not told")
        };
        assert_eq!(diagnosis.ranking[0].condition, Condition::Shorted);
        assert_eq!(diagnosis.advice, Advice::Stop);
        let amps = numbers.iter().find(|(quantity, _)| *quantity == Quantity::Amps).expect("known").1;
        // A 60 W lamp at its full voltage.
        assert!(amps.low < 60.0 / 230.0 && 60.0 / 230.0 < amps.high, "{amps:?}");
        assert!(numbers.iter().all(|(quantity, _)| *quantity != Quantity::FullWatts));
    }

    #[test]
    fn volts_that_do_not_reach_the_supply_are_a_contradiction() {
        let outcome = outcome(taken([Some(231.0), Some(60.0), Some(60.0)]));
        let Outcome::Contradicts(all) = outcome else { panic!("{outcome:?}") };
        assert!(all.iter().any(|one| one.rule == Rule::PartsReachWhole && one.left == 120.0));
    }

    #[test]
    fn another_reading_goes_on_from_the_same_forecast_and_another_supply_does_not() {
        let first = taken([Some(231.0), Some(100.0), None]);
        let mut work = Diagnosing::new(first.clone(), None).expect("ours");
        let mut steps = 0;
        while let Step::More = work.go_on(&|| 0.0) {
            steps += 1;
        }
        assert!(steps > 30, "{steps}");
        let with_load = Taken { numbers: taken([Some(231.0), Some(100.0), Some(170.0)]).numbers, ..first };
        let mut next = Diagnosing::new(with_load, Some(work)).expect("ours");
        assert!(matches!(next.go_on(&|| 0.0), Step::More));
        assert!(matches!(next.go_on(&|| 0.0), Step::Last(_)));
        let other = taken([Some(240.0), Some(100.0), Some(170.0)]);
        assert!(Diagnosing::new(other, Some(next)).expect("ours").forecast.is_none());
    }

    #[test]
    fn what_cannot_be_read_is_refused() {
        let bad = Taken { setup: String::from("9zzz"), ..taken([None; 3]) };
        assert!(Diagnosing::new(bad, None).is_err());
        let bad = Taken { numbers: [Some(-1.0), None, None, None, None, None], ..taken([None; 3]) };
        assert!(Diagnosing::new(bad, None).is_err());
    }
}
