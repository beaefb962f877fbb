//! Small things that several panels are made of.

pub mod choice;
pub mod el;
pub mod field;
pub mod picture;
pub mod svg;
pub mod table;
pub mod well;
