//! The long section: the line as it lies on the ground, with the levels of the
//! water in it. The drawing the trade thinks in.
//!
//! Along x is chainage, up is level, both in the same display unit, so that the
//! vertical exaggeration is a plain ratio and can be stated. Ink is ordered by
//! what it means: the pipe is heaviest and grows with its class; the static level
//! is chain-dotted; the grade line has the colour of water; the ground is
//! hatched; only a length below atmospheric pressure or a stretch that fails is
//! drawn in the colour of fails, and each of these has a form of its own for
//! paper and for eyes that see no colour.

mod glyph;
mod layout;
mod paint;
mod touch;

pub use layout::PrintScale;
pub use touch::{Crosshair, Hit, HitWhat};

use super::{DrawingError, NumberFormat, Picture, Size, Verdict, polyline};
use layout::Layout;

/// A point of the line.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LinePoint {
    /// Chainage.
    pub x: f64,
    /// Level of the pipe.
    pub y: f64,
    /// Whether it is a surveyed station (and can be touched), or a point between.
    pub is_station: bool,
}

/// A run of one pipe.
#[derive(Debug, Clone, PartialEq)]
pub struct StretchBand {
    /// Chainage where it begins.
    pub from: f64,
    /// Chainage where it ends.
    pub to: f64,
    /// Its name in the class band: "SDR 17 · PN 10".
    pub label: String,
    /// A shorter one for a narrow band: "PN 10". May be empty.
    pub short_label: String,
    /// How strong its class is among those drawn, 0 to 1: its line grows with it.
    pub weight: f64,
    /// Whether it is the one selected.
    pub selected: bool,
    /// What it came to.
    pub verdict: Verdict,
}

/// What sits on the line.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
#[non_exhaustive]
pub enum Glyph {
    /// Trash rack or intake.
    Rack,
    /// A valve in the line.
    Valve,
    /// An air valve or vent pipe.
    Vent,
    /// A bend.
    Bend,
    /// A reducer.
    Reducer,
    /// A drain or washout.
    Drain,
    /// An anchor block.
    Anchor,
    /// Nozzle or jets, at the foot.
    Jet,
    /// Anything else.
    Other,
}

/// A fitting on the line.
#[derive(Debug, Clone, PartialEq)]
pub struct FittingMark {
    /// Chainage.
    pub x: f64,
    /// Level; `None` puts it on the line.
    pub y: Option<f64>,
    /// Its sign.
    pub glyph: Glyph,
    /// What it is called; may be empty, and is left out where there is no room.
    pub label: String,
}

/// A level along the line with its name.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LevelLine {
    /// Chainage and level, going forward.
    pub points: Vec<(f64, f64)>,
    /// What it is called: "grade line, 3.3 m lost".
    pub label: String,
}

/// A level that is the same all along.
#[derive(Debug, Clone, PartialEq)]
pub struct StandingLevel {
    /// The level.
    pub y: f64,
    /// What it is called: "static level 87.2 m".
    pub label: String,
}

/// A point that is pointed out.
#[derive(Debug, Clone, PartialEq)]
pub struct MarkedPoint {
    /// Chainage.
    pub x: f64,
    /// Level.
    pub y: f64,
    /// What it says.
    pub label: String,
}

/// Highest and lowest heads of the transient along the line.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct SurgeBand {
    /// Highest level, going forward in chainage.
    pub highest: LevelLine,
    /// Lowest level.
    pub lowest: LevelLine,
}

/// All that the drawing shows. Numbers in one display unit of length; words in the
/// reader's language. What is missing is left out of the drawing.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LongSection {
    /// The line, from forebay to jets; chainage never goes backwards.
    pub points: Vec<LinePoint>,
    /// Normal static level.
    pub static_level: Option<StandingLevel>,
    /// Highest static level, where it differs.
    pub highest_static: Option<StandingLevel>,
    /// The grade line.
    pub grade: Option<LevelLine>,
    /// The surge band.
    pub surge: Option<SurgeBand>,
    /// The stretches, in order.
    pub stretches: Vec<StretchBand>,
    /// Chainages named under the drawing, the weightiest first: both ends, the
    /// cuts, then others; those without room are left out.
    pub chainage_ticks: Vec<(f64, String)>,
    /// Where the pressure is lowest.
    pub lowest: Option<MarkedPoint>,
    /// Lengths below atmospheric pressure, from and to chainage.
    pub sub_atmospheric: Vec<(f64, f64)>,
    /// What those lengths are called; may be empty.
    pub sub_atmospheric_label: String,
    /// Fittings.
    pub fittings: Vec<FittingMark>,
    /// The unit of level, written over its axis: "m".
    pub level_unit: String,
    /// A word in the corner, such as the exaggeration: "heights × 3.1"
    /// ([`vertical_exaggeration`] tells it beforehand). May be empty.
    pub note: String,
    /// Millimetres in one display unit: 1000 for metres, 304.8 for feet. Only for
    /// print at a scale.
    pub unit_mm: f64,
    /// Name of the drawing.
    pub title: String,
    /// What it shows, in a sentence or two.
    pub desc: String,
}

