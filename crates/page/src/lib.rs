//! The interface: shows findings, edits the book, holds no engineering.
