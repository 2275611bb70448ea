//! Nozzles: the jet, its power, and the needle's area against stroke.
//!
//! Net head is the pressure head plus the velocity head just before the
//! nozzle, above the jet axis. The jet leaves at Cv sqrt(2 g Hn) and contracts
//! to Cc times the area of the bore, so the flow is Cc Cv A sqrt(2 g Hn).

mod needle;

pub use needle::Needle;

use crate::friction::DarcyFactor;
use crate::math;
use crate::quantity::{
    Acceleration, Angle, Area, Head, Length, MassDensity, PipeLength, Power, Velocity, VolumeRate,
};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::angle::radian;
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::power::watt;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

/// Why a nozzle cannot be used.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum NozzleError {
    /// The bore is not a positive length.
    Bore(Length),
    /// The velocity coefficient lies outside 0 (excluded) to 1.
    VelocityCoefficient(f64),
    /// The contraction coefficient lies outside 0 (excluded) to 1.
    ContractionCoefficient(f64),
    /// The needle's half angle lies outside 0 to 90 degrees (excluded).
    NeedleAngle(Angle),
    /// The stroke is not a length from zero up.
    Stroke(Length),
    /// The net head is not a height from zero up.
    NetHead(Head),
    /// The flow is not a rate from zero up.
    Flow(VolumeRate),
}

impl core::fmt::Display for NozzleError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Bore(bore) => {
                write!(f, "nozzle bore {} m is not above 0", bore.get::<meter>())
            }
            Self::VelocityCoefficient(value) => {
                write!(
                    f,
                    "velocity coefficient {value} is not above 0 and at most 1"
                )
            }
            Self::ContractionCoefficient(value) => {
                write!(
                    f,
                    "contraction coefficient {value} is not above 0 and at most 1"
                )
            }
            Self::NeedleAngle(angle) => write!(
                f,
                "needle half angle {} rad is not between 0 and a right angle",
                angle.get::<radian>()
            ),
            Self::Stroke(stroke) => {
                write!(f, "needle stroke {} m is below 0", stroke.get::<meter>())
            }
            Self::NetHead(head) => write!(f, "net head {} m is below 0", head.m()),
            Self::Flow(flow) => write!(
                f,
                "flow {} m3/s is below 0",
                flow.get::<cubic_meter_per_second>()
            ),
        }
    }
}

impl core::error::Error for NozzleError {}

/// A nozzle, validated once.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Nozzle {
    bore: Length,
    velocity_coefficient: f64,
    contraction_coefficient: f64,
}

impl Nozzle {
    /// Usual velocity coefficient of a clean impulse-wheel nozzle: 0.97 to
    /// 0.98. Common practice; the worked examples of Arasu, Turbomachines,
    /// chapter 9, take 0.98.
    pub const USUAL_VELOCITY_COEFFICIENT: f64 = 0.97;

    /// A nozzle of the given bore.
    ///
    /// `velocity_coefficient` is jet velocity over sqrt(2 g Hn);
    /// `contraction_coefficient` is jet area over bore area (1 for a bore that
    /// ends in a parallel lip, less for a needle nozzle or a sharp edge).
    ///
    /// # Errors
    /// A bore that is not positive, or a coefficient outside 0..=1.
    pub fn new(
        bore: Length,
        velocity_coefficient: f64,
        contraction_coefficient: f64,
    ) -> Result<Self, NozzleError> {
        let metres = bore.get::<meter>();
        if !(metres > 0.0 && metres.is_finite()) {
            return Err(NozzleError::Bore(bore));
        }
        check_coefficients(velocity_coefficient, contraction_coefficient)?;
        Ok(Self {
            bore,
            velocity_coefficient,
            contraction_coefficient,
        })
    }

    /// Bore of the nozzle.
    #[must_use]
    pub fn bore(&self) -> Length {
        self.bore
    }

    /// Jet velocity over sqrt(2 g Hn).
    #[must_use]
    pub fn velocity_coefficient(&self) -> f64 {
        self.velocity_coefficient
    }

    /// Jet area over bore area.
    #[must_use]
    pub fn contraction_coefficient(&self) -> f64 {
        self.contraction_coefficient
    }

    /// Flow over bore area times sqrt(2 g Hn): Cc Cv.
    #[must_use]
    pub fn discharge_coefficient(&self) -> f64 {
        self.velocity_coefficient * self.contraction_coefficient
    }

