//! A lamp without a legible rating, from its cold resistance and one reading; and what measuring a lamp is worth.
//!
//! Cold resistance gives `V0^2/W0` over the ratio of hot to cold; how far the resistance has risen at a known voltage
//! gives how far that is below the rated one. Two measurements, two unknowns: every rating that is made is compared
//! with both, each with the spread of its kind.

use alloc::vec::Vec;
use core::fmt;

use serde::{Deserialize, Serialize};

use crate::band::{Band, COVERAGE};
use crate::calibrate::{COLD_OHMS_DEVIATION, POINT_DEVIATION};
use crate::error::{Field, InputError, within};
use crate::expect;
use crate::lamp::{Lamp, LampSpec, Point};

/// What is known of a lamp without a rating.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Evidence {
    /// Resistance of the cold lamp, ohms (0.01 to 1e5).
    pub cold_ohms: f64,
    /// Volts across it and amperes through it, measured together while it glows (0.1 to 500 V, 1e-4 to 100 A).
    pub point: Point,
    /// Its volts, where these can still be read (1 to 500).
    pub printed_volts: Option<f64>,
}

/// A rating that fits.
#[derive(Debug, Clone, PartialEq)]
pub struct Match {
    /// The lamp of that rating, calibrated by what was measured, ready for the stock.
    pub lamp: Lamp,
    /// How likely it is among the ratings that are made, 0 to 1; all together 1.
    pub weight: f64,
    /// Squared distance from the measurements in standard deviations; 1.4 in the middle of a true match.
    pub distance: f64,
}

/// Why no rating is named.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum IdentifyError {
    /// A number that has no meaning here.
    Input(InputError),
    /// The resistance fell as it heated: a carbon filament, or no filament at all. It does not limit.
    FallsAsItHeats {
        /// Hot over cold resistance.
        ratio: f64,
    },
    /// It was hardly warm: read again at a voltage at which it glows.
    TooDim {
        /// Hot over cold resistance.
        ratio: f64,
    },
    /// No rating that is made comes near.
    NoMatch {
        /// Squared distance of the nearest one, in standard deviations.
        distance: f64,
    },
}

impl From<InputError> for IdentifyError {
    fn from(error: InputError) -> Self {
        Self::Input(error)
    }
}

impl fmt::Display for IdentifyError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Input(error) => error.fmt(f),
            Self::FallsAsItHeats { ratio } => write!(
                f,
                "hot over cold resistance is {ratio:.2}: no tungsten filament, so it does not limit the current"
            ),
            Self::TooDim { ratio } => {
                write!(f, "hot over cold resistance is {ratio:.2}: read again where the lamp glows")
            }
            Self::NoMatch { .. } => f.write_str("no lamp that is made reads like this"),
        }
    }
}

impl core::error::Error for IdentifyError {}

/// A ratio below this is no error of a meter (the resistance of tungsten only rises).
const FALLS: f64 = 0.9;

/// Below this ratio, some 700 K and no glow, every rating of the same cold resistance reads alike.
const GLOWS: f64 = 2.0;

/// Squared distance that a true match exceeds once in a thousand (chi-squared of two, 0.999).
const NEVER: f64 = 13.8;

/// A match lighter than this is not worth a line.
const LEAST_WEIGHT: f64 = 0.01;

/// Volts for which lamps are or were made (IEC 60038 nominal voltages and those before it, vehicle batteries).
const VOLTS: [f64; 13] =
    [6.0, 12.0, 24.0, 36.0, 48.0, 100.0, 110.0, 120.0, 130.0, 200.0, 220.0, 230.0, 240.0];

/// Watts for which they are or were made: general, halogen and vehicle lamps (common practice, no source).
const WATTS: [f64; 28] = [
    1.2, 2.0, 3.0, 4.0, 5.0, 7.0, 10.0, 15.0, 18.0, 20.0, 21.0, 25.0, 28.0, 35.0, 40.0, 42.0, 50.0, 53.0,
    55.0, 60.0, 70.0, 75.0, 100.0, 150.0, 200.0, 300.0, 500.0, 1000.0,
];

