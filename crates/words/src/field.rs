//! Entries in words: label, what to enter, and why one cannot be used.

use crate::Words;
use crate::text::{self, Key};
use workbook::entry::EntryTrouble;
use workbook::field::{Field, OwnField};
use workbook::measure::Measure;
use workbook::reading::Unreadable;
use workbook::units::Kind;

/// Label, and what to enter where no figure is filled in.
fn keys(field: Field) -> (Key, Option<Key>) {
    let (label, hint) = match field {
        Field::DesignFlow => (Key::FIELD_DESIGN_FLOW, Key::HINT_DESIGN_FLOW),
        Field::ForebayHighest => (Key::FIELD_FOREBAY_HIGHEST, Key::HINT_FOREBAY_HIGHEST),
        Field::ForebayNormal => (Key::FIELD_FOREBAY_NORMAL, Key::HINT_FOREBAY_NORMAL),
        Field::ForebayLowest => (Key::FIELD_FOREBAY_LOWEST, Key::HINT_FOREBAY_LOWEST),
        Field::JetAxis => (Key::FIELD_JET_AXIS, Key::HINT_JET_AXIS),
        Field::TailLevel => (Key::FIELD_TAIL, Key::HINT_TAIL),
        Field::GaugeLevel => (Key::FIELD_GAUGE, Key::HINT_GAUGE),
        Field::Altitude => (Key::FIELD_ALTITUDE, Key::HINT_ALTITUDE),
        Field::ColdestWater => (Key::FIELD_COLDEST_WATER, Key::HINT_COLDEST_WATER),
        Field::WarmestWater => (Key::FIELD_WARMEST_WATER, Key::HINT_WARMEST_WATER),
        Field::ColdestWall => (Key::FIELD_COLDEST_WALL, Key::HINT_COLDEST_WALL),
        Field::WarmestWall => (Key::FIELD_WARMEST_WALL, Key::HINT_WARMEST_WALL),
        Field::StationDistance(_) => (Key::FIELD_STATION_DISTANCE, Key::HINT_STATION_DISTANCE),
        Field::StationLevel(_) => (Key::FIELD_STATION_LEVEL, Key::HINT_STATION_LEVEL),
        Field::StationForeSight(_) => (Key::FIELD_STATION_FORE_SIGHT, Key::HINT_STATION_FORE_SIGHT),
        Field::StationBackSight(_) => (Key::FIELD_STATION_BACK_SIGHT, Key::HINT_STATION_BACK_SIGHT),
        Field::StationStaffBack(_) => (Key::FIELD_STATION_STAFF_BACK, Key::HINT_STATION_STAFF_BACK),
        Field::StationStaffFore(_) => (Key::FIELD_STATION_STAFF_FORE, Key::HINT_STATION_STAFF_FORE),
        Field::StationTurn(_) => (Key::FIELD_STATION_TURN, Key::HINT_STATION_TURN),
        Field::KnownFall => (Key::FIELD_KNOWN_FALL, Key::HINT_KNOWN_FALL),
        Field::BendRadius => (Key::FIELD_BEND_RADIUS, Key::HINT_BEND_RADIUS),
        Field::StretchCover(_) => (Key::FIELD_STRETCH_COVER, Key::HINT_STRETCH_COVER),
        Field::FittingCount(_) => (Key::FIELD_FITTING_COUNT, Key::HINT_FITTING_COUNT),
        Field::FittingAngle(_) => (Key::FIELD_FITTING_ANGLE, Key::HINT_FITTING_ANGLE),
        Field::FittingRadius(_) => (Key::FIELD_FITTING_RADIUS, Key::HINT_FITTING_RADIUS),
        Field::FittingOpening(_) => (Key::FIELD_FITTING_OPENING, Key::HINT_FITTING_OPENING),
        Field::RackWidth(_) => (Key::FIELD_RACK_WIDTH, Key::HINT_RACK_WIDTH),
        Field::RackLength(_) => (Key::FIELD_RACK_LENGTH, Key::HINT_RACK_LENGTH),
        Field::RackBar(_) => (Key::FIELD_RACK_BAR, Key::HINT_RACK_BAR),
        Field::RackGap(_) => (Key::FIELD_RACK_GAP, Key::HINT_RACK_GAP),
        Field::RackClogged(_) => (Key::FIELD_RACK_CLOGGED, Key::HINT_RACK_CLOGGED),
        Field::FittingK(_) => (Key::FIELD_FITTING_K, Key::HINT_FITTING_K),
        Field::FittingRating(_) => (Key::FIELD_FITTING_RATING, Key::HINT_FITTING_RATING),
        Field::Own(_, own) => own_keys(own),
        Field::JetCount => (Key::FIELD_JET_COUNT, Key::HINT_JET_COUNT),
        Field::JetBore => (Key::FIELD_JET_BORE, Key::HINT_JET_BORE),
        Field::JetVelocityCoefficient => return (Key::FIELD_JET_CV, None),
        Field::JetContraction => return (Key::FIELD_JET_CONTRACTION, None),
        Field::BranchK => (Key::FIELD_BRANCH_K, Key::HINT_BRANCH_K),
        Field::BranchBore => (Key::FIELD_BRANCH_BORE, Key::HINT_BRANCH_BORE),
        Field::JetRating => (Key::FIELD_JET_RATING, Key::HINT_JET_RATING),
        Field::Price(_) => (Key::FIELD_PRICE, Key::HINT_PRICE),
        Field::SurgeAllowed(_) => (Key::FIELD_SURGE_ALLOWED, Key::HINT_SURGE_ALLOWED),
        Field::ClosingTime => (Key::FIELD_CLOSING_TIME, Key::HINT_CLOSING_TIME),
        Field::FastTime => (Key::FIELD_FAST_TIME, Key::HINT_FAST_TIME),
        Field::SlowTime => (Key::FIELD_SLOW_TIME, Key::HINT_SLOW_TIME),
        Field::Knee => (Key::FIELD_KNEE, Key::HINT_KNEE),
        Field::NeedleAngle => (Key::FIELD_NEEDLE_ANGLE, Key::HINT_NEEDLE_ANGLE),
        Field::NeedleTravel => (Key::FIELD_NEEDLE_TRAVEL, Key::HINT_NEEDLE_TRAVEL),
        Field::ValveStroke(_) => (Key::FIELD_VALVE_STROKE, Key::HINT_VALVE_STROKE),
        Field::ValveOpen(_) => (Key::FIELD_VALVE_OPEN, Key::HINT_VALVE_OPEN),
        Field::OpeningTime => (Key::FIELD_OPENING_TIME, Key::HINT_OPENING_TIME),
        Field::SlamTime => (Key::FIELD_SLAM_TIME, Key::HINT_SLAM_TIME),
        Field::EntrainedAir => (Key::FIELD_ENTRAINED_AIR, Key::HINT_ENTRAINED_AIR),
        Field::SlowestClosing => (Key::FIELD_SLOWEST_CLOSING, Key::HINT_SLOWEST_CLOSING),
        Field::ClosingReserve => (Key::FIELD_CLOSING_RESERVE, Key::HINT_CLOSING_RESERVE),
        Field::TightMargin => (Key::FIELD_TIGHT_MARGIN, Key::HINT_TIGHT_MARGIN),
        Field::LossCap => (Key::FIELD_LOSS_CAP, Key::HINT_LOSS_CAP),
        Field::VelocityHigh => (Key::FIELD_VELOCITY_HIGH, Key::HINT_VELOCITY_HIGH),
        Field::CollapseSafety => (Key::FIELD_COLLAPSE_SAFETY, Key::HINT_COLLAPSE_SAFETY),
        Field::Spare => (Key::FIELD_SPARE, Key::HINT_SPARE),
        Field::JointDeflection => (Key::FIELD_JOINT_DEFLECTION, Key::HINT_JOINT_DEFLECTION),
        Field::AirSlopeChange => (Key::FIELD_AIR_SLOPE_CHANGE, Key::HINT_AIR_SLOPE_CHANGE),
    };
    (label, Some(hint))
}

