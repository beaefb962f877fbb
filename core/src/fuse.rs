//! Whether a fuse holds the first seconds, by the time-current gates of its standard.
//!
//! A gate says that at some multiple of the rated current a fuse holds at least, or opens at the latest after, a
//! number of seconds. The gates here were read in makers' data sheets that declare the standard, or are from memory:
//! each carries where it comes from, and no answer replaces the standard. **Check the standard** and the fuse's own
//! data sheet.
//!
//! # Method
//! The squared current over every stretch of the first seconds is compared with a constant current that heats a fuse as
//! much in that time. Between gates nothing is interpolated: what holds at a multiple holds below it, and what heat it bears
//! in a time it bears in a longer one; what opens at a multiple opens above it. Beyond the highest multiple that a standard gates, the melting heat is taken as constant
//! (`I^2 t`), as it is when there is no time to lose heat. The last current is taken to last for half an hour.
//!
//! # Simplifications
//! A fuse cools between surges; this takes each stretch by itself. Ambient temperature, age and the holder are left out.

mod table;

use alloc::vec::Vec;

use crate::error::{Field, InputError, within};
use crate::switch_on::{Heating, SwitchOn};

/// Where a number comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
#[non_exhaustive]
pub enum Status {
    /// Declared in makers' data sheets.
    Declared,
    /// Read in a document that quotes the standard.
    SecondHand,
    /// From memory: not seen in any document.
    Memory,
}

impl Status {
    /// The status as the reference tables write it.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Declared => "as declared in makers data sheets",
            Self::SecondHand => "published second hand",
            Self::Memory => "from memory",
        }
    }
}

/// One gate of a standard.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Gate {
    /// Rated currents to which it applies, amperes.
    pub rated_amps: (f64, f64),
    /// Multiple of the rated current.
    pub multiple: f64,
    /// It holds at least this long, seconds.
    pub least_seconds: Option<f64>,
    /// It has opened after this long, seconds.
    pub most_seconds: Option<f64>,
    /// Where the numbers come from.
    pub status: Status,
}

/// The standard and kind of a fuse.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Standard {
    /// IEC 60127-2 sheet 1: 5 x 20 mm, quick-acting, high breaking capacity.
    Iec60127Sheet1,
    /// Sheet 2: 5 x 20 mm, quick-acting, low breaking capacity.
    Iec60127Sheet2,
    /// Sheet 3: 5 x 20 mm, time-lag, low breaking capacity.
    Iec60127Sheet3,
    /// Sheet 5: 5 x 20 mm, time-lag, high breaking capacity.
    Iec60127Sheet5,
    /// UL 248-14, without time delay.
    Ul248,
    /// UL 248-14, time delay.
    Ul248TimeDelay,
}

impl Standard {
    /// Every kind.
    pub const ALL: [Self; 6] = [
        Self::Iec60127Sheet1,
        Self::Iec60127Sheet2,
        Self::Iec60127Sheet3,
        Self::Iec60127Sheet5,
        Self::Ul248,
        Self::Ul248TimeDelay,
    ];

    /// The sheet of IEC 60127-2.
    ///
    /// # Errors
    /// A sheet other than 1, 2, 3 and 5.
    pub fn iec_60127_2(sheet: u8) -> Result<Self, InputError> {
        match sheet {
            1 => Ok(Self::Iec60127Sheet1),
            2 => Ok(Self::Iec60127Sheet2),
            3 => Ok(Self::Iec60127Sheet3),
            5 => Ok(Self::Iec60127Sheet5),
            other => Err(InputError::OutOfRange {
                field: Field::Sheet,
                value: f64::from(other),
                low: 1.0,
                high: 5.0,
            }),
        }
    }

    /// All its gates, for every rated current.
    pub const fn gates(self) -> &'static [Gate] {
        match self {
            Self::Iec60127Sheet1 => &table::SHEET_1,
            Self::Iec60127Sheet2 => &table::SHEET_2,
            Self::Iec60127Sheet3 => &table::SHEET_3,
            Self::Iec60127Sheet5 => &table::SHEET_5,
            Self::Ul248 => table::UL_248.split_at(table::UL_248_PLAIN).0,
            Self::Ul248TimeDelay => &table::UL_248,
        }
    }

    /// Whether the melting heat may be taken as constant beyond the highest gate: only where that is a matter of
    /// milliseconds.
    const fn is_gated_for_surges(self) -> bool {
        !matches!(self, Self::Ul248 | Self::Ul248TimeDelay)
    }
}

