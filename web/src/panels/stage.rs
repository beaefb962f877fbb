//! The stage of the replay: both lamps as they glow at one moment, the scrubber, and the chart under it.

use std::cell::RefCell;
use std::rc::Rc;

use lampladder_core::lamp::Lamp;
use lampladder_core::switch_on::{Sample, SwitchOnError};
use yew::functional::UseForceUpdateHandle;
use yew::{Callback, InputEvent, MouseEvent, NodeRef};

use crate::bench::Bench;
use crate::browser::frames::Frames;
use crate::browser::input;
use crate::charts::seconds::{IN_A_TABLE, marks};
use crate::describe::full;
use crate::parts::el::{El, button, drawing, el};
use crate::parts::svg::n;
use crate::parts::well::{Filament, Well, well};
use crate::replay::Scene;
use crate::story;
use crate::theatre::{Theatre, place, time};

/// What moves the stage.
#[derive(Clone)]
pub(super) struct Hand {
    pub(super) theatre: Rc<RefCell<Theatre>>,
    pub(super) frames: Rc<Frames>,
    pub(super) update: UseForceUpdateHandle,
}

impl Hand {
    fn act(&self, f: impl FnOnce(&mut Theatre)) {
        f(&mut self.theatre.borrow_mut());
        self.frames.wake();
        self.update.force_update();
    }

    fn click(&self, f: impl Fn(&mut Theatre) + 'static) -> Callback<MouseEvent> {
        let hand = self.clone();
        Callback::from(move |_| hand.act(&f))
    }
}

/// Room for a bank's lamps, user units.
const ROOM: Well = Well { x: 0.0, y: 0.0, width: 160.0, height: 72.0 };
const VIEW: &str = "0 0 160 72";
const SMALL: Well = Well { x: 0.0, y: 0.0, width: 44.0, height: 30.0 };
const SMALL_VIEW: &str = "0 0 44 30";
/// Steps of the scrubber from end to end.
const STEPS: f64 = 1000.0;
/// Moments of a still replay.
const MOMENTS: usize = 6;

/// The two lamps, or what is known of them.
pub(super) fn scenes(bench: &Bench, theatre: &Theatre) -> El {
    let all = theatre.show().map(|show| &show.scenes);
    let scene = |(index, scene): (usize, &Scene)| figure(bench, scene, index, theatre.seconds);
    el("div").class("scenes").each(all.into_iter().flatten().enumerate().map(scene))
}

/// The lamps of a bank in their order.
pub(super) fn lamps(bench: &Bench) -> Vec<&Lamp> {
    bench.setup.bank.groups().iter().flatten().collect()
}

/// A scene at a moment: the circuit, or why there is none any more.
fn moment(scene: &Scene, seconds: f64) -> Result<Option<Sample>, SwitchOnError> {
    let Some(run) = scene.run() else { return scene.stopped().map_or(Ok(None), Err) };
    match scene.stopped() {
        Some(error) if run.samples.last().is_none_or(|last| seconds > last.seconds) => Err(error),
        _ => Ok(story::at(run, seconds)),
    }
}

fn figure(bench: &Bench, scene: &Scene, index: usize, seconds: f64) -> El {
    let words = bench.words();
    let lamps = lamps(bench);
    let now = moment(scene, seconds);
    let (word, figures, marked) = match &now {
        Ok(Some(sample)) => {
            let bright = story::brightest(sample, &lamps).unwrap_or_default();
            let kelvin = sample.lamp_kelvin.get(bright).copied().unwrap_or_default();
            let glow = lamps[bright].glow(kelvin).word;
            let amps = words.numerals.about(sample.amps_rms, "A");
            let volts = words.numerals.about(sample.load_volts_rms, "V");
            (
                words.glow(glow),
                words.replay().figures(&amps, &volts),
                Some((glow.name(), kelvin, sample.amps_rms)),
            )
        }
        Err(SwitchOnError::FilamentMelts { .. }) => (words.burnt, String::from(words.none), None),
        Ok(None) | Err(_) => (words.none, String::from(words.none), None),
    };
    let name = el("strong").with(el("i").class(SWATCHES[index])).text(words.condition(scene.condition));
    let figure = el("div")
        .class("scene")
        .test(NAMES[index])
        .set("data-condition", scene.condition.name())
        .with(name)
        .with(bank(bench, &format!("play-{index}"), VIEW, ROOM, &now))
        .with(el("span").class("word").text(word))
        .with(el("span").class("figures").text(figures));
    match marked {
        Some((glow, kelvin, amps)) => {
            figure.set("data-glow", glow).put("data-kelvin", full(kelvin)).put("data-amps", full(amps))
        }
        None => figure,
    }
}

const NAMES: [&str; 2] = ["scene-healthy", "scene-other"];
const SWATCHES: [&str; 2] = ["swatch", "swatch is-other"];

