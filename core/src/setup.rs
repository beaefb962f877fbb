//! All that a person has entered about one bench.

use crate::bank::Bank;
use crate::error::InputError;
use crate::plate::Plate;
use crate::supply::Supply;

/// Supply, bank and the equipment's plate, each already valid.
#[derive(Debug, Clone, PartialEq)]
pub struct Setup {
    /// The mains or DC source.
    pub supply: Supply,
    /// The lamps in use.
    pub bank: Bank,
    /// The equipment's rating plate.
    pub plate: Plate,
}

impl Setup {
    /// The bench that the page opens with: 230 V 50 Hz, one 60 W lamp, a 45 W radio.
    ///
    /// # Errors
    /// None: the numbers are in range; the signature keeps the constructors' promise without a panic.
    pub fn example() -> Result<Self, InputError> {
        Ok(Self {
            supply: Supply::new(230.0, 50.0, 0.0)?,
            bank: Bank::single(crate::lamp::Lamp::new(230.0, 60.0)?),
            plate: Plate::new(crate::family::Family::TransformerSupply, 230.0, 45.0, None)?,
        })
    }
}
