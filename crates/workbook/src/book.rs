//! The book: all that the user enters for one site, and nothing computed.
//!
//! These are the types of the saved file (format 1, see [`crate::format`]):
//! changing one changes the file. Each field's name ends in the base unit of
//! its value; how each is read and which range it takes is
//! [`Field`](crate::field::Field)'s.

use crate::entry::Entry;
use crate::pipe_copy::PipeCopy;
use crate::units::UnitSystem;
use schemars::JsonSchema;
use serde::{Deserialize, Serialize};

/// Number of a station, stretch, fitting or own pipe: given once, outlives
/// edits, unique within its list.
pub type Id = u32;

/// One site's document.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Book {
    /// Format of the file; see [`crate::format::FORMAT`].
    pub format: u32,
    /// The edition of the program that wrote it.
    pub written_by: String,
    /// The book's own key among many.
    pub id: String,
    /// Counts the edits.
    #[serde(default)]
    pub revision: u64,
    /// Edition of the pipe catalogue its copies were taken from.
    #[serde(default)]
    pub catalogue_edition: String,
    /// Whether the site is invented, as in the demo: said on every print.
    #[serde(default)]
    pub invented: bool,
    /// Units of the screen and the print.
    #[serde(default)]
    pub units: UnitSystem,
    /// Title block.
    #[serde(default)]
    pub site: Site,
    /// What the stream gives.
    #[serde(default)]
    pub stream: Stream,
    /// Water and jet levels, in the book's own datum.
    #[serde(default)]
    pub levels: Levels,
    /// Temperatures that decide strength, stiffness and losses.
    #[serde(default)]
    pub climate: Climate,
    /// The surveyed line.
    #[serde(default)]
    pub line: LineEntries,
    /// A copy of every catalogue pipe the line uses.
    #[serde(default)]
    pub pipes: Vec<PipeCopy>,
    /// Pipes of the user's own.
    #[serde(default)]
    pub own_pipes: Vec<OwnPipeEntry>,
    /// Nozzles.
    #[serde(default)]
    pub jets: Jets,
    /// Prices from the user's own list.
    #[serde(default)]
    pub prices: Prices,
    /// How the jets are shut and opened, and what else moves the water.
    #[serde(default, skip_serializing_if = "is_usual")]
    pub surge: SurgeEntries,
    /// Limits and margins that are the user's to change.
    #[serde(default)]
    pub limits: Limits,
    /// What the print needs beside the figures.
    #[serde(default)]
    pub print: PrintSetup,
}

/// The title block.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct Site {
    /// Name of the site.
    pub name: String,
    /// Where it is.
    pub place: String,
    /// Who it is for.
    pub client: String,
    /// Who measured and entered it.
    pub prepared_by: String,
    /// Date as typed.
    pub date: String,
    /// Anything to remember.
    pub note: String,
}

