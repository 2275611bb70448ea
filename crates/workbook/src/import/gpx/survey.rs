//! A track to a line: usable fixes, in the line's direction, thinned, named,
//! with distances and turns.

use super::super::geodesic::{self, Leg, Position};
use super::super::thin::{Point, thin};
use super::super::{Amount, ImportedLine, ImportedRow, Note, Refusal};
use super::{Fix, Gpx, LONGEST_LEG_M, LineKind, NAME_REACH_M, Settings};
use crate::book::{DistanceKind, Reckoning};
use crate::reading::DecimalMark;
use crate::resolve::profile::MOST_STATIONS;

/// A fix that can be used.
struct Usable<'a> {
    /// Its number in the file.
    number: usize,
    fix: &'a Fix,
    position: Position,
    height_m: f64,
    /// Its names: its own, or a waypoint's.
    name: String,
    /// Whether it stays however near the line it lies.
    pinned: bool,
}

impl Gpx {
    /// The line of one of [`Gpx::lines`].
    ///
    /// Distances are horizontal, running from the first station, straight from
    /// station to station along the ellipsoid
    /// ([`geodesic::leg`]); heights as in the file; turns on the plan from
    /// the directions of the legs. Waypoints name the fix that lies nearest,
    /// which is then kept.
    ///
    /// # Errors
    /// [`Refusal`], naming the fix where there is one.
    pub fn survey(&self, line: usize, settings: &Settings) -> Result<ImportedLine, Refusal> {
        if !(0.0..=100.0).contains(&settings.tolerance_m) {
            return Err(Refusal::Tolerance {
                tolerance_m: settings.tolerance_m,
            });
        }
        let line = self.lines.get(line).ok_or(Refusal::NoSuchLine)?;
        let mut notes = vec![Note::SatelliteHeights];
        if self.doctype {
            notes.push(Note::Doctype);
        }
        let (mut usable, left_out) = usable(&line.fixes, settings, &mut notes)?;
        if settings.reversed {
            usable.reverse();
        }
        let length_before_m = walk(&usable, settings.reversed, &mut notes)?;
        let points = points(&usable);
        if line.kind == LineKind::Waypoints {
            // Each was set on purpose.
            for fix in &mut usable {
                fix.pinned = true;
            }
        } else {
            self.name(&mut usable, &points, &mut notes);
        }
        let pinned: Vec<bool> = usable.iter().map(|u| u.pinned).collect();
        let stays = thin(&points, &pinned, settings.tolerance_m, MOST_STATIONS).ok_or(
            Refusal::TooManyStations {
                tolerance_m: settings.tolerance_m,
            },
        )?;
        let kept: Vec<&Usable<'_>> = stays.iter().filter_map(|i| usable.get(*i)).collect();
        let legs = legs(&kept)?;
        let rows = rows(&kept, &legs);
        // Two fixes at one place: nothing to lay a pipe along.
        if rows.len() < 2 {
            return Err(Refusal::TooFewFixes { fixes: rows.len() });
        }
        if rows.len() < usable.len() {
            notes.push(Note::Thinned {
                from: usable.len(),
                kept: rows.len(),
                tolerance_m: settings.tolerance_m,
                length_before_m,
                length_after_m: legs.iter().map(|l| l.distance_m).sum(),
            });
        }
        direction(&usable, &mut notes);
        Ok(ImportedLine {
            distance_kind: DistanceKind::Horizontal,
            reckoning: Reckoning::FromStart,
            rows,
            left_out,
            notes,
        })
    }

    /// Names fixes by the waypoints near them.
    fn name(&self, usable: &mut [Usable<'_>], points: &[Point], notes: &mut Vec<Note>) {
        let Some(origin) = origin(usable) else { return };
        let mut astray = 0;
        let mut first: Option<(String, f64)> = None;
        for waypoint in self.waypoints.iter().filter(|w| !w.name.is_empty()) {
            let Some(position) = waypoint.position else {
                continue;
            };
            let (north, east) = geodesic::plane(origin, position);
            let off2 = |p: &Point| {
                let (n, e) = (p[0] - north, p[1] - east);
                n * n + e * e
            };
            let nearest = points
                .iter()
                .map(off2)
                .enumerate()
                .min_by(|a, b| a.1.total_cmp(&b.1));
            let Some((i, off2)) = nearest else {
                return;
            };
            if off2.sqrt() > NAME_REACH_M {
                astray += 1;
                first.get_or_insert((waypoint.name.clone(), off2.sqrt()));
                continue;
            }
            let fix = &mut usable[i];
            if !fix.pinned || fix.name.is_empty() {
                fix.name.clone_from(&waypoint.name);
            } else if fix.name != waypoint.name {
                fix.name = format!("{}, {}", fix.name, waypoint.name);
            }
            fix.pinned = true;
        }
        if let Some((name, distance_m)) = first {
            notes.push(Note::Astray {
                count: astray,
                name,
                distance_m,
            });
        }
    }
}

/// The fixes that can be used, and the numbers of those left out.
fn usable<'a>(
    fixes: &'a [Fix],
    settings: &Settings,
    notes: &mut Vec<Note>,
) -> Result<(Vec<Usable<'a>>, Vec<usize>), Refusal> {
    let mut usable = Vec::with_capacity(fixes.len());
    let mut left_out = Vec::new();
    let mut first = None;
    for (number, fix) in (1..).zip(fixes) {
        match (fix.fault(number), fix.position, fix.height_m()) {
            (None, Some(position), Some(height_m)) => usable.push(Usable {
                number,
                fix,
                position,
                height_m,
                name: fix.name.clone(),
                pinned: false,
            }),
            (fault, ..) => {
                left_out.push(number);
                first = first.or(fault);
            }
        }
    }
    if let Some(fault) = first {
        let count = left_out.len();
        if !settings.leave_out_faulty {
            return Err(Refusal::Fix { fault, count });
        }
        notes.push(Note::FixesLeftOut {
            first: fault,
            count,
        });
    }
    if usable.len() < 2 {
        return Err(Refusal::TooFewFixes {
            fixes: usable.len(),
        });
    }
    Ok((usable, left_out))
}

