//! The texts of the ladder panel.

use lampladder_core::condition::Condition;
use lampladder_core::detail::Standing;
use lampladder_core::error::InputError;
use lampladder_core::identify::IdentifyError;
use lampladder_core::ladder::{FirstFrom, GoOn, LadderError, Reason, Stop, WayForward};
use lampladder_core::precheck::{Class, DischargePlace, Path, PlugFinding};

/// How far a step of the checklist has come.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Progress {
    /// Behind.
    Done,
    /// Behind, and not all of it done.
    LeftOut,
    /// Due.
    Now,
    /// Ahead.
    Next,
}

/// What healthy equipment shows on a rung, already as text.
#[derive(Debug, Clone, PartialEq)]
pub struct Expected {
    /// Glow of the brightest lamp, from the dimmest to the brightest.
    pub glow: String,
    /// Amperes.
    pub amps: String,
    /// Volts across the lamps.
    pub bank_volts: String,
    /// Volts across the equipment.
    pub load_volts: String,
}

/// All texts of the panel.
#[derive(Debug)]
pub struct LadderWords {
    /// Its heading.
    pub title: &'static str,
    /// What it is for: size and kind of the equipment, supply.
    pub for_what: fn(&str, &str, &str) -> String,
    /// How far a step has come.
    pub progress: fn(Progress) -> &'static str,
    /// Not known yet.
    pub working: &'static str,
    /// It began again, and why.
    pub restarted: &'static str,
    /// Goes on to a step.
    pub go_on: fn(&str) -> String,
    /// Begins again from here.
    pub back_here: &'static str,
    /// The checklist from its beginning, for other equipment.
    pub afresh: &'static str,

