//! A lamp in its dark well, glowing as core says it would: the one saturated thing on the screen.

use super::el::{El, el};
use super::svg::{mix, n, rgb};
use lampladder_core::glow::{Glow, GlowWord};

/// Where a well lies, user units.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Well {
    /// Left edge.
    pub x: f64,
    /// Top edge.
    pub y: f64,
    /// Width.
    pub width: f64,
    /// Height.
    pub height: f64,
}

/// What the filament does.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Filament {
    /// It glows (or not) like this.
    Glowing(Glow),
    /// It flares up to this and goes out, over and over.
    Pulsing {
        /// At its brightest.
        glow: Glow,
        /// From one time to the next, seconds.
        seconds: f64,
    },
    /// It has melted.
    Broken,
    /// Nothing is known.
    Unknown,
}

const WHITE: [u8; 3] = [255, 250, 240];
/// A cold wire in the dark, still to be seen.
const COLD: [u8; 3] = [118, 108, 96];

/// A well with a lamp in it; `id` must be unique on the page.
pub fn well(id: &str, at: Well, filament: Filament) -> El {
    let corner = (at.height * 0.2).min(at.width * 0.2).min(14.0);
    let group = el("g").with(rect(at, corner).class("well"));
    if let Filament::Pulsing { glow, seconds } = filament {
        let lit = Filament::Glowing(glow);
        let light = halo(id, at, lit).into_iter().fold(el("g"), El::with);
        return coil(group, at, Filament::Unknown).with(coil(light, at, lit).with(pulse(seconds)));
    }
    let group = halo(id, at, filament).into_iter().fold(group, El::with);
    coil(group, at, filament)
}

/// A drawing with nothing but a lamp in it.
pub fn lone(id: &str, view_box: &'static str, at: Well, filament: Filament) -> El {
    super::el::drawing(view_box).with(well(id, at, filament))
}

/// Light that comes and goes. How it does in between is not computed here: the replay shows that.
fn pulse(seconds: f64) -> El {
    el("animate")
        .set("attributeName", "opacity")
        .set("values", "0;1;0.5;0;0")
        .set("keyTimes", "0;0.15;0.35;0.6;1")
        .put("dur", n(seconds) + "s")
        .set("repeatCount", "indefinite")
}

fn rect(at: Well, corner: f64) -> El {
    el("rect")
        .put("x", n(at.x))
        .put("y", n(at.y))
        .put("width", n(at.width))
        .put("height", n(at.height))
        .put("rx", n(corner))
}

/// Luminance for the eye, 0 to 1: its fourth root, as in core's tone curve.
fn brightness(glow: &Glow) -> f64 {
    if glow.word == GlowWord::Dark { 0.0 } else { glow.relative_luminance.max(0.0).sqrt().sqrt().min(1.0) }
}

/// How light the glow's colour is on the screen, 0 to 1.
fn tone(glow: &Glow) -> f64 {
    f64::from(glow.srgb.into_iter().max().unwrap_or(0)) / 255.0
}

/// Light around the filament: core's colour, whitening only where the eye would be dazzled, and reaching the
/// further the brighter it is.
fn halo(id: &str, at: Well, filament: Filament) -> Option<El> {
    let Filament::Glowing(glow) = filament else { return None };
    let (bright, tone) = (brightness(&glow), tone(&glow));
    if tone <= 0.0 {
        return None;
    }
    let reach = at.width.min(at.height) * (0.36 + 0.26 * tone + 0.5 * bright);
    let core = 0.06 + 0.2 * bright;
    let name = format!("glow-{id}");
    let stop = |offset: f64, colour: [u8; 3], opacity: f64| {
        el("stop")
            .put("offset", percent(offset))
            .put("stop-color", rgb(colour))
            .put("stop-opacity", percent(opacity))
    };
    let gradient = el("radialGradient")
        .put("id", name.clone())
        .set("gradientUnits", "userSpaceOnUse")
        .put("cx", n(at.x + at.width / 2.0))
        .put("cy", n(at.y + at.height / 2.0))
        .put("r", n(reach))
        .with(stop(0.0, mix(glow.srgb, WHITE, bright * bright), 1.0))
        .with(stop(core, glow.srgb, 0.98))
        .with(stop(core + 0.2, glow.srgb, 0.6 + 0.15 * bright))
        .with(stop(core + 0.42, glow.srgb, 0.2 + 0.14 * bright))
        .with(stop(1.0, glow.srgb, 0.0));
    let inside = Well { x: at.x + 1.0, y: at.y + 1.0, width: at.width - 2.0, height: at.height - 2.0 };
    let corner = (at.height * 0.2).min(at.width * 0.2).min(13.0);
    Some(el("g").with(gradient).with(rect(inside, corner).put("fill", format!("url(#{name})"))))
}

fn percent(share: f64) -> String {
    n(share * 100.0) + "%"
}

/// The wire itself, lighter than the light around it, but no lighter than its tone allows.
fn wire_colour(filament: Filament) -> [u8; 3] {
    let Filament::Glowing(glow) = filament else { return COLD };
    let tone = tone(&glow);
    if tone <= 0.0 {
        return COLD;
    }
    let gain = tone.sqrt() / tone;
    #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "cut to a byte")]
    let lighter = glow.srgb.map(|channel| (f64::from(channel) * gain).min(255.0) as u8);
    mix(lighter, WHITE, 0.12 + 0.8 * brightness(&glow))
}

/// The filament between its supports.
fn coil(group: El, at: Well, filament: Filament) -> El {
    let Well { x, y, width, height } = at;
    let (cx, cy) = (x + width / 2.0, y + height / 2.0);
    // A flat well is filled by its wire; a high one is not.
    let size = width.min(height * if height < 30.0 { 2.2 } else { 1.35 });
    let half = size * 0.2;
    let turn = half / 3.0;
    let rise = turn * 2.2;
    let colour = wire_colour(filament);
    let loops = |count: u8| {
        let arc = format!(" q {} {} {} 0 t {} 0", n(turn * 0.5), n(-rise), n(turn), n(turn));
        arc.repeat(usize::from(count))
    };
    let broken = filament == Filament::Broken;
    let first = format!("M {} {}{}", n(cx - half), n(cy + turn * 0.4), loops(if broken { 1 } else { 3 }));
    let second = format!("M {} {}{}", n(cx + half - 2.0 * turn), n(cy + turn * 1.4), loops(1));
    let foot = y + height - (height * 0.06).max(1.0);
    let supports = format!(
        "M {a} {top} C {a} {mid}, {b} {mid}, {b} {foot} M {c} {top} C {c} {mid}, {d} {mid}, {d} {foot}",
        a = n(cx - half),
        b = n(cx - half * 0.35),
        c = n(cx + half),
        d = n(cx + half * 0.35),
        top = n(cy + turn * 0.4),
        mid = n(cy + height * 0.22),
        foot = n(foot),
    );
    let stroke = n((size * 0.03).clamp(1.2, 3.2));
    let wire = |path: String| {
        el("path").class("coil").put("d", path).put("stroke", rgb(colour)).put("stroke-width", stroke.clone())
    };
    group
        .maybe((height >= 40.0).then(|| el("path").class("support").put("d", supports)))
        .with(wire(first))
        .maybe(broken.then(|| wire(second)))
}
