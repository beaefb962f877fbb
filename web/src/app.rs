//! The page: its state, what is kept of it, and its frame.

use yew::{
    Html, Properties, create_portal, function_component, hook, html, use_effect_with, use_mut_ref,
    use_reducer,
};

use crate::bench::{Bench, BenchHandle, Msg, Note, Stage, Tab};
use crate::browser::window::{EverySecond, Listener, NextFrame, clock};
use crate::browser::{cautions, fragment, input, language, reckoner, storage, theme};
use crate::climb::{Move, equipment};
use crate::drawer::Shelf;
use crate::keeper::use_keeper;
use crate::meter;
use crate::opening::use_opening;
use crate::panels::advice::advice_panel;
use crate::panels::circuit::circuit;
use crate::panels::comparison::comparison;
use crate::panels::curve::curve;
use crate::panels::details::details;
use crate::panels::frame::{CAUTIONS_BUTTON, header, notes, tabs};
use crate::panels::ladder::ladder;
use crate::panels::seen::seen;
use crate::panels::send;
use crate::panels::sheet::Sheet;
use crate::panels::switch_on::switch_on;
use crate::panels::voltage_bar::voltage_bar;
use crate::parts::el::{button, el, several};
use crate::reckoner::pulses::Wanted;
use crate::reckoner::{Answer, Ask};
use lampladder_core::link;
use lampladder_core::readings::MeterSpec;

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
    {
        let dispatcher = bench.dispatcher();
        // Typing changes the set-up many times a second: the address follows once a frame.
        use_effect_with(
            (bench.setup.clone(), bench.edited, bench.notes.clone(), bench.link.clone()),
            move |(setup, edited, notes, link)| {
                let (setup, edited) = (setup.clone(), *edited);
                // A bad link stays in the address until something is changed, and so does one that holds more.
                let bad = notes.iter().any(|note| matches!(note, Note::BadLink(_)));
                let held = !edited && (bad || link.is_some());
                *kept_frame.borrow_mut() = NextFrame::new(move || {
                    let text = link::encode(&setup);
                    if !held && fragment::read().as_deref() != Some(text.as_str()) {
                        fragment::write(&text);
                    }
                    if edited && storage::write(storage::SETUP, &text).is_err() {
                        dispatcher.dispatch(Msg::Tell(Note::NothingKept));
                    }
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
    {
        let dispatcher = bench.dispatcher();
        let family = bench.setup.plate.family();
        let further = bench.tab == Tab::Expect && bench.answers.unasked(family).is_some();
        // One condition a frame: a key that is pressed meanwhile is not kept waiting for the rest.
        use_effect_with((bench.answers.clone(), further), move |(_, further)| {
            let next = further.then(|| NextFrame::new(move || dispatcher.dispatch(Msg::AskFurther)));
            move || drop(next)
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with((bench.setup.clone(), bench.unpulsed()), move |(setup, conditions)| {
            if conditions.is_empty() {
                return;
            }
            let wanted = Wanted { setup: link::encode(setup), conditions: conditions.clone() };
            // Without the reckoner it is said that the lamps pulse, and no more.
            reckoner::ask(Ask::Pulses(wanted), move |answer| {
                if let Ok(Answer::Pulse(news)) = answer {
                    dispatcher.dispatch(Msg::Pulse(*news));
                }
            });
        });
    }
    use_ladder(&bench);
    use_language(&bench);
    use_effect_with(bench.theme, |light| theme::apply(*light));
    {
        let dispatcher = bench.dispatcher();
        use_effect_with(bench.seen.spec, move |spec| {
            let kept = storage::read(storage::METER);
            let text = meter::kept(spec);
            // The usual meter needs no keeping, unless it takes the place of another.
            if kept.as_ref() == Some(&text) || (kept.is_none() && *spec == MeterSpec::default()) {
                return;
            }
            if storage::write(storage::METER, &text).is_err() {
                dispatcher.dispatch(Msg::Tell(Note::NothingKept));
            }
        });
    }
    use_keeper(&bench);
    use_opening(&bench);
    let before = use_mut_ref(|| None::<Stage>);
    use_effect_with(bench.stage, move |stage| {
        cautions::show(*stage != Stage::Bench);
        match stage {
            // The page has just been opened: the keyboard is where the browser has put it.
            _ if before.replace(Some(*stage)).is_none() => {}
            Stage::Unread => {}
            Stage::Reread => input::focus(&cautions::title()),
            Stage::Bench => {
                storage::keep_for_visit(storage::ACCEPTED);
                input::focus(CAUTIONS_BUTTON);
            }
        }
    });
    several([accept(&bench), page(&bench)])
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

/// Keeps lamps and position on the phone, asks the reckoner for the rungs, and lets the time go on.
#[hook]
fn use_ladder(bench: &BenchHandle) {
    {
        let dispatcher = bench.dispatcher();
        let stock = bench.drawer.edited.then(|| link::encode_stock(&bench.drawer.stock));
        let climb = bench.climb.edited.then(|| bench.climb.kept(&equipment(&bench.setup)));
        use_effect_with([(storage::STOCK, stock), (storage::CLIMB, climb)], move |kept| {
            let keep = |(name, text): &(&str, Option<String>)| {
                text.as_ref().is_some_and(|text| storage::write(name, text).is_err())
            };
            if kept.iter().any(keep) {
                dispatcher.dispatch(Msg::Tell(Note::NothingKept));
            }
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with((bench.wanted(), bench.measured()), move |(wanted, measured)| {
            if let Some(wanted) = wanted.clone() {
                let dispatcher = dispatcher.clone();
                reckoner::ask(Ask::Ladder(wanted), move |answer| {
                    dispatcher.dispatch(match answer {
                        Ok(Answer::Ladder(news)) => Move::Learn(news).into(),
                        _ => Move::Lost.into(),
                    });
                });
            }
            if let Some(measured) = *measured {
                reckoner::ask(Ask::Unknown(measured), move |answer| match answer {
                    Ok(Answer::Unknown(fits)) => dispatcher.dispatch(Shelf::Fits(fits).into()),
                    _ => dispatcher.dispatch(Move::Lost.into()),
                });
            }
        });
    }
    let dispatcher = bench.dispatcher();
    use_effect_with(bench.climb.off.is_some() && bench.tab == Tab::Ladder, move |counts| {
        let tick = move || dispatcher.dispatch(Move::Tick(clock()).into());
        let ticking = counts.then(|| EverySecond::new(tick)).flatten();
        move || drop(ticking)
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

fn page(bench: &BenchHandle) -> Html {
    // Nothing but the cautions before they are accepted.
    if bench.stage == Stage::Unread {
        return Html::default();
    }
    let (class, panel) = match bench.tab {
        Tab::Expect => ("page on-expect", details(bench)),
        Tab::Ladder => ("page on-ladder", ladder(bench)),
        Tab::Seen => ("page on-seen", seen(bench)),
        Tab::SwitchOn => ("page on-switch-on", switch_on(bench)),
        Tab::Curve => ("page on-curve", curve(bench)),
    };
    let result = el("div")
        .class(if bench.is_stale() { "result is-stale" } else { "result" })
        .with(circuit(bench))
        .maybe(voltage_bar(bench))
        .with(comparison(bench));
    let answer_side =
        el("div").class("answer-side").with(notes(bench)).with(result).with(advice_panel(bench));
    let panel_side = el("div")
        .class("panel-side")
        .node(html! { <Sheet bench={bench.clone()} /> })
        .with(el("div").class("panel").with(panel));
    el("div")
        .class(class)
        // The document's language is the one that is asked for, which may be on its way.
        .set("lang", bench.words.tag)
        .with(header(bench))
        .with(el("main").class("bench").with(answer_side).with(panel_side))
        .with(tabs(bench))
        .html()
}
