//! Tables for a spreadsheet: headings in words, cells as numbers in the units
//! shown. [`workbook::export::Csv`] writes them, with the decimal mark of
//! [`Words::mark`].

use crate::Words;
use crate::name::capital;
use crate::text::{self, Key};
use pipes::SupplyKind;
use workbook::Book;
use workbook::book::Id;
use workbook::export::{Cell, Csv, Heading, Table};
use workbook::figure::Figure;
use workbook::laying::Row;
use workbook::measure::Measure;
use workbook::schedule::{Line, Order, Schedule};
use workbook::units::Kind;

/// Headings of the schedule, and the kind of the numbers under each; none for
/// a text.
const SCHEDULE: [(Key, Option<Kind>); 21] = [
    (Key::PAGE_STRETCH, None),
    (Key::SCHEDULE_FROM, Some(Kind::Distance)),
    (Key::SCHEDULE_TO, Some(Kind::Distance)),
    (Key::SCHEDULE_LENGTH, Some(Kind::Distance)),
    (Key::SCHEDULE_DESIGNATION, None),
    (Key::SCHEDULE_STANDARD, None),
    (Key::CSV_DIMENSIONS, None),
    (Key::SCHEDULE_OUTSIDE_DIAMETER, Some(Kind::Bore)),
    (Key::CSV_WALL_LEAST, Some(Kind::Bore)),
    (Key::SCHEDULE_BORE, Some(Kind::Bore)),
    (Key::SCHEDULE_RATING, None),
    (Key::SCHEDULE_LAYING, None),
    (Key::SCHEDULE_HIGHEST_STATIC, Some(Kind::Head)),
    (Key::SCHEDULE_ALLOWED, Some(Kind::Pressure)),
    (Key::SCHEDULE_SHARE, Some(Kind::Share)),
    (Key::CSV_ORDER_LENGTH, Some(Kind::Distance)),
    (Key::SCHEDULE_ORDER, None),
    (Key::SCHEDULE_MASS, Some(Kind::Mass)),
    (Key::SCHEDULE_MASS_PER_LENGTH, Some(Kind::MassPerLength)),
    (Key::SCHEDULE_VERDICT, None),
    (Key::CSV_REASON, None),
];

/// The pipe schedule: a row for each stretch, the sums, and what must be said
/// of it. A stretch that cannot be ordered yet has its reason in its row.
#[must_use]
pub fn schedule(words: Words, book: &Book, schedule: &Schedule) -> Table {
    let headings = headings(words, &SCHEDULE);
    let mut rows: Vec<Vec<Cell>> = schedule
        .lines
        .iter()
        .map(|(id, line)| match line {
            Ok(line) => stretch(words, book, line),
            Err(gap) => {
                let mut row = vec![Cell::Empty; SCHEDULE.len()];
                row[0] = number(book, *id);
                row[SCHEDULE.len() - 1] = Cell::Text(words.about(book).gap(gap));
                row
            }
        })
        .collect();
    let mut total = vec![Cell::Empty; SCHEDULE.len()];
    for (i, (key, _)) in SCHEDULE.iter().enumerate() {
        total[i] = match *key {
            Key::PAGE_STRETCH => Cell::text(words.say(Key::SCHEDULE_TOTAL)),
            Key::SCHEDULE_LENGTH => figure(words, &schedule.length),
            Key::SCHEDULE_MASS => figure(words, &schedule.mass),
            _ => Cell::Empty,
        };
    }
    rows.push(total);
    if book.invented {
        rows.push(vec![Cell::text(words.say(Key::PRINT_INVENTED))]);
    }
    rows.push(vec![Cell::text(words.say(Key::PRINT_NOT_FOR_BUILDING))]);
    Table { headings, rows }
}

/// Headings of the laying list, as those of the schedule.
const LAYING: [(Key, Option<Kind>); 9] = [
    (Key::SCHEDULE_STATION, None),
    (Key::FIGURE_CHAINAGE, Some(Kind::Distance)),
    (Key::FIGURE_LEVEL, Some(Kind::Level)),
    (Key::LAY_HERE, None),
    (Key::LAY_NEXT, None),
    (Key::SCHEDULE_LENGTH, Some(Kind::Distance)),
    (Key::LAY_SLOPE, Some(Kind::Angle)),
    (Key::SCHEDULE_DESIGNATION, None),
    (Key::SCHEDULE_LAYING, None),
];

