//! Line drawings: kinds of equipment, and the signs of the header.

use lampladder_core::family::Family;

use super::el::{El, drawing, el};
use crate::bench::Theme;

/// A kind of equipment, 48 wide and 36 high.
pub fn family(family: Family) -> El {
    let path = match family {
        // A table radio: dial, tuning scale, aerial.
        Family::TransformerSupply => {
            "M6 9 H42 a4 4 0 0 1 4 4 V30 a4 4 0 0 1 -4 4 H6 a4 4 0 0 1 -4 -4 V13 a4 4 0 0 1 4 -4 Z M7 21.5 a7 7 0 1 0 14 0 \
             a7 7 0 1 0 -14 0 M14 21.5 L18 17.5 M27 15 H41 M27 20 H41 M27 25 H41 M30 30 h0.1 M38 30 h0.1 M12 9 L34 1"
        }
        // A valve on its pins.
        Family::ValveTransformer => {
            "M16 27 V13 C16 3 32 3 32 13 V27 Z M14 27 H34 M19 27 V33 M24 27 V33 M29 27 V33 M20 12 H28 M24 12 V8 M20 16.5 h2 \
             m1.5 0 h2 m1.5 0 h1 M20 22 q4 -4 8 0"
        }
        // Heaters one after the other.
        Family::ValveSeries => {
            "M1 18 H6 M18 18 H18.1 M30 18 H30.1 M42 18 H47 M6 18 a6 6 0 1 1 12 0 a6 6 0 1 1 -12 0 M18 18 a6 6 0 1 1 12 0 \
             a6 6 0 1 1 -12 0 M30 18 a6 6 0 1 1 12 0 a6 6 0 1 1 -12 0 M9 20 q3 -6 6 0 M21 20 q3 -6 6 0 M33 20 q3 -6 6 0"
        }
        // A plug-in adapter with its thin lead.
        Family::SwitchMode => {
            "M12 7 H28 a4 4 0 0 1 4 4 V25 a4 4 0 0 1 -4 4 H12 a4 4 0 0 1 -4 -4 V11 a4 4 0 0 1 4 -4 Z M2 13.5 H8 M2 22.5 H8 \
             M32 18 C42 18 34 31 46 31 M21 11.5 L17.5 18 H22.5 L19 24.5"
        }
        // A computer.
        Family::SwitchModeCorrected => {
            "M5 4 H31 V23 H5 Z M18 23 V29 M11 30 H25 M36 4 H46 V32 H36 Z M39 9 H43 M39 13 H43 M41 26 h0.1"
        }
        // A television set.
        Family::CrtSet => {
            "M7 6 H41 a4 4 0 0 1 4 4 V28 a4 4 0 0 1 -4 4 H7 a4 4 0 0 1 -4 -4 V10 a4 4 0 0 1 4 -4 Z M9 12 Q20.5 9.5 32 12 \
             Q33.5 19 32 26 Q20.500 28.5 9 26 Q7.5 19 9 12 M39 13 h0.1 M39 18.500 h0.1 M37.5 26 h3 M13 32 V35 M35 32 V35"
        }
        // A hand drill.
        Family::UniversalMotor => {
            "M5 7 H29 L35 10 V15 L29 18 H19 L16.500 32 H7.5 L9.5 18 H5 a2 2 0 0 1 -2 -2 V9 a2 2 0 0 1 2 -2 Z M35 12.5 H46 \
             M19 22 h2.500 M22 11 h0.1 M26 11 h0.1 M26 14 h0.1 M22 14 h0.1"
        }
        // A fan on its foot.
        Family::InductionMotor => {
            "M10 16 a14 14 0 1 0 28 0 a14 14 0 1 0 -28 0 M24 30 V34 M16 34.5 H32 M24 16 C20 12 21 6 25 5.500 C28 8 27 13 24 16 \
             C29.500 14.500 34 18 33.500 22 C30 24 25.500 21 24 16 C23 21.500 18 24 14.500 22 C14.500 18 19 14.500 24 16"
        }
        // A flat iron.
        Family::Heater => {
            "M3 28 C5 17 16 13 27 13 H38 L45 28 Z M3 33 H45 M15 13.5 C16 6 21 4 27 4 H33 C36 4 37.5 6 37.5 13 M29.500 21 \
             a2.5 2.5 0 1 0 5 0 a2.5 2.5 0 1 0 -5 0"
        }
        Family::Lamp => {
            "M24 2 a11 11 0 0 1 6.500 20 q-1.500 1.500 -1.500 5 h-10 q0 -3.5 -1.500 -5 a11 11 0 0 1 6.500 -20 M20 31 H28 \
             M22 34.500 H26 M19.500 15 q1.500 -6 3 0 t3 0 q1.500 -6 3 0"
        }
        // A meter with its leads.
        Family::Measured => {
            "M15 2 H33 a3 3 0 0 1 3 3 V27 a3 3 0 0 1 -3 3 H15 a3 3 0 0 1 -3 -3 V5 a3 3 0 0 1 3 -3 Z M16 6.500 H32 V13 H16 Z \
             M20 21 a4 4 0 1 1 8 0 a4 4 0 1 1 -8 0 M24 21 L26.500 18.500 M17 30 C17 35 6 35 6 28 V20 M31 30 C31 35 42 35 42 28 V20"
        }
        // A rating plate with its four rivets.
        _ => {
            "M6 3 H42 a3 3 0 0 1 3 3 V30 a3 3 0 0 1 -3 3 H6 a3 3 0 0 1 -3 -3 V6 a3 3 0 0 1 3 -3 Z M7.5 7.5 h0.1 M40.5 7.5 h0.1 \
             M7.5 28.5 h0.1 M40.5 28.5 h0.1 M12 12 l3.5 9 l3.5 -9 M23 12 l2.5 9 l3 -7 l3 7 l2.5 -9 M12 26 H36"
        }
    };
    el("path").class("drawing").set("d", path)
}

