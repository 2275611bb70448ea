//! The walk through the page in a real browser, and how to add to it.
//!
//! `cargo task test browser` builds the release page and runs every walk in
//! `tests/`. With the page built, one alone runs by
//! `cargo test -p walkthrough --test NAME`.
//!
//! A walk is one function that does what a person would do:
//!
//! ```no_run
//! # use walkthrough::{Paper, walk};
//! #[test]
//! # fn shown_only() {}
//! fn a_pipe_is_chosen_and_printed() {
//!     walk("choose-pipe", async |page| {
//!         page.goto("").await?;                        // opens the page, waits until it runs
//!         page.fill("Design flow", "38 L/s").await?;   // a field by its label
//!         page.tap("button", "Pipe").await?;           // anything by role and name
//!         page.screenshot("choose-pipe").await?;       // target/screens/choose-pipe.png
//!         page.kill();                                 // the browser dies where it stands
//!         page.start().await?;                         // the same profile again
//!         page.stop_server();                          // and no server any more
//!         page.goto("").await?;
//!         let text = page.print("schedule", Paper::A4).await?;
//!         assert!(text.contains("SDR 11"));
//!         page.check_access().await                    // axe-core without violations
//!     });
//! }
//! ```
//!
//! - Elements are found as assistive technology finds them, by role and
//!   accessible name ([`Page::find`]), or where there is no such thing by their
//!   `data-test` attribute ([`Page::find_test`]). Finding waits up to
//!   [`PATIENCE`]; so does [`Page::until`] for any other condition. Never sleep.
//! - What the walk may assert, it asserts with `assert!`; a failed one leaves
//!   `target/screens/failed-NAME.png` behind, like any error.
//! - Every walk fails at its end if the console showed an error or anything
//!   was asked of another host, by the page, its service worker or the browser
//!   on their behalf. Nothing needs to be called for that.
//! - Walks run one at a time, however many threads the test runner has, each
//!   with a profile and ports of its own; each is ended after [`LIMIT`].

mod access;
mod browser;
mod files;
mod find;
mod page;
mod print;
mod serial;
mod steps;
mod view;
mod watch;

pub use page::{LIMIT, PATIENCE, Page, walk};
pub use print::Paper;
pub use thirtyfour::{Key, WebElement};

/// What a step of a walk returns; any error ends the walk.
pub type Result<T = ()> = std::result::Result<T, Box<dyn std::error::Error + Send + Sync>>;
