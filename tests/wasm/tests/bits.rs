//! In the browser: every figure of the grid has the bits that it has natively.
#![cfg(target_arch = "wasm32")]

use wasm_bindgen_test::{wasm_bindgen_test, wasm_bindgen_test_configure};

wasm_bindgen_test_configure!(run_in_browser);

#[wasm_bindgen_test]
fn every_figure_has_its_native_bits() -> Result<(), String> {
    let count = wasm_bits::compare()?;
    // A grid that shrank to nothing would agree too.
    if count > 20_000 {
        Ok(())
    } else {
        Err(format!("only {count} figures"))
    }
}

#[wasm_bindgen_test]
fn no_figure_is_without_a_value() {
    // The reference prints every number; none of the grid's may be out of range.
    for word in wasm_bits::NATIVE.split(|character: char| !character.is_alphanumeric()) {
        assert!(word != "NaN" && word != "inf", "{word}");
    }
}
