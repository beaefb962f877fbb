//! `switch-on`: the first seconds of a load behind a bank, or straight on the mains where no bank is given.

use lampladder_core::bank::Bank;
use lampladder_core::error::{Field, InputError};
use lampladder_core::switch_on::{Moment, Options, Run, Sample, SwitchOn, SwitchOnError};
use serde::Serialize;

use crate::fields::{Fields, Node, Refusal};
use crate::parts;

#[derive(Serialize)]
pub(crate) struct SwitchOnAnswer {
    #[serde(skip_serializing_if = "Option::is_none")]
    switch_degrees: Option<f64>,
    peak_amps: f64,
    peak_seconds: f64,
    i2t_amp2_seconds: f64,
    settle_seconds: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pulse_seconds: Option<f64>,
    samples: Vec<OneSample>,
}

#[derive(Serialize)]
struct OneSample {
    seconds: f64,
    lamp_kelvin: Vec<Vec<f64>>,
    load_volts_rms: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_dc_volts: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_kelvin: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_speed: Option<f64>,
    amps_rms: f64,
}

/// A run that has been carried out, with what the answer needs besides.
pub(crate) struct Ran {
    pub(crate) result: SwitchOn,
    bank: Option<Bank>,
    worst: bool,
    /// Place among the sorted times of each time as it was asked for.
    places: Vec<usize>,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<SwitchOnAnswer, Refusal> {
    let ran = ran(&mut fields)?;
    fields.done()?;
    let result = &ran.result;
    let sample = |place: &usize| result.asked.get(*place).map(|sample| one_sample(sample, ran.bank.as_ref()));
    Ok(SwitchOnAnswer {
        switch_degrees: ran.worst.then_some(result.switch_degrees),
        peak_amps: result.peak_amps,
        peak_seconds: result.peak_seconds,
        i2t_amp2_seconds: result.i2t_amp2_seconds,
        settle_seconds: result.settle_seconds,
        pulse_seconds: result.pulse_seconds(),
        samples: ran.places.iter().filter_map(sample).collect(),
    })
}

/// Reads the fields of a switch-on and carries it out.
pub(crate) fn ran(fields: &mut Fields<'_>) -> Result<Ran, Refusal> {
    let supply = parts::supply(&fields.need("supply")?)?;
    let bank = fields.maybe("bank").map(|node| parts::bank(&node)).transpose()?;
    let load = parts::load(&fields.need("load")?)?;
    let moment = match fields.maybe("switch_degrees") {
        Some(node) => moment(&node)?,
        None => Moment::Degrees(90.0),
    };
    let asked = fields.numbers("sample_seconds")?;
    let mut order: Vec<usize> = (0..asked.len()).collect();
    order.sort_by(|&a, &b| asked[a].1.total_cmp(&asked[b].1));
    let mut places = vec![0; asked.len()];
    for (place, &index) in order.iter().enumerate() {
        places[index] = place;
    }
    let options = Options {
        seconds: fields.maybe_number("seconds")?.unwrap_or(3.0),
        moment,
        at: order.iter().map(|&index| asked[index].1).collect(),
        remanence: fields.maybe_number("remanence")?.unwrap_or(0.0),
        ..Options::default()
    };
    let run = Run::new(&supply, bank.as_ref(), &load, &options).and_then(Run::complete);
    let worst = moment == Moment::Worst;
    run.map(|result| Ran { result, bank, worst, places }).map_err(|error| refusal(&error, &asked))
}

fn moment(node: &Node<'_>) -> Result<Moment, Refusal> {
    match node.text() {
        Ok("worst") => Ok(Moment::Worst),
        Ok(_) => Err(node.refuse("must be a number of degrees or \"worst\"")),
        Err(_) => node.number().map(Moment::Degrees),
    }
}

fn one_sample(sample: &Sample, bank: Option<&Bank>) -> OneSample {
    let mut kelvins = sample.lamp_kelvin.iter().copied();
    let groups = bank.map_or(&[][..], Bank::groups);
    OneSample {
        seconds: sample.seconds,
        lamp_kelvin: groups.iter().map(|group| kelvins.by_ref().take(group.len()).collect()).collect(),
        load_volts_rms: sample.load_volts_rms,
        load_dc_volts: sample.load_dc_volts,
        load_kelvin: sample.load_kelvin,
        load_speed: sample.load_speed,
        amps_rms: sample.amps_rms,
    }
}

/// What cannot be simulated, with the path that belongs to it.
fn refusal(error: &SwitchOnError, asked: &[(Node<'_>, f64)]) -> Refusal {
    let path = match error {
        SwitchOnError::FilamentMelts { group, lamp, .. } => format!("bank[{group}][{lamp}].volts"),
        SwitchOnError::Input(input) => match input.field() {
            Field::Hertz => String::from("supply.hertz"),
            Field::SampleSeconds => asked
                .iter()
                .find(|(_, seconds)| matches!(*input, InputError::OutOfRange { value, .. } if value == *seconds))
                .map_or_else(|| String::from("sample_seconds"), |(node, _)| node.path().to_owned()),
            field @ (Field::Seconds | Field::SwitchDegrees | Field::Remanence) => field.name().to_owned(),
            field => format!("load.{}", field.name()),
        },
        _ => String::from("load"),
    };
    Refusal::at(path, error.to_string())
}
