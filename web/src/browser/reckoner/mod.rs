//! The way between the page and the reckoner, which runs in a worker of the browser.
//!
//! Messages are a number and an [`Ask`], or a number and an [`Answer`], as the bytes of a `postcard` record. The
//! reckoner says once that it is there, with an empty message: whatever is sent to a worker before its program has
//! started is lost, so the page holds its questions back until then.

pub mod serve;

use std::cell::RefCell;
use std::rc::Rc;

use js_sys::Uint8Array;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Event, MessageEvent, Worker};

use crate::reckoner::{Answer, Ask, Number, Subject};

/// The reckoner cannot be had: no connection and not kept, a browser without workers, another version.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Lost;

/// What to do with an answer.
type Answered = Rc<dyn Fn(Result<Answer, Lost>)>;

/// Called by the browser.
type Heard = Closure<dyn FnMut(Event)>;

struct Question {
    number: Number,
    ask: Ask,
    answered: Answered,
}

/// The page's end.
#[derive(Default)]
struct Line {
    worker: Option<Worker>,
    ready: bool,
    number: Number,
    /// The newest question of each subject.
    asked: Vec<Question>,
    /// Kept for as long as the worker calls them.
    heard: Option<[Heard; 2]>,
}

thread_local! {
    static LINE: RefCell<Line> = RefCell::default();
}

/// Asks the reckoner; starts it where it does not run. `answered` is called for every piece of the answer, and no more
/// once something newer of the same subject is asked.
pub fn ask(ask: Ask, answered: impl Fn(Result<Answer, Lost>) + 'static) {
    let answered: Answered = Rc::new(answered);
    let sent = LINE.with_borrow_mut(|line| {
        let subject = ask.subject();
        line.asked.retain(|question| question.ask.subject() != subject);
        line.number = line.number.wrapping_add(1);
        line.asked.push(Question { number: line.number, ask, answered: Rc::clone(&answered) });
        if line.worker.is_none() {
            line.start();
        }
        if line.ready {
            line.send(subject);
        }
        line.worker.is_some()
    });
    if !sent {
        answered(Err(Lost));
    }
}

/// Nobody waits for this any more.
pub fn forget(subject: Subject) {
    LINE.with_borrow_mut(|line| line.asked.retain(|question| question.ask.subject() != subject));
}

impl Line {
    fn start(&mut self) {
        let name = web_sys::window()
            .and_then(|window| window.document()?.query_selector("meta[name=reckoner]").ok()?)
            .and_then(|meta| meta.get_attribute("content"));
        let Some(worker) = name.and_then(|name| Worker::new(&name).ok()) else { return };
        let heard = Heard::new(|event: Event| hear(&event));
        let broken = Heard::new(|_| lose());
        worker.set_onmessage(Some(heard.as_ref().unchecked_ref()));
        worker.set_onerror(Some(broken.as_ref().unchecked_ref()));
        self.ready = false;
        self.worker = Some(worker);
        self.heard = Some([heard, broken]);
    }

    fn send(&self, subject: Subject) {
        let Some(worker) = &self.worker else { return };
        for question in self.asked.iter().filter(|question| question.ask.subject() == subject) {
            if let Ok(bytes) = postcard::to_allocvec(&(question.number, &question.ask)) {
                let _ = worker.post_message(&Uint8Array::from(bytes.as_slice()));
            }
        }
    }
}

/// A message of the reckoner. What is done with it may ask again, so nothing is held while it is done.
fn hear(event: &Event) {
    let Some(bytes) = event.dyn_ref::<MessageEvent>().map(|event| Uint8Array::from(event.data()).to_vec())
    else {
        return;
    };
    if bytes.is_empty() {
        LINE.with_borrow_mut(|line| {
            line.ready = true;
            let subjects: Vec<Subject> = line.asked.iter().map(|question| question.ask.subject()).collect();
            for subject in subjects {
                line.send(subject);
            }
        });
        return;
    }
    let Ok((number, answer)) = postcard::from_bytes::<(Number, Answer)>(&bytes) else { return lose() };
    let answered = LINE.with_borrow(|line| {
        let question = line.asked.iter().find(|question| question.number == number)?;
        Some(Rc::clone(&question.answered))
    });
    if let Some(answered) = answered {
        answered(if answer == Answer::Unreadable { Err(Lost) } else { Ok(answer) });
    }
}

/// The worker could not be loaded, or its program broke: all who wait are told, and the next question starts it anew.
fn lose() {
    let line = LINE.take();
    if let Some(worker) = &line.worker {
        worker.terminate();
    }
    for question in &line.asked {
        (question.answered)(Err(Lost));
    }
    // The closures may be at work right now; they cost little.
    core::mem::forget(line.heard);
}
