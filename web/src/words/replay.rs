//! The texts of the switch-on panel.

use lampladder_core::error::InputError;
use lampladder_core::fuse::{Standard, Status, Verdict};
use lampladder_core::switch_on::SwitchOnError;

use super::reader::catalogue;
use super::{Words, fill, pick};
use crate::replay::Closing;
use crate::story::{Cause, Story, Told};

/// What a replay took for granted, already as text.
#[derive(Debug, Clone, PartialEq)]
pub struct Played {
    /// Volts and hertz of the supply.
    pub supply: String,
    /// How large the equipment is.
    pub size: String,
    /// What kind it is.
    pub family: &'static str,
    /// When the switch closed; `None` on direct current.
    pub closing: Option<Closing>,
}

catalogue! {
    /// All texts of the panel.
    pub struct ReplayWords in "replay." {
        title, beside, working, dark, pulses, pulses_every, at_once, within, rises, rising,
        flash [dark, faint, dull_red, orange, amber, yellow, full, over_full],
        flashes, dims, dimming, dips, because,
        cause [hunting, reservoir, speed, heaters, no_current],
        melts, too_fast, on_direct, cannot, alike, assumes,
        assumes_when [crest, zero, worst],
        play, pause, again, time, playing, moments, figures, chart, chart_amps, chart_volts, chart_means,
        slow, speed, closes,
        closing [crest, zero, worst],
        span, surge, peak, peak_after, heat, settles, unsettled, pulse, last_amps, last_volts, last_dc,
        straight_peak, straight_heat, saved, times_less, same, straight_means, time_column, moment_by_moment,
        fuse, standards,
        standard [sheet1, sheet2, sheet3, sheet5, ul, ul_delay],
        standard_means [sheet1, sheet2, sheet3, sheet5, ul, ul_delay],
        rated, rated_more, rated_less, behind, straight,
        verdict [holds, may_open, opens],
        fuse_note [declared, second_hand, memory],
    }
}

/// Longer than this is slow, seconds.
const SLOW: f64 = 1.0;
/// Shorter than this is at once, seconds.
const AT_ONCE: f64 = 0.15;

impl ReplayWords {
    /// What the lamp does, and why.
    pub fn told(&self, told: &Told, words: &Words) -> String {
        let story = self.story(&told.story, words);
        match told.cause {
            Some(cause) => fill(self.because, &[&story, self.cause(cause)]),
            None => story,
        }
    }

    fn story(&self, story: &Story, words: &Words) -> String {
        let about = |seconds: f64| self.numerals.duration(seconds);
        let glow = |word| words.glow(word);
        match *story {
            Story::Dark => self.dark.to_owned(),
            Story::Pulses { seconds: None, bright } => fill(self.pulses, &[glow(bright)]),
            Story::Pulses { seconds: Some(seconds), bright } => {
                fill(self.pulses_every, &[&about(seconds), glow(bright)])
            }
            Story::Steady { word, seconds } if seconds <= AT_ONCE => fill(self.at_once, &[glow(word)]),
            Story::Steady { word, seconds } => {
                let text = if seconds <= SLOW { self.within } else { self.rises };
                fill(text, &[glow(word), &about(seconds)])
            }
            Story::Rising { word } => fill(self.rising, &[glow(word)]),
            Story::Dims { bright, then, seconds, still: false } if seconds <= SLOW => {
                fill(self.flashes, &[pick(&self.flash, bright as usize), &about(seconds), glow(then)])
            }
            Story::Dims { bright, then, seconds, still } => {
                let text = if still { self.dimming } else { self.dims };
                fill(text, &[glow(bright), glow(then), &about(seconds)])
            }
            Story::Dips { bright, dim, seconds, then } => {
                fill(self.dips, &[glow(bright), glow(dim), &about(seconds), glow(then)])
            }
        }
    }

    fn cause(&self, cause: Cause) -> &'static str {
        pick(&self.cause, cause as usize)
    }

    /// Why a run ended early; the lamp that broke.
    pub fn stopped(&self, error: &SwitchOnError, lamp: &str) -> String {
        match error {
            SwitchOnError::FilamentMelts { seconds, .. } => {
                fill(self.melts, &[lamp, &self.numerals.duration(*seconds)])
            }
            SwitchOnError::TooManySteps { seconds } => {
                fill(self.too_fast, &[&self.numerals.duration(*seconds)])
            }
            SwitchOnError::Input(InputError::NeedsAlternating { .. }) => self.on_direct.to_owned(),
            _ => self.cannot.to_owned(),
        }
    }

    /// What was taken for granted.
    pub fn assumes(&self, played: &Played) -> String {
        let text = played.closing.map_or(self.assumes, |closing| pick(&self.assumes_when, closing as usize));
        fill(text, &[&played.supply, &played.size, played.family])
    }

    /// Equipment's volts and current under a lamp.
    pub fn figures(&self, amps: &str, volts: &str) -> String {
        fill(self.figures, &[amps, volts])
    }

    /// When the switch closes.
    pub fn closing(&self, closing: Closing) -> &'static str {
        pick(&self.closing, closing as usize)
    }

    /// It does not settle within these seconds.
    pub fn unsettled(&self, seconds: &str) -> String {
        fill(self.unsettled, &[seconds])
    }

    /// So many times less.
    pub fn times_less(&self, ratio: &str) -> String {
        fill(self.times_less, &[ratio])
    }

    /// What a run without lamps takes for granted: the outlet's ohms.
    pub fn straight_means(&self, ohms: &str) -> String {
        fill(self.straight_means, &[ohms])
    }

    /// A standard on a chip.
    pub fn standard(&self, standard: Standard) -> &'static str {
        pick(&self.standard, standard as usize)
    }

    /// What it is for.
    pub fn standard_means(&self, standard: Standard) -> &'static str {
        pick(&self.standard_means, standard as usize)
    }

    /// The next size up or down.
    pub const fn rated_step(&self, up: bool) -> &'static str {
        if up { self.rated_more } else { self.rated_less }
    }

    /// What the fuse does.
    pub fn verdict(&self, verdict: Verdict) -> &'static str {
        pick(&self.verdict, verdict as usize)
    }

    /// Where the gates come from, and what to check.
    pub fn fuse_note(&self, status: Status) -> &'static str {
        pick(&self.fuse_note, status as usize)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::words::english;
    use lampladder_core::glow::GlowWord;

    #[test]
    fn stories_are_told_as_one_would() {
        let words = english();
        let story = |story: &Story| words.replay().story(story, words);
        let flash =
            Story::Dims { bright: GlowWord::Orange, then: GlowWord::Dark, seconds: 0.23, still: false };
        assert_eq!(story(&flash), "an orange flash of about 0.23\u{a0}s, then dark");
        let short = Story::Steady { word: GlowWord::Full, seconds: 0.06 };
        assert_eq!(story(&short), "full at once, and stays");
        let hunting = Story::Pulses { seconds: Some(0.8), bright: GlowWord::Amber };
        assert_eq!(story(&hunting), "pulses about every 0.8\u{a0}s, up to amber");
        let told = Told { story: hunting, cause: Some(Cause::Hunting) };
        let told = words.replay().told(&told, words);
        assert!(told.ends_with("up to amber: it starts, starves and starts again"), "{told}");
    }
}
