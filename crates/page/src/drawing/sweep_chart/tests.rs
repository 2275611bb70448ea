use super::*;
use crate::drawing::samples;
use proptest::prelude::*;

fn bore(v: f64, decimals: usize) -> String {
    format!("{v:.decimals$}")
}

fn percent(v: f64, decimals: usize) -> String {
    format!("{v:.decimals$} %")
}

fn drawn(chart: &SweepChart, size: Size) -> SweepDrawing {
    draw(chart, size, &bore, &percent).unwrap()
}

const PHONE: Size = Size::screen(360.0, 340.0);

#[test]
fn a_sweep_shows_limits_key_and_the_chosen() {
    let d = drawn(&samples::sweep(24), PHONE);
    for class in [
        "d-limit",
        "d-quiet-limit",
        "d-veil",
        "d-ring",
        "d-drop",
        "d-strike",
    ] {
        assert!(
            d.picture.svg.contains(&format!("class=\"{class}\"")),
            "{class}"
        );
    }
    assert!(d.picture.svg.contains("loss cap 10 %"));
    assert!(!d.picture.svg.contains("style=") && !d.picture.svg.contains("NaN"));
    assert_eq!(d.left_out, Vec::<String>::new());
}

#[test]
fn seven_hundred_points_are_few_elements() {
    let d = drawn(&samples::sweep(700), PHONE);
    let elements = d.picture.svg.matches('<').count();
    assert!(elements < 500, "{elements}");
    assert!(d.picture.svg.len() < 90_000, "{}", d.picture.svg.len());
}

#[test]
fn no_mark_lies_over_another_and_the_rest_are_ticks() {
    let chart = samples::catalogue_sweep();
    let mut last = usize::MAX;
    for width in [336.0, 528.0, 900.0] {
        let d = drawn(&chart, Size::screen(width, 300.0));
        let full: Vec<(f64, f64)> = d
            .pixels
            .iter()
            .zip(&d.lesser)
            .filter(|(_, lesser)| !**lesser)
            .filter_map(|(at, _)| *at)
            .collect();
        for (i, a) in full.iter().enumerate() {
            for b in &full[i + 1..] {
                let (dx, dy) = (a.0 - b.0, a.1 - b.1);
                assert!(dx * dx + dy * dy >= 12.0 * 12.0 - 1e-9, "{a:?} {b:?}");
            }
        }
        assert!(full.len() > 15, "{width}: {}", full.len());
        assert!(d.ticks > 0 && d.ticks <= last, "{width}: {}", d.ticks);
        assert!(d.picture.svg.contains("class=\"d-more\""));
        assert!(d.picture.svg.contains(&chart.words.more));
        last = d.ticks;
    }
    // Pipes that stand apart need no tick, and no word about one.
    let points = [100.0, 160.0, 250.0].map(|bore| SweepPoint {
        bore,
        loss_share: 5.0 / bore,
        family: 0,
        verdict: Verdict::Holds,
        dominated: false,
        chosen: false,
    });
    let few = SweepChart {
        points: points.to_vec(),
        ..samples::sweep(1)
    };
    let d = drawn(&few, PHONE);
    assert_eq!(d.ticks, 0);
    assert!(!d.picture.svg.contains(&few.words.more));
}

#[test]
fn the_nearest_point_is_the_one_touched() {
    let chart = samples::sweep(24);
    let d = drawn(&chart, PHONE);
    for (i, p) in chart
        .points
        .iter()
        .enumerate()
        .filter(|(i, _)| !d.lesser[*i])
    {
        let Some((x, y)) = d.pixel_of(i) else {
            assert!(p.loss_share < 0.1 / 15.0, "{p:?}");
            continue;
        };
        let hit = d.nearest(x, y).unwrap();
        let (hx, hy) = d.pixel_of(hit).unwrap();
        assert!((hx - x).abs() < 1e-9 && (hy - y).abs() < 1e-9, "{p:?}");
    }
    assert_eq!(d.nearest(-500.0, -500.0), None);
}