/// The ratings that fit what was measured, the likeliest first.
///
/// Accuracy: sizes a quarter apart are told apart, 25 and 28 W hardly; 220, 230 and 240 V lamps of about the same watts are not, and
/// stand side by side with honest weights. It makes no odds to a bank which of them is taken, since each is calibrated
/// by the same measurements.
///
/// # Errors
/// A number out of range; a resistance that falls as it heats; a reading without glow; nothing that comes near.
pub fn identify(evidence: &Evidence) -> Result<Vec<Match>, IdentifyError> {
    let cold_ohms = within(Field::ColdOhms, evidence.cold_ohms, 0.01, 1e5)?;
    let volts = within(Field::Volts, evidence.point.volts, 0.1, 500.0)?;
    let amps = within(Field::Amps, evidence.point.amps, 1e-4, 100.0)?;
    let printed = evidence
        .printed_volts
        .map(|volts| within(Field::Volts, volts, Lamp::VOLTS.0, Lamp::VOLTS.1))
        .transpose()?;
    let ratio = volts / amps / cold_ohms;
    if ratio < FALLS {
        return Err(IdentifyError::FallsAsItHeats { ratio });
    }
    if ratio < GLOWS {
        return Err(IdentifyError::TooDim { ratio });
    }
    let made: &[f64] = printed.as_ref().map_or(&VOLTS, core::slice::from_ref);
    let mut nearest = f64::INFINITY;
    let mut found: Vec<Match> = Vec::new();
    for &rated_volts in made.iter().filter(|&&rated| volts <= 1.3 * rated) {
        for watts in WATTS {
            let guess = Lamp::new(rated_volts, watts)?;
            let (distance, density) = compare(&guess, cold_ohms, evidence.point);
            nearest = nearest.min(distance);
            if distance > NEVER {
                continue;
            }
            let spec = LampSpec {
                volts: rated_volts,
                watts,
                cold_ohms: Some(cold_ohms),
                points: alloc::vec![evidence.point],
                ..LampSpec::default()
            };
            // What the lamp's own checks refuse is no match either.
            if let Ok(lamp) = Lamp::from_spec(spec) {
                found.push(Match { lamp, weight: density, distance });
            }
        }
    }
    if found.is_empty() {
        return Err(IdentifyError::NoMatch { distance: nearest });
    }
    weigh(&mut found);
    found.sort_by(|a, b| b.weight.total_cmp(&a.weight));
    found.retain(|one| one.weight >= LEAST_WEIGHT);
    weigh(&mut found);
    Ok(found)
}

/// Makes the weights one together.
fn weigh(found: &mut [Match]) {
    let total: f64 = found.iter().map(|one| one.weight).sum();
    for one in found {
        one.weight /= total;
    }
}

/// Squared distance of the measurements from a lamp of one rating, and their density there.
fn compare(lamp: &Lamp, cold_ohms: f64, point: Point) -> (f64, f64) {
    let predict = |lamp: &Lamp| [libm::log(lamp.cold_ohms()), libm::log(lamp.at_volts(point.volts).amps)];
    let here = predict(lamp);
    // Covariance of the two logarithms: the meters', and each way in which lamps of one rating differ.
    let mut covariance =
        [[COLD_OHMS_DEVIATION * COLD_OHMS_DEVIATION, 0.0], [0.0, POINT_DEVIATION * POINT_DEVIATION]];
    let mut cause = |moved: [f64; 2]| {
        for row in 0..2 {
            for column in 0..2 {
                covariance[row][column] += moved[row] * moved[column];
            }
        }
    };
    for pair in 0..3 {
        let (up, down) = (predict(&lamp.variant(2 * pair)), predict(&lamp.variant(2 * pair + 1)));
        cause([0.5 * (up[0] - down[0]), 0.5 * (up[1] - down[1])]);
    }
    for table in 6..Lamp::VARIANTS {
        let other = predict(&lamp.variant(table));
        // The tables' disagreement stands for 95 % elsewhere too.
        cause([(other[0] - here[0]) / COVERAGE, (other[1] - here[1]) / COVERAGE]);
    }
    let [[a, b], [_, d]] = covariance;
    let determinant = (a * d - b * b).max(f64::MIN_POSITIVE);
    let off = [libm::log(cold_ohms) - here[0], libm::log(point.amps) - here[1]];
    let distance = (d * off[0] * off[0] - 2.0 * b * off[0] * off[1] + a * off[1] * off[1]) / determinant;
    (distance, libm::exp(-0.5 * distance) / libm::sqrt(determinant))
}

/// A lamp's 95 % band of current at one voltage, before and after it was measured.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Shrinkage {
    /// By its printed rating alone, amperes.
    pub before: Band,
    /// With what was measured on it, amperes.
    pub after: Band,
}

