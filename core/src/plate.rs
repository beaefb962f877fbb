//! What the equipment's rating plate says, and the load that follows from it in each condition.

use crate::error::{Field, InputError, within};
use crate::load::{Impedance, Load, Transformer, TransformerSpec};
use crate::roots::{self, Tolerance};

/// A kind of equipment, by what it does to the circuit.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Family {
    /// A resistor: kettle, iron, soldering iron, hotplate.
    Heater,
    /// A mains transformer, rectifier and reservoir: most radios and amplifiers.
    TransformerSupply,
    /// Anything of which only volts, watts and power factor are known.
    Plain,
}

impl Family {
    /// Every family.
    pub const ALL: [Self; 3] = [Self::TransformerSupply, Self::Heater, Self::Plain];

    /// The family's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Heater => "heater",
            Self::TransformerSupply => "transformer-supply",
            Self::Plain => "plain",
        }
    }

    /// Least and greatest power of a healthy one over the plate's.
    ///
    /// Heaters: -10 % to +5 % (the usual limits of appliance standards, from memory). The rest: a plate states the
    /// most that is drawn, so 30 % below to 10 % above (design value, no source).
    pub const fn healthy_shares(self) -> (f64, f64) {
        match self {
            Self::Heater => (0.90, 1.05),
            Self::TransformerSupply | Self::Plain => (0.7, 1.1),
        }
    }

    /// The conditions that this family can be in, likeliest first.
    pub const fn conditions(self) -> &'static [Condition] {
        &[Condition::Healthy, Condition::Overloaded, Condition::Shorted]
    }

    /// Usual power factor at full voltage, where the plate prints none (`equipment behaviour`, published second
    /// hand for resistors, from memory for the rest).
    pub const fn usual_power_factor(self) -> f64 {
        match self {
            Self::Heater => 1.0,
            Self::TransformerSupply => 0.7,
            Self::Plain => 0.9,
        }
    }
}

/// What state the equipment is in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Condition {
    /// It takes what its plate says.
    Healthy,
    /// It takes three times what its plate says.
    Overloaded,
    /// Its two input wires are joined.
    Shorted,
}

impl Condition {
    /// Every condition.
    pub const ALL: [Self; 3] = [Self::Healthy, Self::Overloaded, Self::Shorted];

    /// The condition's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Healthy => "healthy",
            Self::Overloaded => "overloaded",
            Self::Shorted => "shorted",
        }
    }
}

/// How many times the plate's power an overloaded set takes at full voltage.
pub const OVERLOAD: f64 = 3.0;

/// A rating plate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Plate {
    family: Family,
    volts: f64,
    watts: f64,
    power_factor: Option<f64>,
}

impl Plate {
    /// Allowed plate volts.
    pub const VOLTS: (f64, f64) = (1.0, 500.0);
    /// Allowed plate watts.
    pub const WATTS: (f64, f64) = (0.5, 20_000.0);
    /// Allowed power factors.
    pub const POWER_FACTOR: (f64, f64) = (0.05, 1.0);

    /// A plate with `volts` (1 to 500 V), `watts` (0.5 W to 20 kW) and, where printed, a power factor (0.05 to 1).
    ///
    /// # Errors
    /// The first property that is not finite or out of range; a heater with a power factor other than 1.
    pub fn new(
        family: Family,
        volts: f64,
        watts: f64,
        power_factor: Option<f64>,
    ) -> Result<Self, InputError> {
        let volts = within(Field::Volts, volts, Self::VOLTS.0, Self::VOLTS.1)?;
        let watts = within(Field::Watts, watts, Self::WATTS.0, Self::WATTS.1)?;
        let lowest = if matches!(family, Family::Heater) { 1.0 } else { Self::POWER_FACTOR.0 };
        let power_factor = power_factor
            .map(|value| within(Field::PowerFactor, value, lowest, Self::POWER_FACTOR.1))
            .transpose()?;
        Ok(Self { family, volts, watts, power_factor })
    }

    /// The kind of equipment.
    pub const fn family(&self) -> Family {
        self.family
    }

    /// Plate volts.
    pub const fn volts(&self) -> f64 {
        self.volts
    }

    /// Plate watts.
    pub const fn watts(&self) -> f64 {
        self.watts
    }

    /// Printed power factor.
    pub const fn power_factor(&self) -> Option<f64> {
        self.power_factor
    }

    /// The load in a condition, taking `share` of the plate's power at the plate's voltage (1 for the plate itself).
    ///
    /// # Errors
    /// A number that the family cannot take; none for the shares of [`Family::healthy_shares`].
    pub fn load(&self, condition: Condition, share: f64) -> Result<Load, InputError> {
        match condition {
            Condition::Healthy => self.drawing(share * self.watts),
            Condition::Overloaded => self.drawing(share * OVERLOAD * self.watts),
            Condition::Shorted => Ok(Load::Short),
        }
    }

    fn drawing(&self, watts: f64) -> Result<Load, InputError> {
        let power_factor = self.power_factor.unwrap_or(self.family.usual_power_factor());
        match self.family {
            Family::Heater => Impedance::from_rating(self.volts, watts, 1.0).map(Load::Impedance),
            Family::Plain => Impedance::from_rating(self.volts, watts, power_factor).map(Load::Impedance),
            Family::TransformerSupply => {
                transformer_supply(self.volts, self.watts, watts).map(Load::Transformer)
            }
        }
    }
}

/// A transformer built for `built_watts` whose DC side takes what makes the whole take `watts` at rated volts.
///
/// Class defaults, referred to the primary (design values, no source): magnetising current a quarter of the rated
/// watts over volts, core loss 5 % of the rated watts, windings that drop 6 % at rated watts, diodes 1 % of the
/// crest, a reservoir that discharges in 0.1 s.
fn transformer_supply(volts: f64, built_watts: f64, watts: f64) -> Result<Transformer, InputError> {
    let rated_ohms = volts * volts / built_watts;
    let with_draw = |draw_ohms: f64| {
        Transformer::new(TransformerSpec {
            rated_volts: volts,
            magnetising_amps: 0.25 * built_watts / volts,
            core_ohms: rated_ohms / 0.05,
            winding_ohms: 0.06 * rated_ohms,
            diode_volts: 0.01 * volts,
            farads: 0.1 / draw_ohms,
            draw_ohms,
        })
    };
    let guess = libm::log(1.7 * volts * volts / watts);
    let found = roots::decreasing_from(
        |ln_ohms| {
            let taken = with_draw(libm::exp(ln_ohms)).map_or(f64::NAN, |set| set.watts_at(volts));
            libm::log(taken / watts)
        },
        (guess - 5.0, guess + 5.0),
        guess,
        Tolerance { x: 1e-10, residual: 1e-10 },
    );
    with_draw(libm::exp(found.map_or(guess, |root| root.x)))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_transformer_set_takes_its_plate_watts_at_full_voltage() {
        let plate = Plate::new(Family::TransformerSupply, 230.0, 45.0, None).expect("a radio");
        for share in [0.7, 1.0, 1.1, 3.0] {
            let condition = Condition::Healthy;
            let Ok(Load::Transformer(set)) = plate.load(condition, share) else { panic!("a transformer") };
            assert!((set.watts_at(230.0) / (45.0 * share) - 1.0).abs() < 1e-6, "{share}");
        }
    }

    #[test]
    fn a_heater_has_no_power_factor_but_one() {
        assert!(Plate::new(Family::Heater, 230.0, 1000.0, Some(0.8)).is_err());
        assert!(Plate::new(Family::Heater, 230.0, 1000.0, Some(1.0)).is_ok());
    }
}
