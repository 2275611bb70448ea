//! From the runs to what is found: extremes, events, envelope, trust.

use super::found::{EnvelopeNode, EventPeak, StretchOnGrid, Surge, Trust};
use super::setup::trouble;
use super::solve::{BALANCED, Found, Refined, RefinedRun, Solver, gravity};
use super::starts::{EVENTS, EventKind, Start};
use crate::figure::{Figure, Gap, Lack, Trouble};
use hydraulics::quantity::Level;
use hydraulics::transient::Grid;

impl Solver<'_> {
    pub(super) fn result(
        &self,
        all: &[Found],
        (coarse, fine): (&Grid, &Grid),
        refined: &Refined,
        moved: f64,
    ) -> Figure<Surge> {
        let setup = self.setup;
        // Those that were not refined stand raised; none of them is the worst
        // of a stretch unless there were too many to refine.
        let raised: Vec<Found> = all
            .iter()
            .enumerate()
            .filter(|(i, f)| self.counts(f.start.event) && !refined.has(*i))
            .map(|(_, f)| self.raised(f, refined.error))
            .collect();
        let counted: Vec<&Found> = refined
            .runs
            .iter()
            .map(|r| &r.found)
            .filter(|f| self.counts(f.start.event))
            .chain(&raised)
            .collect();
        let peaks = self.peaks(&counted);
        let shown = refined
            .shown(|event| self.counts(event))
            .ok_or(Gap::Unsettled(Lack::Surge))?;
        let deciding = shown.found.start;
        let run = shown.run.clone();
        let balance = run.balance.ok_or(Gap::Unsettled(Lack::Surge))?;
        let left = balance.volume.abs().max(balance.energy.abs());
        if run.separation.is_none() && (left > BALANCED || left.is_nan()) {
            return Err(Gap::Unsettled(Lack::NotBalanced { left }));
        }
        let full = setup
            .line
            .steady(&vec![1.0; setup.jets as usize])
            .map_err(trouble)?
            .ok_or(Gap::Unsettled(Lack::Surge))?;
        let stretch = setup.stretches.first().copied().unwrap_or(1);
        let wrong = |why| Gap::Wrong(Trouble::Surge { stretch, why });
        let water_starting = setup
            .line
            .water_starting_time(full.grade.flow, full.net_head)
            .map_err(wrong)?;
        let one = setup.line.equivalent(full.grade.flow).map_err(wrong)?;
        Ok(Surge {
            peaks,
            events: self.events(refined),
            envelope: self.envelope(refined),
            deciding,
            foot: run.foot,
            foot_start: run.foot_start,
            foot_highest: run.foot_highest,
            foot_lowest: run.foot_lowest,
            closing: self.moves.law.full_stroke_time(),
            period: setup.line.period(),
            water_starting,
            running: (one.length, one.velocity, full.net_head),
            trust: Trust {
                step: fine.step(),
                cells: fine.cells(),
                stretches: setup
                    .stretches
                    .iter()
                    .zip(&setup.wave_speeds)
                    .zip(fine.stretches())
                    .map(|((stretch, wave_speed), on)| StretchOnGrid {
                        stretch: *stretch,
                        wave_speed: *wave_speed,
                        altered: on.alteration,
                        cells: on.cells,
                    })
                    .collect(),
                moved,
                balance,
                coarse_step: coarse.step(),
                coarse_cells: coarse.cells(),
                coarse_error: refined.error,
                runs: (all.len(), refined.runs.len()),
            },
        })
    }

    fn events(&self, refined: &Refined) -> Vec<EventPeak> {
        EVENTS
            .into_iter()
            .filter_map(|event| self.event(refined, event))
            .collect()
    }

    /// The worst of one kind of event: by stretch over all its refined runs.
    fn event(&self, refined: &Refined, event: EventKind) -> Option<EventPeak> {
        let run_as = match event {
            // Nothing moves: what stands before any event.
            EventKind::LoadLost if self.moves.deflectors => return self.load_lost(),
            EventKind::LoadLost => EventKind::Closing,
            other => other,
        };
        let runs: Vec<&Found> = refined
            .runs
            .iter()
            .map(|r| &r.found)
            .filter(|f| f.start.event == run_as)
            .collect();
        let top = runs
            .iter()
            .max_by(|a, b| a.foot.0.m().total_cmp(&b.foot.0.m()))?;
        let low = runs
            .iter()
            .map(|f| f.foot.1)
            .reduce(|a, b| if b < a { b } else { a })?;
        let peaks = self.peaks(&runs);
        Some(EventPeak {
            start: Start { event, ..top.start },
            counts: self.counts(event),
            foot_highest: top.foot.0,
            foot_lowest: low,
            highest: peaks
                .stretches
                .iter()
                .map(|s| (s.highest.pressure, s.highest.at))
                .collect(),
            lowest: peaks
                .stretches
                .iter()
                .map(|s| (s.lowest.pressure, s.lowest.at))
                .collect(),
            parted: peaks.parted,
        })
    }

    /// The load lost with the deflectors in: the running line, unmoved.
    fn load_lost(&self) -> Option<EventPeak> {
        let start = Start {
            event: EventKind::LoadLost,
            open: self.setup.jets,
            opening: 1.0,
        };
        let steady = self
            .setup
            .line
            .steady(&start.strokes(self.setup.jets))
            .ok()??;
        let foot = steady.grade.nodes.last()?;
        let grade = foot.level + foot.pressure.head(self.setup.density, gravity());
        let mut highest = Vec::new();
        let mut lowest = Vec::new();
        for index in 0..self.setup.stretches.len() {
            let of = |worse: fn(f64, f64) -> bool| {
                steady
                    .grade
                    .nodes
                    .iter()
                    .filter(|n| n.run == index)
                    .map(|n| (n.pressure, n.chainage))
                    .reduce(|a, b| if worse(b.0.pa(), a.0.pa()) { b } else { a })
            };
            highest.push(of(|b, a| b > a)?);
            lowest.push(of(|b, a| b < a)?);
        }
        Some(EventPeak {
            start,
            counts: true,
            foot_highest: grade,
            foot_lowest: grade,
            highest,
            lowest,
            parted: None,
        })
    }

    /// Highest and lowest level over every refined run that counts.
    fn envelope(&self, refined: &Refined) -> Vec<EnvelopeNode> {
        let lower = |level: Level| level - self.setup.low_by;
        let mut counted: Vec<&RefinedRun> = refined
            .runs
            .iter()
            .filter(|r| self.counts(r.found.start.event))
            .collect();
        // The finest nodes first; runs on other nodes are read between theirs.
        counted.sort_by_key(|r| core::cmp::Reverse(r.run.nodes.len()));
        let Some(first) = counted.first() else {
            return Vec::new();
        };
        let mut nodes: Vec<EnvelopeNode> = first
            .run
            .nodes
            .iter()
            .map(|n| EnvelopeNode {
                chainage: n.chainage,
                level: n.level,
                highest: n.highest,
                lowest: lower(n.lowest),
            })
            .collect();
        for run in counted.iter().skip(1).map(|r| &r.run) {
            let same = run.nodes.len() == nodes.len();
            for (i, node) in nodes.iter_mut().enumerate() {
                let range = if same {
                    run.nodes.get(i).map(|n| (n.highest, n.lowest))
                } else {
                    run.range_at(node.chainage)
                };
                let Some((high, low)) = range else { continue };
                if high > node.highest {
                    node.highest = high;
                }
                if lower(low) < node.lowest {
                    node.lowest = lower(low);
                }
            }
        }
        nodes
    }
}
