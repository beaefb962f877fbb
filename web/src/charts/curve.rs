//! The chart of the bank's curve with its band, the equipment's curves, and where they meet.

use lampladder_core::condition::Condition;
use lampladder_core::curve::{bank_amps, load_lines};
use lampladder_core::setup::Setup;
use plotters::drawing::DrawingAreaErrorKind;
use plotters::element::{Circle, PathElement, Polygon};
use plotters::style::{Color, ShapeStyle};
use plotters_backend::DrawingBackend;
use plotters_canvas::CanvasBackend;
use web_sys::HtmlCanvasElement;

use super::frame::{Frame, Label};
use super::ink::Ink;
use crate::answers::Answers;
use crate::format::{exponent, ten};
use crate::words::Words;

/// Points along the bank's curve.
const STEPS: u16 = 48;
/// Points along the equipment's.
const LOAD_POINTS: u16 = 56;

type Line = Vec<(f64, f64)>;

/// What is drawn.
#[derive(Debug, Clone, PartialEq)]
pub struct Curves {
    bank: Line,
    low: Line,
    high: Line,
    loads: Vec<(Condition, Line)>,
    marks: Vec<(Condition, (f64, f64))>,
    volts: f64,
    amps: f64,
}

impl Curves {
    /// The curves of a set-up.
    pub fn of(setup: &Setup, answers: &Answers) -> Self {
        let volts = setup.supply.volts() * 1.04;
        let bands: Vec<_> = (0..=STEPS)
            .map(|step| {
                // Closer at low voltage, where the curve bends.
                let share = f64::from(step) / f64::from(STEPS);
                let at = volts * share * share;
                (at, bank_amps(&setup.bank, at))
            })
            .collect();
        let most = bands.iter().map(|(_, band)| band.high).fold(0.0, f64::max);
        let amps = if most > 0.0 { most * 1.12 } else { 1.0 };
        let mut loads = Vec::new();
        for (condition, _) in answers.all() {
            let Ok(load) = setup.plate.load(*condition, 1.0) else { continue };
            let Ok(lines) = load_lines(&setup.supply, &setup.bank, &load, LOAD_POINTS) else { continue };
            loads.extend(lines.iter().map(|line| (*condition, clipped(&line.points, (volts, amps)))));
        }
        let marks = answers.all().iter().filter_map(|(condition, _)| {
            let shown = answers.shown(*condition)?;
            Some((*condition, (shown.bank_volts.value, shown.amps.value)))
        });
        Self {
            bank: bands.iter().map(|(at, band)| (*at, band.value)).collect(),
            low: bands.iter().map(|(at, band)| (*at, band.low)).collect(),
            high: bands.iter().map(|(at, band)| (*at, band.high)).collect(),
            loads,
            marks: marks.collect(),
            volts,
            amps,
        }
    }
}

/// The part of a line inside the frame: the library would press the rest onto its edge.
fn clipped(line: &[(f64, f64)], most: (f64, f64)) -> Line {
    let inside = |&(x, y): &(f64, f64)| (0.0..=most.0).contains(&x) && (0.0..=most.1).contains(&y);
    let mut out = Line::new();
    for pair in line.windows(2) {
        let (from, to) = (pair[0], pair[1]);
        match (inside(&from), inside(&to)) {
            (true, true) => out.extend([from, to]),
            (true, false) => out.extend([from, edge(from, to, most)]),
            (false, true) => out.extend([edge(to, from, most), to]),
            (false, false) => {}
        }
    }
    out.dedup();
    out
}

/// Where the way from a point inside to one outside leaves the frame.
fn edge(from: (f64, f64), to: (f64, f64), most: (f64, f64)) -> (f64, f64) {
    let share = |from: f64, to: f64, most: f64| {
        if to > most {
            (most - from) / (to - from)
        } else if to < 0.0 {
            from / (from - to)
        } else {
            1.0
        }
    };
    let share = share(from.0, to.0, most.0).min(share(from.1, to.1, most.1));
    let at = |from: f64, to: f64, most: f64| (from + share * (to - from)).clamp(0.0, most);
    (at(from.0, to.0, most.0), at(from.1, to.1, most.1))
}

type Failure = DrawingAreaErrorKind<<CanvasBackend as DrawingBackend>::ErrorType>;

