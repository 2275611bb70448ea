//! What a heading says: the column's meaning, its unit, and how its distances
//! are measured. English and Spanish, as field books and spreadsheets have
//! them; the words are common practice.

use super::Meaning;
use crate::book::{DistanceKind, Reckoning};

/// The unit a heading, a cell under it, or nothing names.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum UnitSaid {
    /// None is named.
    No,
    /// One that is known, as printed.
    Known(&'static str),
    /// Something that stands where a unit does and is none of ours.
    Unknown(String),
}

/// What a heading is read as.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Heading {
    pub(super) meaning: Meaning,
    pub(super) unit: UnitSaid,
    pub(super) distance_kind: Option<DistanceKind>,
    pub(super) reckoning: Option<Reckoning>,
    /// A slope that may be per cent or degrees.
    pub(super) slope: bool,
    /// A latitude: beside it, "long" is no length.
    pub(super) latitude: bool,
}

const DISTANCE: &str = "distance distances distancia distancias dist chainage chain ch progresiva prog abscisa \
    absc km pk kp length longitud long largo leg tape cinta cadenamiento kilometraje run \
    tramo d l sd hd dh di";
const LEVEL: &str = "level levels elevation elev el ele height altitude alt altura z cota cotas nivel \
    elevacion altitud rl h";
const ANGLE: &str = "angle angles angulo ang clinometer clino clinometro inclination inclinacion tilt incl \
    eclimetro";
const SLOPE: &str = "slope pendiente pend grade gradient gradiente";
const BACK: &str = "back backsight bs atras reverse va retro espalda";
const FORE: &str = "fore foresight fs adelante forward frente vd";
const STAFF: &str = "staff mira rod lectura reading hose manguera";
const TURN: &str = "deflection deflexion deflect turn giro quiebre";
const PLAN: &str = "plan planta horizontal horiz hor";
const NAME: &str = "name nombre station stations sta stn estacion est point punto pt pto peg estaca id no nr \
    nro num numero number n # vertice label description descripcion desc remark remarks note \
    notes nota notas obs observacion observaciones comment comments comentario code codigo \
    item";
/// Differences of level and the like: near a level, and none.
const NOT_LEVEL: &str = "difference diff diferencia dif desnivel delta rise fall drop instrument instrumento \
    depth profundidad";
const BEARING: &str = "azimuth azimut acimut bearing rumbo";
const LATITUDE: &str = "latitude latitud lat";
const FROM_START: &str = "chainage ch progresiva prog abscisa absc pk kp km cumulative cum total accumulated \
    acumulada acumulado acum running cadenamiento kilometraje start inicio origen";
const FROM_PREVIOUS: &str = "leg partial parcial step previous anterior tramo interval";
const ALONG: &str = "slope inclined inclinada sd di tape cinta along pendiente sloping";
const HORIZONTAL: &str = "horizontal horiz hor hd dh plan planta map mapa reduced reducida";
/// Words that may stand in brackets behind a heading and change nothing.
const REMARK: &str = "ground terrain terreno natural invert pipe tuberia axis eje from desde to a al the de \
    del la el of in en line linea measured medida sight vista left right derecha izquierda \
    vertical vert site datum local top bottom";

/// A unit as written in a heading, a row of units or behind a number.
pub(super) fn unit(text: &str) -> Option<&'static str> {
    let plain: String = fold(text)
        .chars()
        .filter(|c| !(c.is_whitespace() || ".()[]{}<>_".contains(*c)))
        .collect();
    Some(match plain.as_str() {
        "m" | "mt" | "mts" | "mtr" | "meter" | "meters" | "metre" | "metres" | "metro"
        | "metros" | "msnm" | "masl" | "mamsl" => "m",
        "ft" | "feet" | "foot" | "'" | "′" | "pie" | "pies" => "ft",
        "km" | "kilometre" | "kilometres" | "kilometer" | "kilometers" | "kilometros" => "km",
        "cm" => "cm",
        "mm" => "mm",
        "°" | "º" | "deg" | "degs" | "degree" | "degrees" | "grado" | "grados" => "°",
        "%" | "pct" | "percent" | "porcentaje" | "porciento" => "%",
        _ => return None,
    })
}

