//! Every text that a person sees or hears, by language. A language is one [`Words`]: leave a text out and it does
//! not compile.
//!
//! The cautions stand in static/index.html, since they must show without the program.

mod english;
pub mod fill;
pub mod ladder;
pub mod replay;
pub mod seen;

pub use fill::fill;

use lampladder_core::condition::Condition;
use lampladder_core::family::{self, Family, Warning};
use lampladder_core::glow::GlowWord;
use lampladder_core::lamp::Fill;
use lampladder_core::link::LinkError;
use lampladder_core::load::Mode;

use crate::bench::{Note, Part, Tab, Theme, Unsuitable};
use crate::draft::{Fault, Place, Slot};
use crate::format::Numerals;

/// The languages of the page.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Language {
    /// English.
    #[default]
    English,
}

impl Language {
    /// All of them.
    pub const ALL: [Self; 1] = [Self::English];

    /// The texts.
    pub const fn words(self) -> &'static Words {
        match self {
            Self::English => &english::WORDS,
        }
    }
}

/// A kind of equipment in words.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct FamilyWords {
    /// Its name.
    pub name: &'static str,
    /// It in a sentence.
    pub noun: &'static str,
    /// Things of that kind.
    pub examples: &'static str,
}

/// A way in which equipment can work at rest.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ModeWords {
    /// Its name.
    pub name: &'static str,
    /// When it comes to be.
    pub decides: &'static str,
}

/// What a result took for granted, already as text.
#[derive(Debug, Clone, PartialEq)]
pub struct Assumed {
    /// Volts and hertz of the supply.
    pub supply: String,
    /// What is printed on the lamps.
    pub bank: String,
    /// The kind of equipment.
    pub family: &'static str,
    /// Plate volts.
    pub plate_volts: String,
    /// Plate watts, or the ohms measured.
    pub size: String,
    /// Least and most of the plate's watts that healthy equipment takes.
    pub shares: String,
    /// The power factor used, and whether it was printed on the plate.
    pub power_factor: Option<(String, bool)>,
    /// How many times the plate's watts overloaded equipment takes.
    pub overload: String,
}

/// A description of part of a bank: how many, and what is printed on them.
#[derive(Debug, Clone, PartialEq)]
pub struct Alike {
    /// How many.
    pub count: usize,
    /// Watts, as text without a unit.
    pub watts: String,
}

