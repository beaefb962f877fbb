//! How fast a switch-mode supply pulses that starts, pulls its own input down, stops and starts again.
//!
//! Averaged over the mains cycle: each filament's heat and the reservoir's charge are integrated with the closed
//! form of the rectifier's pulse by the classical fourth-order Runge-Kutta method, each step as long as nothing
//! changes by more than a few per cent, until two starts in a row are the same distance apart.

use alloc::vec::Vec;
use core::f64::consts::SQRT_2;

use crate::bank::{Bank, Strand};
use crate::load::{Load, Rectifier, Thresholds};
use crate::supply::Supply;
use crate::tungsten::AMBIENT_KELVIN;
use crate::wire::Wire;

/// Where the integration gives up, seconds.
pub(crate) const LONGEST_SECONDS: f64 = 30.0;

/// Longest and shortest step, seconds.
const STRIDES: (f64, f64) = (0.02, 1e-4);

/// Change of a value in one step, relative to itself.
const CHANGE: f64 = 0.04;

/// More steps than any hunting takes that has a period.
const MOST_STEPS: usize = 50_000;

/// Two periods this close, relatively, are one.
const SAME: f64 = 0.01;

/// DC volts, then the kelvin of every distinct filament of the bank.
type State = [f64; 1 + Bank::MOST_LAMPS];

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
    let mut state = [AMBIENT_KELVIN; 1 + Bank::MOST_LAMPS];
    state[0] = 0.0;
    let mut running = false;
    let (mut seconds, mut waited) = (0.0, 0.0);
    let (mut last_start, mut last_period) = (None, None);
    for _ in 0..MOST_STEPS {
        let charged = state[0] >= start_volts;
        if !running && charged && waited >= restart_seconds {
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
        if seconds > LONGEST_SECONDS {
            break;
        }
        let slope = model.slope(&state, running);
        let mut stride = model.stride(&state, &slope);
        if !running && charged {
            stride = stride.min(restart_seconds - waited);
        }
        let next = model.step(&state, &slope, stride, running);
        let threshold = if running { stop_volts } else { start_volts };
        let crossed = if running { next[0] < stop_volts } else { !charged && next[0] >= start_volts };
        if crossed {
            // Along a step this short a straight line finds the moment; at least a little time passes.
            let part = ((threshold - state[0]) / (next[0] - state[0])).clamp(0.01, 1.0);
            for (value, end) in state.iter_mut().zip(next) {
                *value += part * (end - *value);
            }
            state[0] = threshold;
            seconds += part * stride;
            running = false;
        } else {
            state = next;
            seconds += stride;
            waited += if !running && charged { stride } else { 0.0 };
        }
    }
    last_period
}

struct Averaged<'a> {
    supply: &'a Supply,
    rectifier: &'a Rectifier,
    strands: Vec<(Strand<'a>, Wire)>,
}

impl<'a> Averaged<'a> {
    fn new(supply: &'a Supply, bank: &'a Bank, rectifier: &'a Rectifier) -> Self {
        let strands = bank.strands().map(|strand| (strand, Wire::of(strand.filament))).collect();
        Self { supply, rectifier, strands }
    }

    fn slope(&self, state: &State, running: bool) -> State {
        let mut points = [(0.0, 0.0); Bank::MOST_LAMPS];
        let mut groups = [(0.0, 0.0); Bank::MOST_LAMPS];
        for ((point, (strand, _)), kelvin) in points.iter_mut().zip(&self.strands).zip(&state[1..]) {
            let here = strand.filament.at_rise(kelvin - AMBIENT_KELVIN);
            *point = (here.ohms, here.watts);
            let (siemens, times) = &mut groups[strand.group];
            *siemens += strand.count / here.ohms;
            *times = strand.times;
        }
        let in_series = groups.iter().filter(|group| group.0 > 0.0);
        let bank_ohms: f64 = in_series.map(|(siemens, times)| times / siemens).sum();
        let dc_volts = state[0].max(0.0);
        let (mean, rms) = self.currents(bank_ohms + self.supply.ohms(), dc_volts);
        let drawn = if running {
            let crest = self.rectifier.open_volts(self.supply.volts(), self.supply.hertz());
            self.rectifier.drawn_amps(dc_volts.max(1e-3 * crest), crest)
        } else {
            0.0
        };
        let mut slope = [0.0; 1 + Bank::MOST_LAMPS];
        slope[0] = (mean - drawn) / self.rectifier.spec().farads;
        for (index, ((strand, wire), (ohms, watts))) in self.strands.iter().zip(points).enumerate() {
            let volts = rms / groups[strand.group].0;
            slope[1 + index] = (volts * volts / ohms - watts) / wire.joules_per_kelvin(state[1 + index]);
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

    /// How long a step may be at this slope.
    fn stride(&self, state: &State, slope: &State) -> f64 {
        let least_volts = 0.05 * self.supply.volts();
        let volts = state[0].max(least_volts) / slope[0].abs();
        let kelvins = state[1..].iter().zip(&slope[1..]).map(|(kelvin, slope)| kelvin / slope.abs());
        (CHANGE * kelvins.fold(volts, f64::min)).clamp(STRIDES.1, STRIDES.0)
    }

    /// One step of the classical method, its first slope known.
    fn step(&self, state: &State, k1: &State, h: f64, running: bool) -> State {
        let moved = |slope: &State, by: f64| -> State {
            core::array::from_fn(|index| state[index] + by * slope[index])
        };
        let k2 = self.slope(&moved(k1, h / 2.0), running);
        let k3 = self.slope(&moved(&k2, h / 2.0), running);
        let k4 = self.slope(&moved(&k3, h), running);
        let mut next: State = core::array::from_fn(|index| {
            state[index] + h / 6.0 * (k1[index] + 2.0 * (k2[index] + k3[index]) + k4[index])
        });
        next[0] = next[0].max(0.0);
        next
    }
}
