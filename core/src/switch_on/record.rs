//! What is kept of the first seconds: peaks, integrals, and samples on a grid.

use alloc::collections::VecDeque;
use alloc::vec::Vec;

use super::branch::Inside;
use super::circuit::Instant;
use super::{Energy, Heating, Options, Sample};

/// What is integrated over time.
#[derive(Debug, Clone, Copy, Default)]
pub(super) struct Rates {
    /// Squared current, ampere squared, and squared load voltage, volt squared.
    squares: [f64; 2],
    bank_watts: f64,
    lost_watts: f64,
}

impl Rates {
    /// The sum of what a few instants show, each with its weight.
    pub(super) fn sum<'a>(instants: impl Iterator<Item = (f64, &'a Instant)>) -> Self {
        let mut sum = Self::default();
        for (weight, instant) in instants {
            sum.squares[0] += weight * instant.amps * instant.amps;
            sum.squares[1] += weight * instant.volts * instant.volts;
            sum.bank_watts += weight * instant.bank_watts;
            sum.lost_watts += weight * instant.lost_watts;
        }
        sum
    }
}

/// One accepted step, as far as windows need it.
#[derive(Debug, Clone, Copy)]
struct Segment {
    start: f64,
    seconds: f64,
    /// Integrals of the squares up to the start, and over the step.
    totals: [f64; 2],
    gains: [f64; 2],
    /// The squares at both ends.
    ends: [[f64; 2]; 2],
}

impl Segment {
    /// Integrals up to a share of the segment: the cubic that has their values and slopes at both ends.
    fn totals_at(&self, share: f64) -> [f64; 2] {
        core::array::from_fn(|index| {
            let gain = self.gains[index];
            let (first, last) = (self.seconds * self.ends[0][index], self.seconds * self.ends[1][index]);
            let (square, cube) = (3.0 * gain - 2.0 * first - last, first + last - 2.0 * gain);
            self.totals[index] + share * (first + share * (square + share * cube))
        })
    }
}

/// Integrals beyond which the surge is over and the grid's samples are fine enough for a fuse.
const SURGE_SECONDS: f64 = 0.2;

/// A step whose ends stay below this share of the highest current so far cannot hold a higher one: steps end at every
/// quarter period, and a crest is no narrower than a third of that.
const NEAR_PEAK: f64 = 0.5;

/// Over which the surge's heat is given.
const I2T_SECONDS: f64 = 0.1;

/// Collects results while a run goes on.
#[derive(Debug, Clone)]
pub(super) struct Recorder {
    /// Period of the mains, seconds; 0 on direct current, where RMS is the value itself.
    period: f64,
    segments: VecDeque<Segment>,
    totals: [f64; 2],
    pub(super) peak: (f64, f64),
    pub(super) i2t: f64,
    pub(super) heating: Vec<Heating>,
    pub(super) energy: Energy,
    pub(super) starts: Vec<f64>,
}

impl Recorder {
    pub(super) fn new(period: f64) -> Self {
        Self {
            period,
            segments: VecDeque::new(),
            totals: [0.0; 2],
            peak: (0.0, 0.0),
            i2t: 0.0,
            heating: Vec::new(),
            energy: Energy::default(),
            starts: Vec::new(),
        }
    }

    /// Takes in an accepted step, known at its ends, with the mean of what is integrated.
    pub(super) fn segment(&mut self, start: f64, seconds: f64, [first, last]: [&Instant; 2], mean: &Rates) {
        let square = |instant: &Instant| [instant.amps * instant.amps, instant.volts * instant.volts];
        let segment = Segment {
            start,
            seconds,
            totals: self.totals,
            gains: mean.squares.map(|square| square * seconds),
            ends: [square(first), square(last)],
        };
        self.totals = segment.totals_at(1.0);
        let end = start + seconds;
        if start < I2T_SECONDS {
            self.i2t = segment.totals_at(((I2T_SECONDS - start) / seconds).min(1.0))[0];
        }
        if end < SURGE_SECONDS {
            self.heating.push(Heating { seconds: end, amp2_seconds: self.totals[0] });
        }
        self.peak_at(start, first.amps.abs());
        self.peak_at(end, last.amps.abs());
        self.energy.into_lamps_joules += seconds * mean.bank_watts;
        self.energy.lost_joules += seconds * mean.lost_watts;
        while self.segments.front().is_some_and(|old| old.start + old.seconds < start - self.period) {
            self.segments.pop_front();
        }
        self.segments.push_back(segment);
    }

    fn peak_at(&mut self, seconds: f64, amps: f64) {
        if amps > self.peak.1 {
            self.peak = (seconds, amps);
        }
    }

    /// Whether the crest of the current may lie inside a step that begins and ends with these.
    pub(super) fn may_peak(&self, first: f64, last: f64) -> bool {
        first.abs().max(last.abs()) > NEAR_PEAK * self.peak.1
    }

