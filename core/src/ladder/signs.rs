//! When to go on from a rung and when to stop, as levels that a meter and an eye can tell.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use crate::band::Band;
use crate::condition::Condition;
use crate::expect::{self, Prospect, Shown};
use crate::glow::{Glow, GlowWord};
use crate::hunt;
use crate::setup::Setup;
use crate::steady::{self, Outcome, SteadyError};

/// One level of everything that can be watched. Volts and amperes RMS, or DC.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Level {
    /// Volts across the bank.
    pub bank_volts: f64,
    /// Volts across the equipment.
    pub load_volts: f64,
    /// Amperes in the loop.
    pub amps: f64,
    /// The hottest lamp.
    pub glow: GlowWord,
}

/// What healthy equipment comes to on a rung.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum GoOn {
    /// Steady between two levels: the ends of the healthy 95 % band. Below the first, less flows than it should: a
    /// break, or a switch that is off.
    Between {
        /// The least light and current.
        least: Level,
        /// The most.
        most: Level,
    },
    /// It starts, pulls its own input down and starts again: the lamp pulses, and that is as it should be here.
    Pulses {
        /// From one start to the next, seconds, where known.
        period_seconds: Option<f64>,
    },
    /// It stays off, and the lamp dark.
    StaysOff,
}

/// From where on a fault shows.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Stop {
    /// Steady at this level or beyond it: switch off. Halfway from the most that healthy equipment shows to the least
    /// that `fault` shows; at the former where their bands meet.
    pub from: Level,
    /// The nearest fault that takes more than healthy equipment.
    pub fault: Condition,
    /// Whether the two bands stand apart in voltage across the bank.
    pub apart: bool,
}

/// The signs of one rung.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Signs {
    /// When to go on to the next rung.
    pub go_on: GoOn,
    /// When to stop; `None` where no fault of this family shows at all on this rung.
    pub stop: Option<Stop>,
    /// Faults that look healthy on this rung: their best estimate lies inside the healthy band.
    pub hidden: Vec<Condition>,
}

/// The bands of one prospect, reduced to what a [`Level`] holds.
struct Bands {
    bank_volts: Band,
    load_volts: Band,
    amps: Band,
    kelvin: Band,
    rated_kelvin: f64,
}

impl Bands {
    fn of(setup: &Setup, shown: &Shown) -> Self {
        let lamps = setup.bank.groups().iter().flatten().zip(shown.lamps.iter().flatten());
        let hottest = lamps.max_by(|a, b| a.1.state.kelvin.total_cmp(&b.1.state.kelvin));
        let kelvin = hottest.map_or(Band::exact(crate::tungsten::AMBIENT_KELVIN), |(_, shown)| shown.kelvin);
        let rated_kelvin = hottest.map_or(crate::glow::TYPICAL_RATED_KELVIN, |(lamp, _)| lamp.rated_kelvin());
        let Shown { amps, bank_volts, load_volts, .. } = *shown;
        Self { bank_volts, load_volts, amps, kelvin, rated_kelvin }
    }

    fn level(&self, of: impl Fn(&Band) -> f64, opposite: impl Fn(&Band) -> f64) -> Level {
        Level {
            bank_volts: of(&self.bank_volts),
            // The equipment gets less where the bank takes more.
            load_volts: opposite(&self.load_volts),
            amps: of(&self.amps),
            glow: Glow::at(of(&self.kelvin), self.rated_kelvin).word,
        }
    }

    fn least(&self) -> Level {
        self.level(|band| band.low, |band| band.high)
    }

    fn most(&self) -> Level {
        self.level(|band| band.high, |band| band.low)
    }

    /// Halfway from the most of this to the least of a fault, or the former where they meet.
    fn towards(&self, fault: &Self) -> Level {
        let above = |band: &Band, other: &Band| {
            if other.low > band.high { f64::midpoint(band.high, other.low) } else { band.high }
        };
        let below = |band: &Band, other: &Band| {
            if other.high < band.low { f64::midpoint(band.low, other.high) } else { band.low }
        };
        let kelvin = above(&self.kelvin, &fault.kelvin);
        Level {
            bank_volts: above(&self.bank_volts, &fault.bank_volts),
            load_volts: below(&self.load_volts, &fault.load_volts),
            amps: above(&self.amps, &fault.amps),
            glow: Glow::at(kelvin, self.rated_kelvin).word,
        }
    }
}

/// The signs of the rung that `setup` is, whose healthy prospect is known.
pub(super) fn signs(setup: &Setup, healthy: &Prospect) -> Result<Signs, SteadyError> {
    let shown = healthy.shown.as_ref().filter(|_| healthy.outcome == Outcome::Settles);
    let bands = shown.map(|shown| Bands::of(setup, shown));
    let go_on = match (&healthy.outcome, &bands) {
        (Outcome::Hunts, _) => {
            let load = setup.plate.load(Condition::Healthy, 1.0)?;
            let pulse = hunt::pulse(&setup.supply, &setup.bank, &load);
            GoOn::Pulses { period_seconds: pulse.map(|pulse| pulse.period_seconds) }
        }
        (_, Some(bands)) => GoOn::Between { least: bands.least(), most: bands.most() },
        _ => GoOn::StaysOff,
    };
    let mut hidden = Vec::new();
    let mut nearest: Option<(f64, Condition)> = None;
    for &fault in setup.plate.family().conditions().iter().filter(|condition| takes_more(**condition)) {
        let points = steady::equilibria(&setup.supply, &setup.bank, &setup.plate.load(fault, 1.0)?)?;
        // A fault that hunts is no steady sign.
        let Some(point) = steady::settled(&points) else { continue };
        let volts = point.bank_volts;
        let healthy = bands.as_ref().map(|bands| bands.bank_volts);
        if healthy.is_some_and(|band| band.low <= volts && volts <= band.high) {
            hidden.push(fault);
        } else if healthy.is_none_or(|band| volts > band.high)
            && nearest.is_none_or(|(known, _)| volts < known)
        {
            nearest = Some((volts, fault));
        }
    }
    let stop = match nearest {
        None => None,
        Some((_, fault)) => expect::prospect(setup, fault)?.shown.map(|shown| {
            let faulty = Bands::of(setup, &shown);
            let apart = bands.as_ref().is_none_or(|bands| faulty.bank_volts.low > bands.bank_volts.high);
            let from = bands.as_ref().map_or_else(|| faulty.least(), |bands| bands.towards(&faulty));
            Stop { from, fault, apart }
        }),
    };
    Ok(Signs { go_on, stop, hidden })
}

/// Faults that draw more than healthy equipment; a break shows as too little, and work and rest are no faults.
const fn takes_more(condition: Condition) -> bool {
    !matches!(condition, Condition::Healthy | Condition::Idle | Condition::Working | Condition::OpenCircuit)
}
