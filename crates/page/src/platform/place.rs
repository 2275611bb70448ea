//! Where on the page the person is: the sheet in the address, the field with
//! the focus.

use wasm_bindgen::JsCast;
use web_sys::{HtmlElement, HtmlInputElement};

/// The sheet named in the address, without its mark; empty when none is.
#[must_use]
pub fn sheet() -> String {
    let hash = super::window().location().hash().unwrap_or_default();
    hash.trim_start_matches('#').to_owned()
}

/// Names a sheet in the address, so that the browser's back key leads back.
pub fn set_sheet(name: &str) {
    if sheet() != name {
        let _ = super::window().location().set_hash(name);
    }
}

/// Scrolls to the top of the page.
pub fn to_top() {
    super::window().scroll_to_with_x_and_y(0.0, 0.0);
}

/// Gives the focus to the element of this id and brings it into view; selects
/// nothing. Returns whether it is there.
pub fn focus(id: &str) -> bool {
    let Some(element) = by_id(id) else {
        return false;
    };
    unfold(&element);
    let options = web_sys::ScrollIntoViewOptions::new();
    options.set_block(web_sys::ScrollLogicalPosition::Center);
    element.scroll_into_view_with_scroll_into_view_options(&options);
    element.focus().is_ok()
}

/// Opens every fold the element is in, or is.
fn unfold(element: &web_sys::Element) {
    let mut fold = element.closest("details").ok().flatten();
    while let Some(details) = fold {
        let _ = details.set_attribute("open", "");
        fold = details
            .parent_element()
            .and_then(|up| up.closest("details").ok().flatten());
    }
}

/// Brings the element of this id into view, without the focus.
pub fn show(id: &str) {
    if let Some(element) = by_id(id) {
        let options = web_sys::ScrollIntoViewOptions::new();
        options.set_block(web_sys::ScrollLogicalPosition::Nearest);
        element.scroll_into_view_with_scroll_into_view_options(&options);
    }
}

/// Takes the focus from whatever has it.
pub fn blur() {
    if let Some(element) = super::window()
        .document()
        .and_then(|d| d.active_element())
        .and_then(|e| e.dyn_into::<HtmlElement>().ok())
    {
        let _ = element.blur();
    }
}

/// Whether what has the focus now is written in.
#[must_use]
pub fn is_writing() -> bool {
    let Some(element) = super::window().document().and_then(|d| d.active_element()) else {
        return false;
    };
    match element.dyn_ref::<HtmlInputElement>() {
        Some(input) => matches!(input.type_().as_str(), "text" | "search"),
        None => element.tag_name() == "TEXTAREA",
    }
}

/// Whether the keyboard's focus stands in the sheet, shown as such: the
/// drawing then makes room, so that nothing focused lies behind it.
#[must_use]
pub fn is_keyed() -> bool {
    super::window()
        .document()
        .and_then(|d| d.query_selector("#sheet :focus-visible").ok().flatten())
        .is_some()
}

/// Whether a key stroke goes to something that has its own undo: a text
/// being written that is not one of the page's fields.
#[must_use]
pub fn is_in_dialog() -> bool {
    super::window()
        .document()
        .and_then(|d| d.query_selector("dialog[open]").ok().flatten())
        .is_some()
}

/// Opens the dialog of this id over the page; the browser keeps the focus in it.
pub fn open_dialog(id: &str) {
    if let Some(dialog) = dialog(id)
        && !dialog.open()
    {
        let _ = dialog.show_modal();
    }
}

/// Whether the part that told of itself with this event is opened.
#[must_use]
pub fn is_open(event: &leptos::ev::Event) -> bool {
    event
        .target()
        .and_then(|t| t.dyn_into::<web_sys::Element>().ok())
        .is_some_and(|e| e.has_attribute("open"))
}

/// Empties the field of this id.
pub fn clear(id: &str) {
    let element = super::window()
        .document()
        .and_then(|d| d.get_element_by_id(id));
    if let Some(area) = element.and_then(|e| e.dyn_into::<web_sys::HtmlTextAreaElement>().ok()) {
        area.set_value("");
    }
}

/// Closes the dialog of this id.
pub fn close_dialog(id: &str) {
    if let Some(dialog) = dialog(id)
        && dialog.open()
    {
        dialog.close();
    }
}

/// Closes whichever dialog is open.
pub fn close_dialogs() {
    let open = super::window()
        .document()
        .and_then(|d| d.query_selector("dialog[open]").ok().flatten())
        .and_then(|e| e.dyn_into::<web_sys::HtmlDialogElement>().ok());
    if let Some(dialog) = open {
        dialog.close();
    }
}

/// Presses the element of this id: opens a hidden file input.
pub fn press(id: &str) {
    if let Some(element) = by_id(id) {
        element.click();
    }
}

/// The element under a pointer: its place and size in CSS pixels, left, top,
/// width and height.
#[must_use]
pub fn frame_of(event: &web_sys::Event) -> Option<(f64, f64, f64, f64)> {
    let element: web_sys::Element = event.current_target()?.dyn_into().ok()?;
    let r = element.get_bounding_client_rect();
    (r.width() > 0.0 && r.height() > 0.0).then(|| (r.left(), r.top(), r.width(), r.height()))
}

/// Keeps a pointer's further moves with the element it went down on.
pub fn capture(event: &web_sys::PointerEvent) {
    if let Some(element) = event
        .current_target()
        .and_then(|t| t.dyn_into::<web_sys::Element>().ok())
    {
        let _ = element.set_pointer_capture(event.pointer_id());
    }
}

/// The value of a data attribute of the element an event happened in, or of
/// the nearest one around it that has it.
#[must_use]
pub fn data_of(event: &web_sys::Event, attribute: &str) -> Option<String> {
    let element: web_sys::Element = event.target()?.dyn_into().ok()?;
    element
        .closest(&format!("[{attribute}]"))
        .ok()??
        .get_attribute(attribute)
}

fn by_id(id: &str) -> Option<HtmlElement> {
    super::window()
        .document()?
        .get_element_by_id(id)?
        .dyn_into()
        .ok()
}

fn dialog(id: &str) -> Option<web_sys::HtmlDialogElement> {
    super::window()
        .document()?
        .get_element_by_id(id)?
        .dyn_into()
        .ok()
}

/// Gives the focus to the input of this id, its cursor behind its text.
pub fn focus_end(id: &str) {
    if let Some(input) = by_id(id).and_then(|e| e.dyn_into::<HtmlInputElement>().ok()) {
        let _ = input.focus();
        let end = u32::try_from(input.value().encode_utf16().count()).unwrap_or(u32::MAX);
        // Refused by kinds of input that hold no text; these do.
        let _ = input.set_selection_range(end, end);
    }
}
