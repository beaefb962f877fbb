//! What lamp and meter show, and what that means: one sentence, the readings, then weights, figures, what to read next
//! and what has been kept.

use std::rc::Rc;

use lampladder_core::band::Band;
use lampladder_core::diagnosis::{Advice, Diagnosis, Ranked};
use lampladder_core::readings::{Behaviour, Contradiction, Kind, MOST_DEVIATIONS, Response, Rule};
use yew::{Html, Properties, function_component, html, use_effect_with, use_state};

use super::advice::wrong_fields;
use super::seen_log::{deeds, log};
use super::seen_next::{next, next_line};
use super::seen_sheet::sheet;
use crate::bench::{Bench, BenchHandle, Msg};
use crate::browser::reckoner::{self, Lost};
use crate::describe::{self, full};
use crate::doubt::is_bare;
use crate::log::Verdict;
use crate::parts::el::{El, drawing, el, truth};
use crate::parts::svg::n;
use crate::parts::table::{row_head, table, whole};
use crate::reckoner::diagnosis::{News, Outcome, Quantity, Taken};
use crate::reckoner::{Answer, Ask, Subject};
use crate::seen::Deed;
use crate::words::seen::{Clash, Sentence};

/// The panel.
pub fn seen(bench: &BenchHandle) -> El {
    el("section")
        .class("seen")
        .set("aria-label", bench.words().seen().title)
        .node(html! { <Reader bench={bench.clone()} /> })
}

/// What the reader gets.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct ReaderProps {
    /// The state.
    pub bench: BenchHandle,
}

/// The newest answer, and the question that it is to.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Heard {
    taken: Taken,
    news: Result<Box<News>, Lost>,
}

impl Heard {
    fn outcome(&self) -> Option<&Outcome> {
        self.news.as_ref().ok().map(|news| &news.outcome)
    }

    pub(super) fn diagnosis(&self) -> Option<&Diagnosis> {
        match self.outcome()? {
            Outcome::Told { diagnosis, .. } => Some(diagnosis),
            _ => None,
        }
    }

    /// What the readings come to, for the log.
    pub(super) fn verdict(&self) -> Option<Verdict> {
        let diagnosis = self.diagnosis()?;
        let leader = diagnosis.ranking.first()?;
        Some(Verdict { advice: diagnosis.advice, leader: leader.condition, weight: leader.weight })
    }
}

/// The reader: it asks the reckoner after every change.
#[function_component]
pub fn Reader(props: &ReaderProps) -> Html {
    let bench = &props.bench;
    let heard = use_state(|| None::<Rc<Heard>>);
    let taken = bench.seen.taken(&bench.setup);
    {
        let heard = heard.setter();
        use_effect_with(taken.clone(), move |taken| {
            let taken = taken.clone();
            reckoner::ask(Ask::Diagnosis(taken.clone()), move |answer| {
                let news = match answer {
                    Ok(Answer::Diagnosis(news)) => Ok(news),
                    _ => Err(Lost),
                };
                heard.set(Some(Rc::new(Heard { taken: taken.clone(), news })));
            });
            || reckoner::forget(Subject::Diagnosis)
        });
    }
    {
        let dispatcher = bench.dispatcher();
        use_effect_with((), move |()| dispatcher.dispatch(Msg::Seen(Deed::WantLog)));
    }
    view(bench, heard.as_deref(), &taken)
}

fn view(bench: &BenchHandle, heard: Option<&Heard>, taken: &Taken) -> Html {
    let busy = heard.is_none_or(|heard| heard.taken != *taken);
    let milliseconds = heard.and_then(|heard| heard.news.as_ref().ok()).map_or(0.0, |news| news.milliseconds);
    let told = heard.and_then(Heard::outcome);
    let root = el("div")
        .test("seen")
        .set("data-busy", truth(busy))
        .put("data-milliseconds", full(milliseconds))
        .each(answer(bench, heard, busy))
        .each(sheet(bench, &doubts(bench, told), deeds(bench, heard.filter(|_| !busy))));
    let root = match told {
        Some(Outcome::Told { diagnosis, numbers }) => root.with(
            el("div")
                .class(if busy { "told is-old" } else { "told" })
                .with(weights(bench, diagnosis))
                .with(figures(bench, numbers))
                .with(next(bench, diagnosis)),
        ),
        _ => root.with(el("div").class("told")),
    };
    root.with(log(bench)).html()
}

