//! How far a person has come on the ladder: the checklist, what is typed on it, and the rungs as they are known.

use std::rc::Rc;

use lampladder_core::ladder::{LadderError, Missing};
use lampladder_core::lamp::Lamp;
use lampladder_core::link;
use lampladder_core::precheck::{Class, PlugRange};
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;

use crate::bench::{Bench, Msg, Stage, Tab};
use crate::draft::{Draft, Fault};
use crate::entry::Entry;
use crate::reckoner::ladder::{Found, News, Plan, Wanted};

/// A step of the checklist, in order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Stand {
    /// The lamps that are owned.
    Lamps,
    /// What is checked before power.
    Checks,
    /// A rung, from 0.
    Rung(usize),
    /// The bare mains.
    Mains,
    /// After power.
    After,
}

/// Leads by their length, metres: those at which the limit of the protective conductor changes.
pub const LEADS: [f64; 4] = [5.0, 12.5, 20.0, 27.5];

/// Where the person stands.
#[derive(Debug, Clone, PartialEq)]
pub struct Climb {
    /// The step that is due; those before it are done.
    pub at: Stand,
    /// The step that is laid open.
    pub open: Option<Stand>,
    /// The equipment's class of protection.
    pub class: Class,
    /// Which of [`LEADS`].
    pub lead: usize,
    /// Whether the equipment has been looked over.
    pub looked: bool,
    /// When power was taken away, milliseconds since 1970, while somebody waits for a reservoir.
    pub off: Option<f64>,
    /// The last known time.
    pub now: f64,
    /// Whether the climb began again because something was changed.
    pub restarted: bool,
    /// Whether the person has changed anything since it was opened.
    pub edited: bool,
    pub(crate) texts: [String; Entry::ALL.len()],
    /// What the reckoner has told.
    pub known: Known,
}

/// What the reckoner has told of the ladder for these lamps and this equipment.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Known {
    /// The rungs, or why there are none; `None` until they are known.
    pub plan: Option<Rc<Result<Plan, LadderError>>>,
    /// What an ohmmeter shows across the plug.
    pub plug: Option<[PlugRange; 3]>,
    /// The lamp that would improve the ladder most, once it is known whether there is one.
    pub missing: Option<Option<Missing>>,
    /// Milliseconds spent on the ladder.
    pub milliseconds: f64,
    /// The reckoner cannot be had.
    pub lost: bool,
}

impl Default for Climb {
    fn default() -> Self {
        Self {
            at: Stand::Lamps,
            open: Some(Stand::Lamps),
            class: Class::One,
            lead: 0,
            looked: false,
            off: None,
            now: 0.0,
            restarted: false,
            edited: false,
            texts: Default::default(),
            known: Known::default(),
        }
    }
}

/// What happens on the ladder.
#[derive(Debug, Clone, PartialEq)]
pub enum Move {
    /// Lays a step open, or closes it.
    Open(Stand),
    /// The step that is due is done.
    GoOn,
    /// Begins again from a step that was done.
    Back(Stand),
    /// The equipment's class.
    Class(Class),
    /// The length of its lead.
    Lead(usize),
    /// It has been looked over, or not.
    Looked,
    /// Takes the lamps of a rung as the loop's bank.
    Use(usize),
    /// The reckoner tells.
    Learn(Box<News>),
    /// The reckoner cannot be had.
    Lost,
    /// Power is off, at this time; or somebody waits no more.
    Off(Option<f64>),
    /// The time goes on.
    Tick(f64),
    /// Other equipment: the checklist from its beginning.
    Afresh,
}

/// What the kept text begins with.
const VERSION: &str = "1";

impl Climb {
    /// What stands in a field.
    pub fn text(&self, entry: Entry) -> &str {
        &self.texts[entry as usize]
    }

    pub(crate) fn type_in(&mut self, entry: Entry, text: String) {
        self.texts[entry as usize] = text;
        self.edited = true;
    }

    /// Writes into a field what nobody typed here.
    pub(crate) fn set(&mut self, entry: Entry, text: &str) {
        text.clone_into(&mut self.texts[entry as usize]);
    }

    /// The number in a field, if one is typed.
    ///
    /// # Errors
    /// What is wrong with it.
    pub fn read(&self, entry: Entry) -> Result<Option<f64>, Fault> {
        entry.read(self.text(entry))
    }

