//! Closing laws that differ in their time.

use super::error::TransientError;
use super::law::ClosingLaw;
use crate::quantity::Time;
use uom::si::time::second;

/// Laws that differ in their full-stroke time only.
#[derive(Debug, Clone, PartialEq)]
pub enum LawFamily {
    /// One speed.
    OneSpeed,
    /// Two speeds; below the knee as if the full stroke took `slow`, above it
    /// as fast as the time asks.
    TwoSpeed {
        /// Stroke of the knee, 0 to 1 (1 excluded).
        knee: f64,
        /// Time of a full stroke at the speed below the knee.
        slow: Time,
    },
    /// A shape stretched to the time ([`ClosingLaw::lasting`]).
    Shape(ClosingLaw),
}

impl LawFamily {
    /// The law of a full-stroke time.
    ///
    /// # Errors
    /// A time below [`LawFamily::least`].
    pub fn law(&self, full_stroke: Time) -> Result<ClosingLaw, TransientError> {
        match self {
            Self::OneSpeed => ClosingLaw::linear(full_stroke),
            Self::TwoSpeed { knee, slow } => {
                if !(0.0..1.0).contains(knee) {
                    return Err(TransientError::Law { point: 1 });
                }
                let above = full_stroke.get::<second>() - self.least().get::<second>();
                let fast = Time::new::<second>(above / (1.0 - knee));
                ClosingLaw::two_speed(fast, *slow, *knee)
            }
            Self::Shape(law) => law.lasting(full_stroke),
        }
    }

    /// The shortest full-stroke time of the family.
    #[must_use]
    pub fn least(&self) -> Time {
        match self {
            Self::TwoSpeed { knee, slow } => *slow * *knee,
            _ => Time::new::<second>(0.0),
        }
    }
}
