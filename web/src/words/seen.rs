//! The texts of the panel of readings.

use lampladder_core::condition::Condition;
use lampladder_core::diagnosis::Candidate;
use lampladder_core::readings::{Behaviour, Kind, Rule};

use crate::log::Trouble;
use crate::reckoner::diagnosis::Quantity;

/// What there is to do, and why.
#[derive(Debug, Clone, PartialEq)]
pub enum Sentence {
    /// On to the next bank: the condition that leads, its weight.
    GoOn(Condition, String),
    /// Off: the condition that leads, its weight.
    Stop(Condition, String),
    /// Two conditions are too near: the first and its weight, the second and its weight.
    Undecided([(Condition, String); 2]),
    /// It pulses, which healthy and faulty equipment of this kind do.
    Pulses,
    /// Nothing explains it.
    Unexplained,
    /// Nothing is read.
    Nothing,
    /// The readings cannot belong together.
    Contradicts,
    /// No condition leaves these lamps whole.
    NothingToCompare,
}

/// Two sides that do not agree, already as text.
#[derive(Debug, Clone, PartialEq)]
pub struct Clash {
    /// The law.
    pub rule: Rule,
    /// Left side.
    pub left: String,
    /// Right side.
    pub right: String,
    /// How far apart the two may be by the accuracy of meter and lamps.
    pub margin: String,
    /// Volts across lamps and across equipment, where both were read.
    pub parts: Option<[String; 2]>,
    /// Whether a factor of 1000 would mend it.
    pub unit: bool,
}

/// Outcomes of a reading, already as text.
#[derive(Debug, Clone, PartialEq)]
pub enum Outcomes {
    /// Below a number, or darker than a glow.
    Below(String),
    /// Between two.
    Between(String, String),
    /// From a number up, or brighter than a glow.
    Above(String),
    /// All of them.
    Any,
    /// One thing.
    Is(&'static str),
}

/// All texts of the panel.
#[derive(Debug)]
pub struct SeenWords {
    /// Its heading.
    pub title: &'static str,
    /// While nothing can be said yet.
    pub working: &'static str,
    /// The one sentence: what to do, and why.
    pub sentence: fn(&Sentence) -> (&'static str, String),
    /// What was left out, since it cannot be read.
    pub left_out: fn(&str) -> String,
    /// What was taken for granted: the meter.
    pub assumes: fn(&str, bool) -> String,
    /// Two sides that do not agree.
    pub clash: fn(&Clash) -> String,
    /// Heading of the readings.
    pub readings: &'static str,
    /// How to take a reading.
    pub how: fn(Kind) -> &'static str,
    /// Name of a reading.
    pub kind: fn(Kind) -> &'static str,
    /// Heading of the drawn lamps.
    pub look: &'static str,
    /// What to do with them.
    pub look_hint: &'static str,
    /// Heading of the behaviours.
    pub behaviour: &'static str,
    /// A behaviour.
    pub behaves: fn(Behaviour) -> &'static str,
    /// Empties the fields.
    pub clear: &'static str,
    /// Heading of the meter.
    pub meter: &'static str,
    /// A meter in a line: per cent, digits, counts.
    pub meter_line: fn(&str, &str, &str) -> String,
    /// What it makes of a distorted waveform.
    pub averaging: fn(bool) -> &'static str,
    /// What an averaging meter does to a reading.
    pub averaging_means: &'static str,
    /// Name of a number of the meter: per cent, digits, counts.
    pub meter_part: [&'static str; 3],
    /// Heading of the weights.
    pub weights: &'static str,
    /// How sure a weight is.
    pub weight: fn(f64) -> &'static str,
    /// The conditions that are too light for a row of their own.
    pub rest: &'static str,
    /// What the weights are.
    pub weights_mean: &'static str,
    /// Heading of the numbers.
    pub numbers: &'static str,
    /// Name of a number.
    pub quantity: fn(Quantity) -> &'static str,
    /// Column of names.
    pub figure: &'static str,
    /// Column of values.
    pub value: &'static str,
    /// What the numbers need.
    pub numbers_need: &'static str,
    /// Heading of the next reading.
    pub next: &'static str,
    /// The next reading in a line.
    pub next_line: fn(&str) -> String,
    /// Name of a candidate.
    pub candidate: fn(Candidate) -> &'static str,
    /// Outcomes.
    pub outcomes: fn(&Outcomes) -> String,
    /// Column of outcomes.
    pub if_it: &'static str,
    /// Column of what they mean.
    pub then: &'static str,
    /// A condition with its weight.
    pub leads: fn(Condition, &str) -> String,
    /// What tells as well.
    pub otherwise: fn(&str) -> String,
    /// Nothing that is left to read would change much.
    pub nothing_next: &'static str,
    /// Keeps the readings.
    pub keep: &'static str,
    /// So many are kept.
    pub kept: fn(usize) -> String,
    /// Heading of what has been kept.
    pub log: &'static str,
    /// Nothing has been kept.
    pub log_empty: &'static str,
    /// A rung.
    pub rung: fn(u32) -> String,
    /// Name of a note.
    pub note: &'static str,
    /// Deletes a reading, by its time.
    pub delete: fn(&str) -> String,
    /// Takes the last change back.
    pub undo: &'static str,
    /// Readings of a newer version.
    pub foreign: fn(usize) -> String,
    /// Why the log is not stored.
    pub trouble: fn(Trouble) -> &'static str,
    /// A reading that was kept without a diagnosis.
    pub unjudged: &'static str,
}
