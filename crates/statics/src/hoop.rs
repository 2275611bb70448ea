//! Hoop stress from inside pressure: Barlow for any wall, Lame for thick walls.

use uom::si::f64::{Length, Pressure};
use uom::si::length::meter;
use uom::si::pressure::pascal;

use crate::check::{self, Input, WallError};

/// Hoop stress by Barlow, sigma = p D / (2 t).
///
/// With the **outside** diameter, as pipe codes use it, the figure is never
/// below the stress at the bore by Lame, so it is on the safe side for every
/// wall; with the bore it is the thin-wall membrane stress, 5 % too low at
/// D/t = 20. Pressure zero or more.
///
/// Source: Barlow's formula, e.g. B. K. Sarkar, Strength of Materials,
/// Problem 15.4 (thin cylinder).
///
/// # Errors
/// [`WallError`] when a value is not finite, the pressure negative, the
/// diameter or wall not above zero, or the wall leaves no bore.
pub fn barlow_stress(
    pressure: Pressure,
    diameter: Length,
    wall: Length,
) -> Result<Pressure, WallError> {
    let (d, t) = check::tube(diameter.get::<meter>(), wall.get::<meter>())?;
    let p = check::between(Input::Pressure, pressure.get::<pascal>(), 0.0, f64::MAX)?;
    stress(p * (d / (2.0 * t)))
}

/// Inside pressure at which the hoop stress by Barlow reaches `stress`,
/// p = 2 sigma t / D. The inverse of [`barlow_stress`].
///
/// # Errors
/// As [`barlow_stress`]; the stress must be zero or more.
pub fn barlow_pressure(
    stress: Pressure,
    diameter: Length,
    wall: Length,
) -> Result<Pressure, WallError> {
    let (d, t) = check::tube(diameter.get::<meter>(), wall.get::<meter>())?;
    let s = check::between(Input::Stress, stress.get::<pascal>(), 0.0, f64::MAX)?;
    pressure(s * (2.0 * t / d))
}

/// Inside pressure by the mean-diameter rule of plastic pipe,
/// p = 2 sigma t / (D - t), D being the outside diameter and t the least wall.
///
/// This is the rule behind PN of ISO 4427 and ISO 1452 (ISO 4065:
/// sigma = p (D - t) / (2 t)) and behind the ratings of ASTM D2241 and D1785.
///
/// # Errors
/// As [`barlow_pressure`].
pub fn mean_diameter_pressure(
    stress: Pressure,
    outside_diameter: Length,
    wall: Length,
) -> Result<Pressure, WallError> {
    let (d, t) = check::tube(outside_diameter.get::<meter>(), wall.get::<meter>())?;
    let s = check::between(Input::Stress, stress.get::<pascal>(), 0.0, f64::MAX)?;
    pressure(s * (2.0 * t / (d - t)))
}

/// Greatest hoop stress (at the bore) by Lame,
/// sigma = p (D^2 + d^2) / (D^2 - d^2), any wall, elastic, free ends.
///
/// Source: Lame's thick-cylinder solution (Timoshenko, Strength of Materials,
/// part II, thick-walled cylinder, inside pressure only).
///
/// # Errors
/// As [`barlow_stress`].
pub fn lame_stress(
    pressure: Pressure,
    outside_diameter: Length,
    wall: Length,
) -> Result<Pressure, WallError> {
    let (d, t) = check::tube(outside_diameter.get::<meter>(), wall.get::<meter>())?;
    let p = check::between(Input::Pressure, pressure.get::<pascal>(), 0.0, f64::MAX)?;
    stress(p * lame_ratio(d, t))
}

/// Inside pressure at which the stress at the bore by Lame reaches `stress`.
/// The inverse of [`lame_stress`].
///
/// # Errors
/// As [`barlow_pressure`].
pub fn lame_pressure(
    stress: Pressure,
    outside_diameter: Length,
    wall: Length,
) -> Result<Pressure, WallError> {
    let (d, t) = check::tube(outside_diameter.get::<meter>(), wall.get::<meter>())?;
    let s = check::between(Input::Stress, stress.get::<pascal>(), 0.0, f64::MAX)?;
    pressure(s / lame_ratio(d, t))
}

/// (D^2 + d^2) / (D^2 - d^2) with d = D - 2t, in a form that does not cancel.
fn lame_ratio(d: f64, t: f64) -> f64 {
    let k = (d - 2.0 * t) / d;
    let gap = 2.0 * t / d;
    (1.0 + k * k) / (gap * (1.0 + k))
}

