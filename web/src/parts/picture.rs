//! Line drawings: kinds of equipment, and the signs of the header.

use lampladder_core::plate::Family;
use yew::{Html, html};

use crate::bench::Theme;

/// A kind of equipment, 48 wide and 36 high.
pub fn family(family: Family) -> Html {
    match family {
        // A table radio: dial, tuning scale, loudspeaker cloth.
        Family::TransformerSupply => html! {
            <g class="drawing">
                <rect x="2" y="9" width="44" height="25" rx="4" />
                <circle cx="14" cy="21.5" r="7" />
                <path d="M14 21.5 L18 17.5 M27 15 H41 M27 20 H41 M27 25 H41 M30 30 h0.1 M38 30 h0.1 M12 9 L34 1" />
            </g>
        },
        // A flat iron.
        Family::Heater => html! {
            <g class="drawing">
                <path d="M3 28 C5 17 16 13 27 13 H38 L45 28 Z M3 33 H45" />
                <path d="M15 13.5 C16 6 21 4 27 4 H33 C36 4 37.5 6 37.5 13" />
                <circle cx="32" cy="21" r="2.6" />
            </g>
        },
        // A rating plate with its four rivets.
        _ => html! {
            <g class="drawing">
                <rect x="3" y="3" width="42" height="30" rx="3" />
                <path d="M7.5 7.5 h0.1 M40.5 7.5 h0.1 M7.5 28.5 h0.1 M40.5 28.5 h0.1" />
                <path d="M12 12 l3.5 9 l3.5 -9 M23 12 l2.5 9 l3 -7 l3 7 l2.5 -9 M12 26 H36" />
            </g>
        },
    }
}

/// The sign for a light: half-filled, sun or moon.
pub fn light(theme: Theme) -> Html {
    let path = match theme {
        Theme::Auto => html! {
            <><circle cx="12" cy="12" r="8" /><path class="solid" d="M12 4 a8 8 0 0 1 0 16 Z" /></>
        },
        Theme::Paper => html! {
            <>
                <circle cx="12" cy="12" r="4.4" />
                <path d="M12 2 V4.6 M12 19.4 V22 M2 12 H4.6 M19.4 12 H22 M4.9 4.9 L6.8 6.8 M17.2 17.2 L19.1 19.1 \
                         M4.9 19.1 L6.8 17.2 M17.2 6.8 L19.1 4.9" />
            </>
        },
        Theme::Dusk => html! { <path d="M19.5 14.8 A8.2 8.2 0 1 1 9.6 4.4 A6.6 6.6 0 0 0 19.5 14.8 Z" /> },
    };
    html! { <svg class="sign" viewBox="0 0 24 24" aria-hidden="true"><g class="drawing">{ path }</g></svg> }
}

/// The sign of the cautions: a triangle with a flash in it.
pub fn caution() -> Html {
    html! {
        <svg class="sign" viewBox="0 0 24 24" aria-hidden="true">
            <g class="drawing"><path d="M12 3 L22 20.5 H2 Z M13 9 l-2.4 4.4 h2.8 L11.4 18" /></g>
        </svg>
    }
}

/// A lamp seen end on over the rungs of a ladder: the mark of the page.
pub fn mark() -> Html {
    html! {
        <svg class="mark" viewBox="0 0 28 28" aria-hidden="true">
            <rect class="well" x="2" y="1.5" width="24" height="15" rx="5" />
            <path class="mark-coil" d="M8 11 q1 -6 2 -0 t2 0 q1 -6 2 0 t2 0 q1 -6 2 0 t2 0" />
            <path class="drawing" d="M8 16.5 V27 M20 16.5 V27 M8 20.5 H20 M8 25 H20" />
        </svg>
    }
}
