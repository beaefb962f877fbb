//! One step of a stiff system of differential equations, with an error estimate and values inside the step.
//!
//! RODAS: E. Hairer, G. Wanner, Solving Ordinary Differential Equations II, 2nd ed. (Springer 1996), section IV.10:
//! a linearly implicit Runge-Kutta method of order 4 with an embedded method of order 3, six stages, L-stable and
//! stiffly accurate, with a continuous extension of order 3. It needs no iteration and no bound on the step for
//! stability, so that a nanofarad or a milliohm costs no more steps than the mains frequency does.

use alloc::vec::Vec;

/// A system `dy/dt = slope(t, y)`, smooth as long as nobody changes it.
pub(super) trait System {
    /// What else the system tells with its slope.
    type Seen: Copy + Default;

    /// How many variables.
    fn len(&self) -> usize;

    /// The slope at a time and state.
    fn slope(&self, seconds: f64, state: &[f64], slope: &mut [f64]) -> Self::Seen;

    /// Size of each variable against which its error is measured.
    fn scale(&self) -> &[f64];

    /// The column of the Jacobian for one variable, given the slope at `state`; `state` is restored.
    fn column(&self, seconds: f64, state: &mut [f64], index: usize, base: &[f64], column: &mut [f64]) {
        let kept = state[index];
        let nudge = NUDGE * kept.abs().max(self.scale()[index]);
        state[index] = kept + nudge;
        // The nudge as it came out in binary, not as it was meant.
        let nudge = state[index] - kept;
        self.slope(seconds, state, column);
        for (entry, base) in column.iter_mut().zip(base) {
            *entry = (*entry - base) / nudge;
        }
        state[index] = kept;
    }
}

/// Relative step of a one-sided difference: the square root of the unit roundoff.
const NUDGE: f64 = 1.5e-8;

/// Coefficients of RODAS, from the reference above; `A` and `C` are the transformed ones that spare the products
/// with the Jacobian.
const GAMMA: f64 = 0.25;
const A: [&[f64]; 5] = [
    &[1.544],
    &[0.946_678_528_081_582_6, 0.255_701_169_898_328_4],
    &[3.314_825_187_068_521, 2.896_124_015_972_201, 0.998_641_913_997_781_7],
    &[1.221_224_509_226_641, 6.019_134_481_288_629, 12.537_083_329_320_87, -0.687_886_036_105_895],
    &[1.221_224_509_226_641, 6.019_134_481_288_629, 12.537_083_329_320_87, -0.687_886_036_105_895, 1.0],
];
const C: [&[f64]; 5] = [
    &[-5.6688],
    &[-2.430_093_356_833_875, -0.206_359_915_709_191_5],
    &[-0.107_352_905_815_137_5, -9.594_562_251_023_355, -20.470_286_148_096_16],
    &[7.496_443_313_967_647, -10.246_804_314_643_52, -33.999_903_528_199_05, 11.708_908_932_061_6],
    &[
        8.083_246_795_921_522,
        -7.981_132_988_064_893,
        -31.521_594_328_743_71,
        16.319_305_431_231_36,
        -6.058_818_238_834_054,
    ],
];
const WHEN: [f64; 6] = [0.0, 0.386, 0.21, 0.63, 1.0, 1.0];
const DRIFT: [f64; 6] = [0.25, -0.1043, 0.1035, -0.036_200_000_000_000_23, 0.0, 0.0];
const DENSE: [[f64; 5]; 2] = [
    [
        10.126_235_083_445_86,
        -7.487_995_877_610_167,
        -34.800_918_615_557_47,
        -7.992_771_707_568_823,
        1.025_137_723_295_662,
    ],
    [
        -0.676_280_339_280_125_3,
        6.087_714_651_680_015,
        16.430_843_208_924_78,
        24.767_225_114_183_86,
        -6.594_389_125_716_872,
    ],
];

/// The workspace of one system, and the last step taken.
#[derive(Debug, Clone)]
pub(super) struct Rosenbrock {
    n: usize,
    base: Vec<f64>,
    drift: Vec<f64>,
    jacobian: Vec<f64>,
    matrix: Vec<f64>,
    pivots: Vec<usize>,
    /// The stages of each variable.
    stages: Vec<[f64; 6]>,
    now: Vec<f64>,
    carried: Vec<f64>,
    point: Vec<f64>,
    from: Vec<f64>,
    /// Where the last attempt ended.
    pub(super) to: Vec<f64>,
    dense: [Vec<f64>; 2],
    /// How often the slope was evaluated.
    pub(super) evaluations: u64,
}

