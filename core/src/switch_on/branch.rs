//! The parts of a load in the time domain, each as its terminals see it at one instant.
//!
//! With the slow variables given (charge, flux, temperature, speed), every part is a straight line between its
//! voltage and its current: `amps = siemens * volts + source_amps`. Parallel parts add; the loop is then one
//! division, and no equation has to be solved inside a step.

use alloc::boxed::Box;

use super::body::Body;
use super::bridge::{Bridge, Corrector};
use super::core_flux::Core;
use super::motor::{Brushed, Squirrel};
use super::thermistor::Thermistor;

/// A straight line between volts and amperes.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Line {
    /// Slope, siemens.
    pub(super) siemens: f64,
    /// Amperes at 0 V.
    pub(super) source_amps: f64,
}

impl Line {
    pub(super) const fn resistor(siemens: f64) -> Self {
        Self { siemens, source_amps: 0.0 }
    }

    pub(super) const fn source(source_amps: f64) -> Self {
        Self { siemens: 0.0, source_amps }
    }

    pub(super) fn amps(&self, volts: f64) -> f64 {
        self.siemens * volts + self.source_amps
    }
}

impl core::ops::AddAssign for Line {
    fn add_assign(&mut self, other: Self) {
        self.siemens += other.siemens;
        self.source_amps += other.source_amps;
    }
}

/// Conductance that stands for a joint, siemens. A milliohm is nothing beside any lamp or mains outlet; much less would
/// leave too few digits of the voltage across it.
const JOINT_SIEMENS: f64 = 1e3;

/// Conductance of a series resistance.
pub(super) fn siemens(ohms: f64) -> f64 {
    (1.0 / ohms).min(JOINT_SIEMENS)
}

/// What changes by jumps: one rectifier's diodes and the converter behind it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Mode {
    /// 1 or -1 where the diodes of that polarity conduct, 0 where none do.
    pub(super) conducts: f64,
    /// Whether the converter runs.
    pub(super) runs: bool,
    /// When a converter that waits will start, seconds; infinite where none waits.
    pub(super) due: f64,
}

impl Mode {
    pub(super) const OFF: Self = Self { conducts: 0.0, runs: false, due: f64::INFINITY };
}

/// Which half of a [`Mode`] changes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Half {
    /// The diodes.
    Conducts,
    /// The converter.
    Runs,
}

/// Where the circuit is: time, variables, modes.
#[derive(Debug, Clone, Copy)]
pub(super) struct At<'a> {
    pub(super) seconds: f64,
    pub(super) state: &'a [f64],
    pub(super) modes: &'a [Mode],
}

/// Takes a margin (volts left until a mode changes, positive until then), the mode's place, and which half changes.
pub(super) type Offer<'a> = dyn FnMut(f64, usize, Half) + 'a;

/// One part of a load. The numbers named `at` are places in the state, those named `mode` places among the modes.
#[derive(Debug, Clone)]
pub(super) enum Branch {
    /// A resistor, siemens.
    Resistor(f64),
    /// Resistance and inductance in series; its variable is the current.
    Coil { ohms: f64, henries: f64, at: usize },
    /// Resistance and capacitance in series; its variable is the capacitor's voltage.
    Capacitor { ohms: f64, farads: f64, at: usize },
    /// Another lamp, or heaters; its variable is the temperature.
    Filament { body: Body, at: usize },
    /// A resistance that one half wave meets.
    HalfShort { siemens: f64, edge_volts: f64, mode: usize },
    /// A rectifier and a reservoir.
    Bridge(Box<Bridge>),
    /// What makes a converter take a sinusoidal current.
    Corrector(Corrector),
    /// A transformer's core.
    Core(Core),
    /// A degauss thermistor.
    Thermistor(Thermistor),
    /// A motor with brushes.
    Brushed(Brushed),
    /// A motor without.
    Squirrel(Squirrel),
}

