//! Published numbers for the core to be held against, and the built page driven in a real Chromium, as a person would,
//! with its server under our control.
//!
//! The browser tests find the page and the browser through variables that `cargo xtask test e2e` sets; without them they
//! fail and say so.
#![forbid(unsafe_code)]

pub mod accessibility;
pub mod browser;
pub mod contrast;
pub mod copy;
pub mod devtools;
mod driver;
pub mod folder;
pub mod golden;
pub mod keyboard;
pub mod lamps;
pub mod large;
pub mod numbers;
pub mod page;
pub mod random;
pub mod reference;
pub mod reliability;
pub mod simulated;
pub mod surroundings;
pub mod timing;
pub mod walk;