    /// Area of the bore.
    #[must_use]
    pub fn area(&self) -> Area {
        self.bore * self.bore * (math::PI / 4.0)
    }

    /// Diameter of the contracted jet: bore times sqrt(Cc).
    #[must_use]
    pub fn jet_diameter(&self) -> Length {
        self.bore * self.contraction_coefficient.sqrt()
    }

    /// Velocity of the jet, Cv sqrt(2 g Hn).
    ///
    /// # Errors
    /// [`NozzleError::NetHead`] when the head is negative or not finite.
    ///
    /// # Example
    /// ```
    /// use hydraulics::nozzle::Nozzle;
    /// use hydraulics::quantity::{Head, Length, unit};
    /// let nozzle = Nozzle::new(Length::new::<unit::length::millimeter>(40.0), 0.98, 1.0)?;
    /// let jet = nozzle.jet_velocity(Head::from_m(50.0), hydraulics::constants::standard_gravity())?;
    /// assert!((jet.get::<unit::velocity::meter_per_second>() - 30.69).abs() < 0.01);
    /// # Ok::<(), hydraulics::nozzle::NozzleError>(())
    /// ```
    pub fn jet_velocity(
        &self,
        net_head: Head,
        gravity: Acceleration,
    ) -> Result<Velocity, NozzleError> {
        let spouting = spouting_velocity(net_head, gravity)?;
        Ok(spouting * self.velocity_coefficient)
    }

    /// Flow through the nozzle, Cc Cv A sqrt(2 g Hn).
    ///
    /// # Errors
    /// [`NozzleError::NetHead`] when the head is negative or not finite.
    pub fn flow(&self, net_head: Head, gravity: Acceleration) -> Result<VolumeRate, NozzleError> {
        let spouting = spouting_velocity(net_head, gravity)?;
        Ok(self.area() * spouting * self.discharge_coefficient())
    }
}

/// Checks both coefficients of a nozzle.
///
/// # Errors
/// Names the one that lies outside 0 (excluded) to 1.
pub fn check_coefficients(velocity: f64, contraction: f64) -> Result<(), NozzleError> {
    if !(velocity > 0.0 && velocity <= 1.0) {
        return Err(NozzleError::VelocityCoefficient(velocity));
    }
    if !(contraction > 0.0 && contraction <= 1.0) {
        return Err(NozzleError::ContractionCoefficient(contraction));
    }
    Ok(())
}

/// Velocity of free fall through the head, sqrt(2 g H) (Torricelli).
///
/// # Errors
/// [`NozzleError::NetHead`] when the head is negative or not finite.
pub fn spouting_velocity(head: Head, gravity: Acceleration) -> Result<Velocity, NozzleError> {
    let metres = head.m();
    if !(metres >= 0.0 && metres.is_finite()) {
        return Err(NozzleError::NetHead(head));
    }
    let g = gravity.get::<meter_per_second_squared>();
    Ok(Velocity::new::<meter_per_second>((2.0 * g * metres).sqrt()))
}

/// Power carried by a jet, rho Q v^2 / 2.
#[must_use]
pub fn jet_power(density: MassDensity, flow: VolumeRate, velocity: Velocity) -> Power {
    let v = velocity.get::<meter_per_second>();
    Power::new::<watt>(
        0.5 * density.get::<kilogram_per_cubic_meter>()
            * flow.get::<cubic_meter_per_second>()
            * v
            * v,
    )
}

/// Bore that passes the flow under the net head.
///
/// # Equation
/// d = sqrt(4 Q / (pi Cc Cv sqrt(2 g Hn))).
///
/// # Errors
/// A flow or head that is not positive, or a coefficient outside 0..=1.
pub fn bore_for_flow(
    flow: VolumeRate,
    net_head: Head,
    gravity: Acceleration,
    velocity_coefficient: f64,
    contraction_coefficient: f64,
) -> Result<Length, NozzleError> {
    check_coefficients(velocity_coefficient, contraction_coefficient)?;
    let q = flow.get::<cubic_meter_per_second>();
    if !(q > 0.0 && q.is_finite()) {
        return Err(NozzleError::Flow(flow));
    }
    let spouting = spouting_velocity(net_head, gravity)?.get::<meter_per_second>();
    if spouting <= 0.0 {
        return Err(NozzleError::NetHead(net_head));
    }
    let area = q / (velocity_coefficient * contraction_coefficient * spouting);
    Ok(Length::new::<meter>((4.0 * area / math::PI).sqrt()))
}

