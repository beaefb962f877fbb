//! The texts of the ladder panel.

use lampladder_core::detail::Standing;
use lampladder_core::error::{Field, InputError};
use lampladder_core::identify::IdentifyError;
use lampladder_core::ladder::{FirstFrom, Gain, GoOn, LadderError, Reason, Stop, WayForward};
use lampladder_core::precheck::{Class, DischargePlace, Path, PlugFinding};

use super::reader::catalogue;
use super::{fill, pick};

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

catalogue! {
    /// All texts of the panel.
    pub struct LadderWords in "ladder." {
        title, for_what,
        progress [done, left_out, now, next],
        working, restarted, go_on, back_here, afresh, lamps, no_lamps, tap_sizes, one_more, one_less,
        measured_lamp, put_back, another, unknown, measure, measure_one, measuring, measure_how, put, put_measured,
        put_twelve, put_many, put_unlike, shrinks,
        shrink_heads [volts, printed, measured, narrower],
        unknown_how, comparing,
        no_fit [falls, dim, unlike, range],
        fit, empty_stock, no_lamp_fits, too_hot, first_too_strong, supply_too_high, never_starts,
        beyond_any_bank, too_powerful, no_circuit,
        way [
            add_lamp, add_twin, holders, by_hand, match_voltage, check_plate, take_off_load, measure_instead,
            variable, specialist,
        ],
        missing, gain_possible, gain_closer, gain_fewer, gain_stronger, checks, checks_done, skipped, forbids,
        unplugged, looked, looked_short, class,
        class_name [one, two, three],
        class_means [one, two, three],
        lead, lead_name, at_least, at_most, over_range,
        quoted [published, memory, design],
        within, outside, plug_how, plug_range, plug_from,
        path [primary, motor, cold_heaters, element, cold_filament, degauss, rectifier, measured, unknown],
        plug_found, plug_or,
        finding [healthy, shorted_input, open_path],
        plug_below, plug_above, plug_published, plug_design, all_the_same, rung, rungs, if_healthy, expected,
        expected_short, why_first, why_only, why_link, why_last, why_last_none,
        first_from [plate, least, most],
        go_on_when, go_on_between, go_on_pulses, go_on_pulses_every, go_on_dark, stop_when, across_lamps,
        stop_apart, stop_close, stop_none, hidden, use_bank, in_loop, to_readings, falls_short, keeps, mains,
        mains_short, mains_means, after, measure_first, after_means, start_hint, farads_hint, bleed_hint,
        wait_heads [below, wait, asked],
        place [plug_pins, live_parts, exposed_pins, accessible],
        wait_unknown, power_off, stop_counting, counting, counted,
    }
}

impl LadderWords {
    fn amps(&self, value: f64) -> String {
        self.numerals.about(value, "A")
    }

    fn volts(&self, value: f64) -> String {
        self.numerals.quantity(value, "V")
    }

    /// What it is for: size and kind of the equipment, supply.
    pub fn for_what(&self, size: &str, family: &str, supply: &str) -> String {
        fill(self.for_what, &[size, family, supply])
    }

