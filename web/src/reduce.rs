//! What each message makes of the state. Pure: it knows no browser, so it is tested natively.

use std::rc::Rc;

use lampladder_core::bank::Bank;
use lampladder_core::condition::Condition;
use lampladder_core::link::{self, LinkError};
use lampladder_core::setup::Setup;
use yew::Reducible;

use crate::answers::Answers;
use crate::bench::{Bench, MOST_POINTS, Msg, Note, Part, Shared, Stage};
use crate::climb::{Move, equipment};
use crate::draft::{Draft, Fault, LampDraft, Place, Slot};
use crate::drawer::Form;
use crate::meter::written;
use crate::seen::Deed;
use crate::step;
use crate::visit;
use crate::words::Words;

impl Bench {
    /// The state after a message.
    #[must_use]
    pub fn after(self, msg: Msg) -> Self {
        let (setup, stock) = (Rc::clone(&self.setup), Rc::clone(&self.drawer.stock));
        let opens = matches!(msg, Msg::Link(_));
        let mut next = match msg {
            // Lamps, equipment and the position that belongs to them come together.
            Msg::Opened(opened) => return self.take_over(*opened),
            Msg::Reclaim(mine) => return self.reclaim(*mine),
            msg => self.next(msg),
        };
        next.follow(&setup, &stock);
        if opens {
            // A climb that begins again for the equipment of a link takes no place on the phone.
            next.climb.edited = false;
            next.drawer.edited = false;
        }
        next.make_own();
        next
    }

    fn next(mut self, msg: Msg) -> Self {
        match msg {
            Msg::Show(condition) => self.condition = condition,
            Msg::Open(part) => self.turn_to(Some(part)),
            Msg::Why => self.why = !self.why,
            Msg::Go(tab) => {
                self.tab = tab;
                self.seen.log.look_again();
            }
            Msg::Light(theme) => self.theme = theme,
            Msg::Speak(words) => self.speak(words),
            Msg::Completed => self.notes.retain(|note| *note != Note::Wordless),
            Msg::Accept => self.stage = Stage::Bench,
            Msg::Cautions => self.stage = Stage::Reread,
            Msg::Link(text) => return self.open_link(&text),
            Msg::Tell(note) => self.tell(note),
            Msg::Dismiss(note) => self.notes.retain(|other| *other != note),
            further => return self.further(further),
        }
        self
    }

    /// The state after a message of the editors, the panels or the reckoner, none of which is there at the first answer.
    #[inline(never)]
    fn further(mut self, msg: Msg) -> Self {
        match msg {
            Msg::Close => self.turn_to(None),
            Msg::ChooseFamily => self.choosing = !self.choosing,
            Msg::Wish(wish) => self.wish = wish,
            Msg::Seen(deed) => {
                let numerals = self.words().numerals;
                if let Deed::Keep(..) = deed {
                    self.seen.rung = self.rung_in_loop();
                }
                self.seen.act(deed, &self.setup, numerals);
                self.seen.reread(&self.setup);
                self.tell_of_readings();
            }
            Msg::Type(slot, text) if self.seen.text(slot).is_some() => {
                self.seen.set(slot, text);
                self.seen.reread(&self.setup);
            }
            Msg::Drawer(shelf) => self.shelve(shelf),
            Msg::Type(Slot::Entry(entry), text) => {
                self.climb.type_in(entry, text);
                self.drawer.fits = None;
            }
            // The lamp for the drawer is no part of the set-up.
            Msg::Type(slot @ Slot::Lamp(Place::SPARE, _), text) => self.draft.set(slot, text),
            Msg::Fill(_) | Msg::AddPoint | Msg::RemovePoint(_) if self.lamp == Place::SPARE => self.edit(msg),
            Msg::Climb(Move::Use(rung)) => {
                self.use_rung(rung);
                self.reread();
            }
            Msg::Climb(step) => self.climb(step),
            Msg::Choose(place) => {
                self.lamp = place;
                self.refused = None;
            }
            Msg::Pulse(news) => {
                if news.setup == link::encode(&self.setup) && self.unpulsed().contains(&news.condition) {
                    self.pulses.push((news.condition, news.pulse));
                }
            }
            Msg::AskFurther => {
                if let Some(condition) = self.answers.unasked(self.setup.plate.family()) {
                    let answers = Rc::unwrap_or_clone(self.answers);
                    self.answers = Rc::new(answers.with(&self.setup, condition));
                }
            }
            Msg::Refuse(kind) => self.refused = Some(kind),
            Msg::Emptied => {
                self.emptied += 1;
                self.edited = true;
                self.drawer.edited = true;
                self.climb.edited = true;
                self.seen.log.store_again();
                self.tell(Note::Emptied);
            }
            Msg::Restore(text) => return visit::restored(self, &text),
            Msg::Elsewhere(shared, text) => self.hear(shared, &text),
            edit => {
                self.edit(edit);
                self.reread();
            }
        }
        self
    }

