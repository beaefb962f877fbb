//! Switch-mode supplies, without and with power-factor correction: a constant power between two thresholds.
//!
//! Universal-input supplies start at 60 to 80 V AC and stop at 45 to 70 V (from memory); the defaults are the middles,
//! as DC volts on the reservoir. A single-range 230 V supply starts at 140 to 175 V AC (from memory): change the
//! thresholds to 225 and 180 V for one.

use super::Card;
use crate::condition::{Condition, OVERLOAD};
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{Corrected, CorrectedSpec, Draw, HalfShort, Impedance, Load, Rectifier, RectifierSpec};
use crate::plate::Plate;

pub(super) const CONDITIONS: [Condition; 7] = [
    Condition::Healthy,
    Condition::Idle,
    Condition::Overloaded,
    Condition::ShortedReservoir,
    Condition::ShortedDiode,
    Condition::Shorted,
    Condition::OpenCircuit,
];

pub(super) const DETAILS: [ClassDefault; 6] = [
    ClassDefault::new(Detail::StartVolts, 99.0, (20.0, 400.0), Standing::Memory),
    ClassDefault::new(Detail::StopVolts, 81.0, (10.0, 400.0), Standing::Memory),
    ClassDefault::new(Detail::MicrofaradsPerWatt, 2.0, (0.1, 20.0), Standing::Design),
    ClassDefault::new(Detail::SeriesOhms, 5.0, (0.05, 100.0), Standing::Design),
    ClassDefault::new(Detail::IdleShare, 0.05, (0.001, 1.0), Standing::Design),
    // The start-up capacitor of the controller charges anew: tenths of a second to seconds (from memory).
    ClassDefault::new(Detail::RestartSeconds, 0.6, (0.0, 10.0), Standing::Memory),
];

pub(super) static PLAIN: Card = Card {
    name: "switch-mode",
    conditions: &CONDITIONS,
    // What hangs on the supply decides; a plate states the most (design values).
    healthy_shares: (0.5, 1.05),
    // Published second hand: plug-in adapters 0.52 to 0.73.
    usual_power_factor: 0.6,
    details: &DETAILS,
    build: without_correction,
};

pub(super) static CORRECTED: Card = Card {
    name: "switch-mode-corrected",
    conditions: &CONDITIONS,
    healthy_shares: (0.5, 1.05),
    // Design value, no source.
    usual_power_factor: 0.95,
    details: &DETAILS,
    build: with_correction,
};

fn watts(plate: &Plate, condition: Condition, share: f64) -> f64 {
    let times = match condition {
        Condition::Overloaded => OVERLOAD,
        Condition::Idle => plate.detail(Detail::IdleShare),
        _ => 1.0,
    };
    times * share * plate.watts()
}

fn farads(plate: &Plate) -> f64 {
    1e-6 * plate.detail(Detail::MicrofaradsPerWatt) * plate.watts()
}

/// The rectifier and converter, with a shunt if there is one.
pub(super) fn rectifier(
    plate: &Plate,
    condition: Condition,
    share: f64,
    shunt_ohms: Option<f64>,
) -> Result<Rectifier, InputError> {
    Rectifier::new(RectifierSpec {
        farads: farads(plate),
        series_ohms: plate.detail(Detail::SeriesOhms),
        // Two silicon junctions.
        diode_volts: 1.4,
        draw: Draw::Watts {
            watts: watts(plate, condition, share),
            start_volts: plate.detail(Detail::StartVolts),
            stop_volts: plate.detail(Detail::StopVolts),
            restart_seconds: plate.detail(Detail::RestartSeconds),
        },
        shunt_ohms,
    })
}

/// The faults ahead of the converter, which any switch-mode set can have.
pub(super) fn shorted(plate: &Plate, condition: Condition) -> Option<Result<Load, InputError>> {
    let ohms = plate.detail(Detail::SeriesOhms);
    match condition {
        Condition::ShortedReservoir => Some(Impedance::new(ohms, 0.0).map(Load::Impedance)),
        Condition::ShortedDiode => Some(HalfShort::new(ohms).map(Load::HalfShort)),
        _ => None,
    }
}

fn without_correction(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    shorted(plate, condition).unwrap_or_else(|| rectifier(plate, condition, share, None).map(Load::Rectifier))
}

fn with_correction(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    shorted(plate, condition).unwrap_or_else(|| {
        Corrected::new(CorrectedSpec {
            watts: watts(plate, condition, share),
            start_volts: plate.detail(Detail::StartVolts),
            stop_volts: plate.detail(Detail::StopVolts),
            restart_seconds: plate.detail(Detail::RestartSeconds),
            farads: farads(plate),
        })
        .map(Load::Corrected)
    })
}
