//! What an import says: refusals, obstacles, faults of rows, notes.

use super::Meaning;
use crate::book::{DistanceKind, Reckoning};
use crate::reading::{DecimalMark, Unreadable};
use crate::units::Kind;

/// Why a whole file is refused.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Refusal {
    /// Too long.
    TooLong {
        /// Its length, bytes.
        bytes: usize,
    },
    /// Nothing stands in it.
    Empty,
    /// A spreadsheet's own file or another packed one, not text.
    Packed,
    /// Not text: it holds zero bytes.
    NotText,
    /// More rows than a line takes.
    TooManyRows {
        /// How many.
        rows: usize,
    },
    /// More columns than any survey has: most likely not a table.
    TooManyColumns {
        /// The row.
        row: usize,
        /// How many.
        columns: usize,
    },
    /// A quotation mark is opened and never closed, so that rows are lost.
    QuoteOpen {
        /// The row it opens in.
        row: usize,
    },
    /// Only headings or remarks: no row of figures.
    NoRows,
    /// Not XML, or not well formed.
    NotXml {
        /// Line of the trouble.
        line: usize,
        /// The reader's word for it, in English.
        why: String,
    },
    /// XML, but not GPX.
    NotGpx {
        /// Name of its outermost element.
        root: String,
    },
    /// Cut short: elements are left open.
    Cut {
        /// Its last line.
        line: usize,
    },
    /// Elements nested deeper than any track.
    TooDeep {
        /// Where.
        line: usize,
    },
    /// Neither track, nor route, nor two waypoints.
    NoTrack,
    /// More fixes than a line is thinned from.
    TooManyFixes,
    /// More waypoints than are held against the fixes.
    TooManyWaypoints,
    /// The line asked for is not in the file.
    NoSuchLine,
    /// Fewer than two fixes can be used.
    TooFewFixes {
        /// How many can.
        fixes: usize,
    },
    /// A fix cannot be used, and is not to be left out.
    Fix {
        /// The fix.
        fault: RowFault,
        /// How many such there are.
        count: usize,
    },
    /// Two fixes in a row farther apart than a survey walks.
    Jump {
        /// The later fix, by number.
        fix: usize,
        /// How far, m.
        distance_m: f64,
    },
    /// More stations are left after thinning than a line takes.
    TooManyStations {
        /// Tolerance it was thinned to, m.
        tolerance_m: f64,
    },
    /// The tolerance is no length that can be thinned to.
    Tolerance {
        /// What was asked for, m.
        tolerance_m: f64,
    },
}

/// What stands in the way until the user chooses.
#[derive(Debug, Clone, PartialEq, Eq)]
#[non_exhaustive]
pub enum Obstacle {
    /// No column is read as this.
    NoColumn(Meaning),
    /// Neither levels, nor angles, nor staff readings.
    NoHeights,
    /// Two columns are read as the same.
    Twice {
        /// What.
        meaning: Meaning,
        /// The first column, from 0.
        first: usize,
        /// The second column, from 0.
        second: usize,
    },
    /// The unit a column names is none that is known for it.
    Unit {
        /// The column, from 0.
        column: usize,
        /// The unit as it stands.
        unit: String,
    },
    /// A slope that may be per cent or degrees.
    SlopeUnit {
        /// The column, from 0.
        column: usize,
    },
}

/// Why one cell or row cannot be used.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Fault {
    /// Not a number of its kind.
    Unreadable(Kind, Unreadable),
    /// Outside what makes sense.
    OutOfRange {
        /// The value read, in the base unit.
        value: f64,
        /// Least value taken.
        least: f64,
        /// Greatest value taken.
        most: f64,
        /// What it measures.
        kind: Kind,
    },
    /// Nothing stands where a figure is needed.
    Missing,
    /// Longer than any name or number.
    TooLong {
        /// Characters.
        characters: usize,
    },
    /// A running distance less than the one before.
    Behind {
        /// By how much, m.
        back_m: f64,
    },
    /// A fix without a height.
    NoElevation,
    /// A fix without a latitude and longitude that can be read.
    NoPosition,
}

/// A fault and its place in the file.
#[derive(Debug, Clone, PartialEq)]
pub struct RowFault {
    /// Row of the file, from 1; of a track, the fix by number.
    pub row: usize,
    /// Column, from 0; none for a fix of a track.
    pub column: Option<usize>,
    /// What the cell was to say.
    pub meaning: Meaning,
    /// The text as it stands; of a cell too long, its beginning.
    pub text: String,
    /// Why it cannot be used.
    pub fault: Fault,
}

/// What was taken for granted, left out, or must be known before building.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Note {
    /// Not Unicode: read as Western European text.
    WesternText,
    /// Rows above the headings or the first figures were left out.
    Above {
        /// How many.
        rows: usize,
    },
    /// Empty rows were left out.
    EmptyRows {
        /// How many.
        rows: usize,
    },
    /// No heading says what the columns are: read by their place.
    GuessedColumns,
    /// A second column of the same was left out.
    Second {
        /// The column, from 0.
        column: usize,
        /// What it says.
        meaning: Meaning,
    },
    /// A text that reads two ways, and the mark it was read with.
    Ambiguous {
        /// The first such text.
        text: String,
        /// The mark.
        mark: DecimalMark,
        /// How many such there are.
        count: usize,
    },
    /// Some numbers have a decimal point, others a decimal comma.
    MixedMarks {
        /// One with a point.
        point: String,
        /// One with a comma.
        comma: String,
    },
    /// Nothing says whether distances are along the slope or horizontal.
    DistanceKindTaken(DistanceKind),
    /// Nothing says whether distances run or are legs: told by the figures.
    ReckoningGuessed(Reckoning),
    /// Each back reading of the staff stands in the row of the point sighted
    /// back to, as in a levelling book: read with the row below.
    StaffBooked,
    /// Leg distances of rows left out are missing from the line, which is
    /// shorter than surveyed.
    LegsLost {
        /// How many rows.
        rows: usize,
    },
    /// Heights of satellite fixes are far less sure than a penstock needs.
    SatelliteHeights,
    /// Fixes dropped by thinning.
    Thinned {
        /// Fixes there were.
        from: usize,
        /// Stations kept.
        kept: usize,
        /// Tolerance, m.
        tolerance_m: f64,
        /// Length on the plan before, m.
        length_before_m: f64,
        /// Length on the plan after, m.
        length_after_m: f64,
    },
    /// Segments joined by straight lines.
    Joined {
        /// How many gaps.
        count: usize,
        /// The first fix after the widest, by number.
        fix: usize,
        /// How wide that is on the plan, m.
        gap_m: f64,
    },
    /// Fixes left out because of a fault.
    FixesLeftOut {
        /// The first of them.
        first: RowFault,
        /// How many.
        count: usize,
    },
    /// The line ends higher than it begins.
    Uphill {
        /// By how much, m.
        rise_m: f64,
    },
    /// Every fix has the same height: drawn on a map without heights.
    Flat,
    /// Waypoints too far from the line to name a station.
    Astray {
        /// How many.
        count: usize,
        /// The name of the first.
        name: String,
        /// How far that lies from the line, m.
        distance_m: f64,
    },
    /// The file declares entities of its own; none was expanded.
    Doctype,
}
