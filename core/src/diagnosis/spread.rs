//! The benches that a diagnosis compares: how supply, lamps and equipment may differ from what was entered.

use super::normal::quantile;
use super::sobol::AXES;
use crate::bank::Bank;
use crate::condition::Condition;
use crate::detail::Detail;
use crate::error::InputError;
use crate::family::Family;
use crate::lamp::Tables;
use crate::load::Load;
use crate::plate::{Plate, PlateSpec};
use crate::supply::Supply;

/// Standard deviation of a class default's logarithm: a quarter (design value, no source).
pub const DETAIL_SPREAD: f64 = 0.25;

/// The same of a converter's start and stop volts, which move together: the published range of starts is 60 to 80 V.
pub const THRESHOLD_SPREAD: f64 = 0.10;

/// Standard deviation of the supply over what was entered, where it was not read: the mains stays within 10 % of
/// nominal nearly always (EN 50160, from memory).
pub const SUPPLY_SPREAD: f64 = 0.03;

/// Part of lamps that follow the other published resistivity, and the other emissivity (design values).
pub const OTHER_TABLES: f64 = 0.25;

/// Least and greatest factor on the power that a condition stands for, log-uniform between them (design values).
pub const fn severity(condition: Condition) -> (f64, f64) {
    match condition {
        // 1.5 to 6 times the plate.
        Condition::Overloaded => (0.5, 2.0),
        Condition::LeakyReservoir => (0.7, 1.7),
        Condition::OutputConducting => (0.7, 1.6),
        _ => (1.0, 1.0),
    }
}

/// Least and greatest factor on a motor's plate watts in the conditions that its free-running share does not touch.
pub const MOTOR_WATTS: (f64, f64) = (0.75, 1.15);

/// Places of the coordinates of a point.
const SHARE: usize = 0;
const LAMP: usize = 1;
const TABLES: usize = 4;
const SEVERITY: usize = 5;
const SUPPLY: usize = 6;
const DETAILS: usize = 7;

/// One bench of many: a point of the unit cube.
pub(crate) struct Draw {
    point: [f64; AXES],
}

impl Draw {
    pub(crate) const fn new(point: [f64; AXES]) -> Self {
        Self { point }
    }

    fn normal(&self, axis: usize) -> f64 {
        quantile(self.point[axis])
    }

    fn between(&self, axis: usize, (low, high): (f64, f64)) -> f64 {
        low + self.point[axis] * (high - low)
    }

    fn log_between(&self, axis: usize, (low, high): (f64, f64)) -> f64 {
        low * libm::pow(high / low, self.point[axis])
    }

    /// The supply, whose volts are known to a standard `deviation`.
    pub(crate) fn supply(&self, usual: &Supply, volts: f64, deviation: f64) -> Result<Supply, InputError> {
        let (low, high) = Supply::VOLTS;
        let volts = (volts + deviation * self.normal(SUPPLY)).clamp(low, high);
        Supply::new(volts, usual.hertz(), usual.ohms())
    }

    pub(crate) fn bank(&self, bank: &Bank) -> Bank {
        let deviations = [LAMP, LAMP + 1, LAMP + 2].map(|axis| self.normal(axis));
        let tables = match self.point[TABLES] {
            part if part < OTHER_TABLES => Tables::OtherResistivity,
            part if part < 2.0 * OTHER_TABLES => Tables::OtherEmissivity,
            _ => Tables::Standard,
        };
        bank.moved(deviations, tables)
    }

    /// The plate with its class defaults moved, but not those that the person has set.
    pub(crate) fn plate(&self, plate: &Plate) -> Result<Plate, InputError> {
        self.plate_of(plate, plate.watts())
    }

    fn plate_of(&self, plate: &Plate, watts: f64) -> Result<Plate, InputError> {
        let mut details = plate.spec().details.clone();
        let mut axis = DETAILS;
        let mut thresholds = None;
        for default in plate.family().details() {
            let spread = match default.detail {
                // Only the first seconds depend on these; a measured resistance is known.
                Detail::ReservoirSeconds
                | Detail::MicrofaradsPerWatt
                | Detail::RestartSeconds
                | Detail::MeasuredOhms => continue,
                Detail::StartVolts | Detail::StopVolts => THRESHOLD_SPREAD,
                _ => DETAIL_SPREAD,
            };
            let z = match (spread == THRESHOLD_SPREAD, thresholds) {
                (true, Some(z)) => z,
                _ if axis < AXES => {
                    axis += 1;
                    self.normal(axis - 1)
                }
                _ => 0.0,
            };
            if spread == THRESHOLD_SPREAD {
                thresholds = Some(z);
            }
            let set = plate.spec().details.iter().any(|(known, _)| *known == default.detail);
            if !set {
                let value = default.value * libm::exp(spread * z);
                details.push((default.detail, value.clamp(default.low, default.high)));
            }
        }
        let (low, high) = Plate::WATTS;
        Plate::from_spec(PlateSpec {
            watts: (watts > 0.0).then(|| watts.clamp(low, high)),
            power_factor: plate.power_factor(),
            details,
            ..PlateSpec::new(plate.family(), plate.volts())
        })
    }

    /// The load in a condition; `moved` is [`Self::plate`] of `plate`.
    pub(crate) fn load(
        &self,
        plate: &Plate,
        moved: &Plate,
        condition: Condition,
    ) -> Result<Load, InputError> {
        let motor = matches!(plate.family(), Family::UniversalMotor | Family::InductionMotor);
        let fixed = matches!(
            condition,
            Condition::Working | Condition::Overloaded | Condition::Stalled | Condition::ShortedWinding
        );
        if motor && fixed {
            let watts = plate.watts() * self.between(SEVERITY, MOTOR_WATTS);
            return self.plate_of(plate, watts)?.load(condition, 1.0);
        }
        let share = self.between(SHARE, plate.family().healthy_shares());
        moved.load(condition, share * self.log_between(SEVERITY, severity(condition)))
    }
}