/// A fuse of a standard and a rated current.
#[derive(Debug, Clone, PartialEq)]
pub struct Fuse {
    standard: Standard,
    rated_amps: f64,
    gates: Vec<&'static Gate>,
}

/// What a fuse does.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Verdict {
    /// Every fuse of the standard holds.
    Holds,
    /// The standard allows it to hold and to open.
    MayOpen,
    /// Every fuse of the standard opens.
    Opens,
}

impl Verdict {
    /// The verdict's name in the JSON contract.
    pub const fn name(self) -> &'static str {
        match self {
            Self::Holds => "holds",
            Self::MayOpen => "may-open",
            Self::Opens => "opens",
        }
    }
}

/// A verdict with its reasons.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Judgement {
    /// What the fuse does.
    pub verdict: Verdict,
    /// Current that the standard lets no fuse open at, over the current that flows, in the worst stretch: above 1 it
    /// holds.
    pub hold_margin: f64,
    /// Current that flows over the current at which every fuse opens, in the worst stretch: from 1 on it opens.
    pub open_margin: f64,
    /// How long the worst stretch for holding lasts, seconds, and which multiple of the rated current flows in it.
    pub stretch_seconds: f64,
    /// See [`Self::stretch_seconds`].
    pub stretch_multiple: f64,
    /// The least sure source among the gates of this fuse.
    pub status: Status,
    /// The surge's `I^2 t` over what melts one maker's fuse of this kind, where that is known (published second hand).
    pub melting_share: Option<f64>,
}

impl Judgement {
    /// The margin of the verdict: of holding where it holds or may open, of opening where it opens.
    pub fn margin(&self) -> f64 {
        match self.verdict {
            Verdict::Opens => self.open_margin,
            Verdict::Holds | Verdict::MayOpen => self.hold_margin,
        }
    }
}

/// How long the last current is taken to last, seconds.
pub const SESSION_SECONDS: f64 = 1800.0;

/// Most points of the heating curve between which stretches are laid.
const MOST_POINTS: usize = 200;

/// The lowest rated current of any fuse, amperes.
const LEAST_AMPS: f64 = 1e-3;

impl Fuse {
    /// A fuse of `rated_amps`, within the range that the standard gates.
    ///
    /// A rating between two ranges of a standard is treated like the one below it.
    ///
    /// # Errors
    /// [`Field::RatedAmps`] out of range or not finite.
    pub fn new(standard: Standard, rated_amps: f64) -> Result<Self, InputError> {
        let all = standard.gates();
        let low = all.iter().map(|gate| gate.rated_amps.0).fold(f64::INFINITY, f64::min).max(LEAST_AMPS);
        let high = all.iter().map(|gate| gate.rated_amps.1).fold(0.0, f64::max);
        let rated_amps = within(Field::RatedAmps, rated_amps, low, high)?;
        let start = all.iter().map(|gate| gate.rated_amps.0).filter(|from| *from <= rated_amps);
        let start = start.fold(0.0, f64::max);
        let applies = |gate: &&Gate| {
            let (from, to) = gate.rated_amps;
            from <= rated_amps && (rated_amps <= to || from == start)
        };
        Ok(Self { standard, rated_amps, gates: all.iter().filter(applies).collect() })
    }

    /// The standard.
    pub const fn standard(&self) -> Standard {
        self.standard
    }

    /// Rated current, amperes.
    pub const fn rated_amps(&self) -> f64 {
        self.rated_amps
    }

    /// The gates that apply to this fuse.
    pub fn gates(&self) -> &[&'static Gate] {
        &self.gates
    }

    /// What melts one maker's fuse of this kind and rating, ampere squared seconds (published second hand).
    pub fn melting_amp2_seconds(&self) -> Option<f64> {
        if self.standard != Standard::Iec60127Sheet3 {
            return None;
        }
        let same = |row: &&(f64, f64, f64)| (row.0 - self.rated_amps).abs() < 1e-9 * self.rated_amps;
        table::MELTING.iter().find(same).map(|row| row.2)
    }

