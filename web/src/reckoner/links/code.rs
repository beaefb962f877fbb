//! The QR code of a link: bytes for the address, digits for what stands behind its `#`.

use std::fmt::Write;

use qrcodegen::{QrCode, QrCodeEcc, QrSegment, Version};
use serde::{Deserialize, Serialize};

/// A code, ready to be drawn.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Code {
    /// Version of the standard, 1 to 20.
    pub version: u8,
    /// Modules on a side, with the quiet zone.
    pub side: u8,
    /// The dark modules as the path of a drawing, one unit a module.
    pub path: String,
}

/// The quiet zone on each side, modules (ISO/IEC 18004).
const QUIET: i32 = 4;

/// The largest that a phone still reads from a screen or from a card: 97 modules a side (design value, no source).
const MOST_VERSION: u8 = 20;

impl Code {
    /// The code of an address and of digits behind it; `None` where it would be larger than anybody can read.
    pub fn of(address: &str, digits: &str) -> Option<Self> {
        let segments = [QrSegment::make_bytes(address.as_bytes()), QrSegment::make_numeric(digits)];
        let (least, most) = (Version::MIN, Version::new(MOST_VERSION));
        let code =
            QrCode::encode_segments_advanced(&segments, QrCodeEcc::Medium, least, most, None, true).ok()?;
        let side = u8::try_from(code.size() + 2 * QUIET).ok()?;
        Some(Self { version: code.version().value(), side, path: path(&code) })
    }
}

/// Rows of dark modules side by side, each as one rectangle.
fn path(code: &QrCode) -> String {
    let mut path = String::new();
    for y in 0..code.size() {
        let mut x = 0;
        while x < code.size() {
            let dark = (x..code.size()).take_while(|&x| code.get_module(x, y)).count();
            if dark > 0 {
                let _ = write!(path, "M{} {}h{dark}v1h-{dark}z", x + QUIET, y + QUIET);
            }
            x += i32::try_from(dark).unwrap_or(0) + 1;
        }
    }
    path
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_full_set_up_is_a_small_code() {
        // Digits of the longest set-up in tests/tests/laws_hand_on.rs, and its address.
        let code = Code::of("https://bench.example.org/tools/lampladder/#", &"7".repeat(212)).expect("short");
        assert!(code.version <= 8, "{}", code.version);
        assert_eq!(usize::from(code.side), 17 + 4 * usize::from(code.version) + 8);
    }

    #[test]
    fn nothing_is_drawn_in_the_quiet_zone() {
        let code = Code::of("https://a.example/#", "3123456").expect("short");
        let side = i32::from(code.side);
        for part in code.path.split('M').skip(1) {
            let (start, width) = part.split_once('h').expect("a run");
            let (x, y) = start.split_once(' ').expect("two numbers");
            let (x, y): (i32, i32) = (x.parse().expect("x"), y.parse().expect("y"));
            let width: i32 = width.split('v').next().expect("a width").parse().expect("a number");
            assert!(x >= QUIET && y >= QUIET && x + width <= side - QUIET && y < side - QUIET, "{part}");
        }
        // The finder pattern's upper edge.
        assert!(code.path.starts_with("M4 4h7v1h-7z"), "{}", code.path);
    }

    #[test]
    fn what_nobody_can_read_is_no_code() {
        assert!(Code::of("https://a.example/#", &"7".repeat(1500)).is_some());
        assert!(Code::of("https://a.example/#", &"7".repeat(1700)).is_none());
    }
}
