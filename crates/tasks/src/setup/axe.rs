//! axe-core, the accessibility checker: fetched for the tests, no part of the product.

use super::apt;
use crate::trouble::Trouble;
use crate::{places, process, say};
use sha2::{Digest, Sha256};
use std::fmt::Write as _;
use std::fs;
use std::process::Command;

/// The SHA-256 of `axe.min.js` at [`places::AXE_VERSION`].
const HASH: &str = "29348999450cdf2849a8e70b7912fc2da85a849da39c0d0d5394f51d4a9ed95c";

/// Makes sure that the checker lies in the cache, and is the one we know.
pub(super) fn ensure() -> Result<(), Trouble> {
    let folder = places::axe();
    let script = folder.join("axe.min.js");
    if !script.is_file() {
        say::step(&format!("Fetching axe-core {}", places::AXE_VERSION));
        if places::on_path("npm", None).is_none() {
            apt::install(&["npm"], "fetches axe-core, the accessibility checker")?;
        }
        fs::create_dir_all(&folder).map_err(|error| Trouble::file("make", &folder, &error))?;
        process::run(
            Command::new("npm")
                .arg("pack")
                .arg(format!("axe-core@{}", places::AXE_VERSION))
                .current_dir(&folder),
            "Check that this machine reaches the npm registry, then run this again.",
        )?;
        process::run(
            Command::new("tar")
                .arg("-xzf")
                .arg(format!("axe-core-{}.tgz", places::AXE_VERSION))
                .args([
                    "--strip-components=1",
                    "package/axe.min.js",
                    "package/LICENSE",
                ])
                .current_dir(&folder),
            "Check that tar is installed, then run this again.",
        )?;
    }
    let bytes = fs::read(&script).map_err(|error| Trouble::file("read", &script, &error))?;
    let found = Sha256::digest(bytes)
        .iter()
        .fold(String::new(), |mut text, byte| {
            let _ = write!(text, "{byte:02x}");
            text
        });
    if found == HASH {
        return Ok(());
    }
    Err(Trouble::new(
        format!(
            "{} is not the file we know (SHA-256 {found}).",
            script.display()
        ),
        format!("Remove {} and run this again.", folder.display()),
    ))
}
