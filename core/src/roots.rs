//! Bracketed roots of one smooth function of one variable.
//!
//! T. R. Chandrupatla, Advances in Engineering Software 28 (1997) 145: inverse quadratic interpolation where it
//! is trustworthy, bisection elsewhere, so the bracket halves at worst every other step.
//!
//! The functions are called through a pointer: one copy of each search for all of them keeps the page small, and beside
//! what such a function costs the call is nothing.

/// A root, with what it cost and how good it is.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Root {
    /// Where the function vanishes.
    pub x: f64,
    /// The function there.
    pub residual: f64,
    /// How often the function was evaluated, the ends of the bracket included.
    pub evaluations: u32,
}

/// How closely to approach a root; the search ends when either is met.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Tolerance {
    /// Half width of the final bracket.
    pub x: f64,
    /// Absolute value of the function.
    pub residual: f64,
}

impl Tolerance {
    /// Tight enough that every number the core reports is limited by the model, not by the search.
    pub const FINE: Self = Self { x: 1e-13, residual: 1e-10 };
}

/// A point of a function: where, and its value.
pub type Sample = (f64, f64);

/// More steps than bisection needs to exhaust the digits of an `f64`.
const MOST_STEPS: u32 = 120;

/// Refines the root between two samples of opposite sign.
///
/// The values at the ends are passed in so that nothing is evaluated twice. Returns `None` when the signs agree
/// or a value is not finite. Never more than 120 evaluations.
pub fn between(
    mut f: impl FnMut(f64) -> f64,
    start: Sample,
    end: Sample,
    tolerance: Tolerance,
) -> Option<Root> {
    between_any(&mut f, start, end, tolerance)
}

pub(crate) fn between_any(
    f: &mut dyn FnMut(f64) -> f64,
    start: Sample,
    end: Sample,
    tolerance: Tolerance,
) -> Option<Root> {
    let ((mut a, mut fa), (mut b, mut fb)) = (start, end);
    if fa == 0.0 {
        return Some(Root { x: a, residual: 0.0, evaluations: 2 });
    }
    if !(fa.is_finite() && fb.is_finite()) || fa * fb > 0.0 {
        return None;
    }
    let mut fraction = fa / (fa - fb);
    if !(0.01..=0.99).contains(&fraction) {
        fraction = 0.5;
    }
    for step in 1..=MOST_STEPS {
        let x = a + fraction * (b - a);
        let fx = f(x);
        if !fx.is_finite() {
            return None;
        }
        let (c, fc);
        if (fx > 0.0) == (fa > 0.0) {
            (c, fc) = (a, fa);
        } else {
            (c, fc) = (b, fb);
            (b, fb) = (a, fa);
        }
        (a, fa) = (x, fx);
        let (x, residual) = if fa.abs() < fb.abs() { (a, fa) } else { (b, fb) };
        let narrowest = (tolerance.x + 2.0 * f64::EPSILON * x.abs()) / (b - a).abs();
        if residual.abs() <= tolerance.residual || narrowest > 0.5 {
            return Some(Root { x, residual, evaluations: step + 2 });
        }
        let xi = (a - b) / (c - b);
        let phi = (fa - fb) / (fc - fb);
        fraction = if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
            fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
        } else {
            0.5
        };
        fraction = fraction.clamp(narrowest, 1.0 - narrowest);
    }
    None
}

/// Finds the root of a decreasing function inside `low..=high`, starting from a guess.
///
/// Steps away from the guess, doubling, until the sign changes; then [`between`]. `None` when the function has
/// one sign over the whole range.
pub fn decreasing_from(
    mut f: impl FnMut(f64) -> f64,
    span: (f64, f64),
    guess: f64,
    tolerance: Tolerance,
) -> Option<Root> {
    decreasing_any(&mut f, span, guess, tolerance)
}

fn decreasing_any(
    f: &mut dyn FnMut(f64) -> f64,
    (low, high): (f64, f64),
    guess: f64,
    tolerance: Tolerance,
) -> Option<Root> {
    let mut here = (guess.clamp(low, high), 0.0);
    here.1 = f(here.0);
    let mut evaluations = 1;
    if here.1.abs() <= tolerance.residual {
        return Some(Root { x: here.0, residual: here.1, evaluations });
    }
    // The functions solved here are logarithms with slopes near one: the value itself is a good first stride.
    let mut stride = 1.2 * here.1.clamp(-3.0, 3.0);
    loop {
        let next = (here.0 + stride).clamp(low, high);
        if next == here.0 {
            return None;
        }
        let value = f(next);
        evaluations += 1;
        if value.abs() <= tolerance.residual {
            return Some(Root { x: next, residual: value, evaluations });
        }
        if value * here.1 < 0.0 {
            let root = between_any(f, here, (next, value), tolerance)?;
            return Some(Root { evaluations: evaluations + root.evaluations - 2, ..root });
        }
        here = (next, value);
        stride *= 2.0;
    }
}

/// Finds where a decreasing or slowly rising `g` gives back its argument, inside `low..=high`, from a guess.
///
/// The secant method on `g(x) - x`, its first step being `g` itself: three or four evaluations where `g` hardly
/// depends on its argument. `None` where it has not met `tolerance.residual` after a dozen.
pub fn fixed_point(
    mut g: impl FnMut(f64) -> f64,
    span: (f64, f64),
    guess: f64,
    tolerance: Tolerance,
) -> Option<Root> {
    fixed_any(&mut g, span, guess, tolerance)
}

fn fixed_any(
    g: &mut dyn FnMut(f64) -> f64,
    (low, high): (f64, f64),
    guess: f64,
    tolerance: Tolerance,
) -> Option<Root> {
    let mut before = (guess, g(guess) - guess);
    let mut x = (guess + before.1).clamp(low, high);
    for evaluations in 2..=12 {
        let residual = g(x) - x;
        if residual.abs() <= tolerance.residual {
            return Some(Root { x, residual, evaluations });
        }
        let slope = (residual - before.1) / (x - before.0);
        before = (x, residual);
        x = (x - residual / slope).clamp(low, high);
        if x.is_nan() {
            return None;
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_real_root_of_a_cubic() {
        // x^3 - 2x - 5, J. Wallis's example: 2.0945514815423265 (OEIS A007493).
        let f = |x: f64| x * x * x - 2.0 * x - 5.0;
        let root = between(f, (2.0, f(2.0)), (3.0, f(3.0)), Tolerance::FINE).expect("a bracket");
        assert!((root.x - 2.094_551_481_542_326_5).abs() < 1e-11);
        assert!(root.evaluations < 12, "{}", root.evaluations);
    }

    #[test]
    fn equal_signs_are_no_bracket() {
        assert!(between(|x| x * x + 1.0, (-1.0, 2.0), (1.0, 2.0), Tolerance::FINE).is_none());
        assert!(decreasing_from(|x| 9.0 - x, (0.0, 5.0), 1.0, Tolerance::FINE).is_none());
    }

    #[test]
    fn a_weak_dependence_settles_in_a_few_steps() {
        // The Dottie number, cos x = x (OEIS A003957).
        let root =
            fixed_point(libm::cos, (0.0, 2.0), 0.7, Tolerance { x: 0.0, residual: 1e-12 }).expect("0.739");
        assert!((root.x - 0.739_085_133_215_160_6).abs() < 1e-12 && root.evaluations <= 6);
    }

    #[test]
    fn a_far_guess_still_arrives() {
        let root = decreasing_from(|x| 1.0 - libm::exp(x), (-40.0, 8.0), -39.0, Tolerance::FINE).expect("0");
        assert!(root.x.abs() < 1e-10);
    }
}
