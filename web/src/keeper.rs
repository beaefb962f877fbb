//! Keeps the log stored: reads it once somebody wants it, then sends every change to the store.

use std::rc::Rc;

use yew::{hook, use_effect_with};

use crate::bench::{BenchHandle, Msg};
use crate::browser::fresh;
use crate::browser::reckoner::ask;
use crate::log::{News, Order, changes};
use crate::reckoner::{Answer, Ask};
use crate::seen::Deed;

/// Sends what the store has not got. A newer order takes the place of one without an answer, so it holds what that held.
#[hook]
pub fn use_keeper(bench: &BenchHandle) {
    let log = &bench.seen.log;
    let dispatcher = bench.dispatcher();
    let state = (log.wanted, log.records.clone(), log.stored.clone(), log.stale);
    use_effect_with(state, move |(wanted, records, stored, stale)| {
        let order = stored.as_ref().map(|stored| Order::Change(changes(stored, records)));
        let order = match order {
            // What is changed here goes first: it would be lost in what is stored.
            Some(Order::Change(changes)) if *stale && changes.is_empty() => Order::List,
            other => other.unwrap_or(Order::List),
        };
        if !wanted || order == Order::Change(Vec::new()) {
            return;
        }
        let records = Rc::clone(records);
        ask(Ask::Log(order), move |answer| {
            let deed = match answer {
                Ok(Answer::Log(news)) => match *news {
                    News::Listed(all, foreign) => Deed::Learn(all, foreign),
                    News::Stored => {
                        fresh::say(fresh::KEPT);
                        Deed::Stored(Rc::clone(&records))
                    }
                    News::Refused(trouble) => Deed::Trouble(trouble),
                },
                _ => Deed::Trouble(crate::log::Trouble::Lost),
            };
            dispatcher.dispatch(Msg::Seen(deed));
        });
    });
}
