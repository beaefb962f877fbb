//! The frame of a chart: where a value lies on the canvas, and texts beside it.
//!
//! The chart library draws the shapes, in pixels. Its own axes and texts would cost 15 KB more of the first load, for
//! its way of printing numbers and of finding fonts.

use plotters::coord::Shift;
use plotters::drawing::{DrawingArea, IntoDrawingArea};
use plotters::style::RGBColor;
use plotters_canvas::CanvasBackend;
use web_sys::wasm_bindgen::{JsCast, JsValue};
use web_sys::{CanvasRenderingContext2d, HtmlCanvasElement};

use crate::browser::window::pixel_ratio;

/// Height of a chart, CSS pixels.
const HEIGHT: f64 = 290.0;
/// Room around the frame, CSS pixels: left, top, right, bottom.
const MARGINS: [f64; 4] = [46.0, 24.0, 12.0, 44.0];

/// The frame.
#[derive(Debug)]
pub(super) struct Frame {
    context: CanvasRenderingContext2d,
    /// Canvas pixels in a CSS pixel.
    ratio: f64,
    size: (f64, f64),
    /// Room around it, CSS pixels: left, top, right, bottom.
    margins: [f64; 4],
    most: (f64, f64),
}

/// How a text is written.
#[derive(Debug, Clone, Copy)]
pub(super) struct Label {
    /// Its colour.
    pub colour: RGBColor,
    /// Its height.
    pub pixels: f64,
    /// What of it stands at the point: `left`, `center` or `right`.
    pub align: &'static str,
    /// The same up and down: `top`, `middle` or `bottom`.
    pub baseline: &'static str,
}

impl Frame {
    /// A frame from zero to `most` on a canvas, made as fine as the screen.
    pub(super) fn on(
        canvas: &HtmlCanvasElement,
        most: (f64, f64),
    ) -> Option<(Self, DrawingArea<CanvasBackend, Shift>)> {
        Self::within(canvas, HEIGHT, MARGINS, most)
    }

    /// The same on a canvas of another height, with other room around it.
    pub(super) fn within(
        canvas: &HtmlCanvasElement,
        height: f64,
        margins: [f64; 4],
        most: (f64, f64),
    ) -> Option<(Self, DrawingArea<CanvasBackend, Shift>)> {
        // The library knows nothing of fine screens: make the canvas that much larger, and everything on it too.
        let ratio = pixel_ratio().max(2.0);
        let size = (f64::from(canvas.client_width()).max(200.0), height);
        canvas.set_width(whole(size.0 * ratio).unsigned_abs());
        canvas.set_height(whole(size.1 * ratio).unsigned_abs());
        let context = canvas.get_context("2d").ok()??.dyn_into().ok()?;
        let area = CanvasBackend::with_canvas_object(canvas.clone())?.into_drawing_area();
        Some((Self { context, ratio, size, margins, most }, area))
    }

    /// Another frame on the same canvas.
    pub(super) fn beside(&self, margins: [f64; 4], most: (f64, f64)) -> Self {
        Self { context: self.context.clone(), margins, most, ..*self }
    }

    /// Where a point lies, canvas pixels.
    pub(super) fn at(&self, (x, y): (f64, f64)) -> (i32, i32) {
        let (x, y) = self.place((x, y));
        (whole(x), whole(y))
    }

    /// A length in canvas pixels.
    pub(super) fn pixels(&self, css: f64) -> u32 {
        whole((css * self.ratio).max(1.0)).unsigned_abs()
    }

    /// Writes a text at a point, moved by CSS pixels.
    pub(super) fn write(&self, text: &str, at: (f64, f64), by: (f64, f64), label: Label) {
        let (x, y) = self.place(at);
        let RGBColor(r, g, b) = label.colour;
        self.context.set_fill_style_str(&format!("rgb({r} {g} {b})"));
        self.context.set_font(&format!("{}px system-ui, sans-serif", self.pixels(label.pixels)));
        self.context.set_text_align(label.align);
        self.context.set_text_baseline(label.baseline);
        // A text that cannot be written is in the table all the same.
        let _ = self.context.fill_text(text, x + by.0 * self.ratio, y + by.1 * self.ratio);
    }

    /// Draws broken lines from here on, by CSS pixels; whole ones where nothing is given.
    pub(super) fn dash(&self, css: &[f64]) {
        let pattern: js_sys::Array =
            css.iter().map(|length| JsValue::from_f64(length * self.ratio)).collect();
        let _ = self.context.set_line_dash(&pattern);
    }

    fn place(&self, (x, y): (f64, f64)) -> (f64, f64) {
        let [left, top, right, bottom] = self.margins;
        let width = self.size.0 - left - right;
        let height = self.size.1 - top - bottom;
        let css = (left + width * x / self.most.0, top + height * (1.0 - y / self.most.1));
        (css.0 * self.ratio, css.1 * self.ratio)
    }
}

#[expect(
    clippy::cast_possible_truncation,
    reason = "a few thousand pixels; the cast cuts at the ends of i32"
)]
fn whole(pixels: f64) -> i32 {
    pixels.round() as i32
}
