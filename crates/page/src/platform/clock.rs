//! Time and keys.

use wasm_bindgen::JsValue;

/// Now, as ISO 8601 text in UTC ("2026-12-01T14:05:09.120Z").
#[must_use]
pub fn now_iso() -> String {
    js_sys::Date::new_0()
        .to_iso_string()
        .as_string()
        .unwrap_or_default()
}

/// Milliseconds since some moment: for measuring how long something takes.
#[must_use]
pub fn now_ms() -> f64 {
    js_sys::Date::now()
}

/// Today where the browser is, as "2026-12-01".
#[must_use]
pub fn today() -> String {
    let d = js_sys::Date::new_0();
    format!(
        "{:04}-{:02}-{:02}",
        d.get_full_year(),
        d.get_month() + 1,
        d.get_date()
    )
}

/// ISO text as the person's own language writes day and time.
#[must_use]
pub fn local(iso: &str, language: &str) -> String {
    let date = js_sys::Date::new(&JsValue::from_str(iso));
    if date.get_time().is_nan() {
        return iso.to_owned();
    }
    let options = js_sys::Object::new();
    for (key, value) in [("dateStyle", "medium"), ("timeStyle", "short")] {
        // Setting a property of a plain object cannot fail.
        let _ = js_sys::Reflect::set(&options, &key.into(), &value.into());
    }
    String::from(date.to_locale_string(language, &options))
}

/// A key no other book has.
#[must_use]
pub fn new_key() -> String {
    let mut bytes = [0u8; 16];
    let filled = super::window()
        .crypto()
        .and_then(|c| c.get_random_values_with_u8_array(&mut bytes));
    if filled.is_err() {
        for b in &mut bytes {
            #[expect(
                clippy::cast_possible_truncation,
                clippy::cast_sign_loss,
                reason = "a random number below 256"
            )]
            let random = (js_sys::Math::random() * 256.0) as u8;
            *b = random;
        }
    }
    uuid(bytes)
}

/// These bytes as a UUID of version 4 (RFC 9562, 5.4). The browser's own
/// `randomUUID` is missing where a page is not served securely.
fn uuid(mut bytes: [u8; 16]) -> String {
    bytes[6] = bytes[6] & 0x0f | 0x40;
    bytes[8] = bytes[8] & 0x3f | 0x80;
    let mut text = String::with_capacity(36);
    for (i, b) in bytes.iter().enumerate() {
        if matches!(i, 4 | 6 | 8 | 10) {
            text.push('-');
        }
        for half in [b >> 4, b & 15] {
            text.push(char::from_digit(u32::from(half), 16).unwrap_or('0'));
        }
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_key_is_a_version_4_uuid() {
        assert_eq!(uuid([0; 16]), "00000000-0000-4000-8000-000000000000");
        assert_eq!(uuid([0xff; 16]), "ffffffff-ffff-4fff-bfff-ffffffffffff");
    }
}
