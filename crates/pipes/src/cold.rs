//! How much stiffer a cold wall is under a short load.

use crate::Material;
use uom::si::f64::ThermodynamicTemperature;
use uom::si::thermodynamic_temperature::degree_celsius;

/// Temperature the moduli of the catalogue stand at, degC.
const REFERENCE_DEGC: f64 = 23.0;

/// Polyethylene: wall temperature in degC, and the modulus over that at 23
/// degC. The polyethylene pipe trade's handbook, multipliers of the apparent
/// modulus by temperature (degF rounded to degC), from memory.
const POLYETHYLENE: [(f64, f64); 8] = [
    (-40.0, 2.8),
    (-29.0, 2.54),
    (-18.0, 2.18),
    (-7.0, 1.81),
    (4.4, 1.49),
    (10.0, 1.32),
    (15.6, 1.18),
    (REFERENCE_DEGC, 1.0),
];

/// Polyvinyl chloride: gain of modulus per kelvin below 23 degC, from memory.
const VINYL_PER_KELVIN: f64 = 0.005;

/// Source of the factors, said beside every figure that rests on them.
pub const SOURCE: &str =
    "plastics stiffen in the cold: trade handbooks of polyethylene and PVC pipe (from memory)";

impl Material {
    /// Short-term modulus at a wall temperature over that of the catalogue,
    /// from 1 up: a wall warmer than 23 degC counts as one of 23 degC, as a
    /// stiffer wall makes the higher surge. Metals and glass-fibre pipe do not
    /// change.
    ///
    /// # Validity
    /// Down to -40 degC; below it the factor of -40 degC.
    #[must_use]
    pub fn cold_stiffening(self, wall: ThermodynamicTemperature) -> f64 {
        let at = wall.get::<degree_celsius>();
        match self {
            Material::Pe100 | Material::Pe4710 => between(&POLYETHYLENE, at),
            Material::PvcU | Material::PvcO => {
                let below = (REFERENCE_DEGC - at).clamp(0.0, REFERENCE_DEGC + 40.0);
                1.0 + VINYL_PER_KELVIN * below
            }
            Material::Steel | Material::DuctileIron | Material::Grp | Material::Other => 1.0,
        }
    }
}

/// Straight between rows, the ends held.
fn between(rows: &[(f64, f64)], x: f64) -> f64 {
    let after = rows.partition_point(|row| row.0 < x);
    match (
        after.checked_sub(1).and_then(|i| rows.get(i)),
        rows.get(after),
    ) {
        (Some(a), Some(b)) => a.1 + (b.1 - a.1) * ((x - a.0) / (b.0 - a.0)),
        (None, Some(only)) | (Some(only), None) => only.1,
        (None, None) => 1.0,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn at(material: Material, degc: f64) -> f64 {
        material.cold_stiffening(ThermodynamicTemperature::new::<degree_celsius>(degc))
    }

    #[test]
    fn a_colder_wall_is_never_softer() {
        for material in [
            Material::Pe100,
            Material::PvcU,
            Material::Steel,
            Material::Grp,
        ] {
            let mut last = f64::INFINITY;
            for degc in -60..=60 {
                let now = at(material, f64::from(degc));
                assert!(
                    now <= last && (1.0..3.0).contains(&now),
                    "{material:?} {degc}"
                );
                last = now;
            }
            assert!((at(material, 23.0) - 1.0).abs() < 1e-12);
        }
        assert!((at(Material::Pe100, 4.4) - 1.49).abs() < 1e-12);
        assert!((at(Material::Steel, -20.0) - 1.0).abs() < 1e-12);
    }
}
