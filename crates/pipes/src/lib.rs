//! The pipe catalogue: materials, published size tables as data files,
//! temperature derating, and the user's own pipes.
//!
//! [`catalogue()`] gives every pipe of the standard series; [`OwnPipe`] and
//! [`plate_steel`] make a [`Pipe`] of the user's own. A [`Pipe`] stands on its
//! own, so that a book can carry a copy. Every datum says where it comes from
//! ([`Sourced`]) and whether that source was seen ([`Attested`]).
//!
//! Quantities are `uom` types (f64, SI). Nothing here does input or output: the
//! data files are part of the program.

mod catalogue;
mod cold;
mod derating;
mod material;
mod own;
mod pipe;
mod rating;
mod series;
mod shared;
mod sourced;
mod steel_data;
mod table;

pub use catalogue::{Catalogue, Series, catalogue};
pub use cold::SOURCE as COLD_SOURCE;
pub use derating::{Derating, DeratingPoint};
pub use material::{Material, Properties};
pub use own::{OwnPipe, OwnPipeError, OwnRating, plate_steel};
pub use pipe::{Dimensions, Pipe, Supply, SupplyKind};
pub use rating::{Allowable, Basis, ClassRating, Rating, RatingError, Shares, SteelRating};
pub use sourced::{Attested, Sourced};
pub use steel_data::SteelJoint;
