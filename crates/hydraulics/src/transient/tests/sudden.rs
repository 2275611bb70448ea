//! Sudden closure: Joukowsky, the square wave, reflection and transmission.

use super::bench_line::{G, q, s};
use super::{Bench, Pipe};
use crate::transient::{Duration, Event, RunOptions};

/// A pipe so wide and smooth that friction is nearly nothing.
fn smooth(length: f64, wave_speed: f64) -> Pipe {
    Pipe {
        length,
        bore: 20.0,
        wave_speed,
        roughness: 0.0,
    }
}

#[test]
fn sudden_closure_is_joukowsky_and_a_square_wave() {
    let bench = Bench::uniform(200.0, smooth(500.0, 1000.0), 1.0);
    let event = Event::slam(&[1.0], s(0.0)).unwrap();
    let options = RunOptions {
        duration: Duration::Until(s(8.0)),
        trace_points: 100_000,
        ..RunOptions::default()
    };
    let run = bench.run(50, &event, &options);
    let rise = 1000.0 * q(run.flow_start) / bench.area(0) / G;
    assert!(rise > 1.0);
    let found = (run.foot_highest.0 - run.foot_start).m();
    assert!((found / rise - 1.0).abs() < 1e-4, "{found} {rise}");
    // Up for 2L/a, down for 2L/a, and so on: period 4L/a = 2 s.
    for (time, grade) in run.foot.times.iter().zip(&run.foot.grades) {
        let phase = (time - 1e-9) / 1.0;
        if *time < 0.02 || (phase - (phase + 0.5).floor()).abs() < 0.03 {
            continue;
        }
        let side = if (phase.floor() * 0.5).fract() < 0.25 {
            1.0
        } else {
            -1.0
        };
        let expected = 200.0 + side * rise;
        assert!(
            (grade - expected).abs() < 2e-4 * rise,
            "{time} {grade} {expected}"
        );
    }
}

/// A wave h coming down pipe 1 goes on as 2 B2/(B1 + B2) h and comes back as
/// (B2 - B1)/(B1 + B2) h, B = a/(g A) (Wylie and Streeter 1993; any text).
#[test]
fn a_change_of_pipe_reflects_and_transmits_by_the_textbook() {
    let lower = Pipe {
        length: 300.0,
        bore: 1.0,
        wave_speed: 1000.0,
        roughness: 0.0,
    };
    let upper = Pipe {
        length: 300.0,
        bore: 1.3,
        wave_speed: 500.0,
        roughness: 0.0,
    };
    let bench = Bench {
        pipes: vec![upper, lower],
        ..Bench::uniform(200.0, lower, 0.05)
    };
    let event = Event::slam(&[1.0], s(0.0)).unwrap();
    let options = RunOptions {
        duration: Duration::Until(s(1.2)),
        trace_points: 100_000,
        probes: vec![crate::quantity::PipeLength::from_m(290.0)],
        ..RunOptions::default()
    };
    let run = bench.run(90, &event, &options);
    let (b1, b2) = (1000.0 / (G * bench.area(1)), 500.0 / (G * bench.area(0)));
    let first = b1 * q(run.flow_start);
    let at = |trace: &crate::transient::Trace, time: f64| {
        let index = trace.times.partition_point(|t| *t < time);
        trace.grades[index]
    };
    let before = run.foot_start.m();
    // At the foot: the first wave until 0.6 s, then with its reflection twice.
    assert!((at(&run.foot, 0.3) - before - first).abs() < 2e-3 * first);
    let back = (b2 - b1) / (b1 + b2) * first;
    assert!((at(&run.foot, 0.8) - before - first - 2.0 * back).abs() < 4e-3 * first);
    let on = 2.0 * b2 / (b1 + b2) * first;
    let probe = &run.probes[0].trace;
    assert!((at(probe, 0.6) - probe.grades[0] - on).abs() < 4e-3 * first);
}
