//! Laws every book obeys, shown on the invented demo book and on altered
//! copies of it.
#![allow(clippy::unwrap_used, reason = "a helper of tests fails as a test does")]

use proptest::prelude::*;
use workbook::demo::demo;
use workbook::reading::DecimalMark;
use workbook::units::UnitSystem;
use workbook::{Book, Entry, EntryTrouble, Field, Findings, Gap, Trouble, evaluate};

/// Every figure of the findings by name: its value in SI, or its gap.
fn figures(found: &Findings) -> Vec<(String, Result<f64, Gap>)> {
    let mut all: Vec<(String, Result<f64, Gap>)> = Vec::new();
    let mut put = |name: String, figure: Result<f64, Gap>| all.push((name, figure));
    let r = &found.resolved;
    let m = |name: &str| name.to_owned();
    put(m("gross head"), r.gross_head.clone().map(|x| x.m()));
    put(m("design flow"), r.design_flow.clone().map(|x| x.value));
    put(
        m("pipe length"),
        r.profile.pipe_length.clone().map(|x| x.m()),
    );
    put(m("air"), r.atmosphere.clone().map(|x| x.pa()));
    let s = &found.steady;
    put(m("flow"), s.flow.clone().map(|x| x.value));
    put(m("loss"), s.loss.clone().map(|x| x.m()));
    put(m("loss share"), s.loss_share.clone());
    put(m("net head"), s.solved.clone().map(|x| x.net_head.m()));
    put(m("power"), s.solved.clone().map(|x| x.jet_power.value));
    put(m("bore"), s.solved.clone().map(|x| x.bore.value));
    put(m("lowest"), s.lowest.clone().map(|x| x.pressure.pa()));
    put(m("boiling margin"), s.vapour.clone().map(|x| x.margin.m()));
    put(
        m("sets"),
        found
            .operation
            .sets
            .clone()
            .map(|x| x.iter().map(|s| s.flow.value).sum()),
    );
    put(
        m("greatest power"),
        found.operation.share_of_greatest.clone(),
    );
    for wall in &found.walls.stretches {
        let id = wall.stretch;
        put(
            format!("standing {id}"),
            wall.standing.clone().map(|x| x.pressure.pa()),
        );
        put(
            format!("allowed {id}"),
            wall.allowable.clone().map(|x| x.pressure.value),
        );
        put(
            format!("bearing {id}"),
            wall.bearing.clone().map(|x| x.pressure.pa()),
        );
        put(format!("share {id}"), wall.share.clone());
        put(
            format!("collapse {id}"),
            wall.collapse.clone().map(|x| x.allowed.value),
        );
        put(
            format!("lowest {id}"),
            wall.lowest.clone().map(|x| x.pressure.pa()),
        );
        put(
            format!("suction {id}"),
            wall.suction_allowed.clone().map(|x| x.value),
        );
    }
    for (id, quick) in &found.transient.quick {
        put(format!("quick {id}"), quick.clone().map(|x| x.rise.m()));
    }
    all
}

/// The heart of it: an entry that cannot be used takes with it the figures
/// that rest on it, each naming that entry, and leaves all others bit for bit
/// as they were.
#[test]
fn one_unusable_entry_leaves_every_independent_figure_as_it_was() {
    let book = demo("demo");
    let before = figures(&evaluate(&book));
    assert!(
        before.iter().all(|(_, figure)| figure.is_ok()),
        "{before:?}"
    );
    let mut touched = 0;
    for field in book.fields() {
        let mut bad = book.clone();
        let entry = bad.entry_mut(field).unwrap();
        *entry = Entry::typed(
            "12 wagons",
            &entry.unit.clone(),
            field.kind(),
            DecimalMark::Point,
        );
        let found = evaluate(&bad);
        assert!(
            found
                .troubles()
                .iter()
                .any(|t| matches!(t, Trouble::Entry(f, _) if *f == field)),
            "{field:?} is wrong and not named"
        );
        for ((name, was), (_, is)) in before.iter().zip(figures(&found)) {
            match is {
                Ok(value) => assert_eq!(Ok(value), *was, "{name} moved with {field:?}"),
                Err(Gap::Wrong(Trouble::Entry(f, EntryTrouble::Unreadable(_)))) => {
                    touched += 1;
                    assert_eq!(f, field, "{name} blames another entry");
                }
                Err(gap) => panic!("{name} with {field:?} wrong: {gap:?}"),
            }
        }
    }
    assert!(touched > 100, "the entries hardly matter: {touched}");
}

