//! Stage 2: line and jets in balance.
//!
//! The grade line at the flow that is to pass, with nozzle bores solved for it
//! or given. Losses are figured from the normal forebay level with water as
//! cold as it gets. What the same line does at other flows is
//! [`crate::operation`]'s.

use crate::book::{BoreSizing, FittingKind, Id, RoughnessAge};
use crate::field::Field;
use crate::figure::{CloneGap, Figure, Gap, Lack, Trouble};
use crate::resolve::bends::{Made, Turn};
use crate::resolve::parts::{PlacedFitting, Shape, Stretch};
use crate::resolve::{Assumption, JetSpec, Resolved};
use hydraulics::constants::standard_gravity;
use hydraulics::fittings::{
    self, BarShape, Entrance, FittingError, LossCoefficient, MitreWall, OpenValve, Tee, TrashRack,
    ValveOpening,
};
use hydraulics::friction::{
    DarcyFactor, FrictionLaw, RelativeRoughness, ReynoldsNumber, darcy_factor, reynolds_number,
};
use hydraulics::line::{
    Grade, Line, LineError, LineSpec, LocalLoss, NozzleSet, NozzleTemplate, Point, Run, RunLoss,
    Solved, SuctionStretch, VapourMargin,
};
use hydraulics::nozzle::Nozzle;
use hydraulics::quantity::{GaugePressure, Head, PipeLength};
use hydraulics::water::Water;
use pipes::Pipe;
use uom::si::angle::degree;
use uom::si::f64::{Angle, Length, Velocity, VolumeRate};
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

/// The lowest pressure of the line and its place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Lowest {
    /// Gauge pressure on the axis.
    pub pressure: GaugePressure,
    /// Where.
    pub at: PipeLength,
}

/// The loss of one fitting, as figured.
#[derive(Debug, Clone, PartialEq)]
pub struct FittingLoss {
    /// The fitting; of a bend from the survey, its station.
    pub id: Id,
    /// Loss coefficient of all of them together, on the velocity in the pipe
    /// there.
    pub k: f64,
    /// Where the coefficient comes from.
    pub source: &'static str,
    /// Whether that was seen.
    pub seen: bool,
}

/// Everything stage 2 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Steady {
    /// The flow that passes with all jets open.
    pub flow: Figure<VolumeRate>,
    /// The grade line at that flow.
    pub grade: Figure<Grade>,
    /// Line and jets in balance, all jets open.
    pub solved: Figure<Solved>,
    /// Head lost in the branches.
    pub branch_loss: Figure<Head>,
    /// Head lost from forebay to nozzle, branches included.
    pub loss: Figure<Head>,
    /// The same as a share of gross head.
    pub loss_share: Figure<f64>,
    /// What each stretch loses.
    pub stretches: Vec<(Id, Figure<RunLoss>)>,
    /// What each fitting loses.
    pub fittings: Vec<(Id, Figure<FittingLoss>)>,
    /// What each bend from the survey loses, by its station.
    pub bends: Vec<(Id, Figure<FittingLoss>)>,
    /// The grade line at the same flow from the lowest forebay level, where
    /// one is entered: what the lowest pressures are read from.
    pub low: Figure<Grade>,
    /// The lowest pressure, from the lowest forebay level.
    pub lowest: Figure<Lowest>,
    /// Lengths below atmospheric pressure.
    pub suction: Figure<Vec<SuctionStretch>>,
    /// Margin above boiling at the lowest pressure, with water as warm as it
    /// gets.
    pub vapour: Figure<VapourMargin>,
    /// What was taken for granted here.
    pub assumptions: Vec<Assumption>,
    /// The line itself.
    pub(crate) line: Figure<Line>,
    /// Its nozzles, but for their bore.
    pub(crate) template: Figure<NozzleTemplate>,
}

/// What the line is made of, before its flow is known.
struct Parts<'a> {
    pipes: Vec<(&'a Stretch, &'a Pipe)>,
    water: Water,
}

