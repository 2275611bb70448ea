//! A book's own copy of a pipe, so that a book opened years later is figured
//! with the pipe that was ordered.
//!
//! The copy holds everything a [`Pipe`] does, in SI with the unit in the field
//! name. When the catalogue's edition differs, the difference is shown and
//! the copy stands: [`differs`].

use pipes::{
    Attested, ClassRating, Derating, DeratingPoint, Dimensions, Material, Pipe, Rating, Sourced,
    SteelRating, Supply, SupplyKind,
};
use schemars::JsonSchema;
use serde::{Deserialize, Serialize};
use statics::steel::StressShares;
use uom::si::f64::{
    Length, MassDensity, Pressure, TemperatureCoefficient, ThermodynamicTemperature,
};
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;

/// A value with where it came from.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Cited {
    /// The value, in the base unit the field's name ends in.
    pub value: f64,
    /// Its source.
    pub source: String,
    /// Whether that source was seen.
    pub seen: bool,
}

/// A point of a derating table.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct DeratingPointCopy {
    /// Wall temperature, degC.
    pub wall_degc: f64,
    /// Share of the rated pressure allowed.
    pub factor: f64,
    /// Whether the point was seen.
    pub seen: bool,
}

/// How the pipe is rated.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, rename_all = "snake_case", tag = "by")]
pub enum RatingCopy {
    /// By a pressure class.
    Class {
        /// The standard's symbol.
        symbol: String,
        /// The number printed with it.
        number: String,
        /// The pressure it stands for, Pa.
        pressure_pa: f64,
        /// The temperature it is given at, degC.
        at_degc: f64,
        /// Source.
        source: String,
        /// Whether that was seen.
        seen: bool,
    },
    /// By the stress in a steel wall.
    Stress(Box<StressCopy>),
}

/// What rates a steel wall by stress.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StressCopy {
    /// Grade.
    pub grade: String,
    /// Yield strength, Pa.
    pub yield_pa: Cited,
    /// Tensile strength, Pa.
    pub tensile_pa: Cited,
    /// Shares of strength for lasting pressure.
    pub normal: SharesCopy,
    /// Shares of strength in surge.
    pub transient: SharesCopy,
    /// Shares of strength in the site test.
    pub test: SharesCopy,
    /// Joint factor.
    pub joint_share: Cited,
    /// Corrosion allowance, m.
    pub corrosion_m: Cited,
    /// Mill tolerance, a share of the wall.
    pub mill_tolerance_share: Cited,
    /// Depth of thread, m.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub thread_depth_m: Option<Cited>,
}

/// Shares of a steel's strength.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SharesCopy {
    /// Of the yield strength.
    pub of_yield: f64,
    /// Of the tensile strength.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub of_tensile: Option<f64>,
    /// Source.
    pub source: String,
    /// Whether that was seen.
    pub seen: bool,
}

/// A length in which the pipe is sold.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct SupplyCopy {
    /// In coils, not straight lengths.
    pub coil: bool,
    /// Length of one, m.
    pub length_m: f64,
    /// Source.
    pub source: String,
    /// Whether that was seen.
    pub seen: bool,
}

/// A book's own copy of a pipe.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct PipeCopy {
    /// Its id in the catalogue.
    pub id: String,
    /// Its series in the catalogue.
    pub series: String,
    /// Its standard.
    pub standard: String,
    /// Its designation by that standard.
    pub designation: String,
    /// Its label in tables.
    pub short: String,
    /// Its material.
    pub material: String,
    /// Outside diameter, m.
    pub outside_diameter_m: f64,
    /// Least wall, m.
    pub wall_min_m: f64,
    /// Greatest wall, m.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wall_max_m: Option<f64>,
    /// Wall it is made about, m.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub wall_nominal_m: Option<f64>,
    /// Lining, m.
    pub lining_m: f64,
    /// Where diameter and walls come from.
    pub dimensions_source: String,
    /// Whether that was seen.
    pub dimensions_seen: bool,
    /// Rating.
    pub rating: RatingCopy,
    /// Source of the derating table.
    pub derating_source: String,
    /// The derating table.
    pub derating: Vec<DeratingPointCopy>,
    /// Roughness new, m.
    pub roughness_new_m: Cited,
    /// Roughness aged, m.
    pub roughness_aged_m: Cited,
    /// Short-term modulus, Pa.
    pub modulus_short_pa: Cited,
    /// Long-term modulus, Pa.
    pub modulus_long_pa: Cited,
    /// Poisson ratio.
    pub poisson: Cited,
    /// Thermal expansion, 1/K.
    pub expansion_per_k: Cited,
    /// Density, kg/m³.
    pub density_kg_m3: Cited,
    /// Lengths in which it is sold.
    pub supply: Vec<SupplyCopy>,
}

