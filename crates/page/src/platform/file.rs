//! Files in and out.

use wasm_bindgen::JsCast;
use wasm_bindgen_futures::JsFuture;

/// Hands a file to the person, to be kept where their browser keeps downloads.
/// Returns whether the browser took it.
pub fn save(name: &str, text: &str, mime: &str) -> bool {
    try_save(name, text, mime).is_some()
}

fn try_save(name: &str, text: &str, mime: &str) -> Option<()> {
    let parts = js_sys::Array::of1(&text.into());
    let kind = web_sys::BlobPropertyBag::new();
    kind.set_type(mime);
    let blob = web_sys::Blob::new_with_str_sequence_and_options(&parts, &kind).ok()?;
    let address = web_sys::Url::create_object_url_with_blob(&blob).ok()?;
    let document = super::window().document()?;
    let link: web_sys::HtmlAnchorElement = document.create_element("a").ok()?.dyn_into().ok()?;
    link.set_href(&address);
    link.set_download(name);
    document.body()?.append_child(&link).ok()?;
    link.click();
    link.remove();
    // The browser reads the blob after this returns; give it time.
    super::frame::after(60_000, move || {
        let _ = web_sys::Url::revoke_object_url(&address);
    });
    Some(())
}

/// The bytes of the file a person picked in this input, and the input made
/// ready to take the same file again. None where nothing was picked or the
/// browser could not read it.
pub async fn picked(event: leptos::ev::Event) -> Option<Vec<u8>> {
    let input: web_sys::HtmlInputElement = event.target()?.dyn_into().ok()?;
    let file = input.files()?.get(0)?;
    let buffer = JsFuture::from(file.array_buffer()).await.ok()?;
    input.set_value("");
    Some(js_sys::Uint8Array::new(&buffer).to_vec())
}

/// Opens the browser's print dialog.
pub fn print() {
    // Refused only where printing is switched off.
    let _ = super::window().print();
}
