//! The standard library for WebAssembly: from rustup, or where its download is
//! refused built from Debian's own compiler sources.

use super::{Kit, apt};
use crate::trouble::Trouble;
use crate::{places, process, say};
use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;

const TARGET: &str = "wasm32-unknown-unknown";
/// Debian's compiler, kept apart from rustup's.
const DEBIAN_BIN: &str = "/usr/bin";

/// Makes sure that the kit's commands can compile for WebAssembly.
pub(super) fn ensure(kit: &mut Kit) -> Result<(), Trouble> {
    let sysroot = sysroot(&mut Command::new("rustc"))?;
    if has_target(&sysroot) {
        return Ok(());
    }
    say::step(&format!("Adding the target {TARGET}"));
    let added = process::run(
        Command::new("rustup").args(["target", "add", TARGET]),
        "Install rustup, or the target by other means.",
    );
    if added.is_ok() && has_target(&sysroot) {
        return Ok(());
    }
    if !apt::usable() {
        return Err(Trouble::new(
            format!(
                "The target {TARGET} could not be added to {}.",
                sysroot.display()
            ),
            format!(
                "Run `rustup target add {TARGET}` where its download is allowed. On Debian, as \
                 root, this task builds it from Debian's own sources instead."
            ),
        ));
    }
    say::note("the download was refused; taking Debian's compiler and its sources instead");
    from_debian(kit, &sysroot)
}

fn sysroot(rustc: &mut Command) -> Result<PathBuf, Trouble> {
    process::output(rustc.args(["--print", "sysroot"]))
        .map(PathBuf::from)
        .ok_or_else(|| {
            Trouble::new(
                "rustc does not answer.",
                "Install Rust with rustup, then run this again.",
            )
        })
}

/// Whether the standard library for the target lies in a compiler's sysroot.
fn has_target(sysroot: &Path) -> bool {
    has_std(&libraries(sysroot))
}

fn libraries(sysroot: &Path) -> PathBuf {
    sysroot.join("lib/rustlib").join(TARGET).join("lib")
}

/// Whether the standard library lies there, and the part that tests are built on.
fn has_std(folder: &Path) -> bool {
    let names: Vec<String> = rlibs(folder)
        .iter()
        .filter_map(|path| Some(path.file_name()?.to_string_lossy().into_owned()))
        .collect();
    ["libstd-", "libtest-"]
        .iter()
        .all(|part| names.iter().any(|name| name.starts_with(part)))
}

fn rlibs(folder: &Path) -> Vec<PathBuf> {
    let Ok(entries) = fs::read_dir(folder) else {
        return Vec::new();
    };
    entries
        .flatten()
        .map(|entry| entry.path())
        .filter(|path| {
            path.extension()
                .is_some_and(|extension| extension == "rlib")
        })
        .collect()
}

/// Points the kit at Debian's compiler, with the standard library built if need be.
fn from_debian(kit: &mut Kit, rustup_sysroot: &Path) -> Result<(), Trouble> {
    let debian = |program: &str| Path::new(DEBIAN_BIN).join(program);
    if !debian("rustc").is_file() || !debian("cargo").is_file() {
        apt::install(
            &["rustc-web", "cargo-web", "rust-web-src"],
            "a compiler that comes with the sources of its standard library",
        )?;
    }
    let linker = rustup_sysroot
        .join("lib/rustlib")
        .join(host()?)
        .join("bin/rust-lld");
    if !linker.is_file() {
        return Err(Trouble::new(
            format!("{} is missing.", linker.display()),
            "Reinstall the toolchain with rustup.",
        ));
    }
    kit.put_first(PathBuf::from(DEBIAN_BIN));
    kit.set("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", linker);
    // Another compiler's output would make cargo rebuild ours at every turn.
    kit.set("CARGO_TARGET_DIR", places::target().join("debian"));
    kit.debian = true;
    let folder = libraries(&sysroot(&mut Command::new(debian("rustc")))?);
    if !has_std(&folder) {
        build_std(kit, &folder)?;
    }
    Ok(())
}

fn host() -> Result<String, Trouble> {
    process::output(Command::new("rustc").arg("-vV"))
        .and_then(|text| {
            let line = text.lines().find_map(|line| line.strip_prefix("host: "))?;
            Some(line.to_owned())
        })
        .ok_or_else(|| {
            Trouble::new(
                "rustc does not name its host.",
                "Reinstall Rust with rustup.",
            )
        })
}

/// Builds the standard library within an empty crate and copies it to `folder`.
fn build_std(kit: &Kit, folder: &Path) -> Result<(), Trouble> {
    say::step("Building the standard library for WebAssembly, once (a minute or two)");
    let empty = places::tools().join("empty");
    let file_trouble = |path: &Path, error: &std::io::Error| Trouble::file("write", path, error);
    fs::create_dir_all(empty.join("src")).map_err(|error| file_trouble(&empty, &error))?;
    for (name, text) in [
        (
            "Cargo.toml",
            "[package]\nname = \"empty\"\nversion = \"0.0.0\"\nedition = \"2021\"\n\
             [lib]\ncrate-type = [\"cdylib\"]\n[workspace]\n",
        ),
        ("src/lib.rs", ""),
    ] {
        let path = empty.join(name);
        fs::write(&path, text).map_err(|error| file_trouble(&path, &error))?;
    }
    let target = empty.join("target");
    process::run(
        kit.command("cargo")
            .args([
                "build",
                "--release",
                "-Zbuild-std=std,panic_abort,test",
                "--target",
                TARGET,
            ])
            .current_dir(&empty)
            .env("CARGO_TARGET_DIR", &target)
            .env("RUSTC_BOOTSTRAP", "1")
            // Without bitcode in it, link-time optimisation of the page fails.
            .env("RUSTFLAGS", "-Cembed-bitcode=yes"),
        "Check that rust-web-src has the version of rustc-web (`apt-cache policy`).",
    )?;
    fs::create_dir_all(folder).map_err(|error| file_trouble(folder, &error))?;
    for rlib in rlibs(&target.join(TARGET).join("release/deps")) {
        if let Some(name) = rlib.file_name() {
            let to = folder.join(name);
            fs::copy(&rlib, &to).map_err(|error| file_trouble(&to, &error))?;
        }
    }
    if has_std(folder) {
        return Ok(());
    }
    Err(Trouble::new(
        format!(
            "The build left no standard library in {}.",
            folder.display()
        ),
        format!("Remove {} and run this again.", empty.display()),
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_host_has_a_standard_library_and_an_empty_folder_has_none() {
        let sysroot = sysroot(&mut Command::new("rustc")).unwrap();
        let folder = sysroot
            .join("lib/rustlib")
            .join(host().unwrap())
            .join("lib");
        assert!(has_std(&folder), "{}", folder.display());
        assert!(!has_std(&sysroot));
        assert!(!has_target(Path::new("/no/such/folder")));
    }
}
