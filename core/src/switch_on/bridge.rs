//! Rectifiers with their reservoirs, and the converters behind them.

use alloc::boxed::Box;

use super::branch::{At, Half, Line, Mode, Offer};
use crate::load::{Draw, PowerSupply};

/// A rectifier with its reservoir; its variable is the reservoir's voltage.
#[derive(Debug, Clone)]
pub(super) struct Bridge {
    /// Conductance in series.
    pub(super) siemens: f64,
    pub(super) diode_volts: f64,
    pub(super) farads: f64,
    pub(super) draw: Draw,
    /// One polarity only.
    pub(super) half_wave: bool,
    /// The valves that must be warm before the draw flows, and where their heaters' temperature is.
    pub(super) valves: Option<(Box<PowerSupply>, usize)>,
    /// Volts that an idle reservoir charges to.
    pub(super) open_volts: f64,
    /// Volts within which an edge is not told from another.
    pub(super) edge_volts: f64,
    /// Resistance that turns a current at the edge into volts, ohms.
    pub(super) edge_ohms: f64,
    pub(super) at: usize,
    pub(super) mode: usize,
}

/// Lowest share of the open voltage at which a converter can still run: nothing draws a power from next to nothing.
const LEAST_SHARE: f64 = 1e-3;

/// Share of the open voltage over which a constant current fades to nothing, as in the steady solver.
const FADE: f64 = 0.01;

/// Volts of margin for each second that a waiting converter has left: any number, since steps end when it is due.
const VOLTS_PER_SECOND: f64 = 1e6;

impl Bridge {
    pub(super) fn line(&self, here: At) -> Line {
        let sign = here.modes[self.mode].conducts;
        if sign == 0.0 {
            return Line::default();
        }
        let siemens = self.siemens;
        Line { siemens, source_amps: -siemens * sign * (here.state[self.at] + self.diode_volts) }
    }

    fn drawn(&self, here: At) -> f64 {
        let volts = here.state[self.at];
        let open_volts = self.open_volts.max(self.edge_volts);
        match self.draw {
            Draw::Ohms(ohms) => {
                let share = self.valves.as_ref().map_or(1.0, |(set, at)| set.emission(here.state[*at]));
                share * volts / ohms
            }
            Draw::Amps(amps) => amps * (volts / (FADE * open_volts)).clamp(0.0, 1.0),
            Draw::Watts { watts, .. } if here.modes[self.mode].runs => {
                watts / volts.max(LEAST_SHARE * open_volts)
            }
            Draw::Watts { .. } => 0.0,
        }
    }

    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let amps = self.line(here).amps(volts) * here.modes[self.mode].conducts;
        slope[self.at] = (amps - self.drawn(here)) / self.farads;
    }

    pub(super) fn edges(&self, volts: f64, here: At, offer: &mut Offer) {
        let mode = here.modes[self.mode];
        let held = here.state[self.at];
        let conducts = if mode.conducts == 0.0 {
            held + self.diode_volts - if self.half_wave { volts } else { volts.abs() }
        } else {
            mode.conducts * self.line(here).amps(volts) * self.edge_ohms
        };
        // Both edges lie a little beyond where they belong, so that a mode just entered is not left at once.
        offer(conducts + self.edge_volts, self.mode, Half::Conducts);
        if let Draw::Watts { start_volts, stop_volts, .. } = self.draw {
            let stop = stop_volts.max(LEAST_SHARE * self.open_volts).min(start_volts - self.edge_volts);
            let margin = if mode.runs {
                held - stop
            } else if mode.due < f64::INFINITY {
                (mode.due - here.seconds) * VOLTS_PER_SECOND
            } else {
                start_volts - held
            };
            offer(margin, self.mode, Half::Runs);
        }
    }

    pub(super) fn turned(&self, volts: f64, here: At, half: Half) -> Mode {
        let mode = here.modes[self.mode];
        match half {
            Half::Conducts if mode.conducts == 0.0 => {
                Mode { conducts: if volts < 0.0 { -1.0 } else { 1.0 }, ..mode }
            }
            Half::Conducts => Mode { conducts: 0.0, ..mode },
            Half::Runs if mode.runs => Mode { runs: false, ..mode },
            Half::Runs => match self.draw {
                Draw::Watts { restart_seconds, .. } if restart_seconds > 0.0 && mode.due == f64::INFINITY => {
                    Mode { due: here.seconds + restart_seconds, ..mode }
                }
                _ => Mode { runs: true, due: f64::INFINITY, ..mode },
            },
        }
    }
}

/// The front of a power-factor-corrected converter: while it runs it is a conductance, set so that it takes the power
/// that the converter needs at the mean square of its own voltage, and it pumps what it takes into the reservoir.
///
/// Real ones hold the reservoir some 20 % above the crest of the mains and average the voltage over a cycle or two;
/// below its least input the current no longer grows (all design values, no source). Its variable is the mean square.
#[derive(Debug, Clone, Copy)]
pub(super) struct Corrector {
    pub(super) watts: f64,
    pub(super) farads: f64,
    /// Volts at which the reservoir is held.
    pub(super) target_volts: f64,
    /// Mean square of the least input, volts squared.
    pub(super) least_square: f64,
    /// Over which the mean is taken, seconds.
    pub(super) mean_seconds: f64,
    pub(super) at: usize,
    /// The bridge's variable and mode.
    pub(super) bridge_at: usize,
    pub(super) bridge_mode: usize,
}

/// The reservoir's target over the crest of the mains.
pub(super) const BOOST: f64 = 1.2;

impl Corrector {
    pub(super) fn siemens(&self, here: At) -> f64 {
        if !here.modes[self.bridge_mode].runs {
            return 0.0;
        }
        let missing = (self.target_volts - here.state[self.bridge_at]) / self.target_volts;
        self.watts * (1.0 + missing).clamp(0.0, 1.0 + BOOST) / here.state[self.at].max(self.least_square)
    }

    /// Must follow the bridge's own.
    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let square = volts * volts;
        slope[self.at] = (square - here.state[self.at]) / self.mean_seconds;
        let held = here.state[self.bridge_at].max(LEAST_SHARE * self.target_volts);
        slope[self.bridge_at] += self.siemens(here) * square / (self.farads * held);
    }
}
