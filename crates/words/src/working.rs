//! The working panel in words: what a figure and a number put in are called.

use crate::Words;
use crate::about::About;
use crate::text::{self, Key};
use workbook::measure::Measure;
use workbook::units::Kind;
use workbook::working::{FigureKey, Input, Term};

/// 1 m²/s in mm²/s.
const SQUARE_MILLIMETRES: f64 = 1e6;

impl Words {
    /// What a number put into a formula is.
    #[must_use]
    pub fn term(self, term: Term) -> &'static str {
        self.say(match term {
            Term::ForebayLevel => Key::TERM_FOREBAY_LEVEL,
            Term::JetLevel => Key::TERM_JET_LEVEL,
            Term::PipeLevel => Key::TERM_PIPE_LEVEL,
            Term::Flow => Key::TERM_FLOW,
            Term::Bore => Key::TERM_BORE,
            Term::OutsideDiameter => Key::TERM_OUTSIDE_DIAMETER,
            Term::WallLeast => Key::TERM_WALL_LEAST,
            Term::WallMean => Key::TERM_WALL_MEAN,
            Term::Lining => Key::TERM_LINING,
            Term::Length => Key::TERM_LENGTH,
            Term::PlanLength => Key::TERM_PLAN_LENGTH,
            Term::Roughness => Key::TERM_ROUGHNESS,
            Term::Viscosity => Key::TERM_VISCOSITY,
            Term::Reynolds => Key::TERM_REYNOLDS,
            Term::FrictionFactor => Key::TERM_FRICTION_FACTOR,
            Term::Velocity => Key::TERM_VELOCITY,
            Term::LossCoefficient => Key::TERM_LOSS_COEFFICIENT,
            Term::FrictionLoss => Key::TERM_FRICTION_LOSS,
            Term::LocalLoss => Key::TERM_LOCAL_LOSS,
            Term::BranchLoss => Key::TERM_BRANCH_LOSS,
            Term::Loss => Key::TERM_LOSS,
            Term::GrossHead => Key::TERM_GROSS_HEAD,
            Term::NetHead => Key::TERM_NET_HEAD,
            Term::VelocityCoefficient => Key::TERM_VELOCITY_COEFFICIENT,
            Term::ContractionCoefficient => Key::TERM_CONTRACTION,
            Term::Jets => Key::TERM_JETS,
            Term::WaterDensity => Key::TERM_WATER_DENSITY,
            Term::WallDensity => Key::TERM_WALL_DENSITY,
            Term::Gravity => Key::TERM_GRAVITY,
            Term::JetVelocity => Key::TERM_JET_VELOCITY,
            Term::JetDiameter => Key::TERM_JET_DIAMETER,
            Term::RatedPressure => Key::TERM_RATED_PRESSURE,
            Term::TemperatureFactor => Key::TERM_TEMPERATURE_FACTOR,
            Term::WallTemperature => Key::TERM_WALL_TEMPERATURE,
            Term::AllowableStress => Key::TERM_ALLOWABLE_STRESS,
            Term::WallNet => Key::TERM_WALL_NET,
            Term::JointFactor => Key::TERM_JOINT_FACTOR,
            Term::Standing => Key::TERM_STANDING,
            Term::Allowed => Key::TERM_ALLOWED,
            Term::BulkModulus => Key::TERM_BULK_MODULUS,
            Term::ModulusShort => Key::TERM_MODULUS_SHORT,
            Term::ModulusLong => Key::TERM_MODULUS_LONG,
            Term::Poisson => Key::TERM_POISSON,
            Term::WaveSpeed => Key::TERM_WAVE_SPEED,
            Term::Ovality => Key::TERM_OVALITY,
            Term::Safety => Key::TERM_SAFETY,
            Term::Atmosphere => Key::TERM_ATMOSPHERE,
            Term::SlopeAbove => Key::TERM_SLOPE_ABOVE,
            Term::SlopeBelow => Key::TERM_SLOPE_BELOW,
            Term::PlanTurn => Key::FIELD_STATION_TURN,
            Term::SurveyedFall => Key::TERM_SURVEYED_FALL,
            Term::KnownFall => Key::FIELD_KNOWN_FALL,
            Term::ApproachCoefficient => Key::TERM_APPROACH,
            Term::IntakeHeight => Key::TERM_INTAKE_HEIGHT,
            Term::GradeLevel => Key::TERM_GRADE_LEVEL,
            Term::Stiffening => Key::TERM_STIFFENING,
            Term::ClosingTime => Key::TERM_CLOSING_TIME,
            Term::Period => Key::TERM_PERIOD,
            Term::SurgePressure => Key::CHECK_SURGE,
            Term::Suction => Key::TERM_SUCTION,
            Term::CollapseAllowed => Key::TERM_COLLAPSE_ALLOWED,
            Term::AirShare => Key::FIELD_ENTRAINED_AIR,
            Term::GreatestPowerFlow => Key::TERM_GREATEST_POWER_FLOW,
        })
    }

    /// A number put into a formula, with its unit and every digit that means
    /// something. Density, viscosity and gravity have no kind of their own and
    /// are given in SI, viscosity in mm²/s.
    #[must_use]
    pub fn input(self, input: &Input) -> String {
        let (scale, unit) = match input.term {
            Term::WaterDensity | Term::WallDensity => (1.0, "kg/m³"),
            Term::Gravity => (1.0, "m/s²"),
            Term::Viscosity => (SQUARE_MILLIMETRES, "mm²/s"),
            _ => return self.full(input.value),
        };
        if input.value.kind != Kind::Number {
            return self.full(input.value);
        }
        let value = self.full(Measure::number(input.value.value * scale));
        format!("{value}\u{202f}{unit}")
    }
}

