//! The materials of pipe walls.

use uom::si::f64::{Length, MassDensity, Pressure, TemperatureCoefficient};

use crate::{Derating, Sourced};

/// Material of the wall.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Material {
    /// Polyethylene, MRS 10 MPa.
    Pe100,
    /// Polyethylene, hydrostatic design stress 1000 psi.
    Pe4710,
    /// Unplasticised polyvinyl chloride.
    PvcU,
    /// Oriented polyvinyl chloride.
    PvcO,
    /// Carbon steel.
    Steel,
    /// Ductile iron.
    DuctileIron,
    /// Glass-fibre reinforced plastic.
    Grp,
    /// Anything else, described by the user.
    Other,
}

impl Material {
    /// Every material, in the order of the catalogue.
    pub const ALL: [Self; 8] = [
        Self::Pe100,
        Self::Pe4710,
        Self::PvcU,
        Self::PvcO,
        Self::Steel,
        Self::DuctileIron,
        Self::Grp,
        Self::Other,
    ];

    /// A stable slug, as used in the data files and in saved books.
    #[must_use]
    pub fn slug(self) -> &'static str {
        match self {
            Self::Pe100 => "pe100",
            Self::Pe4710 => "pe4710",
            Self::PvcU => "pvc-u",
            Self::PvcO => "pvc-o",
            Self::Steel => "steel",
            Self::DuctileIron => "ductile-iron",
            Self::Grp => "grp",
            Self::Other => "other",
        }
    }

    /// The material of a slug.
    #[must_use]
    pub fn from_slug(slug: &str) -> Option<Self> {
        Self::ALL
            .into_iter()
            .find(|material| material.slug() == slug)
    }

    /// True for plastics, whose modulus falls with the time under load.
    #[must_use]
    pub fn is_plastic(self) -> bool {
        matches!(
            self,
            Self::Pe100 | Self::Pe4710 | Self::PvcU | Self::PvcO | Self::Grp
        )
    }

    /// The usual properties with their sources; none for [`Material::Other`].
    #[must_use]
    pub fn properties(self) -> Option<&'static Properties> {
        crate::catalogue().properties(self)
    }
}

/// Properties a material brings, before the user changes any.
#[derive(Debug, Clone, PartialEq)]
pub struct Properties {
    /// Absolute roughness (Colebrook-White) when new.
    pub roughness_new: Sourced<Length>,
    /// The same after years of use: the default for sizing.
    pub roughness_aged: Sourced<Length>,
    /// Modulus of elasticity for short loads (surge, passing vacuum).
    pub modulus_short: Sourced<Pressure>,
    /// Modulus for lasting loads.
    pub modulus_long: Sourced<Pressure>,
    /// Poisson ratio.
    pub poisson: Sourced<f64>,
    /// Linear thermal expansion.
    pub expansion: Sourced<TemperatureCoefficient>,
    /// Density.
    pub density: Sourced<MassDensity>,
    /// Derating with temperature; none where no rule is kept (GRP).
    pub derating: Option<Derating>,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slugs_go_both_ways_and_all_but_other_have_properties() {
        for material in Material::ALL {
            assert_eq!(Material::from_slug(material.slug()), Some(material));
            assert_eq!(material.properties().is_some(), material != Material::Other);
        }
        assert_eq!(Material::from_slug("wood"), None);
        assert!(
            Material::Grp
                .properties()
                .is_some_and(|known| known.derating.is_none())
        );
    }
}
