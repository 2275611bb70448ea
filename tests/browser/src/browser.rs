//! A browser and its driver as processes of ours, so that they can be killed.

use crate::Result;
use serde_json::json;
use std::fs;
use std::net::{Ipv4Addr, TcpListener, TcpStream};
use std::os::unix::process::CommandExt;
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};
use tasks::places;
use thirtyfour::prelude::*;
use thirtyfour::{ChromiumLikeCapabilities, LoggingPrefsLogLevel};

/// How long a browser may take to start on a busy machine.
const START: Duration = Duration::from_secs(60);

/// A running browser with a session to steer it.
#[derive(Debug)]
pub(crate) struct Browser {
    chromium: Child,
    chromedriver: Child,
    /// Where the browser writes down every request it makes.
    pub(crate) net_log: PathBuf,
    /// The session.
    pub(crate) driver: WebDriver,
}

impl Browser {
    /// Starts a browser on a profile folder, which may hold what an earlier one left.
    pub(crate) async fn start(profile: &Path, number: usize) -> Result<Self> {
        let net_log = profile.with_extension(format!("net{number}.json"));
        // Left by a browser that was killed, it would name a port of the past.
        let port_file = profile.join("DevToolsActivePort");
        let _ = fs::remove_file(&port_file);
        let mut chromium = Started(Some(
            Command::new(program("CHROMIUM", &["chromium", "chromium-browser"])?)
                .args([
                    "--headless",
                    "--no-sandbox",
                    "--disable-gpu",
                    "--disable-quic",
                    "--disable-dev-shm-usage",
                    "--no-first-run",
                    "--no-default-browser-check",
                    "--disable-background-networking",
                    "--disable-component-update",
                    "--disable-sync",
                    "--disable-extensions",
                    "--disable-default-apps",
                    "--password-store=basic",
                    "--remote-debugging-port=0",
                    "--window-size=1280,800",
                    "--lang=en-US",
                ])
                .arg(format!("--user-data-dir={}", profile.display()))
                .arg(format!("--log-net-log={}", net_log.display()))
                .arg("about:blank")
                .stdin(Stdio::null())
                .stdout(Stdio::null())
                .stderr(Stdio::null())
                // A group of its own, so that killing it takes all its processes.
                .process_group(0)
                .spawn()?,
        ));
        let address = wait_for(START, || {
            let text = fs::read_to_string(&port_file).ok()?;
            let port: u16 = text.lines().next()?.parse().ok()?;
            // The second line is written with it: a file half written does not count.
            text.lines().nth(1)?;
            Some(format!("127.0.0.1:{port}"))
        })
        .await
        .ok_or("the browser did not start")?;

        let port = free_port()?;
        let chromedriver = Started(Some(
            Command::new(program("CHROMEDRIVER", &["chromedriver"])?)
                .arg(format!("--port={port}"))
                .stdin(Stdio::null())
                .stdout(Stdio::null())
                .stderr(Stdio::null())
                .process_group(0)
                .spawn()?,
        ));
        wait_for(START, || {
            TcpStream::connect((Ipv4Addr::LOCALHOST, port)).ok()
        })
        .await
        .ok_or("the browser's driver did not start")?;

        let mut wanted = DesiredCapabilities::chrome();
        wanted.set_debugger_address(&address)?;
        wanted.set_logging_prefs("browser", LoggingPrefsLogLevel::All)?;
        wanted.set_logging_prefs("performance", LoggingPrefsLogLevel::All)?;
        let driver = WebDriver::new(format!("http://127.0.0.1:{port}"), wanted).await?;
        let (mut chromedriver, chromium) = (chromedriver, chromium.keep()?);
        Ok(Self {
            chromium,
            chromedriver: chromedriver.keep()?,
            net_log,
            driver,
        })
    }

    /// Ends the browser where it stands, as a battery that gives out does.
    pub(crate) fn kill(mut self) {
        kill_group(&mut self.chromium);
        kill_group(&mut self.chromedriver);
        let _ = self.driver.leak();
    }

    /// Closes the browser as a person does, so that it writes everything down.
    pub(crate) async fn close(mut self) {
        let _ = self.driver.cdp().send_raw("Browser.close", json!({})).await;
        let chromium = &mut self.chromium;
        wait_for(Duration::from_secs(20), || {
            chromium.try_wait().ok().flatten()
        })
        .await;
        self.kill();
    }
}

/// Kills a process that has not been handed on.
struct Started(Option<Child>);

impl Started {
    fn keep(&mut self) -> Result<Child> {
        self.0.take().ok_or_else(|| "already handed on".into())
    }
}

impl Drop for Started {
    fn drop(&mut self) {
        if let Some(child) = &mut self.0 {
            kill_group(child);
        }
    }
}

fn kill_group(child: &mut Child) {
    let _ = Command::new("kill")
        .args(["-KILL", "--", &format!("-{}", child.id())])
        .stderr(Stdio::null())
        .status();
    let _ = child.kill();
    let _ = child.wait();
}

fn program(variable: &str, names: &[&str]) -> Result<PathBuf> {
    std::env::var_os(variable)
        .map(PathBuf::from)
        .or_else(|| names.iter().find_map(|name| places::on_path(name, None)))
        .ok_or_else(|| {
            format!("no {names:?} on the PATH: `cargo task test browser` sets it up").into()
        })
}

fn free_port() -> Result<u16> {
    Ok(TcpListener::bind((Ipv4Addr::LOCALHOST, 0))?
        .local_addr()?
        .port())
}

/// Asks again and again until there is an answer or the time is up.
pub(crate) async fn wait_for<T>(limit: Duration, mut ask: impl FnMut() -> Option<T>) -> Option<T> {
    let begun = Instant::now();
    loop {
        if let Some(answer) = ask() {
            return Some(answer);
        }
        if begun.elapsed() > limit {
            return None;
        }
        tokio::time::sleep(Duration::from_millis(20)).await;
    }
}
