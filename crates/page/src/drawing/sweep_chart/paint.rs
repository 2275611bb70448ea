//! The chart itself, from the back to the front.

use super::super::Verdict;
use super::super::label::{Place, Placer, Rect, Words, around, text_box, text_width};
use super::super::shape::Shape;
use super::super::svg::{Anchor, Path, Svg};
use super::key::Sign;
use super::thin::Role;
use super::{Layout, Limit, SweepChart, SweepPoint};

pub(super) struct Painted {
    pub(super) svg: String,
    pub(super) left_out: Vec<String>,
}

struct Painter<'a> {
    chart: &'a SweepChart,
    layout: &'a Layout,
    pixels: &'a [Option<(f64, f64)>],
    roles: &'a [Role],
    text: f64,
    svg: Svg,
    placer: Placer,
    left_out: Vec<String>,
}

pub(super) fn paint(
    chart: &SweepChart,
    layout: &Layout,
    pixels: &[Option<(f64, f64)>],
    roles: &[Role],
) -> Painted {
    let field = layout.field;
    let mut painter = Painter {
        chart,
        layout,
        pixels,
        roles,
        text: layout.size.text(),
        svg: Svg::new(),
        placer: Placer::new(Rect {
            y0: field.y0 - layout.size.text() * 1.05,
            ..field
        }),
        left_out: Vec::new(),
    };
    painter.veil();
    painter.grid();
    painter.limits();
    painter.drop_lines();
    painter.points();
    painter.chosen();
    painter.labels();
    painter.key();
    Painted {
        svg: painter.svg.finish(),
        left_out: painter.left_out,
    }
}

/// Under this share of the text's size a shape's broken outline is broken finer.
const SMALL: f64 = 0.34;