fn own_keys(own: OwnField) -> (Key, Key) {
    match own {
        OwnField::OutsideDiameter => (Key::FIELD_OWN_OUTSIDE, Key::HINT_OWN_OUTSIDE),
        OwnField::Bore => (Key::FIELD_OWN_BORE, Key::HINT_OWN_BORE),
        OwnField::Wall => (Key::FIELD_OWN_WALL, Key::HINT_OWN_WALL),
        OwnField::Lining => (Key::FIELD_OWN_LINING, Key::HINT_OWN_LINING),
        OwnField::Rating => (Key::FIELD_OWN_RATING, Key::HINT_OWN_RATING),
        OwnField::RatingTemperature => (
            Key::FIELD_OWN_RATING_TEMPERATURE,
            Key::HINT_OWN_RATING_TEMPERATURE,
        ),
        OwnField::Yield => (Key::FIELD_OWN_YIELD, Key::HINT_OWN_YIELD),
        OwnField::Tensile => (Key::FIELD_OWN_TENSILE, Key::HINT_OWN_TENSILE),
        OwnField::JointFactor => (Key::FIELD_OWN_JOINT, Key::HINT_OWN_JOINT),
        OwnField::Corrosion => (Key::FIELD_OWN_CORROSION, Key::HINT_OWN_CORROSION),
        OwnField::MillTolerance => (Key::FIELD_OWN_MILL, Key::HINT_OWN_MILL),
        OwnField::Thread => (Key::FIELD_OWN_THREAD, Key::HINT_OWN_THREAD),
        OwnField::RoughnessNew => (Key::FIELD_OWN_ROUGHNESS_NEW, Key::HINT_OWN_ROUGHNESS_NEW),
        OwnField::RoughnessAged => (Key::FIELD_OWN_ROUGHNESS_AGED, Key::HINT_OWN_ROUGHNESS_AGED),
        OwnField::ModulusShort => (Key::FIELD_OWN_MODULUS_SHORT, Key::HINT_OWN_MODULUS_SHORT),
        OwnField::ModulusLong => (Key::FIELD_OWN_MODULUS_LONG, Key::HINT_OWN_MODULUS_LONG),
        OwnField::SupplyLength => (Key::FIELD_OWN_SUPPLY, Key::HINT_OWN_SUPPLY),
    }
}