/// Why a copy in a file is not a pipe.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum PipeCopyError {
    /// No material of this name.
    Material(String),
    /// A figure that cannot be.
    Value {
        /// The field's name in the file.
        field: &'static str,
        /// The value there.
        value: f64,
    },
    /// The walls leave no bore.
    NoBore,
    /// The derating table is empty, or its points are out of order.
    Derating,
}

fn seen(attested: Attested) -> bool {
    attested.is_seen()
}

fn attested(seen: bool) -> Attested {
    if seen {
        Attested::Seen
    } else {
        Attested::FromMemory
    }
}

fn cite<T: Copy>(sourced: &Sourced<T>, get: impl Fn(T) -> f64) -> Cited {
    Cited {
        value: get(sourced.value),
        source: sourced.source.clone(),
        seen: seen(sourced.attested),
    }
}

fn uncite<T>(cited: &Cited, make: impl Fn(f64) -> T) -> Sourced<T> {
    Sourced {
        value: make(cited.value),
        source: cited.source.clone(),
        attested: attested(cited.seen),
    }
}

fn metres(length: Length) -> f64 {
    length.get::<meter>()
}

fn length(m: f64) -> Length {
    Length::new::<meter>(m)
}

fn pressure(pa: f64) -> Pressure {
    Pressure::new::<pascal>(pa)
}

fn celsius(degc: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(degc)
}

fn shares(s: &Sourced<StressShares>) -> SharesCopy {
    SharesCopy {
        of_yield: s.value.of_yield,
        of_tensile: s.value.of_tensile,
        source: s.source.clone(),
        seen: seen(s.attested),
    }
}

fn unshares(s: &SharesCopy) -> Sourced<StressShares> {
    Sourced {
        value: StressShares {
            of_yield: s.of_yield,
            of_tensile: s.of_tensile,
        },
        source: s.source.clone(),
        attested: attested(s.seen),
    }
}

impl PipeCopy {
    /// The copy of a pipe.
    #[must_use]
    pub fn of(pipe: &Pipe) -> PipeCopy {
        let pa = |p: Pressure| p.get::<pascal>();
        let rating = match &pipe.rating {
            Rating::Class(c) => RatingCopy::Class {
                symbol: c.symbol.clone(),
                number: c.number.clone(),
                pressure_pa: pa(c.pressure),
                at_degc: c.at.get::<degree_celsius>(),
                source: c.source.clone(),
                seen: seen(c.attested),
            },
            Rating::Stress(s) => RatingCopy::Stress(Box::new(StressCopy {
                grade: s.grade.clone(),
                yield_pa: cite(&s.yield_strength, pa),
                tensile_pa: cite(&s.tensile_strength, pa),
                normal: shares(&s.normal),
                transient: shares(&s.transient),
                test: shares(&s.test),
                joint_share: cite(&s.joint_factor, |x| x),
                corrosion_m: cite(&s.corrosion, metres),
                mill_tolerance_share: cite(&s.mill_tolerance, |x| x),
                thread_depth_m: s.thread_depth.as_ref().map(|t| cite(t, metres)),
            })),
        };
        PipeCopy {
            id: pipe.id.clone(),
            series: pipe.series.clone(),
            standard: pipe.standard.clone(),
            designation: pipe.designation.clone(),
            short: pipe.short.clone(),
            material: pipe.material.slug().to_owned(),
            outside_diameter_m: metres(pipe.outside_diameter),
            wall_min_m: metres(pipe.wall_min),
            wall_max_m: pipe.wall_max.map(metres),
            wall_nominal_m: pipe.wall_nominal.map(metres),
            lining_m: metres(pipe.lining),
            dimensions_source: pipe.dimensions.source.clone(),
            dimensions_seen: seen(pipe.dimensions.attested),
            rating,
            derating_source: pipe.derating.source.clone(),
            derating: pipe
                .derating
                .points
                .iter()
                .map(|p| DeratingPointCopy {
                    wall_degc: p.temperature.get::<degree_celsius>(),
                    factor: p.factor,
                    seen: seen(p.attested),
                })
                .collect(),
            roughness_new_m: cite(&pipe.roughness_new, metres),
            roughness_aged_m: cite(&pipe.roughness_aged, metres),
            modulus_short_pa: cite(&pipe.modulus_short, pa),
            modulus_long_pa: cite(&pipe.modulus_long, pa),
            poisson: cite(&pipe.poisson, |x| x),
            expansion_per_k: cite(&pipe.expansion, |x| x.get::<per_kelvin>()),
            density_kg_m3: cite(&pipe.density, |x| x.get::<kilogram_per_cubic_meter>()),
            supply: pipe
                .supply
                .iter()
                .map(|s| SupplyCopy {
                    coil: s.kind == SupplyKind::Coil,
                    length_m: metres(s.length),
                    source: s.source.clone(),
                    seen: seen(s.attested),
                })
                .collect(),
        }
    }

