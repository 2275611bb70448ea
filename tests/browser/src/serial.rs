//! One browser at a time.

use std::fs::{self, File};
use std::io;

/// Held while a walk runs; the next one waits until it is dropped.
#[derive(Debug)]
pub(crate) struct Turn {
    _lock: File,
}

impl Turn {
    /// Waits for its turn, among the threads of this process and other processes too.
    pub(crate) fn wait() -> io::Result<Self> {
        let folder = tasks::places::target();
        fs::create_dir_all(&folder)?;
        let lock = File::create(folder.join("walk.lock"))?;
        lock.lock()?;
        Ok(Self { _lock: lock })
    }
}
