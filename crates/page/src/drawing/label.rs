//! Placing labels so that none overlaps another or leaves its frame.
//!
//! Labels are placed one after the other, the weightiest first. Each brings the
//! places it would take, best first; it gets the one that is free and crosses the
//! least ink. One that finds no free place is not drawn: the drawing's table and
//! description still tell what it said.

use super::svg::{Anchor, Svg};

/// Width of a text in pixels, from above: the widths of a wide system sans
/// (DejaVu Sans, measured in its own font units), so that text in any usual sans
/// keeps inside. `strong` adds what bold adds.
#[must_use]
pub fn text_width(text: &str, size: f64, strong: bool) -> f64 {
    let em: f64 = text.chars().map(char_width).sum();
    em * size * if strong { 1.12 } else { 1.0 }
}

const fn char_width(c: char) -> f64 {
    match c {
        'i' | 'j' | 'l' | '\'' | 'I' | 'J' => 0.3,
        ' ' | '.' | ',' | ':' | ';' | '|' | '/' | '\u{b7}' | '\u{a0}' => 0.34,
        'f' | 't' => 0.4,
        '\u{2009}' | '\u{202f}' => 0.2,
        '(' | ')' | '-' | '!' | '"' | 'r' | '\u{2019}' => 0.46,
        'w' | '+' | '=' | '<' | '>' | '\u{2212}' | '\u{d7}' | '\u{b1}' => 0.84,
        'm' | 'M' | 'W' | '%' | '@' => 1.0,
        'D' | 'G' | 'H' | 'N' | 'O' | 'Q' | 'U' => 0.79,
        'A'..='Z' => 0.7,
        'a'..='z' | '0'..='9' | '\u{2013}' => 0.64,
        // Accented Latin is as wide as Latin; anything else may be full width.
        '\u{a1}'..='\u{24f}' => 0.72,
        _ => 1.0,
    }
}

/// A box in pixels, y down.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rect {
    /// Left edge.
    pub x0: f64,
    /// Upper edge.
    pub y0: f64,
    /// Right edge.
    pub x1: f64,
    /// Lower edge.
    pub y1: f64,
}

impl Rect {
    /// Whether they share more than an edge.
    #[must_use]
    pub fn overlaps(&self, other: &Rect) -> bool {
        self.x0 < other.x1 && other.x0 < self.x1 && self.y0 < other.y1 && other.y0 < self.y1
    }

    /// Whether `other` lies wholly in it.
    #[must_use]
    pub fn holds(&self, other: &Rect) -> bool {
        other.x0 >= self.x0 && other.x1 <= self.x1 && other.y0 >= self.y0 && other.y1 <= self.y1
    }

    /// Whether a point lies in it.
    #[must_use]
    pub fn holds_point(&self, x: f64, y: f64) -> bool {
        x >= self.x0 && x <= self.x1 && y >= self.y0 && y <= self.y1
    }

    /// The length of a straight line that lies inside it (Liang and Barsky 1984).
    #[must_use]
    pub fn length_inside(&self, a: (f64, f64), b: (f64, f64)) -> f64 {
        let (dx, dy) = (b.0 - a.0, b.1 - a.1);
        let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
        for (p, q) in [
            (-dx, a.0 - self.x0),
            (dx, self.x1 - a.0),
            (-dy, a.1 - self.y0),
            (dy, self.y1 - a.1),
        ] {
            if p == 0.0 {
                if q < 0.0 {
                    return 0.0;
                }
            } else if p < 0.0 {
                enter = enter.max(q / p);
            } else {
                leave = leave.min(q / p);
            }
        }
        if leave > enter {
            (leave - enter) * (dx * dx + dy * dy).sqrt()
        } else {
            0.0
        }
    }
}

/// A place a label would take: its baseline, and how it stands to it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Place {
    /// x in pixels.
    pub x: f64,
    /// Baseline in pixels.
    pub y: f64,
    /// How the text stands to x.
    pub anchor: Anchor,
}

/// A text, before it has a place.
#[derive(Debug, Clone, Copy)]
pub struct Words<'a> {
    /// What it says.
    pub text: &'a str,
    /// Its size in pixels.
    pub size: f64,
    /// Whether it is bold.
    pub strong: bool,
    /// Its classes.
    pub class: &'a str,
}

