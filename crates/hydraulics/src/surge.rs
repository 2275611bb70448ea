//! Quick surge figures: wave speed, Joukowsky, Michaud, Allievi.
//!
//! First estimates for a single pipe without friction and without the air it
//! may hold. They do not replace the transient solution of the whole line, and
//! no pipe holds on the strength of them.

mod allievi;
mod quick;
mod series;
mod wave;

pub use allievi::{
    AllieviClosure, AllieviError, GREATEST_PHASES, allievi, allievi_limit, allievi_linear_closure,
    pipe_parameter,
};
pub use quick::{SurgeError, joukowsky, michaud, pipe_period, water_starting_time};
pub use series::{StretchWave, WaveSeries, series};
pub use wave::{
    EntrainedAir, PipeWall, Restraint, WaveError, korteweg, restraint_factor, wave_speed,
    wave_speed_with_air,
};
