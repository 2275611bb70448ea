//! A pipe of the user's own, from its entries.

use crate::book::{OwnMaterial, OwnPipeEntry, OwnRating};
use crate::field::{Field, OwnField};
use crate::figure::{Figure, Trouble};
use crate::resolve::Reader;
use pipes::{Material, OwnPipe, Pipe, Sourced, SteelRating, SupplyKind};
use statics::steel::StressShares;
use uom::si::f64::{Length, Pressure, ThermodynamicTemperature};
use uom::si::length::meter;
use uom::si::pressure::pascal;
use uom::si::thermodynamic_temperature::degree_celsius;

/// The temperature a rating stands at where none is entered, degC: the
/// reference of PN classes.
const REFERENCE_DEGC: f64 = 20.0;

pub(crate) fn build(r: &mut Reader<'_>, entry: &OwnPipeEntry) -> Figure<Pipe> {
    let id = entry.id;
    let length = Length::new::<meter>;
    let pressure = Pressure::new::<pascal>;
    let mut ask = |own| r.needed(Field::Own(id, own));
    let outside_diameter = length(ask(OwnField::OutsideDiameter)?);
    let wall_min = length(ask(OwnField::Wall)?);
    let material = material(entry.material);
    let source = if entry.source.trim().is_empty() {
        "the user"
    } else {
        entry.source.trim()
    }
    .to_owned();
    let rating = match entry.rated {
        OwnRating::Pressure => {
            let rated = r.needed(Field::Own(id, OwnField::Rating))?;
            let at = r.quietly(Field::Own(id, OwnField::RatingTemperature), REFERENCE_DEGC)?;
            pipes::OwnRating::Class {
                symbol: "rated".to_owned(),
                number: format!("{} bar", rated / 1e5),
                pressure: pressure(rated),
                at: ThermodynamicTemperature::new::<degree_celsius>(at),
            }
        }
        OwnRating::SteelStress => {
            let mut steel = steel_rating(&source);
            let mut ask = |own| r.needed(Field::Own(id, own));
            steel.yield_strength = Sourced::seen(pressure(ask(OwnField::Yield)?), &*source);
            steel.tensile_strength = Sourced::seen(pressure(ask(OwnField::Tensile)?), &*source);
            steel.joint_factor = Sourced::seen(ask(OwnField::JointFactor)?, &*source);
            steel.corrosion = Sourced::seen(length(ask(OwnField::Corrosion)?), &*source);
            steel.mill_tolerance = Sourced::seen(ask(OwnField::MillTolerance)?, &*source);
            pipes::OwnRating::Stress(Box::new(steel))
        }
    };
    let mut optional = |own| r.optional(Field::Own(id, own));
    let spec = OwnPipe {
        designation: name(entry),
        short: name(entry),
        standard: String::new(),
        source: source.clone(),
        material,
        outside_diameter,
        wall_min,
        wall_max: None,
        lining: length(0.0),
        rating,
        derating: None,
        roughness_new: optional(OwnField::RoughnessNew)?.map(length),
        roughness_aged: optional(OwnField::RoughnessAged)?.map(length),
        modulus_short: optional(OwnField::ModulusShort)?.map(pressure),
        modulus_long: optional(OwnField::ModulusLong)?.map(pressure),
        poisson: None,
        expansion: None,
        density: None,
        supply: optional(OwnField::SupplyLength)?
            .map(|l| (SupplyKind::Bar, length(l)))
            .into_iter()
            .collect(),
    };
    match spec.build() {
        Ok(mut pipe) => {
            pipe.id = format!("own/{id}");
            Ok(pipe)
        }
        Err(why) => r.wrong(Trouble::OwnPipe { id, why }),
    }
}

fn name(entry: &OwnPipeEntry) -> String {
    let name = entry.name.trim();
    if name.is_empty() {
        format!("own pipe {}", entry.id)
    } else {
        name.to_owned()
    }
}

fn material(own: OwnMaterial) -> Material {
    match own {
        OwnMaterial::Pe => Material::Pe100,
        OwnMaterial::Pvc => Material::PvcU,
        OwnMaterial::Steel => Material::Steel,
        OwnMaterial::DuctileIron => Material::DuctileIron,
        OwnMaterial::Grp => Material::Grp,
        OwnMaterial::Other => Material::Other,
    }
}

/// A steel rating whose strengths the user's entries then replace.
fn steel_rating(source: &str) -> SteelRating {
    let share = |of_yield, of_tensile| {
        Sourced::from_memory(
            StressShares {
                of_yield,
                of_tensile: Some(of_tensile),
            },
            "common practice for steel penstocks, from memory",
        )
    };
    SteelRating {
        grade: source.to_owned(),
        yield_strength: Sourced::seen(Pressure::new::<pascal>(0.0), source),
        tensile_strength: Sourced::seen(Pressure::new::<pascal>(0.0), source),
        normal: share(2.0 / 3.0, 1.0 / 3.0),
        transient: share(0.8, 0.5),
        test: share(0.8, 0.5),
        joint_factor: Sourced::seen(1.0, source),
        corrosion: Sourced::seen(Length::new::<meter>(0.0), source),
        mill_tolerance: Sourced::seen(0.0, source),
        thread_depth: None,
    }
}
