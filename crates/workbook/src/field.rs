//! The name of every entry in a book: what it measures, the range it takes,
//! the value it has when left empty, and where in the book it stands.
//!
//! Findings point at entries by [`Field`], and so does the page: one name,
//! one field, one reason beside it.

use crate::book::{Book, FittingKind, Id, SurveyWay};
use crate::entry::{Entry, EntryTrouble};
use crate::units::Kind;

/// An entry of the book.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Field {
    /// Flow the scheme is sized for.
    DesignFlow,
    /// Highest forebay level.
    ForebayHighest,
    /// Normal forebay level.
    ForebayNormal,
    /// Lowest forebay level.
    ForebayLowest,
    /// Axis of the jets.
    JetAxis,
    /// Tail water level.
    TailLevel,
    /// Level of the pressure gauge.
    GaugeLevel,
    /// Altitude above the sea.
    Altitude,
    /// Coldest water.
    ColdestWater,
    /// Warmest water.
    WarmestWater,
    /// Coldest wall.
    ColdestWall,
    /// Warmest wall.
    WarmestWall,
    /// Distance of a station.
    StationDistance(Id),
    /// Level of a station.
    StationLevel(Id),
    /// Sight from the station before to this one.
    StationForeSight(Id),
    /// Sight from this station back to the one before.
    StationBackSight(Id),
    /// Staff or hose reading at the station before.
    StationStaffBack(Id),
    /// Staff or hose reading at this station.
    StationStaffFore(Id),
    /// Turn of the line on the plan at a station.
    StationTurn(Id),
    /// Known fall from the first station to the last.
    KnownFall,
    /// Radius over bore of the bends that come from the survey.
    BendRadius,
    /// Cover over a stretch.
    StretchCover(Id),
    /// How many of a fitting.
    FittingCount(Id),
    /// Angle of a bend.
    FittingAngle(Id),
    /// Bend radius over bore.
    FittingRadius(Id),
    /// Opening of a valve.
    FittingOpening(Id),
    /// Wetted width of a rack.
    RackWidth(Id),
    /// Wetted length of a rack along its bars.
    RackLength(Id),
    /// Thickness of a rack's bars.
    RackBar(Id),
    /// Gap between a rack's bars.
    RackGap(Id),
    /// Share of a rack that is clogged.
    RackClogged(Id),
    /// Loss coefficient of the user's own.
    FittingK(Id),
    /// Rating of a fitting.
    FittingRating(Id),
    /// One of the figures of a pipe of the user's own.
    Own(Id, OwnField),
    /// How many nozzles.
    JetCount,
    /// Bore of each nozzle.
    JetBore,
    /// Velocity coefficient.
    JetVelocityCoefficient,
    /// Contraction coefficient.
    JetContraction,
    /// Loss coefficient of each branch.
    BranchK,
    /// Bore of each branch.
    BranchBore,
    /// Rating of manifold, valve and nozzle.
    JetRating,
    /// Price of the pipe at this place in the list.
    Price(usize),
    /// Pressure a stretch may see in a surge.
    SurgeAllowed(Id),
    /// Time from full stroke to shut.
    ClosingTime,
    /// Full stroke at the fast one of two speeds.
    FastTime,
    /// Full stroke at the slow one of two speeds.
    SlowTime,
    /// Stroke at which the slow speed begins.
    Knee,
    /// Half angle at the needle's tip.
    NeedleAngle,
    /// Travel of the needle.
    NeedleTravel,
    /// Stroke of the valve's table at this row.
    ValveStroke(usize),
    /// Open share of the valve's table at this row.
    ValveOpen(usize),
    /// Time from shut to full stroke.
    OpeningTime,
    /// Time in which a slammed guard valve shuts.
    SlamTime,
    /// Share of air carried as bubbles.
    EntrainedAir,
    /// Slowest closing time looked at.
    SlowestClosing,
    /// Reserve on the closing time ordered.
    ClosingReserve,
    /// Share under which a margin is tight.
    TightMargin,
    /// Most share of head to lose.
    LossCap,
    /// Velocity to be cautioned about.
    VelocityHigh,
    /// Safety factor on collapse.
    CollapseSafety,
    /// Spare pipe to order.
    Spare,
    /// Deflection taken up without a bend piece.
    JointDeflection,
    /// Steepening at which air collects.
    AirSlopeChange,
}

