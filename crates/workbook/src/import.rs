//! Survey files and pasted tables to rows of the line: bytes in, typed rows
//! out, nothing of the book touched.
//!
//! [`table`] reads what spreadsheets and loggers write or what is pasted from
//! them, [`gpx`] the tracks and routes of satellite receivers. Both end in an
//! [`ImportedLine`]: rows with each cell's text as it stood in the file, its
//! unit and its value. [`ImportedLine::stations`] makes stations of them.
//!
//! What cannot be used is a value, never a panic: a [`Refusal`] of the whole
//! file, an [`Obstacle`] that a choice of the user's clears away, a [`Fault`]
//! of one row, a [`Note`] on what was taken for granted.

pub mod decode;
pub mod geodesic;
pub mod gpx;
mod heading;
mod note;
pub mod table;
pub mod thin;

pub use decode::Encoding;
pub use note::{Fault, Note, Obstacle, Refusal, RowFault};

use crate::book::{Book, DistanceKind, Id, Reckoning, Station, SurveyWay};
use crate::entry::Entry;
use crate::field::Field;
use crate::reading::DecimalMark;
use crate::units::{Kind, UnitSystem};

/// Longest file taken, bytes.
pub const LONGEST: usize = 10 * 1024 * 1024;

/// Longest cell or name taken, characters: a longer one is none.
pub const LONGEST_CELL: usize = 200;

/// What a column of a table says.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Meaning {
    /// Not taken over.
    LeftOut,
    /// Name of the station.
    Name,
    /// Distance, along the slope or horizontal, running or leg by leg.
    Distance,
    /// Level of the pipe's axis.
    Level,
    /// Vertical angle towards the next or from the station before, sighted
    /// forwards: above zero uphill. Degrees or per cent.
    ForeSight,
    /// The same sighted back.
    BackSight,
    /// Staff or hose reading at the station behind.
    StaffBack,
    /// Staff or hose reading at the station ahead.
    StaffFore,
    /// Turn of the line on the plan, degrees, to the right above zero.
    PlanTurn,
}

impl Meaning {
    /// Every meaning, in the order a list offers them.
    pub const ALL: [Meaning; 9] = [
        Meaning::LeftOut,
        Meaning::Name,
        Meaning::Distance,
        Meaning::Level,
        Meaning::ForeSight,
        Meaning::BackSight,
        Meaning::StaffBack,
        Meaning::StaffFore,
        Meaning::PlanTurn,
    ];

    /// What its numbers measure; none for a text.
    #[must_use]
    pub fn kind(self) -> Option<Kind> {
        match self {
            Meaning::LeftOut | Meaning::Name => None,
            Meaning::Distance | Meaning::StaffBack | Meaning::StaffFore => Some(Kind::Distance),
            Meaning::Level => Some(Kind::Level),
            Meaning::ForeSight | Meaning::BackSight | Meaning::PlanTurn => Some(Kind::Angle),
        }
    }

    /// The units its column may be in, as printed; the first is metric.
    #[must_use]
    pub fn units(self) -> &'static [&'static str] {
        match self {
            Meaning::LeftOut | Meaning::Name => &[],
            Meaning::Distance => &["m", "ft", "km"],
            Meaning::Level => &["m", "ft"],
            Meaning::StaffBack | Meaning::StaffFore => &["m", "ft", "cm", "mm"],
            Meaning::ForeSight | Meaning::BackSight => &["°", "%"],
            Meaning::PlanTurn => &["°"],
        }
    }

    /// The unit of a column that names none, in a book of `system`.
    #[must_use]
    pub fn usual_unit(self, system: UnitSystem) -> &'static str {
        match (self.units(), system) {
            ([], _) => "",
            ([_, "ft", ..], UnitSystem::UsCustomary) => "ft",
            (units, _) => units[0],
        }
    }

    /// Least and greatest value taken, in the base unit of [`Meaning::kind`].
    /// Distances and levels as in the book's own fields; a staff is at most
    /// 10 m long (common practice).
    #[must_use]
    pub fn range(self) -> (f64, f64) {
        match self {
            Meaning::LeftOut | Meaning::Name => (f64::NEG_INFINITY, f64::INFINITY),
            Meaning::Distance => Field::StationDistance(0).range(),
            Meaning::Level => Field::StationLevel(0).range(),
            Meaning::ForeSight | Meaning::BackSight => (-90.0, 90.0),
            Meaning::StaffBack | Meaning::StaffFore => (0.0, 10.0),
            Meaning::PlanTurn => (-180.0, 180.0),
        }
    }
}

