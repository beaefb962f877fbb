//! English.

mod conditions;
mod faults;
mod ladder;
mod replay;
mod seen;

use lampladder_core::condition::Condition;
use lampladder_core::family::{self, Family, Warning};
use lampladder_core::glow::GlowWord;
use lampladder_core::lamp::Fill;
use lampladder_core::link::LinkError;

use super::{Alike, Assumed, EditWords, FamilyWords, TableWords, Words};
use crate::bench::{Note, Part, Tab, Theme, Unsuitable};
use crate::format::Numerals;

const NUMERALS: Numerals = Numerals { decimal: '.' };

pub(super) static WORDS: Words = Words {
    tag: "en",
    numerals: NUMERALS,
    reminder: "Every part can be live. The lamp does not isolate.",
    cautions: "Cautions",
    accept: "I am competent to work on mains: go on",
    back: "Back to the bench",
    done: "Done",
    dismiss: "Close this note",
    theme: |theme| match theme {
        Theme::Auto => "Light: as the phone has it",
        Theme::Paper => "Light: for sunlight",
        Theme::Dusk => "Light: for the dark",
    },
    tab: |tab| match tab {
        Tab::Expect => "Expect",
        Tab::Ladder => "Ladder",
        Tab::Seen => "Seen",
        Tab::SwitchOn => "Switch-on",
        Tab::Curve => "Curve",
    },
    panels: "Panels",
    part: |part| match part {
        Part::Supply => "Supply",
        Part::Bank => "Lamps",
        Part::Equipment => "Equipment",
    },
    change: |part, now| match part {
        Part::Supply => format!("Supply, {now}: change"),
        Part::Bank => format!("Lamps, {now}: change"),
        Part::Equipment => format!("Equipment, {now}: change"),
    },
    circuit: |supply, bank, equipment| {
        format!("Closed loop: supply {supply}, then {bank} in the line, then equipment of {equipment}.")
    },
    condition: conditions::name,
    if_condition: conditions::if_so,
    conditions: "Condition of the equipment",
    other_conditions: "What else it can have",
    coming: "…",
    ways: |condition| format!("It can come to rest in two ways, {condition}"),
    mode: conditions::mode,
    condition_means: conditions::means,
    glow,
    glow_range: |from, to| {
        if from == to { String::from(glow(from)) } else { format!("{} to {}", glow(from), glow(to)) }
    },
    none: "–",
    reckoner_lost: "This part of the program could not be loaded. Go where there is a connection, and reload the page.",
    bank,
    direct: "DC",
    across_bank: |several| if several { "lamps" } else { "lamp" },
    across_load: "equipment",
    overlap: |bank, load, supply| {
        format!(
            "{bank} and {load} add to more than {supply}, and that is right: the equipment takes its current out of \
             step with the voltage, so the two do not peak together. Each is what a meter across it reads."
        )
    },
    adds_up: |bank, load, supply| {
        format!("{bank} across the lamps and {load} across the equipment make the supply's {supply}.")
    },
    why: "Why?",
    stale: |names| format!("Not what is typed: {names}. The last valid result is shown."),
    stale_mark: "last valid result",
    burns_out: |lamp, condition| {
        let when = with(condition);
        format!(
            "Do not switch on: {lamp} burns out {when}. Use lamps for the supply's voltage, or more in series."
        )
    },
    pulses: |seconds| {
        let every = seconds.map_or_else(String::new, |seconds| format!(", about every {seconds}"));
        format!("Expect pulsing{every}: healthy equipment starts, starves and starts again.")
    },
    stands: |glow| format!("Expect {glow}: a healthy motor stands still on this voltage, hums and heats."),
    looks_shorted: "A healthy set looks shorted behind these lamps: they cannot warm its degauss thermistor.",
    larger: "Use larger lamps.",
    does_not_start: "Healthy equipment does not start: the supply stays below its start voltage. Other lamps do not help.",
    hard_to_tell: "Healthy and faulty look alike behind these lamps. Use larger ones, or more in parallel.",
    expect: |glow, amps| format!("Expect {glow}, about {amps}."),
    off_if_brighter: |word| {
        if word >= GlowWord::Full {
            String::from("If it stays full, switch off.")
        } else {
            format!("If it stays {} or brighter, switch off.", glow(word))
        }
    },
    off_if_more: |amps| format!("If the meter stays above {amps}, switch off."),
    assumes: |assumed| {
        format!(
            "Assumes {}, {} {} ({}), lamps as printed.",
            assumed.supply, assumed.size, assumed.family, assumed.shares
        )
    },
    assumptions,
    lamp: |place, alone, rating| {
        if alone {
            format!("the {rating} lamp")
        } else {
            format!("lamp {}.{}, {rating}", place.group + 1, place.lamp + 1)
        }
    },
    over_rated: |lamp, condition, percent, life| {
        let when = with(condition);
        format!("Caution: {lamp} runs at {percent} of its rated voltage {when}; life there {life}.")
    },
    burnt: "burns out",
    pulsing: "pulses",
    every: |seconds| format!("every {seconds}"),
    pulse: |seconds, word| format!("every {seconds}, up to {}", glow(word)),
    life: |least, most| {
        if least == most { String::from("as rated") } else { format!("{least} to {most} times the rated") }
    },
    short_life: |least, most| {
        if least == most { format!("{least} ×") } else { format!("{least}–{most} ×") }
    },
    life_over: |least| format!("over {least} times the rated"),
    short_life_over: |least| format!("> {least} ×"),
    lamps: |count| format!("{count} lamps"),
    life_source: "Lamp life from the published range of exponents, voltage to the power −12 to −16 (Fink and Beaty, \
                  Standard Handbook for Electrical Engineers); it holds near the rating and is cut at 1000 times.",
    band_note: "Ranges hold 95 of 100 cases: lamps differ within the limits of their standard, published tables of \
                tungsten differ, and healthy equipment takes less or more than its plate.",
    table: &TABLE,
    replay: &replay::REPLAY,
    seen: &seen::SEEN,
    ladder: &ladder::LADDER,
    slot: faults::slot,
    fault: faults::fault,
    step: |which, up| format!("{}: {}", faults::slot(which), if up { "more" } else { "less" }),
    family: |kind| {
        let (name, noun, examples) = match kind {
            Family::TransformerSupply => {
                ("Transformer set", "transformer set", "radio, amplifier, bench supply")
            }
            Family::ValveTransformer => {
                ("Valve set", "valve set with a transformer", "with a mains transformer")
            }
            Family::ValveSeries => {
                ("Valves in a string", "set with its heaters in a string", "heaters across the mains")
            }
            Family::SwitchMode => ("Small switcher", "switch-mode supply", "charger, adapter, LED driver"),
            Family::SwitchModeCorrected => {
                ("Large switcher", "corrected switch-mode supply", "computer, large set, over 75 W")
            }
            Family::CrtSet => ("Picture tube", "picture-tube set", "television, monitor, arcade"),
            Family::UniversalMotor => ("Brush motor", "brush motor", "drill, mixer, vacuum cleaner"),
            Family::InductionMotor => ("Brushless motor", "induction motor", "fan, pump, record player"),
            Family::Heater => ("Heater", "heater", "iron, kettle, hotplate"),
            Family::Lamp => ("Filament lamp", "filament lamp", "projector, work light"),
            Family::Measured => {
                ("Ohms at the plug", "resistance measured at the plug", "by ohmmeter, unplugged")
            }
            _ => ("Anything else", "equipment of unknown kind", "volts, watts, power factor"),
        };
        FamilyWords { name, noun, examples }
    },
    edit: &EDIT,
    fill: |fill| match fill {
        None => "by its size",
        Some(Fill::Vacuum) => "vacuum",
        Some(Fill::Gas) => "gas",
        Some(Fill::Halogen) => "Halogen",
        Some(other) => other.name(),
    },
    unsuitable: |kind| match kind {
        Unsuitable::Led => "LED",
        Unsuitable::CompactFluorescent => "Compact fluorescent",
        Unsuitable::CarbonFilament => "Carbon filament",
    },
    refusal: |kind| match kind {
        Unsuitable::Led => {
            "An LED lamp is no use here: a converter inside feeds it, so it does not limit the current of a fault, \
             and its light tells nothing. It has not been put into the loop."
        }
        Unsuitable::CompactFluorescent => {
            "A compact fluorescent lamp is no use here: the electronics inside do not limit the current of a fault, \
             and it flickers or fails in series. It has not been put into the loop."
        }
        Unsuitable::CarbonFilament => {
            "A carbon filament is no use here: its resistance falls as it heats, so it lets through more just when \
             it should hold back. It has not been put into the loop."
        }
    },
    warning: |warning| match warning {
        Warning::Hunts => "A healthy one may pulse: it starts, starves and starts again.",
        Warning::StandsAndHeats => "It may stand and hum on reduced voltage, and heats while it stands.",
        Warning::LiveChassis => "Its chassis is live: isolating transformer first.",
        Warning::TubeVoltage => "The picture tube holds tens of kilovolts after the plug is out.",
        Warning::LooksShorted => {
            "Behind a small lamp a healthy one can look shorted: its degauss stays cold."
        }
        Warning::ChargedReservoir => "Its reservoir stays charged after the plug is out.",
        Warning::MovingParts => "It may start without warning.",
        _ => "Take special care with this kind.",
    },
    unsuitable_equipment: |kind| match kind {
        family::Unsuitable::MicrowaveOven => "Microwave oven",
        family::Unsuitable::Medical => "Medical",
        family::Unsuitable::ThreePhase => "Three-phase",
        _ => "Too powerful",
    },
    refuse_equipment: |kind| match kind {
        family::Unsuitable::MicrowaveOven => {
            "Not a microwave oven: its capacitor holds a lethal charge at kilovolts, whatever limits its input."
        }
        family::Unsuitable::Medical => {
            "Not medical equipment: its users' lives hang on tests that a lamp does not make."
        }
        family::Unsuitable::ThreePhase => {
            "Not three-phase equipment: a lamp in one conductor says nothing about the other two."
        }
        _ => "Too powerful for a series lamp: a bank that passes enough for it is no limit any more.",
    },
    note: |note| match note {
        Note::BadLink(error) => link(&error),
        Note::BadKept(_) => {
            "What was kept on this phone cannot be read. It stays as it is until you change something here."
        }
        Note::NothingKept => {
            "This browser keeps nothing for the page. Your set-up lives in the address: save that."
        }
        Note::FromLink => "From a link. Your own set-up stays on this phone until you change something here.",
    },
    link,
    use_kept: "Use mine",
    more: "More",
};

