//! Heaters: a resistor. Nichrome changes by a few per cent from cold to hot, inside the healthy spread.

use super::Card;
use crate::condition::{Condition, OVERLOAD};
use crate::error::InputError;
use crate::load::{Impedance, Load};
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "heater",
    conditions: &[Condition::Healthy, Condition::Overloaded, Condition::Shorted, Condition::OpenCircuit],
    // The usual limits of appliance standards (from memory).
    healthy_shares: (0.90, 1.05),
    // Published second hand.
    usual_power_factor: 1.0,
    details: &[],
    build,
};

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let times = if condition == Condition::Overloaded { OVERLOAD } else { 1.0 };
    Impedance::from_rating(plate.volts(), times * share * plate.watts(), 1.0).map(Load::Impedance)
}