fn leg(a: &Usable<'_>, b: &Usable<'_>) -> Result<Leg, Refusal> {
    let far = |distance_m| Refusal::Jump {
        fix: b.number,
        distance_m,
    };
    // Where the geodesic does not settle, the two are half the earth apart.
    let leg = geodesic::leg(a.position, b.position).ok_or(far(2.0e7))?;
    if leg.distance_m > LONGEST_LEG_M {
        return Err(far(leg.distance_m));
    }
    Ok(leg)
}

/// Length on the plan through every fix; says the gaps.
fn walk(usable: &[Usable<'_>], reversed: bool, notes: &mut Vec<Note>) -> Result<f64, Refusal> {
    let mut length = 0.0;
    let mut gaps = 0;
    let mut widest = (0, -1.0);
    for pair in usable.windows(2) {
        let leg = leg(&pair[0], &pair[1])?;
        length += leg.distance_m;
        // Walked backwards, the fix after the gap comes first.
        let after = if reversed { &pair[0] } else { &pair[1] };
        if after.fix.after_gap {
            gaps += 1;
            if leg.distance_m > widest.1 {
                widest = (after.number, leg.distance_m);
            }
        }
    }
    if gaps > 0 {
        notes.push(Note::Joined {
            count: gaps,
            fix: widest.0,
            gap_m: widest.1,
        });
    }
    Ok(length)
}

fn origin(usable: &[Usable<'_>]) -> Option<Position> {
    usable.get(usable.len() / 2).map(|u| u.position)
}

fn points(usable: &[Usable<'_>]) -> Vec<Point> {
    let Some(origin) = origin(usable) else {
        return Vec::new();
    };
    usable
        .iter()
        .map(|u| {
            let (north, east) = geodesic::plane(origin, u.position);
            [north, east, u.height_m]
        })
        .collect()
}

/// The legs between the fixes kept. Those kept may lie farther apart than two
/// fixes in a row.
fn legs(kept: &[&Usable<'_>]) -> Result<Vec<Leg>, Refusal> {
    kept.windows(2)
        .map(|w| {
            geodesic::leg(w[0].position, w[1].position).ok_or(Refusal::Jump {
                fix: w[1].number,
                distance_m: 2.0e7,
            })
        })
        .collect()
}

fn rows(kept: &[&Usable<'_>], legs: &[Leg]) -> Vec<ImportedRow> {
    let mut along = 0.0;
    let mut rows: Vec<ImportedRow> = Vec::with_capacity(kept.len());
    // Direction at the end of the last leg that has one.
    let mut ahead: Option<f64> = None;
    for (i, fix) in kept.iter().enumerate() {
        if let Some(leg) = i.checked_sub(1).and_then(|i| legs.get(i))
            && leg.distance_m > 0.0
        {
            along += leg.distance_m;
            ahead = Some(leg.to_deg);
        }
        let plan_turn = legs
            .get(i)
            .filter(|l| l.distance_m > 0.0)
            .zip(ahead)
            .and_then(|(leg, ahead)| {
                let turn = geodesic::turn(leg.from_deg - ahead);
                amount(&format!("{turn:.1}"), "°")
            });
        // To the centimetre: a fix is not sure to a metre.
        let distance = amount(&format!("{along:.2}"), "m");
        let level = amount(&fix.fix.elevation, "m");
        match rows.last_mut() {
            // The same place twice over is one station.
            Some(last) if last.distance == distance && last.level == level => {
                last.plan_turn = plan_turn;
            }
            _ => rows.push(ImportedRow {
                row: fix.number,
                name: fix.name.clone(),
                distance,
                level,
                plan_turn,
                ..ImportedRow::default()
            }),
        }
    }
    rows
}

fn amount(text: &str, unit: &'static str) -> Option<Amount> {
    Some(Amount {
        typed: text.to_owned(),
        text: text.to_owned(),
        unit,
        mark: DecimalMark::Point,
        value: Some(text.parse().ok()?),
    })
}

fn direction(usable: &[Usable<'_>], notes: &mut Vec<Note>) {
    let (Some(first), Some(last)) = (usable.first(), usable.last()) else {
        return;
    };
    let flat = usable
        .iter()
        .all(|u| (u.height_m - first.height_m).abs() < 1e-6);
    if flat {
        notes.push(Note::Flat);
    } else if last.height_m > first.height_m {
        notes.push(Note::Uphill {
            rise_m: last.height_m - first.height_m,
        });
    }
}
