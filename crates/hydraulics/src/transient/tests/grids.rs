//! Grids, what they lump, and containment.

use super::bench_line::s;
use super::checks::rich;
use super::{Bench, Pipe};
use crate::transient::{
    ClosingLaw, Event, FrictionModel, Grid, GridSpec, Model, RunOptions, Scratch, TransientError,
};
use proptest::prelude::*;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

proptest! {
    #![proptest_config(ProptestConfig::with_cases(64))]

    /// Whatever the runs, the grid keeps to what it was asked, every cell is as
    /// long as a wave runs in a step, and halving changes nothing but the step.
    #[test]
    fn a_grid_keeps_its_word(
        runs in prop::collection::vec((1.0..600.0_f64, 250.0..1300.0_f64), 1..6),
        cells in 16_usize..200, alteration in 0.005..0.05_f64, lumped in 0.005..0.05_f64,
    ) {
        let pipes = runs
            .iter()
            .map(|(length, wave_speed)| Pipe {
                length: *length,
                bore: 0.25,
                wave_speed: *wave_speed,
                roughness: 5e-5,
            })
            .collect();
        let first = Pipe { length: 1.0, bore: 0.25, wave_speed: 1000.0, roughness: 0.0 };
        let bench = Bench { pipes, cover: 1.0, ..Bench::uniform(1.5, first, 0.05) };
        let line = bench.line();
        let spec = GridSpec { cells, alteration, lumped };
        let grid = match Grid::new(&line, spec) {
            Ok(grid) => grid,
            Err(error) => {
                prop_assert!(
                    matches!(error, TransientError::GridTooFine { .. }),
                    "{error:?}"
                );
                return Ok(());
            }
        };
        prop_assert!(grid.greatest_alteration() <= alteration);
        prop_assert!(grid.lumped_share() <= lumped);
        for (stretch, (length, wave_speed)) in grid.stretches().iter().zip(&runs) {
            if stretch.is_lumped() {
                continue;
            }
            let on_grid = stretch.wave_speed.get::<meter_per_second>();
            #[expect(clippy::cast_precision_loss, reason = "a small count")]
            let walked = on_grid * grid.step().get::<second>() * stretch.cells as f64;
            prop_assert!((walked / length - 1.0).abs() < 1e-12);
            let altered = on_grid / wave_speed - 1.0;
            prop_assert!((altered - stretch.alteration).abs() < 1e-12);
        }
        let half = grid.halved();
        prop_assert_eq!(half.cells(), 2 * grid.cells());
        prop_assert!((half.step() * 2.0 - grid.step()).get::<second>().abs() < 1e-15);
        prop_assert!((half.greatest_alteration() - grid.greatest_alteration()).abs() < 1e-15);
    }
}

#[test]
fn a_uniform_pipe_is_not_altered() {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 987.0,
        roughness: 5e-5,
    };
    let grid = Bench::uniform(100.0, pipe, 0.05).grid(50);
    assert_eq!(grid.cells(), 50);
    assert!(grid.greatest_alteration() < 1e-12 && grid.lumped_share() < 1e-12);
}

#[test]
fn senseless_grids_are_refused() {
    let line = rich().line();
    let sound = GridSpec::default();
    for spec in [
        GridSpec { cells: 1, ..sound },
        GridSpec {
            alteration: 0.0,
            ..sound
        },
        GridSpec {
            alteration: 0.6,
            ..sound
        },
        GridSpec {
            lumped: -0.1,
            ..sound
        },
        GridSpec {
            lumped: f64::NAN,
            ..sound
        },
    ] {
        assert_eq!(Grid::new(&line, spec), Err(TransientError::GridSpec));
    }
    let impossible = GridSpec {
        alteration: 1e-9,
        lumped: 0.0,
        ..sound
    };
    assert!(matches!(
        Grid::new(&line, impossible),
        Err(TransientError::GridTooFine { .. })
    ));
}

/// The measured effect of lumping: the pipe of 3 m among 530 m, lumped and laid
/// out in cells, gives the same peak to 0.2 % of the rise.
#[test]
fn a_lumped_pipe_moves_the_peak_little() {
    let bench = rich();
    let line = bench.line();
    let spec = GridSpec {
        cells: 200,
        ..GridSpec::default()
    };
    let lumped = Grid::new(&line, spec).unwrap();
    let laid = Grid::new(
        &line,
        GridSpec {
            lumped: 0.0,
            alteration: 0.01,
            ..spec
        },
    )
    .unwrap();
    assert!(lumped.lumped_share() > 0.0);
    assert!(laid.lumped_share() < 1e-12 && laid.stretches()[1].cells > 0);
    let event = Event::close(&[1.0, 1.0], &ClosingLaw::linear(s(5.0)).unwrap()).unwrap();
    let peak = |grid: &Grid| {
        Model::new(&line, grid, &[1.0, 1.0], FrictionModel::default())
            .unwrap()
            .run(&event, &RunOptions::lean(), &mut Scratch::new())
            .unwrap()
            .highest()
            .m()
    };
    let (a, b) = (peak(&lumped), peak(&laid));
    assert!((a - b).abs() < 0.002 * (b - 120.0), "{a} {b}");
}

