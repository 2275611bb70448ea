//! Wave speed.

use crate::quantity::{AbsolutePressure, Length, MassDensity, Pressure, Velocity};
use crate::water::Water;
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;
use uom::si::velocity::meter_per_second;

/// How the pipe is held along its axis.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Restraint {
    /// Anchored at its upstream end only.
    UpstreamEnd,
    /// Anchored against all movement along the axis (buried, or anchored
    /// throughout).
    Throughout,
    /// Expansion joints throughout: no stress along the axis.
    ExpansionJoints,
}

/// The wall of a pipe, for waves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PipeWall {
    /// Bore (inside diameter).
    pub bore: Length,
    /// Wall thickness.
    pub thickness: Length,
    /// Modulus of elasticity, short term.
    pub modulus: Pressure,
    /// Poisson's ratio, 0 to 0.5.
    pub poisson: f64,
    /// How it is held.
    pub restraint: Restraint,
}

/// Free air carried as bubbles.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct EntrainedAir {
    /// Share of the volume that is air, at the given pressure; 0 to 0.02.
    pub share: f64,
    /// Absolute pressure.
    pub pressure: AbsolutePressure,
}

/// Why there is no wave speed.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum WaveError {
    /// Bore or wall is not a positive length.
    Length(Length),
    /// The modulus is not a positive pressure.
    Modulus(Pressure),
    /// Poisson's ratio lies outside 0..=0.5.
    Poisson(f64),
    /// The density is not positive.
    Density(MassDensity),
    /// The restraint factor is negative or not finite.
    Factor(f64),
    /// The share of air lies outside 0..=0.02.
    AirShare(f64),
    /// The absolute pressure is not positive.
    AirPressure(AbsolutePressure),
}

impl core::fmt::Display for WaveError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::Length(value) => {
                write!(
                    f,
                    "bore or wall of {} m is not above 0",
                    value.get::<meter>()
                )
            }
            Self::Modulus(value) => {
                write!(f, "modulus {} Pa is not above 0", value.get::<pascal>())
            }
            Self::Poisson(value) => write!(f, "Poisson's ratio {value} lies outside 0 to 0.5"),
            Self::Density(value) => write!(
                f,
                "density {} kg/m3 is not above 0",
                value.get::<kilogram_per_cubic_meter>()
            ),
            Self::Factor(value) => write!(f, "restraint factor {value} is below 0"),
            Self::AirShare(value) => write!(f, "share of air {value} lies outside 0 to 0.02"),
            Self::AirPressure(value) => {
                write!(f, "absolute pressure {} Pa is not above 0", value.pa())
            }
        }
    }
}

impl core::error::Error for WaveError {}

/// Factor c of the wave speed formula: how restraint and the thickness of the
/// wall change its give.
///
/// # Equation
/// With e the wall and D the bore, c = 2 e/D (1 + mu) + D/(D + e) c0, with
/// c0 = 1 - mu/2 (upstream end), 1 - mu^2 (throughout), 1 (expansion joints).
/// That is Lame's thick cylinder exactly, for each of the three (a test derives
/// it); in this form in Wylie and Streeter, Fluid Transients in Systems, 1993,
/// section 2-2 (page from memory). For thin walls c tends to c0.
///
/// # Errors
/// A length that is not positive, Poisson's ratio outside 0..=0.5.
pub fn restraint_factor(wall: &PipeWall) -> Result<f64, WaveError> {
    let bore = positive(wall.bore)?;
    let thickness = positive(wall.thickness)?;
    let mu = wall.poisson;
    if !(0.0..=0.5).contains(&mu) {
        return Err(WaveError::Poisson(mu));
    }
    let thin = wall.restraint.thin_factor(mu);
    Ok(2.0 * thickness / bore * (1.0 + mu) + bore / (bore + thickness) * thin)
}

impl Restraint {
    /// The factor of a thin wall: 1 - mu/2, 1 - mu^2 or 1.
    #[must_use]
    pub fn thin_factor(self, poisson: f64) -> f64 {
        match self {
            Self::UpstreamEnd => 1.0 - poisson / 2.0,
            Self::Throughout => 1.0 - poisson * poisson,
            Self::ExpansionJoints => 1.0,
        }
    }
}