    /// The number in a field, if there is a good one.
    pub fn number(&self, entry: Entry) -> Option<f64> {
        self.read(entry).ok().flatten()
    }

    /// The rungs, where they are known.
    pub fn rungs(&self) -> Option<&Plan> {
        self.known.plan.as_ref()?.as_ref().as_ref().ok()
    }

    /// Why there are none.
    pub fn refused(&self) -> Option<&LadderError> {
        self.known.plan.as_ref()?.as_ref().as_ref().err()
    }

    /// The step after one, as far as it is known.
    pub fn next(&self, stand: Stand) -> Option<Stand> {
        Some(match stand {
            Stand::Lamps => Stand::Checks,
            Stand::Checks => Stand::Rung(0),
            Stand::Rung(rung) if rung + 1 < self.rungs()?.rungs.len() => Stand::Rung(rung + 1),
            Stand::Rung(_) => Stand::Mains,
            Stand::Mains | Stand::After => Stand::After,
        })
    }

    fn stand(&mut self, stand: Stand) {
        self.at = stand;
        self.open = Some(stand);
        self.edited = true;
    }

    /// What was known of other lamps or other equipment is known no more; rungs that were climbed with them are not done.
    fn forget(&mut self) {
        self.known = Known { plug: self.known.plug, ..Known::default() };
        if let Stand::Rung(_) | Stand::Mains = self.at {
            self.restarted |= self.at > Stand::Rung(0);
            self.stand(Stand::Rung(0));
        }
    }

    /// The climb as a text for the phone to keep: lines, of which no typed text has more than one.
    pub fn kept(&self, equipment: &str) -> String {
        let (step, rung) = match self.at {
            Stand::Lamps => (0, 0),
            Stand::Checks => (1, 0),
            Stand::Rung(rung) => (2, rung),
            Stand::Mains => (3, 0),
            Stand::After => (4, 0),
        };
        let class = Class::ALL.iter().position(|class| *class == self.class).unwrap_or(0);
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "a time after 1970")]
        let off = self.off.map_or(0, |off| off as u64);
        let looked = u8::from(self.looked);
        let lead = self.lead;
        let head = format!("{VERSION}\n{equipment}\n{step} {rung} {class} {lead} {looked} {off}");
        self.texts.iter().fold(head, |kept, text| kept + "\n" + text)
    }

    /// The climb that was kept for this equipment; one from the beginning for other equipment, or where nothing can be
    /// read.
    pub fn restored(text: &str, equipment: &str) -> Self {
        Self::read_kept(text, equipment).unwrap_or_default()
    }

    fn read_kept(text: &str, equipment: &str) -> Option<Self> {
        let mut lines = text.split('\n');
        if (lines.next()?, lines.next()?) != (VERSION, equipment) {
            return None;
        }
        let mut numbers = lines.next()?.split(' ').map(|number| number.parse::<u64>().ok());
        let mut number = || numbers.next().flatten();
        let mut index = || usize::try_from(number()?).ok();
        let (step, rung) = (index()?, index()?);
        let at = match step {
            0 => Stand::Lamps,
            1 => Stand::Checks,
            2 => Stand::Rung(rung),
            3 => Stand::Mains,
            _ => Stand::After,
        };
        let class = *Class::ALL.get(index()?)?;
        let lead = index()?.min(LEADS.len() - 1);
        let looked = index()? == 1;
        #[expect(clippy::cast_precision_loss, reason = "a time in this millennium")]
        let off = number().filter(|off| *off > 0).map(|off| off as f64);
        let mut climb = Self { at, open: Some(at), class, lead, looked, off, ..Self::default() };
        for (kept, text) in climb.texts.iter_mut().zip(lines) {
            text.clone_into(kept);
        }
        Some(climb)
    }
}

/// Supply and equipment as a text: what a climb belongs to, whatever lamps stand in the loop.
pub fn equipment(setup: &Setup) -> String {
    let supply_and_plate = |example: Setup| Setup { bank: example.bank, ..setup.clone() };
    Setup::example().map_or_else(|_| String::new(), |example| link::encode(&supply_and_plate(example)))
}

/// The lamps of a rung, group by group.
pub fn groups(counts: &[Vec<u8>], stock: &Stock) -> Vec<Vec<Lamp>> {
    let group = |counts: &Vec<u8>| {
        let owned = stock.kinds().iter().zip(counts);
        let lamps = owned.flat_map(|(owned, &count)| vec![owned.lamp().clone(); usize::from(count)]);
        lamps.collect()
    };
    counts.iter().map(group).collect()
}

