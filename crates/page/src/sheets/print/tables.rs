//! Tables of the print: schedule, pressures, fittings, nozzles, stations.

use crate::parts::verdicts::{mark_svg, share_of, slug};
use crate::speak;
use leptos::prelude::*;
use pipes::SupplyKind;
use words::{Key, Words, text};
use workbook::book::{BoreSizing, Id};
use workbook::figure::{Figure, Gap};
use workbook::resolve::parts::Shape;
use workbook::schedule::{Line, Order, Schedule};
use workbook::units::Kind;
use workbook::working::FigureKey;
use workbook::{Book, Findings, Measure};

/// Head of a column: its name, the unit under it.
pub(super) fn th(words: Words, key: Key, kind: Option<Kind>) -> AnyView {
    let unit = kind.map_or("", |k| words.unit(k));
    view! {
        <th scope="col" class:num=kind.is_some()>
            {words.say(key)} " " {unit}
        </th>
    }
    .into_any()
}

pub(super) fn td(text: String) -> AnyView {
    view! { <td class="num">{text}</td> }.into_any()
}

/// A figure in a cell; where there is none, its reason is told below.
pub(super) fn figure<T: Copy + Into<Measure>>(words: Words, figure: &Figure<T>) -> String {
    figure
        .as_ref()
        .map_or_else(|_| speak::none(), |x| words.value(*x))
}

/// Number of a stretch, from 1.
pub(super) fn number(book: &Book, stretch: Id) -> String {
    book.line
        .stretches
        .iter()
        .position(|s| s.id == stretch)
        .map_or_else(String::new, |p| (p + 1).to_string())
}

