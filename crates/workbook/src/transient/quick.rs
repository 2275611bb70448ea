//! Wave speeds, and the quick figures beside the full solution: estimates
//! that settle nothing.

use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap, Trouble};
use crate::resolve::Resolved;
use crate::resolve::parts::Stretch;
use hydraulics::constants::standard_gravity;
use hydraulics::line::RunLoss;
use hydraulics::quantity::{GaugePressure, Head, Level};
use hydraulics::surge::{
    EntrainedAir, PipeWall, StretchWave, SurgeError, WaveSeries, allievi, joukowsky, michaud,
    wave_speed, wave_speed_with_air,
};
use pipes::Pipe;
use uom::si::f64::{Pressure, ThermodynamicTemperature, Time, Velocity};

/// The quick estimate for one stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct QuickSurge {
    /// Wave speed, as the transient uses it.
    pub wave_speed: Velocity,
    /// Short-term modulus it stands on, at the coldest wall.
    pub modulus: Pressure,
    /// How much stiffer that is than at the catalogue's temperature, from 1 up.
    pub stiffening: f64,
    /// Rise of head when the flow stops within the pipe period (Joukowsky).
    pub rise: Head,
    /// The same as pressure.
    pub rise_pressure: GaugePressure,
}

/// The quick estimates of a closing over the whole line, as one equal pipe
/// without friction.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct QuickClosing {
    /// Time from full stroke to shut.
    pub closing: Time,
    /// Rise at the foot by Michaud.
    pub michaud: Head,
    /// Rise at the foot by Allievi's chain, for an area that closes in a
    /// straight line.
    pub allievi: Head,
}

fn surge_trouble(stretch: Id) -> impl Fn(SurgeError) -> Gap {
    move |why| Gap::Wrong(Trouble::Surge { stretch, why })
}

/// Wave speed of a stretch, with the modulus and the stiffening it stands on.
pub(crate) fn speed(
    found: &Resolved,
    stretch: &Stretch,
    pipe: &Pipe,
) -> Figure<(Velocity, Pressure, f64)> {
    let water = found.cold_water.clone_gap()?;
    let stiffening = pipe.material.cold_stiffening(cold_wall(found)?);
    let modulus = pipe.modulus_short.value * stiffening;
    let wall = PipeWall {
        bore: pipe.bore(),
        thickness: pipe.wall_mean(),
        modulus,
        poisson: pipe.poisson.value,
        restraint: found.drive.restraint,
    };
    let share = found.drive.air_share.clone()?;
    let speed = if share > 0.0 {
        let span = stretch.span.clone()?;
        let middle = found.profile.level_at(span.from).and_then(|top| {
            let foot = found.profile.level_at(span.to)?;
            Some(Level::from_m(0.5 * (top.m() + foot.m())))
        });
        let Some(middle) = middle else {
            return Err(Gap::Wrong(Trouble::StretchStart {
                stretch: stretch.id,
            }));
        };
        let head = found.forebay.highest.clone()? - middle;
        let standing = head.pressure(water.density(), standard_gravity());
        let air = EntrainedAir {
            share,
            pressure: standing.absolute(found.atmosphere.clone()?),
        };
        wave_speed_with_air(water, &wall, air)
    } else {
        wave_speed(water, &wall)
    };
    let speed = speed.map_err(|why| {
        Gap::Wrong(Trouble::Wave {
            stretch: stretch.id,
            why,
        })
    })?;
    Ok((speed, modulus, stiffening))
}

/// The coldest wall: as entered, or that of the coldest water.
pub(crate) fn cold_wall(found: &Resolved) -> Figure<ThermodynamicTemperature> {
    match found.coldest_wall.clone()? {
        Some(wall) => Ok(wall),
        None => Ok(found.cold_water.clone_gap()?.temperature()),
    }
}

pub(super) fn quick(
    found: &Resolved,
    stretch: &Stretch,
    run: &Figure<RunLoss>,
) -> Figure<(StretchWave, QuickSurge)> {
    let water = found.cold_water.clone_gap()?;
    let pipe = stretch.pipe.clone_gap()?;
    let velocity = run.clone()?.velocity;
    let (wave_speed, modulus, stiffening) = speed(found, stretch, pipe)?;
    let rise =
        joukowsky(wave_speed, velocity, standard_gravity()).map_err(surge_trouble(stretch.id))?;
    let length = stretch.span.clone()?.length();
    Ok((
        StretchWave {
            length,
            wave_speed,
            velocity,
        },
        QuickSurge {
            wave_speed,
            modulus,
            stiffening,
            rise,
            rise_pressure: rise.pressure(water.density(), standard_gravity()),
        },
    ))
}

/// Michaud and Allievi for the closing of the book.
pub(super) fn closing(found: &Resolved, line: &WaveSeries) -> Figure<QuickClosing> {
    let time = found.drive.speeds.clone()?.full_stroke();
    let head = found.gross_head.clone()?;
    let first = found.stretches.first().map_or(1, |s| s.id);
    let g = standard_gravity();
    let (length, speed, velocity) = (line.length, line.wave_speed, line.velocity);
    Ok(QuickClosing {
        closing: time,
        michaud: michaud(length, speed, velocity, time, g).map_err(surge_trouble(first))?,
        allievi: allievi(length, speed, velocity, head, time, g).map_err(surge_trouble(first))?,
    })
}
