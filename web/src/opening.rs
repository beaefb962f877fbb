//! Opening a link that may hold more than a set-up: lamps and position on the ladder take the place of the person's own,
//! which stay on the phone until something is changed; readings join the log.

use std::rc::Rc;

use lampladder_core::link;
use lampladder_core::setup::Setup;
use lampladder_core::stock::Stock;
use yew::{hook, use_effect_with};

use crate::bench::{Bench, BenchHandle, Msg, Note};
use crate::browser::reckoner;
use crate::climb::{Climb, equipment};
use crate::log::Adopted;
use crate::reckoner::links::{News, Opened, Wanted};
use crate::reckoner::{Answer, Ask};
use crate::seen::Deed;

/// What a person has on this phone.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Mine {
    /// The set-up.
    pub setup: Option<Setup>,
    /// The lamps.
    pub stock: Option<Stock>,
    /// The position on the ladder, as it is kept.
    pub climb: Option<String>,
}

/// Whether a link is of a version that can hold more than a set-up.
pub fn may_hold_more(text: &str) -> bool {
    text.starts_with(['2', '3'])
}

/// Has the reckoner read what stands behind the set-up of a link.
#[hook]
pub fn use_opening(bench: &BenchHandle) {
    let dispatcher = bench.dispatcher();
    let decimal = bench.words().numerals.decimal;
    use_effect_with(bench.link.clone(), move |link| {
        let Some(link) = link else { return };
        reckoner::ask(Ask::Links(Wanted::Open(link.to_string(), decimal)), move |answer| {
            let news = match answer {
                Ok(Answer::Links(news)) => Some(*news),
                _ => None,
            };
            dispatcher.dispatch(match news {
                Some(News::Opened(opened)) => Msg::Opened(Box::new(opened)),
                Some(News::Unopened(error)) => Msg::Tell(Note::BadLink(error)),
                _ => Msg::Tell(Note::LinkHalfRead),
            });
        });
    });
}

impl Bench {
    /// The set-up of a link at once; the rest when the reckoner has read it.
    pub(crate) fn open_link(self, text: &str) -> Self {
        let setup = match link::decode(text) {
            Ok(setup) => setup,
            Err(error) => {
                let mut same = self;
                same.tell(Note::BadLink(error));
                return same;
            }
        };
        let mut next = self.arrive(setup);
        let bad = next.notes.iter().any(|note| matches!(note, Note::BadLink(_)));
        next.link = (!bad && may_hold_more(text)).then(|| text.into());
        next
    }

    /// What stood behind the set-up of the link.
    #[inline(never)]
    pub(crate) fn take_over(mut self, opened: Opened) -> Self {
        let Opened { stock, climb, log } = opened;
        let ladder = stock.is_some() || climb.is_some();
        if !ladder && log.is_empty() {
            // It was a set-up, and no more: the address is as short as ever.
            self.link = None;
            return self;
        }
        if !log.is_empty() {
            self.seen.act(Deed::Adopt(log, true), &self.setup, self.words().numerals);
            self.tell_of_readings();
        }
        if !ladder {
            return self;
        }
        if self.link.is_none() {
            // Something has been changed meanwhile, and is not to be lost.
            self.tell(Note::LinkHalfRead);
            return self;
        }
        if let Some(Ok(stock)) = stock.as_deref().map(link::decode_stock) {
            self.drawer.stock = Rc::new(stock);
        }
        self.drawer.edited = false;
        self.stand_at(climb.as_deref());
        self.notes.retain(|note| *note != Note::FromLink);
        self.notes.push(Note::LadderFromLink);
        self
    }

    fn stand_at(&mut self, climb: Option<&str>) {
        let now = self.climb.now;
        let climb = climb.map(|climb| Climb::restored(climb, &equipment(&self.setup))).unwrap_or_default();
        self.climb = Climb { now, ..climb };
    }

    /// The person's own again.
    #[inline(never)]
    pub(crate) fn reclaim(self, mine: Mine) -> Self {
        let Mine { setup, stock, climb } = mine;
        // Who has never changed the set-up has the example.
        let mut next = match setup.or_else(|| Setup::example().ok()) {
            Some(setup) => self.arrive(setup),
            None => self,
        };
        next.drawer.stock = Rc::new(stock.unwrap_or_default());
        next.drawer.edited = false;
        next.stand_at(climb.as_deref());
        next.link = None;
        next.notes.retain(|note| !matches!(note, Note::FromLink | Note::LadderFromLink));
        next
    }

    /// After every message: once something is changed, all of an opened link is the person's own.
    pub(crate) fn make_own(&mut self) {
        if self.link.is_some() && (self.edited || self.drawer.edited || self.climb.edited) {
            self.link = None;
            self.edited = true;
            self.drawer.edited = true;
            self.climb.edited = true;
        }
    }

    /// Says what has become of the readings of a link.
    pub(crate) fn tell_of_readings(&mut self) {
        if !self.seen.log.from_link {
            return;
        }
        if let Some(Adopted { added, known }) = self.seen.log.adopted.take()
            && added > 0
        {
            self.notes.push(Note::ReadingsFromLink(added, known));
        }
    }
}
