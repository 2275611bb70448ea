//! Where the standing pressure runs through the class of a stretch's pipe: a
//! study that proposes where to cut the stretch, and what to lay below.
//!
//! A stretch's pipe is enough as far as the standing pressure, from the
//! highest forebay level, leaves the margin called tight within what it may
//! bear at the warmest wall. Below that place the weakest pipe of the same
//! series and outside diameter is proposed that is enough at the stretch's
//! lowest place. Surge is not in it: what is proposed is judged as any other
//! pipe.

use crate::book::{Book, Id};
use crate::edit;
use crate::evaluate::Findings;
use crate::figure::{CloneGap, Figure, Gap, Lack};
use hydraulics::constants::standard_gravity;
use hydraulics::quantity::{GaugePressure, Level, PipeLength};
use pipes::Pipe;

/// A station no further above the place than this is cut at, m, before a new
/// one is put in.
pub const NEAR_M: f64 = 0.5;

/// Where a stretch is cut.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum CutAt {
    /// At a station of the line.
    Station(Id),
    /// At a new station on a leg.
    NewBelow {
        /// The station above.
        station: Id,
        /// Along the pipe from it, whole centimetres.
        down: PipeLength,
    },
}

/// A cut of a stretch, to be accepted.
#[derive(Debug, Clone, PartialEq)]
pub struct Cut {
    /// The stretch.
    pub stretch: Id,
    /// Along the pipe.
    pub chainage: PipeLength,
    /// At a station, or where a new one is put in.
    pub at: CutAt,
    /// The pipe above: the one laid now, which is used to its end there, so
    /// that no weaker one of its kind would be enough.
    pub above: String,
    /// The pipe below.
    pub below: String,
}

/// What the study finds for one stretch.
#[derive(Debug, Clone, PartialEq)]
pub enum Proposal {
    /// Its pipe is enough all along.
    Enough,
    /// Cut it.
    Cut(Cut),
    /// Its pipe is not enough even at its head: lay this one all along.
    AllAlong {
        /// The pipe.
        pipe: String,
    },
    /// A pipe of the user's own has no other classes.
    OwnPipe,
    /// No pipe of its series and outside diameter is enough.
    NoneStronger,
}

/// A pipe of the same series and size, and what it may bear less the margin.
struct Candidate<'a> {
    pipe: &'a Pipe,
    enough_to: GaugePressure,
}

/// A proposal for every stretch.
#[must_use]
pub fn proposals(findings: &Findings) -> Vec<(Id, Figure<Proposal>)> {
    findings
        .resolved
        .stretches
        .iter()
        .enumerate()
        .map(|(i, stretch)| (stretch.id, proposal(findings, i)))
        .collect()
}

fn proposal(findings: &Findings, index: usize) -> Figure<Proposal> {
    let found = &findings.resolved;
    let missing = || Gap::Unsettled(Lack::Pipe(1));
    let stretch = found.stretches.get(index).ok_or_else(missing)?;
    let wall = findings.walls.stretches.get(index).ok_or_else(missing)?;
    let span = stretch.span.clone()?;
    let pipe = stretch.pipe.clone_gap()?;
    let keep = 1.0 - found.limits.clone()?.tight_margin;
    let standing = wall.standing.clone()?.pressure;
    let holds_to = GaugePressure::new(wall.allowable.clone_gap()?.pressure * keep);
    if standing <= holds_to {
        return Ok(Proposal::Enough);
    }
    if crate::resolve::parts::own_id(&pipe.id).is_some() {
        return Ok(Proposal::OwnPipe);
    }
    let kin = kin(pipe, found.warmest_wall.clone()?, keep);
    let weakest = |pressure: GaugePressure| kin.iter().find(|c| c.enough_to >= pressure);
    let Some(below) = weakest(standing) else {
        return Ok(Proposal::NoneStronger);
    };
    let below = below.pipe.id.clone();
    let density = found.cold_water.clone()?.density();
    let head = holds_to.head(density, standard_gravity());
    let lowest_level = found.forebay.highest.clone()? - head;
    let Some((chainage, at)) = place(findings, (span.from, span.to), lowest_level)? else {
        return Ok(Proposal::AllAlong { pipe: below });
    };
    Ok(Proposal::Cut(Cut {
        stretch: stretch.id,
        chainage,
        at,
        above: pipe.id.clone(),
        below,
    }))
}

/// The pipes of the same series and outside diameter, the weakest first.
fn kin(
    pipe: &Pipe,
    wall: uom::si::f64::ThermodynamicTemperature,
    keep: f64,
) -> Vec<Candidate<'static>> {
    let mut kin: Vec<Candidate<'static>> = pipes::catalogue()
        .pipes
        .iter()
        .filter(|p| p.series == pipe.series && p.outside_diameter == pipe.outside_diameter)
        .filter_map(|p| {
            let allowable = p.allowable(wall).ok()?;
            Some(Candidate {
                pipe: p,
                enough_to: GaugePressure::new(allowable.pressure * keep),
            })
        })
        .collect();
    kin.sort_by(|a, b| {
        a.enough_to
            .pa()
            .total_cmp(&b.enough_to.pa())
            .then(a.pipe.wall_min.value.total_cmp(&b.pipe.wall_min.value))
    });
    kin
}

