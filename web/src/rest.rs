//! What a first answer does without: the editors, the panels, and all that is kept or asked of the reckoner.
//!
//! The release page fetches it after that answer ([`crate::browser::rest`] tells when it is there). Nothing but the
//! name of [`Rest`] stands in the first part of the program; what goes where is said in web/rest.txt.

use yew::{Html, Properties, function_component, hook, html, use_effect_with, use_mut_ref};

use crate::bench::{BenchHandle, Msg, Note, Tab};
use crate::browser::window::{EverySecond, NextFrame, clock, to_top};
use crate::browser::{fresh, language, reckoner, storage};
use crate::climb::{Move, equipment};
use crate::custody::use_custody;
use crate::drawer::Shelf;
use crate::keeper::use_keeper;
use crate::meter;
use crate::opening::use_opening;
use crate::panels::curve::curve;
use crate::panels::details::details;
use crate::panels::hand_on::hand_on;
use crate::panels::ladder::ladder;
use crate::panels::seen::seen;
use crate::panels::sheet::Sheet;
use crate::panels::switch_on::switch_on;
use crate::panels::told;
use crate::parts::el::el;
use crate::reckoner::pulses::Wanted;
use crate::reckoner::{Answer, Ask};
use lampladder_core::link;
use lampladder_core::readings::MeterSpec;

/// What it needs.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct RestProps {
    /// The state.
    pub bench: BenchHandle,
}

/// The rest of the page: an editor if one is open, and the panel in front.
#[function_component]
pub fn Rest(props: &RestProps) -> Html {
    let bench = &props.bench;
    use_answers(bench);
    use_ladder(bench);
    use_meter(bench);
    use_keeper(bench);
    use_custody(bench);
    use_opening(bench);
    use_top(bench.tab);
    use_texts(bench);
    if !bench.words.is_whole() {
        return told(bench.words.coming);
    }
    let panel = match bench.tab {
        Tab::Expect => details(bench),
        Tab::Ladder => ladder(bench),
        Tab::Seen => seen(bench),
        Tab::SwitchOn => switch_on(bench),
        Tab::Curve => curve(bench),
        Tab::HandOn => hand_on(bench),
    };
    html! {
        <>
            <Sheet bench={bench.clone()} />
            { el("div").class("panel").with(panel).html() }
        </>
    }
}

/// Shows a panel from its beginning, wherever the one before was left.
#[hook]
fn use_top(tab: Tab) {
    let before = use_mut_ref(|| tab);
    use_effect_with(tab, move |tab| {
        if before.replace(*tab) != *tab {
            to_top();
        }
    });
}

/// Completes the texts of a language, since the panels have more to say than the first screen.
#[hook]
fn use_texts(bench: &BenchHandle) {
    let dispatcher = bench.dispatcher();
    // Another look for them with every panel that is turned to.
    use_effect_with((bench.words, bench.tab), move |(words, _)| {
        let words = *words;
        if !words.is_whole() {
            language::complete(words, move |whole| {
                dispatcher.dispatch(if whole { Msg::Completed } else { Msg::Tell(Note::Wordless) });
            });
        }
    });
}

/// Asks for the conditions that are not compared at a glance, and how lamps pulse.
#[hook]
fn use_answers(bench: &BenchHandle) {
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
        let conditions = bench.unpulsed();
        // Once a set-up, and again when more conditions are known to hunt; an answer is no reason to ask anew.
        use_effect_with((bench.setup.clone(), bench.hunting()), move |(setup, _)| {
            if conditions.is_empty() {
                return;
            }
            let wanted = Wanted { setup: link::encode(setup), conditions };
            // Without the reckoner it is said that the lamps pulse, and no more.
            reckoner::ask(Ask::Pulses(wanted), move |answer| {
                if let Ok(Answer::Pulse(news)) = answer {
                    dispatcher.dispatch(Msg::Pulse(*news));
                }
            });
        });
    }
}

/// Keeps the meter on the phone.
#[hook]
fn use_meter(bench: &BenchHandle) {
    let dispatcher = bench.dispatcher();
    use_effect_with((bench.seen.spec, bench.emptied), move |(spec, _)| {
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

/// Keeps lamps and position on the phone, asks the reckoner for the rungs, and lets the time go on.
#[hook]
fn use_ladder(bench: &BenchHandle) {
    {
        let dispatcher = bench.dispatcher();
        let stock = bench.drawer.edited.then(|| link::encode_stock(&bench.drawer.stock));
        let climb = bench.climb.edited.then(|| bench.climb.kept(&equipment(&bench.setup)));
        use_effect_with((stock, climb, bench.emptied), move |(stock, climb, _)| {
            let refused = |name: &str, text: &Option<String>| {
                text.as_ref().is_some_and(|text| storage::write(name, text).is_err())
            };
            if refused(storage::STOCK, stock) | refused(storage::CLIMB, climb) {
                dispatcher.dispatch(Msg::Tell(Note::NothingKept));
            } else if stock.is_some() {
                fresh::say(fresh::KEPT);
            }
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with(bench.wanted(), move |wanted| {
            if let Some(wanted) = wanted.clone() {
                reckoner::ask(Ask::Ladder(wanted), move |answer| {
                    dispatcher.dispatch(match answer {
                        Ok(Answer::Ladder(news)) => Move::Learn(news).into(),
                        _ => Move::Lost.into(),
                    });
                });
            }
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with(bench.measured(), move |measured| {
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
