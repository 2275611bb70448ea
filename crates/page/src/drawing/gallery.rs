//! Sample drawings on one page, to be looked at: the test writes `drawings.html`
//! beside the test's own binary (in the target directory), dressed by the style
//! sheets of `www/styles`. All data is invented.

use super::long_section::{self, LongSection};
use super::sweep_chart;
use super::verdict_mark::{VIEW_BOX, verdict_mark};
use super::{Size, Verdict, samples};
use std::fmt::Write;

fn number(v: f64, d: usize) -> String {
    format!("{v:.d$}")
}

fn percent(v: f64, d: usize) -> String {
    format!("{v:.d$}%")
}

fn section_svg(section: &LongSection, size: Size, id: &str) -> String {
    let d = long_section::draw(section, size, &number).unwrap();
    let scale = d.print_scale.map_or(String::new(), |s| {
        format!("1:{} along, 1:{} in height", s.horizontal, s.vertical)
    });
    format!(
        "<figure>{}<figcaption class=\"quiet\">{id}: {scale} × {:.2}; left out {:?}</figcaption></figure>",
        d.picture.element("drawing-svg", id),
        d.exaggeration,
        d.left_out
    )
}

/// The whole page for a theme.
fn page(theme: &str) -> String {
    let big = theme == "theme-outdoor";
    let screen = |w, h| Size {
        big,
        ..Size::screen(w, h)
    };
    let mut body = String::new();
    for (name, width, height) in [("phone", 360.0, 230.0), ("wide", 680.0, 420.0)] {
        body += &section_svg(
            &samples::section(),
            screen(width, height),
            &format!("{name}-section"),
        );
        body += &section_svg(
            &samples::long_line(40),
            screen(width, height),
            &format!("{name}-long"),
        );
        let sweeps = [
            samples::sweep(24),
            samples::sweep(700),
            samples::catalogue_sweep(),
        ];
        for (chart, count) in sweeps.iter().zip(["24", "700", "catalogue"]) {
            let size = screen(width, height + 130.0);
            let d = sweep_chart::draw(chart, size, &number, &percent).unwrap();
            body += &d
                .picture
                .element("drawing-svg", &format!("{name}-sweep-{count}"));
        }
    }
    for (verdict, word) in [
        (Verdict::Holds, "holds"),
        (Verdict::Tight, "tight"),
        (Verdict::Unsettled, "unsettled"),
        (Verdict::Fails, "fails"),
    ] {
        for share in [0.05, 0.44, 0.93, 1.3] {
            let mark = verdict_mark(verdict, Some(share));
            let _ = write!(
                body,
                "<span><svg class=\"verdict-mark\" viewBox=\"{VIEW_BOX}\" aria-hidden=\"true\">{mark}</svg> {word} {share} </span>"
            );
        }
    }
    body += "<article class=\"print-sheet\">";
    body += &section_svg(
        &samples::section(),
        Size::paper_mm(180.0, 85.0),
        "print-section",
    );
    body += &section_svg(
        &samples::long_line(40),
        Size::paper_mm(180.0, 85.0),
        "print-long",
    );
    body += "</article>";
    format!(
        "<!DOCTYPE html><html lang=\"en\" class=\"{theme}\"><head><meta charset=\"utf-8\">\
         <meta name=\"viewport\" content=\"width=device-width\"><title>Drawings (invented)</title>\
         <link rel=\"stylesheet\" href=\"styles/app.css\"></head><body>{body}</body></html>"
    )
}

#[test]
fn the_gallery_is_written() {
    let binary = std::env::current_exe().unwrap();
    let folder = binary.parent().unwrap().join("drawings");
    std::fs::create_dir_all(folder.join("styles")).unwrap();
    for (file, css) in [
        ("app.css", include_str!("../../../../www/styles/app.css")),
        (
            "tokens.css",
            include_str!("../../../../www/styles/tokens.css"),
        ),
        (
            "print.css",
            include_str!("../../../../www/styles/print.css"),
        ),
    ] {
        std::fs::write(folder.join("styles").join(file), css).unwrap();
    }
    for theme in ["theme-paper", "theme-outdoor", "theme-dark"] {
        let html = page(theme);
        assert!(!html.contains(" style=") && !html.contains("NaN") && !html.contains("inf\""));
        std::fs::write(folder.join(format!("{theme}.html")), html).unwrap();
    }
}
