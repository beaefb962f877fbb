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
/// followed by golden section until it crosses. Values that are not a number are passed over.
pub(crate) fn all(mut f: impl FnMut(f64) -> f64, (low, high): (f64, f64), samples: u32) -> Vec<Crossing> {
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
            let valley = |x: f64| sign * f(x);
            let (found, cost) = lowest(valley, left.0, (here.0, sign * here.1), right.0);
            evaluations += cost;
            if found.1 < 0.0 {
                points.insert(index + usize::from(found.0 > here.0), (found.0, sign * found.1));
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
        if let Some(root) = roots::between(&mut f, start, end, Tolerance::FINE) {
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

/// The lowest sample that golden-section search finds in a valley, stopping as soon as it is below zero, and how
/// many evaluations it took.
fn lowest(mut f: impl FnMut(f64) -> f64, mut left: f64, mut here: Sample, mut right: f64) -> (Sample, u32) {
    /// Part of the wider side to step into: 2 minus the golden ratio.
    const GOLDEN: f64 = 0.381_966_011_250_105_1;
    let mut evaluations = 0;
    while here.1 >= 0.0 && right - left > 1e-7 && evaluations < 60 {
        let to_right = right - here.0 > here.0 - left;
        let x = here.0 + if to_right { GOLDEN * (right - here.0) } else { -GOLDEN * (here.0 - left) };
        let probe = (x, f(x));
        evaluations += 1;
        if probe.1 < here.1 {
            if to_right {
                left = here.0;
            } else {
                right = here.0;
            }
            here = probe;
        } else if to_right {
            right = x;
        } else {
            left = x;
        }
    }
    (here, evaluations)
}

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
    }
}
