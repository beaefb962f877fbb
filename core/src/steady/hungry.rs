//! The steady points of a load that wants a constant power: none, or two, one either side of a hump.
//!
//! What such a load gets, against the bank's current, rises from nothing to one hump and falls again to nothing. With
//! power-factor correction it gets `I (Vs - R I)`, which is concave: a filament's watts grow at least with the square of
//! its current, ever faster. Behind a rectifier it gets `I G(r)` with `r = I R / Vp` the RMS of the pulse and `G` its
//! mean times what the reservoir holds, over that RMS: the hump is where `1 + beta d ln G / d ln r = 0`, `beta` being how
//! steeply ln volts of the bank grow with ln amperes. `d ln G / d ln r` falls all the way, from 0.2 on; where it passes
//! -1 to -1/3.5 by 0.6 or more, which no change of any filament's `beta` (1 to 3.4) makes up for. So the slope alone
//! tells on which side of the hump a point lies, and no sample of the range is needed.

use super::{Circuit, SteadyError};
use crate::filament::Filament;
use crate::load::Served;
use crate::roots::{Root, Tolerance};

/// Share of the supply's voltage that a bank of lamps has at the hump.
const HUMP_SHARE: f64 = 0.4;

/// A probe this close to the other side of the hump, in the logarithm of the current, has found its top.
const NARROWEST: f64 = 1e-9;

/// More than any of these searches takes.
const MOST_STEPS: u32 = 80;

/// One probe.
#[derive(Debug, Clone, Copy)]
struct Spot {
    /// Logarithm of the bank's leading rise, and what ln amperes grow with it.
    x: f64,
    pace: f64,
    amps: f64,
    served: Served,
    /// Growth of the share with ln amperes.
    slope: f64,
}

impl Spot {
    /// How much the load gets beyond what it wants, over that.
    fn left(&self) -> f64 {
        self.served.share - 1.0
    }

    /// Where the first order puts a current.
    fn towards(&self, amps: f64) -> f64 {
        self.x + libm::log(amps / self.amps) / self.pace
    }
}

/// Both roots in order of rising current, the first of them on the rising side.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Pair {
    pub(super) rising: Root,
    pub(super) falling: Root,
}

/// A spot where the load gets more than it wants, and the nearest known ones either side where it gets less.
type Hump = (Spot, Option<Spot>, Option<Spot>);

impl Circuit<'_> {
    fn spot(&self, x: f64) -> Spot {
        let (low, high) = Filament::ln_rise_span();
        let x = x.clamp(low, high);
        let step = self.walk.step_to(x);
        let feed = self.feed(&step.point);
        let served = self.load.served(&feed);
        // The source's own resistance does not change with the bank.
        let ohms_slope = (1.0 - self.supply.ohms() / feed.ohms) * (step.volts_slope / step.amps_slope - 1.0);
        let slope = served.by_amps + served.by_ohms * ohms_slope;
        Spot { x, pace: step.amps_slope, amps: feed.amps, served, slope }
    }

    /// Both points, or none where the load wants more than the hump.
    ///
    /// # Errors
    /// A lamp that would burn out where the search has to look.
    pub(super) fn hungry_points(&self, tolerance: Tolerance) -> Result<Option<Pair>, SteadyError> {
        let mut evaluations = 0;
        let Some((inside, left, right)) = self.hump(&mut evaluations)? else { return Ok(None) };
        // The rising side: what the load gets is nearly a power of the current.
        let start = inside.towards(1.1 * self.load.least_watts() / self.supply.volts());
        let start = self.spot(left.map_or(start, |spot| start.max(spot.x)).min(inside.x - 0.01));
        evaluations += 1;
        let by_power = |spot: &Spot| {
            let elasticity = spot.slope / spot.served.share;
            spot.x - libm::log(spot.served.share) / elasticity / spot.pace
        };
        let rising = refine(self, start, left, inside, by_power, tolerance, &mut evaluations);
        // The falling side: it ends in nothing, along nearly a straight line.
        let straight = |spot: &Spot| spot.towards(spot.amps - spot.left() / spot.slope * spot.amps);
        let start = match right {
            Some(spot) => spot,
            None if inside.slope < -0.3 => inside,
            None => {
                evaluations += 1;
                self.spot(inside.towards(1.6 * inside.amps))
            }
        };
        let falling = refine(self, start, right, inside, straight, tolerance, &mut evaluations);
        let (Some(rising), Some(falling)) = (rising, falling) else { return Ok(None) };
        if falling.x >= Filament::ln_rise_span().1 {
            return Err(self.melts(falling.x));
        }
        Ok(Some(Pair { rising: Root { evaluations, ..rising }, falling: Root { evaluations, ..falling } }))
    }

    /// Looks for the hump.
    fn hump(&self, evaluations: &mut u32) -> Result<Option<Hump>, SteadyError> {
        let (mut left, mut right): (Option<Spot>, Option<Spot>) = (None, None);
        let mut x = self.bank.guess_ln_rise(HUMP_SHARE * self.supply.volts());
        for _ in 0..MOST_STEPS {
            let spot = self.spot(x);
            *evaluations += 1;
            if spot.left() > 0.0 {
                return Ok(Some((spot, left, right)));
            }
            if spot.slope > 0.0 {
                left = Some(spot);
                if spot.x >= Filament::ln_rise_span().1 {
                    return Err(self.melts(spot.x));
                }
            } else {
                right = Some(spot);
            }
            x = match (left, right) {
                (Some(left), Some(right)) => match between(&left, &right) {
                    Some(x) => x,
                    None => return Ok(None),
                },
                // A tangent on the rising side runs above the curve: the root lies beyond its own. On the falling side a
                // mixed bank may be driven so far beyond its ratings that tangents lead nowhere; a stride too long
                // only finds the other side.
                (Some(_), _) => {
                    spot.towards(spot.amps * (1.0 - 1.5 * spot.left() / spot.slope).clamp(1.0, 2.5))
                }
                _ => spot.towards(spot.amps * (1.0 - 1.5 * spot.left() / spot.slope).clamp(0.4, 0.8)),
            };
        }
        Ok(None)
    }
}

