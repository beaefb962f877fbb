//! From a load as the steady solver knows it to its parts in the time domain.

use alloc::boxed::Box;
use alloc::vec::Vec;

use super::body::Body;
use super::branch::{Branch, Mode, siemens};
use super::bridge::{BOOST, Bridge, Corrector};
use super::circuit::{Circuit, KELVIN_SIZE};
use super::core_flux::{Core, Magnetising};
use super::motor::{Brushed, Squirrel};
use super::thermistor::Thermistor;
use crate::load::{Corrected, Degauss, Draw, Load, PowerSupply, Rectifier};
use crate::tungsten::AMBIENT_KELVIN;

/// Conductance that stands for a dead short, siemens.
const SHORT_SIEMENS: f64 = 1e9;

/// Share of a transformer's winding resistance that belongs to the primary: equal copper losses on both sides, the
/// usual division (common practice, no source).
const PRIMARY_SHARE: f64 = 0.5;

/// Heat in valve heaters and cathodes at their working temperature, over their rated watts, seconds: from it follow the
/// 10 to 20 s after which a set begins to play (common practice, no source).
const HEATER_SECONDS: f64 = 20.0;

/// Periods of the mains over which a corrector averages its voltage (design value).
const CORRECTOR_PERIODS: f64 = 1.0;

/// Resistance of a typical cold lamp, ohms: behind less, a reservoir's voltage is followed more closely, in proportion,
/// since its error is an error of the current through that resistance; but not below the second number.
const LAMP_OHMS: f64 = 100.0;
const LEAST_CLOSE: f64 = 0.003;

/// Part of a cycle, radian, within which a reservoir may follow the mains at most. A smaller one is enlarged to that:
/// its current changes by less than 1e-4 of the current of a short, and its diodes still turn off.
const LEAST_RADIANS: f64 = 1e-4;