/// Numbers that are not finite never come out as heads.
#[test]
fn what_is_not_finite_is_contained() {
    let bench = rich();
    for bad in [f64::NAN, f64::INFINITY] {
        let mut model = bench.model(40, &[1.0, 1.0]);
        model.energies[7] = bad;
        let event = Event::deflect(&[1.0, 1.0]).unwrap();
        let found = model.run(&event, &RunOptions::default(), &mut Scratch::new());
        assert!(
            matches!(found, Err(TransientError::NotFinite { .. })),
            "{found:?}"
        );
    }
}

#[test]
fn senseless_lines_and_strokes_are_refused() {
    let line = rich().line();
    let mut spec = line.spec().clone();
    spec.wave_speeds.pop();
    let found = crate::transient::SurgeLine::new(spec);
    assert_eq!(
        found,
        Err(TransientError::WaveSpeedCount {
            runs: 3,
            wave_speeds: 2
        })
    );
    assert_eq!(
        line.steady(&[1.0]).err(),
        Some(TransientError::StrokeCount {
            nozzles: 2,
            strokes: 1
        })
    );
    assert_eq!(
        line.steady(&[1.0, 1.5]).err(),
        Some(TransientError::Stroke {
            nozzle: 1,
            stroke: 1.5
        })
    );
    let other = Bench {
        pipes: rich().pipes[..1].to_vec(),
        losses: vec![],
        ..rich()
    };
    let found = Model::new(
        &line,
        &other.grid(20),
        &[1.0, 1.0],
        FrictionModel::default(),
    );
    assert_eq!(found.err(), Some(TransientError::GridOfAnotherLine));
    let steep = Pipe {
        length: 4000.0,
        bore: 0.02,
        wave_speed: 300.0,
        roughness: 1e-3,
    };
    let bench = Bench::uniform(900.0, steep, 0.02);
    let grid = Grid::new(
        &bench.line(),
        GridSpec {
            cells: 2,
            ..GridSpec::default()
        },
    )
    .unwrap();
    let found = Model::new(&bench.line(), &grid, &[1.0], FrictionModel::default());
    assert_eq!(found.err(), Some(TransientError::GridTooCoarse { run: 0 }));
}

/// The extremes lie where pipe and grade say, a low point between nodes
/// included, and a lumped run has them too.
#[test]
fn extremes_are_found_between_nodes() {
    let mut bench = rich();
    bench.humps = vec![(0.503, -110.0)];
    let line = bench.line();
    let event = Event::close(&[1.0, 1.0], &ClosingLaw::linear(s(5.0)).unwrap()).unwrap();
    let grid = bench.grid(24);
    let model = Model::new(&line, &grid, &[1.0, 1.0], FrictionModel::default()).unwrap();
    let run = model
        .run(&event, &RunOptions::default(), &mut Scratch::new())
        .unwrap();
    let found = run.extremes(&line);
    assert_eq!(found.len(), 3);
    for extremes in &found {
        assert!(extremes.highest.0.m().is_finite() && extremes.lowest.0.m().is_finite());
    }
    // The dip lies 110 m below the straight fall, in the last run.
    let dip = 0.503 * bench.length();
    assert!(
        (found[2].highest.1.m() - dip).abs() < 1e-9,
        "{:?}",
        found[2]
    );
    let (high, _) = run.range_at(found[2].highest.1).unwrap();
    let level = 115.0 * (1.0 - 0.503) - 110.0;
    assert!(((high.m() - level) - found[2].highest.0.m()).abs() < 1e-9);
    // Whatever a node says is inside.
    for node in &run.nodes {
        assert!((node.highest - node.level) <= found[node.run].highest.0);
        assert!((node.lowest - node.level) >= found[node.run].lowest.0);
    }
}

/// A high point between two nodes raises the floor of the nearer; an even
/// slope raises none.
#[test]
fn a_high_point_between_nodes_counts() {
    let pipe = Pipe {
        length: 400.0,
        bore: 0.2,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let even = Bench::uniform(100.0, pipe, 0.05);
    let humped = Bench {
        humps: vec![(0.255, 8.0)],
        ..even.clone()
    };
    let (even, humped) = (even.model(10, &[1.0]), humped.model(10, &[1.0]));
    for node in 0..11 {
        let vapour = even.floors[node] - even.levels[node];
        assert!((vapour + 10.21).abs() < 0.01);
        assert!((humped.floors[node] - humped.levels[node]) >= vapour - 1e-12);
    }
    // 102 m lies between nodes at 80 and 120 m; the point stands at 95 x 0.745
    // + 8 m.
    let top = 95.0 * 0.745 + 8.0;
    let chord = humped.levels[2] + 0.55 * (humped.levels[3] - humped.levels[2]);
    let expected = humped.levels[3] + top - chord - 10.21;
    assert!(top - chord > 1.0);
    assert!((humped.floors[3] - expected).abs() < 0.01);
}
