//! The texts of the panel of readings.

use lampladder_core::condition::Condition;
use lampladder_core::diagnosis::Candidate;
use lampladder_core::readings::{Behaviour, Kind, Rule};

use super::reader::catalogue;
use super::{Words, fill, pick};
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

catalogue! {
    /// All texts of the panel.
    pub struct SeenWords in "seen." {
        title, working, go_on, stop, measure_first, do_not, fits_healthy, fits_fault, undecided, pulses,
        unexplained, nothing, contradicts, nothing_to_compare, left_out, assumes_rms, assumes_averaging,
        parts_short, sum_short, parts_differ, sum_differs, parts_power, sum_power, part_within_whole,
        real_within_apparent, currents_agree, glow_agrees, powers_agree, filament_holds, disagree,
        thousandfold, readings,
        how [supply_volts, bank_volts, load_volts, amps, load_watts, plug_ohms],
        look, look_hint, behaviour,
        behaves [steady, flash_then_dim, slow_rise, pulsing],
        behaved [steady, flash_then_dim, slow_rise, pulsing],
        clear, meter, meter_line, averaging, true_rms, averaging_means, weights,
        weight [certain, likely, even, possible, unlikely, hardly],
        rest, weights_mean, numbers,
        quantity [amps, load_watts, power_factor, load_volts, load_ohms, full_amps, full_watts],
        figure, value, numbers_need, next, next_line,
        candidate [supply_volts, bank_volts, load_volts, amps, load_watts, plug_ohms, look, behaviour],
        below, between, above, any, if_it, then, leads, otherwise, nothing_next, keep, kept, log, log_empty,
        rung, note, delete, undo, foreign,
        trouble [forbidden, full, lost],
        unjudged,
    }
}

impl SeenWords {
    /// The one sentence: what to do, and why.
    pub fn sentence(&self, sentence: &Sentence, words: &Words) -> (&'static str, String) {
        let why = match sentence {
            Sentence::GoOn(leader, weight) => {
                return (self.go_on, fill(self.fits_healthy, &[words.said(*leader), weight]));
            }
            Sentence::Stop(leader, weight) => {
                return (self.stop, fill(self.fits_fault, &[words.said(*leader), weight]));
            }
            Sentence::NothingToCompare => return (self.do_not, self.nothing_to_compare.to_owned()),
            Sentence::Undecided([(first, weight), (second, other)]) => {
                let with = [words.said(*first), weight, words.said(*second), other];
                return (self.measure_first, fill(self.undecided, &with));
            }
            Sentence::Pulses => self.pulses,
            Sentence::Unexplained => self.unexplained,
            Sentence::Nothing => self.nothing,
            Sentence::Contradicts => self.contradicts,
        };
        (self.measure_first, why.to_owned())
    }

    /// What was left out, since it cannot be read.
    pub fn left_out(&self, names: &str) -> String {
        fill(self.left_out, &[names])
    }

    /// What was taken for granted: the meter, whether it averages.
    pub fn assumes(&self, meter: &str, averaging: bool) -> String {
        fill(if averaging { self.assumes_averaging } else { self.assumes_rms }, &[meter])
    }

    /// Two sides that do not agree.
    pub fn clash(&self, clash: &Clash) -> String {
        let Clash { left, right, margin, .. } = clash;
        // With both parts read, the sum is shown; else only what it comes to.
        let (whole, sum) = match clash.rule {
            Rule::PartsReachWhole => (self.parts_short, self.sum_short),
            Rule::PartsDifferByWhole => (self.parts_differ, self.sum_differs),
            Rule::NoPowerComesBack => (self.parts_power, self.sum_power),
            Rule::PartWithinWhole => ("", self.part_within_whole),
            Rule::RealWithinApparent => ("", self.real_within_apparent),
            Rule::CurrentsAgree => ("", self.currents_agree),
            Rule::GlowAgrees => ("", self.glow_agrees),
            Rule::PowersAgree => ("", self.powers_agree),
            Rule::FilamentHolds => ("", self.filament_holds),
            _ => ("", self.disagree),
        };
        let text = match &clash.parts {
            Some([bank, load]) if !whole.is_empty() => fill(whole, &[bank, load, left, right, margin]),
            _ => fill(sum, &[left, right, margin]),
        };
        if clash.unit { text + " " + self.thousandfold } else { text }
    }