/// A number of the file: as it stood there, and as it is read.
#[derive(Debug, Clone, PartialEq)]
pub struct Amount {
    /// As it stood in the file, usable or not.
    pub typed: String,
    /// As it goes into an entry: as typed, but for a chainage such as 0+125,
    /// which an entry cannot hold.
    pub text: String,
    /// The unit of a bare number, as printed.
    pub unit: &'static str,
    /// The mark it is read with.
    pub mark: DecimalMark,
    /// The value in the base unit of its meaning (m, degree); none where the
    /// text cannot be used.
    pub value: Option<f64>,
}

impl Amount {
    /// The entry of this amount in a field of `kind`: text and unit as in the
    /// file, usable or not. Where the kind does not know the unit (a slope in
    /// per cent in a field of degrees), the value in the kind's own unit.
    #[must_use]
    pub fn entry(&self, kind: Kind) -> Entry {
        match self.value {
            Some(value) if kind.unit(self.unit).is_none() => {
                Entry::set(value, kind, UnitSystem::Metric)
            }
            _ => Entry::typed(&self.text, self.unit, kind, self.mark),
        }
    }
}

/// One row of the survey. A cell that was empty or had no column is none; one
/// that cannot be used is kept as it stood.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct ImportedRow {
    /// Its row in the file, from 1, as a spreadsheet counts; of a track, the
    /// number of the fix.
    pub row: usize,
    /// Name of the station.
    pub name: String,
    /// Distance, of the line's kind and reckoning.
    pub distance: Option<Amount>,
    /// Level.
    pub level: Option<Amount>,
    /// Vertical angle sighted forwards.
    pub fore_sight: Option<Amount>,
    /// Vertical angle sighted back.
    pub back_sight: Option<Amount>,
    /// Staff reading behind.
    pub staff_back: Option<Amount>,
    /// Staff reading ahead.
    pub staff_fore: Option<Amount>,
    /// Turn on the plan, to the right above zero.
    pub plan_turn: Option<Amount>,
}

impl ImportedRow {
    /// The amount of a meaning.
    #[must_use]
    pub fn amount(&self, meaning: Meaning) -> Option<&Amount> {
        match meaning {
            Meaning::LeftOut | Meaning::Name => None,
            Meaning::Distance => self.distance.as_ref(),
            Meaning::Level => self.level.as_ref(),
            Meaning::ForeSight => self.fore_sight.as_ref(),
            Meaning::BackSight => self.back_sight.as_ref(),
            Meaning::StaffBack => self.staff_back.as_ref(),
            Meaning::StaffFore => self.staff_fore.as_ref(),
            Meaning::PlanTurn => self.plan_turn.as_ref(),
        }
    }

    fn place(&mut self, meaning: Meaning) -> Option<&mut Option<Amount>> {
        Some(match meaning {
            Meaning::LeftOut | Meaning::Name => return None,
            Meaning::Distance => &mut self.distance,
            Meaning::Level => &mut self.level,
            Meaning::ForeSight => &mut self.fore_sight,
            Meaning::BackSight => &mut self.back_sight,
            Meaning::StaffBack => &mut self.staff_back,
            Meaning::StaffFore => &mut self.staff_fore,
            Meaning::PlanTurn => &mut self.plan_turn,
        })
    }
}

/// A survey as taken from a file, ready to become stations.
#[derive(Debug, Clone, PartialEq)]
pub struct ImportedLine {
    /// Along the slope or horizontal.
    pub distance_kind: DistanceKind,
    /// Running from the start, or leg by leg.
    pub reckoning: Reckoning,
    /// The rows, in the order of the file (a reversed track: of the line).
    pub rows: Vec<ImportedRow>,
    /// Rows of the file left out because of a fault.
    pub left_out: Vec<usize>,
    /// What was taken for granted, and cautions.
    pub notes: Vec<Note>,
}

