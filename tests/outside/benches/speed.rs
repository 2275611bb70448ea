//! Speed, as ratios within one run: `cargo task bench`.
//!
//! Nanoseconds do not carry from machine to machine; the ratio of two loops
//! timed in turns does. Each ratio is printed with its target where there is
//! one. Nothing here fails: a benchmark informs.

#![expect(clippy::print_stdout, reason = "a benchmark prints")]

use hydraulics::friction::colebrook_factors;
use std::hint::black_box;
use std::time::{Duration, Instant};
use workbook::book::Station;
use workbook::demo::demo;
use workbook::reading::DecimalMark;
use workbook::resolve::resolve;
use workbook::steady::steady;
use workbook::sweep::Sweep;
use workbook::{Book, Entry, Field, evaluate};

/// The least time of several runs of each, taken in turns, so that whatever
/// else the machine does falls on all alike.
fn least<const N: usize>(rounds: usize, mut runs: [&mut dyn FnMut(); N]) -> [f64; N] {
    let mut best = [Duration::MAX; N];
    for _ in 0..rounds {
        for (run, best) in runs.iter_mut().zip(&mut best) {
            let start = Instant::now();
            run();
            *best = (*best).min(start.elapsed());
        }
    }
    best.map(|d| d.as_secs_f64())
}

fn line(what: &str, ratio: f64, target: &str) {
    println!("{what:<64} {ratio:>10.3}   {target}");
}

/// Colebrook-White over an array, against two logarithms of the platform in
/// the same loop.
fn friction() -> f64 {
    const N: usize = 8192;
    let reynolds: Vec<f64> = (0..N)
        .map(|i| 4e3 * 1.0015f64.powi(i32::try_from(i).unwrap_or(0)))
        .collect();
    let reynolds: Vec<f64> = reynolds.iter().map(|r| r.min(9e8)).collect();
    let rough: Vec<f64> = (0..N).map(|i| 1e-6 + 5e-6 * i as f64).collect();
    let mut out = vec![0.0; N];
    let mut out2 = vec![0.0; N];
    let [kernel, logs] = least(
        200,
        [
            &mut || {
                colebrook_factors(black_box(&reynolds), black_box(&rough), &mut out);
                black_box(&out);
            },
            &mut || {
                for ((o, re), e) in out2
                    .iter_mut()
                    .zip(black_box(&reynolds))
                    .zip(black_box(&rough))
                {
                    *o = re.ln() + e.ln();
                }
                black_box(&out2);
            },
        ],
    );
    line(
        "Colebrook-White against two platform ln",
        kernel / logs,
        "target <= 1.2 native",
    );
    kernel / N as f64
}

/// The demo's line with this many stations, turning at each.
fn long(stations: u32) -> Book {
    let mut book = demo("long");
    book.line.fittings.clear();
    book.line.stretches.truncate(1);
    let typed = |field: Field, x: f64| {
        let unit = field.kind().units()[0].symbol;
        Entry::typed(&format!("{x:.3}"), unit, field.kind(), DecimalMark::Point)
    };
    book.line.stations = (1..=stations)
        .map(|id| {
            let along = 374.0 * f64::from(id - 1) / f64::from(stations - 1);
            let wave = if id % 2 == 0 { 0.05 } else { 0.0 };
            Station {
                id,
                distance_m: typed(Field::StationDistance(id), along),
                level_m: typed(Field::StationLevel(id), 186.2 - 67.6 * along / 374.0 - wave),
                plan_turn_deg: typed(Field::StationTurn(id), 12.0),
                ..Station::default()
            }
        })
        .collect();
    book
}

/// Long lines: time must grow as the stations do.
fn long_lines() {
    let (hundred, five) = (long(100), long(500));
    let [short_s, long_s, read_s] = least(
        30,
        [
            &mut || {
                black_box(evaluate(black_box(&hundred)));
            },
            &mut || {
                black_box(evaluate(black_box(&five)));
            },
            &mut || {
                black_box(resolve(black_box(&five)));
            },
        ],
    );
    line(
        "evaluation of 500 stations, against 100",
        long_s / short_s,
        "5 where time grows as the stations do",
    );
    line(
        "of it, reading the entries and laying the line",
        read_s / long_s,
        "",
    );
    line(
        "evaluation, ms per 100 stations of 500 (this machine, this run)",
        long_s * 1e3 / 5.0,
        "",
    );
}

fn main() {
    println!("{:<64} {:>10}", "ratio", "");
    let one_factor = friction();
    long_lines();
    let book = demo("bench");
    let found = resolve(&book);
    let mut sweep = Sweep::new(&book);
    let total = sweep.total();
    let [resolve_s, steady_s, evaluate_s, sweep_s] = least(
        30,
        [
            &mut || {
                black_box(resolve(black_box(&book)));
            },
            &mut || {
                black_box(steady(black_box(&found)));
            },
            &mut || {
                black_box(evaluate(black_box(&book)));
            },
            &mut || {
                sweep = Sweep::new(black_box(&book));
                black_box(sweep.advance(total));
            },
        ],
    );
    line(
        "steady line with jets, against one friction factor",
        steady_s / one_factor,
        "",
    );
    line(
        "whole evaluation, against the steady line",
        evaluate_s / steady_s,
        "",
    );
    line(
        "reading the entries, against the steady line",
        resolve_s / steady_s,
        "",
    );
    line(
        "one sweep row, against the steady line",
        sweep_s / total as f64 / steady_s,
        "",
    );
    line(
        "sweep of the catalogue, against one frame of 16 ms",
        sweep_s / 0.016,
        "below 1: no frame lost",
    );
    println!(
        "({total} pipes; {} stations in the demo book)",
        book.line.stations.len()
    );
}