/// The sentence to act on, and what it rests on.
fn answer(bench: &Bench, heard: Option<&Heard>, busy: bool) -> [El; 2] {
    let words = bench.words();
    let texts = words.seen();
    let line = el("p").set("aria-live", "polite").test("verdict").set("data-old", truth(busy));
    let stale = bench.is_stale().then(|| el("p").class("stale").text(words.stale(&wrong_fields(bench))));
    let left_out = (!bench.seen.faults.is_empty()).then(|| left_out(bench));
    let because = el("div").class("because").test("because").maybe(stale).maybe(left_out);
    let Some(heard) = heard else { return [line.class("verdict").text(texts.working), because] };
    let Some(outcome) = heard.outcome() else {
        return [line.class("verdict").text(words.reckoner_lost), because];
    };
    let sentence = sentence(bench, outcome, &heard.taken);
    let (deed, why) = texts.sentence(&sentence, words);
    let (class, mark) = match sentence {
        Sentence::GoOn(..) => ("verdict is-on", "go-on"),
        Sentence::Stop(..) | Sentence::NothingToCompare => ("verdict is-off", "stop"),
        _ => ("verdict", "measure-first"),
    };
    let line = line.class(class).set("data-advice", mark).with(el("b").text(deed)).text(" ").text(why);
    let line = match heard.diagnosis().and_then(|diagnosis| diagnosis.ranking.first()) {
        Some(leader) => {
            line.set("data-leader", leader.condition.name()).put("data-weight", full(leader.weight))
        }
        None => line,
    };
    let clashes = match outcome {
        Outcome::Contradicts(all) => all.as_slice(),
        _ => &[],
    };
    let clash = |one: &Contradiction| {
        el("p").class("clash").test("clash").text(texts.clash(&clash(bench, one, &heard.taken)))
    };
    let because = because
        .each(clashes.iter().map(clash))
        .maybe(heard.diagnosis().and_then(|diagnosis| next_line(bench, diagnosis)))
        .with(assumes(bench));
    [line, because]
}

fn left_out(bench: &Bench) -> El {
    let words = bench.words();
    let names: Vec<&str> = bench.seen.faults.iter().map(|(slot, _)| words.slot(*slot)).collect();
    el("p").class("left-out").test("left-out").text(words.seen().left_out(&names.join(", ")))
}

fn assumes(bench: &Bench) -> El {
    let words = bench.words();
    let spec = &bench.seen.spec;
    let plain = |value| words.numerals.plain(value);
    let meter = words.seen().meter_line(&plain(spec.percent), &plain(spec.digits), &plain(spec.counts));
    let bench_line = words.assumes(&describe::assumed(&bench.setup, words));
    let meter_line = words.seen().assumes(&meter, spec.response == Response::Averaging);
    el("p").class("assumes").text(bench_line).text(" ").text(meter_line)
}

fn sentence(bench: &Bench, outcome: &Outcome, taken: &Taken) -> Sentence {
    let diagnosis = match outcome {
        Outcome::Contradicts(_) => return Sentence::Contradicts,
        Outcome::NothingToCompare => return Sentence::NothingToCompare,
        Outcome::Told { diagnosis, .. } => diagnosis,
    };
    let read = taken.numbers.iter().flatten().next().is_some();
    if !read && taken.look.is_none() && taken.behaviour.is_none() {
        return Sentence::Nothing;
    }
    if !diagnosis.explained {
        return Sentence::Unexplained;
    }
    let said = |one: &Ranked| (one.condition, share(bench, one.weight));
    let Some(first) = diagnosis.ranking.first() else { return Sentence::Nothing };
    let second = diagnosis.ranking.get(1).unwrap_or(first);
    match diagnosis.advice {
        Advice::GoOn => Sentence::GoOn(first.condition, share(bench, first.weight)),
        Advice::Stop => Sentence::Stop(first.condition, share(bench, first.weight)),
        _ if taken.behaviour == Some(Behaviour::Pulsing) => Sentence::Pulses,
        _ => Sentence::Undecided([said(first), said(second)]),
    }
}

/// A weight as text: no more is known than a per cent, and nothing is certain.
pub(super) fn share(bench: &Bench, weight: f64) -> String {
    bench.words().numerals.percent(weight.clamp(0.0, 0.99))
}

/// A number of which about a hundredth is known.
pub(super) fn near(bench: &Bench, value: f64, unit: &str) -> String {
    bench.words().numerals.value(&Band { value, low: value * 0.99, high: value * 1.01 }, unit)
}