/// Stage 2.
#[must_use]
pub fn steady(found: &Resolved) -> Steady {
    let mut assumptions = Vec::new();
    let parts = parts(found);
    let jets = found.jets.clone();
    // The flow the fittings' losses are first figured at: bends depend on the
    // pipe's friction factor, and that weakly on the flow.
    // Without one yet they are figured all the same; of a wrong one, not.
    let trial: Figure<Option<VolumeRate>> = match &found.design_flow {
        Ok(flow) => Ok(Some(*flow)),
        Err(Gap::Unsettled(_)) => Ok(None),
        Err(gap) => Err(gap.clone()),
    };
    let fittings: Vec<(Id, Figure<FittingLoss>)> = found
        .fittings
        .iter()
        .map(|f| {
            let loss = parts
                .clone_gap()
                .and_then(|p| fitting_loss(f, p, found, &trial));
            (f.id, loss)
        })
        .collect();
    let bends: Vec<(Id, Figure<FittingLoss>)> = found
        .turns
        .iter()
        .filter(|turn| !matches!(turn.made, Ok(Made::Taken | Made::ByHand(_))))
        .map(|turn| {
            let loss = parts
                .clone_gap()
                .and_then(|p| bend_loss(turn, p, found, &trial));
            (turn.station, loss)
        })
        .collect();
    let line = parts
        .clone_gap()
        .and_then(|p| line(found, p, &fittings, &bends));
    let branch = branch(found, &parts, &mut assumptions);
    let template = template(found, &branch);

    let solved = solve(found, &line, &template, &jets);
    let flow = match &solved {
        Ok(s) => Ok(s.grade.flow),
        Err(gap) => match jets.as_ref().map(|j| j.sizing) {
            Ok(BoreSizing::Chosen) => Err(gap.clone()),
            _ => found.design_flow.clone(),
        },
    };
    let grade = match &solved {
        Ok(s) => Ok(s.grade.clone()),
        // Where the jets cannot be solved, the line alone still has its grade
        // line at the flow that is to pass.
        Err(_) => line.clone().and_then(|l| {
            l.grade(flow.clone()?)
                .map_err(|why| Gap::Wrong(Trouble::Line(why)))
        }),
    };
    let branch_loss = branch_loss(&flow, &branch);
    let loss = grade
        .clone_gap()
        .and_then(|g| Ok(line_loss(g) + branch_loss.clone()?));
    let loss_share = loss
        .clone()
        .and_then(|loss| Ok(loss.m() / found.gross_head.clone()?.m()));
    let stretches = found
        .stretches
        .iter()
        .enumerate()
        .map(|(i, s)| {
            let run = grade.clone().and_then(|g| {
                g.runs
                    .get(i)
                    .copied()
                    .ok_or(Gap::Unsettled(Lack::Pipe(s.id)))
            });
            (s.id, run)
        })
        .collect();
    let low = match &solved {
        // Of a line that cannot pass the flow, the grade line is arithmetic only.
        Err(gap @ Gap::Wrong(Trouble::Line(LineError::FlowTooGreat { .. }))) => Err(gap.clone()),
        _ => low_grade(found, &line, &grade),
    };
    let lowest = low.clone_gap().and_then(lowest);
    let suction = low.clone_gap().map(Grade::below_atmosphere);
    let vapour = vapour(found, &low);
    Steady {
        flow,
        grade,
        solved,
        branch_loss,
        loss,
        loss_share,
        stretches,
        fittings,
        bends,
        low,
        lowest,
        suction,
        vapour,
        assumptions,
        line,
        template,
    }
}

fn parts(found: &Resolved) -> Figure<Parts<'_>> {
    let mut pipes = Vec::with_capacity(found.stretches.len());
    for stretch in &found.stretches {
        let pipe = stretch.pipe.clone_gap()?;
        pipes.push((stretch, &**pipe));
    }
    Ok(Parts {
        pipes,
        water: found.cold_water.clone()?,
    })
}

