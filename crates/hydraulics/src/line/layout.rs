//! A checked line, cut into steps between the places where something changes.

use super::spec::{LineError, LineSpec};
use crate::fittings::{LossCoefficient, sudden_contraction, sudden_expansion};
use crate::friction::{Friction, FrictionLaw};
use crate::math;
use crate::quantity::{Head, Length, Level, PipeLength, VolumeRate};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::length::meter;
use uom::si::volume_rate::cubic_meter_per_second;

/// Places nearer to each other than this are one place, m: far below what is
/// surveyed, far above rounding.
const SAME_PLACE_M: f64 = 1e-6;

/// A line that can be computed.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    pub(super) spec: LineSpec,
    pub(super) gravity: f64,
    pub(super) runs: Vec<RunLayout>,
    pub(super) start: Place,
    pub(super) steps: Vec<Step>,
}

/// A run in SI numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct RunLayout {
    pub(crate) from: f64,
    pub(crate) to: f64,
    pub(crate) bore: f64,
    pub(crate) area: f64,
    pub(super) law: FrictionLaw,
    /// Head lost locally in the run over flow squared, s2/m5.
    pub(super) local: f64,
    /// Head lost in the change of bore at its end over flow squared, s2/m5.
    pub(super) reducer: f64,
}

/// Where a node lies.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Place {
    pub(super) chainage: f64,
    pub(super) level: f64,
    pub(super) run: usize,
    pub(super) point: Option<usize>,
}

/// What happens between one node and the next.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Step {
    pub(super) kind: StepKind,
    /// Where the node after it lies.
    pub(super) end: Place,
}

/// Ways to lose head.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) enum StepKind {
    /// A length of pipe, m.
    Pipe(f64),
    /// Something that loses head by the square of the flow, s2/m5.
    Local(f64),
}

