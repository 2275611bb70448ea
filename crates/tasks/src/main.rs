//! The developer's commands behind `cargo task`.
fn main() {}
