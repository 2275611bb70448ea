use proptest::prelude::*;
use statics::WallError;
use uom::si::length::{meter, millimeter};
use uom::si::pressure::{bar, megapascal};
use uom::si::thermodynamic_temperature::{degree_celsius, kelvin};

use super::*;
use crate::{Attested, Rating, RatingError, Sourced, SteelJoint, catalogue};

fn mm(value: f64) -> Length {
    Length::new::<millimeter>(value)
}

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(value)
}

fn class(pressure: f64) -> OwnRating {
    OwnRating::Class {
        symbol: "PN".to_owned(),
        number: "10".to_owned(),
        pressure: Pressure::new::<bar>(pressure),
        at: celsius(20.0),
    }
}

fn grp() -> OwnPipe {
    OwnPipe {
        designation: "GRP DN 300 PN 10".to_owned(),
        source: "supplier's sheet (invented)".to_owned(),
        material: Material::Grp,
        outside_diameter: mm(324.0),
        wall_min: mm(6.0),
        wall_max: Some(mm(7.0)),
        rating: class(10.0),
        ..OwnPipe::default()
    }
}

fn steel() -> SteelRating {
    catalogue()
        .steel_rating("S235JR", SteelJoint::Plate)
        .unwrap()
}

#[test]
fn a_grp_pipe_of_the_users_own() {
    let pipe = grp().build().unwrap();
    assert_eq!(pipe.id, "own/grp-dn-300-pn-10");
    assert_eq!(pipe.short, pipe.designation);
    assert!((pipe.bore().get::<millimeter>() - 311.0).abs() < 1e-9);
    // The user's figures count as seen; what the material brings keeps its mark.
    let allowed = pipe.allowable(celsius(20.0)).unwrap();
    assert_eq!(allowed.attested, Attested::Seen);
    assert!((allowed.pressure.get::<bar>() - 10.0).abs() < 1e-9);
    assert_eq!(pipe.modulus_short.attested, Attested::FromMemory);
    // No derating rule for GRP: nothing is allowed above the rating's temperature.
    assert!(matches!(
        pipe.allowable(celsius(20.1)),
        Err(RatingError::TooHot { .. })
    ));
    assert_eq!(
        pipe.poisson_for_collapse().value.to_bits(),
        0.0_f64.to_bits()
    );
}