/// Where to look for the top between two spots that both get less than they want; `None` where it can not be high
/// enough.
fn between(left: &Spot, right: &Spot) -> Option<f64> {
    let width = right.x - left.x;
    if width < NARROWEST {
        return None;
    }
    // Between an elasticity of 1 and one of -4 the curve is concave, so that its tangents meet above it.
    let (rise, fall) = (left.slope / left.amps, right.slope / right.amps);
    let concave = left.slope <= left.served.share && right.slope >= -4.0 * right.served.share;
    if concave {
        let amps = (left.amps * rise - right.amps * fall + right.left() - left.left()) / (rise - fall);
        if left.left() + rise * (amps - left.amps) < 0.0 {
            return None;
        }
    }
    // Where a straight line through both slopes vanishes; the middle where they tell little.
    let fraction = if concave { rise / (rise - fall) } else { 0.5 };
    Some(left.x + width * fraction.clamp(0.05, 0.95))
}

/// The root between a spot inside the hump and the outside, by Newton's method in whatever is nearly straight, kept
/// between the nearest spots known on either side.
fn refine(
    circuit: &Circuit<'_>,
    start: Spot,
    mut outside: Option<Spot>,
    mut inside: Spot,
    step: impl Fn(&Spot) -> f64,
    tolerance: Tolerance,
    evaluations: &mut u32,
) -> Option<Root> {
    let outward =
        if start.x < inside.x || outside.is_some_and(|spot| spot.x < inside.x) { -1.0 } else { 1.0 };
    let mut spot = start;
    for _ in 0..MOST_STEPS {
        let residual = -spot.left();
        if spot.left() > 0.0 {
            inside = spot;
        } else {
            outside = Some(spot);
        }
        let mut next = step(&spot);
        if let Some(outside) = outside {
            let (low, high) = (outside.x.min(inside.x), outside.x.max(inside.x));
            if !(low < next && next < high) {
                next = 0.5 * (low + high);
            }
            if high - low <= 2.0 * tolerance.x {
                return Some(Root { x: spot.x, residual, evaluations: 0 });
            }
        } else {
            // Nothing is known outside yet: no further than a little beyond what is known inside may be trusted.
            let reach = (next - inside.x) * outward;
            next = inside.x + outward * if reach > 0.0 { reach.min(1.0) } else { 0.5 };
        }
        if residual.abs() <= tolerance.residual || (next - spot.x).abs() <= tolerance.x {
            return Some(Root { x: spot.x, residual, evaluations: 0 });
        }
        let before = spot.x;
        spot = circuit.spot(next);
        *evaluations += 1;
        if spot.x == before {
            return Some(Root { x: before, residual, evaluations: 0 });
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use crate::bank::Bank;
    use crate::lamp::Lamp;
    use crate::load::{Draw, Load, Rectifier, RectifierSpec};
    use crate::steady;
    use crate::supply::Supply;
    use alloc::vec;

    /// Large lamps before a small one: a guess by the first group drives the last one to a hundred times its rating.
    #[test]
    fn a_hump_is_found_behind_a_bank_of_very_different_lamps() {
        let lamp = |watts| Lamp::new(230.0, watts).expect("in range");
        let bank = Bank::new(vec![vec![lamp(883.0), lamp(886.0)], vec![lamp(5.0)]]).expect("a bank");
        let supply = Supply::new(167.0, 0.0, 0.0).expect("in range");
        let (watts, shunt) = (0.114, 7108.0);
        let draw = Draw::Watts { watts, start_volts: 1.0, stop_volts: 0.0, restart_seconds: 0.0 };
        let spec =
            RectifierSpec { farads: 1e-4, series_ohms: 0.0, diode_volts: 0.0, draw, shunt_ohms: Some(shunt) };
        let load = Load::Rectifier(Rectifier::new(spec).expect("in range"));
        let points = steady::equilibria(&supply, &bank, &load).expect("solvable");
        assert_eq!(points.len(), 2, "{points:?}");
        for point in points {
            let taken = point.load_watts - point.load_volts * point.load_volts / shunt;
            assert!((taken - watts).abs() < 1e-6 * point.load_watts, "{point:?}");
        }
    }
}
