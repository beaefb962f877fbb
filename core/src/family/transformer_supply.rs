//! Transformer supplies: most radios and amplifiers.
//!
//! Class defaults, referred to the primary, are design values without a source, chosen so that a set of 20 to
//! 200 W shows a power factor of 0.6 to 0.75 at full voltage (from memory) and a regulation of some 10 %.

use alloc::boxed::Box;

use super::Card;
use crate::condition::{Condition, OVERLOAD};
use crate::detail::{ClassDefault, Detail, Standing};
use crate::error::InputError;
use crate::load::{HalfShort, Impedance, Load, PowerSupply, PowerSupplySpec};
use crate::plate::Plate;
use crate::roots::{self, Tolerance};

pub(super) static CARD: Card = Card {
    name: "transformer-supply",
    conditions: &[
        Condition::Healthy,
        Condition::Overloaded,
        Condition::Shorted,
        Condition::ShortedDiode,
        Condition::ShortedReservoir,
        Condition::LeakyReservoir,
        Condition::OutputConducting,
        Condition::ShortedWinding,
        Condition::Idle,
        Condition::OpenCircuit,
    ],
    healthy_shares: (0.7, 1.1),
    usual_power_factor: 0.7,
    details: &DETAILS,
    build,
};

const DETAILS: [ClassDefault; 5] = [
    ClassDefault::new(Detail::MagnetisingShare, 0.25, (0.01, 2.0), Standing::Design),
    ClassDefault::new(Detail::CoreShare, 0.05, (0.001, 0.5), Standing::Design),
    ClassDefault::new(Detail::WindingShare, 0.06, (0.005, 0.5), Standing::Design),
    ClassDefault::new(Detail::ReservoirSeconds, 0.1, (0.005, 10.0), Standing::Design),
    ClassDefault::new(Detail::IdleShare, 0.2, (0.01, 1.0), Standing::Design),
];

fn build(plate: &Plate, condition: Condition, share: f64) -> Result<Load, InputError> {
    let rated_ohms = plate.volts() * plate.volts() / plate.watts();
    let parts = PowerSupplySpec {
        rated_volts: plate.volts(),
        magnetising_amps: plate.detail(Detail::MagnetisingShare) * plate.watts() / plate.volts(),
        core_ohms: rated_ohms / plate.detail(Detail::CoreShare),
        heater_watts: 0.0,
        winding_ohms: plate.detail(Detail::WindingShare) * rated_ohms,
        // Two silicon diodes behind the turns ratio of a low-voltage supply, or one valve of a high-voltage one.
        diode_volts: 0.01 * plate.volts(),
        half_wave: false,
        farads: plate.detail(Detail::ReservoirSeconds) / (2.0 * rated_ohms),
        draw_ohms: ANY_DRAW_OHMS,
    };
    faulty(plate, condition, share, &parts)
}

/// Stands for the draw until it is known; any draw tells whether the other numbers are in range.
pub(super) const ANY_DRAW_OHMS: f64 = 1000.0;

/// The condition of any set with a rectifier behind windings, whose numbers other than the draw are in `parts`.
pub(super) fn faulty(
    plate: &Plate,
    condition: Condition,
    share: f64,
    parts: &PowerSupplySpec,
) -> Result<Load, InputError> {
    let winding_ohms = parts.winding_ohms;
    let drawing = |watts: f64| draw_for(watts, plate.volts(), parts);
    let healthy = || drawing(share * plate.watts());
    let draw_ohms = match condition {
        Condition::Idle => drawing(share * plate.detail(Detail::IdleShare) * plate.watts())?,
        Condition::Overloaded => drawing(OVERLOAD * share * plate.watts())?,
        // As much again as the set should draw.
        Condition::LeakyReservoir => 0.5 * healthy()?,
        // Six times: between an overload and a short (design value).
        Condition::OutputConducting => healthy()? / 6.0,
        // What is left of a shorted capacitor and its leads, small against the windings.
        Condition::ShortedReservoir => (0.05 * winding_ohms).max(0.01),
        Condition::ShortedDiode => return HalfShort::new(winding_ohms).map(Load::HalfShort),
        // Leakage reactance about equals winding resistance in a small transformer (design value).
        Condition::ShortedWinding => {
            return Impedance::new(winding_ohms, winding_ohms).map(Load::Impedance);
        }
        _ => healthy()?,
    };
    let supply = PowerSupply::new(PowerSupplySpec { draw_ohms, ..*parts })?;
    Ok(Load::PowerSupply(Box::new(supply)))
}

/// The draw with which the whole takes `watts` at `volts`; the lightest or heaviest one where that cannot be met.
fn draw_for(watts: f64, volts: f64, parts: &PowerSupplySpec) -> Result<f64, InputError> {
    PowerSupply::new(PowerSupplySpec { draw_ohms: ANY_DRAW_OHMS, ..*parts })?;
    let guess = libm::log(1.7 * volts * volts / watts);
    let span = (guess - 6.0, guess + 9.0);
    let excess = |ln_ohms: f64| {
        let spec = PowerSupplySpec { draw_ohms: libm::exp(ln_ohms), ..*parts };
        let taken = PowerSupply::new(spec).map_or(f64::NAN, |set| set.watts_at(volts));
        // A smaller draw takes less: rising resistance, falling excess.
        libm::log(taken / watts)
    };
    let found = roots::decreasing_from(excess, span, guess, Tolerance { x: 1e-10, residual: 1e-10 });
    let end = || if excess(guess) > 0.0 { span.1 } else { span.0 };
    Ok(libm::exp(found.map_or_else(end, |root| root.x)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;

    #[test]
    fn a_set_takes_its_plate_watts_at_full_voltage() {
        for family in [Family::TransformerSupply, Family::ValveTransformer, Family::ValveSeries] {
            let plate = Plate::new(family, 230.0, 45.0, None).expect("a radio");
            for share in [0.8, 1.0, 1.1] {
                let Ok(Load::PowerSupply(set)) = plate.load(Condition::Healthy, share) else {
                    panic!("a power supply")
                };
                let taken = set.watts_at(230.0);
                assert!((taken / (45.0 * share) - 1.0).abs() < 1e-6, "{} {share}: {taken}", family.name());
            }
        }
    }
}
