//! The intake under water: depth over its top at the lowest forebay level,
//! against what keeps vortices away.

use crate::book::Approach;
use crate::field::Field;
use crate::figure::{Figure, Gap, Lack, Trouble};
use crate::resolve::{Assumption, Resolved};
use crate::steady::Steady;
use hydraulics::intake::{self, submergence};
use hydraulics::quantity::{Head, Level};
use uom::si::f64::{Length, Velocity};
use uom::si::length::meter;

/// How deep the intake lies, and how deep it must.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Submergence {
    /// Lowest forebay level.
    pub water: Level,
    /// Top of the pipe's bore at the first station.
    pub top: Level,
    /// Water over it; below zero where the water stands lower.
    pub found: Head,
    /// What Gordon's criterion asks.
    pub needed: Length,
    /// Velocity in the pipe there.
    pub velocity: Velocity,
    /// Height of the opening: the bore of the first stretch.
    pub height: Length,
    /// How the water comes to it.
    pub approach: Approach,
}

impl Submergence {
    /// Gordon's coefficient for the approach, s/m^0.5.
    #[must_use]
    pub fn coefficient(&self) -> f64 {
        kind(self.approach).coefficient()
    }

    /// Whether there is water enough over it.
    #[must_use]
    pub fn suffices(&self) -> bool {
        self.found.m() > 0.0 && self.found.m() >= self.needed.get::<meter>()
    }
}

/// What is found of the intake.
#[derive(Debug, Clone, PartialEq)]
pub struct Intake {
    /// Its submergence; needs the lowest forebay level.
    pub submergence: Figure<Submergence>,
    /// What was taken for granted.
    pub assumptions: Vec<Assumption>,
}

/// The intake of a line.
#[must_use]
pub fn intake(found: &Resolved, steady: &Steady) -> Intake {
    let submergence = figure(found, steady);
    let assumptions = submergence
        .as_ref()
        .map(|s| vec![Assumption::IntakeApproach(s.approach)])
        .unwrap_or_default();
    Intake {
        submergence,
        assumptions,
    }
}

fn kind(approach: Approach) -> intake::Approach {
    match approach {
        Approach::Lateral => intake::Approach::Lateral,
        Approach::Symmetrical => intake::Approach::Symmetrical,
    }
}

fn figure(found: &Resolved, steady: &Steady) -> Figure<Submergence> {
    let water = found
        .forebay
        .lowest
        .clone()?
        .ok_or(Gap::needs(Field::ForebayLowest))?;
    let axis = found.profile.first_level.clone()?;
    let first = found
        .stretches
        .first()
        .ok_or(Gap::Unsettled(Lack::Pipe(1)))?;
    let height = first.pipe.clone()?.bore();
    let velocity = steady
        .stretches
        .first()
        .map_or(Err(Gap::Unsettled(Lack::Pipe(first.id))), |(_, run)| {
            run.clone().map(|run| run.velocity)
        })?;
    let approach = found.intake_approach;
    let needed = submergence(velocity, height, kind(approach))
        .map_err(|why| Gap::Wrong(Trouble::Intake(why)))?;
    let top = axis + Head::new(height / 2.0);
    Ok(Submergence {
        water,
        top,
        found: water - top,
        needed,
        velocity,
        height,
        approach,
    })
}
