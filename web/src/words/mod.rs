//! Every text that a person sees or hears, by language.
//!
//! A language is a catalogue, web/words/*.txt, which the page fetches as data: texts in four languages would not fit in
//! the program, and one of them is read at a time. [`Words`] is a catalogue that has been read. A text without a choice
//! in it is a field, a few of a kind are an array, and a method picks and fills where more is needed: what is said when
//! is decided here, once for all languages. Where a language would bend a word to fit it into a sentence, it has a key
//! of its own for that form.
//!
//! To add a text: a field in one of the `catalogue!` lists, a line at the same place in each catalogue.
//!
//! The cautions stand in static/index.html, since they must show without the program.

pub mod catalogue;
mod faults;
pub mod fill;
pub mod hand_on;
pub mod ladder;
mod load;
pub mod page;
mod reader;
pub mod replay;
pub mod seen;

/// The languages, in the order of their names in the catalogues.
pub const LANGUAGES: [&str; 4] = ["en", "de", "fr", "es"];

pub use fill::fill;
pub use load::{english, keys, read};
pub use page::Words;
pub use reader::{Malformed, Plural};

use lampladder_core::condition::Condition;
use lampladder_core::family::{self, Family, Warning};
use lampladder_core::glow::GlowWord;
use lampladder_core::lamp::Fill;
use lampladder_core::link::LinkError;
use lampladder_core::load::Mode;

use crate::bench::{Note, Part, Tab, Theme, Unsuitable};
use crate::draft::{Place, Slot};

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

