//! A tiny writer of SVG elements: classes only, text escaped, numbers short.

/// A number with at most two decimals and no needless zeros. What is not finite
/// is written as 0: a drawing checks its figures before it gets here, and no
/// attribute may ever read NaN.
#[must_use]
pub fn number(value: f64) -> String {
    if !value.is_finite() {
        return "0".to_owned();
    }
    let mut text = format!("{value:.2}");
    while text.ends_with('0') {
        text.pop();
    }
    if text.ends_with('.') {
        text.pop();
    }
    if text == "-0" { "0".to_owned() } else { text }
}

/// Appends `text` with the five characters that mean something in markup
/// escaped, and control characters left out.
pub fn escape_into(out: &mut String, text: &str) {
    for c in text.chars() {
        match c {
            '&' => out.push_str("&amp;"),
            '<' => out.push_str("&lt;"),
            '>' => out.push_str("&gt;"),
            '"' => out.push_str("&quot;"),
            '\'' => out.push_str("&#39;"),
            c if c.is_control() => {}
            c => out.push(c),
        }
    }
}

/// Where a text stands to its x.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Anchor {
    /// It begins there.
    Start,
    /// It is centred there.
    Middle,
    /// It ends there.
    End,
}

impl Anchor {
    const fn word(self) -> &'static str {
        match self {
            Anchor::Start => "start",
            Anchor::Middle => "middle",
            Anchor::End => "end",
        }
    }
}

/// The elements of a drawing, as they are written.
#[derive(Debug, Clone, Default)]
pub struct Svg {
    out: String,
}

impl Svg {
    /// Nothing yet.
    #[must_use]
    pub fn new() -> Svg {
        Svg::default()
    }

    /// What was written.
    #[must_use]
    pub fn finish(self) -> String {
        self.out
    }

    fn open(&mut self, name: &str, class: &str) {
        self.out.push('<');
        self.out.push_str(name);
        self.out.push_str(" class=\"");
        escape_into(&mut self.out, class);
        self.out.push('"');
    }

    fn attribute(&mut self, name: &str, value: f64) {
        self.out.push(' ');
        self.out.push_str(name);
        self.out.push_str("=\"");
        self.out.push_str(&number(value));
        self.out.push('"');
    }

    /// A straight line.
    pub fn line(&mut self, class: &str, from: (f64, f64), to: (f64, f64)) {
        self.open("line", class);
        self.attribute("x1", from.0);
        self.attribute("y1", from.1);
        self.attribute("x2", to.0);
        self.attribute("y2", to.1);
        self.out.push_str("/>");
    }

    /// A rectangle; nothing when it has no width or height.
    pub fn rect(&mut self, class: &str, x: f64, y: f64, width: f64, height: f64) {
        if !(width > 0.0 && height > 0.0) {
            return;
        }
        self.open("rect", class);
        self.attribute("x", x);
        self.attribute("y", y);
        self.attribute("width", width);
        self.attribute("height", height);
        self.out.push_str("/>");
    }

    /// A circle.
    pub fn circle(&mut self, class: &str, centre: (f64, f64), radius: f64) {
        self.open("circle", class);
        self.attribute("cx", centre.0);
        self.attribute("cy", centre.1);
        self.attribute("r", radius);
        self.out.push_str("/>");
    }

    /// A path; nothing when it is empty.
    pub fn path(&mut self, class: &str, path: &Path) {
        self.path_of_width(class, path, None);
    }

    /// A path whose width in pixels means something, and is therefore written
    /// here rather than in the style sheet.
    pub fn path_of_width(&mut self, class: &str, path: &Path, width: Option<f64>) {
        if path.d.is_empty() {
            return;
        }
        self.open("path", class);
        if let Some(width) = width {
            self.attribute("stroke-width", width);
        }
        self.out.push_str(" d=\"");
        self.out.push_str(&path.d);
        self.out.push_str("\"/>");
    }

