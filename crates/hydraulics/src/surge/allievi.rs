//! Allievi's chain equations for a valve that closes linearly.

use crate::quantity::{Acceleration, Head, Velocity};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::velocity::meter_per_second;

/// Why the chain cannot be computed.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum AllieviError {
    /// The pipe parameter rho is not positive.
    PipeParameter(f64),
    /// The closing time in phases theta is not positive.
    Phases(f64),
}

impl core::fmt::Display for AllieviError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::PipeParameter(value) => write!(f, "pipe parameter {value} is not above 0"),
            Self::Phases(value) => write!(f, "closing time of {value} phases is not above 0"),
        }
    }
}

impl core::error::Error for AllieviError {}

/// What a linear closure does at the valve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AllieviClosure {
    /// Highest head over static head, at any time.
    pub highest: f64,
    /// Time of the highest head, in phases (2L/a).
    pub phase: f64,
}

/// Highest head at a valve whose opening falls linearly to nothing.
///
/// # Errors
/// A pipe parameter or closing time that is not positive.
pub fn allievi_linear_closure(rho: f64, theta: f64) -> Result<AllieviClosure, AllieviError> {
    let _ = (rho, theta);
    unimplemented!()
}

/// Allievi's pipe parameter rho = a V0 / (2 g H0).
#[must_use]
pub fn pipe_parameter(
    wave_speed: Velocity,
    velocity: Velocity,
    head: Head,
    gravity: Acceleration,
) -> f64 {
    wave_speed.get::<meter_per_second>() * velocity.get::<meter_per_second>()
        / (2.0 * gravity.get::<meter_per_second_squared>() * head.m())
}

/// Allievi's limit head for long closures, over static head.
#[must_use]
pub fn allievi_limit(rho: f64, theta: f64) -> f64 {
    let n = rho / theta;
    1.0 + n / 2.0 * (n + (n * n + 4.0).sqrt())
}
