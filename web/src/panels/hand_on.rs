//! Handing a bench on to a colleague: link, code, card and files. Nothing of it needs a server.

use std::rc::Rc;

use yew::{Callback, Html, Properties, UseStateHandle, function_component, html, use_effect_with, use_state};

use super::advice::wrong_fields;
use super::hand_on_card::card;
use super::hand_on_code::code;
use super::hand_on_files::{Told, files};
use crate::bench::{BenchHandle, Msg};
use crate::browser::{fragment, print, reckoner, share};
use crate::climb::equipment;
use crate::parts::el::{El, button, el, truth};
use crate::reckoner::links::{self, Link, News, Wanted};
use crate::reckoner::{Answer, Ask, Subject};
use crate::seen::Deed;
use lampladder_core::link;

/// Id of the field with the link.
const LINK: &str = "hand-on-link";
/// Some programs cut what is longer (common practice, no source).
const LONG: usize = 2000;

/// The panel.
pub fn hand_on(bench: &BenchHandle) -> El {
    el("section")
        .class("hand-on")
        .set("aria-label", bench.words().hand_on().title)
        .node(html! { <HandOn bench={bench.clone()} /> })
}

/// What the panel gets.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct HandOnProps {
    /// The state.
    pub bench: BenchHandle,
}

/// What goes along.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
struct Along {
    ladder: bool,
    log: bool,
}

/// The newest link.
#[derive(Debug, Clone, PartialEq)]
enum Made {
    Link(Rc<Link>),
    Lost,
}

/// The panel with what it remembers.
#[function_component]
pub fn HandOn(props: &HandOnProps) -> Html {
    let bench = &props.bench;
    let along = use_state(|| Along { ladder: true, log: false });
    let made = use_state(|| None::<Made>);
    let copied = use_state(|| None::<bool>);
    let told = use_state(|| None::<Told>);
    let records = if along.log { bench.seen.log.records.clone() } else { Rc::default() };
    let ladder = along
        .ladder
        .then(|| (link::encode_stock(&bench.drawer.stock), bench.climb.kept(&equipment(&bench.setup))));
    {
        let (made, copied) = (made.setter(), copied.setter());
        use_effect_with((bench.setup.clone(), ladder, records), move |(setup, ladder, records)| {
            let wanted = links::Bench {
                address: fragment::address(),
                setup: link::encode(setup),
                ladder: ladder.clone(),
                log: records.iter().map(|record| (**record).clone()).collect(),
            };
            copied.set(None);
            reckoner::ask(Ask::Links(Wanted::Link(wanted)), move |answer| {
                made.set(Some(match answer {
                    Ok(Answer::Links(news)) => match *news {
                        News::Link(link) => Made::Link(Rc::new(link)),
                        _ => Made::Lost,
                    },
                    _ => Made::Lost,
                }));
            });
            || reckoner::forget(Subject::Link)
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with((), move |()| dispatcher.dispatch(Msg::Seen(Deed::WantLog)));
    }
    view(bench, &along, made.as_ref(), &copied, &told)
}

fn view(
    bench: &BenchHandle,
    along: &UseStateHandle<Along>,
    made: Option<&Made>,
    copied: &UseStateHandle<Option<bool>>,
    told: &UseStateHandle<Option<Told>>,
) -> Html {
    let words = bench.words();
    let texts = words.hand_on();
    let tick = |testid: &'static str, text: String, on: bool, then: Along| {
        let along = along.setter();
        button("tick", testid, Callback::from(move |_| along.set(then)))
            .set("role", "checkbox")
            .set("aria-checked", truth(on))
            .with(el("i").set("aria-hidden", "true").text(if on { "✓" } else { "" }))
            .with(el("span").text(text))
    };
    let ladder = tick(
        "with-ladder",
        texts.with_ladder.to_owned(),
        along.ladder,
        Along { ladder: !along.ladder, ..**along },
    );
    let log = tick(
        "with-log",
        texts.with_log(bench.seen.log.records.len()),
        along.log,
        Along { log: !along.log, ..**along },
    );
    let stale = bench.is_stale().then(|| el("p").class("stale").text(words.stale(&wrong_fields(bench))));
    let link = match made {
        Some(Made::Link(link)) => Some(&**link),
        _ => None,
    };
    let made = match made {
        None => vec![el("p").class("hint").text(texts.working)],
        Some(Made::Lost) => vec![el("p").class("error").test("hand-on-lost").text(words.reckoner_lost)],
        Some(Made::Link(link)) => vec![link_part(bench, link, copied), code(bench, link)],
    };
    el("div")
        .test("hand-on")
        .with(el("h2").text(texts.title))
        .with(el("p").class("hint").text(texts.means))
        .maybe(stale)
        .with(ladder)
        .with(log)
        .with(el("div").class("made").each(made))
        .with(print_part(bench))
        .with(files(bench, told))
        .with(card(bench, link.and_then(|link| link.code.as_ref())))
        .html()
}

/// The link with what can be done with it.
fn link_part(bench: &BenchHandle, link: &Link, copied: &UseStateHandle<Option<bool>>) -> El {
    let texts = bench.words().hand_on();
    let part = el("div").class("link-part").with(el("label").set("for", LINK).text(texts.link));
    let Some(text) = &link.text else {
        return part.with(el("p").class("error").test("link-too-long").text(texts.too_long));
    };
    let field =
        el("textarea").set("id", LINK).set("readonly", "").set("rows", "4").test("link").value(text.clone());
    let copy = {
        let (text, copied) = (text.clone(), copied.setter());
        let click = Callback::from(move |_| {
            let copied = copied.clone();
            share::copy(&text, move |done| {
                if !done {
                    share::select(LINK);
                }
                copied.set(Some(done));
            });
        });
        button("done", "copy", click).text(texts.copy)
    };
    let shared = share::can_share().then(|| {
        let (text, title) = (text.clone(), bench.words().title);
        button("offer", "share", Callback::from(move |_| share::share(title, &text))).text(texts.share)
    });
    let said = copied.map(|done| el("span").text(if done { texts.copied } else { texts.not_copied }));
    let long = (text.len() > LONG).then(|| el("p").class("hint").text(texts.long(text.len())));
    part.with(field)
        .with(el("div").class("deeds").with(copy).maybe(shared))
        .with(el("p").class("hint").set("role", "status").test("copied").maybe(said))
        .maybe(long)
}

/// The card's button; the card itself is drawn on paper only.
fn print_part(bench: &BenchHandle) -> El {
    let texts = bench.words().hand_on();
    let none =
        bench.climb.rungs().is_none().then(|| el("p").class("told").test("no-rungs").text(texts.no_rungs));
    el("div")
        .with(el("h2").text(texts.card))
        .with(el("p").class("hint").text(texts.card_means))
        .maybe(none)
        .with(button("offer", "print", Callback::from(|_| print::print())).text(texts.print))
}