fn stress(value: f64) -> Result<Pressure, WallError> {
    Ok(Pressure::new::<pascal>(check::finite(
        Input::Stress,
        value,
    )?))
}

fn pressure(value: f64) -> Result<Pressure, WallError> {
    Ok(Pressure::new::<pascal>(check::finite(
        Input::Pressure,
        value,
    )?))
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;

    fn pa(value: f64) -> Pressure {
        Pressure::new::<pascal>(value)
    }

    fn m(value: f64) -> Length {
        Length::new::<meter>(value)
    }

    #[test]
    fn impossible_tubes_are_named() {
        let p = pa(1e6);
        assert_eq!(
            barlow_stress(p, m(0.2), m(0.1)),
            Err(WallError::NoBore {
                wall: 0.1,
                half_diameter: 0.1
            })
        );
        assert!(matches!(
            barlow_stress(p, m(0.0), m(0.1)),
            Err(WallError::OutOfRange {
                input: Input::Diameter,
                ..
            })
        ));
        assert!(matches!(
            lame_stress(pa(-1.0), m(0.2), m(0.01)),
            Err(WallError::OutOfRange {
                input: Input::Pressure,
                ..
            })
        ));
        assert_eq!(
            barlow_pressure(pa(f64::NAN), m(0.2), m(0.01)),
            Err(WallError::NotFinite {
                input: Input::Stress
            })
        );
        assert!(barlow_stress(pa(f64::MAX), m(1.0), m(1e-9)).is_err());
        assert!(mean_diameter_pressure(pa(1.0), m(0.2), m(f64::INFINITY)).is_err());
    }

    #[test]
    fn no_pressure_no_stress() {
        assert_eq!(barlow_stress(pa(0.0), m(0.2), m(0.01)), Ok(pa(0.0)));
        assert_eq!(lame_stress(pa(0.0), m(0.2), m(0.01)), Ok(pa(0.0)));
    }

    proptest! {
        #[test]
        fn barlow_by_the_outside_is_never_below_lame(
            p in 1.0..1e8_f64, d in 0.01..10.0_f64, share in 1e-4..0.499_f64,
        ) {
            let wall = m(d * share);
            let barlow = barlow_stress(pa(p), m(d), wall).unwrap();
            let lame = lame_stress(pa(p), m(d), wall).unwrap();
            prop_assert!(barlow >= lame * (1.0 - 1e-12));
            // Thin walls: the mean-diameter rule, Barlow and Lame meet.
            if share < 1e-3 {
                prop_assert!((barlow - lame).get::<pascal>() < 0.002 * barlow.get::<pascal>());
            }
        }

        #[test]
        fn inverses_and_scaling(
            s in 1.0..1e9_f64, d in 0.01..10.0_f64, share in 1e-4..0.499_f64, k in 0.1..10.0_f64,
        ) {
            let (od, wall) = (m(d), m(d * share));
            let near = |a: Pressure, b: f64| ((a.get::<pascal>() - b) / b).abs() < 1e-12;
            let barlow = barlow_pressure(pa(s), od, wall).unwrap();
            prop_assert!(near(barlow_stress(barlow, od, wall).unwrap(), s));
            let lame = lame_pressure(pa(s), od, wall).unwrap();
            prop_assert!(near(lame_stress(lame, od, wall).unwrap(), s));
            // Only the ratio of wall to diameter counts; pressure goes with stress.
            prop_assert!(near(barlow_pressure(pa(s), od * k, wall * k).unwrap(), barlow.get::<pascal>()));
            prop_assert!(near(lame_pressure(pa(s * k), od, wall).unwrap(), lame.get::<pascal>() * k));
            let mean = mean_diameter_pressure(pa(s), od, wall).unwrap();
            prop_assert!(mean > barlow);
        }

        #[test]
        fn never_a_figure_that_is_not_finite(p in any::<f64>(), d in any::<f64>(), t in any::<f64>()) {
            for found in [
                barlow_stress(pa(p), m(d), m(t)),
                lame_stress(pa(p), m(d), m(t)),
                barlow_pressure(pa(p), m(d), m(t)),
                lame_pressure(pa(p), m(d), m(t)),
                mean_diameter_pressure(pa(p), m(d), m(t)),
            ].into_iter().flatten() {
                prop_assert!(found.get::<pascal>().is_finite());
            }
        }
    }
}
