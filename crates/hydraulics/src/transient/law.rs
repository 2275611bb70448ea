//! Stroke against time.

use super::error::TransientError;
use crate::quantity::Time;
use uom::si::time::second;

/// How a nozzle is driven shut from full stroke: stroke (1 full, 0 shut)
/// against time, in straight pieces.
///
/// A start from part stroke enters the same law where the stroke is reached
/// ([`ClosingLaw::from`]): the drive keeps its rate.
#[derive(Debug, Clone, PartialEq)]
pub struct ClosingLaw {
    points: Vec<(f64, f64)>,
}

/// What one nozzle does: stroke against time from the start of the event, in
/// straight pieces; held before the first and after the last.
#[derive(Debug, Clone, PartialEq)]
pub struct Stroke {
    points: Vec<(f64, f64)>,
}

/// A time in seconds, from zero up.
fn seconds(time: Time) -> Result<f64, TransientError> {
    let value = time.get::<second>();
    if value >= 0.0 && value.is_finite() {
        Ok(value)
    } else {
        Err(TransientError::Time(time))
    }
}

impl ClosingLaw {
    /// One speed: full stroke in the given time (0: at once).
    ///
    /// # Errors
    /// [`TransientError::Time`] for a negative time.
    pub fn linear(full_stroke: Time) -> Result<Self, TransientError> {
        let t = seconds(full_stroke)?;
        Ok(Self {
            points: vec![(0.0, 1.0), (t, 0.0)],
        })
    }

    /// Two speeds: the first as if the full stroke took `fast`, from the knee
    /// (a stroke, 0 to 1) on as if it took `slow`.
    ///
    /// # Errors
    /// A negative time, a knee outside 0..=1 ([`TransientError::Law`]).
    pub fn two_speed(fast: Time, slow: Time, knee: f64) -> Result<Self, TransientError> {
        let (fast, slow) = (seconds(fast)?, seconds(slow)?);
        if !(0.0..=1.0).contains(&knee) {
            return Err(TransientError::Law { point: 1 });
        }
        let at_knee = fast * (1.0 - knee);
        Ok(Self {
            points: vec![(0.0, 1.0), (at_knee, knee), (at_knee + slow * knee, 0.0)],
        })
    }

    /// Any law in straight pieces, dwells included: (time, stroke), times from
    /// 0 up and not falling, strokes from 1 to 0 and not rising.
    ///
    /// # Errors
    /// [`TransientError::Law`] with the point that cannot be used.
    pub fn piecewise(points: &[(Time, f64)]) -> Result<Self, TransientError> {
        let mut kept: Vec<(f64, f64)> = Vec::with_capacity(points.len());
        for (point, (time, stroke)) in points.iter().enumerate() {
            let t = seconds(*time).map_err(|_| TransientError::Law { point })?;
            let first = kept.last().is_none() && t <= 0.0 && (stroke - 1.0).abs() <= 0.0;
            let later = kept
                .last()
                .is_some_and(|(before, above)| t >= *before && stroke <= above && *stroke >= 0.0);
            if !(first || later) {
                return Err(TransientError::Law { point });
            }
            kept.push((t, *stroke));
        }
        let shut = kept.len() > 1 && kept.last().is_some_and(|(_, stroke)| *stroke <= 0.0);
        if !shut {
            return Err(TransientError::Law {
                point: points.len().saturating_sub(1),
            });
        }
        Ok(Self { points: kept })
    }

    /// Time from full stroke to shut.
    #[must_use]
    pub fn full_stroke_time(&self) -> Time {
        Time::new::<second>(self.points.last().map_or(0.0, |point| point.0))
    }

