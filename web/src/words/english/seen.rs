//! English, the panel of readings.

use lampladder_core::diagnosis::Candidate;
use lampladder_core::readings::{Behaviour, Kind, Rule};

use super::WORDS;
use crate::log::Trouble;
use crate::reckoner::diagnosis::Quantity;
use crate::words::seen::{Clash, Outcomes, SeenWords, Sentence};

pub(super) static SEEN: SeenWords = SeenWords {
    title: "What you see",
    working: "Working it out …",
    sentence: |sentence| {
        let condition = |condition| (WORDS.condition)(condition).to_ascii_lowercase();
        match sentence {
            Sentence::GoOn(leader, weight) => {
                ("Go on.", format!("This fits equipment without a fault: {}, {weight}.", condition(*leader)))
            }
            Sentence::Stop(leader, weight) => (
                "Stop: switch off and unplug.",
                format!("These are readings of a fault; likeliest: {}, {weight}.", condition(*leader)),
            ),
            Sentence::Undecided([(first, weight), (second, other)]) => (
                "Measure first.",
                format!(
                    "This does not decide: {}, {weight}, or {}, {other}.",
                    condition(*first),
                    condition(*second)
                ),
            ),
            Sentence::Pulses => (
                "Measure first.",
                String::from(
                    "It starts, starves and starts again, which healthy equipment does too behind lamps this small. Use \
                     larger lamps.",
                ),
            ),
            Sentence::Unexplained => (
                "Measure first.",
                String::from(
                    "None of these explains it. Check lamps, plate and meter leads, then read again.",
                ),
            ),
            Sentence::Nothing => ("Measure first.", String::from("Nothing is read yet.")),
            Sentence::Contradicts => {
                ("Measure first.", String::from("These readings cannot belong together."))
            }
            Sentence::NothingToCompare => (
                "Do not switch on.",
                String::from("There is nothing to compare with: these lamps do not stand this supply."),
            ),
        }
    },
    left_out: |names| format!("Left out, as it cannot be read: {names}."),
    assumes: |meter, averaging| {
        let kind = if averaging { "averaging" } else { "true RMS" };
        format!("Meter: {meter}, {kind}.")
    },
    clash,
    readings: "Readings",
    how: |kind| match kind {
        Kind::SupplyVolts => "before the lamps",
        Kind::BankVolts => "from end to end",
        Kind::LoadVolts => "at its plug",
        Kind::Amps => "in the loop",
        Kind::LoadWatts => "after the lamps",
        Kind::PlugOhms => "unplugged, discharged",
        _ => "",
    },
    kind,
    look: "Which lamp looks like yours?",
    look_hint: "The brightest one, once it is steady. Tap again to take it back.",
    behaviour: "What does it do after switching on?",
    behaves: |behaviour| match behaviour {
        Behaviour::Steady => "Steady",
        Behaviour::FlashThenDim => "Flash, then dim",
        Behaviour::SlowRise => "Slow rise",
        Behaviour::Pulsing => "Pulsing",
        other => other.name(),
    },
    clear: "Empty all",
    meter: "Your meter",
    meter_line: |percent, digits, counts| format!("{percent} % + {digits}, {counts} counts"),
    averaging: |averaging| if averaging { "Averaging" } else { "True RMS" },
    averaging_means: "An averaging meter shows too little of a current in pulses, up to a third less behind a \
                      rectifier, and a little too much across the equipment. It is allowed for; the ranges get wider.",
    meter_part: ["Accuracy, of the reading", "Accuracy, last digits", "Counts to"],
    weights: "What explains it",
    weight: |weight| match weight {
        weight if weight >= 0.95 => "almost certain",
        weight if weight >= 0.75 => "likely",
        weight if weight >= 0.4 => "about even",
        weight if weight >= 0.1 => "possible",
        weight if weight >= 0.02 => "unlikely",
        _ => "hardly",
    },
    rest: "All others",
    weights_mean: "Of 100 benches that read like this, so many have this condition. Before any reading healthy counts \
                   most, then the commonest faults. One meter is taken to move about within minutes. Faults that are \
                   not listed are not counted.",
    numbers: "In figures",
    quantity: |quantity| match quantity {
        Quantity::Amps => "Current",
        Quantity::LoadWatts => "Power",
        Quantity::PowerFactor => "Power factor",
        Quantity::LoadVolts => "Equipment volts",
        Quantity::LoadOhms => "Volts over amps",
        Quantity::FullAmps => "Current on full supply",
        Quantity::FullWatts => "Power on full supply",
    },
    figure: "Figure",
    value: "Value",
    numbers_need: "Volts across the lamps give the current; with volts of the supply and across the equipment they give \
                   the power too.",
    next: "What to read next",
    next_line: |name| format!("Next: {name}."),
    candidate: |candidate| match candidate {
        Candidate::Number(Kind::SupplyVolts) => "the supply's volts",
        Candidate::Number(Kind::BankVolts) => "volts across the lamps",
        Candidate::Number(Kind::LoadVolts) => "volts across the equipment",
        Candidate::Number(Kind::Amps) => "the current",
        Candidate::Number(Kind::LoadWatts) => "the power, by a plug-in meter",
        Candidate::Number(Kind::PlugOhms) => "ohms across the plug, unplugged and discharged",
        Candidate::Look => "the glow of the lamp",
        Candidate::Behaviour => "what the lamp does after switching on",
        other => other.name(),
    },
    outcomes: |outcomes| match outcomes {
        Outcomes::Below(high) => format!("below {high}"),
        Outcomes::Between(low, high) => format!("{low} to {high}"),
        Outcomes::Above(low) => format!("above {low}"),
        Outcomes::Any => String::from("whatever it is"),
        Outcomes::Is(text) => String::from(*text),
    },
    if_it: "If it is",
    then: "Then likeliest",
    leads: |condition, weight| format!("{}, {weight}", (WORDS.condition)(condition)),
    otherwise: |names| format!("If you cannot read that: {names}."),
    nothing_next: "No other reading behind these lamps is likely to change this. Larger lamps tell more.",
    keep: "Keep this reading",
    kept: |count| if count == 1 { String::from("1 kept, below.") } else { format!("{count} kept, below.") },
    log: "Kept readings",
    log_empty: "None yet. What you keep stays on this phone, with its lamps and time.",
    rung: |rung| format!("rung {rung}"),
    note: "Note",
    delete: |time| format!("Delete the reading of {time}"),
    undo: "Undo",
    foreign: |count| {
        format!(
            "{count} more were kept by a newer version of this page. They stay as they are; reload to see them."
        )
    },
    trouble: |trouble| match trouble {
        Trouble::Forbidden => {
            "This browser stores nothing for the page, as in a private window. The log lasts until you close it."
        }
        Trouble::Full => {
            "Not stored: there is no room left on this phone. The log lasts until you close the page; free some room or \
             delete readings."
        }
        Trouble::Lost => {
            "Not stored: this part of the program could not be loaded. The log lasts until you close the page."
        }
    },
    unjudged: "not judged",
};

