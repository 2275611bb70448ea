//! Speed, as ratios within one run: `cargo task bench`.
//!
//! Nanoseconds do not carry from machine to machine; the ratio of two loops
//! timed in turns does. Each ratio is printed with its target where there is
//! one. Nothing here fails: a benchmark informs.

#![expect(clippy::print_stdout, reason = "a benchmark prints")]

use hydraulics::constants::{standard_atmosphere, standard_gravity};
use hydraulics::friction::{FrictionLaw, colebrook_factors};
use hydraulics::line::{Line, LineSpec, NozzleSet, Point, Run};
use hydraulics::nozzle::Nozzle;
use hydraulics::quantity::{
    Length, Level, PipeLength, ThermodynamicTemperature, Time, Velocity, unit,
};
use hydraulics::transient::{
    Characteristic, ClosingLaw, Duration as Lasting, Event, Foot, FrictionModel, Grid, GridSpec,
    Model, RunOptions, Scratch, SurgeLine, SurgeSpec,
};
use hydraulics::water::Water;
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

/// One pipe with a nozzle at its foot.
fn surge_line() -> Option<SurgeLine> {
    let metres = Length::new::<unit::length::meter>;
    let celsius = ThermodynamicTemperature::new::<unit::thermodynamic_temperature::degree_celsius>;
    let point = |chainage, level| Point {
        chainage: PipeLength::from_m(chainage),
        level: Level::from_m(level),
    };
    let line = Line::new(LineSpec {
        forebay: Level::from_m(160.0),
        points: vec![point(0.0, 155.0), point(800.0, 100.0)],
        runs: vec![Run {
            to: PipeLength::from_m(800.0),
            bore: metres(0.2),
            friction: FrictionLaw::ColebrookWhite {
                roughness: metres(5e-5),
            },
        }],
        losses: vec![],
        water: Water::at(celsius(10.0)).ok()?,
        gravity: standard_gravity(),
    })
    .ok()?;
    SurgeLine::new(SurgeSpec {
        line,
        wave_speeds: vec![Velocity::new::<unit::velocity::meter_per_second>(400.0)],
        foot: Foot {
            nozzles: NozzleSet {
                nozzles: vec![Nozzle::new(metres(0.05), 0.97, 1.0).ok()?],
                axis: Level::from_m(100.0),
                branch_k: 0.2,
                branch_bore: metres(0.15),
            },
            characteristic: Characteristic::Linear,
        },
        atmosphere: standard_atmosphere(),
    })
    .ok()
}

/// Nine operations for each cell over rows like the solver's: what arithmetic
/// alone takes.
#[inline(never)]
fn nine(p: &mut [f64], m: &mut [f64], high: &mut [f64], low: &mut [f64], k: f64) {
    for (((p, m), high), low) in p.iter_mut().zip(m).zip(high).zip(low) {
        let d = *p - *m;
        let r = d * k * d;
        let sum = *p + *m;
        *p -= r;
        *m += r;
        *high = *high * 0.5 + sum;
        *low -= sum;
    }
}

/// The transient of 2000 steps on 200 cells, against the arithmetic bound.
fn transient() {
    const CELLS: usize = 200;
    const STEPS: usize = 2000;
    let prepared = surge_line().and_then(|line| {
        let spec = GridSpec {
            cells: CELLS,
            ..GridSpec::default()
        };
        let grid = Grid::new(&line, spec).ok()?;
        let model = Model::new(&line, &grid, &[1.0], FrictionModel::default()).ok()?;
        let law = ClosingLaw::linear(Time::new::<unit::time::second>(10.0)).ok()?;
        let event = Event::close(&[1.0], &law).ok()?;
        let lasting = Lasting::Until(grid.step() * STEPS as f64);
        Some((model, event, lasting))
    });
    let Some((model, event, lasting)) = prepared else {
        println!("the transient of the benchmark cannot be made");
        return;
    };
    let lean = RunOptions {
        duration: lasting,
        ..RunOptions::lean()
    };
    let full = RunOptions {
        duration: lasting,
        ..RunOptions::default()
    };
    let mut scratch = Scratch::new();
    let mut scratch_full = Scratch::new();
    let mut rows = vec![vec![0.5; CELLS]; 4];
    let [bound, lean_s, full_s] = least(
        60,
        [
            &mut || {
                let [p, m, high, low] = rows.as_mut_slice() else {
                    return;
                };
                for _ in 0..STEPS {
                    nine(p, m, high, low, black_box(1e-9));
                }
                black_box(&rows);
            },
            &mut || {
                let _ = black_box(model.run(black_box(&event), &lean, &mut scratch));
            },
            &mut || {
                let _ = black_box(model.run(black_box(&event), &full, &mut scratch_full));
            },
        ],
    );
    line(
        "transient, 2000 steps of 200 cells, against 9 operations a cell",
        lean_s / bound,
        "target <= 1.5 wasm",
    );
    line("the same with traces and balances", full_s / bound, "");
    println!("({:.3} ms lean, {:.3} ms full)", lean_s * 1e3, full_s * 1e3);
}

fn main() {
    println!("{:<64} {:>10}", "ratio", "");
    let one_factor = friction();
    long_lines();
    transient();
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
