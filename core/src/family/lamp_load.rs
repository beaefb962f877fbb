//! An incandescent lamp as the equipment: the same curve as the bank's.

use alloc::boxed::Box;

use super::Card;
use crate::condition::Condition;
use crate::error::InputError;
use crate::lamp::Lamp;
use crate::load::Load;
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "lamp",
    conditions: &[Condition::Healthy, Condition::Shorted, Condition::OpenCircuit],
    // IEC 60064 limits the watts of a new lamp to 104 % + 0.5 W (from memory).
    healthy_shares: (0.95, 1.05),
    usual_power_factor: 1.0,
    details: &[],
    build,
};

fn build(plate: &Plate, _condition: Condition, share: f64) -> Result<Load, InputError> {
    Ok(Load::Lamp(Box::new(Lamp::new(plate.volts(), share * plate.watts())?)))
}
