//! From book to findings: a pure function, stage by stage, no back edges.

use crate::book::Book;
use crate::figure::Trouble;
use crate::intake::{Intake, intake};
use crate::judge::{Judged, Places, judge};
use crate::next::{Next, next};
use crate::operation::{Operation, operation};
use crate::relief::{Relief, relief};
use crate::resolve::{Assumption, Resolved, resolve};
use crate::stations::{StationFinding, stations};
use crate::steady::{Steady, steady};
use crate::transient::{Depth, Transient, transient_to};
use crate::walls::{Walls, walls};

/// All that is computed from a book.
#[derive(Debug, Clone, PartialEq)]
pub struct Findings {
    /// Stage 1: what the entries come to.
    pub resolved: Resolved,
    /// Stage 2: line and jets in balance.
    pub steady: Steady,
    /// The line at other flows.
    pub operation: Operation,
    /// Stage 3: transients.
    pub transient: Transient,
    /// Stage 4: what the walls bear.
    pub walls: Walls,
    /// What is found at each station.
    pub stations: Vec<StationFinding>,
    /// Where air collects, and where water stays.
    pub relief: Relief,
    /// The intake under water.
    pub intake: Intake,
    /// Stage 5: verdicts and cautions.
    pub judged: Judged,
    /// The next entry the book needs.
    pub next: Option<Next>,
}

/// Computes every finding of a book.
///
/// Never fails: what cannot be figured says why, and leaves the rest alone.
///
/// # Example
/// ```
/// use workbook::{evaluate, Book};
/// let findings = evaluate(&Book::new("a-key"));
/// assert!(findings.resolved.gross_head.is_err());
/// ```
#[must_use]
pub fn evaluate(book: &Book) -> Findings {
    evaluate_to(book, Depth::Full)
}

/// The same but for the transient, which is left unsettled: what can be shown
/// at once while a person still types.
#[must_use]
pub fn evaluate_before_surge(book: &Book) -> Findings {
    evaluate_to(book, Depth::Quick)
}

fn evaluate_to(book: &Book, depth: Depth) -> Findings {
    let resolved = resolve(book);
    let steady = steady(&resolved);
    let operation = operation(&resolved, &steady);
    let transient = transient_to(&resolved, &steady, depth);
    let walls = walls(&resolved, &steady, &transient);
    let stations = stations(&resolved, &steady, &operation, &walls);
    let relief = relief(&resolved);
    let intake = intake(&resolved, &steady);
    let judged = judge(
        &resolved,
        &steady,
        &operation,
        &transient,
        &walls,
        Places {
            relief: &relief,
            intake: &intake,
        },
        book.invented,
    );
    let next = next(book, &resolved, &walls);
    Findings {
        resolved,
        steady,
        operation,
        transient,
        walls,
        stations,
        relief,
        intake,
        judged,
        next,
    }
}

impl Findings {
    /// Everything taken for granted, to be said on screen and print.
    pub fn assumptions(&self) -> impl Iterator<Item = &Assumption> {
        self.resolved
            .assumptions
            .iter()
            .chain(&self.steady.assumptions)
            .chain(&self.transient.assumptions)
            .chain(&self.intake.assumptions)
    }

    /// Everything that is wrong, each named once.
    #[must_use]
    pub fn troubles(&self) -> Vec<Trouble> {
        let mut all = self.resolved.troubles.clone();
        let mut add = |gap: Option<&crate::figure::Gap>| {
            if let Some(crate::figure::Gap::Wrong(trouble)) = gap
                && !all.contains(trouble)
            {
                all.push(trouble.clone());
            }
        };
        add(self.steady.solved.as_ref().err());
        add(self.steady.grade.as_ref().err());
        for (_, loss) in self.steady.fittings.iter().chain(&self.steady.bends) {
            add(loss.as_ref().err());
        }
        add(self.intake.submergence.as_ref().err());
        for (_, quick) in &self.transient.quick {
            add(quick.as_ref().err());
        }
        add(self.transient.surge.as_ref().err());
        for wall in &self.walls.stretches {
            add(wall.allowable.as_ref().err());
            add(wall.collapse.as_ref().err());
        }
        all
    }
}
