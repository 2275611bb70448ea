//! What the walk must never see: console errors, requests to another host.

use crate::Result;
use serde_json::Value;
use std::fs;
use std::path::Path;
use thirtyfour::WebDriver;

/// What was seen so far.
#[derive(Debug, Default)]
pub(crate) struct Seen {
    /// Errors that the console showed.
    pub(crate) errors: Vec<String>,
    /// Every address that the page asked for.
    pub(crate) requests: Vec<String>,
}

impl Seen {
    /// Takes up what the browser has logged since the last time.
    pub(crate) async fn gather(&mut self, driver: &WebDriver) -> Result {
        for entry in driver.get_log("browser").await? {
            if entry.level == "SEVERE" {
                self.errors.push(entry.message);
            }
        }
        for entry in driver.get_log("performance").await? {
            let event: Value = serde_json::from_str(&entry.message)?;
            let event = &event["message"];
            if event["method"] == "Network.requestWillBeSent"
                && let Some(url) = event["params"]["request"]["url"].as_str()
            {
                self.requests.push(url.to_owned());
            }
        }
        Ok(())
    }

    /// The requests that went elsewhere than to `origin` or stayed within the browser.
    pub(crate) fn foreign(&self, origin: &str) -> Vec<String> {
        self.requests
            .iter()
            .filter(|url| is_foreign(url, origin))
            .cloned()
            .collect()
    }
}

fn is_foreign(url: &str, origin: &str) -> bool {
    let within = [
        "data:",
        "blob:",
        "about:",
        "chrome:",
        "devtools:",
        "chrome-untrusted:",
    ];
    !url.starts_with(origin) && !within.iter().any(|scheme| url.starts_with(scheme))
}

/// Requests to other hosts in the browser's own log, which covers its service
/// workers too. A browser that was killed leaves the log unfinished, line by line.
pub(crate) fn foreign_in_net_log(path: &Path, origin: &str) -> Vec<String> {
    let text = fs::read_to_string(path).unwrap_or_default();
    let mut found = Vec::new();
    for line in text.lines() {
        let line = line.trim_end_matches([',', '\n', '\r']);
        let Ok(event) = serde_json::from_str::<Value>(line) else {
            continue;
        };
        let params = &event["params"];
        let (Some(url), Some(initiator)) = (params["url"].as_str(), params["initiator"].as_str())
        else {
            continue;
        };
        // What the browser asks for on its own account has no origin of ours.
        let ours = origin.trim_end_matches('/');
        if initiator == ours && is_foreign(url, origin) {
            found.push(url.to_owned());
        }
    }
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn other_hosts_and_ports_are_foreign() {
        let origin = "http://127.0.0.1:4000/";
        for own in [
            "http://127.0.0.1:4000/a.js",
            "data:,x",
            "blob:http://127.0.0.1:4000/1",
        ] {
            assert!(!is_foreign(own, origin), "{own}");
        }
        for other in [
            "http://127.0.0.1:40001/",
            "https://example.org/",
            "http://127.0.0.1:4000.example.org/",
        ] {
            assert!(is_foreign(other, origin), "{other}");
        }
    }
}
