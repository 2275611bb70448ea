//! The page starts, keeps to itself, and opens again without its server.

use std::path::{Path, PathBuf};
use walkthrough::walk;

#[test]
fn starts_and_keeps_to_itself() {
    walk("start", async |page| {
        page.viewport(360, 800).await?;
        page.goto("").await?;
        page.until_offline_ready().await?;
        let title = page.script("return document.title", vec![]).await?;
        assert!(
            title.as_str().is_some_and(|t| t.ends_with("Fallwright")),
            "{title}"
        );
        let requests = page.requests().await?;
        assert!(
            requests.iter().any(|url| url.ends_with(".wasm")),
            "{requests:?}"
        );
        page.check_access().await?;
        page.check_narrow().await?;
        page.screenshot("start-360").await
    });
}

#[test]
fn the_policy_refuses_what_is_not_ours() {
    walk("policy", async |page| {
        page.goto("").await?;
        let refused = page
            .script(
                "const script = document.createElement('script');
                 script.textContent = 'window.intruder = 1';
                 document.body.append(script);
                 return window.intruder === undefined;",
                vec![],
            )
            .await?;
        assert_eq!(refused, true, "an inline script ran");
        // Port 9 is never listened on; the policy refuses before anything is asked.
        let fetched = page
            .script(
                "return fetch('http://127.0.0.1:9/').then(() => 'fetched', String)",
                vec![],
            )
            .await?;
        assert!(
            fetched
                .as_str()
                .is_some_and(|text| text.contains("TypeError")),
            "{fetched}"
        );
        let provoked = page.expect_errors("Content Security Policy").await?;
        assert!(provoked >= 2, "the policy spoke up {provoked} times");
        Ok(())
    });
}

#[test]
fn opens_cold_without_its_server() {
    walk("offline", async |page| {
        page.goto("").await?;
        page.until_offline_ready().await?;
        page.close().await?;
        page.stop_server();
        page.start().await?;
        page.goto("").await?;
        page.find("heading", "Fallwright").await?;
        page.goto("?from=somewhere#pipe").await?;
        Ok(())
    });
}

#[test]
fn an_error_in_the_page_offers_the_stored_books() {
    walk("overlay", async |page| {
        page.goto("").await?;
        // Through the browser's own interface, as the page stores its books.
        let stored = page
            .script(
                "return new Promise((resolve, reject) => {
                   const request = indexedDB.open('fallwright');
                   request.onerror = () => reject(request.error);
                   request.onupgradeneeded = () => {
                     const stores = request.result.objectStoreNames;
                     if (!stores.contains('books')) {
                       request.result.createObjectStore('books', { keyPath: 'id' });
                     }
                   };
                   request.onsuccess = () => {
                     const change = request.result.transaction('books', 'readwrite');
                     for (const [id, changed] of [['older', '2020-01-01'], ['newer', '2999-01-01']]) {
                       change.objectStore('books').put({ id, json: '{\"name\":\"' + id + '\"}', changed });
                     }
                     change.oncomplete = () => { request.result.close(); resolve('stored'); };
                   };
                 });",
                vec![],
            )
            .await?;
        assert_eq!(stored, "stored");
        page.script(
            "setTimeout(() => { throw new Error('provoked'); }, 0);",
            vec![],
        )
        .await?;
        page.find("alert", "").await?;
        page.until(
            "the books are listed",
            "return document.getElementById('trouble').dataset.books >= 2",
        )
        .await?;
        let text = page
            .script(
                "const link = document.querySelector('#trouble [lang=en] [data-list] a');
                 return fetch(link.href).then((answer) => answer.text(), () => link.href)
                   .then((text) => link.download + ' ' + text);",
                vec![],
            )
            .await?;
        assert!(
            text.as_str()
                .is_some_and(|text| text.starts_with("fallwright-newer.json ")),
            "{text}"
        );
        page.check_access().await?;
        page.screenshot("overlay").await?;
        assert!(page.expect_errors("fallwright:").await? >= 1);
        page.expect_errors("provoked").await?;
        // The policy lets the page fetch nothing but its own files, blobs neither.
        page.expect_errors("blob:").await?;
        page.tap("button", "Start again").await?;
        page.until(
            "the page runs",
            "return document.documentElement.dataset.started === 'yes'",
        )
        .await
    });
}

