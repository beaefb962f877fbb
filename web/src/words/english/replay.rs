//! English, the switch-on panel.

use lampladder_core::error::InputError;
use lampladder_core::fuse::{Standard, Status, Verdict};
use lampladder_core::switch_on::SwitchOnError;

use super::{NUMERALS, glow};
use crate::replay::Closing;
use crate::story::{Cause, Story};
use crate::words::replay::ReplayWords;

pub(super) static REPLAY: ReplayWords = ReplayWords {
    title: "The first seconds",
    beside: "Beside healthy",
    working: "Working out the first seconds …",
    story,
    cause: |cause| match cause {
        Cause::Hunting => "it starts, starves and starts again",
        Cause::Reservoir => "its reservoir fills",
        Cause::Speed => "the motor gains speed",
        Cause::Heaters => "its filaments warm up",
        Cause::NoCurrent => "no current flows",
    },
    stopped: |error, lamp| match error {
        SwitchOnError::FilamentMelts { seconds, .. } => {
            format!("do not switch on, {lamp} burns out after about {}", NUMERALS.duration(*seconds))
        }
        SwitchOnError::TooManySteps { seconds } => {
            format!("changes too fast to be followed beyond {}", NUMERALS.duration(*seconds))
        }
        SwitchOnError::Input(InputError::NeedsAlternating { .. }) => {
            String::from("has no meaning on direct current")
        }
        _ => String::from("cannot be worked out with these numbers"),
    },
    alike: "They look alike behind these lamps: use a meter, or larger lamps.",
    assumes: |played| {
        let when = match played.closing {
            Some(Closing::Crest) => " at the crest",
            Some(Closing::Zero) => " at zero volts",
            Some(Closing::Worst) => " at the worst moment",
            None => "",
        };
        format!(
            "Assumes {}, {} {}, lamps as printed, cold start{when}.",
            played.supply, played.size, played.family
        )
    },
    play: "Play",
    pause: "Pause",
    again: "Again",
    time: "Time after switching on",
    playing: "playing",
    moments: "Moments",
    figures: |amps, volts| format!("{amps} · {volts}"),
    chart: "Chart of current and of the equipment's voltage over time. The same numbers stand in the tables below.",
    chart_amps: "Current, A RMS",
    chart_volts: "Across equipment, V RMS",
    chart_means: "RMS over one cycle of the mains. The whole line is healthy, the broken one is not. Time is \
                  stretched at the beginning, where most happens.",
    slow: "Slow to 0.5 s",
    speed: "Speed",
    closes: "Where in the mains cycle it is switched on",
    closing: |closing| match closing {
        Closing::Crest => "Crest",
        Closing::Zero => "Zero",
        Closing::Worst => "Worst",
    },
    span: "How long",
    surge: "The surge in figures",
    peak: "Peak current",
    peak_after: "It flows after",
    heat: "I²t of the first 0.1 s",
    settles: "Steady after",
    unsettled: |seconds| format!("not within {seconds}"),
    pulse: "Pulses every",
    last_amps: "Current at the end",
    last_volts: "Across equipment then",
    last_dc: "Reservoir then, DC",
    straight_peak: "Straight on the mains, peak",
    straight_heat: "Straight on, I²t",
    saved: "Lamp holds the peak to",
    times_less: |ratio| format!("1/{ratio}"),
    same: "the same",
    straight_means: |ohms| {
        format!(
            "The equipment takes just what its plate says. Straight on the mains assumes {ohms} of wiring and no \
             fuse. Cold lamps, wiring and reservoirs differ: two digits are the most that can be said."
        )
    },
    time_column: "After",
    moment_by_moment: "Moment by moment",
    fuse: "Would a fuse hold?",
    standards: "Standard of the fuse",
    standard: |standard| match standard {
        Standard::Iec60127Sheet1 => "F, sheet 1",
        Standard::Iec60127Sheet2 => "F, sheet 2",
        Standard::Iec60127Sheet3 => "T, sheet 3",
        Standard::Iec60127Sheet5 => "T, sheet 5",
        Standard::Ul248 => "UL 248-14",
        Standard::Ul248TimeDelay => "UL, time delay",
        _ => "Other",
    },
    standard_means: |standard| match standard {
        Standard::Iec60127Sheet1 => "IEC 60127-2, 5 × 20 mm, quick-acting, high breaking capacity",
        Standard::Iec60127Sheet2 => "IEC 60127-2, 5 × 20 mm, quick-acting, low breaking capacity",
        Standard::Iec60127Sheet3 => "IEC 60127-2, 5 × 20 mm, time-lag, low breaking capacity",
        Standard::Iec60127Sheet5 => "IEC 60127-2, 5 × 20 mm, time-lag, high breaking capacity",
        Standard::Ul248 => "UL 248-14, without time delay",
        Standard::Ul248TimeDelay => "UL 248-14, with time delay",
        _ => "",
    },
    rated: "Rated current",
    rated_step: |up| if up { "Next larger fuse" } else { "Next smaller fuse" },
    behind: "Behind the lamps",
    straight: "Straight on",
    verdict: |verdict| match verdict {
        Verdict::Holds => "holds",
        Verdict::Opens => "opens",
        _ => "may open",
    },
    fuse_note: |status| {
        let source = match status {
            Status::Declared => "as makers' data sheets declare them",
            Status::SecondHand => "as quoted second hand",
            _ => "some of them from memory",
        };
        format!(
            "By the time-current gates of the standard, {source}; the last current is taken to last half an hour. \
             Check the standard and your local code."
        )
    },
};

