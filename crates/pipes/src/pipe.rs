//! One pipe, standing on its own.

use statics::steel::{self, LoadCase, SteelWall};
use uom::si::f64::{
    Length, LinearMassDensity, MassDensity, Pressure, TemperatureCoefficient,
    ThermodynamicTemperature,
};
use uom::si::length::meter;
use uom::si::linear_mass_density::kilogram_per_meter;
use uom::si::mass_density::kilogram_per_cubic_meter;

use crate::{Allowable, Attested, Basis, Derating, Material, Rating, RatingError, Sourced};

/// Density of cement mortar lining, kg/m3 (from memory; mass only).
const LINING_DENSITY: f64 = 2200.0;

/// How a pipe comes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum SupplyKind {
    /// Straight lengths.
    Bar,
    /// Coils.
    Coil,
}

/// A length in which the pipe is sold.
#[derive(Debug, Clone, PartialEq)]
pub struct Supply {
    /// Straight or coiled.
    pub kind: SupplyKind,
    /// Laying length of one piece (a socket is not counted where the source
    /// gives the laying length).
    pub length: Length,
    /// Where this comes from.
    pub source: String,
    /// Whether that source was seen.
    pub attested: Attested,
}

/// Where the diameters and walls of a pipe come from. The mark is about the
/// outside diameter and the least (or nominal) wall, on which limits rest; an
/// upper tolerance from memory moves the bore only, and the file of the series
/// says so.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Dimensions {
    /// The source, in words fit for the calculation record.
    pub source: String,
    /// Whether it was seen.
    pub attested: Attested,
}

/// One pipe: all that a calculation or an order needs, with sources.
#[derive(Debug, Clone, PartialEq)]
pub struct Pipe {
    /// Stable slug, e.g. "pe100-iso4427/200/sdr17"; "own/..." for the user's own.
    pub id: String,
    /// Slug of the series, e.g. "pe100-iso4427"; "own" for the user's own.
    pub series: String,
    /// Standard with its edition, e.g. "ISO 4427-2:2019".
    pub standard: String,
    /// As ordered by its standard, e.g. "PE 100 200 x 11.9 SDR 17 PN 10".
    pub designation: String,
    /// Short label for tables, e.g. "PE100 200 SDR 17".
    pub short: String,
    /// Material of the wall.
    pub material: Material,
    /// Nominal outside diameter.
    pub outside_diameter: Length,
    /// Least wall: the standard's minimum, or the nominal wall less the mill's
    /// tolerance where the standard orders by nominal wall. Without lining.
    pub wall_min: Length,
    /// Greatest wall where the standard gives one.
    pub wall_max: Option<Length>,
    /// Wall about which the pipe is made, where the standard orders by it
    /// (steel, ductile iron) or a printed bore shows it (PVC-O).
    pub wall_nominal: Option<Length>,
    /// Thickness of the lining (cement mortar), taken off the bore twice; zero
    /// for none.
    pub lining: Length,
    /// How the pipe is rated.
    pub rating: Rating,
    /// Pressure allowed against wall temperature.
    pub derating: Derating,
    /// Absolute roughness (Colebrook-White) when new.
    pub roughness_new: Sourced<Length>,
    /// The same after years of use.
    pub roughness_aged: Sourced<Length>,
    /// Modulus of elasticity for short loads (surge, passing vacuum).
    pub modulus_short: Sourced<Pressure>,
    /// Modulus for lasting loads.
    pub modulus_long: Sourced<Pressure>,
    /// Poisson ratio.
    pub poisson: Sourced<f64>,
    /// Linear thermal expansion.
    pub expansion: Sourced<TemperatureCoefficient>,
    /// Density of the wall.
    pub density: Sourced<MassDensity>,
    /// Lengths in which it is sold; may be empty.
    pub supply: Vec<Supply>,
    /// Where diameters and walls come from.
    pub dimensions: Dimensions,
}

impl Pipe {
    /// Mean wall: the nominal wall where the pipe is made about one, else the
    /// least wall plus half the tolerance, else (no tolerance known) the least
    /// wall.
    #[must_use]
    pub fn wall_mean(&self) -> Length {
        match (self.wall_nominal, self.wall_max) {
            (Some(nominal), _) => nominal,
            (None, Some(max)) => (self.wall_min + max) / 2.0,
            (None, None) => self.wall_min,
        }
    }

    /// Bore: outside diameter less two mean walls less two linings.
    #[must_use]
    pub fn bore(&self) -> Length {
        self.outside_diameter - 2.0 * (self.wall_mean() + self.lining)
    }

    /// Wall that resists buckling: the least wall, for steel less corrosion
    /// (zero when corrosion takes it all). Threads are at the ends only and are
    /// not taken off.
    #[must_use]
    pub fn wall_against_collapse(&self) -> Length {
        match &self.rating {
            Rating::Stress(steel) => {
                let left = self.wall_min - steel.corrosion.value;
                if left > Length::new::<meter>(0.0) {
                    left
                } else {
                    Length::new::<meter>(0.0)
                }
            }
            Rating::Class(_) => self.wall_min,
        }
    }

