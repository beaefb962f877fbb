//! What a person has typed, letter for letter.

use lampladder_core::error::{Field, InputError};
use lampladder_core::lamp::{Fill, Lamp};
use lampladder_core::plate::Family;
use lampladder_core::quantity::QuantityError;
use lampladder_core::setup::Setup;

use crate::format::Numerals;

/// Where a lamp stands in the bank.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Place {
    /// Which group of the chain.
    pub group: usize,
    /// Which lamp of the group.
    pub lamp: usize,
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
    /// Plate power factor.
    PlatePowerFactor,
    /// A property of one lamp.
    Lamp(Place, LampPart),
}

impl Slot {
    /// The kind of quantity that belongs there.
    pub const fn field(self) -> Field {
        match self {
            Self::SupplyVolts | Self::PlateVolts => Field::Volts,
            Self::SupplyHertz => Field::Hertz,
            Self::SupplyOhms => Field::Ohms,
            Self::PlateWatts => Field::Watts,
            Self::PlatePowerFactor => Field::PowerFactor,
            Self::Lamp(_, part) => match part {
                LampPart::Volts | LampPart::PointVolts(_) => Field::Volts,
                LampPart::Watts => Field::Watts,
                LampPart::Lumens => Field::Lumens,
                LampPart::ColdOhms => Field::ColdOhms,
                LampPart::PointAmps(_) => Field::Amps,
            },
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
    /// Plate volts, watts and power factor.
    pub plate: [String; 3],
}

impl LampDraft {
    fn of(lamp: &Lamp, numerals: Numerals) -> Self {
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
        let lamps = |group: &Vec<Lamp>| group.iter().map(|lamp| LampDraft::of(lamp, numerals)).collect();
        Self {
            supply: [supply.volts(), supply.hertz(), supply.ohms()].map(|value| numerals.plain(value)),
            groups: bank.groups().iter().map(lamps).collect(),
            family: plate.family(),
            plate: [
                numerals.plain(plate.volts()),
                numerals.plain(plate.watts()),
                plate.power_factor().map_or_else(String::new, |value| numerals.plain(value)),
            ],
        }
    }

    /// How many lamps.
    pub fn lamp_count(&self) -> usize {
        self.groups.iter().map(Vec::len).sum()
    }

    /// The lamp at a place.
    pub fn lamp(&self, place: Place) -> Option<&LampDraft> {
        self.groups.get(place.group)?.get(place.lamp)
    }

    pub(crate) fn lamp_mut(&mut self, place: Place) -> Option<&mut LampDraft> {
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
            Slot::PlatePowerFactor => &self.plate[2],
            Slot::Lamp(place, part) => self.lamp(place).map_or("", |lamp| lamp.text(part)),
        }
    }

    /// Puts a text into a field; a field that is not there is left alone.
    pub fn set(&mut self, slot: Slot, text: String) {
        let target = match slot {
            Slot::SupplyVolts => Some(&mut self.supply[0]),
            Slot::SupplyHertz => Some(&mut self.supply[1]),
            Slot::SupplyOhms => Some(&mut self.supply[2]),
            Slot::PlateVolts => Some(&mut self.plate[0]),
            Slot::PlateWatts => Some(&mut self.plate[1]),
            Slot::PlatePowerFactor => Some(&mut self.plate[2]),
            Slot::Lamp(place, part) => self.lamp_mut(place).and_then(|lamp| lamp.text_mut(part)),
        };
        if let Some(target) = target {
            *target = text;
        }
    }
}