/// Bore of the nozzle that draws the greatest power from a uniform pipe.
///
/// # Equation
/// d = D / (2 f L/D)^(1/4): one third of the head lost, f held constant, no
/// loss but friction, no contraction (textbook form, for instance Munson, Young
/// and Okiishi, Fundamentals of Fluid Mechanics, problem 12.56). A limit to
/// stay away from, not a target.
///
/// # Errors
/// [`NozzleError::Bore`] when bore or length is not positive.
pub fn greatest_power_bore(
    pipe_bore: Length,
    length: PipeLength,
    friction: DarcyFactor,
) -> Result<Length, NozzleError> {
    let d = pipe_bore.get::<meter>();
    for value in [pipe_bore, length.get()] {
        let metres = value.get::<meter>();
        if !(metres > 0.0 && metres.is_finite()) {
            return Err(NozzleError::Bore(value));
        }
    }
    let resistance = 2.0 * friction.get() * length.m() / d;
    Ok(Length::new::<meter>(d / resistance.sqrt().sqrt()))
}

/// Jet diameter over runner pitch diameter. Impulse wheels lie near 1/9 to
/// 1/20 (common practice); above about 1/8 the buckets are overfilled.
#[must_use]
pub fn jet_ratio(jet_diameter: Length, pitch_diameter: Length) -> f64 {
    (jet_diameter / pitch_diameter).get::<uom::si::ratio::ratio>()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::standard_gravity;
    use proptest::prelude::*;
    use uom::si::length::millimeter;

    fn mm(value: f64) -> Length {
        Length::new::<millimeter>(value)
    }

    #[test]
    fn bad_nozzles_are_refused_with_the_value() {
        assert_eq!(
            Nozzle::new(mm(0.0), 0.98, 1.0),
            Err(NozzleError::Bore(mm(0.0)))
        );
        assert_eq!(
            Nozzle::new(mm(10.0), 1.01, 1.0),
            Err(NozzleError::VelocityCoefficient(1.01))
        );
        assert_eq!(
            Nozzle::new(mm(10.0), 0.98, 0.0),
            Err(NozzleError::ContractionCoefficient(0.0))
        );
        assert!(Nozzle::new(mm(f64::NAN), 0.98, 1.0).is_err());
        let nozzle = Nozzle::new(mm(10.0), 0.98, 1.0).unwrap();
        assert!(nozzle.flow(Head::from_m(-1.0), standard_gravity()).is_err());
    }

    #[test]
    fn jet_power_is_cv_squared_of_the_hydraulic_power() {
        let nozzle = Nozzle::new(mm(50.0), 0.97, 0.9).unwrap();
        let head = Head::from_m(80.0);
        let g = standard_gravity();
        let flow = nozzle.flow(head, g).unwrap();
        let density = MassDensity::new::<kilogram_per_cubic_meter>(999.0);
        let power = jet_power(density, flow, nozzle.jet_velocity(head, g).unwrap());
        let hydraulic = (density * g * flow * head.get()).get::<watt>();
        assert!((power.get::<watt>() / hydraulic - 0.97 * 0.97).abs() < 1e-14);
        // Continuity: the jet's own area times its velocity is the flow.
        let jet = nozzle.jet_diameter();
        let by_jet = jet * jet * (math::PI / 4.0) * nozzle.jet_velocity(head, g).unwrap();
        assert!(((by_jet / flow).get::<uom::si::ratio::ratio>() - 1.0).abs() < 1e-14);
    }

    proptest! {
        #[test]
        fn bore_and_flow_are_inverse(
            bore in 0.002..0.5_f64, head in 0.5..900.0_f64, cv in 0.9..1.0_f64, cc in 0.6..1.0_f64,
        ) {
            let nozzle = Nozzle::new(Length::new::<meter>(bore), cv, cc).unwrap();
            let head = Head::from_m(head);
            let flow = nozzle.flow(head, standard_gravity()).unwrap();
            let back = bore_for_flow(flow, head, standard_gravity(), cv, cc).unwrap();
            prop_assert!((back.get::<meter>() / bore - 1.0).abs() < 1e-14);
        }
    }
}
