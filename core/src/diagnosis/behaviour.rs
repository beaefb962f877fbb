//! What a lamp does in the first seconds, by kind of equipment and condition.
//!
//! Judged from what the steady points and the parts imply: a converter that hunts pulses; a reservoir, a magnetising
//! core, a starting motor and a warming degauss thermistor flash, then dim; heaters that warm up draw a bright lamp
//! dimmer and let the rest follow slowly. All weights are design values; every behaviour keeps a part, because people
//! look late and words are vague.

use super::Ending;
use crate::condition::Condition;
use crate::family::Family;
use crate::load::Mode;

/// Probabilities of [`crate::readings::Behaviour::ALL`] in that order: steady, flash then dim, slow rise, pulsing.
pub fn behaviours(family: Family, condition: Condition, ending: Ending) -> [f64; 4] {
    const STEADY: [f64; 4] = [0.90, 0.06, 0.03, 0.01];
    const FLASH: [f64; 4] = [0.17, 0.78, 0.04, 0.01];
    const HALF_FLASH: [f64; 4] = [0.50, 0.44, 0.05, 0.01];
    const WARMS: [f64; 4] = [0.10, 0.40, 0.48, 0.02];
    const PULSES: [f64; 4] = [0.05, 0.06, 0.02, 0.87];
    match (ending, condition) {
        (Ending::Hunts, _) => return PULSES,
        // The reservoir charges, and that is all.
        (Ending::DoesNotStart, _) => return FLASH,
        (Ending::Settles(Mode::DegaussCold), _) | (_, Condition::Shorted | Condition::OpenCircuit) => {
            return STEADY;
        }
        (Ending::Settles(Mode::DegaussWarm), _) => return FLASH,
        _ => {}
    }
    match (family, condition) {
        (
            Family::ValveTransformer | Family::ValveSeries,
            Condition::ShortedDiode | Condition::ShortedWinding,
        ) => STEADY,
        (Family::ValveTransformer | Family::ValveSeries, _) => WARMS,
        (
            _,
            Condition::ShortedReservoir
            | Condition::ShortedDiode
            | Condition::ShortedWinding
            | Condition::Stalled,
        ) => STEADY,
        // A lamp's own filament warms up beside the bank's.
        (Family::Lamp, _)
        | (
            Family::TransformerSupply,
            Condition::Overloaded | Condition::LeakyReservoir | Condition::OutputConducting,
        ) => HALF_FLASH,
        (
            Family::TransformerSupply
            | Family::SwitchMode
            | Family::SwitchModeCorrected
            | Family::UniversalMotor,
            _,
        ) => FLASH,
        (Family::InductionMotor, _) if ending == Ending::Settles(Mode::Turning) => FLASH,
        _ => STEADY,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn they_are_probabilities() {
        let endings = [
            Ending::Hunts,
            Ending::DoesNotStart,
            Ending::Settles(Mode::Only),
            Ending::Settles(Mode::Turning),
            Ending::Settles(Mode::DegaussCold),
        ];
        for family in Family::ALL {
            for &condition in family.conditions() {
                for ending in endings {
                    let all = behaviours(family, condition, ending);
                    assert!(
                        (all.iter().sum::<f64>() - 1.0).abs() < 1e-12 && all.iter().all(|&part| part > 0.0)
                    );
                }
            }
        }
    }
}
