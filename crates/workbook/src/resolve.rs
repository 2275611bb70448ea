//! Stage 1: what the book's entries come to. Survey to stations and
//! stretches, pipes and fittings looked up, levels and limits with what
//! stands in for those left empty; entries that cannot be used are named.

pub mod bends;
pub mod drive;
pub mod own_pipe;
pub mod parts;
pub mod profile;

use crate::book::{Approach, Book, BoreSizing, NozzleKind, RoughnessAge};
use crate::entry::{Entry, EntryTrouble};
use crate::field::{Field, Preset};
use crate::figure::{Figure, Gap, Trouble};
use bends::Turn;
use drive::Drive;
use hydraulics::air::standard_pressure;
use hydraulics::quantity::{AbsolutePressure, GaugePressure, Head, Level};
use hydraulics::water::Water;
use parts::{PlacedFitting, Stretch};
use profile::Profile;
use uom::si::f64::{Length, ThermodynamicTemperature, Velocity, VolumeRate};
use uom::si::length::meter;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

/// Something taken for granted because nothing was entered. Said on the
/// screen and on every print.
#[derive(Debug, Clone, PartialEq)]
#[non_exhaustive]
pub enum Assumption {
    /// The forebay stands at the level of the first station.
    ForebayAtFirstStation(Level),
    /// The highest forebay level is the normal one.
    HighestIsNormal(Level),
    /// The jets are at the level of the last station.
    JetsAtLastStation(Level),
    /// An entry left empty took its preset.
    Preset(Field, Preset),
    /// No altitude: the pressure of the air at sea level, the greatest.
    SeaLevel,
    /// Losses with the roughness of the aged or the new pipe.
    Roughness(RoughnessAge),
    /// The branches have the bore of the last stretch.
    BranchBoreOfLastStretch(Length),
    /// No entrance was entered: none is reckoned.
    NoEntrance,
    /// No warmest water was entered: boiling is judged with the coldest.
    WarmestWaterUnknown,
    /// The bends that come from the survey are rated as the pipe is.
    BendsRatedAsPipe,
    /// How the water comes to the intake.
    IntakeApproach(Approach),
    /// The open area follows the stroke in a straight line.
    StraightArea,
    /// Air carried as bubbles slows the wave: not the careful choice.
    EntrainedAir(f64),
    /// Plastics stiffen in the cold: the wave speeds stand on this wall.
    ColdWall {
        /// The wall's temperature.
        wall: ThermodynamicTemperature,
        /// The greatest factor on a modulus.
        stiffening: f64,
    },
    /// The jets open in the time they close in.
    OpeningAsClosing,
    /// A surge allowance entered for a stretch stands in for its lasting
    /// pressure.
    SurgeAllowance(crate::book::Id, GaugePressure),
}

/// Levels of the forebay.
#[derive(Debug, Clone, PartialEq)]
pub struct Forebay {
    /// Normal: decides power.
    pub normal: Figure<Level>,
    /// Highest: decides pressure.
    pub highest: Figure<Level>,
    /// Lowest, where entered.
    pub lowest: Figure<Option<Level>>,
}

/// Nozzles as resolved.
#[derive(Debug, Clone, PartialEq)]
pub struct JetSpec {
    /// How many, at least one.
    pub count: u32,
    /// Solved or given.
    pub sizing: BoreSizing,
    /// Fixed or needle.
    pub kind: NozzleKind,
    /// Bore where it is given.
    pub bore: Figure<Length>,
    /// Velocity coefficient.
    pub velocity_coefficient: f64,
    /// Contraction coefficient.
    pub contraction: f64,
    /// Loss coefficient of each branch on the branch velocity.
    pub branch_k: f64,
    /// Bore of each branch, where entered.
    pub branch_bore: Option<Length>,
    /// Rating of manifold, valve and nozzle, where entered.
    pub rating: Option<GaugePressure>,
}

/// Limits and margins as resolved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LimitValues {
    /// A margin under this share is tight.
    pub tight_margin: f64,
    /// Most share of gross head to lose.
    pub loss_cap: f64,
    /// Velocity to be cautioned about.
    pub velocity_high: Velocity,
    /// Safety factor on collapse.
    pub collapse_safety: f64,
    /// Spare pipe to order.
    pub spare: f64,
    /// Aged or new.
    pub roughness: RoughnessAge,
}

