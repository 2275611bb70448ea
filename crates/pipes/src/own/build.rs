//! From the user's description to a pipe.

use uom::si::f64::Length;
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::kelvin;

use super::check::{between, check_pipe, filled, not_negative, own_derating, positive, slug};
use super::{OwnPipe, OwnPipeError, OwnRating};
use crate::{
    Attested, ClassRating, Derating, DeratingPoint, Dimensions, Material, Pipe, Properties, Rating,
    Sourced, Supply,
};

impl OwnPipe {
    /// The pipe described, or what is impossible about it. Its id is "own/"
    /// with a slug of the designation; its values count as seen in the source
    /// the user names, those left out keep the material's own source and mark.
    ///
    /// # Errors
    /// [`OwnPipeError`] names the first impossible value or combination.
    pub fn build(self) -> Result<Pipe, OwnPipeError> {
        let source = filled("source", &self.source)?.to_owned();
        let designation = filled("designation", &self.designation)?.to_owned();
        let short = match self.short.trim() {
            "" => designation.clone(),
            short => short.to_owned(),
        };
        let walls = self.walls()?;
        let (rating, derating) = self.rated(&source)?;
        let properties = self.properties(&source)?;
        let mut supply = Vec::with_capacity(self.supply.len());
        for (kind, length) in self.supply {
            let metres = positive("supply", length.get::<meter>())?;
            supply.push(Supply {
                kind,
                length: Length::new::<meter>(metres),
                source: source.clone(),
                attested: Attested::Seen,
            });
        }
        let pipe = Pipe {
            id: format!("own/{}", slug(&designation)),
            series: "own".to_owned(),
            standard: self.standard.trim().to_owned(),
            designation,
            short,
            material: self.material,
            outside_diameter: self.outside_diameter,
            wall_min: walls.min,
            wall_max: walls.max,
            wall_nominal: walls.nominal,
            lining: self.lining,
            rating,
            derating,
            roughness_new: properties.roughness_new,
            roughness_aged: properties.roughness_aged,
            modulus_short: properties.modulus_short,
            modulus_long: properties.modulus_long,
            poisson: properties.poisson,
            expansion: properties.expansion,
            density: properties.density,
            supply,
            dimensions: Dimensions {
                source,
                attested: Attested::Seen,
            },
        };
        check_pipe(&pipe)?;
        Ok(pipe)
    }

    fn walls(&self) -> Result<Walls, OwnPipeError> {
        let od = positive("outside_diameter", self.outside_diameter.get::<meter>())?;
        let least = positive("wall_min", self.wall_min.get::<meter>())?;
        let lining = not_negative("lining", self.lining.get::<meter>())?;
        let mut walls = Walls {
            min: self.wall_min,
            max: self.wall_max,
            nominal: None,
        };
        let mut mean = least;
        if let Some(max) = self.wall_max {
            let greatest = positive("wall_max", max.get::<meter>())?;
            if greatest < least {
                return Err(OwnPipeError::WallsCrossed { least, greatest });
            }
            mean = (least + greatest) / 2.0;
        }
        if let OwnRating::Stress(steel) = &self.rating {
            if self.wall_max.is_some() {
                return Err(OwnPipeError::StressNeedsNominalWall);
            }
            let mill = between("mill_tolerance", steel.mill_tolerance.value, 0.0, 1.0)?;
            walls.nominal = Some(self.wall_min);
            walls.min = self.wall_min * (1.0 - mill);
        }
        if mean + lining >= od / 2.0 {
            return Err(OwnPipeError::NoBore {
                wall_and_lining: mean + lining,
                half_diameter: od / 2.0,
            });
        }
        Ok(walls)
    }

    fn rated(&self, source: &str) -> Result<(Rating, Derating), OwnPipeError> {
        let material_rule = self
            .material
            .properties()
            .and_then(|known| known.derating.clone());
        let (rating, fallback) = match &self.rating {
            OwnRating::Class {
                symbol,
                number,
                pressure,
                at,
            } => {
                let class = ClassRating {
                    symbol: filled("rating symbol", symbol)?.to_owned(),
                    number: filled("rating number", number)?.to_owned(),
                    pressure: *pressure,
                    at: *at,
                    source: source.to_owned(),
                    attested: Attested::Seen,
                };
                positive("pressure", pressure.get::<pascal>())?;
                positive("rating temperature", at.get::<kelvin>())?;
                (Rating::Class(class), Some(*at))
            }
            OwnRating::Stress(steel) => {
                if self.material != Material::Steel {
                    return Err(OwnPipeError::StressNeedsSteel {
                        material: self.material,
                    });
                }
                (Rating::Stress(steel.clone()), None)
            }
        };
        let derating = match (&self.derating, material_rule, fallback) {
            (Some(points), _, _) => own_derating(points, source)?,
            (None, Some(rule), _) => rule,
            (None, None, Some(at)) => Derating {
                points: vec![DeratingPoint { temperature: at, factor: 1.0, attested: Attested::Seen }],
                source: "no derating rule is kept for this material: good to the rating's own temperature".to_owned(),
            },
            (None, None, None) => return Err(OwnPipeError::Missing { field: "derating" }),
        };
        Ok((rating, derating))
    }

    fn properties(&self, source: &str) -> Result<Properties, OwnPipeError> {
        let known = self.material.properties();
        let usual = |field: &'static str, of: fn(&Properties) -> &Sourced<f64>| {
            known
                .map(|known| of(known).clone())
                .ok_or(OwnPipeError::Missing { field })
        };
        macro_rules! own {
            ($field:ident, $unit:ty) => {
                match self.$field {
                    Some(value) => {
                        positive(stringify!($field), value.get::<$unit>())?;
                        Sourced::seen(value, source)
                    }
                    None => {
                        known
                            .map(|known| known.$field.clone())
                            .ok_or(OwnPipeError::Missing {
                                field: stringify!($field),
                            })?
                    }
                }
            };
        }
        let poisson = match self.poisson {
            Some(value) => Sourced::seen(between("poisson", value, 0.0, 0.5)?, source),
            None => usual("poisson", |known| &known.poisson)?,
        };
        let properties = Properties {
            roughness_new: own!(roughness_new, meter),
            roughness_aged: own!(roughness_aged, meter),
            modulus_short: own!(modulus_short, pascal),
            modulus_long: own!(modulus_long, pascal),
            poisson,
            expansion: own!(expansion, per_kelvin),
            density: own!(density, kilogram_per_cubic_meter),
            derating: None,
        };
        let short = properties.modulus_short.value.get::<pascal>();
        let long = properties.modulus_long.value.get::<pascal>();
        if long > short {
            return Err(OwnPipeError::ModuliCrossed { short, long });
        }
        Ok(properties)
    }
}

/// The walls of a pipe of the user's own.
struct Walls {
    min: Length,
    max: Option<Length>,
    nominal: Option<Length>,
}
