//! `lamp`: one lamp, and its state at voltages and filament temperatures.

use lampladder_core::expect;
use lampladder_core::lamp::{Lamp, LampState};
use lampladder_core::wire::Wire;
use serde::Serialize;

use crate::fields::{Fields, Refusal};
use crate::parts;

#[derive(Serialize)]
pub(crate) struct LampAnswer {
    rated_kelvin: f64,
    gas_share: f64,
    cold_ohms: f64,
    wire_metres: f64,
    wire_diameter_metres: f64,
    rated_lumens: f64,
    states: Vec<State>,
}

#[derive(Serialize)]
struct State {
    volts: f64,
    amps: f64,
    amps_low: f64,
    amps_high: f64,
    watts: f64,
    kelvin: f64,
    lumens: f64,
}

/// Relative difference between the volts asked for and the volts of the state found, above which the filament has
/// reached the end of its curve; the search itself is closer than this.
const OFF_THE_CURVE: f64 = 1e-6;

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<LampAnswer, Refusal> {
    let lamp = fields.need("lamp")?;
    let at_volts = fields.numbers("at_volts")?;
    let at_kelvin = fields.numbers("at_kelvin")?;
    fields.done()?;
    let lamp = parts::lamp(&lamp)?;

    let mut states = Vec::with_capacity(at_volts.len() + at_kelvin.len());
    for (node, volts) in at_volts {
        if volts < 0.0 {
            return Err(node.refuse(format!("volts must be 0 or more, not {volts:?}")));
        }
        let found = lamp.at_volts(volts);
        if found.volts < volts * (1.0 - OFF_THE_CURVE) {
            let most = found.volts;
            return Err(
                node.refuse(format!("the lamp would burn out: its filament reaches 3600 K at {most:.1} V"))
            );
        }
        states.push(state(&lamp, LampState { volts, ..found }));
    }
    for (node, kelvin) in at_kelvin {
        let found = lamp.at_kelvin(kelvin).map_err(|error| node.refuse(error.to_string()))?;
        states.push(state(&lamp, found));
    }
    let wire = Wire::of(lamp.filament());
    Ok(LampAnswer {
        rated_kelvin: lamp.rated_kelvin(),
        gas_share: lamp.gas_share(),
        cold_ohms: lamp.cold_ohms(),
        wire_metres: wire.metres,
        wire_diameter_metres: wire.diameter_metres,
        rated_lumens: lamp.lumens(lamp.rated_kelvin()),
        states,
    })
}

fn state(lamp: &Lamp, LampState { volts, amps, watts, kelvin }: LampState) -> State {
    let band = expect::lamp_amps(lamp, volts);
    State {
        volts,
        amps,
        amps_low: band.low,
        amps_high: band.high,
        watts,
        kelvin,
        lumens: lamp.lumens(kelvin),
    }
}