/// Draws the curves.
///
/// # Errors
/// A canvas that cannot be drawn on.
pub fn draw(canvas: &HtmlCanvasElement, curves: &Curves, ink: &Ink, words: &Words) -> Result<(), Failure> {
    let Some((frame, area)) = Frame::on(canvas, (curves.volts, curves.amps)) else { return Ok(()) };
    area.fill(&ink.ground)?;
    let path = |line: &Line, style: ShapeStyle| {
        area.draw(&PathElement::new(line.iter().map(|at| frame.at(*at)).collect::<Vec<_>>(), style))
    };
    let numerals = words.numerals;
    let label = Label { colour: ink.ink, pixels: 12.0, align: "right", baseline: "middle" };
    for amps in ticks(curves.amps) {
        path(&vec![(0.0, amps), (curves.volts, amps)], ink.line.stroke_width(frame.pixels(0.8)))?;
        frame.write(&numerals.plain(amps), (0.0, amps), (-7.0, 0.0), label);
    }
    for volts in ticks(curves.volts) {
        let label = Label { align: "center", baseline: "top", ..label };
        path(&vec![(volts, 0.0), (volts, curves.amps)], ink.line.stroke_width(frame.pixels(0.8)))?;
        frame.write(&numerals.plain(volts), (volts, 0.0), (0.0, 7.0), label);
    }
    let axes = vec![(0.0, curves.amps), (0.0, 0.0), (curves.volts, 0.0)];
    path(&axes, ink.dim.stroke_width(frame.pixels(1.2)))?;
    let named = Label { colour: ink.dim, align: "left", baseline: "top", ..label };
    frame.write(&format!("{}, A", words.table.amps), (0.0, curves.amps), (8.0, -16.0), named);
    let under = Label { align: "right", ..named };
    frame.write(&format!("{}, V", words.table.bank_volts), (curves.volts, 0.0), (0.0, 24.0), under);

    let band = curves.low.iter().chain(curves.high.iter().rev()).map(|at| frame.at(*at));
    area.draw(&Polygon::new(band.collect::<Vec<_>>(), ink.brass.mix(0.28)))?;
    for (condition, line) in &curves.loads {
        let width = if *condition == Condition::Healthy { 2.0 } else { 1.2 };
        path(line, ink.ink.stroke_width(frame.pixels(width)))?;
    }
    path(&curves.bank, ink.brass.stroke_width(frame.pixels(3.0)))?;
    for (condition, at) in &curves.marks {
        let (centre, size) = (frame.at(*at), frame.pixels(5.5));
        area.draw(&Circle::new(centre, size, ink.ground.filled()))?;
        area.draw(&Circle::new(centre, size, ink.ink.stroke_width(frame.pixels(2.2))))?;
        // Right of a mark lies the open wedge between the two curves; at the edge, the one above the bank's.
        let (align, beside) =
            if at.0 > curves.volts * 0.6 { ("right", (-8.0, -14.0)) } else { ("left", (12.0, 0.0)) };
        frame.write(words.condition(*condition), *at, beside, Label { align, pixels: 13.0, ..label });
    }
    area.present()
}

/// Round numbers along an axis, about five of them, without zero.
fn ticks(most: f64) -> Vec<f64> {
    let rough = most / 5.0;
    let decade = ten(exponent(rough));
    let step = [1.0, 2.0, 5.0, 10.0].map(|times| times * decade).into_iter().find(|step| *step >= rough);
    let step = step.unwrap_or(most);
    (1..=9).map(|count| f64::from(count) * step).take_while(|tick| *tick <= most).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_are_round() {
        assert_eq!(ticks(239.2), [50.0, 100.0, 150.0, 200.0]);
        assert_eq!(ticks(0.31).len(), 3);
        assert!(ticks(f64::NAN).is_empty());
    }

    #[test]
    fn lines_end_at_the_frame() {
        let line = [(-1.0, 1.0), (1.0, 1.0), (3.0, 1.0)];
        assert_eq!(clipped(&line, (2.0, 2.0)), vec![(0.0, 1.0), (1.0, 1.0), (2.0, 1.0)]);
        let curves = Curves::of(
            &Setup::example().expect("in range"),
            &Answers::of(&Setup::example().expect("in range"), Condition::Healthy).expect("answers"),
        );
        for (_, line) in &curves.loads {
            assert!(line.len() > 1);
            assert!(line.iter().all(|(x, y)| *x <= curves.volts && *y <= curves.amps));
        }
    }
}