macro_rules! entries {
    (
        $(#[$meta:meta])*
        $name:ident { $( $(#[$field_meta:meta])* $field:ident ),+ $(,)? }
    ) => {
        $(#[$meta])*
        #[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
        #[serde(deny_unknown_fields, default)]
        pub struct $name {
            $(
                $(#[$field_meta])*
                #[serde(skip_serializing_if = "Entry::is_untouched")]
                pub $field: Entry,
            )+
        }
    };
}

entries! {
    /// What the stream gives.
    Stream {
        /// Flow the scheme is sized for, m³/s.
        design_flow_m3_s,
    }
}

entries! {
    /// Levels in the book's own datum, m.
    Levels {
        /// Highest water level in the forebay: decides pressure.
        forebay_highest_m,
        /// Normal water level in the forebay: decides power. Where none is
        /// entered, the level of the first station stands in, and is said.
        forebay_normal_m,
        /// Lowest water level in the forebay.
        forebay_lowest_m,
        /// Axis of the jets. Where none is entered, the level of the last
        /// station stands in, and is said.
        jet_axis_m,
        /// Tail water.
        tail_m,
        /// The pressure gauge.
        gauge_m,
    }
}

entries! {
    /// Place and climate.
    Climate {
        /// Altitude above the sea, apart from local levels, m.
        altitude_m,
        /// Coldest water, degC.
        coldest_water_degc,
        /// Warmest water, degC.
        warmest_water_degc,
        /// Coldest pipe wall, degC.
        coldest_wall_degc,
        /// Warmest pipe wall (sun on bare pipe, water standing), degC.
        warmest_wall_degc,
    }
}

/// How station distances are measured.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum DistanceKind {
    /// Along the slope, by tape on the ground or the pipe.
    #[default]
    Slope,
    /// Horizontal, off a map or by level.
    Horizontal,
}

/// What a station's distance is counted from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum Reckoning {
    /// From the first station.
    #[default]
    FromStart,
    /// From the station before.
    FromPrevious,
}

/// How the level of a station was found. Every way but the first reckons from
/// the station before; the first station of a line always has a level.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum SurveyWay {
    /// Its level is entered.
    #[default]
    Level,
    /// By clinometer: fore sight from the station before, and a back sight
    /// from here, if one was taken.
    Angle,
    /// By staff or water hose: readings at the station before and here.
    Staff,
}

/// How the pipe is turned at a station.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum BendKind {
    /// A smooth bend.
    #[default]
    Smooth,
    /// A mitre bend.
    Mitre,
    /// The joints, or the pipe's own flexing, take it up: no bend piece.
    Joints,
}

/// How the water comes to the intake.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum Approach {
    /// From the side, or past a corner: the careful choice.
    #[default]
    Lateral,
    /// Straight, and alike from both sides.
    Symmetrical,
}

/// Whether a choice is the one taken where none was made: left out of the
/// file.
fn is_usual<T: Default + PartialEq>(choice: &T) -> bool {
    *choice == T::default()
}

/// The surveyed line.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct LineEntries {
    /// Slope or horizontal distances.
    pub distance_kind: DistanceKind,
    /// Running from the start, or leg by leg.
    pub reckoning: Reckoning,
    /// Known fall from the first station to the last, m: what the survey is
    /// closed on.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub known_fall_m: Entry,
    /// Whether the closing error is spread over the legs levelled by angle or
    /// staff.
    #[serde(skip_serializing_if = "is_usual")]
    pub spread_error: bool,
    /// How the pipe is turned where a station does not say.
    #[serde(skip_serializing_if = "is_usual")]
    pub bend: BendKind,
    /// Radius over bore of the smooth bends that come from the survey.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub bend_radius_number: Entry,
    /// Stations from the forebay down, in the order of the line.
    pub stations: Vec<Station>,
    /// Stretches in the order of the line; each runs to where the next begins.
    pub stretches: Vec<StretchEntry>,
    /// Fittings and valves.
    pub fittings: Vec<FittingEntry>,
}

/// A surveyed point of the pipe's axis.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Station {
    /// Its number.
    pub id: Id,
    /// A name, if it has one.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub name: String,
    /// How its level was found.
    #[serde(default, skip_serializing_if = "is_usual")]
    pub way: SurveyWay,
    /// Kind of this station's distance, where it is not the line's. One that
    /// differs from the line's is counted from the station before.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub distance_kind: Option<DistanceKind>,
    /// Distance, of the line's [`DistanceKind`] and [`Reckoning`], m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub distance_m: Entry,
    /// Level, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub level_m: Entry,
    /// Sight from the station before to this one: degree above the
    /// horizontal, below zero downhill.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub fore_sight_deg: Entry,
    /// Sight from this station back to the one before: degree above the
    /// horizontal, so above zero where the line falls.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub back_sight_deg: Entry,
    /// Staff or hose reading at the station before; of several steps the sum,
    /// m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub staff_back_m: Entry,
    /// Staff or hose reading here; of several steps the sum, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub staff_fore_m: Entry,
    /// Turn of the line on the plan, degree; to the left below zero.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub plan_turn_deg: Entry,
    /// How the pipe is turned here, where not as the line's.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub bend: Option<BendKind>,
}

