//! A mains transformer with a full-wave rectifier, a reservoir and a DC draw behind it.
//!
//! Everything is referred to the primary. In parallel at the primary stand a saturating magnetising reactance, a
//! core-loss resistance, and, through the winding resistance, the rectifier. The magnetising current is taken as
//! a sinusoid a quarter period behind the primary voltage, so that it adds in quadrature; the pulse is then that
//! of a rectifier behind the Thevenin equivalent of the rest.

use core::f64::consts::SQRT_2;

use super::conduction::Pulse;
use super::{FAR, Feed, Terminal};
use crate::error::{Field, InputError, within};
use crate::roots::{self, Tolerance};

/// The numbers that describe a [`Transformer`], referred to the primary.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TransformerSpec {
    /// Rated primary volts (1 to 1000).
    pub rated_volts: f64,
    /// Magnetising current at rated volts, amperes RMS (1e-6 to 100).
    pub magnetising_amps: f64,
    /// Core-loss resistance, ohms (1 to 1e9).
    pub core_ohms: f64,
    /// Primary and reflected secondary winding resistance together, ohms (0 to 1e6).
    pub winding_ohms: f64,
    /// Reflected forward voltage of the diodes, volts (0 to 100).
    pub diode_volts: f64,
    /// Reflected reservoir, farads (1e-12 to 1); only the first seconds depend on it.
    pub farads: f64,
    /// Reflected resistance of what draws from the reservoir, ohms (1e-3 to 1e9).
    pub draw_ohms: f64,
}

/// A transformer supply; see the module's text.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Transformer {
    spec: TransformerSpec,
}

/// Share of the rated magnetising current that an unsaturated core would take, and the power with which the rest
/// grows: the knee of an ordinary stamped core run close to saturation (design value, no source).
const LINEAR_SHARE: f64 = 0.6;

/// Source resistance that stands for none, ohms.
const STIFF_OHMS: f64 = 1e-6;

/// What a transformer takes at one feed.
struct Response {
    amps: f64,
    watts: f64,
    dc_volts: f64,
}

impl Transformer {
    /// Checks and keeps the numbers.
    ///
    /// # Errors
    /// The first property that is not finite or out of range.
    pub fn new(spec: TransformerSpec) -> Result<Self, InputError> {
        within(Field::Volts, spec.rated_volts, 1.0, 1000.0)?;
        within(Field::Amps, spec.magnetising_amps, 1e-6, 100.0)?;
        within(Field::Ohms, spec.core_ohms, 1.0, 1e9)?;
        within(Field::SeriesOhms, spec.winding_ohms, 0.0, 1e6)?;
        within(Field::DiodeVolts, spec.diode_volts, 0.0, 100.0)?;
        within(Field::Farads, spec.farads, 1e-12, 1.0)?;
        within(Field::Ohms, spec.draw_ohms, 1e-3, 1e9)?;
        Ok(Self { spec })
    }

    /// The numbers.
    pub const fn spec(&self) -> &TransformerSpec {
        &self.spec
    }

    /// Magnetising amperes RMS at primary volts RMS.
    pub(crate) fn magnetising_amps(&self, volts: f64) -> f64 {
        let share = volts / self.spec.rated_volts;
        let square = share * share;
        let eighth = square * square * square * square;
        self.spec.magnetising_amps * share * (LINEAR_SHARE + (1.0 - LINEAR_SHARE) * eighth)
    }

    /// Real power straight on a supply of `volts`, watts.
    pub(crate) fn watts_at(&self, volts: f64) -> f64 {
        self.respond(&Feed { volts, hertz: 50.0, ohms: STIFF_OHMS, amps: 0.0 }).watts
    }

    fn respond(&self, feed: &Feed) -> Response {
        // Find the magnetising current that belongs to the primary voltage it leaves.
        let most = feed.volts / feed.ohms.max(1e-9);
        let gap = |amps: f64| self.magnetising_amps(self.behind(feed, amps).primary_volts) - amps;
        let alone = self.magnetising_amps(feed.volts).min(most);
        let found = roots::between(
            gap,
            (0.0, gap(0.0)),
            (alone, gap(alone)),
            Tolerance { x: 1e-13 * most, residual: 1e-13 * most },
        );
        let magnetising = found.map_or(alone, |root| root.x);
        let in_phase = self.behind(feed, magnetising);
        Response {
            amps: libm::hypot(in_phase.amps, magnetising),
            watts: in_phase.watts,
            dc_volts: in_phase.dc_volts,
        }
    }

