//! The one state of the page and its messages. The reducer is pure: it knows no browser, so it is tested natively.

use std::rc::Rc;

use lampladder_core::condition::Condition;
use lampladder_core::error::InputError;
use lampladder_core::family::{self, Family};
use lampladder_core::lamp::Fill;
use lampladder_core::link::LinkError;
use lampladder_core::setup::Setup;
use yew::{Reducible, UseReducerHandle};

use crate::answers::Answers;
use crate::draft::{Draft, Fault, LampDraft, Place, Slot};
use crate::step;
use crate::words::{Language, Words};

/// The state with its dispatcher, as components have it.
pub type BenchHandle = UseReducerHandle<Bench>;

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
    /// The curves that meet.
    Curve,
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
}

/// The state.
#[derive(Debug, Clone, PartialEq)]
pub struct Bench {
    /// What is typed.
    pub draft: Draft,
    /// The last valid set-up.
    pub setup: Rc<Setup>,
    /// The answers to it.
    pub answers: Rc<Answers>,
    /// What is wrong with what is typed; empty while it is the set-up.
    pub faults: Vec<(Slot, Fault)>,
    /// Whether the person has changed anything since it was opened.
    pub edited: bool,
    /// The condition that the loop shows.
    pub condition: Condition,
    /// The part under edit.
    pub open: Option<Part>,
    /// The lamp under edit.
    pub lamp: Place,
    /// The unsuitable kind that was just refused.
    pub refused: Option<Refused>,
    /// The panel.
    pub tab: Tab,
    /// The light.
    pub theme: Theme,
    /// Whether the cautions are in front.
    pub cautions: bool,
    /// Whether they have been accepted.
    pub accepted: bool,
    /// What is to be told, newest last.
    pub notes: Vec<Note>,
    /// The language.
    pub language: Language,
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
    /// Show this condition on the loop.
    Show(Condition),
    /// Open an editor.
    Open(Part),
    /// Close the editor.
    Close,
    /// Go to a panel.
    Go(Tab),
    /// Change the light.
    Light(Theme),
    /// The cautions are accepted, or closed again.
    Accept,
    /// Show the cautions.
    Cautions,
    /// A set-up came from outside: the address changed, or the kept one is wanted back.
    Arrive(Setup),
    /// Tell this.
    Tell(Note),
    /// It has been read.
    Dismiss(Note),
}

impl Bench {
    /// A bench with this set-up.
    ///
    /// # Errors
    /// A set-up whose parts do not go together, such as a transformer on direct current.
    pub fn with(setup: Setup) -> Result<Self, InputError> {
        let language = Language::default();
        let answers = Rc::new(Answers::of(&setup)?);
        Ok(Self {
            draft: Draft::of(&setup, language.words().numerals),
            setup: Rc::new(setup),
            answers,
            faults: Vec::new(),
            edited: false,
            condition: Condition::Healthy,
            open: None,
            lamp: Place::default(),
            refused: None,
            tab: Tab::Expect,
            theme: Theme::Auto,
            cautions: true,
            accepted: false,
            notes: Vec::new(),
            language,
        })
    }

