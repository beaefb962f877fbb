//! The parts of a load in the time domain, each as its terminals see it at one instant.
//!
//! With the slow variables given (charge, flux, temperature, speed), every part is a straight line between its
//! voltage and its current: `amps = siemens * volts + source_amps`. Parallel parts add; the loop is then one
//! division, and no equation has to be solved inside a step.

use alloc::boxed::Box;
use alloc::vec::Vec;

use super::body::Body;
use crate::load::{Draw, RectifierSpec};

/// A straight line between volts and amperes.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Line {
    /// Slope, siemens.
    pub(super) siemens: f64,
    /// Amperes at 0 V.
    pub(super) source_amps: f64,
}

impl Line {
    /// The same line behind a resistance in series.
    fn behind(self, ohms: f64) -> Self {
        let share = 1.0 / (1.0 + ohms * self.siemens);
        Self { siemens: self.siemens * share, source_amps: self.source_amps * share }
    }

    pub(super) fn amps(&self, volts: f64) -> f64 {
        self.siemens * volts + self.source_amps
    }
}

/// Conductance that stands for a joint, siemens. A milliohm is nothing beside any lamp or mains outlet; much less would
/// leave too few digits of the voltage across it.
const JOINT_SIEMENS: f64 = 1e3;

/// Conductance of a series resistance.
fn siemens(ohms: f64) -> f64 {
    (1.0 / ohms).min(JOINT_SIEMENS)
}

/// The state of a rectifier that changes by jumps.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Mode {
    /// 1 or -1 where the diodes of that polarity conduct, 0 where none do.
    conducts: f64,
    /// Whether the converter behind the reservoir runs.
    pub(super) runs: bool,
}

impl Mode {
    pub(super) const OFF: Self = Self { conducts: 0.0, runs: false };
}

/// One part of a load. The numbers named `at` are places in the state, those named `mode` places among the modes.
#[derive(Debug, Clone)]
pub(super) enum Branch {
    /// A resistor, siemens.
    Resistor(f64),
    /// Resistance and inductance in series; its state is the current.
    Coil { ohms: f64, henries: f64, at: usize },
    /// Resistance and capacitance in series; its state is the capacitor's voltage.
    Capacitor { ohms: f64, farads: f64, at: usize },
    /// Another lamp; its state is the temperature.
    Filament { body: Body, at: usize },
    /// A bridge and a reservoir.
    Bridge(Bridge),
    /// A transformer and what stands behind it.
    Transformer(Box<Core>),
}

/// A bridge rectifier with its reservoir; its state is the reservoir's voltage.
#[derive(Debug, Clone)]
pub(super) struct Bridge {
    pub(super) spec: RectifierSpec,
    /// Volts that an idle reservoir charges to.
    pub(super) open_volts: f64,
    /// Volts within which an edge is not told from another.
    pub(super) edge_volts: f64,
    /// Resistance that turns a current at the edge into volts, ohms.
    pub(super) edge_ohms: f64,
    pub(super) at: usize,
    pub(super) mode: usize,
}

/// A transformer's core and what stands behind it; its state is the flux linkage over its crest at the rating.
#[derive(Debug, Clone)]
pub(super) struct Core {
    pub(super) primary_ohms: f64,
    pub(super) core_ohms: f64,
    pub(super) magnetising: Magnetising,
    pub(super) secondary: Vec<Branch>,
    pub(super) at: usize,
}

/// Magnetising current against flux, and flux against time.
#[derive(Debug, Clone, Copy)]
pub(super) struct Magnetising {
    /// Crest of the flux linkage at the rating, volt second.
    pub(super) rated_flux: f64,
    /// Amperes at the crest of the rated flux in the unsaturated core.
    pub(super) linear_amps: f64,
    /// Amperes that saturation adds there.
    pub(super) knee_amps: f64,
    /// Flux, over its rated crest, from which on the core adds nothing and the coil is one in air.
    pub(super) full: f64,
    /// Rise of the current with the flux there, amperes per rated crest.
    pub(super) air_amps: f64,
}

