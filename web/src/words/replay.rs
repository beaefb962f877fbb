//! The texts of the switch-on panel.

use lampladder_core::fuse::{Standard, Status, Verdict};
use lampladder_core::switch_on::SwitchOnError;

use crate::replay::Closing;
use crate::story::{Cause, Story};

/// What a replay took for granted, already as text.
#[derive(Debug, Clone, PartialEq)]
pub struct Played {
    /// Volts and hertz of the supply.
    pub supply: String,
    /// How large the equipment is.
    pub size: String,
    /// What kind it is.
    pub family: &'static str,
    /// When the switch closed; `None` on direct current.
    pub closing: Option<Closing>,
}

/// All texts of the panel.
#[derive(Debug)]
pub struct ReplayWords {
    /// Its heading.
    pub title: &'static str,
    /// Asks for the condition beside the healthy one.
    pub beside: &'static str,
    /// While nothing can be said yet.
    pub working: &'static str,
    /// What the lamp does.
    pub story: fn(&Story) -> String,
    /// Why.
    pub cause: fn(Cause) -> &'static str,
    /// Why a run ended early; the lamp that broke.
    pub stopped: fn(&SwitchOnError, &str) -> String,
    /// The two cannot be told apart by eye.
    pub alike: &'static str,
    /// What was taken for granted.
    pub assumes: fn(&Played) -> String,
    /// Plays.
    pub play: &'static str,
    /// Pauses.
    pub pause: &'static str,
    /// Plays from the beginning.
    pub again: &'static str,
    /// The scrubber.
    pub time: &'static str,
    /// It plays.
    pub playing: &'static str,
    /// The moments of a still replay.
    pub moments: &'static str,
    /// Equipment's volts and current under a lamp.
    pub figures: fn(&str, &str) -> String,
    /// The chart, for those who hear it.
    pub chart: &'static str,
    /// Its upper half.
    pub chart_amps: &'static str,
    /// Its lower half.
    pub chart_volts: &'static str,
    /// What the chart shows.
    pub chart_means: &'static str,
    /// The beginning plays slowly.
    pub slow: &'static str,
    /// How it plays.
    pub speed: &'static str,
    /// Asks when the switch closes.
    pub closes: &'static str,
    /// When it does.
    pub closing: fn(Closing) -> &'static str,
    /// Asks how long.
    pub span: &'static str,
    /// Heading of the figures.
    pub surge: &'static str,
    /// Peak current.
    pub peak: &'static str,
    /// When it flows.
    pub peak_after: &'static str,
    /// The squared current's integral.
    pub heat: &'static str,
    /// When it settles.
    pub settles: &'static str,
    /// It does not, within these seconds.
    pub unsettled: fn(&str) -> String,
    /// From pulse to pulse.
    pub pulse: &'static str,
    /// Current at the end.
    pub last_amps: &'static str,
    /// The equipment's volts at the end.
    pub last_volts: &'static str,
    /// The reservoir's volts at the end.
    pub last_dc: &'static str,
    /// Peak without lamps.
    pub straight_peak: &'static str,
    /// Surge without lamps.
    pub straight_heat: &'static str,
    /// What the lamps save.
    pub saved: &'static str,
    /// So many times less.
    pub times_less: fn(&str) -> String,
    /// No less.
    pub same: &'static str,
    /// What a run without lamps takes for granted: the outlet's ohms.
    pub straight_means: fn(&str) -> String,
    /// Column of times.
    pub time_column: &'static str,
    /// Heading of the table of moments.
    pub moment_by_moment: &'static str,
    /// Heading of the fuse check.
    pub fuse: &'static str,
    /// Asks for the standard.
    pub standards: &'static str,
    /// A standard on a chip.
    pub standard: fn(Standard) -> &'static str,
    /// What it is for.
    pub standard_means: fn(Standard) -> &'static str,
    /// Rated current.
    pub rated: &'static str,
    /// The next size up or down.
    pub rated_step: fn(bool) -> &'static str,
    /// Behind the lamps.
    pub behind: &'static str,
    /// Without them.
    pub straight: &'static str,
    /// What the fuse does.
    pub verdict: fn(Verdict) -> &'static str,
    /// Where the gates come from, and what to check.
    pub fuse_note: fn(Status) -> String,
}
