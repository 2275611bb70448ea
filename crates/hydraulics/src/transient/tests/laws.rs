//! Laws of closing, slow and fast, from full and from part.

use super::bench_line::{G, q, s};
use super::{Bench, Pipe};
use crate::transient::{
    Characteristic, ClosingLaw, Duration, Event, FrictionModel, Grid, GridSpec, Model, Run,
    RunOptions, Scratch, Stroke, brunone_coefficient, shear_decay,
};
use proptest::prelude::*;
use uom::si::time::second;

/// A pipe so wide and smooth that friction is nothing, and a head so low that
/// the velocity in it is nothing too.
fn frictionless(rho: f64) -> Bench {
    let pipe = Pipe {
        length: 500.0,
        bore: 10.0,
        wave_speed: 1000.0,
        roughness: 0.0,
    };
    let head = 0.1;
    let velocity = 2.0 * G * head * rho / pipe.wave_speed;
    let flow_area = velocity / (2.0 * G * head).sqrt() * 25.0 * crate::math::PI / 0.97;
    let nozzle = (4.0 * flow_area / crate::math::PI).sqrt();
    Bench {
        cover: 0.05,
        ..Bench::uniform(head, pipe, nozzle)
    }
}

fn bare() -> RunOptions {
    RunOptions {
        cavity: None,
        duration: Duration::PeriodsAfter(2.0),
        ..RunOptions::lean()
    }
}

/// Closes in a number of steps, so that the end falls on the grid.
fn peak(model: &Model, law: &ClosingLaw, steps: u32) -> f64 {
    let lasting = model.grid().step() * f64::from(steps);
    let event = Event::close(&[1.0], &law.lasting(lasting).unwrap()).unwrap();
    model
        .run(&event, &bare(), &mut Scratch::new())
        .unwrap()
        .foot_highest
        .0
        .m()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    /// One uniform pipe, no friction, one speed: slower is never worse.
    #[test]
    fn a_slower_linear_closure_is_never_worse(
        rho in 0.05..4.0_f64, steps in 1_u32..400, more in 1_u32..400,
    ) {
        let model = frictionless(rho).model(20, &[1.0]);
        let law = ClosingLaw::linear(s(1.0)).unwrap();
        let (fast, slow) = (peak(&model, &law, steps), peak(&model, &law, steps + more));
        prop_assert!(slow <= fast + 1e-6 * fast, "{slow} {fast}");
    }

    /// No cavity is ever negative, none loses volume, none lets the pressure
    /// below that of vapour, whatever closes.
    #[test]
    fn cavities_keep_volume(
        head in 15.0..60.0_f64, wave_speed in 250.0..1300.0_f64, nozzle in 0.05..0.12_f64,
        closing in 0.0..1.5_f64, hump in 0.0..8.0_f64,
    ) {
        let pipe = Pipe { length: 400.0, bore: 0.2, wave_speed, roughness: 1e-5 };
        let bench = Bench {
            cover: 2.0,
            humps: vec![(0.5, hump)],
            ..Bench::uniform(head, pipe, nozzle)
        };
        let event = Event::slam(&[1.0], s(closing)).unwrap();
        let model = bench.model(40, &[1.0]);
        let Ok(run) = model.run(&event, &RunOptions::default(), &mut Scratch::new()) else {
            // A hump that stands above the line's grade.
            return Ok(());
        };
        let balance = run.balance.unwrap();
        prop_assert!(balance.volume.abs() < 1e-9, "{balance:?}");
        prop_assert!(balance.energy.abs() < 1e-9, "{balance:?}");
        if let Some(separation) = run.separation {
            prop_assert!(separation.largest.get::<uom::si::volume::cubic_meter>() > 0.0);
        }
        for node in &run.nodes {
            prop_assert!((node.lowest - node.level).m() > -10.22, "{node:?}");
        }
    }

    /// A lean run sees the peak that sixty periods see, however the waves meet.
    #[test]
    fn lean_runs_last_to_the_peak(
        lengths in prop::array::uniform3(50.0..800.0_f64),
        speeds in prop::array::uniform3(250.0..1300.0_f64),
        bores in prop::array::uniform3(0.15..0.4_f64),
        nozzle in 0.02..0.1_f64, closing in 0.0..12.0_f64,
    ) {
        let pipe = |i: usize| Pipe {
            length: lengths[i],
            bore: bores[i],
            wave_speed: speeds[i],
            roughness: 1e-5,
        };
        let bench = Bench {
            pipes: (0..3).map(pipe).collect(),
            cover: 40.0,
            ..Bench::uniform(50.0, pipe(0), nozzle)
        };
        let line = bench.line();
        let event = Event::close(&[1.0], &ClosingLaw::linear(s(closing)).unwrap()).unwrap();
        let grid = Grid::new(&line, GridSpec::coarse()).unwrap();
        let model = Model::new(&line, &grid, &[1.0], FrictionModel::default()).unwrap();
        let peak = |duration: Duration| {
            let options = RunOptions { cavity: None, duration, ..RunOptions::lean() };
            model.run(&event, &options, &mut Scratch::new()).unwrap().highest().m()
        };
        let (lean, long) = (peak(RunOptions::lean().duration), peak(Duration::PeriodsAfter(60.0)));
        prop_assert!(lean >= long - 0.02 * (long - 50.0), "{lean} {long}");
    }

    /// Two nozzles half as large do what one does, where no branch loses head.
    #[test]
    fn equal_jets_share(opening in 0.2..1.0_f64, closing in 0.5..8.0_f64) {
        let pipe = Pipe { length: 400.0, bore: 0.3, wave_speed: 900.0, roughness: 5e-5 };
        let one = Bench { branch_k: 0.0, ..Bench::uniform(100.0, pipe, 0.08) };
        let two = Bench { nozzles: vec![0.08 / 2.0_f64.sqrt(); 2], ..one.clone() };
        let law = ClosingLaw::linear(s(closing)).unwrap();
        let a = one.run(40, &Event::close(&[opening], &law).unwrap(), &RunOptions::lean());
        let b = two.run(40, &Event::close(&[opening; 2], &law).unwrap(), &RunOptions::lean());
        prop_assert!((a.highest().m() / b.highest().m() - 1.0).abs() < 1e-9);
    }
}

