//! Allowable pressure of a steel wall by stress, and the least wall for handling.

use uom::si::f64::{Length, Pressure};
use uom::si::length::meter;
use uom::si::pressure::pascal;

use crate::check::{self, Input, WallError};

/// Which load the allowable stress is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum LoadCase {
    /// Lasting: highest steady pressure.
    Normal,
    /// Passing: surge.
    Transient,
    /// Site test, new pipe.
    Test,
}

/// The shares of strength that may be used in one load case. The allowable
/// stress is the lesser of `of_yield` times yield strength and `of_tensile`
/// times tensile strength.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StressShares {
    /// Share of the least yield strength, above 0 up to 1.
    pub of_yield: f64,
    /// Share of the least tensile strength, above 0 up to 1; none where the
    /// rule in use looks at yield alone.
    pub of_tensile: Option<f64>,
}

/// A steel wall as ordered, with all that is taken off before it is counted on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SteelWall {
    /// Outside diameter.
    pub outside_diameter: Length,
    /// Nominal wall.
    pub nominal_wall: Length,
    /// Share of the nominal wall the mill may leave out, 0 up to (not with) 1;
    /// 0.125 is 12.5 %.
    pub mill_tolerance: f64,
    /// Corrosion allowance, zero or more.
    pub corrosion: Length,
    /// Depth of thread cut into the wall; zero for plain ends.
    pub thread_depth: Length,
    /// Least yield strength of the grade.
    pub yield_strength: Pressure,
    /// Least tensile strength of the grade.
    pub tensile_strength: Pressure,
    /// Factor of the longitudinal joint, above 0 up to 1.
    pub joint_factor: f64,
}

/// Which strength sets the allowable stress.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Governing {
    /// Yield strength.
    Yield,
    /// Tensile strength.
    Tensile,
}

/// What [`allowable_pressure`] finds.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SteelAllowable {
    /// Allowable inside pressure.
    pub pressure: Pressure,
    /// Wall counted on: nominal less mill tolerance, corrosion and thread.
    pub net_wall: Length,
    /// Allowable stress before the joint factor.
    pub stress: Pressure,
    /// Which strength set it.
    pub governing: Governing,
}

/// Wall counted on: nominal (1 - mill tolerance) - corrosion - thread depth.
///
/// # Errors
/// [`WallError`] when a value is out of range or nothing of the wall is left.
pub fn net_wall(wall: &SteelWall) -> Result<Length, WallError> {
    let (_, t) = check::tube(
        wall.outside_diameter.get::<meter>(),
        wall.nominal_wall.get::<meter>(),
    )?;
    let mill = check::between(Input::MillTolerance, wall.mill_tolerance, 0.0, 1.0)?;
    let corrosion = check::between(
        Input::Corrosion,
        wall.corrosion.get::<meter>(),
        0.0,
        f64::MAX,
    )?;
    let thread = check::between(
        Input::ThreadDepth,
        wall.thread_depth.get::<meter>(),
        0.0,
        f64::MAX,
    )?;
    let taken_off = t * mill + corrosion + thread;
    if taken_off >= t {
        return Err(WallError::NothingLeft {
            nominal: t,
            taken_off,
        });
    }
    Ok(Length::new::<meter>(t - taken_off))
}

/// Allowable inside pressure of a steel wall, p = 2 S E t / D (Barlow, outside
/// diameter): S the allowable stress by `shares`, E the joint factor, t the
/// [`net_wall`]. Room temperature; no shear, bending or support stresses.
///
/// Source: Barlow with joint factor as in ASME B31 pipe codes (t = P D / (2 S E)).
///
/// # Errors
/// [`WallError`] when a value is out of range or nothing of the wall is left.
pub fn allowable_pressure(
    wall: &SteelWall,
    shares: &StressShares,
) -> Result<SteelAllowable, WallError> {
    let net = net_wall(wall)?;
    let joint = check::positive(Input::JointFactor, wall.joint_factor)
        .and_then(|value| check::between(Input::JointFactor, value, 0.0, 1.0))?;
    let (stress, governing) = allowable_stress(wall.yield_strength, wall.tensile_strength, shares)?;
    let d = wall.outside_diameter.get::<meter>();
    let p = 2.0 * stress.get::<pascal>() * joint * net.get::<meter>() / d;
    let pressure = Pressure::new::<pascal>(check::finite(Input::Pressure, p)?);
    Ok(SteelAllowable {
        pressure,
        net_wall: net,
        stress,
        governing,
    })
}

