//! tasks