impl Shrinkage {
    /// Width of the band after over the width before.
    pub fn ratio(&self) -> f64 {
        let width = |band: &Band| band.high - band.low;
        width(&self.after) / width(&self.before)
    }
}

/// How much calibration narrows what a lamp is predicted to pass at `volts` (1e-3 of its rating to 1.3 times it).
///
/// # Errors
/// [`Field::Volts`] not finite or out of range.
pub fn shrinkage(lamp: &Lamp, volts: f64) -> Result<Shrinkage, InputError> {
    let rated = lamp.rated_volts();
    let volts = within(Field::Volts, volts, 1e-3 * rated, 1.3 * rated)?;
    let printed = LampSpec { cold_ohms: None, points: Vec::new(), ..lamp.spec().clone() };
    Ok(Shrinkage {
        before: expect::lamp_amps(&Lamp::from_spec(printed)?, volts),
        after: expect::lamp_amps(lamp, volts),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(lamp: &Lamp, volts: f64) -> Evidence {
        let point = Point { volts, amps: lamp.at_volts(volts).amps };
        Evidence { cold_ohms: lamp.cold_ohms(), point, printed_volts: None }
    }

    #[test]
    fn a_lamp_is_known_by_its_watts_at_any_glowing_voltage() {
        for (rated, watts) in [(230.0, 25.0), (230.0, 60.0), (230.0, 100.0), (120.0, 60.0), (12.0, 21.0)] {
            let lamp = Lamp::new(rated, watts).expect("a lamp");
            for share in [0.15, 0.5, 0.95] {
                let found = identify(&read(&lamp, share * rated)).expect("a match");
                let total: f64 = found.iter().map(|one| one.weight).sum();
                assert!((total - 1.0).abs() < 1e-9);
                // The rating itself, or one that no meter can tell from it.
                let itself = found
                    .iter()
                    .position(|one| (one.lamp.rated_volts(), one.lamp.rated_watts()) == (rated, watts));
                assert!(itself.is_some(), "{rated} V {watts} W at {share}: {found:?}");
                let nearly = &found[0].lamp;
                assert!((nearly.rated_watts() / watts - 1.0).abs() < 0.2, "{} W", nearly.rated_watts());
                let amps = nearly.at_volts(0.8 * rated).amps;
                assert!((amps / lamp.at_volts(0.8 * rated).amps - 1.0).abs() < 0.05);
            }
            let known = Evidence { printed_volts: Some(rated), ..read(&lamp, 0.5 * rated) };
            let found = identify(&known).expect("a match");
            assert_eq!(found[0].lamp.rated_watts(), watts);
            // The next sizes, 28 W beside 25 W or 20 W beside 21 W, share the weight; nothing farther off does.
            let near = |one: &&Match| (one.lamp.rated_watts() / watts - 1.0).abs() < 0.2;
            assert!(found.iter().filter(near).map(|one| one.weight).sum::<f64>() > 0.95, "{watts} W");
        }
    }

    #[test]
    fn what_is_no_tungsten_lamp_is_refused() {
        let point = Point { volts: 100.0, amps: 0.2 };
        let carbon = Evidence { cold_ohms: 1000.0, point, printed_volts: None };
        assert!(matches!(identify(&carbon), Err(IdentifyError::FallsAsItHeats { .. })));
        let dim = Evidence { cold_ohms: 400.0, ..carbon };
        assert!(matches!(identify(&dim), Err(IdentifyError::TooDim { .. })));
        let odd = Evidence { cold_ohms: 1.0, ..carbon };
        assert!(matches!(identify(&odd), Err(IdentifyError::NoMatch { .. })));
        let nothing = Evidence { cold_ohms: f64::NAN, ..carbon };
        assert!(matches!(identify(&nothing), Err(IdentifyError::Input(_))));
    }

    #[test]
    fn measuring_a_lamp_narrows_its_band() {
        let plain = Lamp::new(230.0, 60.0).expect("a lamp");
        let spec = LampSpec {
            cold_ohms: Some(plain.cold_ohms()),
            points: alloc::vec![Point { volts: 40.0, amps: plain.at_volts(40.0).amps }],
            ..plain.spec().clone()
        };
        let measured = Lamp::from_spec(spec).expect("the same lamp");
        let there = shrinkage(&measured, 40.0).expect("in range");
        assert!(there.ratio() < 0.6, "{}", there.ratio());
        assert_eq!(shrinkage(&plain, 40.0).map(|same| same.ratio()), Ok(1.0));
        assert!(shrinkage(&plain, 1000.0).is_err());
    }
}
