//! The book a user fills in, and every finding computed from it.

pub mod book;
pub mod caution;
pub mod demo;
pub mod entry;
pub mod evaluate;
pub mod export;
pub mod field;
pub mod figure;
pub mod format;
pub mod import;
pub mod judge;
pub mod measure;
pub mod next;
pub mod operation;
pub mod pipe_copy;
pub mod reading;
pub mod report;
pub mod resolve;
pub mod schedule;
pub mod steady;
pub mod sweep;
pub mod transient;
pub mod units;
pub mod verdict;
pub mod walls;
pub mod working;

pub use book::Book;
pub use entry::{Entry, EntryTrouble};
pub use evaluate::{Findings, evaluate};
pub use field::Field;
pub use figure::{Figure, Gap, Lack, Place, Trouble};
pub use measure::Measure;
