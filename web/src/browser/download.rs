//! Files: a text to be saved, and one that was chosen.

use js_sys::Array;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Blob, BlobPropertyBag, Event, FileReader, HtmlElement, HtmlInputElement, Url};

/// Lets the person save a text under a name. Whether the browser takes it.
pub fn save(name: &str, kind: &str, text: &str) -> bool {
    saved(name, kind, text).is_some()
}

fn saved(name: &str, kind: &str, text: &str) -> Option<()> {
    let document = web_sys::window()?.document()?;
    let what = BlobPropertyBag::new();
    what.set_type(kind);
    let blob = Blob::new_with_str_sequence_and_options(&Array::of1(&text.into()), &what).ok()?;
    let url = Url::create_object_url_with_blob(&blob).ok()?;
    let anchor: HtmlElement = document.create_element("a").ok()?.dyn_into().ok()?;
    let named = anchor.set_attribute("href", &url).and_then(|()| anchor.set_attribute("download", name));
    if named.is_ok() {
        anchor.click();
    }
    // The download has taken hold of it by then.
    let _ = Url::revoke_object_url(&url);
    named.ok()
}

/// What a person has chosen.
#[derive(Debug, Clone, PartialEq)]
pub enum Chosen {
    /// The text of the file.
    Text(String),
    /// It has more bytes than are read.
    Large(f64),
    /// It cannot be read.
    Unreadable,
}

/// Opens the browser's own list of files for the input with this id.
pub fn choose(id: &str) {
    let input: Option<HtmlElement> =
        web_sys::window().and_then(|window| window.document()?.get_element_by_id(id)?.dyn_into().ok());
    if let Some(input) = input {
        input.click();
    }
}

/// Reads the file that was chosen in the input that an event came from, if it has no more than so many bytes.
pub fn read(event: &Event, most_bytes: f64, done: impl Fn(Chosen) + 'static) {
    let Some(input) = event.target().and_then(|target| target.dyn_into::<HtmlInputElement>().ok()) else {
        return;
    };
    let Some(file) = input.files().and_then(|files| files.get(0)) else { return };
    // The same file can be chosen again.
    input.set_value("");
    if file.size() > most_bytes {
        return done(Chosen::Large(file.size()));
    }
    let Ok(reader) = FileReader::new() else { return done(Chosen::Unreadable) };
    let read = reader.clone();
    let finished = Closure::once_into_js(move || {
        let text = read.result().ok().and_then(|text| text.as_string());
        done(text.map_or(Chosen::Unreadable, Chosen::Text));
    });
    reader.set_onloadend(Some(finished.unchecked_ref()));
    let _ = reader.read_as_text(&file);
}
