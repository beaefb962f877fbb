//! The text of an input, and where the keyboard is.

use web_sys::wasm_bindgen::JsCast;
use web_sys::{Event, HtmlElement, HtmlInputElement};

/// The text of the input that an event came from.
pub fn text(event: &Event) -> Option<String> {
    Some(event.target()?.dyn_into::<HtmlInputElement>().ok()?.value())
}

/// Moves the keyboard to the element with this id.
pub fn focus(id: &str) {
    let element = web_sys::window()
        .and_then(|window| window.document()?.get_element_by_id(id)?.dyn_into::<HtmlElement>().ok());
    if let Some(element) = element {
        let _ = element.focus();
    }
}
