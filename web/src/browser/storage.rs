//! What is kept on the phone (localStorage) and for this visit (sessionStorage).
//!
//! Both belong to a whole host. The names have the page's folder in them, so that two copies of the page under two paths
//! leave each other alone; what was kept under the bare names, before they had it, is still read.

use std::cell::Cell;

use js_sys::Reflect;
use web_sys::{Event, Storage};

/// Name of the kept set-up.
pub const SETUP: &str = "lampladder.setup";
/// Name of the meter.
pub const METER: &str = "lampladder.meter";
/// Name of the kept lamps.
pub const STOCK: &str = "lampladder.stock";
/// Name of the kept position on the ladder.
pub const CLIMB: &str = "lampladder.climb";
/// Name of the chosen light.
pub const THEME: &str = "lampladder.theme";
/// Name of the accepted cautions, for this visit.
pub const ACCEPTED: &str = "lampladder.accepted";
/// Name of what is typed and not kept, for this visit.
pub const VISIT: &str = "lampladder.visit";
/// Name of the sign that something has been kept: it goes when the browser empties the storage.
const SIGN: &str = "lampladder.sign";

/// The browser did not keep it: storage is full or forbidden.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct NotKept;

thread_local! {
    /// Whether [`SIGN`] has been put there by this window.
    static SIGNED: Cell<bool> = const { Cell::new(false) };
}

fn lasting() -> Option<Storage> {
    web_sys::window()?.local_storage().ok()?
}

fn visit() -> Option<Storage> {
    web_sys::window()?.session_storage().ok()?
}

/// The path of the folder that the page lies in.
fn folder() -> String {
    let path = web_sys::window().and_then(|window| window.location().pathname().ok()).unwrap_or_default();
    path.rfind('/').map_or(path.clone(), |end| path[..=end].to_owned())
}

fn scoped(name: &str) -> String {
    format!("{name} {}", folder())
}

/// What was kept under a name.
pub fn read(name: &str) -> Option<String> {
    let storage = lasting()?;
    let kept = |name: &str| storage.get_item(name).ok()?;
    kept(&scoped(name)).or_else(|| kept(name))
}

/// Keeps a text.
///
/// # Errors
/// [`NotKept`].
pub fn write(name: &str, text: &str) -> Result<(), NotKept> {
    let storage = lasting().ok_or(NotKept)?;
    let put = |name: &str, text: &str| storage.set_item(&scoped(name), text).map_err(|_| NotKept);
    if !SIGNED.get() {
        SIGNED.set(put(SIGN, "1").is_ok());
    }
    put(name, text)
}

/// Whether the browser has emptied the storage since this window kept something in it; the next question is about the
/// time from now on.
pub fn was_emptied() -> bool {
    let gone = SIGNED.get() && lasting().is_some_and(|storage| storage.get_item(&scoped(SIGN)) == Ok(None));
    if gone {
        SIGNED.set(false);
    }
    gone
}

/// The name under which another window of the page has just kept a text, and the text.
pub fn kept_elsewhere(event: &Event) -> Option<(String, String)> {
    let property = |name: &str| Reflect::get(event, &name.into()).ok()?.as_string();
    let key = property("key")?;
    let name = key.strip_suffix(&format!(" {}", folder()))?;
    Some((name.to_owned(), property("newValue")?))
}

/// What was kept for this visit.
pub fn read_for_visit(name: &str) -> Option<String> {
    visit()?.get_item(&scoped(name)).ok()?
}

/// Keeps a text for this visit. Nobody is told where that is refused: only a reload would miss it.
pub fn keep_for_visit(name: &str, text: &str) {
    if let Some(storage) = visit() {
        let _ = storage.set_item(&scoped(name), text);
    }
}
