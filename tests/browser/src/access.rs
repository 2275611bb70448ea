//! axe-core's checks of accessibility, within the page.

use crate::{Page, Result};
use serde_json::Value;
use std::fs;
use tasks::places;

impl Page {
    /// Runs axe-core on the page as it stands; it does not test reflow, see
    /// [`Page::check_narrow`].
    ///
    /// # Errors
    /// When there is a violation, each named with its place, or axe-core is not there.
    pub async fn check_access(&mut self) -> Result {
        let script = places::axe().join("axe.min.js");
        let axe = fs::read_to_string(&script).map_err(|error| {
            format!(
                "{}: {error}; `cargo task test browser` fetches it",
                script.display()
            )
        })?;
        let before = self.errors().await?;
        let driver = self.driver()?;
        driver
            .execute(format!("if (!window.axe) {{ {axe} }}"), Vec::new())
            .await?;
        let answer = driver
            .execute_async(
                "const done = arguments[arguments.length - 1];
                 window.axe.run(document, { resultTypes: ['violations'] }).then(
                   (result) => done({ count: result.passes.length, violations: result.violations.map(
                     (one) => one.id + ' (' + one.impact + '): ' + one.help + ': ' +
                       one.nodes.map((node) => node.target.join(' ')).join(', ')) }),
                   (reason) => done({ error: String(reason) }));",
                Vec::new(),
            )
            .await?;
        let answer = answer.json().clone();
        // To measure, the checker writes styles that the page's policy refuses:
        // those complaints are its own, and only those that came while it ran.
        self.forget_errors_after(before, "inline style violates")
            .await?;
        if let Some(error) = answer["error"].as_str() {
            return Err(format!("axe-core failed: {error}").into());
        }
        // A run that looked at nothing proves nothing.
        if answer["count"].as_u64().unwrap_or(0) == 0 {
            return Err("axe-core found nothing to check".into());
        }
        let violations: Vec<&str> = answer["violations"]
            .as_array()
            .into_iter()
            .flatten()
            .filter_map(Value::as_str)
            .collect();
        if violations.is_empty() {
            return Ok(());
        }
        Err(format!("accessibility: {}", violations.join("\n")).into())
    }
}
