//! The drawings: pure functions from plain figures and ready-made words to the
//! static part of a picture.
//!
//! What goes in: `f64` in display units (metres or feet, millimetres or inches)
//! and strings that are already in the reader's language. What comes out: one
//! string of SVG elements for `<g inner_html>`, the places a finger can hit, and
//! functions that place a crosshair. No web types, no engineering, no language
//! and no colour: classes only, which `www/styles/app.css` dresses per theme.
//!
//! - [`long_section`]: the line with its ground, static level and grade line
//! - [`sweep_chart`]: loss against bore for every pipe of the catalogue
//! - [`trace_chart`]: the level at a place against time
//! - [`verdict_mark`]: the small scale beside a verdict
//!
//! Text sizes and the pipe's widths are attributes, because the layout was made
//! for them; `style` attributes are never written, the page's policy refuses
//! them.

pub mod hatch;
pub mod label;
pub mod long_section;
pub mod polyline;
pub mod scale;
pub mod shape;
pub mod svg;
pub mod sweep_chart;
pub mod ticks;
pub mod trace_chart;
pub mod verdict_mark;

#[cfg(test)]
mod contrast;
#[cfg(test)]
mod gallery;
#[cfg(test)]
mod samples;

/// CSS pixels in a millimetre of paper: 96 to the inch (CSS Values and Units
/// Module Level 4, absolute lengths).
pub const PX_PER_MM: f64 = 96.0 / 25.4;

/// The room a drawing has, and for what it is made.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Size {
    /// Width in CSS pixels.
    pub width: f64,
    /// Height in CSS pixels.
    pub height: f64,
    /// Larger text and heavier lines, for the outdoor theme.
    pub big: bool,
    /// Black alone, on paper, at a stated scale.
    pub print: bool,
}

impl Size {
    /// Room on a screen.
    #[must_use]
    pub const fn screen(width: f64, height: f64) -> Size {
        Size {
            width,
            height,
            big: false,
            print: false,
        }
    }

    /// Room on paper, in millimetres.
    #[must_use]
    pub fn paper_mm(width_mm: f64, height_mm: f64) -> Size {
        Size {
            width: width_mm * PX_PER_MM,
            height: height_mm * PX_PER_MM,
            big: false,
            print: true,
        }
    }

    /// Size of the text in pixels; never under 10.
    #[must_use]
    pub const fn text(self) -> f64 {
        if self.print {
            10.5
        } else if self.big {
            14.5
        } else {
            12.0
        }
    }

    /// What line widths that carry meaning are multiplied by.
    #[must_use]
    pub const fn weight(self) -> f64 {
        if self.print {
            0.65
        } else if self.big {
            1.35
        } else {
            1.0
        }
    }
}

/// Whether a length is under `least`, or no number at all.
fn under(length: f64, least: f64) -> bool {
    length.is_nan() || length < least
}

/// What a check came to, as a drawing needs to know it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, Default)]
pub enum Verdict {
    /// Within what is allowed.
    Holds,
    /// Within what is allowed, with little margin.
    Tight,
    /// Not settled: drawn broken, everywhere.
    #[default]
    Unsettled,
    /// Beyond what is allowed: the one that may shout.
    Fails,
}

/// Why there is no drawing.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum DrawingError {
    /// Fewer points than a drawing needs.
    TooFew {
        /// How many there are.
        found: usize,
        /// How many it takes.
        needed: usize,
    },
    /// A coordinate is not a finite number, or not above zero on a logarithmic
    /// scale; its place among the points.
    NotDrawable {
        /// The place of the first such point.
        index: usize,
    },
    /// Chainage goes backwards.
    Backwards {
        /// The place of the first point that lies before the one ahead of it.
        index: usize,
    },
    /// The room is too small to put anything legible in.
    NoRoom {
        /// Width in pixels.
        width: f64,
        /// Height in pixels.
        height: f64,
    },
}

impl core::fmt::Display for DrawingError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            DrawingError::TooFew { found, needed } => {
                write!(f, "{found} points, where a drawing needs {needed}")
            }
            DrawingError::NotDrawable { index } => write!(f, "point {index} cannot be drawn"),
            DrawingError::Backwards { index } => write!(f, "point {index} lies behind the last"),
            DrawingError::NoRoom { width, height } => {
                write!(f, "no room to draw in {width} by {height} pixels")
            }
        }
    }
}

impl core::error::Error for DrawingError {}

/// Writes a number with this many decimals, in the reader's language.
pub type NumberFormat<'a> = &'a dyn Fn(f64, usize) -> String;

/// A finished static part.
#[derive(Debug, Clone, PartialEq)]
pub struct Picture {
    /// Elements for `<g inner_html>`; holds no `style` attribute.
    pub svg: String,
    /// Width of the view box in pixels.
    pub width: f64,
    /// Height of the view box in pixels.
    pub height: f64,
    /// Name of the drawing, for `<title>`.
    pub title: String,
    /// What it shows, for `<desc>`.
    pub desc: String,
}

impl Picture {
    /// `viewBox` of the `svg` element that holds it.
    #[must_use]
    pub fn view_box(&self) -> String {
        format!(
            "0 0 {} {}",
            svg::number(self.width),
            svg::number(self.height)
        )
    }

    /// A whole `svg` element, for print and for files: named and described,
    /// with its size in millimetres so that its scale is kept on paper.
    /// `class` goes on the element; `id` makes the names of title and desc and
    /// must be unique on the page.
    #[must_use]
    pub fn element(&self, class: &str, id: &str) -> String {
        let mut out = String::with_capacity(self.svg.len() + 512);
        out.push_str("<svg xmlns=\"http://www.w3.org/2000/svg\" role=\"img\" class=\"");
        svg::escape_into(&mut out, class);
        out.push_str("\" viewBox=\"");
        out.push_str(&self.view_box());
        out.push_str("\" width=\"");
        out.push_str(&svg::number(self.width / PX_PER_MM));
        out.push_str("mm\" height=\"");
        out.push_str(&svg::number(self.height / PX_PER_MM));
        out.push_str("mm\" aria-labelledby=\"");
        svg::escape_into(&mut out, id);
        out.push_str("-title ");
        svg::escape_into(&mut out, id);
        out.push_str("-desc\"><title id=\"");
        svg::escape_into(&mut out, id);
        out.push_str("-title\">");
        svg::escape_into(&mut out, &self.title);
        out.push_str("</title><desc id=\"");
        svg::escape_into(&mut out, id);
        out.push_str("-desc\">");
        svg::escape_into(&mut out, &self.desc);
        out.push_str("</desc><g>");
        out.push_str(&self.svg);
        out.push_str("</g></svg>");
        out
    }
}
