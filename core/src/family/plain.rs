//! Anything of which only volts, watts and power factor are known: a resistance with a lagging reactance.

use super::Card;
use crate::condition::{Condition, OVERLOAD};
use crate::error::InputError;
use crate::load::{Impedance, Load};
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "plain",
    conditions: &[Condition::Healthy, Condition::Overloaded, Condition::Shorted, Condition::OpenCircuit],
    healthy_shares: (0.7, 1.1),
    // Midway in what plates of mixed equipment give (design value, no source).
    usual_power_factor: 0.9,
    details: &[],
    build,
};

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let times = if condition == Condition::Overloaded { OVERLOAD } else { 1.0 };
    let watts = times * share * plate.watts();
    Impedance::from_rating(plate.volts(), watts, plate.assumed_power_factor()).map(Load::Impedance)
}
