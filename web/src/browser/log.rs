//! Where the log is stored: `IndexedDB`, one object a record, through serde-wasm-bindgen.
//!
//! The reckoner does this for the page: a worker has the same database, and the page's own program stays smaller by what
//! it takes. Records of a newer version of the page are neither shown nor touched.

use std::cell::Cell;
use std::rc::Rc;

use js_sys::{Array, Promise, Reflect};
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{
    DedicatedWorkerGlobalScope, DomException, IdbDatabase, IdbFactory, IdbObjectStoreParameters,
    IdbOpenDbRequest, IdbRequest, IdbTransaction, IdbTransactionMode,
};

use crate::log::{Change, News, Order, Record, Trouble, VERSION};

/// The database. Databases belong to a whole host: ours has the page's folder in its name, too. What older versions kept
/// under the bare name is taken over when the new one is made.
const DATABASE: &str = "lampladder.log";
/// Its one store.
const STORE: &str = "readings";
/// The property that tells records apart.
const KEY: &str = "id";

/// Does what is asked, and says what came of it.
pub async fn carry_out(order: Order) -> News {
    match perform(order).await {
        Ok(news) => news,
        Err(error) => {
            let full =
                error.dyn_ref::<DomException>().is_some_and(|error| error.name() == "QuotaExceededError");
            News::Refused(if full { Trouble::Full } else { Trouble::Forbidden })
        }
    }
}

async fn perform(order: Order) -> Result<News, JsValue> {
    let database = open().await?;
    let news = match order {
        Order::List => list(&database).await,
        Order::Change(changes) => change(&database, &changes).await,
    };
    database.close();
    news
}

/// Opens whatever version is there; makes the store where there is none.
async fn open() -> Result<IdbDatabase, JsValue> {
    let folder = DedicatedWorkerGlobalScope::from(JsValue::from(js_sys::global())).location().pathname();
    let folder = folder.rfind('/').map_or("", |end| &folder[..=end]);
    let (database, is_new) = open_or_make(&format!("{DATABASE} {folder}")).await?;
    if is_new {
        // Where this fails there is nothing to take over, or it stays where it is.
        let _ = take_over(&database).await;
    }
    Ok(database)
}

fn factory() -> Result<IdbFactory, JsValue> {
    Reflect::get(&js_sys::global(), &"indexedDB".into())?.dyn_into()
}

/// A database, and whether it has just been made.
async fn open_or_make(name: &str) -> Result<(IdbDatabase, bool), JsValue> {
    let request = factory()?.open(name)?;
    let (made, is_new) = (request.clone(), Rc::new(Cell::new(false)));
    let told = Rc::clone(&is_new);
    let make = Closure::once_into_js(move || {
        told.set(true);
        let _ = make(&made);
    });
    request.set_onupgradeneeded(Some(make.unchecked_ref()));
    let database = done(&request).await?.dyn_into()?;
    Ok((database, is_new.get()))
}

/// Copies what the database of older versions holds, as it stands: records of a newer version are not lost either.
async fn take_over(database: &IdbDatabase) -> Result<(), JsValue> {
    let (old, is_new) = open_or_make(DATABASE).await?;
    if is_new {
        // There was none, and there shall be none.
        old.close();
        return factory()?.delete_database(DATABASE).map(|_| ());
    }
    let all: Array =
        done(&old.transaction_with_str(STORE)?.object_store(STORE)?.get_all()?).await?.dyn_into()?;
    old.close();
    let transaction = database.transaction_with_str_and_mode(STORE, IdbTransactionMode::Readwrite)?;
    let store = transaction.object_store(STORE)?;
    for value in all.iter() {
        store.put(&value)?;
    }
    finished(&transaction).await
}

/// Makes the store. Where that fails, the first transaction will say so.
fn make(request: &IdbOpenDbRequest) -> Result<(), JsValue> {
    let database: IdbDatabase = request.result()?.dyn_into()?;
    let parameters = IdbObjectStoreParameters::new();
    parameters.set_key_path(&KEY.into());
    database.create_object_store_with_optional_parameters(STORE, &parameters).map(|_| ())
}

async fn list(database: &IdbDatabase) -> Result<News, JsValue> {
    let store = database.transaction_with_str(STORE)?.object_store(STORE)?;
    let all: Array = done(&store.get_all()?).await?.dyn_into()?;
    let mut foreign = 0;
    let mut records = Vec::new();
    for value in all.iter() {
        match read(value) {
            Some(record) => records.push(record),
            None => foreign += 1,
        }
    }
    Ok(News::Listed(records, foreign))
}

/// A record of a version that is known here.
fn read(value: JsValue) -> Option<Record> {
    let version = Reflect::get(&value, &"version".into()).ok()?.as_f64()?;
    if version > f64::from(VERSION) {
        return None;
    }
    serde_wasm_bindgen::from_value(value).ok()
}

async fn change(database: &IdbDatabase, changes: &[Change]) -> Result<News, JsValue> {
    let transaction = database.transaction_with_str_and_mode(STORE, IdbTransactionMode::Readwrite)?;
    let store = transaction.object_store(STORE)?;
    for one in changes {
        match one {
            Change::Put(record) => store.put(&serde_wasm_bindgen::to_value(record)?)?,
            Change::Delete(id) => store.delete(&JsValue::from_f64(*id))?,
        };
    }
    finished(&transaction).await?;
    Ok(News::Stored)
}

/// The result of a request.
async fn done(request: &IdbRequest) -> Result<JsValue, JsValue> {
    let promise = Promise::new(&mut |resolve, reject| {
        request.set_onsuccess(Some(&resolve));
        request.set_onerror(Some(&reject));
    });
    match JsFuture::from(promise).await {
        Ok(_) => request.result(),
        Err(event) => Err(request.error()?.map_or(event, JsValue::from)),
    }
}

/// The end of a transaction: only then is anything stored.
async fn finished(transaction: &IdbTransaction) -> Result<(), JsValue> {
    let promise = Promise::new(&mut |resolve, reject| {
        transaction.set_oncomplete(Some(&resolve));
        transaction.set_onabort(Some(&reject));
    });
    match JsFuture::from(promise).await {
        Ok(_) => Ok(()),
        Err(event) => Err(transaction.error().map_or(event, JsValue::from)),
    }
}