/// All texts of one language.
#[derive(Debug)]
pub struct Words {
    /// Tag of the language (BCP 47).
    pub tag: &'static str,
    /// How numbers are written.
    pub numerals: Numerals,
    /// The line that never leaves.
    pub reminder: &'static str,
    /// The button to the cautions.
    pub cautions: &'static str,
    /// Accepts the cautions.
    pub accept: &'static str,
    /// Back from the cautions.
    pub back: &'static str,
    /// Closes an editor.
    pub done: &'static str,
    /// Closes a note.
    pub dismiss: &'static str,
    /// Name of a light.
    pub theme: fn(Theme) -> &'static str,
    /// Name of a panel.
    pub tab: fn(Tab) -> &'static str,
    /// Name of the panels' list.
    pub panels: &'static str,
    /// Name of a part of the loop.
    pub part: fn(Part) -> &'static str,
    /// What a part's button does, for those who hear it.
    pub change: fn(Part, &str) -> String,
    /// The circuit in one sentence, for those who hear it.
    pub circuit: fn(&str, &str, &str) -> String,
    /// Name of a condition.
    pub condition: fn(Condition) -> &'static str,
    /// "if healthy".
    pub if_condition: fn(Condition) -> &'static str,
    /// Asks for one of the conditions.
    pub conditions: &'static str,
    /// Heading of the conditions that are not compared at a glance.
    pub other_conditions: &'static str,
    /// In a cell whose answer is on its way.
    pub coming: &'static str,
    /// The circuit can come to rest in several ways, "if healthy".
    pub ways: fn(&str) -> String,
    /// One of these ways.
    pub mode: fn(Mode) -> ModeWords,
    /// What a condition means.
    pub condition_means: fn(Condition, &str) -> String,
    /// Name of a glow.
    pub glow: fn(GlowWord) -> &'static str,
    /// From one glow to another.
    pub glow_range: fn(GlowWord, GlowWord) -> String,
    /// Where there is no number.
    pub none: &'static str,
    /// What takes longer to work out cannot be had.
    pub reckoner_lost: &'static str,
    /// A bank in a few words.
    pub bank: fn(&[Vec<Alike>]) -> String,
    /// Direct current.
    pub direct: &'static str,
    /// Volts across the lamps, on the bar.
    pub across_bank: fn(bool) -> &'static str,
    /// Volts across the equipment, on the bar.
    pub across_load: &'static str,
    /// Why the two voltages add to more than the supply: bank, load and supply volts.
    pub overlap: fn(&str, &str, &str) -> String,
    /// What the bar shows where they do add up.
    pub adds_up: fn(&str, &str, &str) -> String,
    /// Asks why.
    pub why: &'static str,
    /// The result is not that of what is typed.
    pub stale: fn(&str) -> String,
    /// Short mark of the same.
    pub stale_mark: &'static str,
    /// A lamp burns out: its name, condition.
    pub burns_out: fn(&str, Condition) -> String,
    /// The equipment starts and stops.
    pub pulses: fn(Option<&str>) -> String,
    /// A motor stands: the glow.
    pub stands: fn(&str) -> String,
    /// A picture-tube set looks shorted.
    pub looks_shorted: &'static str,
    /// Larger lamps help.
    pub larger: &'static str,
    /// The equipment does not start.
    pub does_not_start: &'static str,
    /// Healthy and faulty look alike.
    pub hard_to_tell: &'static str,
    /// Glow and current to expect.
    pub expect: fn(&str, &str) -> String,
    /// A glow that means off.
    pub off_if_brighter: fn(GlowWord) -> String,
    /// A current that means off.
    pub off_if_more: fn(&str) -> String,
    /// What was taken for granted, short.
    pub assumes: fn(&Assumed) -> String,
    /// What was taken for granted, at length.
    pub assumptions: fn(&Assumed) -> Vec<String>,
    /// A lamp's name: which one, what is printed on it.
    pub lamp: fn(Place, bool, &str) -> String,
    /// A lamp runs over its rated volts: its name, condition, per cent of the rating, life there.
    pub over_rated: fn(&str, Condition, &str, &str) -> String,
    /// It pulses, in a cell.
    pub pulsing: &'static str,
    /// How often, in a cell.
    pub every: fn(&str) -> String,
    /// How often, and how bright at most, on the loop.
    pub pulse: fn(&str, GlowWord) -> String,
    /// Burnt out, in a cell.
    pub burnt: &'static str,
    /// Life between two ratios to the rated.
    pub life: fn(&str, &str) -> String,
    /// The same for a table.
    pub short_life: fn(&str, &str) -> String,
    /// Life longer than a ratio.
    pub life_over: fn(&str) -> String,
    /// The same for a table.
    pub short_life_over: fn(&str) -> String,
    /// Many lamps, shorter than by their sizes.
    pub lamps: fn(usize) -> String,
    /// Where the life figures come from.
    pub life_source: &'static str,
    /// What a band is.
    pub band_note: &'static str,
    /// Names of the columns and headings of the tables.
    pub table: &'static TableWords,
    /// Texts of the switch-on panel.
    pub replay: &'static replay::ReplayWords,
    /// Texts of the panel of readings.
    pub seen: &'static seen::SeenWords,
    /// Texts of the ladder panel.
    pub ladder: &'static ladder::LadderWords,
    /// Name of a field.
    pub slot: fn(Slot) -> &'static str,
    /// What is wrong with a field.
    pub fault: fn(Slot, &Fault) -> String,
    /// Steppers.
    pub step: fn(Slot, bool) -> String,
    /// A kind of equipment.
    pub family: fn(Family) -> FamilyWords,
    /// Texts of the editors.
    pub edit: &'static EditWords,
    /// Name of a fill.
    pub fill: fn(Option<Fill>) -> &'static str,
    /// Name of an unsuitable lamp.
    pub unsuitable: fn(Unsuitable) -> &'static str,
    /// Why it is of no use.
    pub refusal: fn(Unsuitable) -> &'static str,
    /// What must be said first about a family.
    pub warning: fn(Warning) -> &'static str,
    /// Equipment that this must not be used for.
    pub unsuitable_equipment: fn(family::Unsuitable) -> &'static str,
    /// Why.
    pub refuse_equipment: fn(family::Unsuitable) -> &'static str,
    /// A note.
    pub note: fn(Note) -> &'static str,
    /// What is wrong with a link.
    pub link: fn(&LinkError) -> &'static str,
    /// Takes the kept set-up instead of the link's.
    pub use_kept: &'static str,
    /// Shown where a person may look for more.
    pub more: &'static str,
}

