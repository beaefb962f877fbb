//! The one state of the page and its messages; what the messages do is in `reduce`.

use std::rc::Rc;

use lampladder_core::condition::Condition;
use lampladder_core::error::InputError;
use lampladder_core::family::{self, Family};
use lampladder_core::hunt::Pulse;
use lampladder_core::lamp::Fill;
use lampladder_core::link::LinkError;
use lampladder_core::readings::MeterSpec;
use lampladder_core::setup::Setup;
use lampladder_core::steady::Outcome;
use yew::UseReducerHandle;

use crate::answers::Answers;
use crate::climb::{Climb, Move};
use crate::draft::{Draft, Fault, Place, Slot};
use crate::drawer::{Drawer, Shelf};
use crate::opening::Mine;
use crate::reckoner::links::Opened;
use crate::reckoner::pulses;
use crate::replay::Wish;
use crate::seen::{Deed, Seen};
use crate::words::Words;

/// The state with its dispatcher, as components have it.
pub type BenchHandle = UseReducerHandle<Bench>;

/// Most measured points that the page has fields for.
pub const MOST_POINTS: usize = 8;

/// A part of the loop that can be edited.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Part {
    /// The mains or DC source.
    Supply,
    /// The lamps.
    Bank,
    /// What is being brought up.
    Equipment,
}

/// A panel of the page.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Tab {
    /// Healthy, overloaded and shorted.
    Expect,
    /// What lamp and meter show.
    Seen,
    /// The rungs.
    Ladder,
    /// The first seconds.
    SwitchOn,
    /// The curves that meet.
    Curve,
    /// Link, code, card and files.
    HandOn,
}

/// In which light the page is read.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Theme {
    /// As the phone has it.
    #[default]
    Auto,
    /// For sunlight.
    Paper,
    /// For the dark.
    Dusk,
}

/// What is in front.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Stage {
    /// The cautions, not yet accepted.
    Unread,
    /// The cautions once more.
    Reread,
    /// The bench.
    Bench,
}

/// Lamps that cannot do the work of a series lamp.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Unsuitable {
    /// Light-emitting diodes behind a converter.
    Led,
    /// A discharge tube behind electronics.
    CompactFluorescent,
    /// A filament whose resistance falls as it heats.
    CarbonFilament,
}

/// What a person chose and must not use.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Refused {
    /// A lamp.
    Lamp(Unsuitable),
    /// A kind of equipment.
    Equipment(family::Unsuitable),
}

/// Something to tell the person once.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Note {
    /// The link in the address is no set-up of ours.
    BadLink(LinkError),
    /// What was kept on this phone cannot be read.
    BadKept(LinkError),
    /// The browser keeps nothing for this page.
    NothingKept,
    /// A link was opened while another set-up is kept on this phone.
    FromLink,
    /// Lamps and position on the ladder are those of a link.
    LadderFromLink,
    /// So many readings of a link are new here, and so many were here already.
    ReadingsFromLink(usize, usize),
    /// What a link holds beside its set-up could not be read.
    LinkHalfRead,
    /// The texts of the chosen language cannot be fetched.
    Wordless,
    /// A new version of the page is ready.
    New,
    /// The browser has emptied the storage.
    Emptied,
    /// Another window of the page has changed the set-up or the position on the ladder.
    Elsewhere,
}

/// What windows of the page share through the storage.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Shared {
    /// The set-up.
    Setup,
    /// The lamps that are owned.
    Stock,
    /// The position on the ladder.
    Climb,
}

impl Note {
    /// Whether it stays true whatever is typed.
    pub const fn lasts(self) -> bool {
        matches!(self, Self::NothingKept | Self::New | Self::Emptied)
    }
}

