//! The steady start, laid on the grid.

use super::error::TransientError;
use super::friction::{FrictionModel, Table, brunone_coefficient};
use super::grid::{Grid, count, nearest};
use super::joint::Joint;
use super::kernel::{Friction, MILD};
use super::surge_line::SurgeLine;
use crate::line::{RunLayout, Solved};
use crate::quantity::VolumeRate;
use std::collections::BTreeMap;
use uom::si::volume_rate::cubic_meter_per_second;

/// Places nearer than this are one place, m.
const SAME_PLACE_M: f64 = 1e-6;

/// Equal cells of one run between two joints.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Reach {
    /// Index of the run.
    pub(super) run: usize,
    /// Index of its first node; the last is `first + cells`.
    pub(super) first: usize,
    pub(super) cells: usize,
    /// Impedance a/(g A), s/m2.
    pub(super) b: f64,
    /// Half a cell's friction, s2/m5.
    pub(super) half: f64,
    /// Half of k where friction is D/(1 + k|D|), 1/m.
    pub(super) half_k: f64,
    /// Friction of the fast kernel.
    pub(super) kernel: Friction,
    /// Twice the velocity head over (P - M)^2, 1/m.
    pub(super) curve: f64,
    /// Velocity head over flow squared, s2/m5.
    pub(super) velocity_head: f64,
    /// Length of a cell, m.
    pub(super) dx: f64,
    pub(super) area: f64,
    /// Wave speed on the grid, m/s.
    pub(super) wave_speed: f64,
    /// k dx/(2 g A) of unsteady friction, s2/m2; 0 without.
    pub(super) unsteady: f64,
    /// Friction that follows the flow.
    pub(super) table: Option<Table>,
}

/// A steady start on a grid, ready to run any event that begins there.
#[derive(Debug, Clone, PartialEq)]
pub struct Model {
    pub(super) line: SurgeLine,
    pub(super) grid: Grid,
    pub(super) strokes: Vec<f64>,
    pub(super) steady: Option<Solved>,
    /// Flow at the start, m3/s.
    pub(super) flow: f64,
    pub(super) reaches: Vec<Reach>,
    /// One more than reaches: the first at the forebay, the last at the foot.
    pub(super) joints: Vec<Joint>,
    pub(super) chainages: Vec<f64>,
    pub(super) levels: Vec<f64>,
    /// Level above the axis plus vapour head: the lowest grade a node bears. A
    /// high point between nodes counts for the nearer.
    pub(super) floors: Vec<f64>,
    /// Energy head above the axis at the start.
    pub(super) energies: Vec<f64>,
    /// Forebay above the axis, m.
    pub(super) forebay: f64,
    /// Level of the axis, m.
    pub(super) axis: f64,
    /// Vapour pressure less the atmosphere's, as a head, m.
    pub(super) vapour: f64,
    pub(super) friction: FrictionModel,
    /// Chainage and level of inlet and foot, m.
    pub(super) ends: ((f64, f64), (f64, f64)),
    /// Index of the last run.
    pub(super) last_run: usize,
    /// Velocity head at the foot over flow squared, s2/m5.
    pub(super) foot_velocity_head: f64,
}

impl Model {
    /// Most steps of one run.
    pub const MOST_STEPS: f64 = 5e7;

    /// Lays the steady state at the given strokes on the grid.
    ///
    /// # Errors
    /// What [`SurgeLine::steady`] refuses; [`TransientError::GridOfAnotherLine`],
    /// [`TransientError::GridTooCoarse`].
    pub fn new(
        line: &SurgeLine,
        grid: &Grid,
        strokes: &[f64],
        friction: FrictionModel,
    ) -> Result<Self, TransientError> {
        if !grid.fits(line) {
            return Err(TransientError::GridOfAnotherLine);
        }
        let steady = line.steady(strokes)?;
        let flow = steady.as_ref().map_or(0.0, start_flow);
        // From shut, the factor is that of the flow it may come to.
        let reference = if flow > 0.0 {
            flow
        } else {
            line.steady(&vec![1.0; line.jets()])?
                .as_ref()
                .map_or(0.0, start_flow)
        };
        let axis = line.spec().foot.nozzles.axis.m();
        let pipe = &line.spec().line;
        let runs = pipe.run_layouts();
        let inlet = runs.first().map_or(0.0, |run| run.from);
        let foot = runs.last().map_or(0.0, |run| run.to);
        let foot_area = runs.last().map_or(1.0, |run| run.area);
        let mut model = Self {
            line: line.clone(),
            grid: grid.clone(),
            strokes: strokes.to_vec(),
            steady,
            flow,
            reaches: Vec::new(),
            joints: Vec::new(),
            chainages: Vec::new(),
            levels: Vec::new(),
            floors: Vec::new(),
            energies: Vec::new(),
            forebay: pipe.spec().forebay.m() - axis,
            axis,
            vapour: line.vapour_and_air().0,
            friction,
            ends: ((inlet, pipe.level_si(inlet)), (foot, pipe.level_si(foot))),
            last_run: runs.len() - 1,
            foot_velocity_head: 1.0 / (2.0 * pipe.gravity_si() * foot_area * foot_area),
        };
        model.lay_reaches(reference)?;
        model.lay_nodes();
        Ok(model)
    }