fn line(
    found: &Resolved,
    parts: &Parts<'_>,
    fittings: &[(Id, Figure<FittingLoss>)],
    bends: &[(Id, Figure<FittingLoss>)],
) -> Figure<Line> {
    let stations = found.profile.whole()?;
    let age = found.limits.clone()?.roughness;
    let mut runs = Vec::with_capacity(parts.pipes.len());
    for (stretch, pipe) in &parts.pipes {
        runs.push(Run {
            to: stretch.span.clone()?.to,
            bore: pipe.bore(),
            friction: FrictionLaw::ColebrookWhite {
                roughness: roughness(pipe, age),
            },
        });
    }
    let mut losses = Vec::with_capacity(fittings.len() + bends.len());
    let mut pieces = bends.iter().peekable();
    for turn in &found.turns {
        // The bends are a part of the turns, in their order.
        let Some((_, loss)) = pieces.next_if(|(station, _)| *station == turn.station) else {
            continue;
        };
        losses.push(LocalLoss {
            at: turn.at,
            k: LossCoefficient::new(loss.clone()?.k).map_err(|why| bend_trouble(turn, why))?,
            bore: bend_pipe(turn, parts)?.bore(),
        });
    }
    for (placed, (_, loss)) in found.fittings.iter().zip(fittings) {
        let loss = loss.clone()?;
        losses.push(LocalLoss {
            at: placed.at.clone()?,
            k: LossCoefficient::new(loss.k).map_err(|why| {
                Gap::Wrong(Trouble::Fitting {
                    fitting: placed.id,
                    why,
                })
            })?,
            bore: pipe_at(placed, parts)?.bore(),
        });
    }
    Line::new(LineSpec {
        forebay: found.forebay.normal.clone()?,
        points: stations
            .iter()
            .map(|s| Point {
                chainage: s.chainage,
                level: s.level,
            })
            .collect(),
        runs,
        losses,
        water: parts.water,
        gravity: standard_gravity(),
    })
    .map_err(|why| Gap::Wrong(Trouble::Line(why)))
}

/// The roughness losses are figured with.
#[must_use]
pub fn roughness(pipe: &Pipe, age: RoughnessAge) -> Length {
    match age {
        RoughnessAge::Aged => pipe.roughness_aged.value,
        RoughnessAge::New => pipe.roughness_new.value,
    }
}

fn pipe_at<'a>(placed: &PlacedFitting, parts: &Parts<'a>) -> Figure<&'a Pipe> {
    placed.at.clone()?;
    parts
        .pipes
        .iter()
        .find(|(s, _)| Some(s.id) == placed.stretch)
        .map(|(_, pipe)| *pipe)
        .ok_or(Gap::Wrong(Trouble::FittingStation { fitting: placed.id }))
}

fn fitting_loss(
    placed: &PlacedFitting,
    parts: &Parts<'_>,
    found: &Resolved,
    flow: &Figure<Option<VolumeRate>>,
) -> Figure<FittingLoss> {
    let pipe = pipe_at(placed, parts)?;
    let count = placed.count.clone()?;
    let wrong = |why| {
        Gap::Wrong(Trouble::Fitting {
            fitting: placed.id,
            why,
        })
    };
    let angle = Angle::new::<degree>;
    let loss = match (placed.kind, placed.shape.clone()?) {
        (_, Shape::Own { k }) => {
            let k = LossCoefficient::new(k).map_err(wrong)?.get();
            return Ok(FittingLoss {
                id: placed.id,
                k: k * f64::from(count),
                source: "entered by the user",
                seen: true,
            });
        }
        (_, Shape::Bend { angle_deg, radius }) => {
            let age = found.limits.clone()?.roughness;
            let factor = bend_factor(pipe, age, flow.clone()?, &parts.water);
            match factor {
                Some(f) => fittings::smooth_bend(angle(angle_deg), radius, f),
                None => Err(FittingError::Bore(pipe.bore())),
            }
        }
        (
            _,
            Shape::Rack {
                area_m2,
                bar_m,
                gap_m,
                angle_deg,
                clogged,
            },
        ) => TrashRack {
            // Square edges lose the most of all shapes of bar.
            shape: BarShape::Rectangular,
            bar: Length::new::<meter>(bar_m),
            gap: Length::new::<meter>(gap_m),
            inclination: angle(angle_deg),
            clogged_share: clogged,
        }
        .loss()
        .and_then(|loss| {
            // From the approach, over the rack's whole area, to the pipe.
            let circle = Length::new::<meter>((4.0 * area_m2 / std::f64::consts::PI).sqrt());
            Ok(fittings::Loss {
                k: loss.k.referred(circle, pipe.bore())?,
                ..loss
            })
        }),
        (_, Shape::Mitre { angle_deg }) => fittings::mitre_bend(angle(angle_deg), MitreWall::Rough),
        (kind, Shape::Valve { opening }) => valve_loss(kind, opening),
        (kind, Shape::Plain) => Ok(plain_loss(kind)),
    }
    .map_err(wrong)?;
    Ok(FittingLoss {
        id: placed.id,
        k: loss.k.get() * f64::from(count),
        source: loss.source,
        seen: loss.attested == fittings::Attested::Seen,
    })
}

