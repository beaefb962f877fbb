//! The meter: what its sheet says, as it is offered, typed, and kept on the phone.

use lampladder_core::quantity;
use lampladder_core::readings::{Meter, MeterSpec, Response};

use crate::draft::MeterPart;
use crate::format::Numerals;

/// Accuracies that cheap, usual and good meters have printed on their sheets for AC volts: per cent, digits, counts
/// (common practice, no source).
pub const METERS: [(f64, f64, f64); 3] = [(1.0, 5.0, 2000.0), (0.8, 3.0, 6000.0), (0.5, 3.0, 20_000.0)];

/// Per cent, digits and counts as one would type them.
pub(crate) fn written(spec: &MeterSpec, numerals: Numerals) -> [String; 3] {
    [spec.percent, spec.digits, spec.counts].map(|value| numerals.plain(value))
}

/// For texts that programs read.
pub(crate) const PLAIN: Numerals = Numerals { decimal: '.' };

/// A meter as it is kept on the phone: version, per cent, digits, counts, and `a` for an averaging one.
pub fn kept(spec: &MeterSpec) -> String {
    let [percent, digits, counts] = written(spec, PLAIN);
    let response = if spec.response == Response::Averaging { "a" } else { "t" };
    [String::from("1"), percent, digits, counts, String::from(response)].join(" ")
}

/// The meter back from that text; `None` for any other.
pub fn from_kept(text: &str) -> Option<MeterSpec> {
    let parts: Vec<&str> = text.split(' ').collect();
    let [version, percent, digits, counts, response] = parts[..] else { return None };
    let response = match (version, response) {
        ("1", "a") => Response::Averaging,
        ("1", "t") => Response::TrueRms,
        _ => return None,
    };
    let number = |text: &str, part: MeterPart| quantity::parse(text, part.field()).ok();
    let spec = MeterSpec {
        percent: number(percent, MeterPart::Percent)?,
        digits: number(digits, MeterPart::Digits)?,
        counts: number(counts, MeterPart::Counts)?,
        response,
    };
    Meter::new(spec).ok().map(|_| spec)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_meter_comes_back_from_what_is_kept() {
        for response in [Response::TrueRms, Response::Averaging] {
            let spec = MeterSpec { percent: 0.75, digits: 4.0, counts: 6000.0, response };
            assert_eq!(from_kept(&kept(&spec)), Some(spec));
        }
        for text in ["", "1", "2 1 5 2000 t", "1 0 5 2000 t", "1 1 5 2000 x", "1 1 5 2000 t t", "nonsense"] {
            assert_eq!(from_kept(text), None, "{text}");
        }
    }
}