/// In small letters, accents off.
fn fold(text: &str) -> String {
    text.chars()
        .flat_map(char::to_lowercase)
        .map(|c| match c {
            'á' | 'à' | 'â' => 'a',
            'é' | 'è' | 'ê' => 'e',
            'í' | 'ì' => 'i',
            'ó' | 'ò' | 'ô' => 'o',
            'ú' | 'ù' | 'ü' => 'u',
            'ñ' => 'n',
            c => c,
        })
        .collect()
}

fn words(text: &str) -> Vec<String> {
    let mut found = vec![String::new()];
    for c in text.chars() {
        let own = "%°º#".contains(c);
        if own || !c.is_alphanumeric() {
            found.push(String::new());
        }
        if c.is_alphanumeric() || own {
            if let Some(last) = found.last_mut() {
                last.push(c);
            }
            if own {
                found.push(String::new());
            }
        }
    }
    found.retain(|w| !w.is_empty());
    found
}

/// What stands in the first brackets, and the rest.
fn brackets(text: &str) -> (String, Option<String>) {
    for (open, close) in [('(', ')'), ('[', ']'), ('{', '}')] {
        if let Some((before, rest)) = text.split_once(open) {
            let (inner, after) = rest.split_once(close).unwrap_or((rest, ""));
            return (format!("{before} {after}"), Some(inner.trim().to_owned()));
        }
    }
    (text.to_owned(), None)
}

/// Reads a heading; none where it says nothing we know.
pub(super) fn recognise(text: &str) -> Option<Heading> {
    let folded = fold(text);
    let (outside, inside) = brackets(&folded);
    let mut all = words(&outside);
    // "N°" and its like: a number sign, no degrees.
    if let [.., before, "°" | "º"] = all.iter().map(String::as_str).collect::<Vec<_>>()[..]
        && ["n", "no", "nr", "nro"].contains(&before)
    {
        all.pop();
    }
    let mut said = UnitSaid::No;
    if let Some(inside) = inside {
        if let Some(known) = unit(&inside) {
            said = UnitSaid::Known(known);
        } else {
            let more = words(&inside);
            match more.iter().find_map(|w| unit(w)) {
                Some(known) => said = UnitSaid::Known(known),
                None if more.iter().all(|w| is_known(w)) => {}
                None => said = UnitSaid::Unknown(inside),
            }
            all.extend(more);
        }
    }
    if said == UnitSaid::No
        && let Some(last) = all.last().and_then(|w| unit(w))
        && (all.len() > 1 || matches!(last, "%" | "°" | "km"))
    {
        said = UnitSaid::Known(last);
    }
    let has = |list: &str| all.iter().any(|w| stands_in(w, list));
    let is_angle_unit = matches!(said, UnitSaid::Known("°" | "%"));
    let mut heading = Heading {
        meaning: Meaning::LeftOut,
        unit: said,
        distance_kind: None,
        reckoning: None,
        slope: false,
        latitude: has(LATITUDE),
    };
    heading.meaning = if has(BEARING) || has(LATITUDE) {
        return heading.latitude.then_some(heading);
    } else if has(TURN) || (has(PLAN) && has(ANGLE)) {
        Meaning::PlanTurn
    } else if has(DISTANCE) && !is_angle_unit && !has(NOT_LEVEL) {
        heading.distance_kind = if has(HORIZONTAL) {
            Some(DistanceKind::Horizontal)
        } else if has(ALONG) {
            Some(DistanceKind::Slope)
        } else {
            None
        };
        heading.reckoning = if has(FROM_PREVIOUS) {
            Some(Reckoning::FromPrevious)
        } else if has(FROM_START) {
            Some(Reckoning::FromStart)
        } else {
            None
        };
        Meaning::Distance
    } else if has(BACK) || has(FORE) {
        match (has(ANGLE) || has(SLOPE) || is_angle_unit, has(BACK)) {
            (true, true) => Meaning::BackSight,
            (true, false) => Meaning::ForeSight,
            (false, true) => Meaning::StaffBack,
            (false, false) => Meaning::StaffFore,
        }
    } else if has(NOT_LEVEL) || has(STAFF) {
        return None;
    } else if has(LEVEL) && !has(ANGLE) && !is_angle_unit {
        // "Grade elevation": a level before a slope.
        Meaning::Level
    } else if has(ANGLE) || has(SLOPE) || is_angle_unit {
        heading.slope = has(SLOPE) && heading.unit == UnitSaid::No;
        Meaning::ForeSight
    } else if has(NAME) {
        Meaning::Name
    } else {
        return None;
    };
    Some(heading)
}

