//! One file for each panel and each part of the frame around them.

pub mod advice;
pub mod bank;
mod bank_drawing;
pub mod circuit;
pub mod comparison;
pub mod curve;
pub mod details;
pub mod equipment;
pub mod header;
pub mod lamp;
pub mod nav;
pub mod notes;
pub mod sheet;
pub mod supply;
pub mod voltage_bar;

use yew::{Callback, MouseEvent, Properties};

use crate::bench::{BenchHandle, Msg};

/// What every panel gets.
#[derive(Debug, Clone, PartialEq, Properties)]
pub struct PanelProps {
    /// The state.
    pub bench: BenchHandle,
}

/// A click that sends a message.
pub(crate) fn send(bench: &BenchHandle, msg: Msg) -> Callback<MouseEvent> {
    let dispatcher = bench.dispatcher();
    Callback::from(move |_| dispatcher.dispatch(msg.clone()))
}
