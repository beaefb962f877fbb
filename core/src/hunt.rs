//! How fast a switch-mode supply pulses that starts, pulls its own input down, stops and starts again.
//!
//! Averaged over the mains cycle: each filament's heat and the reservoir's charge are integrated with the closed
//! form of the rectifier's pulse, with a fixed step of the classical fourth-order Runge-Kutta method, until two
//! starts in a row are the same distance apart.

use alloc::vec::Vec;
use core::f64::consts::SQRT_2;

use crate::bank::Bank;
use crate::lamp::Lamp;
use crate::load::{Load, Rectifier, Thresholds};
use crate::supply::Supply;
use crate::tungsten::AMBIENT_KELVIN;
use crate::wire::Wire;

/// Where the integration gives up, seconds.
pub(crate) const LONGEST_SECONDS: f64 = 30.0;

const STEP_SECONDS: f64 = 1e-3;

/// Two periods this close, relatively, are one.
const SAME: f64 = 0.01;

/// Time from one start to the next, seconds; `None` where fewer than two starts fit into 30 s.
pub(crate) fn period_seconds(supply: &Supply, bank: &Bank, load: &Load) -> Option<f64> {
    let Thresholds { start_volts, stop_volts, restart_seconds } = load.thresholds()?;
    let rectifier = match load {
        Load::Rectifier(rectifier) => *rectifier,
        Load::Degauss(degauss) => *degauss.warm(),
        Load::Corrected(corrected) => corrected.as_rectifier().ok()?,
        _ => return None,
    };
    let model = Averaged::new(supply, bank, &rectifier);
    let mut state = model.cold();
    let mut running = false;
    let mut waited = 0.0;
    let (mut last_start, mut last_period) = (None, None);
    let steps = LONGEST_SECONDS / STEP_SECONDS;
    let mut seconds = 0.0;
    while seconds < steps * STEP_SECONDS {
        model.step(&mut state, running);
        seconds += STEP_SECONDS;
        let dc_volts = state[0];
        if running && dc_volts < stop_volts {
            running = false;
        } else if !running && dc_volts >= start_volts && waited < restart_seconds {
            waited += STEP_SECONDS;
        } else if !running && dc_volts >= start_volts {
            running = true;
            waited = 0.0;
            let period = last_start.map(|start: f64| seconds - start);
            if let (Some(now), Some(before)) = (period, last_period)
                && libm::fabs(now / before - 1.0) < SAME
            {
                return period;
            }
            last_start = Some(seconds);
            last_period = period;
        }
    }
    last_period
}

/// State: DC volts, then every filament's kelvin in the order of the bank.
struct Averaged<'a> {
    supply: &'a Supply,
    bank: &'a Bank,
    rectifier: &'a Rectifier,
    wires: Vec<Wire>,
}

impl<'a> Averaged<'a> {
    fn new(supply: &'a Supply, bank: &'a Bank, rectifier: &'a Rectifier) -> Self {
        let wires = bank.groups().iter().flatten().map(|lamp| Wire::of(lamp.filament())).collect();
        Self { supply, bank, rectifier, wires }
    }

    fn cold(&self) -> Vec<f64> {
        let mut state = alloc::vec![AMBIENT_KELVIN; 1 + self.wires.len()];
        state[0] = 0.0;
        state
    }

    fn slope(&self, state: &[f64], running: bool) -> Vec<f64> {
        let ohms = |lamp: &Lamp, kelvin: f64| lamp.filament().at_rise(kelvin - AMBIENT_KELVIN).ohms;
        let mut kelvins = state[1..].iter();
        let mut group_ohms = Vec::with_capacity(self.bank.groups().len());
        for group in self.bank.groups() {
            let siemens: f64 =
                group.iter().zip(kelvins.by_ref()).map(|(lamp, &kelvin)| 1.0 / ohms(lamp, kelvin)).sum();
            group_ohms.push(1.0 / siemens);
        }
        let bank_ohms: f64 = group_ohms.iter().sum();
        let dc_volts = state[0].max(0.0);
        let (mean, rms) = self.currents(bank_ohms + self.supply.ohms(), dc_volts);
        let drawn = if running {
            let crest = self.rectifier.open_volts(self.supply.volts(), self.supply.hertz());
            self.rectifier.drawn_amps(dc_volts.max(1e-3 * crest), crest)
        } else {
            0.0
        };
        let mut slope = alloc::vec![(mean - drawn) / self.rectifier.spec().farads];
        let lamps = self
            .bank
            .groups()
            .iter()
            .zip(&group_ohms)
            .flat_map(|(group, &ohms)| group.iter().map(move |lamp| (lamp, ohms)));
        for (((lamp, ohms), wire), &kelvin) in lamps.zip(&self.wires).zip(&state[1..]) {
            let point = lamp.filament().at_rise(kelvin - AMBIENT_KELVIN);
            let volts = rms * ohms;
            slope.push((volts * volts / point.ohms - point.watts) / wire.joules_per_kelvin(kelvin));
        }
        slope
    }

    /// Mean and RMS current into the reservoir at frozen bank resistance and DC volts.
    fn currents(&self, ohms: f64, dc_volts: f64) -> (f64, f64) {
        let spec = self.rectifier.spec();
        let ohms = ohms + spec.series_ohms;
        let held = dc_volts + spec.diode_volts;
        if self.supply.is_direct() {
            let amps = ((self.supply.volts() - held) / ohms).max(0.0);
            return (amps, amps);
        }
        let crest = SQRT_2 * self.supply.volts();
        if held >= crest {
            return (0.0, 0.0);
        }
        let pulse = crate::load::Pulse::holding(held / crest);
        (crest / ohms * pulse.mean(), crest / ohms * pulse.rms())
    }

    fn step(&self, state: &mut [f64], running: bool) {
        let h = STEP_SECONDS;
        let moved = |slope: &[f64], by: f64| -> Vec<f64> {
            state.iter().zip(slope).map(|(value, slope)| value + by * slope).collect()
        };
        let k1 = self.slope(state, running);
        let k2 = self.slope(&moved(&k1, h / 2.0), running);
        let k3 = self.slope(&moved(&k2, h / 2.0), running);
        let k4 = self.slope(&moved(&k3, h), running);
        for (index, value) in state.iter_mut().enumerate() {
            *value += h / 6.0 * (k1[index] + 2.0 * (k2[index] + k3[index]) + k4[index]);
        }
        state[0] = state[0].max(0.0);
    }
}