const fn glow(word: GlowWord) -> &'static str {
    match word {
        GlowWord::Dark => "dark",
        GlowWord::Faint => "faint red",
        GlowWord::DullRed => "dull red",
        GlowWord::Orange => "orange",
        GlowWord::Amber => "amber",
        GlowWord::Yellow => "yellow",
        GlowWord::Full => "full",
        GlowWord::OverFull => "over full",
        other => other.name(),
    }
}

const fn with(condition: Condition) -> &'static str {
    match condition {
        Condition::Healthy => "even with healthy equipment",
        Condition::Overloaded => "with overloaded equipment",
        Condition::Shorted => "with the equipment shorted",
        Condition::Stalled => "with the motor stalled",
        _ => "with faulty equipment",
    }
}

const fn link(error: &LinkError) -> &'static str {
    match error {
        LinkError::Empty => "The link holds no set-up.",
        LinkError::TooLong => "The link is too long to be one of ours. It was not opened.",
        LinkError::Newer => {
            "The link was made by a newer version of this page. It was not opened; reload to get that version."
        }
        LinkError::Damaged => "The link is cut short or damaged. It was not opened; ask for it again.",
        LinkError::Refused(_) => "The link holds a number that is out of range. It was not opened.",
        _ => "The link cannot be read. It was not opened.",
    }
}

