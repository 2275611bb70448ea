//! Printing to PDF, and reading the PDF's text back.

use crate::{Page, Result};
use base64::Engine;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::json;
use std::fs;
use std::path::PathBuf;
use std::process::Command;
use tasks::places;

/// The paper that the printer holds. A page that names its own size by `@page` wins.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Paper {
    /// 210 mm by 297 mm.
    A4,
    /// 8.5 in by 11 in.
    Letter,
}

impl Page {
    /// Prints to `target/screens/NAME.pdf` and returns its text, laid out as printed.
    ///
    /// # Errors
    /// When the browser does not print or `pdftotext` is missing.
    pub async fn print(&self, name: &str, paper: Paper) -> Result<String> {
        let path = self.print_to(name, paper).await?;
        let output = Command::new("pdftotext")
            .arg("-layout")
            .arg(&path)
            .arg("-")
            .output()?;
        if !output.status.success() {
            return Err(format!("pdftotext: {}", String::from_utf8_lossy(&output.stderr)).into());
        }
        Ok(String::from_utf8(output.stdout)?)
    }

    /// Prints to `target/screens/NAME.pdf`.
    ///
    /// # Errors
    /// When the browser does not print.
    pub async fn print_to(&self, name: &str, paper: Paper) -> Result<PathBuf> {
        let (width, height) = match paper {
            Paper::A4 => (210.0 / 25.4, 297.0 / 25.4),
            Paper::Letter => (8.5, 11.0),
        };
        let parameters = json!({
            "preferCSSPageSize": true, "printBackground": false,
            "paperWidth": width, "paperHeight": height,
        });
        let printed = self
            .driver()?
            .cdp()
            .send_raw("Page.printToPDF", parameters)
            .await?;
        let pdf = BASE64.decode(printed["data"].as_str().unwrap_or(""))?;
        if !pdf.starts_with(b"%PDF") {
            return Err("the browser printed no PDF".into());
        }
        let folder = screens()?;
        let path = folder.join(format!("{name}.pdf"));
        fs::write(&path, pdf)?;
        Ok(path)
    }
}

/// Where pictures and prints go.
pub(crate) fn screens() -> Result<PathBuf> {
    let folder = places::target().join("screens");
    fs::create_dir_all(&folder)?;
    Ok(folder)
}
