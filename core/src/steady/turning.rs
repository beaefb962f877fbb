//! The steady points of an induction motor that turns: up to four, so that the whole range of slips is sampled.

use alloc::vec::Vec;

use super::{Circuit, Equilibrium, MOST_STEPS, SteadyError};
use crate::bank::Step;
use crate::complex::Complex;
use crate::filament::Filament;
use crate::load::InductionMotor;
use crate::roots::{Root, Tolerance};
use crate::scan;

/// How far apart samples over the slips of a motor are, at most, along the scale of [`slip_at`].
const STRIDE: f64 = 0.75;

/// Relative step of a numerical slope.
const NUDGE: f64 = 1e-6;

/// A step this small in the logarithm of the rise leaves an error of about its square, 1e-11.
const SMALL: f64 = 3e-6;

/// Least slip of a motor that is looked at.
pub(super) const LEAST_SLIP: f64 = 1e-6;

/// Where [`slip_at`] turns from the logarithm of a small slip to evenly spaced ones at standstill: the torque rises and
/// falls with the logarithm of the slip, but what a fan asks for falls with the square of a speed near 0.
const BEND: f64 = 3.0;

/// The slip at a place of the scale along which motors are searched, 1 at 0.
fn slip_at(x: f64) -> f64 {
    BEND / (BEND - 1.0 + libm::exp(-x))
}

/// The place of a slip.
fn scale_of(slip: f64) -> f64 {
    -libm::log(BEND / slip - (BEND - 1.0))
}

impl Circuit<'_> {
    /// The current to which the bank settles before a linear load, amperes; `here` is where it settled before a similar
    /// one, and is moved along. A last step as small as [`SMALL`] is taken along the tangent.
    fn settled_amps(&self, impedance: (f64, f64), here: &mut (f64, Step)) -> f64 {
        let (low, high) = Filament::ln_rise_span();
        for _ in 0..MOST_STEPS {
            let (_, step) = self.linear_step(impedance, &here.1);
            if step.abs() <= SMALL {
                return here.1.point.amps * (1.0 + here.1.amps_slope * step);
            }
            let next = (here.0 + step).clamp(low, high);
            if next == here.0 {
                break;
            }
            *here = (next, self.walk.step_to(next));
        }
        f64::NAN
    }

    /// Every steady point of a turning motor. At one bank temperature two slips can take the same current, so this
    /// search runs in the slip, with the bank settled for each.
    pub(super) fn turning_points(&self, motor: &InductionMotor) -> Result<Vec<Equilibrium>, SteadyError> {
        let start = self.bank.guess_ln_rise(0.5 * self.supply.volts());
        let mut here = (start, self.walk.step_to(start));
        let slowing = |x: f64| {
            let slip = slip_at(x);
            let Complex { real, imaginary } = motor.impedance(slip);
            motor.slowing(slip, self.settled_amps((real, imaginary), &mut here))
        };
        let low = scale_of(motor.least_slip(self.supply.volts()).max(LEAST_SLIP));
        // One more beyond standstill, so that a dip right before it has a neighbour on either side.
        let strides = libm::ceil(-low / STRIDE);
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "between 3 and 21")]
        let roots = scan::all(slowing, (low, -low / strides), strides as u32 + 1);
        let mut points = Vec::new();
        for root in roots.iter().filter(|root| root.x <= 0.0) {
            let slip = slip_at(root.x);
            let load = motor.frozen(slip);
            let circuit = Circuit { load: &load, ..*self };
            let settled = circuit.one_root_from(self.walk.lead_ln_rise(), Tolerance::FINE)?;
            let point = circuit.point_at(Root { evaluations: root.evaluations, ..settled })?;
            // At a frozen bank a faster shaft must find less torque to spare, and so it must with a settled one.
            let ohms = point.bank_volts / point.amps + self.supply.ohms();
            let frozen = |slip: f64| {
                let total = motor.impedance(slip) + Complex::new(ohms, 0.0);
                motor.slowing(slip, self.supply.volts() / total.magnitude())
            };
            let fast = frozen(slip * (1.0 + NUDGE)) < frozen(slip * (1.0 - NUDGE));
            points.push(Equilibrium { stable: fast && root.falling, ..point });
        }
        Ok(points)
    }
}
