//! The walk through the page in a real browser.
