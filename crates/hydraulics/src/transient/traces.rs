//! The course in time at the foot and wherever it is asked for.

use super::error::TransientError;
use super::march::March;
use super::run::{Picture, Probe, Trace};
use crate::quantity::PipeLength;

/// What is kept of the course in time.
#[derive(Debug)]
pub(super) struct Traces {
    pub(super) every: usize,
    pub(super) start: f64,
    pub(super) highest: (f64, f64),
    pub(super) lowest: (f64, f64),
    pub(super) flow_greatest: f64,
    pub(super) foot: Trace,
    pub(super) probes: Vec<(usize, Probe)>,
    every_picture: usize,
    pub(super) pictures: Vec<Picture>,
}

impl Traces {
    pub(super) fn new(march: &March<'_>) -> Result<Self, TransientError> {
        let points = march.options.trace_points;
        let probes = march
            .options
            .probes
            .iter()
            .map(|chainage| {
                let node = march.model.node_at(*chainage)?;
                let probe = Probe {
                    chainage: PipeLength::from_m(march.model.chainages[node]),
                    trace: Trace::default(),
                };
                Ok((node, probe))
            })
            .collect::<Result<_, TransientError>>()?;
        Ok(Self {
            every: if points == 0 {
                0
            } else {
                march.steps.div_ceil(points).max(1)
            },
            start: 0.0,
            highest: (f64::NEG_INFINITY, 0.0),
            lowest: (f64::INFINITY, 0.0),
            flow_greatest: 0.0,
            foot: Trace::default(),
            probes,
            every_picture: match march.options.pictures {
                0 => 0,
                wanted => march.steps.div_ceil(wanted).max(1),
            },
            pictures: Vec::new(),
        })
    }

    pub(super) fn record(&mut self, march: &March<'_>, number: usize, time: f64) {
        let (grade, flow) = (march.foot_grade, march.foot_flow);
        if number == 0 {
            self.start = grade;
        }
        if grade > self.highest.0 {
            self.highest = (grade, time);
        }
        if grade < self.lowest.0 {
            self.lowest = (grade, time);
        }
        if flow > self.flow_greatest {
            self.flow_greatest = flow;
        }
        let pictured = self.every_picture > 0
            && (number.is_multiple_of(self.every_picture) || number == march.steps);
        if pictured {
            self.pictures.push(march.picture(time));
        }
        let due = self.every > 0 && (number.is_multiple_of(self.every) || number == march.steps);
        if !due {
            return;
        }
        let keep = |trace: &mut Trace, grade: f64, flow: f64| {
            trace.times.push(time);
            trace.grades.push(grade + march.model.axis);
            trace.flows.push(flow);
        };
        keep(&mut self.foot, grade, flow);
        for (node, probe) in &mut self.probes {
            let (grade, flow) = march.state(*node);
            keep(&mut probe.trace, grade, flow);
        }
    }
}
