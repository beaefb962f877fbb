//! English: the ladder panel.

use lampladder_core::condition::Condition;
use lampladder_core::detail::Standing;
use lampladder_core::error::Field;
use lampladder_core::identify::IdentifyError;
use lampladder_core::ladder::{FirstFrom, Gain, GoOn, LadderError, Reason, WayForward};
use lampladder_core::precheck::{Class, DischargePlace, Path, PlugFinding};

use super::{NUMERALS, WORDS};
use crate::entry::Entry;
use crate::words::ladder::{LadderWords, Progress};

/// Names of the checklist's fields.
pub(super) const fn entry(entry: Entry) -> &'static str {
    match entry {
        Entry::Count => "How many",
        Entry::ColdOhms => "Cold resistance",
        Entry::GlowVolts => "Volts across it",
        Entry::GlowAmps => "Amps through it",
        Entry::PrintedVolts => "Its volts",
        Entry::ProtectiveOhms => "Protective conductor",
        Entry::InsulationOhms => "Insulation",
        Entry::PlugOhms => "Across the plug",
        Entry::Farads => "Reservoir",
        Entry::BleedOhms => "Bleed resistor",
        Entry::StartVolts => "Charged to",
    }
}

fn amps(value: f64) -> String {
    NUMERALS.about(value, "A")
}

fn percent(share: f64) -> String {
    NUMERALS.percent(share)
}

fn times(value: f64) -> String {
    NUMERALS.fixed(value, 1)
}

