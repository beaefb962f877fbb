//! A bridge rectifier and reservoir straight on the mains, and what draws from the reservoir.

use core::f64::consts::SQRT_2;

use super::conduction::Pulse;
use super::{FAR, Feed, Terminal};
use crate::error::{Field, InputError, within};

/// What draws from the reservoir.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum Draw {
    /// A resistor, ohms.
    Ohms(f64),
    /// A constant current, amperes; it gives way in the last per cent of the voltage.
    Amps(f64),
    /// A constant power between two thresholds: a switch-mode converter.
    Watts {
        /// Power while it runs, watts.
        watts: f64,
        /// DC volts above which it starts.
        start_volts: f64,
        /// DC volts below which it stops.
        stop_volts: f64,
    },
}

/// The numbers that describe a [`Rectifier`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RectifierSpec {
    /// Reservoir, farads (1e-9 to 1). Only the first seconds and hunting depend on it.
    pub farads: f64,
    /// Resistance in series, ohms (0 to 1e6).
    pub series_ohms: f64,
    /// Forward voltage of the conducting diodes together (0 to 10 V).
    pub diode_volts: f64,
    /// What draws from the reservoir.
    pub draw: Draw,
}

/// A full-wave rectifier with a reservoir large enough that its ripple is small, which a series lamp makes true.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rectifier {
    spec: RectifierSpec,
}

/// Share of the crest over which a constant current fades to nothing.
const FADE: f64 = 0.01;

impl Rectifier {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range; start volts below stop volts.
    pub fn new(spec: RectifierSpec) -> Result<Self, InputError> {
        within(Field::Farads, spec.farads, 1e-9, 1.0)?;
        within(Field::SeriesOhms, spec.series_ohms, 0.0, 1e6)?;
        within(Field::DiodeVolts, spec.diode_volts, 0.0, 10.0)?;
        match spec.draw {
            Draw::Ohms(ohms) => within(Field::Ohms, ohms, 1e-3, 1e9)?,
            Draw::Amps(amps) => within(Field::Amps, amps, 0.0, 1e3)?,
            Draw::Watts { watts, start_volts, stop_volts } => {
                within(Field::Watts, watts, 1e-3, 1e6)?;
                within(Field::StartVolts, start_volts, 1.0, 1000.0)?;
                within(Field::StopVolts, stop_volts, 0.0, 1000.0)?;
                if stop_volts > start_volts {
                    return Err(InputError::Conflict {
                        field: Field::StopVolts,
                        value: stop_volts,
                        with: Field::StartVolts,
                        limit: start_volts,
                    });
                }
                watts
            }
        };
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &RectifierSpec {
        &self.spec
    }

    pub(super) const fn is_constant_power(&self) -> bool {
        matches!(self.spec.draw, Draw::Watts { .. })
    }

    /// DC amperes drawn at DC volts while running; `crest` is the highest the reservoir can reach.
    pub(crate) fn drawn_amps(&self, dc_volts: f64, crest: f64) -> f64 {
        match self.spec.draw {
            Draw::Ohms(ohms) => dc_volts / ohms,
            Draw::Amps(amps) => amps * (dc_volts / (FADE * crest)).clamp(0.0, 1.0),
            Draw::Watts { watts, .. } => watts / dc_volts,
        }
    }

    /// The reservoir's volts and the mean current into it, for the current that the bank stands at; `None` where
    /// that is more than even an empty reservoir would take.
    pub(crate) fn reservoir(&self, feed: &Feed) -> Option<(f64, f64)> {
        let ohms = feed.ohms + self.spec.series_ohms;
        let (dc_volts, amps) = if feed.hertz == 0.0 {
            (feed.volts - feed.amps * ohms - self.spec.diode_volts, feed.amps)
        } else {
            let crest = SQRT_2 * feed.volts;
            let pulse = Pulse::of_rms(feed.amps * ohms / crest)?;
            (crest * pulse.share() - self.spec.diode_volts, crest / ohms * pulse.mean())
        };
        (dc_volts > 0.0).then_some((dc_volts, amps))
    }

    /// DC volts that an idle reservoir charges to.
    pub(crate) fn open_volts(&self, volts: f64, hertz: f64) -> f64 {
        let crest = if hertz == 0.0 { volts } else { SQRT_2 * volts };
        (crest - self.spec.diode_volts).max(0.0)
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        match self.reservoir(feed) {
            Some((dc_volts, amps)) => {
                let drawn = self.drawn_amps(dc_volts, self.open_volts(feed.volts, feed.hertz));
                libm::log(drawn / amps).clamp(-FAR, FAR)
            }
            // A constant-power draw wants ever more from a falling reservoir.
            None if self.is_constant_power() => FAR,
            None => -FAR,
        }
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        let (dc_volts, amps) = self.reservoir(feed).unwrap_or((0.0, 0.0));
        let watts = amps * (dc_volts + self.spec.diode_volts) + feed.amps * feed.amps * self.spec.series_ohms;
        Terminal::from_power(feed, watts, Some(dc_volts))
    }
}