    /// Another window has kept this. Lamps are taken over; a set-up and a position are told of and stay as they are here.
    fn hear(&mut self, shared: Shared, text: &str) {
        let same = match shared {
            Shared::Setup => text == link::encode(&self.setup),
            Shared::Climb => text == self.climb.kept(&equipment(&self.setup)),
            Shared::Stock => {
                if let Ok(stock) = link::decode_stock(text) {
                    self.drawer.share(stock);
                }
                return;
            }
        };
        self.notes.retain(|note| *note != Note::Elsewhere);
        if !same {
            self.tell(Note::Elsewhere);
        }
    }

    fn turn_to(&mut self, part: Option<Part>) {
        self.open = part;
        // The bank's editor is for lamps of the bank.
        if part == Some(Part::Bank) && self.lamp == Place::SPARE {
            self.lamp = Place::default();
            self.drawer.form = Form::None;
        }
        self.refused = None;
        self.choosing = false;
    }

    pub(crate) fn tell(&mut self, note: Note) {
        if !self.notes.contains(&note) {
            self.notes.push(note);
        }
    }

    /// Goes on in other words. What a person has typed stays letter for letter, with whatever decimal mark; what nobody
    /// has typed is written anew.
    fn speak(&mut self, words: &'static Words) {
        self.notes.retain(|note| *note != Note::Wordless);
        let [old, new] = [self.words, words]
            .map(|words| Draft { spare: self.draft.spare.clone(), ..Draft::of(&self.setup, words.numerals) });
        if self.draft == old {
            self.draft = new;
        }
        if self.seen.meter == written(&self.seen.spec, self.words.numerals) {
            self.seen.meter = written(&self.seen.spec, words.numerals);
        }
        self.words = words;
    }

    pub(crate) fn arrive(mut self, setup: Setup) -> Self {
        let answers = match Answers::of(&setup, self.condition) {
            Ok(answers) => answers,
            Err(error) => {
                self.tell(Note::BadLink(LinkError::Refused(error)));
                return self;
            }
        };
        let spare = core::mem::take(&mut self.draft.spare);
        self.draft = Draft { spare, ..Draft::of(&setup, self.words().numerals) };
        self.setup = Rc::new(setup);
        self.answers = Rc::new(answers);
        self.pulses.clear();
        self.faults.clear();
        self.keep_condition();
        self.seen.reread(&self.setup);
        self.edited = false;
        if self.lamp != Place::SPARE {
            self.lamp = Place::default();
        }
        self.refused = None;
        self.notes.retain(|note| note.lasts());
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
                self.choosing = false;
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
        if self.draft.lamp_count() >= Bank::MOST_LAMPS || place == Place::SPARE {
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
        if self.draft.lamp_count() <= 1 || self.lamp == Place::SPARE || self.draft.lamp(self.lamp).is_none() {
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
        self.notes.retain(|note| note.lasts());
        match self.draft.read() {
            Ok(setup) => match Answers::of(&setup, self.condition) {
                Ok(answers) => {
                    self.faults.clear();
                    self.setup = Rc::new(setup);
                    self.answers = Rc::new(answers);
                    self.pulses.clear();
                    self.keep_condition();
                    self.seen.reread(&self.setup);
                }
                Err(error) => self.faults = vec![(Slot::SupplyHertz, Fault::Number(error))],
            },
            Err(faults) => self.faults = faults,
        }
    }
}

impl Reducible for Bench {
    type Action = Msg;

    fn reduce(self: Rc<Self>, msg: Msg) -> Rc<Self> {
        Rc::new(Rc::unwrap_or_clone(self).after(msg))
    }
}
