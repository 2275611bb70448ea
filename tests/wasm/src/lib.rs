//! The same numbers from wasm as natively, bit for bit.
//!
//! `grid::groups` computes a grid of figures from every kernel. `build.rs`
//! calls it natively, at every build anew, and keeps what it gave; the test in
//! `tests/bits.rs` calls it in the browser and compares. Nothing is pinned by
//! hand, so the figures may change, but never on one side alone.
//!
//! [`speed`] is timed on both sides too, for `cargo task bench`.

mod grid;
pub mod speed;

/// What the native build computed: groups headed by `# name`, a line for a figure.
pub const NATIVE: &str = include_str!(concat!(env!("OUT_DIR"), "/native.txt"));

/// Where the native and the present figures of all groups differ first, and how
/// many figures there are.
///
/// # Errors
/// The first difference, or what kept the grid from being computed.
pub fn compare() -> Result<usize, String> {
    let mut native = NATIVE.lines();
    let mut count = 0;
    for (name, lines) in grid::groups().map_err(|error| error.to_string())? {
        let heading = format!("# {name}");
        for (index, line) in std::iter::once(&heading).chain(&lines).enumerate() {
            let other = native.next();
            if other != Some(line.as_str()) {
                return Err(format!(
                    "{name}, figure {index}: here {line:?}, natively {other:?}"
                ));
            }
        }
        count += lines.len();
    }
    match native.next() {
        None => Ok(count),
        Some(more) => Err(format!("natively there is more: {more:?}")),
    }
}
