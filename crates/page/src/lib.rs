//! The interface: shows findings, edits the book, holds no engineering.
#![recursion_limit = "512"]

pub mod app;
pub mod drawing;
pub mod edits;
pub mod history;
pub mod inputs;
pub mod keeping;
pub mod parts;
pub mod platform;
pub mod save_queue;
pub mod sheets;
pub mod slices;
pub mod slug;
pub mod speak;
pub mod state;
pub mod sweep_table;
pub mod sweeping;
pub mod theme;
