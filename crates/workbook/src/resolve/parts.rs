//! Stretches with their pipes, and fittings, placed on the profile.

use crate::book::{Book, FittingEntry, FittingKind, Id, Laying, StretchEntry};
use crate::field::Field;
use crate::figure::{Figure, Gap, Lack, Trouble};
use crate::resolve::profile::Profile;
use crate::resolve::{Assumption, Reader, own_pipe, whole};
use hydraulics::quantity::{GaugePressure, PipeLength};
use pipes::Pipe;
use std::sync::Arc;

/// Where a stretch runs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Span {
    /// Chainage of its upper end.
    pub from: PipeLength,
    /// Chainage of its lower end.
    pub to: PipeLength,
}

impl Span {
    /// True length along the pipe.
    #[must_use]
    pub fn length(&self) -> PipeLength {
        self.to - self.from
    }

    /// Whether a chainage lies in it, ends included.
    #[must_use]
    pub fn holds(&self, at: PipeLength) -> bool {
        self.from <= at && at <= self.to
    }
}

/// A stretch on the profile.
#[derive(Debug, Clone, PartialEq)]
pub struct Stretch {
    /// Its number.
    pub id: Id,
    /// Where it runs.
    pub span: Figure<Span>,
    /// Its pipe.
    pub pipe: Figure<Arc<Pipe>>,
    /// How it is laid.
    pub laying: Laying,
    /// Pressure it may see in a surge, where the user entered one.
    pub surge_allowed: Figure<Option<GaugePressure>>,
}

/// A fitting on the profile.
#[derive(Debug, Clone, PartialEq)]
pub struct PlacedFitting {
    /// Its number.
    pub id: Id,
    /// What it is.
    pub kind: FittingKind,
    /// What it is called on the order.
    pub note: String,
    /// Where it sits.
    pub at: Figure<PipeLength>,
    /// The stretch it belongs to: the one above, where it sits at a cut.
    pub stretch: Option<Id>,
    /// How many in a row.
    pub count: Figure<u32>,
    /// What decides its loss.
    pub shape: Figure<Shape>,
    /// Its rating, where entered.
    pub rating: Figure<Option<GaugePressure>>,
}

/// What decides the loss of a fitting.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Shape {
    /// Nothing but its kind.
    Plain,
    /// A bend of this angle and radius over bore.
    Bend {
        /// Deflection, degree.
        angle_deg: f64,
        /// Radius over bore.
        radius: f64,
    },
    /// A trash rack before the inlet.
    Rack {
        /// Wetted area, m².
        area_m2: f64,
        /// Thickness of a bar, m.
        bar_m: f64,
        /// Gap between bars, m.
        gap_m: f64,
        /// Angle from the horizontal, degree.
        angle_deg: f64,
        /// Share that is clogged.
        clogged: f64,
    },
    /// A mitre of this angle.
    Mitre {
        /// Deflection, degree.
        angle_deg: f64,
    },
    /// A valve open by this share.
    Valve {
        /// 1 is fully open.
        opening: f64,
    },
    /// A coefficient of the user's own.
    Own {
        /// K on the velocity in the pipe there.
        k: f64,
    },
}

pub(crate) fn stretches(r: &mut Reader<'_>, profile: &Profile) -> Vec<Stretch> {
    let book = r.book;
    let spans = spans(r, profile);
    book.line
        .stretches
        .iter()
        .zip(spans)
        .map(|(entry, span)| {
            let _ = r.optional(Field::StretchCover(entry.id));
            let surge_allowed = r
                .optional(Field::SurgeAllowed(entry.id))
                .map(|allowed| allowed.map(GaugePressure::from_pa));
            if let Ok(Some(allowed)) = surge_allowed {
                r.assume(Assumption::SurgeAllowance(entry.id, allowed));
            }
            Stretch {
                id: entry.id,
                span,
                pipe: pipe_of(r, entry),
                laying: entry.laying,
                surge_allowed,
            }
        })
        .collect()
}

fn spans(r: &mut Reader<'_>, profile: &Profile) -> Vec<Figure<Span>> {
    let entries = &r.book.line.stretches;
    let mut starts: Vec<Figure<PipeLength>> = Vec::with_capacity(entries.len());
    for (i, entry) in entries.iter().enumerate() {
        let before = starts.last().and_then(|s| s.as_ref().ok().copied());
        starts.push(start_of(r, profile, entry, i == 0, before));
    }
    let end = profile.pipe_length.clone();
    (0..entries.len())
        .map(|i| {
            let from = starts[i].clone()?;
            let to = match starts.get(i + 1) {
                Some(next) => next.clone()?,
                None => end.clone()?,
            };
            // The last one must begin above the end of the line.
            if to <= from {
                return r.wrong(Trouble::StretchStart {
                    stretch: entries[i].id,
                });
            }
            Ok(Span { from, to })
        })
        .collect()
}

