//! English, what is wrong with what was typed, and the names of the fields.

use lampladder_core::detail::Detail;
use lampladder_core::error::InputError;
use lampladder_core::quantity::QuantityError;

use super::NUMERALS;
use super::seen::SEEN;
use crate::draft::{Fault, LampPart, Slot};

pub(super) fn slot(slot: Slot) -> &'static str {
    match slot {
        Slot::SupplyVolts => "Supply volts",
        Slot::SupplyHertz => "Frequency",
        Slot::SupplyOhms => "Source resistance",
        Slot::PlateVolts => "Plate volts",
        Slot::PlateWatts => "Plate watts",
        Slot::PlateAmps => "Plate amps",
        Slot::PlateVoltAmps => "Plate volt-amps",
        Slot::PlatePowerFactor => "Power factor",
        Slot::Detail(which) => detail(which),
        Slot::Entry(entry) => super::ladder::entry(entry),
        Slot::Lamp(_, part) => match part {
            LampPart::Volts => "Lamp volts",
            LampPart::Watts => "Lamp watts",
            LampPart::Lumens => "Printed lumens",
            LampPart::ColdOhms => "Cold resistance",
            LampPart::PointVolts(_) => "Measured volts",
            LampPart::PointAmps(_) => "Measured amps",
        },
        Slot::Reading(kind) => (SEEN.kind)(kind),
        Slot::Meter(part) => SEEN.meter_part[part as usize],
    }
}

const fn detail(which: Detail) -> &'static str {
    match which {
        Detail::MagnetisingShare => "Magnetising current, share of rated",
        Detail::CoreShare => "Core loss, share of plate watts",
        Detail::WindingShare => "Winding drop, share of rated",
        Detail::ReservoirSeconds => "Reservoir discharges in",
        Detail::HeaterShare => "Heaters, share of plate watts",
        Detail::NoLoadShare => "Running free, share of plate watts",
        Detail::StallMultiple => "Stalled current, times rated",
        Detail::IdleShare => "Idle, share of plate watts",
        Detail::StartVolts => "Starts at DC volts",
        Detail::StopVolts => "Stops at DC volts",
        Detail::MicrofaradsPerWatt => "Reservoir for each watt",
        Detail::SeriesOhms => "Resistance before the rectifier",
        Detail::DegaussColdOhms => "Degauss coil, cold",
        Detail::DegaussWarmAmps => "Degauss coil, warm",
        Detail::DegaussTripWatts => "Heat that trips the degauss",
        Detail::BreakawayShare => "Torque to break away, share of rated",
        Detail::MeasuredOhms => "Ohms at the plug",
        Detail::RestartSeconds => "Waits before a restart",
        other => other.name(),
    }
}

pub(super) fn fault(which: Slot, fault: &Fault) -> String {
    let name = slot(which);
    match fault {
        Fault::Text(QuantityError::Empty { .. }) => format!("{name} is empty."),
        Fault::Text(QuantityError::WrongUnit { field }) if field.unit().is_empty() => {
            format!("{name} has no unit.")
        }
        Fault::Text(QuantityError::WrongUnit { field }) => {
            format!("{name} is measured in {}.", field.unit())
        }
        Fault::Number(
            InputError::OutOfRange { low, high, .. } | InputError::DetailOutOfRange { low, high, .. },
        ) => range(name, which.unit(), *low, *high),
        Fault::Number(InputError::NotWhole { .. }) => format!("{name} is a whole number, such as 2."),
        Fault::Number(InputError::Missing { .. }) => {
            format!("{name} is empty. Watts, amps or volt-amps: one of them is needed.")
        }
        Fault::Number(InputError::Conflict { field, with, limit, .. }) => {
            let limit = NUMERALS.quantity(*limit, field.unit());
            format!("{name} can be at most {limit} with the {} given.", with.name().replace('_', " "))
        }
        Fault::NoUnit => format!("{name} has no unit. Which did you mean?"),
        Fault::Number(InputError::NeedsAlternating { .. }) => String::from(
            "This equipment needs alternating current; on DC use a heater, or plain with power factor 1.",
        ),
        _ => format!("{name} is not a number. Type it like 60, 0.5 or 1k2."),
    }
}

fn range(name: &str, unit: &str, low: f64, high: f64) -> String {
    #[expect(
        clippy::float_cmp,
        reason = "the two ends are the same constant where only one value is allowed"
    )]
    if low == high {
        return format!("{name} must be {} here.", NUMERALS.quantity(low, unit));
    }
    format!("{name} must be from {} to {}.", NUMERALS.short(low), NUMERALS.short_quantity(high, unit))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_contradiction_names_the_other_number() {
        use lampladder_core::error::Field;
        let (field, with) = (Field::Watts, Field::VoltAmps);
        let fault = Fault::Number(InputError::Conflict { field, value: 45.0, with, limit: 30.0 });
        let told = super::fault(Slot::PlateWatts, &fault);
        assert!(told.ends_with("with the volt amps given."), "{told}");
    }

    #[test]
    fn a_number_out_of_range_is_told_with_its_range() {
        use lampladder_core::error::Field;
        let fault = Fault::Number(InputError::OutOfRange {
            field: Field::Watts,
            value: 0.0,
            low: 0.05,
            high: 5000.0,
        });
        assert_eq!(super::fault(Slot::PlateWatts, &fault), "Plate watts must be from 0.05 to 5000\u{a0}W.");
    }
}
