//! A bridge rectifier and reservoir straight on the mains, and what draws from the reservoir.

use core::f64::consts::{PI, SQRT_2};

use super::conduction::Pulse;
use super::{FAR, Feed, Served, Terminal};
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
        /// Seconds that it waits before it starts, again or at first (0 to 60).
        restart_seconds: f64,
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
    /// Resistance across the mains side, ohms (1 to 1e12), if any.
    pub shunt_ohms: Option<f64>,
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
        if let Some(ohms) = spec.shunt_ohms {
            within(Field::Ohms, ohms, 1.0, 1e12)?;
        }
        match spec.draw {
            Draw::Ohms(ohms) => within(Field::Ohms, ohms, 1e-3, 1e9)?,
            Draw::Amps(amps) => within(Field::Amps, amps, 0.0, 1e3)?,
            Draw::Watts { watts, start_volts, stop_volts, restart_seconds } => {
                within(Field::RestartSeconds, restart_seconds, 0.0, 60.0)?;
                check_thresholds(start_volts, stop_volts)?;
                within(Field::Watts, watts, 1e-3, 1e6)?
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

    /// The circuit ahead of the reservoir, as a source behind a resistance.
    fn source(&self, feed: &Feed) -> Source {
        let share = self.spec.shunt_ohms.map_or(1.0, |shunt| shunt / (shunt + feed.ohms));
        let wave = if feed.hertz == 0.0 { 1.0 } else { SQRT_2 };
        Source {
            share,
            crest: wave * feed.volts * share,
            ohms: feed.ohms * share + self.spec.series_ohms,
            idle: self.spec.shunt_ohms.map_or(0.0, |shunt| wave * feed.volts / (feed.ohms + shunt)),
        }
    }

    /// The reservoir's volts and the mean current into it, for the current that the bank stands at; `None` where
    /// that is more than even an empty reservoir would take.
    pub(crate) fn reservoir(&self, feed: &Feed) -> Option<Reservoir> {
        let source = self.source(feed);
        let (dc_volts, mean_amps, rms_amps) = if feed.hertz == 0.0 {
            let amps = source.rectified(feed);
            (source.crest - amps * source.ohms - self.spec.diode_volts, amps, amps)
        } else {
            let pulse = source.pulse(feed).ok()?;
            let unit = source.crest / source.ohms;
            (source.crest * pulse.share() - self.spec.diode_volts, unit * pulse.mean(), unit * pulse.rms())
        };
        (dc_volts > 0.0 && mean_amps > 0.0).then_some(Reservoir { dc_volts, mean_amps, rms_amps })
    }

    /// What a constant-power draw would get, over what it wants, with its slopes: those of reservoir volts times mean
    /// current, at the angle that the current asks for.
    pub(super) fn served(&self, feed: &Feed) -> Served {
        let Draw::Watts { watts, .. } = self.spec.draw else { return Served::TOO_MUCH };
        let source = self.source(feed);
        let Source { share, crest, ohms, idle } = source;
        // d ln crest = d ln share = -yielding d ln R, and d ln ohms = stiffening d ln R.
        let yielding = 1.0 - share;
        let stiffening = feed.ohms * share * share / ohms;
        if feed.hertz == 0.0 {
            let amps = source.rectified(feed);
            let dc_volts = crest - amps * ohms - self.spec.diode_volts;
            let (amps_by_amps, amps_by_ohms) = (feed.amps / share, feed.amps * (1.0 / share - 1.0));
            let volts_by_ohms = -yielding * crest - ohms * (stiffening * amps + amps_by_ohms);
            return Served {
                share: dc_volts * amps / watts,
                by_amps: (dc_volts - ohms * amps) * amps_by_amps / watts,
                by_ohms: (dc_volts * amps_by_ohms + volts_by_ohms * amps) / watts,
            };
        }
        let pulse = match source.pulse(feed) {
            Ok(pulse) => pulse,
            Err(nothing) => return nothing,
        };
        let unit = crest / ohms;
        let dc_volts = crest * pulse.share() - self.spec.diode_volts;
        let (mean, square) = (unit * pulse.mean(), 2.0 * feed.amps * feed.amps);
        // The square of the feed's current is made of the shunt's, the pulse's and twice what the two share.
        let (cross, own) = (share * idle * unit, share * share * unit * unit);
        let wider = cross * pulse.fundamental_slope() + own * pulse.mean_square_slope();
        let square_by_ohms = -yielding * square
            - (yielding + stiffening) * (cross * pulse.fundamental() + 2.0 * own * pulse.mean_square());
        let watts_by_angle = dc_volts * unit * pulse.mean_slope() - crest * pulse.sin() * mean;
        let watts_by_ohms =
            -yielding * crest * pulse.share() * mean - (yielding + stiffening) * dc_volts * mean;
        Served {
            share: dc_volts * mean / watts,
            by_amps: watts_by_angle * square / wider / watts,
            by_ohms: (watts_by_ohms - watts_by_angle * square_by_ohms / wider) / watts,
        }
    }

    /// DC volts that an idle reservoir charges to.
    pub(crate) fn open_volts(&self, volts: f64, hertz: f64) -> f64 {
        let crest = if hertz == 0.0 { volts } else { SQRT_2 * volts };
        (crest - self.spec.diode_volts).max(0.0)
    }

    pub(super) fn excess(&self, feed: &Feed) -> f64 {
        match self.reservoir(feed) {
            Some(Reservoir { dc_volts, mean_amps, .. }) => {
                let drawn = self.drawn_amps(dc_volts, self.open_volts(feed.volts, feed.hertz));
                libm::log(drawn / mean_amps).clamp(-FAR, FAR)
            }
            // A constant-power draw wants ever more from a falling reservoir.
            None if self.is_constant_power() => FAR,
            None => -FAR,
        }
    }

    pub(super) fn terminal(&self, feed: &Feed) -> Terminal {
        let Some(Reservoir { dc_volts, mean_amps, rms_amps }) = self.reservoir(feed) else {
            return Terminal::from_power(feed, 0.0, Some(0.0));
        };
        let rectified =
            mean_amps * (dc_volts + self.spec.diode_volts) + rms_amps * rms_amps * self.spec.series_ohms;
        let Some(shunt) = self.spec.shunt_ohms else {
            return Terminal::from_power(feed, rectified, Some(dc_volts));
        };
        // P = rectified + V^2/shunt and V^2 = Vs^2 - (RI)^2 - 2RP, solved for P.
        let drop = feed.ohms * feed.amps;
        let square = (feed.volts * feed.volts - drop * drop - 2.0 * feed.ohms * rectified)
            / (1.0 + 2.0 * feed.ohms / shunt);
        Terminal::from_power(feed, rectified + square.max(0.0) / shunt, Some(dc_volts))
    }
}

/// What reaches the reservoir.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Reservoir {
    pub(crate) dc_volts: f64,
    pub(crate) mean_amps: f64,
    pub(crate) rms_amps: f64,
}