impl Line {
    /// Checks the parts and lays them out.
    ///
    /// # Errors
    /// The first part that cannot be used, by its index, with its values.
    ///
    /// # Example
    /// ```
    /// use hydraulics::constants::standard_gravity;
    /// use hydraulics::friction::FrictionLaw;
    /// use hydraulics::line::{Line, LineSpec, Point, Run};
    /// use hydraulics::quantity::{Length, Level, PipeLength, ThermodynamicTemperature, VolumeRate, unit};
    /// use hydraulics::water::Water;
    ///
    /// let millimetres = Length::new::<unit::length::millimeter>;
    /// let celsius = ThermodynamicTemperature::new::<unit::thermodynamic_temperature::degree_celsius>;
    /// let line = Line::new(LineSpec {
    ///     forebay: Level::from_m(160.0),
    ///     points: vec![
    ///         Point { chainage: PipeLength::from_m(0.0), level: Level::from_m(158.0) },
    ///         Point { chainage: PipeLength::from_m(400.0), level: Level::from_m(100.0) },
    ///     ],
    ///     runs: vec![Run {
    ///         to: PipeLength::from_m(400.0),
    ///         bore: millimetres(150.0),
    ///         friction: FrictionLaw::ColebrookWhite { roughness: millimetres(0.05) },
    ///     }],
    ///     losses: vec![],
    ///     water: Water::at(celsius(10.0))?,
    ///     gravity: standard_gravity(),
    /// })?;
    /// let grade = line.grade(VolumeRate::new::<unit::volume_rate::liter_per_second>(25.0))?;
    /// assert!((grade.friction_loss.m() - 4.95).abs() < 0.05);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn new(spec: LineSpec) -> Result<Self, LineError> {
        check_points(&spec)?;
        let gravity = spec.gravity.get::<meter_per_second_squared>();
        if !(gravity > 0.0 && gravity.is_finite()) {
            return Err(LineError::Gravity(spec.gravity));
        }
        let mut runs = lay_out_runs(&spec)?;
        let changes = reducers(&spec, gravity, &mut runs)?;
        let losses = lay_out_losses(&spec, gravity, &mut runs)?;
        let (start, steps) = lay_out_steps(&spec, &runs, &changes, &losses);
        Ok(Self {
            spec,
            gravity,
            runs,
            start,
            steps,
        })
    }

    /// The parts the line was made from.
    #[must_use]
    pub fn spec(&self) -> &LineSpec {
        &self.spec
    }

    /// Length of pipe.
    #[must_use]
    pub fn length(&self) -> PipeLength {
        let last = self.runs.last().map_or(0.0, |run| run.to);
        PipeLength::from_m(last - self.start.chainage)
    }

    /// Head lost from the forebay to the foot at a given flow: what
    /// [`Line::grade`] adds up, without its nodes.
    ///
    /// # Errors
    /// [`LineError::Flow`] for a negative flow,
    /// [`LineError::LossBeyondCounting`] for an absurd one.
    pub fn head_loss(&self, flow: VolumeRate) -> Result<Head, LineError> {
        let q = flow.get::<cubic_meter_per_second>();
        if !(q >= 0.0 && q.is_finite()) {
            return Err(LineError::Flow(flow));
        }
        let lost = self.head_lost(q);
        if lost.is_finite() {
            Ok(Head::from_m(lost))
        } else {
            Err(LineError::LossBeyondCounting(flow))
        }
    }

    /// The runs in SI numbers, for the transient solver.
    pub(crate) fn run_layouts(&self) -> &[RunLayout] {
        &self.runs
    }

    /// Acceleration of free fall, m/s2.
    pub(crate) fn gravity_si(&self) -> f64 {
        self.gravity
    }

    /// Chainage of every local loss and change of bore, m, with head over flow
    /// squared, s2/m5, from the inlet to the foot.
    pub(crate) fn local_layouts(&self) -> impl Iterator<Item = (f64, f64)> {
        self.steps.iter().filter_map(|step| match step.kind {
            StepKind::Local(coefficient) => Some((step.end.chainage, coefficient)),
            StepKind::Pipe(_) => None,
        })
    }

    /// Level of the pipe's axis at a chainage within the line, m.
    pub(crate) fn level_si(&self, chainage: f64) -> f64 {
        level_at(&self.spec, chainage, None)
    }

    /// Head lost per length in a run, flow in m3/s from zero up.
    pub(crate) fn gradient_si(&self, run: &RunLayout, flow: f64) -> f64 {
        self.run_friction(run, flow).gradient
    }

    /// Friction in a run, flow in m3/s.
    pub(super) fn run_friction(&self, run: &RunLayout, flow: f64) -> Friction {
        let velocity = flow / run.area;
        let reynolds = velocity * run.bore / self.spec.water.kinematic_viscosity_si();
        run.law
            .friction_si(velocity, run.bore, reynolds, self.gravity)
    }

    /// Head lost from the forebay to the foot, m, flow in m3/s.
    pub(super) fn head_lost(&self, flow: f64) -> f64 {
        self.runs
            .iter()
            .map(|run| {
                self.run_friction(run, flow).gradient * (run.to - run.from)
                    + (run.local + run.reducer) * flow * flow
            })
            .sum()
    }
}

/// Whether two chainages are one place.
fn same(a: f64, b: f64) -> bool {
    (a - b).abs() <= SAME_PLACE_M
}

fn check_points(spec: &LineSpec) -> Result<(), LineError> {
    if !spec.forebay.m().is_finite() {
        return Err(LineError::Forebay(spec.forebay));
    }
    if spec.points.len() < 2 {
        return Err(LineError::TooFewPoints {
            count: spec.points.len(),
        });
    }
    for (point, value) in spec.points.iter().enumerate() {
        if !(value.chainage.m().is_finite() && value.level.m().is_finite()) {
            return Err(LineError::PointNotFinite {
                point,
                value: *value,
            });
        }
    }
    for (before, (a, b)) in spec
        .points
        .iter()
        .zip(spec.points.iter().skip(1))
        .enumerate()
    {
        let length = b.chainage - a.chainage;
        if length.m() <= SAME_PLACE_M {
            return Err(LineError::ChainageNotRising {
                point: before + 1,
                before: a.chainage,
                chainage: b.chainage,
            });
        }
        let rise = b.level - a.level;
        // A vertical pipe may come out longer or shorter by rounding.
        if rise.m().abs() > length.m() * (1.0 + 1e-9) + SAME_PLACE_M {
            return Err(LineError::SteeperThanVertical {
                point: before + 1,
                rise,
                length,
            });
        }
    }
    Ok(())
}

