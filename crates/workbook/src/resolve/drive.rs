//! How the jets are driven shut and open, and what else bears on a transient.

use crate::book::{ClosingSpeeds, MachineKind, NozzleKind, OpenArea, PipeHeld};
use crate::field::Field;
use crate::figure::{Figure, Gap, Lack, Trouble};
use crate::resolve::{Assumption, Reader};
use hydraulics::surge::Restraint;
use uom::si::angle::degree;
use uom::si::f64::{Angle, Length, Time};
use uom::si::length::meter;
use uom::si::time::second;

/// Speeds of the closing.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Speeds {
    /// One speed.
    One {
        /// From full stroke to shut.
        time: Time,
    },
    /// Two speeds.
    Two {
        /// Time of a full stroke at the fast one.
        fast: Time,
        /// Time of a full stroke at the slow one.
        slow: Time,
        /// Stroke at which the slow one begins.
        knee: f64,
    },
}

impl Speeds {
    /// Time from full stroke to shut.
    #[must_use]
    pub fn full_stroke(&self) -> Time {
        match *self {
            Speeds::One { time } => time,
            Speeds::Two { fast, slow, knee } => fast * (1.0 - knee) + slow * knee,
        }
    }
}

/// How the open area follows the stroke.
#[derive(Debug, Clone, PartialEq)]
pub enum Area {
    /// In a straight line.
    Straight,
    /// A needle by its geometry.
    Needle {
        /// Half angle at its point.
        half_angle: Angle,
        /// From shut to full stroke; none: as far as its orifice is not yet
        /// wholly open.
        travel: Option<Length>,
    },
    /// (stroke, open share), from (0, 0) to (1, 1).
    Table(Vec<(f64, f64)>),
}

/// How the jets are driven, as resolved.
#[derive(Debug, Clone, PartialEq)]
pub struct Drive {
    /// What the water drives.
    pub machine: MachineKind,
    /// Speeds of the closing.
    pub speeds: Figure<Speeds>,
    /// How the open area follows the stroke.
    pub area: Figure<Area>,
    /// From shut to full stroke, where entered.
    pub opening: Figure<Option<Time>>,
    /// Whether the guard valve can be slammed.
    pub guard_may_slam: bool,
    /// Time in which it then shuts.
    pub slam: Figure<Time>,
    /// Whether nothing gets past the rack that could block a jet.
    pub jets_kept_clear: bool,
    /// Whether deflectors are fitted.
    pub deflectors: bool,
    /// How the pipe is held.
    pub restraint: Restraint,
    /// Whether unsteady friction is reckoned with.
    pub unsteady_friction: bool,
    /// Share of air carried as bubbles at standing pressure; 0 without.
    pub air_share: Figure<f64>,
    /// Slowest closing a search looks at.
    pub slowest: Figure<Time>,
    /// Reserve on the closing time, a share.
    pub reserve: Figure<f64>,
}

fn seconds(value: f64) -> Time {
    Time::new::<second>(value)
}

pub(crate) fn drive(r: &mut Reader<'_>) -> Drive {
    let entered = &r.book.surge;
    let (machine, held) = (entered.machine, entered.held);
    let (deflectors, guard_may_slam) = (entered.deflectors, entered.guard_may_slam);
    let jets_kept_clear = entered.jets_kept_clear;
    let unsteady_friction = entered.unsteady_friction;
    let speeds = speeds(r);
    let area = area(r);
    let opening = r.optional(Field::OpeningTime).map(|t| t.map(seconds));
    // A slam at once is what is looked at unless something else is said.
    let slam = r.quietly(Field::SlamTime, 0.0).map(seconds);
    let air_share = r.quietly(Field::EntrainedAir, 0.0);
    if let Ok(share) = air_share
        && share > 0.0
    {
        r.assume(Assumption::EntrainedAir(share));
    }
    let preset = |field: Field| field.preset().map_or(0.0, |p| p.value);
    let slowest = r
        .quietly(Field::SlowestClosing, preset(Field::SlowestClosing))
        .map(seconds);
    let reserve = r.quietly(Field::ClosingReserve, preset(Field::ClosingReserve));
    Drive {
        machine,
        speeds,
        area,
        opening,
        guard_may_slam,
        slam,
        jets_kept_clear,
        deflectors,
        restraint: match held {
            PipeHeld::Throughout => Restraint::Throughout,
            PipeHeld::UpperEnd => Restraint::UpstreamEnd,
            PipeHeld::ExpansionJoints => Restraint::ExpansionJoints,
        },
        unsteady_friction,
        air_share,
        slowest,
        reserve,
    }
}

