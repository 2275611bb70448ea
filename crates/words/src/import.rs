//! Imports in words: what a column means, on what ground, and everything that
//! is refused, left out or taken for granted.

use crate::Words;
use crate::name::{Named, capital, lower};
use crate::text::{self, Key};
use workbook::book::{DistanceKind, Reckoning};
use workbook::import::gpx::{HEIGHT_ERROR_M, LineKind, MOST_FIXES, MOST_WAYPOINTS, Summary};
use workbook::import::table::{Column, Ground, Separator};
use workbook::import::{Fault, LONGEST, LONGEST_CELL, Meaning, Note, Obstacle, Refusal, RowFault};
use workbook::measure::Measure;
use workbook::reading::DecimalMark;
use workbook::resolve::profile::MOST_STATIONS;
use workbook::units::Kind;

impl Named for Meaning {
    fn key(&self) -> Key {
        match self {
            Meaning::LeftOut => Key::MEANING_LEFT_OUT,
            Meaning::Name => Key::MEANING_NAME,
            Meaning::Distance => Key::MEANING_DISTANCE,
            Meaning::Level => Key::MEANING_LEVEL,
            Meaning::ForeSight => Key::MEANING_FORE_SIGHT,
            Meaning::BackSight => Key::MEANING_BACK_SIGHT,
            Meaning::StaffBack => Key::MEANING_STAFF_BACK,
            Meaning::StaffFore => Key::MEANING_STAFF_FORE,
            Meaning::PlanTurn => Key::MEANING_PLAN_TURN,
        }
    }
}

impl Named for Ground {
    fn key(&self) -> Key {
        match self {
            Ground::Heading => Key::GROUND_HEADING,
            Ground::UnitsRow => Key::GROUND_UNITS_ROW,
            Ground::Cells => Key::GROUND_CELLS,
            Ground::Guess => Key::GROUND_GUESS,
            Ground::Given => Key::GROUND_GIVEN,
            Ground::Chosen => Key::GROUND_CHOSEN,
        }
    }
}

impl Named for Separator {
    fn key(&self) -> Key {
        match self {
            Separator::Tab => Key::SEPARATOR_TAB,
            Separator::Semicolon => Key::SEPARATOR_SEMICOLON,
            Separator::Comma => Key::SEPARATOR_COMMA,
            Separator::Bar => Key::SEPARATOR_BAR,
            Separator::Blanks => Key::SEPARATOR_BLANKS,
        }
    }
}

impl Named for LineKind {
    fn key(&self) -> Key {
        match self {
            LineKind::Track => Key::GPX_TRACK,
            LineKind::Route => Key::GPX_ROUTE,
            LineKind::Waypoints => Key::GPX_WAYPOINTS,
        }
    }
}

impl Words {
    fn metres(self, m: f64) -> String {
        self.figure(Measure::new(m, Kind::Distance))
    }

    fn meaning(self, meaning: Meaning) -> String {
        lower(self.name(meaning))
    }

    /// A column by number, from 1, and heading: "column 2 (Dist.)".
    #[must_use]
    pub fn import_column(self, index: usize, columns: &[Column]) -> String {
        let number = self.count(index + 1);
        match columns.get(index).map(|c| c.heading.trim()) {
            Some(heading) if !heading.is_empty() => {
                text::place_column_named(self, &number, heading)
            }
            _ => text::place_column(self, &number),
        }
    }

    /// A track, route or the waypoints of a file, as in a list to choose from:
    /// name, fixes, segments, heights, and how many fixes cannot be used.
    #[must_use]
    pub fn import_summary(self, summary: &Summary) -> String {
        let kind = self.name(summary.kind);
        let name = summary.name.trim();
        let mut parts = vec![text::gpx_fixes(self, summary.fixes)];
        if summary.segments > 1 {
            parts.push(text::gpx_segments(self, summary.segments));
        }
        if let Some((first, last)) = summary.ends_m {
            let level = |m: f64| self.figure(Measure::new(m, Kind::Level));
            parts.push(text::gpx_heights(self, &level(first), &level(last)));
        }
        if summary.faulty > 0 {
            parts.push(text::gpx_faulty(self, summary.faulty));
        }
        let what = parts.join(", ");
        if name.is_empty() {
            text::gpx_line(self, kind, &what)
        } else {
            text::gpx_line_named(self, kind, name, &what)
        }
    }

