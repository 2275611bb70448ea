//! What `tests/speed.rs` times in the browser, timed natively.
#![expect(
    clippy::print_stdout,
    reason = "cargo task bench reads what is printed"
)]

use std::time::Instant;
use wasm_bits::speed::{line, times};

fn main() {
    let start = Instant::now();
    for timed in times(|| start.elapsed().as_secs_f64()) {
        println!("{}", line(&timed));
    }
}
