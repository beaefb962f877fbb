//! The ladder: from the lamps that a person owns to full mains, step by step.
//!
//! [`plan`] looks at every parallel group of up to six lamps of the stock and every series pair of such groups within
//! six lamps, and chooses the fewest rungs such that
//!
//! - the first passes no more into a dead short than the equipment stands ([`Limits::first`]),
//! - each passes at most about twice the one before ([`LimitsSpec::growth`]),
//! - the last brings healthy equipment closest to the supply's voltage, to within what can be told
//!   ([`LimitsSpec::close_share`]),
//! - no lamp is driven over its rating by a dead short on a supply that has risen
//!   ([`LimitsSpec::lamp_overvoltage`]), and no holder gets more heat than it stands ([`LimitsSpec::holder_watts`]).
//!
//! After the last rung comes the bare mains: that step is always the person's own decision ([`FullMains`]), and nothing
//! here calls it safe. How the choice is made, and made quickly, is told in `ladder/search.rs`.

mod curve;
mod limits;
mod missing;
mod pool;
mod refusal;
mod search;
mod signs;

use alloc::vec::Vec;

pub use limits::{FirstFrom, FirstLimit, Limits, LimitsSpec};
pub use missing::{Gain, Missing, Rating};
pub use pool::MOST_LAMPS;
pub use refusal::{LadderError, WayForward};
pub use signs::{GoOn, Level, Signs, Stop};

use serde::{Deserialize, Serialize};

use self::missing::Reached;
use self::pool::{Candidate, Pool};
use self::search::{Blocked, Path, Question};
use crate::bank::Bank;
use crate::condition::Condition;
use crate::expect::{self, Prospect};
use crate::family::{Unsuitable, Warning};
use crate::lamp::Lamp;
use crate::load::{Load, Mode};
use crate::plate::Plate;
use crate::setup::Setup;
use crate::steady::{self, SteadyError};
use crate::stock::Stock;
use crate::supply::Supply;

/// Why a rung stands where it does.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Reason {
    /// It passes no more than the equipment stands when shorted.
    First {
        /// What that is.
        limit: FirstLimit,
    },
    /// It links the rung before to the one after.
    Link {
        /// Its short-circuit current over that of the rung before.
        times: f64,
    },
    /// It brings healthy equipment closest to working voltage.
    Last {
        /// Its short-circuit current over that of the rung before.
        times: f64,
        /// Volts at the equipment over the supply's; 0 where it does not run.
        share: f64,
    },
    /// It is the first and the last.
    Only {
        /// What the equipment stands when shorted.
        limit: FirstLimit,
        /// Volts at the equipment over the supply's; 0 where it does not run.
        share: f64,
    },
}

impl Reason {
    /// The reason's name in the JSON contract.
    pub const fn name(&self) -> &'static str {
        match self {
            Self::First { .. } => "first",
            Self::Link { .. } => "link",
            Self::Last { .. } => "last",
            Self::Only { .. } => "only",
        }
    }
}

/// One step of the bring-up with one bank.
#[derive(Debug, Clone, PartialEq)]
pub struct Rung {
    /// The lamps to wire.
    pub bank: Bank,
    /// The same as how many of each kind of the stock, in its order, group by group.
    pub counts: Vec<Vec<u8>>,
    /// Amperes into a dead short: the most that this rung ever passes.
    pub short_amps: f64,
    /// What healthy equipment shows.
    pub healthy: Prospect,
    /// Why it stands here.
    pub reason: Reason,
    /// When to go on and when to stop.
    pub signs: Signs,
}

/// The bare mains after the last rung.
///
/// Whether to take it is the person's own decision, on the readings of the last rung: nothing limits the current any
/// more but the fuse.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FullMains {
    /// The supply's volts.
    pub supply_volts: f64,
    /// Amperes by the plate.
    pub rated_amps: f64,
    /// What the last rung passed into a dead short, amperes: the last limit there was.
    pub last_short_amps: f64,
    /// Whose decision it is.
    pub decision: Decision,
}

/// Whose decision a step is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Decision {
    /// The person's at the bench, always.
    Persons,
}

/// The rungs, and what goes with them.
#[derive(Debug, Clone, PartialEq)]
pub struct Ladder {
    /// What must be said before the first rung.
    pub warnings: &'static [Warning],
    /// The rungs in order, at least one.
    pub rungs: Vec<Rung>,
    /// The step after the last rung.
    pub full_mains: FullMains,
    /// Volts at healthy equipment behind the last rung over the supply's, where that is less than
    /// [`LimitsSpec::least_share`], or 0 where it does not run: good for finding a short, not for running it.
    pub falls_short: Option<f64>,
    /// The single lamp that would improve the ladder most, if any does; not looked for by [`plan_rungs`].
    pub missing: Option<Missing>,
    /// What other ladders are compared with.
    reached: Reached,
}