/// A figure of a pipe of the user's own.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum OwnField {
    /// Outside diameter.
    OutsideDiameter,
    /// Bore.
    Bore,
    /// Smallest wall.
    Wall,
    /// Thickness of the lining.
    Lining,
    /// Pressure rating.
    Rating,
    /// Temperature the rating stands to.
    RatingTemperature,
    /// Yield strength.
    Yield,
    /// Tensile strength.
    Tensile,
    /// Joint factor.
    JointFactor,
    /// Corrosion allowance.
    Corrosion,
    /// Mill tolerance.
    MillTolerance,
    /// Depth of thread.
    Thread,
    /// Roughness new.
    RoughnessNew,
    /// Roughness aged.
    RoughnessAged,
    /// Short-term modulus.
    ModulusShort,
    /// Long-term modulus.
    ModulusLong,
    /// Supply length.
    SupplyLength,
}

/// Every [`OwnField`], in the order they are asked for.
pub const OWN_FIELDS: [OwnField; 17] = [
    OwnField::OutsideDiameter,
    OwnField::Bore,
    OwnField::Wall,
    OwnField::Lining,
    OwnField::Rating,
    OwnField::RatingTemperature,
    OwnField::Yield,
    OwnField::Tensile,
    OwnField::JointFactor,
    OwnField::Corrosion,
    OwnField::MillTolerance,
    OwnField::Thread,
    OwnField::RoughnessNew,
    OwnField::RoughnessAged,
    OwnField::ModulusShort,
    OwnField::ModulusLong,
    OwnField::SupplyLength,
];

/// What stands in for an entry left empty, in the base unit, and why.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Preset {
    /// The value, in the base unit.
    pub value: f64,
    /// Where it comes from.
    pub source: &'static str,
}

const COMMON_PRACTICE: &str = "common practice";

impl Field {
    /// What the entry measures.
    #[must_use]
    pub fn kind(self) -> Kind {
        match self {
            Field::DesignFlow => Kind::Flow,
            Field::ForebayHighest
            | Field::ForebayNormal
            | Field::ForebayLowest
            | Field::JetAxis
            | Field::TailLevel
            | Field::GaugeLevel
            | Field::StationLevel(_) => Kind::Level,
            Field::Altitude => Kind::Level,
            Field::ColdestWater | Field::WarmestWater | Field::ColdestWall | Field::WarmestWall => {
                Kind::Temperature
            }
            Field::KnownFall => Kind::Head,
            Field::StationForeSight(_)
            | Field::StationBackSight(_)
            | Field::StationTurn(_)
            | Field::JointDeflection => Kind::Angle,
            Field::StationDistance(_)
            | Field::StationStaffBack(_)
            | Field::StationStaffFore(_)
            | Field::StretchCover(_)
            | Field::RackWidth(_)
            | Field::RackLength(_) => Kind::Distance,
            Field::RackBar(_) | Field::RackGap(_) => Kind::Bore,
            Field::FittingCount(_) | Field::JetCount => Kind::Number,
            Field::FittingAngle(_) => Kind::Angle,
            Field::FittingRadius(_)
            | Field::BendRadius
            | Field::FittingK(_)
            | Field::JetVelocityCoefficient
            | Field::JetContraction
            | Field::BranchK
            | Field::CollapseSafety => Kind::Number,
            Field::FittingOpening(_)
            | Field::RackClogged(_)
            | Field::TightMargin
            | Field::LossCap
            | Field::Spare
            | Field::AirSlopeChange => Kind::Share,
            Field::FittingRating(_) | Field::JetRating | Field::SurgeAllowed(_) => Kind::Pressure,
            Field::JetBore | Field::BranchBore | Field::NeedleTravel => Kind::Bore,
            Field::ClosingTime
            | Field::FastTime
            | Field::SlowTime
            | Field::OpeningTime
            | Field::SlamTime
            | Field::SlowestClosing => Kind::Time,
            Field::NeedleAngle => Kind::Angle,
            Field::Knee
            | Field::ValveStroke(_)
            | Field::ValveOpen(_)
            | Field::EntrainedAir
            | Field::ClosingReserve => Kind::Share,
            Field::Price(_) => Kind::PricePerLength,
            Field::VelocityHigh => Kind::Velocity,
            Field::Own(_, own) => own.kind(),
        }
    }

