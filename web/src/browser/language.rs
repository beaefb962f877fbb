//! In which language the page is read: the document's `lang`, which static/language.js sets, and the texts that are
//! fetched for it.

use std::cell::RefCell;

use wasm_bindgen::JsCast;
use wasm_bindgen_futures::{JsFuture, spawn_local};
use web_sys::{Response, Window};

use super::window::{Listener, document, root};
use crate::words::{self, Words};

/// The event that tells of another choice.
const REWORD: &str = "reword";

thread_local! {
    /// What has been read so far: a language that comes back is the very same words.
    static READ: RefCell<Vec<&'static Words>> = const { RefCell::new(Vec::new()) };
}

/// The language that is asked for.
pub fn tag() -> String {
    root().and_then(|root| root.get_attribute("lang")).unwrap_or_default()
}

/// Whether another language is asked for than this one.
pub fn is_other_than(tag: &str) -> bool {
    let asked = self::tag();
    !asked.is_empty() && asked != tag
}

/// Hands over the texts of the language that is asked for; nothing where they cannot be had.
pub fn speak(then: impl FnOnce(Option<&'static Words>) + 'static) {
    spawn_local(async move {
        let tag = tag();
        let known = READ.with_borrow(|read| read.iter().copied().find(|words| words.tag == tag));
        let words = match known {
            Some(words) => Some(words),
            None => fetch(&name(FIRST, &tag)).await.and_then(|texts| words::read(texts).ok()),
        };
        if let Some(words) = words.filter(|_| known.is_none()) {
            READ.with_borrow_mut(|read| read.push(words));
        }
        // Meanwhile another may have been chosen, whose own answer is on its way.
        if tag == self::tag() {
            then(words);
        }
    });
}

/// Completes the words by the texts of the panels beyond the first screen; tells whether they could be had.
pub fn complete(words: &'static Words, then: impl FnOnce(bool) + 'static) {
    spawn_local(async move {
        let texts = fetch(&name(LATER, words.tag)).await;
        then(texts.is_some_and(|texts| words.complete(texts).is_ok()));
    });
}

/// How the page names the two files of a language.
const FIRST: &str = "words-";
const LATER: &str = "later-";

fn name(part: &str, tag: &str) -> String {
    String::from("meta[name=") + part + tag + "]"
}

async fn fetch(meta: &str) -> Option<String> {
    let window: Window = web_sys::window()?;
    let meta = document()?.query_selector(meta).ok()??;
    let asked = window.fetch_with_str(&meta.get_attribute("content")?);
    let response: Response = JsFuture::from(asked).await.ok()?.dyn_into().ok()?;
    if !response.ok() {
        return None;
    }
    JsFuture::from(response.text().ok()?).await.ok()?.as_string()
}

/// Calls `then` at every choice of a language, until dropped.
pub fn listen(mut then: impl FnMut() + 'static) -> Option<Listener> {
    Listener::on_window(REWORD, move |_| then())
}

/// Names the window in the language that is read.
pub fn name_window(title: &str) {
    if let Some(document) = document() {
        document.set_title(title);
    }
}