fn lay_out_runs(spec: &LineSpec) -> Result<Vec<RunLayout>, LineError> {
    let (Some(first), Some(last)) = (spec.points.first(), spec.points.last()) else {
        return Err(LineError::TooFewPoints { count: 0 });
    };
    let mut from = first.chainage;
    let mut runs = Vec::with_capacity(spec.runs.len());
    for (index, run) in spec.runs.iter().enumerate() {
        let rising = (run.to - from).m() > SAME_PLACE_M;
        if !(rising && run.to.m().is_finite()) {
            return Err(LineError::RunNotRising {
                run: index,
                from,
                to: run.to,
            });
        }
        run.friction
            .check(run.bore)
            .map_err(|error| LineError::Run { run: index, error })?;
        let bore = run.bore.get::<meter>();
        runs.push(RunLayout {
            from: from.m(),
            to: run.to.m(),
            bore,
            area: math::PI * bore * bore / 4.0,
            law: run.friction,
            local: 0.0,
            reducer: 0.0,
        });
        from = run.to;
    }
    if runs.is_empty() {
        return Err(LineError::NoRun);
    }
    if !same(from.m(), last.chainage.m()) {
        return Err(LineError::RunsEndElsewhere {
            runs: from,
            points: last.chainage,
        });
    }
    Ok(runs)
}

/// Head over flow squared of a coefficient on the velocity in a bore.
fn per_flow_squared(k: LossCoefficient, bore: f64, gravity: f64) -> f64 {
    let area = math::PI * bore * bore / 4.0;
    k.get() / (2.0 * gravity * area * area)
}

/// The loss at the end of every run where the bore changes; `None` where it
/// does not.
fn reducers(
    spec: &LineSpec,
    gravity: f64,
    runs: &mut [RunLayout],
) -> Result<Vec<Option<f64>>, LineError> {
    let bores: Vec<Length> = spec.runs.iter().map(|run| run.bore).collect();
    let mut changes = vec![None; runs.len()];
    for (index, (before, after)) in bores.iter().zip(bores.iter().skip(1)).enumerate() {
        let (wide, narrow) = (before.get::<meter>(), after.get::<meter>());
        let found = if wide > narrow {
            sudden_contraction(*before, *after).map(|loss| (loss, narrow))
        } else if wide < narrow {
            sudden_expansion(*before, *after).map(|loss| (loss, wide))
        } else {
            continue;
        };
        let (loss, bore) = found.map_err(|error| LineError::Reducer { run: index, error })?;
        let coefficient = per_flow_squared(loss.k, bore, gravity);
        if let (Some(change), Some(run)) = (changes.get_mut(index), runs.get_mut(index)) {
            *change = Some(coefficient);
            run.reducer = coefficient;
        }
    }
    Ok(changes)
}

