//! What is wrong with what was typed, and the names of the fields.

use lampladder_core::error::{Field, InputError};
use lampladder_core::quantity::QuantityError;

use super::{Words, fill, pick};
use crate::draft::{Fault, LampPart, Slot};

impl Words {
    /// Name of a field.
    pub fn slot(&self, slot: Slot) -> &'static str {
        let plain = match slot {
            Slot::SupplyVolts => 0,
            Slot::SupplyHertz => 1,
            Slot::SupplyOhms => 2,
            Slot::PlateVolts => 3,
            Slot::PlateWatts => 4,
            Slot::PlateAmps => 5,
            Slot::PlateVoltAmps => 6,
            Slot::PlatePowerFactor => 7,
            Slot::Detail(which) => return pick(&self.detail, which as usize),
            Slot::Entry(entry) => return pick(&self.entry, entry as usize),
            Slot::Reading(kind) => return pick(&self.reading, kind as usize),
            Slot::Meter(part) => return pick(&self.meter_part, part as usize),
            Slot::Lamp(_, part) => {
                let at = match part {
                    LampPart::Volts => 0,
                    LampPart::Watts => 1,
                    LampPart::Lumens => 2,
                    LampPart::ColdOhms => 3,
                    LampPart::PointVolts(_) => 4,
                    LampPart::PointAmps(_) => 5,
                };
                return pick(&self.lamp_part, at);
            }
        };
        pick(&self.slot, plain)
    }

    /// What is wrong with a field.
    pub fn fault(&self, which: Slot, fault: &Fault) -> String {
        let name = self.slot(which);
        let numerals = self.numerals;
        match fault {
            Fault::Text(QuantityError::Empty { .. }) => fill(self.fault_empty, &[name]),
            Fault::Text(QuantityError::WrongUnit { field }) if field.unit().is_empty() => {
                fill(self.fault_no_unit, &[name])
            }
            Fault::Text(QuantityError::WrongUnit { field }) => fill(self.fault_unit, &[name, field.unit()]),
            Fault::Number(
                InputError::OutOfRange { low, high, .. } | InputError::DetailOutOfRange { low, high, .. },
            ) => self.range(name, which.unit(), *low, *high),
            Fault::Number(InputError::NotWhole { .. }) => fill(self.fault_whole, &[name]),
            Fault::Number(InputError::Missing { .. }) => fill(self.fault_missing, &[name]),
            Fault::Number(InputError::Conflict { field, with, limit, .. }) => {
                let given = match with {
                    Field::Watts => 0,
                    Field::Amps => 1,
                    _ => 2,
                };
                let limit = numerals.quantity(*limit, field.unit());
                fill(self.fault_conflict, &[name, &limit, pick(&self.given, given)])
            }
            Fault::NoUnit => fill(self.fault_which_unit, &[name]),
            Fault::Number(InputError::NeedsAlternating { .. }) => self.fault_direct.to_owned(),
            _ => fill(self.fault_number, &[name]),
        }
    }

    fn range(&self, name: &str, unit: &str, low: f64, high: f64) -> String {
        // The two ends are the same constant where only one value is allowed.
        if low == high {
            return fill(self.fault_one_value, &[name, &self.numerals.quantity(low, unit)]);
        }
        let (low, high) = (self.numerals.short(low), self.numerals.short_quantity(high, unit));
        fill(self.fault_range, &[name, &low, &high])
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;

    #[test]
    fn a_contradiction_names_the_other_number() {
        let (field, with) = (Field::Watts, Field::VoltAmps);
        let fault = Fault::Number(InputError::Conflict { field, value: 45.0, with, limit: 30.0 });
        let told = english().fault(Slot::PlateWatts, &fault);
        assert!(told.ends_with("with the volt amps given."), "{told}");
    }

    #[test]
    fn a_number_out_of_range_is_told_with_its_range() {
        let fault = Fault::Number(InputError::OutOfRange {
            field: Field::Watts,
            value: 0.0,
            low: 0.05,
            high: 5000.0,
        });
        assert_eq!(
            english().fault(Slot::PlateWatts, &fault),
            "Plate watts must be from 0.05 to 5000\u{a0}W."
        );
    }
}