/// A step of the ladder.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Step<'a> {
    /// With a bank.
    Rung(&'a Rung),
    /// Without one.
    FullMains(&'a FullMains),
}

impl Ladder {
    /// Every step in order; the last is the bare mains.
    pub fn steps(&self) -> impl Iterator<Item = Step<'_>> {
        self.rungs.iter().map(Step::Rung).chain(core::iter::once(Step::FullMains(&self.full_mains)))
    }
}

/// How far the supply may stand above the plate's volts before it is the wrong supply, over these: the tolerance of the
/// mains with 5 % for old plates (IEC 60038, published second hand; design value).
const SUPPLY_ABOVE_PLATE: f64 = 0.15;

/// The ladder for equipment with this plate, from this stock, on this supply.
///
/// Ways of wiring the lamps are told apart by how many of each kind stand in each group. The same input gives the same
/// ladder: ties go to fewer lamps, then to a plain group before a chain, then to the weaker last rung and the evener
/// steps.
///
/// Accuracy: currents and voltages as [`steady::solve`]; the choice among thousands of banks is made from tables that
/// are good to 2e-5, so a bank that misses a limit by less than that may be taken.
///
/// # Errors
/// An empty stock, lamps that do not fit the supply or their holders, a plate that asks for less than the weakest bank
/// passes or for more than any bank gives, a supply that does not fit the plate; each with its way forward
/// ([`LadderError::ways`]).
///
/// ```
/// use lampladder_core::{family::Family, ladder, lamp::Lamp, plate::Plate, stock::Stock, supply::Supply};
/// let supply = Supply::new(230.0, 50.0, 0.0)?;
/// let stock = Stock::new([(Lamp::new(230.0, 60.0)?, 2.0), (Lamp::new(230.0, 25.0)?, 1.0)])?;
/// let radio = Plate::new(Family::TransformerSupply, 230.0, 45.0, None)?;
/// let ladder = ladder::plan(&supply, &stock, &radio, &ladder::Limits::default())?;
/// assert!(ladder.rungs[0].short_amps < radio.rated_amps());
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
pub fn plan(supply: &Supply, stock: &Stock, plate: &Plate, limits: &Limits) -> Result<Ladder, LadderError> {
    let mut ladder = plan_rungs(supply, stock, plate, limits)?;
    let healthy = plate.load(Condition::Healthy, 1.0)?;
    let question = Question { supply, plate, healthy: &healthy, limits };
    ladder.missing = missing::best_addition(&question, stock, Some(ladder.reached))?;
    Ok(ladder)
}

/// As [`plan`], without the search for the missing lamp, which takes most of the time: for a page that shows the rungs
/// first, and then asks [`gain_of`] for one of [`usual_ratings`] at a time.
///
/// # Errors
/// As [`plan`].
pub fn plan_rungs(
    supply: &Supply,
    stock: &Stock,
    plate: &Plate,
    limits: &Limits,
) -> Result<Ladder, LadderError> {
    let (supply_volts, plate_volts, family) = (supply.volts(), plate.volts(), plate.family());
    if plate.is_too_powerful() {
        return Err(LadderError::Unsuitable { reason: Unsuitable::TooPowerful, family });
    }
    if supply_volts > plate_volts * (1.0 + SUPPLY_ABOVE_PLATE) {
        return Err(LadderError::SupplyTooHigh { supply_volts, plate_volts });
    }
    let healthy = plate.load(Condition::Healthy, 1.0)?;
    let question = Question { supply, plate, healthy: &healthy, limits };
    let sensible = sensible_share(&question)?;
    if stock.is_empty() {
        return Err(LadderError::EmptyStock { first: missing::best_addition(&question, stock, None)? });
    }
    let pool = Pool::of(supply, stock, limits);
    let path = match question.path(&pool, stock)? {
        Ok(path) => path,
        Err(blocked) => return Err(refusal(&question, stock, &pool, blocked)?),
    };
    let least = limits.spec().least_share;
    if path.share < least && sensible < least {
        return Err(LadderError::BeyondAnyBank { share: sensible, family });
    }
    let rungs = rungs(&question, &pool, stock, &path)?;
    let last_short_amps = rungs.last().map_or(0.0, |rung| rung.short_amps);
    Ok(Ladder {
        warnings: family.warnings(),
        rungs,
        full_mains: FullMains {
            supply_volts,
            rated_amps: plate.rated_amps(),
            last_short_amps,
            decision: Decision::Persons,
        },
        falls_short: (path.share < least || path.share == 0.0).then_some(path.share),
        missing: None,
        reached: Reached::of(&path),
    })
}

/// The ratings of lamps that may be worth looking for on this supply, in order of rising watts.
pub fn usual_ratings(supply: &Supply, limits: &Limits) -> Vec<Rating> {
    missing::usual_ratings(supply, limits).collect()
}

