//! The needle nozzle: area against stroke, by geometry.

use super::NozzleError;
use crate::math;
use crate::quantity::{Angle, Area, Length};
use uom::si::angle::radian;
use uom::si::area::square_meter;
use uom::si::length::meter;

/// A needle nozzle: a cone that slides on the axis of a round orifice.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Needle {
    orifice: Length,
    half_angle: Angle,
}

impl Needle {
    /// A needle of the given half angle at its tip in an orifice of the given
    /// bore.
    ///
    /// # Errors
    /// An orifice that is not positive, or a half angle not between 0 and a
    /// right angle.
    pub fn new(orifice: Length, half_angle: Angle) -> Result<Self, NozzleError> {
        let metres = orifice.get::<meter>();
        if !(metres > 0.0 && metres.is_finite()) {
            return Err(NozzleError::Bore(orifice));
        }
        let radians = half_angle.get::<radian>();
        if !(radians > 0.0 && radians < math::PI / 2.0) {
            return Err(NozzleError::NeedleAngle(half_angle));
        }
        Ok(Self {
            orifice,
            half_angle,
        })
    }

    /// Stroke from shut at which the opening equals the whole orifice, beyond
    /// which drawing the needle back adds nothing.
    ///
    /// # Equation
    /// Gap area pi (d s sin a - s^2 sin^2 a cos a) = pi d^2/4 has the root
    /// s = d (1 - sqrt(1 - cos a)) / (2 sin a cos a).
    #[must_use]
    pub fn full_stroke(&self) -> Length {
        let (sin, cos) = math::sin_cos(self.half_angle.get::<radian>());
        self.orifice * ((1.0 - (1.0 - cos).sqrt()) / (2.0 * sin * cos))
    }

    /// Area open at the given stroke from shut.
    ///
    /// # Equation
    /// The least section between needle and lip is the cone frustum normal to
    /// the needle from the lip: slant s sin a, radii d/2 and
    /// d/2 - s sin a cos a, hence A = pi (d s sin a - s^2 sin^2 a cos a),
    /// never more than the orifice. Plane geometry; sharp lip, needle shut
    /// exactly at the lip. The contraction that comes with it is the user's.
    ///
    /// # Errors
    /// [`NozzleError::Stroke`] when the stroke is negative or not finite.
    pub fn area(&self, stroke: Length) -> Result<Area, NozzleError> {
        let s = stroke.get::<meter>();
        if !(s >= 0.0 && s.is_finite()) {
            return Err(NozzleError::Stroke(stroke));
        }
        let d = self.orifice.get::<meter>();
        let full = math::PI * d * d / 4.0;
        if s >= self.full_stroke().get::<meter>() {
            return Ok(Area::new::<square_meter>(full));
        }
        let (sin, cos) = math::sin_cos(self.half_angle.get::<radian>());
        let slant = s * sin;
        Ok(Area::new::<square_meter>(
            math::PI * slant * (d - slant * cos),
        ))
    }

    /// Area open as a share of the orifice.
    ///
    /// # Errors
    /// [`NozzleError::Stroke`] when the stroke is negative or not finite.
    pub fn open_share(&self, stroke: Length) -> Result<f64, NozzleError> {
        let d = self.orifice.get::<meter>();
        Ok(self.area(stroke)?.get::<square_meter>() / (math::PI * d * d / 4.0))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::angle::degree;
    use uom::si::length::millimeter;

    fn mm(value: f64) -> Length {
        Length::new::<millimeter>(value)
    }

    #[test]
    fn nonsense_is_refused() {
        assert!(Needle::new(mm(0.0), Angle::new::<degree>(25.0)).is_err());
        assert!(Needle::new(mm(60.0), Angle::new::<degree>(90.0)).is_err());
        let needle = Needle::new(mm(60.0), Angle::new::<degree>(25.0)).unwrap();
        assert!(needle.area(mm(-1.0)).is_err());
        assert!(needle.area(mm(f64::NAN)).is_err());
    }

    #[test]
    fn shut_is_shut_and_far_back_is_the_whole_orifice() {
        let needle = Needle::new(mm(60.0), Angle::new::<degree>(25.0)).unwrap();
        assert!(needle.open_share(mm(0.0)).unwrap() < f64::MIN_POSITIVE);
        assert!((needle.open_share(mm(500.0)).unwrap() - 1.0).abs() < 1e-15);
    }

    proptest! {
        #[test]
        fn needle_opens_steadily_to_the_whole_orifice(angle in 5.0..80.0_f64, part in 0.0..1.0_f64) {
            let needle = Needle::new(mm(60.0), Angle::new::<degree>(angle)).unwrap();
            let full = needle.full_stroke();
            let here = needle.open_share(full * part).unwrap();
            let further = needle.open_share(full * (part + 0.01)).unwrap();
            prop_assert!((0.0..=1.0 + 1e-12).contains(&here));
            prop_assert!(further + 1e-12 >= here);
            let just_before = needle.open_share(full * (1.0 - 1e-9)).unwrap();
            prop_assert!((just_before - 1.0).abs() < 1e-7);
        }
    }
}
