//! Small things that several panels are made of.

pub mod choice;
pub mod field;
pub mod picture;
pub mod svg;
pub mod well;