    /// Least and greatest value taken, in the base unit; outside it the entry
    /// is refused with the reason, never moved.
    #[must_use]
    pub fn range(self) -> (f64, f64) {
        match self {
            Field::DesignFlow => (1e-5, 100.0),
            Field::ForebayHighest
            | Field::ForebayNormal
            | Field::ForebayLowest
            | Field::JetAxis
            | Field::TailLevel
            | Field::GaugeLevel
            | Field::StationLevel(_) => (-500.0, 9000.0),
            // The range of the standard atmosphere used, and of settlements.
            Field::Altitude => (-430.0, 6000.0),
            Field::ColdestWater | Field::WarmestWater => (0.0, 60.0),
            Field::ColdestWall | Field::WarmestWall => (-40.0, 90.0),
            Field::StationDistance(_) => (0.0, 50_000.0),
            Field::StationForeSight(_) | Field::StationBackSight(_) => (-90.0, 90.0),
            // Sums of several steps, too.
            Field::StationStaffBack(_) | Field::StationStaffFore(_) => (0.0, 500.0),
            Field::StationTurn(_) => (-180.0, 180.0),
            Field::KnownFall => (0.0, 5000.0),
            // The range of the bend's equation, hydraulics::fittings.
            Field::BendRadius => (0.5, 20.0),
            Field::JointDeflection => (0.0, 45.0),
            Field::AirSlopeChange => (0.005, 1.0),
            Field::StretchCover(_) => (0.0, 10.0),
            Field::FittingCount(_) => (1.0, 100.0),
            Field::FittingAngle(_) => (0.5, 180.0),
            Field::FittingRadius(_) => (0.5, 50.0),
            Field::FittingOpening(_) => (0.05, 1.0),
            Field::RackWidth(_) | Field::RackLength(_) => (0.05, 50.0),
            Field::RackBar(_) => (0.0005, 0.1),
            Field::RackGap(_) => (0.001, 1.0),
            Field::RackClogged(_) => (0.0, 0.9),
            Field::FittingK(_) | Field::BranchK => (0.0, 1000.0),
            Field::FittingRating(_) | Field::JetRating | Field::SurgeAllowed(_) => (1e4, 1e8),
            // 0 is at once. Above ten minutes nothing is shut by a drive.
            Field::ClosingTime | Field::FastTime | Field::SlowTime | Field::OpeningTime => {
                (0.0, 600.0)
            }
            Field::SlamTime => (0.0, 60.0),
            Field::SlowestClosing => (1.0, 600.0),
            Field::Knee => (0.02, 0.95),
            Field::NeedleAngle => (5.0, 80.0),
            Field::NeedleTravel => (0.001, 1.0),
            Field::ValveStroke(_) | Field::ValveOpen(_) => (0.0, 1.0),
            // The range of the wave speed's equation, hydraulics::surge.
            Field::EntrainedAir => (0.0, 0.02),
            Field::ClosingReserve => (0.0, 5.0),
            Field::JetCount => (1.0, 6.0),
            Field::JetBore => (0.001, 1.0),
            Field::JetVelocityCoefficient => (0.8, 1.0),
            Field::JetContraction => (0.5, 1.0),
            Field::BranchBore => (0.005, 4.0),
            Field::Price(_) => (0.0, 1e9),
            Field::TightMargin => (0.0, 0.9),
            Field::LossCap => (0.001, 0.9),
            Field::VelocityHigh => (0.1, 20.0),
            Field::CollapseSafety => (1.0, 10.0),
            Field::Spare => (0.0, 0.5),
            Field::Own(_, own) => own.range(),
        }
    }

