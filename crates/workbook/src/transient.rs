//! Stage 3: transients.
//!
//! Here only a quick first estimate, the Joukowsky rise of a stop within one
//! pipe period. It is shown as an estimate and settles nothing: until the
//! whole transient is solved from every start, [`Transient::surge`] is
//! unsettled, and so is every verdict that needs it.

use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap, Lack, Trouble};
use crate::resolve::Resolved;
use crate::steady::Steady;
use hydraulics::constants::standard_gravity;
use hydraulics::quantity::{GaugePressure, Head};
use hydraulics::surge::{
    PipeWall, Restraint, StretchWave, SurgeError, joukowsky, series, wave_speed,
};
use uom::si::f64::{Time, Velocity};

/// The quick estimate for one stretch.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct QuickSurge {
    /// Wave speed, with the short-term modulus and the pipe held throughout,
    /// which of the three restraints gives the fastest wave.
    pub wave_speed: Velocity,
    /// Rise of head when the flow stops within the pipe period.
    pub rise: Head,
    /// The same as pressure.
    pub rise_pressure: GaugePressure,
}

/// Everything stage 3 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Transient {
    /// The quick estimate, stretch by stretch.
    pub quick: Vec<(Id, Figure<QuickSurge>)>,
    /// Time for a wave to run up the whole line and back.
    pub period: Figure<Time>,
    /// The greatest of the quick rises: what the foot may see.
    pub greatest_rise: Figure<Head>,
    /// The whole transient: not solved yet.
    pub surge: Figure<GaugePressure>,
}

/// Stage 3.
#[must_use]
pub fn transient(found: &Resolved, steady: &Steady) -> Transient {
    let mut waves = Vec::new();
    let quick: Vec<(Id, Figure<QuickSurge>)> = found
        .stretches
        .iter()
        .zip(&steady.stretches)
        .map(|(stretch, (_, run))| {
            let figure = quick(found, stretch, run).map(|(wave, surge)| {
                waves.push(wave);
                surge
            });
            (stretch.id, figure)
        })
        .collect();
    let whole: Figure<()> = quick
        .iter()
        .try_for_each(|(_, q)| q.clone_gap().map(|_| ()));
    let period = whole.clone().and_then(|()| {
        let first = found.stretches.first().map_or(1, |s| s.id);
        series(&waves).map(|s| s.period).map_err(|why| {
            Gap::Wrong(Trouble::Surge {
                stretch: first,
                why,
            })
        })
    });
    let greatest_rise = whole.map(|()| {
        quick
            .iter()
            .filter_map(|(_, q)| q.as_ref().ok())
            .map(|q| q.rise)
            .fold(Head::from_m(0.0), |a, b| if b > a { b } else { a })
    });
    Transient {
        quick,
        period,
        greatest_rise,
        surge: Err(Gap::Unsettled(Lack::Surge)),
    }
}

fn quick(
    found: &Resolved,
    stretch: &crate::resolve::parts::Stretch,
    run: &Figure<hydraulics::line::RunLoss>,
) -> Figure<(StretchWave, QuickSurge)> {
    let water = found.cold_water.clone_gap()?;
    let pipe = stretch.pipe.clone_gap()?;
    let velocity = run.clone()?.velocity;
    let wall = PipeWall {
        bore: pipe.bore(),
        thickness: pipe.wall_mean(),
        modulus: pipe.modulus_short.value,
        poisson: pipe.poisson.value,
        restraint: Restraint::Throughout,
    };
    let speed = wave_speed(water, &wall).map_err(|why| {
        Gap::Wrong(Trouble::Wave {
            stretch: stretch.id,
            why,
        })
    })?;
    let rise = joukowsky(speed, velocity, standard_gravity()).map_err(|why: SurgeError| {
        Gap::Wrong(Trouble::Surge {
            stretch: stretch.id,
            why,
        })
    })?;
    let length = stretch.span.clone()?.length();
    Ok((
        StretchWave {
            length,
            wave_speed: speed,
            velocity,
        },
        QuickSurge {
            wave_speed: speed,
            rise,
            rise_pressure: rise.pressure(water.density(), standard_gravity()),
        },
    ))
}