/// Everything stage 1 finds.
#[derive(Debug, Clone, PartialEq)]
pub struct Resolved {
    /// Design flow.
    pub design_flow: Figure<VolumeRate>,
    /// The line's profile.
    pub profile: Profile,
    /// Forebay levels.
    pub forebay: Forebay,
    /// Axis of the jets.
    pub jet_axis: Figure<Level>,
    /// Normal forebay level above the jets.
    pub gross_head: Figure<Head>,
    /// Stretches in the order of the line.
    pub stretches: Vec<Stretch>,
    /// Fittings on the line.
    pub fittings: Vec<PlacedFitting>,
    /// The turn at every station between two legs.
    pub turns: Vec<Turn>,
    /// Steepening at which air collects, fall per length.
    pub air_slope_change: Figure<f64>,
    /// How the water comes to the intake.
    pub intake_approach: Approach,
    /// Nozzles.
    pub jets: Figure<JetSpec>,
    /// How they are shut and opened.
    pub drive: Drive,
    /// Water as cold as it gets: the most viscous, so the most is lost.
    pub cold_water: Figure<Water>,
    /// Water as warm as it gets: boils first.
    pub warm_water: Figure<Water>,
    /// The coldest wall, where entered: the stiffest, so that waves are
    /// fastest.
    pub coldest_wall: Figure<Option<ThermodynamicTemperature>>,
    /// The warmest wall, which ratings stand on.
    pub warmest_wall: Figure<ThermodynamicTemperature>,
    /// Pressure of the air at the site.
    pub atmosphere: Figure<AbsolutePressure>,
    /// Limits and margins.
    pub limits: Figure<LimitValues>,
    /// What was taken for granted.
    pub assumptions: Vec<Assumption>,
    /// Every entry, station, stretch, fitting and pipe that cannot be used.
    pub troubles: Vec<Trouble>,
}

impl Resolved {
    /// Water as warm as it is known to get, which boils first: where no warmest
    /// was entered, the coldest, and the assumption says so. A wrong entry is
    /// not stood in for.
    pub(crate) fn warmest_known_water(&self) -> Figure<Water> {
        match &self.warm_water {
            Err(Gap::Unsettled(_)) => self.cold_water.clone(),
            known => known.clone(),
        }
    }
}

/// Reads entries, keeping note of what is assumed and what is wrong.
#[derive(Debug)]
pub(crate) struct Reader<'a> {
    pub(crate) book: &'a Book,
    pub(crate) assumptions: Vec<Assumption>,
    pub(crate) troubles: Vec<Trouble>,
}

impl Reader<'_> {
    /// The value, if one was entered.
    pub(crate) fn optional(&mut self, field: Field) -> Figure<Option<f64>> {
        let found = self.book.value(field);
        self.usable(field, found)
    }

    /// The value of an entry at hand, if one was entered.
    pub(crate) fn optional_of(&mut self, field: Field, entry: &Entry) -> Figure<Option<f64>> {
        self.usable(field, field.value_of(entry))
    }

    fn usable(
        &mut self,
        field: Field,
        found: Result<Option<f64>, EntryTrouble>,
    ) -> Figure<Option<f64>> {
        found.map_err(|why| {
            let trouble = Trouble::Entry(field, why);
            self.note(trouble.clone());
            Gap::Wrong(trouble)
        })
    }

    /// The value; its preset, noted, where none was entered; else a gap that
    /// asks for it.
    pub(crate) fn needed(&mut self, field: Field) -> Figure<f64> {
        match (self.optional(field)?, field.preset()) {
            (Some(value), _) => Ok(value),
            (None, Some(preset)) => {
                self.assume(Assumption::Preset(field, preset));
                Ok(preset.value)
            }
            (None, None) => Err(Gap::needs(field)),
        }
    }

    /// The value, with a preset that goes without saying (one piece, fully
    /// open).
    pub(crate) fn quietly(&mut self, field: Field, value: f64) -> Figure<f64> {
        Ok(self.optional(field)?.unwrap_or(value))
    }

    pub(crate) fn assume(&mut self, assumption: Assumption) {
        if !self.assumptions.contains(&assumption) {
            self.assumptions.push(assumption);
        }
    }

    pub(crate) fn note(&mut self, trouble: Trouble) {
        if !self.troubles.contains(&trouble) {
            self.troubles.push(trouble);
        }
    }

    fn level(&mut self, field: Field) -> Figure<Option<Level>> {
        Ok(self.optional(field)?.map(Level::from_m))
    }

    pub(crate) fn wrong<T>(&mut self, trouble: Trouble) -> Figure<T> {
        self.note(trouble.clone());
        Err(Gap::Wrong(trouble))
    }
}