/// A cavity at a valve shut at once, the pipe falling away from it so that none
/// opens elsewhere. Without friction the column leaves at V1 = V0 -
/// (g/a)(H0 - Hv) one period after the closure, for one period, and then comes
/// back: the cavity grows to A V1 2L/a (Wylie and Streeter 1993, chapter 8, by
/// the wave equations here).
#[test]
fn a_cavity_at_a_shut_valve_grows_as_the_wave_equations_say() {
    let pipe = Pipe {
        length: 400.0,
        bore: 2.0,
        wave_speed: 1000.0,
        roughness: 0.0,
    };
    let bench = Bench {
        cover: 30.0,
        ..Bench::uniform(20.0, pipe, 0.3226)
    };
    let event = Event::slam(&[1.0], s(0.0)).unwrap();
    let options = RunOptions {
        duration: Duration::Until(s(1.7)),
        ..RunOptions::default()
    };
    let run = bench.run(200, &event, &options);
    let separation = run.separation.unwrap();
    assert!((separation.chainage.m() - 400.0).abs() < 1e-9);
    let start = q(run.flow_start) / bench.area(0);
    // Atmosphere 101325 Pa less vapour 1228 Pa at 10 degC, water 999.7 kg/m3.
    let vapour = -(101_325.0 - 1228.0) / (999.7 * G);
    let away = start - G / 1000.0 * (20.0 - vapour);
    assert!(away > 0.1);
    let expected = bench.area(0) * away * 0.8;
    let largest = separation.largest.get::<uom::si::volume::cubic_meter>();
    assert!(
        (largest / expected - 1.0).abs() < 0.02,
        "{largest} {expected}"
    );
}

