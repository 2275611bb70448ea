//! Stretches in series, for the quick figures.

use super::quick::{SurgeError, not_negative, positive};
use crate::quantity::{PipeLength, Time, Velocity};
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

/// One stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StretchWave {
    /// Its length.
    pub length: PipeLength,
    /// Its wave speed.
    pub wave_speed: Velocity,
    /// Mean velocity of the flow in it.
    pub velocity: Velocity,
}

/// The single pipe that stands for stretches in series.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct WaveSeries {
    /// Length in all.
    pub length: PipeLength,
    /// Wave speed with the same travel time, L / sum(l/a).
    pub wave_speed: Velocity,
    /// Velocity with the same momentum, sum(l v) / L.
    pub velocity: Velocity,
    /// Time for a wave to run up and back, 2 sum(l/a).
    pub period: Time,
}

/// The single pipe that stands for stretches in series.
///
/// # Equation
/// a = L / sum(l_i/a_i), V = sum(l_i V_i) / L (common practice; Parmakian,
/// Waterhammer Analysis, 1955, from memory). Partial reflections where the
/// pipe changes are lost, and can be higher than what remains.
///
/// # Errors
/// No stretch (as a length of 0), a length or wave speed that is not positive,
/// a negative velocity.
pub fn series(stretches: &[StretchWave]) -> Result<WaveSeries, SurgeError> {
    let (mut length, mut travel, mut momentum) = (0.0, 0.0, 0.0);
    for stretch in stretches {
        let l = positive(stretch.length.m(), SurgeError::PipeLength(stretch.length))?;
        let a = positive(
            stretch.wave_speed.get::<meter_per_second>(),
            SurgeError::WaveSpeed(stretch.wave_speed),
        )?;
        let v = not_negative(
            stretch.velocity.get::<meter_per_second>(),
            SurgeError::Velocity(stretch.velocity),
        )?;
        length += l;
        travel += l / a;
        momentum += l * v;
    }
    let total = PipeLength::from_m(length);
    positive(length, SurgeError::PipeLength(total))?;
    Ok(WaveSeries {
        length: total,
        wave_speed: Velocity::new::<meter_per_second>(length / travel),
        velocity: Velocity::new::<meter_per_second>(momentum / length),
        period: Time::new::<second>(2.0 * travel),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn stretch(length: f64, wave_speed: f64, velocity: f64) -> StretchWave {
        StretchWave {
            length: PipeLength::from_m(length),
            wave_speed: Velocity::new::<meter_per_second>(wave_speed),
            velocity: Velocity::new::<meter_per_second>(velocity),
        }
    }

    #[test]
    fn travel_time_and_momentum_are_kept() {
        let one = series(&[stretch(300.0, 300.0, 2.0), stretch(100.0, 1000.0, 4.0)]).unwrap();
        assert!((one.length.m() - 400.0).abs() < 1e-12);
        assert!((one.period.get::<second>() - 2.2).abs() < 1e-12);
        assert!((one.wave_speed.get::<meter_per_second>() - 400.0 / 1.1).abs() < 1e-9);
        assert!((one.velocity.get::<meter_per_second>() - 2.5).abs() < 1e-12);
    }

    #[test]
    fn like_stretches_are_one_pipe() {
        let one = series(&[stretch(30.0, 350.0, 2.0), stretch(70.0, 350.0, 2.0)]).unwrap();
        assert!((one.wave_speed.get::<meter_per_second>() - 350.0).abs() < 1e-9);
        assert!(series(&[]).is_err());
        assert!(series(&[stretch(30.0, 0.0, 2.0)]).is_err());
    }
}