    /// How far a step has come.
    pub fn progress(&self, progress: Progress) -> &'static str {
        pick(&self.progress, progress as usize)
    }

    /// Goes on to a step.
    pub fn go_on(&self, next: &str) -> String {
        fill(self.go_on, &[next])
    }

    /// What to do with the sizes: their volts.
    pub fn tap_sizes(&self, volts: &str) -> String {
        fill(self.tap_sizes, &[volts])
    }

    /// Takes back that the last of a lamp was taken out.
    pub fn put_back(&self, lamp: &str) -> String {
        fill(self.put_back, &[lamp])
    }

    /// One more or less of a lamp.
    pub fn one(&self, lamp: &str, more: bool) -> String {
        fill(if more { self.one_more } else { self.one_less }, &[lamp])
    }

    /// A measured lamp: its rating.
    pub fn measured_lamp(&self, rating: &str) -> String {
        fill(self.measured_lamp, &[rating])
    }

    /// Measures one of a kind, for those who hear it.
    pub fn measure_one(&self, rating: &str) -> String {
        fill(self.measure_one, &[rating])
    }

    /// Heading of the form: the rating.
    pub fn measuring(&self, rating: &str) -> String {
        fill(self.measuring, &[rating])
    }

    /// Why a lamp was not taken in.
    pub const fn put_refused(&self, error: &InputError) -> &'static str {
        match error.field() {
            Field::Stock => self.put_twelve,
            Field::Count => self.put_many,
            _ => self.put_unlike,
        }
    }

    /// Nothing fits, and why.
    pub const fn no_fit(&self, error: &IdentifyError) -> &'static str {
        let [falls, dim, unlike, range] = self.no_fit;
        match error {
            IdentifyError::FallsAsItHeats { .. } => falls,
            IdentifyError::TooDim { .. } => dim,
            IdentifyError::NoMatch { .. } => unlike,
            _ => range,
        }
    }

    /// One rating that fits, and how likely.
    pub fn fit(&self, rating: &str, percent: &str) -> String {
        fill(self.fit, &[rating, percent])
    }

    /// Why there is no ladder.
    pub fn refused(&self, error: &LadderError) -> String {
        match error {
            LadderError::EmptyStock { .. } => self.empty_stock.to_owned(),
            LadderError::NoLampFits { supply_volts, .. } => {
                fill(self.no_lamp_fits, &[&self.volts(*supply_volts)])
            }
            LadderError::TooHot { holder_watts, .. } => {
                fill(self.too_hot, &[&self.numerals.quantity(*holder_watts, "W")])
            }
            LadderError::FirstTooStrong { least_amps, limit_amps, .. } => {
                fill(self.first_too_strong, &[&self.amps(*least_amps), &self.amps(*limit_amps)])
            }
            LadderError::SupplyTooHigh { supply_volts, plate_volts } => {
                fill(self.supply_too_high, &[&self.volts(*supply_volts), &self.volts(*plate_volts)])
            }
            LadderError::NeverStarts { supply_volts } => {
                fill(self.never_starts, &[&self.volts(*supply_volts)])
            }
            LadderError::BeyondAnyBank { share, .. } => {
                fill(self.beyond_any_bank, &[&self.numerals.percent(*share)])
            }
            LadderError::Unsuitable { .. } => self.too_powerful.to_owned(),
            _ => self.no_circuit.to_owned(),
        }
    }

    /// What a person can do; the lamp where one is named.
    pub fn way(&self, way: &WayForward, lamp: &str) -> String {
        let at = match way {
            WayForward::AddLamp(_) => 0,
            WayForward::AddTwin(_) => 1,
            WayForward::StrongerHolders => 2,
            WayForward::RaiseFirstLimit => 3,
            WayForward::MatchTheVoltage => 4,
            WayForward::CheckThePlate => 5,
            WayForward::DisconnectItsLoad => 6,
            WayForward::MeasureInstead => 7,
            WayForward::VariableTransformer => 8,
            _ => 9,
        };
        fill(pick(&self.way, at), &[lamp])
    }

    /// The lamp that would help most, and what it would do.
    pub fn missing(&self, lamp: &str, gain: &Gain) -> String {
        let gain = match gain {
            Gain::Possible { .. } => self.gain_possible.to_owned(),
            Gain::Closer { share } => fill(self.gain_closer, &[&self.numerals.percent(*share)]),
            Gain::Fewer { rungs } => fill(self.plural.of(self.gain_fewer, *rungs), &[&rungs.to_string()]),
            _ => self.gain_stronger.to_owned(),
        };
        fill(self.missing, &[lamp, &gain])
    }

    /// So many checks of so many.
    pub fn checks_done(&self, done: usize, all: usize) -> String {
        fill(self.checks_done, &[&done.to_string(), &all.to_string()])
    }

    /// Those that were left out.
    pub fn skipped(&self, names: &str) -> String {
        fill(self.skipped, &[names])
    }

    /// A class.
    pub fn class_name(&self, class: Class) -> &'static str {
        pick(&self.class_name, class as usize)
    }

    /// What marks it.
    pub fn class_means(&self, class: Class) -> &'static str {
        pick(&self.class_means, class as usize)
    }

    /// A length of the lead.
    pub fn lead_name(&self, metres: &str) -> String {
        fill(self.lead_name, &[metres])
    }

    /// The limit: at most or at least so much.
    pub fn limit(&self, at_least: bool, value: &str) -> String {
        fill(if at_least { self.at_least } else { self.at_most }, &[value])
    }

    /// Where the limit comes from: standards, standing.
    pub fn quoted(&self, citation: &str, standing: Standing) -> String {
        fill(pick(&self.quoted, standing as usize), &[citation])
    }

    /// The reading keeps to the limit; it does not.
    pub const fn verdict(&self, within: bool) -> &'static str {
        if within { self.within } else { self.outside }
    }

    /// What is to be expected across the plug: from, to where there is an end, what the current goes through.
    pub fn plug_expect(&self, low: &str, high: Option<&str>, path: Path) -> String {
        let path = pick(&self.path, path as usize);
        match high {
            Some(high) => fill(self.plug_range, &[low, high, path]),
            None => fill(self.plug_from, &[low, path]),
        }
    }

    /// What a reading allows.
    pub fn plug_found(&self, findings: &[PlugFinding]) -> String {
        let name = |finding: &PlugFinding| pick(&self.finding, *finding as usize).to_owned();
        let names = findings.iter().map(name).reduce(|all, name| fill(self.plug_or, &[&all, &name]));
        fill(self.plug_found, &[&names.unwrap_or_default()])
    }

    /// Between the ranges: below healthy, or above.
    pub const fn plug_between(&self, below: bool) -> &'static str {
        if below { self.plug_below } else { self.plug_above }
    }

    /// Where the ranges come from.
    pub const fn plug_source(&self, standing: Standing) -> &'static str {
        match standing {
            Standing::Published => self.plug_published,
            _ => self.plug_design,
        }
    }

    /// One rung: which of how many.
    pub fn rung(&self, rung: usize, of: usize) -> String {
        fill(self.rung, &[&rung.to_string(), &of.to_string()])
    }

    /// What healthy equipment shows, in a sentence.
    pub fn expected(&self, expected: &Expected) -> String {
        let Expected { glow, amps, bank_volts, load_volts } = expected;
        fill(self.expected, &[glow, amps, bank_volts, load_volts])
    }

    /// The same in few words, for the step's head: the bank before it.
    pub fn expected_short(&self, bank: &str, expected: &Expected) -> String {
        fill(self.expected_short, &[bank, &expected.glow, &expected.amps])
    }

    /// Why this rung: what a dead short passes.
    pub fn why(&self, reason: &Reason, short: &str) -> String {
        let times = |ratio: f64| self.numerals.fixed(ratio, 1);
        match reason {
            Reason::First { limit } => fill(self.why_first, &[short, self.first_from(limit.from)]),
            Reason::Only { limit, .. } => fill(self.why_only, &[short, self.first_from(limit.from)]),
            Reason::Last { times: ratio, share } if *share > 0.0 => {
                fill(self.why_last, &[short, &times(*ratio), &self.numerals.percent(*share)])
            }
            Reason::Last { times: ratio, .. } => fill(self.why_last_none, &[short, &times(*ratio)]),
            Reason::Link { times: ratio } => fill(self.why_link, &[short, &times(*ratio)]),
            _ => String::new(),
        }
    }

    /// Which rule set the first rung's limit.
    pub fn first_from(&self, from: FirstFrom) -> &'static str {
        pick(&self.first_from, from as usize)
    }

    /// When to go on.
    pub fn go_on_if(&self, go_on: &GoOn) -> String {
        match go_on {
            GoOn::Between { .. } => self.go_on_between.to_owned(),
            GoOn::Pulses { period_seconds: None } => self.go_on_pulses.to_owned(),
            GoOn::Pulses { period_seconds: Some(seconds) } => {
                fill(self.go_on_pulses_every, &[&self.numerals.duration(*seconds)])
            }
            _ => self.go_on_dark.to_owned(),
        }
    }

    /// Volts across the lamps.
    pub fn across_lamps(&self, volts: &str) -> String {
        fill(self.across_lamps, &[volts])
    }

    /// When to stop: any of these levels; "if shorted".
    pub fn stop_if(&self, stop: Option<&Stop>, levels: &[String], fault: &str) -> String {
        match stop {
            Some(stop) => {
                let text = if stop.apart { self.stop_apart } else { self.stop_close };
                fill(text, &[&levels.join(", "), fault])
            }
            None => self.stop_none.to_owned(),
        }
    }

    /// Faults that do not show here, by name.
    pub fn hidden(&self, names: &[&str]) -> String {
        fill(self.hidden, &[&names.join(", ")])
    }

    /// The last rung does not run it.
    pub fn falls_short(&self, share: &str) -> String {
        fill(self.falls_short, &[share])
    }

    /// What the ladder keeps to: holder watts, rise, growth.
    pub fn keeps(&self, holder: &str, rise: &str, growth: &str) -> String {
        fill(self.keeps, &[holder, rise, growth])
    }

    /// What the bare mains mean: rated amperes, what the last rung passed.
    pub fn mains_means(&self, rated: &str, last: &str) -> String {
        fill(self.mains_means, &[rated, last])
    }

    /// Where no volts are typed.
    pub fn start_hint(&self, volts: &str) -> String {
        fill(self.start_hint, &[volts])
    }

    /// Where a limit holds.
    pub fn place(&self, place: DischargePlace) -> &'static str {
        pick(&self.place, place as usize)
    }

    /// Below the lowest limit in so long, by the slowest values.
    pub fn counting(&self, left: &str, volts: &str) -> String {
        fill(self.counting, &[left, volts])
    }

    /// It should be below.
    pub fn counted(&self, volts: &str) -> String {
        fill(self.counted, &[volts])
    }
}
