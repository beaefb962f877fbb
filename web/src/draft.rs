//! What a person has typed, letter for letter.

use lampladder_core::detail::Detail;
use lampladder_core::error::{Field, InputError};
use lampladder_core::family::Family;
use lampladder_core::lamp::{Fill, Lamp};
use lampladder_core::quantity::QuantityError;
use lampladder_core::readings::Kind;
use lampladder_core::setup::Setup;

use crate::entry::Entry;
use crate::format::Numerals;

/// Where a lamp stands in the bank.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Place {
    /// Which group of the chain.
    pub group: usize,
    /// Which lamp of the group.
    pub lamp: usize,
}

impl Place {
    /// The lamp that is typed for the drawer, which stands in no bank.
    pub const SPARE: Self = Self { group: usize::MAX, lamp: 0 };
}

/// A typed property of a lamp.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum LampPart {
    /// Printed volts.
    Volts,
    /// Printed watts.
    Watts,
    /// Printed lumens.
    Lumens,
    /// Measured cold resistance.
    ColdOhms,
    /// Volts of a measured point.
    PointVolts(usize),
    /// Amperes of a measured point.
    PointAmps(usize),
}

/// A number on a meter's sheet.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum MeterPart {
    /// Accuracy, per cent of the reading.
    Percent,
    /// Accuracy, counts of the last digit.
    Digits,
    /// The most that it counts to.
    Counts,
}

impl MeterPart {
    /// All of them, in the order in which they are printed.
    pub const ALL: [Self; 3] = [Self::Percent, Self::Digits, Self::Counts];

    /// The kind of quantity.
    pub const fn field(self) -> Field {
        match self {
            Self::Percent => Field::Percent,
            Self::Digits => Field::Digits,
            Self::Counts => Field::Counts,
        }
    }
}

/// One field of the page.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Slot {
    /// Supply volts.
    SupplyVolts,
    /// Supply frequency.
    SupplyHertz,
    /// Source resistance.
    SupplyOhms,
    /// Plate volts.
    PlateVolts,
    /// Plate watts.
    PlateWatts,
    /// Plate amperes.
    PlateAmps,
    /// Plate volt-amperes.
    PlateVoltAmps,
    /// Plate power factor.
    PlatePowerFactor,
    /// A class default of the equipment.
    Detail(Detail),
    /// A property of one lamp.
    Lamp(Place, LampPart),
    /// A reading of a meter.
    Reading(Kind),
    /// A number of the meter itself.
    Meter(MeterPart),
    /// A number of the ladder's checklist.
    Entry(Entry),
}

impl Slot {
    /// The kind of quantity that belongs there.
    pub const fn field(self) -> Field {
        match self {
            Self::SupplyVolts | Self::PlateVolts => Field::Volts,
            Self::Entry(entry) => entry.field(),
            Self::SupplyHertz => Field::Hertz,
            Self::SupplyOhms => Field::Ohms,
            Self::PlateWatts => Field::Watts,
            Self::PlateAmps => Field::Amps,
            Self::PlateVoltAmps => Field::VoltAmps,
            Self::PlatePowerFactor => Field::PowerFactor,
            Self::Detail(detail) => match detail {
                Detail::StartVolts | Detail::StopVolts => Field::StartVolts,
                Detail::SeriesOhms | Detail::DegaussColdOhms | Detail::MeasuredOhms => Field::SeriesOhms,
                Detail::DegaussWarmAmps => Field::Amps,
                Detail::DegaussTripWatts => Field::Watts,
                Detail::ReservoirSeconds | Detail::RestartSeconds => Field::RestartSeconds,
                _ => Field::Details,
            },
            Self::Lamp(_, part) => match part {
                LampPart::Volts | LampPart::PointVolts(_) => Field::Volts,
                LampPart::Watts => Field::Watts,
                LampPart::Lumens => Field::Lumens,
                LampPart::ColdOhms => Field::ColdOhms,
                LampPart::PointAmps(_) => Field::Amps,
            },
            Self::Reading(kind) => kind.field(),
            Self::Meter(part) => part.field(),
        }
    }

    /// The symbol of its unit.
    pub const fn unit(self) -> &'static str {
        match self {
            Self::Detail(detail) => detail.unit(),
            _ => self.field().unit(),
        }
    }
}

/// What is wrong with what was typed.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Fault {
    /// The text is no number of that kind.
    Text(QuantityError),
    /// The number is refused.
    Number(InputError),
    /// Without a unit it could be one of two things, a thousandfold apart.
    NoUnit,
}

/// A lamp as typed.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LampDraft {
    /// Printed volts.
    pub volts: String,
    /// Printed watts.
    pub watts: String,
    /// Fill, where the person chose one.
    pub fill: Option<Fill>,
    /// Printed lumens; empty where not printed.
    pub lumens: String,
    /// Measured cold resistance; empty where not measured.
    pub cold_ohms: String,
    /// Measured volts and amperes.
    pub points: Vec<(String, String)>,
    /// Known from a link only: there is no field for these.
    pub(crate) rated_kelvin: Option<f64>,
    pub(crate) gas_share: Option<f64>,
}

/// Everything as typed.
#[derive(Debug, Clone, PartialEq)]
pub struct Draft {
    /// Supply volts, hertz and ohms.
    pub supply: [String; 3],
    /// The bank: a chain of parallel groups.
    pub groups: Vec<Vec<LampDraft>>,
    /// The kind of equipment.
    pub family: Family,
    /// Plate volts, watts, amperes, volt-amperes and power factor.
    pub plate: [String; 5],
    /// Class defaults that were changed, for whatever family.
    pub details: Vec<(Detail, String)>,
    /// A lamp for the drawer.
    pub spare: LampDraft,
}