/// Share of the size above and below the baseline.
const ASCENT: f64 = 0.80;
const DESCENT: f64 = 0.24;

/// The box of a text at a place.
#[must_use]
pub fn text_box(words: &Words<'_>, place: &Place) -> Rect {
    let width = text_width(words.text, words.size, words.strong);
    let x0 = match place.anchor {
        Anchor::Start => place.x,
        Anchor::Middle => place.x - width / 2.0,
        Anchor::End => place.x - width,
    };
    Rect {
        x0,
        y0: place.y - ASCENT * words.size,
        x1: x0 + width,
        y1: place.y + DESCENT * words.size,
    }
}

/// A piece of line that labels keep off, and what each pixel of it costs.
#[derive(Debug, Clone, Copy)]
struct Ink {
    from: (f64, f64),
    to: (f64, f64),
    cost: f64,
}

/// Keeps what is taken.
#[derive(Debug, Clone)]
pub struct Placer {
    frame: Rect,
    taken: Vec<Rect>,
    /// Those of `taken` that are words, which a leader must not strike through.
    words: Vec<Rect>,
    ink: Vec<Ink>,
}

impl Placer {
    /// An empty frame no label may leave.
    #[must_use]
    pub const fn new(frame: Rect) -> Placer {
        Placer {
            frame,
            taken: Vec::new(),
            words: Vec::new(),
            ink: Vec::new(),
        }
    }

    /// Takes a box that no label may touch.
    pub fn take(&mut self, rect: Rect) {
        self.taken.push(rect);
    }

    /// Tells of a broken line that labels should keep off; each pixel of it
    /// under a label costs `cost`.
    pub fn avoid(&mut self, points: &[(f64, f64)], cost: f64) {
        for w in points.windows(2) {
            self.ink.push(Ink {
                from: w[0],
                to: w[1],
                cost,
            });
        }
    }

    /// Whether a box is free and in the frame.
    #[must_use]
    pub fn is_free(&self, rect: &Rect) -> bool {
        self.frame.holds(rect) && !self.taken.iter().any(|t| t.overlaps(rect))
    }

    /// What is taken so far.
    #[must_use]
    pub fn taken(&self) -> &[Rect] {
        &self.taken
    }

    /// Gives the text the best of its places and takes it, or `None`.
    pub fn place(&mut self, words: &Words<'_>, places: &[Place]) -> Option<Place> {
        self.place_led(words, places, None)
    }

    /// The same for a text that may be led to: `led` is a point, the pixels a leader
    /// keeps off it, and the distance up to which none is needed.
    fn place_led(
        &mut self,
        words: &Words<'_>,
        places: &[Place],
        led: Option<((f64, f64), f64, f64)>,
    ) -> Option<Place> {
        if words.text.is_empty() {
            return None;
        }
        let mut best: Option<(f64, Place, Rect)> = None;
        for (order, place) in places.iter().enumerate() {
            let rect = text_box(words, place);
            if !self.is_free(&rect) {
                continue;
            }
            let crossed: f64 = self
                .ink
                .iter()
                .map(|i| rect.length_inside(i.from, i.to) * i.cost)
                .sum();
            // A leader through other words is worse than a long way.
            let struck: f64 = led
                .and_then(|(at, start, near)| leader(at, start, near, &rect))
                .map_or(0.0, |(a, b)| {
                    self.words.iter().map(|w| w.length_inside(a, b)).sum()
                });
            // A later place is a little worse, so that the first good one wins.
            let cost = crossed + struck * 10.0 + order as f64 * 0.5;
            if best.as_ref().is_none_or(|(least, ..)| cost < *least) {
                best = Some((cost, *place, rect));
            }
        }
        let (_, place, rect) = best?;
        self.taken.push(rect);
        self.words.push(rect);
        Some(place)
    }

    /// Places and writes a text about a point, with a leader (class `d-leader`)
    /// where it had to go farther than `near`.
    pub fn write_led(
        &mut self,
        svg: &mut Svg,
        words: &Words<'_>,
        places: &[Place],
        (at, start, near): ((f64, f64), f64, f64),
    ) -> Option<Place> {
        let place = self.place_led(words, places, Some((at, start, near)))?;
        if let Some((from, to)) = leader(at, start, near, &text_box(words, &place)) {
            svg.line("d-leader", from, to);
            self.avoid(&[from, to], 3.0);
        }
        svg.text(
            words.class,
            (place.x, place.y),
            place.anchor,
            words.size,
            words.text,
        );
        Some(place)
    }

