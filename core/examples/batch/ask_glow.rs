//! `glow`: what tungsten at a temperature looks like.

use lampladder_core::error::{Field, within};
use lampladder_core::glow::{Glow, TYPICAL_RATED_KELVIN};
use lampladder_core::tungsten::{AMBIENT_KELVIN, HIGHEST_KELVIN};
use serde::Serialize;

use crate::fields::{Fields, Refusal};

#[derive(Serialize)]
pub(crate) struct GlowAnswer {
    x: f64,
    y: f64,
    relative_luminance: f64,
    srgb: String,
    word: &'static str,
}

pub(crate) fn answer(mut fields: Fields<'_>) -> Result<GlowAnswer, Refusal> {
    let node = fields.need("kelvin")?;
    fields.done()?;
    let kelvin = within(Field::Kelvin, node.number()?, AMBIENT_KELVIN, HIGHEST_KELVIN)
        .map_err(|error| node.refuse(error.to_string()))?;
    let Glow { x, y, relative_luminance, srgb: [red, green, blue], word } =
        Glow::at(kelvin, TYPICAL_RATED_KELVIN);
    let srgb = format!("#{red:02x}{green:02x}{blue:02x}");
    Ok(GlowAnswer { x, y, relative_luminance, srgb, word: word.name() })
}
