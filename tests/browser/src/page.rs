//! A walk: the page, its server and the browser it is open in.

use crate::Result;
use crate::browser::Browser;
use crate::serial::Turn;
use crate::watch::{self, Seen};
use serde_json::Value;
use std::any::Any;
use std::fs;
use std::future::Future;
use std::panic::AssertUnwindSafe;
use std::path::{Path, PathBuf};
use std::time::{Duration, Instant};
use tasks::places;
use tasks::server::Server;
use thirtyfour::WebDriver;

/// How long anything may take to appear. Generous: machines are shared.
pub const PATIENCE: Duration = Duration::from_secs(20);

/// How long a whole walk may take before it is ended.
pub const LIMIT: Duration = Duration::from_secs(8 * 60);

/// Takes a walk through the page; `name` is that of the screenshot a failure leaves.
///
/// # Panics
/// When a step fails, the console showed an error, another host was asked for
/// anything, or the walk took longer than [`LIMIT`].
#[expect(clippy::panic, reason = "this is how a test fails")]
pub fn walk(name: &str, steps: impl AsyncFnOnce(&mut Page) -> Result) {
    let runtime = match tokio::runtime::Builder::new_current_thread()
        .enable_all()
        .build()
    {
        Ok(runtime) => runtime,
        Err(error) => panic!("{name}: {error}"),
    };
    if let Err(trouble) = runtime.block_on(whole(name, steps)) {
        panic!("{name}: {trouble}");
    }
}

async fn whole(name: &str, steps: impl AsyncFnOnce(&mut Page) -> Result) -> Result {
    let mut page = Page::new(name)?;
    page.start().await?;
    let limited = tokio::time::timeout(LIMIT, caught(steps(&mut page))).await;
    let mut result = limited.unwrap_or_else(|_| Err(format!("not done after {LIMIT:?}").into()));
    if result.is_err() {
        // Best effort: the browser may be what failed.
        let picture = format!("failed-{name}");
        let look = page.screenshot(&picture);
        if let Ok(Err(trouble)) = tokio::time::timeout(PATIENCE, look).await {
            result =
                result.map_err(|first| format!("{first} (and no screenshot: {trouble})").into());
        }
    }
    let end = page.end().await;
    match (result, end) {
        (Ok(()), end) => end,
        (Err(first), Ok(())) => Err(first),
        (Err(first), Err(second)) => Err(format!("{first}\nand {second}").into()),
    }
}

/// Turns a panic within a step, such as a failed assertion, into an error.
async fn caught(steps: impl Future<Output = Result>) -> Result {
    let mut steps = std::pin::pin!(steps);
    std::future::poll_fn(|context| {
        match std::panic::catch_unwind(AssertUnwindSafe(|| steps.as_mut().poll(context))) {
            Ok(poll) => poll,
            Err(panic) => std::task::Poll::Ready(Err(said(panic.as_ref()).into())),
        }
    })
    .await
}

fn said(panic: &(dyn Any + Send)) -> String {
    panic
        .downcast_ref::<String>()
        .cloned()
        .or_else(|| panic.downcast_ref::<&str>().map(|&text| text.to_owned()))
        .unwrap_or_else(|| "a panic without words".to_owned())
}

/// The page in its browser. The crate's own words show how it is used.
#[derive(Debug)]
pub struct Page {
    dist: PathBuf,
    port: u16,
    server: Option<Server>,
    profile: PathBuf,
    browser: Option<Browser>,
    starts: usize,
    net_logs: Vec<PathBuf>,
    seen: Seen,
    viewport: Option<(u32, u32)>,
    _turn: Turn,
}

impl Page {
    fn new(name: &str) -> Result<Self> {
        let turn = Turn::wait()?;
        let dist = places::dist();
        if !dist.join("sw.js").is_file() {
            return Err("the page is not built: `cargo task test browser` builds it first".into());
        }
        let server = Server::start(&dist, 0)?;
        let folder = places::target().join("walks");
        fs::create_dir_all(&folder)?;
        let profile = folder.join(name);
        if profile.exists() {
            fs::remove_dir_all(&profile)?;
        }
        Ok(Self {
            dist,
            port: server.port(),
            server: Some(server),
            profile,
            browser: None,
            starts: 0,
            net_logs: Vec::new(),
            seen: Seen::default(),
            viewport: None,
            _turn: turn,
        })
    }

