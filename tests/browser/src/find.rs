//! Finding and using elements as a person or assistive technology does.

use crate::{PATIENCE, Page, Result};
use serde_json::{Value, json};
use std::time::{Duration, Instant};
use thirtyfour::{By, Key, WebElement};

/// Roles of things that take an entry.
const ENTRIES: &[&str] = &[
    "textbox",
    "searchbox",
    "spinbutton",
    "combobox",
    "listbox",
    "slider",
    "checkbox",
    "switch",
    "radio",
];

impl Page {
    /// The one element of that role and accessible name, as the browser computes both.
    ///
    /// # Errors
    /// When there is none within [`PATIENCE`], or more than one.
    pub async fn find(&self, role: &str, name: &str) -> Result<WebElement> {
        self.one(&format!("{role} {name:?}"), name, |found| found == role)
            .await
    }

    /// The one field, choice or box with that label.
    ///
    /// # Errors
    /// As for [`Page::find`].
    pub async fn find_entry(&self, label: &str) -> Result<WebElement> {
        self.one(&format!("entry {label:?}"), label, |found| {
            ENTRIES.contains(&found)
        })
        .await
    }

    /// Every element of that role, whatever its name; none is no error.
    ///
    /// # Errors
    /// When the browser does not answer.
    pub async fn find_every(&self, role: &str) -> Result<Vec<WebElement>> {
        self.matching(json!({ "role": role }), |_| true).await
    }

    /// The element with that `data-test` attribute.
    ///
    /// # Errors
    /// When there is none within [`PATIENCE`].
    pub async fn find_test(&self, name: &str) -> Result<WebElement> {
        self.find_css(&format!("[data-test=\"{name}\"]")).await
    }

    /// The first element that a CSS selector matches.
    ///
    /// # Errors
    /// When there is none within [`PATIENCE`].
    pub async fn find_css(&self, selector: &str) -> Result<WebElement> {
        let begun = Instant::now();
        loop {
            match self.driver()?.find(By::Css(selector)).await {
                Ok(element) => return Ok(element),
                Err(error) if begun.elapsed() > PATIENCE => {
                    return Err(format!("no {selector}: {error}").into());
                }
                Err(_) => tokio::time::sleep(Duration::from_millis(50)).await,
            }
        }
    }

    /// Taps the one element of that role and name, once it can be tapped.
    ///
    /// # Errors
    /// When it is not there, or something lies over it for longer than [`PATIENCE`].
    pub async fn tap(&self, role: &str, name: &str) -> Result {
        self.tap_on(&self.find(role, name).await?).await
    }

    /// Taps an element at its middle, as a finger does: what covers it gets in the way.
    ///
    /// # Errors
    /// When something lies over it for longer than [`PATIENCE`].
    pub async fn tap_on(&self, element: &WebElement) -> Result {
        let begun = Instant::now();
        loop {
            match element.click().await {
                Ok(()) => return Ok(()),
                Err(error) if begun.elapsed() > PATIENCE => return Err(error.into()),
                Err(_) => self.bring_to_middle(element).await,
            }
        }
    }

    /// Scrolls, as a person does who sees a bar lie over what they want to tap.
    pub(crate) async fn bring_to_middle(&self, element: &WebElement) {
        if let (Ok(driver), Ok(argument)) = (self.driver(), element.to_json()) {
            let script = "arguments[0].scrollIntoView({ block: 'center', behavior: 'instant' });";
            // It may be gone: then finding it again is the caller's part.
            let _ = driver.execute(script, vec![argument]).await;
        }
        tokio::time::sleep(Duration::from_millis(50)).await;
    }

    /// Replaces what stands in the field with that label, by keyboard, and leaves the field.
    ///
    /// # Errors
    /// When there is no such field or it takes no keys.
    pub async fn fill(&self, label: &str, text: &str) -> Result {
        self.fill_in(&self.find_entry(label).await?, text).await
    }