/// The laying list: a row for each station, in the order of laying, with what
/// is laid there and the leg laid next.
#[must_use]
pub fn laying(words: Words, book: &Book, rows: &[Row]) -> Table {
    let about = words.about(book);
    let rows = rows
        .iter()
        .map(|row| {
            let laid: Vec<String> = row.items.iter().filter_map(|i| about.laid(i)).collect();
            let mut cells = vec![
                Cell::Text(capital(&about.station(row.station))),
                words.cell(row.at.into()),
                words.cell(row.level.into()),
                Cell::Text(laid.join("; ")),
            ];
            if let Some(leg) = &row.next {
                let pipe = leg
                    .pipe
                    .as_ref()
                    .map_or_else(|gap| about.gap(gap), |p| p.designation.clone());
                cells.extend([
                    Cell::Text(about.station(leg.to)),
                    words.cell(leg.length.into()),
                    words.cell(Measure::new(leg.slope_deg, Kind::Angle)),
                    Cell::Text(pipe),
                    Cell::text(words.name(leg.laying)),
                ]);
            }
            cells
        })
        .collect();
    Table {
        headings: headings(words, &LAYING),
        rows,
    }
}

fn headings(words: Words, all: &[(Key, Option<Kind>)]) -> Vec<Heading> {
    all.iter()
        .map(|(name, kind)| Heading {
            name: words.say(*name).to_owned(),
            unit: kind.map_or("", |k| words.unit(k)).to_owned(),
        })
        .collect()
}

/// The file of a table, with the mark of these words.
#[must_use]
pub fn file(words: Words, table: &Table) -> String {
    Csv { mark: words.mark }.write(table)
}

/// Number of a stretch, from 1.
fn number(book: &Book, stretch: Id) -> Cell {
    let place = book.line.stretches.iter().position(|s| s.id == stretch);
    place
        .and_then(|p| u32::try_from(p + 1).ok())
        .map_or(Cell::Empty, Cell::count)
}

fn figure<T: Copy + Into<Measure>>(words: Words, figure: &Figure<T>) -> Cell {
    figure
        .as_ref()
        .map_or(Cell::Empty, |x| words.cell((*x).into()))
}

fn order(words: Words, order: &Order) -> String {
    let piece = words.figure(Measure::new(
        Measure::bore(order.piece).value,
        Kind::Distance,
    ));
    let count = usize::try_from(order.pieces).unwrap_or(usize::MAX);
    match order.kind {
        SupplyKind::Bar => text::schedule_lengths(words, count, &piece),
        SupplyKind::Coil => text::schedule_coils(words, count, &piece),
    }
}

/// The ways a stretch can be ordered: one of them is, not all.
fn orders(words: Words, line: &Line) -> String {
    let length = words.figure(line.order_length);
    let mut ways = line.orders.iter().map(|o| order(words, o));
    let Some(first) = ways.next() else {
        return text::schedule_no_supply(words, &length);
    };
    ways.fold(first, |said, way| {
        format!("{said}, {}", text::page_or_else(words, &way))
    })
}

fn stretch(words: Words, book: &Book, line: &Line) -> Vec<Cell> {
    let pipe = &line.pipe;
    let bore = |length| words.cell(Measure::bore(length));
    let seen = match pipe.dimensions.attested.is_seen() {
        true => Key::WORKING_CHECKED,
        false => Key::WORKING_FROM_MEMORY,
    };
    let verdict = line.verdict.as_ref();
    vec![
        number(book, line.stretch),
        words.cell(line.from.into()),
        words.cell(line.to.into()),
        words.cell(line.length.into()),
        Cell::text(pipe.designation.clone()),
        Cell::text(pipe.standard.clone()),
        Cell::text(words.say(seen)),
        bore(pipe.outside_diameter),
        bore(pipe.wall_min),
        bore(pipe.bore()),
        Cell::text(line.class.clone()),
        Cell::text(words.name(line.laying)),
        figure(words, &line.highest_static),
        figure(words, &line.walls.bearing.clone().map(|b| b.pressure)),
        figure(words, &line.walls.share.clone().map(Measure::share)),
        words.cell(line.order_length.into()),
        Cell::text(orders(words, line)),
        words.cell(line.mass.into()),
        words.cell(line.mass_per_length.into()),
        verdict.map_or(Cell::Empty, |v| Cell::text(words.verdict(v.verdict))),
        verdict.map_or(Cell::Empty, |v| {
            Cell::Text(words.about(book).verdict_reason(v))
        }),
    ]
}
