//! One run through the first seconds, in slices of any size.

use alloc::vec::Vec;
use core::f64::consts::FRAC_PI_2;

use super::build::Builder;
use super::circuit::{Circuit, Instant, Source};
use super::explicit::WEIGHTS;
use super::record::{Rates, Recorder, sample_grid, settle_seconds};
use super::stepper::Stepper;
use super::worst::Search;
use super::{MAINS_OHMS, Moment, Options, Sample, SwitchOn, SwitchOnError};
use crate::bank::Bank;
use crate::load::Load;
use crate::roots::{self, Tolerance};
use crate::supply::Supply;

/// Whether a run has come to its end.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum Progress {
    /// It has come this far, seconds; negative while the worst angle is still sought.
    Reached(f64),
    /// It is complete.
    Done,
}

/// A simulation that can be advanced a little at a time, so that a page never blocks.
///
/// ```
/// # use lampladder_core::{bank::Bank, lamp::Lamp, load::Load, supply::Supply};
/// use lampladder_core::switch_on::{Options, Progress, Run};
/// # let supply = Supply::new(230.0, 50.0, 0.0)?;
/// # let bank = Bank::single(Lamp::new(230.0, 100.0)?);
/// let mut run = Run::new(&supply, Some(&bank), &Load::Short, &Options::default())?;
/// while run.advance(500)? != Progress::Done {
///     // Let the page breathe.
/// }
/// let result = run.finish();
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Debug, Clone)]
pub struct Run {
    given: Given,
    search: Option<Search>,
    /// Place in the state of every lamp, in the order of the bank.
    places: Vec<usize>,
    switch_degrees: f64,
    circuit: Circuit,
    stepper: Stepper,
    state: Vec<f64>,
    middle: Vec<f64>,
    seconds: f64,
    /// The step to try next, seconds.
    next: f64,
    /// The step never exceeds this, seconds.
    longest: f64,
    now: Instant,
    recorder: Recorder,
    samples: Vec<Sample>,
    asked: Vec<Sample>,
    grid: f64,
    /// Steps tried, and at which number to give up.
    tries: u32,
    most_tries: u32,
    steps: u32,
}

/// What a run was asked for; kept so that a search can start it again.
#[derive(Debug, Clone)]
pub(super) struct Given {
    pub(super) supply: Supply,
    pub(super) bank: Option<Bank>,
    pub(super) load: Load,
    pub(super) options: Options,
}

/// Most steps of any run, and more for every period of the mains: several times what a run needs unless it chatters.
const MOST_TRIES: f64 = 100_000.0;
const MOST_TRIES_PER_PERIOD: f64 = 300.0;

impl Run {
    /// A run of a load behind a bank, or straight on the mains.
    ///
    /// # Errors
    /// An option out of range; a load that has no meaning on this supply.
    pub fn new(
        supply: &Supply,
        bank: Option<&Bank>,
        load: &Load,
        options: &Options,
    ) -> Result<Self, SwitchOnError> {
        options.check(supply)?;
        load.check(supply)?;
        let supply = if bank.is_none() && supply.ohms() == 0.0 {
            Supply::new(supply.volts(), supply.hertz(), MAINS_OHMS)?
        } else {
            *supply
        };
        let given = Given { supply, bank: bank.cloned(), load: load.clone(), options: options.clone() };
        let (degrees, search) = match options.moment {
            Moment::Worst if !supply.is_direct() => (0.0, Some(Search::new(&given))),
            Moment::Worst => (90.0, None),
            Moment::Degrees(degrees) => (degrees, None),
        };
        Ok(Self::at(given, degrees, search))
    }

