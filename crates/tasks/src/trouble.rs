//! What went wrong, and what to do next.

use std::fmt::{self, Display};

/// A failure as a person reads it: what happened, then the next thing to do.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Trouble {
    what: String,
    next: String,
}

impl Trouble {
    /// Says `what` happened and what to do `next`.
    pub(crate) fn new(what: impl Into<String>, next: impl Into<String>) -> Self {
        Self {
            what: what.into(),
            next: next.into(),
        }
    }

    /// For a file that could not be read or written.
    pub(crate) fn file(doing: &str, path: &std::path::Path, error: &std::io::Error) -> Self {
        Self::new(
            format!("Could not {doing} {}: {error}.", path.display()),
            "Check that the path exists, may be written to, and that the disk has room.",
        )
    }
}

impl Display for Trouble {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(out, "{}\n  next: {}", self.what, self.next)
    }
}
