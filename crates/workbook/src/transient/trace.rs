//! The course in time at any place, and the wave along the line, of one start.

use super::setup::{Moves, Setup, trouble};
use super::solve::Solver;
use super::starts::Start;
use crate::evaluate::Findings;
use crate::figure::Figure;
use hydraulics::quantity::{Level, PipeLength};
use hydraulics::transient::{Grid, Picture, Run, RunOptions, Trace};
use uom::si::f64::Time;

/// One run, to be looked at.
#[derive(Debug, Clone, PartialEq)]
pub struct Shown {
    /// The event and its start.
    pub start: Start,
    /// Course at the foot.
    pub foot: Trace,
    /// Course at each place asked for, with the chainage of the node it is
    /// read at.
    pub places: Vec<(PipeLength, Trace)>,
    /// Chainage and pipe level of every node, in the order of the pictures'
    /// grades.
    pub nodes: Vec<(PipeLength, Level)>,
    /// The line at evenly spaced times.
    pub pictures: Vec<Picture>,
    /// Highest and lowest level of this run at every node, from the highest
    /// forebay level.
    pub range: Vec<(Level, Level)>,
    /// Highest and lowest grade at the foot, and when.
    pub highest: (Level, Time),
    /// The same, lowest.
    pub lowest: (Level, Time),
}

/// Runs one start again, with traces at `places` and about `pictures` pictures
/// of the line (0 for none). The findings stand; nothing else is computed.
///
/// # Errors
/// What the transient lacks; a place outside the line.
pub fn show(
    findings: &Findings,
    start: Start,
    places: &[PipeLength],
    pictures: usize,
) -> Figure<Shown> {
    let setup = Setup::new(&findings.resolved, &findings.steady)?;
    let moves = Moves::new(&findings.resolved)?;
    let longest = moves.longest();
    let fine = Grid::new(&setup.line, setup.fine(longest)).map_err(trouble)?;
    let coarse = Grid::new(&setup.line, setup.coarse(longest)).map_err(trouble)?;
    let options = RunOptions {
        probes: places.to_vec(),
        pictures,
        balance: false,
        ..RunOptions::default()
    };
    let run: Run = Solver::new(&setup, &moves)
        .to_show(&coarse, &fine, start, &options)
        .map_err(trouble)?;
    Ok(Shown {
        start,
        foot: run.foot,
        places: run
            .probes
            .into_iter()
            .map(|p| (p.chainage, p.trace))
            .collect(),
        nodes: run.nodes.iter().map(|n| (n.chainage, n.level)).collect(),
        range: run.nodes.iter().map(|n| (n.highest, n.lowest)).collect(),
        pictures: run.pictures,
        highest: run.foot_highest,
        lowest: run.foot_lowest,
    })
}

/// The course in time at a place, of the start that decides.
///
/// # Errors
/// What the transient lacks; a place outside the line.
pub fn trace_at(findings: &Findings, at: PipeLength) -> Figure<Trace> {
    let deciding = match &findings.transient.surge {
        Ok(surge) => surge.deciding,
        Err(gap) => return Err(gap.clone()),
    };
    let shown = show(findings, deciding, &[at], 0)?;
    let place = shown.places.into_iter().next();
    Ok(place.map_or(shown.foot, |(_, trace)| trace))
}