    pub(super) fn at(given: Given, switch_degrees: f64, search: Option<Search>) -> Self {
        let Given { supply, bank, load, options } = &given;
        let source = Source::new(supply, switch_degrees);
        let (circuit, places) = Circuit::new(source, bank.as_ref(), options.tolerance);
        let (mut circuit, state) = Builder::new(circuit, options.remanence).finish(load);
        let mut starts = Vec::new();
        circuit.settle_modes(0.0, &state, || starts.push(0.0));
        let now = circuit.instant(0.0, &state);
        let period = if supply.is_direct() { 0.0 } else { 1.0 / supply.hertz() };
        // A tenth of a period keeps Simpson's rule for the RMS within 1e-4; on direct current, a fiftieth of the run.
        let longest = if supply.is_direct() { options.seconds / 50.0 } else { period / 10.0 };
        let grid = sample_grid(options, period);
        let periods = options.seconds * supply.hertz();
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "at most 20,000 periods: a few million"
        )]
        let most_tries = (MOST_TRIES + MOST_TRIES_PER_PERIOD * periods) as u32;
        let mut recorder = Recorder::new(period);
        recorder.starts = starts;
        let mut run = Self {
            search,
            places,
            switch_degrees,
            stepper: Stepper::new(&circuit),
            middle: state.clone(),
            seconds: 0.0,
            next: longest * 1e-3,
            longest,
            now,
            recorder,
            samples: Vec::new(),
            asked: Vec::new(),
            grid,
            tries: 0,
            most_tries,
            steps: 0,
            circuit,
            state,
            given,
        };
        run.take_samples(0.0, 0.0);
        run
    }

    /// Goes on for at most `steps` steps of the solver, about a microsecond each in native code.
    ///
    /// # Errors
    /// A lamp that would burn out; a circuit that changes too fast to follow. Both are final.
    pub fn advance(&mut self, steps: u32) -> Result<Progress, SwitchOnError> {
        let mut left = steps;
        if let Some(search) = &mut self.search {
            let Some(degrees) = search.advance(&mut left)? else { return Ok(Progress::Reached(-1.0)) };
            *self = Self::at(self.given.clone(), degrees, None);
        }
        while self.seconds < self.given.options.seconds {
            if left == 0 {
                return Ok(Progress::Reached(self.seconds));
            }
            left -= 1;
            self.step()?;
        }
        Ok(Progress::Done)
    }

    /// Runs to the end in one go.
    ///
    /// # Errors
    /// As [`Self::advance`].
    pub fn complete(mut self) -> Result<SwitchOn, SwitchOnError> {
        while self.advance(u32::MAX)? != Progress::Done {}
        Ok(self.finish())
    }

    /// The samples so far, for a page that shows them as they come.
    pub fn samples(&self) -> &[Sample] {
        &self.samples
    }

    /// When a converter in the load started so far, seconds.
    pub(crate) fn starts(&self) -> &[f64] {
        &self.recorder.starts
    }

    /// Highest current so far and when it flowed: seconds, amperes.
    pub(super) const fn peak(&self) -> (f64, f64) {
        self.recorder.peak
    }

    /// Steps taken so far.
    pub(super) const fn steps(&self) -> u32 {
        self.steps
    }

    /// The result, of as far as the run has come.
    pub fn finish(self) -> SwitchOn {
        let mut energy = self.recorder.energy;
        energy.stored_joules = self.circuit.stored_joules(&self.state);
        SwitchOn {
            switch_degrees: self.switch_degrees,
            peak_amps: self.recorder.peak.1,
            peak_seconds: self.recorder.peak.0,
            i2t_amp2_seconds: self.recorder.i2t,
            settle_seconds: settle_seconds(&self.samples),
            samples: self.samples,
            asked: self.asked,
            heating: self.recorder.heating,
            starts: self.recorder.starts,
            energy,
            steps: self.steps,
            evaluations: self.stepper.evaluations(),
        }
    }

    /// Where the next step must end at the latest: a zero or crest of the supply, the start of a converter, the end.
    fn stop(&self) -> f64 {
        let end = self.given.options.seconds.min(self.circuit.due());
        let source = self.circuit.source();
        if source.omega == 0.0 {
            return end;
        }
        let phase = source.omega * self.seconds + source.phase;
        let quarter = libm::floor(phase / FRAC_PI_2 + 1e-6) + 1.0;
        let stop = (quarter * FRAC_PI_2 - source.phase) / source.omega;
        // No sliver of a step where a quarter period ends at the end but for rounding.
        if stop > end - 1e-6 / source.omega { end } else { stop }
    }

    /// One accepted step.
    fn step(&mut self) -> Result<(), SwitchOnError> {
        let stop = self.stop();
        let room = stop - self.seconds;
        let (tolerance, start) = (self.given.options.tolerance, self.seconds);
        self.stepper.start(&self.circuit, start, &self.state);
        let length = loop {
            let wanted = self.next.min(self.longest);
            // Neither a sliver left over nor a step much longer than wanted.
            let length = if wanted > 0.99 * room {
                room
            } else if wanted > 0.5 * room {
                0.5 * room
            } else {
                wanted
            };
            self.tries += 1;
            if self.tries > self.most_tries || length < start * 1e-15 || length <= 0.0 {
                return Err(SwitchOnError::TooManySteps { seconds: start });
            }
            let (error, factor) = self.stepper.attempt(&self.circuit, start, length, tolerance);
            self.next = length * factor;
            if error <= 1.0 {
                break length;
            }
        };
        self.steps += 1;
        let short = length < SHORT_SHARE * self.longest;
        self.stepper.keep(&self.circuit, length, short);
        let share = self.until_edge(start, length);
        self.seconds = if share == 1.0 && length == room { stop } else { start + share * length };
        self.take_samples(start, length);
        if share < 1.0 || self.seconds >= self.circuit.due() {
            let starts = &mut self.recorder.starts;
            let seconds = self.seconds;
            self.circuit.settle_modes(seconds, &self.state, || starts.push(seconds));
            self.now = self.circuit.instant(seconds, &self.state);
            self.stepper.choose(&self.circuit, true);
        } else {
            self.stepper.choose(&self.circuit, false);
        }
        match self.circuit.melting(&self.state) {
            Some(body) => Err(self.melts(body)),
            None => Ok(()),
        }
    }

    /// Moves the state to the end of the step or to the first edge in it, and records what happened on the way; gives
    /// the share of the step that is used.
    fn until_edge(&mut self, start: f64, length: f64) -> f64 {
        let seen = self.stepper.seen();
        self.state.copy_from_slice(self.stepper.to());
        let end = match seen {
            Some(seen) => seen[6],
            None => self.circuit.instant(start + length, &self.state),
        };
        let has_modes = !self.circuit.modes.is_empty();
        // The middle is needed where nothing was seen on the way, where a diode might open and close again within the
        // step, and where the current may have its highest crest.
        let first = self.now;
        let may_peak = self.recorder.may_peak(first.amps, end.amps);
        let mut middle = None;
        if seen.is_none() || may_peak || (has_modes && !self.circuit.conducts()) {
            self.stepper.inside(0.5, &mut self.middle);
            middle = Some(self.circuit.instant(start + 0.5 * length, &self.middle));
        }
        if has_modes && let Some((from, to)) = self.bracket(start, length, middle.as_ref(), &end) {
            let share = self.edge(start, length, from, to);
            self.stepper.inside(0.5 * share, &mut self.middle);
            let middle = self.circuit.instant(start + 0.5 * share * length, &self.middle);
            self.stepper.inside(share, &mut self.state);
            let end = self.circuit.instant(start + share * length, &self.state);
            self.record(start, share * length, &middle, &end);
            return share;
        }
        match (seen, middle) {
            (Some(seen), middle) => {
                let mean = Rates::sum(WEIGHTS.into_iter().zip(seen));
                self.recorder.segment(start, length, [&first, &end], &mean);
                if let Some(middle) = middle {
                    self.recorder.crest(start, length, [first.amps, middle.amps, end.amps]);
                }
                self.now = end;
            }
            (None, Some(middle)) => self.record(start, length, &middle, &end),
            (None, None) => {}
        }
        1.0
    }

    /// Records a step by Simpson's rule.
    fn record(&mut self, start: f64, seconds: f64, middle: &Instant, end: &Instant) {
        let first = self.now;
        let weighted = [(1.0 / 6.0, &first), (4.0 / 6.0, middle), (1.0 / 6.0, end)];
        self.recorder.segment(start, seconds, [&first, end], &Rates::sum(weighted.into_iter()));
        self.recorder.crest(start, seconds, [first.amps, middle.amps, end.amps]);
        self.now = *end;
    }

    /// Shares of the step between which a mode changes, with the least margins there.
    fn bracket(
        &self,
        start: f64,
        length: f64,
        middle: Option<&Instant>,
        end: &Instant,
    ) -> Option<((f64, f64), (f64, f64))> {
        let mut from = (0.0, f64::NAN);
        if let Some(middle) = middle {
            let margin = self.circuit.margin(start + 0.5 * length, &self.middle, Some(middle.volts));
            if margin <= 0.0 {
                return Some((from, (0.5, margin)));
            }
            from = (0.5, margin);
        }
        let margin = self.circuit.margin(start + length, &self.state, Some(end.volts));
        (margin <= 0.0).then_some((from, (1.0, margin)))
    }

    /// The share of the step at which the first mode changes, between two shares with their margins.
    fn edge(&mut self, start: f64, length: f64, mut from: (f64, f64), to: (f64, f64)) -> f64 {
        let mut point = core::mem::take(&mut self.middle);
        let mut margin = |share: f64| {
            self.stepper.inside(share, &mut point);
            self.circuit.margin(start + share * length, &point, None)
        };
        if from.1.is_nan() {
            from.1 = margin(from.0);
        }
        // A margin that is only rounded below zero at the start: the edge is there.
        let share = if from.1 <= 0.0 {
            LEAST_SHARE
        } else {
            let tolerance = Tolerance { x: 1e-10, residual: 0.5 * self.circuit.slack() };
            let found = roots::between(&mut margin, from, to, tolerance);
            found.map_or(to.0, |root| root.x.max(LEAST_SHARE))
        };
        self.middle = point;
        share
    }

    /// Samples that fall due up to the present; the last step began at `start` and would have been `length` long.
    fn take_samples(&mut self, start: f64, length: f64) {
        loop {
            #[expect(clippy::cast_precision_loss, reason = "a count of samples")]
            let (taken, asked) = (self.samples.len() as f64, self.asked.len());
            let on_grid = taken * self.grid;
            // The last point of the grid may miss the end by rounding.
            let on_grid = if (on_grid - self.given.options.seconds).abs() < 1e-9 * on_grid {
                self.given.options.seconds
            } else {
                on_grid
            };
            let wanted = self.given.options.at.get(asked).copied().unwrap_or(f64::INFINITY);
            let seconds = on_grid.min(wanted);
            if seconds > self.seconds || seconds > self.given.options.seconds {
                return;
            }
            let share = if length > 0.0 { ((seconds - start) / length).min(1.0) } else { 0.0 };
            if length > 0.0 {
                self.stepper.inside(share, &mut self.middle);
            } else {
                self.middle.copy_from_slice(&self.state);
            }
            let kelvins = self.places.iter().map(|&place| self.middle[place]).collect();
            let inside = self.circuit.show(&self.middle);
            // Only direct current needs the instant itself.
            let instant = if self.circuit.source().omega == 0.0 {
                self.circuit.instant(seconds, &self.middle)
            } else {
                self.now
            };
            let sample = self.recorder.sample(seconds, &instant, kelvins, inside);
            if seconds == wanted {
                self.asked.push(sample.clone());
            }
            if seconds == on_grid {
                self.samples.push(sample);
            }
        }
    }

    fn melts(&self, body: usize) -> SwitchOnError {
        let seconds = self.seconds;
        let place = self.places.iter().position(|&place| place == body).unwrap_or(0);
        let mut left = place;
        let groups = self.given.bank.as_ref().map_or(&[][..], Bank::groups);
        for (group, lamps) in groups.iter().enumerate() {
            if left < lamps.len() {
                return SwitchOnError::FilamentMelts { group, lamp: left, seconds };
            }
            left -= lamps.len();
        }
        SwitchOnError::FilamentMelts { group: 0, lamp: 0, seconds }
    }
}

/// A step shorter than this share of the longest one may be held back by stability alone.
const SHORT_SHARE: f64 = 0.3;

/// The smallest share of a step that counts as progress.
const LEAST_SHARE: f64 = 1e-9;
