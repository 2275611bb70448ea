//! Whatever the bytes: a book or a named trouble, and a book that was read is
//! written and read again as it was.
#![no_main]

use libfuzzer_sys::fuzz_target;
use workbook::format;

fuzz_target!(|bytes: &[u8]| {
    let Ok(book) = format::read(bytes) else {
        return;
    };
    let text = format::write(&book).expect("a book that was read can be written");
    let again = format::read(text.as_bytes()).expect("a book that was written can be read");
    assert_eq!(book, again);
});
