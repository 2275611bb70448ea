//! Looking at the page: pictures, and whether it fits.

use crate::print::screens;
use crate::{Page, Result};
use base64::Engine;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::json;
use std::fs;

impl Page {
    /// A picture of what is in view, in `target/screens/NAME.png`.
    ///
    /// # Errors
    /// When the browser gives none.
    pub async fn screenshot(&self, name: &str) -> Result {
        self.picture(name, false).await
    }

    /// A picture of the whole page from top to bottom, in `target/screens/NAME.png`.
    ///
    /// # Errors
    /// When the browser gives none.
    pub async fn screenshot_whole(&self, name: &str) -> Result {
        self.picture(name, true).await
    }

    async fn picture(&self, name: &str, whole: bool) -> Result {
        let parameters = json!({ "format": "png", "captureBeyondViewport": whole });
        let taken = self
            .driver()?
            .cdp()
            .send_raw("Page.captureScreenshot", parameters)
            .await?;
        let png = BASE64.decode(taken["data"].as_str().unwrap_or(""))?;
        fs::write(screens()?.join(format!("{name}.png")), png)?;
        Ok(())
    }

    /// Checks that the page at 320 px needs no sideways scrolling, then restores the size.
    ///
    /// # Errors
    /// When it does, naming what reaches too far.
    pub async fn check_narrow(&mut self) -> Result {
        let before = self.size();
        self.viewport(320, 640).await?;
        let wide = self
            .script(
                "const wide = document.documentElement.scrollWidth;
                 if (wide <= window.innerWidth && window.innerWidth <= 320) { return null; }
                 const over = [...document.querySelectorAll('body *')]
                   .filter((one) => one.getBoundingClientRect().right > 320.5)
                   .slice(0, 5)
                   .map((one) => one.outerHTML.slice(0, 160));
                 return wide + ' px wide: ' + over.join(' | ');",
                Vec::new(),
            )
            .await?;
        if let Some((width, height)) = before {
            self.viewport(width, height).await?;
        }
        match wide.as_str() {
            None => Ok(()),
            Some(trouble) => Err(format!("scrolls sideways at 320 px: {trouble}").into()),
        }
    }

    /// Slows the page's processor by a factor, 1 for full speed.
    ///
    /// # Errors
    /// When the browser refuses.
    pub async fn slow_down(&self, factor: u32) -> Result {
        let cdp = self.driver()?.cdp();
        cdp.send_raw("Emulation.setCPUThrottlingRate", json!({ "rate": factor }))
            .await?;
        Ok(())
    }
}
