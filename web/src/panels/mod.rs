//! One file for each panel and each part of the frame around them.
//!
//! Panels are plain functions of the state: a component of its own costs 4 KB of the first load, so only what has an
//! effect of its own is one ([`sheet::Sheet`], [`curve::Chart`]).

pub mod advice;
mod after;
pub mod bank;
mod bank_drawing;
mod checks;
pub mod circuit;
pub mod comparison;
pub mod curve;
pub mod details;
mod drawer;
pub mod equipment;
pub mod frame;
pub mod hand_on;
mod hand_on_card;
mod hand_on_code;
mod hand_on_files;
pub mod ladder;
pub mod lamp;
pub mod points;
mod rung;
pub mod seen;
mod seen_log;
mod seen_next;
mod seen_sheet;
pub mod sheet;
pub mod stage;
pub mod supply;
pub mod surge;
pub mod switch_on;
pub mod voltage_bar;

use yew::{Callback, Html, MouseEvent};

use crate::bench::{BenchHandle, Msg};
use crate::parts::el::el;

/// What stands in the place of a panel that is not there.
pub(crate) fn told(text: &'static str) -> Html {
    el("p").class("panel told").set("role", "status").text(text).html()
}

/// A click that sends a message.
pub(crate) fn send(bench: &BenchHandle, msg: Msg) -> Callback<MouseEvent> {
    let dispatcher = bench.dispatcher();
    Callback::from(move |_| dispatcher.dispatch(once_more(&msg)))
}

/// A copy of a message. Those of the first screen are copied here; a button of the panels finds [`any`] beside it.
fn once_more(msg: &Msg) -> Msg {
    match *msg {
        Msg::Show(condition) => Msg::Show(condition),
        Msg::Open(part) => Msg::Open(part),
        Msg::Why => Msg::Why,
        Msg::Go(tab) => Msg::Go(tab),
        Msg::Light(theme) => Msg::Light(theme),
        Msg::Accept => Msg::Accept,
        Msg::Cautions => Msg::Cautions,
        Msg::Dismiss(note) => Msg::Dismiss(note),
        _ => any(msg),
    }
}

#[inline(never)]
fn any(msg: &Msg) -> Msg {
    msg.clone()
}
