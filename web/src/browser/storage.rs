//! What is kept on the phone (localStorage) and for this visit (sessionStorage).

use web_sys::Storage;

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

/// The browser did not keep it: storage is full or forbidden.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct NotKept;

fn lasting() -> Option<Storage> {
    web_sys::window()?.local_storage().ok()?
}

fn visit() -> Option<Storage> {
    web_sys::window()?.session_storage().ok()?
}

/// What was kept under a name.
pub fn read(name: &str) -> Option<String> {
    lasting()?.get_item(name).ok()?
}

/// Keeps a text.
///
/// # Errors
/// [`NotKept`].
pub fn write(name: &str, text: &str) -> Result<(), NotKept> {
    lasting().ok_or(NotKept)?.set_item(name, text).map_err(|_| NotKept)
}

/// Whether something was kept for this visit.
pub fn has_for_visit(name: &str) -> bool {
    visit().and_then(|storage| storage.get_item(name).ok()?).is_some()
}

/// Keeps a mark for this visit; where that is refused, the question comes again on the next load.
pub fn keep_for_visit(name: &str) {
    if let Some(storage) = visit() {
        let _ = storage.set_item(name, "1");
    }
}
