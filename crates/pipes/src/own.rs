//! A pipe of the user's own.

use std::fmt;

use statics::steel::{self, LoadCase};
use uom::si::f64::{
    Length, MassDensity, Pressure, TemperatureCoefficient, ThermodynamicTemperature,
};
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::kelvin;

use crate::{
    Attested, ClassRating, Derating, DeratingPoint, Dimensions, Material, Pipe, Properties, Rating,
    Sourced, SteelRating, Supply, SupplyKind,
};

/// What the user knows of a pipe that is not in the catalogue. What is left
/// out comes from the material, with its own source and mark.
#[derive(Debug, Clone, PartialEq)]
pub struct OwnPipe {
    /// As ordered; must not be blank.
    pub designation: String,
    /// Short label for tables; the designation when blank.
    pub short: String,
    /// Standard, if any; may be blank.
    pub standard: String,
    /// Where the figures come from ("supplier's sheet of 3 May"); must not be blank.
    pub source: String,
    /// Material of the wall.
    pub material: Material,
    /// Outside diameter.
    pub outside_diameter: Length,
    /// Least wall without lining. For steel rated by stress: the nominal wall.
    pub wall_min: Length,
    /// Greatest wall, where known. Not for steel rated by stress.
    pub wall_max: Option<Length>,
    /// Lining thickness, zero for none.
    pub lining: Length,
    /// Rating.
    pub rating: OwnRating,
    /// Derating points (temperature, factor) by rising temperature; none for
    /// the material's own rule. Where the material has none (GRP, other) the
    /// rating then holds up to its own temperature only.
    pub derating: Option<Vec<(ThermodynamicTemperature, f64)>>,
    /// Roughness when new.
    pub roughness_new: Option<Length>,
    /// Roughness after years of use.
    pub roughness_aged: Option<Length>,
    /// Modulus for short loads.
    pub modulus_short: Option<Pressure>,
    /// Modulus for lasting loads.
    pub modulus_long: Option<Pressure>,
    /// Poisson ratio.
    pub poisson: Option<f64>,
    /// Linear thermal expansion.
    pub expansion: Option<TemperatureCoefficient>,
    /// Density of the wall.
    pub density: Option<MassDensity>,
    /// Lengths in which it is sold.
    pub supply: Vec<(SupplyKind, Length)>,
}

impl Default for OwnPipe {
    /// A blank form: nothing known, so that [`OwnPipe::build`] refuses it.
    fn default() -> Self {
        Self {
            designation: String::new(),
            short: String::new(),
            standard: String::new(),
            source: String::new(),
            material: Material::Other,
            outside_diameter: Length::default(),
            wall_min: Length::default(),
            wall_max: None,
            lining: Length::default(),
            rating: OwnRating::Class {
                symbol: String::new(),
                number: String::new(),
                pressure: Pressure::default(),
                at: ThermodynamicTemperature::default(),
            },
            derating: None,
            roughness_new: None,
            roughness_aged: None,
            modulus_short: None,
            modulus_long: None,
            poisson: None,
            expansion: None,
            density: None,
            supply: Vec::new(),
        }
    }
}

/// The rating of a pipe of the user's own.
#[derive(Debug, Clone, PartialEq)]
pub enum OwnRating {
    /// A pressure class.
    Class {
        /// Symbol, e.g. "PN".
        symbol: String,
        /// Number, e.g. "10".
        number: String,
        /// Lasting gauge pressure.
        pressure: Pressure,
        /// Temperature it is given for.
        at: ThermodynamicTemperature,
    },
    /// By stress; for [`Material::Steel`] only.
    Stress(Box<SteelRating>),
}