/// The same site typed in feet, inches, gallons and psi.
#[test]
fn a_book_in_either_unit_system_gives_the_same_figures() {
    let book = demo("demo");
    let mut us = book.clone();
    us.units = UnitSystem::UsCustomary;
    for field in book.fields() {
        let Ok(Some(value)) = book.value(field) else {
            continue;
        };
        let unit = field.kind().default_unit(UnitSystem::UsCustomary);
        let text = format!("{:.12}", unit.from_base(value));
        *us.entry_mut(field).unwrap() =
            Entry::typed(&text, unit.symbol, field.kind(), DecimalMark::Point);
    }
    let metric = figures(&evaluate(&book));
    for ((name, a), (_, b)) in metric.iter().zip(figures(&evaluate(&us))) {
        let (a, b) = (a.clone().unwrap(), b.unwrap());
        assert!(
            (a - b).abs() <= 1e-8 * a.abs().max(1e-6),
            "{name}: {a} and {b}"
        );
    }
}

fn with(book: &Book, field: Field, text: &str, unit: &str) -> Book {
    let mut book = book.clone();
    *book.entry_mut(field).unwrap() = Entry::typed(text, unit, field.kind(), DecimalMark::Point);
    book
}

#[test]
fn splitting_a_stretch_changes_no_figure() {
    let mut book = demo("demo");
    book.line.stretches.truncate(1);
    let whole = evaluate(&book);
    let mut split = book.clone();
    let second = workbook::book::StretchEntry {
        id: 9,
        from_station: 8,
        ..split.line.stretches[0].clone()
    };
    split.line.stretches.push(second);
    let parted = evaluate(&split);
    for (a, b) in [
        (
            whole.steady.loss.unwrap().m(),
            parted.steady.loss.unwrap().m(),
        ),
        (
            whole.steady.solved.unwrap().net_head.m(),
            parted.steady.solved.unwrap().net_head.m(),
        ),
        (
            whole.steady.lowest.unwrap().pressure.pa(),
            parted.steady.lowest.unwrap().pressure.pa(),
        ),
    ] {
        assert!((a - b).abs() <= 1e-9 * a.abs().max(1.0), "{a} and {b}");
    }
}

#[test]
fn a_hotter_wall_never_bears_more() {
    let book = demo("demo");
    let mut last = f64::INFINITY;
    for t in 0..=40 {
        let hot = with(
            &with(&book, Field::ColdestWall, "0", "°C"),
            Field::WarmestWall,
            &t.to_string(),
            "°C",
        );
        let bears = evaluate(&hot).walls.stretches[0]
            .allowable
            .clone()
            .unwrap()
            .pressure
            .value;
        assert!(bears <= last, "{t} degC");
        last = bears;
    }
}

#[test]
fn energy_balances_from_forebay_to_jet() {
    let found = evaluate(&demo("demo"));
    let solved = found.steady.solved.unwrap();
    let sum = solved.net_head.m() + found.steady.loss.unwrap().m();
    assert!((sum - found.resolved.gross_head.unwrap().m()).abs() < 1e-9);
    let mut energy = f64::INFINITY;
    for node in &solved.grade.nodes {
        assert!(node.energy.m() <= energy + 1e-12);
        energy = node.energy.m();
    }
}

/// This many cases of each property, or as many as `PROPTEST_CASES` asks for.
fn cases(usual: u32) -> ProptestConfig {
    match std::env::var_os("PROPTEST_CASES") {
        // The default configuration reads it.
        Some(_) => ProptestConfig::default(),
        None => ProptestConfig::with_cases(usual),
    }
}

proptest! {
    #![proptest_config(cases(64))]

    #[test]
    fn more_flow_loses_more(q in 5.0..60.0f64, more in 0.1..10.0f64) {
        let book = demo("demo");
        let loss = |q: f64| {
            evaluate(&with(&book, Field::DesignFlow, &format!("{q}"), "L/s")).steady.loss.unwrap().m()
        };
        prop_assert!(loss(q + more) > loss(q));
    }

    #[test]
    fn whatever_is_typed_evaluate_answers(
        which in 0usize..80,
        text in prop_oneof![".{0,12}", "-?[0-9]{1,7}([.,][0-9]{1,4})?", Just("0".to_owned())],
    ) {
        let mut book = demo("demo");
        let fields = book.fields();
        let field = fields[which % fields.len()];
        let entry = book.entry_mut(field).unwrap();
        *entry = Entry::typed(&text, &entry.unit.clone(), field.kind(), DecimalMark::Comma);
        let found = evaluate(&book);
        for (name, figure) in figures(&found) {
            if let Ok(x) = figure {
                prop_assert!(x.is_finite(), "{} is {} with {:?} {:?}", name, x, field, text);
            }
        }
    }
}
