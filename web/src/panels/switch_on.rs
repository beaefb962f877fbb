//! The first seconds, replayed: healthy beside another condition, each lamp glowing as core says it would.

use std::cell::RefCell;
use std::rc::Rc;

use yew::{
    Html, Properties, function_component, html, use_effect, use_effect_with, use_force_update, use_memo,
    use_mut_ref, use_node_ref, use_state_eq,
};

use super::advice::wrong_fields;
use super::stage::{Hand, chart, controls, lamps, scenes, strip};
use super::{send, surge};
use crate::bench::{Bench, BenchHandle, Msg};
use crate::browser::frames::Frames;
use crate::browser::reckoner;
use crate::browser::window::{Listener, now, wants_stillness, width};
use crate::charts::ink::Ink;
use crate::charts::seconds::draw;
use crate::describe;
use crate::draft::Place;
use crate::parts::choice::{Choice, choices};
use crate::parts::el::{El, el, truth};
use crate::reckoner::{Answer, Ask as Question};
use crate::replay::{Ask, Closing, SPANS, Scene, Wish};
use crate::story::{Told, alike, tell};
use crate::theatre::Theatre;
use crate::words::replay::Played;
use lampladder_core::condition::Condition;
use lampladder_core::switch_on::SwitchOnError;

/// The panel.
pub fn switch_on(bench: &BenchHandle) -> El {
    el("section")
        .class("replay")
        .set("aria-label", bench.words().replay().title)
        .node(html! { <Replay bench={bench.clone()} /> })
}

/// What the replay gets.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct ReplayProps {
    /// The state.
    pub bench: BenchHandle,
}

/// The replay: it works out and plays by frames.
#[function_component]
pub fn Replay(props: &ReplayProps) -> Html {
    let bench = &props.bench;
    let theatre: Rc<RefCell<Theatre>> = use_mut_ref(Theatre::default);
    let update = use_force_update();
    let frames = {
        let (theatre, update) = (Rc::clone(&theatre), update.clone());
        use_memo((), |()| {
            Frames::new(move |at| {
                if theatre.borrow_mut().frame(at) {
                    update.force_update();
                }
                inquire(&theatre, &update, at);
                theatre.borrow().is_busy()
            })
        })
    };
    {
        let (frames, theatre) = (frames.clone(), Rc::clone(&theatre));
        // An answer of the reckoner may have set it going.
        use_effect(move || {
            if theatre.borrow().is_busy() {
                frames.wake();
            }
        });
    }
    let hand = Hand { theatre: Rc::clone(&theatre), frames, update };
    let still = use_state_eq(wants_stillness);
    {
        let hand = hand.clone();
        let ask = Ask::of(&bench.wish, &bench.setup, bench.condition);
        use_effect_with((ask, bench.wish.slow, *still), move |(ask, slow, still)| {
            {
                let mut theatre = hand.theatre.borrow_mut();
                theatre.slow = *slow;
                theatre.autoplay = !still;
                theatre.ask(ask.clone(), now());
            }
            hand.frames.wake();
            hand.update.force_update();
        });
    }
    let size = use_state_eq(width);
    {
        let size = size.clone();
        use_effect_with((), move |()| {
            let listener = Listener::on_window("resize", move |_| {
                size.set(width());
                still.set(wants_stillness());
            });
            move || drop(listener)
        });
    }
    let canvas = use_node_ref();
    {
        let (canvas, theatre) = (canvas.clone(), Rc::clone(&theatre));
        let drawn = (theatre.borrow().version, bench.theme, bench.words, *size, Ink::now());
        use_effect_with(drawn, move |(_, _, words, _, _)| {
            let theatre = theatre.borrow();
            let (Some(canvas), Some(show)) = (canvas.cast(), theatre.show()) else { return };
            let runs = show.scenes.each_ref().map(Scene::run);
            // A chart that cannot be drawn leaves the tables, which say the same.
            let _ = draw(&canvas, runs, show.ask.seconds, &Ink::now(), words);
        });
    }
    view(bench, &hand, &canvas)
}

/// Asks the reckoner where there is something to ask.
fn inquire(theatre: &Rc<RefCell<Theatre>>, update: &yew::UseForceUpdateHandle, now: f64) {
    let Some(wanted) = theatre.borrow_mut().question(now).map(Ask::wanted) else { return };
    let (theatre, update) = (Rc::downgrade(theatre), update.clone());
    reckoner::ask(Question::Replay(wanted), move |answer| {
        let Some(theatre) = theatre.upgrade() else { return };
        match answer {
            Ok(Answer::Replay(news)) => theatre.borrow_mut().learn(*news),
            _ => theatre.borrow_mut().lose(),
        }
        update.force_update();
    });
}

fn view(bench: &BenchHandle, hand: &Hand, canvas: &yew::NodeRef) -> Html {
    let theatre = hand.theatre.borrow();
    let show = theatre.show();
    let busy = !theatre.is_lost() && show.is_none_or(|show| !show.done);
    let milliseconds = show.and_then(|show| show.milliseconds).unwrap_or_default();
    el("div")
        .test("replay")
        .set("data-busy", truth(busy))
        .put("data-milliseconds", describe::full(milliseconds))
        .with(watch(bench, &theatre))
        .with(conditions(bench))
        .with(scenes(bench, &theatre))
        .maybe(if theatre.autoplay { None } else { strip(bench, &theatre, hand) })
        .with(controls(bench, &theatre, hand))
        .with(chart(bench, &theatre, canvas))
        .with(el("p").class("hint").text(bench.words().replay().chart_means))
        .with(options(bench))
        .each(show.map(|show| surge::tables(bench, show)).into_iter().flatten())
        .html()
}