/// Stage 1.
#[must_use]
pub fn resolve(book: &Book) -> Resolved {
    let mut reader = Reader {
        book,
        assumptions: Vec::new(),
        troubles: Vec::new(),
    };
    let r = &mut reader;

    let design_flow = r
        .needed(Field::DesignFlow)
        .map(VolumeRate::new::<cubic_meter_per_second>);
    let profile = profile::profile(r);
    let forebay = forebay(r, &profile);
    let jet_axis = jet_axis(r, &profile);
    let gross_head = gross_head(r, &forebay.normal, &jet_axis);
    let stretches = parts::stretches(r, &profile);
    let fittings = parts::fittings(r, &profile, &stretches);
    let turns = bends::turns(r, &profile, &stretches);
    let air_slope_change = r.needed(Field::AirSlopeChange);
    let jets = jets(r);
    let drive = drive::drive(r);
    let (cold_water, warm_water) = waters(r);
    let coldest_wall = r
        .optional(Field::ColdestWall)
        .map(|t| t.map(ThermodynamicTemperature::new::<degree_celsius>));
    let warmest_wall = warmest_wall(r);
    let atmosphere = atmosphere(r);
    let limits = limits(r);
    // Entries no figure needs yet are still refused where they are wrong.
    for field in [
        Field::TailLevel,
        Field::GaugeLevel,
        Field::BendRadius,
        Field::JointDeflection,
    ] {
        let _ = r.optional(field);
    }
    for i in 0..book.prices.pipes.len() {
        let _ = r.optional(Field::Price(i));
    }

    Resolved {
        design_flow,
        profile,
        forebay,
        jet_axis,
        gross_head,
        stretches,
        fittings,
        turns,
        air_slope_change,
        intake_approach: book.limits.intake_approach,
        jets,
        drive,
        cold_water,
        warm_water,
        coldest_wall,
        warmest_wall,
        atmosphere,
        limits,
        assumptions: reader.assumptions,
        troubles: reader.troubles,
    }
}

fn forebay(r: &mut Reader<'_>, profile: &Profile) -> Forebay {
    let normal = r
        .level(Field::ForebayNormal)
        .and_then(|entered| match entered {
            Some(level) => Ok(level),
            None => {
                let level = profile.first_level.clone()?;
                r.assume(Assumption::ForebayAtFirstStation(level));
                Ok(level)
            }
        });
    let highest = r
        .level(Field::ForebayHighest)
        .and_then(|entered| match entered {
            Some(level) => Ok(level),
            None => {
                let level = normal.clone()?;
                r.assume(Assumption::HighestIsNormal(level));
                Ok(level)
            }
        });
    let highest = match (&highest, &normal) {
        (Ok(h), Ok(n)) if h < n => r.wrong(Trouble::ForebayOrder {
            field: Field::ForebayHighest,
        }),
        _ => highest,
    };
    let lowest = r.level(Field::ForebayLowest);
    let lowest = match (&lowest, &normal) {
        (Ok(Some(l)), Ok(n)) if l > n => r.wrong(Trouble::ForebayOrder {
            field: Field::ForebayLowest,
        }),
        _ => lowest,
    };
    Forebay {
        normal,
        highest,
        lowest,
    }
}

fn jet_axis(r: &mut Reader<'_>, profile: &Profile) -> Figure<Level> {
    match r.level(Field::JetAxis)? {
        Some(level) => Ok(level),
        None => {
            let level = profile.last_level.clone()?;
            r.assume(Assumption::JetsAtLastStation(level));
            Ok(level)
        }
    }
}

