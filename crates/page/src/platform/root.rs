//! The document's own marks: language, theme, title.

use wasm_bindgen::JsCast;

/// Sets an attribute of the root element.
pub fn set(attribute: &str, value: &str) {
    if let Some(root) = root() {
        let _ = root.set_attribute(attribute, value);
    }
}

/// An attribute of the root element.
#[must_use]
pub fn get(attribute: &str) -> Option<String> {
    root()?.get_attribute(attribute)
}

/// Sets a custom property of the root element's style, which the page's policy
/// allows by script.
pub fn set_property(name: &str, value: &str) {
    if let Some(root) = root().and_then(|r| r.dyn_into::<web_sys::HtmlElement>().ok()) {
        let _ = root.style().set_property(name, value);
    }
}

/// Does this right before the page prints, whoever asks for it.
pub fn before_print(act: impl Fn() + 'static) {
    let handle = leptos::prelude::window_event_listener_untyped("beforeprint", move |_| act());
    // The page listens for as long as it lives.
    std::mem::forget(handle);
}

/// Sets the title of the document: the browser offers it as the name of a
/// printed file too.
pub fn set_title(title: &str) {
    if let Some(document) = super::window().document() {
        document.set_title(title);
    }
}

fn root() -> Option<web_sys::Element> {
    super::window().document()?.document_element()
}