    /// The Poisson ratio for collapse: the pipe's own where its source was
    /// seen, else zero, which gives the least critical pressure and so needs
    /// no source.
    #[must_use]
    pub fn poisson_for_collapse(&self) -> Sourced<f64> {
        if self.poisson.attested.is_seen() {
            self.poisson.clone()
        } else {
            Sourced::seen(
                0.0,
                "zero: gives the least critical pressure, since no figure was seen",
            )
        }
    }

    /// Mass per length of the empty pipe, from its geometry: mean wall, lining
    /// included (cement mortar at 2200 kg/m3, from memory), sockets left out.
    #[must_use]
    pub fn mass_per_length(&self) -> LinearMassDensity {
        let d = self.outside_diameter.get::<meter>();
        let t = self.wall_mean().get::<meter>();
        let lining = self.lining.get::<meter>();
        let ring = |outside: f64, wall: f64| std::f64::consts::PI * wall * (outside - wall);
        let wall = ring(d, t) * self.density.value.get::<kilogram_per_cubic_meter>();
        let lined = ring(d - 2.0 * t, lining) * LINING_DENSITY;
        LinearMassDensity::new::<kilogram_per_meter>(wall + lined)
    }

    /// Lasting pressure the pipe may carry at a wall temperature. For steel
    /// the normal load case.
    ///
    /// # Errors
    /// [`RatingError`] when the wall is too hot for its rule, the temperature
    /// is none, or a steel wall has nothing left.
    pub fn allowable(
        &self,
        wall_temperature: ThermodynamicTemperature,
    ) -> Result<Allowable, RatingError> {
        self.allowable_for(LoadCase::Normal, wall_temperature)
    }

    /// Pressure the pipe may carry in a load case at a wall temperature.
    /// A class gives the same lasting pressure for every case: surge
    /// allowances are the user's to enter.
    ///
    /// # Errors
    /// As [`Pipe::allowable`].
    pub fn allowable_for(
        &self,
        case: LoadCase,
        wall_temperature: ThermodynamicTemperature,
    ) -> Result<Allowable, RatingError> {
        let (factor, derating_attested) = self.derating.factor(wall_temperature)?;
        let (full, basis, source, rating_attested) = match &self.rating {
            Rating::Class(class) => (
                class.pressure,
                Basis::Class {
                    rated: class.pressure,
                    at: class.at,
                },
                class.source.clone(),
                class.attested,
            ),
            Rating::Stress(rating) => {
                let wall = steel::allowable_pressure(
                    &self.steel_wall(rating),
                    &rating.shares(case).value,
                )?;
                let source = format!(
                    "p = 2 S E t / D (Barlow, outside diameter); {}; {}",
                    rating.grade,
                    rating.shares(case).source
                );
                (
                    wall.pressure,
                    Basis::Stress { case, wall },
                    source,
                    rating.attested(case),
                )
            }
        };
        Ok(Allowable {
            pressure: full * factor,
            factor,
            temperature: wall_temperature,
            basis,
            source: format!("{source}; {}", self.derating.source),
            attested: derating_attested
                .and(rating_attested)
                .and(self.dimensions.attested),
        })
    }

    pub(crate) fn steel_wall(&self, rating: &crate::SteelRating) -> SteelWall {
        SteelWall {
            outside_diameter: self.outside_diameter,
            nominal_wall: self.wall_mean(),
            mill_tolerance: rating.mill_tolerance.value,
            corrosion: rating.corrosion.value,
            thread_depth: rating
                .thread_depth
                .as_ref()
                .map_or(Length::new::<meter>(0.0), |depth| depth.value),
            yield_strength: rating.yield_strength.value,
            tensile_strength: rating.tensile_strength.value,
            joint_factor: rating.joint_factor.value,
        }
    }
}

#[cfg(test)]
mod tests {
    use uom::si::length::millimeter;
    use uom::si::pressure::bar;
    use uom::si::thermodynamic_temperature::degree_celsius;

    use super::*;
    use crate::catalogue;

    fn celsius(value: f64) -> ThermodynamicTemperature {
        ThermodynamicTemperature::new::<degree_celsius>(value)
    }

