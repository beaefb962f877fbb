//! The part of xtask that the end-to-end tests use too: the server of the built page.
#![forbid(unsafe_code)]

pub mod site;
