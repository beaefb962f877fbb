//! What the lamp does in the first seconds, told from the run alone: a flash, a slow rise, pulsing. The words are
//! elsewhere.

use lampladder_core::glow::GlowWord;
use lampladder_core::lamp::Lamp;
use lampladder_core::switch_on::{Sample, SwitchOn};

/// What there is to see.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Story {
    /// It never glows.
    Dark,
    /// It flares up over and over.
    Pulses {
        /// From one start to the next, once it is known, seconds.
        seconds: Option<f64>,
        /// The brightest.
        bright: GlowWord,
    },
    /// It comes up and stays.
    Steady {
        /// What it stays at.
        word: GlowWord,
        /// When it is there, seconds.
        seconds: f64,
    },
    /// It is still becoming brighter at the end.
    Rising {
        /// What it has come to.
        word: GlowWord,
    },
    /// Bright at first, then dimmer.
    Dims {
        /// The brightest.
        bright: GlowWord,
        /// What it comes to.
        then: GlowWord,
        /// When it is there, seconds.
        seconds: f64,
        /// Whether it is still becoming dimmer at the end.
        still: bool,
    },
    /// Bright, then dim, then brighter again.
    Dips {
        /// The brightest before.
        bright: GlowWord,
        /// The dimmest between.
        dim: GlowWord,
        /// When that is, seconds.
        seconds: f64,
        /// What it comes to.
        then: GlowWord,
    },
}

/// Why it does so, where the run shows it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Cause {
    /// A converter starts, starves and starts again.
    Hunting,
    /// A reservoir fills.
    Reservoir,
    /// A motor gains speed.
    Speed,
    /// Heaters, or another lamp, become hot.
    Heaters,
    /// No current flows.
    NoCurrent,
}

/// Share of the temperature's rise that counts as there.
const THERE: f64 = 0.05;
/// Share of it that still moves over the last fifth of a run that has not settled.
const MOVING: f64 = 0.01;
/// A motor's gain in speed, over its rated one, that dims a lamp.
const GAIN: f64 = 0.1;
/// A heater's rise that does, kelvin.
const WARMED: f64 = 100.0;
/// A reservoir's rise that does, over its highest volts; and the least of these, over the volts at the equipment.
const FILLED: f64 = 0.1;
/// A current that no lamp shows, amperes.
const NO_AMPS: f64 = 1e-3;

/// A run told by the lamp to look at: the one that comes nearest to its rating, or beyond.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Told {
    /// What it does.
    pub story: Story,
    /// Why.
    pub cause: Option<Cause>,
}

/// The story of a run behind these lamps, in the order of the bank.
pub fn tell(run: &SwitchOn, lamps: &[&Lamp]) -> Option<Told> {
    let (first, last) = (run.samples.first()?, run.samples.last()?);
    let nearest = |lamp: usize| {
        let hottest = run.samples.iter().filter_map(|sample| sample.lamp_kelvin.get(lamp).copied());
        hottest.fold(0.0, f64::max) / lamps[lamp].rated_kelvin()
    };
    let lamp = (0..lamps.len()).max_by(|a, b| nearest(*a).total_cmp(&nearest(*b)))?;
    let kelvin = |sample: &Sample| sample.lamp_kelvin.get(lamp).copied().unwrap_or_default();
    let line: Vec<(f64, f64)> = run.samples.iter().map(|sample| (sample.seconds, kelvin(sample))).collect();
    let word = |kelvin: f64| lamps[lamp].glow(kelvin).word;
    let (peak_at, peak) = highest(&line);
    let hunts = run.starts.len() > 1 && run.settle_seconds.is_none();
    let story = if word(peak) == GlowWord::Dark {
        Story::Dark
    } else if hunts {
        Story::Pulses { seconds: run.pulse_seconds(), bright: word(peak) }
    } else {
        shape(&line, kelvin(first), run.settle_seconds.is_none(), word)
    };
    let cause = match story {
        Story::Dark => (last.amps_rms < NO_AMPS).then_some(Cause::NoCurrent),
        Story::Pulses { .. } => Some(Cause::Hunting),
        Story::Dims { .. } => dimming(run, peak_at, last.seconds),
        Story::Dips { seconds, .. } => {
            let before: Vec<(f64, f64)> = line.iter().copied().filter(|at| at.0 <= seconds).collect();
            dimming(run, highest(&before).0, seconds)
        }
        Story::Steady { .. } | Story::Rising { .. } => None,
    };
    Some(Told { story, cause })
}

