//! The part of xtask that the end-to-end tests use too: finishing and serving a built page.
#![forbid(unsafe_code)]

pub mod files;
pub mod pack;
pub mod site;
pub mod split;
pub mod stamp;
pub mod words;
