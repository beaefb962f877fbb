//! The time of day.

use js_sys::{Date, Object, Reflect};
use wasm_bindgen::JsValue;

/// Milliseconds since 1970.
pub fn since_1970() -> f64 {
    Date::now()
}

/// A time as it is written in a language.
pub fn local(milliseconds: f64, tag: &str) -> String {
    let options = Object::new();
    for name in ["dateStyle", "timeStyle"] {
        // Without them it is only longer.
        let _ = Reflect::set(&options, &name.into(), &"short".into());
    }
    let date = Date::new(&JsValue::from_f64(milliseconds));
    date.to_locale_string(tag, &options).into()
}
