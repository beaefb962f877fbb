//! English: conditions of equipment, and the ways in which it can come to rest.

use lampladder_core::condition::Condition;
use lampladder_core::load::Mode;

use crate::words::ModeWords;

pub(super) fn name(condition: Condition) -> &'static str {
    match condition {
        Condition::Healthy => "Healthy",
        Condition::Idle => "Idle",
        Condition::Working => "Working",
        Condition::Overloaded => "Overloaded",
        Condition::Shorted => "Shorted",
        Condition::OpenCircuit => "Open",
        Condition::LeakyReservoir => "Leaky reservoir",
        Condition::ShortedReservoir => "Shorted reservoir",
        Condition::ShortedDiode => "Shorted diode",
        Condition::ShortedWinding => "Shorted winding",
        Condition::OutputConducting => "Output conducting",
        Condition::Stalled => "Stalled",
        other => other.name(),
    }
}

pub(super) fn if_so(condition: Condition) -> &'static str {
    match condition {
        Condition::Healthy => "if healthy",
        Condition::Idle => "if idle",
        Condition::Working => "if working",
        Condition::Overloaded => "if overloaded",
        Condition::Shorted => "if shorted",
        Condition::OpenCircuit => "if open",
        Condition::LeakyReservoir => "if the reservoir leaks",
        Condition::ShortedReservoir => "if the reservoir is shorted",
        Condition::ShortedDiode => "if a diode is shorted",
        Condition::ShortedWinding => "if a winding is shorted",
        Condition::OutputConducting => "if the output conducts",
        Condition::Stalled => "if stalled",
        other => other.name(),
    }
}

pub(super) fn means(condition: Condition, overload: &str) -> String {
    let text = match condition {
        Condition::Healthy => "as its plate says; a motor running free",
        Condition::Idle => "on, and doing next to nothing",
        Condition::Working => "a motor doing the work that its plate is for",
        Condition::Overloaded => return format!("takes {overload} times what its plate says"),
        Condition::Shorted => "its two input wires joined",
        Condition::OpenCircuit => "no path: a blown fuse, a broken lead, a switch that is off",
        Condition::LeakyReservoir => "the reservoir capacitor leaks as much as the set should draw",
        Condition::ShortedReservoir => "the reservoir capacitor, or what stands across it, is a short",
        Condition::ShortedDiode => "one diode of the rectifier is a short",
        Condition::ShortedWinding => "the secondary, or much of a winding, is a short",
        Condition::OutputConducting => "the output stage conducts all it can",
        Condition::Stalled => "the shaft does not turn",
        other => other.name(),
    };
    String::from(text)
}

pub(super) fn mode(mode: Mode) -> ModeWords {
    let (name, decides) = match mode {
        Mode::Standing => (
            "Standing still",
            "From standstill: behind these lamps the motor has too little torque to start, and it heats.",
        ),
        Mode::Turning => {
            ("Turning", "Once it turns: started by a push, or by larger lamps taken away later.")
        }
        Mode::DegaussCold => (
            "Degauss thermistor cold",
            "From cold: these lamps pass too little to warm the thermistor, so the coil stays on.",
        ),
        Mode::DegaussWarm => (
            "Degauss thermistor warm",
            "Once larger lamps, or a run before, have warmed the thermistor, so the coil is nearly off.",
        ),
        Mode::Off => ("Not started", "While its input stays below the voltage at which it starts."),
        _ => (
            "At this current",
            "Switched on from cold it takes the lower current; a dip or a surge can move it.",
        ),
    };
    ModeWords { name, decides }
}