/// Gathers the parts of a load with their variables.
pub(super) struct Builder {
    circuit: Circuit,
    state: Vec<f64>,
    /// Flux of a transformer at switch-on over its rated crest.
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
        Self { circuit, state, remanence, loop_ohms, close }
    }

    /// The circuit with its load, and its state before the switch closes.
    pub(super) fn finish(mut self, load: &Load) -> (Circuit, Vec<f64>) {
        let mut branches = Vec::new();
        match load {
            Load::Short => branches.push(Branch::Resistor(SHORT_SIEMENS)),
            Load::Open => {}
            Load::Impedance(impedance) => {
                branches.push(self.impedance(impedance.ohms(), impedance.reactance_ohms()));
            }
            Load::Lamp(lamp) => branches.push(self.filament(Body::of(lamp.filament()))),
            Load::Rectifier(rectifier) => {
                branches.extend(rectifier.spec().shunt_ohms.map(|ohms| Branch::Resistor(1.0 / ohms)));
                branches.push(self.rectifier(rectifier));
            }
            Load::PowerSupply(supply) => self.power_supply(supply, &mut branches),
            Load::HalfShort(short) => {
                let (edge_volts, mode) = (self.circuit.edge_volts, self.mode());
                branches.push(Branch::HalfShort { siemens: siemens(short.ohms()), edge_volts, mode });
            }
            Load::Corrected(corrected) => self.corrected(corrected, &mut branches),
            Load::Degauss(degauss) => self.degauss(degauss, &mut branches),
            Load::UniversalMotor(motor) => {
                let spec = *motor.spec();
                let omega = self.omega();
                // An inductance that shows only on alternating current is not known on direct current.
                let coil = (spec.reactance_ohms > 0.0 && omega > 0.0).then(|| {
                    let scale = self.amps(spec.ohms, spec.reactance_ohms);
                    (spec.reactance_ohms / omega, self.variable(0.0, scale))
                });
                let speed_at = self.variable(0.0, 1.0);
                branches.push(Branch::Brushed(Brushed { spec, coil, speed_at }));
            }
            Load::InductionMotor(motor) => {
                let spec = *motor.spec();
                let scale = self.amps(
                    spec.stator_ohms + spec.rotor_ohms,
                    spec.stator_reactance_ohms + spec.rotor_reactance_ohms,
                );
                let places = [self.variable(0.0, scale), self.variable(0.0, scale), self.variable(0.0, 1.0)];
                branches.push(Branch::Squirrel(Squirrel::new(spec, self.omega(), places)));
            }
        }
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

    fn omega(&self) -> f64 {
        self.circuit.source().omega
    }

    /// Current through an impedance behind the cold bank, amperes.
    fn amps(&self, ohms: f64, reactance_ohms: f64) -> f64 {
        self.crest() / libm::hypot(self.loop_ohms + ohms, reactance_ohms)
    }

    fn impedance(&mut self, ohms: f64, reactance_ohms: f64) -> Branch {
        let omega = self.omega();
        if reactance_ohms > 0.0 {
            let at = self.variable(0.0, self.amps(ohms, reactance_ohms));
            Branch::Coil { ohms, henries: reactance_ohms / omega, at }
        } else if reactance_ohms < 0.0 {
            let at = self.variable(0.0, self.close * self.crest());
            Branch::Capacitor { ohms, farads: -1.0 / (reactance_ohms * omega), at }
        } else {
            Branch::Resistor((1.0 / ohms).min(SHORT_SIEMENS))
        }
    }

    fn filament(&mut self, body: Body) -> Branch {
        Branch::Filament { body, at: self.variable(AMBIENT_KELVIN, KELVIN_SIZE) }
    }

    fn rectifier(&mut self, rectifier: &Rectifier) -> Branch {
        let spec = rectifier.spec();
        let bridge = self.bridge(spec.series_ohms, spec.diode_volts, spec.farads, spec.draw);
        Branch::Bridge(Box::new(bridge))
    }

    fn bridge(&mut self, series_ohms: f64, diode_volts: f64, farads: f64, draw: Draw) -> Bridge {
        let edge_ohms = self.loop_ohms + series_ohms;
        let omega = self.omega();
        let least_farads = if omega > 0.0 { LEAST_RADIANS / (omega * edge_ohms) } else { 0.0 };
        Bridge {
            siemens: siemens(series_ohms),
            diode_volts,
            farads: farads.max(least_farads),
            draw,
            half_wave: false,
            valves: None,
            open_volts: (self.crest() - diode_volts).max(0.0),
            edge_volts: self.circuit.edge_volts,
            edge_ohms,
            at: self.variable(0.0, self.close * self.crest()),
            mode: self.mode(),
        }
    }

    fn power_supply(&mut self, supply: &PowerSupply, branches: &mut Vec<Branch>) {
        let spec = supply.spec();
        branches.push(Branch::Resistor(1.0 / spec.core_ohms));
        if spec.magnetising_amps > 0.0 {
            branches.push(Branch::Core(Core {
                primary_ohms: PRIMARY_SHARE * spec.winding_ohms,
                magnetising: Magnetising::of(
                    spec.rated_volts,
                    spec.magnetising_amps,
                    self.omega(),
                    spec.winding_ohms,
                ),
                at: self.variable(self.remanence, 1.0),
            }));
        }
        let draw = Draw::Ohms(spec.draw_ohms);
        let mut bridge = self.bridge(spec.winding_ohms, spec.diode_volts, spec.farads, draw);
        bridge.half_wave = spec.half_wave;
        if let Some(heater) = supply.heater() {
            let body = Body::storing(heater, HEATER_SECONDS * spec.heater_watts);
            let at = self.variable(AMBIENT_KELVIN, KELVIN_SIZE);
            branches.push(Branch::Filament { body, at });
            bridge.valves = Some((Box::new(supply.clone()), at));
        }
        branches.push(Branch::Bridge(Box::new(bridge)));
    }

    fn corrected(&mut self, corrected: &Corrected, branches: &mut Vec<Branch>) {
        let spec = corrected.spec();
        let draw = Draw::Watts {
            watts: spec.watts,
            start_volts: spec.start_volts,
            stop_volts: spec.stop_volts,
            restart_seconds: spec.restart_seconds,
        };
        let bridge = self.bridge(0.0, 0.0, spec.farads, draw);
        let crest = self.crest();
        let omega = self.omega();
        // The stop is a crest on alternating current, the voltage itself on direct current.
        let (mean_share, period) =
            if omega > 0.0 { (0.5, 2.0 * core::f64::consts::PI / omega) } else { (1.0, 0.02) };
        let corrector = Corrector {
            watts: spec.watts,
            farads: bridge.farads,
            target_volts: BOOST * crest,
            least_square: mean_share * spec.stop_volts.max(1.0) * spec.stop_volts.max(1.0),
            mean_seconds: CORRECTOR_PERIODS * period,
            at: self.variable(0.0, crest * crest),
            bridge_at: bridge.at,
            bridge_mode: bridge.mode,
        };
        branches.push(Branch::Bridge(Box::new(bridge)));
        branches.push(Branch::Corrector(corrector));
    }

    fn degauss(&mut self, degauss: &Degauss, branches: &mut Vec<Branch>) {
        let cold_ohms = degauss.cold().ohms();
        // The thermistor itself is the warm supply's shunt.
        let warm_ohms = degauss.warm().spec().shunt_ohms.unwrap_or(500.0 * cold_ohms);
        let direct_crest = if self.omega() > 0.0 { core::f64::consts::FRAC_1_SQRT_2 } else { 1.0 };
        let volts = direct_crest * self.crest();
        let at = self.variable(0.0, 1.0);
        branches.push(Branch::Thermistor(Thermistor::new(
            cold_ohms,
            degauss.trip_watts(),
            warm_ohms,
            volts,
            at,
        )));
        branches.push(self.rectifier(degauss.warm()));
    }
}
