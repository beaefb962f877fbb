//! What is kept of the first seconds: peaks, integrals, and samples on a grid.

use alloc::collections::VecDeque;
use alloc::vec::Vec;

use super::branch::Inside;
use super::circuit::Instant;
use super::{Energy, Heating, Sample};

/// A quantity at the start, the middle and the end of a segment, taken as a parabola between.
type Three = [f64; 3];

/// One accepted step, as far as windows and peaks need it.
#[derive(Debug, Clone, Copy)]
struct Segment {
    start: f64,
    seconds: f64,
    /// Integrals of amps² and volts² up to the start.
    totals: [f64; 2],
    squares: [Three; 2],
}

impl Segment {
    /// Integrals up to a share of the segment.
    fn totals_at(&self, share: f64) -> [f64; 2] {
        core::array::from_fn(|index| {
            self.totals[index] + self.seconds * parabola_integral(&self.squares[index], share)
        })
    }
}

/// Integral of the parabola through `three` from 0 to `share`; Simpson's rule at 1.
fn parabola_integral([start, middle, end]: &Three, share: f64) -> f64 {
    let slope = 4.0 * middle - 3.0 * start - end;
    let bend = 2.0 * (start - 2.0 * middle + end);
    share * (start + share * (slope / 2.0 + share * bend / 3.0))
}

/// Where and how high the parabola through `three` has its crest inside, if it has one.
fn parabola_crest([start, middle, end]: &Three) -> Option<(f64, f64)> {
    let slope = 4.0 * middle - 3.0 * start - end;
    let bend = 2.0 * (start - 2.0 * middle + end);
    let share = -slope / (2.0 * bend);
    (bend < 0.0 && share > 0.0 && share < 1.0).then(|| (share, start + 0.5 * share * slope))
}

/// Integrals beyond which the surge is over and the grid's samples are fine enough for a fuse.
const SURGE_SECONDS: f64 = 0.2;

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

    /// Takes in an accepted step, known at its start, middle and end.
    pub(super) fn segment(&mut self, start: f64, seconds: f64, three: &[Instant; 3]) {
        let square = |value: fn(&Instant) -> f64| three.map(|instant| value(&instant) * value(&instant));
        let squares = [square(|instant| instant.amps), square(|instant| instant.volts)];
        let segment = Segment { start, seconds, totals: self.totals, squares };
        self.totals = segment.totals_at(1.0);
        let end = start + seconds;
        if start < I2T_SECONDS {
            self.i2t = segment.totals_at(((I2T_SECONDS - start) / seconds).min(1.0))[0];
        }
        if end < SURGE_SECONDS {
            self.heating.push(Heating { seconds: end, amp2_seconds: self.totals[0] });
        }
        let mut peak = |seconds: f64, amps: f64| {
            if amps > self.peak.1 {
                self.peak = (seconds, amps);
            }
        };
        for (share, instant) in [0.0, 0.5, 1.0].into_iter().zip(three) {
            peak(start + share * seconds, instant.amps.abs());
        }
        if let Some((share, amps)) = parabola_crest(&three.map(|instant| instant.amps.abs())) {
            peak(start + share * seconds, amps);
        }
        let simpson = |value: fn(&Instant) -> f64| {
            seconds / 6.0 * (value(&three[0]) + 4.0 * value(&three[1]) + value(&three[2]))
        };
        self.energy.into_lamps_joules += simpson(|instant| instant.bank_watts);
        self.energy.lost_joules += simpson(|instant| instant.lost_watts);
        while self.segments.front().is_some_and(|old| old.start + old.seconds < start - self.period) {
            self.segments.pop_front();
        }
        self.segments.push_back(segment);
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
    fn a_parabola_is_integrated_and_crested_exactly() {
        // 1 + 4 s - 3 s^2 at 0, 1/2, 1.
        let three = [1.0, 2.25, 2.0];
        assert!((parabola_integral(&three, 1.0) - 2.0).abs() < 1e-12);
        assert!((parabola_integral(&three, 0.5) - (0.5 + 0.5 - 0.125)).abs() < 1e-12);
        let (share, crest) = parabola_crest(&three).expect("inside");
        assert!((share - 2.0 / 3.0).abs() < 1e-12 && (crest - 7.0 / 3.0).abs() < 1e-12);
        assert_eq!(parabola_crest(&[0.0, 1.0, 2.0]), None);
    }
}