    /// Why a whole file is refused.
    #[must_use]
    pub fn import_refusal(self, refusal: &Refusal) -> String {
        match refusal {
            Refusal::TooLong { bytes } => {
                text::refusal_too_long(self, &self.count(*bytes), &self.count(LONGEST))
            }
            Refusal::Empty => self.say(Key::REFUSAL_EMPTY).to_owned(),
            Refusal::Packed => self.say(Key::REFUSAL_PACKED).to_owned(),
            Refusal::NotText => self.say(Key::REFUSAL_NOT_TEXT).to_owned(),
            Refusal::TooManyRows { rows } => {
                text::refusal_too_many_rows(self, &self.count(*rows), &self.count(MOST_STATIONS))
            }
            Refusal::TooManyColumns { row, columns } => {
                text::refusal_too_many_columns(self, &self.count(*row), &self.count(*columns))
            }
            Refusal::QuoteOpen { row } => text::refusal_quote_open(self, &self.count(*row)),
            Refusal::NoRows => self.say(Key::REFUSAL_NO_ROWS).to_owned(),
            Refusal::NotXml { line, why } => text::refusal_not_xml(self, &self.count(*line), why),
            Refusal::NotGpx { root } => text::refusal_not_gpx(self, root),
            Refusal::Cut { line } => text::refusal_cut(self, &self.count(*line)),
            Refusal::TooDeep { line } => text::refusal_too_deep(self, &self.count(*line)),
            Refusal::NoTrack => self.say(Key::REFUSAL_NO_TRACK).to_owned(),
            Refusal::TooManyFixes => text::refusal_too_many_fixes(self, &self.count(MOST_FIXES)),
            Refusal::TooManyWaypoints => {
                text::refusal_too_many_waypoints(self, &self.count(MOST_WAYPOINTS))
            }
            Refusal::NoSuchLine => self.say(Key::REFUSAL_NO_SUCH_LINE).to_owned(),
            Refusal::TooFewFixes { fixes } => {
                text::refusal_too_few_fixes(self, &self.count(*fixes))
            }
            Refusal::Fix { fault, count } => {
                text::refusal_fix(self, *count, &self.import_fault(fault, &[]))
            }
            Refusal::Jump { fix, distance_m } => {
                text::refusal_jump(self, &self.count(*fix), &self.metres(*distance_m))
            }
            Refusal::TooManyStations { tolerance_m } => text::refusal_too_many_stations(
                self,
                &self.count(MOST_STATIONS),
                &self.metres(*tolerance_m),
            ),
            Refusal::Tolerance { .. } => {
                text::refusal_tolerance(self, &self.metres(0.0), &self.metres(100.0))
            }
            _ => self.say(Key::REFUSAL_OTHER).to_owned(),
        }
    }

    /// What must be chosen before a table can be taken.
    #[must_use]
    pub fn import_obstacle(self, obstacle: &Obstacle, columns: &[Column]) -> String {
        let column = |i: usize| capital(&self.import_column(i, columns));
        match obstacle {
            Obstacle::NoColumn(meaning) => text::obstacle_no_column(self, &self.meaning(*meaning)),
            Obstacle::NoHeights => self.say(Key::OBSTACLE_NO_HEIGHTS).to_owned(),
            Obstacle::Twice {
                meaning,
                first,
                second,
            } => text::obstacle_twice(
                self,
                &column(*first),
                &self.import_column(*second, columns),
                &self.meaning(*meaning),
            ),
            Obstacle::Unit { column: i, unit } => {
                let units = columns.get(*i).map_or(&[][..], |c| c.meaning.units());
                text::obstacle_unit(self, &column(*i), unit, &units.join(", "))
            }
            Obstacle::SlopeUnit { column: i } => text::obstacle_slope_unit(self, &column(*i)),
            _ => self.say(Key::OBSTACLE_OTHER).to_owned(),
        }
    }

    /// A fault with its place and text: "Row 7, column 2 (Level), “abc”: ...".
    /// For a fix of a track the columns are empty.
    #[must_use]
    pub fn import_fault(self, fault: &RowFault, columns: &[Column]) -> String {
        let row = self.count(fault.row);
        let place = match fault.column {
            Some(i) => text::fault_row(self, &row, &self.import_column(i, columns)),
            None => text::fault_fix(self, &row),
        };
        let why = self.import_fault_reason(&fault.fault);
        if fault.text.is_empty() {
            text::fault_at(self, &place, &why)
        } else {
            text::fault_at_text(self, &place, &fault.text, &why)
        }
    }

