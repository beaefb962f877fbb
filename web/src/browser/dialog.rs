//! Editors as dialogs: over the page on a phone, beside it on a wide screen.

use web_sys::wasm_bindgen::JsCast;
use web_sys::{Element, HtmlDialogElement, HtmlElement};

use super::window::{Listener, document};

/// Width from which an editor stands beside the loop, as in static/frame.css.
const WIDE: f64 = 860.0;

/// Opens a dialog; calls `closed` when the person closes it by a key or a gesture. Closes when dropped.
#[derive(Debug)]
pub struct Opened {
    dialog: HtmlDialogElement,
    listener: Option<Listener>,
    /// What had the keyboard before.
    before: Option<HtmlElement>,
}

impl Opened {
    /// Opens it.
    pub fn new(element: &Element, closed: impl Fn() + 'static) -> Option<Self> {
        let dialog: HtmlDialogElement = element.clone().dyn_into().ok()?;
        let before = document()?.active_element().and_then(|element| element.dyn_into().ok());
        if super::window::width() < WIDE {
            dialog.show_modal().ok()?;
        } else {
            dialog.show();
        }
        let listener = Listener::new(dialog.clone().into(), "close", move |_| closed());
        Some(Self { dialog, listener, before })
    }
}

impl Drop for Opened {
    fn drop(&mut self) {
        // Closing by program is no news to the program.
        drop(self.listener.take());
        if self.dialog.open() {
            self.dialog.close();
        }
        // The dialog has left the document by now, and the keyboard with it; unless the person has gone elsewhere.
        let nowhere = document()
            .and_then(|document| document.active_element())
            .is_none_or(|now| now.tag_name() == "BODY");
        if let Some(before) = self.before.take().filter(|_| nowhere) {
            let _ = before.focus();
        }
    }
}