/// Why a lamp becomes dimmer between two times.
fn dimming(run: &SwitchOn, from: f64, to: f64) -> Option<Cause> {
    let between: Vec<&Sample> =
        run.samples.iter().filter(|sample| (from..=to).contains(&sample.seconds)).collect();
    let most =
        |of: fn(&Sample) -> Option<f64>| between.iter().filter_map(|sample| of(sample)).fold(0.0, f64::max);
    let rise = |of: fn(&Sample) -> Option<f64>| {
        let then = between.first().and_then(|sample| of(sample));
        then.map_or(0.0, |then| most(of) - then)
    };
    let dc = |sample: &Sample| sample.load_dc_volts;
    // A reservoir that is a short does not fill, whatever it gains.
    let holds = most(dc) > FILLED * most(|sample| Some(sample.load_volts_rms));
    if rise(|sample| sample.load_speed) > GAIN {
        Some(Cause::Speed)
    } else if rise(|sample| sample.load_kelvin) > WARMED {
        Some(Cause::Heaters)
    } else if holds && rise(dc) > FILLED * most(dc) {
        Some(Cause::Reservoir)
    } else {
        None
    }
}

fn highest(line: &[(f64, f64)]) -> (f64, f64) {
    line.iter().copied().reduce(|best, at| if at.1 > best.1 { at } else { best }).unwrap_or_default()
}

/// The deepest valley: how high its lower side is, how deep it is, and when.
fn valley(line: &[(f64, f64)]) -> Option<(f64, f64, f64)> {
    let mut after = vec![0.0; line.len()];
    let mut most = 0.0;
    for (index, at) in line.iter().enumerate().rev() {
        most = f64::max(most, at.1);
        after[index] = most;
    }
    let mut before = 0.0;
    let mut deepest = None;
    for (index, at) in line.iter().enumerate() {
        before = f64::max(before, at.1);
        let side = before.min(after[index]);
        if deepest.is_none_or(|(side_then, floor, _)| side - at.1 > side_then - floor) {
            deepest = Some((side, at.1, at.0));
        }
    }
    deepest
}

/// The story of a temperature that starts from `cold`.
fn shape(line: &[(f64, f64)], cold: f64, restless: bool, word: impl Fn(f64) -> GlowWord) -> Story {
    let (_, peak) = highest(line);
    let (end_seconds, end) = line.last().copied().unwrap_or_default();
    let then = word(end);
    if let Some((side, floor, seconds)) = valley(line)
        && word(floor) < word(side).min(then)
    {
        let before = line.iter().filter(|at| at.0 <= seconds).map(|at| at.1).fold(0.0, f64::max);
        return Story::Dips { bright: word(before), dim: word(floor), seconds, then };
    }
    let late = line.iter().find(|at| at.0 >= 0.8 * end_seconds).map_or(end, |at| at.1);
    let moves = restless && (end - late).abs() > MOVING * (peak - cold);
    let falls = word(peak) > then && peak - end > THERE * (peak - cold);
    // Where it has come, but for a twentieth of the way, and stays.
    let way = if falls { peak - end } else { end - cold };
    let there = |at: &(f64, f64)| (at.1 - end).abs() <= THERE * way.max(20.0);
    let seconds = line.iter().rev().take_while(|at| there(at)).last().map_or(end_seconds, |at| at.0);
    if falls {
        Story::Dims { bright: word(peak), then, seconds, still: moves }
    } else if moves && end > late {
        Story::Rising { word: then }
    } else {
        Story::Steady { word: then, seconds }
    }
}

/// The lamp to look at in a moment: the one nearest to its rating, or beyond.
pub fn brightest(sample: &Sample, lamps: &[&Lamp]) -> Option<usize> {
    let share = |lamp: &usize| {
        sample.lamp_kelvin.get(*lamp).map_or(0.0, |kelvin| kelvin / lamps[*lamp].rated_kelvin())
    };
    (0..lamps.len()).max_by(|a, b| share(a).total_cmp(&share(b)))
}

/// Whether two stories would be hard to tell apart at the bench.
pub fn alike(one: &Story, other: &Story) -> bool {
    let near = |a: f64, b: f64| a.max(b) <= 1.5 * a.min(b) + 0.05;
    match (*one, *other) {
        (Story::Steady { word, seconds }, Story::Steady { word: other_word, seconds: other }) => {
            word == other_word && near(seconds, other)
        }
        (
            Story::Dims { bright, then, seconds, .. },
            Story::Dims { bright: other_bright, then: other_then, seconds: other, .. },
        ) => bright == other_bright && then == other_then && near(seconds, other),
        (Story::Pulses { seconds, bright }, Story::Pulses { seconds: other, bright: other_bright }) => {
            bright == other_bright && near(seconds.unwrap_or(0.0), other.unwrap_or(0.0))
        }
        (one, other) => one == other,
    }
}

