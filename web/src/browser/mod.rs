//! Everything that touches the browser. Nothing else in this crate uses `web-sys`, but for drawing charts.
//!
//! A browser may refuse any of this (storage in private windows, workers on plain HTTP); each function then says so
//! in its result or does nothing, and the page goes on.

pub mod cautions;
pub mod clock;
pub mod dialog;
pub mod download;
pub mod fragment;
pub mod frames;
pub mod fresh;
pub mod input;
pub mod language;
pub mod log;
pub mod print;
pub mod readings;
pub mod reckoner;
pub mod rest;
pub mod share;
pub mod storage;
pub mod theme;
pub mod window;
