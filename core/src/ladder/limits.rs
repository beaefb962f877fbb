//! What a ladder must keep to: design values, each of which the person can change.

use serde::{Deserialize, Serialize};

use crate::error::{Field, InputError, within};
use crate::plate::Plate;
use crate::supply::Supply;

/// The numbers behind [`Limits`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LimitsSpec {
    /// Short-circuit current of the first rung over the plate's current (0.05 to 5).
    ///
    /// Default 1: the lead, switch, fuse and windings of the equipment carry the plate's current for as long as it is
    /// on, so they carry it too when a short is all that is left (design value; the trade's rule of a lamp of about
    /// the equipment's own watts says the same: common practice, no source).
    pub first_share: f64,
    /// Supply volts times short-circuit current that any equipment stands, watts (1 to 200).
    ///
    /// Default 26, the smallest ordinary lamp and its tolerance: at most 37 % of it, 10 W, can ever turn into heat
    /// in the equipment (the greatest product of load voltage and current along a lamp's curve; design value).
    pub first_least_watts: f64,
    /// Supply volts times short-circuit current that no first rung exceeds, watts (1 to 5000).
    ///
    /// Default 105, a 100 W lamp and its tolerance: a fault sits in one part of large equipment, and that part stands
    /// less than the whole (design value; common practice, no source).
    pub first_most_watts: f64,
    /// Short-circuit current of a rung over that of the one before (1.1 to 10).
    ///
    /// Default 2.2: "about twice", with room for two lamps after one of them, 4 % + 0.5 W of tolerance each
    /// (IEC 60064, from memory).
    pub growth: f64,
    /// How far the supply may rise above its volts, over these (0 to 0.25).
    ///
    /// Default 0.10 (IEC 60038, published second hand).
    pub supply_rise: f64,
    /// How far a lamp may be driven above its printed volts, with the supply risen, over these (0 to 0.3).
    ///
    /// Default 0.15: life goes with the -12th to -16th power of the voltage ([`crate::expect::LIFE_EXPONENTS`]), so
    /// a lamp for 1,000 hours keeps at least 100, and a bring-up takes minutes; it lets lamps for 220 V stand on
    /// 230 V and lamps for 230 V on 240 V (design value).
    pub lamp_overvoltage: f64,
    /// Watts of one lamp that its holder stands (5 to 5000).
    ///
    /// Default 100: what is marked on common holders for the large Edison screw and the bayonet cap runs from 60 to
    /// 100 W (common practice, no source).
    pub holder_watts: f64,
    /// Differences of the equipment's voltage that nobody can tell, over the supply's (0 to 0.1).
    ///
    /// Default 0.01, the class of a fair meter: among banks that come this close to the closest, the simplest and
    /// weakest is taken, since every ampere more is protection given away (design value).
    pub close_share: f64,
    /// Least voltage worth having at healthy equipment, over the supply's (0 to 0.95).
    ///
    /// Default 0.5: below, the bank keeps more than half for itself and a healthy set lights it nearly as a shorted
    /// one does (design value).
    pub least_share: f64,
}

impl Default for LimitsSpec {
    fn default() -> Self {
        Self {
            first_share: 1.0,
            first_least_watts: 26.0,
            first_most_watts: 105.0,
            growth: 2.2,
            supply_rise: 0.10,
            lamp_overvoltage: 0.15,
            holder_watts: 100.0,
            close_share: 0.01,
            least_share: 0.5,
        }
    }
}

/// Limits that make sense.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Limits {
    spec: LimitsSpec,
}

/// Where the limit of the first rung comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum FirstFrom {
    /// The plate's current, times [`LimitsSpec::first_share`].
    Plate,
    /// [`LimitsSpec::first_least_watts`]: the plate's is less still.
    Least,
    /// [`LimitsSpec::first_most_watts`]: the plate's is more still.
    Most,
}

