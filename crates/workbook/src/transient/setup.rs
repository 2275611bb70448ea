//! The line as a transient sees it, and what moves at its foot.

use super::quick;
use crate::book::Id;
use crate::figure::{CloneGap, Figure, Gap, Lack, Trouble};
use crate::resolve::Resolved;
use crate::resolve::drive::{Area, Speeds};
use crate::steady::Steady;
use hydraulics::constants::standard_gravity;
use hydraulics::friction::FrictionLaw;
use hydraulics::line::{Line, LineError};
use hydraulics::nozzle::Needle;
use hydraulics::quantity::{GaugePressure, Head, Level};
use hydraulics::transient::{
    Characteristic, ClosingLaw, Foot, FrictionModel, GridSpec, LawFamily, SurgeLine, SurgeSpec,
    TransientError,
};
use uom::si::f64::{Length, MassDensity, Time, Velocity};
use uom::si::ratio::ratio;
use uom::si::time::second;

/// Work allowed to one run, in cells times steps: on a long closing of a short
/// line the cells become fewer, and the convergence check says whether they
/// are enough.
const WORK: f64 = 2e6;

/// The line with the ordered nozzles, new pipe, the highest forebay level and
/// the wave speeds of the coldest wall.
#[derive(Debug, Clone)]
pub(crate) struct Setup {
    pub(crate) line: SurgeLine,
    pub(crate) friction: FrictionModel,
    pub(crate) jets: u32,
    pub(crate) stretches: Vec<Id>,
    pub(crate) wave_speeds: Vec<Velocity>,
    pub(crate) density: MassDensity,
    /// Highest forebay level.
    pub(crate) forebay: Level,
    /// Axis of the jets.
    pub(crate) axis: Level,
    /// How far the lowest forebay level lies below the highest: what the
    /// lowest pressures are taken down by.
    pub(crate) low_by: Head,
    /// Level of the pipe at the foot.
    pub(crate) foot: Level,
    /// Gauge pressure of vapour, as a head (negative).
    pub(crate) vapour: Head,
}

/// How the jets and the guard valve move.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Moves {
    pub(crate) law: ClosingLaw,
    pub(crate) opening: Time,
    pub(crate) slam: Time,
    pub(crate) deflectors: bool,
    pub(crate) guard_may_slam: bool,
    pub(crate) jets_kept_clear: bool,
}

pub(crate) fn trouble(why: TransientError) -> Gap {
    Gap::Wrong(Trouble::Transient(why))
}

impl Setup {
    /// What stages 1 and 2 give a transient.
    ///
    /// # Errors
    /// The first thing it lacks.
    pub(crate) fn new(found: &Resolved, steady: &Steady) -> Figure<Setup> {
        if found.drive.machine == crate::book::MachineKind::FlowWithSpeed {
            return Err(Gap::Unsettled(Lack::Machine));
        }
        let solved = steady.solved.clone_gap()?;
        let template = steady.template.clone_gap()?;
        let jets = found.jets.clone_gap()?;
        let water = found.cold_water.clone_gap()?;
        let forebay = found.forebay.highest.clone()?;
        let lowest = match found.forebay.lowest.clone()? {
            Some(level) => level,
            None => found.forebay.normal.clone()?,
        };
        let mut wave_speeds = Vec::with_capacity(found.stretches.len());
        let mut spec = steady.line.clone_gap()?.spec().clone();
        spec.forebay = forebay;
        for (stretch, run) in found.stretches.iter().zip(&mut spec.runs) {
            let pipe = stretch.pipe.clone_gap()?;
            wave_speeds.push(quick::speed(found, stretch, pipe)?.0);
            run.friction = FrictionLaw::ColebrookWhite {
                roughness: pipe.roughness_new.value,
            };
        }
        let foot = spec.points.last().map_or(template.axis, |p| p.level);
        let line_trouble = |why: LineError| Gap::Wrong(Trouble::Line(why));
        let line = SurgeLine::new(SurgeSpec {
            line: Line::new(spec).map_err(line_trouble)?,
            wave_speeds: wave_speeds.clone(),
            foot: Foot {
                nozzles: template.set(solved.bore).map_err(line_trouble)?,
                characteristic: characteristic(found, solved.bore)?,
            },
            atmosphere: found.atmosphere.clone()?,
        })
        .map_err(trouble)?;
        Ok(Setup {
            line,
            friction: FrictionModel {
                by_reynolds: false,
                unsteady: found.drive.unsteady_friction,
            },
            jets: jets.count,
            stretches: found.stretches.iter().map(|s| s.id).collect(),
            wave_speeds,
            density: water.density(),
            forebay,
            axis: template.axis,
            low_by: forebay - lowest,
            foot,
            vapour: water
                .vapour_pressure()
                .gauge(found.atmosphere.clone()?)
                .head(water.density(), standard_gravity()),
        })
    }