    /// The pipe this is a copy of.
    ///
    /// # Errors
    /// [`PipeCopyError`], naming the figure, where the file holds one that no
    /// pipe can have.
    pub fn pipe(&self) -> Result<Pipe, PipeCopyError> {
        self.check()?;
        let material = Material::from_slug(&self.material)
            .ok_or_else(|| PipeCopyError::Material(self.material.clone()))?;
        let rating = match &self.rating {
            RatingCopy::Class {
                symbol,
                number,
                pressure_pa,
                at_degc,
                source,
                seen,
            } => Rating::Class(ClassRating {
                symbol: symbol.clone(),
                number: number.clone(),
                pressure: pressure(*pressure_pa),
                at: celsius(*at_degc),
                source: source.clone(),
                attested: attested(*seen),
            }),
            RatingCopy::Stress(s) => Rating::Stress(Box::new(SteelRating {
                grade: s.grade.clone(),
                yield_strength: uncite(&s.yield_pa, pressure),
                tensile_strength: uncite(&s.tensile_pa, pressure),
                normal: unshares(&s.normal),
                transient: unshares(&s.transient),
                test: unshares(&s.test),
                joint_factor: uncite(&s.joint_share, |x| x),
                corrosion: uncite(&s.corrosion_m, length),
                mill_tolerance: uncite(&s.mill_tolerance_share, |x| x),
                thread_depth: s.thread_depth_m.as_ref().map(|t| uncite(t, length)),
            })),
        };
        let pipe = Pipe {
            id: self.id.clone(),
            series: self.series.clone(),
            standard: self.standard.clone(),
            designation: self.designation.clone(),
            short: self.short.clone(),
            material,
            outside_diameter: length(self.outside_diameter_m),
            wall_min: length(self.wall_min_m),
            wall_max: self.wall_max_m.map(length),
            wall_nominal: self.wall_nominal_m.map(length),
            lining: length(self.lining_m),
            rating,
            derating: Derating {
                points: self
                    .derating
                    .iter()
                    .map(|p| DeratingPoint {
                        temperature: celsius(p.wall_degc),
                        factor: p.factor,
                        attested: attested(p.seen),
                    })
                    .collect(),
                source: self.derating_source.clone(),
            },
            roughness_new: uncite(&self.roughness_new_m, length),
            roughness_aged: uncite(&self.roughness_aged_m, length),
            modulus_short: uncite(&self.modulus_short_pa, pressure),
            modulus_long: uncite(&self.modulus_long_pa, pressure),
            poisson: uncite(&self.poisson, |x| x),
            expansion: uncite(&self.expansion_per_k, |x| {
                TemperatureCoefficient::new::<per_kelvin>(x)
            }),
            density: uncite(&self.density_kg_m3, |x| {
                MassDensity::new::<kilogram_per_cubic_meter>(x)
            }),
            supply: self
                .supply
                .iter()
                .map(|s| Supply {
                    kind: if s.coil {
                        SupplyKind::Coil
                    } else {
                        SupplyKind::Bar
                    },
                    length: length(s.length_m),
                    source: s.source.clone(),
                    attested: attested(s.seen),
                })
                .collect(),
            dimensions: Dimensions {
                source: self.dimensions_source.clone(),
                attested: attested(self.dimensions_seen),
            },
        };
        if metres(pipe.bore()) <= 0.0 {
            return Err(PipeCopyError::NoBore);
        }
        Ok(pipe)
    }