/// Buffers carry nothing over, and the same run gives the same bits.
#[test]
fn shared_buffers_change_nothing() {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let bench = Bench::uniform(30.0, pipe, 0.08);
    let (small, large) = (bench.model(20, &[1.0]), bench.model(90, &[0.7]));
    let slam = Event::slam(&[1.0], s(0.0)).unwrap();
    let close = Event::close(&[0.7], &ClosingLaw::linear(s(20.0)).unwrap()).unwrap();
    let mut shared = Scratch::new();
    let options = RunOptions::default();
    let first = small.run(&slam, &options, &mut shared).unwrap();
    let other = large.run(&close, &options, &mut shared).unwrap();
    let third = small.run(&slam, &options, &mut shared).unwrap();
    assert_eq!(first, third);
    assert_eq!(
        other,
        large.run(&close, &options, &mut Scratch::new()).unwrap()
    );
}

/// Slower is not always milder: a law with a dwell, kept as the
/// counter-example.
#[test]
fn a_slower_law_with_a_dwell_can_be_worse() {
    let model = frictionless(0.4).model(50, &[1.0]);
    let law = ClosingLaw::piecewise(&[(s(0.0), 1.0), (s(1.0), 0.5), (s(2.0), 0.5), (s(3.0), 0.0)])
        .unwrap();
    let rise = |steps| peak(&model, &law, steps) / 0.1 - 1.0;
    // 100 steps are one phase 2L/a.
    let peaks: Vec<f64> = (4..40).map(|tens| rise(tens * 10)).collect();
    let worst = peaks
        .iter()
        .enumerate()
        .flat_map(|(i, fast)| peaks[i..].iter().map(move |slow| slow / fast))
        .fold(0.0, f64::max);
    assert!(worst > 1.02, "{worst}");
}

/// A closure of 60 periods is that of a rigid column: L/(g A) dQ/dt =
/// H0 - loss - head at the nozzle, integrated here by Runge and Kutta.
#[test]
fn a_slow_closure_is_that_of_a_rigid_column() {
    let pipe = Pipe {
        length: 600.0,
        bore: 0.25,
        wave_speed: 1200.0,
        roughness: 1e-4,
    };
    let bench = Bench::uniform(60.0, pipe, 0.09);
    let model = bench.model(60, &[1.0]);
    let closing = 60.0;
    let event = Event::close(&[1.0], &ClosingLaw::linear(s(closing)).unwrap()).unwrap();
    let options = RunOptions {
        velocity_head: false,
        ..RunOptions::default()
    };
    let run = model.run(&event, &options, &mut Scratch::new()).unwrap();

    let start = q(run.flow_start);
    let foot = run.foot_start.m();
    let loss = (60.0 - foot) / (start * start);
    let inertia = pipe.length / (G * bench.area(0));
    // Conductance with the branch, as a share of the whole.
    let free = 0.97 * crate::math::PI / 4.0 * 0.09 * 0.09;
    let head = |flow: f64, time: f64| {
        let part = free * (1.0 - time / closing);
        let share = part / bench.area(0);
        let g2 = part * part / (1.0 + 0.3 * share * share);
        flow * flow / (2.0 * G * g2)
    };
    let slope = |flow: f64, time: f64| (60.0 - loss * flow * flow - head(flow, time)) / inertia;
    let (mut flow, mut highest) = (start, 0.0);
    let step = 1e-3;
    for n in 0..59_900_u32 {
        let t = f64::from(n) * step;
        let k1 = slope(flow, t);
        let k2 = slope(flow + 0.5 * step * k1, t + 0.5 * step);
        let k3 = slope(flow + 0.5 * step * k2, t + 0.5 * step);
        let k4 = slope(flow + step * k3, t + step);
        flow += step / 6.0 * (k1 + 2.0 * k2 + 2.0 * k3 + k4);
        highest = f64::max(highest, head(flow, t + step));
    }
    let found = run.foot_highest.0.m();
    let rise = highest - 60.0;
    assert!(rise > 2.0);
    assert!((found - highest).abs() < 0.02 * rise, "{found} {highest}");
}

