//! Sets up what is missing, and nothing twice.

mod apt;
mod axe;
mod browser;
mod cargo_tools;
mod wasm_target;

pub(crate) use browser::Browser;

use crate::trouble::Trouble;
use std::env;
use std::ffi::OsString;
use std::path::PathBuf;
use std::process::Command;

/// What commands need around them so that they find the tools set up here.
#[derive(Debug, Clone, Default)]
pub(crate) struct Kit {
    /// Folders put before the PATH, the last added first.
    folders: Vec<PathBuf>,
    variables: Vec<(String, OsString)>,
    /// Whether the compiler in use for WebAssembly is Debian's, without Clippy.
    pub(crate) debian: bool,
}

impl Kit {
    /// A command that finds the tools.
    pub(crate) fn command(&self, program: &str) -> Command {
        let mut command = Command::new(program);
        let path = env::var_os("PATH").unwrap_or_default();
        let folders = self
            .folders
            .iter()
            .rev()
            .cloned()
            .chain(env::split_paths(&path));
        // A folder with a colon in its name cannot stand in a PATH: then it is left out.
        if let Ok(joined) = env::join_paths(folders) {
            command.env("PATH", joined);
        }
        command.envs(self.variables.iter().map(|(name, value)| (name, value)));
        command
    }

    fn put_first(&mut self, folder: PathBuf) {
        self.folders.push(folder);
    }

    fn set(&mut self, name: &str, value: impl Into<OsString>) {
        self.variables.push((name.to_owned(), value.into()));
    }
}

/// What building the page needs.
pub(crate) fn for_page() -> Result<Kit, Trouble> {
    let mut kit = Kit::default();
    cargo_tools::ensure(&mut kit)?;
    wasm_target::ensure(&mut kit)?;
    Ok(kit)
}

/// What the tests in a browser need besides.
pub(crate) fn for_browser() -> Result<Browser, Trouble> {
    browser::ensure()
}

/// What the walk through the page needs besides.
pub(crate) fn for_walk() -> Result<(), Trouble> {
    browser::ensure_pdf_reader()?;
    axe::ensure()
}

/// What `tests/fuzz` needs.
pub(crate) fn for_fuzz() -> Result<Kit, Trouble> {
    let mut kit = Kit::default();
    cargo_tools::ensure_fuzz(&mut kit)?;
    Ok(kit)
}

/// What changing the engineering needs.
pub(crate) fn for_mutants() -> Result<Kit, Trouble> {
    let mut kit = Kit::default();
    cargo_tools::ensure_mutants(&mut kit)?;
    Ok(kit)
}