const fn kind(which: Kind) -> &'static str {
    match which {
        Kind::SupplyVolts => "Supply volts",
        Kind::BankVolts => "Lamp volts",
        Kind::LoadVolts => "Equipment volts",
        Kind::Amps => "Current",
        Kind::LoadWatts => "Power",
        Kind::PlugOhms => "Plug ohms",
        _ => "",
    }
}

fn clash(clash: &Clash) -> String {
    let Clash { left, right, margin, .. } = clash;
    let mut text = match clash.rule {
        Rule::PartsReachWhole => match &clash.parts {
            Some([bank, load]) => {
                format!(
                    "{bank} across the lamps and {load} across the equipment make {left}, short of the supply's {right}"
                )
            }
            None => format!("Lamps and equipment make {left}, short of the supply's {right}"),
        },
        Rule::PartsDifferByWhole => match &clash.parts {
            Some([bank, load]) => {
                format!(
                    "{bank} across the lamps and {load} across the equipment differ by {left}, more than the supply's {right}"
                )
            }
            None => format!("Lamps and equipment differ by {left}, more than the supply's {right}"),
        },
        Rule::NoPowerComesBack => match &clash.parts {
            Some([bank, load]) => {
                format!(
                    "{bank} and {load}, squared and added, are {left} squared, over the supply's {right}: power would come back"
                )
            }
            None => {
                format!("The squares add to {left} squared, over the supply's {right}: power would come back")
            }
        },
        Rule::PartWithinWhole => format!("One part reads {left}, more than the supply's {right}"),
        Rule::RealWithinApparent => format!("{left} of power is more than volts times amps, {right}"),
        Rule::CurrentsAgree => format!("The current reads {left}, but the lamps pass {right} at their volts"),
        Rule::GlowAgrees => format!("The current is {left}, but a lamp that glows like this passes {right}"),
        Rule::PowersAgree => format!("The power reads {left}, but the three voltages give {right}"),
        Rule::FilamentHolds => {
            format!("{left} across the lamps would have burnt one out: none lives beyond {right}")
        }
        _ => format!("{left} and {right} do not agree"),
    };
    if clash.rule != Rule::FilamentHolds {
        text.push_str("; meter and lamps explain ");
        text.push_str(margin);
        text.push_str(" of that");
    }
    text.push('.');
    if clash.unit {
        text.push_str(" Was a unit left out? They differ a thousandfold.");
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::condition::Condition;

    #[test]
    fn no_sentence_says_safe_and_each_says_what_to_do() {
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
            let (deed, why) = (SEEN.sentence)(&sentence);
            assert!(deed.starts_with(first) && why.ends_with('.'), "{deed} {why}");
            assert!(!why.to_lowercase().contains("safe") && !deed.to_lowercase().contains("safe"));
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
            super::clash(&clash),
            "60 V across the lamps and 60 V across the equipment make 120 V, short of the supply's 231 V; meter and \
             lamps explain 12 V of that."
        );
    }
}
