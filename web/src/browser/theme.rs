//! In which light the page is read: an attribute of the document, kept on the phone.

use web_sys::HtmlElement;
use web_sys::wasm_bindgen::JsCast;

use super::storage;
use crate::bench::Theme;

const NAMES: [(Theme, &str); 3] = [(Theme::Auto, "auto"), (Theme::Paper, "paper"), (Theme::Dusk, "dusk")];

/// A light's name in attributes and storage.
pub fn name(theme: Theme) -> &'static str {
    NAMES.iter().find(|(other, _)| *other == theme).map_or("auto", |(_, name)| name)
}

/// The light that was chosen on an earlier visit.
pub fn kept() -> Theme {
    let kept = storage::read(storage::THEME);
    let found = NAMES.iter().find(|(_, name)| kept.as_deref() == Some(name));
    found.map_or(Theme::Auto, |(theme, _)| *theme)
}

/// Sets the light and keeps it.
pub fn apply(theme: Theme) {
    if let Some(root) = root() {
        let _ = root.set_attribute("data-theme", name(theme));
    }
    if kept() != theme {
        // Where it cannot be kept, the page has already said so for the set-up.
        let _ = storage::write(storage::THEME, name(theme));
    }
}

/// The value of a colour of the style sheets, as it is now.
pub fn colour(token: &str) -> Option<String> {
    let style = web_sys::window()?.get_computed_style(root()?.as_ref()).ok()??;
    Some(style.get_property_value(token).ok()?.trim().to_owned())
}

/// Whether the phone asks for dark.
pub fn phone_is_dark() -> bool {
    let query =
        web_sys::window().and_then(|window| window.match_media("(prefers-color-scheme: dark)").ok()?);
    query.is_some_and(|query| query.matches())
}

fn root() -> Option<HtmlElement> {
    super::window::root()?.dyn_into().ok()
}