fn bank(groups: &[Vec<Alike>]) -> String {
    let parts = |group: &Vec<Alike>| {
        let count: usize = group.iter().map(|alike| alike.count).sum();
        let texts: Vec<String> = group
            .iter()
            .map(|alike| match alike.count {
                1 => alike.watts.clone(),
                count => format!("{count} × {}", alike.watts),
            })
            .collect();
        let text = texts.join(" + ") + "\u{a0}W";
        if count > 1 { text + " parallel" } else { text }
    };
    match groups {
        [one] if one.iter().map(|alike| alike.count).sum::<usize>() == 1 => parts(one) + " lamp",
        [one] => parts(one),
        [first, rest @ ..] if rest.iter().all(|group| group == first) => {
            let count = groups.len();
            match first.as_slice() {
                [Alike { count: 1, watts }] => format!("{count} × {watts}\u{a0}W series"),
                _ => format!("{count} × ({}) series", parts(first)),
            }
        }
        _ => groups.iter().map(parts).collect::<Vec<_>>().join(", then "),
    }
}

fn assumptions(assumed: &Assumed) -> Vec<String> {
    let mut all = vec![
        format!("Supply: {}, as entered and steady.", assumed.supply),
        format!("Lamps: {}, hot, as printed unless measured values are given.", assumed.bank),
        format!(
            "Equipment: {}, {} at {}; healthy takes {} of what is usual for that, overloaded {} times.",
            assumed.family, assumed.size, assumed.plate_volts, assumed.shares, assumed.overload
        ),
    ];
    if let Some((power_factor, printed)) = &assumed.power_factor {
        all.push(if *printed {
            format!("Power factor: {power_factor}, from the plate.")
        } else {
            format!("Power factor: {power_factor}, usual for its kind.")
        });
    }
    all.push(String::from("Settled, after the first seconds: switch-on itself is brighter for a moment."));
    all
}

