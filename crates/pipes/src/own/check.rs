//! What can be wrong with the values of a pipe of the user's own.

use statics::steel::{self, LoadCase};
use uom::si::f64::ThermodynamicTemperature;
use uom::si::length::meter;
use uom::si::thermodynamic_temperature::kelvin;

use super::OwnPipeError;
use crate::{Attested, Derating, DeratingPoint, Pipe, Rating};

/// What can only be seen on the whole pipe.
pub(super) fn check_pipe(pipe: &Pipe) -> Result<(), OwnPipeError> {
    let bore = pipe.bore().get::<meter>();
    for (field, height) in [
        ("roughness_new", &pipe.roughness_new),
        ("roughness_aged", &pipe.roughness_aged),
    ] {
        between(field, height.value.get::<meter>(), 0.0, bore / 20.0)?;
    }
    if let Rating::Stress(rating) = &pipe.rating {
        let wall = pipe.steel_wall(rating);
        for case in [LoadCase::Normal, LoadCase::Transient, LoadCase::Test] {
            steel::allowable_pressure(&wall, &rating.shares(case).value)
                .map_err(OwnPipeError::Wall)?;
        }
    }
    Ok(())
}

pub(super) fn own_derating(
    points: &[(ThermodynamicTemperature, f64)],
    source: &str,
) -> Result<Derating, OwnPipeError> {
    if points.is_empty() {
        return Err(OwnPipeError::DeratingEmpty);
    }
    let mut kept = Vec::with_capacity(points.len());
    for &(temperature, factor) in points {
        positive("derating temperature", temperature.get::<kelvin>())?;
        positive("derating factor", factor)?;
        between("derating factor", factor, 0.0, 1.0)?;
        kept.push(DeratingPoint {
            temperature,
            factor,
            attested: Attested::Seen,
        });
    }
    let derating = Derating {
        points: kept,
        source: format!("derating as entered: {source}"),
    };
    match derating.disorder() {
        Some(index) => Err(OwnPipeError::DeratingDisordered { index }),
        None => Ok(derating),
    }
}

pub(super) fn filled<'a>(field: &'static str, text: &'a str) -> Result<&'a str, OwnPipeError> {
    match text.trim() {
        "" => Err(OwnPipeError::Blank { field }),
        text => Ok(text),
    }
}

pub(super) fn finite(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    if value.is_finite() {
        Ok(value)
    } else {
        Err(OwnPipeError::NotFinite { field })
    }
}

pub(super) fn positive(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    match finite(field, value)? {
        value if value > 0.0 => Ok(value),
        value => Err(OwnPipeError::NotPositive { field, value }),
    }
}

pub(super) fn not_negative(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    match finite(field, value)? {
        value if value >= 0.0 => Ok(value),
        value => Err(OwnPipeError::NotPositive { field, value }),
    }
}

pub(super) fn between(
    field: &'static str,
    value: f64,
    least: f64,
    greatest: f64,
) -> Result<f64, OwnPipeError> {
    let value = finite(field, value)?;
    if value < least || value > greatest {
        return Err(OwnPipeError::OutOfRange {
            field,
            value,
            least,
            greatest,
        });
    }
    Ok(value)
}

/// A number with at most three decimals and no idle zeros.
pub(super) fn trimmed(value: f64) -> String {
    let text = format!("{value:.3}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// Lower-case letters and digits, everything else a single dash.
pub(super) fn slug(text: &str) -> String {
    let mut slug = String::with_capacity(text.len());
    for c in text.chars().flat_map(char::to_lowercase) {
        if c.is_alphanumeric() || c == '.' {
            slug.push(c);
        } else if !slug.ends_with('-') {
            slug.push('-');
        }
    }
    slug.trim_matches('-').to_owned()
}
