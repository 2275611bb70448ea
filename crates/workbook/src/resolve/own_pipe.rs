//! A pipe of the user's own, from its entries.

use crate::book::{OwnMaterial, OwnPipeEntry, OwnRating, OwnSizing};
use crate::field::{Field, OwnField};
use crate::figure::{Figure, Gap, Trouble};
use crate::resolve::Reader;
use pipes::{Material, OwnPipe, Pipe, Sourced, SteelJoint, SteelRating, SupplyKind};
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
    let source = if entry.source.trim().is_empty() {
        "the user"
    } else {
        entry.source.trim()
    };
    let diameter = r.needed(Field::Own(
        id,
        match entry.sized {
            OwnSizing::Outside => OwnField::OutsideDiameter,
            OwnSizing::Bore => OwnField::Bore,
        },
    ))?;
    let wall = r.needed(Field::Own(id, OwnField::Wall))?;
    let lining = r.quietly(Field::Own(id, OwnField::Lining), 0.0)?;
    let outside_diameter = match entry.sized {
        OwnSizing::Outside => diameter,
        OwnSizing::Bore => diameter + 2.0 * (wall + lining),
    };
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
        OwnRating::SteelStress => pipes::OwnRating::Stress(Box::new(steel(r, entry, source)?)),
    };
    let mut optional = |own| r.optional(Field::Own(id, own));
    let spec = OwnPipe {
        designation: name(entry),
        short: name(entry),
        standard: String::new(),
        source: source.to_owned(),
        material: material(entry.material),
        outside_diameter: length(outside_diameter),
        wall_min: length(wall),
        wall_max: None,
        lining: length(lining),
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
    let threaded = entry.threaded && entry.rated == OwnRating::SteelStress;
    let depth = if threaded {
        optional(OwnField::Thread)?.map(|depth| Sourced::seen(length(depth), source))
    } else {
        None
    };
    let built = spec.build().and_then(|pipe| {
        if threaded {
            pipe.threaded(depth)
        } else {
            Ok(pipe)
        }
    });
    match built {
        Ok(mut pipe) => {
            pipe.id = format!("own/{id}");
            Ok(pipe)
        }
        Err(why) => r.wrong(Trouble::OwnPipe { id, why }),
    }
}

/// What rates the wall: the catalogue's own figures for the grade, and for
/// the shares of strength, but where the user enters others.
fn steel(r: &mut Reader<'_>, entry: &OwnPipeEntry, source: &str) -> Figure<SteelRating> {
    let catalogue = pipes::catalogue();
    let named = catalogue.steel_rating(entry.grade.trim(), SteelJoint::Plate);
    let strengths_known = named.is_some();
    let known = named.or_else(|| {
        let any = *catalogue.steel_grades().first()?;
        let rating = catalogue.steel_rating(any, SteelJoint::Plate)?;
        Some(SteelRating {
            grade: source.to_owned(),
            ..rating
        })
    });
    let mut steel = known.ok_or(Gap::needs(Field::Own(entry.id, OwnField::Yield)))?;
    let length = Length::new::<meter>;
    let pressure = Pressure::new::<pascal>;
    for (own, slot) in [
        (OwnField::Yield, &mut steel.yield_strength),
        (OwnField::Tensile, &mut steel.tensile_strength),
    ] {
        let field = Field::Own(entry.id, own);
        let entered = if strengths_known {
            r.optional(field)?
        } else {
            Some(r.needed(field)?)
        };
        if let Some(value) = entered {
            *slot = Sourced::seen(pressure(value), source);
        }
    }
    if let Some(share) = entered(r, entry, OwnField::JointFactor)? {
        steel.joint_factor = Sourced::seen(share, source);
    }
    if let Some(depth) = entered(r, entry, OwnField::Corrosion)? {
        steel.corrosion = Sourced::seen(length(depth), source);
    }
    if let Some(share) = entered(r, entry, OwnField::MillTolerance)? {
        steel.mill_tolerance = Sourced::seen(share, source);
    }
    Ok(steel)
}

