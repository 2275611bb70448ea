//! The drawing itself, from the back to the front.

use super::super::label::{Place, Placer, Rect, Words, along, around, text_box, text_width};
use super::super::svg::{Anchor, Path, Svg};
use super::super::{Verdict, hatch, polyline, under};
use super::layout::Layout;
use super::{LongSection, StretchBand, glyph, plain};

pub(super) struct Painted {
    pub(super) svg: String,
    pub(super) left_out: Vec<String>,
}

struct Painter<'a> {
    section: &'a LongSection,
    layout: &'a Layout,
    text: f64,
    /// The line in pixels.
    line: Vec<(f64, f64)>,
    svg: Svg,
    placer: Placer,
    left_out: Vec<String>,
}

pub(super) fn paint(section: &LongSection, layout: &Layout) -> Painted {
    let size = layout.size;
    let frame = Rect {
        x0: 1.0,
        y0: 1.0,
        x1: size.width - 1.0,
        y1: size.height - 1.0,
    };
    let mut painter = Painter {
        section,
        layout,
        text: size.text(),
        line: layout.pxs(&plain(section)),
        svg: Svg::new(),
        placer: Placer::new(frame),
        left_out: Vec::new(),
    };
    painter.grid();
    painter.selection();
    painter.ordinates();
    painter.ground();
    painter.surge();
    painter.levels();
    painter.sub_atmospheric();
    painter.pipe();
    painter.marks();
    painter.labels();
    painter.band();
    painter.chainages();
    Painted {
        svg: painter.svg.finish(),
        left_out: painter.left_out,
    }
}

/// Half the pipe's width may be this much, so labels keep off.
const WIDEST: f64 = 7.5;