static EDIT: EditWords = EditWords {
    usual_volts: "Usual voltages",
    usual_hertz: "Usual frequencies",
    follow: |volts| format!("Set lamps and plate to {volts} too"),
    as_wired: "Lamps as wired",
    kind: "Kind of lamp",
    ordinary: "Ordinary",
    sizes: "Usual sizes",
    add_parallel: "Add in parallel",
    add_series: "Add in series",
    remove: "Remove",
    full: "Eight lamps are the most.",
    lamp_more: "Known more of it?",
    filling: "Filling",
    points: "Measured on this lamp",
    add_point: "Add a measured point",
    remove_point: |number| format!("Remove point {number}"),
    what: "What is it?",
    change: "Change",
    not_for: "Never for",
    plate_more: "More on the plate?",
    default_hint: |usual| format!("else {usual}"),
    power_factor_hint: |usual| format!("if printed; else {usual} is used"),
    ohms_hint: "of the wiring or the source; 0 for ordinary mains",
    optional: "if known",
};

static TABLE: TableWords = TableWords {
    details: "In figures",
    condition: "If it is",
    lamp: "Lamp",
    bank_volts: "Across lamps",
    short_bank_volts: "Lamps",
    volts: "Volts",
    amps: "Current",
    band: "95 % range",
    load_volts: "Across equipment",
    short_load_volts: "Equipm.",
    load_watts: "Power",
    glow: "Glow",
    kelvin: "Filament, K",
    life: "Lamp life at this point",
    short_life: "Life, × rated",
    assumed: "What this assumes",
    curve: "Where the curves meet",
    curve_means: "The thick line is what the lamps pass at each voltage across them, with its 95 % range. The others \
                  are what the equipment takes from what is left. The circuit settles where they cross.",
    meet: "Crossings",
    bank_curve: "The lamps alone",
    every_lamp: "Each lamp",
    chart: "Chart of current against volts across the lamps. The same numbers stand in the tables below.",
};

#[cfg(test)]
mod tests {
    use super::*;

    fn alike(count: usize, watts: &str) -> Alike {
        Alike { count, watts: watts.to_owned() }
    }

    #[test]
    fn banks_are_told_as_wired() {
        let cases = [
            (vec![vec![alike(1, "60")]], "60\u{a0}W lamp"),
            (vec![vec![alike(2, "60")]], "2 × 60\u{a0}W parallel"),
            (vec![vec![alike(1, "60"), alike(1, "25")]], "60 + 25\u{a0}W parallel"),
            (vec![vec![alike(1, "60")], vec![alike(1, "60")]], "2 × 60\u{a0}W series"),
            (vec![vec![alike(2, "60")], vec![alike(1, "100")]], "2 × 60\u{a0}W parallel, then 100\u{a0}W"),
        ];
        for (groups, text) in cases {
            assert_eq!(bank(&groups), text);
        }
    }

    #[test]
    fn nothing_says_safe() {
        for word in GlowWord::ALL {
            assert!(!glow(word).contains("safe"));
        }
    }
}
