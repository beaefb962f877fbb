//! Series-lamp physics: incandescent lamps, banks of them, and what equipment does behind them.
//!
//! # Scope
//! A lamp in series with the mains limits the current into equipment of unknown condition. This crate computes
//! the lamp from its printed rating ([`lamp`]), a series chain of parallel groups of lamps ([`bank`]), the
//! equipment behind it from its rating plate ([`plate`], [`load`]), every steady operating point ([`steady`]),
//! what the filament looks like there ([`glow`]), and all of it with 95 % bands ([`expect`]).
//!
//! # Simplifications
//! - Within a mains cycle a filament is a constant resistor.
//! - A reservoir's ripple is small against its voltage, which a series lamp makes true.
//! - The ambient temperature is 300 K; lead-in wires and filament ends are as warm as the rest, except that
//!   calibration may count what they carry off as gas loss.
//!
//! # Out of scope
//! Safety. Nothing here says that anything may be touched.
//!
//! # Conventions
//! `f64` in SI units, the unit in the name; volts and amperes are RMS, or DC. Functions are pure: the same input
//! gives the same bits on every target, because all transcendental functions come from `libm`. A value that
//! exists is valid; constructors return what is wrong with the field, the value and the allowed range.
#![no_std]

extern crate alloc;

pub mod band;
pub mod bank;
mod calibrate;
pub mod complex;
pub mod condition;
pub mod curve;
mod defaults;
pub mod detail;
pub mod diagnosis;
mod digits;
pub mod error;
pub mod expect;
pub mod family;
pub mod filament;
pub mod fuse;
pub mod glow;
pub mod hand_on;
pub mod hunt;
pub mod identify;
pub mod kept;
pub mod ladder;
pub mod lamp;
pub mod link;
pub mod load;
pub mod observer;
pub mod plate;
pub mod precheck;
pub mod quantity;
pub mod readings;
pub mod roots;
mod scan;
pub mod setup;
pub mod steady;
pub mod stock;
pub mod supply;
pub mod switch_on;
pub mod tungsten;
pub mod wire;