    /// The strokes of the start.
    #[must_use]
    pub fn strokes(&self) -> &[f64] {
        &self.strokes
    }

    /// The steady state of the start; `None` when all nozzles are shut.
    #[must_use]
    pub fn steady(&self) -> Option<&Solved> {
        self.steady.as_ref()
    }

    /// Flow at the start.
    #[must_use]
    pub fn flow(&self) -> VolumeRate {
        VolumeRate::new::<cubic_meter_per_second>(self.flow)
    }

    /// The grid.
    #[must_use]
    pub fn grid(&self) -> &Grid {
        &self.grid
    }

    /// The line.
    #[must_use]
    pub fn line(&self) -> &SurgeLine {
        &self.line
    }

    fn lay_reaches(&mut self, reference: f64) -> Result<(), TransientError> {
        let line = self.line.spec().line.clone();
        let gravity = line.gravity_si();
        let locals: Vec<(f64, f64)> = line.local_layouts().collect();
        let sum = |inside: &dyn Fn(f64) -> bool| -> f64 {
            locals
                .iter()
                .filter(|(at, _)| inside(*at))
                .map(|(_, loss)| loss)
                .sum()
        };
        let start = line.run_layouts().first().map_or(0.0, |run| run.from);
        let mut joint = Joint {
            loss: sum(&|at| at <= start + SAME_PLACE_M),
            inertia: 0.0,
        };
        for (index, (run, stretch)) in line
            .run_layouts()
            .iter()
            .zip(self.grid.clone().stretches())
            .enumerate()
        {
            let (from, to) = (run.from + SAME_PLACE_M, run.to - SAME_PLACE_M);
            let at_end = sum(&|at| at >= to && at <= run.to + SAME_PLACE_M);
            let per_length = line.gradient_si(run, reference) / (reference * reference);
            if stretch.is_lumped() {
                let length = run.to - run.from;
                joint.loss += sum(&|at| at > from && at < to) + per_length * length + at_end;
                joint.inertia += length / (gravity * run.area);
                continue;
            }
            let dx = (run.to - run.from) / count(stretch.cells);
            let mut splits: BTreeMap<usize, f64> = BTreeMap::new();
            for (at, loss) in locals.iter().filter(|(at, _)| *at > from && *at < to) {
                *splits.entry(nearest((at - run.from) / dx)).or_insert(0.0) += loss;
            }
            joint.loss += splits.remove(&0).unwrap_or(0.0);
            let after = splits.remove(&stretch.cells).unwrap_or(0.0) + at_end;
            let whole = self.whole_run(
                index,
                run,
                stretch.wave_speed_si(),
                dx,
                per_length,
                reference,
            )?;
            let mut done = 0;
            for (node, loss) in splits {
                self.push(joint, &whole, node - done);
                joint = Joint { loss, inertia: 0.0 };
                done = node;
            }
            self.push(joint, &whole, stretch.cells - done);
            joint = Joint {
                loss: after,
                inertia: 0.0,
            };
        }
        self.joints.push(joint);
        Ok(())
    }

    fn push(&mut self, joint: Joint, whole: &Reach, cells: usize) {
        let first = self
            .reaches
            .last()
            .map_or(0, |reach| reach.first + reach.cells + 1);
        self.joints.push(joint);
        self.reaches.push(Reach {
            first,
            cells,
            // The half cells at the ends carry no unsteady friction: what is
            // theirs goes to the nodes within.
            unsteady: if cells > 1 {
                whole.unsteady * count(cells) / count(cells - 1)
            } else {
                0.0
            },
            ..whole.clone()
        });
    }

