//! One series: a data file made into pipes.

use uom::si::f64::{Length, Pressure, ThermodynamicTemperature};
use uom::si::length::{inch, millimeter};
use uom::si::pressure::{bar, pascal};
use uom::si::thermodynamic_temperature::{degree_celsius, degree_fahrenheit};

use crate::shared::Shared;
use crate::steel_data::{SteelData, SteelJoint};
use crate::table::{DataError, File, Row, Table};
use crate::{Attested, ClassRating, Dimensions, Material, Pipe, Rating, Series};

const COLUMNS: [&str; 11] = [
    "size",
    "ratio",
    "od",
    "wall_min",
    "wall_max",
    "wall_nominal",
    "lining",
    "class",
    "pressure",
    "dimensions",
    "rating",
];

/// One pound-force per square inch in Pa: 0.45359237 kg x 9.80665 m/s2 over
/// (0.0254 m)^2. The units of `uom` 0.38 are off in the eighth figure.
const PSI: f64 = 0.453_592_37 * 9.806_65 / (0.0254 * 0.0254);

/// The data files, one per series, in catalogue order.
pub(crate) const FILES: [File; 12] = [
    File {
        name: "pe100_iso4427.csv",
        text: include_str!("../data/series/pe100_iso4427.csv"),
    },
    File {
        name: "pe4710_ips.csv",
        text: include_str!("../data/series/pe4710_ips.csv"),
    },
    File {
        name: "pvcu_iso1452.csv",
        text: include_str!("../data/series/pvcu_iso1452.csv"),
    },
    File {
        name: "pvc_astm_d1785.csv",
        text: include_str!("../data/series/pvc_astm_d1785.csv"),
    },
    File {
        name: "pvc_astm_d2241.csv",
        text: include_str!("../data/series/pvc_astm_d2241.csv"),
    },
    File {
        name: "pvco_iso16422.csv",
        text: include_str!("../data/series/pvco_iso16422.csv"),
    },
    File {
        name: "steel_en10220_welded.csv",
        text: include_str!("../data/series/steel_en10220_welded.csv"),
    },
    File {
        name: "steel_en10220_seamless.csv",
        text: include_str!("../data/series/steel_en10220_seamless.csv"),
    },
    File {
        name: "steel_asme_b36_10.csv",
        text: include_str!("../data/series/steel_asme_b36_10.csv"),
    },
    File {
        name: "ductile_iron_iso2531.csv",
        text: include_str!("../data/series/ductile_iron_iso2531.csv"),
    },
    File {
        name: "ductile_iron_k9.csv",
        text: include_str!("../data/series/ductile_iron_k9.csv"),
    },
    File {
        name: "grp_iso23856.csv",
        text: include_str!("../data/series/grp_iso23856.csv"),
    },
];

/// Reads one file into its series and pipes.
pub(crate) fn read(
    file: File,
    shared: &Shared,
    steel: &SteelData,
) -> Result<(Series, Vec<Pipe>), DataError> {
    let table = Table::read(file.name, file.text, &COLUMNS)?;
    let wrong = |trouble: String| DataError {
        file: file.name.to_owned(),
        line: 1,
        trouble,
    };
    let slug = table.key("material")?;
    let material =
        Material::from_slug(slug).ok_or_else(|| wrong(format!("no material `{slug}`")))?;
    let series = Series {
        id: table.key("series")?.to_owned(),
        standard: table.key("standard")?.to_owned(),
        material,
        source: table.key("source")?.to_owned(),
        not_seen: table.key("not seen")?.to_owned(),
    };
    let mut pipes = Vec::with_capacity(table.rows().len());
    for row in table.rows() {
        pipes.push(read_pipe(&table, row, &series, shared, steel)?);
    }
    Ok((series, pipes))
}