/// How a stretch is laid.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum Laying {
    /// In a trench, covered.
    #[default]
    Buried,
    /// On the ground, bare.
    OnGround,
    /// On supports, bare.
    OnSupports,
}

/// A run of the line with one pipe.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct StretchEntry {
    /// Its number.
    pub id: Id,
    /// The station it begins at; the first begins at the first station.
    pub from_station: Id,
    /// Its pipe: the id of one of the book's copies, or `own/<id>`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub pipe: Option<String>,
    /// How it is laid.
    #[serde(default)]
    pub laying: Laying,
    /// Cover over a buried pipe, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub cover_m: Entry,
    /// Pressure this stretch may see in a surge, by a maker's word or a
    /// standard's (PMA): stands in for the lasting one where entered, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub surge_allowed_pa: Entry,
}

/// A kind of fitting, valve or other local loss.
#[derive(
    Debug,
    Clone,
    Copy,
    PartialEq,
    Eq,
    Hash,
    PartialOrd,
    Ord,
    Default,
    Serialize,
    Deserialize,
    JsonSchema,
)]
#[serde(rename_all = "snake_case")]
pub enum FittingKind {
    /// Trash rack before the inlet.
    TrashRack,
    /// Entrance with a sharp edge, flush with the wall.
    #[default]
    EntranceSharp,
    /// Pipe standing into the forebay.
    EntranceProjecting,
    /// Entrance with rounded edge.
    EntranceRounded,
    /// Bellmouth entrance.
    EntranceBellmouth,
    /// Smooth bend, by angle and radius.
    Bend,
    /// Mitre bend, by angle.
    Mitre,
    /// Gate valve, by opening.
    GateValve,
    /// Ball valve, by opening.
    BallValve,
    /// Butterfly valve, by opening.
    ButterflyValve,
    /// Tee, flow straight on.
    TeeRun,
    /// Tee, flow into the branch.
    TeeBranch,
    /// Anything else, with a loss coefficient of the user's own.
    Own,
}

/// A fitting placed at a station.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct FittingEntry {
    /// Its number.
    pub id: Id,
    /// The station it sits at.
    pub at_station: Id,
    /// What it is.
    pub kind: FittingKind,
    /// How many of them in a row.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub count_number: Entry,
    /// Deflection of a bend or mitre, or a rack's angle from the horizontal,
    /// degree.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub angle_deg: Entry,
    /// Bend radius over bore.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub radius_ratio_number: Entry,
    /// Opening of a valve, as a share of full.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub opening_share: Entry,
    /// Wetted width of a rack, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub rack_width_m: Entry,
    /// Wetted length of a rack, along its bars, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub rack_length_m: Entry,
    /// Thickness of a rack's bars, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub bar_m: Entry,
    /// Clear gap between a rack's bars, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub gap_m: Entry,
    /// Share of a rack that leaves and trash stop.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub clogged_share: Entry,
    /// The user's own loss coefficient K, on the velocity in the pipe there.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub k_number: Entry,
    /// Its pressure rating, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub rating_pa: Entry,
    /// What it is called on the order.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub note: String,
}

/// Material of a pipe of the user's own.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum OwnMaterial {
    /// Polyethylene PE 100 and its like.
    Pe,
    /// PVC-U and its like.
    Pvc,
    /// Steel, rated by its pressure or by stress.
    #[default]
    Steel,
    /// Ductile iron.
    DuctileIron,
    /// Glass-fibre reinforced plastic.
    Grp,
    /// Something else.
    Other,
}

/// How a pipe of the user's own is rated.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum OwnRating {
    /// By a pressure printed on it or given by its maker.
    #[default]
    Pressure,
    /// By the stress in its steel wall.
    SteelStress,
}

