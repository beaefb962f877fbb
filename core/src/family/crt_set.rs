//! Picture-tube sets: a degauss coil and thermistor beside a switch-mode supply.
//!
//! The cold thermistor is 7 to 14 ohm and passes 10 to 50 mA after three minutes (published second hand, 220 V types);
//! its coil adds about as much again (design value).

use super::Card;
use super::switch_mode::{self, CONDITIONS, DETAILS as SWITCH_MODE};
use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Degauss, Load};
use crate::plate::Plate;

pub(super) static CARD: Card = Card {
    name: "crt-set",
    conditions: &CONDITIONS,
    healthy_shares: (0.6, 1.05),
    // Published second hand.
    usual_power_factor: 0.7,
    details: &[
        SWITCH_MODE[0],
        SWITCH_MODE[1],
        SWITCH_MODE[2],
        SWITCH_MODE[3],
        SWITCH_MODE[4],
        SWITCH_MODE[5],
        ClassDefault::new(Detail::DegaussColdOhms, 25.0, (7.0, 60.0), Standing::Published),
        ClassDefault::new(Detail::DegaussWarmAmps, 0.02, (0.005, 0.1), Standing::Published),
        ClassDefault::new(Detail::DegaussTripWatts, 1.5, (0.1, 10.0), Standing::Design),
    ],
    build,
};

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    if let Some(shorted) = switch_mode::shorted(plate, condition) {
        return shorted;
    }
    let shunt = plate.volts() / plate.detail(Detail::DegaussWarmAmps);
    let warm = switch_mode::rectifier(plate, condition, share, Some(shunt))?;
    let cold_ohms = plate.detail(Detail::DegaussColdOhms);
    Degauss::new(cold_ohms, plate.detail(Detail::DegaussTripWatts), warm).map(Load::Degauss)
}
