//! From findings to what the long section draws: plain numbers in the units
//! of the screen, and words.

use crate::drawing::long_section::{
    FittingMark, Glyph, LevelLine, LinePoint, LongSection, MarkedPoint, StandingLevel, StretchBand,
    SurgeBand,
};
use crate::drawing::{Verdict as Mark, long_section};
use hydraulics::quantity::Level;
use pipes::Pipe;
use words::{Key, Words, text};
use workbook::book::{FittingKind, Id};
use workbook::sweep::class;
use workbook::transient::EnvelopeNode;
use workbook::units::Kind;
use workbook::verdict::Verdict;
use workbook::{Book, Findings, Measure};

/// The drawing's own name of a verdict.
#[must_use]
pub fn mark(verdict: Verdict) -> Mark {
    match verdict {
        Verdict::Holds => Mark::Holds,
        Verdict::Tight => Mark::Tight,
        Verdict::Unsettled => Mark::Unsettled,
        Verdict::Fails => Mark::Fails,
    }
}

/// A long section with the book's names of what a finger can hit.
#[derive(Debug, Clone, PartialEq)]
pub struct Named {
    /// What is drawn.
    pub section: LongSection,
    /// Station numbers, by place among the points; none for points between.
    pub stations: Vec<Option<Id>>,
    /// Stretch numbers, by place among the bands.
    pub stretches: Vec<Id>,
    /// Fitting stations, by place among the marks.
    pub fittings: Vec<Option<Id>>,
}

/// What the long section of a book draws; none where there is no line yet.
#[must_use]
pub fn named(
    book: &Book,
    findings: &Findings,
    words: Words,
    selected: Option<Id>,
) -> Option<Named> {
    let profile = &findings.resolved.profile;
    if profile.usable.len() < 2 {
        return None;
    }
    let unit = Scale::of(words);
    let points: Vec<LinePoint> = profile
        .usable
        .iter()
        .map(|s| LinePoint {
            x: unit.x(s.chainage),
            y: unit.y(s.level),
            is_station: true,
        })
        .collect();
    let (bands, stretches) = bands(findings, &unit, selected);
    let (marks, fittings) = marks(book, findings, words, &unit);
    let section = LongSection {
        chainage_ticks: ticks(&points, &bands, words),
        points,
        static_level: standing(findings, words, &unit),
        highest_static: highest(findings, words, &unit),
        grade: grade(findings, words, &unit),
        surge: surge(findings, words, &unit),
        stretches: bands,
        lowest: lowest(findings, words, &unit),
        sub_atmospheric: findings
            .steady
            .suction
            .iter()
            .flatten()
            .map(|s| (unit.x(s.from), unit.x(s.to)))
            .collect(),
        sub_atmospheric_label: words.say(Key::PAGE_BELOW_ATMOSPHERE).to_owned(),
        fittings: marks,
        level_unit: words.unit(Kind::Level).to_owned(),
        note: String::new(),
        unit_mm: 1000.0 * Kind::Level.default_unit(words.units).to_base(1.0),
        title: words.say(Key::SECTION_TITLE).to_owned(),
        desc: described(findings, words),
    };
    Some(Named {
        section,
        stations: profile.usable.iter().map(|s| Some(s.id)).collect(),
        stretches,
        fittings,
    })
}

/// The same with how much heights are exaggerated written in its corner.
///
/// # Errors
/// As [`long_section::draw`].
pub fn drawn(
    mut section: LongSection,
    size: crate::drawing::Size,
    words: Words,
) -> Result<long_section::LongSectionDrawing, crate::drawing::DrawingError> {
    let number = |x: f64, decimals: usize| words.axis(x, decimals);
    let times = long_section::vertical_exaggeration(&section, size, &number)?;
    let times = words.value(Measure::number(times));
    section.note = text::page_heights_times(words, &times);
    long_section::draw(&section, size, &number)
}

/// Base units to the units of the screen.
struct Scale {
    distance: workbook::units::Unit,
    level: workbook::units::Unit,
}

impl Scale {
    fn of(words: Words) -> Scale {
        Scale {
            distance: Kind::Distance.default_unit(words.units),
            level: Kind::Level.default_unit(words.units),
        }
    }

    fn x(&self, chainage: impl Into<Measure>) -> f64 {
        self.distance.from_base(chainage.into().value)
    }

    fn y(&self, level: impl Into<Measure>) -> f64 {
        self.level.from_base(level.into().value)
    }
}