impl Rosenbrock {
    pub(super) fn new(n: usize) -> Self {
        let zeros = |count: usize| alloc::vec![0.0; count];
        Self {
            n,
            base: zeros(n),
            drift: zeros(n),
            jacobian: zeros(n * n),
            matrix: zeros(n * n),
            pivots: alloc::vec![0; n],
            stages: alloc::vec![[0.0; 6]; n],
            now: zeros(n),
            carried: zeros(n),
            point: zeros(n),
            from: zeros(n),
            to: zeros(n),
            dense: [zeros(n), zeros(n)],
            evaluations: 0,
        }
    }

    /// Linearises the system where the next attempts start. `rush` is a time over which the slope's own change
    /// with time can be told from rounding.
    pub(super) fn start(&mut self, system: &impl System, seconds: f64, state: &[f64], rush: f64) {
        let n = self.n;
        self.from.copy_from_slice(state);
        system.slope(seconds, state, &mut self.base);
        system.slope(seconds + rush, state, &mut self.drift);
        for (drift, base) in self.drift.iter_mut().zip(&self.base) {
            *drift = (*drift - base) / rush;
        }
        self.point.copy_from_slice(state);
        for index in 0..n {
            // Column by column into the rows of the transpose; `solve` reads it so.
            let column = &mut self.jacobian[index * n..(index + 1) * n];
            system.column(seconds, &mut self.point, index, &self.base, column);
        }
        self.evaluations += 2 + n as u64;
    }

    /// Tries a step of `h` seconds from where [`Self::start`] was called; gives the error over `tolerance`, which
    /// is not finite where the step led out of the numbers.
    pub(super) fn attempt(&mut self, system: &impl System, seconds: f64, h: f64, tolerance: f64) -> f64 {
        let n = self.n;
        let per_step = 1.0 / h;
        let diagonal = per_step / GAMMA;
        for row in 0..n {
            for column in 0..n {
                let entry = -self.jacobian[column * n + row];
                self.matrix[row * n + column] = if row == column { entry + diagonal } else { entry };
            }
        }
        if !factorise(&mut self.matrix, &mut self.pivots, n) {
            return f64::NAN;
        }
        for stage in 0..6 {
            if stage == 0 {
                self.now.copy_from_slice(&self.base);
                self.carried.fill(0.0);
            } else {
                let (a, c) = (A[stage - 1], C[stage - 1]);
                for index in 0..n {
                    let known = &self.stages[index][..stage];
                    let (mut moved, mut carried) = (0.0, 0.0);
                    for ((a, c), known) in a.iter().zip(c).zip(known) {
                        moved += a * known;
                        carried += c * known;
                    }
                    self.point[index] = self.from[index] + moved;
                    self.carried[index] = carried * per_step;
                }
                system.slope(seconds + WHEN[stage] * h, &self.point, &mut self.now);
            }
            let drift = h * DRIFT[stage];
            for index in 0..n {
                self.now[index] += self.carried[index] + drift * self.drift[index];
            }
            solve(&self.matrix, &self.pivots, &mut self.now);
            for (known, now) in self.stages.iter_mut().zip(&self.now) {
                known[stage] = *now;
            }
        }
        self.evaluations += 5;
        // Stiffly accurate: the last stage starts from the embedded answer, and its increment is the error.
        let mut worst: f64 = 0.0;
        for index in 0..n {
            let last = self.now[index];
            self.to[index] = self.point[index] + last;
            let error = last.abs() / (tolerance * system.scale()[index]);
            // A maximum that keeps NaN.
            worst = if error <= worst { worst } else { error };
        }
        worst
    }

    /// Makes [`Self::inside`] ready for the last attempt.
    pub(super) fn keep(&mut self) {
        for (index, known) in self.stages.iter().enumerate() {
            for (dense, weights) in self.dense.iter_mut().zip(&DENSE) {
                dense[index] = weights.iter().zip(known).map(|(weight, stage)| weight * stage).sum();
            }
        }
    }

    /// The state at a share (0 to 1) of the kept step.
    pub(super) fn inside(&self, share: f64, state: &mut [f64]) {
        let left = 1.0 - share;
        for (index, value) in state.iter_mut().enumerate() {
            let bend = self.dense[0][index] + share * self.dense[1][index];
            *value = left * self.from[index] + share * (self.to[index] + left * bend);
        }
    }
}

