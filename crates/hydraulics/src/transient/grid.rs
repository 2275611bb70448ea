//! Time step and cells.

use super::error::TransientError;
use super::surge_line::SurgeLine;
use crate::quantity::{Time, Velocity};
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

/// Time steps tried between one count of cells and a quarter more.
const TRIES: u32 = 200;

/// What a grid must keep to.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GridSpec {
    /// Cells wished over the whole line, at least 2. The grid has about this
    /// many; more where the next two ask for it.
    pub cells: usize,
    /// Greatest share by which a wave speed may be altered so that a whole
    /// number of cells fits its run; above 0, at most 0.5.
    pub alteration: f64,
    /// Greatest share of the line's travel time that may be lumped, all
    /// lumped runs together; from 0, at most 0.5.
    pub lumped: f64,
}

impl Default for GridSpec {
    /// 100 cells, 1 % of wave speed, 2 % of travel time.
    fn default() -> Self {
        Self {
            cells: 100,
            alteration: 0.01,
            lumped: 0.02,
        }
    }
}

impl GridSpec {
    /// A coarse grid for sweeps: 32 cells, 5 % of wave speed, 5 % of travel
    /// time.
    #[must_use]
    pub fn coarse() -> Self {
        Self {
            cells: 32,
            alteration: 0.05,
            lumped: 0.05,
        }
    }
}

/// How one run lies on the grid.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StretchGrid {
    /// Cells; 0 for a run that is lumped.
    pub cells: usize,
    /// Wave speed on the grid; of a lumped run its own, which is not used.
    pub wave_speed: Velocity,
    /// Wave speed on the grid over its own, less 1; 0 for a lumped run.
    pub alteration: f64,
    /// Share of the line's travel time that this run takes.
    pub travel_share: f64,
}

impl StretchGrid {
    /// Whether the run is lumped: it counts with its inertia and its losses,
    /// without its give.
    #[must_use]
    pub fn is_lumped(&self) -> bool {
        self.cells == 0
    }
}

/// Time step and cells of every run.
///
/// Every cell is as long as a wave runs in one step: the Courant number is 1
/// everywhere, by construction, so that nothing is interpolated. What does not
/// fit is altered or lumped, and said:
///
/// - the wave speed of a run is altered so that its length is a whole number
///   of cells; length, area, friction and inertia stay;
/// - a run that would be altered by more than the allowed share, and is so
///   short that it fits into the allowed share of the line's travel time, is
///   lumped: rigid, with its inertia l/(g A) and its losses at the joint where
///   it lies. The shortest are taken first;
/// - where neither will do, the grid is made finer;
/// - a local loss within a run lies at the nearest node, at most half a cell
///   away.
#[derive(Debug, Clone, PartialEq)]
pub struct Grid {
    step: f64,
    stretches: Vec<StretchGrid>,
}

impl Grid {
    /// Most cells of a grid.
    pub const MOST_CELLS: usize = 20_000;

    /// Finds a grid.
    ///
    /// # Errors
    /// [`TransientError::GridSpec`] for a wish that makes no sense,
    /// [`TransientError::GridTooFine`] when it cannot be met.
    pub fn new(line: &SurgeLine, spec: GridSpec) -> Result<Self, TransientError> {
        let sound = spec.cells >= 2
            && spec.cells <= Self::MOST_CELLS
            && spec.alteration > 0.0
            && spec.alteration <= 0.5
            && (0.0..=0.5).contains(&spec.lumped);
        if !sound {
            return Err(TransientError::GridSpec);
        }
        let travel = line.travel_times();
        let total: f64 = travel.iter().sum();
        let mut cells = count(spec.cells);
        let mut finest = (0, f64::INFINITY);
        loop {
            let mut best: Option<(f64, f64, Vec<usize>)> = None;
            for index in 0..=TRIES {
                let more = 0.25 * f64::from(index) / f64::from(TRIES);
                let step = total / (cells * (1.0 + more));
                let (counts, worst) = lay(&travel, total, step, spec);
                // A little more alteration is worth fewer cells.
                let score = worst + 0.2 * spec.alteration * more;
                if best.as_ref().is_none_or(|found| score < found.0) {
                    best = Some((score, step, counts));
                }
            }
            if let Some((_, step, counts)) = best {
                let worst = worst_alteration(&travel, step, &counts);
                finest = (counts.iter().sum(), worst);
                if worst <= spec.alteration && finest.0 <= Self::MOST_CELLS {
                    return Ok(Self::of(line, &travel, step, &counts));
                }
            }
            cells *= 1.25;
            if cells > count(Self::MOST_CELLS) {
                return Err(TransientError::GridTooFine {
                    cells: finest.0,
                    alteration: finest.1,
                });
            }
        }
    }

