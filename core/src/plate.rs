//! What the equipment's rating plate says.

use alloc::vec::Vec;

use crate::condition::Condition;
use crate::detail::Detail;
use crate::error::{Field, InputError, within};
use crate::family::Family;
use crate::load::Load;

/// What is printed on the plate and, where the class defaults do not fit, what is known better.
///
/// One of watts, volt-amperes and amperes is enough.
#[derive(Debug, Clone, PartialEq)]
pub struct PlateSpec {
    /// The kind of equipment.
    pub family: Family,
    /// Printed volts.
    pub volts: f64,
    /// Printed watts.
    pub watts: Option<f64>,
    /// Printed amperes.
    pub amps: Option<f64>,
    /// Printed volt-amperes.
    pub volt_amps: Option<f64>,
    /// Printed power factor.
    pub power_factor: Option<f64>,
    /// Class defaults that the person has changed.
    pub details: Vec<(Detail, f64)>,
}

impl PlateSpec {
    /// A plate with nothing but volts on it.
    pub const fn new(family: Family, volts: f64) -> Self {
        Self {
            family,
            volts,
            watts: None,
            amps: None,
            volt_amps: None,
            power_factor: None,
            details: Vec::new(),
        }
    }
}

/// A rating plate that makes sense.
#[derive(Debug, Clone, PartialEq)]
pub struct Plate {
    spec: PlateSpec,
    watts: f64,
}

/// How far printed watts may exceed printed volts times amperes times power factor: plates are rounded.
const ROUNDING: f64 = 1.15;

impl Plate {
    /// Allowed plate volts.
    pub const VOLTS: (f64, f64) = (1.0, 500.0);
    /// Allowed plate watts.
    pub const WATTS: (f64, f64) = (0.5, 20_000.0);
    /// Allowed plate amperes.
    pub const AMPS: (f64, f64) = (0.001, 100.0);
    /// Allowed plate volt-amperes.
    pub const VOLT_AMPS: (f64, f64) = (0.5, 20_000.0);
    /// Allowed power factors.
    pub const POWER_FACTOR: (f64, f64) = (0.05, 1.0);

    /// A plate with `volts` (1 to 500 V), `watts` (0.5 W to 20 kW) and, where printed, a power factor (0.05 to 1).
    ///
    /// # Errors
    /// As [`Self::from_spec`].
    pub fn new(
        family: Family,
        volts: f64,
        watts: f64,
        power_factor: Option<f64>,
    ) -> Result<Self, InputError> {
        Self::from_spec(PlateSpec { watts: Some(watts), power_factor, ..PlateSpec::new(family, volts) })
    }

    /// A plate from all that is printed on it.
    ///
    /// # Errors
    /// The first property that is not finite, out of range or missing; watts that volts and amperes, volt-amperes
    /// or the power factor do not allow; a heater or lamp with a power factor other than 1; a detail that the
    /// family does not have.
    pub fn from_spec(spec: PlateSpec) -> Result<Self, InputError> {
        let family = spec.family;
        let volts = within(Field::Volts, spec.volts, Self::VOLTS.0, Self::VOLTS.1)?;
        let optional = |field, value: Option<f64>, (low, high)| {
            value.map(|value| within(field, value, low, high)).transpose()
        };
        let watts = optional(Field::Watts, spec.watts, Self::WATTS)?;
        let amps = optional(Field::Amps, spec.amps, Self::AMPS)?;
        let volt_amps = optional(Field::VoltAmps, spec.volt_amps, Self::VOLT_AMPS)?;
        let resistive = matches!(family, Family::Heater | Family::Lamp | Family::Measured);
        let factor_range = if resistive { (1.0, 1.0) } else { Self::POWER_FACTOR };
        let power_factor = optional(Field::PowerFactor, spec.power_factor, factor_range)?;
        for &(detail, value) in &spec.details {
            let default = family.detail(detail).ok_or(InputError::Unknown { detail })?;
            if !(default.low..=default.high).contains(&value) {
                let (low, high) = (default.low, default.high);
                return Err(InputError::DetailOutOfRange { detail, value, low, high });
            }
        }
        let from_amps = amps.map(|amps| (Field::Amps, volts * amps));
        for (with, apparent) in from_amps.into_iter().chain(volt_amps.map(|va| (Field::VoltAmps, va))) {
            let limit = apparent * ROUNDING * power_factor.unwrap_or(1.0);
            if let Some(value) = watts
                && value > limit
            {
                return Err(InputError::Conflict { field: Field::Watts, value, with, limit });
            }
            // Every printed number given, they must agree from below too.
            if let (Some(value), Some(factor)) = (watts, power_factor)
                && value * ROUNDING < apparent * factor
            {
                let limit = value * ROUNDING / factor / if with == Field::Amps { volts } else { 1.0 };
                let value = if with == Field::Amps { apparent / volts } else { apparent };
                return Err(InputError::Conflict { field: with, value, with: Field::Watts, limit });
            }
        }
        let apparent = volt_amps.or_else(|| amps.map(|amps| volts * amps));
        let factor = power_factor.unwrap_or(family.usual_power_factor());
        let missing = InputError::Missing { field: Field::Watts };
        let watts = match (watts.or_else(|| apparent.map(|va| va * factor)), family) {
            (Some(watts), _) => within(Field::Watts, watts, Self::WATTS.0, Self::WATTS.1)?,
            // The reading across the plug says it all.
            (None, Family::Measured) => 0.0,
            (None, _) => return Err(missing),
        };
        Ok(Self { spec, watts })
    }

