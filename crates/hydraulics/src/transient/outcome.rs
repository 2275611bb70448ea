//! What a march leaves behind.

use super::march::March;
use super::run::{Balance, NodeEnvelope, Picture, Run, Separation};
use super::traces::Traces;
use crate::quantity::{Level, PipeLength, Time, Volume, VolumeRate};
use uom::si::time::second;
use uom::si::volume::cubic_meter;
use uom::si::volume_rate::cubic_meter_per_second;

/// A cavity counts as open when its gas stands at this share of the
/// atmosphere's pressure above vapour.
const OPEN_SHARE: f64 = 0.01;

impl March<'_> {
    /// Grade above the axis and flow at a node, after the joints and before
    /// the cells of a step.
    pub(super) fn state(&self, node: usize) -> (f64, f64) {
        let model = self.model;
        let Some(reach) = model
            .reaches
            .iter()
            .find(|reach| node <= reach.first + reach.cells)
        else {
            return (f64::NAN, f64::NAN);
        };
        let (p, m) = (
            self.scratch.p[self.base_p + node],
            self.scratch.m[self.base_m + node],
        );
        let (head, q);
        if node == reach.first {
            q = (p - m) / (2.0 * reach.b);
            head = m + reach.b * q + reach.half * q * q.abs();
        } else if node == reach.first + reach.cells {
            q = (p - m) / (2.0 * reach.b);
            head = p - reach.b * q - reach.half * q * q.abs();
        } else {
            // D = B Q + R Q|Q|/2.
            q = super::joint::flow_of(reach.b, reach.half, 0.5 * (p - m));
            head = 0.5 * (p + m);
        }
        (head - self.velocity * reach.velocity_head * q * q, q)
    }

    /// The whole line as it stands, in the order of [`Run::nodes`].
    pub(super) fn picture(&self, time: f64) -> Picture {
        let model = self.model;
        let mut grades = Vec::with_capacity(self.nodes + 2);
        for node in 0..self.nodes {
            grades.push(self.state(node).0 + model.axis);
        }
        if self.inlet_is_lumped() {
            let first = grades.first().copied().unwrap_or(f64::NAN);
            grades.insert(0, first);
        }
        grades.push(self.foot_grade + model.axis);
        Picture {
            time: Time::new::<second>(time),
            grades,
            flow_out: self.foot_flow,
        }
    }

    /// Whether a lumped run stands above the first node, so that the inlet is
    /// put in before it.
    fn inlet_is_lumped(&self) -> bool {
        let inlet = self.model.ends.0.0;
        self.model
            .chainages
            .first()
            .is_some_and(|at| *at > inlet + 1e-6)
    }

    pub(super) fn finish(&self, traces: Traces, balance: Option<Balance>) -> Run {
        let model = self.model;
        let mut nodes = Vec::with_capacity(self.nodes + 2);
        for reach in &model.reaches {
            for node in reach.first..=reach.first + reach.cells {
                nodes.push(NodeEnvelope {
                    chainage: PipeLength::from_m(model.chainages[node]),
                    level: Level::from_m(model.levels[node]),
                    run: reach.run,
                    highest: Level::from_m(0.5 * self.scratch.high[node] + model.axis),
                    lowest: Level::from_m(0.5 * self.scratch.low[node] + model.axis),
                });
            }
        }
        let level = |found: (f64, f64)| {
            (
                Level::from_m(found.0 + model.axis),
                Time::new::<second>(found.1),
            )
        };
        let (inlet, foot) = model.ends;
        if let Some(first) = nodes.first().filter(|_| self.inlet_is_lumped()) {
            let lumped = NodeEnvelope {
                chainage: PipeLength::from_m(inlet.0),
                level: Level::from_m(inlet.1),
                run: 0,
                ..*first
            };
            nodes.insert(0, lumped);
        }
        nodes.push(NodeEnvelope {
            chainage: PipeLength::from_m(foot.0),
            level: Level::from_m(foot.1),
            run: model.last_run,
            highest: level(traces.highest).0,
            lowest: level(traces.lowest).0,
        });
        let flow = VolumeRate::new::<cubic_meter_per_second>;
        Run {
            nodes,
            foot_start: Level::from_m(traces.start + model.axis),
            foot_highest: level(traces.highest),
            foot_lowest: level(traces.lowest),
            flow_start: flow(model.flow),
            flow_end: flow(self.foot_flow),
            flow_greatest: flow(traces.flow_greatest),
            foot: traces.foot,
            probes: traces.probes.into_iter().map(|(_, probe)| probe).collect(),
            pictures: traces.pictures,
            separation: self.separation(),
            draws_air: self.draws_air,
            balance,
            steps: self.steps,
        }
    }

    fn separation(&self) -> Option<Separation> {
        let model = self.model;
        let at = |node: usize| PipeLength::from_m(model.chainages[node]);
        if let Some(gas) = self.gas {
            let mut found = (0, 0.0, 0);
            for (index, reach) in model.reaches.iter().enumerate() {
                for node in reach.first..=reach.first + reach.cells {
                    if index == 0 && node == 0 {
                        continue;
                    }
                    let most = self.scratch.void_most[node];
                    let open = self.constant(reach, gas, node) / (OPEN_SHARE * self.air);
                    if most > found.1 {
                        (found.0, found.1) = (node, most);
                    }
                    found.2 += usize::from(most >= open);
                }
            }
            return Some(Separation {
                modelled: true,
                chainage: at(found.0),
                largest: Volume::new::<cubic_meter>(found.1),
                nodes: found.2,
            });
        }
        let mut found = (0, 0.0, 0);
        for (node, (low, floor)) in self.scratch.low.iter().zip(&model.floors).enumerate() {
            let short = floor - 0.5 * low;
            if short >= 0.0 {
                found.2 += 1;
                if short >= found.1 {
                    (found.0, found.1) = (node, short);
                }
            }
        }
        (found.2 > 0).then(|| Separation {
            modelled: false,
            chainage: at(found.0),
            largest: Volume::new::<cubic_meter>(0.0),
            nodes: found.2,
        })
    }
}
