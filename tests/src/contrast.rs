//! Colours of the style sheets, and how well one is seen on another.
//!
//! The formula: "relative luminance" and "contrast ratio" in the definitions of the Web Content Accessibility
//! Guidelines (WCAG) 2.2, W3C Recommendation, <https://www.w3.org/TR/WCAG22/#dfn-contrast-ratio>.

use std::collections::BTreeMap;

use anyhow::{Context, Result, ensure};

/// A colour of the screen, each channel 0 to 1 as it is written (not linear).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Colour([f64; 3]);

/// The colours of one light, by the names of their tokens without the dashes.
pub type Tokens = BTreeMap<String, Colour>;

impl Colour {
    /// Reads `#rrggbb`.
    ///
    /// # Errors
    /// Another text.
    pub fn read(text: &str) -> Result<Self> {
        let digits = text.strip_prefix('#').filter(|digits| digits.len() == 6 && digits.is_ascii());
        let digits = digits.with_context(|| format!("`{text}` is not #rrggbb"))?;
        let mut channels = [0.0; 3];
        for (index, channel) in channels.iter_mut().enumerate() {
            *channel = f64::from(u8::from_str_radix(&digits[2 * index..2 * index + 2], 16)?) / 255.0;
        }
        Ok(Self(channels))
    }

    fn luminance(self) -> f64 {
        // WCAG 2.2's note: 0.04045 is the value of the standard for sRGB; 0.03928 of older texts makes no difference at
        // 8 bits a channel.
        let linear = |channel: f64| {
            if channel <= 0.04045 { channel / 12.92 } else { ((channel + 0.055) / 1.055).powf(2.4) }
        };
        let [red, green, blue] = self.0.map(linear);
        0.2126 * red + 0.7152 * green + 0.0722 * blue
    }

    /// The contrast ratio with another colour, 1 to 21.
    #[must_use]
    pub fn contrast(self, other: Self) -> f64 {
        let (one, two) = (self.luminance(), other.luminance());
        (one.max(two) + 0.05) / (one.min(two) + 0.05)
    }

    /// This colour at an opacity, before another.
    #[must_use]
    pub fn over(self, ground: Self, opacity: f64) -> Self {
        let mix = |index: usize| opacity * self.0[index] + (1.0 - opacity) * ground.0[index];
        Self([mix(0), mix(1), mix(2)])
    }
}

/// The three blocks of tokens.css: paper, dusk by the phone's wish, dusk by the person's.
///
/// # Errors
/// When there are not three of them.
pub fn tokens(sheet: &str) -> Result<[Tokens; 3]> {
    let blocks = sheet.split('{').filter_map(|part| part.split_once('}').map(|(block, _)| block));
    let read = |block: &str| -> Result<Tokens> {
        let declared = block.split(';').filter_map(|line| line.split_once(':'));
        let named =
            declared.filter_map(|(name, value)| Some((name.trim().strip_prefix("--")?, value.trim())));
        let colours = named.filter(|(_, value)| value.starts_with('#'));
        colours.map(|(name, value)| Ok((name.to_owned(), Colour::read(value)?))).collect()
    };
    let all = blocks.map(read).collect::<Result<Vec<_>>>()?;
    let count = all.len();
    ensure!(all.iter().all(|tokens| tokens.len() > 10), "a block of tokens.css has hardly any colour");
    all.try_into().ok().with_context(|| format!("tokens.css has {count} blocks"))
}
