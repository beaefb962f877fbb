//! What static/fresh.js does for the page: files for use without a network, new versions, storage that lasts.

use super::window::root;

/// A new version is ready.
pub const NEW: &str = "lampladder-new";
/// The page has been drawn.
pub const STARTED: &str = "lampladder-started";
/// Take the new version over, and load the page anew.
pub const USE_NEW: &str = "lampladder-use-new";
/// Something lies in the storage that a person would miss.
pub const KEPT: &str = "lampladder-kept";

pub use super::window::say;

/// Whether a new version was ready before the page began to listen.
pub fn is_ready() -> bool {
    root().is_some_and(|root| root.has_attribute("data-new"))
}
