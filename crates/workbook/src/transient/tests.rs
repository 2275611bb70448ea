//! What the transient owes: no false hold, the start that decides, the same
//! answer by every road.

use super::*;
use crate::book::{Book, MachineKind, OpenArea, ValveRow};
use crate::closing::{ClosingStudy, Found, Shortest};
use crate::demo::demo;
use crate::entry::Entry;
use crate::evaluate::{Findings, evaluate};
use crate::field::Field;
use crate::judge::verdicts;
use crate::reading::DecimalMark;
use crate::resolve::resolve;
use crate::steady::steady;
use crate::verdict::{CheckKind, Verdict};
use crate::walls::walls;
use hydraulics::quantity::PipeLength;
use proptest::prelude::*;
use uom::si::time::second;

fn with(book: &Book, field: Field, value: f64) -> Book {
    let mut book = book.clone();
    let unit = field.kind().units()[0];
    let text = format!("{:.9}", unit.from_base(value));
    *book.entry_mut(field).unwrap() =
        Entry::typed(&text, unit.symbol, field.kind(), DecimalMark::Point);
    book
}

fn closing_in(book: &Book, time: f64) -> Findings {
    evaluate(&with(book, Field::ClosingTime, time))
}

fn surge(found: &Findings) -> &Surge {
    found.transient.surge.as_ref().unwrap()
}

#[test]
fn a_needle_closed_from_part_opening_decides_and_is_named() {
    for time in [3.0, 8.0, 15.0] {
        let found = closing_in(&demo("demo"), time);
        let surge = surge(&found);
        let start = surge.deciding;
        assert_eq!(start.event, EventKind::Closing);
        assert!(start.opening < 1.0, "{start:?}");
        let full = Start {
            opening: 1.0,
            ..start
        };
        let from_part = show(&found, start, &[], 0).unwrap();
        let from_full = show(&found, full, &[], 0).unwrap();
        assert!(from_part.highest.0.m() > from_full.highest.0.m() + 0.5);
        assert_eq!(from_part.highest.0, surge.foot_highest.0);
        let last = surge.peaks.stretches.last().unwrap();
        assert!(last.highest.by.opening < 1.0);
    }
}

/// Every start on the fine grid, none left out: what the two steps find is the
/// worst of them, but for the share the coarse grid may be off by twice over.
#[test]
fn no_start_left_coarse_is_worse_than_what_is_found() {
    for time in [2.0, 6.0, 20.0] {
        let found = closing_in(&demo("demo"), time);
        let peaks = &surge(&found).peaks;
        let setup = Setup::new(&found.resolved, &found.steady).unwrap();
        for start in starts::starts(setup.jets) {
            if matches!(start.event, EventKind::Slam | EventKind::Blocked) {
                continue;
            }
            let run = show(&found, start, &[], 0).unwrap();
            for ((at, level), (high, low)) in run.nodes.iter().zip(&run.range) {
                let stretch = found
                    .resolved
                    .stretches
                    .iter()
                    .position(|s| s.span.as_ref().unwrap().holds(*at))
                    .unwrap();
                let most = peaks.stretches[stretch].highest.pressure;
                let least = peaks.stretches[stretch].lowest.pressure;
                let high = setup.pressure(*high - *level);
                let low = setup.pressure(*low - setup.low_by - *level);
                assert!(high.pa() <= most.pa() + 20.0, "{start:?} {at:?}");
                // At a joint the other stretch's node is as good.
                let other = &peaks.stretches[stretch.min(1)].lowest.pressure;
                let floor = least.pa().min(other.pa());
                assert!(low.pa() >= floor - 20.0, "{start:?} {at:?}");
            }
        }
    }
}

fn study(found: &Findings) -> Found {
    let mut study = ClosingStudy::new(found).unwrap();
    let mut last = 0.0;
    loop {
        assert!(study.progress() >= last - 0.41);
        last = study.progress();
        if let Some(found) = study.advance(25).unwrap() {
            return found.clone();
        }
    }
}

/// The worst of the checks that a closing bears on.
fn closing_verdict(found: &Findings) -> Verdict {
    found
        .judged
        .stretches
        .iter()
        .flat_map(|s| &s.checks)
        .filter(|c| matches!(c.kind, CheckKind::SurgePressure | CheckKind::LowestPressure))
        .map(|c| c.verdict)
        .max()
        .unwrap()
}