/// The last place of a stretch from its head down to which the pipe lies no
/// lower than `lowest`; none where there is no such place to cut at.
fn place(
    findings: &Findings,
    (from, to): (PipeLength, PipeLength),
    lowest: Level,
) -> Figure<Option<(PipeLength, CutAt)>> {
    let stations = findings.resolved.profile.whole()?;
    let mut above = None;
    for pair in stations.windows(2) {
        let [a, b] = pair else { continue };
        if b.chainage <= from || a.chainage >= to {
            continue;
        }
        if a.level < lowest {
            break;
        }
        let along = (b.chainage - a.chainage).m();
        let fall = (a.level - b.level).m();
        let down = if b.level < lowest {
            along * (a.level - lowest).m() / fall
        } else {
            along
        };
        if b.level < lowest {
            above = Some((a, down));
            break;
        }
        // Only what hangs below the last station is lower still.
        if b.chainage >= to {
            above = Some((a, 0.0));
        }
    }
    let Some((a, down)) = above else {
        return Ok(None);
    };
    let centimetres = (down * 100.0 + 1e-6).floor() / 100.0;
    if centimetres < NEAR_M {
        // At the station above, unless the stretch begins there.
        let inside = a.chainage > from;
        return Ok(inside.then_some((a.chainage, CutAt::Station(a.id))));
    }
    let down = PipeLength::from_m(centimetres);
    Ok(Some((
        a.chainage + down,
        CutAt::NewBelow {
            station: a.id,
            down,
        },
    )))
}

