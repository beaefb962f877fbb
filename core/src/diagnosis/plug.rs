//! What an ohmmeter shows across the plug of unplugged equipment.

use crate::condition::Condition;
use crate::family::Family;
use crate::load::Load;

/// What stands for "overload" on the display: the end of a common meter's range, ohms.
pub(crate) const OVERLOAD_OHMS: f64 = 2e7;

/// Ohms of leads and contacts.
const LEADS: f64 = 0.3;

/// Usual ohms, and the standard deviation of their logarithm.
///
/// A resistor and a lamp show themselves; a motor its windings; a transformer its primary, about half of the winding
/// resistance that the mains sees, whatever is wrong behind it; a rectifier hardly conducts at an ohmmeter's voltage.
/// The spreads are design values.
pub(crate) fn plug_ohms(family: Family, condition: Condition, load: &Load) -> (f64, f64) {
    const RESISTOR: f64 = 0.03;
    const WINDING: f64 = 0.35;
    const JUNCTION: f64 = 1.5;
    let (ohms, deviation) = match (condition, load) {
        (Condition::Shorted, _) => (0.0, 0.5),
        (Condition::OpenCircuit, _) => (OVERLOAD_OHMS, 0.5),
        (_, Load::Impedance(one)) => match family {
            Family::SwitchMode | Family::SwitchModeCorrected | Family::CrtSet => (2e3, JUNCTION),
            // Part of the winding is bridged.
            Family::TransformerSupply | Family::ValveTransformer => (0.35 * one.ohms(), 0.5),
            Family::UniversalMotor | Family::InductionMotor => (one.ohms(), WINDING),
            _ => (one.ohms(), RESISTOR),
        },
        (_, Load::Lamp(lamp)) => (lamp.cold_ohms(), 0.05),
        (_, Load::UniversalMotor(motor)) => (motor.spec().ohms, WINDING),
        (_, Load::InductionMotor(motor)) => (motor.spec().stator_ohms, WINDING),
        (_, Load::PowerSupply(set)) if set.spec().magnetising_amps > 0.0 => {
            (0.5 * set.spec().winding_ohms, WINDING)
        }
        (_, Load::PowerSupply(set)) => {
            let heaters = set.heater().map_or(1e5, crate::filament::Filament::cold_ohms);
            (heaters, 0.2)
        }
        (_, Load::HalfShort(short))
            if family == Family::TransformerSupply || family == Family::ValveTransformer =>
        {
            (0.5 * short.ohms(), WINDING)
        }
        (_, Load::HalfShort(_)) => (1e5, JUNCTION),
        (_, Load::Degauss(degauss)) => (degauss.cold().ohms(), 0.2),
        _ => (1e6, JUNCTION),
    };
    ((ohms + LEADS).min(OVERLOAD_OHMS), deviation)
}
