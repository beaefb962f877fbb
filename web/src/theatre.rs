//! The replay on its stage: what is known of it, and where the play stands. It knows no browser and no reckoner; the
//! frames of a page drive it.

use crate::reckoner::runs::News;
use crate::replay::{Ask, Show};

/// How slow is slow.
pub const SLOWLY: f64 = 0.1;
/// Up to when it is, seconds.
pub const SLOW_UNTIL: f64 = 0.5;

/// Longest time between two frames that counts: a page in the background draws none, seconds.
const LONGEST_FRAME: f64 = 0.1;
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

/// How it stands with the reckoner.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
enum Inquiry {
    /// It is still to be asked.
    Due,
    /// It has been asked, or there is nothing to ask.
    #[default]
    Made,
    /// It cannot be had: what is missing stays so.
    Lost,
}

/// The stage.
#[derive(Debug, Default)]
pub struct Theatre {
    show: Option<Show>,
    inquiry: Inquiry,
    /// Changed whenever there is something new to show.
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
    /// What is known so far.
    pub const fn show(&self) -> Option<&Show> {
        self.show.as_ref()
    }

    /// Asks for a replay; what was at work for another one is dropped.
    pub fn ask(&mut self, ask: Ask, now: f64) {
        if self.show.as_ref().is_some_and(|show| show.ask == ask) {
            return;
        }
        // The first replay is waited for; a later one may be the middle of a word.
        self.not_before = if self.show.is_some() { now + QUIET } else { now };
        self.show = Some(Show::new(ask, self.show.as_ref()));
        self.inquiry = Inquiry::Due;
        self.version += 1;
        self.seconds = 0.0;
        self.play = if self.autoplay { Play::Waiting } else { Play::Still };
        self.last_frame = None;
    }

    /// One frame; whether there is something to draw.
    pub fn frame(&mut self, now: f64) -> bool {
        let draw = self.is_playing();
        self.go_on(now);
        draw
    }

    /// What the reckoner is to be asked now; once for each replay, and not before the typing rests.
    pub fn question(&mut self, now: f64) -> Option<&Ask> {
        if self.inquiry != Inquiry::Due || now < self.not_before {
            return None;
        }
        self.inquiry = Inquiry::Made;
        self.show.as_ref().map(|show| &show.ask)
    }

    /// Takes in what the reckoner has found.
    pub fn learn(&mut self, news: News) {
        let Some(show) = &mut self.show else { return };
        show.learn(news);
        self.version += 1;
        if self.play == Play::Waiting && show.reach() > 0.0 {
            self.play = Play::Playing;
        }
    }

    /// The reckoner cannot be had.
    pub fn lose(&mut self) {
        self.inquiry = Inquiry::Lost;
        self.version += 1;
    }

    /// Whether the reckoner cannot be had.
    pub fn is_lost(&self) -> bool {
        self.inquiry == Inquiry::Lost
    }

    /// Whether it is playing.
    pub fn is_playing(&self) -> bool {
        self.play == Play::Playing
    }

    /// Whether frames are needed.
    pub fn is_busy(&self) -> bool {
        self.is_playing() || self.inquiry == Inquiry::Due
    }

    /// Where the play ends, seconds.
    pub fn end(&self) -> f64 {
        self.show.as_ref().map_or(0.0, |show| show.ask.seconds)
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
        let reach = self.show.as_ref().map_or(0.0, Show::reach);
        self.seconds = seconds.clamp(0.0, reach);
        self.play = Play::Still;
    }

    fn go_on(&mut self, now: f64) {
        let last = self.last_frame.replace(now);
        let Some(show) = self.show.as_ref().filter(|_| self.play == Play::Playing) else { return };
        let mut wall = last.map_or(0.0, |last| ((now - last) / 1000.0).clamp(0.0, LONGEST_FRAME));
        if self.slow && self.seconds < SLOW_UNTIL {
            let slowly = wall.min((SLOW_UNTIL - self.seconds) / SLOWLY);
            self.seconds += slowly * SLOWLY;
            wall -= slowly;
        }
        self.seconds = (self.seconds + wall).min(show.reach());
        if self.seconds >= show.ask.seconds {
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
    use std::rc::Rc;

    use crate::reckoner::runs::everything;

    fn ask(wish: &Wish) -> Ask {
        Ask::of(wish, &Rc::new(Setup::example().expect("in range")), Condition::Healthy)
    }

    fn ready(autoplay: bool, slow: bool) -> Theatre {
        let mut theatre = Theatre { autoplay, slow, ..Theatre::default() };
        theatre.ask(ask(&Wish::default()), 0.0);
        theatre.frame(0.0);
        let wanted = theatre.question(0.0).expect("asked at once").wanted();
        for news in everything(wanted) {
            theatre.learn(news);
        }
        theatre
    }

    #[test]
    fn it_plays_in_real_time_to_its_end_and_then_again() {
        let mut theatre = ready(true, false);
        assert!(theatre.is_playing() && theatre.seconds == 0.0);
        for frame in 1..=60_u32 {
            assert!(theatre.frame(f64::from(frame) * 16.0));
        }
        assert!((theatre.seconds - 0.96).abs() < 0.017, "{}", theatre.seconds);
        for frame in 61..=260_u32 {
            theatre.frame(f64::from(frame) * 16.0);
        }
        assert!(theatre.is_over() && !theatre.is_playing() && !theatre.is_busy());
        theatre.toggle();
        assert!(theatre.is_playing() && theatre.seconds == 0.0);
    }

    #[test]
    fn the_first_half_second_can_last_five() {
        let mut theatre = ready(true, true);
        theatre.frame(1000.0);
        for frame in 1..=60_u32 {
            theatre.frame(1000.0 + f64::from(frame) * 100.0);
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
    fn a_change_waits_for_quiet_and_is_asked_once() {
        let mut theatre = ready(false, false);
        let other = ask(&Wish { seconds: Some(10.0), ..Wish::default() });
        theatre.ask(other.clone(), 100.0);
        assert!(theatre.question(200.0).is_none() && theatre.is_busy());
        assert_eq!(theatre.question(400.0), Some(&other));
        assert!(theatre.question(500.0).is_none() && !theatre.is_busy());
        assert!(theatre.show().is_some_and(|show| !show.done && show.reach() == 0.0));
        theatre.lose();
        assert!(theatre.is_lost());
        theatre.ask(ask(&Wish::default()), 600.0);
        assert!(!theatre.is_lost());
    }

    #[test]
    fn the_scale_leads_back() {
        for seconds in [0.0, 0.02, 0.5, 3.0] {
            assert!((time(place(seconds, 3.0), 3.0) - seconds).abs() < 1e-12);
        }
        assert_eq!(place(1.0, 0.0), 0.0);
    }
}
