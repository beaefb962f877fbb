//! The page with letters twice as large, as people have it who see badly (WCAG 2.2, success criterion 1.4.4).

use anyhow::{Context, Result, ensure};
use serde_json::Value;

use crate::browser::Browser;

/// Makes all letters this many times as large.
///
/// # Errors
/// When the browser is gone.
pub fn enlarge(browser: &Browser, times: f64) -> Result<()> {
    // Chromium looks at container queries again when the root's letters change, but not for what has come since: from
    // the usual size each time, as a person's setting is there from the start.
    let pixels = 16.0 * times;
    browser.script(&format!(
        "const root = document.documentElement; root.style.fontSize = ''; root.getBoundingClientRect(); \
         root.style.fontSize = '{pixels}px'"
    ))?;
    Ok(())
}

/// Finds texts that stick out of the window or of what clips them, and texts that lie over each other. What stays in
/// view while the rest scrolls may lie over it; tables and rows of choices that are
/// dragged sideways may stick out.
const FINDER: &str = "
    const css = (e) => getComputedStyle(e);
    const up = function* (e) { for (; e && e !== document.documentElement; e = e.parentElement) yield e; };
    const layer = (e) => { for (const a of up(e)) if (['sticky', 'fixed'].includes(css(a).position)) return a; return null; };
    const modal = document.querySelector('dialog:modal');
    const texts = [];
    const walker = document.createTreeWalker(modal || document.body, NodeFilter.SHOW_TEXT);
    while (walker.nextNode()) {
        const node = walker.currentNode, parent = node.parentElement;
        if (!node.data.trim() || parent.closest('svg, script, style, [aria-hidden=true] canvas')) continue;
        if (!parent.checkVisibility({opacityProperty: true, visibilityProperty: true})) continue;
        const range = document.createRange(); range.selectNodeContents(node);
        // What is only for the ear.
        if ([...up(parent)].some((a) => a.clientWidth <= 1 && css(a).overflowX === 'hidden')) continue;
        const seen = (r) => [...up(parent)].every((a) => {
            const box = a.getBoundingClientRect();
            return css(a).overflowY === 'visible' || (r.bottom <= box.bottom + 1 && r.top >= box.top - 1);
        });
        const rects = [...range.getClientRects()].filter((r) => r.width > 1 && r.height > 1 && seen(r));
        if (rects.length) texts.push({node, parent, rects, layer: layer(parent)});
    }
    const said = (t) => t.node.data.trim().slice(0, 40);
    const bad = [];
    for (const t of texts) {
        const drag = t.parent.closest('.scroll, .one-line') !== null;
        for (const r of t.rects) {
            if (!drag && (r.left < -1 || r.right > document.documentElement.clientWidth + 1)) bad.push(`out of the window: ${said(t)}`);
            for (const a of up(t.parent)) {
                const box = a.getBoundingClientRect();
                if (['hidden', 'clip'].includes(css(a).overflowX) && (r.left < box.left - 1 || r.right > box.right + 1)) bad.push(`cut off: ${said(t)}`);
            }
            const own = t.parent.closest('button, .typed, .cell, .note, .error, td, th');
            if (own && !drag) {
                const box = own.getBoundingClientRect();
                if (r.left < box.left - 2 || r.right > box.right + 2 || r.top < box.top - 4 || r.bottom > box.bottom + 4) bad.push(`out of its box (${own.className || own.tagName}): ${said(t)}`);
            }
        }
    }
    for (let i = 0; i < texts.length; i++) for (let j = i + 1; j < texts.length; j++) {
        const [a, b] = [texts[i], texts[j]];
        if (a.layer !== b.layer) continue;
        for (const r of a.rects) for (const s of b.rects) {
            const wide = Math.min(r.right, s.right) - Math.max(r.left, s.left);
            const high = Math.min(r.bottom, s.bottom) - Math.max(r.top, s.top);
            // Lines of text are higher than their letters.
            if (wide > 2 && high > 0.3 * Math.min(r.height, s.height)) bad.push(`over each other: ${said(a)} | ${said(b)}`);
        }
    }
    const wide = document.documentElement.scrollWidth - document.documentElement.clientWidth;
    if (wide > 0) bad.push(`wider than the window by ${wide}`);
    return [texts.length, [...new Set(bad)]];";

/// Fails with what cannot be read, by the name of the screen.
///
/// # Errors
/// What is cut off, lies over other text, or makes the page wider than the window.
pub fn ensure_readable(browser: &Browser, screen: &str) -> Result<()> {
    let found: (u32, Vec<Value>) = serde_json::from_value(browser.script(FINDER)?).context("a list")?;
    ensure!(found.0 > 3, "{screen}: there is hardly any text");
    ensure!(found.1.is_empty(), "{screen}: {:#?}", found.1);
    Ok(())
}