/// The circuit between two samples, on a straight line; before the first and after the last, those.
pub fn at(run: &SwitchOn, seconds: f64) -> Option<Sample> {
    let after = run.samples.partition_point(|sample| sample.seconds < seconds);
    let Some(next) = run.samples.get(after) else { return run.samples.last().cloned() };
    let Some(before) = after.checked_sub(1).and_then(|index| run.samples.get(index)) else {
        return Some(next.clone());
    };
    let share = (seconds - before.seconds) / (next.seconds - before.seconds);
    let mix = |from: f64, to: f64| from + share * (to - from);
    let both = |from: Option<f64>, to: Option<f64>| Some(mix(from?, to?));
    let kelvins = before.lamp_kelvin.iter().zip(&next.lamp_kelvin);
    Some(Sample {
        seconds,
        lamp_kelvin: kelvins.map(|(from, to)| mix(*from, *to)).collect(),
        amps_rms: mix(before.amps_rms, next.amps_rms),
        load_volts_rms: mix(before.load_volts_rms, next.load_volts_rms),
        load_dc_volts: both(before.load_dc_volts, next.load_dc_volts),
        load_kelvin: both(before.load_kelvin, next.load_kelvin),
        load_speed: both(before.load_speed, next.load_speed),
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use lampladder_core::condition::Condition;
    use lampladder_core::family::Family;
    use lampladder_core::plate::Plate;
    use lampladder_core::setup::Setup;
    use lampladder_core::switch_on::{Options, simulate};

    fn told(family: Family, condition: Condition, seconds: f64) -> (Told, SwitchOn) {
        let setup = Setup::example().expect("in range");
        let plate = Plate::new(family, 230.0, 45.0, None).expect("in range");
        let load = plate.load(condition, 1.0).expect("a load");
        let options = Options { seconds, ..Options::default() };
        let run = simulate(&setup.supply, &setup.bank, &load, &options).expect("runs");
        let lamps: Vec<&Lamp> = setup.bank.groups().iter().flatten().collect();
        (tell(&run, &lamps).expect("a story"), run)
    }

    #[test]
    fn each_kind_has_its_story() {
        let radio = told(Family::TransformerSupply, Condition::Healthy, 3.0).0;
        assert!(
            matches!(radio.story, Story::Steady { word: GlowWord::Orange, seconds } if seconds < 1.0),
            "{radio:?}"
        );
        let shorted = told(Family::TransformerSupply, Condition::Shorted, 3.0).0;
        assert!(
            matches!(shorted.story, Story::Steady { word: GlowWord::Full, seconds } if seconds < 0.2),
            "{shorted:?}"
        );
        assert_eq!(shorted.cause, None);
        assert!(!alike(&radio.story, &shorted.story) && alike(&radio.story, &radio.story));
        let valves = told(Family::ValveTransformer, Condition::Healthy, 3.0).0;
        assert!(matches!(valves.story, Story::Dims { still: true, .. }), "{valves:?}");
        assert_eq!(valves.cause, Some(Cause::Heaters));
        let late = told(Family::ValveSeries, Condition::ShortedReservoir, 30.0).0;
        assert!(matches!(late.story, Story::Dips { .. }), "{late:?}");
        assert_eq!(late.cause, Some(Cause::Heaters));
        // A reservoir that is a short does not fill when the rectifier has become hot.
        let late = told(Family::ValveTransformer, Condition::ShortedReservoir, 30.0).0;
        assert!(matches!(late.story, Story::Dips { .. }), "{late:?}");
        assert_eq!(late.cause, Some(Cause::Heaters));
        let switcher = told(Family::SwitchMode, Condition::Healthy, 3.0).0;
        assert!(matches!(switcher.story, Story::Pulses { seconds: Some(_), .. }), "{switcher:?}");
        let motor = told(Family::UniversalMotor, Condition::Healthy, 3.0).0;
        assert!(matches!(motor.story, Story::Dims { .. }), "{motor:?}");
        assert_eq!(motor.cause, Some(Cause::Speed));
        let broken = told(Family::Heater, Condition::OpenCircuit, 3.0).0;
        assert_eq!((broken.story, broken.cause), (Story::Dark, Some(Cause::NoCurrent)));
        let idle = told(Family::SwitchMode, Condition::Idle, 10.0).0;
        assert!(matches!(idle.story, Story::Dims { then: GlowWord::Dark, still: false, .. }), "{idle:?}");
        assert_eq!(idle.cause, Some(Cause::Reservoir));
    }

    #[test]
    fn between_two_samples_lies_a_straight_line() {
        let (_, run) = told(Family::Heater, Condition::Healthy, 0.1);
        let (a, b) = (&run.samples[3], &run.samples[4]);
        let middle = at(&run, 0.5 * (a.seconds + b.seconds)).expect("inside");
        assert!((middle.lamp_kelvin[0] - 0.5 * (a.lamp_kelvin[0] + b.lamp_kelvin[0])).abs() < 1e-9);
        assert_eq!(at(&run, a.seconds).expect("a sample"), *a);
        assert_eq!(at(&run, -1.0).as_ref(), run.samples.first());
        assert_eq!(at(&run, 9.0).as_ref(), run.samples.last());
    }
}
