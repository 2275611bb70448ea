//! Building the release page, and knowing when there is nothing to build.

use crate::post_build::files_below;
use crate::setup::Kit;
use crate::trouble::Trouble;
use crate::{places, process, say};
use sha2::{Digest, Sha256};
use std::fmt::Write as _;
use std::path::Path;
use std::{env, fs, io};

/// What the page is made of, below the root of the checkout.
const SOURCES: [&str; 6] = [
    "crates",
    "www",
    "Cargo.toml",
    "Cargo.lock",
    "Trunk.toml",
    ".cargo/config.toml",
];

/// Builds the release page into `dist`, unless it lies there as these sources
/// and this compiler make it.
pub(crate) fn build(kit: &Kit) -> Result<(), Trouble> {
    let stamp = places::target().join("page.stamp");
    let compiler = process::output(kit.command("rustc").arg("-vV")).unwrap_or_default();
    let now = || state(&places::root(), &places::dist(), &compiler).ok();
    if now().is_some_and(|now| fs::read_to_string(&stamp).is_ok_and(|then| then == now)) {
        say::step("The release page in dist is that of these sources: nothing to build");
        return Ok(());
    }
    say::step("Building the release page");
    process::run(
        kit.command("trunk")
            .args(["build", "--release", "--offline", "true"])
            .current_dir(places::root()),
        "Mend what the compiler or the checks named above, then run it again.",
    )?;
    // Without a stamp the next run builds again: no reason to fail this one.
    if let Some(now) = now() {
        let _ = fs::write(&stamp, now);
    }
    Ok(())
}

/// Sources, compiler and built page as two hashes.
fn state(root: &Path, dist: &Path, compiler: &str) -> io::Result<String> {
    let mut sources = Sha256::new();
    sources.update(compiler);
    for name in ["RUSTFLAGS", "CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUSTFLAGS"] {
        sources.update(env::var(name).unwrap_or_default());
        sources.update([0]);
    }
    for source in SOURCES {
        take(&mut sources, &root.join(source))?;
    }
    let mut built = Sha256::new();
    take(&mut built, dist)?;
    let mut text = String::new();
    for byte in sources.finalize().iter().chain(built.finalize().iter()) {
        let _ = write!(text, "{byte:02x}");
    }
    Ok(text)
}

/// Takes up a file, or a folder with every name and file below it.
fn take(hash: &mut Sha256, path: &Path) -> io::Result<()> {
    let mut one = |name: &str, path: &Path| -> io::Result<()> {
        let bytes = fs::read(path)?;
        hash.update(format!("{name}\0{}\0", bytes.len()));
        hash.update(bytes);
        Ok(())
    };
    if path.is_file() {
        return one("", path);
    }
    for name in files_below(path)? {
        one(&name, &path.join(&name))?;
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn any_change_of_sources_compiler_or_page_is_seen() {
        let root = env::temp_dir().join(format!("fallwright-page-{}", std::process::id()));
        let dist = root.join("dist");
        for folder in ["crates/page/src", "www", ".cargo", "dist"] {
            fs::create_dir_all(root.join(folder)).unwrap();
        }
        let write = |name: &str, text: &str| fs::write(root.join(name), text).unwrap();
        for name in &SOURCES[2..] {
            write(name, "a");
        }
        write("crates/page/src/lib.rs", "a");
        write("www/index.html", "a");
        write("dist/index.html", "a");
        let now = |compiler: &str| state(&root, &dist, compiler).unwrap();

        let first = now("1");
        assert_eq!(first, now("1"));
        assert_ne!(first, now("2"));
        for name in [
            "crates/page/src/lib.rs",
            "crates/page/src/new.rs",
            "www/index.html",
            "Cargo.lock",
            ".cargo/config.toml",
            "dist/index.html",
        ] {
            let before = now("1");
            write(name, "b");
            assert_ne!(before, now("1"), "{name}");
        }
        fs::remove_dir_all(&dist).unwrap();
        assert!(state(&root, &dist, "1").is_err());
        fs::remove_dir_all(&root).unwrap();
    }
}
