//! What static/fresh.js does for the page: files for use without a network, new versions, storage that lasts.

use web_sys::Event;

/// A new version is ready.
pub const NEW: &str = "lampladder-new";
/// The page has been drawn.
pub const STARTED: &str = "lampladder-started";
/// Take the new version over, and load the page anew.
pub const USE_NEW: &str = "lampladder-use-new";
/// Something lies in the storage that a person would miss.
pub const KEPT: &str = "lampladder-kept";

/// Says one of these to it.
pub fn say(name: &str) {
    if let (Some(window), Ok(event)) = (web_sys::window(), Event::new(name)) {
        let _ = window.dispatch_event(&event);
    }
}

/// Whether a new version was ready before the page began to listen.
pub fn is_ready() -> bool {
    let root = web_sys::window().and_then(|window| window.document()?.document_element());
    root.is_some_and(|root| root.has_attribute("data-new"))
}
