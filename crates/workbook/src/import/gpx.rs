//! Tracks, routes and waypoints of satellite receivers: GPX 1.1, also 1.0, in
//! any namespace.
//!
//! [`open`] reads a file into a [`Gpx`]; [`Gpx::survey`] makes a line of one
//! of its tracks: joined, thinned, named by the waypoints near it, with
//! horizontal distances along the ellipsoid and the turns on the plan.
//!
//! Source of the format: GPX 1.1 schema documentation (topografix, 2004):
//! latitude and longitude in degrees on WGS 84, elevation in metres.

mod read;
mod survey;
#[cfg(test)]
mod tests;

use super::geodesic::Position;
use super::thin::USUAL_TOLERANCE_M;
use super::{Fault, Meaning, Refusal, RowFault};

/// Most fixes of a file: more than a day's walk at one a second.
pub const MOST_FIXES: usize = 100_000;

/// Most waypoints of a file: each is held against every fix.
pub const MOST_WAYPOINTS: usize = 5000;

/// Farthest two fixes in a row may lie apart, m: a wrong fix, or no survey.
pub const LONGEST_LEG_M: f64 = 10_000.0;

/// Farthest a waypoint may lie from the fix it names on the plan, m
/// (common practice: a few times what a fix is sure to).
pub const NAME_REACH_M: f64 = 25.0;

/// Error of height that 95 of 100 fixes stay within, averaged over the earth,
/// from the satellites' signals alone; at the worst site it is 33 m. Air and
/// receiver add to it. Source: GPS Standard Positioning Service Performance
/// Standard, 5th edition 2020, table 3.8-3 (from memory).
pub const HEIGHT_ERROR_M: f64 = 13.0;

/// One fix as it stands in the file.
#[derive(Debug, Clone, PartialEq)]
pub struct Fix {
    /// Where it is; none where latitude or longitude cannot be read.
    pub position: Option<Position>,
    /// Its height in metres as it stands, empty where there is none.
    pub elevation: String,
    /// Its own name, if it has one.
    pub name: String,
    /// Whether it begins a segment after the first.
    pub after_gap: bool,
}

impl Fix {
    /// The height, m, if it reads as one a station may have.
    #[must_use]
    pub fn height_m(&self) -> Option<f64> {
        let (least, most) = Meaning::Level.range();
        let value = self.elevation.parse::<f64>().ok()?;
        (least..=most).contains(&value).then_some(value)
    }

    /// Why the fix cannot be used, if it cannot.
    #[must_use]
    pub fn fault(&self, number: usize) -> Option<RowFault> {
        let fault = if self.position.is_none() {
            Fault::NoPosition
        } else if self.height_m().is_some() {
            return None;
        } else if self.elevation.is_empty() {
            Fault::NoElevation
        } else {
            use crate::reading::Unreadable;
            use crate::units::Kind;
            match self.elevation.parse::<f64>() {
                Ok(value) if value.is_finite() => {
                    let (least, most) = Meaning::Level.range();
                    Fault::OutOfRange {
                        value,
                        least,
                        most,
                        kind: Kind::Level,
                    }
                }
                _ => Fault::Unreadable(Kind::Level, Unreadable::NotANumber),
            }
        };
        Some(RowFault {
            row: number,
            column: None,
            meaning: Meaning::Level,
            text: self.elevation.clone(),
            fault,
        })
    }
}

/// What a line of a file is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum LineKind {
    /// A track: recorded while walking.
    Track,
    /// A route: points set by hand.
    Route,
    /// The waypoints in the order of the file.
    Waypoints,
}

/// A track, a route, or the waypoints taken as a line.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// What it is.
    pub kind: LineKind,
    /// Its name in the file; may be empty.
    pub name: String,
    /// Its fixes; number 1 is the first.
    pub fixes: Vec<Fix>,
}

/// A line of the file, for a list to choose from.
#[derive(Debug, Clone, PartialEq)]
pub struct Summary {
    /// What it is.
    pub kind: LineKind,
    /// Its name; may be empty.
    pub name: String,
    /// How many fixes it has.
    pub fixes: usize,
    /// How many segments.
    pub segments: usize,
    /// How many of the fixes cannot be used.
    pub faulty: usize,
    /// The first of these.
    pub first_fault: Option<RowFault>,
    /// Height of the first and of the last fix that can be used, m.
    pub ends_m: Option<(f64, f64)>,
}

/// A file as read, before it is taken.
#[derive(Debug, Clone, PartialEq)]
pub struct Gpx {
    /// Tracks, then routes, then the waypoints if there are two or more.
    pub lines: Vec<Line>,
    /// The waypoints.
    pub waypoints: Vec<Fix>,
    /// Whether a document type was declared: none of its entities is
    /// expanded.
    pub doctype: bool,
}

/// How to make a line of a track.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Settings {
    /// Tolerance of thinning, m, 0 to 100: no fix that goes lies farther from
    /// the line that stays. Zero drops only what lies on it.
    pub tolerance_m: f64,
    /// Whether fixes that cannot be used are left out; else they refuse the
    /// track.
    pub leave_out_faulty: bool,
    /// Whether the track was walked uphill and is to be turned round.
    pub reversed: bool,
}

impl Default for Settings {
    fn default() -> Settings {
        Settings {
            tolerance_m: USUAL_TOLERANCE_M,
            leave_out_faulty: false,
            reversed: false,
        }
    }
}

/// Reads the bytes of a file.
///
/// # Errors
/// [`Refusal`]; never panics, whatever the bytes.
pub fn open(bytes: &[u8]) -> Result<Gpx, Refusal> {
    let (text, _) = super::decode::decode(bytes)?;
    let mut gpx = read::read(&text)?;
    if gpx.waypoints.len() >= 2 {
        gpx.lines.push(Line {
            kind: LineKind::Waypoints,
            name: String::new(),
            fixes: gpx.waypoints.clone(),
        });
    }
    if gpx.lines.is_empty() {
        return Err(Refusal::NoTrack);
    }
    Ok(gpx)
}

/// Whether a file looks like GPX and not like a table: it begins with a tag.
#[must_use]
pub fn looks_like_gpx(bytes: &[u8]) -> bool {
    // Byte order marks and the zeros of UTF-16 left aside.
    bytes
        .iter()
        .find(|b| !(**b == 0 || **b >= 0x80 || b.is_ascii_whitespace()))
        .is_some_and(|b| *b == b'<')
}

impl Gpx {
    /// What there is to choose from, in the order of [`Gpx::lines`].
    #[must_use]
    pub fn summaries(&self) -> Vec<Summary> {
        self.lines.iter().map(summary).collect()
    }
}

fn summary(line: &Line) -> Summary {
    let mut faulty = 0;
    let mut first_fault = None;
    let mut ends_m: Option<(f64, f64)> = None;
    for (number, fix) in (1..).zip(&line.fixes) {
        match (fix.fault(number), fix.height_m()) {
            (None, Some(height)) => {
                ends_m = Some((ends_m.map_or(height, |e| e.0), height));
            }
            (fault, _) => {
                faulty += 1;
                first_fault = first_fault.or(fault);
            }
        }
    }
    Summary {
        kind: line.kind,
        name: line.name.clone(),
        fixes: line.fixes.len(),
        segments: 1 + line.fixes.iter().filter(|f| f.after_gap).count(),
        faulty,
        first_fault,
        ends_m,
    }
}