/// Why a pipe of the user's own cannot be. Lengths in m, pressures in Pa.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum OwnPipeError {
    /// A text that must be given is blank.
    Blank {
        /// Which: "designation" or "source".
        field: &'static str,
    },
    /// A value is not a finite number.
    NotFinite {
        /// Which field.
        field: &'static str,
    },
    /// A value is not above zero (or, for a lining, below zero).
    NotPositive {
        /// Which field.
        field: &'static str,
        /// The value.
        value: f64,
    },
    /// A value lies outside its range.
    OutOfRange {
        /// Which field.
        field: &'static str,
        /// The value.
        value: f64,
        /// Least allowed.
        least: f64,
        /// Greatest allowed.
        greatest: f64,
    },
    /// The greatest wall is thinner than the least.
    WallsCrossed {
        /// Least wall.
        least: f64,
        /// Greatest wall.
        greatest: f64,
    },
    /// Wall and lining leave no bore.
    NoBore {
        /// Mean wall with lining.
        wall_and_lining: f64,
        /// Half the outside diameter.
        half_diameter: f64,
    },
    /// [`Material::Other`] brings no value for a field left out.
    Missing {
        /// Which field.
        field: &'static str,
    },
    /// Rated by stress, but not steel.
    StressNeedsSteel {
        /// The material.
        material: Material,
    },
    /// A steel rated by stress was given a greatest wall.
    StressNeedsNominalWall,
    /// The lasting modulus is above the short one.
    ModuliCrossed {
        /// Short.
        short: f64,
        /// Lasting.
        long: f64,
    },
    /// Derating temperatures do not rise, or factors rise.
    DeratingDisordered {
        /// Index of the first point out of order.
        index: usize,
    },
    /// The derating list is empty.
    DeratingEmpty,
    /// The steel wall cannot be rated as described.
    Wall(statics::WallError),
}

impl fmt::Display for OwnPipeError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Blank { field } => write!(f, "{field} is blank"),
            Self::NotFinite { field } => write!(f, "{field} is not a finite number"),
            Self::NotPositive { field, value } => write!(f, "{field} is {value}, not above zero"),
            Self::OutOfRange {
                field,
                value,
                least,
                greatest,
            } => {
                write!(f, "{field} is {value}, outside {least} to {greatest}")
            }
            Self::WallsCrossed { least, greatest } => {
                write!(
                    f,
                    "the greatest wall {greatest} m is under the least wall {least} m"
                )
            }
            Self::NoBore {
                wall_and_lining,
                half_diameter,
            } => write!(
                f,
                "wall and lining of {wall_and_lining} m leave no bore in half a diameter of {half_diameter} m"
            ),
            Self::Missing { field } => {
                write!(f, "{field} is not known for this material: enter it")
            }
            Self::StressNeedsSteel { material } => {
                write!(f, "{} cannot be rated as steel by stress", material.slug())
            }
            Self::StressNeedsNominalWall => {
                write!(
                    f,
                    "steel rated by stress takes its nominal wall and no greatest wall"
                )
            }
            Self::ModuliCrossed { short, long } => {
                write!(
                    f,
                    "the lasting modulus {long} Pa is above the short one {short} Pa"
                )
            }
            Self::DeratingDisordered { index } => {
                write!(f, "derating point {} is out of order", index + 1)
            }
            Self::DeratingEmpty => write!(f, "the derating list is empty"),
            Self::Wall(error) => write!(f, "steel wall: {error}"),
        }
    }
}

impl std::error::Error for OwnPipeError {}

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

/// A pipe rolled and welded from steel plate, of any bore and wall; the
/// roughness and modulus are those of steel.
///
/// # Errors
/// [`OwnPipeError`] as for [`OwnPipe::build`].
pub fn plate_steel(bore: Length, wall: Length, rating: SteelRating) -> Result<Pipe, OwnPipeError> {
    let inside = positive("bore", bore.get::<meter>())?;
    let thick = positive("wall", wall.get::<meter>())?;
    let (inside, thick) = (inside * 1000.0, thick * 1000.0);
    let own = OwnPipe {
        designation: format!(
            "Plate steel {} bore {} x {} mm",
            rating.grade,
            trimmed(inside),
            trimmed(thick)
        ),
        short: format!("Plate {} x {}", trimmed(inside), trimmed(thick)),
        source: "bore and wall as entered".to_owned(),
        material: Material::Steel,
        outside_diameter: bore + 2.0 * wall,
        wall_min: wall,
        rating: OwnRating::Stress(Box::new(rating)),
        ..OwnPipe::default()
    };
    let mut pipe = own.build()?;
    pipe.id = format!("plate-steel/{}x{}", trimmed(inside), trimmed(thick));
    pipe.series = "plate-steel".to_owned();
    Ok(pipe)
}