    /// Whether only whole numbers make sense.
    #[must_use]
    pub fn whole(self) -> bool {
        matches!(self, Field::FittingCount(_) | Field::JetCount)
    }

    /// The value of an entry of this name in its base unit, checked against
    /// kind and range; none where nothing was entered.
    ///
    /// # Errors
    /// [`EntryTrouble`] where what was entered cannot be used.
    pub fn value_of(self, entry: &Entry) -> Result<Option<f64>, EntryTrouble> {
        let Some(value) = entry.usable(self.kind())? else {
            return Ok(None);
        };
        let (least, most) = self.range();
        if !(least..=most).contains(&value) {
            return Err(EntryTrouble::OutOfRange { value, least, most });
        }
        if self.whole() && value.fract() != 0.0 {
            return Err(EntryTrouble::NotWhole { value });
        }
        Ok(Some(value))
    }

    /// What stands in when the entry is left empty, if anything does.
    #[must_use]
    pub fn preset(self) -> Option<Preset> {
        let common = |value| {
            Some(Preset {
                value,
                source: COMMON_PRACTICE,
            })
        };
        match self {
            Field::JetCount | Field::FittingCount(_) | Field::FittingOpening(_) => common(1.0),
            Field::JetVelocityCoefficient => common(0.97),
            // A jet that fills its outlet; a sharp-edged plate would contract.
            Field::JetContraction => common(1.0),
            Field::BranchK => common(0.2),
            Field::TightMargin | Field::LossCap => common(0.10),
            // Half clogged is how a rack is found after a storm.
            Field::RackClogged(_) => common(0.5),
            Field::VelocityHigh => common(3.0),
            // At once: the worst there is.
            Field::SlamTime => common(0.0),
            // What a hand wheel or a geared drive still takes.
            Field::SlowestClosing => common(60.0),
            Field::ClosingReserve | Field::Knee => common(0.25),
            // A point of 50 degrees.
            Field::NeedleAngle => common(25.0),
            Field::CollapseSafety => common(2.0),
            Field::Spare => common(0.05),
            Field::ColdestWater => common(5.0),
            Field::FittingAngle(_) => common(90.0),
            Field::FittingRadius(_) | Field::BendRadius => common(1.5),
            // What a push-fit socket of middling bore takes; each maker gives
            // its own.
            Field::JointDeflection => common(3.0),
            Field::AirSlopeChange => common(0.1),
            Field::Own(_, OwnField::JointFactor) => Some(Preset {
                value: 0.85,
                source: "ASME B31.3 Table 302.3.4, longitudinal weld not fully examined",
            }),
            Field::Own(_, OwnField::Corrosion) => common(0.001),
            Field::Own(_, OwnField::MillTolerance) => Some(Preset {
                value: 0.125,
                source: "ASME B31 piping codes, 12.5 % under-thickness",
            }),
            _ => None,
        }
    }
}

impl OwnField {
    fn kind(self) -> Kind {
        match self {
            OwnField::OutsideDiameter
            | OwnField::Bore
            | OwnField::Wall
            | OwnField::Lining
            | OwnField::Thread
            | OwnField::Corrosion
            | OwnField::RoughnessNew
            | OwnField::RoughnessAged => Kind::Bore,
            OwnField::Rating => Kind::Pressure,
            OwnField::RatingTemperature => Kind::Temperature,
            OwnField::Yield
            | OwnField::Tensile
            | OwnField::ModulusShort
            | OwnField::ModulusLong => Kind::Stress,
            OwnField::JointFactor | OwnField::MillTolerance => Kind::Share,
            OwnField::SupplyLength => Kind::Distance,
        }
    }

