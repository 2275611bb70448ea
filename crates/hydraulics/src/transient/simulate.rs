//! A run of an event, from the start it begins at.

use super::error::TransientError;
use super::event::Event;
#[cfg(test)]
use super::gas::GasCavity;
use super::grid::nearest;
use super::march::{Ended, March};
use super::model::Model;
use super::run::{Duration, Run, RunOptions, Scratch};
use crate::quantity::{Level, PipeLength, Time};
use uom::si::time::second;

/// Periods after a sudden event in which partial waves may still meet.
const LATE_PERIODS: f64 = 40.0;

impl Model {
    /// Runs an event that begins at this start.
    ///
    /// The run is computed with water that bears suction; where the head falls
    /// to the vapour pressure it is computed again from the start with
    /// [`super::GasCavity`] at every node but the inlet, and [`Run::separation`] says
    /// so.
    ///
    /// # Errors
    /// [`TransientError::StartsDiffer`] when the event starts from other
    /// strokes, [`TransientError::StartsBelowVapour`],
    /// [`TransientError::TooLong`], [`TransientError::ProbeOutside`],
    /// [`TransientError::NotFinite`].
    pub fn run(
        &self,
        event: &Event,
        options: &RunOptions,
        scratch: &mut Scratch,
    ) -> Result<Run, TransientError> {
        if let Some(run) = self.run_whole(event, options, scratch)? {
            return Ok(run);
        }
        let mut again = March::new(self, event, options, scratch, options.cavity)?;
        match again.run()? {
            Ended::Done(run) => Ok(*run),
            // A march with gas never ends in suction.
            Ended::Suction => Err(TransientError::GasCavity),
        }
    }

    /// [`Self::run`], but `None` where the column parts and cavities would be
    /// modelled: for searches, in which such a run fails whatever follows.
    pub(super) fn run_whole(
        &self,
        event: &Event,
        options: &RunOptions,
        scratch: &mut Scratch,
    ) -> Result<Option<Run>, TransientError> {
        let same = event.strokes().len() == self.strokes.len()
            && event
                .strokes()
                .iter()
                .zip(&self.strokes)
                .all(|(stroke, start)| (stroke.first() - start).abs() <= 1e-12);
        if !same {
            return Err(TransientError::StartsDiffer);
        }
        if let Some(gas) = options.cavity {
            gas.check()?;
            self.check_start()?;
        }
        let mut march = March::new(self, event, options, scratch, None)?;
        match march.run()? {
            Ended::Done(run) => Ok(Some(*run)),
            Ended::Suction => Ok(None),
        }
    }

    /// Runs with gas at every node from the start, whatever the head.
    #[cfg(test)]
    pub(super) fn run_with_gas(
        &self,
        event: &Event,
        options: &RunOptions,
        scratch: &mut Scratch,
        gas: GasCavity,
    ) -> Result<Run, TransientError> {
        match March::new(self, event, options, scratch, Some(gas))?.run()? {
            Ended::Done(run) => Ok(*run),
            Ended::Suction => Err(TransientError::GasCavity),
        }
    }

    /// Refuses a start below the vapour pressure.
    fn check_start(&self) -> Result<(), TransientError> {
        for reach in &self.reaches {
            let velocity = reach.velocity_head * self.flow * self.flow;
            for node in reach.first..=reach.first + reach.cells {
                let (energy, floor) = (self.energies[node], self.floors[node]);
                if energy - velocity <= floor {
                    return Err(TransientError::StartsBelowVapour {
                        chainage: PipeLength::from_m(self.chainages[node]),
                        grade: Level::from_m(energy - velocity + self.axis),
                    });
                }
            }
        }
        Ok(())
    }

    /// Whether a wave meets a change of impedance on its way.
    fn has_unlike_pipes(&self) -> bool {
        self.reaches
            .iter()
            .zip(self.reaches.iter().skip(1))
            .any(|(a, b)| (a.b / b.b - 1.0).abs() > 1e-3)
            || self.grid.lumped_share() > 0.0
    }

    pub(super) fn steps(&self, event: &Event, duration: Duration) -> Result<usize, TransientError> {
        let dt = self.grid.step_si();
        let period = self.line.period().get::<second>();
        let lasting = match duration {
            Duration::PeriodsAfter(periods) => event.end_si() + periods * period,
            Duration::ToThePeak(periods) => {
                let late = self.has_unlike_pipes() && event.end_si() < period;
                let least = if late { LATE_PERIODS } else { periods };
                let periods = if least > periods { least } else { periods };
                event.end_si() + periods * period
            }
            Duration::Until(time) => time.get::<second>(),
        };
        let steps = (lasting / dt - 1e-9).ceil();
        if (0.0..=Self::MOST_STEPS).contains(&steps) {
            Ok(nearest(steps))
        } else if steps.is_finite() && steps > 0.0 {
            Err(TransientError::TooLong { steps })
        } else {
            Err(TransientError::Time(Time::new::<second>(lasting)))
        }
    }

    /// The node nearest to a chainage.
    pub(super) fn node_at(&self, chainage: PipeLength) -> Result<usize, TransientError> {
        let at = chainage.m();
        let ends = (self.chainages.first(), self.chainages.last());
        let inside = match ends {
            (Some(first), Some(last)) => at >= first - 1e-6 && at <= last + 1e-6,
            _ => false,
        };
        if !inside {
            return Err(TransientError::ProbeOutside(chainage));
        }
        let nearer =
            |a: &(usize, &f64), b: &(usize, &f64)| (a.1 - at).abs().total_cmp(&(b.1 - at).abs());
        Ok(self
            .chainages
            .iter()
            .enumerate()
            .min_by(nearer)
            .map_or(0, |(node, _)| node))
    }
}
