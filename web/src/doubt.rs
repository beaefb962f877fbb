//! Numbers that were meant a thousand times smaller or larger, maybe: a meter shows them without a prefix.

use lampladder_core::readings::Kind;
use lampladder_core::setup::Setup;

/// A bare number of amperes this many times beyond what the bank passes on a short was meant as milliamperes, maybe.
const DOUBTFUL_SHARE: f64 = 2.0;

/// A bare number of ohms below this was meant as kilohms, maybe: meters that choose their range show 1.2 for both.
const DOUBTFUL_OHMS: f64 = 10.0;

/// Whether a typed number has no unit and no prefix.
pub fn is_bare(text: &str) -> bool {
    // Not by Unicode's tables, which weigh more than this panel.
    text.chars().all(|one| !one.is_ascii_alphabetic() && !matches!(one, 'Ω' | '\u{2126}' | 'µ' | 'μ'))
}

/// Whether a number makes more sense a thousand times smaller or larger.
pub fn is_doubtful(kind: Kind, value: f64, setup: &Setup) -> bool {
    match kind {
        Kind::Amps => {
            let most = DOUBTFUL_SHARE * setup.bank.at_volts(setup.supply.volts()).amps;
            value > most && value / 1000.0 <= most
        }
        Kind::PlugOhms => value > 0.0 && value < DOUBTFUL_OHMS,
        _ => false,
    }
}

/// A typed text as each of the two things that it may mean.
pub fn meanings(kind: Kind, text: &str) -> [String; 2] {
    let prefix = if kind == Kind::Amps { "m" } else { "k" };
    let unit = kind.field().unit();
    let text = text.trim();
    [format!("{text} {unit}"), format!("{text} {prefix}{unit}")]
}
