//! Lamps for the checks, and how far a real one may be from the model.

use lampladder_core::lamp::{Fill, Lamp, LampSpec};

/// A lamp of this rating and fill.
///
/// # Panics
/// Where the core refuses it: the checks only ask for lamps that exist.
pub fn lamp(volts: f64, watts: f64, fill: Fill) -> Lamp {
    lamp_from(LampSpec { volts, watts, fill: Some(fill), ..LampSpec::default() })
}

/// A lamp from a full specification.
///
/// # Panics
/// As [`lamp`].
pub fn lamp_from(spec: LampSpec) -> Lamp {
    Lamp::from_spec(spec).unwrap_or_else(|error| panic!("a lamp that exists: {error}"))
}

/// The fill of a reference row.
///
/// # Panics
/// On a name that no reference file uses.
pub fn fill(name: &str) -> Fill {
    Fill::ALL.into_iter().find(|fill| fill.name() == name).unwrap_or_else(|| panic!("no fill {name}"))
}

/// Least and greatest of `quantity` over the lamp's 95 % band, put together here afresh from the core's variants:
/// pairs of one standard deviation times 1.96, and the other published tables either way, in quadrature.
pub fn band(lamp: &Lamp, quantity: impl Fn(&Lamp) -> f64) -> (f64, f64) {
    let value = quantity(lamp);
    let (mut down, mut up) = (0.0_f64, 0.0_f64);
    for index in 0..Lamp::VARIANTS {
        let moved = quantity(&lamp.variant(index)) - value;
        if index >= 6 {
            // The truth may lie on either side of our table.
            up = up.hypot(moved);
            down = down.hypot(moved);
        } else if moved > 0.0 {
            up = up.hypot(1.96 * moved);
        } else {
            down = down.hypot(1.96 * moved);
        }
    }
    (value - down, value + up)
}