fn swing(friction: FrictionModel, periods: f64) -> (Run, f64) {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let bench = Bench {
        cover: 140.0,
        ..Bench::uniform(150.0, pipe, 0.025)
    };
    let model = Model::new(&bench.line(), &bench.grid(100), &[1.0], friction).unwrap();
    let event = Event::slam(&[1.0], s(0.0)).unwrap();
    let options = RunOptions {
        duration: Duration::Until(s(periods * 0.8)),
        trace_points: 100_000,
        ..RunOptions::default()
    };
    let run = model.run(&event, &options, &mut Scratch::new()).unwrap();
    assert!(run.separation.is_none());
    let late = run
        .foot
        .times
        .partition_point(|t| *t < (periods - 2.0) * 0.8);
    let reach = run.foot.grades[late..]
        .iter()
        .fold(0.0, |a: f64, b| a.max((b - 150.0).abs()));
    (run, reach)
}

/// Friction that follows the flow damps the tail a little more, and neither
/// moves the first peak by much. Of two fronts that cross, one finds
/// dV/dt + a sign(V) |dV/dx| = 0 and the other twice dV/dt, so that the front
/// loses about k/2 of itself in each period: exp(-39 k/2) to the last of 40.
#[test]
fn unsteady_friction_damps_the_tail_and_leaves_the_first_peak() {
    let model = |by_reynolds, unsteady| FrictionModel {
        by_reynolds,
        unsteady,
    };
    let (plain, tail) = swing(model(false, false), 40.0);
    let (table, tail_table) = swing(model(true, false), 40.0);
    let (unsteady, tail_unsteady) = swing(model(false, true), 40.0);
    let first = plain.foot_highest.0.m();
    assert!((table.foot_highest.0.m() / first - 1.0).abs() < 2e-3);
    assert!((unsteady.foot_highest.0.m() / first - 1.0).abs() < 1e-2);
    assert!(tail_table < tail, "{tail_table} {tail}");
    let reynolds = q(plain.flow_start) * 4.0 / (crate::math::PI * 0.2 * 1.3065e-6);
    let expected = -39.0 * 0.5 * brunone_coefficient(reynolds);
    let found = crate::math::ln(tail_unsteady / tail);
    // An estimate: the flow, and with it steady friction, shrinks on the way.
    assert!((found / expected - 1.0).abs() < 0.3, "{found} {expected}");
}

/// C* 0.00476 laminar; at Re 1e5, kappa = log10(14.3/1e5^0.05) = 0.9053, C* =
/// 7.41/1e5^0.9053 = 2.205e-4 by hand.
#[test]
fn the_shear_decay_of_vardy_and_brown() {
    assert!((shear_decay(1000.0) - 0.00476).abs() < 1e-12);
    assert!(
        (shear_decay(1e5) / 2.205e-4 - 1.0).abs() < 2e-3,
        "{}",
        shear_decay(1e5)
    );
    assert!((brunone_coefficient(1000.0) - 0.5 * 0.00476_f64.sqrt()).abs() < 1e-12);
}