    /// The lamps.
    pub lamps: &'static str,
    /// None.
    pub no_lamps: &'static str,
    /// What to do with the sizes: their volts.
    pub tap_sizes: fn(&str) -> String,
    /// One more or less of a lamp.
    pub one: fn(&str, bool) -> String,
    /// A measured lamp: its rating.
    pub measured_lamp: fn(&str) -> String,
    /// Opens the form for any lamp.
    pub another: &'static str,
    /// Opens the form for an illegible one.
    pub unknown: &'static str,
    /// Measures one of a kind.
    pub measure: &'static str,
    /// The same for those who hear it.
    pub measure_one: fn(&str) -> String,
    /// Heading of the form: the rating.
    pub measuring: fn(&str) -> String,
    /// How to measure.
    pub measure_how: &'static str,
    /// Puts the lamp in.
    pub put: &'static str,
    /// Puts the measured lamp in the place of an unmeasured one.
    pub put_measured: &'static str,
    /// Why it was not taken in.
    pub put_refused: fn(&InputError) -> String,
    /// Heading of the bands before and after.
    pub shrinks: &'static str,
    /// At these volts; as printed; as measured; times narrower.
    pub shrink_heads: [&'static str; 4],
    /// How to measure a lamp without a rating.
    pub unknown_how: &'static str,
    /// It is being compared.
    pub comparing: &'static str,
    /// Nothing fits, and why.
    pub no_fit: fn(&IdentifyError) -> &'static str,
    /// One rating that fits, and how likely.
    pub fit: fn(&str, &str) -> String,
    /// Why there is no ladder; numbers already as text by `numbers`.
    pub refused: fn(&LadderError) -> String,
    /// What a person can do; the lamp where one is named.
    pub way: fn(&WayForward, &str) -> String,
    /// The lamp that would help most, and what it would do.
    pub missing: fn(&str, &str) -> String,
    /// What it would do.
    pub gain: fn(&lampladder_core::ladder::Gain) -> String,

    /// Before power.
    pub checks: &'static str,
    /// So many of so many.
    pub checks_done: fn(usize, usize) -> String,
    /// Those that were left out.
    pub skipped: fn(&str) -> String,
    /// A reading is beyond its limit.
    pub forbids: &'static str,
    /// Unplugged, for all of them.
    pub unplugged: &'static str,
    /// Looked over.
    pub looked: &'static str,
    /// Its name in a list.
    pub looked_short: &'static str,
    /// Asks for the class.
    pub class: &'static str,
    /// A class.
    pub class_name: fn(Class) -> &'static str,
    /// What marks it.
    pub class_means: fn(Class) -> &'static str,
    /// Asks for the lead's length.
    pub lead: &'static str,
    /// A length.
    pub lead_name: fn(&str) -> String,
    /// The limit: at most or at least so much.
    pub limit: fn(bool, &str) -> String,
    /// The meter over its range.
    pub over_range: &'static str,
    /// Where the limit comes from: standards, standing.
    pub quoted: fn(&str, Standing) -> String,
    /// The reading keeps to the limit; it does not.
    pub verdict: fn(bool) -> &'static str,
    /// How to measure across the plug.
    pub plug_how: &'static str,
    /// What is to be expected there: low and high, what the current goes through.
    pub plug_expect: fn(&str, &str, Path) -> String,
    /// From there up, for a range without an end.
    pub and_up: &'static str,
    /// What a reading allows.
    pub plug_found: fn(&[PlugFinding]) -> String,
    /// Between the ranges: below healthy, or above.
    pub plug_between: fn(bool) -> &'static str,
    /// Where the ranges come from.
    pub plug_from: fn(Standing) -> &'static str,
    /// Goes to the rungs although something is beyond its limit.
    pub all_the_same: &'static str,

    /// One rung: which of how many.
    pub rung: fn(usize, usize) -> String,
    /// The rungs while none is known.
    pub rungs: &'static str,
    /// What healthy equipment shows.
    pub if_healthy: &'static str,
    /// In a sentence.
    pub expected: fn(&Expected) -> String,
    /// The same in few words, for the step's head.
    pub expected_short: fn(&Expected) -> String,
    /// Why this rung: what a dead short passes.
    pub why: fn(&Reason, &str) -> String,
    /// Which rule set the first rung's limit.
    pub first_from: fn(FirstFrom) -> &'static str,
    /// Heading.
    pub go_on_when: &'static str,
    /// When to go on.
    pub go_on_if: fn(&GoOn) -> String,
    /// Heading.
    pub stop_when: &'static str,
    /// Volts across the lamps.
    pub across_lamps: fn(&str) -> String,
    /// When to stop: any of these levels.
    pub stop_if: fn(Option<&Stop>, &[String]) -> String,
    /// Faults that do not show here.
    pub hidden: fn(&[Condition]) -> String,
    /// Takes the rung's lamps into the loop.
    pub use_bank: &'static str,
    /// They are in it.
    pub in_loop: &'static str,
    /// Goes to the readings.
    pub to_readings: &'static str,
    /// The last rung does not run it.
    pub falls_short: fn(&str) -> String,
    /// What the ladder keeps to: holder watts, rise, growth.
    pub keeps: fn(&str, &str, &str) -> String,

    /// The bare mains.
    pub mains: &'static str,
    /// Whose decision.
    pub mains_short: &'static str,
    /// What it means: rated amperes, what the last rung passed.
    pub mains_means: fn(&str, &str) -> String,

    /// After power.
    pub after: &'static str,
    /// Always.
    pub measure_first: &'static str,
    /// What the time says and does not say.
    pub after_means: &'static str,
    /// Where no volts are typed.
    pub start_hint: fn(&str) -> String,
    /// How a reservoir is typed.
    pub farads_hint: &'static str,
    /// Where no bleed is typed.
    pub bleed_hint: &'static str,
    /// Heads of the waits.
    pub wait_heads: [&'static str; 3],
    /// Where a limit holds.
    pub place: fn(DischargePlace) -> &'static str,
    /// Nobody knows how long.
    pub wait_unknown: &'static str,
    /// Power is off: counts.
    pub power_off: &'static str,
    /// Stops counting.
    pub stop_counting: &'static str,
    /// Below the lowest limit in so long, by the slowest values.
    pub counting: fn(&str, &str) -> String,
    /// It should be below.
    pub counted: fn(&str) -> String,
}
