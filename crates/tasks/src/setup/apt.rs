//! Debian's packages, where apt works and we may use it.

use crate::trouble::Trouble;
use crate::{places, process, say};
use std::process::Command;

/// Installs packages with apt, or says what a person should install.
pub(super) fn install(packages: &[&str], why: &str) -> Result<(), Trouble> {
    let list = packages.join(" ");
    say::step(&format!("Installing {list} with apt: {why}"));
    if places::on_path("apt-get", None).is_none() {
        return Err(Trouble::new(
            format!("{list} is missing, and this machine has no apt-get."),
            format!("Install it by the machine's own means ({why}), then run this again."),
        ));
    }
    if !is_root() {
        return Err(Trouble::new(
            format!("{list} is missing, and only root may install packages."),
            format!("sudo apt-get install {list}"),
        ));
    }
    let install = || {
        process::run(
            apt()
                .args(["install", "-y", "--no-install-recommends"])
                .args(packages),
            &format!(
                "Run `apt-get update && apt-get install {list}` by hand and read what it says."
            ),
        )
    };
    // The list may be missing or stale on a new machine: then once more with a new one.
    if install().is_err() {
        process::run(
            apt().arg("update"),
            "Check that this machine reaches a package registry.",
        )?;
        install()?;
    }
    Ok(())
}

/// Whether apt can be used at all.
pub(super) fn usable() -> bool {
    is_root() && places::on_path("apt-get", None).is_some()
}

fn apt() -> Command {
    let mut command = Command::new("apt-get");
    command
        .args(["-q", "-o", "Dpkg::Use-Pty=0"])
        .env("DEBIAN_FRONTEND", "noninteractive");
    command
}

fn is_root() -> bool {
    process::output(Command::new("id").arg("-u")).is_some_and(|id| id == "0")
}
