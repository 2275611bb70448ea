//! Invented data for the tests of the drawings and for looking at them.

use super::long_section::{
    FittingMark, Glyph, LevelLine, LinePoint, LongSection, MarkedPoint, StandingLevel, StretchBand,
};
use super::sweep_chart::{Limit, SweepChart, SweepPoint, SweepWords};
use super::{Verdict, polyline};
use proptest::prelude::ProptestConfig;

/// A drawing takes its time: fewer cases than usual, unless the campaign asks
/// for more by `PROPTEST_CASES`.
pub(crate) fn cases() -> ProptestConfig {
    if std::env::var_os("PROPTEST_CASES").is_some() {
        ProptestConfig::default()
    } else {
        ProptestConfig::with_cases(64)
    }
}

/// A line of 418 m with a high point that comes to lie above the grade line.
pub(crate) fn section() -> LongSection {
    let levels = [
        (0.0, 86.0),
        (38.0, 84.6),
        (74.0, 79.2),
        (118.0, 76.8),
        (151.0, 78.0),
        (190.0, 68.4),
        (240.0, 57.6),
        (305.0, 43.2),
        (352.0, 34.0),
        (396.0, 25.8),
        (418.0, 22.4),
    ];
    let stretch =
        |from: f64, to: f64, sdr: &str, pn: &str, weight: f64, selected: bool| StretchBand {
            from,
            to,
            label: format!("SDR {sdr} · PN {pn}"),
            short_label: format!("PN {pn}"),
            weight,
            selected,
            verdict: Verdict::Unsettled,
        };
    LongSection {
        points: levels
            .iter()
            .map(|p| LinePoint {
                x: p.0,
                y: p.1,
                is_station: true,
            })
            .collect(),
        static_level: Some(StandingLevel {
            y: 87.2,
            label: "static level 87.2 m".into(),
        }),
        grade: Some(LevelLine {
            points: vec![
                (0.0, 86.9),
                (20.0, 84.9),
                (151.0, 84.3),
                (305.0, 83.9),
                (418.0, 83.6),
            ],
            label: "grade line, 3.6 m lost".into(),
        }),
        stretches: vec![
            stretch(0.0, 151.0, "26", "6.3", 0.2, false),
            stretch(151.0, 305.0, "17", "10", 0.55, true),
            stretch(305.0, 418.0, "11", "16", 1.0, false),
        ],
        chainage_ticks: [0.0, 418.0, 151.0, 305.0]
            .iter()
            .map(|x| (*x, format!("{x:.0}{}", if *x > 400.0 { " m" } else { "" })))
            .collect(),
        lowest: Some(MarkedPoint {
            x: 20.0,
            y: 85.26,
            label: "lowest −0.4 m".into(),
        }),
        sub_atmospheric: vec![(8.0, 38.0)],
        sub_atmospheric_label: "below atmospheric".into(),
        fittings: [
            (1.0, Glyph::Rack),
            (74.0, Glyph::Bend),
            (151.0, Glyph::Vent),
            (305.0, Glyph::Reducer),
            (404.0, Glyph::Valve),
            (417.0, Glyph::Jet),
        ]
        .iter()
        .map(|(x, glyph)| FittingMark {
            x: *x,
            y: None,
            glyph: *glyph,
            label: String::new(),
        })
        .collect(),
        level_unit: "m".into(),
        note: "heights × 2.2".into(),
        unit_mm: 1000.0,
        title: "Long section".into(),
        desc: "Invented: a line of 418 m that falls 63.6 m in three stretches.".into(),
        ..LongSection::default()
    }
}

/// A line of `stations` stations over 2.4 km, with eight stretches.
pub(crate) fn long_line(stations: u32) -> LongSection {
    let mut points = Vec::new();
    for i in 0..stations {
        let t = f64::from(i) / f64::from(stations - 1);
        let wave = f64::from((i * 7919) % 13) - 6.0;
        points.push(LinePoint {
            x: 2400.0 * t,
            y: 412.0 - 180.0 * t * t - 30.0 * t + wave * 1.3,
            is_station: true,
        });
    }
    let plain: Vec<(f64, f64)> = points.iter().map(|p| (p.x, p.y)).collect();
    let cuts = [
        0.0, 380.0, 760.0, 1100.0, 1400.0, 1720.0, 1960.0, 2210.0, 2400.0,
    ];
    let verdicts = [
        Verdict::Holds,
        Verdict::Tight,
        Verdict::Fails,
        Verdict::Unsettled,
    ];
    let stretches = cuts
        .windows(2)
        .enumerate()
        .map(|(i, w)| StretchBand {
            from: w[0],
            to: w[1],
            label: format!("K9 · DN {}", 400 - i * 20),
            short_label: format!("DN {}", 400 - i * 20),
            weight: i as f64 / 7.0,
            selected: i == 4,
            verdict: verdicts[i % 4],
        })
        .collect();
    LongSection {
        static_level: Some(StandingLevel {
            y: 418.0,
            label: "static level 418 m".into(),
        }),
        highest_static: Some(StandingLevel {
            y: 421.5,
            label: "highest 421.5 m".into(),
        }),
        grade: Some(LevelLine {
            points: vec![(0.0, 417.5), (1200.0, 407.0), (2400.0, 392.0)],
            label: "grade line, 25.5 m lost".into(),
        }),
        lowest: polyline::at(&plain, 40.0).map(|y| MarkedPoint {
            x: 40.0,
            y,
            label: "lowest 2.1 m".into(),
        }),
        chainage_ticks: [
            0.0, 2400.0, 1100.0, 1720.0, 380.0, 760.0, 1400.0, 1960.0, 2210.0,
        ]
        .iter()
        .map(|x| (*x, format!("{x:.0}")))
        .collect(),
        sub_atmospheric: Vec::new(),
        fittings: vec![FittingMark {
            x: 1100.0,
            y: None,
            glyph: Glyph::Drain,
            label: "washout".into(),
        }],
        points,
        stretches,
        ..section()
    }
}

