//! The lamps that a person owns, and the forms by which they get into the drawer.

use std::rc::Rc;

use lampladder_core::error::InputError;
use lampladder_core::lamp::{Lamp, LampSpec, Point};
use lampladder_core::setup::Setup;
use lampladder_core::stock::{Owned, Stock};

use crate::bench::{Bench, Msg};
use crate::draft::{LampDraft, Place};
use crate::entry::Entry;
use crate::reckoner::unknown::{Fits, Measured};
use crate::step::{STOCK_WATTS, USUAL_VOLTS};

/// What is laid open under the lamps.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Form {
    /// Nothing.
    #[default]
    None,
    /// A lamp of any rating, typed.
    Another,
    /// One of a kind that is owned, to be measured.
    Measure(usize),
    /// A lamp without a legible rating.
    Unknown,
}

/// The drawer.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Drawer {
    /// The lamps.
    pub stock: Rc<Stock>,
    /// The form under them.
    pub form: Form,
    /// Why the last lamp was not taken in.
    pub refused: Option<InputError>,
    /// Whether a lamp was to be put in while its rating was not typed: what is empty is a fault from now on.
    pub pressed: bool,
    /// The ratings that fit the measured lamp; `None` until they are known.
    pub fits: Option<Fits>,
    /// Whether the person has changed the stock since it was opened.
    pub edited: bool,
    /// The stock before the last of a kind was taken out that takes more than a tap to put in again.
    before: Option<Rc<Stock>>,
}

/// What happens to the drawer.
#[derive(Debug, Clone, PartialEq)]
pub enum Shelf {
    /// One more of a size in the shops, for the supply's volts.
    More(f64),
    /// One less.
    Less(f64),
    /// One more of a kind that is owned.
    MoreOf(usize),
    /// One less.
    LessOf(usize),
    /// The last kind that was taken out comes back.
    PutBack,
    /// Opens a form, or closes it.
    Form(Form),
    /// Puts the typed lamp in.
    Put,
    /// What fits the measured lamp.
    Fits(Fits),
    /// Puts the lamp of one of the ratings that fit in.
    Take(usize),
}

/// A ratio of voltages that is no tolerance any more.
const FAR_OFF: f64 = 1.2;

/// The volts that an ordinary lamp for this bench has printed on it.
pub fn usual_volts(setup: &Setup) -> f64 {
    let supply = setup.supply.volts();
    let away = |volts: f64| (volts / supply).max(supply / volts);
    let nearest = USUAL_VOLTS.into_iter().min_by(|a, b| away(*a).total_cmp(&away(*b)));
    nearest.filter(|&volts| away(volts) < FAR_OFF).unwrap_or(supply)
}

/// An ordinary lamp of which nothing but the rating is known.
fn plain(volts: f64, watts: f64) -> LampSpec {
    LampSpec { volts, watts, ..LampSpec::default() }
}

impl Drawer {
    /// How many plain lamps of a rating there are.
    pub fn count(&self, volts: f64, watts: f64) -> u8 {
        let spec = plain(volts, watts);
        self.stock.kinds().iter().find(|owned| *owned.lamp().spec() == spec).map_or(0, Owned::count)
    }

    /// Whether a kind is one of the sizes that have a button of their own.
    pub fn has_button(lamp: &Lamp, volts: f64) -> bool {
        let spec = lamp.spec();
        STOCK_WATTS.contains(&spec.watts) && *spec == plain(volts, spec.watts)
    }

    /// The stock with the counts of its kinds passed through `count`, and `more` of another lamp.
    fn change(&mut self, count: impl Fn(usize, u8) -> u8, more: Option<(Lamp, f64)>) {
        let kinds = self.stock.kinds().iter().enumerate();
        let kept = kinds.map(|(kind, owned)| (owned.lamp().clone(), f64::from(count(kind, owned.count()))));
        match Stock::new(kept.chain(more)) {
            Ok(stock) => {
                self.refused = None;
                self.edited = true;
                self.before = None;
                self.stock = Rc::new(stock);
            }
            Err(error) => self.refused = Some(error),
        }
    }

    fn add(&mut self, lamp: Result<Lamp, InputError>, count: f64) {
        match lamp {
            Ok(lamp) => self.change(|_, owned| owned, Some((lamp, count))),
            Err(error) => self.refused = Some(error),
        }
    }

    fn less(&mut self, kind: usize) {
        let before = Rc::clone(&self.stock);
        self.change(|other, owned| if other == kind { owned.saturating_sub(1) } else { owned }, None);
        if self.stock.kinds().len() < before.kinds().len() {
            self.before = Some(before);
        }
    }

    /// The kind that would come back.
    pub fn gone(&self) -> Option<&Lamp> {
        let had = self.before.as_ref()?.kinds().iter().map(Owned::lamp);
        had.into_iter().find(|lamp| self.stock.kinds().iter().all(|owned| owned.lamp() != *lamp))
    }