fn clash(bench: &Bench, one: &Contradiction, taken: &Taken) -> Clash {
    let unit = match one.rule {
        Rule::RealWithinApparent | Rule::PowersAgree => "W",
        Rule::CurrentsAgree | Rule::GlowAgrees => "A",
        _ => "V",
    };
    let read = |kind: Kind| Some(near(bench, taken.numbers[kind as usize]?, "V"));
    let parts = read(Kind::BankVolts).zip(read(Kind::LoadVolts)).map(<[String; 2]>::from);
    Clash {
        rule: one.rule,
        left: near(bench, one.left, unit),
        right: near(bench, one.right, unit),
        margin: bench.words().numerals.about(MOST_DEVIATIONS * one.deviation, unit),
        parts,
        unit: one.looks_like_a_missing_unit,
    }
}

/// Readings whose unit has to be asked for: those that are doubtful by themselves, and a bare number that others
/// contradict a thousandfold.
fn doubts(bench: &Bench, told: Option<&Outcome>) -> Vec<Kind> {
    let mut doubts = Vec::new();
    if let Some(Outcome::Contradicts(all)) = told {
        for one in all.iter().filter(|one| one.looks_like_a_missing_unit) {
            let kind = match one.rule {
                Rule::CurrentsAgree | Rule::GlowAgrees => Kind::Amps,
                Rule::PowersAgree | Rule::RealWithinApparent => Kind::LoadWatts,
                _ => continue,
            };
            if is_bare(&bench.seen.sheet.numbers[kind as usize]) {
                doubts.push(kind);
            }
        }
    }
    doubts
}

/// Conditions lighter than this share a row.
const LIGHT: f64 = 0.01;

/// The conditions with their weights: a word, a bar and a number.
fn weights(bench: &Bench, diagnosis: &Diagnosis) -> El {
    let words = bench.words();
    let texts = words.seen();
    let row = |name: &'static str, testid: &'static str, weight: f64| {
        let bar = drawing("0 0 100 8")
            .class("bar")
            .set("preserveAspectRatio", "none")
            .with(el("rect").class("bar-all").set("width", "100").set("height", "8"))
            .with(el("rect").class("bar-part").put("width", n(weight * 100.0)).set("height", "8"));
        el("li")
            .put("data-testid", format!("weight-{testid}"))
            .put("data-value", full(weight))
            .with(el("b").text(name))
            .with(el("span").text(texts.weight(weight)))
            .with(el("i").text(share(bench, weight)))
            .with(bar)
    };
    let heavy = diagnosis.ranking.iter().filter(|one| one.weight >= LIGHT);
    let light: f64 = diagnosis.ranking.iter().filter(|one| one.weight < LIGHT).map(|one| one.weight).sum();
    let rows = heavy.map(|one| row(words.condition(one.condition), one.condition.name(), one.weight));
    el("div")
        .with(el("h2").text(texts.weights))
        .with(
            el("ul").class("weights").each(rows).maybe((light > 0.0).then(|| row(texts.rest, "rest", light))),
        )
        .with(el("p").class("hint").text(texts.weights_mean))
}

fn figures(bench: &Bench, numbers: &[(Quantity, Band)]) -> El {
    let words = bench.words();
    let texts = words.seen();
    let body = el("div").with(el("h2").text(texts.numbers));
    if numbers.is_empty() {
        return body.with(el("p").class("hint").text(texts.numbers_need));
    }
    let rows = numbers.iter().map(|(quantity, band)| {
        let (unit, name) = match quantity {
            Quantity::Amps => ("A", "number-amps"),
            Quantity::LoadWatts => ("W", "number-watts"),
            Quantity::PowerFactor => ("", "number-power-factor"),
            Quantity::LoadVolts => ("V", "number-load-volts"),
            Quantity::LoadOhms => ("Ω", "number-load-ohms"),
            Quantity::FullAmps => ("A", "number-full-amps"),
            Quantity::FullWatts => ("W", "number-full-watts"),
        };
        el("tr")
            .test(name)
            .put("data-value", full(band.value))
            .put("data-low", full(band.low))
            .put("data-high", full(band.high))
            .with(row_head(texts.quantity(*quantity)))
            .with(whole(words.numerals.value(band, unit)))
            .with(whole(words.numerals.range(band, unit)))
    });
    let heads = [texts.figure, texts.value, words.table.band];
    body.with(table(&heads, rows.collect()).test("numbers"))
}
