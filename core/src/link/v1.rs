//! Version 1 of the link: the record as it stands for ever. Do not change the order or types of its fields; version 2
//! stands beside it.
//!
//! Supply: volts, hertz, ohms. Bank: a list of groups, each a list of lamps. Plate: family, volts; watts, amperes,
//! volt-amperes and power factor, each optional; a list of details, code and number. Lamp: volts, watts, fill, and, if it
//! has any of them, extras: lumens, cold ohms, rated kelvin, gas share, each optional, and a list of points.

use alloc::vec::Vec;

use super::LinkError;
use super::record::{Reader, Writer};
use crate::bank::Bank;
use crate::detail::Detail;
use crate::family::Family;
use crate::lamp::{Fill, Lamp, LampSpec, Point};
use crate::plate::{Plate, PlateSpec};
use crate::setup::Setup;
use crate::stock::Stock;
use crate::supply::Supply;

/// Fill, if it was given, and its code for ever.
pub(super) const FILLS: [(Option<Fill>, u8); 4] =
    [(None, 0), (Some(Fill::Vacuum), 1), (Some(Fill::Gas), 2), (Some(Fill::Halogen), 3)];

/// Family and its code for ever. New families take new numbers.
pub(super) const FAMILIES: [(Family, u8); 12] = [
    (Family::Heater, 1),
    (Family::TransformerSupply, 2),
    (Family::Plain, 3),
    (Family::ValveTransformer, 4),
    (Family::ValveSeries, 5),
    (Family::SwitchMode, 6),
    (Family::SwitchModeCorrected, 7),
    (Family::CrtSet, 8),
    (Family::UniversalMotor, 9),
    (Family::InductionMotor, 10),
    (Family::Lamp, 11),
    (Family::Measured, 12),
];

/// Detail and its code for ever. New details take new numbers.
pub(super) const DETAILS: [(Detail, u8); 18] = [
    (Detail::MagnetisingShare, 1),
    (Detail::CoreShare, 2),
    (Detail::WindingShare, 3),
    (Detail::ReservoirSeconds, 4),
    (Detail::HeaterShare, 5),
    (Detail::NoLoadShare, 6),
    (Detail::StallMultiple, 7),
    (Detail::IdleShare, 8),
    (Detail::StartVolts, 9),
    (Detail::StopVolts, 10),
    (Detail::MicrofaradsPerWatt, 11),
    (Detail::SeriesOhms, 12),
    (Detail::DegaussColdOhms, 13),
    (Detail::DegaussWarmAmps, 14),
    (Detail::DegaussTripWatts, 15),
    (Detail::BreakawayShare, 16),
    (Detail::MeasuredOhms, 17),
    (Detail::RestartSeconds, 18),
];

pub(super) fn code_of<T: PartialEq>(codes: &[(T, u8)], wanted: &T) -> u8 {
    codes.iter().find(|(known, _)| known == wanted).map_or(0, |&(_, code)| code)
}

pub(super) fn encode(setup: &Setup) -> Vec<u8> {
    let Setup { supply, bank, plate } = setup;
    let mut to = Writer::default();
    for number in [supply.volts(), supply.hertz(), supply.ohms()] {
        to.number(number);
    }
    to.length(bank.groups().len());
    for group in bank.groups() {
        to.length(group.len());
        for lamp in group {
            write_lamp(&mut to, lamp.spec());
        }
    }
    write_plate(&mut to, plate.spec());
    to.finish()
}

/// The kinds of a stock, each with its count.
pub(super) fn encode_stock(stock: &Stock) -> Vec<u8> {
    let mut to = Writer::default();
    to.length(stock.kinds().len());
    for owned in stock.kinds() {
        write_lamp(&mut to, owned.lamp().spec());
        to.byte(owned.count());
    }
    to.finish()
}

fn write_lamp(to: &mut Writer, spec: &LampSpec) {
    to.number(spec.volts);
    to.number(spec.watts);
    to.byte(code_of(&FILLS, &spec.fill));
    let extras = [spec.lumens, spec.cold_ohms, spec.rated_kelvin, spec.gas_share];
    let plain = extras.iter().all(Option::is_none) && spec.points.is_empty();
    to.byte((!plain).into());
    if plain {
        return;
    }
    for extra in extras {
        to.optional(extra);
    }
    to.length(spec.points.len());
    for point in &spec.points {
        to.number(point.volts);
        to.number(point.amps);
    }
}

fn write_plate(to: &mut Writer, spec: &PlateSpec) {
    to.byte(code_of(&FAMILIES, &spec.family));
    to.number(spec.volts);
    for printed in [spec.watts, spec.amps, spec.volt_amps, spec.power_factor] {
        to.optional(printed);
    }
    to.length(spec.details.len());
    for (detail, value) in &spec.details {
        to.byte(code_of(&DETAILS, detail));
        to.number(*value);
    }
}

