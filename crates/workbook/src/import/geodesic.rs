//! Distance and directions between two positions on the WGS 84 ellipsoid.
//!
//! Source: Vincenty, T. (1975), Direct and inverse solutions of geodesics on
//! the ellipsoid with application of nested equations, Survey Review 23(176),
//! 88-93, the inverse solution. Checked against GeographicLib in
//! `tests/outside`.

use hydraulics::math;

/// Equatorial radius, m (WGS 84, defining).
const EQUATOR_M: f64 = 6_378_137.0;
/// Flattening (WGS 84, defining).
const FLATTENING: f64 = 1.0 / 298.257_223_563;

/// Most rounds of the iteration; a survey's legs take three or four.
const MOST_ROUNDS: usize = 100;

/// A position on the ellipsoid.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Position {
    /// Latitude, degree, north above zero; -90 to 90.
    pub latitude_deg: f64,
    /// Longitude, degree, east above zero; -180 to 180.
    pub longitude_deg: f64,
}

/// The shortest way between two positions.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Leg {
    /// Length on the ellipsoid, m.
    pub distance_m: f64,
    /// Direction at the first position, degree from north over east.
    pub from_deg: f64,
    /// Direction at the second, going on.
    pub to_deg: f64,
}

/// The geodesic from `a` to `b`; none where the iteration does not settle,
/// which is for positions almost opposite on the earth.
///
/// Within 0.1 mm over any leg of a survey. The way is taken at the height of
/// the ellipsoid: at height h the ground is longer by h over the earth's
/// radius, 0.016 per cent for each 1000 m, far below what a satellite fix is
/// sure to. Positions that are the same have no direction: zero is given.
#[must_use]
pub fn leg(a: Position, b: Position) -> Option<Leg> {
    let radians = |degrees: f64| degrees * math::PI / 180.0;
    let f = FLATTENING;
    // Reduced latitudes.
    let reduced = |p: Position| {
        let latitude = radians(p.latitude_deg);
        math::sin_cos(math::atan2(
            (1.0 - f) * math::sin(latitude),
            math::cos(latitude),
        ))
    };
    let (sin_u1, cos_u1) = reduced(a);
    let (sin_u2, cos_u2) = reduced(b);
    let around = turn(b.longitude_deg - a.longitude_deg);
    let difference = radians(around);
    let mut lambda = difference;
    for _ in 0..MOST_ROUNDS {
        let (sin_l, cos_l) = math::sin_cos(lambda);
        let across = cos_u2 * sin_l;
        let along = cos_u1 * sin_u2 - sin_u1 * cos_u2 * cos_l;
        let sin_sigma = math::hypot(across, along);
        if sin_sigma < 1e-16 && lambda.abs() < 1.0 {
            return Some(Leg {
                distance_m: 0.0,
                from_deg: 0.0,
                to_deg: 0.0,
            });
        }
        let cos_sigma = sin_u1 * sin_u2 + cos_u1 * cos_u2 * cos_l;
        let sigma = math::atan2(sin_sigma, cos_sigma);
        let sin_alpha = cos_u1 * cos_u2 * sin_l / sin_sigma;
        let cos2_alpha = 1.0 - sin_alpha * sin_alpha;
        // On the equator cos² alpha is zero, and so is the term.
        let cos_2m = if cos2_alpha > 1e-15 {
            cos_sigma - 2.0 * sin_u1 * sin_u2 / cos2_alpha
        } else {
            0.0
        };
        let c = f / 16.0 * cos2_alpha * (4.0 + f * (4.0 - 3.0 * cos2_alpha));
        let next = difference
            + (1.0 - c)
                * f
                * sin_alpha
                * (sigma
                    + c * sin_sigma * (cos_2m + c * cos_sigma * (2.0 * cos_2m * cos_2m - 1.0)));
        let settled = (next - lambda).abs() < 1e-14;
        lambda = next;
        if !lambda.is_finite() || lambda.abs() > math::PI {
            return None;
        }
        if settled {
            let degrees = |x: f64| x * 180.0 / math::PI;
            let back = cos_u1 * sin_u2 * cos_l - sin_u1 * cos_u2;
            return Some(Leg {
                distance_m: length(cos2_alpha, cos_2m, sigma, sin_sigma, cos_sigma),
                from_deg: degrees(math::atan2(across, along)),
                to_deg: degrees(math::atan2(cos_u1 * sin_l, back)),
            });
        }
    }
    None
}