#[test]
fn laws_enter_where_the_stroke_is_reached() {
    let law = ClosingLaw::two_speed(s(2.0), s(10.0), 0.25).unwrap();
    assert!((law.full_stroke_time().get::<second>() - 4.0).abs() < 1e-12);
    let from = |stroke: f64| law.from(stroke).unwrap();
    assert!((from(1.0).ends().get::<second>() - 4.0).abs() < 1e-12);
    assert!((from(0.5).ends().get::<second>() - 3.0).abs() < 1e-12);
    assert!((from(0.125).ends().get::<second>() - 1.25).abs() < 1e-12);
    assert!((from(0.5).at(0.25) - 0.375).abs() < 1e-12);
    assert!(from(0.0).at(1.0).abs() < 1e-12);
    assert!(ClosingLaw::piecewise(&[(s(0.0), 1.0), (s(1.0), 0.2)]).is_err());
    assert!(ClosingLaw::piecewise(&[(s(0.0), 1.0), (s(1.0), 1.2), (s(2.0), 0.0)]).is_err());
    assert!(ClosingLaw::two_speed(s(1.0), s(1.0), 1.5).is_err());
    assert!(ClosingLaw::linear(s(-1.0)).is_err());
    assert!(Stroke::piecewise(&[(s(0.0), 0.3), (s(1.0), 1.1)]).is_err());
}

#[test]
fn a_table_must_run_from_shut_to_open() {
    let of = |rows: &[(f64, f64)]| Characteristic::Table(rows.to_vec()).check();
    assert!(of(&[(0.0, 0.0), (0.4, 0.1), (1.0, 1.0)]).is_ok());
    assert!(of(&[(0.0, 0.0), (0.4, 0.5), (0.3, 0.6), (1.0, 1.0)]).is_err());
    assert!(of(&[(0.1, 0.0), (1.0, 1.0)]).is_err());
    assert!(of(&[(0.0, 0.0), (1.0, 0.9)]).is_err());
    assert!(of(&[]).is_err());
    let table = Characteristic::Table(vec![(0.0, 0.0), (0.5, 0.2), (1.0, 1.0)]);
    assert!((table.open_share(0.25) - 0.1).abs() < 1e-12);
    assert!((table.open_share(0.75) - 0.6).abs() < 1e-12);
}

/// Opening from shut lowers the head and ends at the steady flow.
#[test]
fn opening_ends_at_the_steady_flow() {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let bench = Bench::uniform(100.0, pipe, 0.06);
    let event = Event::open(&[0.8], s(5.0)).unwrap();
    let options = RunOptions {
        duration: Duration::Until(s(400.0)),
        ..RunOptions::default()
    };
    let friction = FrictionModel {
        by_reynolds: true,
        unsteady: false,
    };
    let model = Model::new(&bench.line(), &bench.grid(40), &[0.0], friction).unwrap();
    let run = model.run(&event, &options, &mut Scratch::new()).unwrap();
    let steady = bench.line().steady(&[0.8]).unwrap().unwrap();
    assert!(q(run.flow_start).abs() < 1e-12);
    let off = q(run.flow_end) / q(steady.grade.flow) - 1.0;
    // The half cells at both ends keep the factor of the flow of reference.
    assert!(off.abs() < 1e-4, "{off}");
    assert!(run.foot_lowest.0.m() < steady.grade.nodes.last().unwrap().grade.m());
}

/// One of two jets blocked: the rise is that of its flow, Joukowsky at most.
#[test]
fn one_jet_blocked_raises_by_its_own_flow() {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let bench = Bench {
        nozzles: vec![0.03, 0.03],
        ..Bench::uniform(200.0, pipe, 0.03)
    };
    let event = Event::block(&[1.0, 1.0], 1).unwrap();
    let run = bench.run(100, &event, &RunOptions::default());
    // The other jet takes more as the head rises: H + B (Q0 - Q) with Q = Q0/2
    // sqrt(H'/H), by bisection.
    let (start, before) = (q(run.flow_start), run.foot_start.m());
    let impedance = 1000.0 / (G * bench.area(0));
    let (mut low, mut high) = (before, 2.0 * before);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        let left = start - 0.5 * start * (middle / before).sqrt();
        if before + impedance * left > middle {
            low = middle;
        } else {
            high = middle;
        }
    }
    let found = run.foot.grades[1];
    assert!(low - before > 50.0);
    assert!((found - low).abs() < 0.01 * (low - before), "{found} {low}");
    assert!(Event::block(&[1.0, 0.0], 1).is_err());
    assert!(Event::block(&[1.0], 3).is_err());
}