#[test]
fn the_shortest_time_and_ten_longer_hold_and_a_shorter_one_fails() {
    let demo = demo("demo");
    let mut weak = demo.clone();
    weak.line.stretches.truncate(1);
    assert!(crate::edit::lay(&mut weak, 1, "pe100-iso4427/225/sdr17"));
    for book in [demo, weak] {
        let found = study(&evaluate(&book));
        let Shortest::Time { time, decides, .. } = found.shortest else {
            panic!("{found:?}");
        };
        let shortest = time.get::<second>();
        assert!(shortest > 0.0);
        assert!(decides.start.opening > 0.0 && decides.stretch.is_some());
        for part in 0..=10 {
            let longer = shortest + f64::from(part) / 10.0 * (60.0 - shortest);
            let verdict = closing_verdict(&closing_in(&book, longer));
            assert!(verdict <= Verdict::Tight, "{longer} s");
        }
        let verdict = closing_verdict(&closing_in(&book, shortest * 0.98));
        assert_eq!(verdict, Verdict::Fails);
        let proposal = found.proposal.unwrap();
        assert!(proposal.speeds.full_stroke() >= time * 1.25);
        assert!(proposal.verdict <= Verdict::Tight);
        let mut ordered = book.clone();
        crate::closing::apply(&mut ordered, &proposal);
        let plan = crate::schedule::schedule(&ordered, &evaluate(&ordered));
        assert!(plan.closing.unwrap().reserve_holds);
    }
}

#[test]
fn a_trace_and_its_pictures_are_one_run() {
    let found = evaluate(&demo("demo"));
    let surge = surge(&found);
    let middle = PipeLength::from_m(158.0);
    let shown = show(&found, surge.deciding, &[middle], 30).unwrap();
    assert_eq!(shown.pictures[0].grades.len(), shown.nodes.len());
    let trace = trace_at(&found, middle).unwrap();
    assert_eq!(trace, shown.places[0].1);
    assert!(trace_at(&found, PipeLength::from_m(9999.0)).is_err());
}

#[test]
fn what_keeps_surge_unsettled_is_named() {
    let mut book = demo("demo");
    book.surge.machine = MachineKind::FlowWithSpeed;
    let found = evaluate(&book);
    assert_eq!(found.transient.surge, Err(Gap::Unsettled(Lack::Machine)));
    assert!(found.judged.verdict >= Verdict::Unsettled);

    book = demo("demo");
    book.surge.area = OpenArea::Table;
    let lack = Err(Gap::Unsettled(Lack::ValveTable));
    assert_eq!(evaluate(&book).transient.surge, lack);
    book.surge.valve = vec![ValveRow::default()];
    let book = with(
        &with(&book, Field::ValveStroke(0), 0.5),
        Field::ValveOpen(0),
        0.9,
    );
    assert!(evaluate(&book).transient.surge.is_ok());
    let bad = with(
        &with(&book, Field::ValveStroke(0), 1.0),
        Field::ValveOpen(0),
        0.4,
    );
    let found = evaluate(&bad);
    assert!(found.troubles().contains(&Trouble::ValveRow { row: 0 }));
}

#[test]
fn a_slam_counts_only_where_the_book_says_so() {
    let mut book = demo("demo");
    let usual = evaluate(&book);
    let slam = surge(&usual).event(EventKind::Slam).unwrap();
    assert!(!slam.counts && slam.parted.is_some());
    assert!(usual.judged.verdict <= Verdict::Tight);
    book.surge.guard_may_slam = true;
    let found = evaluate(&book);
    assert!(surge(&found).peaks.parted.is_some());
    assert!(found.judged.verdict >= Verdict::Unsettled);
    // Where it may not, a jet that may block is just as bad here.
    book.surge.guard_may_slam = false;
    book.surge.jets_kept_clear = false;
    assert!(evaluate(&book).judged.verdict >= Verdict::Unsettled);
}

#[test]
fn deflectors_keep_the_load_lost_from_moving_the_water() {
    let mut book = demo("demo");
    let usual = evaluate(&book);
    let lost = |found: &Findings| {
        let surge = surge(found);
        let event = surge.event(EventKind::LoadLost).unwrap();
        (
            event.foot_highest.m(),
            surge.event(EventKind::Closing).unwrap().foot_highest.m(),
        )
    };
    let (load, closing) = lost(&usual);
    assert!((load - closing).abs() < 1e-12);
    book.surge.deflectors = true;
    let (load, closing) = lost(&evaluate(&book));
    assert!(load < closing);
    assert!(load < 187.7);
}

