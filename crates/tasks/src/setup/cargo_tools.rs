//! Trunk, wasm-bindgen and the tools of the campaigns: those already there at the right version, or else
//! built once into the user's cache.

use super::{Kit, apt};
use crate::trouble::Trouble;
use crate::{places, process, say};
use std::fs;
use std::process::Command;

/// Newer ones ask for a newer compiler than ours.
const TRUNK: &str = "0.21.14";
const FUZZ: &str = "0.13.2";
const MUTANTS: &str = "27.1.0";

/// Makes trunk, wasm-bindgen and its test runner available to the kit's commands.
pub(super) fn ensure(kit: &mut Kit) -> Result<(), Trouble> {
    let folder = places::tools().join("bin");
    kit.put_first(folder.clone());
    let lock_path = places::root().join("Cargo.lock");
    let lock = fs::read_to_string(&lock_path)
        .map_err(|error| Trouble::file("read", &lock_path, &error))?;
    let wasm_bindgen = version_in(&lock, "wasm-bindgen").ok_or_else(|| {
        Trouble::new(
            "Cargo.lock names no wasm-bindgen.",
            "Restore Cargo.lock from git, or let `cargo metadata` write it anew.",
        )
    })?;
    if !present(kit, &["trunk"], TRUNK) {
        // Its lock file is trusted; its default features would call home for updates.
        let options = ["--locked", "--no-default-features", "--features", "rustls"];
        install(kit, "trunk", TRUNK, &options, &["trunk"])?;
    }
    let programs = ["wasm-bindgen", "wasm-bindgen-test-runner"];
    if !present(kit, &programs, &wasm_bindgen) {
        // Not --locked: its lock file has named a version that registries lacked.
        install(kit, "wasm-bindgen-cli", &wasm_bindgen, &[], &programs)?;
    }
    Ok(())
}

/// Makes `cargo fuzz` available to the kit's commands.
pub(super) fn ensure_fuzz(kit: &mut Kit) -> Result<(), Trouble> {
    // What compiles libFuzzer, under the names that are asked for.
    let compilers = ["c++", "g++", "clang++"];
    if !compilers
        .iter()
        .any(|name| places::on_path(name, None).is_some())
    {
        apt::install(&["g++"], "compiles libFuzzer, which is written in C++")?;
    }
    ensure_one(kit, "cargo-fuzz", "cargo fuzz", FUZZ)
}

/// Makes `cargo mutants` available to the kit's commands.
pub(super) fn ensure_mutants(kit: &mut Kit) -> Result<(), Trouble> {
    ensure_one(kit, "cargo-mutants", "cargo mutants", MUTANTS)
}

/// A package that adds one command to cargo, and answers as that only.
fn ensure_one(kit: &mut Kit, package: &str, program: &str, version: &str) -> Result<(), Trouble> {
    kit.put_first(places::tools().join("bin"));
    if present(kit, &[program], version) {
        return Ok(());
    }
    install(kit, package, version, &["--locked"], &[program])
}

/// The version of a package in a lock file.
fn version_in(lock: &str, package: &str) -> Option<String> {
    let mut lines = lock.lines();
    lines.find(|line| *line == format!("name = \"{package}\""))?;
    let version = lines
        .next()?
        .strip_prefix("version = \"")?
        .strip_suffix('"')?;
    Some(version.to_owned())
}

/// Whether each program, or command of cargo, answers with the version wanted.
fn present(kit: &Kit, programs: &[&str], version: &str) -> bool {
    programs.iter().all(|program| {
        let (program, command) = match program.split_once(' ') {
            Some((program, command)) => (program, Some(command)),
            None => (*program, None),
        };
        let found = process::output(kit.command(program).args(command).arg("--version"))
            .unwrap_or_default();
        found.split_whitespace().any(|word| word == version)
    })
}

fn install(
    kit: &Kit,
    package: &str,
    version: &str,
    options: &[&str],
    programs: &[&str],
) -> Result<(), Trouble> {
    let root = places::tools();
    say::step(&format!(
        "Building {package} {version}, once, into {} (some minutes)",
        root.display()
    ));
    let mut command = Command::new("cargo");
    command
        .args([
            "install",
            package,
            "--version",
            version,
            "--force",
            "--root",
        ])
        .arg(&root)
        .args(options)
        // From a neutral folder: our own cargo settings are for the page.
        .current_dir(std::env::temp_dir())
        // A tool that runs for seconds need not be built for minutes.
        .env("CARGO_PROFILE_RELEASE_LTO", "off")
        .env("CARGO_PROFILE_RELEASE_OPT_LEVEL", "1")
        .env("CARGO_PROFILE_RELEASE_CODEGEN_UNITS", "16")
        .env("CARGO_PROFILE_RELEASE_DEBUG", "0")
        .env_remove("CARGO_TARGET_DIR")
        .env_remove("RUSTFLAGS")
        .env_remove("CARGO_BUILD_TARGET");
    process::run(
        &mut command,
        "Check that this machine reaches the crate registry and has a C compiler (Debian: build-essential), then run this again.",
    )?;
    if present(kit, programs, version) {
        return Ok(());
    }
    Err(Trouble::new(
        format!("{package} was installed, but does not answer as version {version}."),
        format!("Remove {} and run this again.", root.display()),
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_version_is_read_from_the_lock_file() {
        let lock = fs::read_to_string(places::root().join("Cargo.lock")).unwrap();
        let version = version_in(&lock, "wasm-bindgen").unwrap();
        let manifest = fs::read_to_string(places::root().join("Cargo.toml")).unwrap();
        assert!(
            manifest.contains(&format!("wasm-bindgen = \"={version}\"")),
            "{version}"
        );
        assert_eq!(version_in(&lock, "no-such-package"), None);
        assert_eq!(
            version_in("name = \"a\"\nversion = \"1.2.3\"\n", "a").as_deref(),
            Some("1.2.3")
        );
    }

    #[test]
    fn another_version_does_not_count_as_present() {
        let kit = Kit::default();
        let version = process::output(Command::new("cargo").arg("--version")).unwrap();
        let version = version.split_whitespace().nth(1).unwrap().to_owned();
        assert!(present(&kit, &["cargo"], &version));
        assert!(!present(&kit, &["cargo"], "0.0.1"));
        assert!(!present(&kit, &["no-such-program-here"], "0.0.1"));
    }
}
