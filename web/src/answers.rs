//! What core says to the last valid set-up: one prospect for each condition of the equipment, computed once.
//!
//! The few conditions that are compared at a glance are asked about at once; the family's other ones one by one, when
//! there is a moment, so that typing does not wait for them.

use lampladder_core::condition::Condition;
use lampladder_core::error::InputError;
use lampladder_core::expect::{LampShown, Prospect, Shown, prospect};
use lampladder_core::family::Family;
use lampladder_core::glow::Glow;
use lampladder_core::load::Mode;
use lampladder_core::setup::Setup;
use lampladder_core::steady::{Equilibrium, Outcome, SteadyError};

use crate::draft::Place;

/// One condition and what comes of it.
pub type Answer = (Condition, Result<Prospect, SteadyError>);

/// The conditions that are told apart at a glance: healthy, the family's likeliest fault that is no short, shorted.
fn compared(family: Family) -> impl Iterator<Item = Condition> {
    const BETWEEN: [Condition; 2] = [Condition::Stalled, Condition::Overloaded];
    let has = move |condition: &Condition| family.conditions().contains(condition);
    let between = BETWEEN.into_iter().find(has);
    [Some(Condition::Healthy), between, Some(Condition::Shorted)].into_iter().flatten()
}

/// The conditions of a family that are not told apart at a glance.
pub fn others(family: Family) -> impl Iterator<Item = Condition> {
    family
        .conditions()
        .iter()
        .copied()
        .filter(move |other| compared(family).all(|condition| condition != *other))
}

/// The answers to one set-up.
#[derive(Debug, Clone, PartialEq)]
pub struct Answers {
    all: Vec<Answer>,
    others: Vec<Answer>,
}

impl Answers {
    /// Asks core about the conditions that are compared, and about the one that is looked at.
    ///
    /// # Errors
    /// A set-up whose parts do not go together, such as a transformer on direct current.
    pub fn of(setup: &Setup, looked_at: Condition) -> Result<Self, InputError> {
        let family = setup.plate.family();
        let ask = |condition: Condition| (condition, prospect(setup, condition));
        let all: Vec<Answer> = compared(family).map(ask).collect();
        let refused = all.iter().find_map(|(_, answer)| match answer {
            Err(SteadyError::Input(error)) => Some(*error),
            _ => None,
        });
        let others = others(family).filter(|condition| *condition == looked_at).map(ask).collect();
        refused.map_or(Ok(Self { all, others }), Err)
    }

    /// The next of the other conditions that core has not been asked about.
    pub fn unasked(&self, family: Family) -> Option<Condition> {
        others(family).find(|condition| self.get(*condition).is_none())
    }

    /// The same with the answer for one more condition.
    #[must_use]
    pub fn with(mut self, setup: &Setup, condition: Condition) -> Self {
        self.others.push((condition, prospect(setup, condition)));
        self
    }

    /// Every condition that is compared, likeliest first.
    pub fn all(&self) -> &[Answer] {
        &self.all
    }

    /// Every condition that core has been asked about, the compared ones first.
    pub fn asked(&self) -> impl Iterator<Item = Condition> {
        self.all.iter().chain(&self.others).map(|(condition, _)| *condition)
    }

    /// The answer for one condition.
    pub fn get(&self, condition: Condition) -> Option<&Result<Prospect, SteadyError>> {
        let mut all = self.all.iter().chain(&self.others);
        all.find(|(which, _)| *which == condition).map(|(_, answer)| answer)
    }

    /// Every point at which the circuit stays in a condition, in order of rising current.
    pub fn stable(&self, condition: Condition) -> Vec<&Equilibrium> {
        let Some(Ok(prospect)) = self.get(condition) else { return Vec::new() };
        prospect.equilibria.iter().filter(|point| point.stable).collect()
    }

    /// What lamp and meter show in a condition, if the circuit settles.
    pub fn shown(&self, condition: Condition) -> Option<&Shown> {
        self.get(condition)?.as_ref().ok()?.shown.as_ref()
    }

    /// What becomes of the circuit in a condition.
    pub fn outcome(&self, condition: Condition) -> Option<Outcome> {
        Some(self.get(condition)?.as_ref().ok()?.outcome)
    }

    /// In which of its ways the equipment works where it settles.
    pub fn mode(&self, condition: Condition) -> Option<Mode> {
        let prospect = self.get(condition)?.as_ref().ok()?;
        let amps = prospect.shown.as_ref()?.amps.value;
        let nearest = |a: &f64, b: &f64| (a - amps).abs().total_cmp(&(b - amps).abs());
        let settled = prospect.equilibria.iter().min_by(|a, b| nearest(&a.amps, &b.amps))?;
        Some(settled.mode)
    }

    /// The lamp that would burn out in a condition.
    pub fn melting(&self, condition: Condition) -> Option<Place> {
        match self.get(condition)? {
            Err(SteadyError::FilamentMelts { group, lamp }) => Some(Place { group: *group, lamp: *lamp }),
            _ => None,
        }
    }
}

/// The lamp whose filament is brightest against its own rating: the one to look at.
pub fn brightest(shown: &Shown) -> Option<(Place, &LampShown)> {
    let lamps = shown.lamps.iter().enumerate().flat_map(|(group, lamps)| {
        lamps.iter().enumerate().map(move |(lamp, shown)| (Place { group, lamp }, shown))
    });
    lamps.reduce(|best, other| brighter(best, other, |(_, lamp)| lamp.glow))
}

/// The brighter of two, each against its own rating; the first where they are alike.
pub fn brighter<T>(best: T, other: T, glow: impl Fn(&T) -> Glow) -> T {
    if glow(&other).relative_luminance > glow(&best).relative_luminance { other } else { best }
}
