//! Kept readings as a JSON file, and back: written and read by the browser, in the reckoner.

use js_sys::{Array, JSON, Reflect};
use serde::Serialize;
use wasm_bindgen::{JsCast, JsValue};

use crate::log::Record;
use crate::reckoner::links::News;
use crate::reckoner::links::records::{FILE_VERSION, FORMAT, Found, Unread};

#[derive(Serialize)]
struct File<'a> {
    format: &'static str,
    version: u32,
    readings: &'a [Record],
}

/// A file of these readings; `None` where the browser writes none.
pub fn written(readings: &[Record]) -> Option<News> {
    let file =
        serde_wasm_bindgen::to_value(&File { format: FORMAT, version: FILE_VERSION, readings }).ok()?;
    // Lines: a person who opens it sees what it is.
    let text = JSON::stringify_with_replacer_and_space(&file, &JsValue::NULL, &JsValue::from_f64(1.0));
    Some(News::Text(text.ok()?.into()))
}

/// The readings of a file, each judged by itself.
pub fn read(text: &str) -> News {
    News::Read(found(text))
}

fn found(text: &str) -> Result<Found, Unread> {
    let file = JSON::parse(text).map_err(|_| Unread::Broken)?;
    let property = |name: &str| Reflect::get(&file, &name.into()).map_err(|_| Unread::Foreign);
    if property("format")?.as_string().as_deref() != Some(FORMAT) {
        return Err(Unread::Foreign);
    }
    let version = property("version")?.as_f64().ok_or(Unread::Foreign)?;
    if version > f64::from(FILE_VERSION) {
        return Err(Unread::Newer);
    }
    let readings: Array = property("readings")?.dyn_into().map_err(|_| Unread::Foreign)?;
    let mut found = Found::default();
    for reading in readings.iter() {
        let newer = Reflect::get(&reading, &"version".into()).ok().and_then(|version| version.as_f64());
        found.take(serde_wasm_bindgen::from_value(reading).ok(), newer);
    }
    Ok(found)
}
