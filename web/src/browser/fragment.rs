//! The set-up in the address, behind `#`.

use web_sys::wasm_bindgen::JsValue;

/// What stands behind `#`; `None` where there is nothing.
pub fn read() -> Option<String> {
    let hash = web_sys::window()?.location().hash().ok()?;
    let text = hash.trim_start_matches('#');
    if text.is_empty() { None } else { Some(text.to_owned()) }
}

/// The page's address without it.
pub fn address() -> String {
    let address = web_sys::window().and_then(|window| window.location().href().ok()).unwrap_or_default();
    address.split('#').next().unwrap_or_default().to_owned()
}

/// Puts a text behind `#`, without a new entry in the history and without a `hashchange`.
pub fn write(text: &str) {
    let Some(history) = web_sys::window().and_then(|window| window.history().ok()) else { return };
    // Refused when called hundreds of times within seconds: the next change brings the address up to date.
    let _ = history.replace_state_with_url(&JsValue::NULL, "", Some(&format!("#{text}")));
}
