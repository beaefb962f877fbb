//! Numbers of the ladder's checklist, as typed and as read.

use lampladder_core::error::{Field, InputError, within};
use lampladder_core::quantity;
use lampladder_core::stock::Stock;

use crate::draft::Fault;

/// A field of the checklist.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Entry {
    /// How many of a typed lamp.
    Count,
    /// Cold resistance of a lamp without a legible rating.
    ColdOhms,
    /// Volts across it while it glows.
    GlowVolts,
    /// Amperes through it at the same time.
    GlowAmps,
    /// Its volts, where they can still be read.
    PrintedVolts,
    /// Protective conductor.
    ProtectiveOhms,
    /// Insulation.
    InsulationOhms,
    /// Across the plug.
    PlugOhms,
    /// The reservoir.
    Farads,
    /// What empties it.
    BleedOhms,
    /// Volts to which it was charged.
    StartVolts,
}

/// What a meter shows above its range.
pub const OVER_RANGE: &str = "OL";

impl Entry {
    /// Every field.
    pub const ALL: [Self; 11] = [
        Self::Count,
        Self::ColdOhms,
        Self::GlowVolts,
        Self::GlowAmps,
        Self::PrintedVolts,
        Self::ProtectiveOhms,
        Self::InsulationOhms,
        Self::PlugOhms,
        Self::Farads,
        Self::BleedOhms,
        Self::StartVolts,
    ];

    /// The kind of quantity that belongs there.
    pub const fn field(self) -> Field {
        match self {
            Self::Count => Field::Count,
            Self::ColdOhms => Field::ColdOhms,
            Self::GlowAmps => Field::Amps,
            Self::GlowVolts | Self::PrintedVolts | Self::StartVolts => Field::Volts,
            Self::Farads => Field::Farads,
            Self::ProtectiveOhms | Self::InsulationOhms | Self::PlugOhms | Self::BleedOhms => Field::Ohms,
        }
    }

    /// Its name in addresses of elements.
    pub const fn slug(self) -> &'static str {
        match self {
            Self::Count => "count",
            Self::ColdOhms => "unknown-cold-ohms",
            Self::GlowVolts => "unknown-volts",
            Self::GlowAmps => "unknown-amps",
            Self::PrintedVolts => "unknown-printed-volts",
            Self::ProtectiveOhms => "protective-ohms",
            Self::InsulationOhms => "insulation-ohms",
            Self::PlugOhms => "plug-ohms",
            Self::Farads => "reservoir-farads",
            Self::BleedOhms => "bleed-ohms",
            Self::StartVolts => "reservoir-volts",
        }
    }

    /// Whether a meter may show that it is above its range.
    pub const fn has_over_range(self) -> bool {
        matches!(self, Self::InsulationOhms | Self::PlugOhms)
    }

    /// What core takes.
    const fn range(self) -> (f64, f64) {
        match self {
            Self::Count => Stock::COUNT,
            Self::ColdOhms => (0.01, 1e5),
            Self::GlowVolts => (0.1, 500.0),
            Self::GlowAmps => (1e-4, 100.0),
            Self::PrintedVolts => (1.0, 500.0),
            Self::ProtectiveOhms | Self::InsulationOhms | Self::PlugOhms => (0.0, 1e12),
            Self::Farads => (1e-12, 10.0),
            Self::BleedOhms => (1.0, 1e12),
            Self::StartVolts => (0.0, 1e5),
        }
    }

    /// The number in a text; `None` for an empty one, which is an answer too, and infinity for a meter over its range.
    ///
    /// # Errors
    /// What is wrong with it.
    pub fn read(self, text: &str) -> Result<Option<f64>, Fault> {
        let text = text.trim();
        if text.is_empty() {
            return Ok(None);
        }
        if self.has_over_range() && text.eq_ignore_ascii_case(OVER_RANGE) {
            return Ok(Some(f64::INFINITY));
        }
        let value = quantity::parse(text, self.field()).map_err(Fault::Text)?;
        let (low, high) = self.range();
        let value = within(self.field(), value, low, high).map_err(Fault::Number)?;
        if self == Self::Count && value.fract() != 0.0 {
            return Err(Fault::Number(InputError::NotWhole { field: Field::Count, value }));
        }
        Ok(Some(value))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_count_is_whole_and_not_negative() {
        assert_eq!(Entry::Count.read("2"), Ok(Some(2.0)));
        assert!(matches!(Entry::Count.read("-2"), Err(Fault::Number(InputError::OutOfRange { .. }))));
        assert!(matches!(Entry::Count.read("1.5"), Err(Fault::Number(InputError::NotWhole { .. }))));
        assert!(matches!(Entry::Count.read("two"), Err(Fault::Text(_))));
        assert_eq!(Entry::Count.read(" "), Ok(None));
    }

    #[test]
    fn a_meter_over_its_range_has_said_something() {
        assert_eq!(Entry::InsulationOhms.read("ol"), Ok(Some(f64::INFINITY)));
        assert_eq!(Entry::InsulationOhms.read("20M"), Ok(Some(20e6)));
        assert!(Entry::ProtectiveOhms.read("OL").is_err());
        assert_eq!(Entry::Farads.read("100 µF"), Ok(Some(100e-6)));
    }
}
