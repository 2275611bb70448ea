//! What happens at the foot.

use super::error::TransientError;
use super::law::{ClosingLaw, Stroke};
use super::surge_line::SurgeLine;
use crate::quantity::Time;
use uom::si::time::second;

/// What every nozzle does from the start on, in the order of the nozzles.
#[derive(Debug, Clone, PartialEq)]
pub struct Event {
    strokes: Vec<Stroke>,
}

/// Names the nozzle in an error about its stroke.
fn named(nozzle: usize, error: TransientError) -> TransientError {
    match error {
        TransientError::Stroke { stroke, .. } => TransientError::Stroke { nozzle, stroke },
        other => other,
    }
}

impl Event {
    /// Any course of every nozzle.
    #[must_use]
    pub fn of(strokes: Vec<Stroke>) -> Self {
        Self { strokes }
    }

    /// All jets closed: every nozzle enters the closing law where it stands,
    /// so that it closes at the same rate from part stroke as from full.
    ///
    /// # Errors
    /// A stroke outside 0..=1.
    pub fn close(start: &[f64], law: &ClosingLaw) -> Result<Self, TransientError> {
        Self::each(start, |_, stroke| law.from(stroke))
    }

    /// One jet blocked at once, the others left as they are.
    ///
    /// # Errors
    /// A stroke outside 0..=1, a nozzle that does not exist or is shut
    /// already.
    pub fn block(start: &[f64], nozzle: usize) -> Result<Self, TransientError> {
        if !start.get(nozzle).is_some_and(|stroke| *stroke > 0.0) {
            return Err(TransientError::NoSuchJet { nozzle });
        }
        let at_once = Time::new::<second>(0.0);
        Self::each(start, |index, stroke| {
            let to = if index == nozzle { 0.0 } else { stroke };
            Stroke::straight(stroke, to, at_once)
        })
    }

    /// A valve slammed: every opening falls to nothing in a straight line
    /// within the given time (0: at once), whatever the stroke it starts from.
    ///
    /// # Errors
    /// A stroke outside 0..=1, a negative time.
    pub fn slam(start: &[f64], within: Time) -> Result<Self, TransientError> {
        Self::each(start, |_, stroke| Stroke::straight(stroke, 0.0, within))
    }

    /// Opening from shut to the given strokes, at the rate of full stroke in
    /// the given time.
    ///
    /// # Errors
    /// A stroke outside 0..=1, a negative time.
    pub fn open(to: &[f64], full_stroke: Time) -> Result<Self, TransientError> {
        Self::each(to, |_, stroke| {
            Stroke::straight(0.0, stroke, full_stroke * stroke)
        })
    }

    /// Load thrown off with the deflectors in the jets: no nozzle moves, no
    /// flow changes.
    ///
    /// # Errors
    /// A stroke outside 0..=1.
    pub fn deflect(start: &[f64]) -> Result<Self, TransientError> {
        Self::each(start, |_, stroke| Stroke::hold(stroke))
    }

    fn each(
        strokes: &[f64],
        course: impl Fn(usize, f64) -> Result<Stroke, TransientError>,
    ) -> Result<Self, TransientError> {
        let strokes = strokes
            .iter()
            .enumerate()
            .map(|(nozzle, stroke)| course(nozzle, *stroke).map_err(|error| named(nozzle, error)))
            .collect::<Result<_, _>>()?;
        Ok(Self { strokes })
    }

    /// The course of every nozzle.
    #[must_use]
    pub fn strokes(&self) -> &[Stroke] {
        &self.strokes
    }

    /// The strokes it starts from.
    #[must_use]
    pub fn start(&self) -> Vec<f64> {
        self.strokes.iter().map(Stroke::first).collect()
    }

    /// Time of the last movement.
    #[must_use]
    pub fn ends(&self) -> Time {
        Time::new::<second>(self.end_si())
    }

    pub(super) fn end_si(&self) -> f64 {
        self.strokes
            .iter()
            .map(Stroke::end_si)
            .fold(0.0, |a, b| if b > a { b } else { a })
    }
}

/// The conductance of the foot against time.
#[derive(Debug)]
pub(super) struct Course<'a> {
    line: &'a SurgeLine,
    gravity: f64,
    /// Nozzles that are alike and do the same: how many, which, what.
    groups: Vec<(f64, usize, &'a Stroke)>,
    end: f64,
    /// What stays after the end.
    last: Option<f64>,
}

impl<'a> Course<'a> {
    pub(super) fn new(line: &'a SurgeLine, event: &'a Event) -> Self {
        let mut groups: Vec<(f64, usize, &Stroke)> = Vec::new();
        for (nozzle, stroke) in event.strokes.iter().enumerate() {
            let alike = |group: &&mut (f64, usize, &Stroke)| {
                group.2 == stroke && (line.free(group.1) - line.free(nozzle)).abs() <= 0.0
            };
            match groups.iter_mut().find(alike) {
                Some(group) => group.0 += 1.0,
                None => groups.push((1.0, nozzle, stroke)),
            }
        }
        Self {
            line,
            gravity: line.spec().line.gravity_si(),
            groups,
            end: event.end_si(),
            last: None,
        }
    }

    /// 2 g G^2 at a time, m5/s2. Times must not fall from call to call.
    pub(super) fn conductance(&mut self, time: f64) -> f64 {
        if let Some(last) = self.last {
            return last;
        }
        let characteristic = &self.line.spec().foot.characteristic;
        let sum: f64 = self
            .groups
            .iter()
            .map(|(count, nozzle, stroke)| {
                let share = characteristic.open_share(stroke.at(time));
                count * self.line.conductance(*nozzle, share)
            })
            .sum();
        let found = 2.0 * self.gravity * sum * sum;
        if time > self.end {
            self.last = Some(found);
        }
        found
    }
}