/// All lamps of the bank at a moment, each in its well: groups side by side, their lamps one upon the other.
fn bank(
    bench: &Bench,
    id: &str,
    view: &'static str,
    room: Well,
    now: &Result<Option<Sample>, SwitchOnError>,
) -> El {
    let groups = bench.setup.bank.groups();
    let gap = 4.0;
    let share = |room: f64, count: usize| {
        #[expect(clippy::cast_precision_loss, reason = "at most eight lamps")]
        let count = count as f64;
        (room - gap * (count - 1.0)) / count
    };
    let width = share(room.width, groups.len());
    let mut drawn = drawing(view);
    let mut number = 0;
    let mut x = room.x;
    for (column, group) in groups.iter().enumerate() {
        let height = share(room.height, group.len());
        let mut y = room.y;
        for (row, lamp) in group.iter().enumerate() {
            let filament = match now {
                Ok(Some(sample)) => {
                    let kelvin = sample.lamp_kelvin.get(number).copied();
                    kelvin.map_or(Filament::Unknown, |kelvin| Filament::Glowing(lamp.glow(kelvin)))
                }
                Err(SwitchOnError::FilamentMelts { group, lamp, .. }) if (*group, *lamp) == (column, row) => {
                    Filament::Broken
                }
                _ => Filament::Unknown,
            };
            drawn = drawn.with(well(&format!("{id}-{number}"), Well { x, y, width, height }, filament));
            number += 1;
            y += height + gap;
        }
        x += width + gap;
    }
    drawn
}

/// Play, and the time.
pub(super) fn controls(bench: &Bench, theatre: &Theatre, hand: &Hand) -> El {
    let words = bench.words();
    let texts = words.replay();
    let (name, sign) = if theatre.is_playing() {
        (texts.pause, "M7 5 V19 M17 5 V19")
    } else if theatre.is_over() {
        (texts.again, "M19 12 a7 7 0 1 1 -2.200 -5.100 L19 9 M19 3.500 V9 H13.500")
    } else {
        (texts.play, "M7 4.5 L19 12 L7 19.5 Z")
    };
    let end = theatre.end();
    let clock = clock(bench, theatre.seconds);
    let state = if theatre.is_playing() { "playing" } else { "still" };
    let play = button("play", "play", hand.click(Theatre::toggle))
        .set("aria-label", name)
        .set("data-state", state)
        .with(drawing("0 0 24 24").with(el("path").class("play-sign").set("d", sign)));
    let time_shown = el("small").class("clock").set("aria-hidden", "true").text(clock.clone());
    let typed = {
        let hand = hand.clone();
        Callback::from(move |event: InputEvent| {
            let Some(value) = input::text(&event).and_then(|text| text.parse::<u16>().ok()) else { return };
            hand.act(|theatre| theatre.seek(time(f64::from(value) / STEPS, theatre.end())));
        })
    };
    let value = (place(theatre.seconds, end) * STEPS).round();
    let scrubber = el("input")
        .set("type", "range")
        .set("min", "0")
        .set("max", "1000")
        .set("step", "2")
        .set("class", "scrubber")
        .set("aria-label", texts.time)
        // A reader that follows every change of a playing replay would never be silent.
        .put("aria-valuetext", if theatre.is_playing() { String::from(texts.playing) } else { clock })
        .test("scrubber")
        .put("data-seconds", full(theatre.seconds))
        .put("data-end", full(end))
        .value(n(value))
        .typed(typed);
    el("div").class("controls").with(play).with(scrubber).with(time_shown)
}

fn clock(bench: &Bench, seconds: f64) -> String {
    let places = if seconds < 9.995 { 2 } else { 1 };
    bench.words().numerals.fixed(seconds, places) + "\u{a0}s"
}

/// The chart with the present on it.
pub(super) fn chart(bench: &Bench, theatre: &Theatre, canvas: &NodeRef) -> El {
    let x = n(place(theatre.seconds, theatre.end()) * STEPS);
    let line = el("line").put("x1", x.clone()).put("x2", x).set("y1", "0").set("y2", "10");
    let canvas = el("canvas").at(canvas.clone()).set("role", "img").test("seconds-chart");
    el("div")
        .class("seconds")
        .with(canvas.set("aria-label", bench.words().replay().chart))
        .with(drawing("0 0 1000 10").set("preserveAspectRatio", "none").class("now").with(line))
}

/// A replay that does not move: some moments of both, side by side; a tap shows one in large.
pub(super) fn strip(bench: &Bench, theatre: &Theatre, hand: &Hand) -> Option<El> {
    let show = theatre.show()?;
    let all = marks(theatre.end(), IN_A_TABLE);
    let skipped = all.len().saturating_sub(MOMENTS);
    let frames = all.into_iter().skip(skipped).map(|seconds| {
        let small = show.scenes.iter().enumerate().map(|(index, scene)| {
            let id = format!("strip-{index}-{}", n(seconds * 1000.0));
            bank(bench, &id, SMALL_VIEW, SMALL, &moment(scene, seconds))
        });
        let text = bench.words().numerals.duration(seconds);
        button(
            "moment",
            format!("moment-{}", n(seconds * 1000.0)),
            hand.click(move |theatre| theatre.seek(seconds)),
        )
        .each(small)
        .with(el("span").text(text))
    });
    Some(
        el("div")
            .class("moments")
            .set("role", "group")
            .set("aria-label", bench.words().replay().moments)
            .test("moments")
            .each(frames),
    )
}