    /// The page's address, with a slash at its end; it outlives the server.
    #[must_use]
    pub fn url(&self) -> String {
        format!("http://127.0.0.1:{}/", self.port)
    }

    /// The folder with the built page that is served.
    #[must_use]
    pub fn dist(&self) -> &Path {
        &self.dist
    }

    /// The browser's session, for what this harness has no word for.
    ///
    /// # Errors
    /// After [`Page::kill`] or [`Page::close`], until [`Page::start`].
    pub fn driver(&self) -> Result<&WebDriver> {
        self.browser
            .as_ref()
            .map(|browser| &browser.driver)
            .ok_or_else(|| "the browser is not running: call start() first".into())
    }

    /// Starts the browser; the profile keeps what was stored before.
    ///
    /// # Errors
    /// When the browser or its driver does not start.
    pub async fn start(&mut self) -> Result {
        if self.browser.is_some() {
            return Ok(());
        }
        self.starts += 1;
        let browser = Browser::start(&self.profile, self.starts).await?;
        self.net_logs.push(browser.net_log.clone());
        self.browser = Some(browser);
        if let Some((width, height)) = self.viewport {
            self.viewport(width, height).await?;
        }
        Ok(())
    }

    /// Kills the browser where it stands, with whatever it was writing.
    pub fn kill(&mut self) {
        if let Some(browser) = self.browser.take() {
            browser.kill();
        }
    }

    /// Closes the browser properly.
    ///
    /// # Errors
    /// When its logs cannot be read any more.
    pub async fn close(&mut self) -> Result {
        let gathered = self.gather().await;
        if let Some(browser) = self.browser.take() {
            browser.close().await;
        }
        gathered
    }

    /// Stops the server: from here on nothing answers at the page's address.
    pub fn stop_server(&mut self) {
        self.server = None;
    }

    /// Starts the server again, at the same address.
    ///
    /// # Errors
    /// When the port has been taken meanwhile.
    pub fn start_server(&mut self) -> Result {
        if self.server.is_none() {
            self.server = Some(Server::start(&self.dist, self.port)?);
        }
        Ok(())
    }

    /// Serves another folder from now on, such as a newer build.
    ///
    /// # Errors
    /// When the folder cannot be served.
    pub fn serve(&mut self, folder: &Path) -> Result {
        self.server = None;
        folder.clone_into(&mut self.dist);
        self.start_server()
    }

    /// Opens the page at `path` ("" or "#line") and waits until it runs.
    ///
    /// # Errors
    /// When the page does not start.
    pub async fn goto(&mut self, path: &str) -> Result {
        self.open(path).await?;
        self.until(
            "the page runs",
            "return document.documentElement.dataset.started === 'yes'",
        )
        .await
    }

    /// Opens the page at `path` without waiting for anything.
    ///
    /// # Errors
    /// When nothing answers at the address.
    pub async fn open(&mut self, path: &str) -> Result {
        self.gather().await?;
        let url = format!("{}{path}", self.url());
        Ok(self.driver()?.goto(url).await?)
    }

    /// Waits until the page would open without a network.
    ///
    /// # Errors
    /// When that does not come to pass within [`PATIENCE`].
    pub async fn until_offline_ready(&self) -> Result {
        self.until(
            "the page is kept for offline use",
            "return document.documentElement.dataset.offline === 'ready'",
        )
        .await
    }

    /// Runs a script in the page (`return ...`) with `arguments[0]` and so on.
    ///
    /// # Errors
    /// When the script throws.
    pub async fn script(&self, script: &str, arguments: Vec<Value>) -> Result<Value> {
        Ok(self
            .driver()?
            .execute(script, arguments)
            .await?
            .json()
            .clone())
    }