/// Wave speed in a pipe running full of water.
///
/// # Equation
/// a = sqrt(K/rho) / sqrt(1 + K D c / (E e)) (Korteweg 1878; Wylie and
/// Streeter 1993), c by [`restraint_factor`], K the adiabatic bulk modulus.
///
/// # Errors
/// As for [`restraint_factor`]; a modulus that is not positive.
///
/// # Example
/// ```
/// use hydraulics::quantity::{Length, Pressure, ThermodynamicTemperature, unit};
/// use hydraulics::surge::{PipeWall, Restraint, wave_speed};
/// use hydraulics::water::Water;
/// let water = Water::at(ThermodynamicTemperature::new::<
///     unit::thermodynamic_temperature::degree_celsius,
/// >(10.0)).expect("in range");
/// let wall = PipeWall {
///     bore: Length::new::<unit::length::millimeter>(204.6),
///     thickness: Length::new::<unit::length::millimeter>(22.7),
///     modulus: Pressure::new::<unit::pressure::gigapascal>(1.1),
///     poisson: 0.45,
///     restraint: Restraint::Throughout,
/// };
/// let speed = wave_speed(&water, &wall)?.get::<unit::velocity::meter_per_second>();
/// assert!((speed - 333.5).abs() < 0.2);
/// # Ok::<(), hydraulics::surge::WaveError>(())
/// ```
pub fn wave_speed(water: &Water, wall: &PipeWall) -> Result<Velocity, WaveError> {
    korteweg(
        water.density(),
        water.bulk_modulus(),
        wall,
        restraint_factor(wall)?,
    )
}

/// Wave speed of any liquid in a pipe, with the factor c given.
///
/// # Equation
/// a = sqrt(K/rho) / sqrt(1 + K D c / (E e)) (Korteweg 1878).
///
/// # Errors
/// A length, modulus, density or bulk modulus that is not positive.
pub fn korteweg(
    density: MassDensity,
    bulk_modulus: Pressure,
    wall: &PipeWall,
    factor: f64,
) -> Result<Velocity, WaveError> {
    let rho = density.get::<kilogram_per_cubic_meter>();
    let bulk = bulk_modulus.get::<pascal>();
    if !(rho > 0.0 && rho.is_finite()) {
        return Err(WaveError::Density(density));
    }
    if !(bulk > 0.0 && bulk.is_finite()) {
        return Err(WaveError::Modulus(bulk_modulus));
    }
    if !(factor >= 0.0 && factor.is_finite()) {
        return Err(WaveError::Factor(factor));
    }
    let give = 1.0 / bulk + factor * thin_compliance(wall)?;
    Ok(speed(rho, give))
}

/// Wave speed from density, kg/m3, and give, 1/Pa.
fn speed(density: f64, give: f64) -> Velocity {
    Velocity::new::<meter_per_second>((1.0 / (density * give)).sqrt())
}

/// Wave speed with free air in the water.
///
/// # Equation
/// 1/(rho a^2) = 1/K + D c/(E e) + share/p: the give of the air (isothermal)
/// added to that of water and wall (Wylie and Streeter 1993, section 1-4, from
/// memory). **Not conservative**: air lowers the computed surge, and it may
/// not be there on the day. Off unless asked for.
///
/// # Errors
/// As for [`wave_speed`]; a share outside 0..=0.02, a pressure that is not
/// positive.
pub fn wave_speed_with_air(
    water: &Water,
    wall: &PipeWall,
    air: EntrainedAir,
) -> Result<Velocity, WaveError> {
    if !(0.0..=0.02).contains(&air.share) {
        return Err(WaveError::AirShare(air.share));
    }
    let pressure = air.pressure.pa();
    if !(pressure > 0.0 && pressure.is_finite()) {
        return Err(WaveError::AirPressure(air.pressure));
    }
    let bulk = water.bulk_modulus().get::<pascal>();
    let wall_give = restraint_factor(wall)? * thin_compliance(wall)?;
    let give = 1.0 / bulk + wall_give + air.share / pressure;
    Ok(speed(water.density_si(), give))
}

/// D / (E e), 1/Pa.
fn thin_compliance(wall: &PipeWall) -> Result<f64, WaveError> {
    let modulus = wall.modulus.get::<pascal>();
    if !(modulus > 0.0 && modulus.is_finite()) {
        return Err(WaveError::Modulus(wall.modulus));
    }
    Ok(positive(wall.bore)? / (modulus * positive(wall.thickness)?))
}