fn bend_trouble(turn: &Turn, why: FittingError) -> Gap {
    Gap::Wrong(Trouble::Bend {
        station: turn.station,
        why,
    })
}

fn bend_pipe<'a>(turn: &Turn, parts: &Parts<'a>) -> Figure<&'a Pipe> {
    parts
        .pipes
        .iter()
        .find(|(s, _)| Some(s.id) == turn.stretch)
        .map(|(_, pipe)| *pipe)
        .ok_or_else(|| {
            // It lies in no stretch only where one has no place itself.
            let gap = parts.pipes.iter().find_map(|(s, _)| s.span.clone().err());
            gap.unwrap_or(Gap::Unsettled(Lack::Pipe(1)))
        })
}

/// The loss of a bend from the survey.
fn bend_loss(
    turn: &Turn,
    parts: &Parts<'_>,
    found: &Resolved,
    flow: &Figure<Option<VolumeRate>>,
) -> Figure<FittingLoss> {
    let made = turn.made.clone()?;
    let angle = Angle::new::<degree>(turn.deflection_deg.clone()?);
    let pipe = bend_pipe(turn, parts)?;
    let loss = match made {
        Made::Smooth { radius } => {
            let age = found.limits.clone()?.roughness;
            bend_factor(pipe, age, flow.clone()?, &parts.water)
                .ok_or(FittingError::Bore(pipe.bore()))
                .and_then(|f| fittings::smooth_bend(angle, radius, f))
        }
        _ => fittings::mitre_bend(angle, MitreWall::Rough),
    }
    .map_err(|why| bend_trouble(turn, why))?;
    Ok(FittingLoss {
        id: turn.station,
        k: loss.k.get(),
        source: loss.source,
        seen: loss.attested == fittings::Attested::Seen,
    })
}

/// Friction factor for a bend's loss: at the design flow, or, before there is
/// one, at 2 m/s.
fn bend_factor(
    pipe: &Pipe,
    age: RoughnessAge,
    flow: Option<VolumeRate>,
    water: &Water,
) -> Option<DarcyFactor> {
    let bore = pipe.bore();
    let area = bore * bore * (std::f64::consts::PI / 4.0);
    let velocity = flow.map_or_else(|| Velocity::new::<meter_per_second>(2.0), |q| q / area);
    let reynolds: ReynoldsNumber =
        reynolds_number(velocity, bore, water.kinematic_viscosity()).ok()?;
    Some(darcy_factor(
        reynolds,
        RelativeRoughness::of(roughness(pipe, age), bore).ok()?,
    ))
}

fn valve_loss(kind: FittingKind, opening: f64) -> Result<fittings::Loss, FittingError> {
    let fully_open = opening >= 1.0;
    // A quarter turn from open to shut.
    let turned = Angle::new::<degree>((1.0 - opening) * 90.0);
    match kind {
        FittingKind::GateValve if fully_open => Ok(fittings::open_valve(OpenValve::GateResilient)),
        FittingKind::BallValve if fully_open => Ok(fittings::open_valve(OpenValve::Ball)),
        FittingKind::ButterflyValve if fully_open => {
            Ok(fittings::open_valve(OpenValve::ButterflyHeavy))
        }
        FittingKind::BallValve => fittings::valve(ValveOpening::Ball { turned }),
        FittingKind::ButterflyValve => fittings::valve(ValveOpening::Butterfly { turned }),
        _ => fittings::valve(ValveOpening::Gate {
            open_share: opening,
        }),
    }
}

fn plain_loss(kind: FittingKind) -> fittings::Loss {
    match kind {
        FittingKind::EntranceProjecting => fittings::entrance(Entrance::Projecting),
        FittingKind::EntranceRounded => fittings::entrance(Entrance::Rounded),
        FittingKind::EntranceBellmouth => fittings::entrance(Entrance::Bellmouth),
        FittingKind::TeeRun => fittings::tee(Tee::Line),
        FittingKind::TeeBranch => fittings::tee(Tee::BranchCautious),
        _ => fittings::entrance(Entrance::SharpFlush),
    }
}

/// The branches that lead to the nozzles.
#[derive(Debug, Clone, Copy)]
struct Branch {
    count: u32,
    k: f64,
    bore: Length,
}

