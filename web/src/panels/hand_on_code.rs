//! The QR code: black on white in either light, since a camera reads no other.

use crate::bench::Bench;
use crate::parts::el::{El, el};
use crate::reckoner::links::{Code, Link};

/// The code of a link, or that it would be too large.
pub(super) fn code(bench: &Bench, link: &Link) -> El {
    let texts = bench.words().hand_on();
    let part = el("div").class("code-part").with(el("h2").text(texts.code));
    match &link.code {
        Some(code) => {
            part.with(drawn(code, texts.code_means)).with(el("p").class("hint").text(texts.code_means))
        }
        None => part.with(el("p").class("told").test("code-too-large").text(texts.too_large)),
    }
}

/// The code itself.
pub(super) fn drawn(code: &Code, name: &'static str) -> El {
    let side = code.side.to_string();
    el("svg")
        .class("code")
        .test("code")
        .set("role", "img")
        .set("aria-label", name)
        .put("data-version", code.version.to_string())
        .put("viewBox", format!("0 0 {side} {side}"))
        .set("shape-rendering", "crispEdges")
        .with(el("rect").put("width", side.clone()).put("height", side).set("fill", "#fff"))
        .with(el("path").put("d", code.path.clone()).set("fill", "#000"))
}
