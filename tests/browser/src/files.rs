//! Files that the browser saves and opens.

use crate::{Page, Result};
use serde_json::json;
use std::path::Path;

impl Page {
    /// Lets the browser save into a folder, without asking.
    ///
    /// # Errors
    /// When the browser refuses.
    pub async fn save_downloads_in(&self, folder: &Path) -> Result {
        let parameters = json!({ "behavior": "allow", "downloadPath": folder });
        self.driver()?
            .cdp()
            .send_raw("Browser.setDownloadBehavior", parameters)
            .await?;
        Ok(())
    }

    /// Taps a button that asks for a file, and gives it one in the browser's place.
    ///
    /// # Errors
    /// When the button does not lead to the input.
    pub async fn choose_file(&self, button: &str, input: &str, file: &Path) -> Result {
        // The system's own window cannot be steered: it is kept away.
        let listen = format!(
            "const input = document.querySelector('[data-test=\"{input}\"]');
             window.walkAsked = false;
             input.addEventListener('click', (event) => {{
               event.preventDefault();
               window.walkAsked = true;
             }}, {{ once: true }});"
        );
        self.script(&listen, vec![]).await?;
        self.tap_test(button).await?;
        self.until("the button asks for a file", "return window.walkAsked;")
            .await?;
        let element = self.find_test(input).await?;
        Ok(element.send_keys(file.display().to_string()).await?)
    }
}
