//! The manifest and the icons for a home screen: every file is there, is what it is declared to be, and stays small.

use std::fs;
use std::path::{Path, PathBuf};

use anyhow::{Context, Result, ensure};
use serde_json::Value;

/// Bytes of all icons together: a phone on a weak signal fetches them, too.
const ALL_ICONS: usize = 32_000;
/// What iOS asks for; it reads no manifest.
const APPLE: (&str, u32) = ("icons/apple-touch-180.png", 180);

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../static")
}

/// Width, height and colour type of a PNG: the first chunk, IHDR (W3C, "Portable Network Graphics", 11.2.1).
fn png(name: &str) -> Result<(u32, u32, u8)> {
    let bytes = fs::read(folder().join(name)).with_context(|| format!("{name} cannot be read"))?;
    ensure!(
        bytes.starts_with(b"\x89PNG\r\n\x1a\n") && bytes.get(12..16) == Some(b"IHDR"),
        "{name} is no PNG"
    );
    let number = |at: usize| -> Result<u32> {
        Ok(u32::from_be_bytes(bytes.get(at..at + 4).context("too short")?.try_into()?))
    };
    Ok((number(16)?, number(20)?, *bytes.get(25).context("too short")?))
}

fn manifest() -> Result<Value> {
    Ok(serde_json::from_str(&fs::read_to_string(folder().join("manifest.webmanifest"))?)?)
}

#[test]
fn every_icon_has_the_size_that_it_is_declared_to_have() -> Result<()> {
    let manifest = manifest()?;
    let icons = manifest["icons"].as_array().context("icons")?;
    let mut found = Vec::new();
    for icon in icons {
        let text = |key: &str| icon[key].as_str().with_context(|| format!("{icon} has no {key}"));
        let name = text("src")?.strip_prefix("./").context("a relative address")?;
        if text("type")? != "image/png" {
            ensure!(folder().join(name).is_file(), "{name}");
            continue;
        }
        let (width, height, _) = png(name)?;
        ensure!(text("sizes")? == format!("{width}x{height}"), "{name} is {width} x {height}");
        found.push((text("purpose")?, width));
    }
    found.sort_unstable();
    ensure!(found == [("any", 192), ("any", 512), ("maskable", 512)], "{found:?}");
    let (width, height, _) = png(APPLE.0)?;
    ensure!((width, height) == (APPLE.1, APPLE.1), "{width} x {height}");
    let page = fs::read_to_string(folder().join("index.html"))?;
    ensure!(page.contains(&format!("<link rel=\"apple-touch-icon\" href=\"./{}\">", APPLE.0)));
    Ok(())
}

#[test]
fn all_icons_together_are_small() -> Result<()> {
    let mut bytes = 0;
    for entry in fs::read_dir(folder().join("icons"))? {
        bytes += fs::read(entry?.path())?.len();
    }
    ensure!((1000..ALL_ICONS).contains(&bytes), "{bytes} bytes");
    Ok(())
}

#[test]
fn nothing_in_the_manifest_depends_on_the_path_that_the_page_lies_under() -> Result<()> {
    let manifest = manifest()?;
    ensure!(
        manifest["start_url"] == "./" && manifest["scope"] == "./" && manifest["display"] == "standalone"
    );
    // An `id` is read from the root of the host whatever it says (W3C, "Web Application Manifest", 1.3), so two copies
    // under two paths would be one app; without it, the start address tells them apart.
    ensure!(manifest.get("id").is_none());
    // The splash screen is of the dark light's ground.
    let tokens = fs::read_to_string(folder().join("tokens.css"))?;
    let dark = manifest["background_color"].as_str().context("a colour")?;
    ensure!(tokens.contains(&format!("--ground: {dark};")) && manifest["theme_color"] == dark);
    Ok(())
}