/// The name of a glow with its article.
fn a(word: lampladder_core::glow::GlowWord) -> String {
    let name = glow(word);
    let article = if name.starts_with(['a', 'e', 'i', 'o', 'u']) { "an" } else { "a" };
    format!("{article} {name}")
}

/// Longer than this is slow, seconds.
const SLOW: f64 = 1.0;
/// Shorter than this is at once, seconds.
const AT_ONCE: f64 = 0.15;

fn story(story: &Story) -> String {
    let about = |seconds: f64| NUMERALS.duration(seconds);
    match *story {
        Story::Dark => String::from("stays dark"),
        Story::Pulses { seconds: None, bright } => format!("pulses, up to {}", glow(bright)),
        Story::Pulses { seconds: Some(seconds), bright } => {
            format!("pulses about every {}, up to {}", about(seconds), glow(bright))
        }
        Story::Steady { word, seconds } if seconds <= AT_ONCE => {
            format!("{} at once, and stays", glow(word))
        }
        Story::Steady { word, seconds } if seconds <= SLOW => {
            format!("{} within {}, and stays", glow(word), about(seconds))
        }
        Story::Steady { word, seconds } => {
            format!("rises slowly to {}, over about {}", glow(word), about(seconds))
        }
        Story::Rising { word } => format!("rises slowly, {} at the end and still rising", glow(word)),
        Story::Dims { bright, then, seconds, still: false } if seconds <= SLOW => {
            format!("{} flash of about {}, then {}", a(bright), about(seconds), glow(then))
        }
        Story::Dims { bright, then, seconds, still: false } => {
            format!("{}, dims to {} over about {}", glow(bright), glow(then), about(seconds))
        }
        Story::Dims { bright, then, .. } => {
            format!("{}, dims to {} and goes on dimming", glow(bright), glow(then))
        }
        Story::Dips { bright, dim, seconds, then } => format!(
            "{}, dims to {} by about {}, then comes up to {}",
            glow(bright),
            glow(dim),
            about(seconds),
            glow(then)
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::glow::GlowWord;

    #[test]
    fn stories_are_told_as_one_would() {
        let flash =
            Story::Dims { bright: GlowWord::Orange, then: GlowWord::Dark, seconds: 0.23, still: false };
        assert_eq!(story(&flash), "an orange flash of about 0.23\u{a0}s, then dark");
        let short = Story::Steady { word: GlowWord::Full, seconds: 0.06 };
        assert_eq!(story(&short), "full at once, and stays");
        let hunting = Story::Pulses { seconds: Some(0.8), bright: GlowWord::Amber };
        assert_eq!(story(&hunting), "pulses about every 0.8\u{a0}s, up to amber");
        for text in
            [story(&flash), story(&short), String::from(REPLAY.alike), (REPLAY.fuse_note)(Status::Memory)]
        {
            assert!(!text.contains("safe"));
        }
    }
}
