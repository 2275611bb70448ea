//! Stage 5, last: verdicts and cautions. Alone in judging; computes no figure.
//!
//! The careful rule for pressure, stricter than EN 805 (DP within PFA, MDP
//! within PMA; a water-supply standard, applied to penstocks by analogy): the
//! highest transient pressure stays within the lasting pressure allowed at
//! the warmest wall, of the weakest part. No stretch holds until that, the
//! lowest pressure and collapse are all settled.

use crate::book::{Id, Laying};
use crate::caution::Caution;
use crate::figure::{Figure, Gap, Lack, Trouble};
use crate::intake::Intake;
use crate::measure::Measure;
use crate::operation::Operation;
use crate::relief::Relief;
use crate::resolve::Resolved;
use crate::steady::Steady;
use crate::transient::{EventKind, EventPeak, Transient};
use crate::verdict::{Check, CheckKind, StretchVerdict, Verdict};
use crate::walls::{Bearing, PressureAt, StretchWalls, Walls};
use hydraulics::line::{LineCaution, LineError};
use hydraulics::quantity::Head;
use pipes::Material;
use uom::si::f64::Pressure;

/// A flow above this share of the flow of greatest power draws a caution.
const NEAR_GREATEST: f64 = 0.8;

/// Everything stage 5 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Judged {
    /// Stretch by stretch, in the order of the line.
    pub stretches: Vec<StretchVerdict>,
    /// The worst of the stretches; unsettled while there is none, or while
    /// the line as a whole cannot be figured.
    pub verdict: Verdict,
    /// Cautions, the pressing ones first.
    pub cautions: Vec<Caution>,
}

/// What is found of places on the line that need something.
#[derive(Debug, Clone, Copy)]
pub struct Places<'a> {
    /// Vents and drains.
    pub relief: &'a Relief,
    /// The intake.
    pub intake: &'a Intake,
}

/// Stage 5.
#[must_use]
pub fn judge(
    found: &Resolved,
    steady: &Steady,
    operation: &Operation,
    transient: &Transient,
    walls: &Walls,
    places: Places<'_>,
    invented: bool,
) -> Judged {
    let stretches = verdicts(found, steady, transient, walls);
    let worst = stretches
        .iter()
        .map(|s| s.verdict)
        .max()
        .unwrap_or(Verdict::Unsettled);
    // A wrong entry anywhere leaves the book as a whole unsettled at best.
    let verdict = if found.troubles.is_empty() {
        worst
    } else {
        worst.max(Verdict::Unsettled)
    };
    let mut cautions = cautions(found, steady, operation, transient, walls, invented);
    cautions.extend(place_cautions(found, places));
    cautions.sort_by_key(|c| !c.is_pressing());
    Judged {
        stretches,
        verdict,
        cautions,
    }
}

/// The verdict of every stretch.
#[must_use]
pub fn verdicts(
    found: &Resolved,
    steady: &Steady,
    transient: &Transient,
    walls: &Walls,
) -> Vec<StretchVerdict> {
    let margin = found
        .limits
        .as_ref()
        .map(|l| l.tight_margin)
        .map_err(Clone::clone);
    walls
        .stretches
        .iter()
        .filter_map(|wall| {
            let checks = vec![
                passes_flow(found, steady),
                standing(wall, &margin),
                surge(transient, wall, &margin),
                lowest(transient, wall),
                collapse(wall, found, &margin),
            ];
            StretchVerdict::of(wall.stretch, checks)
        })
        .collect()
}

fn passes_flow(found: &Resolved, steady: &Steady) -> Check {
    const KIND: CheckKind = CheckKind::PassesFlow;
    let attempt = || -> Figure<Check> {
        let loss = steady.loss.clone()?;
        let gross = found.gross_head.clone()?;
        let check = Check::against(KIND, loss.into(), gross.into(), 0.0);
        match &steady.solved {
            // What the solver refused fails, even where rounding would not.
            Err(gap @ Gap::Wrong(Trouble::Line(LineError::FlowTooGreat { .. }))) => Ok(Check {
                verdict: Verdict::Fails,
                gap: Some(gap.clone()),
                ..check
            }),
            Err(gap) if check.verdict != Verdict::Fails => Err(gap.clone()),
            _ => Ok(check),
        }
    };
    attempt().unwrap_or_else(|gap| Check::unsettled(KIND, gap))
}

