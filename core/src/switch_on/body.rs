//! A piece of hot tungsten in the time domain: resistance, heat lost and heat capacity against temperature.
//!
//! A simulated second asks for these some ten thousand times, so one cubic per 50 K is laid through the curve of
//! [`Filament`] and the heat capacity of its wire beforehand. It meets them in value and slope every 50 K; between,
//! it departs from the resistance by nothing (that is such a cubic itself) and from the heat lost by less than 5e-6
//! of the rated watts, which is less than 0.01 K.

use alloc::vec::Vec;

use crate::filament::Filament;
use crate::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN, heat_capacity};
use crate::wire::Wire;

/// What a filament is at one temperature.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Heat {
    /// Resistance, ohms.
    pub(super) ohms: f64,
    /// Heat given off, watts.
    pub(super) lost_watts: f64,
    /// Heat capacity, joule per kelvin.
    pub(super) joules_per_kelvin: f64,
}

/// A filament with its thermal mass.
#[derive(Debug, Clone)]
pub(super) struct Body {
    rows: Vec<Row>,
}

/// Cubics in the share of one row, constant term first.
#[derive(Debug, Clone, Copy)]
struct Row {
    ohms: Cubic,
    lost_watts: Cubic,
    joules_per_kelvin: Cubic,
    /// Heat stored above ambient at the start of the row, joule.
    stored_joules: f64,
}

type Cubic = [f64; 4];

const STEP_KELVIN: f64 = 50.0;
const ROWS: u32 = 66;

impl Body {
    /// The filament's own wire.
    pub(super) fn of(filament: &Filament) -> Self {
        Self::with_mass(filament, Wire::of(filament).kilograms())
    }

    /// The filament with so much mass that it stores `joules` at its rating: heaters in their cathodes.
    pub(super) fn storing(filament: &Filament, joules: f64) -> Self {
        let unit = Self::with_mass(filament, 1.0).stored_joules(filament.shape().kelvin);
        Self::with_mass(filament, joules / unit)
    }

    /// The filament with `kilograms` of tungsten to heat.
    fn with_mass(filament: &Filament, kilograms: f64) -> Self {
        let mut start = Node::at(filament, kilograms, 0.0);
        let mut stored_joules = 0.0;
        let rows = (1..=ROWS).map(|row| {
            let end = Node::at(filament, kilograms, STEP_KELVIN * f64::from(row));
            let joules_per_kelvin = through(start.joules_per_kelvin, end.joules_per_kelvin);
            let row = Row {
                ohms: through(start.ohms, end.ohms),
                lost_watts: through(start.lost_watts, end.lost_watts),
                joules_per_kelvin,
                stored_joules,
            };
            stored_joules += STEP_KELVIN * integral(&joules_per_kelvin, 1.0);
            start = end;
            row
        });
        Self { rows: rows.collect() }
    }

    /// The filament at a temperature, kelvin. Outside 300 to 3600 K the end rows continue, so that a solver may try.
    pub(super) fn at(&self, kelvin: f64) -> Heat {
        let (row, share) = self.row(kelvin);
        Heat {
            ohms: value(&row.ohms, share),
            lost_watts: value(&row.lost_watts, share),
            joules_per_kelvin: value(&row.joules_per_kelvin, share),
        }
    }

    /// Heat stored above ambient, joule.
    pub(super) fn stored_joules(&self, kelvin: f64) -> f64 {
        let (row, share) = self.row(kelvin);
        row.stored_joules + STEP_KELVIN * integral(&row.joules_per_kelvin, share)
    }

    fn row(&self, kelvin: f64) -> (&Row, f64) {
        // Far outside, a solver's trial must still see a positive resistance.
        let place =
            ((kelvin - AMBIENT_KELVIN) * (1.0 / STEP_KELVIN)).clamp(LEAST_PLACE, f64::from(ROWS) + 1.0);
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "negative places saturate at row 0, as they should"
        )]
        let index = (place as usize).min(self.rows.len() - 1);
        #[expect(clippy::cast_precision_loss, reason = "a row number below 66")]
        let share = place - index as f64;
        (&self.rows[index], share)
    }
}

