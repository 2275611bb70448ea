//! Steady state, balances, containment.

use super::bench_line::{m, q, s};
use super::{Bench, Pipe};
use crate::fittings::LossCoefficient;
use crate::line::LocalLoss;
use crate::quantity::PipeLength;
use crate::transient::{
    ClosingLaw, Duration, Event, FrictionModel, GasCavity, Grid, GridSpec, Model, RunOptions,
    Scratch, TransientError, converge,
};
use uom::si::volume::cubic_meter;

fn loss(at: f64, k: f64, bore: f64) -> LocalLoss {
    LocalLoss {
        at: PipeLength::from_m(at),
        k: LossCoefficient::new(k).unwrap(),
        bore: m(bore),
    }
}

/// Three pipes, one of them too short for the grid, losses everywhere, two
/// nozzles.
pub(super) fn rich() -> Bench {
    let pipe = |length, bore, wave_speed, roughness| Pipe {
        length,
        bore,
        wave_speed,
        roughness,
    };
    Bench {
        pipes: vec![
            pipe(210.0, 0.25, 330.0, 5e-5),
            pipe(3.0, 0.2, 1100.0, 1e-4),
            pipe(317.0, 0.2, 1000.0, 1e-4),
        ],
        nozzles: vec![0.05, 0.06],
        losses: vec![
            loss(0.0, 0.5, 0.25),
            loss(0.0, 0.3, 0.6),
            loss(77.0, 0.2, 0.25),
            loss(400.0, 0.25, 0.2),
            loss(530.0, 0.2, 0.2),
        ],
        ..Bench::uniform(120.0, pipe(1.0, 1.0, 1.0, 0.0), 0.1)
    }
}

#[test]
fn the_start_is_the_steady_solution() {
    let bench = rich();
    let model = bench.model(100, &[1.0, 0.4]);
    let grid = model.grid();
    assert!(grid.stretches()[1].is_lumped());
    assert!(grid.lumped_share() > 0.0 && grid.lumped_share() < 0.02);
    assert!(grid.greatest_alteration() <= 0.01);
    let steady = model.steady().unwrap();
    let foot = steady.grade.nodes.last().unwrap().grade.m();
    let run = model
        .run(
            &Event::deflect(&[1.0, 0.4]).unwrap(),
            &RunOptions::lean(),
            &mut Scratch::new(),
        )
        .unwrap();
    assert!(
        (run.foot_start.m() - foot).abs() < 1e-10,
        "{} {foot}",
        run.foot_start.m()
    );
    for node in &steady.grade.nodes {
        // Away from joints, where a step in the grade is one place.
        let at = node.chainage.m();
        if at > 100.0 && at < 205.0 {
            let (high, low) = run.range_at(node.chainage).unwrap();
            assert!((high.m() - node.grade.m()).abs() < 1e-9);
            assert!((low.m() - node.grade.m()).abs() < 1e-9);
        }
    }
}

/// Every friction model, with and without gas, holds what does not move.
#[test]
fn a_steady_state_is_held_for_ten_thousand_steps() {
    let bench = rich();
    let line = bench.line();
    let grid = bench.grid(60);
    let gas = Some(GasCavity::default());
    for (by_reynolds, unsteady) in [(false, false), (true, false), (false, true), (true, true)] {
        let friction = FrictionModel {
            by_reynolds,
            unsteady,
        };
        for strokes in [[1.0, 1.0], [0.3, 0.0], [0.0, 0.0]] {
            let model = Model::new(&line, &grid, &strokes, friction).unwrap();
            let lasting = grid.step() * 10_000.0;
            let options = RunOptions {
                duration: Duration::Until(lasting),
                cavity: gas,
                ..RunOptions::default()
            };
            let event = Event::deflect(&strokes).unwrap();
            let run = model.run(&event, &options, &mut Scratch::new()).unwrap();
            assert!(run.steps >= 10_000);
            for node in &run.nodes {
                assert!(
                    (node.highest - node.lowest).m() < 1e-9,
                    "{friction:?} {node:?}"
                );
            }
            assert!((q(run.flow_end) - q(run.flow_start)).abs() < 1e-11);
            let balance = run.balance.unwrap();
            assert!(
                balance.volume.abs() < 1e-12 && balance.energy.abs() < 1e-12,
                "{balance:?}"
            );
        }
    }
}

/// Gas at every node from the start holds a steady state too.
#[test]
fn a_steady_state_with_gas_is_held() {
    let bench = rich();
    for strokes in [[1.0, 1.0], [0.0, 0.0]] {
        let model = bench.model(60, &strokes);
        let event = Event::deflect(&strokes).unwrap();
        let lasting = model.grid().step() * 10_000.0;
        let options = RunOptions {
            duration: Duration::Until(lasting),
            ..RunOptions::default()
        };
        let run = model
            .run_with_gas(&event, &options, &mut Scratch::new(), GasCavity::default())
            .unwrap();
        for node in &run.nodes {
            assert!((node.highest - node.lowest).m() < 1e-9, "{node:?}");
        }
        let separation = run.separation.unwrap();
        assert_eq!(separation.nodes, 0);
        assert!(run.balance.unwrap().volume.abs() < 1e-11);
    }
}

