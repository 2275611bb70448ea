//! A line with its wave speeds and its foot.

use super::characteristic::Characteristic;
use super::error::TransientError;
use crate::line::{Line, LineError, NozzleSet, Solved};
use crate::math;
use crate::nozzle::{Nozzle, NozzleError};
use crate::quantity::{AbsolutePressure, Head, Length, Time, Velocity, VolumeRate};
use crate::surge::{StretchWave, SurgeError, WaveSeries, series};
use uom::si::area::square_meter;
use uom::si::length::meter;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

/// Wave speeds accepted, m/s: softer than any pipe (rubber hose), harder than
/// any water.
const WAVE_SPEEDS: (f64, f64) = (20.0, 2000.0);

/// What stands at the foot: nozzles (or a valve) that discharge to the air.
///
/// A valve is a nozzle with the valve's bore, coefficient and
/// characteristic. Nothing else is modelled: see [`crate::transient`].
#[derive(Debug, Clone, PartialEq)]
pub struct Foot {
    /// All nozzles at full stroke, with their branches, as in the steady
    /// solver.
    pub nozzles: NozzleSet,
    /// Open share against stroke, of every nozzle.
    pub characteristic: Characteristic,
}

/// All that makes a line for transients.
#[derive(Debug, Clone, PartialEq)]
pub struct SurgeSpec {
    /// The line: forebay level, survey, bores, friction, local losses, water.
    pub line: Line,
    /// Wave speed of each run.
    pub wave_speeds: Vec<Velocity>,
    /// The foot.
    pub foot: Foot,
    /// Pressure of the air at the site.
    pub atmosphere: AbsolutePressure,
}

/// A line whose transients can be computed.
#[derive(Debug, Clone, PartialEq)]
pub struct SurgeLine {
    spec: SurgeSpec,
    /// Cd a of each nozzle at full stroke, m2.
    free: Vec<f64>,
    branch_area: f64,
}

impl SurgeLine {
    /// Checks the parts.
    ///
    /// # Errors
    /// The first part that cannot be used; what [`Line::flow_for`] refuses of
    /// the nozzles at full stroke.
    pub fn new(spec: SurgeSpec) -> Result<Self, TransientError> {
        let runs = spec.line.run_layouts().len();
        if spec.wave_speeds.len() != runs {
            return Err(TransientError::WaveSpeedCount {
                runs,
                wave_speeds: spec.wave_speeds.len(),
            });
        }
        for (run, wave_speed) in spec.wave_speeds.iter().enumerate() {
            let a = wave_speed.get::<meter_per_second>();
            if !(WAVE_SPEEDS.0..=WAVE_SPEEDS.1).contains(&a) {
                return Err(TransientError::WaveSpeed {
                    run,
                    wave_speed: *wave_speed,
                });
            }
        }
        let air = spec.atmosphere.pa();
        if !(air > 0.0 && air.is_finite()) {
            return Err(TransientError::Atmosphere(spec.atmosphere));
        }
        spec.foot.characteristic.check()?;
        spec.line.flow_for(&spec.foot.nozzles)?;
        let bore = spec.foot.nozzles.branch_bore.get::<meter>();
        let free = spec
            .foot
            .nozzles
            .nozzles
            .iter()
            .map(|nozzle| nozzle.discharge_coefficient() * nozzle.area().get::<square_meter>())
            .collect();
        Ok(Self {
            spec,
            free,
            branch_area: math::PI * bore * bore / 4.0,
        })
    }

    /// The parts.
    #[must_use]
    pub fn spec(&self) -> &SurgeSpec {
        &self.spec
    }

    /// Number of nozzles at the foot.
    #[must_use]
    pub fn jets(&self) -> usize {
        self.free.len()
    }

    /// The steady state with the nozzles at the given strokes; `None` when
    /// all are shut.
    ///
    /// A part-open nozzle enters the steady solver as one of the bore that has
    /// its open area.
    ///
    /// # Errors
    /// Strokes outside 0..=1 or not as many as nozzles; what
    /// [`Line::flow_for`] refuses.
    pub fn steady(&self, strokes: &[f64]) -> Result<Option<Solved>, TransientError> {
        self.check_strokes(strokes)?;
        let full = &self.spec.foot.nozzles;
        let mut nozzles = Vec::new();
        for (nozzle, stroke) in full.nozzles.iter().zip(strokes) {
            let share = self.spec.foot.characteristic.open_share(*stroke);
            if share <= 0.0 {
                continue;
            }
            let bore: Length = nozzle.bore() * share.sqrt();
            let open = Nozzle::new(
                bore,
                nozzle.velocity_coefficient(),
                nozzle.contraction_coefficient(),
            )
            .map_err(LineError::from)?;
            nozzles.push(open);
        }
        if nozzles.is_empty() {
            return Ok(None);
        }
        let set = NozzleSet {
            nozzles,
            ..full.clone()
        };
        Ok(Some(self.spec.line.flow_for(&set)?))
    }