/// The finished long section.
#[derive(Debug, Clone, PartialEq)]
pub struct LongSectionDrawing {
    /// The static part. On paper it may be lower than the room it was given.
    pub picture: Picture,
    /// Heights are drawn this many times larger than lengths.
    pub exaggeration: f64,
    /// The scale on paper; `None` on a screen.
    pub print_scale: Option<PrintScale>,
    /// What a finger can hit, the one on top first.
    pub hits: Vec<Hit>,
    /// Labels that found no room, so that the page may say them elsewhere.
    pub left_out: Vec<String>,
    touch: touch::Touch,
}

impl LongSectionDrawing {
    /// What lies under a pointer.
    #[must_use]
    pub fn hit(&self, x: f64, y: f64) -> Option<HitWhat> {
        touch::hit(&self.hits, x, y)
    }

    /// Where the crosshair stands for a pointer at pixel `x`; outside the line it
    /// stands at its nearer end.
    #[must_use]
    pub fn crosshair(&self, x: f64) -> Option<Crosshair> {
        self.touch.crosshair(x)
    }

    /// Pixel of a chainage on the line, and of the pipe there: for a crosshair that
    /// stands where the book's selection is.
    #[must_use]
    pub fn pixel_of(&self, chainage: f64) -> Option<(f64, f64)> {
        self.touch.pixel_of(chainage)
    }
}

/// How many times larger heights than lengths will be drawn. As [`draw`] it fails
/// on what cannot be drawn.
///
/// # Errors
/// As [`draw`].
pub fn vertical_exaggeration(
    section: &LongSection,
    size: Size,
    number: NumberFormat<'_>,
) -> Result<f64, DrawingError> {
    check(section)?;
    Ok(Layout::of(section, size, number)?.exaggeration())
}

/// Draws the long section. `number` writes a level for the axis.
///
/// # Errors
/// [`DrawingError::TooFew`] without two points of the line;
/// [`DrawingError::NotDrawable`] when a coordinate is not finite;
/// [`DrawingError::Backwards`] when chainage goes back;
/// [`DrawingError::NoRoom`] when the room is too small to be legible.
pub fn draw(
    section: &LongSection,
    size: Size,
    number: NumberFormat<'_>,
) -> Result<LongSectionDrawing, DrawingError> {
    check(section)?;
    let layout = Layout::of(section, size, number)?;
    let painted = paint::paint(section, &layout);
    Ok(LongSectionDrawing {
        picture: Picture {
            svg: painted.svg,
            width: layout.size.width,
            height: layout.size.height,
            title: section.title.clone(),
            desc: section.desc.clone(),
        },
        exaggeration: layout.exaggeration(),
        print_scale: layout.print_scale,
        hits: touch::hits(section, &layout),
        left_out: painted.left_out,
        touch: touch::Touch::of(section, &layout),
    })
}

/// The line as plain points.
fn plain(section: &LongSection) -> Vec<(f64, f64)> {
    section.points.iter().map(|p| (p.x, p.y)).collect()
}

fn check(section: &LongSection) -> Result<(), DrawingError> {
    let line = plain(section);
    if line.len() < 2 {
        return Err(DrawingError::TooFew {
            found: line.len(),
            needed: 2,
        });
    }
    let others = section
        .grade
        .iter()
        .chain(section.surge.iter().flat_map(|s| [&s.highest, &s.lowest]));
    let mut lines = vec![line];
    lines.extend(others.map(|l| l.points.clone()));
    for points in &lines {
        if let Some(index) = points
            .iter()
            .position(|p| !(p.0.is_finite() && p.1.is_finite()))
        {
            return Err(DrawingError::NotDrawable { index });
        }
        if let Some(index) = polyline::first_backwards(points) {
            return Err(DrawingError::Backwards { index });
        }
    }
    let first_x = lines[0][0].0;
    if lines[0].iter().all(|p| p.0 <= first_x) {
        return Err(DrawingError::TooFew {
            found: 1,
            needed: 2,
        });
    }
    Ok(())
}

#[cfg(test)]
mod tests;