/// Which diameter of a pipe of the user's own is given.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum OwnSizing {
    /// The outside diameter, as tube is ordered.
    #[default]
    Outside,
    /// The bore, as pipe rolled from plate is ordered.
    Bore,
}

/// A pipe of the user's own.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct OwnPipeEntry {
    /// Its number; stretches name it `own/<id>`.
    pub id: Id,
    /// What it is called on the order.
    #[serde(default)]
    pub name: String,
    /// Where its figures come from, in the user's words: a maker's sheet, a
    /// stamp on the pipe.
    #[serde(default)]
    pub source: String,
    /// Its material.
    #[serde(default)]
    pub material: OwnMaterial,
    /// How it is rated.
    #[serde(default)]
    pub rated: OwnRating,
    /// Which diameter is given.
    #[serde(default, skip_serializing_if = "is_outside")]
    pub sized: OwnSizing,
    /// Grade of steel by its name in the catalogue, whose strengths stand
    /// where none are entered; blank for none.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub grade: String,
    /// Whether its ends are threaded, and the wall under the thread rates it.
    #[serde(default, skip_serializing_if = "core::ops::Not::not")]
    pub threaded: bool,
    /// Bore, where that is given, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub bore_m: Entry,
    /// Depth of its thread, m; where none is entered, the one usual for the
    /// diameter.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub thread_m: Entry,
    /// Thickness of its lining, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub lining_m: Entry,
    /// Outside diameter, where that is given, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub outside_diameter_m: Entry,
    /// Smallest wall, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub wall_m: Entry,
    /// Pressure rating, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub rating_pa: Entry,
    /// Highest wall temperature the rating stands at, degC.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub rating_degc: Entry,
    /// Yield strength of a steel wall, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub yield_pa: Entry,
    /// Tensile strength of a steel wall, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub tensile_pa: Entry,
    /// Joint factor of the weld, a share.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub joint_share: Entry,
    /// Corrosion allowance, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub corrosion_m: Entry,
    /// Mill tolerance on the wall, a share.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub mill_tolerance_share: Entry,
    /// Roughness of the new pipe, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub roughness_new_m: Entry,
    /// Roughness of the aged pipe, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub roughness_aged_m: Entry,
    /// Short-term modulus, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub modulus_short_pa: Entry,
    /// Long-term modulus, Pa.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub modulus_long_pa: Entry,
    /// Supply length, m.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub supply_length_m: Entry,
}

#[expect(
    clippy::trivially_copy_pass_by_ref,
    reason = "the shape serde asks for"
)]
fn is_outside(sized: &OwnSizing) -> bool {
    *sized == OwnSizing::Outside
}

/// Whether nozzle bores are solved for the design flow or given.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum BoreSizing {
    /// The bore that passes the design flow is solved for.
    #[default]
    Solved,
    /// The bore is given, and the flow follows.
    Chosen,
}

/// Kind of nozzle.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum NozzleKind {
    /// A plain nozzle, opened and shut by a valve before it.
    #[default]
    Fixed,
    /// A needle (spear) nozzle.
    Needle,
}

/// Nozzles.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct Jets {
    /// Solved or given.
    pub sizing: BoreSizing,
    /// Fixed or needle.
    pub kind: NozzleKind,
    /// How many equal nozzles.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub count_number: Entry,
    /// Outlet bore of each, where given, m.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub bore_m: Entry,
    /// Velocity coefficient Cv.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub velocity_coefficient_number: Entry,
    /// Contraction coefficient: jet area over outlet area.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub contraction_number: Entry,
    /// Loss coefficient of each branch with its valve, on the branch velocity.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub branch_k_number: Entry,
    /// Bore of each branch, m. Where none is entered, the last stretch's bore.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub branch_bore_m: Entry,
    /// Pressure rating of manifold, valve and nozzle, Pa.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub rating_pa: Entry,
}

/// At how many speeds the jets are shut.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum ClosingSpeeds {
    /// One, from full stroke to shut.
    #[default]
    One,
    /// A fast one down to the knee, a slow one from there.
    Two,
}

