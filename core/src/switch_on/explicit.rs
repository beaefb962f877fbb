//! One step of a system that is not stiff, with an error estimate and values inside the step.
//!
//! J. R. Dormand, P. J. Prince, J. Comput. Appl. Math. 6 (1980) 19: an explicit Runge-Kutta method of order 5 with an
//! embedded one of order 4. Values inside the step and the test for stiffness are those of E. Hairer, S. P. Nørsett,
//! G. Wanner, Solving Ordinary Differential Equations I, 2nd ed. (Springer 1993), II.6, and part II, IV.2.

use alloc::vec::Vec;

use super::rosenbrock::System;

const A: [&[f64]; 6] = [
    &[1.0 / 5.0],
    &[3.0 / 40.0, 9.0 / 40.0],
    &[44.0 / 45.0, -56.0 / 15.0, 32.0 / 9.0],
    &[19_372.0 / 6561.0, -25_360.0 / 2187.0, 64_448.0 / 6561.0, -212.0 / 729.0],
    &[9017.0 / 3168.0, -355.0 / 33.0, 46_732.0 / 5247.0, 49.0 / 176.0, -5103.0 / 18_656.0],
    &[35.0 / 384.0, 0.0, 500.0 / 1113.0, 125.0 / 192.0, -2187.0 / 6784.0, 11.0 / 84.0],
];
const WHEN: [f64; 6] = [1.0 / 5.0, 3.0 / 10.0, 4.0 / 5.0, 8.0 / 9.0, 1.0, 1.0];

/// Difference of the two methods.
const ERROR: [f64; 7] =
    [71.0 / 57_600.0, 0.0, -71.0 / 16_695.0, 71.0 / 1920.0, -17_253.0 / 339_200.0, 22.0 / 525.0, -1.0 / 40.0];

/// The fourth coefficient of the continuous extension.
const DENSE: [f64; 7] = [
    -12_715_105_075.0 / 11_282_082_432.0,
    0.0,
    87_487_479_700.0 / 32_700_410_799.0,
    -10_690_763_975.0 / 1_880_347_072.0,
    701_980_252_875.0 / 199_316_789_632.0,
    -1_453_857_185.0 / 822_651_844.0,
    69_997_945.0 / 29_380_423.0,
];

/// With these weights anything seen at the stages is integrated over the step to the order of the method; the last
/// stage does not count.
pub(super) const WEIGHTS: [f64; 6] =
    [35.0 / 384.0, 0.0, 500.0 / 1113.0, 125.0 / 192.0, -2187.0 / 6784.0, 11.0 / 84.0];

/// Step times the fastest rate that is near the limit of stability, 3.3; accuracy alone rarely lets it come so far.
const UNSTABLE: f64 = 2.0;

/// The workspace of one system, and the last step taken.
#[derive(Debug, Clone)]
pub(super) struct Explicit<Seen> {
    /// The slopes of each variable at the seven stages.
    slopes: Vec<[f64; 7]>,
    /// What the system showed at the stages.
    pub(super) seen: [Seen; 7],
    now: Vec<f64>,
    point: Vec<f64>,
    from: Vec<f64>,
    /// Where the last attempt ended.
    pub(super) to: Vec<f64>,
    dense: Vec<[f64; 4]>,
    /// Whether the slope at the start of the next step is that of the end of the last one.
    follows: bool,
    /// How often the slope was evaluated.
    pub(super) evaluations: u64,
}

impl<Seen: Copy + Default> Explicit<Seen> {
    pub(super) fn new(n: usize) -> Self {
        let zeros = |count: usize| alloc::vec![0.0; count];
        Self {
            slopes: alloc::vec![[0.0; 7]; n],
            seen: [Seen::default(); 7],
            now: zeros(n),
            point: zeros(n),
            from: zeros(n),
            to: zeros(n),
            dense: alloc::vec![[0.0; 4]; n],
            follows: false,
            evaluations: 0,
        }
    }

    /// The next step does not begin where the last one ended, or not in the same mode.
    pub(super) fn forget(&mut self) {
        self.follows = false;
    }

    /// Prepares attempts from a state.
    pub(super) fn start(&mut self, system: &impl System<Seen = Seen>, seconds: f64, state: &[f64]) {
        self.from.copy_from_slice(state);
        if self.follows {
            for slopes in &mut self.slopes {
                slopes[0] = slopes[6];
            }
            self.seen[0] = self.seen[6];
        } else {
            self.seen[0] = system.slope(seconds, state, &mut self.now);
            for (slopes, now) in self.slopes.iter_mut().zip(&self.now) {
                slopes[0] = *now;
            }
            self.evaluations += 1;
        }
        // An attempt writes over the last stage: nothing follows until one is kept.
        self.follows = false;
    }

    /// Tries a step of `h` seconds; gives the error over `tolerance`, which is not finite where the step led out of the
    /// numbers.
    pub(super) fn attempt(
        &mut self,
        system: &impl System<Seen = Seen>,
        seconds: f64,
        h: f64,
        tolerance: f64,
    ) -> f64 {
        for (stage, a) in A.iter().enumerate() {
            let parts = self.point.iter_mut().zip(&self.from).zip(&self.slopes);
            for ((point, from), slopes) in parts {
                let mut moved = 0.0;
                for (a, slope) in a.iter().zip(slopes) {
                    moved += a * slope;
                }
                *point = from + h * moved;
            }
            self.seen[stage + 1] = system.slope(seconds + WHEN[stage] * h, &self.point, &mut self.now);
            for (slopes, now) in self.slopes.iter_mut().zip(&self.now) {
                slopes[stage + 1] = *now;
            }
        }
        self.evaluations += 6;
        self.to.copy_from_slice(&self.point);
        let mut worst: f64 = 0.0;
        for (slopes, scale) in self.slopes.iter().zip(system.scale()) {
            let mut error = 0.0;
            for (weight, slope) in ERROR.iter().zip(slopes) {
                error += weight * slope;
            }
            let error = h * error.abs() / (tolerance * scale);
            // A maximum that keeps NaN.
            worst = if error <= worst { worst } else { error };
        }
        worst
    }

