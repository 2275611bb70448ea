//! Every finding there is says something whole, in every language.

use crate::{About, Language, Words, capital};
use hydraulics::quantity::{AbsolutePressure, GaugePressure, Head, Level};
use samples::*;
use uom::si::f64::Time;
use uom::si::f64::{Pressure, Velocity};
use uom::si::time::second;
use uom::si::velocity::meter_per_second;
use workbook::book::{
    Approach, Book, FittingEntry, FittingKind, OwnPipeEntry, Price, RoughnessAge,
};
use workbook::caution::{Caution, Sheet};
use workbook::demo::demo;
use workbook::evaluate::evaluate;
use workbook::field::{Field, OWN_FIELDS};
use workbook::figure::{Gap, Lack, Place};
use workbook::format::FileTrouble;
use workbook::measure::Measure;
use workbook::relief::Collects;
use workbook::resolve::Assumption;
use workbook::resolve::bends::Made;
use workbook::transient::EventKind;
use workbook::units::{Kind, UnitSystem};
use workbook::verdict::{Check, CheckKind, StretchVerdict, Verdict, Weakest};

mod imports;
mod samples;

/// A book with one of everything that can be named.
fn book() -> Book {
    let mut book = demo("demo");
    book.line.stations[0].name = "Caja".to_owned();
    book.line.fittings.push(FittingEntry {
        id: 91,
        at_station: book.line.stations[1].id,
        kind: FittingKind::Own,
        note: "Strainer".to_owned(),
        ..FittingEntry::default()
    });
    book.own_pipes.push(OwnPipeEntry {
        id: 1,
        name: "Old pipe".to_owned(),
        ..OwnPipeEntry::default()
    });
    book.prices.pipes.push(Price {
        pipe: "own/1".to_owned(),
        ..Price::default()
    });
    book
}

fn fields(book: &Book) -> Vec<Field> {
    let mut all = book.fields();
    all.extend([
        Field::StationLevel(999),
        Field::FittingK(999),
        Field::FittingAngle(91),
        Field::FittingRadius(91),
        Field::FittingOpening(91),
        Field::RackWidth(91),
        Field::RackLength(91),
        Field::RackBar(91),
        Field::RackGap(91),
        Field::RackClogged(91),
        Field::FittingK(91),
        Field::Price(999),
    ]);
    all.extend(OWN_FIELDS.map(|own| Field::Own(999, own)));
    all
}

