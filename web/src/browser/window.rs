//! Events of the window and the next frame, as values that undo themselves when dropped.

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Document, Element, Event, EventTarget};

/// A listener that is removed when dropped.
#[derive(Debug)]
pub struct Listener {
    target: EventTarget,
    name: &'static str,
    closure: Closure<dyn FnMut(Event)>,
}

impl Listener {
    /// Calls `f` at every event `name` of `target`.
    pub fn new(target: EventTarget, name: &'static str, f: impl FnMut(Event) + 'static) -> Option<Self> {
        let closure = Closure::<dyn FnMut(Event)>::new(f);
        target.add_event_listener_with_callback(name, closure.as_ref().unchecked_ref()).ok()?;
        Some(Self { target, name, closure })
    }

    /// Calls `f` at every event `name` of the window.
    pub fn on_window(name: &'static str, f: impl FnMut(Event) + 'static) -> Option<Self> {
        Self::new(web_sys::window()?.into(), name, f)
    }
}

impl Drop for Listener {
    fn drop(&mut self) {
        let callback = self.closure.as_ref().unchecked_ref();
        // Nothing can be done, and nothing is lost, when a listener is already gone.
        let _ = self.target.remove_event_listener_with_callback(self.name, callback);
    }
}

/// Something to do before the next frame is drawn; undone when dropped before that.
#[derive(Debug)]
pub struct NextFrame {
    number: i32,
    _closure: Closure<dyn FnMut()>,
}

impl NextFrame {
    /// Asks for it.
    pub fn new(f: impl FnOnce() + 'static) -> Option<Self> {
        let mut once = Some(f);
        let closure = Closure::<dyn FnMut()>::new(move || {
            if let Some(f) = once.take() {
                f();
            }
        });
        let number = web_sys::window()?.request_animation_frame(closure.as_ref().unchecked_ref()).ok()?;
        Some(Self { number, _closure: closure })
    }
}

impl Drop for NextFrame {
    fn drop(&mut self) {
        if let Some(window) = web_sys::window() {
            let _ = window.cancel_animation_frame(self.number);
        }
    }
}

/// Something to do every second; undone when dropped.
#[derive(Debug)]
pub struct EverySecond {
    number: i32,
    _closure: Closure<dyn FnMut()>,
}

impl EverySecond {
    /// Begins.
    pub fn new(f: impl FnMut() + 'static) -> Option<Self> {
        let closure = Closure::<dyn FnMut()>::new(f);
        let called = closure.as_ref().unchecked_ref();
        let number =
            web_sys::window()?.set_interval_with_callback_and_timeout_and_arguments_0(called, 1000).ok()?;
        Some(Self { number, _closure: closure })
    }
}

impl Drop for EverySecond {
    fn drop(&mut self) {
        if let Some(window) = web_sys::window() {
            window.clear_interval_with_handle(self.number);
        }
    }
}

/// Milliseconds since 1970 by the phone's clock, which goes on while it sleeps.
pub fn clock() -> f64 {
    js_sys::Date::now()
}

/// The document.
pub fn document() -> Option<Document> {
    web_sys::window()?.document()
}

/// The document's own element.
pub fn root() -> Option<Element> {
    document()?.document_element()
}

/// Sends an event of the window to whoever listens.
pub fn say(name: &str) {
    if let (Some(window), Ok(event)) = (web_sys::window(), Event::new(name)) {
        let _ = window.dispatch_event(&event);
    }
}

/// Shows the page from its beginning.
pub fn to_top() {
    if let Some(window) = web_sys::window() {
        window.scroll_to_with_x_and_y(0.0, 0.0);
    }
}

/// Width of the window, CSS pixels; 360 where it cannot be had.
pub fn width() -> f64 {
    let width = web_sys::window().and_then(|window| window.inner_width().ok()?.as_f64());
    width.unwrap_or(360.0)
}

/// Whether the page can be seen, and does not lie behind another one.
pub fn is_in_front() -> bool {
    web_sys::window().and_then(|window| window.document()).is_none_or(|document| !document.hidden())
}

/// Device pixels in a CSS pixel.
pub fn pixel_ratio() -> f64 {
    web_sys::window().map_or(1.0, |window| window.device_pixel_ratio())
}

/// Milliseconds of a clock that never goes back; 0 where there is none.
pub fn now() -> f64 {
    web_sys::window().and_then(|window| window.performance()).map_or(0.0, |clock| clock.now())
}

/// Whether the person has asked for less motion.
pub fn wants_stillness() -> bool {
    let query =
        web_sys::window().and_then(|window| window.match_media("(prefers-reduced-motion: reduce)").ok()?);
    query.is_some_and(|query| query.matches())
}