pub(super) fn decode(bytes: &[u8]) -> Result<Setup, LinkError> {
    let mut from = Reader::new(bytes);
    let Some(parts) = read(&mut from) else { return Err(from.error()) };
    build(parts)
}

/// The set-up of what was read. All is read before anything is built: a record that is no record is damaged, whatever its
/// numbers are.
pub(super) fn build(([volts, hertz, ohms], groups, plate): Parts) -> Result<Setup, LinkError> {
    let supply = Supply::new(volts, hertz, ohms).map_err(LinkError::Refused)?;
    let bank = build_bank(groups)?;
    let plate = Plate::from_spec(plate).map_err(LinkError::Refused)?;
    Ok(Setup { supply, bank, plate })
}

pub(super) fn build_bank(groups: Groups) -> Result<Bank, LinkError> {
    let mut built = Vec::new();
    for group in groups {
        built.push(
            group.into_iter().map(Lamp::from_spec).collect::<Result<_, _>>().map_err(LinkError::Refused)?,
        );
    }
    Bank::new(built).map_err(LinkError::Refused)
}

/// The lamps of a bank that was read.
pub(super) type Groups = Vec<Vec<LampSpec>>;
/// Supply, bank and plate that were read.
pub(super) type Parts = ([f64; 3], Groups, PlateSpec);

fn read(from: &mut Reader<'_>) -> Option<Parts> {
    let supply = [from.number()?, from.number()?, from.number()?];
    let groups = read_groups(from, &mut read_lamp)?;
    let plate = read_plate(from)?;
    from.finish()?;
    Some((supply, groups, plate))
}

pub(super) fn read_groups(
    from: &mut Reader<'_>,
    lamp: &mut dyn FnMut(&mut Reader<'_>) -> Option<LampSpec>,
) -> Option<Groups> {
    let mut groups = Vec::new();
    let mut lamps = 0;
    for _ in 0..from.length()? {
        let mut group = Vec::new();
        for _ in 0..from.length()? {
            group.push(lamp(from)?);
            lamps += 1;
            // Refuse a crowd before it takes room.
            if lamps > Bank::MOST_LAMPS {
                return None;
            }
        }
        groups.push(group);
    }
    Some(groups)
}

pub(super) fn decode_stock(bytes: &[u8]) -> Result<Stock, LinkError> {
    let mut from = Reader::new(bytes);
    let Some(kinds) = read_stock(&mut from) else { return Err(from.error()) };
    build_stock(kinds)
}

pub(super) fn build_stock(kinds: Kinds) -> Result<Stock, LinkError> {
    let mut stock = Stock::default();
    for (spec, count) in kinds {
        let lamp = Lamp::from_spec(spec).map_err(LinkError::Refused)?;
        stock.add(lamp, f64::from(count)).map_err(LinkError::Refused)?;
    }
    Ok(stock)
}

/// The lamps of a stock that was read, each with its count.
pub(super) type Kinds = Vec<(LampSpec, u8)>;

fn read_stock(from: &mut Reader<'_>) -> Option<Kinds> {
    let mut kinds = Vec::new();
    for _ in 0..from.length()? {
        kinds.push((read_lamp(from)?, from.byte()?));
    }
    from.finish()?;
    // Refuse a crowd before building its lamps.
    (kinds.len() <= Stock::MOST_KINDS).then_some(kinds)
}

fn read_lamp(from: &mut Reader<'_>) -> Option<LampSpec> {
    let mut spec = LampSpec { volts: from.number()?, watts: from.number()?, ..LampSpec::default() };
    spec.fill = from.one_of(&FILLS)?;
    if from.some()? {
        for place in [&mut spec.lumens, &mut spec.cold_ohms, &mut spec.rated_kelvin, &mut spec.gas_share] {
            from.optional(place)?;
        }
        for _ in 0..from.length()? {
            spec.points.push(Point { volts: from.number()?, amps: from.number()? });
        }
    }
    Some(spec)
}

fn read_plate(from: &mut Reader<'_>) -> Option<PlateSpec> {
    let mut spec = PlateSpec::new(from.one_of(&FAMILIES)?, from.number()?);
    for place in [&mut spec.watts, &mut spec.amps, &mut spec.volt_amps, &mut spec.power_factor] {
        from.optional(place)?;
    }
    for _ in 0..from.length()? {
        spec.details.push((from.one_of(&DETAILS)?, from.number()?));
    }
    Some(spec)
}
