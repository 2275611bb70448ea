//! What the series share: properties of the materials, derating rules, lengths
//! in which pipe is sold.

use uom::si::f64::{
    Length, MassDensity, Pressure, TemperatureCoefficient, ThermodynamicTemperature,
};
use uom::si::length::{meter, millimeter};
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::megapascal;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::{degree_celsius, degree_fahrenheit};

use crate::table::{DataError, File, Row, Table};
use crate::{Attested, Derating, DeratingPoint, Material, Properties, Sourced, Supply, SupplyKind};

/// The data files, part of the program.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Files {
    pub(crate) materials: File,
    pub(crate) roughness: File,
    pub(crate) derating: File,
    pub(crate) derating_rules: File,
    pub(crate) supply: File,
}

pub(crate) const FILES: Files = Files {
    materials: File {
        name: "materials.csv",
        text: include_str!("../data/materials.csv"),
    },
    roughness: File {
        name: "roughness.csv",
        text: include_str!("../data/roughness.csv"),
    },
    derating: File {
        name: "derating.csv",
        text: include_str!("../data/derating.csv"),
    },
    derating_rules: File {
        name: "derating_rules.csv",
        text: include_str!("../data/derating_rules.csv"),
    },
    supply: File {
        name: "supply.csv",
        text: include_str!("../data/supply.csv"),
    },
};

/// What the series share, read.
#[derive(Debug)]
pub(crate) struct Shared {
    pub(crate) properties: Vec<(Material, Properties)>,
    rules: Vec<(String, Derating)>,
    supply: Vec<SupplyLine>,
}

/// One line of supply.csv.
#[derive(Debug)]
struct SupplyLine {
    series: String,
    from: Length,
    to: Length,
    supply: Supply,
}

/// The rule a pipe of the user's own takes from its material.
fn own_rule(material: Material) -> Option<&'static str> {
    match material {
        Material::Pe100 => Some("pe100-iso"),
        Material::Pe4710 => Some("pe4710-m55"),
        Material::PvcU => Some("pvc-u-iso"),
        Material::PvcO => Some("pvc-o-iso"),
        Material::Steel => Some("steel"),
        Material::DuctileIron => Some("ductile-iron"),
        Material::Grp | Material::Other => None,
    }
}

impl Shared {
    pub(crate) fn read(files: &Files) -> Result<Self, DataError> {
        let rules = read_rules(files)?;
        let properties = read_properties(files, &rules)?;
        let supply = read_supply(files.supply)?;
        Ok(Self {
            properties,
            rules,
            supply,
        })
    }

    pub(crate) fn properties(&self, material: Material) -> Option<&Properties> {
        self.properties
            .iter()
            .find(|(known, _)| *known == material)
            .map(|(_, found)| found)
    }

    pub(crate) fn derating(&self, rule: &str) -> Option<&Derating> {
        self.rules
            .iter()
            .find(|(known, _)| known == rule)
            .map(|(_, found)| found)
    }

    pub(crate) fn supply(&self, series: &str, outside_diameter: Length) -> Vec<Supply> {
        self.supply
            .iter()
            .filter(|line| line.series == series)
            .filter(|line| line.from <= outside_diameter && outside_diameter <= line.to)
            .map(|line| line.supply.clone())
            .collect()
    }
}

/// `seen` or `from-memory`.
pub(crate) fn attested(row: &Row<'_>) -> Result<Attested, DataError> {
    match row.given("attested")? {
        "seen" => Ok(Attested::Seen),
        "from-memory" => Ok(Attested::FromMemory),
        other => Err(row.fail(format!("`attested` is `{other}`"))),
    }
}

fn sourced<T>(row: &Row<'_>, value: T) -> Result<Sourced<T>, DataError> {
    Ok(Sourced {
        value,
        source: row.given("source")?.to_owned(),
        attested: attested(row)?,
    })
}

fn material(row: &Row<'_>) -> Result<Material, DataError> {
    let slug = row.given("material")?;
    Material::from_slug(slug).ok_or_else(|| row.fail(format!("no material `{slug}`")))
}