fn gross_head(r: &mut Reader<'_>, forebay: &Figure<Level>, jets: &Figure<Level>) -> Figure<Head> {
    let (forebay, jets) = (forebay.clone()?, jets.clone()?);
    let head = forebay - jets;
    if head.m() > 0.0 {
        Ok(head)
    } else {
        r.wrong(Trouble::NoHead { forebay, jets })
    }
}

fn jets(r: &mut Reader<'_>) -> Figure<JetSpec> {
    let entered = &r.book.jets;
    let (sizing, kind) = (entered.sizing, entered.kind);
    let count = r.needed(Field::JetCount)?;
    let bore = r
        .optional(Field::JetBore)
        .and_then(|bore| match (sizing, bore) {
            (_, Some(m)) => Ok(Length::new::<meter>(m)),
            (_, None) => Err(Gap::needs(Field::JetBore)),
        });
    Ok(JetSpec {
        // A whole number from 1 to 6 by the field's own range.
        count: whole(count),
        sizing,
        kind,
        bore,
        velocity_coefficient: r.needed(Field::JetVelocityCoefficient)?,
        contraction: r.needed(Field::JetContraction)?,
        branch_k: r.needed(Field::BranchK)?,
        branch_bore: r.optional(Field::BranchBore)?.map(Length::new::<meter>),
        rating: r.optional(Field::JetRating)?.map(GaugePressure::from_pa),
    })
}

/// A whole number a field's range keeps small, as an integer.
pub(crate) fn whole(x: f64) -> u32 {
    #[expect(
        clippy::cast_possible_truncation,
        clippy::cast_sign_loss,
        reason = "the field's range keeps it between 1 and 100"
    )]
    {
        x as u32
    }
}

fn waters(r: &mut Reader<'_>) -> (Figure<Water>, Figure<Water>) {
    let at = |r: &mut Reader<'_>, degc: f64| {
        Water::at(ThermodynamicTemperature::new::<degree_celsius>(degc))
            .or_else(|why| r.wrong(Trouble::Water(why)))
    };
    let coldest = r.needed(Field::ColdestWater);
    let cold = coldest.clone().and_then(|t| at(r, t));
    let warm = r
        .optional(Field::WarmestWater)
        .and_then(|entered| match entered {
            Some(t) => {
                if coldest.as_ref().is_ok_and(|cold| t < *cold) {
                    return r.wrong(Trouble::TemperatureOrder {
                        field: Field::WarmestWater,
                    });
                }
                at(r, t)
            }
            None => Err(Gap::needs(Field::WarmestWater)),
        });
    (cold, warm)
}

fn warmest_wall(r: &mut Reader<'_>) -> Figure<ThermodynamicTemperature> {
    let coldest = r.optional(Field::ColdestWall);
    let warmest = r.needed(Field::WarmestWall)?;
    if let Ok(Some(cold)) = coldest
        && cold > warmest
    {
        return r.wrong(Trouble::TemperatureOrder {
            field: Field::WarmestWall,
        });
    }
    Ok(ThermodynamicTemperature::new::<degree_celsius>(warmest))
}

fn atmosphere(r: &mut Reader<'_>) -> Figure<AbsolutePressure> {
    let altitude = match r.optional(Field::Altitude)? {
        Some(m) => m,
        None => {
            r.assume(Assumption::SeaLevel);
            0.0
        }
    };
    // The field's range lies inside that of the standard atmosphere.
    standard_pressure(Length::new::<meter>(altitude)).map_err(|_| {
        Gap::Wrong(Trouble::Entry(
            Field::Altitude,
            EntryTrouble::OutOfRange {
                value: altitude,
                least: Field::Altitude.range().0,
                most: Field::Altitude.range().1,
            },
        ))
    })
}

fn limits(r: &mut Reader<'_>) -> Figure<LimitValues> {
    let roughness = r.book.limits.roughness;
    r.assume(Assumption::Roughness(roughness));
    Ok(LimitValues {
        tight_margin: r.needed(Field::TightMargin)?,
        loss_cap: r.needed(Field::LossCap)?,
        velocity_high: Velocity::new::<meter_per_second>(r.needed(Field::VelocityHigh)?),
        collapse_safety: r.needed(Field::CollapseSafety)?,
        spare: r.needed(Field::Spare)?,
        roughness,
    })
}
