//! Whether the rest of the program has been fetched. `xtask stamp` cuts the release page's program in two and adds
//! static/rest.js, which fetches the second part and tells how far it is by the document's `data-rest`. A page that is
//! not cut has no such attribute, and is whole.

use super::window::{root, say};

/// How far the rest is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Arrival {
    /// On its way.
    Coming,
    /// Here.
    Whole,
    /// There was no connection.
    Lost,
}

/// The window's event when that changes.
pub const EVENT: &str = "rest";
/// The window's event that asks for it again.
const AGAIN: &str = "rest-again";

/// How far it is.
pub fn arrival() -> Arrival {
    match root().and_then(|root| root.get_attribute("data-rest")).as_deref() {
        Some("coming") => Arrival::Coming,
        Some("lost") => Arrival::Lost,
        _ => Arrival::Whole,
    }
}

/// Asks for it once more.
pub fn ask_again() {
    say(AGAIN);
}
