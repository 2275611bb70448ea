//! Trash racks.

use super::{
    Attested, FittingError, Loss, LossCoefficient, Reference, degrees_within, positive,
    ratio_within,
};
use crate::math;
use crate::quantity::{Angle, Length};

/// Cross-section of a rack's bars.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum BarShape {
    /// Rectangular, sharp edges.
    Rectangular,
    /// Rectangular with a rounded upstream edge.
    RoundedUpstream,
    /// Rectangular with both edges rounded.
    RoundedBoth,
    /// Round bars.
    Round,
    /// Drop-shaped, tapering downstream.
    Streamlined,
}

impl BarShape {
    /// Kirschmer's shape factor, from memory: the page of Kirschmer 1926 was
    /// not seen.
    #[must_use]
    pub fn factor(self) -> f64 {
        match self {
            Self::Rectangular => 2.42,
            Self::RoundedUpstream => 1.83,
            Self::RoundedBoth => 1.67,
            Self::Round => 1.79,
            Self::Streamlined => 0.76,
        }
    }
}

/// A rack of parallel bars before the intake.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TrashRack {
    /// Cross-section of the bars.
    pub shape: BarShape,
    /// Thickness of a bar across the flow.
    pub bar: Length,
    /// Clear gap between bars.
    pub gap: Length,
    /// Angle of the rack from the horizontal (90 degrees: upright).
    pub inclination: Angle,
    /// Share of the area that leaves and trash stop, 0 to 0.9.
    pub clogged_share: f64,
}

impl TrashRack {
    /// Loss coefficient on the approach velocity: that before the rack, over
    /// its whole area.
    ///
    /// # Equation
    /// K = beta (s/b)^(4/3) sin a (Kirschmer 1926), divided by
    /// (1 - clogged share)^2, because what is left open carries all the flow.
    /// The shape factors are from memory.
    ///
    /// # Valid for
    /// Flow square to the rack, bars at least five thicknesses deep;
    /// inclination 30 to 90 degrees.
    ///
    /// # Errors
    /// A bar or gap that is not positive, an inclination or clogged share
    /// outside its range.
    pub fn loss(&self) -> Result<Loss, FittingError> {
        let ratio = positive(self.bar)? / positive(self.gap)?;
        let degrees = degrees_within(self.inclination, 30.0, 90.0)?;
        let open = 1.0 - ratio_within(self.clogged_share, 0.0, 0.9)?;
        let clean = self.shape.factor()
            * math::pow(ratio, 4.0 / 3.0)
            * math::sin(degrees * math::PI / 180.0);
        Ok(Loss {
            k: LossCoefficient::new(clean / (open * open))?,
            reference: Reference::Own,
            attested: Attested::FromMemory,
            source: "Kirschmer 1926, shape factors from memory",
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::angle::degree;
    use uom::si::length::millimeter;

    fn rack(gap: f64, clogged_share: f64) -> TrashRack {
        TrashRack {
            shape: BarShape::Rectangular,
            bar: Length::new::<millimeter>(8.0),
            gap: Length::new::<millimeter>(gap),
            inclination: Angle::new::<degree>(70.0),
            clogged_share,
        }
    }

    #[test]
    fn half_clogged_loses_four_times_as_much() {
        let clean = rack(25.0, 0.0).loss().unwrap().k.get();
        let clogged = rack(25.0, 0.5).loss().unwrap().k.get();
        assert!((clogged / clean - 4.0).abs() < 1e-12);
    }

    #[test]
    fn nonsense_is_refused() {
        assert!(rack(0.0, 0.0).loss().is_err());
        assert!(rack(25.0, 0.95).loss().is_err());
        assert!(rack(25.0, -0.1).loss().is_err());
        let flat = TrashRack {
            inclination: Angle::new::<degree>(10.0),
            ..rack(25.0, 0.0)
        };
        assert!(flat.loss().is_err());
    }

    proptest! {
        #[test]
        fn narrower_gaps_lose_more(gap in 6.0..60.0_f64) {
            let here = rack(gap + 1.0, 0.1).loss().unwrap().k;
            prop_assert!(rack(gap, 0.1).loss().unwrap().k > here);
        }
    }
}