impl Painter<'_> {
    fn pipe_width(&self, weight: f64) -> f64 {
        let weight = if weight.is_finite() {
            weight.clamp(0.0, 1.0)
        } else {
            0.0
        };
        (2.0 + (WIDEST - 2.0) * weight) * self.layout.size.weight()
    }

    fn grid(&mut self) {
        let field = self.layout.field;
        let text = self.text;
        for (tick, label) in &self.layout.ticks {
            let Some(y) = self.layout.y.px(tick.value) else {
                continue;
            };
            if y > field.y1 + 0.5 || y < field.y0 - 0.5 {
                continue;
            }
            self.svg.line("d-grid", (field.x0, y), (field.x1, y));
            self.placer.avoid(&[(field.x0, y), (field.x1, y)], 0.02);
            let at = (field.x0 - text * 0.5, y + text * 0.36);
            self.svg.text("d-text d-soft", at, Anchor::End, text, label);
        }
        // The gutter belongs to the axis.
        self.placer.take(Rect {
            x0: 0.0,
            y0: 0.0,
            x1: field.x0 - 2.0,
            y1: field.y1,
        });
        let unit = &self.section.level_unit;
        let at = (field.x0 - text * 0.5, text);
        self.svg.text("d-text d-soft", at, Anchor::End, text, unit);
    }

    /// The selected stretch, from top to band: light enough to read through.
    fn selection(&mut self) {
        let (field, band) = (self.layout.field, self.layout.band);
        // What is selected is no matter of the print.
        let on_screen = !self.layout.size.print;
        for s in self
            .section
            .stretches
            .iter()
            .filter(|s| s.selected && on_screen)
        {
            if let (Some(x0), Some(x1)) = (self.layout.x.px(s.from), self.layout.x.px(s.to)) {
                self.svg
                    .rect("d-selected", x0, field.y0, x1 - x0, band.0 - field.y0);
            }
        }
    }

    /// Earth under the line: a strip of hatching as deep as the drawing allows,
    /// never below its floor.
    fn ground(&mut self) {
        let floor = self.layout.field.y1;
        let depth = ((floor - self.layout.field.y0) * 0.16).clamp(10.0, 30.0);
        let bottom: Vec<(f64, f64)> = self
            .line
            .iter()
            .map(|p| (p.0, (p.1 + depth).min(floor)))
            .collect();
        let spacing = if self.layout.size.print {
            5.0
        } else {
            self.text * 0.62
        };
        let strokes = hatch::between(&self.line, &bottom, spacing);
        self.svg.path("d-hatch", &strokes);
    }

    /// On paper every station is dropped to the axis, to be measured from.
    fn ordinates(&mut self) {
        if !self.layout.size.print {
            return;
        }
        let mut drops = Path::new();
        for p in self.section.points.iter().filter(|p| p.is_station) {
            if let Some((x, y)) = self.layout.px((p.x, p.y)) {
                drops.stroke((x, y), (x, self.layout.band.0));
            }
        }
        self.svg.path("d-ordinate", &drops);
    }

    fn surge(&mut self) {
        let Some(surge) = &self.section.surge else {
            return;
        };
        let highest = self.layout.pxs(&surge.highest.points);
        let lowest = self.layout.pxs(&surge.lowest.points);
        self.svg.path(
            "d-surge-hatch",
            &hatch::between(&highest, &lowest, self.text * 0.9),
        );
        self.svg.path("d-surge", &Path::through(&highest));
        self.svg.path("d-surge", &Path::through(&lowest));
        self.placer.avoid(&highest, 0.6);
        self.placer.avoid(&lowest, 0.6);
    }

    fn level_line(&self, y: f64) -> Option<Vec<(f64, f64)>> {
        let y = self.layout.y.px(y)?;
        let field = self.layout.field;
        Some(vec![(field.x0, y), (field.x1, y)])
    }

    fn levels(&mut self) {
        let highest = self
            .section
            .highest_static
            .as_ref()
            .and_then(|l| self.level_line(l.y));
        if let Some(line) = highest {
            self.svg
                .path("d-static d-static-highest", &Path::through(&line));
            self.placer.avoid(&line, 0.5);
        }
        let level = self
            .section
            .static_level
            .as_ref()
            .and_then(|l| self.level_line(l.y));
        if let Some(line) = level {
            self.svg.path("d-static", &Path::through(&line));
            self.placer.avoid(&line, 0.5);
        }
        if let Some(grade) = &self.section.grade {
            let line = self.layout.pxs(&grade.points);
            self.svg.path("d-grade", &Path::through(&line));
            self.placer.avoid(&line, 0.8);
        }
    }

    /// The usual sign of a free water surface, a triangle standing on it, at the
    /// first free place from the forebay on.
    fn water_sign(&mut self) {
        let level = self
            .section
            .static_level
            .as_ref()
            .and_then(|l| self.level_line(l.y));
        let Some(line) = level else { return };
        let (from, to, y) = (line[0].0, line[1].0, line[0].1);
        let s = self.text * 0.42;
        for k in 0..8 {
            let x = from + s * 1.4 + (to - from) * f64::from(k) * 0.06;
            let rect = Rect {
                x0: x - s,
                y0: y - s * 2.0,
                x1: x + s,
                y1: y - 0.5,
            };
            if self.placer.is_free(&rect) {
                let mut path = Path::new();
                path.move_to((x, y));
                path.line_to((x - s, y - s * 1.6));
                path.line_to((x + s, y - s * 1.6));
                path.close();
                self.svg.path("d-mark", &path);
                self.placer.take(rect);
                return;
            }
        }
    }

    /// Where the pipe rises above the grade line: a comb standing on the pipe,
    /// tall enough to be seen however little it rises.
    fn sub_atmospheric(&mut self) {
        let line = plain(self.section);
        let tall = self.text * 0.75;
        for (from, to) in &self.section.sub_atmospheric {
            let pipe = self.layout.pxs(&polyline::part(&line, *from, *to));
            let (Some(first), Some(last)) = (pipe.first(), pipe.last()) else {
                continue;
            };
            let top: Vec<(f64, f64)> = pipe.iter().map(|p| (p.0, p.1 - tall)).collect();
            let mut comb = Path::through(&top);
            let teeth = ((last.0 - first.0) / 4.0).floor().max(1.0);
            let mut k = 0.0;
            while k <= teeth {
                let x = first.0 + (last.0 - first.0) * k / teeth;
                if let Some(y) = polyline::at(&pipe, x) {
                    comb.stroke((x, y), (x, y - tall));
                }
                k += 1.0;
            }
            self.svg.path("d-sub", &comb);
            for w in pipe.windows(2) {
                let y0 = if w[0].1 < w[1].1 { w[0].1 } else { w[1].1 } - tall;
                self.placer.take(Rect {
                    x0: w[0].0,
                    y0,
                    x1: w[1].0,
                    y1: y0 + tall,
                });
            }
        }
    }

    fn pipe(&mut self) {
        let line = plain(self.section);
        let thin = self.pipe_width(0.0);
        self.svg
            .path_of_width("d-pipe", &Path::through(&self.line), Some(thin));
        for s in &self.section.stretches {
            let part = self.layout.pxs(&polyline::part(&line, s.from, s.to));
            let class = if s.verdict == Verdict::Fails {
                "d-pipe d-pipe-fails"
            } else {
                "d-pipe"
            };
            let width = Some(self.pipe_width(s.weight));
            self.svg.path_of_width(class, &Path::through(&part), width);
        }
        for pair in self.section.stretches.windows(2) {
            self.cut(
                pair[0].to,
                self.pipe_width(pair[0].weight.max(pair[1].weight)),
            );
        }
        self.placer.avoid(&self.line.clone(), 3.0);
    }

    /// A tick across the pipe where one stretch ends and the next begins.
    fn cut(&mut self, chainage: f64, width: f64) {
        // A sign that sits there says it already.
        let reach = self.text * 0.8 / self.layout.x.px_per_unit();
        let sits = |f: &super::FittingMark| {
            f.glyph == super::Glyph::Reducer && (f.x - chainage).abs() < reach
        };
        if self.section.fittings.iter().any(sits) {
            return;
        }
        let Some(x) = self.layout.x.px(chainage) else {
            return;
        };
        let Some(y) = polyline::at(&self.line, x) else {
            return;
        };
        // Across the chord over a few pixels on either side.
        let side = |dx: f64| polyline::at(&self.line, x + dx).map(|y| (x + dx, y));
        let a = side(-4.0).unwrap_or((x, y));
        let b = side(4.0).unwrap_or((x, y));
        let (dx, dy) = (b.0 - a.0, b.1 - a.1);
        let length = (dx * dx + dy * dy).sqrt();
        if under(length, 1e-6) {
            return;
        }
        let half = width / 2.0 + self.text * 0.55;
        let (nx, ny) = (-dy / length * half, dx / length * half);
        self.svg.line("d-cut", (x - nx, y - ny), (x + nx, y + ny));
    }

    fn marks(&mut self) {
        let line = plain(self.section);
        let s = self.text * 0.46;
        for f in &self.section.fittings {
            let y = f.y.or_else(|| polyline::at(&line, f.x));
            let Some(at) = y.and_then(|y| self.layout.px((f.x, y))) else {
                continue;
            };
            glyph::draw(&mut self.svg, f.glyph, at, s);
            let (above, below) = glyph::reach(f.glyph);
            let (x0, x1) = (at.0 - s * 1.3, at.0 + s * 1.3);
            self.placer.take(Rect {
                x0,
                y0: at.1 - s * above,
                x1,
                y1: at.1 + s * below,
            });
        }
        if let Some(at) = self
            .section
            .lowest
            .as_ref()
            .and_then(|l| self.layout.px((l.x, l.y)))
        {
            let r = self.text * 0.5;
            self.svg.circle("d-mark", at, r);
            self.placer.take(Rect {
                x0: at.0 - r,
                y0: at.1 - r,
                x1: at.0 + r,
                y1: at.1 + r,
            });
        }
        self.water_sign();
    }

    /// The weightiest words first: they get the best places.
    fn labels(&mut self) {
        const SHARES: [f64; 7] = [1.0, 0.5, 0.75, 0.25, 0.0, 0.9, 0.1];
        let section = self.section;
        // The band and what is under it have their own words.
        let size = self.layout.size;
        self.placer.take(Rect {
            x0: 0.0,
            y0: self.layout.band.0 - self.text * 0.3,
            x1: size.width,
            y1: size.height,
        });
        // The levels have but two rows above their lines; a point has places all
        // around it.
        self.level_labels(&SHARES);
        if let Some(lowest) = &section.lowest
            && let Some(at) = self.layout.px((lowest.x, lowest.y))
        {
            self.point_label(&lowest.label, "d-text d-halo", at, self.text);
        }
        self.sub_atmospheric_label();
        // The band is the outermost: under it is the room it needs.
        if let Some(surge) = &section.surge {
            let line = self.layout.pxs(&surge.highest.points);
            self.line_label(
                &surge.highest.label,
                "d-text d-surge-text d-halo",
                &line,
                false,
                &SHARES,
            );
            let line = self.layout.pxs(&surge.lowest.points);
            self.line_label(
                &surge.lowest.label,
                "d-text d-surge-text d-halo",
                &line,
                true,
                &SHARES,
            );
        }
        if let Some(grade) = &section.grade {
            let line = self.layout.pxs(&grade.points);
            self.line_label(&grade.label, "d-text d-water d-halo", &line, true, &SHARES);
        }
        let line = plain(section);
        for f in section.fittings.iter().filter(|f| !f.label.is_empty()) {
            let y = f.y.or_else(|| polyline::at(&line, f.x));
            if let Some(at) = y.and_then(|y| self.layout.px((f.x, y))) {
                self.point_label(&f.label, "d-text d-soft d-halo", at, self.text * 0.8);
            }
        }
        self.note();
    }

    /// The names of both standing levels, the higher one's always above the
    /// other's: where the lines lie close, one stands upon the other.
    fn level_labels(&mut self, shares: &[f64]) {
        const CLASS: &str = "d-text d-halo";
        let section = self.section;
        let of =
            |level: &super::StandingLevel| Some((level.label.clone(), self.level_line(level.y)?));
        let standing = section.static_level.as_ref().and_then(of);
        let highest = section.highest_static.as_ref().and_then(of);
        let (Some((low, low_line)), Some((high, high_line))) = (&standing, &highest) else {
            for (label, line) in standing.iter().chain(&highest) {
                self.line_label(label, CLASS, line, false, shares);
            }
            return;
        };
        let (low_words, high_words) = (self.words(low, CLASS), self.words(high, CLASS));
        if under(low_line[0].1 - high_line[0].1, self.text * 1.6)
            && let Some((low_at, high_at)) =
                self.stacked(&low_words, &high_words, high_line, shares)
        {
            for (words, place) in [(&low_words, low_at), (&high_words, high_at)] {
                self.placer.write(&mut self.svg, words, &[place]);
            }
            return;
        }
        for (words, line, is_high) in [
            (&high_words, high_line, true),
            (&low_words, low_line, false),
        ] {
            let side = |gap: f64| {
                let mut all = along(line, words, gap, shares, !is_high);
                all.retain(|p| under(p.y, line[0].1) == is_high);
                all
            };
            let (near, far) = (side(2.0), side(self.text * 0.7));
            let placed = self
                .placer
                .write(&mut self.svg, words, &near)
                .or_else(|| self.placer.write(&mut self.svg, words, &far));
            self.tell_if_left_out(words.text, placed.is_some());
        }
    }

    /// Places for two texts above a line, the second standing upon the first.
    fn stacked(
        &self,
        low: &Words<'_>,
        high: &Words<'_>,
        line: &[(f64, f64)],
        shares: &[f64],
    ) -> Option<(Place, Place)> {
        let places = along(line, low, 2.0, shares, false);
        let above = places.into_iter().filter(|p| under(p.y, line[0].1));
        above
            .filter(|p| self.placer.is_free(&text_box(low, p)))
            .find_map(|place| {
                let below = text_box(low, &place);
                let y = place.y - self.text * 1.1;
                [
                    (below.x0, Anchor::Start),
                    (below.x1, Anchor::End),
                    (f64::midpoint(below.x0, below.x1), Anchor::Middle),
                ]
                .map(|(x, anchor)| Place { x, y, anchor })
                .into_iter()
                .find(|p| self.placer.is_free(&text_box(high, p)))
                .map(|p| (place, p))
            })
    }

    fn sub_atmospheric_label(&mut self) {
        let longest = self
            .section
            .sub_atmospheric
            .iter()
            .max_by(|a, b| (a.1 - a.0).total_cmp(&(b.1 - b.0)));
        let Some((from, to)) = longest else { return };
        let line = plain(self.section);
        let middle = f64::midpoint(*from, *to);
        let at = polyline::at(&line, middle).and_then(|y| self.layout.px((middle, y)));
        if let Some(at) = at {
            let at = (at.0, at.1 - self.text * 0.4);
            let label = self.section.sub_atmospheric_label.clone();
            self.point_label(&label, "d-text d-fails-text d-halo", at, self.text);
        }
    }

    fn words<'b>(&self, text: &'b str, class: &'b str) -> Words<'b> {
        Words {
            text,
            size: self.text,
            strong: class.contains("fails-text"),
            class,
        }
    }

    fn point_label(&mut self, text: &str, class: &str, at: (f64, f64), gap: f64) {
        let words = self.words(text, class);
        let places = around(at.0, at.1, gap, self.text);
        let led = (at, self.text * 0.5, gap * 1.6);
        let placed = self.placer.write_led(&mut self.svg, &words, &places, led);
        self.tell_if_left_out(text, placed.is_some());
    }

    fn line_label(
        &mut self,
        text: &str,
        class: &str,
        line: &[(f64, f64)],
        below_first: bool,
        shares: &[f64],
    ) {
        if text.is_empty() {
            return;
        }
        let words = self.words(text, class);
        // Farther off only when there is no room at the line itself: a label must
        // not seem to name the next line.
        let near = along(line, &words, 2.0, shares, below_first);
        let far = along(line, &words, self.text * 0.7, shares, below_first);
        let placed = self
            .placer
            .write(&mut self.svg, &words, &near)
            .or_else(|| self.placer.write(&mut self.svg, &words, &far));
        self.tell_if_left_out(text, placed.is_some());
    }

    fn tell_if_left_out(&mut self, text: &str, placed: bool) {
        if !placed && !text.is_empty() {
            self.left_out.push(text.to_owned());
        }
    }

    /// The word in the corner: wherever a corner of the field is free.
    fn note(&mut self) {
        let field = self.layout.field;
        let (low, high) = (field.y1 - self.text * 0.3, field.y0 + self.text * 0.8);
        let places = [
            (field.x0 + 3.0, low, Anchor::Start),
            (field.x1, high, Anchor::End),
            (field.x1, low, Anchor::End),
            (field.x0 + 3.0, high, Anchor::Start),
        ]
        .map(|(x, y, anchor)| Place { x, y, anchor });
        let note = self.section.note.clone();
        let words = self.words(&note, "d-text d-soft d-halo");
        let placed = self.placer.write(&mut self.svg, &words, &places);
        self.tell_if_left_out(&note, placed.is_some());
    }

    fn band(&mut self) {
        let (top, bottom) = self.layout.band;
        for s in &self.section.stretches {
            let (Some(x0), Some(x1)) = (self.layout.x.px(s.from), self.layout.x.px(s.to)) else {
                continue;
            };
            // Neighbours do not share an edge, so that each keeps its own.
            let (x0, x1) = (x0 + 1.0, x1 - 1.0);
            let mut class = String::from("d-band");
            class.push_str(match s.verdict {
                Verdict::Holds => "",
                Verdict::Tight => " d-band-tight",
                Verdict::Unsettled => " d-band-unsettled",
                Verdict::Fails => " d-band-fails",
            });
            if s.selected && !self.layout.size.print {
                class.push_str(" d-band-selected");
            }
            self.svg.rect(&class, x0, top, x1 - x0, bottom - top);
            if s.verdict == Verdict::Fails && x1 > x0 {
                self.svg.line("d-strike", (x0, bottom), (x1, top));
            }
            self.band_words(s, (x0, x1));
        }
    }

    /// The longer of its two names that fits its box.
    fn band_words(&mut self, s: &StretchBand, (x0, x1): (f64, f64)) {
        let (top, bottom) = self.layout.band;
        let fails = s.verdict == Verdict::Fails;
        let strong = fails || (s.selected && !self.layout.size.print);
        let room = x1 - x0 - self.text * 0.4;
        // Smaller letters before fewer of them, but never under 10 px.
        let small = (self.text * 0.84).max(10.0);
        let choices = [
            (&s.label, self.text),
            (&s.label, small),
            (&s.short_label, self.text),
            (&s.short_label, small),
        ];
        let fits =
            |(t, size): &(&String, f64)| !t.is_empty() && text_width(t, *size, strong) <= room;
        let Some((text, size)) = choices.into_iter().find(fits) else {
            self.left_out.push(s.label.clone());
            return;
        };
        let class = match (fails, strong) {
            (true, _) => "d-text d-fails-text d-halo",
            (false, true) => "d-text d-strong",
            (false, false) => "d-text",
        };
        let at = (
            f64::midpoint(x0, x1),
            f64::midpoint(top, bottom) + size * 0.36,
        );
        self.svg.text(class, at, Anchor::Middle, size, text);
    }

    fn chainages(&mut self) {
        let field = self.layout.field;
        let y = self.layout.chainage_baseline;
        let mut taken: Vec<Rect> = Vec::new();
        for (chainage, label) in &self.section.chainage_ticks {
            let Some(x) = self.layout.x.px(*chainage) else {
                continue;
            };
            let words = Words {
                text: label,
                size: self.text,
                strong: false,
                class: "d-text d-soft",
            };
            let half = text_width(label, self.text, false) / 2.0;
            // Kept inside the frame; the last one ends with the line.
            let (x, anchor) = if x + half > field.x1 {
                (field.x1, Anchor::End)
            } else if x - half < 2.0 {
                (2.0, Anchor::Start)
            } else {
                (x, Anchor::Middle)
            };
            let place = Place { x, y, anchor };
            let rect = text_box(&words, &place);
            let wide = Rect {
                x0: rect.x0 - self.text * 0.5,
                x1: rect.x1 + self.text * 0.5,
                ..rect
            };
            if taken.iter().any(|t| t.overlaps(&wide)) {
                continue;
            }
            taken.push(rect);
            self.svg.text(words.class, (x, y), anchor, self.text, label);
        }
    }
}