/// A sweep the size of a catalogue: 27 invented series of 26 sizes, from bores where
/// all the head is lost to bores where none is.
pub(crate) fn catalogue_sweep() -> SweepChart {
    const OUTSIDE: [f64; 26] = [
        20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 75.0, 90.0, 110.0, 125.0, 140.0, 160.0, 180.0, 200.0,
        225.0, 250.0, 280.0, 315.0, 355.0, 400.0, 450.0, 500.0, 560.0, 630.0, 710.0, 800.0,
    ];
    let mut points = Vec::new();
    for series in 0..27_u32 {
        // Ratios of outside diameter to wall from 7 to 41, three roughnesses.
        let ratio = 7.0 + f64::from(series % 9) * 4.25;
        let rough = 1.0 + f64::from(series / 9) * 0.16;
        for (k, outside) in OUTSIDE.iter().enumerate() {
            let bore = outside * (1.0 - 2.0 / ratio);
            let r = 182.0 / bore;
            points.push(SweepPoint {
                bore,
                loss_share: 0.069 * rough * r * r * r * r * r,
                family: (series % 9) as usize,
                verdict: match series % 9 {
                    0..=5 => Verdict::Unsettled,
                    _ => Verdict::Fails,
                },
                dominated: series / 9 > 0 || (series as usize + k).is_multiple_of(3),
                chosen: series == 1 && k == 14,
            });
        }
    }
    SweepChart {
        points,
        families: (0..9)
            .map(|i| format!("SDR {:.0}", 7.0 + f64::from(i) * 4.25))
            .collect(),
        ..sweep(1)
    }
}

/// A sweep of about `count` invented pipes. Losses go with the fifth power of the
/// bore, with some spread.
pub(crate) fn sweep(count: usize) -> SweepChart {
    let names = ["SDR 26", "SDR 17", "SDR 11", "C-PVC 160", "STD", "K9"];
    let families = if count > 100 { 6 } else { 3 };
    let mut points = Vec::new();
    let per = count.div_ceil(families);
    for family in 0..families {
        for k in 0..per {
            let t = if per > 1 {
                k as f64 / (per - 1) as f64
            } else {
                0.0
            };
            let bore = 128.0 + 175.0 * t + family as f64 * 3.3 - 4.0 * (family % 2) as f64;
            let ratio = 182.0 / bore;
            let wobble = 1.0 + 0.07 * (((k * 31 + family * 17) % 11) as f64 / 11.0 - 0.5);
            let loss_share = 0.069 * ratio * ratio * ratio * ratio * ratio * wobble;
            points.push(SweepPoint {
                bore,
                loss_share,
                family,
                verdict: match family {
                    0 => Verdict::Fails,
                    1 if k % 4 == 1 => Verdict::Tight,
                    2 if k % 3 == 1 => Verdict::Unsettled,
                    _ => Verdict::Holds,
                },
                dominated: count > 100 && (k * 7 + family) % 9 != 0,
                chosen: false,
            });
        }
    }
    let near =
        |p: &SweepPoint| (p.bore - 182.0).abs() + if p.family == 2 % families { 0.0 } else { 1e3 };
    if let Some(p) = points.iter_mut().min_by(|a, b| near(a).total_cmp(&near(b))) {
        p.chosen = true;
        p.dominated = false;
    }
    SweepChart {
        points,
        families: names.iter().map(|n| (*n).to_owned()).collect(),
        cap: Some(Limit {
            share: 0.1,
            label: "loss cap 10 %".into(),
        }),
        greatest_power: Some(Limit {
            share: 1.0 / 3.0,
            label: "greatest power, 1/3".into(),
        }),
        words: SweepWords {
            bore: "bore mm".into(),
            loss: "loss, of gross head".into(),
            chosen: "PE100 225 SDR 11".into(),
            fails: "fails".into(),
            unsettled: "unsettled".into(),
            tight: "tight".into(),
            dominated: "beaten by another".into(),
            more: "more pipes close by".into(),
            title: "Loss against bore".into(),
            desc: "Invented: pipes of three classes.".into(),
        },
    }
}
