//! Where the pressure runs through the class of a stretch's pipe: a study that
//! proposes where to cut the stretch, and what to lay below.
//!
//! A stretch's pipe is enough as far as the highest pressure leaves the margin
//! called tight within what it may bear at the warmest wall (in a surge, within
//! what the user allows it): the highest level of the transient along the line
//! where that is solved, else the highest forebay level. Below that place the
//! weakest pipe of the same series and outside diameter is proposed that is
//! enough for the stretch. Another pipe has another wave speed, so what is
//! proposed is judged as any other pipe.

use crate::book::{Book, Id};
use crate::edit;
use crate::evaluate::Findings;
use crate::figure::{CloneGap, Figure, Gap, Lack};
use crate::resolve::profile::StationAt;
use crate::transient::EnvelopeNode;
use hydraulics::constants::standard_gravity;
use hydraulics::quantity::{GaugePressure, Head, Level, PipeLength};
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
    let highest = match &wall.surge {
        Ok(surge) if surge.pressure > standing => surge.pressure,
        _ => standing,
    };
    // Where the user allows more in a surge, that is what surge is held to.
    let in_surge = match stretch.surge_allowed.clone()? {
        Some(allowed) => GaugePressure::new(allowed.get() * keep),
        None => holds_to,
    };
    if standing <= holds_to && highest <= in_surge {
        return Ok(Proposal::Enough);
    }
    if crate::resolve::parts::own_id(&pipe.id).is_some() {
        return Ok(Proposal::OwnPipe);
    }
    let kin = kin(pipe, found.warmest_wall.clone()?, keep);
    let weakest = |pressure: GaugePressure| kin.iter().find(|c| c.enough_to >= pressure);
    // A pipe's own allowance says nothing of another: surge must hold within
    // the lasting pressure of the one proposed.
    let Some(below) = weakest(highest) else {
        return Ok(Proposal::NoneStronger);
    };
    let below = below.pipe.id.clone();
    let density = found.cold_water.clone()?.density();
    let head = |pressure: GaugePressure| pressure.head(density, standard_gravity());
    let forebay = found.forebay.highest.clone()?;
    let standing_at = place(findings, (span.from, span.to), head(holds_to), &|_| forebay)?;
    let surge_at = match &findings.transient.surge {
        Ok(surge) if highest > in_surge => {
            let level = |at| highest_level(&surge.envelope, at).unwrap_or(forebay);
            place(findings, (span.from, span.to), head(in_surge), &level)?
        }
        _ => Some(Reached::End),
    };
    let reached = match (standing_at, surge_at) {
        (Some(a), Some(b)) => Some(a.first(b)),
        _ => None,
    };
    let Some(Reached::At(chainage, at)) = reached else {
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

/// How far down a stretch its pipe is enough.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Reached {
    /// To this place.
    At(PipeLength, CutAt),
    /// To its end.
    End,
}

impl Reached {
    /// The one further up.
    fn first(self, other: Reached) -> Reached {
        match (self, other) {
            (Reached::At(a, _), Reached::At(b, _)) if b < a => other,
            (Reached::End, _) => other,
            _ => self,
        }
    }
}

/// Highest level of the transient at a chainage, straight between nodes.
fn highest_level(envelope: &[EnvelopeNode], at: PipeLength) -> Option<Level> {
    let after = envelope.partition_point(|n| n.chainage < at);
    let b = envelope.get(after).or(envelope.last())?;
    let Some(a) = after.checked_sub(1).and_then(|i| envelope.get(i)) else {
        return Some(b.highest);
    };
    let width = (b.chainage - a.chainage).m();
    if width <= 0.0 {
        return Some(if a.highest > b.highest {
            a.highest
        } else {
            b.highest
        });
    }
    let share = ((at - a.chainage).m() / width).min(1.0);
    Some(Level::from_m(
        a.highest.m() + share * (b.highest - a.highest).m(),
    ))
}

/// Down to where the pressure head, from the level that stands or rises over
/// each place, stays within `bears`; none where there is no such place to cut
/// at. Straight between stations.
fn place(
    findings: &Findings,
    (from, to): (PipeLength, PipeLength),
    bears: Head,
    level_over: &dyn Fn(PipeLength) -> Level,
) -> Figure<Option<Reached>> {
    let stations = findings.resolved.profile.whole()?;
    let spare = |s: &StationAt| (bears - (level_over(s.chainage) - s.level)).m();
    let mut above = None;
    for pair in stations.windows(2) {
        let [a, b] = pair else { continue };
        if b.chainage <= from || a.chainage >= to {
            continue;
        }
        let (at_a, at_b) = (spare(a), spare(b));
        if at_a < 0.0 {
            break;
        }
        if at_b < 0.0 {
            let along = (b.chainage - a.chainage).m();
            above = Some((a, along * at_a / (at_a - at_b)));
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
        return Ok(inside.then_some(Reached::At(a.chainage, CutAt::Station(a.id))));
    }
    let down = PipeLength::from_m(centimetres);
    Ok(Some(Reached::At(
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

    /// The demo with one weak pipe from end to end, before a closing time is
    /// entered.
    fn weak() -> Book {
        let mut book = demo("demo");
        book.surge.closing_time_s = Entry::default();
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

    /// With surge the same pipe is enough less far down, and what is laid so
    /// bears the surge too.
    #[test]
    fn a_cut_means_with_surge() {
        let still = weak();
        let mut book = still.clone();
        let closing = Entry::typed("6", "s", Field::ClosingTime.kind(), DecimalMark::Point);
        book.surge.closing_time_s = closing;
        let (_, standing) = cut_of(&still);
        let (found, cut) = cut_of(&book);
        assert!(cut.chainage < standing.chainage);
        apply(&mut book, &found, &cut).unwrap();
        let after = evaluate(&book);
        for wall in &after.walls.stretches {
            assert!(wall.surge_share.clone().unwrap() <= 1.0);
        }
        let top = after.walls.stretches[0].surge_share.clone().unwrap();
        assert!(top > 0.8, "{top}");
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