/// What to order, as words.
pub(super) fn order(words: Words, order: &Order) -> String {
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

fn orders(words: Words, line: &Line) -> Vec<String> {
    let length = words.figure(line.order_length);
    if line.orders.is_empty() {
        return vec![text::schedule_no_supply(words, &length)];
    }
    // Ways it is sold: one of them is ordered, not all.
    line.orders
        .iter()
        .enumerate()
        .map(|(i, o)| {
            let joints = usize::try_from(o.joints).unwrap_or(usize::MAX);
            let said = format!(
                "{} ({}), {}",
                order(words, o),
                words.figure(o.piece_mass),
                text::schedule_joints(words, joints)
            );
            if i == 0 {
                said
            } else {
                text::page_or_else(words, &said)
            }
        })
        .collect()
}

/// What is ordered, stretch by stretch.
pub(super) fn schedule(words: Words, book: &Book, schedule: &Schedule) -> AnyView {
    let rows: Vec<AnyView> = schedule
        .lines
        .iter()
        .map(|(id, line)| schedule_row(words, book, *id, line))
        .collect();
    let spare = schedule
        .lines
        .iter()
        .find_map(|(_, l)| l.as_ref().ok())
        .map(|l| text::schedule_with_spare(words, &words.figure(Measure::share(l.spare))));
    view! {
        <section class="print-section">
            <h2>{words.say(Key::SCHEDULE_TITLE)}</h2>
            <table class="print-table" data-test="print-schedule">
                <thead>
                    <tr>
                        {th(words, Key::PAGE_NUMBER, None)}
                        {th(words, Key::SCHEDULE_FROM, Some(Kind::Distance))}
                        {th(words, Key::SCHEDULE_TO, Some(Kind::Distance))}
                        {th(words, Key::SCHEDULE_LENGTH, Some(Kind::Distance))}
                        {th(words, Key::SCHEDULE_DESIGNATION, None)}
                        {th(words, Key::SCHEDULE_OUTSIDE_DIAMETER, Some(Kind::Bore))}
                        {th(words, Key::SCHEDULE_WALL, Some(Kind::Bore))}
                        {th(words, Key::SCHEDULE_BORE, Some(Kind::Bore))}
                        {th(words, Key::SCHEDULE_RATING, None)}
                        {th(words, Key::SCHEDULE_ORDER, None)}
                        {th(words, Key::SCHEDULE_MASS, Some(Kind::Mass))}
                        {th(words, Key::SCHEDULE_MASS_PER_LENGTH, Some(Kind::MassPerLength))}
                    </tr>
                </thead>
                <tbody>{rows}</tbody>
                <tfoot>
                    <tr>
                        <th scope="row" colspan="3">
                            {words.say(Key::SCHEDULE_TOTAL)}
                        </th>
                        {td(figure(words, &schedule.length))}
                        <td colspan="6">{spare}</td>
                        {td(figure(words, &schedule.mass))}
                        <td></td>
                    </tr>
                </tfoot>
            </table>
        </section>
    }
    .into_any()
}

fn gap_row(words: Words, book: &Book, id: Id, gap: &Gap, columns: &'static str) -> AnyView {
    view! {
        <tr>
            <th scope="row">{number(book, id)}</th>
            <td colspan=columns>{words.about(book).gap(gap)}</td>
        </tr>
    }
    .into_any()
}

fn schedule_row(words: Words, book: &Book, id: Id, line: &Figure<Line>) -> AnyView {
    let line = match line {
        Ok(line) => line,
        Err(gap) => return gap_row(words, book, id, gap, "11"),
    };
    let pipe = &line.pipe;
    let seen = pipe.dimensions.attested.is_seen();
    let wall = {
        let (least, mean) = (
            Measure::bore(pipe.wall_min),
            Measure::bore(pipe.wall_mean()),
        );
        match pipe.wall_max {
            Some(most) => format!(
                "{}\u{2013}{}",
                words.value(least),
                words.value(Measure::bore(most))
            ),
            None => words.value(mean),
        }
    };
    let orders: Vec<AnyView> = orders(words, line)
        .into_iter()
        .map(|o| view! { <div>{o}</div> }.into_any())
        .collect();
    view! {
        <tr data-test=format!("schedule-{id}")>
            <th scope="row">{number(book, id)}</th>
            {td(words.value(line.from))}
            {td(words.value(line.to))}
            {td(words.value(line.length))}
            <td class="print-name">
                <div>{pipe.designation.clone()}</div>
                <div>{pipe.standard.clone()} " " {speak::memory(words, seen)}</div>
                <div>{words.name(line.laying)}</div>
            </td>
            {td(words.value(Measure::bore(pipe.outside_diameter)))}
            {td(wall)}
            {td(words.value(Measure::bore(pipe.bore())))}
            <td>{line.class.clone()}</td>
            <td>{orders}</td>
            {td(words.value(line.mass))}
            {td(words.value(line.mass_per_length))}
        </tr>
    }
    .into_any()
}

/// What each stretch bears.
pub(super) fn pressures(words: Words, book: &Book, schedule: &Schedule) -> AnyView {
    let rows: Vec<AnyView> = schedule
        .lines
        .iter()
        .map(|(id, line)| match line {
            Ok(line) => pressure_row(words, book, line),
            Err(gap) => gap_row(words, book, *id, gap, "8"),
        })
        .collect();
    view! {
        <section class="print-section">
            <h2>{words.say(Key::PAGE_PRESSURES)}</h2>
            <table class="print-table" data-test="print-pressures">
                <thead>
                    <tr>
                        {th(words, Key::PAGE_NUMBER, None)}
                        {th(words, Key::SCHEDULE_HIGHEST_STATIC, Some(Kind::Head))}
                        {th(words, Key::FIGURE_STATIC_PRESSURE, Some(Kind::Pressure))}
                        {th(words, Key::SCHEDULE_ALLOWED, Some(Kind::Pressure))}
                        {th(words, Key::FIELD_WARMEST_WALL, Some(Kind::Temperature))}
                        {th(words, Key::SCHEDULE_SHARE, Some(Kind::Share))}
                        {th(words, Key::FIGURE_COLLAPSE, Some(Kind::Pressure))}
                        {th(words, Key::FIGURE_LOWEST_PRESSURE, Some(Kind::Pressure))}
                        {th(words, Key::SCHEDULE_VERDICT, None)}
                    </tr>
                </thead>
                <tbody>{rows}</tbody>
            </table>
            <p>{words.say(Key::PAGE_GAUGE_PRESSURE)}</p>
        </section>
    }
    .into_any()
}

fn pressure_row(words: Words, book: &Book, line: &Line) -> AnyView {
    let walls = &line.walls;
    let standing = walls.standing.clone().map(|s| s.pressure);
    let allowed = walls.bearing.clone().map(|b| b.pressure);
    let wall = walls
        .allowable
        .as_ref()
        .map_or_else(|_| speak::none(), |a| words.value(a.temperature));
    let share = walls.share.clone().map(Measure::share);
    let collapse = walls.collapse.clone().map(|c| c.allowed);
    let lowest = walls.lowest.clone().map(|l| l.pressure);
    let verdict = line.verdict.as_ref().map(|v| {
        view! {
            <span data-verdict=slug(v.verdict)>
                {mark_svg(v.verdict, share_of(v))} " " <strong>{words.verdict(v.verdict)}</strong>
                " " {words.about(book).verdict_reason(v)}
            </span>
        }
    });
    view! {
        <tr data-test=format!("pressure-{}", line.stretch)>
            <th scope="row">{number(book, line.stretch)}</th>
            {td(figure(words, &line.highest_static))}
            {td(figure(words, &standing))}
            {td(figure(words, &allowed))}
            {td(wall)}
            {td(figure(words, &share))}
            {td(figure(words, &collapse))}
            {td(figure(words, &lowest))}
            <td>{verdict}</td>
        </tr>
    }
    .into_any()
}

/// Fittings with their rating.
pub(super) fn fittings(words: Words, book: &Book, findings: &Findings) -> Option<AnyView> {
    let found = &findings.resolved.fittings;
    if found.is_empty() {
        return None;
    }
    let rows: Vec<AnyView> = found
        .iter()
        .map(|f| {
            let at = figure(words, &f.at);
            let count = f
                .count
                .as_ref()
                .map_or_else(|_| speak::none(), |n| n.to_string());
            let station = book
                .line
                .fittings
                .iter()
                .find(|e| e.id == f.id)
                .map(|e| speak::station(words, book, e.at_station));
            let rating = match &f.rating {
                Ok(Some(rating)) => words.value(*rating),
                Ok(None) => words.say(Key::FIGURE_NOT_KNOWN).to_owned(),
                Err(gap) => words.about(book).gap(gap),
            };
            let loss = findings
                .steady
                .fittings
                .iter()
                .find(|(id, _)| *id == f.id)
                .and_then(|(_, l)| l.as_ref().ok());
            let k = loss.map_or_else(speak::none, |l| words.value(Measure::number(l.k)));
            let mark = loss.and_then(|l| speak::memory(words, l.seen));
            view! {
                <tr data-test=format!("print-fitting-{}", f.id)>
                    <td>
                        {words.name(f.kind)} " " {shape(words, f.shape.as_ref().ok())} " "
                        {f.note.clone()}
                    </td>
                    <td>{station}</td>
                    {td(at)}
                    {td(count)}
                    <td class="num">{k} " " {mark}</td>
                    <td class="num">{rating}</td>
                </tr>
            }
            .into_any()
        })
        .collect();
    Some(
        view! {
            <section class="print-section">
                <h2>{words.say(Key::SCHEDULE_FITTINGS)}</h2>
                <table class="print-table" data-test="print-fittings">
                    <thead>
                        <tr>
                            {th(words, Key::SCHEDULE_FITTING, None)}
                            {th(words, Key::SCHEDULE_STATION, None)}
                            {th(words, Key::FIGURE_CHAINAGE, Some(Kind::Distance))}
                            {th(words, Key::SCHEDULE_COUNT, Some(Kind::Number))}
                            {th(words, Key::PAGE_K, Some(Kind::Number))}
                            {th(words, Key::FIGURE_RATING, Some(Kind::Pressure))}
                        </tr>
                    </thead>
                    <tbody>{rows}</tbody>
                </table>
            </section>
        }
        .into_any(),
    )
}

fn shape(words: Words, shape: Option<&Shape>) -> String {
    let angle = |x: f64| words.figure(Measure::new(x, Kind::Angle));
    match shape {
        Some(Shape::Bend { angle_deg, radius }) => format!(
            "{}, {} {}",
            angle(*angle_deg),
            words.say(Key::FIELD_FITTING_RADIUS).to_lowercase(),
            words.value(Measure::number(*radius))
        ),
        Some(Shape::Mitre { angle_deg }) => angle(*angle_deg),
        Some(Shape::Valve { opening }) => format!(
            "{} {}",
            words.say(Key::FIELD_FITTING_OPENING).to_lowercase(),
            words.brief(Measure::share(*opening))
        ),
        _ => String::new(),
    }
}

/// Nozzles: what is bought, and what they give.
pub(super) fn nozzles(words: Words, book: &Book, findings: &Findings) -> AnyView {
    let about = words.about(book);
    let rows: Vec<AnyView> = [
        FigureKey::NozzleBore,
        FigureKey::JetDiameter,
        FigureKey::JetVelocity,
        FigureKey::NetHead,
        FigureKey::Loss,
        FigureKey::LossShare,
        FigureKey::JetPower,
    ]
    .into_iter()
    .map(|key| {
        let value = match findings.working(key) {
            Ok(w) => words.figure(w.result),
            Err(gap) => about.gap(&gap),
        };
        view! {
            <tr>
                <th scope="row">{about.figure_name(key)}</th>
                <td class="num">{value}</td>
            </tr>
        }
        .into_any()
    })
    .collect();
    let what = findings.resolved.jets.as_ref().ok().map(|j| {
        let solved = match j.sizing {
            BoreSizing::Solved => Key::OPTION_BORE_SOLVED,
            BoreSizing::Chosen => Key::OPTION_BORE_CHOSEN,
        };
        let rating = j.rating.map(|r| {
            format!(
                "{}: {}",
                words.field_label(workbook::Field::JetRating),
                words.figure(r)
            )
        });
        format!(
            "{} × {}. {}: {}. {}",
            j.count,
            words.name(j.kind),
            words.say(Key::FIELD_BORE_SIZING),
            words.say(solved),
            rating.unwrap_or_default()
        )
    });
    view! {
        <section class="print-section print-keep">
            <h2>{words.say(Key::SCHEDULE_NOZZLES)}</h2>
            <p>{what}</p>
            <table class="print-table print-pairs" data-test="print-nozzles">
                <tbody>{rows}</tbody>
            </table>
        </section>
    }
    .into_any()
}

/// The survey as it was figured.
pub(super) fn stations(words: Words, book: &Book, findings: &Findings) -> Option<AnyView> {
    let usable = &findings.resolved.profile.usable;
    if usable.is_empty() {
        return None;
    }
    let rows: Vec<AnyView> = usable
        .iter()
        .map(|s| {
            view! {
                <tr>
                    <th scope="row">{speak::station(words, book, s.id)}</th>
                    {td(words.value(s.chainage))}
                    {td(words.value(s.horizontal))}
                    {td(words.value(s.level))}
                </tr>
            }
            .into_any()
        })
        .collect();
    Some(
        view! {
            <section class="print-section">
                <h2>{words.say(Key::PRINT_STATIONS)}</h2>
                <table class="print-table" data-test="print-stations">
                    <thead>
                        <tr>
                            {th(words, Key::SCHEDULE_STATION, None)}
                            {th(words, Key::FIGURE_CHAINAGE, Some(Kind::Distance))}
                            {th(words, Key::FIGURE_HORIZONTAL_LENGTH, Some(Kind::Distance))}
                            {th(words, Key::FIGURE_LEVEL, Some(Kind::Level))}
                        </tr>
                    </thead>
                    <tbody>{rows}</tbody>
                </table>
            </section>
        }
        .into_any(),
    )
}