/// Local losses as (chainage, head over flow squared), sorted by chainage.
fn lay_out_losses(
    spec: &LineSpec,
    gravity: f64,
    runs: &mut [RunLayout],
) -> Result<Vec<(f64, f64)>, LineError> {
    let start = runs.first().map_or(0.0, |run| run.from);
    let end = runs.last().map_or(0.0, |run| run.to);
    let mut losses = Vec::with_capacity(spec.losses.len());
    for (index, loss) in spec.losses.iter().enumerate() {
        let at = loss.at.m();
        if !(at >= start - SAME_PLACE_M && at <= end + SAME_PLACE_M) {
            return Err(LineError::LossOutside {
                loss: index,
                at: loss.at,
            });
        }
        let bore = loss.bore.get::<meter>();
        let coefficient = per_flow_squared(loss.k, bore, gravity);
        if !(bore > 0.0 && bore.is_finite() && coefficient.is_finite()) {
            return Err(LineError::LossBore {
                loss: index,
                bore: loss.bore,
            });
        }
        if let Some(run) = runs.iter_mut().find(|run| at <= run.to + SAME_PLACE_M) {
            run.local += coefficient;
        }
        losses.push((at, coefficient));
    }
    losses.sort_by(|a, b| a.0.total_cmp(&b.0));
    Ok(losses)
}

/// The start and the steps, from the inlet to the foot.
fn lay_out_steps(
    spec: &LineSpec,
    runs: &[RunLayout],
    changes: &[Option<f64>],
    losses: &[(f64, f64)],
) -> (Place, Vec<Step>) {
    // Points first, so that of places that are one the surveyed one stays.
    let mut chainages: Vec<(f64, Option<usize>)> = spec
        .points
        .iter()
        .enumerate()
        .map(|(index, point)| (point.chainage.m(), Some(index)))
        .collect();
    let mut others: Vec<f64> = runs
        .iter()
        .map(|run| run.to)
        .chain(losses.iter().map(|loss| loss.0))
        .collect();
    others.sort_by(f64::total_cmp);
    for other in others {
        // Surveyed points rise, and so do the places added behind them.
        let near = spec
            .points
            .partition_point(|point| point.chainage.m() < other - SAME_PLACE_M);
        let surveyed = spec
            .points
            .get(near)
            .is_some_and(|point| same(point.chainage.m(), other));
        let added = chainages
            .last()
            .is_some_and(|(at, point)| point.is_none() && same(*at, other));
        if !surveyed && !added {
            chainages.push((other, None));
        }
    }
    chainages.sort_by(|a, b| a.0.total_cmp(&b.0));

    let mut run = 0;
    let mut steps = Vec::new();
    let mut start: Option<Place> = None;
    let mut last = 0.0;
    let mut losses = losses.iter().peekable();
    for (chainage, point) in chainages {
        let mut place = Place {
            chainage,
            level: level_at(spec, chainage, point),
            run,
            point,
        };
        if start.is_none() {
            start = Some(place);
        } else {
            steps.push(Step {
                kind: StepKind::Pipe(chainage - last),
                end: place,
            });
        }
        while let Some((_, coefficient)) = losses.next_if(|(at, _)| *at <= chainage + SAME_PLACE_M)
        {
            steps.push(Step {
                kind: StepKind::Local(*coefficient),
                end: place,
            });
        }
        let ends = runs.get(run).is_some_and(|run| same(run.to, chainage));
        if ends && run + 1 < runs.len() {
            let change = changes.get(run).copied().flatten();
            run += 1;
            place.run = run;
            if let Some(coefficient) = change {
                steps.push(Step {
                    kind: StepKind::Local(coefficient),
                    end: place,
                });
            }
        }
        last = chainage;
    }
    let start = start.unwrap_or(Place {
        chainage: 0.0,
        level: 0.0,
        run: 0,
        point: None,
    });
    (start, steps)
}

/// Level of the axis at a chainage.
fn level_at(spec: &LineSpec, chainage: f64, point: Option<usize>) -> f64 {
    if let Some(point) = point.and_then(|index| spec.points.get(index)) {
        return point.level.m();
    }
    let after = spec
        .points
        .partition_point(|point| point.chainage.m() < chainage)
        .clamp(1, spec.points.len() - 1);
    match (spec.points.get(after - 1), spec.points.get(after)) {
        (Some(a), Some(b)) => {
            let share = (chainage - a.chainage.m()) / (b.chainage - a.chainage).m();
            let rise: Head = b.level - a.level;
            let level: Level = a.level + rise * share;
            level.m()
        }
        _ => f64::NAN,
    }
}