#[test]
fn every_impossible_description_is_named() {
    type Change = fn(&mut OwnPipe);
    type Named = fn(&OwnPipeError) -> bool;
    let cases: Vec<(&str, Change, Named)> = vec![
        (
            "blank name",
            |p| p.designation = " ".to_owned(),
            |e| {
                *e == OwnPipeError::Blank {
                    field: "designation",
                }
            },
        ),
        (
            "no source",
            |p| p.source.clear(),
            |e| *e == OwnPipeError::Blank { field: "source" },
        ),
        (
            "no diameter",
            |p| p.outside_diameter = mm(0.0),
            |e| {
                matches!(
                    e,
                    OwnPipeError::NotPositive {
                        field: "outside_diameter",
                        ..
                    }
                )
            },
        ),
        (
            "NaN wall",
            |p| p.wall_min = mm(f64::NAN),
            |e| *e == OwnPipeError::NotFinite { field: "wall_min" },
        ),
        (
            "negative lining",
            |p| p.lining = mm(-1.0),
            |e| {
                matches!(
                    e,
                    OwnPipeError::NotPositive {
                        field: "lining",
                        ..
                    }
                )
            },
        ),
        (
            "walls crossed",
            |p| p.wall_max = Some(mm(5.0)),
            |e| matches!(e, OwnPipeError::WallsCrossed { .. }),
        ),
        (
            "wall over half the diameter",
            |p| p.wall_max = Some(mm(330.0)),
            |e| matches!(e, OwnPipeError::NoBore { .. }),
        ),
        (
            "lining fills the bore",
            |p| p.lining = mm(156.0),
            |e| matches!(e, OwnPipeError::NoBore { .. }),
        ),
        (
            "no pressure",
            |p| p.rating = class(0.0),
            |e| {
                matches!(
                    e,
                    OwnPipeError::NotPositive {
                        field: "pressure",
                        ..
                    }
                )
            },
        ),
        (
            "blank class",
            |p| {
                p.rating = OwnRating::Class {
                    symbol: String::new(),
                    number: "10".to_owned(),
                    pressure: Pressure::new::<bar>(10.0),
                    at: celsius(20.0),
                }
            },
            |e| {
                *e == OwnPipeError::Blank {
                    field: "rating symbol",
                }
            },
        ),
        (
            "stress on GRP",
            |p| p.rating = OwnRating::Stress(Box::new(steel())),
            |e| matches!(e, OwnPipeError::StressNeedsNominalWall),
        ),
        (
            "stress on GRP, nominal wall",
            |p| {
                p.wall_max = None;
                p.rating = OwnRating::Stress(Box::new(steel()));
            },
            |e| {
                *e == OwnPipeError::StressNeedsSteel {
                    material: Material::Grp,
                }
            },
        ),
        (
            "Poisson ratio",
            |p| p.poisson = Some(0.6),
            |e| {
                matches!(
                    e,
                    OwnPipeError::OutOfRange {
                        field: "poisson",
                        ..
                    }
                )
            },
        ),
        (
            "moduli",
            |p| p.modulus_long = Some(Pressure::new::<megapascal>(30_000.0)),
            |e| matches!(e, OwnPipeError::ModuliCrossed { .. }),
        ),
        (
            "rough as the bore",
            |p| p.roughness_aged = Some(mm(100.0)),
            |e| {
                matches!(
                    e,
                    OwnPipeError::OutOfRange {
                        field: "roughness_aged",
                        ..
                    }
                )
            },
        ),
        (
            "no derating point",
            |p| p.derating = Some(Vec::new()),
            |e| *e == OwnPipeError::DeratingEmpty,
        ),
        (
            "factor over one",
            |p| p.derating = Some(vec![(celsius(20.0), 1.1)]),
            |e| {
                matches!(
                    e,
                    OwnPipeError::OutOfRange {
                        field: "derating factor",
                        ..
                    }
                )
            },
        ),
        (
            "factors rise",
            |p| p.derating = Some(vec![(celsius(20.0), 0.8), (celsius(30.0), 0.9)]),
            |e| *e == OwnPipeError::DeratingDisordered { index: 1 },
        ),
        (
            "temperatures fall",
            |p| p.derating = Some(vec![(celsius(20.0), 1.0), (celsius(20.0), 0.9)]),
            |e| *e == OwnPipeError::DeratingDisordered { index: 1 },
        ),
        (
            "no length",
            |p| p.supply = vec![(SupplyKind::Bar, mm(0.0))],
            |e| {
                matches!(
                    e,
                    OwnPipeError::NotPositive {
                        field: "supply",
                        ..
                    }
                )
            },
        ),
        (
            "unknown material",
            |p| p.material = Material::Other,
            |e| matches!(e, OwnPipeError::Missing { .. }),
        ),
    ];
    for (name, change, named) in cases {
        let mut own = grp();
        change(&mut own);
        let error = own.build().expect_err(name);
        assert!(named(&error), "{name}: {error:?}");
        assert!(!error.to_string().is_empty());
    }
    assert!(OwnPipe::default().build().is_err());
}

#[test]
fn any_other_material_with_all_its_figures() {
    let own = OwnPipe {
        material: Material::Other,
        derating: Some(vec![(celsius(20.0), 1.0), (celsius(40.0), 0.5)]),
        roughness_new: Some(mm(0.01)),
        roughness_aged: Some(mm(0.1)),
        modulus_short: Some(Pressure::new::<megapascal>(900.0)),
        modulus_long: Some(Pressure::new::<megapascal>(300.0)),
        poisson: Some(0.4),
        expansion: Some(TemperatureCoefficient::new::<
            uom::si::temperature_coefficient::per_kelvin,
        >(1e-4)),
        density: Some(MassDensity::new::<
            uom::si::mass_density::kilogram_per_cubic_meter,
        >(1000.0)),
        supply: vec![(SupplyKind::Coil, Length::new::<meter>(100.0))],
        ..grp()
    };
    let pipe = own.build().unwrap();
    let allowed = pipe.allowable(celsius(30.0)).unwrap();
    assert!((allowed.pressure.get::<bar>() - 7.5).abs() < 1e-9);
    assert_eq!(pipe.supply.len(), 1);
    assert!((pipe.poisson_for_collapse().value - 0.4).abs() < f64::EPSILON);
}

