use super::*;
use crate::drawing::samples;
use proptest::prelude::*;

fn plain_number(v: f64, decimals: usize) -> String {
    format!("{v:.decimals$}")
}

fn drawn(section: &LongSection, size: Size) -> LongSectionDrawing {
    draw(section, size, &plain_number).unwrap()
}

#[test]
fn a_full_section_shows_all_it_was_given() {
    let section = samples::section();
    let d = drawn(&section, Size::screen(360.0, 230.0));
    for class in [
        "d-static", "d-grade", "d-hatch", "d-pipe", "d-cut", "d-sub", "d-band", "d-mark",
    ] {
        assert!(
            d.picture.svg.contains(&format!("class=\"{class}")),
            "{class}"
        );
    }
    assert_eq!(d.left_out, Vec::<String>::new());
    assert!(!d.picture.svg.contains("style="));
    assert!(!d.picture.svg.contains("NaN"));
}

#[test]
fn the_exaggeration_is_the_ratio_of_the_scales() {
    let section = samples::section();
    let size = Size::screen(360.0, 230.0);
    let d = drawn(&section, size);
    let (a, b) = (d.pixel_of(0.0).unwrap(), d.pixel_of(418.0).unwrap());
    let level = |i: usize| section.points[i].y;
    let last = section.points.len() - 1;
    let per_height = (b.1 - a.1) / (level(0) - level(last));
    let per_length = (b.0 - a.0) / 418.0;
    assert!((d.exaggeration - per_height / per_length).abs() < 1e-9);
    assert_eq!(
        vertical_exaggeration(&section, size, &plain_number),
        Ok(d.exaggeration)
    );
}

#[test]
fn on_paper_a_length_measures_what_the_scale_says() {
    let section = samples::section();
    let d = drawn(&section, Size::paper_mm(184.0, 80.0));
    let scale = d.print_scale.unwrap();
    let (a, b) = (d.pixel_of(0.0).unwrap(), d.pixel_of(418.0).unwrap());
    let mm = (b.0 - a.0) / crate::drawing::PX_PER_MM;
    assert!((mm * scale.horizontal - 418_000.0).abs() < 1e-6);
    assert!((scale.horizontal - 2500.0).abs() < 1e-9);
    assert!((d.exaggeration - scale.horizontal / scale.vertical).abs() < 1e-9);
    let mm_high = (b.1 - a.1) / crate::drawing::PX_PER_MM;
    let drop = section.points[0].y - section.points.last().unwrap().y;
    assert!((mm_high * scale.vertical - drop * 1000.0).abs() < 1e-6);
}

#[test]
fn a_heavier_class_is_a_heavier_line() {
    let d = drawn(&samples::section(), Size::screen(360.0, 230.0));
    let widths: Vec<f64> = d
        .picture
        .svg
        .split("stroke-width=\"")
        .skip(2)
        .filter_map(|s| s.split('"').next()?.parse().ok())
        .collect();
    assert_eq!(widths.len(), 3);
    assert!(widths[0] < widths[1] && widths[1] < widths[2], "{widths:?}");
}

#[test]
fn a_touch_finds_what_it_is_on() {
    let section = samples::section();
    let d = drawn(&section, Size::screen(360.0, 230.0));
    let (x, _) = d.pixel_of(228.0).unwrap();
    assert_eq!(d.hit(x, 225.0), Some(HitWhat::Stretch(1)));
    let (x, y) = d.pixel_of(section.points[3].x).unwrap();
    assert_eq!(d.hit(x, y - 40.0), Some(HitWhat::Station(3)));
    let (x, y) = d.pixel_of(section.fittings[1].x).unwrap();
    assert_eq!(d.hit(x, y), Some(HitWhat::Fitting(1)));
}

#[test]
fn the_crosshair_stands_on_the_line() {
    let section = samples::section();
    let d = drawn(&section, Size::screen(360.0, 230.0));
    let (x, y) = d.pixel_of(200.0).unwrap();
    let c = d.crosshair(x).unwrap();
    assert!((c.chainage - 200.0).abs() < 1e-9);
    assert!((c.pipe_y - y).abs() < 1e-9);
    let (level, grade_y) = c.grade.unwrap();
    assert!(level > 83.0 && level < 88.0 && grade_y < c.pipe_y);
    assert!(d.crosshair(-500.0).unwrap().chainage.abs() < 1e-9);
    assert!((d.crosshair(5000.0).unwrap().chainage - 418.0).abs() < 1e-9);
    assert_eq!(d.crosshair(f64::NAN), None);
}

#[test]
fn what_cannot_be_drawn_is_named() {
    let number: NumberFormat<'_> = &plain_number;
    let size = Size::screen(360.0, 230.0);
    let mut s = samples::section();
    s.points.truncate(1);
    assert_eq!(
        draw(&s, size, number).unwrap_err(),
        DrawingError::TooFew {
            found: 1,
            needed: 2
        }
    );
    let mut s = samples::section();
    s.points[2].y = f64::NAN;
    assert_eq!(
        draw(&s, size, number).unwrap_err(),
        DrawingError::NotDrawable { index: 2 }
    );
    let mut s = samples::section();
    s.points[2].x = -5.0;
    assert_eq!(
        draw(&s, size, number).unwrap_err(),
        DrawingError::Backwards { index: 2 }
    );
    let s = samples::section();
    let tiny = Size::screen(50.0, 40.0);
    assert!(matches!(
        draw(&s, tiny, number),
        Err(DrawingError::NoRoom { .. })
    ));
}