/// A positive length in metres.
fn positive(length: Length) -> Result<f64, WaveError> {
    let metres = length.get::<meter>();
    if metres > 0.0 && metres.is_finite() {
        Ok(metres)
    } else {
        Err(WaveError::Length(length))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;
    use uom::si::thermodynamic_temperature::degree_celsius;

    fn water() -> Water {
        Water::at(crate::quantity::ThermodynamicTemperature::new::<
            degree_celsius,
        >(10.0))
        .unwrap()
    }

    fn wall(bore: f64, thickness: f64, modulus: f64, poisson: f64) -> PipeWall {
        PipeWall {
            bore: Length::new::<meter>(bore),
            thickness: Length::new::<meter>(thickness),
            modulus: Pressure::new::<pascal>(modulus),
            poisson,
            restraint: Restraint::Throughout,
        }
    }

    #[test]
    fn nonsense_is_refused() {
        let water = water();
        let good = wall(0.2, 0.01, 1e9, 0.4);
        assert!(wave_speed(&water, &wall(0.0, 0.01, 1e9, 0.4)).is_err());
        assert!(wave_speed(&water, &wall(0.2, -0.01, 1e9, 0.4)).is_err());
        assert!(wave_speed(&water, &wall(0.2, 0.01, 0.0, 0.4)).is_err());
        assert!(wave_speed(&water, &wall(0.2, 0.01, 1e9, 0.6)).is_err());
        let air = |share, pascals| EntrainedAir {
            share,
            pressure: AbsolutePressure::from_pa(pascals),
        };
        assert!(wave_speed_with_air(&water, &good, air(0.03, 1e5)).is_err());
        assert!(wave_speed_with_air(&water, &good, air(0.01, 0.0)).is_err());
    }

    #[test]
    fn a_rigid_pipe_carries_sound_as_open_water() {
        let speed = wave_speed(&water(), &wall(0.2, 0.01, 1e20, 0.3)).unwrap();
        assert!(
            (speed - water().sound_speed())
                .get::<meter_per_second>()
                .abs()
                < 1e-6
        );
    }

    #[test]
    fn a_thick_wall_tends_to_the_bore_in_rock() {
        // Wylie and Streeter: for a tunnel the give is 2 (1 + mu)/E.
        let thick = wall(1.0, 1e6, 1e10, 0.25);
        let give = restraint_factor(&thick).unwrap() * thin_compliance(&thick).unwrap();
        assert!((give * 1e10 / 2.5 - 1.0).abs() < 1e-5);
    }

    /// Growth of the bore's area over pressure, by Lame's thick cylinder: hoop
    /// strain at the bore, twice.
    fn lame(inner: f64, outer: f64, modulus: f64, mu: f64, restraint: Restraint) -> f64 {
        let (i, o) = (inner * inner, outer * outer);
        let hoop = (o + i) / (o - i);
        let radial = -1.0;
        let axial = match restraint {
            Restraint::ExpansionJoints => 0.0,
            // The end's pull, pressure times bore over wall.
            Restraint::UpstreamEnd => i / (o - i),
            // No axial strain.
            Restraint::Throughout => mu * (hoop + radial),
        };
        2.0 * (hoop - mu * (radial + axial)) / modulus
    }

    proptest! {
        #[test]
        fn the_factor_is_lames(share in 0.001..1.0_f64, mu in 0.0..0.5_f64) {
            for restraint in [Restraint::UpstreamEnd, Restraint::Throughout, Restraint::ExpansionJoints] {
                let pipe = PipeWall { restraint, ..wall(0.3, 0.3 * share, 1e9, mu) };
                let ours = restraint_factor(&pipe).unwrap() * thin_compliance(&pipe).unwrap();
                let exact = lame(0.15, 0.15 + 0.3 * share, 1e9, mu, restraint);
                prop_assert!((ours / exact - 1.0).abs() < 1e-12);
            }
        }

        #[test]
        fn thicker_and_stiffer_walls_are_faster_and_air_slows(
            bore in 0.05..1.0_f64, share in 0.005..0.2_f64, modulus in 5e8..2.1e11_f64, mu in 0.2..0.5_f64,
        ) {
            let water = water();
            let speed = |share: f64, modulus| wave_speed(&water, &wall(bore, share * bore, modulus, mu)).unwrap();
            let here = speed(share, modulus);
            prop_assert!(speed(share, modulus * 1.01) > here);
            prop_assert!(speed(share * 1.01, modulus) > here);
            prop_assert!(here < water.sound_speed());
            let air = EntrainedAir { share: 1e-4, pressure: AbsolutePressure::from_pa(3e5) };
            let pipe = wall(bore, share * bore, modulus, mu);
            prop_assert!(wave_speed_with_air(&water, &pipe, air).unwrap() < here);
            let none = EntrainedAir { share: 0.0, ..air };
            prop_assert!((wave_speed_with_air(&water, &pipe, none).unwrap() - here).get::<meter_per_second>().abs() < 1e-9);
        }

        #[test]
        fn thin_walls_tend_to_the_thin_factor(mu in 0.0..0.5_f64) {
            for restraint in [Restraint::UpstreamEnd, Restraint::Throughout, Restraint::ExpansionJoints] {
                let thin = PipeWall { restraint, ..wall(1.0, 1e-7, 1e9, mu) };
                prop_assert!((restraint_factor(&thin).unwrap() - restraint.thin_factor(mu)).abs() < 1e-6);
            }
        }
    }
}
