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