    /// Makes [`Self::inside`] ready for the last attempt, of `h` seconds; says whether the step was about as long as
    /// its stability allows.
    pub(super) fn keep(&mut self, h: f64, scale: &[f64]) -> bool {
        self.follows = true;
        let (mut rates, mut distances) = (0.0, 0.0);
        for (index, slopes) in self.slopes.iter().enumerate() {
            let difference = self.to[index] - self.from[index];
            let bent = h * slopes[0] - difference;
            let mut fourth = 0.0;
            let mut sixth = 0.0;
            for (weight, slope) in DENSE.iter().zip(slopes) {
                fourth += weight * slope;
            }
            for (a, slope) in A[4].iter().zip(slopes) {
                sixth += a * slope;
            }
            self.dense[index] = [difference, bent, difference - h * slopes[6] - bent, h * fourth];
            // The sixth and the last stage stand at the same instant: how the slope changes with the state there.
            let distance = (difference - h * sixth) / scale[index];
            let rate = (slopes[6] - slopes[5]) / scale[index];
            rates += rate * rate;
            distances += distance * distance;
        }
        h * h * rates > UNSTABLE * UNSTABLE * distances
    }

    /// The state at a share (0 to 1) of the kept step.
    pub(super) fn inside(&self, share: f64, state: &mut [f64]) {
        let left = 1.0 - share;
        for ((value, from), [first, second, third, fourth]) in
            state.iter_mut().zip(&self.from).zip(&self.dense)
        {
            *value = from + share * (first + left * (second + share * (third + left * fourth)));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A pendulum that is pushed, as in the tests of the implicit method.
    struct Pushed;

    impl System for Pushed {
        type Seen = f64;

        fn len(&self) -> usize {
            2
        }

        fn slope(&self, seconds: f64, state: &[f64], slope: &mut [f64]) -> f64 {
            slope[0] = state[1];
            slope[1] = -libm::sin(state[0]) - 0.2 * state[1] + libm::cos(1.7 * seconds);
            state[1]
        }

        fn scale(&self) -> &[f64] {
            &[1.0, 1.0]
        }
    }

    /// The angle after 2 s in `steps` equal steps; the integral of the speed; the angle half way through the last step.
    fn run(steps: u32) -> (f64, f64, f64) {
        let mut method = Explicit::new(2);
        let mut state = [0.3, -0.1];
        let mut middle = [0.0; 2];
        let mut integral = 0.0;
        let h = 2.0 / f64::from(steps);
        for step in 0..steps {
            let seconds = h * f64::from(step);
            method.start(&Pushed, seconds, &state);
            assert!(method.attempt(&Pushed, seconds, h, 1.0).is_finite());
            assert!(!method.keep(h, &[1.0, 1.0]));
            method.inside(0.5, &mut middle);
            integral += h * WEIGHTS.iter().zip(&method.seen).map(|(weight, seen)| weight * seen).sum::<f64>();
            state.copy_from_slice(&method.to);
        }
        (state[0], integral, middle[0])
    }

    #[test]
    fn halving_the_step_divides_the_error_by_thirty_two() {
        let (exact, _, _) = run(1000);
        let order = libm::log2((run(5).0 - exact).abs() / (run(10).0 - exact).abs());
        assert!((4.5..5.8).contains(&order), "order {order}");
    }

    #[test]
    fn what_is_seen_is_integrated_as_well_as_the_state() {
        let (angle, integral, _) = run(10);
        // The integral of the speed is the angle, stage by stage.
        assert!((0.3 + integral - angle).abs() < 1e-14);
    }

    #[test]
    fn the_middle_of_a_step_is_known_to_fourth_order() {
        let error = |steps: u32| {
            // Whole steps that end half way through the last one of `steps`.
            let end = 2.0 - 1.0 / f64::from(steps);
            let mut method = Explicit::new(2);
            let mut state = [0.3, -0.1];
            let h = end / 400.0;
            for step in 0..400 {
                method.start(&Pushed, h * f64::from(step), &state);
                method.attempt(&Pushed, h * f64::from(step), h, 1.0);
                method.keep(h, &[1.0, 1.0]);
                state.copy_from_slice(&method.to);
            }
            (run(steps).2 - state[0]).abs()
        };
        let order = libm::log2(error(5) / error(10));
        assert!(order > 3.7, "order {order}");
    }

    /// `y' = -100 y`.
    struct Fast;

    impl System for Fast {
        type Seen = ();

        fn len(&self) -> usize {
            1
        }

        fn slope(&self, _: f64, state: &[f64], slope: &mut [f64]) {
            slope[0] = -100.0 * state[0];
        }

        fn scale(&self) -> &[f64] {
            &[1.0]
        }
    }

    #[test]
    fn a_step_at_the_edge_of_stability_is_told() {
        let told = |h: f64| {
            let mut method = Explicit::new(1);
            method.start(&Fast, 0.0, &[1.0]);
            method.attempt(&Fast, 0.0, h, 1.0);
            method.keep(h, &[1.0])
        };
        assert!(told(0.034) && !told(0.015));
    }
}