    /// A text with its baseline at `at`; nothing when it is empty.
    pub fn text(&mut self, class: &str, at: (f64, f64), anchor: Anchor, size: f64, text: &str) {
        if text.is_empty() {
            return;
        }
        self.open("text", class);
        self.attribute("x", at.0);
        self.attribute("y", at.1);
        self.attribute("font-size", size);
        if anchor != Anchor::Start {
            self.out.push_str(" text-anchor=\"");
            self.out.push_str(anchor.word());
            self.out.push('"');
        }
        self.out.push('>');
        escape_into(&mut self.out, text);
        self.out.push_str("</text>");
    }
}

/// The `d` of a path.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Path {
    d: String,
}

impl Path {
    /// An empty path.
    #[must_use]
    pub fn new() -> Path {
        Path::default()
    }

    /// A path through these points; empty for fewer than two.
    #[must_use]
    pub fn through(points: &[(f64, f64)]) -> Path {
        let mut path = Path::new();
        if points.len() < 2 {
            return path;
        }
        for (i, p) in points.iter().enumerate() {
            if i == 0 {
                path.move_to(*p);
            } else {
                path.line_to(*p);
            }
        }
        path
    }

    /// Begins anew at a point.
    pub fn move_to(&mut self, to: (f64, f64)) {
        self.step('M', to);
    }

    /// Goes straight to a point.
    pub fn line_to(&mut self, to: (f64, f64)) {
        self.step('L', to);
    }

    /// Goes straight back to where it began.
    pub fn close(&mut self) {
        self.d.push('Z');
    }

    /// A stroke by itself.
    pub fn stroke(&mut self, from: (f64, f64), to: (f64, f64)) {
        self.move_to(from);
        self.line_to(to);
    }

    /// A whole circle, as two arcs.
    pub fn circle(&mut self, centre: (f64, f64), radius: f64) {
        let r = number(radius);
        self.move_to((centre.0 - radius, centre.1));
        for dx in [2.0 * radius, -2.0 * radius] {
            self.d.push('a');
            for part in [r.as_str(), " ", r.as_str(), " 0 1 0 ", &number(dx), " 0"] {
                self.d.push_str(part);
            }
        }
        self.close();
    }

    fn step(&mut self, letter: char, to: (f64, f64)) {
        self.d.push(letter);
        self.d.push_str(&number(to.0));
        self.d.push(' ');
        self.d.push_str(&number(to.1));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn numbers_are_short_and_always_numbers() {
        assert_eq!(number(12.0), "12");
        assert_eq!(number(12.345), "12.35");
        assert_eq!(number(-0.001), "0");
        assert_eq!(number(0.5), "0.5");
        assert_eq!(number(100.0), "100");
        assert_eq!(number(f64::NAN), "0");
        assert_eq!(number(f64::INFINITY), "0");
    }

    #[test]
    fn text_cannot_become_markup() {
        let mut svg = Svg::new();
        svg.text(
            "d-text",
            (1.0, 2.0),
            Anchor::End,
            12.0,
            "<b a=\"1\">&'\u{7}",
        );
        assert_eq!(
            svg.finish(),
            "<text class=\"d-text\" x=\"1\" y=\"2\" font-size=\"12\" text-anchor=\"end\">\
             &lt;b a=&quot;1&quot;&gt;&amp;&#39;</text>"
        );
    }

    #[test]
    fn nothing_is_written_for_nothing() {
        let mut svg = Svg::new();
        svg.rect("a", 0.0, 0.0, 0.0, 5.0);
        svg.text("a", (0.0, 0.0), Anchor::Start, 12.0, "");
        svg.path("a", &Path::through(&[(1.0, 1.0)]));
        assert_eq!(svg.finish(), "");
    }

    #[test]
    fn a_circle_closes() {
        let mut path = Path::new();
        path.circle((10.0, 5.0), 2.0);
        assert_eq!(path.d, "M8 5a2 2 0 1 0 4 0a2 2 0 1 0 -4 0Z");
    }

    proptest! {
        #[test]
        fn whatever_the_text_the_markup_stays_whole(text in any::<String>()) {
            let mut svg = Svg::new();
            svg.text("d-text", (1.0, 2.0), Anchor::Start, 12.0, &text);
            let out = svg.finish();
            if !out.is_empty() {
                prop_assert_eq!(out.matches('<').count(), 2);
                prop_assert_eq!(out.matches('>').count(), 2);
            }
        }
    }
}
