//! Chromium, its driver, and the PDF reader that the walk checks prints with.

use super::apt;
use crate::trouble::Trouble;
use crate::{places, process};
use std::env;
use std::path::PathBuf;
use std::process::Command;

/// A browser and the driver that speaks to it.
#[derive(Debug, Clone)]
pub(crate) struct Browser {
    /// The browser's program.
    pub(crate) chromium: PathBuf,
    /// The driver's program.
    pub(crate) driver: PathBuf,
}

/// Finds Chromium and its driver, or installs both.
pub(super) fn ensure() -> Result<Browser, Trouble> {
    let browser = match find() {
        Some(browser) => browser,
        None => {
            apt::install(
                // Without fonts of its own a bare machine draws empty boxes.
                &["chromium", "chromium-driver", "fonts-dejavu-core"],
                "the browser that the tests run in, and its driver",
            )?;
            find().ok_or_else(|| {
                Trouble::new(
                    "Chromium was installed but is not on the PATH.",
                    "Name it by CHROMIUM=... and its driver by CHROMEDRIVER=...",
                )
            })?
        }
    };
    let versions = [&browser.chromium, &browser.driver]
        .map(|program| process::output(Command::new(program).arg("--version")).unwrap_or_default());
    let [ours, drivers] = versions.each_ref().map(|text| major(text));
    if ours.is_none() || ours != drivers {
        return Err(Trouble::new(
            format!("The browser and its driver do not match: {versions:?}."),
            "Install both in one version, or name them by CHROMIUM=... and CHROMEDRIVER=...",
        ));
    }
    Ok(browser)
}

fn find() -> Option<Browser> {
    let named = |variable: &str, names: &[&str]| {
        env::var_os(variable)
            .map(PathBuf::from)
            .or_else(|| names.iter().find_map(|name| places::on_path(name, None)))
    };
    Some(Browser {
        chromium: named(
            "CHROMIUM",
            &["chromium", "chromium-browser", "google-chrome"],
        )?,
        driver: named("CHROMEDRIVER", &["chromedriver"])?,
    })
}

/// The first number in what a program says of its version.
fn major(text: &str) -> Option<u32> {
    text.split_whitespace()
        .find_map(|word| word.split_once('.')?.0.parse().ok())
}

/// Finds `pdftotext`, or installs it.
pub(super) fn ensure_pdf_reader() -> Result<(), Trouble> {
    if places::on_path("pdftotext", None).is_some() {
        return Ok(());
    }
    apt::install(&["poppler-utils"], "reads the printed pages back")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn versions_are_compared_by_their_first_number() {
        assert_eq!(major("Chromium 156.0.8078.73 built on Debian"), Some(156));
        assert_eq!(major("ChromeDriver 156.0.8078.114 (abc)"), Some(156));
        assert_eq!(major(""), None);
    }
}