    /// Another window of the page has changed the stock. A lamp that is being measured may have moved in it.
    pub fn share(&mut self, stock: Stock) {
        if let Form::Measure(kind) = self.form {
            let measured = self.stock.kinds().get(kind).map(Owned::lamp);
            let place = stock.kinds().iter().position(|owned| Some(owned.lamp()) == measured);
            self.form = place.map_or(Form::Another, Form::Measure);
        }
        self.before = None;
        self.stock = Rc::new(stock);
    }
}

impl Bench {
    /// What was measured on a lamp without a legible rating, once it is complete.
    pub fn measured(&self) -> Option<Measured> {
        if self.drawer.form != Form::Unknown {
            return None;
        }
        let number = |entry| self.climb.number(entry);
        let point = Point { volts: number(Entry::GlowVolts)?, amps: number(Entry::GlowAmps)? };
        let printed = self.climb.read(Entry::PrintedVolts).ok()?;
        Some(Measured { cold_ohms: number(Entry::ColdOhms)?, point, printed_volts: printed })
    }

    /// What a message makes of the drawer.
    pub(crate) fn shelve(&mut self, shelf: Shelf) {
        let volts = usual_volts(&self.setup);
        match shelf {
            Shelf::More(watts) => self.drawer.add(Lamp::new(volts, watts), 1.0),
            Shelf::Less(watts) => {
                let spec = plain(volts, watts);
                let kind = self.drawer.stock.kinds().iter().position(|owned| *owned.lamp().spec() == spec);
                if let Some(kind) = kind {
                    self.drawer.less(kind);
                }
            }
            Shelf::MoreOf(kind) => {
                let owned = self.drawer.stock.kinds().get(kind).map(|owned| owned.lamp().clone());
                if let Some(lamp) = owned {
                    self.drawer.add(Ok(lamp), 1.0);
                }
            }
            Shelf::LessOf(kind) => self.drawer.less(kind),
            Shelf::PutBack => {
                if let Some(before) = self.drawer.before.take() {
                    self.drawer.stock = before;
                    self.drawer.edited = true;
                }
            }
            Shelf::Form(form) => self.turn_to_form(form),
            Shelf::Put => self.put(),
            Shelf::Fits(fits) => self.drawer.fits = Some(fits),
            Shelf::Take(fit) => self.take(fit),
        }
    }

    fn turn_to_form(&mut self, form: Form) {
        let form = if self.drawer.form == form { Form::None } else { form };
        self.drawer.form = form;
        self.drawer.pressed = false;
        self.drawer.refused = None;
        self.drawer.fits = None;
        self.refused = None;
        // One lamp is under edit at a time.
        self.open = None;
        let numerals = self.words().numerals;
        self.draft.spare = match form {
            Form::Measure(kind) => match self.drawer.stock.kinds().get(kind) {
                Some(owned) => LampDraft::of(owned.lamp(), numerals),
                None => LampDraft::default(),
            },
            Form::Another => {
                LampDraft { volts: numerals.plain(usual_volts(&self.setup)), ..LampDraft::default() }
            }
            Form::None | Form::Unknown => LampDraft::default(),
        };
        if let Form::Measure(_) = form
            && self.draft.spare.points.is_empty()
        {
            self.draft.spare.points.push((String::new(), String::new()));
        }
        self.lamp =
            if matches!(form, Form::Another | Form::Measure(_)) { Place::SPARE } else { Place::default() };
    }

    /// Puts the typed lamp into the drawer, if it is one; what is wrong shows beside its field.
    fn put(&mut self) {
        self.drawer.pressed = true;
        let count = match self.climb.read(Entry::Count) {
            Ok(count) => count.unwrap_or(1.0),
            Err(_) => return,
        };
        let Ok(lamp) = self.draft.read_spare() else { return };
        match self.drawer.form {
            Form::Another => self.drawer.add(Ok(lamp), count),
            Form::Measure(kind) => self.drawer.change(
                |other, owned| if other == kind { owned.saturating_sub(1) } else { owned },
                Some((lamp, 1.0)),
            ),
            Form::None | Form::Unknown => return,
        }
        if self.drawer.refused.is_none() {
            self.climb.type_in(Entry::Count, String::new());
            self.turn_to_form(Form::None);
        }
    }

    /// Puts the identified lamp into the drawer, with what was measured on it.
    fn take(&mut self, fit: usize) {
        let fits = self.drawer.fits.as_ref().and_then(|fits| fits.as_ref().ok());
        let (Some(fit), Some(measured)) = (fits.and_then(|fits| fits.get(fit)).copied(), self.measured())
        else {
            return;
        };
        let spec = LampSpec {
            cold_ohms: Some(measured.cold_ohms),
            points: vec![measured.point],
            ..plain(fit.volts, fit.watts)
        };
        self.drawer.add(Lamp::from_spec(spec), 1.0);
        if self.drawer.refused.is_none() {
            for entry in [Entry::ColdOhms, Entry::GlowVolts, Entry::GlowAmps, Entry::PrintedVolts] {
                self.climb.type_in(entry, String::new());
            }
            self.turn_to_form(Form::None);
        }
    }
}

impl From<Shelf> for Msg {
    fn from(shelf: Shelf) -> Self {
        Self::Drawer(shelf)
    }
}
