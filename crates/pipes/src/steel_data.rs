//! Grades, joints and allowances that rate a steel wall by stress.

use statics::steel::StressShares;
use uom::si::f64::{Length, Pressure};
use uom::si::length::millimeter;
use uom::si::pressure::megapascal;

use crate::shared::attested;
use crate::table::{DataError, File, Row, Table};
use crate::{Shares, Sourced, SteelRating};

pub(crate) const STEEL: File = File {
    name: "steel.csv",
    text: include_str!("../data/steel.csv"),
};

/// How the longitudinal joint of a steel pipe is made.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum SteelJoint {
    /// Welded tube, weld not fully examined.
    Welded,
    /// No joint.
    Seamless,
    /// Rolled and welded from plate, weld not fully examined.
    Plate,
}

impl SteelJoint {
    /// A stable slug, as used in the data files.
    #[must_use]
    pub fn slug(self) -> &'static str {
        match self {
            Self::Welded => "welded",
            Self::Seamless => "seamless",
            Self::Plate => "plate",
        }
    }

    pub(crate) fn from_slug(slug: &str) -> Option<Self> {
        [Self::Welded, Self::Seamless, Self::Plate]
            .into_iter()
            .find(|joint| joint.slug() == slug)
    }
}

/// steel.csv, read.
#[derive(Debug)]
pub(crate) struct SteelData {
    lines: Vec<Line>,
}

#[derive(Debug)]
struct Line {
    kind: String,
    name: String,
    value: Sourced<f64>,
}

impl SteelData {
    pub(crate) fn read(file: File) -> Result<Self, DataError> {
        let columns = ["kind", "name", "value", "unit", "attested", "source"];
        let table = Table::read(file.name, file.text, &columns)?;
        let mut lines = Vec::new();
        for row in table.rows() {
            lines.push(read_line(row)?);
        }
        Ok(Self { lines })
    }

    /// The names of the grades, in file order.
    pub(crate) fn grades(&self) -> Vec<&str> {
        self.lines
            .iter()
            .filter(|line| line.kind == "yield")
            .map(|line| line.name.as_str())
            .collect()
    }

    fn find(&self, kind: &str, name: &str) -> Option<Sourced<f64>> {
        self.lines
            .iter()
            .find(|line| line.kind == kind && line.name == name)
            .map(|line| line.value.clone())
    }

    fn shares(&self, case: &str) -> Option<Shares> {
        let of_yield = self.find("share-of-yield", case)?;
        let of_tensile = self.find("share-of-tensile", case)?;
        Some(Sourced {
            value: StressShares {
                of_yield: of_yield.value,
                of_tensile: Some(of_tensile.value),
            },
            attested: of_yield.attested.and(of_tensile.attested),
            source: of_yield.source,
        })
    }

    /// The rating of a grade with a joint, as the file has it.
    pub(crate) fn rating(&self, grade: &str, joint: SteelJoint) -> Option<SteelRating> {
        Some(SteelRating {
            grade: grade.to_owned(),
            yield_strength: self.find("yield", grade)?.map(Pressure::new::<megapascal>),
            tensile_strength: self
                .find("tensile", grade)?
                .map(Pressure::new::<megapascal>),
            normal: self.shares("normal")?,
            transient: self.shares("transient")?,
            test: self.shares("test")?,
            joint_factor: self.find("joint", joint.slug())?,
            corrosion: self
                .find("corrosion", "all")?
                .map(Length::new::<millimeter>),
            mill_tolerance: self.find("mill", "all")?,
            thread_depth: None,
        })
    }

    /// Depth of the taper thread usual on a pipe of this outside diameter.
    pub(crate) fn thread_depth(&self, outside_diameter: Length) -> Option<Sourced<Length>> {
        let od = outside_diameter.get::<millimeter>();
        self.lines
            .iter()
            .filter(|line| line.kind == "thread")
            .find(|line| line.name.parse::<f64>().is_ok_and(|to| od <= to))
            .map(|line| line.value.clone().map(Length::new::<millimeter>))
    }
}

fn read_line(row: &Row<'_>) -> Result<Line, DataError> {
    let kind = row.given("kind")?;
    let unit = match kind {
        "yield" | "tensile" => "MPa",
        "share-of-yield" | "share-of-tensile" | "joint" | "mill" => "1",
        "corrosion" | "thread" => "mm",
        other => return Err(row.fail(format!("no kind `{other}`"))),
    };
    if row.given("unit")? != unit {
        return Err(row.fail(format!("`{kind}` is not in {unit}")));
    }
    let name = row.given("name")?.to_owned();
    if kind == "thread" && name.parse::<f64>().is_err() {
        return Err(row.fail(format!("`{name}` is not an outside diameter in mm")));
    }
    let source = row.given("source")?.to_owned();
    let value = Sourced {
        value: row.positive("value")?,
        source,
        attested: attested(row)?,
    };
    Ok(Line {
        kind: kind.to_owned(),
        name,
        value,
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{Attested, catalogue};

    #[test]
    fn every_grade_rates_with_every_joint() {
        let grades = catalogue().steel_grades();
        assert_eq!(grades, ["P235TR1", "ASTM A53 Grade B", "S235JR"]);
        for grade in grades {
            for joint in [SteelJoint::Welded, SteelJoint::Seamless, SteelJoint::Plate] {
                assert_eq!(SteelJoint::from_slug(joint.slug()), Some(joint));
                let rating = catalogue().steel_rating(grade, joint).unwrap();
                assert!(rating.yield_strength.value < rating.tensile_strength.value);
                assert_eq!(
                    rating.attested(statics::steel::LoadCase::Normal),
                    Attested::Seen
                );
                assert_eq!(
                    rating.attested(statics::steel::LoadCase::Test),
                    Attested::FromMemory
                );
            }
        }
        assert!(
            catalogue()
                .steel_rating("unheard of", SteelJoint::Welded)
                .is_none()
        );
    }

    #[test]
    fn threads_deepen_with_the_diameter() {
        let depth = |od: f64| {
            catalogue()
                .steel()
                .thread_depth(Length::new::<millimeter>(od))
        };
        let millimetres = |od: f64| depth(od).unwrap().value.get::<millimeter>();
        assert!((millimetres(21.3) - 1.45).abs() < 1e-9);
        assert!((millimetres(60.3) - 1.77).abs() < 1e-9);
        assert!((millimetres(114.3) - 2.54).abs() < 1e-9);
        assert!(depth(219.1).is_none());
    }

    #[test]
    fn a_malformed_line_is_named() {
        for (text, trouble) in [
            (
                "kind,name,value,unit,attested,source\nyield,X,235,kPa,seen,s\n",
                "not in MPa",
            ),
            (
                "kind,name,value,unit,attested,source\ncolour,X,1,1,seen,s\n",
                "no kind",
            ),
            (
                "kind,name,value,unit,attested,source\nyield,X,235,MPa,maybe,s\n",
                "attested",
            ),
            (
                "kind,name,value,unit,attested,source\nthread,X,1,mm,seen,s\n",
                "outside diameter",
            ),
        ] {
            let error = SteelData::read(File {
                name: "s.csv",
                text,
            })
            .unwrap_err();
            assert_eq!(error.line, 2);
            assert!(error.trouble.contains(trouble), "{error}");
        }
    }
}