    /// Places and writes a text; whether it found a place.
    pub fn write(&mut self, svg: &mut Svg, words: &Words<'_>, places: &[Place]) -> Option<Place> {
        let place = self.place(words, places)?;
        svg.text(
            words.class,
            (place.x, place.y),
            place.anchor,
            words.size,
            words.text,
        );
        Some(place)
    }
}

/// A thin line from `start` pixels off a point to its label, where the label had to
/// go farther than `near` pixels.
#[must_use]
pub fn leader(
    at: (f64, f64),
    start: f64,
    near: f64,
    label: &Rect,
) -> Option<((f64, f64), (f64, f64))> {
    let to = (
        at.0.clamp(label.x0, label.x1),
        at.1.clamp(label.y0, label.y1),
    );
    let (dx, dy) = (to.0 - at.0, to.1 - at.1);
    let far = (dx * dx + dy * dy).sqrt();
    (far > near && far > start).then(|| ((at.0 + dx / far * start, at.1 + dy / far * start), to))
}

/// Places around a point, `gap` pixels off it: right, left, above, below, then
/// farther out, and last well aside, where a leader has to lead to it.
#[must_use]
pub fn around(x: f64, y: f64, gap: f64, size: f64) -> Vec<Place> {
    let mut places = Vec::with_capacity(82);
    for far in [1.0, 1.9, 3.2, 5.0] {
        let g = gap * far;
        let drop = size * 0.35;
        for (dx, dy, anchor) in [
            (g, drop, Anchor::Start),
            (-g, drop, Anchor::End),
            (g * 0.6, -g * 0.7, Anchor::Start),
            (-g * 0.6, -g * 0.7, Anchor::End),
            (g * 0.6, g * 0.6 + size * 0.8, Anchor::Start),
            (-g * 0.6, g * 0.6 + size * 0.8, Anchor::End),
            (0.0, -g, Anchor::Middle),
            (0.0, g + size * 0.8, Anchor::Middle),
        ] {
            places.push(Place {
                x: x + dx,
                y: y + dy,
                anchor,
            });
        }
    }
    for aside in [2.0, 4.0, 7.0, 11.0, 16.0] {
        for rise in [-1.6, 2.4, -3.0, 3.8, 5.4] {
            let y = y + rise * size;
            places.push(Place {
                x: x + aside * size,
                y,
                anchor: Anchor::Start,
            });
            places.push(Place {
                x: x - aside * size,
                y,
                anchor: Anchor::End,
            });
        }
    }
    places
}