#[test]
fn a_page_that_arrived_in_part_says_so_and_makes_no_database() {
    walk("in-part", async |page| {
        let folder = tasks::places::target().join("walks/in-part-dist");
        copy(page.dist(), &folder)?;
        for entry in std::fs::read_dir(&folder)? {
            let path = entry?.path();
            if path
                .extension()
                .is_some_and(|extension| extension == "wasm")
            {
                std::fs::remove_file(path)?;
            }
        }
        page.serve(&folder)?;
        page.open("").await?;
        page.until(
            "the overlay has looked for books",
            "return document.getElementById('trouble').dataset.books === '0'",
        )
        .await?;
        page.find("heading", "Fallwright could not be loaded")
            .await?;
        let databases = page
            .script(
                "return indexedDB.databases().then((all) => all.length)",
                vec![],
            )
            .await?;
        assert_eq!(databases, 0, "looking for books made a database");
        page.check_access().await?;
        assert!(page.expect_errors("404").await? >= 1);
        page.expect_errors("fallwright:").await?;
        Ok(())
    });
}

#[test]
fn a_newer_version_waits_until_it_is_accepted() {
    walk("update", async |page| {
        page.goto("").await?;
        page.until_offline_ready().await?;
        page.close().await?;

        let newer = newer_build(page.dist())?;
        page.serve(&newer)?;
        page.start().await?;
        page.goto("").await?;
        let waiting = "return document.documentElement.dataset.update === 'waiting'";
        page.until("the newer version waits", waiting).await?;
        page.goto("").await?;
        let old = page
            .script(
                "return document.querySelector('meta[name=newer]') === null",
                vec![],
            )
            .await?;
        assert_eq!(
            old, true,
            "the newer version was taken without being asked for"
        );

        page.until("the newer version still waits", waiting).await?;
        page.script(
            "window.dispatchEvent(new CustomEvent('fallwright-accept'));",
            vec![],
        )
        .await?;
        page.until(
            "the newer version is there",
            "return document.querySelector('meta[name=newer]') !== null \
               && document.documentElement.dataset.started === 'yes'",
        )
        .await
    });
}

#[test]
fn a_newer_version_that_arrives_broken_is_not_taken() {
    walk("broken-update", async |page| {
        page.goto("").await?;
        page.until_offline_ready().await?;
        page.close().await?;

        let newer = newer_build(page.dist())?;
        // The page has changed since its list was made.
        std::fs::write(newer.join("index.html"), "<p>half a page")?;
        page.serve(&newer)?;
        page.start().await?;
        page.goto("").await?;
        let state = page
            .script(
                "const registration = await navigator.serviceWorker.ready;
                 return new Promise((resolve) => {
                   registration.addEventListener('updatefound', () => {
                     const coming = registration.installing;
                     coming.addEventListener('statechange', () => resolve(coming.state));
                   });
                   registration.update();
                 });",
                vec![],
            )
            .await?;
        assert_eq!(
            state, "redundant",
            "a page that does not match its list was taken"
        );
        page.expect_errors("integrity").await?;
        page.expect_errors("sha256").await?;
        page.stop_server();
        page.goto("").await?;
        page.find("heading", "Fallwright").await?;
        Ok(())
    });
}

/// A build of the page that differs in one line, with the worker that goes with it.
fn newer_build(dist: &Path) -> walkthrough::Result<PathBuf> {
    let folder = tasks::places::target().join("walks/newer-dist");
    copy(dist, &folder)?;
    let index = std::fs::read_to_string(folder.join("index.html"))?;
    let index = index.replace("</title>", "</title><meta name=\"newer\" content=\"yes\">");
    std::fs::write(folder.join("index.html"), index)?;
    tasks::write_service_worker(&folder)?;
    Ok(folder)
}

/// Copies a folder; what was at `to` before is gone.
fn copy(from: &Path, to: &Path) -> std::io::Result<()> {
    if to.exists() {
        std::fs::remove_dir_all(to)?;
    }
    std::fs::create_dir_all(to)?;
    for entry in std::fs::read_dir(from)? {
        let entry = entry?;
        let target = to.join(entry.file_name());
        if entry.file_type()?.is_dir() {
            copy(&entry.path(), &target)?;
        } else {
            std::fs::copy(entry.path(), target)?;
        }
    }
    Ok(())
}
