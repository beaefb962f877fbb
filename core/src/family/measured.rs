//! A resistance measured across the plug, for equipment that is nothing else.

use super::Card;
use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Impedance, Load};
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "measured",
    conditions: &[Condition::Healthy, Condition::Shorted, Condition::OpenCircuit],
    // A cheap meter's 1 % and its leads.
    healthy_shares: (0.98, 1.02),
    usual_power_factor: 1.0,
    details: &[ClassDefault::new(Detail::MeasuredOhms, 1000.0, (0.1, 1e7), Standing::Design)],
    build,
};

fn build(plate: &Plate, _condition: Condition, share: f64) -> Result<Load, InputError> {
    Impedance::new(plate.detail(Detail::MeasuredOhms) / share, 0.0).map(Load::Impedance)
}
