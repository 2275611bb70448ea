//! What a person enters: one component a kind of entry, each with its label,
//! its trouble in words below it, and nothing of its own kept.

pub mod choice;
pub mod number_field;
pub mod picker;
pub mod text_field;
pub mod typing;

pub use choice::{choice, choice_of};
pub use number_field::{NumberCell, NumberField};
pub use picker::{choice_in_list, picker};
pub use text_field::{TextLook, text_field};
