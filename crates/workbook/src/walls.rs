//! Stage 4: what the walls bear. Standing pressure against the pressure
//! allowed at the warmest wall, and collapse of the free pipe under full
//! vacuum. Figures only; verdicts are [`crate::judge`]'s.

use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap, Lack, Trouble};
use crate::resolve::Resolved;
use crate::resolve::parts::{Stretch, bears_pressure};
use crate::steady::Steady;
use crate::transient::{Extreme, Transient};
use crate::verdict::Weakest;
use hydraulics::constants::standard_gravity;
use hydraulics::quantity::{AbsolutePressure, GaugePressure, Level, PipeLength};
use pipes::{Allowable, Pipe, Rating};
use statics::collapse::{Collapse, FreeRing, free_ring};
use uom::si::f64::{Pressure, ThermodynamicTemperature};
use uom::si::thermodynamic_temperature::degree_celsius;

/// Ovality reckoned with: 2 % (common practice for plastic pipe as delivered
/// and laid; stiffer pipe is rounder).
pub const OVALITY: f64 = 0.02;

/// Share of the suction between air and vapour pressure that a running line
/// may use: seven tenths, some 7 m of water at the sea (common practice for
/// siphons).
pub const SIPHON_SHARE: f64 = 0.7;

/// A pressure at a place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PressureAt {
    /// Gauge pressure.
    pub pressure: GaugePressure,
    /// Where.
    pub at: PipeLength,
}

/// What a stretch may bear, and which part bears least.
#[derive(Debug, Clone, PartialEq)]
pub struct Bearing {
    /// The pressure.
    pub pressure: GaugePressure,
    /// The part.
    pub weakest: Weakest,
}

/// Collapse of the free pipe.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CollapseFigures {
    /// Outside less inside pressure at full vacuum: the air's pressure.
    pub vacuum: AbsolutePressure,
    /// With the modulus for short loads: a vacuum that passes.
    pub short: Collapse,
    /// With the modulus for lasting loads: a pipe left empty and shut.
    pub long: Collapse,
    /// `short` over the safety factor.
    pub allowed: Pressure,
    /// Safety factor.
    pub safety: f64,
}

/// How far the lowest pressure in a surge leaves the free pipe from collapse.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CollapseInSurge {
    /// Outside less inside pressure at the lowest; 0 where it stays above the
    /// air's.
    pub suction: Pressure,
    /// That over what is allowed: the share used.
    pub share: f64,
    /// What is left.
    pub left: Pressure,
}

/// What stage 4 finds for one stretch.
#[derive(Debug, Clone, PartialEq)]
pub struct StretchWalls {
    /// The stretch.
    pub stretch: Id,
    /// Highest standing pressure, from the highest forebay level; it may lie
    /// between the ends.
    pub standing: Figure<PressureAt>,
    /// What the pipe may bear at the warmest wall.
    pub allowable: Figure<Allowable>,
    /// What the pipe may bear at the temperature its rating is given at:
    /// never less, so more than this fails at any temperature.
    pub at_rating: Figure<Allowable>,
    /// The class the pipe needs at the temperature its rating is given at, for
    /// the standing pressure at the lowest place of the stretch and the warmest
    /// wall.
    pub class_needed: Figure<GaugePressure>,
    /// The weakest of pipe and rated fittings.
    pub bearing: Figure<Bearing>,
    /// Fittings of the stretch with no rating entered.
    pub unrated: Vec<Id>,
    /// Whether manifold, valve and nozzle hang on this stretch unrated.
    pub jets_unrated: bool,
    /// Standing pressure over what the weakest part bears.
    pub share: Figure<f64>,
    /// The same with the quick surge estimate on top: an estimate, no check.
    pub share_with_quick: Figure<f64>,
    /// The weakest of pipe and rated fittings in a surge: the user's allowance
    /// stands in for the pipe's lasting pressure where one is entered.
    pub surge_bearing: Figure<Bearing>,
    /// Whether that allowance is entered.
    pub surge_by_user: bool,
    /// Highest pressure in a surge, with its place.
    pub surge: Figure<PressureAt>,
    /// Highest pressure in a surge over what the weakest part bears.
    pub surge_share: Figure<f64>,
    /// Lowest pressure in a surge, with its place.
    pub surge_lowest: Figure<PressureAt>,
    /// Collapse.
    pub collapse: Figure<CollapseFigures>,
    /// How far the lowest pressure in a surge leaves the pipe from it.
    pub collapse_in_surge: Figure<CollapseInSurge>,
    /// Lowest running pressure, from the lowest forebay level where entered.
    pub lowest: Figure<PressureAt>,
    /// Suction a running line may use here.
    pub suction_allowed: Figure<Pressure>,
}