/// What one lamp more of `rating` would change for `ladder`, which [`plan_rungs`] made of the same things.
///
/// The best of [`usual_ratings`], by [`Gain::beats`], is what [`plan`] calls the missing lamp.
///
/// # Errors
/// A rating out of range.
pub fn gain_of(
    supply: &Supply,
    stock: &Stock,
    plate: &Plate,
    limits: &Limits,
    (ladder, rating): (&Ladder, Rating),
) -> Result<Option<Gain>, LadderError> {
    let healthy = plate.load(Condition::Healthy, 1.0)?;
    let question = Question { supply, plate, healthy: &healthy, limits };
    Ok(missing::gain_of(&question, stock, Some(ladder.reached), rating)?)
}

/// Volts at healthy equipment behind the strongest bank that makes sense, over the supply's: six lamps of what a holder
/// stands, whoever owns them.
fn sensible_share(question: &Question<'_>) -> Result<f64, LadderError> {
    let supply_volts = question.supply.volts();
    let watts = question.limits.spec().holder_watts.min(Lamp::WATTS.1);
    let lamp = Lamp::new(supply_volts, watts)?;
    let bank = Bank::new(alloc::vec![alloc::vec![lamp; usize::from(MOST_LAMPS)]])?;
    let points = steady::equilibria(question.supply, &bank, question.healthy)?;
    match steady::settled(&points) {
        Some(point) if point.mode == Mode::Off => Err(LadderError::NeverStarts { supply_volts }),
        Some(point) if search::runs(point) => Ok(point.load_volts / supply_volts),
        _ => Ok(0.0),
    }
}

/// Why no path was found, with the way forward.
fn refusal(
    question: &Question<'_>,
    stock: &Stock,
    pool: &Pool,
    blocked: Blocked,
) -> Result<LadderError, SteadyError> {
    let (supply, limits) = (question.supply, question.limits);
    let missing = missing::best_addition(question, stock, None)?;
    if let Blocked::FirstTooStrong { least_amps } = blocked {
        let limit_amps = limits.first(supply, question.plate).amps;
        return Ok(LadderError::FirstTooStrong { least_amps, limit_amps, missing });
    }
    let spec = limits.spec();
    let fallback =
        Rating { volts: missing::usual_volts(supply, limits), watts: spec.holder_watts.min(FALLBACK_WATTS) };
    let rating = missing.map_or(fallback, |missing| missing.rating);
    if pool.some_too_hot {
        return Ok(LadderError::TooHot { holder_watts: spec.holder_watts, rating });
    }
    let half = 0.5 * supply.volts() * (1.0 + spec.supply_rise) / (1.0 + spec.lamp_overvoltage);
    let twin =
        stock.kinds().iter().position(|owned| owned.count() == 1 && owned.lamp().rated_volts() >= half);
    Ok(LadderError::NoLampFits { supply_volts: supply.volts(), twin, rating })
}

/// A lamp to name where no usual one makes a ladder.
const FALLBACK_WATTS: f64 = 40.0;

/// The rungs with all that belongs to them.
fn rungs(question: &Question<'_>, pool: &Pool, stock: &Stock, path: &Path) -> Result<Vec<Rung>, SteadyError> {
    let limit = question.limits.first(question.supply, question.plate);
    let mut rungs: Vec<Rung> = Vec::with_capacity(path.rungs.len());
    for (index, candidate) in path.rungs.iter().enumerate() {
        let before = rungs.last().map(|rung| rung.short_amps);
        let is_last = index + 1 == path.rungs.len();
        let share = path.share;
        let rung = rung(question, pool, stock, candidate, |short_amps| match (before, is_last) {
            (None, true) => Reason::Only { limit, share },
            (None, false) => Reason::First { limit },
            (Some(before), false) => Reason::Link { times: short_amps / before },
            (Some(before), true) => Reason::Last { times: short_amps / before, share },
        })?;
        rungs.push(rung);
    }
    Ok(rungs)
}

fn rung(
    question: &Question<'_>,
    pool: &Pool,
    stock: &Stock,
    candidate: &Candidate,
    reason: impl FnOnce(f64) -> Reason,
) -> Result<Rung, SteadyError> {
    let bank = pool.bank(candidate, stock)?;
    let shorted = steady::equilibria(question.supply, &bank, &Load::Short)?;
    let short_amps = steady::settled(&shorted).map_or(candidate.short_amps, |point| point.amps);
    let setup = Setup { supply: *question.supply, bank, plate: question.plate.clone() };
    let healthy = expect::prospect(&setup, Condition::Healthy)?;
    let signs = signs::signs(&setup, &healthy)?;
    let kinds = stock.kinds().len();
    let counts = pool.counts(candidate).iter().map(|counts| counts[..kinds].to_vec()).collect();
    Ok(Rung { bank: setup.bank, counts, short_amps, healthy, reason: reason(short_amps), signs })
}