    /// Waits until a script (`return ...`) returns something true.
    ///
    /// # Errors
    /// When that does not come to pass within [`PATIENCE`]; says `what` it waited for.
    pub async fn until(&self, what: &str, script: &str) -> Result {
        let begun = Instant::now();
        loop {
            let value = self.script(script, Vec::new()).await?;
            if !matches!(value, Value::Null | Value::Bool(false)) {
                return Ok(());
            }
            if begun.elapsed() > PATIENCE {
                return Err(format!("waited in vain until {what}").into());
            }
            tokio::time::sleep(Duration::from_millis(50)).await;
        }
    }

    /// Sets the size of the page in CSS pixels, as of a phone when narrow.
    ///
    /// # Errors
    /// When the browser refuses.
    pub async fn viewport(&mut self, width: u32, height: u32) -> Result {
        self.viewport = Some((width, height));
        let phone = width < 700;
        let parameters = serde_json::json!({
            "width": width, "height": height, "mobile": phone,
            "deviceScaleFactor": if phone { 2 } else { 1 },
        });
        self.driver()?
            .cdp()
            .send_raw("Emulation.setDeviceMetricsOverride", parameters)
            .await?;
        Ok(())
    }

    /// Forgets the console errors seen so far that contain `part`, for a walk
    /// that provokes them, and says how many those were.
    ///
    /// # Errors
    /// When the browser's log cannot be read.
    pub async fn expect_errors(&mut self, part: &str) -> Result<usize> {
        self.gather().await?;
        let before = self.seen.errors.len();
        self.seen.errors.retain(|error| !error.contains(part));
        Ok(before - self.seen.errors.len())
    }

    /// Every address that the page has asked for so far.
    ///
    /// # Errors
    /// When the browser's log cannot be read.
    pub async fn requests(&mut self) -> Result<Vec<String>> {
        self.gather().await?;
        Ok(self.seen.requests.clone())
    }

    /// How many console errors were seen up to now.
    pub(crate) async fn errors(&mut self) -> Result<usize> {
        self.gather().await?;
        Ok(self.seen.errors.len())
    }

    /// Forgets the console errors that came after the first `count` and contain `part`.
    pub(crate) async fn forget_errors_after(&mut self, count: usize, part: &str) -> Result {
        self.gather().await?;
        let later = self.seen.errors.split_off(count);
        let kept = later.into_iter().filter(|error| !error.contains(part));
        self.seen.errors.extend(kept);
        Ok(())
    }

    pub(crate) fn size(&self) -> Option<(u32, u32)> {
        self.viewport
    }

    async fn gather(&mut self) -> Result {
        match &self.browser {
            Some(browser) => self.seen.gather(&browser.driver).await,
            None => Ok(()),
        }
    }

    /// The checks that every walk ends with.
    async fn end(mut self) -> Result {
        let closed = tokio::time::timeout(PATIENCE + PATIENCE, self.close()).await;
        self.kill();
        let mut found = Vec::new();
        match closed {
            Ok(Ok(())) => {}
            Ok(Err(trouble)) => found.push(format!("the browser's logs are gone: {trouble}")),
            Err(_) => found.push("the browser did not close".to_owned()),
        }
        let origin = self.url();
        found.extend(
            self.seen
                .errors
                .iter()
                .map(|error| format!("console error: {error}")),
        );
        found.extend(
            self.seen
                .foreign(&origin)
                .iter()
                .map(|url| format!("foreign request: {url}")),
        );
        for log in &self.net_logs {
            let foreign = watch::foreign_in_net_log(log, &origin);
            found.extend(
                foreign
                    .iter()
                    .map(|url| format!("foreign request in {}: {url}", log.display())),
            );
        }
        if found.is_empty() {
            return Ok(());
        }
        found.sort();
        found.dedup();
        Err(found.join("\n").into())
    }
}

impl Drop for Page {
    fn drop(&mut self) {
        self.kill();
    }
}