    /// The reason alone, for a table that has columns for row and text.
    #[must_use]
    pub fn import_fault_reason(self, fault: &Fault) -> String {
        match fault {
            Fault::Unreadable(kind, why) => self.unreadable(*kind, why),
            Fault::OutOfRange {
                value,
                least,
                most,
                kind,
            } => text::entry_out_of_range(
                self,
                &self.full_or_dash(Measure::new(*value, *kind)),
                &self.brief(Measure::new(*least, *kind)),
                &self.brief(Measure::new(*most, *kind)),
            ),
            Fault::Missing => self.say(Key::FAULT_MISSING).to_owned(),
            Fault::TooLong { characters } => {
                text::fault_too_long(self, &self.count(*characters), &self.count(LONGEST_CELL))
            }
            Fault::Behind { back_m } => text::fault_behind(self, &self.metres(*back_m)),
            Fault::NoElevation => self.say(Key::FAULT_NO_ELEVATION).to_owned(),
            Fault::NoPosition => self.say(Key::FAULT_NO_POSITION).to_owned(),
            _ => self.say(Key::FAULT_OTHER).to_owned(),
        }
    }

    /// What was taken for granted or left out, and cautions. For a track the
    /// columns are empty.
    #[must_use]
    pub fn import_note(self, note: &Note, columns: &[Column]) -> String {
        match note {
            Note::WesternText => self.say(Key::NOTE_WESTERN_TEXT).to_owned(),
            Note::Above { rows } => text::note_above(self, *rows),
            Note::EmptyRows { rows } => text::note_empty_rows(self, *rows),
            Note::GuessedColumns => self.say(Key::NOTE_GUESSED_COLUMNS).to_owned(),
            Note::Second { column, meaning } => text::note_second(
                self,
                &capital(&self.import_column(*column, columns)),
                &self.meaning(*meaning),
            ),
            Note::Ambiguous {
                text: shown,
                mark,
                count,
            } => match mark {
                DecimalMark::Point => text::note_ambiguous_point(self, *count, shown),
                DecimalMark::Comma => text::note_ambiguous_comma(self, *count, shown),
            },
            Note::MixedMarks { point, comma } => text::note_mixed_marks(self, point, comma),
            Note::DistanceKindTaken(kind) => self
                .say(match kind {
                    DistanceKind::Slope => Key::NOTE_TAKEN_SLOPE,
                    DistanceKind::Horizontal => Key::NOTE_TAKEN_HORIZONTAL,
                })
                .to_owned(),
            Note::ReckoningGuessed(reckoning) => self
                .say(match reckoning {
                    Reckoning::FromStart => Key::NOTE_GUESSED_FROM_START,
                    Reckoning::FromPrevious => Key::NOTE_GUESSED_FROM_PREVIOUS,
                })
                .to_owned(),
            Note::StaffBooked => self.say(Key::NOTE_STAFF_BOOKED).to_owned(),
            Note::LegsLost { rows } => text::note_legs_lost(self, *rows),
            Note::SatelliteHeights => {
                text::note_satellite_heights(self, &self.metres(HEIGHT_ERROR_M))
            }
            Note::Thinned {
                from,
                kept,
                tolerance_m,
                length_before_m,
                length_after_m,
            } => text::note_thinned(
                self,
                &self.count(*from),
                &self.count(*kept),
                &self.count(from.saturating_sub(*kept)),
                &self.metres(*tolerance_m),
                &self.metres(*length_before_m),
                &self.metres(*length_after_m),
            ),
            Note::Joined { count, fix, gap_m } => {
                text::note_joined(self, *count, &self.metres(*gap_m), &self.count(*fix))
            }
            Note::FixesLeftOut { first, count } => {
                text::note_fixes_left_out(self, *count, &self.import_fault(first, &[]))
            }
            Note::Uphill { rise_m } => text::note_uphill(self, &self.metres(*rise_m)),
            Note::Flat => self.say(Key::NOTE_FLAT).to_owned(),
            Note::Astray {
                count,
                name,
                distance_m,
            } => text::note_astray(self, *count, name, &self.metres(*distance_m)),
            Note::Doctype => self.say(Key::NOTE_DOCTYPE).to_owned(),
            _ => self.say(Key::NOTE_OTHER).to_owned(),
        }
    }
}
