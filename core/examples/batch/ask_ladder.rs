//! `ladder`: the rungs from the lamps in stock to the bare mains.

use lampladder_core::band::Band;
use lampladder_core::error::{Field, InputError};
use lampladder_core::expect::Shown;
use lampladder_core::ladder::{
    self, Gain, GoOn, Ladder, LadderError, Level, Limits, LimitsSpec, Missing, Rung, WayForward,
};
use lampladder_core::lamp::{Lamp, LampSpec};
use lampladder_core::steady::SteadyError;
use lampladder_core::stock::Stock;
use serde::Serialize;

use crate::fields::{Fields, Node, Refusal};
use crate::parts;

#[derive(Serialize)]
pub(crate) struct LadderAnswer {
    rungs: Vec<OneRung>,
    /// The step after the last rung, which is the person's own decision.
    full_mains: FullMains,
    falls_short: Option<f64>,
    missing: Option<OneMissing>,
}

#[derive(Serialize)]
struct OneRung {
    bank: Vec<Vec<OneLamp>>,
    short_amps: f64,
    reason: &'static str,
    healthy: Healthy,
    go_on: OneGoOn,
    stop: Option<OneStop>,
    looks_healthy: Vec<&'static str>,
}

/// A lamp as a request would name it.
#[derive(Serialize)]
struct OneLamp {
    volts: f64,
    watts: f64,
    #[serde(skip_serializing_if = "Option::is_none")]
    fill: Option<&'static str>,
    #[serde(skip_serializing_if = "Option::is_none")]
    lumens: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    cold_ohms: Option<f64>,
    #[serde(skip_serializing_if = "Vec::is_empty")]
    points: Vec<OnePoint>,
    #[serde(skip_serializing_if = "Option::is_none")]
    rated_kelvin: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    gas_share: Option<f64>,
}

#[derive(Serialize)]
struct OnePoint {
    volts: f64,
    amps: f64,
}

#[derive(Serialize)]
struct Healthy {
    outcome: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    period_seconds: Option<f64>,
    #[serde(flatten)]
    values: Option<Values>,
    #[serde(skip_serializing_if = "Option::is_none")]
    low: Option<Values>,
    #[serde(skip_serializing_if = "Option::is_none")]
    high: Option<Values>,
}

#[derive(Serialize)]
struct Values {
    amps: f64,
    bank_volts: f64,
    load_volts: f64,
}

#[derive(Serialize)]
struct OneGoOn {
    sign: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    least: Option<OneLevel>,
    #[serde(skip_serializing_if = "Option::is_none")]
    most: Option<OneLevel>,
}

#[derive(Serialize)]
struct OneStop {
    from: OneLevel,
    fault: &'static str,
    apart: bool,
}

#[derive(Serialize)]
struct OneLevel {
    bank_volts: f64,
    load_volts: f64,
    amps: f64,
    glow: &'static str,
}

#[derive(Serialize)]
struct FullMains {
    supply_volts: f64,
    rated_amps: f64,
    last_short_amps: f64,
    decision: &'static str,
}