impl Words {
    /// The label above a field: short, without its place.
    #[must_use]
    pub fn field_label(self, field: Field) -> &'static str {
        self.say(keys(field).0)
    }

    /// What to enter there, in a sentence or two.
    #[must_use]
    pub fn field_hint(self, field: Field) -> String {
        let number = |x: f64| self.figure(Measure::number(x));
        match (field, keys(field).1) {
            (_, Some(hint)) => self.say(hint).to_owned(),
            (Field::JetContraction, None) => text::hint_jet_contraction(self, &number(0.6)),
            (_, None) => text::hint_jet_cv(self, &number(0.97), &number(0.98)),
        }
    }

    /// What stands in while a field is empty: "Left empty: 5 °C (common
    /// practice)."; none where nothing does.
    #[must_use]
    pub fn field_preset(self, field: Field) -> Option<String> {
        let preset = field.preset()?;
        let value = self.brief(Measure::new(preset.value, field.kind()));
        Some(text::hint_preset(self, &value, &self.source(preset.source)))
    }

    /// Why an entry cannot be used, and what to type instead.
    #[must_use]
    pub fn entry_trouble(self, field: Field, trouble: &EntryTrouble) -> String {
        let kind = field.kind();
        let full = |x: f64| self.full(Measure::new(x, kind));
        match trouble {
            EntryTrouble::Unreadable(why) => self.unreadable(kind, why),
            EntryTrouble::Unit { unit } => text::entry_unit(self, unit, self.name(kind)),
            EntryTrouble::Disagrees { text, kept } => {
                text::entry_disagrees(self, &full(*text), &full(*kept))
            }
            EntryTrouble::OutOfRange { value, least, most } => {
                let limit = |x: f64| self.brief(Measure::new(x, kind));
                text::entry_out_of_range(self, &full(*value), &limit(*least), &limit(*most))
            }
            EntryTrouble::NotWhole { value } => text::entry_not_whole(self, &full(*value)),
            _ => self.say(Key::ENTRY_UNUSABLE).to_owned(),
        }
    }

    /// Why a text does not read as a number of its kind.
    #[must_use]
    pub fn unreadable(self, kind: Kind, why: &Unreadable) -> String {
        let number = |x: f64| self.figure(Measure::number(x));
        match why {
            Unreadable::NotANumber => text::entry_not_a_number(self, &number(12.5)),
            Unreadable::UnknownUnit { unit } => {
                let known: Vec<&str> = kind
                    .units()
                    .iter()
                    .map(|u| u.symbol)
                    .filter(|s| !s.is_empty())
                    .collect();
                if known.is_empty() {
                    text::entry_no_unit(self, unit)
                } else {
                    text::entry_unknown_unit(self, unit, self.name(kind), &known.join(", "))
                }
            }
            // Without grouping, as it is to be typed.
            Unreadable::Marks => text::entry_marks(self, &self.ungrouped(1234.5)),
            Unreadable::OutOfRange => self.say(Key::ENTRY_TOO_LARGE).to_owned(),
            Unreadable::Negative => self.say(Key::ENTRY_NEGATIVE).to_owned(),
            Unreadable::PlusMinus => text::entry_plus_minus(self, &number(0.5)),
            _ => self.say(Key::ENTRY_UNUSABLE).to_owned(),
        }
    }
}