/// Everything stage 4 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Walls {
    /// Stretch by stretch, in the order of the line.
    pub stretches: Vec<StretchWalls>,
}

/// Stage 4.
#[must_use]
pub fn walls(found: &Resolved, steady: &Steady, transient: &Transient) -> Walls {
    let last = found.stretches.len().saturating_sub(1);
    Walls {
        stretches: found
            .stretches
            .iter()
            .enumerate()
            .map(|(i, stretch)| one(found, steady, transient, stretch, i, i == last))
            .collect(),
    }
}

fn one(
    found: &Resolved,
    steady: &Steady,
    transient: &Transient,
    stretch: &Stretch,
    index: usize,
    is_last: bool,
) -> StretchWalls {
    let standing = standing(found, stretch, is_last);
    let allowable = stretch.pipe.clone_gap().and_then(|pipe| {
        let wall = found.warmest_wall.clone()?;
        allowable_at(stretch, pipe, wall)
    });
    let class_needed = standing.clone().and_then(|s| {
        let factor = allowable.clone_gap()?.factor;
        Ok(GaugePressure::new(s.pressure.get() / factor))
    });
    let at_rating = stretch
        .pipe
        .clone_gap()
        .and_then(|pipe| allowable_at(stretch, pipe, rating_temperature(pipe)));
    let bearing = allowable.clone_gap().and_then(|a| {
        let pipe = GaugePressure::new(a.pressure);
        bearing_of(found, stretch, pipe, is_last)
    });
    let surge_by_user = matches!(stretch.surge_allowed, Ok(Some(_)));
    let surge_bearing = match stretch.surge_allowed.clone() {
        Ok(None) => bearing.clone(),
        Ok(Some(allowed)) => bearing_of(found, stretch, allowed, is_last),
        Err(gap) => Err(gap),
    };
    let extremes = transient.peaks.clone_gap().and_then(|peaks| {
        let found = peaks.stretches.get(index);
        found.copied().ok_or(Gap::Unsettled(Lack::Surge))
    });
    let at = |e: Extreme| PressureAt {
        pressure: e.pressure,
        at: e.at,
    };
    let surge = extremes.clone().map(|e| at(e.highest));
    let surge_lowest = extremes.map(|e| at(e.lowest));
    let surge_share = surge
        .clone()
        .and_then(|s| Ok(s.pressure.pa() / surge_bearing.clone_gap()?.pressure.pa()));
    let collapse = collapse(found, stretch);
    let collapse_in_surge = collapse_in_surge(&collapse, &surge_lowest);
    let share = standing
        .clone()
        .and_then(|s| Ok(s.pressure.pa() / bearing.clone_gap()?.pressure.pa()));
    let share_with_quick = standing.clone().and_then(|s| {
        let quick = transient.quick.get(index).map(|(_, q)| q.clone());
        let rise = quick
            .unwrap_or(Err(Gap::Unsettled(Lack::Pipe(stretch.id))))?
            .rise_pressure;
        Ok((s.pressure + rise).pa() / bearing.clone_gap()?.pressure.pa())
    });
    let unrated = found
        .fittings
        .iter()
        .filter(|f| f.stretch == Some(stretch.id) && bears_pressure(f.kind))
        .filter(|f| matches!(f.rating, Ok(None)))
        .map(|f| f.id)
        .collect();
    StretchWalls {
        stretch: stretch.id,
        surge_bearing,
        surge_by_user,
        surge,
        surge_share,
        surge_lowest,
        collapse,
        collapse_in_surge,
        lowest: lowest(found, steady, index),
        suction_allowed: suction_allowed(found),
        standing,
        allowable,
        at_rating,
        class_needed,
        bearing,
        unrated,
        jets_unrated: is_last && found.jets.as_ref().is_ok_and(|j| j.rating.is_none()),
        share,
        share_with_quick,
    }
}

/// The temperature a pipe's rating is given at.
fn rating_temperature(pipe: &Pipe) -> ThermodynamicTemperature {
    match &pipe.rating {
        Rating::Class(class) => class.at,
        Rating::Stress(_) => ThermodynamicTemperature::new::<degree_celsius>(20.0),
    }
}

fn allowable_at(
    stretch: &Stretch,
    pipe: &Pipe,
    wall: ThermodynamicTemperature,
) -> Figure<Allowable> {
    pipe.allowable(wall).map_err(|why| {
        Gap::Wrong(Trouble::Rating {
            stretch: stretch.id,
            why,
        })
    })
}