/// An allowance the user enters is what surge is held to, and is said.
#[test]
fn an_allowance_stands_in_for_the_lasting_pressure() {
    let book = demo("demo");
    let low = with(&book, Field::SurgeAllowed(1), 3e5);
    let found = evaluate(&low);
    let check = found.judged.stretches[0]
        .checks
        .iter()
        .find(|c| c.kind == CheckKind::SurgePressure)
        .unwrap();
    assert_eq!(check.verdict, Verdict::Fails);
    assert!(
        found
            .assumptions()
            .any(|a| matches!(a, Assumption::SurgeAllowance(1, _)))
    );
}

/// A random line of the demo's stations: pipes, flow, jets, closing time.
fn random_book(
    pipes: (usize, usize),
    cut: u32,
    flow: f64,
    jets: u32,
    closing: f64,
    straight: bool,
) -> Book {
    let mut book = demo("random");
    let usable: Vec<&pipes::Pipe> = pipes::catalogue()
        .pipes
        .iter()
        .filter(|p| (0.12..0.4).contains(&p.bore().value))
        .collect();
    for (id, pick) in [(1, pipes.0), (2, pipes.1)] {
        let pipe = usable[pick % usable.len()];
        assert!(crate::edit::lay(&mut book, id, &pipe.id));
    }
    book.line.stretches[1].from_station = cut;
    book.jets.branch_bore_m = Entry::default();
    book = with(&book, Field::DesignFlow, flow);
    book = with(&book, Field::JetCount, f64::from(jets));
    if straight {
        book.surge.area = OpenArea::Straight;
    }
    with(&book, Field::ClosingTime, closing)
}

fn verdict_at(found: &Findings, depth: Depth) -> Option<(Verdict, Peaks)> {
    let steady = steady(&found.resolved);
    let transient = transient_to(&found.resolved, &steady, depth);
    let walls = walls(&found.resolved, &steady, &transient);
    let worst = verdicts(&found.resolved, &steady, &transient, &walls)
        .iter()
        .map(|s| s.verdict)
        .max()?;
    Some((worst, transient.peaks.ok()?))
}

/// Fifty cases, or as many as `PROPTEST_CASES` asks for.
fn cases() -> ProptestConfig {
    match std::env::var_os("PROPTEST_CASES") {
        Some(_) => ProptestConfig::default(),
        None => ProptestConfig::with_cases(50),
    }
}

proptest! {
    #![proptest_config(cases())]

    /// The coarse grid with its allowance is never kinder than the fine one,
    /// on the line it was measured on.
    #[test]
    fn the_coarse_grid_never_falsely_holds(
        pipes in (0usize..1000, 0usize..1000),
        cut in 3u32..14,
        flow in 0.008..0.07f64,
        jets in 1u32..4,
        closing in 0.5..40.0f64,
        straight in any::<bool>(),
    ) {
        let found = evaluate(&random_book(pipes, cut, flow, jets, closing, straight));
        let Ok(surge) = &found.transient.surge else {
            // Too narrow for the flow, or not to be trusted: nothing holds.
            prop_assert!(found.judged.verdict >= Verdict::Unsettled);
            return Ok(());
        };
        let error = surge.trust.coarse_error;
        let (coarse, peaks) = verdict_at(&found, Depth::Coarse(error)).unwrap();
        let fine = found.judged.stretches.iter().map(|s| s.verdict).max().unwrap();
        prop_assert!(!(coarse <= Verdict::Tight && fine == Verdict::Fails), "{coarse:?} {fine:?}");
        if surge.peaks.parted.is_none() {
            for (c, f) in peaks.stretches.iter().zip(&surge.peaks.stretches) {
                let (high, low) = (f.highest.pressure.pa(), f.lowest.pressure.pa());
                prop_assert!(c.highest.pressure.pa() >= high - 1e-6 * high.abs(), "{c:?} {f:?}");
                prop_assert!(c.lowest.pressure.pa() <= low + 1e-6 * high.abs(), "{c:?} {f:?}");
            }
        }
    }
}

#[test]
fn surge_does_not_read_the_clock_of_the_book() {
    // The same book twice, bit for bit.
    let book = demo("demo");
    assert_eq!(evaluate(&book).transient, evaluate(&book).transient);
    assert_eq!(resolve(&book).drive, resolve(&book).drive);
}
