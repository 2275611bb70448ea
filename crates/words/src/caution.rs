//! Cautions and assumptions in words.

use crate::about::About;
use crate::name::lower;
use crate::text::{self, Key};
use hydraulics::quantity::PipeLength;
use workbook::book::{Approach, RoughnessAge};
use workbook::caution::Caution;
use workbook::measure::Measure;
use workbook::resolve::Assumption;
use workbook::resolve::profile::SIGHTS_DIFFER_DEG;
use workbook::units::Kind;

/// A caution as printed.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct CautionText {
    /// A few words, without full stop.
    pub title: &'static str,
    /// What can happen, where, and what to do, in whole sentences.
    pub body: String,
}

impl About<'_> {
    /// A caution: its title, and what to do.
    #[must_use]
    pub fn caution(self, caution: &Caution) -> CautionText {
        let (title, body, places) = self.caution_parts(caution);
        let mut body = body;
        if let Some(places) = places {
            body.push(' ');
            body.push_str(&places);
        }
        CautionText {
            title: self.words.say(title),
            body,
        }
    }

    /// Title, body, and what this book adds to it.
    fn caution_parts(self, caution: &Caution) -> (Key, String, Option<String>) {
        let words = self.words;
        let plain = |title, body| (title, words.say(body).to_owned(), None);
        let stretches = |ids: &[u32], said: fn(crate::Words, &str) -> String| {
            (!ids.is_empty()).then(|| said(words, &self.stretches(ids)))
        };
        match caution {
            Caution::SurgeUnsolved => plain(Key::CAUTION_SURGE, Key::CAUTION_SURGE_BODY),
            Caution::ColumnParts { event, at } => (
                Key::CAUTION_COLUMN,
                text::caution_column_body(words, &lower(words.name(*event)), &words.figure(*at)),
                None,
            ),
            Caution::Slam {
                highest,
                beyond,
                parts,
            } => (
                Key::CAUTION_SLAM,
                text::caution_slam_body(words, &words.figure(*highest)),
                self.beyond(beyond, *parts),
            ),
            Caution::JetBlocked {
                highest,
                beyond,
                parts,
            } => (
                Key::CAUTION_BLOCKED,
                text::caution_blocked_body(words, &words.figure(*highest)),
                self.beyond(beyond, *parts),
            ),
            Caution::ClosingTimeBuiltIn { closing } => (
                Key::CAUTION_CLOSING,
                text::caution_closing_body(words, &words.figure(*closing)),
                None,
            ),
            Caution::PlasticsTire { stretches } => (
                Key::CAUTION_PLASTICS,
                text::caution_plastics_body(words, &self.stretches(stretches)),
                None,
            ),
            Caution::EntrappedAir { drawn } => (
                Key::CAUTION_ENTRAPPED_AIR,
                words.say(Key::CAUTION_ENTRAPPED_AIR_BODY).to_owned(),
                drawn.then(|| words.say(Key::CAUTION_ENTRAPPED_AIR_DRAWN).to_owned()),
            ),
            Caution::TemperatureAndSun { bare } => (
                Key::CAUTION_TEMPERATURE,
                words.say(Key::CAUTION_TEMPERATURE_BODY).to_owned(),
                stretches(bare, text::caution_temperature_where),
            ),
            Caution::SubAtmospheric { lengths, boils } => {
                let places: Vec<String> = lengths
                    .iter()
                    .map(|(from, to)| {
                        text::place_from_to(words, &words.figure(*from), &words.figure(*to))
                    })
                    .collect();
                (
                    Key::CAUTION_SUB_ATMOSPHERIC,
                    text::caution_sub_atmospheric_body(words, &places.join(", ")),
                    boils.then(|| words.say(Key::CAUTION_SUB_ATMOSPHERIC_BOILS).to_owned()),
                )
            }
            Caution::CollapseAndVents { weak } => (
                Key::CAUTION_COLLAPSE,
                words.say(Key::CAUTION_COLLAPSE_BODY).to_owned(),
                stretches(weak, text::caution_collapse_where),
            ),
            Caution::VelocityAndSilt { fast } => (
                Key::CAUTION_VELOCITY,
                words.say(Key::CAUTION_VELOCITY_BODY).to_owned(),
                fast.map(|(stretch, velocity)| {
                    let velocity = words.figure(velocity);
                    text::caution_velocity_where(words, &velocity, &self.stretch(stretch))
                }),
            ),
            Caution::Freezing => plain(Key::CAUTION_FREEZING, Key::CAUTION_FREEZING_BODY),
            Caution::ThrustAtBends => plain(Key::CAUTION_THRUST, Key::CAUTION_THRUST_BODY),
            Caution::WeakJoints { unrated } => {
                let names: Vec<String> = unrated.iter().map(|id| self.fitting(*id)).collect();
                (
                    Key::CAUTION_JOINTS,
                    words.say(Key::CAUTION_JOINTS_BODY).to_owned(),
                    (!names.is_empty())
                        .then(|| text::caution_joints_where(words, &names.join(", "))),
                )
            }
            Caution::DepressuriseBeforeWork => plain(Key::CAUTION_WORK, Key::CAUTION_WORK_BODY),
            Caution::LocalCodesAndReview => plain(Key::CAUTION_CODES, Key::CAUTION_CODES_BODY),
            Caution::SourceNotSeen { stretches } => (
                Key::CAUTION_SOURCE,
                text::caution_source_body(words, &self.stretches(stretches)),
                None,
            ),
            Caution::RegimeUncertain => plain(Key::CAUTION_REGIME, Key::CAUTION_REGIME_BODY),
            Caution::NearGreatestPower => plain(
                Key::CAUTION_GREATEST_POWER,
                Key::CAUTION_GREATEST_POWER_BODY,
            ),
            Caution::LossOverCap { share, cap } => (
                Key::CAUTION_LOSS,
                text::caution_loss_body(
                    words,
                    &words.figure(Measure::share(*share)),
                    &words.brief(Measure::share(*cap)),
                ),
                None,
            ),
            Caution::AirCollects { high, steepens } => {
                let mut places = Vec::new();
                if !high.is_empty() {
                    places.push(text::caution_air_high(words, &self.stations(high)));
                }
                if !steepens.is_empty() {
                    places.push(text::caution_air_steepens(words, &self.stations(steepens)));
                }
                (
                    Key::CAUTION_AIR,
                    words.say(Key::CAUTION_AIR_BODY).to_owned(),
                    Some(places.join(" ")),
                )
            }
            Caution::WaterStays { drains } => (
                Key::CAUTION_WATER_STAYS,
                text::caution_water_stays_body(words, &self.stations(drains)),
                None,
            ),
            Caution::Submergence { found, needed } => (
                Key::CAUTION_SUBMERGENCE,
                text::caution_submergence_body(
                    words,
                    &words.figure(*found),
                    &words.figure(*needed),
                ),
                None,
            ),
            Caution::SightsDiffer { stations } => (
                Key::CAUTION_SIGHTS,
                text::caution_sights_body(
                    words,
                    &words.brief(Measure::new(SIGHTS_DIFFER_DEG, Kind::Angle)),
                    &self.stations(stations),
                ),
                None,
            ),
            Caution::Invented => plain(Key::CAUTION_INVENTED, Key::CAUTION_INVENTED_BODY),
            _ => plain(Key::CAUTION_OTHER, Key::CAUTION_OTHER_BODY),
        }
    }

    /// What an event that does not count takes beyond its limits.
    fn beyond(self, beyond: &[u32], parts: Option<PipeLength>) -> Option<String> {
        let words = self.words;
        let mut said = Vec::new();
        if !beyond.is_empty() {
            said.push(text::caution_beyond(words, &self.stretches(beyond)));
        }
        if let Some(at) = parts {
            said.push(text::caution_beyond_parts(words, &words.figure(at)));
        }
        (!said.is_empty()).then(|| said.join(" "))
    }

    /// Something taken for granted, in one sentence.
    #[must_use]
    pub fn assumption(self, assumption: &Assumption) -> String {
        let words = self.words;
        match assumption {
            Assumption::ForebayAtFirstStation(level) => {
                text::assumption_forebay(words, &words.brief(*level))
            }
            Assumption::HighestIsNormal(level) => {
                text::assumption_highest(words, &words.brief(*level))
            }
            Assumption::JetsAtLastStation(level) => {
                text::assumption_jets(words, &words.brief(*level))
            }
            Assumption::Preset(field, preset) => text::assumption_preset(
                words,
                &self.field(*field),
                &words.brief(Measure::new(preset.value, field.kind())),
                &words.source(preset.source),
            ),
            Assumption::SeaLevel => words.say(Key::ASSUMPTION_SEA_LEVEL).to_owned(),
            Assumption::Roughness(RoughnessAge::Aged) => {
                words.say(Key::ASSUMPTION_ROUGHNESS_AGED).to_owned()
            }
            Assumption::Roughness(RoughnessAge::New) => {
                words.say(Key::ASSUMPTION_ROUGHNESS_NEW).to_owned()
            }
            Assumption::BranchBoreOfLastStretch(bore) => {
                text::assumption_branch_bore(words, &words.figure(Measure::bore(*bore)))
            }
            Assumption::NoEntrance => words.say(Key::ASSUMPTION_NO_ENTRANCE).to_owned(),
            Assumption::BendsRatedAsPipe => words.say(Key::ASSUMPTION_BENDS_RATED).to_owned(),
            Assumption::IntakeApproach(Approach::Lateral) => {
                words.say(Key::ASSUMPTION_APPROACH_LATERAL).to_owned()
            }
            Assumption::IntakeApproach(Approach::Symmetrical) => {
                words.say(Key::ASSUMPTION_APPROACH_SYMMETRICAL).to_owned()
            }
            Assumption::StraightArea => words.say(Key::ASSUMPTION_STRAIGHT_AREA).to_owned(),
            Assumption::EntrainedAir(share) => {
                text::assumption_entrained_air(words, &words.figure(Measure::share(*share)))
            }
            Assumption::ColdWall { wall, stiffening } => text::assumption_cold_wall(
                words,
                &words.figure(*wall),
                &words.figure(Measure::number(*stiffening)),
                &words.source(pipes::COLD_SOURCE),
            ),
            Assumption::OpeningAsClosing => {
                words.say(Key::ASSUMPTION_OPENING_AS_CLOSING).to_owned()
            }
            Assumption::SurgeAllowance(stretch, pressure) => text::assumption_surge_allowance(
                words,
                &words.figure(*pressure),
                &self.stretch(*stretch),
            ),
            Assumption::WarmestWaterUnknown => words.say(Key::ASSUMPTION_WARMEST_WATER).to_owned(),
            _ => words.say(Key::ASSUMPTION_OTHER).to_owned(),
        }
    }
}
