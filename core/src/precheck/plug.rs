//! Resistance across the plug, equipment switched on and unplugged: what an ohmmeter shows of healthy equipment, of a
//! shorted input and of a broken path.
//!
//! An ohmmeter works with direct current and little voltage: it sees a transformer's copper but not its reactance, a
//! rectifier as open, a filament or a heater string cold. Each family says which of these is in its way. The ranges
//! are wide, as equipment of one family differs, and they may overlap: then the reading does not tell, and
//! [`judge`] names all that it allows.

use alloc::vec::Vec;

use serde::{Deserialize, Serialize};

use crate::detail::{Detail, Standing};
use crate::error::{Field, InputError, within};
use crate::family::Family;
use crate::lamp::Lamp;
use crate::plate::Plate;

/// What an ohmmeter's current takes its way through.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Path {
    /// The copper of a transformer's primary.
    Primary,
    /// The copper of a motor, and its brushes where it has them.
    Motor,
    /// A string of cold valve heaters.
    ColdHeaters,
    /// A heating element, a few per cent below its hot resistance.
    Element,
    /// A cold filament.
    ColdFilament,
    /// A degauss coil and its cold thermistor: a healthy set reads low.
    Degauss,
    /// A rectifier, which an ohmmeter sees as open, with a discharge resistor beside it: a healthy supply reads as a
    /// broken path does.
    Rectifier,
    /// What was measured before.
    Measured,
    /// Nothing is known of it.
    Unknown,
}

/// What a resistance means.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum PlugFinding {
    /// As healthy equipment reads.
    Healthy,
    /// The two input wires are joined, before or behind the fuse.
    ShortedInput,
    /// No path: an open fuse, a broken lead, a switch that is off.
    OpenPath,
}

/// A range of readings that means something.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct PlugRange {
    /// What it means.
    pub finding: PlugFinding,
    /// What the meter's current goes through.
    pub path: Path,
    /// Least reading, ohms.
    pub low_ohms: f64,
    /// Greatest reading, ohms; infinite where the meter shows over-range.
    pub high_ohms: f64,
    /// How the range is known.
    pub standing: Standing,
}

/// What a reading allows.
#[derive(Debug, Clone, PartialEq)]
pub struct PlugReading {
    /// Every finding whose range holds it, healthy first; several where it does not tell, none
    /// where it lies between them.
    pub findings: Vec<PlugFinding>,
    /// Whether it lies below everything that healthy equipment reads: something takes more than it should.
    pub below_healthy: bool,
    /// Whether it lies above: a bad contact, or a part of the path is missing.
    pub above_healthy: bool,
}

/// What leads, plug and meter leave of a dead short, ohms: 3 m of 0.75 mm² copper there and back are 0.15 ohm, cheap
/// meter leads as much again and their contacts the rest (design value).
const SHORT_OHMS: f64 = 1.0;

/// What damp, dust and discharge resistors leave of a broken path, ohms (design value).
const OPEN_OHMS: f64 = 200e3;

/// How far copper of one family differs either way, as a factor: winding shares are design values.
const COPPER: f64 = 3.0;

/// Part of a transformer's winding resistance, all referred to the primary, that the primary itself has: copper is
/// shared out evenly between the sides (common practice, no source).
const PRIMARY_PART: f64 = 0.5;

/// Cold over hot resistance of valve heaters (derived from tungsten at 1200 to 1500 K).
const COLD_HEATERS: (f64, f64) = (0.14, 0.20);

/// Cold over hot resistance of a heating element of nichrome (common practice, no source).
const COLD_ELEMENT: (f64, f64) = (0.90, 1.0);

/// Degauss coil and cold thermistor, ohms: the thermistor is 7 to 14 (published second hand, 220 V types), the coil as
/// much again (design value).
const DEGAUSS_OHMS: (f64, f64) = (7.0, 60.0);

/// The readings to expect across the plug.
///
/// Always three ranges, in the order healthy, shorted input, open path.
///
/// # Errors
/// A plate of the family [`Family::Lamp`] that is no lamp.
pub fn across_plug(plate: &Plate) -> Result<[PlugRange; 3], InputError> {
    let (path, (low_ohms, high_ohms), standing) = healthy(plate)?;
    let range =
        |finding, (low_ohms, high_ohms), standing| PlugRange { finding, path, low_ohms, high_ohms, standing };
    Ok([
        range(PlugFinding::Healthy, (low_ohms, high_ohms), standing),
        range(PlugFinding::ShortedInput, (0.0, shorted_ohms(plate)), Standing::Design),
        range(PlugFinding::OpenPath, (OPEN_OHMS, f64::INFINITY), Standing::Design),
    ])
}

/// What a reading (0 ohm and up; infinite for over-range) allows, by the ranges of [`across_plug`].
///
/// # Errors
/// Below zero, or not a number.
pub fn judge(ranges: &[PlugRange], ohms: f64) -> Result<PlugReading, InputError> {
    // Over-range is a reading too.
    let ohms = if ohms == f64::INFINITY { ohms } else { within(Field::Ohms, ohms, 0.0, f64::MAX)? };
    let holds = |range: &&PlugRange| range.low_ohms <= ohms && ohms <= range.high_ohms;
    let healthy = ranges.iter().find(|range| range.finding == PlugFinding::Healthy);
    Ok(PlugReading {
        findings: ranges.iter().filter(holds).map(|range| range.finding).collect(),
        below_healthy: healthy.is_some_and(|range| ohms < range.low_ohms),
        above_healthy: healthy.is_some_and(|range| ohms > range.high_ohms),
    })
}