    /// The same law stretched to another time from full stroke to shut. A law
    /// that takes no time stays so.
    ///
    /// # Errors
    /// [`TransientError::Time`] for a negative time.
    pub fn lasting(&self, full_stroke: Time) -> Result<Self, TransientError> {
        let wanted = seconds(full_stroke)?;
        let now = self.points.last().map_or(0.0, |point| point.0);
        if now <= 0.0 {
            return Self::linear(full_stroke);
        }
        let factor = wanted / now;
        Ok(Self {
            points: self.points.iter().map(|(t, s)| (t * factor, *s)).collect(),
        })
    }

    /// What a nozzle does that stands at the given stroke when the closing
    /// begins: it enters the law where the law first reaches that stroke.
    ///
    /// # Errors
    /// [`TransientError::Stroke`] outside 0..=1.
    pub fn from(&self, stroke: f64) -> Result<Stroke, TransientError> {
        if !(0.0..=1.0).contains(&stroke) {
            return Err(TransientError::Stroke { nozzle: 0, stroke });
        }
        let mut points = vec![(0.0, stroke)];
        let mut entered = None;
        for (a, b) in self.points.iter().zip(self.points.iter().skip(1)) {
            if entered.is_none() && b.1 <= stroke {
                let drop = a.1 - b.1;
                let share = if drop > 0.0 {
                    (a.1 - stroke) / drop
                } else {
                    0.0
                };
                entered = Some(a.0 + share * (b.0 - a.0));
            }
            if let Some(start) = entered {
                points.push((b.0 - start, b.1));
            }
        }
        Ok(Stroke { points })
    }
}

impl Stroke {
    /// Stands still.
    ///
    /// # Errors
    /// [`TransientError::Stroke`] outside 0..=1.
    pub fn hold(stroke: f64) -> Result<Self, TransientError> {
        Self::straight(stroke, stroke, Time::new::<second>(0.0))
    }

    /// From one stroke to another in the given time (0: at once).
    ///
    /// # Errors
    /// A stroke outside 0..=1, a negative time.
    pub fn straight(from: f64, to: f64, within: Time) -> Result<Self, TransientError> {
        for stroke in [from, to] {
            if !(0.0..=1.0).contains(&stroke) {
                return Err(TransientError::Stroke { nozzle: 0, stroke });
            }
        }
        Ok(Self {
            points: vec![(0.0, from), (seconds(within)?, to)],
        })
    }

    /// Any course in straight pieces: (time, stroke), times from 0 and not
    /// falling, strokes in 0..=1.
    ///
    /// # Errors
    /// [`TransientError::Law`] with the point that cannot be used.
    pub fn piecewise(points: &[(Time, f64)]) -> Result<Self, TransientError> {
        let mut kept: Vec<(f64, f64)> = Vec::with_capacity(points.len());
        for (point, (time, stroke)) in points.iter().enumerate() {
            let t = seconds(*time).map_err(|_| TransientError::Law { point })?;
            let rising = kept.last().map_or(t <= 0.0, |(before, _)| t >= *before);
            if !(rising && (0.0..=1.0).contains(stroke)) {
                return Err(TransientError::Law { point });
            }
            kept.push((t, *stroke));
        }
        if kept.is_empty() {
            return Err(TransientError::Law { point: 0 });
        }
        Ok(Self { points: kept })
    }

    /// Stroke at the start.
    #[must_use]
    pub fn first(&self) -> f64 {
        self.points.first().map_or(0.0, |point| point.1)
    }

    /// Time of the last movement.
    #[must_use]
    pub fn ends(&self) -> Time {
        Time::new::<second>(self.end_si())
    }

    pub(super) fn end_si(&self) -> f64 {
        self.points.last().map_or(0.0, |point| point.0)
    }

    /// Stroke at a time, s. At a jump the stroke before it.
    pub(super) fn at(&self, time: f64) -> f64 {
        let mut before = (0.0, self.first());
        for point in &self.points {
            if time <= point.0 {
                let width = point.0 - before.0;
                if width <= 0.0 {
                    return before.1;
                }
                return before.1 + (point.1 - before.1) * ((time - before.0) / width);
            }
            before = *point;
        }
        before.1
    }
}
