//! The browser's store of books: IndexedDB, one record a book, written with
//! strict durability. A write is done only when its transaction has completed.
//!
//! Each record carries a stamp of its last write. A write that finds another
//! stamp than the one it knows leaves the record alone: another window has
//! written the book since.

use idb::{DatabaseEvent, Factory, KeyPath, ObjectStore, ObjectStoreParams, Transaction};
use js_sys::{Function, Object, Reflect};
use std::cell::RefCell;
use wasm_bindgen::prelude::Closure;
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::JsFuture;
use web_sys::{IdbDatabase, IdbTransaction};

const NAME: &str = "fallwright";
const VERSION: u32 = 1;
const BOOKS: &str = "books";

/// A kept book.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Record {
    /// The book's key.
    pub id: String,
    /// The book as the text of its file.
    pub json: String,
    /// When it was last written, ISO 8601.
    pub changed: String,
    /// Name of its site.
    pub name: String,
    /// Mark of its last write.
    pub stamp: String,
}

/// Why the store did not do as asked.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum StoreTrouble {
    /// The browser keeps no store for this page.
    Unavailable,
    /// No room is left.
    Full,
    /// Something else, in the browser's own words.
    Other(String),
}

/// How a write ended.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Outcome {
    /// Kept: the transaction has completed.
    Kept,
    /// Left alone: another window has written the book since.
    Foreign,
}

/// Whether the browser may clear the store by itself.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub enum Persistence {
    /// Not known yet, or the browser does not say.
    #[default]
    Unknown,
    /// The browser has promised to keep it.
    Kept,
    /// The browser may clear it when room runs short.
    MayBeCleared,
}

thread_local! {
    static OPEN: RefCell<Option<IdbDatabase>> = const { RefCell::new(None) };
}

/// Every kept book, the last changed first.
///
/// # Errors
/// [`StoreTrouble`].
pub async fn list() -> Result<Vec<Record>, StoreTrouble> {
    let (_, store) = begin("readonly").await?;
    let found = store
        .get_all(None, None)
        .map_err(|e| other(&e))?
        .await
        .map_err(|e| other(&e))?;
    let mut records: Vec<Record> = found.iter().map(record_of).collect();
    records.sort_by(|a, b| b.changed.cmp(&a.changed));
    Ok(records)
}

/// The book of this key.
///
/// # Errors
/// [`StoreTrouble`].
pub async fn load(id: &str) -> Result<Option<Record>, StoreTrouble> {
    let (_, store) = begin("readonly").await?;
    let found = store
        .get(JsValue::from_str(id))
        .map_err(|e| other(&e))?
        .await
        .map_err(|e| other(&e))?;
    Ok(found.as_ref().map(record_of))
}

/// Keeps a book. `known` is the stamp of its last write that this window
/// knows of.
///
/// # Errors
/// [`StoreTrouble`]; the store is then as it was.
pub async fn keep(record: &Record, known: Option<&str>) -> Result<Outcome, StoreTrouble> {
    let (transaction, store) = begin("readwrite").await?;
    let found = store
        .get(JsValue::from_str(&record.id))
        .map_err(|e| other(&e))?
        .await
        .map_err(|e| other(&e))?;
    if let Some(found) = found.as_ref()
        && Some(record_of(found).stamp.as_str()) != known
    {
        return Ok(Outcome::Foreign);
    }
    store.put(&value_of(record), None).map_err(|e| other(&e))?;
    complete(&transaction).await?;
    Ok(Outcome::Kept)
}

/// Forgets the book of this key.
///
/// # Errors
/// [`StoreTrouble`].
pub async fn forget(id: &str) -> Result<(), StoreTrouble> {
    let (transaction, store) = begin("readwrite").await?;
    store.delete(JsValue::from_str(id)).map_err(|e| other(&e))?;
    complete(&transaction).await
}

/// Whether the browser may clear the store, after asking it to keep it.
pub async fn persistence() -> Persistence {
    let manager = super::window().navigator().storage();
    if manager.is_undefined() {
        return Persistence::Unknown;
    }
    for ask in [manager.persisted(), manager.persist()] {
        let Ok(promise) = ask else {
            return Persistence::Unknown;
        };
        if let Ok(answer) = JsFuture::from(promise).await
            && answer.as_bool() == Some(true)
        {
            return Persistence::Kept;
        }
    }
    Persistence::MayBeCleared
}

