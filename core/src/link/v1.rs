//! Version 1 of the link: the record as it stands for ever. Do not change the order or types of its fields; write
//! a version 2 beside it.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use super::LinkError;
use super::decimal::Decimal;
use crate::bank::Bank;
use crate::detail::Detail;
use crate::family::Family;
use crate::lamp::{Fill, Lamp, LampSpec, Point};
use crate::plate::{Plate, PlateSpec};
use crate::setup::Setup;
use crate::stock::{Owned, Stock};
use crate::supply::Supply;

#[derive(Serialize, Deserialize)]
struct Record {
    supply: [Decimal; 3],
    bank: Vec<Vec<LampRecord>>,
    plate: PlateRecord,
}

#[derive(Serialize, Deserialize)]
struct PlateRecord {
    family: u8,
    volts: Decimal,
    watts: Option<Decimal>,
    amps: Option<Decimal>,
    volt_amps: Option<Decimal>,
    power_factor: Option<Decimal>,
    details: Vec<(u8, Decimal)>,
}

#[derive(Serialize, Deserialize)]
struct LampRecord {
    volts: Decimal,
    watts: Decimal,
    /// Fill code, 0 where not given, and the measured or printed extras, most lamps having none.
    fill: u8,
    extras: Option<Extras>,
}

#[derive(Serialize, Deserialize)]
struct Extras {
    lumens: Option<Decimal>,
    cold_ohms: Option<Decimal>,
    rated_kelvin: Option<Decimal>,
    gas_share: Option<Decimal>,
    points: Vec<(Decimal, Decimal)>,
}

/// Fill and its code for ever; 0 is "not given".
const FILLS: [(Fill, u8); 3] = [(Fill::Vacuum, 1), (Fill::Gas, 2), (Fill::Halogen, 3)];

