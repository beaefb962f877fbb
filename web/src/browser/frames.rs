//! Something to do before every frame, for as long as there is something to do.

use std::cell::{Cell, OnceCell};
use std::rc::Rc;

use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;

/// A loop over frames. It sleeps when its work says so, and ends when dropped.
#[derive(Debug, Clone)]
pub struct Frames(Rc<Loop>);

#[derive(Debug, Default)]
struct Loop {
    each: OnceCell<Closure<dyn FnMut(f64)>>,
    asked: Cell<Option<i32>>,
}

impl Frames {
    /// A sleeping loop that calls `f` with the frame's time in milliseconds, and again while it gives `true`.
    pub fn new(mut f: impl FnMut(f64) -> bool + 'static) -> Self {
        let new = Self(Rc::default());
        // A weak hold, or the loop would keep itself for ever.
        let inner = Rc::downgrade(&new.0);
        let each = Closure::<dyn FnMut(f64)>::new(move |now| {
            let Some(inner) = inner.upgrade() else { return };
            inner.asked.set(None);
            if f(now) {
                inner.wake();
            }
        });
        let _ = new.0.each.set(each);
        new
    }

    /// Goes on with the next frame.
    pub fn wake(&self) {
        self.0.wake();
    }
}

impl Loop {
    fn wake(&self) {
        if self.asked.get().is_some() {
            return;
        }
        let (Some(window), Some(each)) = (web_sys::window(), self.each.get()) else { return };
        self.asked.set(window.request_animation_frame(each.as_ref().unchecked_ref()).ok());
    }
}

impl Drop for Loop {
    fn drop(&mut self) {
        if let (Some(window), Some(asked)) = (web_sys::window(), self.asked.get()) {
            let _ = window.cancel_animation_frame(asked);
        }
    }
}
