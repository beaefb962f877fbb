//! The replay on its stage: what is worked out, and where the play stands. It knows no browser; the frames of a page
//! drive it.

use crate::replay::{Ask, Work};

/// How slow is slow.
pub const SLOWLY: f64 = 0.1;
/// Up to when it is, seconds.
pub const SLOW_UNTIL: f64 = 0.5;

/// Longest time between two frames that counts: a page in the background draws none, seconds.
const LONGEST_FRAME: f64 = 0.1;
/// Milliseconds of each frame that the working out may take: half of it, so that typing and drawing find their time.
const SLICE: f64 = 8.0;
/// Steps of the solver between two looks at the clock.
const STEPS: u32 = 60;
/// Milliseconds without a change before anything is run: a person who types is not done.
const QUIET: f64 = 250.0;

/// Whether it moves.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
enum Play {
    /// It begins by itself as soon as there is something to see.
    Waiting,
    /// It plays.
    Playing,
    /// It stands.
    #[default]
    Still,
}

/// The stage.
#[derive(Debug, Default)]
pub struct Theatre {
    work: Option<Work>,
    /// Changed whenever the work has something new to show.
    pub version: u32,
    /// Where the play stands, seconds after the switch closed.
    pub seconds: f64,
    play: Play,
    /// Whether it begins by itself.
    pub autoplay: bool,
    /// Whether the beginning plays slowly.
    pub slow: bool,
    not_before: f64,
    last_frame: Option<f64>,
}

impl Theatre {
    /// What is worked out so far.
    pub const fn work(&self) -> Option<&Work> {
        self.work.as_ref()
    }

    /// Asks for a replay; what was at work for another one is dropped.
    pub fn ask(&mut self, ask: Ask, now: f64) {
        if self.work.as_ref().is_some_and(|work| work.ask == ask) {
            return;
        }
        // The first replay is waited for; a later one may be the middle of a word.
        self.not_before = if self.work.is_some() { now + QUIET } else { now };
        self.work = Some(Work::new(ask, self.work.as_ref()));
        self.version += 1;
        self.seconds = 0.0;
        self.play = if self.autoplay { Play::Waiting } else { Play::Still };
        self.last_frame = None;
    }

    /// One frame; whether there is something to draw.
    pub fn frame(&mut self, now: f64, clock: impl Fn() -> f64) -> bool {
        let mut draw = self.is_playing();
        self.go_on(now);
        if let Some(work) = &mut self.work
            && now >= self.not_before
        {
            let until = clock() + SLICE;
            while !work.is_done() {
                if work.advance(STEPS, &clock) {
                    self.version += 1;
                    draw = true;
                }
                if clock() >= until {
                    break;
                }
            }
            if self.play == Play::Waiting && work.reach() > 0.0 {
                self.play = Play::Playing;
            }
        }
        draw
    }

    /// Whether it is playing.
    pub fn is_playing(&self) -> bool {
        self.play == Play::Playing
    }

    /// Whether frames are needed.
    pub fn is_busy(&self) -> bool {
        self.is_playing() || self.work.as_ref().is_some_and(|work| !work.is_done())
    }

    /// Where the play ends, seconds.
    pub fn end(&self) -> f64 {
        self.work.as_ref().map_or(0.0, |work| work.ask.seconds)
    }

    /// Whether it has come to its end.
    pub fn is_over(&self) -> bool {
        self.seconds >= self.end()
    }

    /// Plays on, pauses, or begins again.
    pub fn toggle(&mut self) {
        if self.is_over() {
            self.seconds = 0.0;
        }
        self.play = if self.is_playing() { Play::Still } else { Play::Playing };
        self.last_frame = None;
    }

    /// Goes to a time, and stays there.
    pub fn seek(&mut self, seconds: f64) {
        let reach = self.work.as_ref().map_or(0.0, Work::reach);
        self.seconds = seconds.clamp(0.0, reach);
        self.play = Play::Still;
    }