/// Gaussian elimination with row pivots, in place, the pivots stored as their reciprocals; false where the matrix is
/// singular or not finite.
fn factorise(matrix: &mut [f64], pivots: &mut [usize], n: usize) -> bool {
    for column in 0..n {
        let mut best = column;
        for row in column + 1..n {
            if matrix[row * n + column].abs() > matrix[best * n + column].abs() {
                best = row;
            }
        }
        pivots[column] = best;
        let pivot = matrix[best * n + column];
        if pivot == 0.0 || !pivot.is_finite() {
            return false;
        }
        if best != column {
            for entry in 0..n {
                matrix.swap(best * n + entry, column * n + entry);
            }
        }
        let reciprocal = 1.0 / pivot;
        matrix[column * n + column] = reciprocal;
        for row in column + 1..n {
            let factor = matrix[row * n + column] * reciprocal;
            matrix[row * n + column] = factor;
            if factor != 0.0 {
                for entry in column + 1..n {
                    matrix[row * n + entry] -= factor * matrix[column * n + entry];
                }
            }
        }
    }
    true
}

fn solve(matrix: &[f64], pivots: &[usize], right: &mut [f64]) {
    let n = right.len();
    for (row, &pivot) in pivots.iter().enumerate() {
        right.swap(row, pivot);
    }
    for row in 1..n {
        for column in 0..row {
            right[row] -= matrix[row * n + column] * right[column];
        }
    }
    for row in (0..n).rev() {
        for column in row + 1..n {
            right[row] -= matrix[row * n + column] * right[column];
        }
        right[row] *= matrix[row * n + row];
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A pendulum that is pushed: nonlinear, and its slope depends on time.
    struct Pushed;

    impl System for Pushed {
        type Seen = ();

        fn len(&self) -> usize {
            2
        }

        fn slope(&self, seconds: f64, state: &[f64], slope: &mut [f64]) {
            slope[0] = state[1];
            slope[1] = -libm::sin(state[0]) - 0.2 * state[1] + libm::cos(1.7 * seconds);
        }

        fn scale(&self) -> &[f64] {
            &[1.0, 1.0]
        }
    }

    /// The state after 2 s in `steps` equal steps, and half way through the last step.
    fn run(steps: u32) -> ([f64; 2], [f64; 2]) {
        let mut stepper = Rosenbrock::new(2);
        let mut state = [0.3, -0.1];
        let mut middle = [0.0; 2];
        let h = 2.0 / f64::from(steps);
        for step in 0..steps {
            let seconds = h * f64::from(step);
            stepper.start(&Pushed, seconds, &state, 1e-8);
            assert!(stepper.attempt(&Pushed, seconds, h, 1.0).is_finite());
            stepper.keep();
            stepper.inside(0.5, &mut middle);
            state.copy_from_slice(&stepper.to);
        }
        (state, middle)
    }

    #[test]
    fn halving_the_step_divides_the_error_by_sixteen() {
        let (exact, _) = run(4000);
        // The norm of both components: one alone may pass through zero.
        let error = |steps| libm::hypot(run(steps).0[0] - exact[0], run(steps).0[1] - exact[1]);
        let order = libm::log2(error(20) / error(40));
        assert!((3.6..4.6).contains(&order), "order {order}");
    }

    #[test]
    fn the_middle_of_a_step_is_known_to_third_order() {
        // Half way through the last of n steps lies 2 - 1/n seconds: compare with whole steps that end there.
        let middle = |steps: u32| run(steps).1[0];
        let exact = |steps: u32| {
            let fine = 200;
            let mut stepper = Rosenbrock::new(2);
            let mut state = [0.3, -0.1];
            let h = (2.0 - 1.0 / f64::from(steps)) / f64::from(fine);
            for step in 0..fine {
                stepper.start(&Pushed, h * f64::from(step), &state, 1e-6);
                stepper.attempt(&Pushed, h * f64::from(step), h, 1.0);
                state.copy_from_slice(&stepper.to);
            }
            state[0]
        };
        let error = |steps| (middle(steps) - exact(steps)).abs();
        let order = libm::log2(error(10) / error(20));
        assert!(order > 2.8, "order {order}");
    }

    /// `y' = -k (y - cos t)`, stiff: k = 1e9.
    struct Stiff([f64; 1]);

    impl System for Stiff {
        type Seen = ();

        fn len(&self) -> usize {
            1
        }

        fn slope(&self, seconds: f64, state: &[f64], slope: &mut [f64]) {
            slope[0] = -1e9 * (state[0] - libm::cos(seconds));
        }

        fn scale(&self) -> &[f64] {
            &self.0
        }
    }

    #[test]
    fn a_nanosecond_time_constant_takes_long_steps() {
        let stiff = Stiff([1.0]);
        let mut stepper = Rosenbrock::new(1);
        let mut state = [0.0];
        for step in 0..20 {
            let seconds = 0.1 * f64::from(step);
            stepper.start(&stiff, seconds, &state, 1e-6);
            stepper.attempt(&stiff, seconds, 0.1, 1.0);
            state.copy_from_slice(&stepper.to);
        }
        assert!((state[0] - libm::cos(2.0)).abs() < 1e-5, "{}", state[0]);
    }
}