/// Says it in every language and family of units, and checks each as a text.
fn said(book: &Book, what: &str, say: impl Fn(About<'_>) -> String) -> Vec<String> {
    let mut all = Vec::new();
    for units in [UnitSystem::Metric, UnitSystem::UsCustomary] {
        let texts = Language::ALL.map(|language| say(Words::new(language, units).about(book)));
        for text in &texts {
            whole(what, text);
        }
        assert_ne!(texts[0], texts[1], "{what} is not translated");
        all.extend(texts);
    }
    all
}

fn whole(what: &str, text: &str) {
    assert!(!text.trim().is_empty(), "{what} says nothing");
    for bad in [
        "{", "}", "  ", "NaN", "inf", "Some(", "::", "\"", "..", " .", " ,", ".;", "—",
    ] {
        assert!(!text.contains(bad), "{what}: {bad:?} in {text}");
    }
}

fn sentences(book: &Book, what: &str, say: impl Fn(About<'_>) -> String) {
    for text in said(book, what, say) {
        assert!(text.ends_with('.'), "{what} is no sentence: {text}");
        let first = text.chars().next().unwrap();
        assert!(!first.is_lowercase(), "{what} has no capital: {text}");
    }
}

#[test]
fn every_field_has_label_hint_and_name() {
    let book = book();
    for field in fields(&book) {
        let what = format!("{field:?}");
        said(&book, &what, |w| w.words.field_label(field).to_owned());
        sentences(&book, &what, |w| w.words.field_hint(field));
        said(&book, &what, |w| w.field(field));
        if field.preset().is_some() {
            sentences(&book, &what, |w| w.words.field_preset(field).unwrap());
        }
        for trouble in entry_troubles() {
            let what = format!("{field:?} {trouble:?}");
            sentences(&book, &what, |w| w.words.entry_trouble(field, &trouble));
        }
    }
}

#[test]
fn every_trouble_and_lack_says_what_and_what_to_do() {
    let book = book();
    for trouble in troubles() {
        let what = format!("{trouble:?}");
        sentences(&book, &what, |w| w.trouble(&trouble));
        said(&book, &what, |w| w.place(&trouble.place()));
    }
    for lack in lacks() {
        let gap = Gap::Unsettled(lack.clone());
        sentences(&book, &format!("{lack:?}"), |w| w.gap(&gap));
    }
    for place in [
        Place::Station(1),
        Place::Stretch(1),
        Place::Fitting(91),
        Place::OwnPipe(1),
        Place::OwnPipe(999),
        Place::Pipe("nothing".to_owned()),
        Place::Line,
        Place::Jets,
        Place::Surge,
    ] {
        said(&book, &format!("{place:?}"), |w| w.place(&place));
    }
}

#[test]
fn places_go_by_number_and_name() {
    let book = book();
    let en = Words::new(Language::English, UnitSystem::Metric).about(&book);
    let es = Words::new(Language::Spanish, UnitSystem::Metric).about(&book);
    let first = book.line.stations[0].id;
    assert_eq!(en.station(first), "station 1 (Caja)");
    assert_eq!(
        es.field(Field::StationLevel(first)),
        "Nivel, estación 1 (Caja)"
    );
    assert_eq!(en.own_pipe(1), "own pipe “Old pipe”");
    assert!(en.fitting(91).starts_with("Strainer at station 2"));
    let pipe = &book.pipes[0];
    assert_eq!(en.pipe(&pipe.id), pipe.short);
    assert_eq!(en.pipe("own/1"), en.own_pipe(1));
}

fn bar(x: f64) -> Measure {
    Measure::new(x * 1e5, Kind::Pressure)
}

fn checks() -> Vec<Check> {
    let mut all = Vec::new();
    for kind in [
        CheckKind::PassesFlow,
        CheckKind::StandingPressure,
        CheckKind::SurgePressure,
        CheckKind::LowestPressure,
        CheckKind::Collapse,
    ] {
        for found in [4.8, 9.5, 12.0] {
            let check = Check::against(kind, bar(found), bar(10.0), 0.1);
            all.push(check.clone().wanting(Lack::Surge));
            all.push(Check {
                weakest: Some(Weakest::Fitting(91)),
                at: Some(at(151.0)),
                ..check.clone()
            });
            all.push(Check {
                weakest: Some(Weakest::Jets),
                ..check
            });
        }
        for lack in lacks() {
            all.push(Check::unsettled(kind, Gap::Unsettled(lack)));
        }
        let bare = Check::unsettled(kind, Gap::Unsettled(Lack::Surge));
        all.push(Check {
            found: Some(bar(-0.2)),
            ..bare.clone()
        });
        all.push(Check { gap: None, ..bare });
    }
    all
}

#[test]
fn every_check_and_verdict_gives_its_reason() {
    let book = book();
    for verdict in [
        Verdict::Holds,
        Verdict::Tight,
        Verdict::Unsettled,
        Verdict::Fails,
    ] {
        said(&book, "verdict", |w| w.words.verdict(verdict).to_owned());
        sentences(&book, "verdict", |w| {
            w.words.verdict_means(verdict).to_owned()
        });
    }
    let found = evaluate(&book).resolved;
    let empty = evaluate(&Book::new("empty")).resolved;
    for check in checks() {
        let what = format!("{check:?}");
        sentences(&book, &what, |w| w.check(&check));
        said(&book, &what, |w| w.words.check_name(check.kind).to_owned());
        let verdict = StretchVerdict::of(1, vec![check]).unwrap();
        sentences(&book, &what, |w| w.stretch_verdict(&verdict, &found));
        sentences(&book, &what, |w| w.stretch_verdict(&verdict, &empty));
    }
}

#[test]
fn the_demo_verdict_reads_as_a_sentence() {
    let book = demo("demo");
    let found = evaluate(&book);
    let words = Words::new(Language::English, UnitSystem::Metric).about(&book);
    for verdict in &found.judged.stretches {
        let text = words.stretch_verdict(verdict, &found.resolved);
        let pipe = found
            .resolved
            .stretches
            .iter()
            .find(|s| s.id == verdict.stretch)
            .map(|s| s.pipe.as_ref().unwrap().short.clone())
            .unwrap();
        let word = capital(words.words.verdict(verdict.verdict));
        assert!(text.starts_with(&format!("{word} in {pipe}, ")), "{text}");
        let figures = match verdict.verdict {
            Verdict::Unsettled => "bar standing of",
            _ => "bar with surge of",
        };
        assert!(text.contains(figures), "{text}");
    }
}

#[test]
fn every_caution_and_assumption_speaks() {
    let book = book();
    let velocity = Velocity::new::<meter_per_second>(3.4);
    let all = [
        Caution::SurgeUnsolved,
        Caution::ColumnParts {
            event: EventKind::Blocked,
            at: at(54.0),
        },
        Caution::Slam {
            highest: GaugePressure::from_pa(16.2e5),
            beyond: vec![1, 2],
            parts: Some(at(160.0)),
        },
        Caution::Slam {
            highest: GaugePressure::from_pa(8.2e5),
            beyond: vec![],
            parts: None,
        },
        Caution::JetBlocked {
            highest: GaugePressure::from_pa(12e5),
            beyond: vec![2],
            parts: None,
        },
        Caution::ClosingTimeBuiltIn {
            closing: Time::new::<second>(15.0),
        },
        Caution::PlasticsTire { stretches: vec![1] },
        Caution::EntrappedAir { drawn: true },
        Caution::EntrappedAir { drawn: false },
        Caution::TemperatureAndSun { bare: vec![] },
        Caution::TemperatureAndSun { bare: vec![1, 2] },
        Caution::SubAtmospheric {
            lengths: vec![(at(10.0), at(25.5)), (at(80.0), at(90.0))],
            boils: true,
        },
        Caution::SubAtmospheric {
            lengths: vec![(at(10.0), at(25.5))],
            boils: false,
        },
        Caution::CollapseAndVents { weak: vec![1] },
        Caution::VelocityAndSilt { fast: None },
        Caution::VelocityAndSilt {
            fast: Some((1, velocity)),
        },
        Caution::Freezing,
        Caution::ThrustAtBends,
        Caution::WeakJoints { unrated: vec![] },
        Caution::WeakJoints {
            unrated: vec![91, 999],
        },
        Caution::DepressuriseBeforeWork,
        Caution::LocalCodesAndReview,
        Caution::SourceNotSeen { stretches: vec![2] },
        Caution::RegimeUncertain,
        Caution::NearGreatestPower,
        Caution::LossOverCap {
            share: 0.123,
            cap: 0.1,
        },
        Caution::AirCollects {
            high: vec![3, 7],
            steepens: vec![],
        },
        Caution::AirCollects {
            high: vec![3],
            steepens: vec![8, 999],
        },
        Caution::WaterStays { drains: vec![2] },
        Caution::Submergence {
            found: Head::from_m(-0.1),
            needed: Head::from_m(0.4),
        },
        Caution::SightsDiffer { stations: vec![4] },
        Caution::Invented,
    ];
    let mut titles = Vec::new();
    for caution in &all {
        let what = format!("{caution:?}");
        said(&book, &what, |w| w.caution(caution).title.to_owned());
        sentences(&book, &what, |w| w.caution(caution).body);
        titles.push(
            Words::new(Language::English, UnitSystem::Metric)
                .about(&book)
                .caution(caution)
                .title,
        );
    }
    titles.dedup();
    assert_eq!(titles.len(), 25, "one title for each caution: {titles:?}");
    let preset = Field::ColdestWater.preset().unwrap();
    for assumption in [
        Assumption::ForebayAtFirstStation(Level::from_m(10.0)),
        Assumption::HighestIsNormal(Level::from_m(10.0)),
        Assumption::JetsAtLastStation(Level::from_m(10.0)),
        Assumption::Preset(Field::ColdestWater, preset),
        Assumption::SeaLevel,
        Assumption::Roughness(RoughnessAge::Aged),
        Assumption::Roughness(RoughnessAge::New),
        Assumption::BranchBoreOfLastStretch(m(0.1)),
        Assumption::NoEntrance,
        Assumption::WarmestWaterUnknown,
        Assumption::BendsRatedAsPipe,
        Assumption::StraightArea,
        Assumption::EntrainedAir(0.001),
        Assumption::OpeningAsClosing,
        Assumption::ColdWall {
            wall: celsius(2.0),
            stiffening: 1.57,
        },
        Assumption::SurgeAllowance(2, GaugePressure::from_pa(12e5)),
        Assumption::IntakeApproach(Approach::Lateral),
        Assumption::IntakeApproach(Approach::Symmetrical),
    ] {
        sentences(&book, &format!("{assumption:?}"), |w| {
            w.assumption(&assumption)
        });
    }
}

#[test]
fn every_file_trouble_speaks() {
    let book = book();
    let why = || "expected value".to_owned();
    for trouble in [
        FileTrouble::TooLong { bytes: 9_000_000 },
        FileTrouble::NotText,
        FileTrouble::NotABook,
        FileTrouble::NewerFormat { found: 2 },
        FileTrouble::RepeatedNumber {
            list: "stations",
            id: 3,
        },
        FileTrouble::RepeatedNumber {
            list: "pipes of one's own",
            id: 3,
        },
        FileTrouble::TooManyRows {
            list: "prices",
            count: 2001,
        },
        FileTrouble::NoKey,
    ] {
        sentences(&book, &format!("{trouble:?}"), |w| {
            w.words.file_trouble(&trouble)
        });
    }
    for trouble in [
        FileTrouble::NotJson {
            line: 3,
            column: 7,
            why: why(),
        },
        FileTrouble::Content {
            why: why(),
            line: 12,
        },
    ] {
        said(&book, &format!("{trouble:?}"), |w| {
            w.words.file_trouble(&trouble)
        });
    }
}

#[test]
fn the_next_entry_is_one_line() {
    let mut books = vec![Book::new("empty"), demo("demo")];
    books[1].line.stretches[0].pipe = None;
    let mut broken = demo("demo");
    broken.stream.design_flow_m3_s.text = "38 L".to_owned();
    broken.stream.design_flow_m3_s.value = None;
    books.push(broken);
    for book in &books {
        let next = evaluate(book).next.unwrap();
        sentences(book, &format!("{next:?}"), |w| w.next(&next));
    }
}

#[test]
fn every_working_of_the_demo_names_its_parts() {
    use workbook::working::FigureKey;
    let book = demo("demo");
    let found = evaluate(&book);
    let fitting = book.line.fittings[0].id;
    for key in [
        FigureKey::GrossHead,
        FigureKey::PipeLength,
        FigureKey::Velocity(1),
        FigureKey::FrictionLoss(1),
        FigureKey::FittingLoss(fitting),
        FigureKey::Loss,
        FigureKey::LossShare,
        FigureKey::NetHead,
        FigureKey::JetVelocity,
        FigureKey::NozzleBore,
        FigureKey::JetDiameter,
        FigureKey::JetPower,
        FigureKey::Lowest,
        FigureKey::Bore(1),
        FigureKey::Standing(1),
        FigureKey::Allowable(1),
        FigureKey::Share(1),
        FigureKey::WaveSpeed(1),
        FigureKey::QuickRise(1),
        FigureKey::Collapse(1),
        FigureKey::GreatestPower,
        FigureKey::Mass(1),
        FigureKey::BendLoss(3),
        FigureKey::Deflection(3),
        FigureKey::ClosingError,
        FigureKey::SubmergenceNeeded,
        FigureKey::ClassNeeded(1),
    ] {
        said(&book, &format!("{key:?}"), |w| w.figure_name(key));
        for input in found.working(key).unwrap().inputs {
            let what = format!("{input:?}");
            said(&book, &what, |w| w.words.term(input.term).to_owned());
            for language in Language::ALL {
                whole(
                    &what,
                    &Words::new(language, UnitSystem::Metric).input(&input),
                );
            }
        }
    }
}

#[test]
fn every_thing_laid_and_every_cut_speaks() {
    use workbook::book::LayingOrder;
    use workbook::cut::{Cut, CutAt, Proposal};
    use workbook::laying::{Item, laying};
    let book = book();
    let found = evaluate(&book);
    let mut items: Vec<Item> = laying(&found, LayingOrder::Uphill)
        .unwrap()
        .into_iter()
        .flat_map(|row| row.items)
        .collect();
    for made in [
        Made::Taken,
        Made::Smooth { radius: 1.5 },
        Made::Mitre,
        Made::ByHand(2),
    ] {
        for (plan_deg, vertical_deg) in [(12.0, 3.0), (-12.0, 0.0), (0.0, -5.0)] {
            items.push(Item::Turn {
                made,
                deflection_deg: 12.4,
                plan_deg,
                vertical_deg,
            });
        }
    }
    items.push(Item::Vent(Collects::HighPoint));
    items.push(Item::Vent(Collects::Steepens { by: 0.123 }));
    items.push(Item::Drain);
    items.push(Item::Fitting {
        id: 3,
        kind: FittingKind::GateValve,
        count: Ok(3),
        note: "DN 200".to_owned(),
    });
    let mut spoken = 0;
    for item in &items {
        let en = Words::new(Language::English, UnitSystem::Metric).about(&book);
        if matches!(
            item,
            Item::Fitting {
                kind: FittingKind::Own,
                ..
            }
        ) || en.laid(item).is_none()
        {
            continue;
        }
        spoken += 1;
        said(&book, &format!("{item:?}"), |w| w.laid(item).unwrap());
    }
    assert!(spoken > 20, "{spoken}");
    for order in [LayingOrder::Uphill, LayingOrder::Downhill] {
        said(&book, "order", |w| w.words.name(order).to_owned());
    }
    let cut = |place| {
        Proposal::Cut(Cut {
            stretch: 1,
            chainage: at(120.0),
            at: place,
            above: "pe100-iso4427/225/sdr17".to_owned(),
            below: "pe100-iso4427/225/sdr11".to_owned(),
        })
    };
    for proposal in [
        Proposal::Enough,
        cut(CutAt::Station(3)),
        cut(CutAt::NewBelow {
            station: 3,
            down: at(12.0),
        }),
        Proposal::AllAlong {
            pipe: "pe100-iso4427/225/sdr11".to_owned(),
        },
        Proposal::OwnPipe,
        Proposal::NoneStronger,
    ] {
        sentences(&book, &format!("{proposal:?}"), |w| {
            w.proposal(1, &proposal)
        });
    }
}

#[test]
fn every_choice_of_the_survey_has_a_name() {
    use workbook::book::{BendKind, SurveyWay};
    let book = book();
    for way in [SurveyWay::Level, SurveyWay::Angle, SurveyWay::Staff] {
        said(&book, "way", |w| w.words.name(way).to_owned());
    }
    for kind in [BendKind::Smooth, BendKind::Mitre, BendKind::Joints] {
        said(&book, "bend", |w| w.words.name(kind).to_owned());
    }
    for approach in [Approach::Lateral, Approach::Symmetrical] {
        said(&book, "approach", |w| w.words.name(approach).to_owned());
    }
}

#[test]
fn a_sheet_has_a_name() {
    let book = book();
    for sheet in [
        Sheet::Stream,
        Sheet::Line,
        Sheet::Pipe,
        Sheet::Jets,
        Sheet::Surge,
        Sheet::Hold,
        Sheet::Worth,
        Sheet::Gauge,
        Sheet::Print,
    ] {
        said(&book, "sheet", |w| w.words.name(sheet).to_owned());
    }
}

#[test]
fn quantities_of_the_house_print_without_ado() {
    let words = Words::new(Language::English, UnitSystem::Metric);
    assert_eq!(words.figure(Head::from_m(47.34)), "47.3\u{202f}m");
    assert_eq!(
        words.figure(GaugePressure::from_pa(4.8e5)),
        "4.80\u{202f}bar"
    );
    assert_eq!(
        words.figure(AbsolutePressure::from_pa(0.7e5)),
        "0.70\u{202f}bar"
    );
    assert_eq!(words.figure(Pressure::default()), "0.00\u{202f}bar");
}