    fn of(line: &SurgeLine, travel: &[f64], step: f64, counts: &[usize]) -> Self {
        let total: f64 = travel.iter().sum();
        let stretches = travel
            .iter()
            .zip(counts)
            .zip(&line.spec().wave_speeds)
            .map(|((time, cells), wave_speed)| {
                let factor = if *cells == 0 {
                    1.0
                } else {
                    time / (count(*cells) * step)
                };
                StretchGrid {
                    cells: *cells,
                    wave_speed: *wave_speed * factor,
                    alteration: factor - 1.0,
                    travel_share: time / total,
                }
            })
            .collect();
        Self { step, stretches }
    }

    /// The same grid with half the step and twice the cells; what is lumped
    /// stays lumped.
    #[must_use]
    pub fn halved(&self) -> Self {
        Self {
            step: 0.5 * self.step,
            stretches: self
                .stretches
                .iter()
                .map(|stretch| StretchGrid {
                    cells: 2 * stretch.cells,
                    ..*stretch
                })
                .collect(),
        }
    }

    /// Time step.
    #[must_use]
    pub fn step(&self) -> Time {
        Time::new::<second>(self.step)
    }

    /// Cells over the line.
    #[must_use]
    pub fn cells(&self) -> usize {
        self.stretches.iter().map(|stretch| stretch.cells).sum()
    }

    /// How each run lies on the grid, in order.
    #[must_use]
    pub fn stretches(&self) -> &[StretchGrid] {
        &self.stretches
    }

    /// Greatest alteration of a wave speed, as a share without sign.
    #[must_use]
    pub fn greatest_alteration(&self) -> f64 {
        self.stretches
            .iter()
            .map(|stretch| stretch.alteration.abs())
            .fold(0.0, |a, b| if b > a { b } else { a })
    }

    /// Share of the line's travel time that is lumped.
    #[must_use]
    pub fn lumped_share(&self) -> f64 {
        self.stretches
            .iter()
            .filter(|stretch| stretch.is_lumped())
            .map(|stretch| stretch.travel_share)
            .sum()
    }

    /// Whether it was made for a line of these runs and wave speeds.
    pub(super) fn fits(&self, line: &SurgeLine) -> bool {
        let travel = line.travel_times();
        let alike = |(stretch, time): (&StretchGrid, &f64)| {
            let walked = count(stretch.cells) * self.step * (1.0 + stretch.alteration);
            stretch.is_lumped() || (walked / time - 1.0).abs() < 1e-9
        };
        travel.len() == self.stretches.len() && self.stretches.iter().zip(&travel).all(alike)
    }

    pub(super) fn step_si(&self) -> f64 {
        self.step
    }
}

impl StretchGrid {
    pub(super) fn wave_speed_si(&self) -> f64 {
        self.wave_speed.get::<meter_per_second>()
    }
}

/// A count as a number.
#[expect(clippy::cast_precision_loss, reason = "counts here are far below 2^52")]
pub(super) fn count(value: usize) -> f64 {
    value as f64
}

/// The nearest whole number of something counted, from 0 up.
#[expect(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "callers pass finite numbers from 0 to far below 2^52"
)]
pub(super) fn nearest(value: f64) -> usize {
    (value + 0.5).floor() as usize
}

/// Cells of each run at a step, 0 for lumped, and the worst alteration.
fn lay(travel: &[f64], total: f64, step: f64, spec: GridSpec) -> (Vec<usize>, f64) {
    let mut counts: Vec<usize> = travel.iter().map(|time| nearest(time / step)).collect();
    let mut shortest_first: Vec<usize> = (0..travel.len()).collect();
    let time = |run: usize| travel.get(run).copied().unwrap_or(0.0);
    shortest_first.sort_by(|a, b| time(*a).total_cmp(&time(*b)));
    let mut lumped = 0.0;
    for run in shortest_first {
        let Some(cells) = counts.get_mut(run) else {
            continue;
        };
        if *cells > 0 && off(time(run), *cells, step) <= spec.alteration {
            continue;
        }
        if lumped + time(run) <= spec.lumped * total {
            lumped += time(run);
            *cells = 0;
        } else {
            *cells = (*cells).max(1);
        }
    }
    let worst = worst_alteration(travel, step, &counts);
    (counts, worst)
}

/// Alteration of a wave speed, without sign.
fn off(time: f64, cells: usize, step: f64) -> f64 {
    (time / (count(cells) * step) - 1.0).abs()
}

fn worst_alteration(travel: &[f64], step: f64, counts: &[usize]) -> f64 {
    travel
        .iter()
        .zip(counts)
        .filter(|(_, cells)| **cells > 0)
        .map(|(time, cells)| off(*time, *cells, step))
        .fold(0.0, |a, b| if b > a { b } else { a })
}