/// Places along a broken line going forward in x: just above it and just below,
/// at each of `shares` of its way, clear of the line for the text's whole width.
#[must_use]
pub fn along(
    points: &[(f64, f64)],
    words: &Words<'_>,
    gap: f64,
    shares: &[f64],
    below_first: bool,
) -> Vec<Place> {
    let (Some(first), Some(last)) = (points.first(), points.last()) else {
        return Vec::new();
    };
    let width = text_width(words.text, words.size, words.strong);
    let mut places = Vec::with_capacity(shares.len() * 2);
    for share in shares {
        let room = (last.0 - first.0 - width).max(0.0);
        let x0 = first.0 + room * share;
        let under = super::polyline::part(points, x0, x0 + width);
        let (least, most) = under.iter().fold((f64::MAX, f64::MIN), |(lo, hi), p| {
            (
                if p.1 < lo { p.1 } else { lo },
                if p.1 > hi { p.1 } else { hi },
            )
        });
        if least > most {
            continue;
        }
        let above = Place {
            x: x0,
            y: least - gap - DESCENT * words.size,
            anchor: Anchor::Start,
        };
        let below = Place {
            x: x0,
            y: most + gap + ASCENT * words.size,
            anchor: Anchor::Start,
        };
        places.extend(if below_first {
            [below, above]
        } else {
            [above, below]
        });
    }
    places
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    const FRAME: Rect = Rect {
        x0: 0.0,
        y0: 0.0,
        x1: 200.0,
        y1: 100.0,
    };

    fn words(text: &str) -> Words<'_> {
        Words {
            text,
            size: 12.0,
            strong: false,
            class: "d-text",
        }
    }

    #[test]
    fn widths_are_from_above() {
        // Advance widths of DejaVu Sans 2.37 in units of 2048 to the em, read
        // from the font's hmtx table.
        for (c, units) in [
            ('0', 1303.0),
            ('a', 1255.0),
            ('m', 1995.0),
            ('i', 569.0),
            (' ', 651.0),
            ('W', 2025.0),
            ('%', 1946.0),
            ('r', 842.0),
            ('O', 1612.0),
            ('w', 1675.0),
            ('/', 690.0),
            ('f', 721.0),
            ('t', 803.0),
            ('A', 1401.0),
            ('\u{d7}', 1716.0),
            ('\u{f1}', 1298.0),
            ('d', 1300.0),
        ] {
            assert!(char_width(c) >= units / 2048.0, "{c}");
        }
        assert!(text_width("grade", 12.0, true) > text_width("grade", 12.0, false));
    }

    #[test]
    fn the_first_free_place_wins() {
        let mut placer = Placer::new(FRAME);
        let spots = [
            Place {
                x: 10.0,
                y: 50.0,
                anchor: Anchor::Start,
            },
            Place {
                x: 10.0,
                y: 80.0,
                anchor: Anchor::Start,
            },
        ];
        assert_eq!(placer.place(&words("one"), &spots), Some(spots[0]));
        assert_eq!(placer.place(&words("two"), &spots), Some(spots[1]));
        assert_eq!(placer.place(&words("three"), &spots), None);
    }

    #[test]
    fn ink_is_kept_off_when_there_is_other_room() {
        let mut placer = Placer::new(FRAME);
        placer.avoid(&[(0.0, 46.0), (200.0, 46.0)], 1.0);
        let spots = [
            Place {
                x: 10.0,
                y: 50.0,
                anchor: Anchor::Start,
            },
            Place {
                x: 10.0,
                y: 80.0,
                anchor: Anchor::Start,
            },
        ];
        assert_eq!(placer.place(&words("one"), &spots), Some(spots[1]));
    }

    #[test]
    fn a_line_is_measured_inside_a_box() {
        let cases = [
            ((-50.0, 50.0), (50.0, 50.0), 50.0),
            ((0.0, 150.0), (200.0, 150.0), 0.0),
            ((10.0, -10.0), (10.0, 200.0), 100.0),
            ((10.0, 10.0), (13.0, 14.0), 5.0),
        ];
        for (a, b, length) in cases {
            assert!(
                (FRAME.length_inside(a, b) - length).abs() < 1e-9,
                "{a:?} {b:?}"
            );
        }
    }

    #[test]
    fn along_a_line_means_clear_of_it() {
        let line = [(0.0, 50.0), (200.0, 30.0)];
        for place in along(&line, &words("grade line"), 3.0, &[0.0, 0.5, 1.0], false) {
            let rect = text_box(&words("grade line"), &place);
            assert!(rect.length_inside(line[0], line[1]) < 1e-9);
        }
    }

    #[test]
    fn a_leader_goes_round_other_words() {
        let mut placer = Placer::new(FRAME);
        let first = Place {
            x: 60.0,
            y: 50.0,
            anchor: Anchor::Start,
        };
        placer.place(&words("in between"), &[first]);
        let behind = Place {
            x: 150.0,
            y: 50.0,
            anchor: Anchor::Start,
        };
        let above = Place {
            x: 60.0,
            y: 20.0,
            anchor: Anchor::Start,
        };
        let mut svg = Svg::new();
        let led = ((10.0, 46.0), 4.0, 20.0);
        let got = placer.write_led(&mut svg, &words("far"), &[behind, above], led);
        assert_eq!(got, Some(above));
        assert!(svg.finish().contains("d-leader"));
    }

    proptest! {
        #[test]
        fn no_two_labels_overlap_and_none_leaves(
            spots in prop::collection::vec((-20.0_f64..220.0, -20.0_f64..120.0, "[a-z0-9 ]{1,14}"), 1..40),
        ) {
            let mut placer = Placer::new(FRAME);
            for (x, y, text) in &spots {
                placer.place(&words(text), &around(*x, *y, 6.0, 12.0));
            }
            let taken = placer.taken();
            for (i, a) in taken.iter().enumerate() {
                prop_assert!(FRAME.holds(a));
                for b in &taken[i + 1..] {
                    prop_assert!(!a.overlaps(b));
                }
            }
        }
    }
}
