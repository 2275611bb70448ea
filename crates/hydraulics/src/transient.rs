//! Transients: what a line does when its nozzles move.
//!
//! Method of characteristics over all runs in series (Wylie and Streeter,
//! Fluid Transients in Systems, 1993, chapters 3 and 4; from memory), each with its
//! own wave speed, area and friction, from a forebay of constant level to
//! nozzles that discharge to the air. A start is the steady solution of
//! [`crate::line::Line`], on the same energy convention, and stays so to
//! rounding until something moves.
//!
//! The order of use:
//!
//! 1. [`SurgeLine::new`]: a [`crate::line::Line`], its wave speeds, its
//!    [`Foot`];
//! 2. [`Grid::new`]: time step and cells, what they alter and what they lump;
//! 3. [`Model::new`]: the steady start from given strokes, laid on the grid;
//! 4. [`Event`]: what each nozzle does, by constructors;
//! 5. [`Model::run`]: a [`Run`] with envelope, traces, checks and cautions;
//! 6. [`ClosingSearch`]: the shortest safe closing time over all starts;
//!    [`converge`]: whether the grid is fine enough.
//!
//! # What is carried
//!
//! The head in the kernel is the energy head E = level + pressure head +
//! V^2/(2 g), above the jet axis. With it the momentum equation keeps its
//! convective term; what is left out of the continuity equation is of the order
//! V/a. Grade (what a gauge reads) is E less the velocity head, at every node
//! and step.
//!
//! # What is not modelled
//!
//! A machine whose flow changes with its speed (reaction machines, pumps run
//! as turbines): a [`Foot`] is nozzles or a valve that discharge to the air,
//! and nothing else can be said. The inertia of the water in manifold and
//! branches; the give of plastics over time (viscoelastic walls); pipes that
//! move. Water that hammers on a cavity is modelled ([`GasCavity`]), but
//! such a run is for a warning, not for a class: see [`Run::separation`].

mod cells;
mod characteristic;
mod converge;
mod error;
mod event;
mod friction;
mod gas;
mod grid;
mod joint;
mod kernel;
mod law;
mod march;
mod model;
mod run;
mod search;
mod surge_line;
#[cfg(test)]
mod tests;

pub use characteristic::Characteristic;
pub use converge::{Convergence, converge};
pub use error::TransientError;
pub use event::Event;
pub use friction::{FrictionModel, brunone_coefficient, shear_decay};
pub use gas::GasCavity;
pub use grid::{Grid, GridSpec, StretchGrid};
pub use law::{ClosingLaw, Stroke};
pub use model::Model;
pub use run::{
    Balance, Duration, NodeEnvelope, Probe, Run, RunOptions, Scratch, Separation, Trace,
};
pub use search::{
    ClosingAnswer, ClosingSearch, LawFamily, SearchSpec, StartCase, TwoSpeedAnswer, TwoSpeedSpec,
    two_speed,
};
pub use surge_line::{Foot, SurgeLine, SurgeSpec};