    /// How to take a reading.
    pub fn how(&self, kind: Kind) -> &'static str {
        pick(&self.how, kind as usize)
    }

    /// A behaviour.
    pub fn behaves(&self, behaviour: Behaviour) -> &'static str {
        pick(&self.behaves, behaviour as usize)
    }

    /// The same in a list.
    pub fn behaved(&self, behaviour: Behaviour) -> &'static str {
        pick(&self.behaved, behaviour as usize)
    }

    /// A meter in a line: per cent, digits, counts.
    pub fn meter_line(&self, percent: &str, digits: &str, counts: &str) -> String {
        fill(self.meter_line, &[percent, digits, counts])
    }

    /// What it makes of a distorted waveform.
    pub const fn averaging(&self, averaging: bool) -> &'static str {
        if averaging { self.averaging } else { self.true_rms }
    }

    /// How sure a weight is.
    pub fn weight(&self, weight: f64) -> &'static str {
        let at = match weight {
            weight if weight >= 0.95 => 0,
            weight if weight >= 0.75 => 1,
            weight if weight >= 0.4 => 2,
            weight if weight >= 0.1 => 3,
            weight if weight >= 0.02 => 4,
            _ => 5,
        };
        pick(&self.weight, at)
    }

    /// Name of a number.
    pub fn quantity(&self, quantity: Quantity) -> &'static str {
        pick(&self.quantity, quantity as usize)
    }

    /// The next reading in a line.
    pub fn next_line(&self, name: &str) -> String {
        fill(self.next_line, &[name])
    }

    /// Name of a candidate.
    pub fn candidate(&self, candidate: Candidate) -> &'static str {
        let at = match candidate {
            Candidate::Number(kind) => kind as usize,
            Candidate::Look => 6,
            _ => 7,
        };
        pick(&self.candidate, at)
    }

    /// Outcomes.
    pub fn outcomes(&self, outcomes: &Outcomes) -> String {
        match outcomes {
            Outcomes::Below(high) => fill(self.below, &[high]),
            Outcomes::Between(low, high) => fill(self.between, &[low, high]),
            Outcomes::Above(low) => fill(self.above, &[low]),
            Outcomes::Any => self.any.to_owned(),
            Outcomes::Is(text) => (*text).to_owned(),
        }
    }

    /// A condition's name with its weight.
    pub fn leads(&self, condition: &str, weight: &str) -> String {
        fill(self.leads, &[condition, weight])
    }

    /// What tells as well.
    pub fn otherwise(&self, names: &str) -> String {
        fill(self.otherwise, &[names])
    }

    /// So many are kept.
    pub fn kept(&self, count: usize) -> String {
        fill(self.plural.of(self.kept, count), &[&count.to_string()])
    }

    /// A rung.
    pub fn rung(&self, rung: u32) -> String {
        fill(self.rung, &[&rung.to_string()])
    }

    /// Deletes a reading, by its time.
    pub fn delete(&self, time: &str) -> String {
        fill(self.delete, &[time])
    }

    /// Readings of a newer version.
    pub fn foreign(&self, count: usize) -> String {
        fill(self.plural.of(self.foreign, count), &[&count.to_string()])
    }

    /// Why the log is not stored.
    pub fn trouble(&self, trouble: Trouble) -> &'static str {
        pick(&self.trouble, trouble as usize)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;

    #[test]
    fn each_sentence_says_what_to_do() {
        let percent = || String::from("94\u{a0}%");
        let all = [
            (Sentence::GoOn(Condition::Healthy, percent()), "Go on"),
            (Sentence::Stop(Condition::Shorted, percent()), "Stop"),
            (
                Sentence::Undecided([(Condition::Healthy, percent()), (Condition::Overloaded, percent())]),
                "Measure first",
            ),
            (Sentence::Pulses, "Measure first"),
            (Sentence::Unexplained, "Measure first"),
            (Sentence::Nothing, "Measure first"),
            (Sentence::Contradicts, "Measure first"),
            (Sentence::NothingToCompare, "Do not switch on"),
        ];
        for (sentence, first) in all {
            let (deed, why) = english().seen().sentence(&sentence, english());
            assert!(deed.starts_with(first) && why.ends_with('.'), "{deed} {why}");
        }
    }

    #[test]
    fn the_arithmetic_is_shown() {
        let clash = Clash {
            rule: Rule::PartsReachWhole,
            left: String::from("120 V"),
            right: String::from("231 V"),
            margin: String::from("12 V"),
            parts: Some([String::from("60 V"), String::from("60 V")]),
            unit: false,
        };
        assert_eq!(
            english().seen().clash(&clash),
            "60 V across the lamps and 60 V across the equipment make 120 V, short of the supply's 231 V; meter and \
             lamps explain 12 V of that."
        );
    }
}