    /// A reach that fills a run, but for where it lies.
    fn whole_run(
        &self,
        index: usize,
        run: &RunLayout,
        wave_speed: f64,
        dx: f64,
        per_length: f64,
        reference: f64,
    ) -> Result<Reach, TransientError> {
        let line = &self.line.spec().line;
        let gravity = line.gravity_si();
        let b = wave_speed / (gravity * run.area);
        let half = 0.5 * per_length * dx;
        // Friction in half a cell against what the wave could stop.
        if half * reference > 0.25 * b {
            return Err(TransientError::GridTooCoarse { run: index });
        }
        let velocity_head = 1.0 / (2.0 * gravity * run.area * run.area);
        // D of the flow of reference, arriving and leaving, over the flow.
        let (arriving, leaving) = (b + half * reference, b - half * reference);
        let half_k = half / (arriving * leaving);
        let reynolds = reference / run.area * run.bore / line.spec().water.kinematic_viscosity_si();
        Ok(Reach {
            run: index,
            first: 0,
            cells: 0,
            b,
            half,
            half_k,
            kernel: kernel(half_k, arriving * reference),
            curve: 0.5 * velocity_head / (arriving * arriving),
            velocity_head,
            dx,
            area: run.area,
            wave_speed,
            unsteady: if self.friction.unsteady {
                brunone_coefficient(reynolds) * dx / (2.0 * gravity * run.area)
            } else {
                0.0
            },
            table: self
                .friction
                .by_reynolds
                .then(|| Table::new(line, run, dx, b, reference)),
        })
    }

    fn lay_nodes(&mut self) {
        let line = self.line.spec().line.clone();
        let vapour = self.vapour;
        let q = self.flow;
        let mut energy = self.forebay;
        for (joint, reach) in self.joints.iter().zip(&self.reaches) {
            energy -= joint.loss * q * q;
            let run = line.run_layouts().get(reach.run);
            let run_from = run.map_or(0.0, |run| run.from);
            let from = self.chainages.last().map_or(run_from, |last| {
                if *last > run_from { *last } else { run_from }
            });
            for node in 0..=reach.cells {
                let at = from + count(node) * reach.dx;
                let level = line.level_si(at);
                self.chainages.push(at);
                self.levels.push(level);
                self.floors.push(level - self.axis + vapour);
                self.energies
                    .push(energy - 2.0 * reach.half * q * q * count(node));
            }
            energy -= 2.0 * reach.half * q * q * count(reach.cells);
        }
        self.raise_floors();
    }

    /// A surveyed point that stands above the straight line between the nodes
    /// beside it raises the floor of the nearer one by as much.
    fn raise_floors(&mut self) {
        for point in &self.line.spec().line.spec().points {
            let at = point.chainage.m();
            let after = self.chainages.partition_point(|node| *node < at);
            let Some(before) = after.checked_sub(1) else {
                continue;
            };
            let (Some(from), Some(to)) = (self.chainages.get(before), self.chainages.get(after))
            else {
                continue;
            };
            if to <= from {
                continue;
            }
            let share = (at - from) / (to - from);
            let chord = self.levels[before] + share * (self.levels[after] - self.levels[before]);
            let above = point.level.m() - chord;
            let nearer = if share < 0.5 { before } else { after };
            let raised = self.levels[nearer] + above - self.axis + self.vapour;
            if raised > self.floors[nearer] {
                self.floors[nearer] = raised;
            }
        }
    }
}

/// Friction of the fast kernel that takes as much as D/(1 + k|D|) at D0.
fn kernel(half_k: f64, d0: f64) -> Friction {
    let strength = 2.0 * half_k * d0;
    let mild = strength <= MILD;
    // u (1 - u) = strength/(1 + strength).
    let share = strength / (1.0 + strength);
    let u = 2.0 * share / (1.0 + (1.0 - 4.0 * share).sqrt());
    Friction {
        half_k: if mild && strength > 0.0 {
            half_k * u / strength
        } else {
            half_k
        },
        mild,
    }
}

/// Flow of a steady state, m3/s.
fn start_flow(solved: &Solved) -> f64 {
    solved.grade.flow.get::<cubic_meter_per_second>()
}