#[test]
fn the_higher_level_is_named_above_the_lower() {
    // From lines on top of one another to lines well apart, on phone and desk.
    for rise in [0.3, 2.0, 9.0, 30.0] {
        for (width, height) in [(320.0, 220.0), (360.0, 230.0), (690.0, 560.0)] {
            let mut section = samples::long_line(12);
            if let (Some(low), Some(high)) = (&section.static_level, &mut section.highest_static) {
                high.y = low.y + rise;
            }
            let d = drawn(&section, Size::screen(width, height));
            let boxes = text_boxes(&d.picture.svg);
            let at = |label: &str| boxes.iter().find(|b| b.0 == label).map(|b| b.1.y0);
            let (high, low) = (at("highest 421.5 m"), at("static level 418 m"));
            let (Some(high), Some(low)) = (high, low) else {
                assert!(!d.left_out.is_empty(), "{rise} {width}");
                continue;
            };
            assert!(high < low, "{rise} m at {width}: {high} under {low}");
        }
    }
}

/// The boxes of all texts in a drawing, as wide as they are taken to be.
fn text_boxes(svg: &str) -> Vec<(String, crate::drawing::label::Rect)> {
    use crate::drawing::label::{Place, Words, text_box};
    use crate::drawing::svg::Anchor;
    let value = |tag: &str, name: &str| -> Option<String> {
        Some(
            tag.split(&format!(" {name}=\""))
                .nth(1)?
                .split('"')
                .next()?
                .to_owned(),
        )
    };
    svg.split("<text")
        .skip(1)
        .map(|t| {
            let (tag, rest) = t.split_once('>').unwrap();
            let text = rest.split_once('<').unwrap().0.replace("&amp;", "&");
            let number = |n: &str| value(tag, n).unwrap().parse::<f64>().unwrap();
            let anchor = match value(tag, "text-anchor").as_deref() {
                Some("middle") => Anchor::Middle,
                Some("end") => Anchor::End,
                _ => Anchor::Start,
            };
            let words = Words {
                text: &text,
                size: number("font-size"),
                strong: false,
                class: "",
            };
            let rect = text_box(
                &words,
                &Place {
                    x: number("x"),
                    y: number("y"),
                    anchor,
                },
            );
            (text.clone(), rect)
        })
        .collect()
}

fn assert_legible(svg: &str, size: Size) {
    let boxes = text_boxes(svg);
    for (i, (text, a)) in boxes.iter().enumerate() {
        assert!(
            a.x0 >= -0.1 && a.y0 >= -0.1 && a.x1 <= size.width + 0.1 && a.y1 <= size.height + 2.0,
            "{text} leaves: {a:?}"
        );
        for (other, b) in &boxes[i + 1..] {
            assert!(!a.overlaps(b), "{text} {a:?} over {other} {b:?}");
        }
    }
}

#[test]
fn no_label_overlaps_or_leaves_at_any_usual_size() {
    let section = samples::section();
    for width in [320.0, 360.0, 414.0, 640.0, 900.0] {
        for height in [180.0, 220.0, 300.0, 460.0] {
            for big in [false, true] {
                let size = Size {
                    big,
                    ..Size::screen(width, height)
                };
                if let Ok(d) = draw(&section, size, &plain_number) {
                    assert_legible(&d.picture.svg, size);
                }
            }
        }
    }
    let paper = Size::paper_mm(184.0, 85.0);
    assert_legible(&drawn(&section, paper).picture.svg, paper);
}

proptest! {
    #![proptest_config(samples::cases())]

    #[test]
    fn any_line_is_drawn_inside_and_legibly(
        steps in prop::collection::vec((0.5_f64..80.0, -30.0_f64..12.0), 1..45),
        width in 300.0_f64..1000.0, height in 190.0_f64..500.0, big in any::<bool>(),
        cuts in prop::collection::vec(0.0_f64..1.0, 0..5),
    ) {
        let (mut x, mut y) = (0.0, 200.0);
        let mut points = vec![LinePoint { x, y, is_station: true }];
        for (dx, dy) in &steps {
            x += dx;
            y += dy;
            points.push(LinePoint { x, y, is_station: true });
        }
        let mut cuts = cuts;
        cuts.push(0.0);
        cuts.push(1.0);
        cuts.sort_by(f64::total_cmp);
        let stretches = cuts
            .windows(2)
            .map(|w| StretchBand {
                from: w[0] * x, to: w[1] * x, label: "SDR 17 · PN 10".into(),
                short_label: "PN 10".into(), weight: 0.5, selected: false, verdict: Verdict::Unsettled,
            })
            .collect();
        let section = LongSection {
            grade: Some(LevelLine { points: vec![(0.0, 201.0), (x, 196.0)], label: "grade line, 5.0 m lost".into() }),
            lowest: Some(MarkedPoint { x: points[1].x, y: points[1].y, label: "lowest 0.9 m".into() }),
            points, stretches,
            chainage_ticks: cuts.iter().map(|c| (c * x, format!("{:.0}", c * x))).collect(),
            ..samples::section()
        };
        let size = Size { big, ..Size::screen(width, height) };
        let d = drawn(&section, size);
        assert_legible(&d.picture.svg, size);
        prop_assert!(d.exaggeration > 0.0 && d.exaggeration.is_finite());
        for (_, b) in text_boxes(&d.picture.svg) {
            prop_assert!(b.x0.is_finite());
        }
    }
}