#[test]
fn plate_threads_and_grades() {
    let pipe = plate_steel(mm(500.0), mm(6.0), steel()).unwrap();
    assert_eq!(pipe.id, "plate-steel/500x6");
    assert!((pipe.bore().get::<millimeter>() - 500.0).abs() < 1e-9);
    assert!((pipe.wall_min.get::<millimeter>() - 5.25).abs() < 1e-9);
    assert!((pipe.wall_against_collapse().get::<millimeter>() - 4.25).abs() < 1e-9);
    // 2 S E t / D by hand: S = 360/3 = 120 MPa, E 0.85, t = 6 x 0.875 - 1 = 4.25 mm, D 512 mm.
    let allowed = pipe.allowable(celsius(15.0)).unwrap();
    assert!(
        (allowed.pressure.get::<megapascal>() - 2.0 * 120.0 * 0.85 * 4.25 / 512.0).abs() < 1e-9
    );
    assert_eq!(allowed.attested, Attested::Seen);

    let tube = catalogue().find("steel-asme-b36-10/2/40").unwrap();
    let cut = tube.threaded(None).unwrap();
    assert!(
        cut.allowable(celsius(15.0)).unwrap().pressure
            < tube.allowable(celsius(15.0)).unwrap().pressure
    );
    assert_eq!(
        cut.allowable(celsius(15.0)).unwrap().attested,
        Attested::FromMemory
    );
    assert_eq!(cut.bore(), tube.bore());
    let deep = Sourced::seen(mm(3.9), "drawing");
    assert!(matches!(
        tube.threaded(Some(deep)),
        Err(OwnPipeError::Wall(WallError::NothingLeft { .. }))
    ));
    assert!(
        catalogue()
            .find("pe100-iso4427/200/sdr17")
            .unwrap()
            .threaded(None)
            .is_err()
    );

    let mut other = steel();
    other.corrosion.value = mm(0.0);
    let thicker = tube.with_steel(other.clone()).unwrap();
    assert!(thicker.wall_against_collapse() > tube.wall_against_collapse());
    other.mill_tolerance.value = 1.5;
    assert!(matches!(
        tube.with_steel(other),
        Err(OwnPipeError::OutOfRange { .. })
    ));
    let Rating::Stress(rating) = &thicker.rating else {
        panic!("steel is rated by stress")
    };
    assert_eq!(rating.grade, "S235JR");
}

proptest! {
    #[test]
    fn never_panics_and_never_a_pipe_without_bore(
        od in any::<f64>(), wall in any::<f64>(), max in proptest::option::of(any::<f64>()),
        lining in any::<f64>(), p in any::<f64>(), at in any::<f64>(), nu in any::<f64>(),
    ) {
        let own = OwnPipe {
            outside_diameter: Length::new::<meter>(od),
            wall_min: Length::new::<meter>(wall),
            wall_max: max.map(Length::new::<meter>),
            lining: Length::new::<meter>(lining),
            poisson: Some(nu),
            rating: OwnRating::Class {
                symbol: "PN".to_owned(),
                number: "x".to_owned(),
                pressure: Pressure::new::<bar>(p),
                at: ThermodynamicTemperature::new::<kelvin>(at),
            },
            ..grp()
        };
        if let Ok(pipe) = own.build() {
            prop_assert!(pipe.bore().get::<meter>() > 0.0);
            prop_assert!(pipe.wall_mean() >= pipe.wall_min);
        }
    }

    #[test]
    fn possible_pipes_are_built(od in 20.0..2000.0_f64, share in 0.005..0.4_f64, p in 0.1..100.0_f64) {
        let own = OwnPipe {
            outside_diameter: mm(od),
            wall_min: mm(od * share),
            wall_max: None,
            rating: class(p),
            roughness_new: Some(mm(0.001)),
            roughness_aged: Some(mm(0.01)),
            ..grp()
        };
        let pipe = own.build().unwrap();
        prop_assert!((pipe.bore().get::<millimeter>() - od * (1.0 - 2.0 * share)).abs() < 1e-6);
    }
}