impl ImportedLine {
    /// The stations of these rows, numbered from `first_id`. The book's line
    /// must take [`ImportedLine::distance_kind`] and
    /// [`ImportedLine::reckoning`] with them.
    ///
    /// A row without a level is levelled by its sights, or else by its staff
    /// readings, where it has them; the first of a line has a level.
    #[must_use]
    pub fn stations(&self, first_id: Id) -> Vec<Station> {
        let entry = |amount: &Option<Amount>, kind| {
            amount
                .as_ref()
                .map_or_else(Entry::default, |a| a.entry(kind))
        };
        (first_id..)
            .zip(&self.rows)
            .enumerate()
            .map(|(place, (id, row))| {
                let way = match (&row.level, &row.fore_sight, &row.staff_fore) {
                    (None, Some(_), _) if place > 0 => SurveyWay::Angle,
                    (None, None, Some(_)) if place > 0 => SurveyWay::Staff,
                    _ => SurveyWay::Level,
                };
                Station {
                    id,
                    name: row.name.clone(),
                    way,
                    distance_m: entry(&row.distance, Kind::Distance),
                    level_m: entry(&row.level, Kind::Level),
                    fore_sight_deg: entry(&row.fore_sight, Kind::Angle),
                    back_sight_deg: entry(&row.back_sight, Kind::Angle),
                    staff_back_m: entry(&row.staff_back, Kind::Distance),
                    staff_fore_m: entry(&row.staff_fore, Kind::Distance),
                    plan_turn_deg: entry(&row.plan_turn, Kind::Angle),
                    ..Station::default()
                }
            })
            .collect()
    }

    /// Puts these rows into a book in place of its stations. What stood at
    /// the first and last station stands there again; other fittings, and
    /// stretches but the first, have lost their place and go: [`Displaced`]
    /// says how many would.
    ///
    /// Nothing happens, and none is given back, where there are fewer than two
    /// rows.
    pub fn put_into(&self, book: &mut Book) -> Option<Displaced> {
        let first_id = crate::edit::free_id(book.line.stations.iter().map(|s| s.id));
        let stations = self.stations(first_id);
        let (Some(first), Some(last), true) =
            (stations.first(), stations.last(), stations.len() >= 2)
        else {
            return None;
        };
        let (first, last) = (first.id, last.id);
        let displaced = Displaced::of(book);
        let head = book.line.stations.first().map(|s| s.id);
        let foot = book.line.stations.last().map(|s| s.id);
        book.line.fittings.retain_mut(|fitting| {
            let at = Some(fitting.at_station);
            fitting.at_station = if at == head { first } else { last };
            at == head || at == foot
        });
        book.line.stretches.truncate(1);
        if let Some(only) = book.line.stretches.first_mut() {
            only.from_station = first;
        }
        book.line.stations = stations;
        book.line.distance_kind = self.distance_kind;
        book.line.reckoning = self.reckoning;
        crate::edit::drop_unused_copies(book);
        Some(displaced)
    }
}

/// What loses its place when a survey is put in place of a book's stations.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Displaced {
    /// Stations that hold anything.
    pub stations: usize,
    /// Fittings at stations between the first and the last.
    pub fittings: usize,
    /// Stretches but the first.
    pub stretches: usize,
}

impl Displaced {
    /// What would, of this book.
    #[must_use]
    pub fn of(book: &Book) -> Displaced {
        let head = book.line.stations.first().map(|s| s.id);
        let foot = book.line.stations.last().map(|s| s.id);
        let between = |id: Id| Some(id) != head && Some(id) != foot;
        Displaced {
            stations: book
                .line
                .stations
                .iter()
                .filter(|s| crate::resolve::profile::begun(s))
                .count(),
            fittings: book
                .line
                .fittings
                .iter()
                .filter(|f| between(f.at_station))
                .count(),
            stretches: book.line.stretches.len().saturating_sub(1),
        }
    }
}

/// What the book says where a file says nothing.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Given {
    /// The decimal mark the page reads with.
    pub mark: DecimalMark,
    /// Units of a bare number in a column that names none.
    pub units: UnitSystem,
    /// How the book's distances are measured.
    pub distance_kind: DistanceKind,
}