/// Family and its code for ever. New families take new numbers.
const FAMILIES: [(Family, u8); 12] = [
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
const DETAILS: [(Detail, u8); 18] = [
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

fn code_of<T: PartialEq>(codes: &[(T, u8)], wanted: &T) -> u8 {
    codes.iter().find(|(known, _)| known == wanted).map_or(0, |&(_, code)| code)
}

fn known<T: Copy>(codes: &[(T, u8)], code: u8) -> Option<T> {
    codes.iter().find(|&&(_, known)| known == code).map(|&(value, _)| value)
}

pub(super) fn encode(setup: &Setup) -> Vec<u8> {
    let Setup { supply, bank, plate } = setup;
    let record = Record {
        supply: [supply.volts(), supply.hertz(), supply.ohms()].map(Into::into),
        bank: bank.groups().iter().map(|group| group.iter().map(lamp_record).collect()).collect(),
        plate: plate_record(plate.spec()),
    };
    // Writing into a growing vector cannot fail; an empty record would be refused by its check byte.
    postcard::to_allocvec(&record).unwrap_or_default()
}

/// The kinds of a stock, each with its count.
pub(super) fn encode_stock(stock: &Stock) -> Vec<u8> {
    let owned = |owned: &Owned| (lamp_record(owned.lamp()), owned.count());
    let record: Vec<(LampRecord, u8)> = stock.kinds().iter().map(owned).collect();
    // As in `encode`.
    postcard::to_allocvec(&record).unwrap_or_default()
}

fn lamp_record(lamp: &Lamp) -> LampRecord {
    let LampSpec { volts, watts, fill, lumens, cold_ohms, ref points, rated_kelvin, gas_share } =
        *lamp.spec();
    let plain = lumens.is_none()
        && cold_ohms.is_none()
        && points.is_empty()
        && rated_kelvin.is_none()
        && gas_share.is_none();
    LampRecord {
        volts: volts.into(),
        watts: watts.into(),
        fill: fill.map_or(0, |fill| code_of(&FILLS, &fill)),
        extras: (!plain).then(|| Extras {
            lumens: lumens.map(Into::into),
            cold_ohms: cold_ohms.map(Into::into),
            rated_kelvin: rated_kelvin.map(Into::into),
            gas_share: gas_share.map(Into::into),
            points: points.iter().map(|point| (point.volts.into(), point.amps.into())).collect(),
        }),
    }
}

fn plate_record(spec: &PlateSpec) -> PlateRecord {
    PlateRecord {
        family: code_of(&FAMILIES, &spec.family),
        volts: spec.volts.into(),
        watts: spec.watts.map(Into::into),
        amps: spec.amps.map(Into::into),
        volt_amps: spec.volt_amps.map(Into::into),
        power_factor: spec.power_factor.map(Into::into),
        details: spec
            .details
            .iter()
            .map(|&(detail, value)| (code_of(&DETAILS, &detail), value.into()))
            .collect(),
    }
}

pub(super) fn decode(bytes: &[u8]) -> Result<Setup, LinkError> {
    let (record, rest): (Record, &[u8]) = postcard::take_from_bytes(bytes).map_err(|_| LinkError::Damaged)?;
    if !rest.is_empty() {
        return Err(LinkError::Damaged);
    }
    let [volts, hertz, ohms] = record.supply;
    let supply = Supply::new(number(volts)?, number(hertz)?, number(ohms)?).map_err(LinkError::Refused)?;
    // Refuse a crowded bank before building its lamps.
    if record.bank.iter().map(Vec::len).sum::<usize>() > Bank::MOST_LAMPS {
        return Err(LinkError::Damaged);
    }
    let mut groups = Vec::new();
    for group in record.bank {
        groups.push(group.into_iter().map(lamp_of).collect::<Result<Vec<_>, _>>()?);
    }
    let bank = Bank::new(groups).map_err(LinkError::Refused)?;
    let plate = record.plate;
    let family = known(&FAMILIES, plate.family).ok_or(LinkError::Newer)?;
    let mut spec = PlateSpec::new(family, number(plate.volts)?);
    spec.watts = optional(plate.watts)?;
    spec.amps = optional(plate.amps)?;
    spec.volt_amps = optional(plate.volt_amps)?;
    spec.power_factor = optional(plate.power_factor)?;
    for (code, value) in plate.details {
        spec.details.push((known(&DETAILS, code).ok_or(LinkError::Newer)?, number(value)?));
    }
    let plate = Plate::from_spec(spec).map_err(LinkError::Refused)?;
    Ok(Setup { supply, bank, plate })
}

pub(super) fn decode_stock(bytes: &[u8]) -> Result<Stock, LinkError> {
    let (record, rest): (Vec<(LampRecord, u8)>, &[u8]) =
        postcard::take_from_bytes(bytes).map_err(|_| LinkError::Damaged)?;
    // Refuse a crowd before building its lamps.
    if !rest.is_empty() || record.len() > Stock::MOST_KINDS {
        return Err(LinkError::Damaged);
    }
    let mut stock = Stock::default();
    for (lamp, count) in record {
        stock.add(lamp_of(lamp)?, f64::from(count)).map_err(LinkError::Refused)?;
    }
    Ok(stock)
}

fn lamp_of(lamp: LampRecord) -> Result<Lamp, LinkError> {
    let fill = match lamp.fill {
        0 => None,
        code => Some(known(&FILLS, code).ok_or(LinkError::Newer)?),
    };
    let mut spec =
        LampSpec { volts: number(lamp.volts)?, watts: number(lamp.watts)?, fill, ..LampSpec::default() };
    if let Some(extras) = lamp.extras {
        spec.lumens = optional(extras.lumens)?;
        spec.cold_ohms = optional(extras.cold_ohms)?;
        spec.rated_kelvin = optional(extras.rated_kelvin)?;
        spec.gas_share = optional(extras.gas_share)?;
        for (volts, amps) in extras.points {
            spec.points.push(Point { volts: number(volts)?, amps: number(amps)? });
        }
    }
    Lamp::from_spec(spec).map_err(LinkError::Refused)
}

fn number(value: Decimal) -> Result<f64, LinkError> {
    value.to_f64().ok_or(LinkError::Damaged)
}

fn optional(value: Option<Decimal>) -> Result<Option<f64>, LinkError> {
    value.map(number).transpose()
}
