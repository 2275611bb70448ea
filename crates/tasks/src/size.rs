//! `cargo task size`: what the built page weighs.

use crate::post_build::files_below;
use crate::trouble::Trouble;
use crate::{places, say};
use std::fs;
use std::io::Write;
use std::process::ExitCode;

/// Prints each file of `dist`, raw and as brotli at its highest level, and the sums.
pub(crate) fn run(_: &[String]) -> Result<ExitCode, Trouble> {
    let dist = places::dist();
    let files = files_below(&dist).map_err(|error| {
        Trouble::new(
            format!("Could not read {}: {error}.", dist.display()),
            "Build the page first: `cargo task serve`.",
        )
    })?;
    say::line(&format!("{:>10} {:>10}  file", "raw", "brotli"));
    let (mut raw_sum, mut packed_sum) = (0, 0);
    for name in files {
        let path = dist.join(&name);
        let contents = fs::read(&path).map_err(|error| Trouble::file("read", &path, &error))?;
        let packed = brotli_length(&contents);
        raw_sum += contents.len();
        packed_sum += packed;
        say::line(&format!("{:>10} {packed:>10}  {name}", contents.len()));
    }
    say::line(&format!("{raw_sum:>10} {packed_sum:>10}  total, bytes"));
    Ok(ExitCode::SUCCESS)
}

fn brotli_length(contents: &[u8]) -> usize {
    const LEVEL: u32 = 11;
    const WINDOW: u32 = 22;
    let mut writer = brotli::CompressorWriter::new(Vec::new(), 64 * 1024, LEVEL, WINDOW);
    // Writing to memory cannot fail.
    let _ = writer.write_all(contents);
    writer.into_inner().len()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn brotli_shrinks_what_repeats() {
        let length = brotli_length(&[b'a'; 10_000]);
        assert!(length > 0 && length < 100, "{length}");
    }
}
