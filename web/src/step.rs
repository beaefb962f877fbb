//! What a stepper beside a field does: sizes that are sold for lamps, small even steps for the rest.

use lampladder_core::detail::Detail;
use lampladder_core::quantity;

use crate::draft::{Draft, LampPart, Slot};
use crate::format::Numerals;

/// Sizes of lamps that are in the shops or in old boxes, watts.
pub const STOCK_WATTS: [f64; 8] = [15.0, 25.0, 40.0, 60.0, 75.0, 100.0, 150.0, 200.0];

/// Usual supply voltages.
pub const USUAL_VOLTS: [f64; 7] = [100.0, 110.0, 120.0, 127.0, 220.0, 230.0, 240.0];

/// The text after one step up or down from what stands in the field; what cannot be read stays as it is.
pub fn stepped(draft: &Draft, slot: Slot, up: bool, numerals: Numerals) -> String {
    let text = draft.text(slot);
    let Ok(value) = quantity::parse(text, slot.field()) else { return text.to_owned() };
    if !(0.0..1e6).contains(&value) {
        return text.to_owned();
    }
    let next = match slot {
        Slot::Lamp(_, LampPart::Watts) => stock(value, up),
        Slot::SupplyHertz => {
            if up {
                60.0
            } else {
                50.0
            }
        }
        Slot::Detail(Detail::MeasuredOhms) => even(value, usual_step(value, up) * 2.0, up),
        Slot::PlatePowerFactor => even(value, 0.05, up).clamp(0.05, 1.0),
        Slot::SupplyVolts | Slot::PlateVolts | Slot::Lamp(_, LampPart::Volts) => even(value, 1.0, up),
        _ => even(value, usual_step(value, up), up),
    };
    numerals.plain(next)
}

/// The next size in the shops; beyond them, even steps.
fn stock(value: f64, up: bool) -> f64 {
    let next = if up {
        STOCK_WATTS.into_iter().find(|size| *size > value)
    } else {
        STOCK_WATTS.into_iter().rev().find(|size| *size < value)
    };
    next.unwrap_or_else(|| even(value, usual_step(value, up), up))
}

/// A step of about a tenth, in figures that people say.
fn usual_step(value: f64, up: bool) -> f64 {
    // At the edge of two ranges, going down belongs to the smaller one.
    let inside = if up { value } else { value - 1e-9 };
    match inside {
        v if v < 5.0 => 0.5,
        v if v < 20.0 => 1.0,
        v if v < 100.0 => 5.0,
        v if v < 500.0 => 10.0,
        v if v < 1000.0 => 50.0,
        _ => 100.0,
    }
}

/// The next multiple of `step`, never below zero.
fn even(value: f64, step: f64, up: bool) -> f64 {
    let count = value / step;
    let next = if up { (count + 1e-9).floor() + 1.0 } else { (count - 1e-9).ceil() - 1.0 };
    // Dividing by a whole number keeps 0.05 steps free of dust.
    let per_unit = (1.0 / step).round().max(1.0);
    if step < 1.0 { (next / per_unit).max(0.0) } else { (next * step).max(0.0) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn steps_are_even_and_come_back() {
        assert_eq!(even(230.0, 1.0, true), 231.0);
        assert_eq!(even(230.4, 1.0, false), 230.0);
        assert_eq!(even(0.7, 0.05, true), 0.75);
        assert_eq!(even(0.0, 1.0, false), 0.0);
        assert_eq!(usual_step(100.0, false), 5.0);
        assert_eq!(usual_step(100.0, true), 10.0);
        assert_eq!(stock(60.0, true), 75.0);
        assert_eq!(stock(60.0, false), 40.0);
        assert_eq!(stock(200.0, true), 210.0);
        assert_eq!(stock(15.0, false), 14.0);
    }
}
