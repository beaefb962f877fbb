//! The stored log, in a real browser's database.
#![cfg(target_arch = "wasm32")]

use js_sys::{Array, Function, JSON, Object, Promise, Reflect};
use lampladder_core::condition::Condition;
use lampladder_core::diagnosis::Advice;
use lampladder_core::glow::GlowWord;
use lampladder_core::readings::{Behaviour, Kind, MeterSpec};
use lampladder_web::browser::log::carry_out;
use lampladder_web::log::{Change, News, Order, Record, Trouble, VERSION, Verdict};
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use wasm_bindgen_test::{wasm_bindgen_test, wasm_bindgen_test_configure};

wasm_bindgen_test_configure!(run_in_browser);

fn record(id: f64) -> Record {
    Record {
        version: VERSION,
        id,
        setup: String::from("1abc"),
        rung: Some(2),
        meter: MeterSpec::default(),
        numbers: vec![(Kind::BankVolts, 28.5), (Kind::Amps, 0.16)],
        look: Some(GlowWord::DullRed),
        behaviour: Some(Behaviour::FlashThenDim),
        verdict: Some(Verdict { advice: Advice::GoOn, leader: Condition::Healthy, weight: 0.94 }),
        note: String::from("hums"),
    }
}

/// Runs the body of an asynchronous JavaScript function.
async fn script(body: &str) -> JsValue {
    let run = Function::new_no_args(&format!("return (async () => {{ {body} }})()"));
    let promise: Promise = run.call0(&JsValue::NULL).expect("it runs").unchecked_into();
    JsFuture::from(promise).await.expect("it ends well")
}

/// Takes the database away.
async fn clear() {
    script(
        "await new Promise((done, fail) => { const r = indexedDB.deleteDatabase('lampladder.log ' + new URL('./', location.href).pathname); \
         r.onsuccess = done; r.onerror = fail })",
    )
    .await;
}

/// Everything in the database, as any program sees it.
async fn raw() -> Array {
    script(
        "return await new Promise((done, fail) => { const r = indexedDB.open('lampladder.log ' + new URL('./', location.href).pathname); r.onerror = fail; \
         r.onsuccess = () => { const db = r.result; const all = db.transaction('readings').objectStore('readings').getAll(); \
         all.onsuccess = () => { db.close(); done(all.result) } } })",
    )
    .await
    .unchecked_into()
}

async fn listed() -> (Vec<Record>, usize) {
    match carry_out(Order::List).await {
        News::Listed(records, foreign) => (records, foreign),
        other => panic!("{other:?}"),
    }
}

// One test: they share a database.
#[wasm_bindgen_test]
async fn the_log_is_stored_changed_and_left_alone_where_it_is_newer() {
    clear().await;
    assert_eq!(listed().await, (Vec::new(), 0));
    let bare = Record {
        rung: None,
        numbers: Vec::new(),
        look: None,
        behaviour: None,
        verdict: None,
        note: String::new(),
        ..record(7.0)
    };
    let put = vec![Change::Put(record(5.0)), Change::Put(bare.clone())];
    assert_eq!(carry_out(Order::Change(put)).await, News::Stored);
    assert_eq!(listed().await, (vec![record(5.0), bare.clone()], 0));

    // What is stored is read by later versions too: it stays as it is.
    let stored = String::from(JSON::stringify(&raw().await.get(0)).expect("plain data"));
    assert_eq!(
        stored,
        "{\"version\":1,\"id\":5,\"setup\":\"1abc\",\"rung\":2,\
         \"meter\":{\"percent\":1,\"digits\":5,\"counts\":2000,\"response\":\"TrueRms\"},\
         \"numbers\":[[\"BankVolts\",28.5],[\"Amps\",0.16]],\"look\":\"DullRed\",\"behaviour\":\"FlashThenDim\",\
         \"verdict\":{\"advice\":\"GoOn\",\"leader\":\"Healthy\",\"weight\":0.94},\"note\":\"hums\"}"
    );

    // A newer version's record and a damaged one are counted, and survive every change.
    script(
        "await new Promise((done, fail) => { const r = indexedDB.open('lampladder.log ' + new URL('./', location.href).pathname); r.onerror = fail; \
         r.onsuccess = () => { const db = r.result; const t = db.transaction('readings', 'readwrite'); \
         t.objectStore('readings').put({version: 2, id: 6, setup: '1abc', wonder: [1]}); \
         t.objectStore('readings').put({version: 1, id: 8}); \
         t.oncomplete = () => { db.close(); done() } } })",
    )
    .await;
    let changed = Record { note: String::from("hums less"), ..record(5.0) };
    let changes = vec![Change::Put(changed.clone()), Change::Delete(7.0), Change::Delete(99.0)];
    assert_eq!(carry_out(Order::Change(changes)).await, News::Stored);
    assert_eq!(listed().await, (vec![changed], 2));
    assert_eq!(raw().await.length(), 3);

    // No database to be had.
    let global = js_sys::global();
    let own = Object::get_own_property_descriptor(&global, &"indexedDB".into());
    script(
        "Object.defineProperty(globalThis, 'indexedDB', {configurable: true, \
         get() { throw new DOMException('no', 'SecurityError') }})",
    )
    .await;
    let forbidden = carry_out(Order::List).await;
    if own.is_undefined() {
        Reflect::delete_property(&global, &"indexedDB".into()).expect("gone");
    } else {
        Object::define_property(&global, &"indexedDB".into(), own.unchecked_ref());
    }
    assert_eq!(forbidden, News::Refused(Trouble::Forbidden));
    clear().await;
}