    fn go_on(&mut self, now: f64) {
        let last = self.last_frame.replace(now);
        let Some(work) = self.work.as_ref().filter(|_| self.play == Play::Playing) else { return };
        let mut wall = last.map_or(0.0, |last| ((now - last) / 1000.0).clamp(0.0, LONGEST_FRAME));
        if self.slow && self.seconds < SLOW_UNTIL {
            let slowly = wall.min((SLOW_UNTIL - self.seconds) / SLOWLY);
            self.seconds += slowly * SLOWLY;
            wall -= slowly;
        }
        self.seconds = (self.seconds + wall).min(work.reach());
        if self.seconds >= work.ask.seconds {
            self.play = Play::Still;
        }
    }
}

/// Where a time stands on the scale of the scrubber and the chart, 0 to 1: by its square root, since most happens at
/// the beginning.
pub fn place(seconds: f64, end: f64) -> f64 {
    if end > 0.0 { (seconds / end).clamp(0.0, 1.0).sqrt() } else { 0.0 }
}

/// The time at a place of that scale, seconds.
pub fn time(place: f64, end: f64) -> f64 {
    place * place * end
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::replay::Wish;
    use lampladder_core::condition::Condition;
    use lampladder_core::setup::Setup;
    use std::cell::Cell;
    use std::rc::Rc;

    fn ask(wish: &Wish) -> Ask {
        Ask::of(wish, &Rc::new(Setup::example().expect("in range")), Condition::Healthy)
    }

    fn ready(autoplay: bool, slow: bool) -> Theatre {
        let mut theatre = Theatre { autoplay, slow, ..Theatre::default() };
        theatre.ask(ask(&Wish::default()), 0.0);
        theatre.frame(0.0, || 0.0);
        theatre
    }

    #[test]
    fn it_plays_in_real_time_to_its_end_and_then_again() {
        let mut theatre = ready(true, false);
        assert!(theatre.is_playing() && theatre.seconds == 0.0);
        for frame in 1..=60_u32 {
            assert!(theatre.frame(f64::from(frame) * 16.0, || 0.0));
        }
        assert!((theatre.seconds - 0.96).abs() < 0.017, "{}", theatre.seconds);
        for frame in 61..=260_u32 {
            theatre.frame(f64::from(frame) * 16.0, || 0.0);
        }
        assert!(theatre.is_over() && !theatre.is_playing() && !theatre.is_busy());
        theatre.toggle();
        assert!(theatre.is_playing() && theatre.seconds == 0.0);
    }

    #[test]
    fn the_first_half_second_can_last_five() {
        let mut theatre = ready(true, true);
        theatre.frame(1000.0, || 0.0);
        for frame in 1..=60_u32 {
            theatre.frame(1000.0 + f64::from(frame) * 100.0, || 0.0);
        }
        assert!((theatre.seconds - 1.6).abs() < 0.001, "{}", theatre.seconds);
    }

    #[test]
    fn those_who_want_stillness_begin_it_themselves() {
        let mut theatre = ready(false, false);
        assert!(!theatre.is_playing() && !theatre.is_busy());
        theatre.seek(99.0);
        assert_eq!(theatre.seconds, 3.0);
        theatre.seek(0.5);
        assert!(!theatre.is_playing() && theatre.seconds == 0.5);
        theatre.toggle();
        assert!(theatre.is_playing());
    }

    #[test]
    fn a_slice_ends_when_its_time_is_over_and_a_change_waits_for_quiet() {
        let now = Cell::new(0.0);
        let clock = || {
            now.set(now.get() + 1.0);
            now.get()
        };
        let mut theatre = Theatre::default();
        theatre.ask(ask(&Wish::default()), 0.0);
        theatre.frame(0.0, clock);
        assert!(now.get() < 20.0 && theatre.is_busy());
        let other = ask(&Wish { seconds: Some(10.0), ..Wish::default() });
        theatre.ask(other, 100.0);
        let version = theatre.version;
        assert!(!theatre.frame(200.0, || 0.0) && theatre.is_busy());
        theatre.frame(400.0, || 0.0);
        assert!(theatre.version > version && !theatre.work().expect("work").reach().is_nan());
    }

    #[test]
    fn the_scale_leads_back() {
        for seconds in [0.0, 0.02, 0.5, 3.0] {
            assert!((time(place(seconds, 3.0), 3.0) - seconds).abs() < 1e-12);
        }
        assert_eq!(place(1.0, 0.0), 0.0);
    }
}
