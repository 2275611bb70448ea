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
//!    [`converge()`]: whether the grid is fine enough.
//!
//! # Example
//!
//! ```
//! use hydraulics::constants::{standard_atmosphere, standard_gravity};
//! use hydraulics::friction::FrictionLaw;
//! use hydraulics::line::{Line, LineSpec, NozzleSet, Point, Run};
//! use hydraulics::nozzle::Nozzle;
//! use hydraulics::quantity::{
//!     Length, Level, PipeLength, ThermodynamicTemperature, Time, Velocity, unit,
//! };
//! use hydraulics::transient::{
//!     Characteristic, ClosingAnswer, ClosingLaw, ClosingSearch, Event, Foot, FrictionModel, Grid,
//!     GridSpec, Model, RunOptions, Scratch, SearchSpec, SurgeLine, SurgeSpec,
//! };
//! use hydraulics::water::Water;
//!
//! let mm = Length::new::<unit::length::millimeter>;
//! let seconds = Time::new::<unit::time::second>;
//! let celsius = ThermodynamicTemperature::new::<unit::thermodynamic_temperature::degree_celsius>;
//! let line = SurgeLine::new(SurgeSpec {
//!     line: Line::new(LineSpec {
//!         forebay: Level::from_m(160.0),
//!         points: vec![
//!             Point { chainage: PipeLength::from_m(0.0), level: Level::from_m(155.0) },
//!             Point { chainage: PipeLength::from_m(400.0), level: Level::from_m(100.0) },
//!         ],
//!         runs: vec![Run {
//!             to: PipeLength::from_m(400.0),
//!             bore: mm(150.0),
//!             friction: FrictionLaw::ColebrookWhite { roughness: mm(0.01) },
//!         }],
//!         losses: vec![],
//!         water: Water::at(celsius(4.0))?,
//!         gravity: standard_gravity(),
//!     })?,
//!     wave_speeds: vec![Velocity::new::<unit::velocity::meter_per_second>(350.0)],
//!     foot: Foot {
//!         nozzles: NozzleSet {
//!             nozzles: vec![Nozzle::new(mm(30.0), 0.97, 1.0)?; 2],
//!             axis: Level::from_m(101.0),
//!             branch_k: 0.5,
//!             branch_bore: mm(80.0),
//!         },
//!         characteristic: Characteristic::Linear,
//!     },
//!     atmosphere: standard_atmosphere(),
//! })?;
//! let grid = Grid::new(&line, GridSpec::default())?;
//! let model = Model::new(&line, &grid, &[1.0, 1.0], FrictionModel::default())?;
//! let event = Event::close(model.strokes(), &ClosingLaw::linear(seconds(10.0))?)?;
//! let mut scratch = Scratch::new();
//! let run = model.run(&event, &RunOptions::default(), &mut scratch)?;
//! assert!(run.separation.is_none());
//! assert!(run.foot_highest.0 > Level::from_m(160.0));
//!
//! // The shortest time that keeps the grade within 180 m, from either set of jets.
//! let spec = SearchSpec::new(vec![vec![1.0, 0.0], vec![1.0, 1.0]], seconds(30.0));
//! let answer = ClosingSearch::new(&line, &Grid::new(&line, GridSpec::coarse())?, &spec)?
//!     .finish(&mut scratch, |run, _| run.highest() <= Level::from_m(180.0))?;
//! assert!(matches!(answer, ClosingAnswer::Shortest { .. }));
//! # Ok::<(), Box<dyn std::error::Error>>(())
//! ```
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

mod account;
mod cells;
mod characteristic;
mod converge;
mod error;
mod event;
mod extremes;
mod family;
mod friction;
mod gas;
mod grid;
mod joint;
mod kernel;
mod law;
mod march;
mod model;
mod outcome;
mod run;
mod search;
mod simulate;
mod surge_line;
#[cfg(test)]
mod tests;
mod traces;
mod two_speed;

pub use characteristic::Characteristic;
pub use converge::{Convergence, converge};
pub use error::TransientError;
pub use event::Event;
pub use extremes::StretchExtremes;
pub use family::LawFamily;
pub use friction::{FrictionModel, brunone_coefficient, shear_decay};
pub use gas::GasCavity;
pub use grid::{Grid, GridSpec, StretchGrid};
pub use law::{ClosingLaw, Stroke};
pub use model::Model;
pub use run::{
    Balance, Duration, NodeEnvelope, Picture, Probe, Run, RunOptions, Scratch, Separation, Trace,
};
pub use search::{ClosingAnswer, ClosingSearch, SearchSpec, StartCase};
pub use surge_line::{Foot, SurgeLine, SurgeSpec};
pub use two_speed::{TwoSpeedAnswer, TwoSpeedSpec, two_speed};
