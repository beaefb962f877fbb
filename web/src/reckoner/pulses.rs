//! How the lamps pulse in the conditions in which the equipment hunts, one condition at a time.

use std::collections::VecDeque;

use lampladder_core::condition::Condition;
use lampladder_core::hunt::{self, Pulse};
use lampladder_core::link::{self, LinkError};
use lampladder_core::setup::Setup;
use serde::{Deserialize, Serialize};

use super::{Answer, Clock, Step, Task};

/// The conditions that are wanted.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Wanted {
    /// The bench, as in a link.
    pub setup: String,
    /// The conditions in which the equipment hunts.
    pub conditions: Vec<Condition>,
}

/// What is known of one condition.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct News {
    /// The bench, as in a link.
    pub setup: String,
    /// Which condition.
    pub condition: Condition,
    /// How the lamps pulse; `None` where no period is found.
    pub pulse: Option<Pulse>,
}

/// The conditions at work.
#[derive(Debug)]
pub struct Pulsing {
    link: String,
    setup: Setup,
    left: VecDeque<Condition>,
}

impl Pulsing {
    /// Work on these.
    ///
    /// # Errors
    /// A bench that cannot be read.
    pub fn new(wanted: Wanted) -> Result<Self, LinkError> {
        let setup = link::decode(&wanted.setup)?;
        Ok(Self { link: wanted.setup, setup, left: wanted.conditions.into() })
    }
}

impl Task for Pulsing {
    fn go_on(&mut self, _: Clock<'_>) -> Step {
        let Some(condition) = self.left.pop_front() else { return Step::Over };
        let Setup { supply, bank, plate } = &self.setup;
        let load = plate.load(condition, 1.0);
        let pulse = load.ok().and_then(|load| hunt::pulse(supply, bank, &load));
        let news = Answer::Pulse(Box::new(News { setup: self.link.clone(), condition, pulse }));
        if self.left.is_empty() { Step::Last(news) } else { Step::News(news) }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::family::Family;
    use lampladder_core::plate::Plate;

    #[test]
    fn a_switcher_behind_a_small_lamp_pulses() {
        let plate = Plate::new(Family::SwitchMode, 230.0, 45.0, None).expect("in range");
        let setup = Setup { plate, ..Setup::example().expect("in range") };
        let conditions = vec![Condition::Healthy, Condition::Overloaded];
        let mut task =
            Pulsing::new(Wanted { setup: link::encode(&setup), conditions }).expect("a link of ours");
        let Step::News(Answer::Pulse(first)) = task.go_on(&|| 0.0) else { panic!("the first of two") };
        let pulse = first.pulse.expect("a pulse");
        assert!((0.6..2.0).contains(&pulse.period_seconds), "{pulse:?}");
        // It goes out between two starts, and is plainly to be seen in them.
        assert!(pulse.brightest_kelvin[0] > 1500.0 && pulse.dimmest_kelvin[0] < 1000.0, "{pulse:?}");
        assert!(matches!(task.go_on(&|| 0.0), Step::Last(_)) && matches!(task.go_on(&|| 0.0), Step::Over));
    }
}
