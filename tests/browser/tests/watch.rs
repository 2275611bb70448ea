//! The watch that every walk ends with sees what it is there to see.

use std::path::PathBuf;
use walkthrough::walk;

/// A page without a policy that asks another port of this machine for something.
fn straying(name: &str, page: &str, worker: &str) -> walkthrough::Result<PathBuf> {
    let folder = tasks::places::target().join("walks").join(name);
    std::fs::create_dir_all(&folder)?;
    std::fs::write(
        folder.join("index.html"),
        format!("<!DOCTYPE html><title>Straying</title><link rel=icon href=data:,>{page}"),
    )?;
    std::fs::write(folder.join("sw.js"), worker)?;
    Ok(folder)
}

// Port 9 is never listened on: the request is made, and refused by this machine.

#[test]
#[should_panic(expected = "foreign request: http://127.0.0.1:9/from-page")]
fn a_page_that_asks_elsewhere_is_seen() {
    walk("straying-page", async |page| {
        let folder = straying(
            "straying-page-dist",
            "<img alt='' src='http://127.0.0.1:9/from-page'>",
            "",
        )?;
        page.serve(&folder)?;
        page.open("").await?;
        page.expect_errors("ERR_CONNECTION_REFUSED").await?;
        Ok(())
    });
}

#[test]
#[should_panic(expected = "http://127.0.0.1:9/from-worker")]
fn a_worker_that_asks_elsewhere_is_seen() {
    walk("straying-worker", async |page| {
        let worker = "self.addEventListener('install', (event) =>
            event.waitUntil(fetch('http://127.0.0.1:9/from-worker').catch(() => {})));";
        page.serve(&straying("straying-worker-dist", "", worker)?)?;
        page.open("").await?;
        page.script(
            "await navigator.serviceWorker.register('sw.js'); await navigator.serviceWorker.ready;",
            vec![],
        )
        .await?;
        page.expect_errors("ERR_CONNECTION_REFUSED").await?;
        Ok(())
    });
}

#[test]
#[should_panic(expected = "console error")]
fn a_console_error_is_seen() {
    walk("straying-error", async |page| {
        page.goto("").await?;
        page.script("console.error('something is wrong');", vec![])
            .await?;
        Ok(())
    });
}
