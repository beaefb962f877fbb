//! The chart of the bank's curve with its band, the equipment's curves, and where they meet.

use lampladder_core::condition::Condition;
use lampladder_core::curve::{bank_amps, load_lines};
use lampladder_core::setup::Setup;
use plotters::prelude::*;
use plotters::style::text_anchor::{HPos, Pos, VPos};
use plotters_canvas::CanvasBackend;
use web_sys::HtmlCanvasElement;

use super::ink::Ink;
use crate::answers::Answers;
use crate::browser::window::pixel_ratio;
use crate::words::Words;

/// Points along the bank's curve.
const STEPS: u16 = 48;
/// Points along the equipment's.
const LOAD_POINTS: u16 = 56;
/// Height of the chart, CSS pixels.
const HEIGHT: u32 = 280;

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
    // The backend knows nothing of fine screens: make the canvas that much larger and everything on it too.
    let ratio = pixel_ratio().max(2.0);
    let width = u32::try_from(canvas.client_width()).unwrap_or(0).max(200);
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "a few thousand pixels at most"
    )]
    let scaled = |pixels: f64| (pixels * ratio).round() as u32;
    canvas.set_width(scaled(f64::from(width)));
    canvas.set_height(scaled(f64::from(HEIGHT)));
    let Some(backend) = CanvasBackend::with_canvas_object(canvas.clone()) else { return Ok(()) };
    let root = backend.into_drawing_area();
    root.fill(&ink.ground)?;
    let font = |pixels: f64| ("system-ui, sans-serif", scaled(pixels));
    let mut chart = ChartBuilder::on(&root)
        .margin(scaled(10.0))
        .margin_right(scaled(14.0))
        .x_label_area_size(scaled(38.0))
        .y_label_area_size(scaled(52.0))
        .build_cartesian_2d(0.0..curves.volts, 0.0..curves.amps)?;
    let numerals = words.numerals;
    chart
        .configure_mesh()
        .disable_x_mesh()
        .x_labels(5)
        .y_labels(5)
        .bold_line_style(ink.line.stroke_width(scaled(0.6)))
        .light_line_style(ink.ground)
        .axis_style(ink.dim.stroke_width(scaled(1.0)))
        .label_style(font(12.0).into_font().color(&ink.ink))
        .axis_desc_style(font(12.0).into_font().color(&ink.dim))
        .x_desc(format!("{}, V", words.table.bank_volts))
        .y_desc(format!("{}, A", words.table.amps))
        .x_label_formatter(&|volts| numerals.plain(*volts))
        .y_label_formatter(&|amps| numerals.plain(*amps))
        .draw()?;
    let band: Line = curves.low.iter().chain(curves.high.iter().rev()).copied().collect();
    chart.draw_series([Polygon::new(band, ink.brass.mix(0.28))])?;
    for (condition, line) in &curves.loads {
        let width = if *condition == Condition::Healthy { 2.0 } else { 1.2 };
        chart.draw_series(LineSeries::new(line.iter().copied(), ink.ink.stroke_width(scaled(width))))?;
    }
    chart.draw_series(LineSeries::new(curves.bank.iter().copied(), ink.brass.stroke_width(scaled(3.0))))?;
    for (condition, at) in &curves.marks {
        let size = scaled(5.5);
        let left = at.0 > curves.volts * 0.6;
        // Right of a mark lies the open wedge between the two curves; at the edge, the one above the bank's.
        let anchor =
            if left { Pos::new(HPos::Right, VPos::Bottom) } else { Pos::new(HPos::Left, VPos::Center) };
        let style = font(13.0).into_font().color(&ink.ink).pos(anchor);
        #[expect(clippy::cast_possible_wrap, reason = "a few pixels")]
        let (dx, dy) =
            if left { (-(scaled(8.0) as i32), -(scaled(8.0) as i32)) } else { (scaled(12.0) as i32, 0) };
        chart.draw_series([EmptyElement::at(*at)
            + Circle::new((0, 0), size, ink.ground.filled())
            + Circle::new((0, 0), size, ink.ink.stroke_width(scaled(2.2)))
            + Text::new((words.condition)(*condition).to_owned(), (dx, dy), style)])?;
    }
    root.present()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn lines_end_at_the_frame() {
        let line = [(-1.0, 1.0), (1.0, 1.0), (3.0, 1.0)];
        assert_eq!(clipped(&line, (2.0, 2.0)), vec![(0.0, 1.0), (1.0, 1.0), (2.0, 1.0)]);
        let curves = Curves::of(
            &Setup::example().expect("in range"),
            &Answers::of(&Setup::example().expect("in range")).expect("answers"),
        );
        for (_, line) in &curves.loads {
            assert!(line.len() > 1);
            assert!(line.iter().all(|(x, y)| *x <= curves.volts && *y <= curves.amps));
        }
    }
}