/// Allowable stress: the lesser of the share of yield and the share of tensile
/// strength, and which of the two it is.
///
/// # Errors
/// [`WallError`] when a strength is not above zero, a share not above 0 up to
/// 1, or the tensile strength below the yield strength.
pub fn allowable_stress(
    yield_strength: Pressure,
    tensile_strength: Pressure,
    shares: &StressShares,
) -> Result<(Pressure, Governing), WallError> {
    let fy = check::positive(Input::YieldStrength, yield_strength.get::<pascal>())?;
    let fu = check::between(
        Input::TensileStrength,
        tensile_strength.get::<pascal>(),
        fy,
        f64::MAX,
    )?;
    let by_yield = fy * share(shares.of_yield)?;
    let by_tensile = match shares.of_tensile {
        Some(value) => fu * share(value)?,
        None => f64::INFINITY,
    };
    if by_tensile < by_yield {
        Ok((Pressure::new::<pascal>(by_tensile), Governing::Tensile))
    } else {
        Ok((Pressure::new::<pascal>(by_yield), Governing::Yield))
    }
}

/// Least wall of a steel pipe for handling and carrying, (D + 508 mm) / 400
/// ((D + 20 in) / 400), whatever the pressure.
///
/// Source: USBR Engineering Monograph 3, Welded Steel Penstocks (from memory:
/// the page was not seen). D is the inside diameter.
///
/// # Errors
/// [`WallError`] when the diameter is not above zero or not finite.
pub fn handling_wall(bore: Length) -> Result<Length, WallError> {
    let d = check::positive(Input::Diameter, bore.get::<meter>())?;
    Ok(Length::new::<meter>(check::finite(
        Input::Diameter,
        (d + 0.508) / 400.0,
    )?))
}

