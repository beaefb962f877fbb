//! A switch-mode supply with power-factor correction: it takes a constant power in phase with its voltage.

use super::{Feed, Served};
use crate::error::{Field, InputError, within};

/// The numbers that describe a [`Corrected`] supply.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CorrectedSpec {
    /// Power while it runs, watts (1e-3 to 1e6).
    pub watts: f64,
    /// DC volts on its reservoir above which it starts (1 to 1000): the crest of the mains.
    pub start_volts: f64,
    /// Volts below which it stops, as a crest of the mains (0 to `start_volts`).
    pub stop_volts: f64,
    /// Seconds that it waits before it starts, again or at first (0 to 60).
    pub restart_seconds: f64,
    /// Reservoir, farads (1e-9 to 1); only hunting and the first seconds depend on it.
    pub farads: f64,
}

/// A corrected switch-mode supply; see the module's text.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Corrected {
    spec: CorrectedSpec,
}

impl Corrected {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range; start volts below stop volts.
    pub fn new(spec: CorrectedSpec) -> Result<Self, InputError> {
        within(Field::Watts, spec.watts, 1e-3, 1e6)?;
        within(Field::Farads, spec.farads, 1e-9, 1.0)?;
        within(Field::RestartSeconds, spec.restart_seconds, 0.0, 60.0)?;
        super::rectifier::check_thresholds(spec.start_volts, spec.stop_volts)?;
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &CorrectedSpec {
        &self.spec
    }

    /// `I (Vs - R I)` over the watts.
    pub(super) fn served(&self, feed: &Feed) -> Served {
        let drop = feed.ohms * feed.amps;
        let unit = feed.amps / self.spec.watts;
        Served {
            share: unit * (feed.volts - drop),
            by_amps: unit * (feed.volts - 2.0 * drop),
            by_ohms: -unit * drop,
        }
    }
}
