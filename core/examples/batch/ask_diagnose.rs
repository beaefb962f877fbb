//! `diagnose`: which condition explains the readings, and what to read next.

use lampladder_core::diagnosis::{self, Advice, Candidate, Diagnosis, Forecast, Meaning, Seen, is_fault};
use lampladder_core::readings::{Kind, Readings, Response};
use lampladder_core::setup::Setup;
use lampladder_core::steady::SteadyError;
use serde::Serialize;

use crate::ask_readings;
use crate::fields::{Fields, Refusal};
use crate::parts;

#[derive(Serialize)]
pub(crate) struct DiagnoseAnswer {
    conditions: Vec<Weight>,
    explained: bool,
    fit: f64,
    next_reading: Option<&'static str>,
    next_bits: Option<f64>,
    outcomes: Vec<Outcome>,
    verdict: &'static str,
    advice: String,
}

#[derive(Serialize)]
struct Weight {
    condition: &'static str,
    weight: f64,
}

#[derive(Serialize)]
struct Outcome {
    #[serde(skip_serializing_if = "Option::is_none")]
    low: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    high: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    behaviour: Option<&'static str>,
    probability: f64,
    condition: &'static str,
    weight: f64,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<DiagnoseAnswer, Refusal> {
    let (supply, bank, plate) = (fields.need("supply")?, fields.need("bank")?, fields.need("plate")?);
    let given = fields.maybe("readings");
    fields.done()?;
    let setup = Setup {
        supply: parts::supply(&supply)?,
        bank: parts::bank(&bank)?,
        plate: {
            let mut fields = plate.fields()?;
            let read = parts::plate(&mut fields)?;
            fields.done()?;
            read
        },
    };
    let readings = match given {
        None => Readings::default(),
        Some(node) => {
            let mut fields = node.fields()?;
            let readings = ask_readings::read(&mut fields)?;
            fields.done()?;
            readings
        }
    };
    let response =
        readings.numbers().next().map_or(Response::TrueRms, |reading| reading.meter().spec().response);
    let forecast = Forecast::complete(&setup, readings.get(Kind::SupplyVolts), response);
    let forecast = forecast.map_err(|error| match error {
        SteadyError::Input(input) => {
            Refusal::at(format!("supply.{}", input.field().name()), error.to_string())
        }
        _ => Refusal::at("bank", error.to_string()),
    })?;
    let found = diagnosis::diagnose(&forecast, &readings);
    let next = found.next.first().filter(|next| next.bits > WORTH_READING);
    Ok(DiagnoseAnswer {
        conditions: found
            .ranking
            .iter()
            .map(|one| Weight { condition: one.condition.name(), weight: one.weight })
            .collect(),
        explained: found.explained,
        fit: found.fit,
        next_reading: next.map(|next| next.candidate.name()),
        next_bits: next.map(|next| next.bits),
        outcomes: next.map_or_else(Vec::new, |next| next.meanings.iter().map(outcome).collect()),
        verdict: found.advice.name(),
        advice: advice(&found, next.map(|next| next.candidate)),
    })
}

/// Bits below which another reading is not worth the walk.
const WORTH_READING: f64 = 0.01;

fn outcome(meaning: &Meaning) -> Outcome {
    let (low, high, behaviour) = match meaning.outcome {
        Seen::Between { low, high } => (Some(low), high.is_finite().then_some(high), None),
        Seen::Behaves(behaviour) => (None, None, Some(behaviour.name())),
        _ => (None, None, None),
    };
    let Meaning { probability, leader, weight, .. } = *meaning;
    Outcome { low, high, behaviour, probability, condition: leader.name(), weight }
}

fn advice(found: &Diagnosis, next: Option<Candidate>) -> String {
    let leader = found.ranking.first().map_or("nothing", |first| first.condition.name());
    let then = next.map_or_else(String::new, |next| format!("; next, read {}", next.name()));
    if !found.explained {
        return format!(
            "none of the known conditions explains these readings: check them and the plate{then}"
        );
    }
    match found.advice {
        Advice::GoOn => {
            format!("the readings fit {leader}: go on to the next bank, with the same care{then}")
        }
        Advice::Stop if found.ranking.first().is_some_and(|first| is_fault(first.condition)) => {
            format!("the readings fit {leader}: stop, unplug and look for the fault{then}")
        }
        Advice::Stop => format!("faults together outweigh the rest: stop, unplug and look{then}"),
        _ => format!("the readings do not decide ({leader} leads): measure before going on{then}"),
    }
}