/// What stands ahead of the reservoir.
#[derive(Clone, Copy)]
struct Source {
    /// Share of the source that a shunt leaves.
    share: f64,
    /// Highest volts.
    crest: f64,
    /// Resistance, ohms.
    ohms: f64,
    /// Highest current into the shunt while the rectifier does not conduct, amperes.
    idle: f64,
}

impl Source {
    /// On direct current, what the shunt does not take.
    fn rectified(&self, feed: &Feed) -> f64 {
        (feed.amps - self.idle) / self.share
    }

    /// The pulse that, together with the sinusoid into the shunt, makes the RMS current of the feed; the other way
    /// round what there is to get: the shunt alone takes more, or not even an empty reservoir would bring so much.
    fn pulse(&self, feed: &Feed) -> Result<Pulse, Served> {
        let unit = self.crest / self.ohms;
        if self.idle == 0.0 {
            return Pulse::of_rms(feed.amps / unit).ok_or(Served::TOO_MUCH);
        }
        let wanted = feed.amps * feed.amps - 0.5 * self.idle * self.idle;
        // What the pulse adds, by its fundamental beside the shunt's sinusoid and by its own square.
        let (cross, own) = (self.share * self.idle * unit, self.share * self.share * unit * unit);
        if wanted < 0.0 {
            return Err(Served::TOO_LITTLE);
        }
        if wanted > cross + 0.5 * own {
            return Err(Served::TOO_MUCH);
        }
        // Each part alone by its leading term. Their sum grows and is convex in the angle, so Newton's method never
        // fails.
        let narrow = libm::cbrt(0.75 * PI * wanted / cross).min(libm::pow(3.75 * PI * wanted / own, 0.2));
        Ok(Pulse::refined(narrow.max(1e-60), |pulse| {
            let left = wanted - cross * pulse.fundamental() - own * pulse.mean_square();
            (left, cross * pulse.fundamental_slope() + own * pulse.mean_square_slope())
        }))
    }
}

/// A converter starts at 1 to 1000 DC volts and stops at no more.
pub(super) fn check_thresholds(start_volts: f64, stop_volts: f64) -> Result<(), InputError> {
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
    Ok(())
}