async fn open() -> Result<IdbDatabase, StoreTrouble> {
    if let Some(database) = OPEN.with_borrow(Clone::clone) {
        return Ok(database);
    }
    let factory = Factory::new().map_err(|_| StoreTrouble::Unavailable)?;
    let mut request = factory
        .open(NAME, Some(VERSION))
        .map_err(|_| StoreTrouble::Unavailable)?;
    request.on_upgrade_needed(|event| {
        let Ok(database) = event.database() else {
            return;
        };
        let mut params = ObjectStoreParams::new();
        params.key_path(Some(KeyPath::new_single("id")));
        // A failure here shows when the books are asked for.
        let _ = database.create_object_store(BOOKS, params);
    });
    let database: IdbDatabase = request.await.map_err(|_| StoreTrouble::Unavailable)?.into();
    // A window of a newer edition may want to change the store, and the
    // browser may close it by itself: let go, and open again at the next use.
    let closing = database.clone();
    let let_go = Closure::<dyn FnMut()>::new(move || {
        closing.close();
        OPEN.with_borrow_mut(|open| *open = None);
    })
    .into_js_value();
    database.set_onversionchange(let_go.dyn_ref());
    database.set_onclose(let_go.dyn_ref());
    OPEN.with_borrow_mut(|open| *open = Some(database.clone()));
    Ok(database)
}

/// A transaction on the books, and the books.
async fn begin(mode: &str) -> Result<(IdbTransaction, ObjectStore), StoreTrouble> {
    let database = open().await?;
    let transaction = begin_on(&database, mode).map_err(|e| {
        // The connection may have been closed under us: open anew next time.
        OPEN.with_borrow_mut(|open| *open = None);
        named(&e)
    })?;
    let store = Transaction::from(transaction.clone())
        .object_store(BOOKS)
        .map_err(|e| other(&e))?;
    Ok((transaction, store))
}

/// `idb` has no way to ask for durability, so the browser is asked directly.
fn begin_on(database: &IdbDatabase, mode: &str) -> Result<IdbTransaction, JsValue> {
    let options = Object::new();
    Reflect::set(&options, &"durability".into(), &"strict".into())?;
    let begin: Function = Reflect::get(database, &"transaction".into())?.dyn_into()?;
    begin
        .call3(database, &BOOKS.into(), &mode.into(), &options)?
        .dyn_into()
}

/// Waits until the transaction has completed.
async fn complete(transaction: &IdbTransaction) -> Result<(), StoreTrouble> {
    let ended = Transaction::from(transaction.clone()).await;
    // Further events of a failed transaction would call what is gone.
    transaction.set_oncomplete(None);
    transaction.set_onerror(None);
    transaction.set_onabort(None);
    match ended {
        Ok(result) if result.is_committed() => Ok(()),
        _ => Err(transaction
            .error()
            .map_or(StoreTrouble::Other(String::new()), |e| named(&e))),
    }
}

/// The trouble behind a thrown value.
fn named(thrown: &JsValue) -> StoreTrouble {
    let text = |key: &str| {
        Reflect::get(thrown, &key.into())
            .ok()
            .and_then(|v| v.as_string())
            .unwrap_or_default()
    };
    trouble(&text("name"), &text("message"))
}

fn other(error: &idb::Error) -> StoreTrouble {
    match error {
        idb::Error::DomException(e) => named(e),
        _ => StoreTrouble::Other(error.to_string()),
    }
}

/// The trouble a browser names so.
fn trouble(name: &str, message: &str) -> StoreTrouble {
    match name {
        "QuotaExceededError" => StoreTrouble::Full,
        "SecurityError" => StoreTrouble::Unavailable,
        _ => StoreTrouble::Other(format!("{name} {message}").trim().to_owned()),
    }
}

const KEYS: [&str; 5] = ["id", "json", "changed", "name", "stamp"];

fn value_of(record: &Record) -> JsValue {
    let object = Object::new();
    let values = [
        &record.id,
        &record.json,
        &record.changed,
        &record.name,
        &record.stamp,
    ];
    for (key, value) in KEYS.into_iter().zip(values) {
        // Setting a property of a plain object cannot fail.
        let _ = Reflect::set(&object, &key.into(), &value.as_str().into());
    }
    object.into()
}

fn record_of(value: &JsValue) -> Record {
    let text = |key: &str| {
        Reflect::get(value, &key.into())
            .ok()
            .and_then(|v| v.as_string())
            .unwrap_or_default()
    };
    let [id, json, changed, name, stamp] = KEYS.map(text);
    Record {
        id,
        json,
        changed,
        name,
        stamp,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_full_store_is_told_from_a_forbidden_one() {
        assert_eq!(trouble("QuotaExceededError", "x"), StoreTrouble::Full);
        assert_eq!(trouble("SecurityError", ""), StoreTrouble::Unavailable);
        assert_eq!(
            trouble("AbortError", "why"),
            StoreTrouble::Other("AbortError why".into())
        );
    }
}
