//! What moves, and what it starts from.

use super::setup::{Moves, Setup};
use hydraulics::transient::{Event, SearchSpec, TransientError};

/// Part openings each set of jets closes from, evenly spaced, the full one
/// included.
pub const OPENINGS: u32 = 10;

/// A thing that moves the water.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum EventKind {
    /// All open jets are shut by the closing law.
    Closing,
    /// One of the open jets is blocked at once.
    Blocked,
    /// The jets open from shut.
    Opening,
    /// The load is lost: with deflectors no flow changes, without them the
    /// jets are shut by the closing law.
    LoadLost,
    /// The guard valve is slammed.
    Slam,
}

/// Every [`EventKind`], in the order they are shown.
pub const EVENTS: [EventKind; 5] = [
    EventKind::Closing,
    EventKind::Blocked,
    EventKind::Opening,
    EventKind::LoadLost,
    EventKind::Slam,
];

/// An event and what it starts from.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Start {
    /// What moves.
    pub event: EventKind,
    /// How many jets are open; of an opening, how many open.
    pub open: u32,
    /// Stroke they stand at, as a share of full.
    pub opening: f64,
}

impl Start {
    /// Strokes of all jets when it begins; of an opening, those it ends at.
    #[must_use]
    pub fn strokes(&self, jets: u32) -> Vec<f64> {
        (0..jets)
            .map(|jet| if jet < self.open { self.opening } else { 0.0 })
            .collect()
    }

    /// The strokes the run begins at.
    pub(super) fn first_strokes(&self, jets: u32) -> Vec<f64> {
        match self.event {
            EventKind::Opening => vec![0.0; jets as usize],
            _ => self.strokes(jets),
        }
    }

    pub(super) fn course(&self, setup: &Setup, moves: &Moves) -> Result<Event, TransientError> {
        let strokes = self.strokes(setup.jets);
        match self.event {
            EventKind::Closing => Event::close(&strokes, &moves.law),
            EventKind::LoadLost if moves.deflectors => Event::deflect(&strokes),
            EventKind::LoadLost => Event::close(&strokes, &moves.law),
            EventKind::Blocked => Event::block(&strokes, 0),
            EventKind::Opening => Event::open(&strokes, moves.opening),
            EventKind::Slam => Event::slam(&strokes, moves.slam),
        }
    }
}

/// Every start that is run: the closing from each set at each opening, the
/// others from each set at full stroke, where the flow they stop is greatest.
/// Load lost without deflectors is the closing, and with them nothing moves:
/// it is not run.
pub(super) fn starts(jets: u32) -> Vec<Start> {
    let mut all = Vec::new();
    for open in 1..=jets {
        for part in (1..=OPENINGS).rev() {
            all.push(Start {
                event: EventKind::Closing,
                open,
                opening: f64::from(part) / f64::from(OPENINGS),
            });
        }
        for event in [EventKind::Blocked, EventKind::Slam, EventKind::Opening] {
            all.push(Start {
                event,
                open,
                opening: 1.0,
            });
        }
    }
    all
}

/// The sets of jets a search closes from.
pub(crate) fn sets(jets: u32) -> Vec<Vec<f64>> {
    SearchSpec::equal_sets(jets as usize)
}