impl Magnetising {
    /// The core that takes `amps` RMS at `volts` RMS and `omega` radian per second.
    ///
    /// The steady solver's law in the time domain: the RMS current of `linear x + knee x^9` over a sinusoidal flux
    /// grows with the voltage as [`crate::load::Transformer`] says. From 1.4 times the rated crest on (silicon iron
    /// saturates at 2.0 T and is run at 1.4 T in small transformers; design values, no source) the core adds
    /// nothing more and the slope stays.
    pub(super) fn of(volts: f64, amps: f64, omega: f64) -> Self {
        /// RMS of `sin` and of `sin^9`, and what the two have in common: `mean sin^10 = 63/256`.
        const FIRST: f64 = core::f64::consts::FRAC_1_SQRT_2;
        const NINTH: f64 = 0.430_662_955_284_857_9;
        const COMMON: f64 = 63.0 / 256.0;
        const LINEAR: f64 = 0.6;
        const KNEE: f64 = 1.0 - LINEAR;
        const FULL: f64 = 1.4;
        let together =
            LINEAR * LINEAR + KNEE * KNEE + 2.0 * LINEAR * KNEE * COMMON / (FIRST * NINTH);
        let unit = amps / libm::sqrt(together);
        let (linear_amps, knee_amps) = (unit * LINEAR / FIRST, unit * KNEE / NINTH);
        Self {
            rated_flux: core::f64::consts::SQRT_2 * volts / omega,
            linear_amps,
            knee_amps,
            full: FULL,
            air_amps: linear_amps + 9.0 * knee_amps * libm::pow(FULL, 8.0),
        }
    }

    /// Amperes at a flux over its rated crest.
    pub(super) fn amps(&self, flux: f64) -> f64 {
        let inside = flux.clamp(-self.full, self.full);
        let square = inside * inside;
        let eighth = square * square * square * square;
        inside * (self.linear_amps + self.knee_amps * eighth) + self.air_amps * (flux - inside)
    }
}

/// What a part shows besides its current.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Inside {
    /// Volts on the reservoir.
    pub(super) dc_volts: Option<f64>,
    /// Temperature of a lamp or heater, kelvin.
    pub(super) kelvin: Option<f64>,
}

impl Branch {
    /// The line between volts and amperes in this state.
    pub(super) fn line(&self, state: &[f64], modes: &[Mode]) -> Line {
        match self {
            Self::Resistor(siemens) => Line { siemens: *siemens, source_amps: 0.0 },
            Self::Coil { at, .. } => Line { siemens: 0.0, source_amps: state[*at] },
            Self::Capacitor { ohms, at, .. } => {
                let siemens = siemens(*ohms);
                Line { siemens, source_amps: -siemens * state[*at] }
            }
            Self::Filament { body, at } => {
                Line { siemens: 1.0 / body.at(state[*at]).ohms, source_amps: 0.0 }
            }
            Self::Bridge(bridge) => bridge.line(state, modes),
            Self::Transformer(core) => core.inner(state, modes).behind(core.primary_ohms),
        }
    }

    /// The slopes of this part's states with `volts` across it.
    pub(super) fn slopes(&self, volts: f64, state: &[f64], modes: &[Mode], slope: &mut [f64]) {
        match self {
            Self::Resistor(_) => {}
            Self::Coil { ohms, henries, at } => slope[*at] = (volts - ohms * state[*at]) / henries,
            Self::Capacitor { ohms, farads, at } => {
                slope[*at] = siemens(*ohms) * (volts - state[*at]) / farads;
            }
            Self::Filament { body, at } => {
                let heat = body.at(state[*at]);
                slope[*at] = (volts * volts / heat.ohms - heat.lost_watts) / heat.joules_per_kelvin;
            }
            Self::Bridge(bridge) => {
                let amps = bridge.line(state, modes).amps(volts) * modes[bridge.mode].conducts;
                slope[bridge.at] = (amps - bridge.drawn(state, modes)) / bridge.spec.farads;
            }
            Self::Transformer(core) => {
                let node = core.node_volts(volts, state, modes);
                slope[core.at] = node / core.magnetising.rated_flux;
                for branch in &core.secondary {
                    branch.slopes(node, state, modes, slope);
                }
            }
        }
    }

    /// Offers how far each rectifier is from changing its mode, in volts, with the place of the mode and which of its
    /// two halves would change; positive until then.
    pub(super) fn edges(
        &self,
        volts: f64,
        state: &[f64],
        modes: &[Mode],
        offer: &mut dyn FnMut(f64, usize, Half),
    ) {
        match self {
            Self::Bridge(bridge) => bridge.edges(volts, state, modes, offer),
            Self::Transformer(core) => {
                let node = core.node_volts(volts, state, modes);
                for branch in &core.secondary {
                    branch.edges(node, state, modes, offer);
                }
            }
            _ => {}
        }
    }