fn standing(wall: &StretchWalls, margin: &Figure<f64>) -> Check {
    const KIND: CheckKind = CheckKind::StandingPressure;
    wall.standing
        .clone()
        .and_then(|standing| against_bearing(KIND, standing, wall, &wall.bearing, margin))
        .unwrap_or_else(|gap| Check::unsettled(KIND, gap))
}

/// A highest pressure in a surge against what the weakest part bears: the rule
/// of the verdicts, and of every search for a closing that keeps to it.
///
/// # Errors
/// What the margin lacks.
pub(crate) fn highest_in_surge(
    highest: PressureAt,
    wall: &StretchWalls,
    margin: &Figure<f64>,
) -> Figure<Check> {
    const KIND: CheckKind = CheckKind::SurgePressure;
    against_bearing(KIND, highest, wall, &wall.surge_bearing, margin)
}

/// A lowest pressure in a surge against the suction permitted: the same rule
/// for both.
///
/// # Errors
/// What the permitted suction lacks.
pub(crate) fn lowest_in_surge(lowest: PressureAt, wall: &StretchWalls) -> Figure<Check> {
    const KIND: CheckKind = CheckKind::LowestPressure;
    let allowed = wall.suction_allowed.clone()?;
    let below = -lowest.pressure.pa();
    let mut check = if below <= 0.0 {
        Check {
            verdict: Verdict::Holds,
            gap: None,
            found: Some(lowest.pressure.into()),
            ..Check::unsettled(KIND, Gap::Unsettled(Lack::Surge))
        }
    } else {
        // Any suction is tight at best.
        let suction = Measure::new(below, crate::units::Kind::Pressure);
        Check::against(KIND, suction, allowed.into(), 1.0)
    };
    check.at = Some(lowest.at);
    Ok(check)
}

/// A pressure against what the weakest part of a stretch bears, with what
/// keeps that from being sure.
fn against_bearing(
    kind: CheckKind,
    standing: PressureAt,
    wall: &StretchWalls,
    bearing: &Figure<Bearing>,
    margin: &Figure<f64>,
) -> Figure<Check> {
    let margin = margin.clone()?;
    let found = Measure::from(standing.pressure);
    let by_user = kind == CheckKind::SurgePressure && wall.surge_by_user;
    let check = match (bearing, &wall.at_rating) {
        (Ok(bearing), _) => {
            let mut check = Check::against(kind, found, bearing.pressure.into(), margin);
            check.weakest = Some(bearing.weakest);
            check
        }
        // The temperature is missing, but no temperature would help.
        (Err(gap), Ok(rated)) if !by_user && found.value > pascals(rated.pressure) => {
            let mut check = Check::against(kind, found, rated.pressure.into(), margin);
            check.gap = Some(gap.clone());
            check
        }
        (Err(gap), _) => {
            let mut check = Check::unsettled(kind, gap.clone());
            check.found = Some(found);
            check
        }
    };
    // What the user entered is the user's word.
    let seen = by_user || wall.allowable.as_ref().is_ok_and(|a| a.attested.is_seen());
    let mut check = Check {
        at: Some(standing.at),
        ..check
    };
    if let Some(fitting) = wall.unrated.first() {
        check = check.wanting(Lack::Rating(*fitting));
    }
    if wall.jets_unrated {
        check = check.wanting(Lack::Entry(crate::field::Field::JetRating));
    }
    if !seen {
        check = check.wanting(Lack::Source(wall.stretch));
    }
    Ok(check)
}

fn surge(transient: &Transient, wall: &StretchWalls, margin: &Figure<f64>) -> Check {
    const KIND: CheckKind = CheckKind::SurgePressure;
    let check = wall
        .surge
        .clone()
        .and_then(|highest| highest_in_surge(highest, wall, margin))
        .unwrap_or_else(|gap| Check::unsettled(KIND, gap));
    match parted(transient) {
        Some(lack) => check.wanting(lack),
        None => check,
    }
}

/// What is lacking where the column parts: such a run proves nothing but that
/// the event must not happen.
fn parted(transient: &Transient) -> Option<Lack> {
    let parted = transient.peaks.as_ref().ok()?.parted?;
    Some(Lack::ColumnParts { at: parted.at })
}

