//! The first seconds as a chart: current, and under it the equipment's voltage, healthy and not.

use lampladder_core::switch_on::{Sample, SwitchOn};
use plotters::coord::Shift;
use plotters::drawing::{DrawingArea, DrawingAreaErrorKind};
use plotters::element::PathElement;
use plotters::style::{Color, RGBColor, ShapeStyle};
use plotters_backend::DrawingBackend;
use plotters_canvas::CanvasBackend;
use web_sys::HtmlCanvasElement;

use super::frame::{Frame, Label};
use super::ink::Ink;
use crate::format::{exponent, ten};
use crate::theatre::place;
use crate::words::Words;

/// Height of the chart, CSS pixels; static/replay.css has the same figure.
const HEIGHT: f64 = 146.0;
/// Room left and right of both strips; the scrubber above keeps to it, in static/replay.css.
const LEFT: f64 = 58.0;
const RIGHT: f64 = 40.0;
/// Top and bottom of the two strips, CSS pixels from the chart's.
const STRIPS: [(f64, f64); 2] = [(14.0, 65.0), (79.0, 128.0)];
/// Ends of two lines that are nearer than this share a place, CSS pixels.
const APART: f64 = 12.0;

/// Times that may be marked, seconds.
const TIMES: [f64; 10] = [0.02, 0.1, 0.3, 1.0, 2.0, 3.0, 5.0, 10.0, 20.0, 30.0];
/// How far apart marks must be, over the width, to have room for their texts.
const BETWEEN: f64 = 0.12;
/// The same in a table or a strip of moments.
pub const IN_A_TABLE: f64 = 0.09;

type Area = DrawingArea<CanvasBackend, Shift>;
type Failure = DrawingAreaErrorKind<<CanvasBackend as DrawingBackend>::ErrorType>;
type Line = Vec<(f64, f64)>;
type Quantity = fn(&Sample) -> f64;

/// Times to mark on a scale that ends at `end`, so far apart over its width.
pub fn marks(end: f64, between: f64) -> Vec<f64> {
    let mut all: Vec<f64> = Vec::new();
    for time in TIMES.into_iter().rev().filter(|time| *time <= end) {
        let room = |other: &f64| place(*other, end) - place(time, end) >= between;
        if all.last().is_none_or(room) {
            all.push(time);
        }
    }
    all.reverse();
    all
}

/// Draws the runs, healthy first, on a scale that ends at `end` seconds.
///
/// # Errors
/// A canvas that cannot be drawn on.
pub fn draw(
    canvas: &HtmlCanvasElement,
    runs: [Option<&SwitchOn>; 2],
    end: f64,
    ink: &Ink,
    words: &Words,
) -> Result<(), Failure> {
    let texts = words.replay();
    let strips: [(&str, Quantity); 2] =
        [(texts.chart_amps, |sample| sample.amps_rms), (texts.chart_volts, |sample| sample.load_volts_rms)];
    let Some((whole, area)) = Frame::within(canvas, HEIGHT, [0.0; 4], (1.0, 1.0)) else { return Ok(()) };
    area.fill(&ink.ground)?;
    for ((top, bottom), (name, value)) in STRIPS.into_iter().zip(strips) {
        let lines = runs.map(|run| run.map_or_else(Line::new, |run| line(run, end, value)));
        let most = lines.iter().flatten().map(|at| at.1).fold(0.0, f64::max);
        let most = if most > 0.0 { most * 1.08 } else { 1.0 };
        let strip = Strip {
            frame: whole.beside([LEFT, top, RIGHT, HEIGHT - bottom], (1.0, most)),
            area: &area,
            ink,
            words,
            height: bottom - top,
            most,
        };
        strip.ground(name, end, bottom > HEIGHT / 2.0)?;
        strip.lines(&lines)?;
    }
    area.present()
}

/// One quantity over the scale, no finer than the scale can show.
fn line(run: &SwitchOn, end: f64, value: Quantity) -> Line {
    let mut line = Line::new();
    for sample in &run.samples {
        let at = (place(sample.seconds, end), value(sample));
        if line.last().is_none_or(|last| at.0 - last.0 >= 0.002 || at.0 >= 1.0) {
            line.push(at);
        }
    }
    line
}

