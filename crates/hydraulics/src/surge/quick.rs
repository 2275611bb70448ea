//! Joukowsky and Michaud, pipe period and water starting time.

use crate::quantity::{Acceleration, Head, PipeLength, Time, Velocity};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

/// Why there is no quick figure.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum SurgeError {
    /// The wave speed is not positive.
    WaveSpeed(Velocity),
    /// The velocity (or its change) is negative or not finite.
    Velocity(Velocity),
    /// The length is not positive.
    PipeLength(PipeLength),
    /// The time is negative or not finite.
    Time(Time),
    /// The acceleration of free fall is not positive.
    Gravity(Acceleration),
    /// The head is not positive.
    Head(Head),
}

impl core::fmt::Display for SurgeError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::WaveSpeed(value) => write!(
                f,
                "wave speed {} m/s is not above 0",
                value.get::<meter_per_second>()
            ),
            Self::Velocity(value) => {
                write!(
                    f,
                    "velocity {} m/s is below 0",
                    value.get::<meter_per_second>()
                )
            }
            Self::PipeLength(value) => write!(f, "pipe length {} m is not above 0", value.m()),
            Self::Time(value) => write!(f, "time {} s is below 0", value.get::<second>()),
            Self::Gravity(value) => write!(
                f,
                "acceleration of free fall {} m/s2 is not above 0",
                value.get::<meter_per_second_squared>()
            ),
            Self::Head(value) => write!(f, "head {} m is not above 0", value.m()),
        }
    }
}

impl core::error::Error for SurgeError {}

/// A positive finite number, or the error.
pub(super) fn positive(value: f64, error: SurgeError) -> Result<f64, SurgeError> {
    if value > 0.0 && value.is_finite() {
        Ok(value)
    } else {
        Err(error)
    }
}

/// A finite number from zero up, or the error.
pub(super) fn not_negative(value: f64, error: SurgeError) -> Result<f64, SurgeError> {
    if value >= 0.0 && value.is_finite() {
        Ok(value)
    } else {
        Err(error)
    }
}

/// Rise of head when the velocity is stopped by `change` at once.
///
/// # Equation
/// dH = a dV / g (Joukowsky 1898). Holds for any change completed within
/// 2L/a, at the valve, without friction; friction can add to it in a long
/// line (line packing).
///
/// # Errors
/// A wave speed or gravity that is not positive, a negative change.
pub fn joukowsky(
    wave_speed: Velocity,
    change: Velocity,
    gravity: Acceleration,
) -> Result<Head, SurgeError> {
    let a = positive(
        wave_speed.get::<meter_per_second>(),
        SurgeError::WaveSpeed(wave_speed),
    )?;
    let v = not_negative(
        change.get::<meter_per_second>(),
        SurgeError::Velocity(change),
    )?;
    let g = positive(
        gravity.get::<meter_per_second_squared>(),
        SurgeError::Gravity(gravity),
    )?;
    Ok(Head::from_m(a * v / g))
}

/// Rise of head when the flow is stopped steadily over a time.
///
/// # Equation
/// dH = 2 L V / (g T) (Michaud 1878) for T above 2L/a, the Joukowsky rise
/// below it; they meet at 2L/a. A rule of thumb: a nozzle's closing is not a
/// steady stop, and high-head lines can exceed it.
///
/// # Errors
/// A length, wave speed or gravity that is not positive, a negative velocity
/// or time.
pub fn michaud(
    length: PipeLength,
    wave_speed: Velocity,
    velocity: Velocity,
    closing_time: Time,
    gravity: Acceleration,
) -> Result<Head, SurgeError> {
    let sudden = joukowsky(wave_speed, velocity, gravity)?;
    let period = pipe_period(length, wave_speed)?.get::<second>();
    let t = not_negative(closing_time.get::<second>(), SurgeError::Time(closing_time))?;
    if t <= period {
        Ok(sudden)
    } else {
        Ok(sudden * (period / t))
    }
}

/// Time for a wave to run up the pipe and back, 2L/a.
///
/// # Errors
/// A length or wave speed that is not positive.
pub fn pipe_period(length: PipeLength, wave_speed: Velocity) -> Result<Time, SurgeError> {
    let l = positive(length.m(), SurgeError::PipeLength(length))?;
    let a = positive(
        wave_speed.get::<meter_per_second>(),
        SurgeError::WaveSpeed(wave_speed),
    )?;
    Ok(Time::new::<second>(2.0 * l / a))
}

/// Water starting time, L V / (g H).
///
/// # Errors
/// A length, head or gravity that is not positive, a negative velocity.
pub fn water_starting_time(
    length: PipeLength,
    velocity: Velocity,
    head: Head,
    gravity: Acceleration,
) -> Result<Time, SurgeError> {
    let l = positive(length.m(), SurgeError::PipeLength(length))?;
    let h = positive(head.m(), SurgeError::Head(head))?;
    let v = not_negative(
        velocity.get::<meter_per_second>(),
        SurgeError::Velocity(velocity),
    )?;
    let g = positive(
        gravity.get::<meter_per_second_squared>(),
        SurgeError::Gravity(gravity),
    )?;
    Ok(Time::new::<second>(l * v / (g * h)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::standard_gravity;
    use proptest::prelude::*;

    fn m_s(value: f64) -> Velocity {
        Velocity::new::<meter_per_second>(value)
    }

    fn s(value: f64) -> Time {
        Time::new::<second>(value)
    }

    #[test]
    fn nonsense_is_refused() {
        let g = standard_gravity();
        let l = PipeLength::from_m(100.0);
        assert!(joukowsky(m_s(0.0), m_s(1.0), g).is_err());
        assert!(joukowsky(m_s(1000.0), m_s(-1.0), g).is_err());
        assert!(joukowsky(m_s(1000.0), m_s(f64::NAN), g).is_err());
        assert!(michaud(l, m_s(1000.0), m_s(1.0), s(-1.0), g).is_err());
        assert!(pipe_period(PipeLength::from_m(0.0), m_s(1000.0)).is_err());
        assert!(water_starting_time(l, m_s(1.0), Head::from_m(0.0), g).is_err());
    }

    proptest! {
        #[test]
        fn michaud_meets_joukowsky_at_one_period_and_falls_beyond(
            length in 10.0..3000.0_f64, a in 200.0..1400.0_f64, v in 0.1..5.0_f64,
        ) {
            let g = standard_gravity();
            let l = PipeLength::from_m(length);
            let period = pipe_period(l, m_s(a)).unwrap().get::<second>();
            let sudden = joukowsky(m_s(a), m_s(v), g).unwrap();
            let of = |t| michaud(l, m_s(a), m_s(v), s(t), g).unwrap().m();
            prop_assert!((of(period * 0.5) - sudden.m()).abs() < 1e-12 * sudden.m());
            prop_assert!((of(period * (1.0 + 1e-12)) / sudden.m() - 1.0).abs() < 1e-10);
            let slow = 3.0 * period;
            prop_assert!((of(slow) - 2.0 * length * v / (9.80665 * slow)).abs() < 1e-9 * of(slow));
        }
    }
}