    /// Largest multiple of the rated current that no fuse opens at within `seconds`; 1 where no gate says more.
    ///
    /// A gate promises its current for its time, and for longer as much heat: time only helps a fuse to cool.
    pub fn held_multiple(&self, seconds: f64) -> f64 {
        let mut held: f64 = 1.0;
        let mut top = (0.0, 0.0);
        for gate in &self.gates {
            // Two data sheets that disagree: the shorter time is what is sure.
            let Some(least) = self.least_at(gate.multiple) else { continue };
            held = held.max(gate.multiple * libm::sqrt(least / seconds).min(1.0));
            if gate.multiple > top.0 {
                top = (gate.multiple, least);
            }
        }
        if self.standard.is_gated_for_surges() && top.0 > HIGH_MULTIPLE {
            held = held.max(top.0 * libm::sqrt(top.1 / seconds));
        }
        held
    }

    fn least_at(&self, multiple: f64) -> Option<f64> {
        let same = self.gates.iter().filter(|gate| gate.multiple == multiple);
        same.filter_map(|gate| gate.least_seconds).reduce(f64::min)
    }

    /// Smallest multiple of the rated current at which every fuse has opened within `seconds`; infinite where no gate
    /// says so.
    pub fn opening_multiple(&self, seconds: f64) -> f64 {
        let mut opening = f64::INFINITY;
        let mut top = (0.0, 0.0);
        for gate in &self.gates {
            let Some(most) = gate.most_seconds else { continue };
            if most <= seconds {
                opening = opening.min(gate.multiple);
            }
            if gate.multiple > top.0 || (gate.multiple == top.0 && most > top.1) {
                top = (gate.multiple, most);
            }
        }
        if self.standard.is_gated_for_surges() && top.0 > HIGH_MULTIPLE && seconds < top.1 {
            opening = opening.min(top.0 * libm::sqrt(top.1 / seconds));
        }
        opening
    }

    /// What this fuse does in the first seconds of a run.
    pub fn judge(&self, run: &SwitchOn) -> Judgement {
        let amps = run.samples.last().map_or(0.0, |sample| sample.amps_rms);
        let mut judgement = self.judge_heating(&run.heating, amps);
        judgement.melting_share = self.melting_amp2_seconds().map(|melting| run.i2t_amp2_seconds / melting);
        judgement
    }

    /// What this fuse does with a squared current's integral, rising in time from nothing at 0 s, and the RMS current
    /// that flows on after it, amperes.
    pub fn judge_heating(&self, heating: &[Heating], last_amps: f64) -> Judgement {
        let last = last_amps / self.rated_amps;
        let mut worst = (self.held_multiple(SESSION_SECONDS) / last, SESSION_SECONDS, last);
        let mut open_margin = last / self.opening_multiple(SESSION_SECONDS);
        let stride = heating.len().div_ceil(MOST_POINTS).max(1);
        let start = Heating { seconds: 0.0, amp2_seconds: 0.0 };
        let points: Vec<Heating> =
            core::iter::once(start).chain(heating.iter().copied().step_by(stride)).collect();
        for (index, from) in points.iter().enumerate() {
            for to in &points[index + 1..] {
                let seconds = to.seconds - from.seconds;
                let heat = to.amp2_seconds - from.amp2_seconds;
                if seconds <= 0.0 || heat <= 0.0 {
                    continue;
                }
                let multiple = libm::sqrt(heat / seconds) / self.rated_amps;
                let margin = self.held_multiple(seconds) / multiple;
                if margin < worst.0 {
                    worst = (margin, seconds, multiple);
                }
                open_margin = open_margin.max(multiple / self.opening_multiple(seconds));
            }
        }
        let (hold_margin, stretch_seconds, stretch_multiple) = worst;
        let verdict = if open_margin >= 1.0 {
            Verdict::Opens
        } else if hold_margin >= 1.0 {
            Verdict::Holds
        } else {
            Verdict::MayOpen
        };
        let status = self.gates.iter().map(|gate| gate.status).max().unwrap_or(Status::Memory);
        Judgement {
            verdict,
            // Without any current the margin has no bound; a finite number serves every caller.
            hold_margin: hold_margin.min(MOST_MARGIN),
            open_margin,
            stretch_seconds,
            stretch_multiple,
            status,
            melting_share: None,
        }
    }
}