/// Whether a word stands in a list of them.
fn stands_in(word: &str, list: &str) -> bool {
    list.split_whitespace().any(|known| known == word)
}

/// Whether a word has a place in some heading.
fn is_known(word: &str) -> bool {
    [
        DISTANCE,
        LEVEL,
        ANGLE,
        SLOPE,
        BACK,
        FORE,
        STAFF,
        TURN,
        PLAN,
        NAME,
        NOT_LEVEL,
        BEARING,
        FROM_START,
        FROM_PREVIOUS,
        ALONG,
        HORIZONTAL,
        REMARK,
    ]
    .iter()
    .any(|list| stands_in(word, list))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn read(text: &str) -> (Meaning, UnitSaid) {
        recognise(text).map_or((Meaning::LeftOut, UnitSaid::No), |h| (h.meaning, h.unit))
    }

    #[test]
    fn headings_as_they_are_written() {
        use Meaning::*;
        use UnitSaid::{Known, No};
        for (text, meaning, unit) in [
            ("distance (m)", Distance, Known("m")),
            ("dist [ft]", Distance, Known("ft")),
            ("Chainage", Distance, No),
            ("Elev.", Level, No),
            ("level", Level, No),
            ("angle deg", ForeSight, Known("°")),
            ("slope %", ForeSight, Known("%")),
            ("Slope distance, m", Distance, Known("m")),
            ("Distancia horizontal (m)", Distance, Known("m")),
            ("Progresiva", Distance, No),
            ("Cota (m.s.n.m.)", Level, Known("m")),
            ("COTA TERRENO", Level, No),
            ("Level (ground)", Level, No),
            ("Elevation (m a.s.l.)", Level, Known("m")),
            ("Pendiente (%)", ForeSight, Known("%")),
            ("Ángulo adelante (°)", ForeSight, Known("°")),
            ("Ángulo atrás (°)", BackSight, Known("°")),
            ("BS", StaffBack, No),
            ("FS (m)", StaffFore, Known("m")),
            ("Vista atrás", StaffBack, No),
            ("back sight (deg)", BackSight, Known("°")),
            ("Deflexión (grados)", PlanTurn, Known("°")),
            ("horizontal angle", PlanTurn, No),
            ("Station", Name, No),
            ("Estación", Name, No),
            ("N°", Name, No),
            ("Pto. Nº", Name, No),
            ("Nro.", Name, No),
            ("dist_m", Distance, Known("m")),
            ("Level difference (m)", LeftOut, No),
            ("Desnivel", LeftOut, No),
            ("Azimuth (deg)", LeftOut, No),
            ("wind", LeftOut, No),
        ] {
            assert_eq!(read(text), (meaning, unit), "{text}");
        }
        assert_eq!(
            read("Distance (chains)").1,
            UnitSaid::Unknown("chains".to_owned())
        );
    }

    #[test]
    fn how_distances_are_measured_is_read_too() {
        for (text, kind, reckoning) in [
            ("Slope distance", Some(DistanceKind::Slope), None),
            (
                "Dist. parcial horizontal",
                Some(DistanceKind::Horizontal),
                Some(Reckoning::FromPrevious),
            ),
            ("Dist. acumulada", None, Some(Reckoning::FromStart)),
            (
                "Leg (tape)",
                Some(DistanceKind::Slope),
                Some(Reckoning::FromPrevious),
            ),
            ("distance", None, None),
        ] {
            let read = recognise(text).unwrap();
            assert_eq!(
                (read.distance_kind, read.reckoning),
                (kind, reckoning),
                "{text}"
            );
        }
        assert!(recognise("slope").unwrap().slope);
        assert!(!recognise("slope (deg)").unwrap().slope);
    }

    proptest! {
        #[test]
        fn any_heading_is_read_without_panic(text in ".{0,60}") {
            let _ = recognise(&text);
            let _ = unit(&text);
        }
    }
}
