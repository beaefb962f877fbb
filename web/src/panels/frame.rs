//! What stands around the panels: the header with the reminder that never leaves, the notes, the list of panels.

use yew::Callback;

use super::send;
use crate::bench::{BenchHandle, Msg, Note, Tab, Theme};
use crate::browser::{fresh, theme};
use crate::climb::Stand;
use crate::opening::Mine;
use crate::parts::el::{El, button, el, truth};
use crate::parts::picture;
use crate::start;
use crate::words::{LANGUAGES, fill};

/// Id of the button that brings the cautions back.
pub const CAUTIONS_BUTTON: &str = "open-cautions";

/// The header.
pub fn header(bench: &BenchHandle) -> El {
    let words = bench.words();
    let next = match bench.theme {
        Theme::Auto => Theme::Paper,
        Theme::Paper => Theme::Dusk,
        Theme::Dusk => Theme::Auto,
    };
    let light = words.theme(bench.theme);
    let wordmark = el("span").text("lamp").with(el("i").text("ladder"));
    el("header")
        .class("top")
        .with(el("h1").class("wordmark").with(picture::mark()).with(wordmark))
        .with(
            button("round", "theme", send(bench, Msg::Light(next)))
                .set("data-value", theme::name(bench.theme))
                .set("aria-label", light)
                .set("title", light)
                .with(picture::light(bench.theme)),
        )
        .with(language(bench))
        .with(
            button("warn", "open-cautions", send(bench, Msg::Cautions))
                .set("id", CAUTIONS_BUTTON)
                .with(picture::caution())
                .text(words.cautions),
        )
        .with(el("p").class("reminder").test("reminder").text(words.reminder))
}

/// The languages, each by its own name. What a choice does is static/language.js's business, which hears of it.
fn language(bench: &BenchHandle) -> El {
    let words = bench.words();
    let name = String::from(words.choose_language) + " " + words.tag;
    let option = |(tag, name): (&'static str, &'static str)| {
        let option = el("option").set("value", tag).set("lang", tag).text(name);
        if tag == words.tag { option.set("selected", "") } else { option }
    };
    let list = el("select")
        .test("language")
        .put("aria-label", name)
        .each(LANGUAGES.into_iter().zip(words.language).map(option));
    // A new list after a choice that came to nothing: the browser would go on showing that.
    let failed = bench.notes.contains(&Note::Wordless);
    let list = el("span").with(list.key(String::from(words.tag) + truth(failed)));
    el("span").class("round language").with(el("span").set("aria-hidden", "true").text(words.tag)).with(list)
}

/// The list of panels.
pub fn tabs(bench: &BenchHandle) -> El {
    const TABS: [(Tab, &str); 5] = [
        (Tab::Expect, "tab-expect"),
        (Tab::Ladder, "tab-ladder"),
        (Tab::Seen, "tab-seen"),
        (Tab::SwitchOn, "tab-switch-on"),
        (Tab::Curve, "tab-curve"),
    ];
    let words = bench.words();
    let list = el("nav").class("tabs").set("aria-label", words.panels).each(TABS.map(|(tab, testid)| {
        let tab_button = button("tab", testid, send(bench, Msg::Go(tab))).text(words.tab(tab));
        here(tab_button, tab == bench.tab)
    }));
    // Six names do not fit side by side on a small phone: the last one shows where there is room.
    let name = words.tab(Tab::HandOn);
    let hand_on = button("tab is-sign", "tab-hand-on", send(bench, Msg::Go(Tab::HandOn)))
        .set("aria-label", name)
        .set("title", name)
        .with(picture::hand_on())
        .with(el("span").text(name));
    list.with(here(hand_on, bench.tab == Tab::HandOn))
}

fn here(tab: El, here: bool) -> El {
    if here { tab.set("aria-current", "page") } else { tab }
}

/// What is to be told once: a bad link, nothing kept.
pub fn notes(bench: &BenchHandle) -> El {
    let words = bench.words();
    let note = |note: &Note| {
        let own = matches!(note, Note::FromLink | Note::LadderFromLink | Note::Elsewhere).then(start::mine);
        let own = own.filter(|own| *own != Mine::default());
        let use_kept = own.map(|own| {
            let text = if *note == Note::Elsewhere { words.use_elsewhere } else { words.use_kept };
            button("use", "use-kept", send(bench, Msg::Reclaim(Box::new(own)))).text(text)
        });
        let use_new = (*note == Note::New).then(|| {
            button("use", "use-new", Callback::from(|_| fresh::say(fresh::USE_NEW))).text(words.use_new)
        });
        let text = match note {
            Note::ReadingsFromLink(added, known) => {
                fill(words.note(*note), &[&added.to_string(), &known.to_string()])
            }
            Note::New if bench.climb.at > Stand::Lamps => words.new_on_ladder.to_owned(),
            _ => words.note(*note).to_owned(),
        };
        let close = button("close", "dismiss", send(bench, Msg::Dismiss(*note)))
            .set("aria-label", words.dismiss)
            .text("×");
        el("p")
            .class("note")
            .test("note")
            .with(el("span").text(text))
            .maybe(use_kept)
            .maybe(use_new)
            .with(close)
    };
    el("div").class("notes").set("role", "status").each(bench.notes.iter().map(note))
}