fn speeds(r: &mut Reader<'_>) -> Figure<Speeds> {
    // Those that do not count are still refused where they are wrong.
    match r.book.surge.speeds {
        ClosingSpeeds::One => {
            for field in [Field::FastTime, Field::SlowTime, Field::Knee] {
                let _ = r.optional(field);
            }
            let time = r.needed(Field::ClosingTime)?;
            Ok(Speeds::One {
                time: seconds(time),
            })
        }
        ClosingSpeeds::Two => {
            let _ = r.optional(Field::ClosingTime);
            let (fast, slow) = (r.needed(Field::FastTime), r.needed(Field::SlowTime));
            let knee = r.needed(Field::Knee);
            Ok(Speeds::Two {
                fast: seconds(fast?),
                slow: seconds(slow?),
                knee: knee?,
            })
        }
    }
}

fn area(r: &mut Reader<'_>) -> Figure<Area> {
    let kind = r.book.jets.kind;
    let rows = r.book.surge.valve.len();
    let by = match (r.book.surge.area, kind) {
        (OpenArea::AsNozzle, NozzleKind::Needle) => OpenArea::Needle,
        (OpenArea::AsNozzle, NozzleKind::Fixed) => OpenArea::Straight,
        (chosen, _) => chosen,
    };
    let mut table = Vec::with_capacity(rows);
    for i in 0..rows {
        let row = (
            r.optional(Field::ValveStroke(i)),
            r.optional(Field::ValveOpen(i)),
        );
        table.push(row);
    }
    if by == OpenArea::Needle {
        let travel = r.optional(Field::NeedleTravel);
        let half_angle = r.needed(Field::NeedleAngle)?;
        return Ok(Area::Needle {
            half_angle: Angle::new::<degree>(half_angle),
            travel: travel?.map(Length::new::<meter>),
        });
    }
    for field in [Field::NeedleAngle, Field::NeedleTravel] {
        let _ = r.optional(field);
    }
    if by == OpenArea::Straight {
        r.assume(Assumption::StraightArea);
        return Ok(Area::Straight);
    }
    whole_table(r, table)
}

/// The table with its ends; strokes must rise and shares not fall.
fn whole_table(
    r: &mut Reader<'_>,
    rows: Vec<(Figure<Option<f64>>, Figure<Option<f64>>)>,
) -> Figure<Area> {
    if rows.is_empty() {
        return Err(Gap::Unsettled(Lack::ValveTable));
    }
    let last = rows.len() - 1;
    let mut whole = vec![(0.0, 0.0)];
    for (i, (stroke, share)) in rows.into_iter().enumerate() {
        let stroke = stroke?.ok_or(Gap::needs(Field::ValveStroke(i)))?;
        let share = share?.ok_or(Gap::needs(Field::ValveOpen(i)))?;
        let (before, least) = whole.last().copied().unwrap_or((0.0, 0.0));
        let shut = i == 0 && stroke <= 0.0 && share <= 0.0;
        if shut {
            continue;
        }
        // The last row may be that of full stroke, and is then fully open.
        let full = stroke >= 1.0;
        let fits = stroke > before && share >= least && (!full || (i == last && share >= 1.0));
        if !fits {
            return r.wrong(Trouble::ValveRow { row: i });
        }
        whole.push((stroke, share));
    }
    if whole.last().is_some_and(|(stroke, _)| *stroke < 1.0) {
        whole.push((1.0, 1.0));
    }
    Ok(Area::Table(whole))
}