    /// Refuses figures no pipe can have, so that a file cannot bring one in.
    fn check(&self) -> Result<(), PipeCopyError> {
        let within = |field, value: f64, least: f64, most: f64| {
            if (least..=most).contains(&value) {
                Ok(())
            } else {
                Err(PipeCopyError::Value { field, value })
            }
        };
        within("outside_diameter_m", self.outside_diameter_m, 0.001, 10.0)?;
        within("wall_min_m", self.wall_min_m, 1e-5, 1.0)?;
        within(
            "wall_max_m",
            self.wall_max_m.unwrap_or(self.wall_min_m),
            self.wall_min_m,
            1.0,
        )?;
        within(
            "wall_nominal_m",
            self.wall_nominal_m.unwrap_or(self.wall_min_m),
            1e-5,
            1.0,
        )?;
        within("lining_m", self.lining_m, 0.0, 1.0)?;
        within("roughness_new_m", self.roughness_new_m.value, 0.0, 0.1)?;
        within("roughness_aged_m", self.roughness_aged_m.value, 0.0, 0.1)?;
        within("modulus_short_pa", self.modulus_short_pa.value, 1e6, 1e13)?;
        within("modulus_long_pa", self.modulus_long_pa.value, 1e6, 1e13)?;
        within("poisson", self.poisson.value, 0.0, 0.5)?;
        within("expansion_per_k", self.expansion_per_k.value, 0.0, 1e-2)?;
        within("density_kg_m3", self.density_kg_m3.value, 100.0, 30_000.0)?;
        for s in &self.supply {
            within("supply length_m", s.length_m, 0.1, 10_000.0)?;
        }
        match &self.rating {
            RatingCopy::Class {
                pressure_pa,
                at_degc,
                ..
            } => {
                within("pressure_pa", *pressure_pa, 1.0, 1e9)?;
                within("at_degc", *at_degc, -100.0, 500.0)?;
            }
            RatingCopy::Stress(s) => {
                within("yield_pa", s.yield_pa.value, 1e6, 1e11)?;
                within("tensile_pa", s.tensile_pa.value, 1e6, 1e11)?;
                for share in [&s.normal, &s.transient, &s.test] {
                    within("of_yield", share.of_yield, 0.01, 1.0)?;
                    within("of_tensile", share.of_tensile.unwrap_or(1.0), 0.01, 1.0)?;
                }
                within("joint_share", s.joint_share.value, 0.01, 1.0)?;
                within("corrosion_m", s.corrosion_m.value, 0.0, 1.0)?;
                within(
                    "mill_tolerance_share",
                    s.mill_tolerance_share.value,
                    0.0,
                    0.9,
                )?;
                if let Some(depth) = &s.thread_depth_m {
                    within("thread_depth_m", depth.value, 0.0, 1.0)?;
                }
            }
        }
        let ordered = self
            .derating
            .windows(2)
            .all(|w| w[0].wall_degc < w[1].wall_degc && w[0].factor >= w[1].factor);
        let sane = self
            .derating
            .iter()
            .all(|p| (-100.0..=1000.0).contains(&p.wall_degc) && p.factor > 0.0 && p.factor <= 1.0);
        if self.derating.is_empty() || !ordered || !sane {
            return Err(PipeCopyError::Derating);
        }
        Ok(())
    }
}

/// The catalogue pipe of the same id, where it is no longer what the copy
/// says: shown to the user, while the copy stands.
#[must_use]
pub fn differs(copy: &PipeCopy) -> Option<PipeCopy> {
    let now = PipeCopy::of(pipes::catalogue().find(&copy.id)?);
    (now != *copy).then_some(now)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_catalogue_pipe_survives_its_copy() {
        for pipe in &pipes::catalogue().pipes {
            let copy = PipeCopy::of(pipe);
            let text = serde_json::to_string(&copy).unwrap();
            let back: PipeCopy = serde_json::from_str(&text).unwrap();
            assert_eq!(back, copy, "{}", pipe.id);
            assert_eq!(&back.pipe().unwrap(), pipe);
            assert_eq!(differs(&copy), None);
        }
    }

    #[test]
    fn figures_no_pipe_can_have_are_named() {
        let Some(pipe) = pipes::catalogue().pipes.first() else {
            return;
        };
        let mut copy = PipeCopy::of(pipe);
        copy.wall_min_m = -1.0;
        assert_eq!(
            copy.pipe(),
            Err(PipeCopyError::Value {
                field: "wall_min_m",
                value: -1.0
            })
        );
        let mut copy = PipeCopy::of(pipe);
        copy.derating.clear();
        assert_eq!(copy.pipe(), Err(PipeCopyError::Derating));
    }
}
