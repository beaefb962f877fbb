//! Which method takes the next step: the explicit one, unless its steps are held back by stability alone.

use super::circuit::{Circuit, Instant};
use super::explicit::Explicit;
use super::rosenbrock::{Rosenbrock, System};

/// Both methods and which of them is in use.
#[derive(Debug, Clone)]
pub(super) struct Stepper {
    explicit: Explicit<Instant>,
    rosenbrock: Rosenbrock,
    /// Whether the implicit method is in use.
    stiff: bool,
    /// Whether the circuit was found stiff with its diodes open, and with them conducting: they differ by a milliohm
    /// against nothing, and change a hundred times a second.
    found_stiff: [bool; 2],
    /// How much speaks for stability holding the steps back: 2 for every step near its limit, 1 for one refused, less 1
    /// for any other.
    held_back: u32,
    /// Time over which the slope's own change with time can be told from rounding, seconds.
    rush: f64,
}

/// So much makes a system stiff. Too soon costs half as much again for each step, too late a few dozen steps.
const HELD_BACK: u32 = 12;

/// Least and greatest factor from one step to the next, and the safety factor (Hairer and Wanner, IV.7).
const SHRINK: f64 = 0.2;
const GROW: f64 = 5.0;
const SAFETY: f64 = 0.9;

impl Stepper {
    pub(super) fn new(circuit: &Circuit) -> Self {
        let n = circuit.len();
        let omega = circuit.source().omega;
        Self {
            explicit: Explicit::new(n),
            rosenbrock: Rosenbrock::new(n),
            stiff: false,
            found_stiff: [false; 2],
            held_back: 0,
            rush: 1e-6 / if omega > 0.0 { omega } else { 1.0 },
        }
    }

    /// Prepares attempts from a state.
    pub(super) fn start(&mut self, circuit: &Circuit, seconds: f64, state: &[f64]) {
        if self.stiff {
            self.rosenbrock.start(circuit, seconds, state, self.rush);
        } else {
            self.explicit.start(circuit, seconds, state);
        }
    }

    /// Tries a step of `h` seconds; gives its error over `tolerance`, and the factor from it to the next step.
    pub(super) fn attempt(&mut self, circuit: &Circuit, seconds: f64, h: f64, tolerance: f64) -> (f64, f64) {
        let (error, root) = if self.stiff {
            let error = self.rosenbrock.attempt(circuit, seconds, h, tolerance);
            (error, libm::sqrt(libm::sqrt(error)))
        } else {
            let error = self.explicit.attempt(circuit, seconds, h, tolerance);
            (error, libm::exp2(0.2 * libm::log2(error)))
        };
        if error > 1.0 {
            self.held_back += 1;
        }
        let factor = if error.is_finite() { SAFETY / root } else { SHRINK };
        (error, factor.clamp(SHRINK, GROW))
    }

    /// Accepts the last attempt. A step that is `short` may be so for stability alone.
    pub(super) fn keep(&mut self, circuit: &Circuit, h: f64, short: bool) {
        if self.stiff {
            self.rosenbrock.keep();
            return;
        }
        let held_back = self.explicit.keep(h, circuit.scale()) && short;
        self.held_back = if held_back { self.held_back + 2 } else { self.held_back.saturating_sub(1) };
        // The method changes before the next step, not now: what is inside this one is still asked for.
        if self.held_back >= HELD_BACK {
            self.found_stiff[usize::from(circuit.conducts())] = true;
        }
    }

    /// What was seen at the stages of the kept step, where the method in use tells.
    pub(super) fn seen(&self) -> Option<&[Instant; 7]> {
        (!self.stiff).then_some(&self.explicit.seen)
    }

    /// Where the kept step ends.
    pub(super) fn to(&self) -> &[f64] {
        if self.stiff { &self.rosenbrock.to } else { &self.explicit.to }
    }

    /// The state at a share (0 to 1) of the kept step.
    pub(super) fn inside(&self, share: f64, state: &mut [f64]) {
        if self.stiff {
            self.rosenbrock.inside(share, state);
        } else {
            self.explicit.inside(share, state);
        }
    }

    /// Chooses the method for the next step; `turned` where a mode has changed.
    pub(super) fn choose(&mut self, circuit: &Circuit, turned: bool) {
        let stiff = self.found_stiff[usize::from(circuit.conducts())];
        if turned || stiff != self.stiff {
            self.explicit.forget();
            self.held_back = 0;
        }
        self.stiff = stiff;
    }

    /// How often the slope was evaluated.
    pub(super) fn evaluations(&self) -> u64 {
        self.explicit.evaluations + self.rosenbrock.evaluations
    }
}
