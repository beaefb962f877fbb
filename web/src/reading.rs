//! The reading of what was typed: a set-up, or what is wrong beside which field.

use lampladder_core::bank::Bank;
use lampladder_core::error::{Field, InputError};
use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_core::plate::{Plate, PlateSpec};
use lampladder_core::quantity;
use lampladder_core::setup::Setup;
use lampladder_core::supply::Supply;

use crate::draft::{Draft, Fault, LampPart, Place, Slot};

impl Draft {
    /// The set-up that was typed.
    ///
    /// # Errors
    /// Every field that cannot be read, with the reason.
    pub fn read(&self) -> Result<Setup, Vec<(Slot, Fault)>> {
        let mut reading = Reading { draft: self, faults: Vec::new() };
        let supply = reading.supply();
        let bank = reading.bank();
        let plate = reading.plate();
        match (supply, bank, plate) {
            (Some(supply), Some(bank), Some(plate)) if reading.faults.is_empty() => {
                Ok(Setup { supply, bank, plate })
            }
            _ => Err(reading.faults),
        }
    }
}

impl Draft {
    /// The lamp that was typed for the drawer.
    ///
    /// # Errors
    /// As [`Self::read`].
    pub fn read_spare(&self) -> Result<Lamp, Vec<(Slot, Fault)>> {
        let mut reading = Reading { draft: self, faults: Vec::new() };
        let lamp = reading.lamp(Place::SPARE);
        lamp.filter(|_| reading.faults.is_empty()).ok_or(reading.faults)
    }
}

/// Gathers all faults, so that each shows beside its field at once.
struct Reading<'a> {
    draft: &'a Draft,
    faults: Vec<(Slot, Fault)>,
}

impl Reading<'_> {
    fn number(&mut self, slot: Slot) -> Option<f64> {
        let read = quantity::parse(self.draft.text(slot), slot.field());
        read.map_err(|error| self.faults.push((slot, Fault::Text(error)))).ok()
    }

    /// `None` for an empty field, which is an answer too, and for one that cannot be read, which is a fault.
    fn optional(&mut self, slot: Slot) -> Option<f64> {
        if self.draft.text(slot).trim().is_empty() { None } else { self.number(slot) }
    }

    fn refused(&mut self, slot: Slot, error: InputError) {
        self.faults.push((slot, Fault::Number(error)));
    }

    fn supply(&mut self) -> Option<Supply> {
        let volts = self.number(Slot::SupplyVolts);
        let hertz = self.number(Slot::SupplyHertz);
        let ohms = self.optional(Slot::SupplyOhms);
        let slot = |error: &InputError| match error.field() {
            Field::Hertz => Slot::SupplyHertz,
            Field::Ohms => Slot::SupplyOhms,
            _ => Slot::SupplyVolts,
        };
        Supply::new(volts?, hertz?, ohms.unwrap_or(0.0))
            .map_err(|error| self.refused(slot(&error), error))
            .ok()
    }

    fn plate(&mut self) -> Option<Plate> {
        let family = self.draft.family;
        let faults = self.faults.len();
        let volts = self.number(Slot::PlateVolts);
        let watts = self.optional(Slot::PlateWatts);
        let amps = self.optional(Slot::PlateAmps);
        let volt_amps = self.optional(Slot::PlateVoltAmps);
        let power_factor = self.optional(Slot::PlatePowerFactor);
        // What was typed for another family stays in its field, and is of no account here.
        let details = family.details().iter().filter_map(|default| {
            let value = self.optional(Slot::Detail(default.detail))?;
            Some((default.detail, value))
        });
        let details: Vec<_> = details.collect();
        if self.faults.len() > faults {
            return None;
        }
        let slot = |error: &InputError| match (error, error.field()) {
            (InputError::DetailOutOfRange { detail, .. } | InputError::Unknown { detail }, _) => {
                Slot::Detail(*detail)
            }
            (_, Field::Watts) => Slot::PlateWatts,
            (_, Field::Amps) => Slot::PlateAmps,
            (_, Field::VoltAmps) => Slot::PlateVoltAmps,
            (_, Field::PowerFactor) => Slot::PlatePowerFactor,
            _ => Slot::PlateVolts,
        };
        Plate::from_spec(PlateSpec { family, volts: volts?, watts, amps, volt_amps, power_factor, details })
            .map_err(|error| self.refused(slot(&error), error))
            .ok()
    }

    fn bank(&mut self) -> Option<Bank> {
        let mut groups = Vec::new();
        for (group, lamps) in self.draft.groups.iter().enumerate() {
            let mut read = Vec::new();
            for lamp in 0..lamps.len() {
                read.extend(self.lamp(Place { group, lamp }));
            }
            groups.push(read);
        }
        Bank::new(groups).ok()
    }

    fn lamp(&mut self, place: Place) -> Option<Lamp> {
        let draft = self.draft.lamp(place)?;
        let slot = |part| Slot::Lamp(place, part);
        let faults = self.faults.len();
        let volts = self.number(slot(LampPart::Volts));
        let watts = self.number(slot(LampPart::Watts));
        let lumens = self.optional(slot(LampPart::Lumens));
        let cold_ohms = self.optional(slot(LampPart::ColdOhms));
        let points: Vec<_> = (0..draft.points.len())
            .map(|index| {
                let volts = self.number(slot(LampPart::PointVolts(index)));
                let amps = self.number(slot(LampPart::PointAmps(index)));
                Some(Point { volts: volts?, amps: amps? })
            })
            .collect();
        let spec = LampSpec {
            volts: volts?,
            watts: watts?,
            fill: draft.fill,
            lumens,
            cold_ohms,
            points: Vec::new(),
            rated_kelvin: draft.rated_kelvin,
            gas_share: draft.gas_share,
        };
        // The points one by one: core names volts or amperes, and we have to know of which point.
        for (index, point) in points.iter().enumerate() {
            let Some(point) = point else { continue };
            if let Err(error) = Lamp::from_spec(LampSpec { points: vec![*point], ..spec.clone() })
                && let Some(part) = part_of_point(index, &error)
                && Lamp::from_spec(spec.clone()).is_ok()
            {
                self.refused(slot(part), error);
            }
        }
        if self.faults.len() > faults {
            return None;
        }
        let points = points.into_iter().collect::<Option<Vec<_>>>()?;
        Lamp::from_spec(LampSpec { points, ..spec })
            .map_err(|error| self.refused(slot(part_of(&error)), error))
            .ok()
    }
}

const fn part_of_point(index: usize, error: &InputError) -> Option<LampPart> {
    match error.field() {
        Field::Volts => Some(LampPart::PointVolts(index)),
        Field::Amps => Some(LampPart::PointAmps(index)),
        _ => None,
    }
}

const fn part_of(error: &InputError) -> LampPart {
    match error.field() {
        Field::Watts => LampPart::Watts,
        Field::Lumens => LampPart::Lumens,
        Field::ColdOhms => LampPart::ColdOhms,
        _ => LampPart::Volts,
    }
}