fn standing(findings: &Findings, words: Words, unit: &Scale) -> Option<StandingLevel> {
    let level = *findings.resolved.forebay.normal.as_ref().ok()?;
    Some(StandingLevel {
        y: unit.y(level),
        label: text::page_static_at(words, &words.figure(level)),
    })
}

fn highest(findings: &Findings, words: Words, unit: &Scale) -> Option<StandingLevel> {
    let forebay = &findings.resolved.forebay;
    let (normal, highest) = (
        forebay.normal.as_ref().ok()?,
        forebay.highest.as_ref().ok()?,
    );
    (highest > normal).then(|| StandingLevel {
        y: unit.y(*highest),
        label: text::page_highest_at(words, &words.figure(*highest)),
    })
}

fn grade(findings: &Findings, words: Words, unit: &Scale) -> Option<LevelLine> {
    let grade = findings.steady.grade.as_ref().ok()?;
    let label = match &findings.steady.loss {
        Ok(loss) => text::page_grade_lost(words, &words.figure(*loss)),
        Err(_) => words.say(Key::SECTION_GRADE_LINE).to_owned(),
    };
    Some(LevelLine {
        points: grade
            .nodes
            .iter()
            .map(|n| (unit.x(n.chainage), unit.y(n.grade)))
            .collect(),
        label,
    })
}

fn surge(findings: &Findings, words: Words, unit: &Scale) -> Option<SurgeBand> {
    let nodes = &findings.transient.surge.as_ref().ok()?.envelope;
    let line = |label: &str, level: fn(&EnvelopeNode) -> Level| LevelLine {
        points: nodes
            .iter()
            .map(|n| (unit.x(n.chainage), unit.y(level(n))))
            .collect(),
        label: label.to_owned(),
    };
    // One name for both: under the band there is room for it.
    Some(SurgeBand {
        highest: line("", |n| n.highest),
        lowest: line(words.say(Key::SECTION_SURGE_BAND), |n| n.lowest),
    })
}

fn lowest(findings: &Findings, words: Words, unit: &Scale) -> Option<MarkedPoint> {
    let lowest = findings.steady.lowest.as_ref().ok()?;
    let level = findings.resolved.profile.level_at(lowest.at)?;
    Some(MarkedPoint {
        x: unit.x(lowest.at),
        y: unit.y(level),
        label: text::page_lowest_of(words, &words.figure(lowest.pressure)),
    })
}

fn bands(findings: &Findings, unit: &Scale, selected: Option<Id>) -> (Vec<StretchBand>, Vec<Id>) {
    // What each bears at the temperature its rating is given at.
    let strengths: Vec<f64> = findings
        .walls
        .stretches
        .iter()
        .map(|w| {
            w.at_rating
                .as_ref()
                .map_or(0.0, |a| Measure::from(a.pressure).value)
        })
        .collect();
    let most = strengths.iter().copied().fold(0.0, f64::max);
    let mut bands = Vec::new();
    let mut ids = Vec::new();
    for (i, stretch) in findings.resolved.stretches.iter().enumerate() {
        let Ok(span) = &stretch.span else { continue };
        let pipe = stretch.pipe.as_ref().ok();
        let verdict = findings
            .judged
            .stretches
            .iter()
            .find(|v| v.stretch == stretch.id)
            .map_or(Verdict::Unsettled, |v| v.verdict);
        bands.push(StretchBand {
            from: unit.x(span.from),
            to: unit.x(span.to),
            label: pipe.map(|p| band_label(p)).unwrap_or_default(),
            short_label: pipe.map(|p| class(p)).unwrap_or_default(),
            weight: strengths
                .get(i)
                .map_or(0.0, |s| if most > 0.0 { s / most } else { 0.0 }),
            selected: selected == Some(stretch.id),
            verdict: mark(verdict),
        });
        ids.push(stretch.id);
    }
    (bands, ids)
}

/// What a pipe is called where it has some room: its label and its class.
#[must_use]
pub fn band_label(pipe: &Pipe) -> String {
    let class = class(pipe);
    if pipe.short.contains(&class) {
        pipe.short.clone()
    } else {
        format!("{} · {class}", pipe.short)
    }
}