fn read_pipe(
    table: &Table<'_>,
    row: &Row<'_>,
    series: &Series,
    shared: &Shared,
    steel: &SteelData,
) -> Result<Pipe, DataError> {
    let unit = table.key("unit")?;
    let length = |value: f64| match unit {
        "mm" => Ok(Length::new::<millimeter>(value)),
        "in" => Ok(Length::new::<inch>(value)),
        other => Err(row.fail(format!("no length unit `{other}`"))),
    };
    let maybe = |column: &str| row.maybe(column)?.map(length).transpose();
    let outside_diameter = length(row.positive("od")?)?;
    let wall_nominal = maybe("wall_nominal")?;
    let wall_max = maybe("wall_max")?;
    let (rating, wall_min) = match table.key("rating")? {
        "class" => (read_class(table, row)?, length(row.positive("wall_min")?)?),
        "stress" => {
            let nominal =
                wall_nominal.ok_or_else(|| row.fail("`wall_nominal` is blank".to_owned()))?;
            let grade = table.key("grade")?;
            let joint = SteelJoint::from_slug(table.key("joint")?);
            let rating = joint.and_then(|joint| steel.rating(grade, joint));
            let rating =
                rating.ok_or_else(|| row.fail(format!("no steel `{grade}` with this joint")))?;
            let wall_min = nominal * (1.0 - rating.mill_tolerance.value);
            (Rating::Stress(Box::new(rating)), wall_min)
        }
        other => return Err(row.fail(format!("no rating `{other}`"))),
    };
    let rule = table.key("derating")?;
    let derating = shared
        .derating(rule)
        .ok_or_else(|| row.fail(format!("no derating rule `{rule}`")))?;
    let properties = shared
        .properties(series.material)
        .ok_or_else(|| row.fail("no properties for the material".to_owned()))?
        .clone();
    let pipe = Pipe {
        id: format!("{}/{}", series.id, fill(table.key("id")?, row)?),
        series: series.id.clone(),
        standard: series.standard.clone(),
        designation: fill(table.key("designation")?, row)?,
        short: fill(table.key("short")?, row)?,
        material: series.material,
        outside_diameter,
        wall_min,
        wall_max,
        wall_nominal,
        lining: maybe("lining")?.unwrap_or_default(),
        rating,
        derating: derating.clone(),
        roughness_new: properties.roughness_new,
        roughness_aged: properties.roughness_aged,
        modulus_short: properties.modulus_short,
        modulus_long: properties.modulus_long,
        poisson: properties.poisson,
        expansion: properties.expansion,
        density: properties.density,
        supply: shared.supply(&series.id, outside_diameter),
        dimensions: Dimensions {
            source: series.source.clone(),
            attested: status(row, "dimensions")?,
        },
    };
    if pipe.wall_mean() < pipe.wall_min || wall_max.is_some_and(|max| max < pipe.wall_mean()) {
        return Err(row.fail("walls are out of order".to_owned()));
    }
    if pipe.bore() <= Length::default() {
        return Err(row.fail("no bore is left".to_owned()));
    }
    Ok(pipe)
}

fn read_class(table: &Table<'_>, row: &Row<'_>) -> Result<Rating, DataError> {
    let value = row.positive("pressure")?;
    let pressure = match table.key("pressure unit")? {
        "bar" => Pressure::new::<bar>(value),
        "psi" => Pressure::new::<pascal>(value * PSI),
        other => return Err(row.fail(format!("no pressure unit `{other}`"))),
    };
    let at = match table.key("at")? {
        "20 degC" => ThermodynamicTemperature::new::<degree_celsius>(20.0),
        "73 degF" => ThermodynamicTemperature::new::<degree_fahrenheit>(73.0),
        other => return Err(row.fail(format!("no rating temperature `{other}`"))),
    };
    Ok(Rating::Class(ClassRating {
        symbol: table.key("symbol")?.to_owned(),
        number: row.given("class")?.to_owned(),
        pressure,
        at,
        source: table.key("rating source")?.to_owned(),
        attested: status(row, "rating")?,
    }))
}

fn status(row: &Row<'_>, column: &str) -> Result<Attested, DataError> {
    match row.given(column)? {
        "seen" => Ok(Attested::Seen),
        "memory" => Ok(Attested::FromMemory),
        other => Err(row.fail(format!("`{column}` is `{other}`"))),
    }
}

/// Fills `{size}`, `{ratio}`, `{od}`, `{wall}` and `{class}` with the cells as
/// they stand in the file; `{wall}` is the wall the standard orders by.
fn fill(pattern: &str, row: &Row<'_>) -> Result<String, DataError> {
    let wall = match row.text("wall_min")? {
        "" => row.given("wall_nominal")?,
        wall => wall,
    };
    Ok(pattern
        .replace("{size}", row.given("size")?)
        .replace("{ratio}", row.text("ratio")?)
        .replace("{od}", row.given("od")?)
        .replace("{wall}", wall)
        .replace("{class}", row.text("class")?))
}
