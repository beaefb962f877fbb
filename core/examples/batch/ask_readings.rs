//! `readings`: what meters and the lamp say about current, power and power factor.

use lampladder_core::error::InputError;
use lampladder_core::family::Family;
use lampladder_core::glow::GlowWord;
use lampladder_core::readings::{
    self, Behaviour, Contradiction, Estimate, Found, Kind, Look, Meter, MeterSpec, Reading, Readings,
    Response, Rule, Taking, Waveform,
};
use serde::Serialize;

use crate::fields::{Fields, Node, Refusal};
use crate::parts;

#[derive(Serialize, Default)]
pub(crate) struct ReadingsAnswer {
    #[serde(skip_serializing_if = "Option::is_none")]
    supply_volts: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    bank_volts: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_volts: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    amps: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_watts: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_power_factor: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    load_ohms: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    full_amps: Option<Banded>,
    #[serde(skip_serializing_if = "Option::is_none")]
    full_watts: Option<Banded>,
    consistent: bool,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    contradictions: Vec<Clash>,
}

#[derive(Serialize)]
struct Banded {
    value: f64,
    low: f64,
    high: f64,
    deviation: f64,
}

#[derive(Serialize)]
struct Clash {
    rule: &'static str,
    left: f64,
    right: f64,
    deviation: f64,
    missing_unit: bool,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<ReadingsAnswer, Refusal> {
    let bank = fields.need("bank")?;
    let family = fields.maybe("family");
    let readings = read(&mut fields)?;
    fields.done()?;
    let family = family.map(|node| parts::one_of(&node, &Family::ALL, Family::name)).transpose()?;
    let growth = readings::growth(family.unwrap_or(Family::Plain));
    Ok(match readings::interpret(&parts::bank(&bank)?, &readings, growth) {
        Ok(found) => consistent(&found),
        Err(refused) => ReadingsAnswer {
            contradictions: refused.contradictions.iter().map(clash).collect(),
            ..ReadingsAnswer::default()
        },
    })
}

fn consistent(found: &Found) -> ReadingsAnswer {
    let banded = |estimate: &Option<Estimate>| {
        estimate.map(|Estimate { band, deviation }| Banded {
            value: band.value,
            low: band.low,
            high: band.high,
            deviation,
        })
    };
    ReadingsAnswer {
        supply_volts: banded(&found.supply_volts),
        bank_volts: banded(&found.bank_volts),
        load_volts: banded(&found.load_volts),
        amps: banded(&found.amps),
        load_watts: banded(&found.load_watts),
        load_power_factor: banded(&found.load_power_factor),
        load_ohms: banded(&found.load_ohms),
        full_amps: banded(&found.full_amps),
        full_watts: banded(&found.full_watts),
        consistent: true,
        contradictions: Vec::new(),
    }
}

fn clash(one: &Contradiction) -> Clash {
    let rule = match one.rule {
        Rule::PartsReachWhole => "bank_volts + load_volts is less than supply_volts",
        Rule::PartsDifferByWhole => "bank_volts and load_volts differ by more than supply_volts",
        Rule::NoPowerComesBack => "the squares of bank_volts and load_volts exceed that of supply_volts",
        Rule::PartWithinWhole => "a part exceeds supply_volts",
        Rule::RealWithinApparent => "load_watts exceeds load_volts times amps",
        Rule::CurrentsAgree => "amps is not the current of these lamps at bank_volts",
        Rule::GlowAgrees => "the glow is not that of these lamps at this current",
        Rule::PowersAgree => "load_watts is not the power by three voltages",
        Rule::FilamentHolds => "bank_volts would burn a lamp out",
        _ => "a law of the circuit is broken",
    };
    Clash {
        rule,
        left: one.left,
        right: one.right,
        deviation: one.deviation,
        missing_unit: one.looks_like_a_missing_unit,
    }
}

/// The readings among the fields of a request, or of its `readings`.
pub(crate) fn read(fields: &mut Fields<'_>) -> Result<Readings, Refusal> {
    let drift = fields.maybe("drift_percent");
    let one_meter = fields.maybe("one_meter").map(|node| node.truth()).transpose()?;
    let waveform = match fields.maybe("waveform") {
        None => Waveform::Unknown,
        Some(node) => match node.text()? {
            "sine" => Waveform::Sine,
            "pulses" => Waveform::Pulses,
            "unknown" => Waveform::Unknown,
            _ => return Err(node.refuse("waveform must be one of sine, pulses, unknown")),
        },
    };
    let usual = Taking::default();
    let drift_percent = drift.as_ref().map_or(Ok(usual.drift_percent), Node::number)?;
    let taking = Taking { drift_percent, one_meter: one_meter.unwrap_or(usual.one_meter), waveform };
    let mut readings = Readings::new(taking).map_err(|error| match drift {
        Some(node) => node.refuse(error.to_string()),
        None => Refusal::whole_line(error.to_string()),
    })?;
    for kind in Kind::ALL {
        if let Some(node) = fields.maybe(kind.field().name()) {
            readings.add(reading(&node, kind)?);
        }
    }
    if let Some(node) = fields.maybe("glow") {
        let look = look(&node)?;
        readings.set_look(Some(look)).map_err(|error| node.refuse(error.to_string()))?;
    }
    if let Some(node) = fields.maybe("behaviour") {
        readings.set_behaviour(Some(parts::one_of(&node, &Behaviour::ALL, Behaviour::name)?));
    }
    Ok(readings)
}

/// A number on a meter; alone, it was read on the commonest cheap one.
fn reading(node: &Node<'_>, kind: Kind) -> Result<Reading, Refusal> {
    let refuse = |error: InputError| match error.field() {
        field if field == kind.field() => node.refuse(error.to_string()),
        _ => Refusal::inside(node.path(), &error),
    };
    if let Ok(value) = node.number() {
        return Reading::new(kind, value, Meter::usual()).map_err(refuse);
    }
    let mut fields = node.fields()?;
    let value = fields.number("value")?;
    let usual = MeterSpec::default();
    let averaging = fields.maybe("averaging").map(|node| node.truth()).transpose()?.unwrap_or(false);
    let percent = fields.maybe_number("percent")?;
    let spec = MeterSpec {
        percent: percent.unwrap_or(usual.percent),
        // Whoever gives the per cent alone has meant all of it.
        digits: fields.maybe_number("digits")?.unwrap_or(if percent.is_some() { 0.0 } else { usual.digits }),
        counts: fields.maybe_number("counts")?.unwrap_or(usual.counts),
        response: if averaging { Response::Averaging } else { Response::TrueRms },
    };
    fields.done()?;
    Meter::new(spec).and_then(|meter| Reading::new(kind, value, meter)).map_err(refuse)
}

/// A word, or a temperature.
fn look(node: &Node<'_>) -> Result<Look, Refusal> {
    match node.number() {
        Ok(kelvin) => Ok(Look::Kelvin(kelvin)),
        Err(_) => parts::one_of(node, &GlowWord::ALL, GlowWord::name).map(Look::Word),
    }
}
