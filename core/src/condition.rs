//! States that equipment can be in.

use serde::{Deserialize, Serialize};

/// What state the equipment is in. Each family has those that can happen to it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[non_exhaustive]
pub enum Condition {
    /// It takes what its plate says; a motor runs free.
    Healthy,
    /// It is on, and does next to nothing.
    Idle,
    /// A motor does the work that its plate is written for.
    Working,
    /// It takes [`OVERLOAD`] times what its plate says at full voltage.
    Overloaded,
    /// Its two input wires are joined.
    Shorted,
    /// No path: a blown fuse, a broken lead, an open switch.
    OpenCircuit,
    /// The reservoir capacitor leaks as much as the set should draw.
    LeakyReservoir,
    /// The reservoir capacitor, or what stands across it, is a short.
    ShortedReservoir,
    /// One diode of the rectifier is a short: every other half wave meets only the windings.
    ShortedDiode,
    /// The secondary, or a good part of a winding, is a short.
    ShortedWinding,
    /// The output stage conducts all it can.
    OutputConducting,
    /// The motor's shaft does not turn.
    Stalled,
}

/// How many times the plate's power an overloaded set takes at full voltage (design value: far enough from healthy
/// to look different, near enough to be missed by a fuse).
pub const OVERLOAD: f64 = 3.0;

impl Condition {
    /// Every condition.
    pub const ALL: [Self; 12] = [
        Self::Healthy,
        Self::Idle,
        Self::Working,
        Self::Overloaded,
        Self::Shorted,
        Self::OpenCircuit,
        Self::LeakyReservoir,
        Self::ShortedReservoir,
        Self::ShortedDiode,
        Self::ShortedWinding,
        Self::OutputConducting,
        Self::Stalled,
    ];

    /// The condition's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Healthy => "healthy",
            Self::Idle => "idle",
            Self::Working => "working",
            Self::Overloaded => "overloaded",
            Self::Shorted => "shorted",
            Self::OpenCircuit => "open-circuit",
            Self::LeakyReservoir => "leaky-reservoir",
            Self::ShortedReservoir => "shorted-reservoir",
            Self::ShortedDiode => "shorted-diode",
            Self::ShortedWinding => "shorted-winding",
            Self::OutputConducting => "output-conducting",
            Self::Stalled => "stalled",
        }
    }
}