/// What the load shows besides its current.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Inside {
    /// Volts on the reservoir.
    pub(super) dc_volts: Option<f64>,
    /// Temperature of a lamp or heater, kelvin.
    pub(super) kelvin: Option<f64>,
    /// Speed of a motor over its rated or synchronous speed.
    pub(super) speed: Option<f64>,
}

impl Branch {
    /// The line between volts and amperes here.
    pub(super) fn line(&self, here: At) -> Line {
        match self {
            Self::Resistor(siemens) => Line::resistor(*siemens),
            Self::Coil { at, .. } => Line::source(here.state[*at]),
            Self::Capacitor { ohms, at, .. } => {
                let siemens = siemens(*ohms);
                Line { siemens, source_amps: -siemens * here.state[*at] }
            }
            Self::Filament { body, at } => Line::resistor(1.0 / body.at(here.state[*at]).ohms),
            Self::HalfShort { siemens, mode, .. } => Line::resistor(here.modes[*mode].conducts * siemens),
            Self::Bridge(bridge) => bridge.line(here),
            Self::Corrector(corrector) => Line::resistor(corrector.siemens(here)),
            Self::Core(core) => Line::source(core.amps(here)),
            Self::Thermistor(thermistor) => Line::resistor(thermistor.siemens(here)),
            Self::Brushed(motor) => motor.line(here),
            Self::Squirrel(motor) => Line::source(here.state[motor.at]),
        }
    }

    /// Writes the slopes of this part's variables with `volts` across it.
    pub(super) fn slopes(&self, volts: f64, here: At, slope: &mut [f64]) {
        let state = here.state;
        match self {
            Self::Resistor(_) | Self::HalfShort { .. } => {}
            Self::Coil { ohms, henries, at } => slope[*at] = (volts - ohms * state[*at]) / henries,
            Self::Capacitor { ohms, farads, at } => {
                slope[*at] = siemens(*ohms) * (volts - state[*at]) / farads;
            }
            Self::Filament { body, at } => {
                let heat = body.at(state[*at]);
                slope[*at] = (volts * volts / heat.ohms - heat.lost_watts) / heat.joules_per_kelvin;
            }
            Self::Bridge(bridge) => bridge.slopes(volts, here, slope),
            Self::Corrector(corrector) => corrector.slopes(volts, here, slope),
            Self::Core(core) => core.slopes(volts, here, slope),
            Self::Thermistor(thermistor) => thermistor.slopes(volts, here, slope),
            Self::Brushed(motor) => motor.slopes(volts, here, slope),
            Self::Squirrel(motor) => motor.slopes(volts, here, slope),
        }
    }

    /// Offers how far each mode is from changing.
    pub(super) fn edges(&self, volts: f64, here: At, offer: &mut Offer) {
        match self {
            Self::HalfShort { edge_volts, mode, .. } => {
                let sign = if here.modes[*mode].conducts == 0.0 { -1.0 } else { 1.0 };
                offer(edge_volts + sign * volts, *mode, Half::Conducts);
            }
            Self::Bridge(bridge) => bridge.edges(volts, here, offer),
            _ => {}
        }
    }

    /// What the mode at a place becomes when one half of it changes; `None` where it belongs to another part.
    pub(super) fn turned(&self, volts: f64, here: At, place: usize, half: Half) -> Option<Mode> {
        match self {
            Self::HalfShort { mode, .. } if *mode == place => {
                Some(Mode { conducts: 1.0 - here.modes[place].conducts, ..Mode::OFF })
            }
            Self::Bridge(bridge) if bridge.mode == place => Some(bridge.turned(volts, here, half)),
            _ => None,
        }
    }

    /// What this part shows.
    pub(super) fn show(&self, state: &[f64], inside: &mut Inside) {
        match self {
            Self::Filament { at, .. } => inside.kelvin = Some(state[*at]),
            Self::Bridge(bridge) => inside.dc_volts = Some(state[bridge.at].max(0.0)),
            Self::Brushed(motor) => inside.speed = Some(state[motor.speed_at]),
            Self::Squirrel(motor) => inside.speed = Some(state[motor.speed_at]),
            _ => {}
        }
    }
}
