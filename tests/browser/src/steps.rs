//! Steps that many walks take, by the `data-test` marks of the page.

use crate::{PATIENCE, Page, Result};
use std::time::{Duration, Instant};
use thirtyfour::Key;

impl Page {
    /// Opens a sheet by its tab and waits until it is there.
    ///
    /// # Errors
    /// When the tab or the sheet is not there.
    pub async fn sheet(&self, slug: &str) -> Result {
        self.tap_test(&format!("tab-{slug}")).await?;
        self.find_test(&format!("sheet-{slug}")).await?;
        Ok(())
    }

    /// Taps the element with that `data-test` attribute.
    ///
    /// # Errors
    /// As for [`Page::tap_on`].
    pub async fn tap_test(&self, name: &str) -> Result {
        let begun = Instant::now();
        loop {
            // The page may draw it anew between finding and tapping.
            let element = self.find_test(name).await?;
            match element.click().await {
                Ok(()) => return Ok(()),
                Err(error) if begun.elapsed() > PATIENCE => {
                    return Err(format!("{name} cannot be tapped: {error}").into());
                }
                Err(_) => self.bring_to_middle(&element).await,
            }
        }
    }

    /// Taps one option of a choice: its label, as the box itself is not shown.
    ///
    /// # Errors
    /// As for [`Page::tap_on`].
    pub async fn tap_choice(&self, name: &str) -> Result {
        let label = format!("label:has([data-test=\"{name}\"])");
        self.tap_on(&self.find_css(&label).await?).await
    }

    /// Takes an option of a list by its value.
    ///
    /// # Errors
    /// When there is no such list or option.
    pub async fn pick(&self, list: &str, value: &str) -> Result {
        let option = format!("[data-test=\"{list}\"] option[value=\"{value}\"]");
        self.tap_on(&self.find_css(&option).await?).await
    }

    /// Replaces what stands in the field with that `data-test` attribute, by
    /// keyboard, and stays in it.
    ///
    /// # Errors
    /// When there is no such field or it takes no keys.
    pub async fn write(&self, field: &str, text: &str) -> Result {
        self.tap_test(field).await?;
        let element = self.find_test(field).await?;
        element.send_keys(Key::Control + "a").await?;
        element.send_keys(Key::Backspace + "").await?;
        Ok(element.send_keys(text).await?)
    }

    /// What stands in the field with that `data-test` attribute.
    ///
    /// # Errors
    /// When there is no such field.
    pub async fn written(&self, field: &str) -> Result<String> {
        let element = self.find_test(field).await?;
        Ok(element.prop("value").await?.unwrap_or_default())
    }

    /// Waits until the text of the element with that `data-test` attribute is
    /// as wanted, and returns it.
    ///
    /// # Errors
    /// When that does not come to pass within [`PATIENCE`]; says what stood there.
    pub async fn text_when(&self, test: &str, wanted: impl Fn(&str) -> bool) -> Result<String> {
        let begun = Instant::now();
        loop {
            let element = self.find_test(test).await?;
            // Gone between finding and reading: drawn anew.
            let text = element.text().await.unwrap_or_default();
            if wanted(&text) {
                return Ok(text);
            }
            if begun.elapsed() > PATIENCE {
                return Err(format!("{test} stays at {text:?}").into());
            }
            tokio::time::sleep(Duration::from_millis(50)).await;
        }
    }

    /// The `id` of what has the focus; empty where it has none.
    ///
    /// # Errors
    /// When the browser does not answer.
    pub async fn focused(&self) -> Result<String> {
        let id = self
            .script("return document.activeElement?.id ?? '';", vec![])
            .await?;
        Ok(id.as_str().unwrap_or_default().to_owned())
    }

    /// Waits until the book as it stands is kept in the store.
    ///
    /// # Errors
    /// When that does not come to pass within [`PATIENCE`].
    pub async fn until_saved(&self) -> Result {
        self.until(
            "the book is saved",
            "return document.querySelector('[data-test=saved]').dataset.saved === 'saved';",
        )
        .await
    }

    /// Waits until every pipe of the catalogue has been gone through.
    ///
    /// # Errors
    /// When that does not come to pass within [`PATIENCE`].
    pub async fn until_swept(&self) -> Result {
        self.until(
            "the catalogue is worked through",
            "const table = document.querySelector('[data-test=sweep-table]');
             return table?.ariaBusy === 'false' && table.tBodies[0].rows.length > 0;",
        )
        .await
    }

    /// Opens the demo book from the list of books.
    ///
    /// # Errors
    /// When the list or the demo is not there.
    pub async fn open_demo(&self) -> Result {
        self.tap_test("tab-books").await?;
        self.tap_test("book-demo").await?;
        self.until(
            "the list of books is closed",
            "return document.querySelector('dialog[open]') === null;",
        )
        .await?;
        self.until_saved().await
    }

    /// The book in view as the page has stored it, newest of all: its JSON.
    ///
    /// # Errors
    /// When nothing is stored.
    pub async fn stored_book(&self) -> Result<String> {
        self.until_saved().await?;
        let json = self
            .script(
                "return new Promise((resolve, reject) => {
                   const request = indexedDB.open('fallwright');
                   request.onerror = () => reject(request.error);
                   request.onsuccess = () => {
                     const books = request.result.transaction('books').objectStore('books');
                     books.getAll().onsuccess = (event) => {
                       const all = event.target.result;
                       all.sort((a, b) => a.changed < b.changed ? 1 : -1);
                       request.result.close();
                       resolve(all[0]?.json);
                     };
                   };
                 });",
                vec![],
            )
            .await?;
        json.as_str()
            .map(str::to_owned)
            .ok_or_else(|| "no book is stored".into())
    }
}
