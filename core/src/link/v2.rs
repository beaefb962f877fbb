//! Version 2 of the link, in letters and in digits: the set-up in fewer bytes, and parts that may follow it. The record
//! stands for ever; a new part takes a new number, anything else is a version of its own.
//!
//! Numbers are packed ([`Writer::packed`]). Supply: volts, hertz, ohms. Bank: a list of groups, each a list of lamps.
//! Lamp: one byte, its fill and which of lumens, cold ohms, rated kelvin, gas share and points are known; volts, watts,
//! what is known; or one byte for "as the lamp before". Plate: family, volts; one byte, which of watts, amperes,
//! volt-amperes and power factor are printed; these; a list of details, code and number. Parts: number, length, bytes.

use alloc::vec::Vec;

use super::LinkError;
use super::parts;
use super::record::{Reader, Writer};
use super::v1::{self, DETAILS, FAMILIES, FILLS, Groups, code_of};
use crate::hand_on::HandedOn;
use crate::lamp::{LampSpec, Point};
use crate::plate::PlateSpec;
use crate::setup::Setup;

/// In the first byte of a lamp: what is known beside volts and watts, in the order in which it follows.
const LUMENS: u8 = 0x04;
const COLD_OHMS: u8 = 0x08;
const RATED_KELVIN: u8 = 0x10;
const GAS_SHARE: u8 = 0x20;
const POINTS: u8 = 0x40;
/// The whole first byte of a lamp like the one before.
const AGAIN: u8 = 0x80;

/// What a number of a part stands for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Part {
    Stock,
    Position,
    Log,
}

/// Part and its number for ever.
const PARTS: [(Part, u8); 3] = [(Part::Stock, 1), (Part::Position, 2), (Part::Log, 3)];

/// The parts behind a set-up, each with its bytes.
pub(super) type Behind<'a> = Vec<(Part, &'a [u8])>;

/// Lamps one after the other: of many alike only the first is written out.
#[derive(Debug, Default)]
pub(super) struct Lamps(Option<LampSpec>);

impl Lamps {
    pub(super) fn write(&mut self, to: &mut Writer, spec: &LampSpec) {
        if self.0.as_ref() == Some(spec) {
            return to.byte(AGAIN);
        }
        let extras = extras(spec);
        let points = if spec.points.is_empty() { 0 } else { POINTS };
        let known = extras.iter().filter(|(_, value)| value.is_some());
        to.byte(known.fold(code_of(&FILLS, &spec.fill) | points, |head, (bit, _)| head | bit));
        to.packed(spec.volts);
        to.packed(spec.watts);
        for value in extras.iter().filter_map(|(_, value)| *value) {
            to.packed(value);
        }
        if points != 0 {
            to.length(spec.points.len());
        }
        for point in &spec.points {
            to.packed(point.volts);
            to.packed(point.amps);
        }
        self.0 = Some(spec.clone());
    }

    pub(super) fn read(&mut self, from: &mut Reader<'_>) -> Option<LampSpec> {
        let head = from.byte()?;
        if head == AGAIN {
            return self.0.clone();
        }
        if head & AGAIN != 0 {
            return from.meets_newer();
        }
        let fill = FILLS.iter().find(|(_, code)| *code == head & 3)?.0;
        let mut spec = LampSpec { volts: from.packed()?, watts: from.packed()?, fill, ..LampSpec::default() };
        let places = [&mut spec.lumens, &mut spec.cold_ohms, &mut spec.rated_kelvin, &mut spec.gas_share];
        for (bit, place) in [LUMENS, COLD_OHMS, RATED_KELVIN, GAS_SHARE].into_iter().zip(places) {
            if head & bit != 0 {
                *place = Some(from.packed()?);
            }
        }
        if head & POINTS != 0 {
            for _ in 0..from.length()? {
                spec.points.push(Point { volts: from.packed()?, amps: from.packed()? });
            }
        }
        self.0 = Some(spec.clone());
        Some(spec)
    }
}

const fn extras(spec: &LampSpec) -> [(u8, Option<f64>); 4] {
    [
        (LUMENS, spec.lumens),
        (COLD_OHMS, spec.cold_ohms),
        (RATED_KELVIN, spec.rated_kelvin),
        (GAS_SHARE, spec.gas_share),
    ]
}

pub(super) fn encode(handed: &HandedOn) -> Vec<u8> {
    let mut to = Writer::default();
    write_setup(&mut to, &handed.setup);
    let stock = handed.stock.as_ref().map(parts::stock);
    let position = handed.position.as_ref().map(parts::position);
    let log = (!handed.log.is_empty()).then(|| parts::log(&handed.log, &handed.setup));
    for (part, bytes) in [(Part::Stock, stock), (Part::Position, position), (Part::Log, log)] {
        if let Some(bytes) = bytes {
            to.byte(code_of(&PARTS, &part));
            to.length(bytes.len());
            to.bytes(&bytes);
        }
    }
    to.finish()
}

pub(super) fn write_setup(to: &mut Writer, setup: &Setup) {
    for number in [setup.supply.volts(), setup.supply.hertz(), setup.supply.ohms()] {
        to.packed(number);
    }
    write_bank(to, setup);
    write_plate(to, setup.plate.spec());
}

pub(super) fn write_bank(to: &mut Writer, setup: &Setup) {
    let mut lamps = Lamps::default();
    to.length(setup.bank.groups().len());
    for group in setup.bank.groups() {
        to.length(group.len());
        for lamp in group {
            lamps.write(to, lamp.spec());
        }
    }
}

fn write_plate(to: &mut Writer, spec: &PlateSpec) {
    to.byte(code_of(&FAMILIES, &spec.family));
    to.packed(spec.volts);
    to.optionals(&[spec.watts, spec.amps, spec.volt_amps, spec.power_factor]);
    to.length(spec.details.len());
    for (detail, value) in &spec.details {
        to.byte(code_of(&DETAILS, detail));
        to.packed(*value);
    }
}

/// The set-up, and the parts that follow it.
pub(super) fn decode(bytes: &[u8]) -> Result<(Setup, Behind<'_>), LinkError> {
    let mut from = Reader::new(bytes);
    let Some((setup, parts)) = read(&mut from) else { return Err(from.error()) };
    Ok((v1::build(setup)?, parts))
}

fn read<'a>(from: &mut Reader<'a>) -> Option<(v1::Parts, Behind<'a>)> {
    let setup = read_setup(from)?;
    let mut parts = Behind::new();
    while !from.is_done() {
        let part = from.one_of(&PARTS)?;
        let length = from.length()?;
        let bytes = from.bytes(length)?;
        if parts.iter().any(|(other, _)| *other == part) {
            return None;
        }
        parts.push((part, bytes));
    }
    Some((setup, parts))
}

pub(super) fn read_setup(from: &mut Reader<'_>) -> Option<v1::Parts> {
    let supply = [from.packed()?, from.packed()?, from.packed()?];
    let groups = read_bank(from)?;
    let mut plate = PlateSpec::new(from.one_of(&FAMILIES)?, from.packed()?);
    from.optionals([&mut plate.watts, &mut plate.amps, &mut plate.volt_amps, &mut plate.power_factor])?;
    for _ in 0..from.length()? {
        plate.details.push((from.one_of(&DETAILS)?, from.packed()?));
    }
    Some((supply, groups, plate))
}

pub(super) fn read_bank(from: &mut Reader<'_>) -> Option<Groups> {
    let mut lamps = Lamps::default();
    v1::read_groups(from, &mut |from| lamps.read(from))
}