fn read_rules(files: &Files) -> Result<Vec<(String, Derating)>, DataError> {
    let names = Table::read(
        files.derating_rules.name,
        files.derating_rules.text,
        &["rule", "source"],
    )?;
    let columns = ["rule", "temperature", "unit", "factor", "attested"];
    let points = Table::read(files.derating.name, files.derating.text, &columns)?;
    let mut rules = Vec::new();
    for row in names.rows() {
        let source = row.given("source")?.to_owned();
        rules.push((
            row.given("rule")?.to_owned(),
            Derating {
                points: Vec::new(),
                source,
            },
        ));
    }
    for row in points.rows() {
        let rule = row.given("rule")?;
        let found = rules.iter_mut().find(|(name, _)| name == rule);
        let (_, derating) = found.ok_or_else(|| row.fail(format!("no rule `{rule}`")))?;
        let degrees = row.positive("temperature")?;
        let temperature = match row.given("unit")? {
            "degC" => ThermodynamicTemperature::new::<degree_celsius>(degrees),
            "degF" => ThermodynamicTemperature::new::<degree_fahrenheit>(degrees),
            other => return Err(row.fail(format!("no temperature unit `{other}`"))),
        };
        let point = DeratingPoint {
            temperature,
            factor: row.positive("factor")?,
            attested: attested(row)?,
        };
        derating.points.push(point);
        if let Some(index) = derating.disorder() {
            return Err(row.fail(format!("point {index} of `{rule}` is out of order")));
        }
    }
    Ok(rules)
}