/// A sign on a button.
pub fn sign(path: &'static str) -> El {
    drawing("0 0 24 24").class("sign").with(el("path").class("drawing").set("d", path))
}

/// The sign for a light: half-filled, sun or moon.
pub fn light(theme: Theme) -> El {
    match theme {
        Theme::Auto => sign("M12 4 a8 8 0 1 0 0.1 0 M12 4 a8 8 0 0 1 0 16 Z")
            .with(el("path").class("solid").set("d", "M12 4 a8 8 0 0 1 0 16 Z")),
        Theme::Paper => sign(
            "M7.6 12 a4.4 4.4 0 1 0 8.8 0 a4.4 4.4 0 1 0 -8.8 0 M12 2 V4.6 M12 19.4 V22 M2 12 H4.6 M19.4 12 H22 M4.9 4.9 \
             L6.8 6.8 M17.2 17.2 L19.1 19.1 M4.9 19.1 L6.8 17.2 M17.2 6.8 L19.1 4.9",
        ),
        Theme::Dusk => sign("M19.5 14.8 A8.2 8.2 0 1 1 9.6 4.4 A6.6 6.6 0 0 0 19.5 14.8 Z"),
    }
}

/// The sign for handing on: out of the box, to the right.
pub fn hand_on() -> El {
    sign("M10 5 H4 V20 H19 V14 M9 15 C9 9 13 7 20 7 M16 3 L20 7 L16 11")
}

/// The sign of the cautions: a triangle with a flash in it.
pub fn caution() -> El {
    sign("M12 3 L22 20.5 H2 Z M13 9 l-2.4 4.4 h2.8 L11.4 18")
}

/// A lamp over the rungs of a ladder: the mark of the page.
pub fn mark() -> El {
    let path = |class, path| el("path").class(class).set("d", path);
    drawing("0 0 28 28")
        .class("mark")
        .with(path(
            "well",
            "M7 1.5 H21 a5 5 0 0 1 5 5 V11.5 a5 5 0 0 1 -5 5 H7 a5 5 0 0 1 -5 -5 V6.5 a5 5 0 0 1 5 -5 Z",
        ))
        .with(path("mark-coil", "M8 11 q1 -6 2 -0 t2 0 q1 -6 2 0 t2 0 q1 -6 2 0 t2 0"))
        .with(path("drawing", "M8 16.5 V27 M20 16.5 V27 M8 20.5 H20 M8 25 H20"))
}