impl About<'_> {
    /// What a figure that shows its working is called, with its place.
    #[must_use]
    pub fn figure_name(self, key: FigureKey) -> String {
        let words = self.words;
        let (name, stretch) = match key {
            FigureKey::GrossHead => (Key::FIGURE_GROSS_HEAD, None),
            FigureKey::PipeLength => (Key::FIGURE_PIPE_LENGTH, None),
            FigureKey::Velocity(id) => (Key::FIGURE_VELOCITY, Some(id)),
            FigureKey::FrictionLoss(id) => (Key::TERM_FRICTION_LOSS, Some(id)),
            FigureKey::FittingLoss(id) => {
                return text::term_fitting_loss(words, &self.fitting(id));
            }
            FigureKey::BendLoss(id) => {
                return text::term_bend_loss(words, &self.station(id));
            }
            FigureKey::Deflection(id) => {
                return text::field_at(words, words.say(Key::FIGURE_DEFLECTION), &self.station(id));
            }
            FigureKey::ClosingError => (Key::FIGURE_CLOSING_ERROR, None),
            FigureKey::SubmergenceNeeded => (Key::FIGURE_SUBMERGENCE_NEEDED, None),
            FigureKey::ClassNeeded(id) => (Key::FIGURE_CLASS_NEEDED, Some(id)),
            FigureKey::Loss => (Key::FIGURE_HEAD_LOSS, None),
            FigureKey::LossShare => (Key::FIGURE_LOSS_SHARE, None),
            FigureKey::NetHead => (Key::FIGURE_NET_HEAD, None),
            FigureKey::JetVelocity => (Key::FIGURE_JET_VELOCITY, None),
            FigureKey::NozzleBore => (Key::FIGURE_NOZZLE_BORE, None),
            FigureKey::JetDiameter => (Key::FIGURE_JET_DIAMETER, None),
            FigureKey::JetPower => (Key::FIGURE_POWER_AT_JET, None),
            FigureKey::Lowest => (Key::FIGURE_LOWEST_PRESSURE, None),
            FigureKey::Bore(id) => (Key::FIGURE_BORE, Some(id)),
            FigureKey::Standing(id) => (Key::FIGURE_STATIC_PRESSURE, Some(id)),
            FigureKey::Allowable(id) => (Key::FIGURE_ALLOWED, Some(id)),
            FigureKey::Share(id) => (Key::FIGURE_SHARE_USED, Some(id)),
            FigureKey::WaveSpeed(id) => (Key::FIGURE_WAVE_SPEED, Some(id)),
            FigureKey::QuickRise(id) => (Key::FIGURE_QUICK_SURGE, Some(id)),
            FigureKey::SurgeHighest(id) => (Key::FIGURE_SURGE_HIGHEST, Some(id)),
            FigureKey::SurgeLowest(id) => (Key::FIGURE_SURGE_LOWEST, Some(id)),
            FigureKey::SurgeShare(id) => (Key::FIGURE_SURGE_SHARE, Some(id)),
            FigureKey::SurgeCollapse(id) => (Key::FIGURE_SURGE_COLLAPSE, Some(id)),
            FigureKey::Michaud => (Key::FIGURE_MICHAUD, None),
            FigureKey::Allievi => (Key::FIGURE_ALLIEVI, None),
            FigureKey::WaterStarting => (Key::FIGURE_WATER_STARTING, None),
            FigureKey::Collapse(id) => (Key::TERM_COLLAPSE_ALLOWED, Some(id)),
            FigureKey::GreatestPower => (Key::FIGURE_GREATEST_POWER_SHARE, None),
            FigureKey::Mass(id) => (Key::FIGURE_MASS, Some(id)),
        };
        match stretch {
            Some(id) => text::field_at(words, words.say(name), &self.stretch(id)),
            None => words.say(name).to_owned(),
        }
    }
}
