//! Where things are: the checkout, the built page, the cache of tools.

use std::env;
use std::path::{Path, PathBuf};

/// The root of the checkout.
#[must_use]
pub fn root() -> PathBuf {
    // Cargo sets this when it runs us; the compiled-in one serves a bare call.
    let crate_folder = env::var_os("CARGO_MANIFEST_DIR")
        .map(PathBuf::from)
        .filter(|folder| folder.ends_with("crates/tasks"))
        .unwrap_or_else(|| PathBuf::from(env!("CARGO_MANIFEST_DIR")));
    crate_folder
        .ancestors()
        .nth(2)
        .map_or(crate_folder.clone(), Path::to_path_buf)
}

/// Where the built page lies.
#[must_use]
pub fn dist() -> PathBuf {
    root().join("dist")
}

/// Cargo's target folder.
#[must_use]
pub fn target() -> PathBuf {
    env::var_os("CARGO_TARGET_DIR")
        .map_or_else(|| root().join("target"), |given| root().join(given))
}

/// The per-user folder where tools are kept between runs and checkouts.
///
/// `FALLWRIGHT_TOOLS` overrides it; otherwise it is `fallwright/tools` in the
/// user's cache folder, or in the target folder for a user without a home.
#[must_use]
pub fn tools() -> PathBuf {
    if let Some(given) = env::var_os("FALLWRIGHT_TOOLS") {
        return PathBuf::from(given);
    }
    let cache = env::var_os("XDG_CACHE_HOME")
        .or_else(|| env::var_os("LOCALAPPDATA"))
        .map(PathBuf::from)
        .or_else(|| env::var_os("HOME").map(|home| Path::new(&home).join(".cache")));
    cache
        .unwrap_or_else(target)
        .join("fallwright")
        .join("tools")
}

/// The folder of axe-core, the accessibility checker, once `cargo task test` has
/// fetched it: holds `axe.min.js`.
#[must_use]
pub fn axe() -> PathBuf {
    tools().join(format!("axe-core-{AXE_VERSION}"))
}

/// The version of axe-core that the walk runs.
pub const AXE_VERSION: &str = "4.14.1";

/// The program of that name on the PATH, searched after `first`.
#[must_use]
pub fn on_path(name: &str, first: Option<&Path>) -> Option<PathBuf> {
    let path = env::var_os("PATH").unwrap_or_default();
    first
        .map(Path::to_path_buf)
        .into_iter()
        .chain(env::split_paths(&path))
        .map(|folder| folder.join(format!("{name}{}", env::consts::EXE_SUFFIX)))
        .find(|file| file.is_file())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_root_holds_the_workspace() {
        assert!(root().join("Trunk.toml").is_file());
        assert!(root().join("crates/tasks/Cargo.toml").is_file());
    }

    #[test]
    fn programs_are_found_or_not() {
        assert!(on_path("cargo", None).is_some());
        assert!(on_path("no-such-program-here", None).is_none());
    }
}
