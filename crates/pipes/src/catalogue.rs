//! The catalogue, read once from the data files.

use std::sync::OnceLock;

use crate::shared::{self, Shared};
use crate::steel_data::{STEEL, SteelData, SteelJoint};
use crate::table::DataError;
use crate::{Material, Pipe, Properties, SteelRating, series};

/// A standard series of pipe.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Series {
    /// Stable slug, e.g. "pe100-iso4427".
    pub id: String,
    /// Standard with edition.
    pub standard: String,
    /// Material.
    pub material: Material,
    /// Where the figures were seen.
    pub source: String,
    /// What was not seen, in plain words; blank when nothing.
    pub not_seen: String,
}

/// Edition of the catalogue. A test holds it to the data files: whoever changes
/// a figure changes this too.
const EDITION: &str = "2026-12-01.2";

/// Every pipe of the standard series.
#[derive(Debug)]
pub struct Catalogue {
    /// Edition of the catalogue; changes whenever any figure in it does.
    pub edition: &'static str,
    /// The pipes, series by series, in the order of the data files (by rising
    /// diameter, then rising pressure).
    pub pipes: Vec<Pipe>,
    series: Vec<Series>,
    shared: Shared,
    steel: SteelData,
}

impl Catalogue {
    fn read() -> Result<Self, DataError> {
        let shared = Shared::read(&shared::FILES)?;
        let steel = SteelData::read(STEEL)?;
        let mut all = Self {
            edition: EDITION,
            pipes: Vec::new(),
            series: Vec::new(),
            shared,
            steel,
        };
        for file in series::FILES {
            let (series, pipes) = series::read(file, &all.shared, &all.steel)?;
            all.series.push(series);
            all.pipes.extend(pipes);
        }
        Ok(all)
    }

    /// The pipe of an id.
    #[must_use]
    pub fn find(&self, id: &str) -> Option<&Pipe> {
        self.pipes.iter().find(|pipe| pipe.id == id)
    }

    /// The series, in catalogue order.
    #[must_use]
    pub fn series(&self) -> &[Series] {
        &self.series
    }

    /// The usual properties of a material; none for [`Material::Other`].
    #[must_use]
    pub fn properties(&self, material: Material) -> Option<&Properties> {
        self.shared.properties(material)
    }

    /// The steel grades kept, by name.
    #[must_use]
    pub fn steel_grades(&self) -> Vec<&str> {
        self.steel.grades()
    }

    /// What rates a wall of a steel grade with a joint, with the usual
    /// allowances; none for a grade that is not kept. Each value is the user's
    /// to change before use.
    #[must_use]
    pub fn steel_rating(&self, grade: &str, joint: SteelJoint) -> Option<SteelRating> {
        self.steel.rating(grade, joint)
    }

    pub(crate) fn steel(&self) -> &SteelData {
        &self.steel
    }
}

/// The catalogue, read at first use and kept.
pub fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| match Catalogue::read() {
        Ok(catalogue) => catalogue,
        #[expect(
            clippy::panic,
            reason = "the files are part of the program, and a test reads every one of them"
        )]
        Err(error) => panic!("catalogue data: {error}"),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// FNV-1a over every data file, in order.
    fn fingerprint() -> u64 {
        let files = [
            shared::FILES.materials,
            shared::FILES.roughness,
            shared::FILES.derating,
            shared::FILES.derating_rules,
            shared::FILES.supply,
            STEEL,
        ];
        let mut hash = 0xcbf2_9ce4_8422_2325_u64;
        for byte in files
            .iter()
            .chain(&series::FILES)
            .flat_map(|file| file.text.bytes())
        {
            hash = (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3);
        }
        hash
    }

    #[test]
    fn the_edition_changes_with_the_data() {
        let known = ("2026-12-01.2", 2_283_766_130_529_138_061);
        assert_eq!(
            (EDITION, fingerprint()),
            known,
            "data changed: give the catalogue a new edition"
        );
    }

    #[test]
    fn every_file_parses_whole() {
        let catalogue = Catalogue::read().unwrap();
        assert_eq!(catalogue.series().len(), series::FILES.len());
        for file in series::FILES {
            let data = |line: &&str| !line.starts_with(['#', '!']);
            let rows = file.text.lines().filter(data).count() - 1;
            let (series, pipes) = series::read(file, &catalogue.shared, &catalogue.steel).unwrap();
            assert_eq!(pipes.len(), rows, "{}", file.name);
            assert!(pipes.iter().all(|pipe| pipe.series == series.id));
        }
    }

    #[test]
    fn a_malformed_line_is_named() {
        let catalogue = Catalogue::read().unwrap();
        let mut file = series::FILES[0];
        let text = file
            .text
            .replacen("20,11,20,2.0,2.3", "20,11,20,2.O,2.3", 1);
        assert_ne!(text, file.text);
        file.text = Box::leak(text.into_boxed_str());
        let error = series::read(file, &catalogue.shared, &catalogue.steel).unwrap_err();
        let line = file
            .text
            .lines()
            .position(|line| line.contains("2.O"))
            .unwrap()
            + 1;
        assert_eq!(
            (error.line, error.file.as_str()),
            (line, "pe100_iso4427.csv")
        );
        assert!(error.trouble.contains("2.O"), "{error}");
    }

    #[test]
    fn every_head_names_its_source() {
        for series in catalogue().series() {
            assert!(
                !series.source.is_empty() && !series.not_seen.is_empty(),
                "{}",
                series.id
            );
        }
        for file in series::FILES {
            assert!(file.text.starts_with("# "), "{}", file.name);
        }
    }
}