impl Bench {
    /// The ladder that is wanted; `None` while nobody looks at it.
    pub fn wanted(&self) -> Option<Wanted> {
        (matches!(self.tab, Tab::Ladder | Tab::HandOn) && self.stage == Stage::Bench)
            .then(|| Wanted { setup: equipment(&self.setup), stock: link::encode_stock(&self.drawer.stock) })
    }

    /// What a message makes of the climb.
    pub(crate) fn climb(&mut self, step: Move) {
        let climb = &mut self.climb;
        match step {
            Move::Open(stand) => climb.open = (climb.open != Some(stand)).then_some(stand),
            Move::GoOn => {
                climb.restarted = false;
                if let Some(next) = climb.next(climb.at) {
                    climb.stand(next);
                }
            }
            Move::Back(stand) => {
                climb.restarted = false;
                climb.stand(stand.min(climb.at));
            }
            Move::Class(class) => {
                climb.class = class;
                climb.edited = true;
            }
            Move::Lead(lead) => {
                climb.lead = lead.min(LEADS.len() - 1);
                climb.edited = true;
            }
            Move::Looked => {
                climb.looked = !climb.looked;
                climb.edited = true;
            }
            Move::Learn(news) => self.learn(*news),
            Move::Lost => climb.known.lost = true,
            Move::Off(off) => {
                climb.off = off;
                climb.now = off.unwrap_or(climb.now);
                climb.edited = true;
            }
            Move::Tick(now) => climb.now = now,
            Move::Afresh => {
                *climb = Climb { known: climb.known.clone(), ..Climb::default() };
                climb.stand(Stand::Lamps);
            }
            // It changes the loop, and is done where all that is typed is read.
            Move::Use(_) => {}
        }
    }

    fn learn(&mut self, news: News) {
        let climb = &mut self.climb;
        climb.known.milliseconds = news.milliseconds;
        match news.found {
            Found::Plan(plan, plug) => {
                // A kept position on a ladder that has become shorter.
                if let (Stand::Rung(rung), Ok(plan)) = (climb.at, &plan)
                    && rung >= plan.rungs.len()
                {
                    // Nobody has changed anything: what is kept stays as it is.
                    climb.at = Stand::Rung(0);
                    climb.open = Some(climb.at);
                }
                climb.known.plan = Some(Rc::new(plan));
                climb.known.plug = plug;
            }
            Found::Missing(missing) => climb.known.missing = Some(missing),
        }
    }

    /// The lamps of a rung.
    pub fn rung_groups(&self, rung: usize) -> Option<Vec<Vec<Lamp>>> {
        Some(groups(&self.climb.rungs()?.rungs.get(rung)?.counts, &self.drawer.stock))
    }

    /// Puts the lamps of a rung into the loop.
    pub(crate) fn use_rung(&mut self, rung: usize) {
        if let Some(groups) = self.rung_groups(rung) {
            self.draft.groups = Draft::written(&groups, self.words().numerals);
        }
    }

    /// Whether the loop's bank is that of a rung.
    pub fn is_in_loop(&self, rung: usize) -> bool {
        self.rung_groups(rung).is_some_and(|groups| self.setup.bank.groups() == groups)
    }

    /// The rung, from 1, whose bank is the loop's; the one that is climbed, where several are.
    pub fn rung_in_loop(&self) -> Option<u32> {
        let count = self.climb.rungs()?.rungs.len();
        let climbed = match self.climb.at {
            Stand::Rung(rung) => rung,
            _ => 0,
        };
        let rung = core::iter::once(climbed).chain(0..count).find(|rung| self.is_in_loop(*rung))?;
        u32::try_from(rung + 1).ok()
    }

    /// After every message: a ladder for other lamps or other equipment is no ladder for these.
    pub(crate) fn follow(&mut self, setup: &Rc<Setup>, stock: &Rc<Stock>) {
        let same_bench = Rc::ptr_eq(setup, &self.setup)
            || (setup.supply == self.setup.supply && setup.plate == self.setup.plate);
        if !same_bench || (!Rc::ptr_eq(stock, &self.drawer.stock) && stock != &self.drawer.stock) {
            self.climb.forget();
        }
    }
}

impl From<Move> for Msg {
    fn from(step: Move) -> Self {
        Self::Climb(step)
    }
}
