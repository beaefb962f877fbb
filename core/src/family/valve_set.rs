//! Valve sets: tungsten heaters that start at a sixth of their hot resistance, and a high tension that waits for them.
//!
//! With a transformer the heaters stand beside the rectifier on the secondary; without one they form a string across
//! the mains beside a half-wave rectifier, and the whole chassis is live.

use super::Card;
use super::transformer_supply::{ANY_DRAW_OHMS, faulty};
use crate::condition::Condition;
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Load, PowerSupplySpec};
use crate::plate::Plate;

const CONDITIONS: [Condition; 9] = [
    Condition::Healthy,
    Condition::Overloaded,
    Condition::Shorted,
    Condition::ShortedReservoir,
    Condition::LeakyReservoir,
    Condition::OutputConducting,
    Condition::ShortedDiode,
    Condition::ShortedWinding,
    Condition::OpenCircuit,
];

pub(super) static TRANSFORMER: Card = Card {
    name: "valve-transformer",
    conditions: &CONDITIONS,
    healthy_shares: (0.8, 1.1),
    usual_power_factor: 0.8,
    details: &[
        ClassDefault::new(Detail::HeaterShare, 0.45, (0.05, 0.9), Standing::Design),
        ClassDefault::new(Detail::MagnetisingShare, 0.25, (0.01, 2.0), Standing::Design),
        ClassDefault::new(Detail::CoreShare, 0.05, (0.001, 0.5), Standing::Design),
        ClassDefault::new(Detail::WindingShare, 0.06, (0.005, 0.5), Standing::Design),
        ClassDefault::new(Detail::ReservoirSeconds, 0.1, (0.005, 10.0), Standing::Design),
    ],
    build: with_transformer,
};

pub(super) static SERIES: Card = Card {
    name: "valve-series",
    // No windings that could short.
    conditions: &[
        Condition::Healthy,
        Condition::Overloaded,
        Condition::Shorted,
        Condition::ShortedReservoir,
        Condition::LeakyReservoir,
        Condition::OutputConducting,
        Condition::ShortedDiode,
        Condition::OpenCircuit,
    ],
    healthy_shares: (0.8, 1.1),
    usual_power_factor: 0.9,
    details: &[
        ClassDefault::new(Detail::HeaterShare, 0.6, (0.05, 0.9), Standing::Design),
        ClassDefault::new(Detail::WindingShare, 0.05, (0.005, 0.5), Standing::Design),
        ClassDefault::new(Detail::ReservoirSeconds, 0.1, (0.005, 10.0), Standing::Design),
    ],
    build: in_series,
};

fn with_transformer(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let rated_ohms = plate.volts() * plate.volts() / plate.watts();
    let parts = PowerSupplySpec {
        magnetising_amps: plate.detail(Detail::MagnetisingShare) * plate.watts() / plate.volts(),
        core_ohms: rated_ohms / plate.detail(Detail::CoreShare),
        winding_ohms: plate.detail(Detail::WindingShare) * rated_ohms,
        // A valve rectifier drops some 15 V of 250 V.
        diode_volts: 0.06 * plate.volts(),
        half_wave: false,
        ..common(plate)
    };
    faulty(plate, condition, share, &parts)
}

fn in_series(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let rated_ohms = plate.volts() * plate.volts() / plate.watts();
    let parts = PowerSupplySpec {
        magnetising_amps: 0.0,
        core_ohms: 1e9,
        // The surge resistor ahead of the rectifier.
        winding_ohms: plate.detail(Detail::WindingShare) * rated_ohms,
        diode_volts: 0.06 * plate.volts(),
        half_wave: true,
        ..common(plate)
    };
    faulty(plate, condition, share, &parts)
}

fn common(plate: &Plate) -> PowerSupplySpec {
    let rated_ohms = plate.volts() * plate.volts() / plate.watts();
    PowerSupplySpec {
        rated_volts: plate.volts(),
        heater_watts: plate.detail(Detail::HeaterShare) * plate.watts(),
        farads: plate.detail(Detail::ReservoirSeconds) / (4.0 * rated_ohms),
        draw_ohms: ANY_DRAW_OHMS,
        magnetising_amps: 0.0,
        core_ohms: 1e9,
        winding_ohms: 0.0,
        diode_volts: 0.0,
        half_wave: false,
    }
}
