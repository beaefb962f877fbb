//! The cautions of static/index.html: they stand in front until accepted, and come back on request.
//!
//! The document's `data-stage` says which of the two is shown; the style sheets hide the other, and every language but
//! the document's.

use web_sys::Element;

use super::window::{document, root, to_top};

/// The element that the program is drawn in.
pub const APP: &str = "app";
/// The element for the button under the cautions.
pub const FOOT: &str = "cautions-foot";
/// The line that says that the program is starting.
const STARTING: &str = "starting";

/// An element of static/index.html.
pub fn element(id: &str) -> Option<Element> {
    document()?.get_element_by_id(id)
}

/// Id of the heading of the cautions, in the language that is read.
pub fn title() -> String {
    String::from("cautions-title-") + &super::language::tag()
}

/// Says that the program cannot start.
pub fn lost() {
    if let Some(line) = element(STARTING) {
        line.set_class_name("starting is-lost");
    }
}

/// Takes away the line that says that the program is starting.
pub fn started() {
    if let Some(line) = element(STARTING) {
        line.remove();
    }
}

/// Shows the cautions, or the bench.
pub fn show(cautions: bool) {
    let Some(root) = root() else { return };
    let stage = if cautions { "cautions" } else { "bench" };
    if root.get_attribute("data-stage").as_deref() != Some(stage) {
        let _ = root.set_attribute("data-stage", stage);
        to_top();
    }
}