/// Takes a proposed cut: puts in the station it needs, parts the stretch, and
/// lays both pipes. Returns the number of the new stretch; none where the cut
/// is not of this book, which then stays as it was.
pub fn apply(book: &mut Book, findings: &Findings, cut: &Cut) -> Option<Id> {
    let mut changed = book.clone();
    let station = match cut.at {
        CutAt::Station(id) => id,
        CutAt::NewBelow { station, down } => {
            edit::insert_on_leg(&mut changed, &findings.resolved.profile, station, down.m())?
        }
    };
    let below = edit::split_at(&mut changed, station)?;
    if !(edit::lay(&mut changed, cut.stretch, &cut.above)
        && edit::lay(&mut changed, below, &cut.below))
    {
        return None;
    }
    edit::drop_unused_copies(&mut changed);
    *book = changed;
    Some(below)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::{DistanceKind, Reckoning, StretchEntry, SurveyWay};
    use crate::demo::demo;
    use crate::entry::Entry;
    use crate::evaluate::evaluate;
    use crate::field::Field;
    use crate::reading::DecimalMark;

    /// The demo with one weak pipe from end to end.
    fn weak() -> Book {
        let mut book = demo("demo");
        book.line.stretches.truncate(1);
        assert!(edit::lay(&mut book, 1, "pe100-iso4427/225/sdr26"));
        book
    }

    fn cut_of(book: &Book) -> (Findings, Cut) {
        let findings = evaluate(book);
        let all = proposals(&findings);
        let Ok(Proposal::Cut(cut)) = &all[0].1 else {
            panic!("{:?}", all[0].1)
        };
        (findings.clone(), cut.clone())
    }

    fn shares(found: &Findings) -> Vec<f64> {
        found
            .walls
            .stretches
            .iter()
            .map(|w| {
                w.standing.clone().unwrap().pressure.pa()
                    / w.allowable.clone().unwrap().pressure.value
            })
            .collect()
    }

    #[test]
    fn a_cut_leaves_each_pipe_enough_and_the_line_where_it_was() {
        let before = weak();
        let (found, cut) = cut_of(&before);
        assert!(matches!(cut.at, CutAt::NewBelow { .. }));
        let mut book = before.clone();
        let new = apply(&mut book, &found, &cut).unwrap();
        let after = evaluate(&book);
        assert_eq!(after.troubles(), vec![]);
        assert_eq!(book.line.stretches[1].id, new);
        assert_eq!(book.pipes.len(), 2);
        for share in shares(&after) {
            assert!(share <= 0.9 + 1e-12, "{share}");
        }
        // The pipe above is used to its end: a metre further it would not be
        // enough.
        assert!(shares(&after)[0] > 0.89);
        let length = |f: &Findings| f.resolved.profile.pipe_length.clone().unwrap().m();
        assert!((length(&after) - length(&found)).abs() < 2e-3);
        assert_eq!(after.resolved.gross_head, found.resolved.gross_head);
        // Cut so, nothing is left to propose.
        for (_, proposal) in proposals(&after) {
            assert_eq!(proposal, Ok(Proposal::Enough));
        }
    }

    #[test]
    fn enough_is_left_alone_and_an_own_pipe_has_no_kin() {
        for (_, proposal) in proposals(&evaluate(&demo("demo"))) {
            assert_eq!(proposal, Ok(Proposal::Enough));
        }
    }

    #[test]
    fn what_no_class_bears_is_said() {
        let mut book = weak();
        *book.entry_mut(Field::WarmestWall).unwrap() = Entry::typed(
            "20",
            "°C",
            crate::units::Kind::Temperature,
            DecimalMark::Point,
        );
        *book.entry_mut(Field::ForebayHighest).unwrap() =
            Entry::typed("900", "m", crate::units::Kind::Level, DecimalMark::Point);
        assert_eq!(proposals(&evaluate(&book))[0].1, Ok(Proposal::NoneStronger));
    }

    #[test]
    fn a_stretch_too_weak_from_its_head_is_changed_all_along() {
        let mut book = weak();
        book.line.stretches = vec![
            book.line.stretches[0].clone(),
            StretchEntry {
                id: 2,
                from_station: 14,
                ..book.line.stretches[0].clone()
            },
        ];
        let all = proposals(&evaluate(&book));
        assert!(matches!(all[1].1, Ok(Proposal::AllAlong { .. })), "{all:?}");
    }

    /// The same cut on a leg measured in each way there is.
    #[test]
    fn a_station_put_in_is_measured_as_its_neighbours() {
        for way in [SurveyWay::Level, SurveyWay::Angle, SurveyWay::Staff] {
            for kind in [DistanceKind::Slope, DistanceKind::Horizontal] {
                for reckoning in [Reckoning::FromStart, Reckoning::FromPrevious] {
                    for own in [None, Some(DistanceKind::Horizontal)] {
                        let mut book = weak();
                        book.line.fittings.clear();
                        book.line.distance_kind = kind;
                        book.line.reckoning = reckoning;
                        book.line.stations.truncate(3);
                        let typed = |field: Field, text: &str| {
                            let unit = field.kind().units()[0].symbol;
                            Entry::typed(text, unit, field.kind(), DecimalMark::Point)
                        };
                        let from_start = reckoning == Reckoning::FromStart;
                        let mut set =
                            |id: u32, distance: &str, level: &str, sight: &str, fore: &str| {
                                let s = book.line.stations.iter_mut().find(|s| s.id == id).unwrap();
                                s.distance_m = typed(Field::StationDistance(id), distance);
                                s.level_m = typed(Field::StationLevel(id), level);
                                s.fore_sight_deg = typed(Field::StationForeSight(id), sight);
                                s.staff_back_m = typed(Field::StationStaffBack(id), "1.2");
                                s.staff_fore_m = typed(Field::StationStaffFore(id), fore);
                            };
                        set(1, "0", "186.2", "", "");
                        set(2, "100", "170", "-10", "18.1");
                        let second = if from_start { "270" } else { "170" };
                        set(3, second, "118.6", "-18", "52");
                        for s in book.line.stations.iter_mut().skip(1) {
                            s.way = way;
                            s.distance_kind = own;
                        }
                        if own.is_some() && own != Some(kind) {
                            book.line.stations[2].distance_m =
                                typed(Field::StationDistance(3), "170");
                        }
                        book.line.bend = crate::book::BendKind::Joints;
                        // What is carried from the head down is spread, too.
                        book.line.spread_error = way != SurveyWay::Level;
                        book.line.known_fall_m = typed(Field::KnownFall, "67.5");
                        let what = format!("{way:?} {kind:?} {reckoning:?} {own:?}");
                        let found = evaluate(&book);
                        let Ok(Proposal::Cut(cut)) = proposals(&found)[0].1.clone() else {
                            panic!("{what}: {:?}", proposals(&found));
                        };
                        let mut after = book.clone();
                        apply(&mut after, &found, &cut).unwrap();
                        assert_eq!(after.line.stations[2].way, way);
                        let after = evaluate(&after);
                        assert_eq!(after.troubles(), found.troubles(), "{what}");
                        let (a, b) = (&found.resolved.profile, &after.resolved.profile);
                        assert_eq!(b.usable.len(), 4, "{what}");
                        let (a, mid, b) = (&a.usable[2], &b.usable[2], &b.usable[3]);
                        let near = |x: f64, y: f64| {
                            assert!((x - y).abs() < 3e-3, "{what}: {x} and {y}");
                        };
                        near(a.chainage.m(), b.chainage.m());
                        near(a.horizontal.m(), b.horizontal.m());
                        near(a.level.m(), b.level.m());
                        near(mid.chainage.m(), cut.chainage.m());
                    }
                }
            }
        }
    }
}