fn lowest(transient: &Transient, wall: &StretchWalls) -> Check {
    const KIND: CheckKind = CheckKind::LowestPressure;
    let attempt = || -> Figure<Check> {
        let running = wall.lowest.clone()?;
        let lowest = match &wall.surge_lowest {
            Ok(surge) if surge.pressure < running.pressure => *surge,
            _ => running,
        };
        let mut check = lowest_in_surge(lowest, wall)?;
        if let Err(gap) = &transient.peaks
            && check.verdict < Verdict::Unsettled
        {
            check.verdict = Verdict::Unsettled;
            check.gap = Some(gap.clone());
        }
        Ok(match parted(transient) {
            Some(lack) => check.wanting(lack),
            None => check,
        })
    };
    attempt().unwrap_or_else(|gap| Check::unsettled(KIND, gap))
}

fn collapse(wall: &StretchWalls, found: &Resolved, margin: &Figure<f64>) -> Check {
    const KIND: CheckKind = CheckKind::Collapse;
    let attempt = || -> Figure<Check> {
        let figures = wall.collapse.clone()?;
        let check = Check::against(
            KIND,
            figures.vacuum.into(),
            figures.allowed.into(),
            margin.clone()?,
        );
        let seen = found
            .stretches
            .iter()
            .find(|s| s.id == wall.stretch)
            .and_then(|s| s.pipe.as_ref().ok())
            .is_some_and(|p| p.modulus_short.attested.is_seen() && p.dimensions.attested.is_seen());
        Ok(if seen {
            check
        } else {
            check.wanting(Lack::Source(wall.stretch))
        })
    };
    attempt().unwrap_or_else(|gap| Check::unsettled(KIND, gap))
}

fn pascals(pressure: Pressure) -> f64 {
    pressure.get::<uom::si::pressure::pascal>()
}

fn cautions(
    found: &Resolved,
    steady: &Steady,
    operation: &Operation,
    transient: &Transient,
    walls: &Walls,
    invented: bool,
) -> Vec<Caution> {
    let mut all = Vec::new();
    if invented {
        all.push(Caution::Invented);
    }
    all.extend(surge_cautions(found, transient, walls));
    all.extend(suction(steady));
    all.push(Caution::CollapseAndVents {
        weak: weak_in_vacuum(walls),
    });
    all.push(Caution::VelocityAndSilt {
        fast: fastest(found, steady),
    });
    if let (Ok(share), Ok(limits)) = (&steady.loss_share, &found.limits)
        && *share > limits.loss_cap
    {
        all.push(Caution::LossOverCap {
            share: *share,
            cap: limits.loss_cap,
        });
    }
    if operation
        .share_of_greatest
        .as_ref()
        .is_ok_and(|s| *s > NEAR_GREATEST)
    {
        all.push(Caution::NearGreatestPower);
    }
    if regime_uncertain(steady) {
        all.push(Caution::RegimeUncertain);
    }
    let unseen = unseen(found, walls);
    if !unseen.is_empty() {
        all.push(Caution::SourceNotSeen { stretches: unseen });
    }
    let bare = found
        .stretches
        .iter()
        .filter(|s| s.laying != Laying::Buried)
        .map(|s| s.id)
        .collect();
    all.push(Caution::TemperatureAndSun { bare });
    let unrated = walls
        .stretches
        .iter()
        .flat_map(|w| w.unrated.iter().copied())
        .collect();
    all.push(Caution::WeakJoints { unrated });
    all.extend([
        Caution::ThrustAtBends,
        Caution::Freezing,
        Caution::DepressuriseBeforeWork,
        Caution::LocalCodesAndReview,
    ]);
    all
}

/// Cautions of what moves.
fn surge_cautions(found: &Resolved, transient: &Transient, walls: &Walls) -> Vec<Caution> {
    let mut all = Vec::new();
    let surge = match &transient.surge {
        Ok(surge) => surge,
        Err(_) => return vec![Caution::SurgeUnsolved],
    };
    if let Some(parted) = surge.peaks.parted {
        all.push(Caution::ColumnParts {
            event: parted.by.event,
            at: parted.at,
        });
    }
    for event in [EventKind::Slam, EventKind::Blocked] {
        let Some(peak) = surge.event(event).filter(|e| !e.counts) else {
            continue;
        };
        let beyond = beyond(peak, walls);
        let parts = peak.parted.map(|p| p.at);
        let highest = peak
            .highest
            .iter()
            .copied()
            .reduce(|a, b| if b.0 > a.0 { b } else { a });
        let Some((highest, _)) = highest else {
            continue;
        };
        all.push(match event {
            EventKind::Slam => Caution::Slam {
                highest,
                beyond,
                parts,
            },
            _ => Caution::JetBlocked {
                highest,
                beyond,
                parts,
            },
        });
    }
    all.push(Caution::ClosingTimeBuiltIn {
        closing: surge.closing,
    });
    let plastics: Vec<Id> = found
        .stretches
        .iter()
        .filter(|s| s.pipe.as_ref().is_ok_and(|p| is_plastic(p.material)))
        .map(|s| s.id)
        .collect();
    if !plastics.is_empty() {
        all.push(Caution::PlasticsTire {
            stretches: plastics,
        });
    }
    all.push(Caution::EntrappedAir {
        drawn: surge.peaks.draws_air,
    });
    all
}

