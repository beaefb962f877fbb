//! English: the ways in which equipment can come to rest.

use lampladder_core::load::Mode;

use crate::words::ModeWords;

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