impl Painter<'_> {
    /// Radius of a full point and of a light one.
    fn radii(&self) -> (f64, f64) {
        let scale = self.text / 12.0;
        (4.8 * scale, 2.0 * scale)
    }

    /// Beyond the cap lies a light veil.
    fn veil(&mut self) {
        let field = self.layout.field;
        if let Some(y) = self
            .chart
            .cap
            .as_ref()
            .and_then(|c| self.layout.y.px(c.share))
        {
            let y = y.clamp(field.y0, field.y1);
            self.svg.rect(
                "d-veil",
                field.x0,
                field.y0,
                field.x1 - field.x0,
                y - field.y0,
            );
        }
    }

    fn grid(&mut self) {
        let field = self.layout.field;
        let text = self.text;
        for (tick, label) in &self.layout.y_ticks {
            let Some(y) = self.layout.y.px(tick.value) else {
                continue;
            };
            self.svg.line("d-grid", (field.x0, y), (field.x1, y));
            let at = (field.x0 - text * 0.5, y + text * 0.36);
            self.svg.text("d-text d-soft", at, Anchor::End, text, label);
        }
        // The unit of bore ends the row; ticks that would touch it go without words.
        let unit = &self.chart.words.bore;
        let baseline = self.layout.bore_baseline;
        let end = self.layout.size.width - text * 0.5;
        let mut free_until = end;
        if !unit.is_empty() {
            self.svg
                .text("d-text d-soft", (end, baseline), Anchor::End, text, unit);
            free_until = end - text_width(unit, text, false) - text * 0.6;
        }
        let mut free_from = 0.0;
        for (tick, label) in &self.layout.x_ticks {
            let Some(x) = self.layout.x.px(tick.value) else {
                continue;
            };
            self.svg.line("d-grid", (x, field.y0), (x, field.y1));
            let half = text_width(label, text, false) / 2.0;
            if x - half >= free_from && x + half <= free_until {
                self.svg
                    .text("d-text d-soft", (x, baseline), Anchor::Middle, text, label);
                free_from = x + half + text * 0.5;
            }
        }
        let loss = &self.chart.words.loss;
        self.svg.text(
            "d-text d-soft",
            (text * 0.5, text),
            Anchor::Start,
            text,
            loss,
        );
    }

    fn limit_line(&mut self, class: &str, limit: &Limit) {
        let field = self.layout.field;
        let Some(y) = self.layout.y.px(limit.share) else {
            return;
        };
        if y >= field.y0 - 0.5 && y <= field.y1 + 0.5 {
            self.svg.line(class, (field.x0, y), (field.x1, y));
            self.placer.avoid(&[(field.x0, y), (field.x1, y)], 2.0);
        }
    }

    fn limits(&mut self) {
        if let Some(limit) = &self.chart.greatest_power {
            self.limit_line("d-quiet-limit", limit);
        }
        if let Some(limit) = &self.chart.cap {
            self.limit_line("d-limit", limit);
        }
    }

    fn chosen_at(&self) -> Option<(f64, f64)> {
        let i = self.chart.points.iter().position(|p| p.chosen)?;
        *self.pixels.get(i)?
    }

    fn drop_lines(&mut self) {
        let Some((x, y)) = self.chosen_at() else {
            return;
        };
        let field = self.layout.field;
        self.svg.line("d-drop", (x, y), (x, field.y1));
        self.svg.line("d-drop", (field.x0, y), (x, y));
    }

    fn points(&mut self) {
        let (full, light) = self.radii();
        let of = |role: Role| {
            let all = self.chart.points.iter().zip(self.pixels).zip(self.roles);
            all.filter(move |(_, r)| **r == role)
                .filter_map(|((p, at), _)| Some((p, (*at)?)))
                .collect::<Vec<(&SweepPoint, (f64, f64))>>()
        };
        let (ticks, small, marks) = (of(Role::Tick), of(Role::Light), of(Role::Full));
        // Ticks and light ones go into one path each: seven hundred elements would
        // be slow to draw, and at their size no broken outline would be seen.
        let mut path = Path::new();
        for (_, at) in ticks {
            path.stroke((at.0, at.1 - light), (at.0, at.1 + light));
        }
        self.svg.path("d-more", &path);
        let (mut lights, mut struck) = (Path::new(), Path::new());
        for (p, at) in small {
            Shape::of(p.family).outline(&mut lights, at, light);
            if p.verdict == Verdict::Fails {
                strike(&mut struck, at, light * 1.3);
            }
        }
        self.svg.path("d-shape-lesser", &lights);
        self.svg.path("d-strike d-strike-lesser", &struck);
        for (p, at) in marks {
            self.point(Shape::of(p.family), p.verdict, at, full);
            let r = full * 1.1;
            self.placer.take(Rect {
                x0: at.0 - r,
                y0: at.1 - r,
                x1: at.0 + r,
                y1: at.1 + r,
            });
        }
    }

    fn point(&mut self, shape: Shape, verdict: Verdict, at: (f64, f64), r: f64) {
        let mut path = Path::new();
        shape.outline(&mut path, at, r);
        let class = match verdict {
            Verdict::Unsettled if r < SMALL * self.text => {
                "d-shape d-shape-unsettled d-shape-small"
            }
            Verdict::Unsettled => "d-shape d-shape-unsettled",
            Verdict::Fails => "d-shape d-shape-fails",
            Verdict::Holds | Verdict::Tight => "d-shape",
        };
        self.svg.path(class, &path);
        if verdict == Verdict::Tight {
            // Half full: a smaller one inside, filled.
            let mut inner = Path::new();
            shape.outline(&mut inner, at, r * 0.5);
            self.svg.path("d-mark-full", &inner);
        }
        if verdict == Verdict::Fails {
            let mut line = Path::new();
            strike(&mut line, at, r * 1.2);
            self.svg.path("d-strike", &line);
        }
    }

    fn chosen(&mut self) {
        let Some(at) = self.chosen_at() else { return };
        let Some(p) = self.chart.points.iter().find(|p| p.chosen) else {
            return;
        };
        let (full, _) = self.radii();
        let ring = self.text * 1.05;
        self.svg.circle("d-ring-ground", at, ring);
        let mut path = Path::new();
        Shape::of(p.family).outline(&mut path, at, full * 1.1);
        let class = match p.verdict {
            Verdict::Unsettled => "d-chosen d-shape-unsettled d-chosen-open",
            _ => "d-chosen",
        };
        self.svg.path(class, &path);
        if p.verdict == Verdict::Fails {
            let mut line = Path::new();
            strike(&mut line, at, full * 1.6);
            self.svg.path("d-strike", &line);
        }
        self.svg.circle("d-ring", at, ring);
        self.placer.take(Rect {
            x0: at.0 - ring,
            y0: at.1 - ring,
            x1: at.0 + ring,
            y1: at.1 + ring,
        });
    }

    fn labels(&mut self) {
        let words = &self.chart.words;
        if let Some(at) = self.chosen_at() {
            let class = "d-text d-water d-strong d-halo";
            let w = Words {
                text: &words.chosen,
                size: self.text,
                strong: true,
                class,
            };
            let mut places = around(at.0, at.1, self.text * 1.5, self.text);
            places.extend(around(at.0, at.1, self.text * 3.0, self.text));
            let led = (at, self.text * 1.05, self.text * 2.2);
            let placed = self.placer.write_led(&mut self.svg, &w, &places, led);
            self.tell_if_left_out(&w, placed);
        }
        if let Some(cap) = &self.chart.cap {
            self.limit_label(cap, "d-text d-strong d-halo", true);
        }
        if let Some(power) = &self.chart.greatest_power {
            self.limit_label(power, "d-text d-soft d-halo", false);
        }
    }

    fn write(&mut self, words: &Words<'_>, places: &[Place]) {
        let placed = self.placer.write(&mut self.svg, words, places);
        self.tell_if_left_out(words, placed);
    }

    fn tell_if_left_out(&mut self, words: &Words<'_>, placed: Option<Place>) {
        if placed.is_none() && !words.text.is_empty() {
            self.left_out.push(words.text.to_owned());
        }
    }

    /// At the line's right end if it can be, else along it; over it or under it.
    fn limit_label(&mut self, limit: &Limit, class: &str, strong: bool) {
        let field = self.layout.field;
        let Some(y) = self.layout.y.px(limit.share) else {
            return;
        };
        let w = Words {
            text: &limit.label,
            size: self.text,
            strong,
            class,
        };
        let width = text_width(w.text, w.size, strong);
        let room = field.x1 - field.x0 - width;
        let mut places = Vec::new();
        for k in 0..=12 {
            let x = field.x1 - 3.0 - (room - 6.0).max(0.0) * f64::from(k) / 12.0;
            for y in [y - self.text * 0.4, y + self.text * 1.0] {
                places.push(Place {
                    x,
                    y,
                    anchor: Anchor::End,
                });
            }
        }
        // Over points rather than not at all: the line must have its name.
        let free = places.iter().any(|p| self.placer.is_free(&text_box(&w, p)));
        if free {
            self.write(&w, &places);
        } else if let Some(p) = places.first() {
            self.svg.text(class, (p.x, p.y), p.anchor, w.size, w.text);
            self.placer.take(text_box(&w, p));
        }
    }

    fn key(&mut self) {
        let text = self.text;
        let top = self.layout.size.height - self.layout.key.height;
        let left = text * 0.5;
        let r = 4.6 * text / 12.0;
        for entry in &self.layout.key.entries {
            let at = (left + entry.x, top + entry.y);
            match entry.sign {
                Sign::Family(shape) => {
                    let mut path = Path::new();
                    shape.outline(&mut path, at, r);
                    self.svg.path("d-shape", &path);
                }
                Sign::Dominated => {
                    let mut path = Path::new();
                    Shape::Circle.outline(&mut path, at, r * 0.45);
                    self.svg.path("d-shape-lesser", &path);
                }
                Sign::More => {
                    let mut path = Path::new();
                    for dx in [-r * 0.6, 0.0, r * 0.6] {
                        path.stroke((at.0 + dx, at.1 - r * 0.45), (at.0 + dx, at.1 + r * 0.45));
                    }
                    self.svg.path("d-more", &path);
                }
                Sign::Tight => self.point(Shape::Circle, Verdict::Tight, at, r),
                Sign::Unsettled => self.point(Shape::Circle, Verdict::Unsettled, at, r),
                Sign::Fails => self.point(Shape::Circle, Verdict::Fails, at, r),
            }
            let at = (at.0 + text * 0.75, at.1 + text * 0.36);
            self.svg
                .text("d-text d-soft", at, Anchor::Start, text, &entry.text);
        }
    }
}

/// A stroke through a point, falling to the right: shapes have no such edge.
fn strike(path: &mut Path, at: (f64, f64), r: f64) {
    path.stroke((at.0 - r, at.1 - r), (at.0 + r, at.1 + r));
}