/// A little below ambient, in rows: how far a solver's trial may follow the first row downwards.
const LEAST_PLACE: f64 = -0.5;

/// The hottest a filament may become, kelvin.
pub(super) const MELTS_KELVIN: f64 = HIGHEST_KELVIN;

/// Values and slopes (per row) at one end of a row.
struct Node {
    ohms: [f64; 2],
    lost_watts: [f64; 2],
    joules_per_kelvin: [f64; 2],
}

impl Node {
    fn at(filament: &Filament, kilograms: f64, rise: f64) -> Self {
        /// Short enough for a slope's own error to vanish beside the cubic's, long enough for its rounding.
        const NUDGE: f64 = 0.01;
        // Logarithmic slopes need a rise; the resistance and heat of this one are those of none.
        let point = filament.at_rise(rise.max(1e-6));
        let (volts_slope, amps_slope) = (point.volts_slope(), point.amps_slope());
        let per_row = STEP_KELVIN / point.rise;
        // Into the row, or at the end of the last one out of it: nothing lies beyond.
        let nudge = if rise > 0.0 { -NUDGE } else { NUDGE };
        let heat = |rise: f64| kilograms * heat_capacity(AMBIENT_KELVIN + rise);
        let growth = 4.0 * heat(rise + nudge) - 3.0 * heat(rise) - heat(rise + 2.0 * nudge);
        Self {
            ohms: [point.ohms, point.ohms * (volts_slope - amps_slope) * per_row],
            lost_watts: [
                if rise > 0.0 { point.watts } else { 0.0 },
                point.watts * (volts_slope + amps_slope) * per_row,
            ],
            joules_per_kelvin: [heat(rise), growth / (2.0 * nudge) * STEP_KELVIN],
        }
    }
}

/// The cubic that has these values and slopes at the ends of a row.
fn through([y0, m0]: [f64; 2], [y1, m1]: [f64; 2]) -> Cubic {
    [y0, m0, 3.0 * (y1 - y0) - 2.0 * m0 - m1, m0 + m1 - 2.0 * (y1 - y0)]
}

fn value(cubic: &Cubic, share: f64) -> f64 {
    cubic[0] + share * (cubic[1] + share * (cubic[2] + share * cubic[3]))
}

/// From 0 to `share`, in shares.
fn integral(cubic: &Cubic, share: f64) -> f64 {
    share * (cubic[0] + share * (cubic[1] / 2.0 + share * (cubic[2] / 3.0 + share * cubic[3] / 4.0)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::lamp::Lamp;

    #[test]
    fn the_cubics_follow_the_curve() {
        for (volts, watts) in [(230.0, 100.0), (120.0, 60.0), (230.0, 15.0), (12.0, 21.0)] {
            let lamp = Lamp::new(volts, watts).expect("a stock size");
            let wire = Wire::of(lamp.filament());
            let body = Body::of(lamp.filament());
            let mut worst: f64 = 0.0;
            for tenth in 0..=33_000 {
                let rise = 0.1 * f64::from(tenth);
                let (exact, quick) = (lamp.filament().at_rise(rise), body.at(300.0 + rise));
                assert!((quick.ohms / exact.ohms - 1.0).abs() < 1e-7, "{rise}");
                // At 3600 K five times the rating is lost; the error is bounded against what is lost there too.
                let size = watts.max(exact.watts);
                worst = worst.max((quick.lost_watts - exact.watts).abs() / size);
                let heat = wire.joules_per_kelvin(300.0 + rise);
                assert!((quick.joules_per_kelvin / heat - 1.0).abs() < 1e-7, "{rise}");
            }
            assert!(worst < 5e-6, "{volts} V {watts} W: {worst}");
        }
    }

    #[test]
    fn stored_heat_is_the_sum_of_the_capacity() {
        let body = Body::of(Lamp::new(230.0, 60.0).expect("a stock size").filament());
        let step = 0.5;
        let mut sum = 0.0;
        for half in 0..5000 {
            sum += step * body.at(300.0 + step * (f64::from(half) + 0.5)).joules_per_kelvin;
        }
        assert!((body.stored_joules(2800.0) / sum - 1.0).abs() < 1e-6);
    }
}