/// A short behind what limits the rush of current into a switch-mode supply reads as that does.
fn shorted_ohms(plate: &Plate) -> f64 {
    match plate.family() {
        Family::SwitchMode | Family::SwitchModeCorrected => {
            SHORT_OHMS + 2.0 * plate.detail(Detail::SeriesOhms).max(5.0)
        }
        _ => SHORT_OHMS,
    }
}

fn healthy(plate: &Plate) -> Result<(Path, (f64, f64), Standing), InputError> {
    let volts = plate.volts();
    // A plate of the family "measured" may print no watts; no other family gets here without.
    let rated_ohms = volts * volts / plate.watts().max(Plate::WATTS.0);
    let (least, most) = plate.family().healthy_shares();
    let around = |ohms: f64| (ohms / COPPER, ohms * COPPER);
    Ok(match plate.family() {
        Family::TransformerSupply | Family::ValveTransformer => {
            let copper = PRIMARY_PART * plate.detail(Detail::WindingShare) * rated_ohms;
            (Path::Primary, around(copper), Standing::Design)
        }
        Family::ValveSeries => {
            // The rectifier beside the string conducts one way at most, at more volts than the meter has.
            let hot = rated_ohms / plate.detail(Detail::HeaterShare);
            (Path::ColdHeaters, (COLD_HEATERS.0 * hot / most, COLD_HEATERS.1 * hot / least), Standing::Design)
        }
        Family::SwitchMode | Family::SwitchModeCorrected => {
            (Path::Rectifier, (OPEN_OHMS, f64::INFINITY), Standing::Design)
        }
        Family::CrtSet => (Path::Degauss, DEGAUSS_OHMS, Standing::Published),
        Family::UniversalMotor => {
            // A standing motor takes a multiple of its current: copper, brushes and reactance together, so that the
            // copper is at most that.
            let standing = plate.volts() / plate.rated_amps() / plate.detail(Detail::StallMultiple);
            (Path::Motor, around(standing), Standing::Design)
        }
        Family::InductionMotor => {
            // Half of the standing impedance is the stator's, 0.57 of that in phase.
            let standing = plate.volts() / plate.rated_amps() / plate.detail(Detail::StallMultiple);
            (Path::Motor, around(0.29 * standing), Standing::Design)
        }
        Family::Heater => {
            let range = (COLD_ELEMENT.0 * rated_ohms / most, COLD_ELEMENT.1 * rated_ohms / least);
            (Path::Element, range, Standing::Design)
        }
        Family::Lamp => {
            let lamp = Lamp::new(volts, plate.watts())?;
            let cold: [f64; Lamp::VARIANTS] = core::array::from_fn(|index| lamp.variant(index).cold_ohms());
            let fold = |start: f64, of: fn(f64, f64) -> f64| cold.into_iter().fold(start, of);
            let (low, high) = (fold(lamp.cold_ohms(), f64::min), fold(lamp.cold_ohms(), f64::max));
            // Twice one standard deviation either way.
            let cold = lamp.cold_ohms();
            (Path::ColdFilament, (2.0 * low - cold, 2.0 * high - cold), Standing::Published)
        }
        Family::Measured => {
            let ohms = plate.detail(Detail::MeasuredOhms);
            (Path::Measured, (ohms / most, ohms / least), Standing::Design)
        }
        Family::Plain => (Path::Unknown, (SHORT_OHMS, f64::INFINITY), Standing::Design),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn findings(family: Family, watts: f64, ohms: f64) -> Vec<PlugFinding> {
        let plate = Plate::new(family, 230.0, watts, None).expect("a plate");
        judge(&across_plug(&plate).expect("ranges"), ohms).expect("a reading").findings
    }

    #[test]
    fn a_radio_reads_its_copper() {
        assert_eq!(findings(Family::TransformerSupply, 45.0, 40.0), [PlugFinding::Healthy]);
        assert_eq!(findings(Family::TransformerSupply, 45.0, 0.4), [PlugFinding::ShortedInput]);
        assert_eq!(findings(Family::TransformerSupply, 45.0, f64::INFINITY), [PlugFinding::OpenPath]);
        assert_eq!(findings(Family::TransformerSupply, 45.0, 3e3), []);
    }

    #[test]
    fn what_does_not_tell_says_so() {
        // A charger reads open whether its fuse holds or not.
        let open = findings(Family::SwitchMode, 20.0, 1e6);
        assert_eq!(open, [PlugFinding::Healthy, PlugFinding::OpenPath]);
        // A picture-tube set reads a few ohms and is well.
        assert_eq!(findings(Family::CrtSet, 80.0, 20.0), [PlugFinding::Healthy]);
    }

    #[test]
    fn a_kettle_reads_its_element() {
        let plate = Plate::new(Family::Heater, 230.0, 2000.0, None).expect("a kettle");
        let ranges = across_plug(&plate).expect("ranges");
        let reading = judge(&ranges, 13.0).expect("a reading");
        assert!(reading.findings.is_empty() && reading.below_healthy && !reading.above_healthy);
        assert!(judge(&ranges, -1.0).is_err() && judge(&ranges, f64::NAN).is_err());
    }

    #[test]
    fn every_family_has_three_ranges_that_make_sense() {
        for family in Family::ALL {
            for watts in [0.5, 60.0, 2000.0] {
                let plate = Plate::new(family, 230.0, watts, None).expect("a plate");
                for range in across_plug(&plate).expect("ranges") {
                    assert!(range.low_ohms >= 0.0 && range.high_ohms > range.low_ohms, "{range:?}");
                }
            }
        }
    }
}