#[test]
fn volume_and_energy_balance_while_it_moves() {
    let lumped = rich();
    let mut whole = rich();
    whole.pipes.remove(1);
    whole.losses.pop();
    let law = ClosingLaw::linear(s(6.0)).unwrap();
    let energy = |bench: &Bench, grid: &Grid, friction| {
        let model = Model::new(&bench.line(), grid, &[1.0, 0.5], friction).unwrap();
        let event = Event::close(&[1.0, 0.5], &law).unwrap();
        let run = model
            .run(&event, &RunOptions::default(), &mut Scratch::new())
            .unwrap();
        let balance = run.balance.unwrap();
        assert!(run.separation.is_none());
        assert!(balance.volume.abs() < 1e-12, "{balance:?}");
        assert!(q(run.flow_end).abs() < 1e-12);
        balance.energy
    };
    for (by_reynolds, unsteady) in [(false, false), (true, false), (false, true)] {
        let friction = FrictionModel {
            by_reynolds,
            unsteady,
        };
        let grid = whole.grid(80);
        assert!(grid.lumped_share() <= 0.0);
        let left = energy(&whole, &grid, friction);
        assert!(left.abs() < 1e-12, "{left}");
        // What the implicit step of the lumped pipe loses halves with it.
        let grid = lumped.grid(80);
        let left = energy(&lumped, &grid, friction);
        let finer = energy(&lumped, &grid.halved(), friction);
        assert!(left > 0.0 && left < 1e-5, "{left}");
        assert!((finer / left - 0.5).abs() < 0.1, "{left} {finer}");
    }
}

#[test]
fn a_cavity_opens_keeps_volume_and_is_flagged() {
    let bench = Bench {
        cover: 2.0,
        ..Bench::uniform(
            30.0,
            Pipe {
                length: 400.0,
                bore: 0.2,
                wave_speed: 1000.0,
                roughness: 1e-5,
            },
            0.08,
        )
    };
    let event = Event::slam(&[1.0], s(0.0)).unwrap();
    let run = bench.run(80, &event, &RunOptions::default());
    let separation = run.separation.unwrap();
    assert!(separation.modelled && separation.nodes > 0);
    assert!(separation.largest.get::<cubic_meter>() > 0.0);
    let balance = run.balance.unwrap();
    assert!(balance.volume.abs() < 1e-9, "{balance:?}");
    assert!(balance.energy.abs() < 1e-9, "{balance:?}");
    // Nowhere below the vapour pressure: 10.33 m less 0.13 m below the axis.
    for node in &run.nodes {
        let height = (node.lowest - node.level).m();
        assert!(height > -10.25, "{node:?}");
    }
    // Without the model the same run falls far below, and says so.
    let bare = RunOptions {
        cavity: None,
        ..RunOptions::default()
    };
    let run = bench.run(80, &event, &bare);
    let separation = run.separation.unwrap();
    assert!(!separation.modelled);
    assert!(run.foot_lowest.0.m() < -20.0);
}

#[test]
fn halving_the_step_moves_the_peak_little() {
    let bench = rich();
    let line = bench.line();
    let event = Event::close(&[1.0, 1.0], &ClosingLaw::linear(s(5.0)).unwrap()).unwrap();
    let grid = Grid::new(&line, GridSpec::default()).unwrap();
    let found = converge(
        &line,
        &grid,
        &event,
        FrictionModel::default(),
        &RunOptions::lean(),
        &mut Scratch::new(),
    )
    .unwrap();
    assert!(found.finer.separation.is_none());
    assert!(found.moved > 0.0 && found.moved < 0.005, "{}", found.moved);
}

#[test]
fn one_start_does_not_run_another_event() {
    let bench = rich();
    let model = bench.model(20, &[1.0, 1.0]);
    let other = Event::deflect(&[1.0, 0.5]).unwrap();
    let found = model.run(&other, &RunOptions::lean(), &mut Scratch::new());
    assert_eq!(found, Err(TransientError::StartsDiffer));
}

/// Pictures are what probes see, laid over the nodes of the run.
#[test]
fn pictures_agree_with_traces_and_lie_in_the_envelope() {
    let bench = rich();
    let model = bench.model(60, &[1.0, 1.0]);
    let law = ClosingLaw::linear(s(6.0)).unwrap();
    let event = Event::close(&[1.0, 1.0], &law).unwrap();
    let options = RunOptions {
        trace_points: 40,
        pictures: 40,
        ..RunOptions::default()
    };
    let run = model.run(&event, &options, &mut Scratch::new()).unwrap();
    assert_eq!(run.separation, None);
    assert_eq!(run.pictures.len(), run.foot.times.len());
    assert!(run.pictures.len() >= 40);
    for (number, picture) in run.pictures.iter().enumerate() {
        assert_eq!(picture.grades.len(), run.nodes.len());
        let foot = picture.grades.last().copied().unwrap();
        assert!((foot - run.foot.grades[number]).abs() < 1e-12);
        assert!((picture.flow_out - run.foot.flows[number]).abs() < 1e-15);
        for (grade, node) in picture.grades.iter().zip(&run.nodes) {
            assert!(
                (node.lowest.m() - 1e-6..=node.highest.m() + 1e-6).contains(grade),
                "{grade} {node:?}"
            );
        }
    }
}