/// Roughness, new and aged, while the file is being read.
type Roughness = Vec<(Material, &'static str, Sourced<Length>)>;

fn read_roughness(file: File) -> Result<Roughness, DataError> {
    let table = Table::read(
        file.name,
        file.text,
        &["material", "state", "mm", "attested", "source"],
    )?;
    let mut found = Vec::new();
    for row in table.rows() {
        let state = match row.given("state")? {
            "new" => "new",
            "aged" => "aged",
            other => return Err(row.fail(format!("no state `{other}`"))),
        };
        let height = Length::new::<millimeter>(row.positive("mm")?);
        found.push((material(row)?, state, sourced(row, height)?));
    }
    Ok(found)
}

fn read_properties(
    files: &Files,
    rules: &[(String, Derating)],
) -> Result<Vec<(Material, Properties)>, DataError> {
    let roughness = read_roughness(files.roughness)?;
    let columns = [
        "material", "property", "value", "unit", "attested", "source",
    ];
    let table = Table::read(files.materials.name, files.materials.text, &columns)?;
    let mut all = Vec::new();
    for kind in Material::ALL
        .into_iter()
        .filter(|kind| *kind != Material::Other)
    {
        let find = |property: &str, unit: &str| -> Result<Sourced<f64>, DataError> {
            for row in table.rows() {
                if material(row)? == kind && row.given("property")? == property {
                    if row.given("unit")? != unit {
                        return Err(row.fail(format!("`{property}` is not in {unit}")));
                    }
                    return sourced(row, row.positive("value")?);
                }
            }
            Err(missing(files.materials.name, kind, property))
        };
        let rough = |state: &str| {
            let found = roughness
                .iter()
                .find(|(known, is, _)| *known == kind && *is == state);
            found
                .map(|(_, _, height)| height.clone())
                .ok_or_else(|| missing(files.roughness.name, kind, state))
        };
        let pressure = |value: Sourced<f64>| value.map(Pressure::new::<megapascal>);
        let rule = own_rule(kind).and_then(|name| rules.iter().find(|(known, _)| known == name));
        let properties = Properties {
            roughness_new: rough("new")?,
            roughness_aged: rough("aged")?,
            modulus_short: pressure(find("modulus_short", "MPa")?),
            modulus_long: pressure(find("modulus_long", "MPa")?),
            poisson: find("poisson", "1")?,
            expansion: find("expansion", "1/K")?.map(TemperatureCoefficient::new::<per_kelvin>),
            density: find("density", "kg/m3")?.map(MassDensity::new::<kilogram_per_cubic_meter>),
            derating: rule.map(|(_, derating)| derating.clone()),
        };
        all.push((kind, properties));
    }
    Ok(all)
}

fn missing(file: &str, kind: Material, what: &str) -> DataError {
    DataError {
        file: file.to_owned(),
        line: 1,
        trouble: format!("{} has no `{what}`", kind.slug()),
    }
}

fn read_supply(file: File) -> Result<Vec<SupplyLine>, DataError> {
    let columns = [
        "series", "od_from", "od_to", "kind", "length_m", "attested", "source",
    ];
    let table = Table::read(file.name, file.text, &columns)?;
    let mut lines = Vec::new();
    for row in table.rows() {
        let kind = match row.given("kind")? {
            "bar" => SupplyKind::Bar,
            "coil" => SupplyKind::Coil,
            other => return Err(row.fail(format!("no kind `{other}`"))),
        };
        lines.push(SupplyLine {
            series: row.given("series")?.to_owned(),
            from: Length::new::<millimeter>(row.positive("od_from")?),
            to: Length::new::<millimeter>(row.positive("od_to")?),
            supply: Supply {
                kind,
                length: Length::new::<meter>(row.positive("length_m")?),
                source: row.given("source")?.to_owned(),
                attested: attested(row)?,
            },
        });
    }
    Ok(lines)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn trouble(change: impl FnOnce(&mut Files)) -> DataError {
        let mut files = FILES;
        change(&mut files);
        Shared::read(&files).unwrap_err()
    }

    #[test]
    fn malformed_lines_are_named() {
        let head = "rule,temperature,unit,factor,attested\n";
        let twice = format!("{head}steel,20,degC,0.5,seen\nsteel,30,degC,0.6,seen\n");
        let error = trouble(|files| files.derating.text = twice.leak());
        assert_eq!(
            (error.line, error.file.as_str()),
            (3, "derating.csv"),
            "{error}"
        );
        let unknown = format!("{head}tin,20,degC,1,seen\n");
        assert!(
            trouble(|files| files.derating.text = unknown.leak())
                .trouble
                .contains("tin")
        );
        let unit = format!("{head}steel,20,K,1,seen\n");
        assert!(
            trouble(|files| files.derating.text = unit.leak())
                .trouble
                .contains('K')
        );

        let gone = FILES
            .materials
            .text
            .replacen("steel,poisson", "steel,posson", 1);
        assert!(
            trouble(|files| files.materials.text = gone.leak())
                .trouble
                .contains("poisson")
        );
        let unit = FILES.materials.text.replacen(
            "pe100,modulus_short,1000,MPa",
            "pe100,modulus_short,1,GPa",
            1,
        );
        assert!(
            trouble(|files| files.materials.text = unit.leak())
                .trouble
                .contains("MPa")
        );
        let state = FILES.roughness.text.replacen("pe100,new", "pe100,old", 1);
        assert!(
            trouble(|files| files.roughness.text = state.leak())
                .trouble
                .contains("old")
        );
        let kind = FILES.supply.text.replacen(",coil,", ",drum,", 1);
        assert!(
            trouble(|files| files.supply.text = kind.leak())
                .trouble
                .contains("drum")
        );
    }

    #[test]
    fn every_rule_has_points_and_every_supply_line_serves_a_pipe() {
        let shared = Shared::read(&FILES).unwrap();
        for (name, derating) in &shared.rules {
            assert!(!derating.points.is_empty(), "{name}");
        }
        let pipes = &crate::catalogue().pipes;
        for line in &shared.supply {
            let serves = |pipe: &&crate::Pipe| {
                pipe.series == line.series
                    && line.from <= pipe.outside_diameter
                    && pipe.outside_diameter <= line.to
            };
            assert!(pipes.iter().find(serves).is_some(), "{line:?}");
        }
    }
}
