//! The parts that requests share: supply, lamp, bank, load.

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::error::Field;
use lampladder_core::family::Family;
use lampladder_core::hunt::Pulse;
use lampladder_core::lamp::{Fill, Lamp, LampSpec, Point};
use lampladder_core::load::{Draw, Impedance, Load, Rectifier, RectifierSpec};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::steady::Outcome;
use lampladder_core::supply::Supply;

use crate::fields::{Fields, Node, Refusal};

/// Lamps that are no filament of tungsten, by the names that people give them, and why they are refused.
const REFUSED: [(&[&str], &str); 3] = [
    (
        &["led"],
        "an LED lamp does not limit the current: its electronics take what they want or nothing; use an incandescent lamp",
    ),
    (
        &["cfl", "compact fluorescent", "compact-fluorescent", "fluorescent"],
        "a compact fluorescent lamp does not limit the current: its electronics take what they want or nothing; use an incandescent lamp",
    ),
    (
        &["carbon", "carbon filament", "carbon-filament"],
        "a carbon filament loses resistance as it heats, so it does not hold the current back; use a tungsten lamp",
    ),
];

pub(crate) fn supply(node: &Node<'_>) -> Result<Supply, Refusal> {
    let mut fields = node.fields()?;
    let volts = fields.number("volts")?;
    let hertz = fields.number("hertz")?;
    let ohms = fields.maybe_number("ohms")?.unwrap_or(0.0);
    fields.done()?;
    Supply::new(volts, hertz, ohms).map_err(|error| Refusal::inside(node.path(), &error))
}

pub(crate) fn lamp(node: &Node<'_>) -> Result<Lamp, Refusal> {
    let mut fields = node.fields()?;
    let spec = LampSpec {
        // The kind first: whoever has an LED lamp learns so, not that its watts are too few.
        fill: fields.maybe("fill").map(|node| fill(&node)).transpose()?,
        volts: fields.number("volts")?,
        watts: fields.number("watts")?,
        lumens: fields.maybe_number("lumens")?,
        cold_ohms: fields.maybe_number("cold_ohms")?,
        points: fields.maybe("points").map(|node| points(&node)).transpose()?.unwrap_or_default(),
        rated_kelvin: fields.maybe_number("rated_kelvin")?,
        gas_share: fields.maybe_number("gas_share")?,
    };
    fields.done()?;
    refusable_lamp(spec, node.path())
}

/// The lamp, or which of its numbers is refused: the core names the property, this the path.
fn refusable_lamp(spec: LampSpec, path: &str) -> Result<Lamp, Refusal> {
    let without_points = LampSpec { points: Vec::new(), ..spec.clone() };
    let points = spec.points.clone();
    Lamp::from_spec(spec).map_err(|error| {
        let alone =
            |point: &Point| Lamp::from_spec(LampSpec { points: vec![*point], ..without_points.clone() });
        if Lamp::from_spec(without_points.clone()).is_ok()
            && let Some(index) = points.iter().position(|point| alone(point).is_err())
        {
            return Refusal::inside(&format!("{path}.points[{index}]"), &error);
        }
        Refusal::inside(path, &error)
    })
}

fn fill(node: &Node<'_>) -> Result<Fill, Refusal> {
    let name = node.text()?;
    if let Some(fill) = Fill::ALL.into_iter().find(|fill| fill.name() == name) {
        return Ok(fill);
    }
    let lower = name.to_lowercase();
    match REFUSED.iter().find(|(names, _)| names.contains(&lower.as_str())) {
        Some((_, reason)) => Err(node.refuse(*reason)),
        None => Err(node.refuse(format!("fill must be one of {}", Fill::ALL.map(Fill::name).join(", ")))),
    }
}

fn points(node: &Node<'_>) -> Result<Vec<Point>, Refusal> {
    let point = |node: Node<'_>| {
        let mut fields = node.fields()?;
        let point = Point { volts: fields.number("volts")?, amps: fields.number("amps")? };
        fields.done()?;
        Ok(point)
    };
    node.list()?.into_iter().map(point).collect()
}

pub(crate) fn bank(node: &Node<'_>) -> Result<Bank, Refusal> {
    let groups: Vec<Vec<Node<'_>>> = node.list()?.iter().map(Node::list).collect::<Result<_, _>>()?;
    let count = groups.iter().map(Vec::len).sum::<usize>();
    if count > Bank::MOST_LAMPS {
        return Err(node.refuse(format!("a bank has at most {} lamps, not {count}", Bank::MOST_LAMPS)));
    }
    if let Some(empty) = groups.iter().position(Vec::is_empty) {
        return Err(Refusal::at(format!("{}[{empty}]", node.path()), "a group holds at least one lamp"));
    }
    let groups = groups.iter().map(|group| group.iter().map(lamp).collect()).collect::<Result<_, _>>()?;
    Bank::new(groups).map_err(|error| node.refuse(error.to_string()))
}