    /// The single pipe that stands for the runs in series at a flow:
    /// equivalent wave speed, velocity, and the time for a wave to run up and
    /// back.
    ///
    /// # Errors
    /// A negative flow.
    pub fn equivalent(&self, flow: VolumeRate) -> Result<WaveSeries, SurgeError> {
        let q = flow.get::<cubic_meter_per_second>();
        let stretches: Vec<StretchWave> = self
            .spec
            .line
            .run_layouts()
            .iter()
            .zip(&self.spec.wave_speeds)
            .map(|(run, wave_speed)| StretchWave {
                length: crate::quantity::PipeLength::from_m(run.to - run.from),
                wave_speed: *wave_speed,
                velocity: Velocity::new::<meter_per_second>(q / run.area),
            })
            .collect();
        series(&stretches)
    }

    /// Time for a wave to run up the line and back, 2 sum(l/a).
    #[must_use]
    pub fn period(&self) -> Time {
        Time::new::<second>(2.0 * self.travel_times().iter().sum::<f64>())
    }

    /// Water starting time, sum(l V) / (g H).
    ///
    /// `net_head` is the head that drives the flow (common practice: the net
    /// head at that flow).
    ///
    /// # Errors
    /// A head that is not positive, a negative flow.
    pub fn water_starting_time(
        &self,
        flow: VolumeRate,
        net_head: Head,
    ) -> Result<Time, SurgeError> {
        let one = self.equivalent(flow)?;
        crate::surge::water_starting_time(
            one.length,
            one.velocity,
            net_head,
            self.spec.line.spec().gravity,
        )
    }

    /// Travel time of each run, s.
    pub(super) fn travel_times(&self) -> Vec<f64> {
        self.spec
            .line
            .run_layouts()
            .iter()
            .zip(&self.spec.wave_speeds)
            .map(|(run, wave_speed)| (run.to - run.from) / wave_speed.get::<meter_per_second>())
            .collect()
    }

    pub(super) fn check_strokes(&self, strokes: &[f64]) -> Result<(), TransientError> {
        if strokes.len() != self.free.len() {
            return Err(TransientError::StrokeCount {
                nozzles: self.free.len(),
                strokes: strokes.len(),
            });
        }
        for (nozzle, stroke) in strokes.iter().enumerate() {
            if !(0.0..=1.0).contains(stroke) {
                return Err(TransientError::Stroke {
                    nozzle,
                    stroke: *stroke,
                });
            }
        }
        Ok(())
    }

    /// Conductance of one nozzle at an open share, m2: flow over
    /// sqrt(2 g H), H the energy at the foot above the axis. The same as in
    /// the steady solver: Cd a / sqrt(1 + k (Cd a/A)^2).
    pub(super) fn conductance(&self, nozzle: usize, share: f64) -> f64 {
        let free = self.free.get(nozzle).copied().unwrap_or(0.0) * share;
        let part = free / self.branch_area;
        free / (1.0 + self.spec.foot.nozzles.branch_k * part * part).sqrt()
    }

    /// Cd a of a nozzle at full stroke, m2.
    pub(super) fn free(&self, nozzle: usize) -> f64 {
        self.free.get(nozzle).copied().unwrap_or(0.0)
    }

    /// Vapour pressure above the atmosphere's, as a head, m (negative), and
    /// the atmosphere's pressure as a head, m.
    pub(super) fn vapour_and_air(&self) -> (f64, f64) {
        let spec = self.spec.line.spec();
        let head = |pressure: AbsolutePressure| {
            crate::quantity::GaugePressure::from_pa(pressure.pa())
                .head(spec.water.density(), spec.gravity)
                .m()
        };
        let air = head(self.spec.atmosphere);
        (head(spec.water.vapour_pressure()) - air, air)
    }
}

impl From<NozzleError> for TransientError {
    fn from(error: NozzleError) -> Self {
        Self::Line(LineError::Nozzle(error))
    }
}
