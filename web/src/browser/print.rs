//! The printer.

/// Opens the browser's own sheet for printing; nothing where there is none.
pub fn print() {
    if let Some(window) = web_sys::window() {
        let _ = window.print();
    }
}