/// How the open area of a jet follows the stroke of what shuts it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum OpenArea {
    /// As the kind of nozzle says: a needle by its geometry, the valve before
    /// a plain nozzle in a straight line.
    #[default]
    AsNozzle,
    /// In a straight line.
    Straight,
    /// A needle, by its geometry.
    Needle,
    /// By a table of the valve's own.
    Table,
}

/// How the pipe is held along its axis: decides its wave speed.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum PipeHeld {
    /// Against all movement: buried, or anchored throughout. The fastest wave.
    #[default]
    Throughout,
    /// At its upper end only.
    UpperEnd,
    /// By expansion joints throughout: no stress along the axis.
    ExpansionJoints,
}

/// What the water drives.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum MachineKind {
    /// An impulse wheel: its speed does not reach back to the jets.
    #[default]
    Impulse,
    /// One whose flow changes with its speed: a reaction turbine, or a pump
    /// run as turbine.
    FlowWithSpeed,
}

/// A row of a valve's own table.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct ValveRow {
    /// Stroke, as a share of full.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub stroke_share: Entry,
    /// Flow the valve lets through at one head, as a share of that at full
    /// stroke.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub open_share: Entry,
}

/// How the jets are shut and opened, and what else moves the water.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct SurgeEntries {
    /// What the water drives.
    #[serde(skip_serializing_if = "is_usual")]
    pub machine: MachineKind,
    /// One speed or two.
    #[serde(skip_serializing_if = "is_usual")]
    pub speeds: ClosingSpeeds,
    /// Time from full stroke to shut at one speed, s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub closing_time_s: Entry,
    /// Of two speeds: time of a full stroke at the fast one, s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub fast_time_s: Entry,
    /// Of two speeds: time of a full stroke at the slow one, s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub slow_time_s: Entry,
    /// Of two speeds: the stroke at which the slow one begins, as a share of
    /// full.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub knee_share: Entry,
    /// How the open area follows the stroke.
    #[serde(skip_serializing_if = "is_usual")]
    pub area: OpenArea,
    /// Half angle at the needle's tip, degree.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub needle_half_angle_deg: Entry,
    /// Travel of the needle from shut to full stroke, m. Where none is
    /// entered, as far as its orifice is not yet wholly open.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub needle_travel_m: Entry,
    /// The valve's own table, strokes rising; shut and fully open need no row.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub valve: Vec<ValveRow>,
    /// Time from shut to full stroke, s. Where none is entered, that of
    /// closing.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub opening_time_s: Entry,
    /// Whether the guard valve can be slammed, so that the line must bear it.
    #[serde(skip_serializing_if = "is_usual")]
    pub guard_may_slam: bool,
    /// Time in which a slammed guard valve shuts, s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub slam_time_s: Entry,
    /// Whether nothing that could block a jet gets past the rack: a blocked jet
    /// is then shown, and no verdict rests on it.
    #[serde(skip_serializing_if = "is_usual")]
    pub jets_kept_clear: bool,
    /// Whether deflectors throw the jets off the wheel: load lost then moves
    /// no flow.
    #[serde(skip_serializing_if = "is_usual")]
    pub deflectors: bool,
    /// How the pipe is held.
    #[serde(skip_serializing_if = "is_usual")]
    pub held: PipeHeld,
    /// Whether unsteady friction is reckoned with.
    #[serde(skip_serializing_if = "is_usual")]
    pub unsteady_friction: bool,
    /// Share of the volume that is air carried as bubbles, at standing
    /// pressure: slows the wave, and is not the careful choice.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub air_share: Entry,
    /// Slowest closing time looked at in a search for the shortest safe one, s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub slowest_closing_s: Entry,
    /// What is ordered above the shortest safe closing time, as a share of it.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub closing_reserve_share: Entry,
}

/// Prices, from the user's own list.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct Prices {
    /// Currency as the user writes it.
    pub currency: String,
    /// One line a pipe.
    pub pipes: Vec<Price>,
}

