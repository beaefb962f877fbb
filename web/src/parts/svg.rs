//! Numbers for SVG attributes, which are always written the English way.

use crate::format::Numerals;

/// A length in user units.
pub fn n(value: f64) -> String {
    Numerals { decimal: '.' }.fixed(value, 1).replace('\u{2212}', "-")
}

/// A colour.
pub fn rgb(colour: [u8; 3]) -> String {
    let [r, g, b] = colour;
    format!("rgb({r} {g} {b})")
}

/// A colour on its way to another.
pub fn mix(from: [u8; 3], to: [u8; 3], share: f64) -> [u8; 3] {
    let share = share.clamp(0.0, 1.0);
    core::array::from_fn(|channel| {
        let (from, to) = (f64::from(from[channel]), f64::from(to[channel]));
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "between two bytes, so itself one"
        )]
        let byte = (from + share * (to - from)).round() as u8;
        byte
    })
}