/// The value where one was entered; none where the preset stands, which is
/// noted and is the catalogue's own.
fn entered(r: &mut Reader<'_>, entry: &OwnPipeEntry, own: OwnField) -> Figure<Option<f64>> {
    let field = Field::Own(entry.id, own);
    let value = r.optional(field)?;
    if value.is_none() {
        r.needed(field)?;
    }
    Ok(value)
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::Book;
    use crate::entry::Entry;
    use crate::reading::DecimalMark;
    use crate::resolve::resolve;
    use pipes::{Pipe, Rating};

    fn steel() -> OwnPipeEntry {
        OwnPipeEntry {
            id: 1,
            name: "plate".to_owned(),
            rated: OwnRating::SteelStress,
            grade: "S235JR".to_owned(),
            wall_m: millimetres("6", OwnField::Wall),
            ..OwnPipeEntry::default()
        }
    }

    fn millimetres(text: &str, own: OwnField) -> Entry {
        Entry::typed(text, "mm", Field::Own(1, own).kind(), DecimalMark::Point)
    }

    fn built(entry: OwnPipeEntry) -> Figure<Pipe> {
        let mut book = Book::new("test");
        book.own_pipes.push(entry);
        book.line.stretches[0].pipe = Some("own/1".to_owned());
        resolve(&book).stretches[0]
            .pipe
            .clone()
            .map(|pipe| (*pipe).clone())
    }

    fn mm(length: Length) -> f64 {
        length.get::<uom::si::length::millimeter>()
    }

    #[test]
    fn plate_is_ordered_by_its_bore_and_rated_by_its_grade() {
        let pipe = built(OwnPipeEntry {
            sized: OwnSizing::Bore,
            bore_m: millimetres("500", OwnField::Bore),
            ..steel()
        })
        .unwrap();
        assert!((mm(pipe.bore()) - 500.0).abs() < 1e-9);
        assert!((mm(pipe.outside_diameter) - 512.0).abs() < 1e-9);
        let Rating::Stress(rating) = &pipe.rating else {
            panic!("not by stress");
        };
        // The catalogue's strengths and joint factor stand, with their source.
        assert!((rating.yield_strength.value.get::<pascal>() - 225e6).abs() < 1.0);
        assert!((rating.joint_factor.value - 0.85).abs() < 1e-12);
        assert!(rating.normal.attested.is_seen());
    }

    #[test]
    fn a_lining_narrows_the_bore() {
        let pipe = built(OwnPipeEntry {
            outside_diameter_m: millimetres("500", OwnField::OutsideDiameter),
            lining_m: millimetres("4", OwnField::Lining),
            ..steel()
        })
        .unwrap();
        assert!((mm(pipe.bore()) - 480.0).abs() < 1e-9);
    }

    #[test]
    fn a_thread_weakens_the_pipe() {
        let plain = OwnPipeEntry {
            outside_diameter_m: millimetres("114.3", OwnField::OutsideDiameter),
            ..steel()
        };
        let at = ThermodynamicTemperature::new::<degree_celsius>(20.0);
        let allowed = |entry: OwnPipeEntry| built(entry).unwrap().allowable(at).unwrap();
        let usual = OwnPipeEntry {
            threaded: true,
            ..plain.clone()
        };
        let entered = OwnPipeEntry {
            thread_m: millimetres("1", OwnField::Thread),
            ..usual.clone()
        };
        let (plain, usual, entered) = (allowed(plain), allowed(usual), allowed(entered));
        assert!(usual.pressure < entered.pressure && entered.pressure < plain.pressure);
        // The usual depth is from memory, the user's own is not.
        assert!(!usual.attested.is_seen() && entered.attested.is_seen());
        // No thread is usual over 170 mm.
        let wide = built(OwnPipeEntry {
            outside_diameter_m: millimetres("300", OwnField::OutsideDiameter),
            threaded: true,
            ..steel()
        });
        assert!(matches!(
            wide,
            Err(Gap::Wrong(Trouble::OwnPipe { id: 1, .. }))
        ));
    }

    #[test]
    fn without_a_grade_the_strengths_are_asked_for() {
        let pipe = built(OwnPipeEntry {
            grade: String::new(),
            outside_diameter_m: millimetres("114.3", OwnField::OutsideDiameter),
            ..steel()
        });
        assert_eq!(pipe.err(), Some(Gap::needs(Field::Own(1, OwnField::Yield))));
    }
}