    /// What was given.
    pub const fn spec(&self) -> &PlateSpec {
        &self.spec
    }

    /// The kind of equipment.
    pub const fn family(&self) -> Family {
        self.spec.family
    }

    /// Plate volts.
    pub const fn volts(&self) -> f64 {
        self.spec.volts
    }

    /// Plate watts; from volt-amperes or amperes with the power factor where watts are not printed.
    pub const fn watts(&self) -> f64 {
        self.watts
    }

    /// Amperes at plate volts: the printed ones, or what watts and power factor give.
    pub fn rated_amps(&self) -> f64 {
        let from_watts = self.watts / (self.spec.volts * self.assumed_power_factor());
        self.spec.amps.or_else(|| self.spec.volt_amps.map(|va| va / self.spec.volts)).unwrap_or(from_watts)
    }

    /// Whether it wants more than any sensible bank passes.
    pub fn is_too_powerful(&self) -> bool {
        self.rated_amps() > crate::family::MOST_BANK_AMPS
    }

    /// Printed power factor.
    pub const fn power_factor(&self) -> Option<f64> {
        self.spec.power_factor
    }

    /// The power factor that is used: the printed one, or the usual one of the family.
    pub fn assumed_power_factor(&self) -> f64 {
        self.spec.power_factor.unwrap_or(self.family().usual_power_factor())
    }

    /// A class default of the family, or what the person has put in its place; 0 for a detail it does not have.
    pub fn detail(&self, detail: Detail) -> f64 {
        let changed = self.spec.details.iter().rev().find(|(known, _)| *known == detail);
        match (changed, self.family().detail(detail)) {
            (Some(&(_, value)), _) => value,
            (None, Some(default)) => default.value,
            (None, None) => 0.0,
        }
    }