/// What to look for, and what that assumes.
fn watch(bench: &Bench, theatre: &Theatre) -> El {
    let words = bench.words();
    let texts = words.replay();
    let stale = bench.is_stale().then(|| el("p").class("stale").text(words.stale(&wrong_fields(bench))));
    let lines = theatre.show().and_then(|show| told(bench, &show.scenes));
    let waiting = if theatre.is_lost() { words.reckoner_lost } else { texts.working };
    let body = lines.unwrap_or_else(|| vec![el("p").text(waiting)]);
    let setup = &bench.setup;
    let played = Played {
        supply: describe::supply(setup, words),
        size: describe::size(setup, words),
        family: words.family(setup.plate.family()).noun,
        closing: (!setup.supply.is_direct()).then_some(bench.wish.closing),
    };
    el("div")
        .class("watch")
        .set("aria-live", "polite")
        .test("story")
        .maybe(stale)
        .each(body)
        .with(el("p").class("assumes").text(texts.assumes(&played)))
}

/// The stories, once both are known to their end.
fn told(bench: &Bench, scenes: &[Scene; 2]) -> Option<Vec<El>> {
    let words = bench.words();
    let texts = words.replay();
    let lamps = lamps(bench);
    let mut lines = Vec::new();
    let mut stories: [Option<Told>; 2] = [None, None];
    for (index, scene) in scenes.iter().enumerate() {
        let name = el("b").text(words.condition(scene.condition));
        if !scene.behind.as_ref()?.complete {
            return None;
        }
        if let Some(error) = scene.stopped() {
            let place = match error {
                SwitchOnError::FilamentMelts { group, lamp, .. } => Place { group, lamp },
                _ => Place::default(),
            };
            let text = texts.stopped(&error, &describe::lamp(&bench.setup, place, words));
            lines.push(el("p").class("caution").with(name).text(words.told(&text)));
            continue;
        }
        let told = tell(scene.run()?, &lamps)?;
        stories[index] = Some(told);
        lines.push(el("p").with(name).text(words.told(&texts.told(&told, words))));
    }
    if let [Some(one), Some(other)] = stories
        && alike(&one.story, &other.story)
    {
        lines.push(el("p").class("alike").text(texts.alike));
    }
    Some(lines)
}

/// The conditions to set beside the healthy one.
fn conditions(bench: &BenchHandle) -> El {
    let words = bench.words();
    let now = Ask::of(&bench.wish, &bench.setup, bench.condition).fault;
    let family = bench.setup.plate.family().conditions();
    // The first ones are in view before the row is dragged: those that a repairer fears most.
    let feared = [Condition::Shorted, Condition::Overloaded, Condition::Stalled];
    let first = feared.into_iter().filter(|condition| family.contains(condition));
    let rest = family.iter().copied().filter(|condition| !feared.contains(condition));
    let all = first.chain(rest);
    let choice = |condition: Condition| Choice {
        text: words.condition(condition).to_owned(),
        chosen: condition == now,
        testid: format!("beside-{}", condition.name()),
        click: wish(bench, Wish { fault: Some(condition), ..bench.wish }),
    };
    let all = all.filter(|condition| *condition != Condition::Healthy).map(choice).collect();
    el("div").class("one-line").with(choices(words.replay().beside, all))
}

/// How it plays, when the switch closes, how long.
fn options(bench: &BenchHandle) -> El {
    let words = bench.words();
    let texts = words.replay();
    let now = bench.wish;
    let slow = Choice {
        text: String::from(texts.slow),
        chosen: now.slow,
        testid: String::from("slow"),
        click: wish(bench, Wish { slow: !now.slow, ..now }),
    };
    let seconds = Ask::of(&now, &bench.setup, bench.condition).seconds;
    let span = |span: f64| Choice {
        text: words.numerals.quantity(span, "s"),
        chosen: span == seconds,
        testid: format!("span-{}", words.numerals.plain(span)),
        click: wish(bench, Wish { seconds: Some(span), ..now }),
    };
    let closing = |closing: Closing| Choice {
        text: texts.closing(closing).to_owned(),
        chosen: closing == now.closing,
        testid: String::from(match closing {
            Closing::Crest => "closing-crest",
            Closing::Zero => "closing-zero",
            Closing::Worst => "closing-worst",
        }),
        click: wish(bench, Wish { closing, ..now }),
    };
    let alternating = !bench.setup.supply.is_direct();
    let row =
        |name: &'static str, all: Vec<Choice>| el("div").with(el("h2").text(name)).with(choices(name, all));
    el("div")
        .class("options")
        .with(row(texts.speed, vec![slow]))
        .with(row(texts.span, SPANS.map(span).to_vec()))
        .maybe(alternating.then(|| row(texts.closes, Closing::ALL.map(closing).to_vec())))
}

/// A click that changes what is wanted.
pub(super) fn wish(bench: &BenchHandle, wish: Wish) -> yew::Callback<yew::MouseEvent> {
    send(bench, Msg::Wish(wish))
}
