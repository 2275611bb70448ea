//! Parts that several sheets share, and what stands around them.

pub mod banners;
pub mod books;
pub mod cautions;
pub mod drawing_full;
pub mod drawing_panel;
pub mod figures;
pub mod import;
pub mod line_drawing;
pub mod next_entry;
pub mod own_pipe;
pub mod pan;
pub mod tabs;
pub mod title_block;
pub mod verdicts;
pub mod working;