    /// The words of the chosen language.
    pub fn words(&self) -> &'static Words {
        self.language.words()
    }

    /// What is wrong with a field.
    pub fn fault(&self, slot: Slot) -> Option<&Fault> {
        self.faults.iter().find(|(other, _)| *other == slot).map(|(_, fault)| fault)
    }

    /// Whether the result shown is not that of what is typed.
    pub const fn is_stale(&self) -> bool {
        !self.faults.is_empty()
    }

    /// The state after a message.
    #[must_use]
    pub fn after(mut self, msg: Msg) -> Self {
        match msg {
            Msg::Show(condition) => self.condition = condition,
            Msg::Open(part) => {
                self.open = Some(part);
                self.refused = None;
            }
            Msg::Close => {
                self.open = None;
                self.refused = None;
            }
            Msg::Go(tab) => self.tab = tab,
            Msg::Light(theme) => self.theme = theme,
            Msg::Accept => {
                self.accepted = true;
                self.cautions = false;
            }
            Msg::Cautions => self.cautions = true,
            Msg::Choose(place) => {
                self.lamp = place;
                self.refused = None;
            }
            Msg::Refuse(kind) => self.refused = Some(kind),
            Msg::Arrive(setup) => return self.arrive(setup),
            Msg::Tell(note) => {
                if !self.notes.contains(&note) {
                    self.notes.push(note);
                }
            }
            Msg::Dismiss(note) => self.notes.retain(|other| *other != note),
            edit => {
                self.edit(edit);
                self.reread();
            }
        }
        self
    }

    fn arrive(mut self, setup: Setup) -> Self {
        let answers = match Answers::of(&setup) {
            Ok(answers) => answers,
            Err(error) => return self.after(Msg::Tell(Note::BadLink(LinkError::Refused(error)))),
        };
        self.draft = Draft::of(&setup, self.words().numerals);
        self.setup = Rc::new(setup);
        self.answers = Rc::new(answers);
        self.faults.clear();
        self.keep_condition();
        self.edited = false;
        self.lamp = Place::default();
        self.refused = None;
        self.notes.retain(|note| *note == Note::NothingKept);
        self
    }

    fn edit(&mut self, msg: Msg) {
        let place = self.lamp;
        match msg {
            Msg::Type(slot, text) => self.draft.set(slot, text),
            Msg::Step(slot, up) => {
                let text = step::stepped(&self.draft, slot, up, self.words().numerals);
                self.draft.set(slot, text);
            }
            Msg::FollowSupply => {
                let volts = self.draft.text(Slot::SupplyVolts).to_owned();
                for lamp in self.draft.groups.iter_mut().flatten() {
                    lamp.volts.clone_from(&volts);
                }
                self.draft.set(Slot::PlateVolts, volts);
            }
            Msg::Family(family) => {
                self.refused = None;
                self.draft.family = family;
            }
            Msg::Fill(fill) => {
                self.refused = None;
                if let Some(lamp) = self.draft.lamp_mut(place) {
                    lamp.fill = fill;
                }
            }
            Msg::AddParallel | Msg::AddSeries => self.add(&msg),
            Msg::Remove => self.remove(),
            Msg::AddPoint => {
                if let Some(lamp) = self.draft.lamp_mut(place)
                    && lamp.points.len() < MOST_POINTS
                {
                    lamp.points.push((String::new(), String::new()));
                }
            }
            Msg::RemovePoint(index) => {
                if let Some(lamp) = self.draft.lamp_mut(place)
                    && index < lamp.points.len()
                {
                    lamp.points.remove(index);
                }
            }
            _ => {}
        }
    }

    fn add(&mut self, msg: &Msg) {
        let place = self.lamp;
        if self.draft.lamp_count() >= lampladder_core::bank::Bank::MOST_LAMPS {
            return;
        }
        // What was measured belongs to that one lamp; its printed rating is likely shared by its twin.
        let Some(like) = self.draft.lamp(place) else { return };
        let twin = LampDraft {
            volts: like.volts.clone(),
            watts: like.watts.clone(),
            fill: like.fill,
            lumens: like.lumens.clone(),
            ..LampDraft::default()
        };
        if *msg == Msg::AddParallel {
            self.draft.groups[place.group].insert(place.lamp + 1, twin);
            self.lamp.lamp += 1;
        } else {
            self.draft.groups.insert(place.group + 1, vec![twin]);
            self.lamp = Place { group: place.group + 1, lamp: 0 };
        }
    }

    fn remove(&mut self) {
        let Place { group, lamp } = self.lamp;
        if self.draft.lamp_count() <= 1 || self.draft.lamp(self.lamp).is_none() {
            return;
        }
        self.draft.groups[group].remove(lamp);
        if self.draft.groups[group].is_empty() {
            self.draft.groups.remove(group);
        }
        let group = group.min(self.draft.groups.len() - 1);
        self.lamp = Place { group, lamp: lamp.min(self.draft.groups[group].len() - 1) };
    }

    /// A family that cannot be in the condition on the loop shows the healthy one.
    fn keep_condition(&mut self) {
        if self.answers.get(self.condition).is_none() {
            self.condition = Condition::Healthy;
        }
    }

    /// Takes what is typed as the set-up if it is one; else keeps the last valid one and says what is wrong.
    fn reread(&mut self) {
        self.edited = true;
        self.notes.retain(|note| *note == Note::NothingKept);
        match self.draft.read() {
            Ok(setup) => match Answers::of(&setup) {
                Ok(answers) => {
                    self.faults.clear();
                    self.setup = Rc::new(setup);
                    self.answers = Rc::new(answers);
                    self.keep_condition();
                }
                Err(error) => self.faults = vec![(Slot::SupplyHertz, Fault::Number(error))],
            },
            Err(faults) => self.faults = faults,
        }
    }
}

/// Most measured points that the page has fields for.
pub const MOST_POINTS: usize = 8;

impl Reducible for Bench {
    type Action = Msg;

    fn reduce(self: Rc<Self>, msg: Msg) -> Rc<Self> {
        Rc::new(Rc::unwrap_or_clone(self).after(msg))
    }
}
