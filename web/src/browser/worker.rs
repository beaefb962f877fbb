//! The service worker that keeps the page for use without a network.

use web_sys::{RegistrationOptions, ServiceWorkerUpdateViaCache};

/// Registers it, by a relative address, so that it works at any path of a host. Browsers without one (or on plain
/// HTTP) load the page anew each time.
pub fn register() {
    let Some(window) = web_sys::window() else { return };
    if !window.is_secure_context() {
        return;
    }
    let options = RegistrationOptions::new();
    options.set_update_via_cache(ServiceWorkerUpdateViaCache::None);
    let registering = window.navigator().service_worker().register_with_options("./sw.js", &options);
    // A refusal changes nothing but that the page needs its server again.
    let quiet = wasm_bindgen::closure::Closure::once_into_js(|_: wasm_bindgen::JsValue| {});
    let _ = js_sys::Reflect::get(&registering, &"catch".into())
        .and_then(|catch| js_sys::Function::from(catch).call1(&registering, &quiet));
}