    /// Turns one half of the mode at a place over.
    pub(super) fn turn(&self, volts: f64, state: &[f64], modes: &mut [Mode], place: usize, half: Half) {
        match self {
            Self::Bridge(bridge) if bridge.mode == place => match half {
                Half::Runs => modes[place].runs = !modes[place].runs,
                Half::Conducts if modes[place].conducts == 0.0 => {
                    modes[place].conducts = if volts < 0.0 { -1.0 } else { 1.0 };
                }
                Half::Conducts => modes[place].conducts = 0.0,
            },
            Self::Transformer(core) => {
                let node = core.node_volts(volts, state, modes);
                for branch in &core.secondary {
                    branch.turn(node, state, modes, place, half);
                }
            }
            _ => {}
        }
    }

    /// What this part shows.
    pub(super) fn show(&self, state: &[f64], inside: &mut Inside) {
        match self {
            Self::Filament { at, .. } => inside.kelvin = Some(state[*at]),
            Self::Bridge(bridge) => inside.dc_volts = Some(state[bridge.at].max(0.0)),
            Self::Transformer(core) => {
                for branch in &core.secondary {
                    branch.show(state, inside);
                }
            }
            _ => {}
        }
    }
}

/// Which half of a [`Mode`] changes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Half {
    /// The diodes.
    Conducts,
    /// The converter.
    Runs,
}

/// Lowest share of the open voltage at which a converter can still run: nothing draws a power from next to nothing.
const LEAST_SHARE: f64 = 1e-3;

impl Bridge {
    fn line(&self, state: &[f64], modes: &[Mode]) -> Line {
        let sign = modes[self.mode].conducts;
        if sign == 0.0 {
            return Line::default();
        }
        let spec = &self.spec;
        let siemens = siemens(spec.series_ohms);
        Line { siemens, source_amps: -siemens * sign * (state[self.at] + spec.diode_volts) }
    }

    fn drawn(&self, state: &[f64], modes: &[Mode]) -> f64 {
        let volts = state[self.at];
        match self.spec.draw {
            Draw::Ohms(ohms) => volts / ohms,
            // As in the steady solver: a constant current gives way in the last per cent.
            Draw::Amps(amps) => amps * (volts / (0.01 * self.open_volts.max(self.edge_volts))).clamp(0.0, 1.0),
            Draw::Watts { watts, .. } => {
                let least = LEAST_SHARE * self.open_volts.max(self.edge_volts);
                if modes[self.mode].runs { watts / volts.max(least) } else { 0.0 }
            }
        }
    }

    fn edges(&self, volts: f64, state: &[f64], modes: &[Mode], offer: &mut dyn FnMut(f64, usize, Half)) {
        let spec = &self.spec;
        let mode = modes[self.mode];
        let held = state[self.at];
        let conducts = if mode.conducts == 0.0 {
            held + spec.diode_volts - volts.abs()
        } else {
            mode.conducts * self.line(state, modes).amps(volts) * self.edge_ohms
        };
        // Both edges lie a little beyond where they belong, so that a mode just entered is not left at once.
        offer(conducts + self.edge_volts, self.mode, Half::Conducts);
        if let Draw::Watts { start_volts, stop_volts, .. } = spec.draw {
            let stop = stop_volts.max(LEAST_SHARE * self.open_volts).min(start_volts - self.edge_volts);
            offer(if mode.runs { held - stop } else { start_volts - held }, self.mode, Half::Runs);
        }
    }
}

impl Core {
    /// The line of everything behind the primary's resistance.
    fn inner(&self, state: &[f64], modes: &[Mode]) -> Line {
        let magnetising = self.magnetising.amps(state[self.at]);
        let mut line = Line { siemens: 1.0 / self.core_ohms, source_amps: magnetising };
        for branch in &self.secondary {
            let part = branch.line(state, modes);
            line.siemens += part.siemens;
            line.source_amps += part.source_amps;
        }
        line
    }

    /// Volts of the windings themselves, the primary's resistance taken off.
    fn node_volts(&self, volts: f64, state: &[f64], modes: &[Mode]) -> f64 {
        let inner = self.inner(state, modes);
        // volts - ohms * amps, with the two solved together: no difference of large numbers.
        (volts - self.primary_ohms * inner.source_amps) / (1.0 + self.primary_ohms * inner.siemens)
    }
}