/// The state.
#[derive(Debug, Clone)]
pub struct Bench {
    /// What is typed.
    pub draft: Draft,
    /// The last valid set-up.
    pub setup: Rc<Setup>,
    /// The answers to it.
    pub answers: Rc<Answers>,
    /// How the lamps pulse in conditions in which the equipment hunts, as far as the reckoner has told.
    pub pulses: Vec<(Condition, Option<Pulse>)>,
    /// What is wrong with what is typed; empty while it is the set-up.
    pub faults: Vec<(Slot, Fault)>,
    /// Whether the person has changed anything since it was opened.
    pub edited: bool,
    /// The condition that the loop shows.
    pub condition: Condition,
    /// The part under edit.
    pub open: Option<Part>,
    /// Whether the kinds of equipment are laid out.
    pub choosing: bool,
    /// Whether the voltage bar is explained.
    pub why: bool,
    /// The lamp under edit.
    pub lamp: Place,
    /// The unsuitable kind that was just refused.
    pub refused: Option<Refused>,
    /// The panel.
    pub tab: Tab,
    /// What is wanted of the first seconds.
    pub wish: Wish,
    /// What lamp and meter show.
    pub seen: Seen,
    /// The lamps that are owned.
    pub drawer: Drawer,
    /// The position on the ladder.
    pub climb: Climb,
    /// The light.
    pub theme: Theme,
    /// What is in front.
    pub stage: Stage,
    /// What is to be told, newest last.
    pub notes: Vec<Note>,
    /// How many times the browser has emptied the storage: everything is kept again each time.
    pub emptied: u32,
    /// The texts, in the language that is read.
    pub words: &'static Words,
    /// The link that was opened, where it may hold more than a set-up, until something is changed.
    pub link: Option<Rc<str>>,
}

impl PartialEq for Bench {
    /// Whether it is the very same state: every message makes a new one, and comparing all that is in it would be 2 KB
    /// to find out what is known.
    fn eq(&self, other: &Self) -> bool {
        core::ptr::eq(self, other)
    }
}

/// What a person or the browser does.
#[derive(Debug, Clone, PartialEq)]
pub enum Msg {
    /// A field's text is now this.
    Type(Slot, String),
    /// A field's stepper was pressed.
    Step(Slot, bool),
    /// Lamps and plate take the supply's volts.
    FollowSupply,
    /// The kind of equipment.
    Family(Family),
    /// The fill of the lamp under edit.
    Fill(Option<Fill>),
    /// A kind of lamp that is of no use here, or of equipment that this must not be used for.
    Refuse(Refused),
    /// Edit this lamp.
    Choose(Place),
    /// Another like the lamp under edit, beside it.
    AddParallel,
    /// Another like the lamp under edit, after its group.
    AddSeries,
    /// The lamp under edit goes.
    Remove,
    /// A measured point more.
    AddPoint,
    /// A measured point less.
    RemovePoint(usize),
    /// The reckoner tells how the lamps pulse.
    Pulse(pulses::News),
    /// There is a moment to ask about one more condition.
    AskFurther,
    /// Show this condition on the loop.
    Show(Condition),
    /// Open an editor.
    Open(Part),
    /// Close the editor.
    Close,
    /// Lay out the kinds of equipment, or put them away.
    ChooseFamily,
    /// Explain the voltage bar, or no longer.
    Why,
    /// Go to a panel.
    Go(Tab),
    /// Something else is wanted of the first seconds.
    Wish(Wish),
    /// Something is done to what lamp and meter show.
    Seen(Deed),
    /// Something happens to the drawer of lamps.
    Drawer(Shelf),
    /// Something happens on the ladder.
    Climb(Move),
    /// Change the light.
    Light(Theme),
    /// Go on in other words.
    Speak(&'static Words),
    /// The texts of the panels have come: draw them.
    Completed,
    /// The cautions are accepted, or closed again.
    Accept,
    /// Show the cautions.
    Cautions,
    /// The address changed to this.
    Link(String),
    /// This is what the link holds beside its set-up.
    Opened(Box<Opened>),
    /// What is kept on this phone is wanted back.
    Reclaim(Box<Mine>),
    /// Tell this.
    Tell(Note),
    /// The browser has emptied the storage.
    Emptied,
    /// This is what was typed before the page was loaded anew.
    Restore(String),
    /// Another window of the page has kept a text under this name.
    Elsewhere(Shared, String),
    /// It has been read.
    Dismiss(Note),
}

impl Bench {
    /// A bench with this set-up, in these words.
    ///
    /// # Errors
    /// A set-up whose parts do not go together, such as a transformer on direct current.
    pub fn with(setup: Setup, words: &'static Words) -> Result<Self, InputError> {
        let answers = Rc::new(Answers::of(&setup, Condition::Healthy)?);
        Ok(Self {
            draft: Draft::of(&setup, words.numerals),
            setup: Rc::new(setup),
            answers,
            pulses: Vec::new(),
            faults: Vec::new(),
            edited: false,
            condition: Condition::Healthy,
            open: None,
            choosing: false,
            why: false,
            lamp: Place::default(),
            refused: None,
            tab: Tab::Expect,
            wish: Wish::default(),
            seen: Seen::new(MeterSpec::default(), words.numerals),
            drawer: Drawer::default(),
            climb: Climb::default(),
            theme: Theme::Auto,
            stage: Stage::Unread,
            notes: Vec::new(),
            emptied: 0,
            words,
            link: None,
        })
    }