    fn range(self) -> (f64, f64) {
        match self {
            OwnField::OutsideDiameter | OwnField::Bore => (0.005, 5.0),
            OwnField::Wall => (0.0002, 0.5),
            OwnField::Rating => (1e4, 1e8),
            OwnField::RatingTemperature => (0.0, 90.0),
            OwnField::Yield | OwnField::Tensile => (1e7, 2e9),
            OwnField::JointFactor => (0.3, 1.0),
            OwnField::Corrosion => (0.0, 0.02),
            OwnField::Lining => (0.0, 0.1),
            OwnField::Thread => (0.0002, 0.01),
            OwnField::MillTolerance => (0.0, 0.3),
            OwnField::RoughnessNew | OwnField::RoughnessAged => (0.0, 0.02),
            OwnField::ModulusShort | OwnField::ModulusLong => (1e7, 1e12),
            OwnField::SupplyLength => (0.5, 500.0),
        }
    }
}

macro_rules! find_entry {
    ($book:expr, $field:expr, $iter:ident, $get:ident, [$($borrow:tt)+]) => {
        match $field {
            Field::DesignFlow => Some($($borrow)+ $book.stream.design_flow_m3_s),
            Field::ForebayHighest => Some($($borrow)+ $book.levels.forebay_highest_m),
            Field::ForebayNormal => Some($($borrow)+ $book.levels.forebay_normal_m),
            Field::ForebayLowest => Some($($borrow)+ $book.levels.forebay_lowest_m),
            Field::JetAxis => Some($($borrow)+ $book.levels.jet_axis_m),
            Field::TailLevel => Some($($borrow)+ $book.levels.tail_m),
            Field::GaugeLevel => Some($($borrow)+ $book.levels.gauge_m),
            Field::Altitude => Some($($borrow)+ $book.climate.altitude_m),
            Field::ColdestWater => Some($($borrow)+ $book.climate.coldest_water_degc),
            Field::WarmestWater => Some($($borrow)+ $book.climate.warmest_water_degc),
            Field::ColdestWall => Some($($borrow)+ $book.climate.coldest_wall_degc),
            Field::WarmestWall => Some($($borrow)+ $book.climate.warmest_wall_degc),
            Field::StationDistance(id) => {
                $book.line.stations.$iter().find(|s| s.id == id).map(|s| $($borrow)+ s.distance_m)
            }
            Field::StationLevel(id) => {
                $book.line.stations.$iter().find(|s| s.id == id).map(|s| $($borrow)+ s.level_m)
            }
            Field::StationForeSight(id)
            | Field::StationBackSight(id)
            | Field::StationStaffBack(id)
            | Field::StationStaffFore(id)
            | Field::StationTurn(id) => {
                $book.line.stations.$iter().find(|s| s.id == id).map(|s| match $field {
                    Field::StationForeSight(_) => $($borrow)+ s.fore_sight_deg,
                    Field::StationBackSight(_) => $($borrow)+ s.back_sight_deg,
                    Field::StationStaffBack(_) => $($borrow)+ s.staff_back_m,
                    Field::StationStaffFore(_) => $($borrow)+ s.staff_fore_m,
                    _ => $($borrow)+ s.plan_turn_deg,
                })
            }
            Field::KnownFall => Some($($borrow)+ $book.line.known_fall_m),
            Field::BendRadius => Some($($borrow)+ $book.line.bend_radius_number),
            Field::StretchCover(id) => {
                $book.line.stretches.$iter().find(|s| s.id == id).map(|s| $($borrow)+ s.cover_m)
            }
            Field::FittingCount(id)
            | Field::FittingAngle(id)
            | Field::FittingRadius(id)
            | Field::FittingOpening(id)
            | Field::RackWidth(id)
            | Field::RackLength(id)
            | Field::RackBar(id)
            | Field::RackGap(id)
            | Field::RackClogged(id)
            | Field::FittingK(id)
            | Field::FittingRating(id) => {
                $book.line.fittings.$iter().find(|f| f.id == id).map(|f| match $field {
                    Field::FittingCount(_) => $($borrow)+ f.count_number,
                    Field::FittingAngle(_) => $($borrow)+ f.angle_deg,
                    Field::FittingRadius(_) => $($borrow)+ f.radius_ratio_number,
                    Field::FittingOpening(_) => $($borrow)+ f.opening_share,
                    Field::RackWidth(_) => $($borrow)+ f.rack_width_m,
                    Field::RackLength(_) => $($borrow)+ f.rack_length_m,
                    Field::RackBar(_) => $($borrow)+ f.bar_m,
                    Field::RackGap(_) => $($borrow)+ f.gap_m,
                    Field::RackClogged(_) => $($borrow)+ f.clogged_share,
                    Field::FittingK(_) => $($borrow)+ f.k_number,
                    _ => $($borrow)+ f.rating_pa,
                })
            }
            Field::Own(id, own) => {
                $book.own_pipes.$iter().find(|p| p.id == id).map(|p| match own {
                    OwnField::OutsideDiameter => $($borrow)+ p.outside_diameter_m,
                    OwnField::Bore => $($borrow)+ p.bore_m,
                    OwnField::Wall => $($borrow)+ p.wall_m,
                    OwnField::Lining => $($borrow)+ p.lining_m,
                    OwnField::Thread => $($borrow)+ p.thread_m,
                    OwnField::Rating => $($borrow)+ p.rating_pa,
                    OwnField::RatingTemperature => $($borrow)+ p.rating_degc,
                    OwnField::Yield => $($borrow)+ p.yield_pa,
                    OwnField::Tensile => $($borrow)+ p.tensile_pa,
                    OwnField::JointFactor => $($borrow)+ p.joint_share,
                    OwnField::Corrosion => $($borrow)+ p.corrosion_m,
                    OwnField::MillTolerance => $($borrow)+ p.mill_tolerance_share,
                    OwnField::RoughnessNew => $($borrow)+ p.roughness_new_m,
                    OwnField::RoughnessAged => $($borrow)+ p.roughness_aged_m,
                    OwnField::ModulusShort => $($borrow)+ p.modulus_short_pa,
                    OwnField::ModulusLong => $($borrow)+ p.modulus_long_pa,
                    OwnField::SupplyLength => $($borrow)+ p.supply_length_m,
                })
            }
            Field::JetCount => Some($($borrow)+ $book.jets.count_number),
            Field::JetBore => Some($($borrow)+ $book.jets.bore_m),
            Field::JetVelocityCoefficient => {
                Some($($borrow)+ $book.jets.velocity_coefficient_number)
            }
            Field::JetContraction => Some($($borrow)+ $book.jets.contraction_number),
            Field::BranchK => Some($($borrow)+ $book.jets.branch_k_number),
            Field::BranchBore => Some($($borrow)+ $book.jets.branch_bore_m),
            Field::JetRating => Some($($borrow)+ $book.jets.rating_pa),
            Field::Price(i) => $book.prices.pipes.$get(i).map(|p| $($borrow)+ p.price_per_m),
            Field::SurgeAllowed(id) => {
                $book.line.stretches.$iter().find(|s| s.id == id)
                    .map(|s| $($borrow)+ s.surge_allowed_pa)
            }
            Field::ClosingTime => Some($($borrow)+ $book.surge.closing_time_s),
            Field::FastTime => Some($($borrow)+ $book.surge.fast_time_s),
            Field::SlowTime => Some($($borrow)+ $book.surge.slow_time_s),
            Field::Knee => Some($($borrow)+ $book.surge.knee_share),
            Field::NeedleAngle => Some($($borrow)+ $book.surge.needle_half_angle_deg),
            Field::NeedleTravel => Some($($borrow)+ $book.surge.needle_travel_m),
            Field::ValveStroke(i) => $book.surge.valve.$get(i).map(|r| $($borrow)+ r.stroke_share),
            Field::ValveOpen(i) => $book.surge.valve.$get(i).map(|r| $($borrow)+ r.open_share),
            Field::OpeningTime => Some($($borrow)+ $book.surge.opening_time_s),
            Field::SlamTime => Some($($borrow)+ $book.surge.slam_time_s),
            Field::EntrainedAir => Some($($borrow)+ $book.surge.air_share),
            Field::SlowestClosing => Some($($borrow)+ $book.surge.slowest_closing_s),
            Field::ClosingReserve => Some($($borrow)+ $book.surge.closing_reserve_share),
            Field::TightMargin => Some($($borrow)+ $book.limits.tight_margin_share),
            Field::LossCap => Some($($borrow)+ $book.limits.loss_cap_share),
            Field::VelocityHigh => Some($($borrow)+ $book.limits.velocity_high_m_s),
            Field::CollapseSafety => Some($($borrow)+ $book.limits.collapse_safety_number),
            Field::Spare => Some($($borrow)+ $book.limits.spare_share),
            Field::JointDeflection => Some($($borrow)+ $book.limits.joint_deflection_deg),
            Field::AirSlopeChange => Some($($borrow)+ $book.limits.air_slope_change_share),
        }
    };
}

