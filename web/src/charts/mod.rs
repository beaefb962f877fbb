//! Charts on a canvas, drawn in effects. A canvas says nothing to a screen reader: each panel has the same numbers
//! in a table.

pub mod curve;
mod frame;
pub mod ink;
pub mod seconds;