impl Pipe {
    /// The same steel pipe with taper threads cut at its ends: rated by the wall
    /// left under the thread. The depth is the one usual for the diameter
    /// unless one is given.
    ///
    /// # Errors
    /// [`OwnPipeError::StressNeedsSteel`] when the pipe is not steel rated by
    /// stress, [`OwnPipeError::Missing`] when no thread is kept for its
    /// diameter (over 170 mm) and none is given, [`OwnPipeError::Wall`] when
    /// no wall is left.
    pub fn threaded(&self, depth: Option<Sourced<Length>>) -> Result<Self, OwnPipeError> {
        let mut pipe = self.clone();
        let Rating::Stress(rating) = &mut pipe.rating else {
            return Err(OwnPipeError::StressNeedsSteel {
                material: self.material,
            });
        };
        let depth = depth
            .or_else(|| {
                crate::catalogue()
                    .steel()
                    .thread_depth(self.outside_diameter)
            })
            .ok_or(OwnPipeError::Missing {
                field: "thread depth",
            })?;
        positive("thread depth", depth.value.get::<meter>())?;
        rating.thread_depth = Some(depth);
        pipe.id.push_str("/threaded");
        pipe.designation.push_str(" threaded");
        pipe.short.push_str(" threaded");
        check_pipe(&pipe)?;
        Ok(pipe)
    }

    /// The same pipe with another steel rating (grade, allowances, shares).
    ///
    /// # Errors
    /// [`OwnPipeError::StressNeedsSteel`] when the pipe is not rated by stress,
    /// others as for [`OwnPipe::build`].
    pub fn with_steel(&self, rating: SteelRating) -> Result<Self, OwnPipeError> {
        let mut pipe = self.clone();
        if !matches!(pipe.rating, Rating::Stress(_)) {
            return Err(OwnPipeError::StressNeedsSteel {
                material: self.material,
            });
        }
        let mill = between("mill_tolerance", rating.mill_tolerance.value, 0.0, 1.0)?;
        pipe.wall_min = pipe.wall_mean() * (1.0 - mill);
        pipe.rating = Rating::Stress(Box::new(rating));
        check_pipe(&pipe)?;
        Ok(pipe)
    }
}

/// What can only be seen on the whole pipe.
fn check_pipe(pipe: &Pipe) -> Result<(), OwnPipeError> {
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

fn own_derating(
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

fn filled<'a>(field: &'static str, text: &'a str) -> Result<&'a str, OwnPipeError> {
    match text.trim() {
        "" => Err(OwnPipeError::Blank { field }),
        text => Ok(text),
    }
}

fn finite(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    if value.is_finite() {
        Ok(value)
    } else {
        Err(OwnPipeError::NotFinite { field })
    }
}

fn positive(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    match finite(field, value)? {
        value if value > 0.0 => Ok(value),
        value => Err(OwnPipeError::NotPositive { field, value }),
    }
}

fn not_negative(field: &'static str, value: f64) -> Result<f64, OwnPipeError> {
    match finite(field, value)? {
        value if value >= 0.0 => Ok(value),
        value => Err(OwnPipeError::NotPositive { field, value }),
    }
}

fn between(
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
fn trimmed(value: f64) -> String {
    let text = format!("{value:.3}");
    text.trim_end_matches('0').trim_end_matches('.').to_owned()
}

/// Lower-case letters and digits, everything else a single dash.
fn slug(text: &str) -> String {
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