fn branch(
    found: &Resolved,
    parts: &Figure<Parts<'_>>,
    assumptions: &mut Vec<Assumption>,
) -> Figure<Branch> {
    let jets = found.jets.clone()?;
    let bore = match jets.branch_bore {
        Some(bore) => bore,
        None => {
            let last = parts.clone_gap()?.pipes.last().map(|(_, pipe)| pipe.bore());
            let bore = last.ok_or(Gap::Unsettled(Lack::Pipe(1)))?;
            assumptions.push(Assumption::BranchBoreOfLastStretch(bore));
            bore
        }
    };
    Ok(Branch {
        count: jets.count,
        k: jets.branch_k,
        bore,
    })
}

fn template(found: &Resolved, branch: &Figure<Branch>) -> Figure<NozzleTemplate> {
    let jets = found.jets.clone()?;
    let branch = branch.clone()?;
    Ok(NozzleTemplate {
        count: branch.count as usize,
        velocity_coefficient: jets.velocity_coefficient,
        contraction_coefficient: jets.contraction,
        axis: found.jet_axis.clone()?,
        branch_k: branch.k,
        branch_bore: branch.bore,
    })
}

fn solve(
    found: &Resolved,
    line: &Figure<Line>,
    template: &Figure<NozzleTemplate>,
    jets: &Figure<JetSpec>,
) -> Figure<Solved> {
    found.gross_head.clone()?;
    let jets = jets.clone()?;
    match jets.sizing {
        BoreSizing::Solved => {
            let flow = found.design_flow.clone()?;
            line.clone_gap()?
                .bore_for(flow, template.clone_gap()?)
                .map_err(|why| Gap::Wrong(Trouble::Line(why)))
        }
        BoreSizing::Chosen => {
            let bore = jets.bore.clone()?;
            let set = set_of(template.clone_gap()?, bore, jets.count)?;
            line.clone_gap()?
                .flow_for(&set)
                .map_err(|why| Gap::Wrong(Trouble::Line(why)))
        }
    }
}

pub(crate) fn set_of(template: &NozzleTemplate, bore: Length, open: u32) -> Figure<NozzleSet> {
    let nozzle = Nozzle::new(
        bore,
        template.velocity_coefficient,
        template.contraction_coefficient,
    )
    .map_err(|why| Gap::Wrong(Trouble::Nozzle(why)))?;
    Ok(NozzleSet {
        nozzles: vec![nozzle; open as usize],
        axis: template.axis,
        branch_k: template.branch_k,
        branch_bore: template.branch_bore,
    })
}

pub(crate) fn line_loss(grade: &Grade) -> Head {
    grade.friction_loss + grade.local_loss
}

/// Loss of each branch, at its share of the flow: figured apart from the
/// jets, so that a pipe too narrow for the flow still shows what it would lose.
fn branch_loss(flow: &Figure<VolumeRate>, branch: &Figure<Branch>) -> Figure<Head> {
    let branch = branch.clone()?;
    let area = branch.bore * branch.bore * (std::f64::consts::PI / 4.0);
    let velocity: Velocity = flow.clone()? / f64::from(branch.count) / area;
    LossCoefficient::new(branch.k)
        .map(|k| k.head(velocity, standard_gravity()))
        .map_err(|_| Gap::needs(Field::BranchK))
}

fn low_grade(found: &Resolved, line: &Figure<Line>, grade: &Figure<Grade>) -> Figure<Grade> {
    let grade = grade.clone_gap()?;
    let Some(level) = found.forebay.lowest.clone()? else {
        return Ok(grade.clone());
    };
    let mut spec = line.clone_gap()?.spec().clone();
    spec.forebay = level;
    Line::new(spec)
        .and_then(|line| line.grade(grade.flow))
        .map_err(|why| Gap::Wrong(Trouble::Line(why)))
}

fn lowest(grade: &Grade) -> Figure<Lowest> {
    let node = grade
        .nodes
        .get(grade.lowest)
        .ok_or(Gap::needs(Field::StationLevel(1)))?;
    Ok(Lowest {
        pressure: node.pressure,
        at: node.chainage,
    })
}

fn vapour(found: &Resolved, grade: &Figure<Grade>) -> Figure<VapourMargin> {
    let atmosphere = found.atmosphere.clone()?;
    let water = found.warmest_known_water()?;
    grade
        .clone_gap()?
        .vapour_margin(atmosphere, &water, standard_gravity())
        .ok_or(Gap::needs(Field::StationLevel(1)))
}
