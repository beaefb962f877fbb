//! What happens to the page from outside: a new version, other windows of the page, a storage that is emptied.

use yew::{hook, use_effect_with};

use crate::bench::{BenchHandle, Msg, Note, Shared};
use crate::browser::window::{Listener, is_in_front};
use crate::browser::{fresh, storage};
use crate::seen::Deed;
use crate::visit;

const SHARED: [(&str, Shared); 3] =
    [(storage::SETUP, Shared::Setup), (storage::STOCK, Shared::Stock), (storage::CLIMB, Shared::Climb)];

/// Listens, and keeps what belongs to this visit.
#[hook]
pub fn use_custody(bench: &BenchHandle) {
    let dispatcher = bench.dispatcher();
    use_effect_with((), move |()| {
        if let Some(text) = storage::read_for_visit(storage::VISIT) {
            dispatcher.dispatch(Msg::Restore(text));
        }
        if fresh::is_ready() {
            dispatcher.dispatch(Msg::Tell(Note::New));
        }
        let (new, kept) = (dispatcher.clone(), dispatcher.clone());
        let listeners = [
            Listener::on_window(fresh::NEW, move |_| new.dispatch(Msg::Tell(Note::New))),
            Listener::on_window("storage", move |event| {
                if let Some((name, text)) = storage::kept_elsewhere(&event)
                    && let Some((_, shared)) = SHARED.iter().find(|(other, _)| *other == name)
                {
                    kept.dispatch(Msg::Elsewhere(*shared, text));
                }
            }),
            Listener::on_window("visibilitychange", move |_| {
                if !is_in_front() {
                    return;
                }
                if storage::was_emptied() {
                    dispatcher.dispatch(Msg::Emptied);
                }
                dispatcher.dispatch(Msg::Seen(Deed::LookAgain));
            }),
        ];
        move || drop(listeners)
    });
    // After what was kept has been read.
    use_effect_with(visit::kept(bench), |text| storage::keep_for_visit(storage::VISIT, text));
}
