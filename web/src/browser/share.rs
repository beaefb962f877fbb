//! The clipboard, and the phone's own way of sharing.

use js_sys::{Function, Object, Promise, Reflect};
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};

/// Something that the browser's navigator can do, where it can.
fn ability(object: &JsValue, name: &str) -> Option<Function> {
    Reflect::get(object, &name.into()).ok()?.dyn_into().ok()
}

fn navigator() -> JsValue {
    web_sys::window().map_or(JsValue::UNDEFINED, |window| window.navigator().into())
}

/// Calls `done` with whether a promise was kept.
fn settle(promise: &JsValue, done: impl Fn(bool) + Clone + 'static) {
    let Some(promise) = promise.dyn_ref::<Promise>() else { return done(false) };
    let kept = done.clone();
    let kept = Closure::once_into_js(move |_: JsValue| kept(true));
    let broken = Closure::once_into_js(move |_: JsValue| done(false));
    let _ = ability(promise, "then").map(|then| then.call2(promise, &kept, &broken));
}

/// Puts a text on the clipboard; `done` is told whether that was done. Without a secure connection there is none.
pub fn copy(text: &str, done: impl Fn(bool) + Clone + 'static) {
    let clipboard = Reflect::get(&navigator(), &"clipboard".into()).unwrap_or(JsValue::UNDEFINED);
    let promise =
        ability(&clipboard, "writeText").and_then(|write| write.call1(&clipboard, &text.into()).ok());
    settle(&promise.unwrap_or(JsValue::UNDEFINED), done);
}

/// Whether the phone can share.
pub fn can_share() -> bool {
    ability(&navigator(), "share").is_some()
}

/// Hands a link to whatever the phone shares with. Whoever thinks better of it is told nothing.
pub fn share(title: &str, url: &str) {
    let navigator = navigator();
    let what = Object::new();
    for (name, value) in [("title", title), ("url", url)] {
        // A sheet without a title is a sheet all the same.
        let _ = Reflect::set(&what, &name.into(), &value.into());
    }
    let promise = ability(&navigator, "share").and_then(|share| share.call1(&navigator, &what).ok());
    settle(&promise.unwrap_or(JsValue::UNDEFINED), |_| {});
}

/// Selects all that stands in the field with this id.
pub fn select(id: &str) {
    let field = web_sys::window().and_then(|window| window.document()?.get_element_by_id(id));
    if let Some(field) = field {
        for name in ["focus", "select"] {
            let _ = ability(&field, name).map(|act| act.call0(&field));
        }
    }
}
