//! From a load as the steady solver knows it to its parts in the time domain.

use alloc::boxed::Box;
use alloc::vec::Vec;

use super::body::Body;
use super::branch::{Branch, Bridge, Core, Magnetising, Mode};
use super::circuit::{Circuit, KELVIN_SIZE};
use crate::load::{Draw, Load, RectifierSpec, Transformer};
use crate::tungsten::AMBIENT_KELVIN;

/// Conductance that stands for a dead short, siemens.
const SHORT_SIEMENS: f64 = 1e9;

/// Share of a transformer's winding resistance that belongs to the primary: equal copper losses on both sides, the
/// usual division (common practice, no source).
const PRIMARY_SHARE: f64 = 0.5;

/// Gathers the parts of a load with their states.
pub(super) struct Builder {
    circuit: Circuit,
    state: Vec<f64>,
    /// Flux of the first transformer at switch-on over its rated crest.
    remanence: f64,
    /// Resistance of source and cold bank, ohms.
    loop_ohms: f64,
    /// How much more closely a reservoir is followed than behind a lamp.
    close: f64,
}

impl Builder {
    pub(super) fn new(mut circuit: Circuit, remanence: f64) -> Self {
        let state = alloc::vec![AMBIENT_KELVIN; circuit.scale.len()];
        let loop_ohms = circuit.loop_ohms(&state);
        let close = (loop_ohms / LAMP_OHMS).clamp(LEAST_CLOSE, 1.0);
        circuit.edge_volts *= close;
        Self { close, circuit, state, remanence, loop_ohms }
    }

    /// The circuit with its load, and its state before the switch closes.
    pub(super) fn finish(mut self, load: &Load) -> (Circuit, Vec<f64>) {
        let branches = self.parts(load);
        self.circuit.branches = branches;
        (self.circuit, self.state)
    }

    /// A new variable: where it starts, and what size of it matters.
    fn variable(&mut self, start: f64, scale: f64) -> usize {
        self.state.push(start);
        self.circuit.scale.push(scale);
        self.state.len() - 1
    }

    fn mode(&mut self) -> usize {
        self.circuit.modes.push(Mode::OFF);
        self.circuit.modes.len() - 1
    }

    fn crest(&self) -> f64 {
        self.circuit.source().crest
    }

    fn parts(&mut self, load: &Load) -> Vec<Branch> {
        match load {
            Load::Short => alloc::vec![Branch::Resistor(SHORT_SIEMENS)],
            Load::Open => Vec::new(),
            Load::Impedance(impedance) => {
                alloc::vec![self.impedance(impedance.ohms(), impedance.reactance_ohms())]
            }
            Load::Lamp(lamp) => {
                let at = self.variable(AMBIENT_KELVIN, KELVIN_SIZE);
                alloc::vec![Branch::Filament { body: Body::of(lamp.filament()), at }]
            }
            Load::Rectifier(rectifier) => {
                alloc::vec![self.bridge(*rectifier.spec(), 0.0)]
            }
            Load::Transformer(transformer) => alloc::vec![self.transformer(transformer)],
        }
    }

    fn impedance(&mut self, ohms: f64, reactance_ohms: f64) -> Branch {
        let omega = self.circuit.source().omega;
        let total = libm::hypot(self.loop_ohms + ohms, reactance_ohms);
        if reactance_ohms > 0.0 {
            let at = self.variable(0.0, self.crest() / total);
            Branch::Coil { ohms, henries: reactance_ohms / omega, at }
        } else if reactance_ohms < 0.0 {
            let at = self.variable(0.0, self.crest());
            Branch::Capacitor { ohms, farads: -1.0 / (reactance_ohms * omega), at }
        } else {
            Branch::Resistor((1.0 / ohms).min(SHORT_SIEMENS))
        }
    }

    fn bridge(&mut self, spec: RectifierSpec, ohms_before: f64) -> Branch {
        let edge_ohms = self.loop_ohms + ohms_before + spec.series_ohms;
        let open_volts = (self.crest() - spec.diode_volts).max(0.0);
        let edge_volts = self.circuit.edge_volts;
        let omega = self.circuit.source().omega;
        let least_farads = if omega > 0.0 { LEAST_RADIANS / (omega * edge_ohms) } else { 0.0 };
        let spec = RectifierSpec { farads: spec.farads.max(least_farads), ..spec };
        let at = self.variable(0.0, self.close * self.crest());
        let mode = self.mode();
        Branch::Bridge(Bridge { spec, open_volts, edge_volts, edge_ohms, at, mode })
    }

    fn transformer(&mut self, transformer: &Transformer) -> Branch {
        let spec = *transformer.spec();
        let at = self.variable(self.remanence, 1.0);
        let primary_ohms = PRIMARY_SHARE * spec.winding_ohms;
        let rectifier = RectifierSpec {
            farads: spec.farads,
            series_ohms: spec.winding_ohms - primary_ohms,
            diode_volts: spec.diode_volts,
            draw: Draw::Ohms(spec.draw_ohms),
        };
        let bridge = self.bridge(rectifier, primary_ohms);
        let omega = self.circuit.source().omega;
        Branch::Transformer(Box::new(Core {
            primary_ohms,
            core_ohms: spec.core_ohms,
            magnetising: Magnetising::of(spec.rated_volts, spec.magnetising_amps, omega),
            secondary: alloc::vec![bridge],
            at,
        }))
    }
}

/// Resistance of a typical cold lamp, ohms: behind less, a reservoir's voltage is followed more closely, in proportion,
/// since its error is an error of the current through that resistance; but not below the second number.
const LAMP_OHMS: f64 = 100.0;
const LEAST_CLOSE: f64 = 0.003;

/// Part of a cycle, radian, within which a reservoir may follow the mains at most. A smaller one is enlarged to that: its
/// current changes by less than 1e-4 of the current of a short, and its diodes still turn off.
const LEAST_RADIANS: f64 = 1e-4;
