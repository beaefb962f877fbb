//! All roots of one function over a range: sampled, then refined, with every dip that comes close to zero followed.

use alloc::vec::Vec;

use crate::roots::{self, Sample, Tolerance};

/// A root that a scan found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Crossing {
    /// Where the function vanishes.
    pub(crate) x: f64,
    /// The function there.
    pub(crate) residual: f64,
    /// Whether the function falls through it.
    pub(crate) falling: bool,
    /// Evaluations that the whole scan took.
    pub(crate) evaluations: u32,
}

/// A residual above this at the end of a search is a jump from one regime to another, not a root.
const JUMP: f64 = 1e-6;

/// Every root in `low..=high`, in order, from `samples` even steps.
///
/// Two roots between neighbouring samples are found where the function has one smooth dip (or hump) there: the dip is
/// followed by parabolas until it crosses or plainly does not. Values that are not a number are passed over.
pub(crate) fn all(mut f: impl FnMut(f64) -> f64, span: (f64, f64), samples: u32) -> Vec<Crossing> {
    any(&mut f, span, samples)
}

/// One copy for all functions, as in [`roots`].
fn any(f: &mut dyn FnMut(f64) -> f64, (low, high): (f64, f64), samples: u32) -> Vec<Crossing> {
    let width = (high - low) / f64::from(samples);
    let mut points: Vec<Sample> = Vec::with_capacity(samples as usize + 3);
    for step in 0..=samples {
        let x = low + width * f64::from(step);
        points.push((x, f(x)));
    }
    let mut evaluations = samples + 1;
    points.retain(|point| point.1.is_finite());
    let mut index = 1;
    while index + 1 < points.len() {
        let (left, here, right) = (points[index - 1], points[index], points[index + 1]);
        let sign = here.1.signum();
        let one_sided = left.1 * sign > 0.0 && right.1 * sign > 0.0;
        if one_sided && here.1 * sign <= left.1 * sign && here.1 * sign <= right.1 * sign {
            let upright = |point: Sample| (point.0, sign * point.1);
            let (found, cost) = below(&mut |x| sign * f(x), upright(left), upright(here), upright(right));
            evaluations += cost;
            if let Some(found) = found {
                points.insert(index + usize::from(found.0 > here.0), upright(found));
                index += 1;
            }
        }
        index += 1;
    }
    let mut found = Vec::new();
    for pair in points.windows(2) {
        let (start, end) = (pair[0], pair[1]);
        // An end that is exactly zero belongs to the interval that it starts.
        if end.1 == 0.0 || start.1 * end.1 > 0.0 {
            continue;
        }
        if let Some(root) = roots::between_any(f, start, end, Tolerance::FINE) {
            evaluations += root.evaluations - 2;
            if root.residual.abs() < JUMP {
                let falling = end.1 < 0.0;
                found.push(Crossing { x: root.x, residual: root.residual, falling, evaluations: 0 });
            }
        }
    }
    for crossing in &mut found {
        crossing.evaluations = evaluations;
    }
    found
}

/// A point below zero in a valley of three points above it, if it has one, and how many evaluations it took.
///
/// Each step goes to the vertex of the parabola through the three lowest points, or, where that would hardly move,
/// into the wider side (R. P. Brent, Algorithms for Minimization without Derivatives, 1973, chapter 5). It ends as soon
/// as a point lies below zero, or as the vertex promises not even a tenth of what is left.
fn below(
    f: &mut dyn FnMut(f64) -> f64,
    mut left: Sample,
    mut here: Sample,
    mut right: Sample,
) -> (Option<Sample>, u32) {
    let mut hopeless = 0;
    for evaluations in 0..MOST_PROBES {
        if here.1 < 0.0 {
            return (Some(here), evaluations);
        }
        let (before, after) = (here.0 - left.0, right.0 - here.0);
        let (fall, rise) = ((left.1 - here.1) / before, (right.1 - here.1) / after);
        let curvature = (fall + rise) / (before + after);
        // Newton's step on the parabola, and how far it falls below `here`.
        let slope = (rise * before - fall * after) / (before + after);
        let (vertex, drop) = (-0.5 * slope / curvature, 0.25 * slope * slope / curvature);
        hopeless = if drop < 0.1 * here.1 { hopeless + 1 } else { 0 };
        if hopeless == 2 || before + after < NARROWEST || curvature.is_nan() {
            return (None, evaluations);
        }
        let least = 0.05 * before.max(after);
        let step = if vertex.abs() >= least {
            vertex
        } else if after > before {
            least
        } else {
            -least
        };
        let x = (here.0 + step).clamp(left.0 + 0.02 * before, right.0 - 0.02 * after);
        let probe = (x, f(x));
        let to_right = x > here.0;
        if probe.1 < here.1 {
            *(if to_right { &mut left } else { &mut right }) = here;
            here = probe;
        } else {
            *(if to_right { &mut right } else { &mut left }) = probe;
        }
    }
    (None, MOST_PROBES)
}

/// A valley that takes more probes is no smooth one.
const MOST_PROBES: u32 = 40;

/// Two roots closer than this, in the logarithm that is scanned, are one for every purpose.
const NARROWEST: f64 = 1e-7;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_a_pair_between_two_samples_and_no_jump() {
        // Roots at 0.501 and 0.502, far closer together than the samples.
        let pair = all(|x| (x - 0.501) * (x - 0.502), (0.0, 1.0), 10);
        assert_eq!(pair.len(), 2);
        assert!((pair[0].x - 0.501).abs() < 1e-8 && pair[0].falling && !pair[1].falling);
        assert!(all(|x| if x < 0.55 { 1.0 } else { -1.0 }, (0.0, 1.0), 10).is_empty());
        assert!(all(|x| x * x + 1e-6, (-1.0, 1.0), 10).is_empty());
        // A skew dip, its bottom a millionth below zero, far from the nearest sample.
        let skew = |x: f64| libm::exp(x) - x - 1.0 - 1e-6;
        assert_eq!(all(|x| skew(x - 0.03), (-1.0, 1.3), 10).len(), 2);
        assert!(all(|x| skew(x - 0.03) + 2e-6, (-1.0, 1.3), 10).is_empty());
    }
}
