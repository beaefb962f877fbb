//! The page: its state, what is kept of it, and its frame.

use yew::{
    Html, Properties, create_portal, function_component, html, use_effect_with, use_mut_ref, use_reducer,
};

use crate::bench::{Bench, BenchHandle, Msg, Note, Tab};
use crate::browser::window::{Listener, NextFrame};
use crate::browser::{cautions, fragment, input, storage, theme};
use crate::panels::advice::AdvicePanel;
use crate::panels::circuit::Circuit;
use crate::panels::comparison::Comparison;
use crate::panels::curve::CurvePanel;
use crate::panels::details::Details;
use crate::panels::header::{CAUTIONS_BUTTON, Header};
use crate::panels::nav::Nav;
use crate::panels::notes::Notes;
use crate::panels::send;
use crate::panels::sheet::Sheet;
use crate::panels::voltage_bar::VoltageBar;
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
    {
        let dispatcher = bench.dispatcher();
        // Typing changes the set-up many times a second: the address follows once a frame.
        use_effect_with(
            (bench.setup.clone(), bench.edited, bench.notes.clone()),
            move |(setup, edited, notes)| {
                let (setup, edited) = (setup.clone(), *edited);
                // A bad link stays in the address until something is changed.
                let held = !edited && notes.iter().any(|note| matches!(note, Note::BadLink(_)));
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
                let Some(text) = fragment::read() else { return };
                dispatcher.dispatch(match link::decode(&text) {
                    Ok(setup) => Msg::Arrive(setup),
                    Err(error) => Msg::Tell(Note::BadLink(error)),
                });
            });
            move || drop(listener)
        });
    }
    use_effect_with(bench.theme, |light| theme::apply(*light));
    use_effect_with((bench.cautions, bench.accepted), |(shown, accepted)| {
        if *accepted {
            storage::keep_for_visit(storage::ACCEPTED);
        }
        cautions::show(*shown);
        if *shown && *accepted {
            input::focus(cautions::TITLE);
        } else if !*shown {
            input::focus(CAUTIONS_BUTTON);
        }
    });
    html! {
        <>
            { accept(&bench) }
            { page(&bench) }
        </>
    }
}

/// The button under the cautions, which stand outside of the program's own element.
fn accept(bench: &BenchHandle) -> Html {
    let words = bench.words();
    let Some(foot) = cautions::element(cautions::FOOT) else { return Html::default() };
    create_portal(
        html! {
            <button type="button" class={if bench.accepted { "accept is-back" } else { "accept" }} data-testid="accept" onclick={send(bench, Msg::Accept)}>
                { if bench.accepted { words.back } else { words.accept } }
            </button>
        },
        foot,
    )
}

fn page(bench: &BenchHandle) -> Html {
    // Nothing but the cautions before they are accepted.
    if !bench.accepted {
        return Html::default();
    }
    let class = match bench.tab {
        Tab::Expect => "page on-expect",
        Tab::Curve => "page on-curve",
    };
    html! {
        <div {class}>
            <Header bench={bench.clone()} />
            <main class="bench">
                <div class="answer-side">
                    <Notes bench={bench.clone()} />
                    <div class={if bench.is_stale() { "result is-stale" } else { "result" }}>
                        <Circuit bench={bench.clone()} />
                        <VoltageBar bench={bench.clone()} />
                        <Comparison bench={bench.clone()} />
                    </div>
                    <AdvicePanel bench={bench.clone()} />
                </div>
                <div class="panel-side">
                    <Sheet bench={bench.clone()} />
                    <div class="panel">
                        { match bench.tab {
                            Tab::Expect => html! { <Details bench={bench.clone()} /> },
                            Tab::Curve => html! { <CurvePanel bench={bench.clone()} /> },
                        } }
                    </div>
                </div>
            </main>
            <Nav bench={bench.clone()} />
        </div>
    }
}
