//! Names of the things a book is made of.

use crate::Words;
use crate::text::Key;
use pipes::Material;
use workbook::book::{
    Approach, BendKind, BoreSizing, ClosingSpeeds, DistanceKind, FittingKind, Laying, LayingOrder,
    MachineKind, NozzleKind, OpenArea, OwnMaterial, OwnRating, Paper, PipeHeld, PrintParts,
    Reckoning, RoughnessAge, SurveyWay,
};
use workbook::caution::Sheet;
use workbook::transient::EventKind;
use workbook::units::{Kind, UnitSystem};

/// A thing with a name of its own.
pub trait Named: Copy {
    /// The message that names it.
    fn key(&self) -> Key;
}

macro_rules! named {
    ($($of:ty { $($variant:ident => $key:ident),+ $(,)? })+) => {
        $(impl Named for $of {
            fn key(&self) -> Key {
                match self {
                    $(<$of>::$variant => Key::$key,)+
                }
            }
        })+
    };
}

named! {
    Sheet {
        Stream => SHEET_STREAM,
        Line => SHEET_LINE,
        Pipe => SHEET_PIPE,
        Jets => SHEET_JETS,
        Surge => SHEET_SURGE,
        Hold => SHEET_HOLD,
        Worth => SHEET_WORTH,
        Gauge => SHEET_GAUGE,
        Print => SHEET_PRINT,
    }
    FittingKind {
        EntranceSharp => FITTING_ENTRANCE_SHARP,
        EntranceProjecting => FITTING_ENTRANCE_PROJECTING,
        EntranceRounded => FITTING_ENTRANCE_ROUNDED,
        EntranceBellmouth => FITTING_ENTRANCE_BELLMOUTH,
        Bend => FITTING_BEND,
        Mitre => FITTING_MITRE,
        GateValve => FITTING_GATE_VALVE,
        BallValve => FITTING_BALL_VALVE,
        ButterflyValve => FITTING_BUTTERFLY_VALVE,
        TeeRun => FITTING_TEE_RUN,
        TeeBranch => FITTING_TEE_BRANCH,
        TrashRack => FITTING_TRASH_RACK,
        Own => FITTING_OWN,
    }
    Laying {
        Buried => LAYING_BURIED,
        OnGround => LAYING_ON_GROUND,
        OnSupports => LAYING_ON_SUPPORTS,
    }
    Material {
        Pe100 => MATERIAL_PE100,
        Pe4710 => MATERIAL_PE4710,
        PvcU => MATERIAL_PVC_U,
        PvcO => MATERIAL_PVC_O,
        Steel => MATERIAL_STEEL,
        DuctileIron => MATERIAL_DUCTILE_IRON,
        Grp => MATERIAL_GRP,
        Other => MATERIAL_OTHER,
    }
    OwnMaterial {
        Pe => MATERIAL_PE,
        Pvc => MATERIAL_PVC,
        Steel => MATERIAL_STEEL,
        DuctileIron => MATERIAL_DUCTILE_IRON,
        Grp => MATERIAL_GRP,
        Other => MATERIAL_OTHER,
    }
    DistanceKind {
        Slope => OPTION_SLOPE,
        Horizontal => OPTION_HORIZONTAL,
    }
    LayingOrder {
        Uphill => OPTION_LAY_UPHILL,
        Downhill => OPTION_LAY_DOWNHILL,
    }
    SurveyWay {
        Level => OPTION_BY_LEVEL,
        Angle => OPTION_BY_ANGLE,
        Staff => OPTION_BY_STAFF,
    }
    BendKind {
        Smooth => OPTION_BEND_SMOOTH,
        Mitre => OPTION_BEND_MITRE,
        Joints => OPTION_BEND_JOINTS,
    }
    Approach {
        Lateral => OPTION_APPROACH_LATERAL,
        Symmetrical => OPTION_APPROACH_SYMMETRICAL,
    }
    Reckoning {
        FromStart => OPTION_FROM_START,
        FromPrevious => OPTION_FROM_PREVIOUS,
    }
    OwnRating {
        Pressure => OPTION_RATED_PRESSURE,
        SteelStress => OPTION_RATED_STRESS,
    }
    BoreSizing {
        Solved => OPTION_BORE_SOLVED,
        Chosen => OPTION_BORE_CHOSEN,
    }
    NozzleKind {
        Fixed => OPTION_NOZZLE_FIXED,
        Needle => OPTION_NOZZLE_NEEDLE,
    }
    MachineKind {
        Impulse => OPTION_MACHINE_IMPULSE,
        FlowWithSpeed => OPTION_MACHINE_FLOW_WITH_SPEED,
    }
    EventKind {
        Closing => EVENT_CLOSING,
        Blocked => EVENT_BLOCKED,
        Opening => EVENT_OPENING,
        LoadLost => EVENT_LOAD_LOST,
        Slam => EVENT_SLAM,
    }
    ClosingSpeeds {
        One => OPTION_CLOSING_ONE,
        Two => OPTION_CLOSING_TWO,
    }
    OpenArea {
        AsNozzle => OPTION_AREA_AS_NOZZLE,
        Straight => OPTION_AREA_STRAIGHT,
        Needle => OPTION_AREA_NEEDLE,
        Table => OPTION_AREA_TABLE,
    }
    PipeHeld {
        Throughout => OPTION_HELD_THROUGHOUT,
        UpperEnd => OPTION_HELD_UPPER_END,
        ExpansionJoints => OPTION_HELD_JOINTS,
    }
    RoughnessAge {
        Aged => SETTING_ROUGHNESS_AGED,
        New => SETTING_ROUGHNESS_NEW,
    }
    PrintParts {
        Both => OPTION_PRINT_BOTH,
        Schedule => OPTION_PRINT_SCHEDULE,
        LayingList => OPTION_PRINT_LAYING,
    }
    Paper {
        A4 => SETTING_PAPER_A4,
        Letter => SETTING_PAPER_LETTER,
    }
    UnitSystem {
        Metric => SETTING_METRIC,
        UsCustomary => SETTING_US,
    }
    Kind {
        Distance => KIND_DISTANCE,
        Level => KIND_LEVEL,
        Head => KIND_HEAD,
        Bore => KIND_BORE,
        Flow => KIND_FLOW,
        Pressure => KIND_PRESSURE,
        Stress => KIND_STRESS,
        Temperature => KIND_TEMPERATURE,
        Velocity => KIND_VELOCITY,
        Power => KIND_POWER,
        Time => KIND_TIME,
        Angle => KIND_ANGLE,
        Share => KIND_SHARE,
        Number => KIND_NUMBER,
        Mass => KIND_MASS,
        MassPerLength => KIND_MASS_PER_LENGTH,
        PricePerLength => KIND_PRICE_PER_LENGTH,
    }
}

