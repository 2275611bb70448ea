//! The same numbers from wasm as natively, bit for bit.
