//! The reckoner's end: takes questions, works on them a slice at a time, and sends what it finds.

use std::cell::RefCell;

use js_sys::Uint8Array;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use wasm_bindgen_futures::spawn_local;
use web_sys::{DedicatedWorkerGlobalScope, MessageEvent};

use crate::browser::{log, readings};
use crate::log::Order;
use crate::reckoner::links::Wanted;
use crate::reckoner::{Answer, Ask, Desk, Number};

/// Milliseconds of work between two looks at the messages: a newer question does not wait longer.
const SLICE: f64 = 24.0;

#[derive(Default)]
struct Place {
    desk: Desk,
    /// Whether the next slice is on its way.
    waiting: bool,
    again: Option<Closure<dyn FnMut()>>,
}

thread_local! {
    static PLACE: RefCell<Place> = RefCell::default();
}

fn scope() -> DedicatedWorkerGlobalScope {
    js_sys::global().unchecked_into()
}

/// Starts the reckoner.
pub fn start() {
    PLACE.with_borrow_mut(|place| place.again = Some(Closure::new(slice)));
    let heard = Closure::<dyn FnMut(MessageEvent)>::new(|event: MessageEvent| {
        let bytes = Uint8Array::from(event.data()).to_vec();
        let (number, ask): (Number, Option<Ask>) =
            postcard::from_bytes(&bytes).map_or((0, None), |(number, ask)| (number, Some(ask)));
        let at_once = PLACE.with_borrow_mut(|place| {
            let answer = match ask {
                None => Some(Answer::Unreadable),
                Some(Ask::Log(order)) => {
                    spawn_local(keep(number, order));
                    None
                }
                Some(Ask::Links(Wanted::File(all))) => Some(
                    readings::written(&all).map_or(Answer::Unreadable, |news| Answer::Links(Box::new(news))),
                ),
                Some(Ask::Links(Wanted::Read(text))) => Some(Answer::Links(Box::new(readings::read(&text)))),
                Some(ask) => place.desk.put(number, ask),
            };
            place.wake();
            answer
        });
        if let Some(answer) = at_once {
            tell(&(number, answer));
        }
    });
    scope().set_onmessage(Some(heard.as_ref().unchecked_ref()));
    heard.forget();
    // There is nobody to tell where this fails.
    let _ = scope().post_message(&Uint8Array::new_with_length(0));
}

impl Place {
    fn wake(&mut self) {
        if self.waiting || !self.desk.is_busy() {
            return;
        }
        if let Some(again) = &self.again {
            self.waiting = scope().set_timeout_with_callback(again.as_ref().unchecked_ref()).is_ok();
        }
    }
}

async fn keep(number: Number, order: Order) {
    let news = log::carry_out(order).await;
    tell(&(number, Answer::Log(Box::new(news))));
}

fn now() -> f64 {
    scope().performance().map_or(0.0, |clock| clock.now())
}

fn slice() {
    PLACE.with_borrow_mut(|place| {
        place.waiting = false;
        let until = now() + SLICE;
        while place.desk.is_busy() && now() < until {
            if let Some(news) = place.desk.go_on(&now) {
                tell(&news);
            }
        }
        place.wake();
    });
}

fn tell(news: &(Number, Answer)) {
    if let Ok(bytes) = postcard::to_allocvec(news) {
        let _ = scope().post_message(&Uint8Array::from(bytes.as_slice()));
    }
}