    /// Replaces what stands in a field, by keyboard, and leaves the field.
    ///
    /// # Errors
    /// When it takes no keys.
    pub async fn fill_in(&self, field: &WebElement, text: &str) -> Result {
        self.tap_on(field).await?;
        field.send_keys(Key::Control + "a").await?;
        field.send_keys(Key::Backspace + "").await?;
        field.send_keys(text).await?;
        field.send_keys(Key::Tab + "").await?;
        Ok(())
    }

    /// What stands in the field with that label.
    ///
    /// # Errors
    /// When there is no such field.
    pub async fn value(&self, label: &str) -> Result<String> {
        let field = self.find_entry(label).await?;
        Ok(field.prop("value").await?.unwrap_or_default())
    }

    /// The text of the element with that `data-test` attribute, as shown.
    ///
    /// # Errors
    /// When there is no such element.
    pub async fn text(&self, test: &str) -> Result<String> {
        Ok(self.find_test(test).await?.text().await?)
    }

    /// Everything that the page shows as text.
    ///
    /// # Errors
    /// When the browser does not answer.
    pub async fn all_text(&self) -> Result<String> {
        Ok(self.driver()?.find(By::Tag("body")).await?.text().await?)
    }

    /// Presses keys where the focus is.
    ///
    /// # Errors
    /// When nothing has the focus.
    pub async fn press(&self, key: Key) -> Result {
        let element = self.driver()?.active_element().await?;
        Ok(element.send_keys(key + "").await?)
    }

    async fn one(&self, what: &str, name: &str, role: impl Fn(&str) -> bool) -> Result<WebElement> {
        let begun = Instant::now();
        loop {
            let mut found = self
                .matching(json!({ "accessibleName": name }), &role)
                .await?;
            match (found.len(), found.pop()) {
                (1, Some(element)) => return Ok(element),
                (count, _) if begun.elapsed() > PATIENCE => {
                    return Err(format!("{count} elements are {what}, not one").into());
                }
                _ => tokio::time::sleep(Duration::from_millis(50)).await,
            }
        }
    }

    /// The elements that the accessibility tree shows for a query.
    async fn matching(&self, query: Value, role: impl Fn(&str) -> bool) -> Result<Vec<WebElement>> {
        let cdp = self.driver()?.cdp();
        let document = cdp
            .send_raw("DOM.getDocument", json!({ "depth": 0 }))
            .await?;
        let mut query = query;
        query["nodeId"] = document["root"]["nodeId"].clone();
        // The tree may be changing under us: then there is nothing yet.
        let Ok(answer) = cdp.send_raw("Accessibility.queryAXTree", query).await else {
            return Ok(Vec::new());
        };
        let mut found = Vec::new();
        for node in answer["nodes"].as_array().into_iter().flatten() {
            if node["ignored"] == true || !role(node["role"]["value"].as_str().unwrap_or("")) {
                continue;
            }
            if let Some(element) = self.element(&node["backendDOMNodeId"]).await? {
                found.push(element);
            }
        }
        Ok(found)
    }

    /// The driver's own handle on a node that the developer protocol names.
    async fn element(&self, node: &Value) -> Result<Option<WebElement>> {
        let driver = self.driver()?;
        let cdp = driver.cdp();
        let Ok(resolved) = cdp
            .send_raw("DOM.resolveNode", json!({ "backendNodeId": node }))
            .await
        else {
            return Ok(None);
        };
        // The two protocols share nothing but the document: mark it there, and take the mark off.
        let mark = json!({
            "objectId": resolved["object"]["objectId"],
            "functionDeclaration": "function () { window.walkFound = this; }",
        });
        cdp.send_raw("Runtime.callFunctionOn", mark).await?;
        let found = driver
            .execute(
                "const found = window.walkFound; delete window.walkFound; return found;",
                Vec::new(),
            )
            .await?;
        Ok(found.element().ok())
    }
}
