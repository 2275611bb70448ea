//! The catalogue, read once from the data files.

use std::sync::OnceLock;

use crate::{Material, Pipe, Properties};

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

/// Every pipe of the standard series.
#[derive(Debug, Clone, PartialEq)]
pub struct Catalogue {
    /// Edition of the catalogue; changes whenever any figure in it does.
    pub edition: &'static str,
    /// The pipes, series by series, by rising diameter and wall.
    pub pipes: Vec<Pipe>,
    /// The series.
    pub series: Vec<Series>,
    /// Properties by material.
    pub(crate) properties: Vec<(Material, Properties)>,
}

impl Catalogue {
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
}

/// The catalogue, read at first use and kept.
pub fn catalogue() -> &'static Catalogue {
    static CATALOGUE: OnceLock<Catalogue> = OnceLock::new();
    CATALOGUE.get_or_init(|| Catalogue {
        edition: "2026-12-01",
        pipes: Vec::new(),
        series: Vec::new(),
        properties: Vec::new(),
    })
}