impl LampDraft {
    /// A lamp, written out.
    pub fn of(lamp: &Lamp, numerals: Numerals) -> Self {
        let spec = lamp.spec();
        let optional = |value: Option<f64>| value.map_or_else(String::new, |value| numerals.plain(value));
        let points =
            spec.points.iter().map(|point| (numerals.plain(point.volts), numerals.plain(point.amps)));
        Self {
            volts: numerals.plain(spec.volts),
            watts: numerals.plain(spec.watts),
            fill: spec.fill,
            lumens: optional(spec.lumens),
            cold_ohms: optional(spec.cold_ohms),
            points: points.collect(),
            rated_kelvin: spec.rated_kelvin,
            gas_share: spec.gas_share,
        }
    }

    fn text_mut(&mut self, part: LampPart) -> Option<&mut String> {
        Some(match part {
            LampPart::Volts => &mut self.volts,
            LampPart::Watts => &mut self.watts,
            LampPart::Lumens => &mut self.lumens,
            LampPart::ColdOhms => &mut self.cold_ohms,
            LampPart::PointVolts(index) => &mut self.points.get_mut(index)?.0,
            LampPart::PointAmps(index) => &mut self.points.get_mut(index)?.1,
        })
    }

    fn text(&self, part: LampPart) -> &str {
        match part {
            LampPart::Volts => &self.volts,
            LampPart::Watts => &self.watts,
            LampPart::Lumens => &self.lumens,
            LampPart::ColdOhms => &self.cold_ohms,
            LampPart::PointVolts(index) => self.points.get(index).map_or("", |point| &point.0),
            LampPart::PointAmps(index) => self.points.get(index).map_or("", |point| &point.1),
        }
    }
}

impl Draft {
    /// A set-up, written out.
    pub fn of(setup: &Setup, numerals: Numerals) -> Self {
        let Setup { supply, bank, plate } = setup;
        let optional = |value: Option<f64>| value.map_or_else(String::new, |value| numerals.plain(value));
        let printed = plate.spec();
        Self {
            supply: [supply.volts(), supply.hertz(), supply.ohms()].map(|value| numerals.plain(value)),
            groups: Self::written(bank.groups(), numerals),
            family: plate.family(),
            plate: [
                numerals.plain(printed.volts),
                optional(printed.watts),
                optional(printed.amps),
                optional(printed.volt_amps),
                optional(printed.power_factor),
            ],
            details: printed
                .details
                .iter()
                .map(|(detail, value)| (*detail, numerals.plain(*value)))
                .collect(),
            spare: LampDraft::default(),
        }
    }

    /// A bank, written out.
    pub fn written(groups: &[Vec<Lamp>], numerals: Numerals) -> Vec<Vec<LampDraft>> {
        let lamps = |group: &Vec<Lamp>| group.iter().map(|lamp| LampDraft::of(lamp, numerals)).collect();
        groups.iter().map(lamps).collect()
    }

    /// How many lamps.
    pub fn lamp_count(&self) -> usize {
        self.groups.iter().map(Vec::len).sum()
    }

    /// The lamp at a place.
    pub fn lamp(&self, place: Place) -> Option<&LampDraft> {
        if place == Place::SPARE {
            return Some(&self.spare);
        }
        self.groups.get(place.group)?.get(place.lamp)
    }

    pub(crate) fn lamp_mut(&mut self, place: Place) -> Option<&mut LampDraft> {
        if place == Place::SPARE {
            return Some(&mut self.spare);
        }
        self.groups.get_mut(place.group)?.get_mut(place.lamp)
    }

    /// What stands in a field.
    pub fn text(&self, slot: Slot) -> &str {
        match slot {
            Slot::SupplyVolts => &self.supply[0],
            Slot::SupplyHertz => &self.supply[1],
            Slot::SupplyOhms => &self.supply[2],
            Slot::PlateVolts => &self.plate[0],
            Slot::PlateWatts => &self.plate[1],
            Slot::PlateAmps => &self.plate[2],
            Slot::PlateVoltAmps => &self.plate[3],
            Slot::PlatePowerFactor => &self.plate[4],
            Slot::Detail(detail) => {
                self.details.iter().find(|(known, _)| *known == detail).map_or("", |(_, text)| text)
            }
            Slot::Lamp(place, part) => self.lamp(place).map_or("", |lamp| lamp.text(part)),
            Slot::Reading(_) | Slot::Meter(_) | Slot::Entry(_) => "",
        }
    }

    fn detail_mut(&mut self, detail: Detail) -> &mut String {
        let at = self.details.iter().position(|(known, _)| *known == detail).unwrap_or_else(|| {
            self.details.push((detail, String::new()));
            self.details.len() - 1
        });
        &mut self.details[at].1
    }

    /// Puts a text into a field; a field that is not there is left alone.
    pub fn set(&mut self, slot: Slot, text: String) {
        let target = match slot {
            Slot::SupplyVolts => Some(&mut self.supply[0]),
            Slot::SupplyHertz => Some(&mut self.supply[1]),
            Slot::SupplyOhms => Some(&mut self.supply[2]),
            Slot::PlateVolts => Some(&mut self.plate[0]),
            Slot::PlateWatts => Some(&mut self.plate[1]),
            Slot::PlateAmps => Some(&mut self.plate[2]),
            Slot::PlateVoltAmps => Some(&mut self.plate[3]),
            Slot::PlatePowerFactor => Some(&mut self.plate[4]),
            Slot::Detail(detail) => Some(self.detail_mut(detail)),
            Slot::Lamp(place, part) => self.lamp_mut(place).and_then(|lamp| lamp.text_mut(part)),
            Slot::Reading(_) | Slot::Meter(_) | Slot::Entry(_) => None,
        };
        if let Some(target) = target {
            *target = text;
        }
    }
}