    /// The load in a condition, taking `share` of the plate's power at the plate's voltage (1 for the plate itself).
    ///
    /// # Errors
    /// A condition that the family does not have; a number that the family cannot take.
    pub fn load(&self, condition: Condition, share: f64) -> Result<Load, InputError> {
        match condition {
            Condition::Shorted => Ok(Load::Short),
            Condition::OpenCircuit => Ok(Load::Open),
            _ if !self.family().conditions().contains(&condition) => Err(InputError::Unlikely { condition }),
            _ => (self.family().card().build)(self, condition, share),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_printed_number_is_enough_and_contradictions_are_named() {
        let bare = PlateSpec::new(Family::Plain, 230.0);
        assert_eq!(Plate::from_spec(bare.clone()), Err(InputError::Missing { field: Field::Watts }));
        let from_amps = Plate::from_spec(PlateSpec { amps: Some(2.0), ..bare.clone() }).expect("enough");
        assert!((from_amps.watts() - 460.0 * Family::Plain.usual_power_factor()).abs() < 1e-9);
        // 45 W, 230 V, 2 A and power factor 1 cannot all be true.
        let torn = PlateSpec { watts: Some(45.0), amps: Some(2.0), power_factor: Some(1.0), ..bare.clone() };
        assert!(matches!(Plate::from_spec(torn), Err(InputError::Conflict { field: Field::Amps, .. })));
        let more = PlateSpec { watts: Some(1000.0), amps: Some(2.0), ..bare };
        assert!(matches!(Plate::from_spec(more), Err(InputError::Conflict { field: Field::Watts, .. })));
    }

    #[test]
    fn a_contradiction_is_told_with_both_sides_and_the_limit() {
        use alloc::string::ToString;
        let told = |spec: PlateSpec| Plate::from_spec(spec).expect_err("a contradiction").to_string();
        let bare = PlateSpec { watts: Some(45.0), ..PlateSpec::new(Family::Plain, 230.0) };
        // 45 W at power factor 1 are 0.196 A, 15 % more with rounding.
        let torn = PlateSpec { amps: Some(2.0), power_factor: Some(1.0), ..bare.clone() };
        assert_eq!(told(torn), "amps of 2.0 A contradicts watts, which allows at most 0.22499999999999998");
        let torn = PlateSpec { volt_amps: Some(30.0), ..bare.clone() };
        assert_eq!(told(torn), "watts of 45.0 W contradicts volt_amps, which allows at most 34.5");
        for factor in [0.0, -0.5, 1.5] {
            let torn = PlateSpec { power_factor: Some(factor), ..bare.clone() };
            assert_eq!(told(torn), alloc::format!("power_factor must be from 0.05 to 1, not {factor:?}"));
        }
        let torn = PlateSpec { power_factor: Some(f64::NAN), ..bare };
        assert_eq!(told(torn), "power_factor must be a finite number");
        // A converter that would stop at more than it starts at.
        let details = alloc::vec![(Detail::StartVolts, 100.0), (Detail::StopVolts, 200.0)];
        let spec = PlateSpec { watts: Some(45.0), details, ..PlateSpec::new(Family::SwitchMode, 230.0) };
        let plate = Plate::from_spec(spec).expect("each in its own range");
        let refused = plate.load(Condition::Healthy, 1.0).expect_err("the two together");
        assert_eq!(
            refused.to_string(),
            "stop_volts of 200.0 V contradicts start_volts, which allows at most 100.0"
        );
    }

    #[test]
    fn a_heater_has_no_power_factor_but_one() {
        assert!(Plate::new(Family::Heater, 230.0, 1000.0, Some(0.8)).is_err());
        assert!(Plate::new(Family::Heater, 230.0, 1000.0, Some(1.0)).is_ok());
    }

    #[test]
    fn a_changed_default_is_checked_and_used() {
        let mut spec = PlateSpec { watts: Some(45.0), ..PlateSpec::new(Family::TransformerSupply, 230.0) };
        spec.details = alloc::vec![(Detail::CoreShare, 0.1)];
        assert_eq!(Plate::from_spec(spec.clone()).map(|plate| plate.detail(Detail::CoreShare)), Ok(0.1));
        spec.details = alloc::vec![(Detail::CoreShare, 7.0)];
        assert!(matches!(Plate::from_spec(spec.clone()), Err(InputError::DetailOutOfRange { .. })));
        spec.details = alloc::vec![(Detail::NoLoadShare, 0.1)];
        assert!(matches!(Plate::from_spec(spec), Err(InputError::Unknown { .. })));
    }

    #[test]
    fn every_condition_of_every_family_builds() {
        for family in Family::ALL {
            let plate = Plate::new(family, 230.0, 60.0, None).expect("a common plate");
            for &condition in family.conditions() {
                for share in [family.healthy_shares().0, 1.0, family.healthy_shares().1] {
                    let built = plate.load(condition, share);
                    assert!(built.is_ok(), "{} {}: {built:?}", family.name(), condition.name());
                }
            }
            for default in family.details() {
                assert!((default.low..=default.high).contains(&default.value), "{}", default.detail.name());
            }
        }
    }
}