impl Book {
    /// The entry of this name; none where its station, stretch, fitting, own
    /// pipe or price is not in the book.
    #[must_use]
    pub fn entry(&self, field: Field) -> Option<&Entry> {
        find_entry!(self, field, iter, get, [&])
    }

    /// The same, to be changed.
    pub fn entry_mut(&mut self, field: Field) -> Option<&mut Entry> {
        find_entry!(self, field, iter_mut, get_mut, [&mut])
    }

    /// The value of an entry in its base unit, checked against its kind and
    /// range; none where nothing was entered.
    ///
    /// # Errors
    /// [`EntryTrouble`] where what was entered cannot be used.
    pub fn value(&self, field: Field) -> Result<Option<f64>, EntryTrouble> {
        self.entry(field)
            .map_or(Ok(None), |entry| field.value_of(entry))
    }

    /// Every entry that the book has a place for, in the order of the sheets.
    #[must_use]
    pub fn fields(&self) -> Vec<Field> {
        let mut all = vec![Field::DesignFlow];
        all.extend([
            Field::ForebayNormal,
            Field::ForebayHighest,
            Field::ForebayLowest,
            Field::JetAxis,
            Field::TailLevel,
            Field::GaugeLevel,
            Field::Altitude,
            Field::ColdestWater,
            Field::WarmestWater,
            Field::ColdestWall,
            Field::WarmestWall,
        ]);
        let last = self.line.stations.len().saturating_sub(1);
        for (i, s) in self.line.stations.iter().enumerate() {
            // Nothing lies before the first station to sight from, and the
            // line turns only between two legs.
            let way = if i == 0 { SurveyWay::Level } else { s.way };
            all.extend(station_fields(way, s.id));
            if i > 0 && i < last {
                all.push(Field::StationTurn(s.id));
            }
        }
        all.extend([Field::KnownFall, Field::BendRadius]);
        all.extend(
            self.line
                .stretches
                .iter()
                .flat_map(|s| [Field::StretchCover(s.id), Field::SurgeAllowed(s.id)]),
        );
        for f in &self.line.fittings {
            all.push(Field::FittingCount(f.id));
            all.extend(fitting_fields(f.kind, f.id));
            all.push(Field::FittingRating(f.id));
        }
        for p in &self.own_pipes {
            all.extend(OWN_FIELDS.map(|own| Field::Own(p.id, own)));
        }
        all.extend([
            Field::JetCount,
            Field::JetBore,
            Field::JetVelocityCoefficient,
            Field::JetContraction,
            Field::BranchK,
            Field::BranchBore,
            Field::JetRating,
        ]);
        all.extend([
            Field::ClosingTime,
            Field::FastTime,
            Field::SlowTime,
            Field::Knee,
            Field::NeedleAngle,
            Field::NeedleTravel,
        ]);
        all.extend(
            (0..self.surge.valve.len()).flat_map(|i| [Field::ValveStroke(i), Field::ValveOpen(i)]),
        );
        all.extend([
            Field::OpeningTime,
            Field::SlamTime,
            Field::EntrainedAir,
            Field::SlowestClosing,
            Field::ClosingReserve,
        ]);
        all.extend((0..self.prices.pipes.len()).map(Field::Price));
        all.extend([
            Field::TightMargin,
            Field::LossCap,
            Field::VelocityHigh,
            Field::CollapseSafety,
            Field::Spare,
            Field::JointDeflection,
            Field::AirSlopeChange,
        ]);
        all
    }
}