/// The price of one pipe.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Price {
    /// The pipe's catalogue id, or `own/<id>`.
    pub pipe: String,
    /// Price per metre, in the book's currency.
    #[serde(default, skip_serializing_if = "Entry::is_untouched")]
    pub price_per_m: Entry,
}

/// Which roughness the losses are figured with.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum RoughnessAge {
    /// As it will be after years of use: the careful choice for sizing.
    #[default]
    Aged,
    /// As delivered.
    New,
}

/// Limits and margins. An empty one takes its default, which is said.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct Limits {
    /// Aged or new.
    pub roughness: RoughnessAge,
    /// A margin under this share of what is allowed is tight.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub tight_margin_share: Entry,
    /// Most head that may be lost, as a share of gross head.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub loss_cap_share: Entry,
    /// Velocity above which a caution is given, m/s.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub velocity_high_m_s: Entry,
    /// Safety factor on collapse.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub collapse_safety_number: Entry,
    /// Spare pipe to order, as a share of the length.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub spare_share: Entry,
    /// Deflection that joints or flexing take up without a bend piece, degree.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub joint_deflection_deg: Entry,
    /// Steepening downhill at which air collects: fall per length of pipe
    /// below the station less that above it.
    #[serde(skip_serializing_if = "Entry::is_untouched")]
    pub air_slope_change_share: Entry,
    /// How the water comes to the intake: what submergence it needs.
    #[serde(skip_serializing_if = "is_usual")]
    pub intake_approach: Approach,
}

/// Sheet size of the print.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum Paper {
    /// 210 x 297 mm.
    #[default]
    A4,
    /// 8.5 x 11 in.
    Letter,
}

/// Which lists print.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum PrintParts {
    /// The schedule with its findings, and the laying list.
    #[default]
    Both,
    /// The schedule with its findings, for the supplier and the reviewer.
    Schedule,
    /// The laying list, for the crew.
    LayingList,
}

/// The order in which the pipe is laid.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default, Serialize, Deserialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum LayingOrder {
    /// From the powerhouse up (common practice: the pipe stands on what is
    /// already fixed).
    #[default]
    Uphill,
    /// From the forebay down.
    Downhill,
}

/// What the print needs beside the figures.
#[derive(Debug, Clone, PartialEq, Eq, Default, Serialize, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields, default)]
pub struct PrintSetup {
    /// Sheet size.
    pub paper: Paper,
    /// Which lists print.
    #[serde(skip_serializing_if = "is_usual")]
    pub parts: PrintParts,
    /// The order in which the crew lays the pipe.
    #[serde(skip_serializing_if = "is_usual")]
    pub laid: LayingOrder,
    /// The licensed engineer who reviews it.
    pub reviewer: String,
    /// Their licence.
    pub reviewer_licence: String,
}

impl Book {
    /// An empty book with this key, one stretch and the two stations that
    /// every line has.
    #[must_use]
    pub fn new(id: &str) -> Book {
        let mut book = Book {
            format: crate::format::FORMAT,
            written_by: crate::format::program(),
            id: id.to_owned(),
            revision: 0,
            catalogue_edition: pipes::catalogue().edition.to_owned(),
            invented: false,
            units: UnitSystem::Metric,
            site: Site::default(),
            stream: Stream::default(),
            levels: Levels::default(),
            climate: Climate::default(),
            line: LineEntries::default(),
            pipes: Vec::new(),
            own_pipes: Vec::new(),
            jets: Jets::default(),
            prices: Prices::default(),
            surge: SurgeEntries::default(),
            limits: Limits::default(),
            print: PrintSetup::default(),
        };
        book.line.stations = vec![
            Station {
                id: 1,
                ..Station::default()
            },
            Station {
                id: 2,
                ..Station::default()
            },
        ];
        book.line.stretches = vec![StretchEntry {
            id: 1,
            from_station: 1,
            ..StretchEntry::default()
        }];
        book
    }
}