/// The length of the arc: Vincenty's equations 3, 4 and 6.
fn length(cos2_alpha: f64, cos_2m: f64, sigma: f64, sin_sigma: f64, cos_sigma: f64) -> f64 {
    let polar = EQUATOR_M * (1.0 - FLATTENING);
    let u2 = cos2_alpha * (EQUATOR_M * EQUATOR_M - polar * polar) / (polar * polar);
    let a = 1.0 + u2 / 16384.0 * (4096.0 + u2 * (-768.0 + u2 * (320.0 - 175.0 * u2)));
    let b = u2 / 1024.0 * (256.0 + u2 * (-128.0 + u2 * (74.0 - 47.0 * u2)));
    let m2 = cos_2m * cos_2m;
    let more = cos_sigma * (2.0 * m2 - 1.0)
        - b / 6.0 * cos_2m * (4.0 * sin_sigma * sin_sigma - 3.0) * (4.0 * m2 - 3.0);
    polar * a * (sigma - b * sin_sigma * (cos_2m + b / 4.0 * more))
}

/// An angle in degrees brought into -180 to 180: by how much a line turns,
/// to the right above zero, when its direction grows by `degrees`.
#[must_use]
pub fn turn(degrees: f64) -> f64 {
    let around = degrees % 360.0;
    if around > 180.0 {
        around - 360.0
    } else if around < -180.0 {
        around + 360.0
    } else {
        around
    }
}

/// Metres north and east of `origin` on the plane that touches the ellipsoid
/// there: for thinning and for what lies nearest, not for lengths. Within
/// 1 m in 10 km of the origin.
#[must_use]
pub fn plane(origin: Position, p: Position) -> (f64, f64) {
    let e2 = FLATTENING * (2.0 - FLATTENING);
    let (sin, cos) = math::sin_cos(origin.latitude_deg * math::PI / 180.0);
    let w2 = 1.0 - e2 * sin * sin;
    let prime = EQUATOR_M / w2.sqrt();
    let meridian = prime * (1.0 - e2) / w2;
    let radians = math::PI / 180.0;
    (
        meridian * (p.latitude_deg - origin.latitude_deg) * radians,
        prime * cos * turn(p.longitude_deg - origin.longitude_deg) * radians,
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn at(latitude_deg: f64, longitude_deg: f64) -> Position {
        Position {
            latitude_deg,
            longitude_deg,
        }
    }

    #[test]
    fn the_same_position_is_no_way_off() {
        let there = leg(at(-13.5, -72.0), at(-13.5, -72.0)).unwrap();
        assert!(there.distance_m.abs() < 1e-12);
        assert!(leg(at(0.0, 0.0), at(0.2, 179.8)).is_none());
    }

    #[test]
    fn the_date_line_is_crossed_the_short_way() {
        let d = leg(at(-17.0, 179.9995), at(-17.0, -179.9995)).unwrap();
        assert!((100.0..110.0).contains(&d.distance_m), "{d:?}");
        assert!((turn(350.0 - 10.0) + 20.0).abs() < 1e-12);
    }

    proptest! {
        #[test]
        fn there_is_as_far_as_back_and_the_plane_agrees(
            latitude in -80.0..80.0f64, longitude in -179.0..179.0f64,
            north in -0.02..0.02f64, east in -0.02..0.02f64,
        ) {
            let (a, b) = (at(latitude, longitude), at(latitude + north, longitude + east));
            let (there, back) = (leg(a, b).unwrap(), leg(b, a).unwrap());
            prop_assert!((there.distance_m - back.distance_m).abs() < 1e-5);
            let (n, e) = plane(a, b);
            let flat = math::hypot(n, e);
            prop_assert!((there.distance_m - flat).abs() < 1.0 + 0.001 * flat);
        }
    }
}