/// The entries that place a station levelled in this way.
#[must_use]
pub fn station_fields(way: SurveyWay, id: Id) -> Vec<Field> {
    let mut fields = vec![Field::StationDistance(id)];
    match way {
        SurveyWay::Level => fields.push(Field::StationLevel(id)),
        SurveyWay::Angle => {
            fields.extend([Field::StationForeSight(id), Field::StationBackSight(id)]);
        }
        SurveyWay::Staff => {
            fields.extend([Field::StationStaffBack(id), Field::StationStaffFore(id)]);
        }
    }
    fields
}

/// The entries that decide the loss of a fitting of this kind.
#[must_use]
pub fn fitting_fields(kind: FittingKind, id: Id) -> Vec<Field> {
    match kind {
        FittingKind::TrashRack => vec![
            Field::RackWidth(id),
            Field::RackLength(id),
            Field::RackBar(id),
            Field::RackGap(id),
            Field::FittingAngle(id),
            Field::RackClogged(id),
        ],
        FittingKind::Bend => vec![Field::FittingAngle(id), Field::FittingRadius(id)],
        FittingKind::Mitre => vec![Field::FittingAngle(id)],
        FittingKind::GateValve | FittingKind::BallValve | FittingKind::ButterflyValve => {
            vec![Field::FittingOpening(id)]
        }
        FittingKind::Own => vec![Field::FittingK(id)],
        FittingKind::EntranceSharp
        | FittingKind::EntranceProjecting
        | FittingKind::EntranceRounded
        | FittingKind::EntranceBellmouth
        | FittingKind::TeeRun
        | FittingKind::TeeBranch => Vec::new(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::{FittingEntry, OwnPipeEntry, Price};
    use crate::reading::DecimalMark;

    fn full_book() -> Book {
        let mut book = Book::new("test");
        for (id, way) in (3..).zip([SurveyWay::Level, SurveyWay::Angle, SurveyWay::Staff]) {
            book.line.stations.push(crate::book::Station {
                id,
                way,
                ..Default::default()
            });
        }
        for (i, kind) in [
            FittingKind::Bend,
            FittingKind::GateValve,
            FittingKind::TrashRack,
            FittingKind::Own,
        ]
        .into_iter()
        .enumerate()
        {
            let id = u32::try_from(i).unwrap() + 1;
            book.line.fittings.push(FittingEntry {
                id,
                at_station: 1,
                kind,
                ..Default::default()
            });
        }
        book.own_pipes.push(OwnPipeEntry {
            id: 1,
            ..Default::default()
        });
        book.prices.pipes.push(Price {
            pipe: "own/1".into(),
            ..Default::default()
        });
        book.surge.valve = vec![Default::default(); 2];
        book
    }

    #[test]
    fn every_field_finds_its_own_entry() {
        let mut book = full_book();
        let fields = book.fields();
        for (i, field) in fields.iter().enumerate() {
            let entry = book.entry_mut(*field).unwrap();
            assert!(
                entry.is_empty(),
                "{field:?} shares its entry with an earlier one"
            );
            entry.text = format!("{i}");
        }
        for (i, field) in fields.iter().enumerate() {
            assert_eq!(book.entry(*field).unwrap().text, format!("{i}"));
        }
    }

    #[test]
    fn presets_lie_in_range() {
        for field in full_book().fields() {
            let (least, most) = field.range();
            assert!(least < most);
            if let Some(preset) = field.preset() {
                assert!((least..=most).contains(&preset.value), "{field:?}");
            }
        }
    }

    #[test]
    fn out_of_range_is_refused_not_moved() {
        let mut book = Book::new("test");
        let typed = |t: &str, u: &str, k| Entry::typed(t, u, k, DecimalMark::Point);
        book.jets.count_number = typed("2.5", "", Kind::Number);
        assert_eq!(
            book.value(Field::JetCount),
            Err(EntryTrouble::NotWhole { value: 2.5 })
        );
        book.jets.count_number = typed("9", "", Kind::Number);
        assert!(matches!(
            book.value(Field::JetCount),
            Err(EntryTrouble::OutOfRange { .. })
        ));
        assert_eq!(book.value(Field::StationLevel(99)), Ok(None));
    }
}