fn share(value: f64) -> Result<f64, WallError> {
    check::positive(Input::DesignFactor, value)
        .and_then(|value| check::between(Input::DesignFactor, value, 0.0, 1.0))
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;
    use uom::si::length::millimeter;
    use uom::si::pressure::megapascal;

    use super::*;

    const SHARES: StressShares = StressShares {
        of_yield: 2.0 / 3.0,
        of_tensile: Some(1.0 / 3.0),
    };

    fn wall() -> SteelWall {
        SteelWall {
            outside_diameter: Length::new::<millimeter>(219.1),
            nominal_wall: Length::new::<millimeter>(4.5),
            mill_tolerance: 0.125,
            corrosion: Length::new::<millimeter>(1.0),
            thread_depth: Length::new::<millimeter>(0.0),
            yield_strength: Pressure::new::<megapascal>(235.0),
            tensile_strength: Pressure::new::<megapascal>(360.0),
            joint_factor: 0.85,
        }
    }

    #[test]
    fn by_hand() {
        // t = 4.5 x 0.875 - 1 = 2.9375 mm; S = 360/3 = 120 MPa; p = 2 x 120 x 0.85 x 2.9375 / 219.1.
        let found = allowable_pressure(&wall(), &SHARES).unwrap();
        assert!((found.net_wall.get::<millimeter>() - 2.9375).abs() < 1e-9);
        assert!((found.pressure.get::<megapascal>() - 204.0 * 2.9375 / 219.1).abs() < 1e-9);
        assert_eq!(found.governing, Governing::Tensile);
        let by_yield = StressShares {
            of_yield: 0.5,
            of_tensile: None,
        };
        let found = allowable_pressure(&wall(), &by_yield).unwrap();
        assert_eq!(found.governing, Governing::Yield);
        assert!((found.stress.get::<megapascal>() - 117.5).abs() < 1e-9);
    }

    #[test]
    fn impossible_walls_are_named() {
        type Change = fn(&mut SteelWall);
        let cases: [(Change, Input); 6] = [
            (|wall| wall.mill_tolerance = 1.1, Input::MillTolerance),
            (
                |wall| wall.corrosion = Length::new::<millimeter>(-1.0),
                Input::Corrosion,
            ),
            (
                |wall| wall.thread_depth = Length::new::<millimeter>(-1.0),
                Input::ThreadDepth,
            ),
            (|wall| wall.joint_factor = 0.0, Input::JointFactor),
            (|wall| wall.joint_factor = 1.01, Input::JointFactor),
            (
                |wall| wall.tensile_strength = Pressure::new::<megapascal>(200.0),
                Input::TensileStrength,
            ),
        ];
        for (change, input) in cases {
            let mut bad = wall();
            change(&mut bad);
            let Err(WallError::OutOfRange { input: named, .. }) = allowable_pressure(&bad, &SHARES)
            else {
                panic!("{input:?} should be refused");
            };
            assert_eq!(named, input);
        }
        let mut thin = wall();
        thin.thread_depth = Length::new::<millimeter>(3.0);
        assert!(matches!(
            net_wall(&thin),
            Err(WallError::NothingLeft { .. })
        ));
        let none = StressShares {
            of_yield: 0.0,
            of_tensile: None,
        };
        assert!(allowable_pressure(&wall(), &none).is_err());
        let over = StressShares {
            of_yield: 0.5,
            of_tensile: Some(1.5),
        };
        assert!(allowable_pressure(&wall(), &over).is_err());
    }

    #[test]
    fn the_handling_wall_in_both_unit_systems() {
        // (D + 20 in) / 400: 20 in give 0.1 in.
        let wall = handling_wall(Length::new::<millimeter>(508.0)).unwrap();
        assert!((wall.get::<millimeter>() - 2.54).abs() < 1e-12);
        assert!(handling_wall(Length::new::<millimeter>(0.0)).is_err());
    }

    proptest! {
        #[test]
        fn less_wall_never_carries_more(
            mill in 0.0..0.2_f64, corrosion in 0.0..1.5_f64, thread in 0.0..1.5_f64,
            joint in 0.5..1.0_f64, of_yield in 0.3..0.7_f64,
        ) {
            let shares = StressShares { of_yield, of_tensile: Some(0.4) };
            let mut one = wall();
            one.mill_tolerance = mill;
            one.corrosion = Length::new::<millimeter>(corrosion);
            one.thread_depth = Length::new::<millimeter>(thread);
            one.joint_factor = joint;
            let base = allowable_pressure(&one, &shares).unwrap().pressure;
            let changes: [fn(&mut SteelWall); 4] = [
                |wall| wall.mill_tolerance += 0.01,
                |wall| wall.corrosion += Length::new::<millimeter>(0.01),
                |wall| wall.thread_depth += Length::new::<millimeter>(0.01),
                |wall| wall.joint_factor -= 0.01,
            ];
            for change in changes {
                let mut less = one;
                change(&mut less);
                prop_assert!(allowable_pressure(&less, &shares).unwrap().pressure < base);
            }
            // A wall loaded by what it is allowed is stressed by S E, counted on its net wall.
            let found = allowable_pressure(&one, &shares).unwrap();
            let back = crate::hoop::barlow_stress(found.pressure, one.outside_diameter, found.net_wall).unwrap();
            let due = found.stress.get::<pascal>() * joint;
            prop_assert!((back.get::<pascal>() / due - 1.0).abs() < 1e-12);
        }
    }
}
