//! Readings that cannot belong together, with the arithmetic that says so.

use alloc::vec::Vec;
use core::fmt;

use serde::{Deserialize, Serialize};

/// The law that two sides of a comparison obey, whatever the equipment does.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Rule {
    /// The parts must reach the whole: left is `Vb + Vl`, right `Vs`, and left may not be less.
    PartsReachWhole,
    /// Neither part may exceed the other by more than the whole: left is `|Vb - Vl|`, right `Vs`, and left may not be
    /// more.
    PartsDifferByWhole,
    /// Equipment that gives no power back leaves `Vb^2 + Vl^2` at most `Vs^2`: left is the root of the sum, right `Vs`,
    /// and left may not be more.
    NoPowerComesBack,
    /// One part alone may not exceed the whole: left is that part, right `Vs`.
    PartWithinWhole,
    /// Real power may not exceed apparent power: left is the watts read, right `Vl I`.
    RealWithinApparent,
    /// The current that was read, left, and the one by the lamps, right, must agree.
    CurrentsAgree,
    /// The current that was read or by the lamps, left, and the one by the glow, right, must agree.
    GlowAgrees,
    /// The power that was read, left, and that by three voltages, right, must agree.
    PowersAgree,
    /// The bank's volts as read, left, may not exceed what burns a filament out, right.
    FilamentHolds,
}

/// One comparison that fails. Both sides are in the same SI unit.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct Contradiction {
    /// The law.
    pub rule: Rule,
    /// Left side, as the rule says.
    pub left: f64,
    /// Right side.
    pub right: f64,
    /// Standard uncertainty of their difference.
    pub deviation: f64,
    /// Whether a factor of 1000 on one side would mend it: a unit that was left out.
    pub looks_like_a_missing_unit: bool,
}

/// How many standard uncertainties a comparison may fail by before the readings are refused: one true set in 700.
pub const MOST_DEVIATIONS: f64 = 3.0;

/// Sides whose ratio is a thousand within this factor look like a missing unit (design value).
const NEAR_THOUSAND: f64 = 1.6;

impl Contradiction {
    /// A failed comparison, where the gap (how much the law is broken by) exceeds what the uncertainty allows.
    pub(super) fn check(rule: Rule, left: f64, right: f64, gap: f64, deviation: f64) -> Option<Self> {
        let broken = gap > MOST_DEVIATIONS * deviation && gap > 0.0;
        let ratio = libm::fabs(libm::log(left / right)) - libm::log(1000.0);
        let looks_like_a_missing_unit = libm::fabs(ratio) < libm::log(NEAR_THOUSAND);
        broken.then_some(Self { rule, left, right, deviation, looks_like_a_missing_unit })
    }
}

/// Readings that cannot belong together.
#[derive(Debug, Clone, PartialEq)]
pub struct Refused {
    /// Every comparison that fails; at least one.
    pub contradictions: Vec<Contradiction>,
}

impl fmt::Display for Refused {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("readings that cannot belong together")?;
        for one in &self.contradictions {
            write!(f, ": {:?}, {} and {} within {}", one.rule, one.left, one.right, one.deviation)?;
        }
        Ok(())
    }
}

impl core::error::Error for Refused {}