/// A margin beyond which more says nothing.
const MOST_MARGIN: f64 = 1e6;

/// Gates above this multiple are a matter of milliseconds.
const HIGH_MULTIPLE: f64 = 3.0;

#[cfg(test)]
mod tests {
    use super::*;

    fn steady(amps: f64, seconds: f64) -> [Heating; 1] {
        [Heating { seconds, amp2_seconds: amps * amps * seconds }]
    }

    fn time_lag() -> Fuse {
        Fuse::new(Standard::Iec60127Sheet3, 1.0).expect("a rating of the series")
    }

    #[test]
    fn a_constant_current_meets_the_gates() {
        let fuse = time_lag();
        let verdict =
            |amps: f64, seconds: f64, after: f64| fuse.judge_heating(&steady(amps, seconds), after).verdict;
        assert_eq!(verdict(0.9, 3.0, 0.9), Verdict::Holds);
        assert_eq!(verdict(1.5, 3.0, 1.5), Verdict::Holds);
        assert_eq!(verdict(1.8, 3.0, 1.8), Verdict::MayOpen);
        assert_eq!(verdict(2.1, 3.0, 2.1), Verdict::Opens);
        // A time-lag fuse carries ten times its rating for 20 ms, and has opened after 300.
        assert_eq!(verdict(10.0, 0.02, 0.5), Verdict::Holds);
        // The same heat, at any pace, does no more harm.
        assert_eq!(verdict(5.0, 0.08, 0.5), Verdict::Holds);
        assert_eq!(verdict(10.0, 0.1, 0.5), Verdict::MayOpen);
        assert_eq!(verdict(10.0, 0.3, 0.5), Verdict::Opens);
        // Beyond ten times, the same heat: 40 times for a sixteenth of the time.
        assert_eq!(verdict(40.0, 0.02 / 16.1, 0.5), Verdict::Holds);
        assert_eq!(verdict(40.0, 0.3 / 15.9, 0.5), Verdict::Opens);
    }

    #[test]
    fn a_surge_in_the_middle_is_found() {
        let heating = [
            Heating { seconds: 1.0, amp2_seconds: 0.0 },
            Heating { seconds: 1.3, amp2_seconds: 30.0 },
            Heating { seconds: 3.0, amp2_seconds: 30.0 },
        ];
        assert_eq!(time_lag().judge_heating(&heating, 0.0).verdict, Verdict::Opens);
    }

    #[test]
    fn a_standard_without_surge_gates_promises_nothing_about_surges() {
        let fuse = Fuse::new(Standard::Ul248, 1.0).expect("in range");
        let judged = fuse.judge_heating(&steady(5.0, 0.01), 0.5);
        assert_eq!(judged.verdict, Verdict::MayOpen);
        assert_eq!(fuse.judge_heating(&steady(2.0, 120.0), 0.0).verdict, Verdict::Opens);
    }

    #[test]
    fn ratings_outside_the_standard_are_refused() {
        assert!(Fuse::new(Standard::Iec60127Sheet2, 0.0).is_err());
        assert!(Fuse::new(Standard::Iec60127Sheet2, 20.0).is_err());
        assert!(Fuse::new(Standard::Iec60127Sheet2, f64::NAN).is_err());
        assert!(Standard::iec_60127_2(4).is_err());
        // Between two ranges: as the one below.
        let between = Fuse::new(Standard::Iec60127Sheet1, 4.5).expect("between 4 and 5 A");
        assert!(between.gates().iter().any(|gate| gate.most_seconds == Some(2.0)));
    }

    #[test]
    fn no_current_leaves_a_finite_margin() {
        let judged = time_lag().judge_heating(&[], 0.0);
        assert_eq!(judged.verdict, Verdict::Holds);
        assert!(judged.margin().is_finite());
    }
}
