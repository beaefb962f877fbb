//! `steady`: every steady point of supply, bank and load, and the outcome.

use lampladder_core::hunt;
use lampladder_core::lamp::LampState;
use lampladder_core::steady::{self, Equilibrium, SteadyError};
use serde::Serialize;

use crate::fields::{Fields, Refusal};
use crate::parts;

#[derive(Serialize)]
pub(crate) struct SteadyAnswer {
    outcome: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    period_seconds: Option<f64>,
    equilibria: Vec<Point>,
}

#[derive(Serialize)]
struct Point {
    stable: bool,
    amps: f64,
    bank_volts: f64,
    load_volts: f64,
    load_watts: f64,
    load_power_factor: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_dc_volts: Option<f64>,
    lamps: Vec<Vec<OneLamp>>,
}

#[derive(Serialize)]
struct OneLamp {
    volts: f64,
    amps: f64,
    watts: f64,
    kelvin: f64,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<SteadyAnswer, Refusal> {
    let (supply, bank, load) = (fields.need("supply")?, fields.need("bank")?, fields.need("load")?);
    fields.done()?;
    let (supply, bank, load) = (parts::supply(&supply)?, parts::bank(&bank)?, parts::load(&load)?);
    let solved = steady::solve(&supply, &bank, &load).map_err(|error| refusal(&error))?;
    let (outcome, period_seconds) = parts::outcome(solved.outcome, || hunt::pulse(&supply, &bank, &load))?;
    Ok(SteadyAnswer { outcome, period_seconds, equilibria: solved.equilibria.iter().map(point).collect() })
}

fn point(found: &Equilibrium) -> Point {
    let lamp = |&LampState { volts, amps, watts, kelvin }: &LampState| OneLamp { volts, amps, watts, kelvin };
    Point {
        stable: found.stable,
        amps: found.amps,
        bank_volts: found.bank_volts,
        load_volts: found.load_volts,
        load_watts: found.load_watts,
        load_power_factor: found.load_power_factor,
        load_dc_volts: found.load_dc_volts,
        lamps: found.lamps.iter().map(|group| group.iter().map(lamp).collect()).collect(),
    }
}

/// A load without meaning on this supply, or a lamp that would burn out, with the path that belongs to it.
fn refusal(error: &SteadyError) -> Refusal {
    let path = match error {
        SteadyError::FilamentMelts { group, lamp } => format!("bank[{group}][{lamp}].volts"),
        SteadyError::Input(input) => match input.field().name() {
            name @ "hertz" => format!("supply.{name}"),
            name => format!("load.{name}"),
        },
        _ => String::from("load"),
    };
    Refusal::at(path, error.to_string())
}
