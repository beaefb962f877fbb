//! Colours of a chart, read from the style sheets, so that a chart follows the light of the page.

use plotters::style::RGBColor;

use crate::browser::theme;

/// The colours.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Ink {
    /// Axes' texts and the equipment's curves.
    pub ink: RGBColor,
    /// Lesser texts.
    pub dim: RGBColor,
    /// Grid.
    pub line: RGBColor,
    /// The bank's curve.
    pub brass: RGBColor,
    /// Ground.
    pub ground: RGBColor,
}

impl Ink {
    /// The colours as they are now.
    pub fn now() -> Self {
        let token = |name: &str| {
            theme::colour(name).and_then(|text| hexadecimal(&text)).unwrap_or(RGBColor(128, 128, 128))
        };
        Self {
            ink: token("--ink"),
            dim: token("--dim"),
            line: token("--line"),
            brass: token("--brass"),
            ground: token("--panel"),
        }
    }
}

fn hexadecimal(text: &str) -> Option<RGBColor> {
    let digits = text.strip_prefix('#')?;
    let byte = |at: usize| u8::from_str_radix(digits.get(at..at + 2)?, 16).ok();
    Some(RGBColor(byte(0)?, byte(2)?, byte(4)?))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn reads_the_colours_of_our_style_sheets_and_no_others() {
        assert_eq!(hexadecimal("#d9a441"), Some(RGBColor(0xd9, 0xa4, 0x41)));
        for other in ["", "#", "#12", "#gg0000", "red", "#é"] {
            assert_eq!(hexadecimal(other), None);
        }
    }
}