#[test]
fn a_light_point_gives_way_to_a_full_one() {
    let point = |bore: f64, dominated: bool| SweepPoint {
        bore,
        loss_share: 0.05,
        family: 0,
        verdict: Verdict::Holds,
        dominated,
        chosen: false,
    };
    let chart = SweepChart {
        points: vec![point(100.0, true), point(101.0, false), point(300.0, false)],
        families: vec!["a".into()],
        ..SweepChart::default()
    };
    let d = drawn(&chart, PHONE);
    let light = d.pixel_of(0).unwrap();
    assert_eq!(d.nearest(light.0, light.1), Some(1));
    assert_eq!(d.nearest(light.0 - 20.0, light.1), Some(1));
}

#[test]
fn what_is_not_shown_is_counted() {
    let mut chart = samples::sweep(24);
    // One of the sample loses next to nothing.
    let before = drawn(&chart, PHONE).not_shown;
    let of_sample = NotShown {
        above: 0,
        below: 1,
        without: 0,
    };
    assert_eq!(before, of_sample);
    chart.points[0].loss_share = 1.7;
    chart.points[1].loss_share = f64::NAN;
    chart.points[2].bore = -3.0;
    let d = drawn(&chart, PHONE);
    assert_eq!(
        d.not_shown,
        NotShown {
            above: 1,
            below: 1,
            without: 2
        }
    );
    assert_eq!(d.pixel_of(0), None);
    let none = SweepChart::default();
    assert_eq!(
        draw(&none, PHONE, &bore, &percent).unwrap_err(),
        DrawingError::TooFew {
            found: 0,
            needed: 1
        }
    );
    let small = Size::screen(90.0, 60.0);
    assert!(matches!(
        draw(&chart, small, &bore, &percent),
        Err(DrawingError::NoRoom { .. })
    ));
}

#[test]
fn the_chosen_is_shown_however_little_it_loses() {
    let mut chart = samples::sweep(24);
    let i = chart.points.iter().position(|p| p.chosen).unwrap();
    let below = drawn(&chart, PHONE).not_shown.below;
    chart.points[i].loss_share = 1e-5;
    assert!(drawn(&chart, PHONE).pixel_of(i).is_some());
    chart.points[i].chosen = false;
    let d = drawn(&chart, PHONE);
    assert_eq!((d.pixel_of(i), d.not_shown.below), (None, below + 1));
}

#[test]
fn one_pipe_is_a_chart_too() {
    let mut chart = samples::sweep(24);
    chart.points.truncate(1);
    chart.cap = None;
    chart.greatest_power = None;
    assert_eq!(drawn(&chart, PHONE).not_shown, NotShown::default());
}

proptest! {
    #![proptest_config(samples::cases())]

    #[test]
    fn points_shown_lie_in_the_field_and_larger_losses_lie_higher(
        raw in prop::collection::vec((10.0_f64..2000.0, 1e-5_f64..1.4, 0_usize..12), 1..80),
        width in 300.0_f64..900.0, height in 320.0_f64..600.0,
    ) {
        let points: Vec<SweepPoint> = raw
            .iter()
            .map(|(bore, loss_share, family)| SweepPoint {
                bore: *bore, loss_share: *loss_share, family: *family,
                verdict: Verdict::Holds, dominated: false, chosen: false,
            })
            .collect();
        prop_assume!(points.iter().any(|p| p.loss_share <= 1.0));
        let chart = SweepChart { points, ..samples::sweep(1) };
        let d = drawn(&chart, Size::screen(width, height));
        let (x0, y0, x1, y1) = d.field();
        for (i, p) in chart.points.iter().enumerate() {
            match d.pixel_of(i) {
                None => prop_assert!(p.loss_share > MOST_SHARE || p.loss_share < 0.1 / 15.0),
                Some((x, y)) => {
                    prop_assert!(x > x0 && x < x1 && y >= y0 && y <= y1);
                    for (j, q) in chart.points.iter().enumerate() {
                        if let Some(at) = d.pixel_of(j).filter(|_| q.loss_share > p.loss_share) {
                            prop_assert!(at.1 <= y);
                        }
                    }
                }
            }
        }
    }
}