/// The lowest place of the pipe in a stretch, ends included; for the last
/// stretch the jets too.
fn lowest_place(found: &Resolved, stretch: &Stretch, is_last: bool) -> Figure<(Level, PipeLength)> {
    let span = stretch.span.clone()?;
    let stations = found.profile.whole()?;
    let ends = [span.from, span.to]
        .into_iter()
        .filter_map(|at| found.profile.level_at(at).map(|level| (level, at)));
    let within = stations
        .iter()
        .filter(|s| span.holds(s.chainage))
        .map(|s| (s.level, s.chainage));
    let jets = found
        .jet_axis
        .as_ref()
        .ok()
        .filter(|_| is_last)
        .map(|level| (*level, span.to));
    ends.chain(within)
        .chain(jets)
        .reduce(|low, other| if other.0 < low.0 { other } else { low })
        .ok_or(Gap::Wrong(Trouble::StretchStart {
            stretch: stretch.id,
        }))
}

fn standing(found: &Resolved, stretch: &Stretch, is_last: bool) -> Figure<PressureAt> {
    let (level, at) = lowest_place(found, stretch, is_last)?;
    let water = found.cold_water.clone()?;
    let head = found.forebay.highest.clone()? - level;
    Ok(PressureAt {
        pressure: head.pressure(water.density(), standard_gravity()),
        at,
    })
}

/// The weakest of a pipe that bears this much and what is rated on it.
fn bearing_of(
    found: &Resolved,
    stretch: &Stretch,
    pipe: GaugePressure,
    is_last: bool,
) -> Figure<Bearing> {
    let mut least = Bearing {
        pressure: pipe,
        weakest: Weakest::Pipe,
    };
    for fitting in found
        .fittings
        .iter()
        .filter(|f| f.stretch == Some(stretch.id))
    {
        if let Some(rating) = fitting.rating.clone()?
            && rating < least.pressure
        {
            least = Bearing {
                pressure: rating,
                weakest: Weakest::Fitting(fitting.id),
            };
        }
    }
    if is_last
        && let Some(rating) = found.jets.clone()?.rating
        && rating < least.pressure
    {
        least = Bearing {
            pressure: rating,
            weakest: Weakest::Jets,
        };
    }
    Ok(least)
}

fn collapse_in_surge(
    collapse: &Figure<CollapseFigures>,
    lowest: &Figure<PressureAt>,
) -> Figure<CollapseInSurge> {
    let below = -lowest.clone()?.pressure.get();
    let none = Pressure::default();
    let suction = if below > none { below } else { none };
    let allowed = collapse.clone()?.allowed;
    Ok(CollapseInSurge {
        suction,
        share: (suction / allowed).get::<uom::si::ratio::ratio>(),
        left: allowed - suction,
    })
}

fn collapse(found: &Resolved, stretch: &Stretch) -> Figure<CollapseFigures> {
    let pipe = stretch.pipe.clone_gap()?;
    let vacuum = found.atmosphere.clone()?;
    let safety = found.limits.clone()?.collapse_safety;
    let wrong = |why| {
        Gap::Wrong(Trouble::Wall {
            stretch: stretch.id,
            why,
        })
    };
    let ring = |modulus| {
        free_ring(&FreeRing {
            outside_diameter: pipe.outside_diameter,
            wall: pipe.wall_against_collapse(),
            modulus,
            poisson: pipe.poisson_for_collapse().value,
            ovality: OVALITY,
        })
        .map_err(wrong)
    };
    let short = ring(pipe.modulus_short.value)?;
    Ok(CollapseFigures {
        vacuum,
        allowed: short.allowed(safety).map_err(wrong)?,
        short,
        long: ring(pipe.modulus_long.value)?,
        safety,
    })
}

fn lowest(found: &Resolved, steady: &Steady, index: usize) -> Figure<PressureAt> {
    steady
        .low
        .clone_gap()?
        .nodes
        .iter()
        .filter(|n| n.run == index)
        .map(|n| PressureAt {
            pressure: n.pressure,
            at: n.chainage,
        })
        .reduce(|low, other| {
            if other.pressure < low.pressure {
                other
            } else {
                low
            }
        })
        .ok_or(Gap::Unsettled(Lack::Pipe(
            found.stretches.get(index).map_or(1, |s| s.id),
        )))
}

fn suction_allowed(found: &Resolved) -> Figure<Pressure> {
    let water = found.warmest_known_water()?;
    let available = found.atmosphere.clone()?.gauge(water.vapour_pressure());
    Ok(available.get() * SIPHON_SHARE)
}
