//! Lines for tests: pipes in series, one nozzle at the foot, Darcy factors by
//! way of the roughness that has them.

use crate::constants::{standard_atmosphere, standard_gravity};
use crate::friction::FrictionLaw;
use crate::line::{Line, LineSpec, LocalLoss, NozzleSet, Point, Run as PipeRun};
use crate::math;
use crate::nozzle::Nozzle;
use crate::quantity::{
    Length, Level, PipeLength, ThermodynamicTemperature, Time, Velocity, VolumeRate,
};
use crate::transient::{
    Characteristic, Event, Foot, FrictionModel, Grid, GridSpec, Model, Run, RunOptions, Scratch,
    SurgeLine, SurgeSpec,
};
use crate::water::Water;
use uom::si::length::meter;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

pub(crate) const G: f64 = 9.80665;

#[derive(Debug, Clone, Copy)]
pub(crate) struct Pipe {
    pub(crate) length: f64,
    pub(crate) bore: f64,
    pub(crate) wave_speed: f64,
    /// Roughness, m.
    pub(crate) roughness: f64,
}

/// A line of pipes in series, falling evenly.
#[derive(Debug, Clone)]
pub(crate) struct Bench {
    pub(crate) head: f64,
    pub(crate) pipes: Vec<Pipe>,
    /// Bores of the nozzles.
    pub(crate) nozzles: Vec<f64>,
    pub(crate) branch_k: f64,
    pub(crate) losses: Vec<LocalLoss>,
    pub(crate) characteristic: Characteristic,
    /// Depth of the inlet below the forebay.
    pub(crate) cover: f64,
    /// Shares of the way and levels above the straight fall, m.
    pub(crate) humps: Vec<(f64, f64)>,
}

pub(crate) fn s(value: f64) -> Time {
    Time::new::<second>(value)
}

pub(crate) fn m(value: f64) -> Length {
    Length::new::<meter>(value)
}

pub(crate) fn q(flow: VolumeRate) -> f64 {
    flow.get::<cubic_meter_per_second>()
}

impl Bench {
    pub(crate) fn uniform(head: f64, pipe: Pipe, nozzle: f64) -> Self {
        Self {
            head,
            pipes: vec![pipe],
            nozzles: vec![nozzle],
            branch_k: 0.3,
            losses: Vec::new(),
            characteristic: Characteristic::Linear,
            cover: 5.0,
            humps: Vec::new(),
        }
    }

    pub(crate) fn length(&self) -> f64 {
        self.pipes.iter().map(|pipe| pipe.length).sum()
    }

    pub(crate) fn line(&self) -> SurgeLine {
        let length = self.length();
        let top = self.head - self.cover;
        let mut points = vec![(0.0, top)];
        for (share, above) in &self.humps {
            points.push((share * length, top * (1.0 - share) + above));
        }
        points.push((length, 0.0));
        let mut to = 0.0;
        let runs = self
            .pipes
            .iter()
            .map(|pipe| {
                to += pipe.length;
                PipeRun {
                    to: PipeLength::from_m(to),
                    bore: m(pipe.bore),
                    friction: FrictionLaw::ColebrookWhite {
                        roughness: m(pipe.roughness),
                    },
                }
            })
            .collect();
        let line = Line::new(LineSpec {
            forebay: Level::from_m(self.head),
            points: points
                .into_iter()
                .map(|(chainage, level)| Point {
                    chainage: PipeLength::from_m(chainage),
                    level: Level::from_m(level),
                })
                .collect(),
            runs,
            losses: self.losses.clone(),
            water: Water::at(ThermodynamicTemperature::new::<degree_celsius>(10.0)).unwrap(),
            gravity: standard_gravity(),
        })
        .unwrap();
        SurgeLine::new(SurgeSpec {
            line,
            wave_speeds: self
                .pipes
                .iter()
                .map(|pipe| Velocity::new::<meter_per_second>(pipe.wave_speed))
                .collect(),
            foot: Foot {
                nozzles: NozzleSet {
                    nozzles: self
                        .nozzles
                        .iter()
                        .map(|bore| Nozzle::new(m(*bore), 0.97, 1.0).unwrap())
                        .collect(),
                    axis: Level::from_m(0.0),
                    branch_k: self.branch_k,
                    branch_bore: m(self.pipes.last().unwrap().bore),
                },
                characteristic: self.characteristic.clone(),
            },
            atmosphere: standard_atmosphere(),
        })
        .unwrap()
    }

    pub(crate) fn grid(&self, cells: usize) -> Grid {
        let spec = GridSpec {
            cells,
            ..GridSpec::default()
        };
        Grid::new(&self.line(), spec).unwrap()
    }

    pub(crate) fn model(&self, cells: usize, strokes: &[f64]) -> Model {
        Model::new(
            &self.line(),
            &self.grid(cells),
            strokes,
            FrictionModel::default(),
        )
        .unwrap()
    }

    pub(crate) fn run(&self, cells: usize, event: &Event, options: &RunOptions) -> Run {
        self.model(cells, &event.start())
            .run(event, options, &mut Scratch::new())
            .unwrap()
    }

    pub(crate) fn area(&self, pipe: usize) -> f64 {
        let bore = self.pipes[pipe].bore;
        math::PI * bore * bore / 4.0
    }
}