    /// Takes in the crest of the parabola through the current at the start, middle and end of a step.
    pub(super) fn crest(&mut self, start: f64, seconds: f64, three: [f64; 3]) {
        let [first, middle, last] = three.map(f64::abs);
        self.peak_at(start + 0.5 * seconds, middle);
        let slope = 4.0 * middle - 3.0 * first - last;
        let bend = 2.0 * (first - 2.0 * middle + last);
        let share = -slope / (2.0 * bend);
        if bend < 0.0 && share > 0.0 && share < 1.0 {
            self.peak_at(start + share * seconds, first + 0.5 * share * slope);
        }
    }

    /// A sample at a time inside the last segment.
    pub(super) fn sample(
        &mut self,
        seconds: f64,
        now: &Instant,
        lamp_kelvin: Vec<f64>,
        inside: Inside,
    ) -> Sample {
        let totals = self.totals_at(seconds);
        if seconds >= SURGE_SECONDS {
            self.heating.push(Heating { seconds, amp2_seconds: totals[0] });
        }
        let [amps_rms, load_volts_rms] = if self.period > 0.0 {
            let before = self.totals_at(seconds - self.period);
            core::array::from_fn(|index| libm::sqrt((totals[index] - before[index]).max(0.0) / self.period))
        } else {
            [now.amps.abs(), now.volts.abs()]
        };
        Sample {
            seconds,
            lamp_kelvin,
            amps_rms,
            load_volts_rms,
            load_dc_volts: inside.dc_volts,
            load_kelvin: inside.kelvin,
            load_speed: inside.speed,
        }
    }

    fn totals_at(&self, seconds: f64) -> [f64; 2] {
        let found = self.segments.iter().rev().find(|segment| segment.start <= seconds);
        found.map_or([0.0; 2], |segment| {
            segment.totals_at(((seconds - segment.start) / segment.seconds).min(1.0))
        })
    }
}

/// Most samples on a grid.
const MOST_SAMPLES: f64 = 2000.0;

/// Distance of the samples, seconds.
pub(super) fn sample_grid(options: &Options, period: f64) -> f64 {
    let finest = if options.sample_seconds > 0.0 {
        options.sample_seconds
    } else if period > 0.0 {
        period / 2.0
    } else {
        options.seconds / 1000.0
    };
    if finest <= 0.0 {
        return 1.0;
    }
    // Whole multiples, so that every sample lies at the same place in the mains cycle.
    finest * libm::ceil(options.seconds / finest / MOST_SAMPLES).max(1.0)
}

/// When every lamp is within this share of its last rise above ambient, and the current within [`SAME_AMPS`] of its
/// last value, the run counts as settled: 1 %, a change of light that nobody sees.
const SAME_RISE: f64 = 0.01;
const SAME_AMPS: f64 = 0.02;

/// Share of the samples, at the end, over which nothing may move for the last values to count as final.
const QUIET_SHARE: f64 = 0.2;

/// When the samples settle, seconds; `None` where they still move at the end.
pub(super) fn settle_seconds(samples: &[Sample]) -> Option<f64> {
    let last = samples.last()?;
    let near = |sample: &Sample| {
        let ambient = crate::tungsten::AMBIENT_KELVIN;
        let lamps = sample.lamp_kelvin.iter().zip(&last.lamp_kelvin);
        let kelvins = lamps.chain(sample.load_kelvin.iter().zip(&last.load_kelvin));
        let mut settled = (sample.amps_rms - last.amps_rms).abs() <= SAME_AMPS * last.amps_rms;
        for (now, then) in kelvins {
            // A lamp that stays cold is settled from the start: a kelvin is nothing.
            settled &= (now - then).abs() <= (SAME_RISE * (then - ambient)).max(1.0);
        }
        settled
    };
    let moving = samples.iter().rposition(|sample| !near(sample));
    let first = moving.map_or(0, |index| index + 1);
    #[expect(clippy::cast_precision_loss, reason = "a few thousand samples")]
    let quiet = (samples.len() - first) as f64 >= QUIET_SHARE * samples.len() as f64;
    (quiet && first < samples.len() - 1).then(|| samples[first].seconds)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_crest_inside_a_step_is_found() {
        // 1 + 4 s - 3 s^2 at 0, 1/2, 1, over two seconds from 5 s: 7/3 at 2/3.
        let mut recorder = Recorder::new(0.02);
        recorder.crest(5.0, 2.0, [1.0, -2.25, 2.0]);
        assert!((recorder.peak.0 - (5.0 + 4.0 / 3.0)).abs() < 1e-12);
        assert!((recorder.peak.1 - 7.0 / 3.0).abs() < 1e-12);
    }

    #[test]
    fn an_integral_is_read_inside_a_step() {
        // Current 1 + t over one second: the integral of its square is ((1 + t)^3 - 1) / 3, a cubic.
        let at = |amps: f64| Instant { amps, ..Instant::default() };
        let mut recorder = Recorder::new(0.02);
        let mean = Rates { squares: [7.0 / 3.0, 0.0], ..Rates::default() };
        recorder.segment(0.0, 1.0, [&at(1.0), &at(2.0)], &mean);
        let exact = |t: f64| ((1.0 + t) * (1.0 + t) * (1.0 + t) - 1.0) / 3.0;
        assert!((recorder.totals_at(0.3)[0] - exact(0.3)).abs() < 1e-12);
        assert!((recorder.i2t - exact(0.1)).abs() < 1e-12);
    }
}
