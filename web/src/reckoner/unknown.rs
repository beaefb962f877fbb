//! A lamp without a legible rating: every rating that is made is compared with what was measured.

use lampladder_core::identify::{self, Evidence, IdentifyError};
use lampladder_core::lamp::Point;
use serde::{Deserialize, Serialize};

use super::{Answer, Clock, Step, Task};

/// What was measured on it.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Measured {
    /// Ohms of the cold lamp.
    pub cold_ohms: f64,
    /// Volts and amperes while it glows.
    pub point: Point,
    /// Its volts, where they can still be read.
    pub printed_volts: Option<f64>,
}

/// A rating that fits.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Fit {
    /// Printed volts.
    pub volts: f64,
    /// Printed watts.
    pub watts: f64,
    /// How likely, 0 to 1.
    pub weight: f64,
}

/// The ratings that fit, the likeliest first, or why there is none.
pub type Fits = Result<Vec<Fit>, IdentifyError>;

/// The comparison; it is done in one go.
#[derive(Debug)]
pub struct Search(Measured);

impl Search {
    /// Work that has not begun.
    pub const fn new(measured: Measured) -> Self {
        Self(measured)
    }
}

impl Task for Search {
    fn go_on(&mut self, _: Clock<'_>) -> Step {
        let Measured { cold_ohms, point, printed_volts } = self.0;
        let found = identify::identify(&Evidence { cold_ohms, point, printed_volts });
        let fit = |one: &identify::Match| Fit {
            volts: one.lamp.rated_volts(),
            watts: one.lamp.rated_watts(),
            weight: one.weight,
        };
        Step::Last(Answer::Unknown(found.map(|found| found.iter().map(fit).collect())))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::lamp::Lamp;

    #[test]
    fn a_sixty_watt_lamp_is_found_out() {
        let lamp = Lamp::new(230.0, 60.0).expect("a stock size");
        let point = Point { volts: 100.0, amps: lamp.at_volts(100.0).amps };
        let measured = Measured { cold_ohms: lamp.cold_ohms(), point, printed_volts: Some(230.0) };
        let Step::Last(Answer::Unknown(Ok(fits))) = Search::new(measured).go_on(&|| 0.0) else {
            panic!("no answer")
        };
        assert_eq!((fits[0].volts, fits[0].watts), (230.0, 60.0));
        let nothing = Measured { cold_ohms: -1.0, ..measured };
        let Step::Last(Answer::Unknown(fits)) = Search::new(nothing).go_on(&|| 0.0) else {
            panic!("no answer")
        };
        assert!(matches!(fits, Err(IdentifyError::Input(_))));
    }
}