impl FirstFrom {
    /// The origin's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Plate => "plate",
            Self::Least => "least",
            Self::Most => "most",
        }
    }
}

/// The greatest short-circuit current of a first rung.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct FirstLimit {
    /// Amperes.
    pub amps: f64,
    /// Which rule set it.
    pub from: FirstFrom,
}

impl Limits {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first that is not finite or out of range; a least first rung above the most.
    pub fn new(spec: LimitsSpec) -> Result<Self, InputError> {
        within(Field::FirstShare, spec.first_share, 0.05, 5.0)?;
        within(Field::FirstLeastWatts, spec.first_least_watts, 1.0, 200.0)?;
        within(Field::FirstMostWatts, spec.first_most_watts, 1.0, 5000.0)?;
        within(Field::Growth, spec.growth, 1.1, 10.0)?;
        within(Field::SupplyRise, spec.supply_rise, 0.0, 0.25)?;
        within(Field::LampOvervoltage, spec.lamp_overvoltage, 0.0, 0.3)?;
        within(Field::HolderWatts, spec.holder_watts, 5.0, 5000.0)?;
        within(Field::CloseShare, spec.close_share, 0.0, 0.1)?;
        within(Field::LeastShare, spec.least_share, 0.0, 0.95)?;
        if spec.first_least_watts > spec.first_most_watts {
            return Err(InputError::Conflict {
                field: Field::FirstLeastWatts,
                value: spec.first_least_watts,
                with: Field::FirstMostWatts,
                limit: spec.first_most_watts,
            });
        }
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &LimitsSpec {
        &self.spec
    }

    /// The greatest current that a first rung may pass into a dead short, amperes.
    ///
    /// The plate's current times [`LimitsSpec::first_share`], held between [`LimitsSpec::first_least_watts`] and
    /// [`LimitsSpec::first_most_watts`] over the supply's volts. A reading across the plug alone is no rating: without
    /// printed watts the least counts.
    pub fn first(&self, supply: &Supply, plate: &Plate) -> FirstLimit {
        let (least, most) = (self.spec.first_least_watts, self.spec.first_most_watts);
        let (least, most) = (least / supply.volts(), most / supply.volts());
        let amps = self.spec.first_share * plate.rated_amps();
        if amps <= least {
            FirstLimit { amps: least, from: FirstFrom::Least }
        } else if amps >= most {
            FirstLimit { amps: most, from: FirstFrom::Most }
        } else {
            FirstLimit { amps, from: FirstFrom::Plate }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::family::Family;

    #[test]
    fn the_first_rung_follows_the_plate_between_its_ends() {
        let supply = Supply::new(230.0, 50.0, 0.0).expect("a mains");
        let first = |watts| {
            let plate = Plate::new(Family::Plain, 230.0, watts, Some(1.0)).expect("a plate");
            Limits::default().first(&supply, &plate)
        };
        assert_eq!(first(46.0), FirstLimit { amps: 0.2, from: FirstFrom::Plate });
        assert_eq!(first(5.0), FirstLimit { amps: 26.0 / 230.0, from: FirstFrom::Least });
        assert_eq!(first(900.0), FirstLimit { amps: 105.0 / 230.0, from: FirstFrom::Most });
    }

    #[test]
    fn limits_that_contradict_or_have_no_meaning_are_refused() {
        let spec = LimitsSpec::default();
        assert_eq!(Limits::new(spec), Ok(Limits::default()));
        let torn = LimitsSpec { first_most_watts: 20.0, ..spec };
        assert!(matches!(Limits::new(torn), Err(InputError::Conflict { .. })));
        for wrong in [
            LimitsSpec { growth: 1.0, ..spec },
            LimitsSpec { holder_watts: -60.0, ..spec },
            LimitsSpec { least_share: f64::NAN, ..spec },
        ] {
            assert!(Limits::new(wrong).is_err(), "{wrong:?}");
        }
    }
}