    /// Everything in phase, given the magnetising current.
    fn behind(&self, feed: &Feed, magnetising: f64) -> InPhase {
        let spec = &self.spec;
        let quadrature = feed.ohms * magnetising;
        let source = SQRT_2 * libm::sqrt((feed.volts * feed.volts - quadrature * quadrature).max(0.0));
        // Thevenin equivalent of the source, the bank and the core loss.
        let share = spec.core_ohms / (feed.ohms + spec.core_ohms);
        let crest = source * share;
        let ohms = feed.ohms * share + spec.winding_ohms;
        let (pulse, unit, dc_volts) = if crest > spec.diode_volts && ohms > 0.0 {
            let dc_volts = self.held_volts(crest, ohms);
            (Pulse::holding((dc_volts + spec.diode_volts) / crest), crest / ohms, dc_volts)
        } else {
            (Pulse { theta: 0.0 }, 0.0, (crest - spec.diode_volts).max(0.0))
        };
        let (mean, rms, fundamental) = (unit * pulse.mean(), unit * pulse.rms(), unit * pulse.fundamental());
        // Bank current is (source sinusoid + share of the pulse), so its square is a closed form too.
        let idle = source / (feed.ohms + spec.core_ohms);
        let square = 0.5 * idle * idle + share * idle * fundamental + share * share * rms * rms;
        let primary_volts = (crest - feed.ohms * share * fundamental) / SQRT_2;
        let to_rectifier = mean * (dc_volts + spec.diode_volts) + rms * rms * spec.winding_ohms;
        // Primary RMS squared, harmonics included: what heats the core-loss resistance.
        let thevenin = feed.ohms * share;
        let primary_square =
            0.5 * crest * crest - thevenin * crest * fundamental + thevenin * thevenin * rms * rms;
        InPhase {
            amps: libm::sqrt(square),
            watts: to_rectifier + primary_square / spec.core_ohms,
            dc_volts,
            primary_volts,
        }
    }

    /// DC volts at which the pulse brings what the draw takes.
    fn held_volts(&self, crest: f64, ohms: f64) -> f64 {
        let spec = &self.spec;
        let gap = |dc_volts: f64| {
            let pulse = Pulse::holding((dc_volts + spec.diode_volts) / crest);
            pulse.mean() * crest / ohms - dc_volts / spec.draw_ohms
        };
        let highest = crest - spec.diode_volts;
        let tolerance = Tolerance { x: 1e-14 * crest, residual: 1e-14 * crest / ohms };
        roots::between(gap, (0.0, gap(0.0)), (highest, -highest / spec.draw_ohms), tolerance)
            .map_or(0.0, |root| root.x)
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        libm::log(self.respond(feed).amps / feed.amps).clamp(-FAR, FAR)
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        let response = self.respond(feed);
        Terminal::from_power(feed, response.watts, Some(response.dc_volts))
    }
}

struct InPhase {
    amps: f64,
    watts: f64,
    dc_volts: f64,
    primary_volts: f64,
}

#[cfg(test)]
mod tests {
    use super::*;

    fn radio() -> Transformer {
        Transformer::new(TransformerSpec {
            rated_volts: 230.0,
            magnetising_amps: 0.05,
            core_ohms: 15_000.0,
            winding_ohms: 60.0,
            diode_volts: 1.0,
            farads: 20e-6,
            draw_ohms: 1500.0,
        })
        .expect("in range")
    }

    #[test]
    fn the_bank_current_carries_the_power() {
        // Real power from the current and the source phasor alone, against the sum of the losses inside.
        for ohms in [1.0, 50.0, 300.0, 800.0] {
            let mut feed = Feed { volts: 230.0, hertz: 50.0, ohms, amps: 0.1 };
            let response = radio().respond(&feed);
            feed.amps = response.amps;
            let terminal = radio().terminal(&feed);
            assert!(terminal.watts <= terminal.volts * response.amps, "power factor above one at {ohms}");
            assert!(terminal.volts > 0.0 && terminal.volts <= 230.0);
        }
    }
}