/// One text of an enumeration. The keys stand in the order of the variants, which the tests hold.
fn pick(all: &[&'static str], at: usize) -> &'static str {
    all.get(at).copied().unwrap_or_default()
}

impl Words {
    /// Name of a light.
    pub fn theme(&self, theme: Theme) -> &'static str {
        pick(&self.theme, theme as usize)
    }

    /// Name of a panel.
    pub fn tab(&self, tab: Tab) -> &'static str {
        pick(&self.tab, tab as usize)
    }

    /// Name of a part of the loop.
    pub fn part(&self, part: Part) -> &'static str {
        pick(&self.part, part as usize)
    }

    /// What a part's button does, for those who hear it; what the part is now.
    pub fn change(&self, part: Part, now: &str) -> String {
        fill(pick(&self.change, part as usize), &[now])
    }

    /// The circuit in one sentence, for those who hear it: supply, lamps, size of the equipment.
    pub fn circuit(&self, supply: &str, bank: &str, size: &str) -> String {
        fill(self.circuit, &[supply, bank, size])
    }

    /// Name of a condition.
    pub fn condition(&self, condition: Condition) -> &'static str {
        pick(&self.condition, condition as usize)
    }

    /// "if healthy".
    pub fn if_condition(&self, condition: Condition) -> &'static str {
        pick(&self.if_condition, condition as usize)
    }

    /// A condition's name in the middle of a sentence.
    pub fn said(&self, condition: Condition) -> &'static str {
        pick(&self.said, condition as usize)
    }

    /// What a condition means; times overloaded.
    pub fn condition_means(&self, condition: Condition, overload: &str) -> String {
        fill(pick(&self.means, condition as usize), &[overload])
    }

    /// "with the equipment shorted".
    fn when(&self, condition: Condition) -> &'static str {
        let at = match condition {
            Condition::Healthy => 0,
            Condition::Overloaded => 1,
            Condition::Shorted => 2,
            Condition::Stalled => 3,
            _ => 4,
        };
        pick(&self.when, at)
    }

    /// The circuit can come to rest in several ways, "if healthy".
    pub fn ways(&self, if_condition: &str) -> String {
        fill(self.ways, &[if_condition])
    }

    /// One of these ways.
    pub fn mode(&self, mode: Mode) -> ModeWords {
        let at = mode as usize;
        ModeWords { name: pick(&self.mode, at), decides: pick(&self.mode_decides, at) }
    }

    /// Name of a glow.
    pub fn glow(&self, word: GlowWord) -> &'static str {
        pick(&self.glow, word as usize)
    }

    /// From one glow to another.
    pub fn glow_range(&self, from: GlowWord, to: GlowWord) -> String {
        if from == to {
            return self.glow(from).to_owned();
        }
        fill(self.glow_range, &[self.glow(from), self.glow(to)])
    }

    /// A bank in a few words.
    pub fn bank(&self, groups: &[Vec<Alike>]) -> String {
        let count = |group: &Vec<Alike>| group.iter().map(|alike| alike.count).sum::<usize>();
        let bare = |group: &Vec<Alike>| {
            let texts: Vec<String> = group
                .iter()
                .map(|alike| match alike.count {
                    1 => alike.watts.clone(),
                    count => count.to_string() + " × " + &alike.watts,
                })
                .collect();
            texts.join(" + ") + "\u{a0}W"
        };
        let parts = |group: &Vec<Alike>| {
            let text = bare(group);
            if count(group) > 1 { fill(self.bank_parallel, &[&text]) } else { text }
        };
        match groups {
            [one] if count(one) == 1 => fill(self.bank_one, &[&bare(one)]),
            [first, rest @ ..] if !rest.is_empty() && rest.iter().all(|group| group == first) => {
                let inner = parts(first);
                let inner = if count(first) > 1 { String::from("(") + &inner + ")" } else { inner };
                fill(self.bank_series, &[&(groups.len().to_string() + " × " + &inner)])
            }
            [first, rest @ ..] => {
                rest.iter().fold(parts(first), |all, group| fill(self.bank_then, &[&all, &parts(group)]))
            }
            [] => String::new(),
        }
    }

    /// Many lamps, shorter than by their sizes.
    pub fn lamps(&self, count: usize) -> String {
        self.count(self.lamps, count)
    }

    /// So many of something.
    fn count(&self, text: &'static str, count: usize) -> String {
        fill(self.plural.of(text, count), &[&count.to_string()])
    }

    /// Volts across the lamps, on the bar.
    pub const fn across_bank(&self, several: bool) -> &'static str {
        if several { self.across_several } else { self.across_one }
    }

    /// Why the voltages of bank and load add to more than the supply's, or that they do not.
    pub fn split(&self, overlaps: bool, bank: &str, load: &str, supply: &str) -> String {
        fill(if overlaps { self.overlap } else { self.adds_up }, &[bank, load, supply])
    }

    /// The result is not that of what is typed: names of the fields.
    pub fn stale(&self, names: &str) -> String {
        fill(self.stale, &[names])
    }

    /// A lamp burns out: its name, condition.
    pub fn burns_out(&self, lamp: &str, condition: Condition) -> String {
        fill(self.burns_out, &[lamp, self.when(condition)])
    }

    /// The equipment starts and stops; how often, where that is known.
    pub fn pulses(&self, every: Option<&str>) -> String {
        every.map_or_else(|| self.pulses.to_owned(), |every| fill(self.pulses_every, &[every]))
    }

    /// A motor stands: the glow.
    pub fn stands(&self, glow: &str) -> String {
        fill(self.stands, &[glow])
    }

    /// Glow and current to expect.
    pub fn expect(&self, glow: &str, amps: &str) -> String {
        fill(self.expect, &[glow, amps])
    }

    /// A glow that means off.
    pub fn off_if_brighter(&self, word: GlowWord) -> String {
        if word >= GlowWord::Full {
            return self.off_if_full.to_owned();
        }
        fill(self.off_if_brighter, &[self.glow(word)])
    }

    /// A current that means off.
    pub fn off_if_more(&self, amps: &str) -> String {
        fill(self.off_if_more, &[amps])
    }

    /// What was taken for granted, short.
    pub fn assumes(&self, assumed: &Assumed) -> String {
        fill(self.assumes, &[&assumed.supply, &assumed.size, assumed.family, &assumed.shares])
    }

    /// What was taken for granted, at length.
    pub fn assumptions(&self, assumed: &Assumed) -> Vec<String> {
        let Assumed { family, size, plate_volts, shares, overload, .. } = assumed;
        let mut all = vec![
            fill(self.assumed_supply, &[&assumed.supply]),
            fill(self.assumed_bank, &[&assumed.bank]),
            fill(self.assumed_equipment, &[family, size, plate_volts, shares, overload]),
        ];
        if let Some((power_factor, printed)) = &assumed.power_factor {
            let text = if *printed { self.power_factor_printed } else { self.power_factor_usual };
            all.push(fill(text, &[power_factor]));
        }
        all.push(self.assumed_settled.to_owned());
        all
    }

    /// A lamp's name: which one, whether it is alone, what is printed on it.
    pub fn lamp(&self, place: Place, alone: bool, rating: &str) -> String {
        if alone {
            return fill(self.lamp_only, &[rating]);
        }
        fill(self.lamp_at, &[&(place.group + 1).to_string(), &(place.lamp + 1).to_string(), rating])
    }

    /// A lamp runs over its rated volts: its name, condition, per cent of the rating, life there.
    pub fn over_rated(&self, lamp: &str, condition: Condition, percent: &str, life: &str) -> String {
        fill(self.over_rated, &[lamp, percent, self.when(condition), life])
    }

    /// How often, in a cell.
    pub fn every(&self, seconds: &str) -> String {
        fill(self.every, &[seconds])
    }

    /// How often, and how bright at most, on the loop.
    pub fn pulse(&self, seconds: &str, word: GlowWord) -> String {
        fill(self.pulse, &[seconds, self.glow(word)])
    }

    /// Life between two ratios to the rated, in a sentence or in a table.
    pub fn life(&self, least: &str, most: &str, short: bool) -> String {
        let text = match (short, least == most) {
            (false, false) => self.life,
            (false, true) => self.life_rated,
            (true, false) => self.short_life,
            (true, true) => self.short_life_rated,
        };
        fill(text, &[least, most])
    }

    /// Life longer than a ratio, the same two ways.
    pub fn life_over(&self, least: &str, short: bool) -> String {
        fill(if short { self.short_life_over } else { self.life_over }, &[least])
    }

    /// What is said after a name in bold.
    pub fn told(&self, what: &str) -> String {
        fill(self.told, &[what])
    }

    /// Steppers.
    pub fn step(&self, which: Slot, up: bool) -> String {
        fill(if up { self.step_more } else { self.step_less }, &[self.slot(which)])
    }

    /// A kind of equipment.
    pub fn family(&self, kind: Family) -> FamilyWords {
        let at = kind as usize;
        FamilyWords {
            name: pick(&self.family, at),
            noun: pick(&self.family_noun, at),
            examples: pick(&self.examples, at),
        }
    }

    /// Name of a fill.
    pub fn fill(&self, fill: Option<Fill>) -> &'static str {
        pick(&self.fill, fill.map_or(0, |fill| fill as usize + 1))
    }

    /// Name of an unsuitable lamp.
    pub fn unsuitable(&self, kind: Unsuitable) -> &'static str {
        pick(&self.unsuitable, kind as usize)
    }

    /// Why it is of no use.
    pub fn refusal(&self, kind: Unsuitable) -> &'static str {
        pick(&self.refusal, kind as usize)
    }

    /// What must be said first about a family.
    pub fn warning(&self, warning: Warning) -> &'static str {
        pick(&self.warning, warning as usize)
    }

    /// Equipment that this must not be used for.
    pub fn unsuitable_equipment(&self, kind: family::Unsuitable) -> &'static str {
        pick(&self.unsuitable_equipment, kind as usize)
    }

    /// Why.
    pub fn refuse_equipment(&self, kind: family::Unsuitable) -> &'static str {
        pick(&self.refuse_equipment, kind as usize)
    }

    /// A note.
    pub const fn note(&self, note: Note) -> &'static str {
        match note {
            Note::BadLink(error) => self.link(&error),
            Note::BadKept(_) => self.bad_kept,
            Note::NothingKept => self.nothing_kept,
            Note::FromLink => self.from_link,
            Note::LadderFromLink => self.ladder_from_link,
            Note::ReadingsFromLink(..) => self.readings_from_link,
            Note::LinkHalfRead => self.link_half_read,
            Note::Wordless => self.reckoner_lost,
            Note::New => self.new,
            Note::Emptied => self.emptied,
            Note::Elsewhere => self.elsewhere,
        }
    }

    /// What is wrong with a link.
    pub const fn link(&self, error: &LinkError) -> &'static str {
        let [empty, too_long, newer, damaged, refused] = self.link;
        match error {
            LinkError::Empty => empty,
            LinkError::TooLong => too_long,
            LinkError::Newer => newer,
            LinkError::Refused(_) => refused,
            _ => damaged,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn alike(count: usize, watts: &str) -> Alike {
        Alike { count, watts: watts.to_owned() }
    }

    #[test]
    fn banks_are_told_as_wired() {
        let cases = [
            (vec![vec![alike(1, "60")]], "60\u{a0}W lamp"),
            (vec![vec![alike(2, "60")]], "2 × 60\u{a0}W parallel"),
            (vec![vec![alike(1, "60"), alike(1, "25")]], "60 + 25\u{a0}W parallel"),
            (vec![vec![alike(1, "60")], vec![alike(1, "60")]], "2 × 60\u{a0}W series"),
            (vec![vec![alike(2, "60")], vec![alike(2, "60")]], "2 × (2 × 60\u{a0}W parallel) series"),
            (vec![vec![alike(2, "60")], vec![alike(1, "100")]], "2 × 60\u{a0}W parallel, then 100\u{a0}W"),
        ];
        for (groups, text) in cases {
            assert_eq!(english().bank(&groups), text);
        }
    }
}
