//! What the line does at other flows: every set of open jets, and how near
//! the flow lies to the greatest power the pipe can pass.

use crate::figure::{CloneGap, Figure, Gap, Trouble};
use crate::resolve::{JetSpec, Resolved};
use crate::stations::{Running, at_points};
use crate::steady::{Steady, line_loss, set_of};
use hydraulics::line::{Line, NozzleTemplate, PowerCurve, Solved};
use hydraulics::quantity::Head;
use uom::si::f64::{Power, VolumeRate};

/// Steps of the curve of power against flow; enough for a smooth line.
const POWER_STEPS: usize = 24;

/// One set of open jets.
#[derive(Debug, Clone, PartialEq)]
pub struct JetSet {
    /// How many are open.
    pub open: u32,
    /// Flow through all of them.
    pub flow: VolumeRate,
    /// Net head.
    pub net_head: Head,
    /// Head lost, branches included.
    pub loss: Head,
    /// Power in all open jets.
    pub power: Power,
    /// The running line at each station.
    pub stations: Vec<Running>,
}

/// How the line runs.
#[derive(Debug, Clone, PartialEq)]
pub struct Operation {
    /// Every set of open jets, from one to all.
    pub sets: Figure<Vec<JetSet>>,
    /// Power against flow, and the flow of greatest power: a limit to stay
    /// away from.
    pub power: Figure<PowerCurve>,
    /// The flow as a share of the flow of greatest power.
    pub share_of_greatest: Figure<f64>,
}

/// The line at other flows.
#[must_use]
pub fn operation(found: &Resolved, steady: &Steady) -> Operation {
    let power = steady.line.clone_gap().and_then(|line| {
        line.power_curve(steady.template.clone_gap()?, POWER_STEPS)
            .map_err(|why| Gap::Wrong(Trouble::Line(why)))
    });
    let share_of_greatest = power.clone_gap().and_then(|curve| {
        let share: uom::si::f64::Ratio = steady.flow.clone()? / curve.greatest_power.flow;
        Ok(share.get::<uom::si::ratio::ratio>())
    });
    Operation {
        sets: sets(&steady.line, &steady.solved, &steady.template, &found.jets),
        power,
        share_of_greatest,
    }
}

fn sets(
    line: &Figure<Line>,
    solved: &Figure<Solved>,
    template: &Figure<NozzleTemplate>,
    jets: &Figure<JetSpec>,
) -> Figure<Vec<JetSet>> {
    let solved = solved.clone_gap()?;
    let template = template.clone_gap()?;
    let count = jets.clone()?.count;
    let line = line.clone_gap()?;
    (1..=count)
        .map(|open| {
            if open == count {
                return Ok(jet_set(open, solved));
            }
            let set = set_of(template, solved.bore, open)?;
            line.flow_for(&set)
                .map(|s| jet_set(open, &s))
                .map_err(|why| Gap::Wrong(Trouble::Line(why)))
        })
        .collect()
}

fn jet_set(open: u32, solved: &Solved) -> JetSet {
    JetSet {
        open,
        flow: solved.grade.flow,
        net_head: solved.net_head,
        loss: line_loss(&solved.grade) + solved.branch_loss,
        power: solved.jet_power,
        stations: at_points(&solved.grade),
    }
}