fn start_of(
    r: &mut Reader<'_>,
    profile: &Profile,
    entry: &StretchEntry,
    first: bool,
    before: Option<PipeLength>,
) -> Figure<PipeLength> {
    if first {
        // The line begins where its first stretch does, whatever was typed
        // above the first station since.
        return Ok(PipeLength::from_m(0.0));
    }
    match profile.station(entry.from_station) {
        Some(station) if before.is_none_or(|b| station.chainage > b) => Ok(station.chainage),
        None if profile.broken.is_some() => Err(profile
            .broken
            .clone()
            .unwrap_or(Gap::Unsettled(Lack::Pipe(entry.id)))),
        _ => r.wrong(Trouble::StretchStart { stretch: entry.id }),
    }
}

fn pipe_of(r: &mut Reader<'_>, entry: &StretchEntry) -> Figure<Arc<Pipe>> {
    let Some(name) = &entry.pipe else {
        return Err(Gap::Unsettled(Lack::Pipe(entry.id)));
    };
    named_pipe(r, entry.id, name)
}

fn named_pipe(r: &mut Reader<'_>, stretch: Id, name: &str) -> Figure<Arc<Pipe>> {
    if let Some(own) = own_id(name) {
        return match r.book.own_pipes.iter().find(|p| p.id == own) {
            Some(entry) => own_pipe::build(r, entry).map(Arc::new),
            None => r.wrong(Trouble::PipeUnknown {
                stretch,
                pipe: name.to_owned(),
            }),
        };
    }
    match r.book.pipes.iter().find(|copy| copy.id == name) {
        Some(copy) => match copy.pipe() {
            Ok(pipe) => Ok(Arc::new(pipe)),
            Err(why) => r.wrong(Trouble::PipeCopy {
                pipe: name.to_owned(),
                why,
            }),
        },
        None => r.wrong(Trouble::PipeUnknown {
            stretch,
            pipe: name.to_owned(),
        }),
    }
}

/// The number in `own/<id>`.
#[must_use]
pub fn own_id(pipe: &str) -> Option<Id> {
    pipe.strip_prefix("own/")?.parse().ok()
}

pub(crate) fn fittings(
    r: &mut Reader<'_>,
    profile: &Profile,
    stretches: &[Stretch],
) -> Vec<PlacedFitting> {
    let book: &Book = r.book;
    let placed: Vec<PlacedFitting> = book
        .line
        .fittings
        .iter()
        .map(|entry| {
            let at = match profile.station(entry.at_station) {
                Some(station) => Ok(station.chainage),
                None => match &profile.broken {
                    Some(gap) => Err(gap.clone()),
                    None => r.wrong(Trouble::FittingStation { fitting: entry.id }),
                },
            };
            let stretch = at.as_ref().ok().and_then(|at| {
                stretches
                    .iter()
                    .find(|s| s.span.as_ref().is_ok_and(|span| span.holds(*at)))
                    .map(|s| s.id)
            });
            PlacedFitting {
                id: entry.id,
                kind: entry.kind,
                note: entry.note.clone(),
                stretch,
                at,
                count: r.quietly(Field::FittingCount(entry.id), 1.0).map(whole),
                shape: shape(r, entry),
                rating: r
                    .optional(Field::FittingRating(entry.id))
                    .map(|rating| rating.map(GaugePressure::from_pa)),
            }
        })
        .collect();
    if !placed.iter().any(|f| is_entrance(f.kind)) {
        r.assume(Assumption::NoEntrance);
    }
    placed
}

/// Whether it is one of the shapes of the pipe's inlet.
#[must_use]
pub fn is_entrance(kind: FittingKind) -> bool {
    matches!(
        kind,
        FittingKind::EntranceSharp
            | FittingKind::EntranceProjecting
            | FittingKind::EntranceRounded
            | FittingKind::EntranceBellmouth
    )
}

/// Whether the line's pressure stands in it, so that its rating counts.
#[must_use]
pub fn bears_pressure(kind: FittingKind) -> bool {
    !is_entrance(kind) && kind != FittingKind::TrashRack
}

fn shape(r: &mut Reader<'_>, entry: &FittingEntry) -> Figure<Shape> {
    let id = entry.id;
    Ok(match entry.kind {
        FittingKind::TrashRack => Shape::Rack {
            area_m2: r.needed(Field::RackWidth(id))? * r.needed(Field::RackLength(id))?,
            bar_m: r.needed(Field::RackBar(id))?,
            gap_m: r.needed(Field::RackGap(id))?,
            angle_deg: r.needed(Field::FittingAngle(id))?,
            clogged: r.needed(Field::RackClogged(id))?,
        },
        FittingKind::Bend => Shape::Bend {
            angle_deg: r.needed(Field::FittingAngle(id))?,
            radius: r.needed(Field::FittingRadius(id))?,
        },
        FittingKind::Mitre => Shape::Mitre {
            angle_deg: r.needed(Field::FittingAngle(id))?,
        },
        FittingKind::GateValve | FittingKind::BallValve | FittingKind::ButterflyValve => {
            Shape::Valve {
                opening: r.quietly(Field::FittingOpening(id), 1.0)?,
            }
        }
        FittingKind::Own => Shape::Own {
            k: r.needed(Field::FittingK(id))?,
        },
        FittingKind::EntranceSharp
        | FittingKind::EntranceProjecting
        | FittingKind::EntranceRounded
        | FittingKind::EntranceBellmouth
        | FittingKind::TeeRun
        | FittingKind::TeeBranch => Shape::Plain,
    })
}