/// Texts of the editors.
#[derive(Debug)]
pub struct EditWords {
    /// Usual voltages.
    pub usual_volts: &'static str,
    /// Usual frequencies.
    pub usual_hertz: &'static str,
    /// Lamps and plate take the supply's volts.
    pub follow: fn(&str) -> String,
    /// The lamps as wired.
    pub as_wired: &'static str,
    /// Kind of lamp.
    pub kind: &'static str,
    /// An ordinary lamp.
    pub ordinary: &'static str,
    /// Stock sizes.
    pub sizes: &'static str,
    /// One more beside it.
    pub add_parallel: &'static str,
    /// One more after it.
    pub add_series: &'static str,
    /// Take it out.
    pub remove: &'static str,
    /// The bank is full.
    pub full: &'static str,
    /// What may be known beyond the rating.
    pub lamp_more: &'static str,
    /// Filling.
    pub filling: &'static str,
    /// Measured points.
    pub points: &'static str,
    /// One point more.
    pub add_point: &'static str,
    /// A point goes.
    pub remove_point: fn(usize) -> String,
    /// What the equipment is.
    pub what: &'static str,
    /// Another kind.
    pub change: &'static str,
    /// What this must not be used for.
    pub not_for: &'static str,
    /// The rest of the plate.
    pub plate_more: &'static str,
    /// What stands where nothing is typed.
    pub default_hint: fn(&str) -> String,
    /// Where no power factor is printed.
    pub power_factor_hint: fn(&str) -> String,
    /// Why the source resistance matters.
    pub ohms_hint: &'static str,
    /// An empty field means "not known".
    pub optional: &'static str,
}

/// Names of columns and headings.
#[derive(Debug)]
pub struct TableWords {
    /// Heading of the details.
    pub details: &'static str,
    /// Condition.
    pub condition: &'static str,
    /// Lamp.
    pub lamp: &'static str,
    /// Across the lamps.
    pub bank_volts: &'static str,
    /// The same for a narrow column.
    pub short_bank_volts: &'static str,
    /// Volts.
    pub volts: &'static str,
    /// Current.
    pub amps: &'static str,
    /// Its 95 % band.
    pub band: &'static str,
    /// Across the equipment.
    pub load_volts: &'static str,
    /// The same for a narrow column.
    pub short_load_volts: &'static str,
    /// Power into the equipment.
    pub load_watts: &'static str,
    /// Glow.
    pub glow: &'static str,
    /// Filament temperature.
    pub kelvin: &'static str,
    /// Lamp life.
    pub life: &'static str,
    /// The same for a column.
    pub short_life: &'static str,
    /// Heading of the assumptions.
    pub assumed: &'static str,
    /// Heading of the curve.
    pub curve: &'static str,
    /// What the curve shows.
    pub curve_means: &'static str,
    /// Where the curves meet.
    pub meet: &'static str,
    /// The bank's own curve.
    pub bank_curve: &'static str,
    /// Every lamp in every condition.
    pub every_lamp: &'static str,
    /// The chart, for those who hear it.
    pub chart: &'static str,
}
