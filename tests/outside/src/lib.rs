//! Checks against the outside world: reference values with their sources.
