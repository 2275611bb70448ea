//! The book a user fills in, and every finding computed from it.