    #[test]
    fn every_pipe_of_the_catalogue_is_possible() {
        let pipes = &catalogue().pipes;
        assert!(pipes.len() > 800, "{}", pipes.len());
        for pipe in pipes {
            let id = &pipe.id;
            assert!(pipe.wall_min <= pipe.wall_mean(), "{id}");
            assert!(pipe.bore() > Length::new::<meter>(0.0), "{id}");
            assert!(pipe.bore() < pipe.outside_diameter, "{id}");
            assert!(
                pipe.wall_against_collapse() > Length::new::<meter>(0.0),
                "{id}"
            );
            assert!(
                pipe.mass_per_length().get::<kilogram_per_meter>() > 0.0,
                "{id}"
            );
            assert!(pipe.modulus_long.value <= pipe.modulus_short.value, "{id}");
            assert!(
                pipe.roughness_new.value <= pipe.roughness_aged.value,
                "{id}"
            );
            assert!(!pipe.supply.is_empty(), "{id} has no supply length");
            for text in [
                &pipe.designation,
                &pipe.short,
                &pipe.standard,
                &pipe.dimensions.source,
            ] {
                assert!(
                    !text.is_empty() && !text.contains(['{', '}']),
                    "{id}: {text}"
                );
            }
            let allowed = pipe.allowable(celsius(20.0)).unwrap();
            let p = allowed.pressure.get::<bar>();
            assert!(p > 1.0 && p < 500.0, "{id}: {p} bar");
            assert!(!allowed.source.is_empty());
        }
    }

    #[test]
    fn ids_are_unique() {
        let mut ids: Vec<&str> = catalogue()
            .pipes
            .iter()
            .map(|pipe| pipe.id.as_str())
            .collect();
        ids.sort_unstable();
        let count = ids.len();
        ids.dedup();
        assert_eq!(ids.len(), count);
        assert!(catalogue().find("no/such").is_none());
    }

    #[test]
    fn the_mean_wall_makes_the_bore() {
        // Least wall 11.9 mm, greatest 13.2 mm: 200 - 11.9 - 13.2.
        let pipe = catalogue().find("pe100-iso4427/200/sdr17").unwrap();
        assert_eq!(pipe.designation, "PE 100 200 x 11.9 SDR 17 PN 10");
        assert_eq!(pipe.short, "PE100 200 SDR 17");
        assert!((pipe.bore().get::<millimeter>() - 174.9).abs() < 1e-9);
        // Nominal wall 6.2 mm and lining 4 mm: 326 - 2 (6.2 + 4).
        let iron = catalogue().find("ductile-iron-iso2531/300/c40").unwrap();
        assert!((iron.bore().get::<millimeter>() - 305.6).abs() < 1e-9);
        assert!((iron.wall_min.get::<millimeter>() - 4.6).abs() < 1e-9);
    }

    #[test]
    fn the_mass_is_that_of_a_ring() {
        // 219.1 x 4.5 mm at 7850 kg/m3: 0.0246615 x 4.5 x (219.1 - 4.5) kg/m, the usual
        // factor of steel tube tables.
        let pipe = catalogue().find("steel-en10220-welded/219.1/4.5").unwrap();
        let mass = pipe.mass_per_length().get::<kilogram_per_meter>();
        assert!((mass - 0.024_661_5 * 4.5 * 214.6).abs() < 1e-3, "{mass}");
        // The lining weighs too.
        let mut iron = catalogue()
            .find("ductile-iron-iso2531/300/c40")
            .unwrap()
            .clone();
        let lined = iron.mass_per_length();
        iron.lining = Length::new::<meter>(0.0);
        assert!(lined > iron.mass_per_length());
    }

    #[test]
    fn memory_taints_what_is_allowed() {
        let at = celsius(20.0);
        let marked = |id: &str| {
            catalogue()
                .find(id)
                .unwrap()
                .allowable(at)
                .unwrap()
                .attested
        };
        assert_eq!(marked("pe100-iso4427/200/sdr17"), Attested::Seen);
        assert_eq!(marked("pe100-iso4427/200/sdr6"), Attested::FromMemory);
        assert_eq!(marked("pvcu-iso1452/110/pn10"), Attested::Seen);
        assert_eq!(marked("pvcu-iso1452/110/pn8"), Attested::FromMemory);
        let mut pipe = catalogue().find("pe100-iso4427/200/sdr17").unwrap().clone();
        pipe.dimensions.attested = Attested::FromMemory;
        assert_eq!(pipe.allowable(at).unwrap().attested, Attested::FromMemory);
        pipe.dimensions.attested = Attested::Seen;
        pipe.derating.points[0].attested = Attested::FromMemory;
        assert_eq!(pipe.allowable(at).unwrap().attested, Attested::FromMemory);
    }

    #[test]
    fn load_cases_of_steel_but_not_of_a_class() {
        let at = celsius(20.0);
        let steel = catalogue().find("steel-en10220-welded/219.1/4.5").unwrap();
        let normal = steel.allowable_for(LoadCase::Normal, at).unwrap();
        let surge = steel.allowable_for(LoadCase::Transient, at).unwrap();
        assert!((surge.pressure / normal.pressure).get::<uom::si::ratio::ratio>() > 1.19);
        assert_eq!(normal.pressure, steel.allowable(at).unwrap().pressure);
        let plastic = catalogue().find("pe100-iso4427/200/sdr17").unwrap();
        let lasting = plastic.allowable(at).unwrap();
        assert_eq!(
            plastic.allowable_for(LoadCase::Transient, at).unwrap(),
            lasting
        );
    }
}