/// Stretches that an event takes beyond what they bear.
fn beyond(peak: &EventPeak, walls: &Walls) -> Vec<Id> {
    walls
        .stretches
        .iter()
        .zip(peak.highest.iter().zip(&peak.lowest))
        .filter(|(wall, (high, low))| {
            let over = wall
                .surge_bearing
                .as_ref()
                .is_ok_and(|b| high.0 > b.pressure);
            let under = wall
                .suction_allowed
                .as_ref()
                .is_ok_and(|allowed| -low.0.get() > *allowed);
            over || under
        })
        .map(|(wall, _)| wall.stretch)
        .collect()
}

fn is_plastic(material: Material) -> bool {
    matches!(
        material,
        Material::Pe100 | Material::Pe4710 | Material::PvcU | Material::PvcO | Material::Grp
    )
}

/// Cautions of places that need something.
fn place_cautions(found: &Resolved, places: Places<'_>) -> Vec<Caution> {
    let mut all = Vec::new();
    let (high, steepens) = places.relief.vent_stations();
    if !(high.is_empty() && steepens.is_empty()) {
        all.push(Caution::AirCollects { high, steepens });
    }
    let drains: Vec<Id> = places
        .relief
        .drains
        .iter()
        .flatten()
        .map(|d| d.station)
        .collect();
    if !drains.is_empty() {
        all.push(Caution::WaterStays { drains });
    }
    if let Ok(s) = &places.intake.submergence
        && !s.suffices()
    {
        all.push(Caution::Submergence {
            found: s.found,
            needed: Head::new(s.needed),
        });
    }
    let differ = &found.profile.sights_differ;
    if !differ.is_empty() {
        all.push(Caution::SightsDiffer {
            stations: differ.iter().map(|(id, _)| *id).collect(),
        });
    }
    all
}

fn suction(steady: &Steady) -> Option<Caution> {
    let lengths = steady.suction.as_ref().ok()?;
    let boils = steady.vapour.as_ref().is_ok_and(|v| v.margin.m() <= 0.0);
    (!lengths.is_empty()).then(|| Caution::SubAtmospheric {
        lengths: lengths.iter().map(|s| (s.from, s.to)).collect(),
        boils,
    })
}

fn weak_in_vacuum(walls: &Walls) -> Vec<Id> {
    walls
        .stretches
        .iter()
        .filter(|w| {
            w.collapse
                .as_ref()
                .is_ok_and(|c| c.allowed < c.vacuum.get())
        })
        .map(|w| w.stretch)
        .collect()
}

fn fastest(found: &Resolved, steady: &Steady) -> Option<(Id, uom::si::f64::Velocity)> {
    let limit = found.limits.as_ref().ok()?.velocity_high;
    steady
        .stretches
        .iter()
        .filter_map(|(id, run)| run.as_ref().ok().map(|r| (*id, r.velocity)))
        .filter(|(_, v)| *v > limit)
        .reduce(|a, b| if b.1 > a.1 { b } else { a })
}

fn regime_uncertain(steady: &Steady) -> bool {
    steady.grade.as_ref().is_ok_and(|g| {
        g.cautions
            .iter()
            .any(|c| matches!(c, LineCaution::UncertainRegime { .. }))
    })
}

/// Stretches whose pipe rests on a value whose source was not seen.
fn unseen(found: &Resolved, walls: &Walls) -> Vec<Id> {
    found
        .stretches
        .iter()
        .zip(&walls.stretches)
        .filter(|(stretch, wall)| {
            let by_rating = wall.at_rating.as_ref().is_ok_and(|a| !a.attested.is_seen())
                || wall.allowable.as_ref().is_ok_and(|a| !a.attested.is_seen());
            let by_pipe = stretch.pipe.as_ref().is_ok_and(|p| {
                !(p.dimensions.attested.is_seen() && p.modulus_short.attested.is_seen())
            });
            by_rating || by_pipe
        })
        .map(|(stretch, _)| stretch.id)
        .collect()
}
