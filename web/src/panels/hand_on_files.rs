//! Kept readings in files: as a table for a spreadsheet, as JSON for another phone, and back.

use yew::{Callback, InputEvent, UseStateHandle, UseStateSetter};

use crate::bench::{Bench, BenchHandle, Msg};
use crate::browser::download::{self, Chosen};
use crate::browser::reckoner::ask;
use crate::parts::el::{El, button, el};
use crate::reckoner::links::records::{Unread, Wrong};
use crate::reckoner::links::{News, Wanted};
use crate::reckoner::{Answer, Ask};
use crate::seen::Deed;

/// Id of the input that files are chosen in.
const INPUT: &str = "hand-on-file";
/// Largest file that is read, bytes: some five thousand readings.
const MOST_BYTES: f64 = 2e6;

/// What became of the last file.
#[derive(Debug, Clone, PartialEq)]
pub(super) enum Told {
    Saved,
    NotSaved,
    Lost,
    Large(f64),
    NoFile,
    Unread(Unread),
    Read { found: usize, refused: usize, first: Option<(usize, Wrong)> },
}

/// The part of the panel.
pub(super) fn files(bench: &BenchHandle, told: &UseStateHandle<Option<Told>>) -> El {
    let texts = bench.words().hand_on();
    let none = bench.seen.log.records.is_empty();
    let save = |testid: &'static str, text: &'static str, kind: Kind| {
        let (bench, told) = (bench.clone(), told.setter());
        let save = button("offer", testid, Callback::from(move |_| save(&bench, kind, &told))).text(text);
        if none { save.set("disabled", "") } else { save }
    };
    let input = {
        let (bench, told) = (bench.clone(), told.setter());
        let chosen = Callback::from(move |event: InputEvent| {
            let (bench, told) = (bench.clone(), told.clone());
            download::read(&event, MOST_BYTES, move |chosen| read(&bench, chosen, &told));
        });
        // The button opens it: on its own it speaks the browser's language, not the page's.
        el("input")
            .set("id", INPUT)
            .set("type", "file")
            .set("accept", ".json,application/json")
            .set("hidden", "")
            .test("file")
            .typed(chosen)
    };
    let read = button("offer", "read-json", Callback::from(|_| download::choose(INPUT))).text(texts.read);
    el("div")
        .with(el("h2").text(texts.readings))
        .maybe(none.then(|| el("p").class("hint").text(texts.none)))
        // Above the buttons: what stands at the end of the page is under the list of panels.
        .with(el("div").set("role", "status").test("file-told").each(lines(bench, told.as_ref())))
        .with(
            el("div")
                .class("deeds")
                .with(save("save-csv", texts.csv, Kind::Table))
                .with(save("save-json", texts.json, Kind::File))
                .with(read)
                .with(input),
        )
}

fn lines(bench: &Bench, told: Option<&Told>) -> Vec<El> {
    let words = bench.words();
    let texts = words.hand_on();
    let megabytes = |bytes: f64| words.numerals.fixed(bytes / 1e6, 0);
    let good = |text: String| vec![el("p").class("hint").text(text)];
    let bad = |text: String| vec![el("p").class("error").test("file-error").text(text)];
    match told {
        None => Vec::new(),
        Some(Told::Saved) => good(texts.saved.to_owned()),
        Some(Told::NotSaved) => bad(texts.not_saved.to_owned()),
        Some(Told::Lost) => bad(words.reckoner_lost.to_owned()),
        Some(Told::Large(bytes)) => bad(texts.large(&megabytes(*bytes), &megabytes(MOST_BYTES))),
        Some(Told::NoFile) => bad(texts.no_file.to_owned()),
        Some(Told::Unread(why)) => bad(texts.unread(*why).to_owned()),
        Some(Told::Read { found: 0, first: None, .. }) => good(texts.empty_file.to_owned()),
        Some(Told::Read { refused, first, .. }) => {
            let adopted = bench.seen.log.adopted;
            let mut lines =
                adopted.map_or_else(Vec::new, |adopted| good(texts.added(adopted.added, adopted.known)));
            if let Some((place, wrong)) = first {
                lines.extend(bad(texts.refused(*refused, *place, wrong, words)));
            }
            lines
        }
    }
}

#[derive(Clone, Copy)]
enum Kind {
    Table,
    File,
}

fn save(bench: &Bench, kind: Kind, told: &UseStateSetter<Option<Told>>) {
    let records = bench.seen.log.records.iter().map(|record| (**record).clone()).collect();
    let (wanted, name, media) = match kind {
        Kind::Table => (Wanted::Table(records), "lampladder-readings.csv", "text/csv"),
        Kind::File => (Wanted::File(records), "lampladder-readings.json", "application/json"),
    };
    let told = told.clone();
    ask(Ask::Links(wanted), move |answer| {
        let text = match answer {
            Ok(Answer::Links(news)) => match *news {
                News::Text(text) => Some(text),
                _ => None,
            },
            _ => None,
        };
        told.set(Some(match text {
            Some(text) if download::save(name, media, &text) => Told::Saved,
            Some(_) => Told::NotSaved,
            None => Told::Lost,
        }));
    });
}

fn read(bench: &BenchHandle, chosen: Chosen, told: &UseStateSetter<Option<Told>>) {
    let text = match chosen {
        Chosen::Text(text) => text,
        Chosen::Large(bytes) => return told.set(Some(Told::Large(bytes))),
        Chosen::Unreadable => return told.set(Some(Told::NoFile)),
    };
    let (dispatcher, told) = (bench.dispatcher(), told.clone());
    ask(Ask::Links(Wanted::Read(text)), move |answer| {
        let news = match answer {
            Ok(Answer::Links(news)) => Some(*news),
            _ => None,
        };
        told.set(Some(match news {
            Some(News::Read(Ok(found))) => {
                let told =
                    Told::Read { found: found.records.len(), refused: found.refused, first: found.first };
                dispatcher.dispatch(Msg::Seen(Deed::Adopt(found.records, false)));
                told
            }
            Some(News::Read(Err(why))) => Told::Unread(why),
            _ => Told::Lost,
        }));
    });
}