#[derive(Serialize)]
struct OneMissing {
    volts: f64,
    watts: f64,
    gain: &'static str,
    #[serde(skip_serializing_if = "Option::is_none")]
    share: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    rungs: Option<usize>,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<LadderAnswer, Refusal> {
    let (supply, stock, plate) = (fields.need("supply")?, fields.need("stock")?, fields.need("plate")?);
    let limits = fields.maybe("limits");
    fields.done()?;
    let supply = parts::supply(&supply)?;
    let stock = read_stock(&stock)?;
    let mut plate_fields = plate.fields()?;
    let plate = parts::plate(&mut plate_fields)?;
    plate_fields.done()?;
    let limits = limits.map_or_else(|| Ok(Limits::default()), |node| read_limits(&node))?;
    let ladder = ladder::plan(&supply, &stock, &plate, &limits).map_err(|error| refusal(&error))?;
    written(&ladder)
}

fn read_stock(node: &Node<'_>) -> Result<Stock, Refusal> {
    let mut stock = Stock::default();
    for item in node.list()? {
        let mut fields = item.fields()?;
        let lamp = fields.need("lamp")?;
        let count = fields.number("count")?;
        fields.done()?;
        stock.add(parts::lamp(&lamp)?, count).map_err(|error| match error.field() {
            Field::Stock => node.refuse(error.to_string()),
            _ => Refusal::inside(item.path(), &error),
        })?;
    }
    Ok(stock)
}

fn read_limits(node: &Node<'_>) -> Result<Limits, Refusal> {
    let mut fields = node.fields()?;
    let usual = LimitsSpec::default();
    let mut number = |name, usual| fields.maybe_number(name).map(|given| given.unwrap_or(usual));
    let spec = LimitsSpec {
        first_share: number("first_share", usual.first_share)?,
        first_least_watts: number("first_least_watts", usual.first_least_watts)?,
        first_most_watts: number("first_most_watts", usual.first_most_watts)?,
        growth: number("growth", usual.growth)?,
        supply_rise: number("supply_rise", usual.supply_rise)?,
        lamp_overvoltage: number("lamp_overvoltage", usual.lamp_overvoltage)?,
        holder_watts: number("holder_watts", usual.holder_watts)?,
        close_share: number("close_share", usual.close_share)?,
        least_share: number("least_share", usual.least_share)?,
    };
    fields.done()?;
    Limits::new(spec).map_err(|error| Refusal::inside(node.path(), &error))
}

fn written(ladder: &Ladder) -> Result<LadderAnswer, Refusal> {
    let full = ladder.full_mains;
    Ok(LadderAnswer {
        rungs: ladder.rungs.iter().map(one_rung).collect::<Result<_, _>>()?,
        full_mains: FullMains {
            supply_volts: full.supply_volts,
            rated_amps: full.rated_amps,
            last_short_amps: full.last_short_amps,
            decision: "the person's",
        },
        falls_short: ladder.falls_short,
        missing: ladder.missing.map(|missing| one_missing(&missing)),
    })
}

fn one_rung(rung: &Rung) -> Result<OneRung, Refusal> {
    let stop = rung.signs.stop.map(|stop| OneStop {
        from: one_level(&stop.from),
        fault: stop.fault.name(),
        apart: stop.apart,
    });
    Ok(OneRung {
        bank: rung.bank.groups().iter().map(|group| group.iter().map(one_lamp).collect()).collect(),
        short_amps: rung.short_amps,
        reason: rung.reason.name(),
        healthy: healthy(rung)?,
        go_on: go_on(&rung.signs.go_on)?,
        stop,
        looks_healthy: rung.signs.hidden.iter().map(|fault| fault.name()).collect(),
    })
}

fn one_lamp(lamp: &Lamp) -> OneLamp {
    let LampSpec { volts, watts, fill, lumens, cold_ohms, ref points, rated_kelvin, gas_share } =
        *lamp.spec();
    OneLamp {
        volts,
        watts,
        fill: fill.map(lampladder_core::lamp::Fill::name),
        lumens,
        cold_ohms,
        points: points.iter().map(|point| OnePoint { volts: point.volts, amps: point.amps }).collect(),
        rated_kelvin,
        gas_share,
    }
}

fn healthy(rung: &Rung) -> Result<Healthy, Refusal> {
    let prospect = &rung.healthy;
    let (outcome, _) = parts::outcome(prospect.outcome, || None)?;
    let period_seconds = match rung.signs.go_on {
        GoOn::Pulses { period_seconds } => period_seconds,
        _ => None,
    };
    let values = |of: fn(&Band) -> f64| {
        prospect.shown.as_ref().map(|Shown { amps, bank_volts, load_volts, .. }| Values {
            amps: of(amps),
            bank_volts: of(bank_volts),
            load_volts: of(load_volts),
        })
    };
    Ok(Healthy {
        outcome,
        period_seconds,
        values: values(|band| band.value),
        low: values(|band| band.low),
        high: values(|band| band.high),
    })
}

fn go_on(sign: &GoOn) -> Result<OneGoOn, Refusal> {
    match sign {
        GoOn::Between { least, most } => {
            Ok(OneGoOn { sign: "between", least: Some(one_level(least)), most: Some(one_level(most)) })
        }
        GoOn::Pulses { .. } => Ok(OneGoOn { sign: "pulses", least: None, most: None }),
        GoOn::StaysOff => Ok(OneGoOn { sign: "stays-off", least: None, most: None }),
        other => Err(Refusal::whole_line(format!("the sign {other:?} has no name here yet"))),
    }
}

fn one_level(level: &Level) -> OneLevel {
    let Level { bank_volts, load_volts, amps, glow } = *level;
    OneLevel { bank_volts, load_volts, amps, glow: glow.name() }
}

fn one_missing(missing: &Missing) -> OneMissing {
    let (gain, share, rungs) = match missing.gain {
        Gain::Possible { share } => ("possible", Some(share), None),
        Gain::Closer { share } => ("closer", Some(share), None),
        Gain::Stronger { .. } => ("stronger", None, None),
        Gain::Fewer { rungs } => ("fewer-rungs", None, Some(rungs)),
        _ => ("other", None, None),
    };
    OneMissing { volts: missing.rating.volts, watts: missing.rating.watts, gain, share, rungs }
}

/// What is in the way, the field that it belongs to, and the way forward.
fn refusal(error: &LadderError) -> Refusal {
    let path = match error {
        LadderError::SupplyTooHigh { .. } | LadderError::NeverStarts { .. } => String::from("supply.volts"),
        LadderError::Circuit(SteadyError::Input(InputError::NeedsAlternating { .. })) => {
            String::from("supply.hertz")
        }
        LadderError::Circuit(SteadyError::Input(input)) => format!("plate.{}", input.field().name()),
        LadderError::BeyondAnyBank { .. } | LadderError::Unsuitable { .. } | LadderError::Circuit(_) => {
            String::from("plate")
        }
        _ => String::from("stock"),
    };
    let ways: Vec<String> = error.ways().iter().map(way).collect();
    Refusal::at(path, format!("{error}; way forward: {}", ways.join(", or ")))
}

fn way(way: &WayForward) -> String {
    match way {
        WayForward::AddLamp(rating) => format!("add a lamp of {} V {} W", rating.volts, rating.watts),
        WayForward::AddTwin(kind) => {
            format!("add a second lamp like stock[{kind}] and use the two in series")
        }
        WayForward::StrongerHolders => {
            String::from("use holders that stand more, and set limits.holder_watts")
        }
        WayForward::RaiseFirstLimit => {
            String::from("decide that the equipment stands more when shorted, and set limits.first_share")
        }
        WayForward::MatchTheVoltage => String::from("use a transformer for the voltage on the plate"),
        WayForward::CheckThePlate => String::from("check what the plate says"),
        WayForward::DisconnectItsLoad => String::from("disconnect what it drives or feeds"),
        WayForward::MeasureInstead => String::from("measure resistance and insulation instead"),
        WayForward::VariableTransformer => {
            String::from("use a variable isolating transformer with an ammeter")
        }
        WayForward::Specialist => String::from("leave it to somebody trained for it"),
        other => format!("{other:?}"),
    }
}