    /// The texts, in the language that is read.
    pub const fn words(&self) -> &'static Words {
        self.words
    }

    /// What is wrong with a field.
    pub fn fault(&self, slot: Slot) -> Option<&Fault> {
        let mut all = self.faults.iter().chain(&self.seen.faults);
        all.find(|(other, _)| *other == slot).map(|(_, fault)| fault)
    }

    /// What stands in a field.
    pub fn text(&self, slot: Slot) -> &str {
        match slot {
            Slot::Entry(entry) => self.climb.text(entry),
            _ => self.seen.text(slot).unwrap_or_else(|| self.draft.text(slot)),
        }
    }

    /// What is wrong with a field, wherever it is: those of the checklist are no part of the set-up.
    pub fn wrong(&self, slot: Slot) -> Option<Fault> {
        match slot {
            Slot::Entry(entry) => self.climb.read(entry).err(),
            Slot::Lamp(Place::SPARE, _) => self.spare_fault(slot),
            _ => self.fault(slot).copied(),
        }
    }

    /// What is wrong with the lamp that is typed for the drawer; nothing yet where nothing is typed.
    fn spare_fault(&self, slot: Slot) -> Option<Fault> {
        if !self.drawer.pressed && self.draft.text(slot).trim().is_empty() {
            return None;
        }
        let faults = self.draft.read_spare().err()?;
        faults.into_iter().find(|(other, _)| *other == slot).map(|(_, fault)| fault)
    }

    /// The conditions in which the equipment hunts and nothing is known yet of how the lamps pulse.
    pub fn unpulsed(&self) -> Vec<Condition> {
        let known = |condition: &Condition| self.pulses.iter().any(|(other, _)| other == condition);
        let mut unknown = self.hunting();
        unknown.retain(|condition| !known(condition));
        unknown
    }

    /// The conditions in which the equipment is known to hunt.
    pub fn hunting(&self) -> Vec<Condition> {
        let hunts = |condition: &Condition| self.answers.outcome(*condition) == Some(Outcome::Hunts);
        self.answers.asked().filter(hunts).collect()
    }

    /// How the lamps pulse in a condition, where that is known.
    pub fn pulse(&self, condition: Condition) -> Option<&Pulse> {
        self.pulses.iter().find(|(other, _)| *other == condition)?.1.as_ref()
    }

    /// Whether the result shown is not that of what is typed.
    pub const fn is_stale(&self) -> bool {
        !self.faults.is_empty()
    }
}
