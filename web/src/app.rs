//! The page: its state, what is kept of it, and its frame.

use yew::{
    Html, Properties, create_portal, function_component, hook, html, use_effect_with, use_mut_ref,
    use_reducer, use_state,
};

use crate::bench::{Bench, BenchHandle, Msg, Note, Stage, Tab};
use crate::browser::rest::{self, Arrival};
use crate::browser::window::{Listener, NextFrame};
use crate::browser::{cautions, fragment, input, language, storage, theme};
use crate::panels::advice::advice_panel;
use crate::panels::circuit::circuit;
use crate::panels::comparison::comparison;
use crate::panels::frame::{CAUTIONS_BUTTON, header, notes, tabs};
use crate::panels::voltage_bar::voltage_bar;
use crate::panels::{send, told};
use crate::parts::el::{button, el, several};
use crate::rest::Rest;
use lampladder_core::link;

/// What the page starts with.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct AppProps {
    /// The first state.
    pub bench: Bench,
}

/// The page.
#[function_component]
pub fn App(props: &AppProps) -> Html {
    let first = props.bench.clone();
    let bench: BenchHandle = use_reducer(move || first);
    let kept_frame = use_mut_ref(|| None::<NextFrame>);
    let kept = use_mut_ref(|| None::<(String, u32)>);
    {
        let dispatcher = bench.dispatcher();
        // Typing changes the set-up many times a second: the address follows once a frame.
        use_effect_with(
            (bench.setup.clone(), bench.edited, bench.notes.clone(), bench.link.clone(), bench.emptied),
            move |(setup, edited, notes, link, emptied)| {
                let (setup, edited, emptied) = (setup.clone(), *edited, *emptied);
                // A bad link stays in the address until something is changed, and so does one that holds more.
                let bad = notes.iter().any(|note| matches!(note, Note::BadLink(_)));
                let held = !edited && (bad || link.is_some());
                *kept_frame.borrow_mut() = NextFrame::new(move || {
                    let text = link::encode(&setup);
                    if !held && fragment::read().as_deref() != Some(text.as_str()) {
                        fragment::write(&text);
                    }
                    // Only what is new here: another window may have kept something since.
                    let new = edited.then_some((text, emptied));
                    if *kept.borrow() != new
                        && let Some((text, _)) = &new
                        && storage::write(storage::SETUP, text).is_err()
                    {
                        dispatcher.dispatch(Msg::Tell(Note::NothingKept));
                    }
                    *kept.borrow_mut() = new;
                });
            },
        );
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with((), move |()| {
            let listener = Listener::on_window("hashchange", move |_| {
                if let Some(text) = fragment::read() {
                    dispatcher.dispatch(Msg::Link(text));
                }
            });
            move || drop(listener)
        });
    }
    use_language(&bench);
    use_effect_with(bench.theme, |light| theme::apply(*light));
    let arrival = use_state(rest::arrival);
    {
        let arrival = arrival.clone();
        use_effect_with((), move |()| {
            // It may have come between the first look and this one.
            arrival.set(rest::arrival());
            let listener = Listener::on_window(rest::EVENT, move |_| arrival.set(rest::arrival()));
            move || drop(listener)
        });
    }
    {
        let wanted = *arrival == Arrival::Lost && (bench.tab != Tab::Expect || bench.open.is_some());
        use_effect_with(wanted, |wanted| {
            if *wanted {
                rest::ask_again();
            }
        });
    }
    let before = use_mut_ref(|| None::<Stage>);
    use_effect_with(bench.stage, move |stage| {
        cautions::show(*stage != Stage::Bench);
        match stage {
            // The page has just been opened: the keyboard is where the browser has put it.
            _ if before.replace(Some(*stage)).is_none() => {}
            Stage::Unread => {}
            Stage::Reread => input::focus(&cautions::title()),
            Stage::Bench => {
                storage::keep_for_visit(storage::ACCEPTED, "1");
                input::focus(CAUTIONS_BUTTON);
            }
        }
    });
    several([accept(&bench), page(&bench, *arrival)])
}

/// Fetches the texts of another language as soon as it is chosen.
#[hook]
fn use_language(bench: &BenchHandle) {
    use_effect_with(bench.words, |words| language::name_window(words.title));
    let (dispatcher, words) = (bench.dispatcher(), bench.words);
    use_effect_with((), move |()| {
        let follow = move || {
            let dispatcher = dispatcher.clone();
            language::speak(move |words| {
                dispatcher.dispatch(words.map_or(Msg::Tell(Note::Wordless), Msg::Speak));
            });
        };
        // It may have been chosen while the program was starting.
        if language::is_other_than(words.tag) {
            follow();
        }
        let listener = language::listen(follow);
        move || drop(listener)
    });
}

/// The button under the cautions, which stand outside of the program's own element.
fn accept(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let Some(foot) = cautions::element(cautions::FOOT) else { return Html::default() };
    let (class, text) = match bench.stage {
        Stage::Unread => ("accept", words.accept),
        Stage::Reread | Stage::Bench => ("accept is-back", words.back),
    };
    create_portal(button(class, "accept", send(bench, Msg::Accept)).text(text).html(), foot)
}

fn page(bench: &BenchHandle, arrival: Arrival) -> Html {
    // Nothing but the cautions before they are accepted.
    if bench.stage == Stage::Unread {
        return Html::default();
    }
    let class = match bench.tab {
        Tab::Expect => "page on-expect",
        Tab::Ladder => "page on-ladder",
        Tab::Seen => "page on-seen",
        Tab::SwitchOn => "page on-switch-on",
        Tab::Curve => "page on-curve",
        Tab::HandOn => "page on-hand-on",
    };
    let result = el("div")
        .class(if bench.is_stale() { "result is-stale" } else { "result" })
        .with(circuit(bench))
        .maybe(voltage_bar(bench))
        .with(comparison(bench));
    let answer_side =
        el("div").class("answer-side").with(notes(bench)).with(result).with(advice_panel(bench));
    let panel_side = el("div").class("panel-side").node(match arrival {
        Arrival::Whole => html! { <Rest bench={bench.clone()} /> },
        Arrival::Coming => told(bench.words().coming),
        Arrival::Lost => told(bench.words().reckoner_lost),
    });
    el("div")
        .class(class)
        // The document's language is the one that is asked for, which may be on its way.
        .set("lang", bench.words.tag)
        .with(header(bench))
        .with(el("main").class("bench").with(answer_side).with(panel_side))
        .with(tabs(bench))
        .html()
}
