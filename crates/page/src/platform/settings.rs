//! What the page remembers of the person, not of a book: language, theme, the
//! book last open. Pages opened from files may share one store, so each name
//! carries a prefix.

const PREFIX: &str = "fallwright.";

/// Language of the page.
pub const LANGUAGE: &str = "language";
/// Theme of the page.
pub const THEME: &str = "theme";
/// The book last open: when, and its key.
pub const BOOK: &str = "book";

/// The setting of this name, if the browser kept one.
#[must_use]
pub fn get(name: &str) -> Option<String> {
    store()?.get_item(&format!("{PREFIX}{name}")).ok()?
}

/// Keeps a setting. Where the browser will not, it is forgotten at the end of
/// the visit: no harm to any book.
pub fn set(name: &str, value: &str) {
    if let Some(store) = store() {
        let _ = store.set_item(&format!("{PREFIX}{name}"), value);
    }
}

/// The browser's languages, most wanted first.
#[must_use]
pub fn browser_languages() -> Vec<String> {
    super::window()
        .navigator()
        .languages()
        .iter()
        .filter_map(|tag| tag.as_string())
        .collect()
}

fn store() -> Option<web_sys::Storage> {
    super::window().local_storage().ok()?
}