pub(super) static LADDER: LadderWords = LadderWords {
    title: "Step by step",
    for_what: |size, family, supply| format!("For {size} {family} on {supply}"),
    progress: |progress| match progress {
        Progress::Done => "done",
        Progress::LeftOut => "left out",
        Progress::Now => "now",
        Progress::Next => "later",
    },
    working: "Working out the rungs …",
    restarted: "Lamps or equipment have changed: begin again at the first rung.",
    go_on: |next| format!("Next: {next}"),
    back_here: "Begin again from here",
    afresh: "Other equipment: clear the checklist",

    lamps: "Your lamps",
    no_lamps: "none yet",
    tap_sizes: |volts| format!("Tap + for each {volts} lamp that you own."),
    one: |lamp, more| if more { format!("One more {lamp}") } else { format!("One {lamp} less") },
    measured_lamp: |rating| format!("{rating}, measured"),
    another: "A lamp of another size",
    unknown: "A lamp that cannot be read",
    measure: "Measure",
    measure_one: |rating| format!("Measure one {rating} lamp"),
    measuring: |rating| format!("One {rating} lamp, measured"),
    measure_how: "Ohms of the cold lamp, out of its holder. Then volts across it and amps through it while it glows in \
                  a loop that you trust. Mark the lamp: only this one is known better.",
    put: "Into the drawer",
    put_measured: "Into the drawer as measured",
    put_refused: |error| match error.field() {
        Field::Stock => String::from("Twelve kinds of lamp are the most. Take one out first."),
        Field::Count => String::from("Ninety-nine of one kind are the most."),
        _ => String::from("What was measured does not fit that rating. Check both."),
    },
    shrinks: "What measuring is worth",
    shrink_heads: ["At", "As printed", "As measured", "Narrower"],
    unknown_how: "Measure the cold lamp out of its holder; then let it glow in a loop that you trust and read volts and \
                  amps together. The more it glows, the better.",
    comparing: "Comparing with what is made …",
    no_fit: |error| match error {
        IdentifyError::FallsAsItHeats { .. } => {
            "Its resistance falls as it heats: no tungsten filament. It does not limit; do not use it."
        }
        IdentifyError::TooDim { .. } => "It was hardly warm. Read again at a voltage at which it glows.",
        IdentifyError::NoMatch { .. } => {
            "No lamp that is made reads like this. Check the units, and read again."
        }
        _ => "A number is out of range. Check the units.",
    },
    fit: |rating, percent| format!("{rating} ({percent})"),
    refused: |error| match error {
        LadderError::EmptyStock { .. } => String::from("No lamp yet, so no first rung."),
        LadderError::NoLampFits { supply_volts, .. } => {
            format!(
                "None of these lamps stands {}, alone or in pairs.",
                NUMERALS.quantity(*supply_volts, "V")
            )
        }
        LadderError::TooHot { holder_watts, .. } => {
            format!(
                "These lamps make more heat than a holder of {} stands.",
                NUMERALS.quantity(*holder_watts, "W")
            )
        }
        LadderError::FirstTooStrong { least_amps, limit_amps, .. } => format!(
            "Too strong to begin with: your weakest bank passes {} into a dead short, and this equipment stands {}.",
            amps(*least_amps),
            amps(*limit_amps)
        ),
        LadderError::SupplyTooHigh { supply_volts, plate_volts } => format!(
            "The supply gives {}, the plate says {}. No lamp makes up for that.",
            NUMERALS.quantity(*supply_volts, "V"),
            NUMERALS.quantity(*plate_volts, "V")
        ),
        LadderError::NeverStarts { supply_volts } => {
            format!("It does not start at {}, with or without lamps.", NUMERALS.quantity(*supply_volts, "V"))
        }
        LadderError::BeyondAnyBank { share, .. } => {
            format!("No sensible bank runs it: the strongest leaves it {} of the voltage.", percent(*share))
        }
        LadderError::Unsuitable { .. } => String::from("Too powerful for a series lamp."),
        _ => String::from("These numbers make no circuit."),
    },
    way: |way, lamp| match way {
        WayForward::AddLamp(_) => format!("Find a {lamp} lamp."),
        WayForward::AddTwin(_) => format!("Find a second {lamp} lamp: the two in series stand it."),
        WayForward::StrongerHolders => {
            String::from("Use porcelain holders for larger lamps; this list knows 100 W.")
        }
        WayForward::RaiseFirstLimit => {
            String::from("If you know that it stands more when shorted, set the loop up by hand.")
        }
        WayForward::MatchTheVoltage => String::from("Use a transformer that gives the plate's voltage."),
        WayForward::CheckThePlate => String::from("Check what is entered for the plate."),
        WayForward::DisconnectItsLoad => {
            String::from("Take off what it drives or feeds, enter the rest, and bring that up.")
        }
        WayForward::MeasureInstead => {
            String::from("Measure element, winding and insulation instead: that tells more than a lamp.")
        }
        WayForward::VariableTransformer => {
            String::from("Or raise it by hand on a variable isolating transformer with an ammeter.")
        }
        _ => String::from("Give it to somebody trained for it."),
    },
    missing: |lamp, gain| format!("One {lamp} lamp more would help most: {gain}."),
    gain: |gain| match gain {
        Gain::Possible { .. } => String::from("with it there is a ladder"),
        Gain::Closer { share } => {
            format!("the last rung would give the equipment {} of the supply", percent(*share))
        }
        Gain::Fewer { rungs: 1 } => String::from("one rung would do"),
        Gain::Fewer { rungs } => format!("{rungs} rungs would do"),
        _ => String::from("the strongest bank would be stronger"),
    },

    checks: "Before power",
    checks_done: |done, all| format!("{done} of {all} done"),
    skipped: |names| format!("Not done: {names}. You go on without."),
    forbids: "One reading says: do not apply power.",
    unplugged: "Unplugged, its own switch on, capacitors discharged and measured.",
    looked: "Looked over: lead and plug whole, fuse as on the plate, nothing wet, burnt or loose",
    looked_short: "Look over",
    class: "Class of protection",
    class_name: |class| match class {
        Class::One => "I",
        Class::Two => "II",
        Class::Three => "III",
    },
    class_means: |class| match class {
        Class::One => "Class I: a plug with an earth contact.",
        Class::Two => "Class II: a square in a square on the plate, no earth.",
        Class::Three => "Class III: extra-low voltage from an isolated source.",
    },
    lead: "Length of its lead",
    lead_name: |metres| format!("to {metres}"),
    limit: |at_least, value| if at_least { format!("at least {value}") } else { format!("at most {value}") },
    over_range: "OL",
    quoted: |citation, standing| {
        let how = match standing {
            Standing::Published => "read second hand",
            Standing::Memory => "from memory",
            _ => "chosen for this page",
        };
        format!("{citation}, {how}: check the standard and your local code.")
    },
    verdict: |within| {
        if within {
            "Keeps to this limit. It says nothing about the rest."
        } else {
            "Beyond the limit: do not apply power. Find out why."
        }
    },
    plug_how: "Ohmmeter from pin to pin. OL is a reading too.",
    plug_expect: |low, high, path| {
        let through = match path {
            Path::Primary => "through the transformer's primary",
            Path::Motor => "through the motor's copper",
            Path::ColdHeaters => "through its cold heaters",
            Path::Element => "through its element",
            Path::ColdFilament => "through its cold filament",
            Path::Degauss => "through its degauss coil",
            Path::Rectifier => "a rectifier lets no ohmmeter through",
            Path::Measured => "as measured before",
            _ => "its kind is not known",
        };
        format!("healthy: {low}{high}, {through}")
    },
    and_up: " and up",
    plug_found: |findings| {
        let one = |finding: &PlugFinding| match finding {
            PlugFinding::Healthy => "like healthy equipment",
            PlugFinding::ShortedInput => "like a shorted input",
            PlugFinding::OpenPath => "like an open fuse, a broken lead or a switch that is off",
            _ => "like nothing known",
        };
        let names: Vec<&str> = findings.iter().map(one).collect();
        format!("Reads {}.", names.join(", or "))
    },
    plug_between: |below| {
        if below {
            "Less than healthy equipment reads, more than a dead short: something takes too much. Begin low."
        } else {
            "More than healthy equipment reads: a bad contact, or a part of the path is missing."
        }
    },
    plug_from: |standing| match standing {
        Standing::Published => "From published part data, read second hand; wide, as equipment differs.",
        _ => "Worked out from plate and kind by this page's own rule; wide, as equipment differs.",
    },
    all_the_same: "Go on all the same",

    rung: |rung, of| format!("Rung {rung} of {of}"),
    rungs: "Rungs",
    if_healthy: "If healthy",
    expected: |expected| {
        let crate::words::ladder::Expected { glow, amps, bank_volts, load_volts } = expected;
        format!("{glow}, {amps}; {bank_volts} across the lamps, {load_volts} across the equipment.")
    },
    expected_short: |expected| format!("{}, {}", expected.glow, expected.amps),
    why: |reason, short| match reason {
        Reason::First { limit } => {
            format!("First, since a dead short passes {short}, {}.", first_from(limit.from))
        }
        Reason::Only { limit, .. } => {
            format!("The only one: a dead short passes {short}, {}, and it runs.", first_from(limit.from))
        }
        Reason::Link { times: ratio } => {
            format!("Between, since a dead short passes {short}: {} times the rung before.", times(*ratio))
        }
        Reason::Last { times: ratio, share } => {
            let end = if *share > 0.0 {
                format!("the equipment gets {} of the supply", percent(*share))
            } else {
                String::from("no bank of yours runs it")
            };
            format!(
                "Last, since {end}; a dead short passes {short}, {} times the rung before.",
                times(*ratio)
            )
        }
        _ => format!("A dead short passes {short}."),
    },
    first_from,
    go_on_when: "Go on",
    go_on_if: |go_on| match go_on {
        GoOn::Between { .. } => {
            String::from("if it stays within that. Less is a break, or a switch that is off.")
        }
        GoOn::Pulses { period_seconds } => {
            let every = period_seconds
                .map_or_else(String::new, |seconds| format!(", about every {}", NUMERALS.duration(seconds)));
            format!("if it pulses{every}: healthy equipment starts, starves and starts again.")
        }
        _ => String::from("if the lamp stays dark: healthy equipment does not start on this rung."),
    },
    stop_when: "Switch off",
    across_lamps: |volts| format!("{volts} across the lamps"),
    stop_if: |stop, levels| match stop {
        Some(stop) => {
            let fault = (WORDS.if_condition)(stop.fault);
            let close =
                if stop.apart { "" } else { " Healthy can come close: trust the meter, not the eye." };
            format!("if it stays at {} or above: so it does {fault}.{close}", levels.join(", "))
        }
        None => String::from("if anything smells, smokes or hums. No fault of this kind shows on this rung."),
    },
    hidden: |faults| {
        let names: Vec<&str> = faults.iter().map(|fault: &Condition| (WORDS.condition)(*fault)).collect();
        format!("Not seen on this rung: {}.", names.join(", "))
    },
    use_bank: "Use this bank",
    in_loop: "In the loop",
    to_readings: "Type readings",
    falls_short: |share| {
        format!(
            "Your strongest bank leaves it {share} of the supply: enough to find a short, too little to run it."
        )
    },
    keeps: |holder, rise, growth| {
        format!(
            "Keeps to holders of {holder}, a supply that rises {rise}, and about twice the current from rung to rung \
             (at most {growth} times): this page's own limits."
        )
    },

    mains: "Bare mains",
    mains_short: "your own decision",
    mains_means: |rated, last| {
        format!(
            "Nothing limits any more but the fuse. The last rung held a short to {last}; the plate says {rated}. If every \
             rung went as expected, decide for yourself; keep a hand at the switch and the ammeter in."
        )
    },

    after: "After power",
    measure_first: "Measure before touching.",
    after_means: "A time says how long to wait at least. The bleed resistor may be broken: only the meter says that the \
                  charge is gone.",
    start_hint: |volts| format!("else {volts}, the crest 10\u{a0}% up"),
    farads_hint: "such as 100 µF",
    bleed_hint: "if there is one",
    wait_heads: ["Below", "Wait at least", "Asked by"],
    place: |place| match place {
        DischargePlace::PlugPins => "plug pins",
        DischargePlace::LiveParts => "live parts",
        DischargePlace::ExposedPins => "bare plug pins",
        DischargePlace::Accessible => "what can be reached",
        _ => "other parts",
    },
    wait_unknown: "unknown: it may hold for days",
    power_off: "Power is off now: count",
    stop_counting: "Stop counting",
    counting: |left, volts| format!("{left} to go until below {volts}, if the bleed resistor is whole"),
    counted: |volts| format!("Below {volts} by now, if the bleed resistor is whole."),
};

const fn first_from(from: FirstFrom) -> &'static str {
    match from {
        FirstFrom::Plate => "no more than its plate's current",
        FirstFrom::Least => "as little as the smallest lamp passes",
        FirstFrom::Most => "no more than one part of large equipment stands",
        _ => "no more than it stands",
    }
}