fn marks(
    book: &Book,
    findings: &Findings,
    words: Words,
    unit: &Scale,
) -> (Vec<FittingMark>, Vec<Option<Id>>) {
    let mut marks = Vec::new();
    let mut ids = Vec::new();
    for fitting in &findings.resolved.fittings {
        let Ok(at) = fitting.at else { continue };
        marks.push(FittingMark {
            x: unit.x(at),
            y: None,
            glyph: glyph(fitting.kind),
            label: String::new(),
        });
        ids.push(
            book.line
                .fittings
                .iter()
                .find(|f| f.id == fitting.id)
                .map(|f| f.at_station),
        );
    }
    if findings.resolved.profile.broken.is_none()
        && let (Ok(level), Some(last)) = (
            &findings.resolved.jet_axis,
            findings.resolved.profile.usable.last(),
        )
    {
        marks.push(FittingMark {
            x: unit.x(last.chainage),
            y: Some(unit.y(*level)),
            glyph: Glyph::Jet,
            label: words.say(Key::SECTION_JETS).to_owned(),
        });
        ids.push(Some(last.id));
    }
    (marks, ids)
}

fn glyph(kind: FittingKind) -> Glyph {
    match kind {
        FittingKind::TrashRack
        | FittingKind::EntranceSharp
        | FittingKind::EntranceProjecting
        | FittingKind::EntranceRounded
        | FittingKind::EntranceBellmouth => Glyph::Rack,
        FittingKind::Bend | FittingKind::Mitre => Glyph::Bend,
        FittingKind::GateValve | FittingKind::BallValve | FittingKind::ButterflyValve => {
            Glyph::Valve
        }
        FittingKind::TeeRun | FittingKind::TeeBranch | FittingKind::Own => Glyph::Other,
    }
}

/// Ends and cuts, then the stations between.
fn ticks(points: &[LinePoint], bands: &[StretchBand], words: Words) -> Vec<(f64, String)> {
    let unit = words.unit(Kind::Distance);
    let base = Kind::Distance.default_unit(words.units);
    let value = |x: f64| words.value(Measure::new(base.to_base(x), Kind::Distance));
    let mut ticks = Vec::new();
    if let (Some(first), Some(last)) = (points.first(), points.last()) {
        ticks.push((first.x, value(first.x)));
        ticks.push((last.x, format!("{}\u{202f}{unit}", value(last.x))));
    }
    for band in bands.iter().skip(1) {
        ticks.push((band.from, value(band.from)));
    }
    ticks
}

fn described(findings: &Findings, words: Words) -> String {
    let resolved = &findings.resolved;
    let known =
        |text: Option<String>| text.unwrap_or_else(|| words.say(Key::FIGURE_NOT_KNOWN).to_owned());
    let forebay = resolved
        .forebay
        .normal
        .as_ref()
        .ok()
        .map(|l| words.figure(*l));
    let jets = resolved.jet_axis.as_ref().ok().map(|l| words.figure(*l));
    let length = resolved
        .profile
        .usable
        .last()
        .map_or_else(String::new, |s| words.figure(s.chainage));
    text::section_described(words, &length, &known(forebay), &known(jets))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::drawing::Size;
    use words::language::Language;
    use workbook::units::UnitSystem;
    use workbook::{demo, evaluate};

    fn words() -> Words {
        Words::new(Language::English, UnitSystem::Metric)
    }

    #[test]
    fn the_demo_draws_whole_in_both_unit_systems() {
        let book = demo::demo("k");
        let findings = evaluate(&book);
        for units in [UnitSystem::Metric, UnitSystem::UsCustomary] {
            let words = Words::new(Language::Spanish, units);
            let named = named(&book, &findings, words, Some(1)).unwrap();
            assert_eq!(named.stations.len(), book.line.stations.len());
            assert_eq!(named.stretches, vec![1, 2]);
            assert!(named.section.stretches[0].selected);
            assert!(named.section.grade.is_some() && named.section.lowest.is_some());
            let band = named.section.surge.as_ref().unwrap();
            let pairs = band.highest.points.iter().zip(&band.lowest.points);
            assert!(pairs.clone().count() > 10 && pairs.clone().all(|(h, l)| h.1 > l.1));
            assert!(drawn(named.section, Size::screen(360.0, 240.0), words).is_ok());
        }
    }

    #[test]
    fn an_empty_book_draws_nothing_and_a_broken_line_draws_its_upper_part() {
        let mut book = Book::new("k");
        assert_eq!(named(&book, &evaluate(&book), words(), None), None);
        book = demo::demo("k");
        book.line.stations[7].level_m.text = "?".into();
        book.line.stations[7].level_m.value = None;
        let named = named(&book, &evaluate(&book), words(), None).unwrap();
        assert_eq!(named.section.points.len(), 7);
    }
}
