//! Which sentence to act on, and which cautions, follow from the answers. The words are elsewhere.

use lampladder_core::condition::Condition;
use lampladder_core::expect::Shown;
use lampladder_core::glow::GlowWord;
use lampladder_core::load::Mode;
use lampladder_core::setup::Setup;
use lampladder_core::steady::Outcome;

use crate::answers::{Answers, brightest};
use crate::draft::Place;

/// The one thing to know before the switch goes on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Advice {
    /// A lamp would burn out in this condition, and then limit nothing, or the wrong thing.
    BurnsOut(Place, Condition),
    /// Healthy equipment would start and stop, over and over.
    Pulses,
    /// Healthy equipment would not start behind these lamps.
    DoesNotStart,
    /// A healthy motor stands still behind these lamps, and heats.
    Stands {
        /// Dimmest and brightest that it may leave the lamp.
        glow: (GlowWord, GlowWord),
    },
    /// A healthy picture-tube set looks shorted: these lamps cannot warm its thermistor.
    LooksShorted,
    /// Healthy and faulty look alike behind these lamps.
    HardToTell,
    /// Watch for this; brighter means off.
    Watch {
        /// Dimmest and brightest that healthy equipment may leave the lamp.
        glow: (GlowWord, GlowWord),
        /// The current that overloaded equipment would pass at the least.
        limit_amps: f64,
        /// What overloaded equipment would leave the lamp, where it is another word.
        brighter: Option<GlowWord>,
    },
}

/// What is wrong with the lamps at their work.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Caution {
    /// The lamp runs over its rated voltage in this condition.
    OverRated {
        /// Which lamp.
        place: Place,
        /// In which condition of the equipment.
        condition: Condition,
        /// Volts over rated volts.
        share: f64,
        /// Life over rated life, least and greatest.
        life: (f64, f64),
    },
}

/// A lamp at its rated voltage, give or take what mains does by itself, is no cause for alarm.
const OVER_RATED: f64 = 1.02;

/// The sentence for these answers.
pub fn advice(answers: &Answers) -> Advice {
    let melting = |condition| Some(Advice::BurnsOut(answers.melting(condition)?, condition));
    if let Some(advice) = answers.all().iter().find_map(|(condition, _)| melting(*condition)) {
        return advice;
    }
    match answers.outcome(Condition::Healthy) {
        Some(Outcome::Hunts) => return Advice::Pulses,
        Some(Outcome::Settles) => {}
        _ => return Advice::DoesNotStart,
    }
    let Some(healthy) = answers.shown(Condition::Healthy) else { return Advice::DoesNotStart };
    let Some((_, lamp)) = brightest(healthy) else { return Advice::DoesNotStart };
    match answers.mode(Condition::Healthy) {
        Some(Mode::Standing) => return Advice::Stands { glow: (lamp.dimmest.word, lamp.brightest.word) },
        Some(Mode::DegaussCold) => return Advice::LooksShorted,
        _ => {}
    }
    let shorted = answers.shown(Condition::Shorted);
    let between = answers.all().iter().map(|(condition, _)| *condition);
    let mut faulty =
        between.filter(|condition| !matches!(condition, Condition::Healthy | Condition::Shorted));
    let overloaded = faulty.find_map(|condition| answers.shown(condition));
    let alike = |other: &Shown| other.amps.value < healthy.amps.high;
    if shorted.is_some_and(alike) || (overloaded.is_some_and(alike) && lamp.glow.word >= GlowWord::Yellow) {
        return Advice::HardToTell;
    }
    let next = overloaded.or(shorted);
    let brighter = next.and_then(brightest).map(|(_, lamp)| lamp.glow.word);
    Advice::Watch {
        glow: (lamp.dimmest.word, lamp.brightest.word),
        limit_amps: next.map_or(healthy.amps.high, |next| next.amps.low.max(healthy.amps.high)),
        brighter: brighter.filter(|word| *word > lamp.brightest.word),
    }
}

/// Every caution about the lamps: for each lamp, the first condition in which it is overdriven.
pub fn cautions(setup: &Setup, answers: &Answers) -> Vec<Caution> {
    let mut found = Vec::new();
    for (condition, _) in answers.all() {
        let condition = *condition;
        let Some(shown) = answers.shown(condition) else { continue };
        for (group, (lamps, states)) in setup.bank.groups().iter().zip(&shown.lamps).enumerate() {
            for (lamp, (rated, state)) in lamps.iter().zip(states).enumerate() {
                let place = Place { group, lamp };
                let share = state.state.volts / rated.rated_volts();
                let known = found.iter().any(|Caution::OverRated { place: other, .. }| *other == place);
                if share > OVER_RATED && !known {
                    found.push(Caution::OverRated { place, condition, share, life: state.life });
                }
            }
        }
    }
    found
}