pub(crate) fn load(node: &Node<'_>) -> Result<Load, Refusal> {
    let mut fields = node.fields()?;
    let kind = fields.need("kind")?;
    let load = match kind.text()? {
        "short" => Load::Short,
        "open" => Load::Open,
        "resistor" => {
            let ohms = fields.number("ohms")?;
            Load::Impedance(Impedance::new(ohms, 0.0).map_err(|error| Refusal::inside(node.path(), &error))?)
        }
        "impedance" => {
            let (ohms, reactance) = (fields.number("ohms")?, fields.number("reactance_ohms")?);
            let impedance = Impedance::new(ohms, reactance);
            Load::Impedance(impedance.map_err(|error| Refusal::inside(node.path(), &error))?)
        }
        "rectifier" => Load::Rectifier(rectifier(&mut fields)?),
        "lamp" => Load::Lamp(Box::new(lamp(&fields.need("lamp")?)?)),
        "plate" => plate_load(&mut fields)?,
        _ => {
            let known = "short, open, resistor, impedance, rectifier, lamp, plate";
            return Err(kind.refuse(format!("kind must be one of {known}")));
        }
    };
    fields.done()?;
    Ok(load)
}

fn rectifier(fields: &mut Fields<'_>) -> Result<Rectifier, Refusal> {
    let draw = fields.need("draw")?;
    let spec = RectifierSpec {
        farads: fields.number("farads")?,
        series_ohms: fields.number("series_ohms")?,
        diode_volts: fields.number("diode_volts")?,
        draw: read_draw(&draw)?,
        shunt_ohms: None,
    };
    Rectifier::new(spec).map_err(|error| match error.field() {
        Field::Farads | Field::SeriesOhms | Field::DiodeVolts => Refusal::inside(fields.path(), &error),
        _ => Refusal::inside(draw.path(), &error),
    })
}

fn read_draw(node: &Node<'_>) -> Result<Draw, Refusal> {
    let mut fields = node.fields()?;
    let draw =
        match (fields.maybe_number("ohms")?, fields.maybe_number("amps")?, fields.maybe_number("watts")?) {
            (Some(ohms), None, None) => Draw::Ohms(ohms),
            (None, Some(amps), None) => Draw::Amps(amps),
            (None, None, Some(watts)) => Draw::Watts {
                watts,
                start_volts: fields.number("start_volts")?,
                stop_volts: fields.number("stop_volts")?,
                restart_seconds: fields.maybe_number("restart_seconds")?.unwrap_or(0.0),
            },
            _ => return Err(node.refuse("must have exactly one of ohms, amps, watts")),
        };
    fields.done()?;
    Ok(draw)
}

/// The load of a plate in a condition.
fn plate_load(fields: &mut Fields<'_>) -> Result<Load, Refusal> {
    let condition = match fields.maybe("condition") {
        Some(node) => one_of(&node, &Condition::ALL, Condition::name)?,
        None => Condition::Healthy,
    };
    let path = fields.path().to_owned();
    plate(fields)?.load(condition, 1.0).map_err(|error| Refusal::inside(&path, &error))
}

/// What is printed on the plate, from the fields of the object that holds it.
pub(crate) fn plate(fields: &mut Fields<'_>) -> Result<Plate, Refusal> {
    let family = fields.need("family")?;
    let family = one_of(&family, &Family::ALL, Family::name)?;
    let mut spec = PlateSpec::new(family, fields.number("volts")?);
    spec.watts = fields.maybe_number("watts")?;
    spec.amps = fields.maybe_number("amps")?;
    spec.volt_amps = fields.maybe_number("volt_amps")?;
    spec.power_factor = fields.maybe_number("power_factor")?;
    for default in family.details() {
        if let Some(value) = fields.maybe_number(default.detail.name())? {
            spec.details.push((default.detail, value));
        }
    }
    Plate::from_spec(spec).map_err(|error| Refusal::inside(fields.path(), &error))
}

/// The name of an outcome, and its period where it has one that `pulse` finds.
pub(crate) fn outcome(
    outcome: Outcome,
    pulse: impl FnOnce() -> Option<Pulse>,
) -> Result<(&'static str, Option<f64>), Refusal> {
    match outcome {
        Outcome::Settles => Ok(("settles", None)),
        Outcome::Hunts => Ok(("hunts", pulse().map(|pulse| pulse.period_seconds))),
        Outcome::DoesNotStart => Ok(("does-not-start", None)),
        other => Err(Refusal::whole_line(format!("the outcome {other:?} has no name here yet"))),
    }
}

/// The item of `all` that has the name at `node`.
pub(crate) fn one_of<T: Copy>(
    node: &Node<'_>,
    all: &[T],
    name: impl Fn(T) -> &'static str,
) -> Result<T, Refusal> {
    let wanted = node.text()?;
    all.iter().copied().find(|&item| name(item) == wanted).ok_or_else(|| {
        let known: Vec<&str> = all.iter().map(|&item| name(item)).collect();
        node.refuse(format!("must be one of {}", known.join(", ")))
    })
}