impl Words {
    /// The name of a sheet, fitting, laying, material or choice; as in a list,
    /// with a capital (kinds of quantity without).
    #[must_use]
    pub fn name(self, thing: impl Named) -> &'static str {
        self.say(thing.key())
    }
}

/// With a capital at the start, for a sentence or a column.
#[must_use]
pub fn capital(text: &str) -> String {
    let mut chars = text.chars();
    match chars.next() {
        Some(first) => first.to_uppercase().chain(chars).collect(),
        None => String::new(),
    }
}

/// Without capital at the start, for the middle of a sentence; names in
/// capitals ("PE 100") stay.
pub(crate) fn lower(text: &str) -> String {
    let mut chars = text.chars();
    match (chars.next(), chars.next()) {
        (Some(first), Some(second)) if second.is_lowercase() || second == ' ' => {
            first.to_lowercase().chain(text.chars().skip(1)).collect()
        }
        (Some(first), None) => first.to_lowercase().collect(),
        _ => text.to_owned(),
    }
}

/// A sentence as a clause: no capital, no full stop.
pub(crate) fn clause(sentence: &str) -> String {
    lower(sentence.trim_end_matches('.'))
}

/// A clause as a sentence.
pub(crate) fn sentence(clause: &str) -> String {
    let mut text = capital(clause);
    if !text.is_empty() && !text.ends_with(['.', '?', ':']) {
        text.push('.');
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sentences_and_clauses_turn_into_one_another() {
        assert_eq!(
            clause("Surge is not solved yet."),
            "surge is not solved yet"
        );
        assert_eq!(clause("PE 100 melts."), "PE 100 melts");
        assert_eq!(sentence("el ángulo"), "El ángulo.");
        assert_eq!(sentence("Ánimo."), "Ánimo.");
        assert_eq!(capital("ángulo"), "Ángulo");
        assert_eq!(lower("Ángulo"), "ángulo");
        assert_eq!((capital(""), lower(""), sentence("")), Default::default());
    }
}
