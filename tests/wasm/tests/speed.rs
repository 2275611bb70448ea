//! In the browser: how long what is timed natively takes here. It prints, and
//! passes whatever comes out: a benchmark informs.
#![cfg(target_arch = "wasm32")]

use wasm_bindgen_test::{console_log, wasm_bindgen_test, wasm_bindgen_test_configure};
use wasm_bits::speed::{line, times};

wasm_bindgen_test_configure!(run_in_browser);

#[wasm_bindgen_test]
fn how_long_it_takes() -> Result<(), String> {
    let clock = web_sys::window()
        .and_then(|window| window.performance())
        .ok_or("the browser has no clock")?;
    for timed in times(|| clock.now() / 1000.0) {
        console_log!("{}", line(&timed));
    }
    Ok(())
}