    /// Gauge pressure of a pressure head.
    pub(crate) fn pressure(&self, head: Head) -> GaugePressure {
        head.pressure(self.density, standard_gravity())
    }

    /// The grid the deciding runs are made on, for events that last so long.
    pub(crate) fn fine(&self, lasting: Time) -> GridSpec {
        GridSpec {
            cells: self.cells(lasting, 32.0, 64.0),
            ..GridSpec::default()
        }
    }

    /// The grid all starts are run on.
    pub(crate) fn coarse(&self, lasting: Time) -> GridSpec {
        GridSpec {
            cells: self.cells(lasting, 12.0, 24.0),
            ..GridSpec::coarse()
        }
    }

    fn cells(&self, lasting: Time, least: f64, most: f64) -> usize {
        let periods = (lasting / self.line.period()).get::<ratio>();
        let fit = (WORK / (2.0 * (periods + 4.0))).sqrt();
        let cells = fit.max(least).min(most);
        #[expect(
            clippy::cast_possible_truncation,
            clippy::cast_sign_loss,
            reason = "between 12 and 64"
        )]
        {
            cells as usize
        }
    }
}

impl Moves {
    /// How the book moves the jets.
    ///
    /// # Errors
    /// A closing or opening that is not entered, or cannot be.
    pub(crate) fn new(found: &Resolved) -> Figure<Moves> {
        let speeds = found.drive.speeds.clone()?;
        Moves::with(found, &speeds)
    }

    /// The same with other speeds of closing.
    pub(crate) fn with(found: &Resolved, speeds: &Speeds) -> Figure<Moves> {
        let drive = &found.drive;
        Ok(Moves {
            law: law(speeds)?,
            opening: drive.opening.clone()?.unwrap_or(speeds.full_stroke()),
            slam: drive.slam.clone()?,
            deflectors: drive.deflectors,
            guard_may_slam: drive.guard_may_slam,
            jets_kept_clear: drive.jets_kept_clear,
        })
    }

    /// The longest of them.
    pub(crate) fn longest(&self) -> Time {
        let closing = self.law.full_stroke_time();
        let all = [closing, self.opening, self.slam];
        all.into_iter()
            .fold(Time::new::<second>(0.0), |a, b| if b > a { b } else { a })
    }
}

/// The closing law of these speeds.
pub(crate) fn law(speeds: &Speeds) -> Figure<ClosingLaw> {
    match *speeds {
        Speeds::One { time } => ClosingLaw::linear(time),
        Speeds::Two { fast, slow, knee } => ClosingLaw::two_speed(fast, slow, knee),
    }
    .map_err(trouble)
}

/// Laws like these speeds, that differ in their time.
pub(crate) fn family(speeds: Option<&Speeds>) -> LawFamily {
    match speeds {
        Some(Speeds::Two { slow, knee, .. }) => LawFamily::TwoSpeed {
            knee: *knee,
            slow: *slow,
        },
        _ => LawFamily::OneSpeed,
    }
}

fn characteristic(found: &Resolved, bore: Length) -> Figure<Characteristic> {
    Ok(match found.drive.area.clone()? {
        Area::Straight => Characteristic::Linear,
        Area::Table(rows) => Characteristic::Table(rows),
        Area::Needle { half_angle, travel } => {
            let needle =
                Needle::new(bore, half_angle).map_err(|why| Gap::Wrong(Trouble::Nozzle(why)))?;
            Characteristic::Needle {
                needle,
                travel: travel.unwrap_or(needle.full_stroke()),
            }
        }
    })
}