struct Strip<'a> {
    frame: Frame,
    area: &'a Area,
    ink: &'a Ink,
    words: &'a Words,
    height: f64,
    most: f64,
}

impl Strip<'_> {
    fn path(&self, line: &[(f64, f64)], style: ShapeStyle) -> Result<(), Failure> {
        let points: Vec<_> = line.iter().map(|at| self.frame.at(*at)).collect();
        self.area.draw(&PathElement::new(points, style))
    }

    const fn label(colour: RGBColor, align: &'static str, baseline: &'static str) -> Label {
        Label { colour, pixels: 12.0, align, baseline }
    }

    /// Axes, marks and names.
    fn ground(&self, name: &str, end: f64, named_times: bool) -> Result<(), Failure> {
        let (ink, numerals) = (self.ink, self.words.numerals);
        let thin = ink.line.stroke_width(self.frame.pixels(0.8));
        for time in marks(end, BETWEEN) {
            let x = place(time, end);
            self.path(&[(x, 0.0), (x, self.most)], thin)?;
            if named_times {
                let unit = if time >= end { "\u{a0}s" } else { "" };
                let text = numerals.plain(time) + unit;
                self.frame.write(&text, (x, 0.0), (0.0, 4.0), Self::label(ink.ink, "center", "top"));
            }
        }
        self.path(&[(0.0, self.most), (0.0, 0.0), (1.0, 0.0)], ink.dim.stroke_width(self.frame.pixels(1.2)))?;
        for amount in round_marks(self.most) {
            self.path(&[(0.0, amount), (1.0, amount)], thin)?;
            let label = Self::label(ink.ink, "right", "middle");
            self.frame.write(&numerals.plain(amount), (0.0, amount), (-6.0, 0.0), label);
        }
        self.frame.write(name, (0.0, self.most), (0.0, -2.0), Self::label(ink.dim, "left", "bottom"));
        Ok(())
    }

    /// Both lines with their last values; the healthy one whole and last, so that it lies on top.
    fn lines(&self, lines: &[Line; 2]) -> Result<(), Failure> {
        let ends = lines.each_ref().map(|line| line.last().map_or(0.0, |at| at.1));
        let pixels = |value: f64| self.height * value / self.most;
        let near = (pixels(ends[0]) - pixels(ends[1])).abs() < APART;
        for (index, colour) in [(1, self.ink.brass), (0, self.ink.ink)] {
            let Some(last) = lines[index].last() else { continue };
            self.frame.dash(if index == 1 { &[5.0, 3.0] } else { &[] });
            let drawn = self.path(&lines[index], colour.stroke_width(self.frame.pixels(2.2)));
            self.frame.dash(&[]);
            drawn?;
            // Two ends at one place part: the higher one up, the lower one down.
            let higher = ends[index] > ends[1 - index] || (ends[0] == ends[1] && index == 0);
            let aside = 0.5 * (APART - (pixels(ends[0]) - pixels(ends[1])).abs());
            let by = if near { if higher { -aside } else { aside } } else { 0.0 };
            let text = self.words.numerals.about(last.1, "");
            self.frame.write(&text, *last, (5.0, by), Self::label(colour, "left", "middle"));
        }
        Ok(())
    }
}

/// Two or three round numbers along an axis.
fn round_marks(most: f64) -> Vec<f64> {
    let rough = most / 2.5;
    let decade = ten(exponent(rough));
    let step =
        [1.0, 2.0, 5.0, 10.0].map(|times| times * decade).into_iter().rev().find(|step| *step <= rough);
    let step = step.unwrap_or(most);
    (1..=4).map(|count| f64::from(count) * step).take_while(|mark| *mark <= most).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn marks_stand_apart() {
        for end in [0.5, 3.0, 10.0, 30.0] {
            let marks = marks(end, BETWEEN);
            assert!(marks.len() > 2, "{marks:?}");
            assert!(marks.windows(2).all(|pair| place(pair[1], end) - place(pair[0], end) >= BETWEEN));
        }
    }

    #[test]
    fn amounts_are_round() {
        assert_eq!(round_marks(0.86).len(), 4);
        assert_eq!(round_marks(248.0), [50.0, 100.0, 150.0, 200.0]);
        assert!(round_marks(f64::NAN).is_empty());
    }
}
