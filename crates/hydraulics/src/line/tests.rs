//! Laws that every line owes, on made-up lines.

use super::*;
use crate::constants::standard_gravity;
use crate::fittings::LossCoefficient;
use crate::friction::FrictionLaw;
use crate::nozzle::Nozzle;
use crate::quantity::{
    AbsolutePressure, Head, Length, Level, PipeLength, ThermodynamicTemperature, VolumeRate,
};
use crate::solve::Stop;
use crate::water::Water;
use proptest::prelude::*;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;

fn m(value: f64) -> Length {
    Length::new::<meter>(value)
}

fn flow(value: f64) -> VolumeRate {
    VolumeRate::new::<cubic_meter_per_second>(value)
}

fn q(flow: VolumeRate) -> f64 {
    flow.get::<cubic_meter_per_second>()
}

fn water() -> Water {
    Water::at(ThermodynamicTemperature::new::<degree_celsius>(10.0)).unwrap()
}

fn point(chainage: f64, level: f64) -> Point {
    Point {
        chainage: PipeLength::from_m(chainage),
        level: Level::from_m(level),
    }
}

fn run(to: f64, bore: f64, roughness: f64) -> Run {
    Run {
        to: PipeLength::from_m(to),
        bore: m(bore),
        friction: FrictionLaw::ColebrookWhite {
            roughness: m(roughness),
        },
    }
}

fn loss(at: f64, k: f64, bore: f64) -> LocalLoss {
    LocalLoss {
        at: PipeLength::from_m(at),
        k: LossCoefficient::new(k).unwrap(),
        bore: m(bore),
    }
}

/// Three runs, a high point, losses at the inlet, at a reducer, on the way and
/// at the foot.
fn spec() -> LineSpec {
    LineSpec {
        forebay: Level::from_m(200.0),
        points: vec![
            point(0.0, 198.0),
            point(60.0, 195.0),
            point(100.0, 199.0),
            point(300.0, 150.0),
            point(520.0, 100.0),
        ],
        runs: vec![
            run(150.0, 0.25, 5e-5),
            run(300.0, 0.2, 5e-5),
            run(520.0, 0.22, 1e-4),
        ],
        losses: vec![
            loss(0.0, 0.5, 0.25),
            loss(0.0, 0.3, 0.6),
            loss(150.0, 0.2, 0.25),
            loss(410.0, 0.15, 0.22),
            loss(520.0, 0.2, 0.22),
        ],
        water: water(),
        gravity: standard_gravity(),
    }
}

fn line() -> Line {
    Line::new(spec()).unwrap()
}

fn uniform(length: f64, bore: f64, roughness: f64) -> Line {
    Line::new(LineSpec {
        forebay: Level::from_m(100.0),
        points: vec![point(0.0, 99.0), point(length, 99.0 - 0.4 * length)],
        runs: vec![run(length, bore, roughness)],
        losses: vec![],
        ..spec()
    })
    .unwrap()
}

fn template(count: usize) -> NozzleTemplate {
    NozzleTemplate {
        count,
        velocity_coefficient: 0.97,
        contraction_coefficient: 0.9,
        axis: Level::from_m(101.0),
        branch_k: 0.6,
        branch_bore: m(0.15),
    }
}

#[test]
fn still_water_stands_at_the_forebay_level() {
    let grade = line().grade(flow(0.0)).unwrap();
    for node in &grade.nodes {
        assert!((node.energy.m() - 200.0).abs() < 1e-12);
        assert!((node.grade.m() - 200.0).abs() < 1e-12);
    }
    let foot = grade.nodes.last().unwrap();
    let density = water()
        .density()
        .get::<uom::si::mass_density::kilogram_per_cubic_meter>();
    assert!((foot.pressure.pa() - density * 9.80665 * 100.0).abs() < 1e-6);
    assert!(grade.friction_loss.m().abs() < 1e-300 && grade.local_loss.m().abs() < 1e-300);
    assert!(grade.cautions.is_empty());
    assert!((grade.nodes[grade.lowest].level.m() - 199.0).abs() < 1e-12);
}

#[test]
fn nodes_lie_at_every_point_run_end_and_loss_in_order() {
    let grade = line().grade(flow(0.05)).unwrap();
    let places: Vec<(f64, usize, Option<usize>)> = grade
        .nodes
        .iter()
        .map(|node| (node.chainage.m(), node.run, node.point))
        .collect();
    assert_eq!(
        places,
        vec![
            (0.0, 0, Some(0)),
            (0.0, 0, Some(0)),
            (0.0, 0, Some(0)),
            (60.0, 0, Some(1)),
            (100.0, 0, Some(2)),
            (150.0, 0, None),
            (150.0, 0, None),
            (150.0, 1, None),
            (300.0, 1, Some(3)),
            (300.0, 2, Some(3)),
            (410.0, 2, None),
            (410.0, 2, None),
            (520.0, 2, Some(4)),
            (520.0, 2, Some(4)),
        ]
    );
    // The level between points lies on the straight line between them.
    assert!((grade.nodes[5].level.m() - (199.0 - 49.0 * 50.0 / 200.0)).abs() < 1e-9);
}

#[test]
fn hand_count_of_a_line_with_manning() {
    // Everything here can be followed with a pocket calculator: A = 0.0314159,
    // V = 1.59155, R = 0.05, S = (0.01 V / R^(2/3))^2 = 0.0137514.
    let spec = LineSpec {
        points: vec![point(0.0, 198.0), point(100.0, 170.0)],
        runs: vec![Run {
            to: PipeLength::from_m(100.0),
            bore: m(0.2),
            friction: FrictionLaw::Manning { n: 0.01 },
        }],
        losses: vec![loss(0.0, 0.5, 0.2)],
        ..spec()
    };
    let grade = Line::new(spec).unwrap().grade(flow(0.05)).unwrap();
    assert!(
        (grade.friction_loss.m() - 1.375_14).abs() < 1e-4,
        "{grade:?}"
    );
    assert!((grade.local_loss.m() - 0.5 * 0.129_148).abs() < 1e-5);
    let foot = grade.nodes.last().unwrap();
    assert!((foot.grade.m() - (200.0 - 1.375_14 - 1.5 * 0.129_148)).abs() < 1e-4);
}

#[test]
fn errors_name_the_part_and_its_values() {
    let with = |change: &dyn Fn(&mut LineSpec)| {
        let mut spec = spec();
        change(&mut spec);
        Line::new(spec).unwrap_err()
    };
    assert_eq!(
        with(&|s| s.points.truncate(1)),
        LineError::TooFewPoints { count: 1 }
    );
    assert_eq!(with(&|s| s.runs.clear()), LineError::NoRun);
    assert!(matches!(
        with(&|s| s.points[2].chainage = PipeLength::from_m(60.0)),
        LineError::ChainageNotRising { point: 2, .. }
    ));
    assert!(matches!(
        with(&|s| s.points[2].level = Level::from_m(240.0)),
        LineError::SteeperThanVertical { point: 2, .. }
    ));
    assert!(matches!(
        with(&|s| s.points[1].level = Level::from_m(f64::NAN)),
        LineError::PointNotFinite { point: 1, .. }
    ));
    assert!(matches!(
        with(&|s| s.runs[1].to = PipeLength::from_m(150.0)),
        LineError::RunNotRising { run: 1, .. }
    ));
    assert!(matches!(
        with(&|s| s.runs[2].to = PipeLength::from_m(519.0)),
        LineError::RunsEndElsewhere { .. }
    ));
    assert!(matches!(
        with(&|s| s.runs[0].bore = m(0.0)),
        LineError::Run { run: 0, .. }
    ));
    assert!(matches!(
        with(&|s| s.runs[0].bore = m(f64::INFINITY)),
        LineError::Run { run: 0, .. }
    ));
    assert!(matches!(
        with(&|s| s.losses[3].at = PipeLength::from_m(521.0)),
        LineError::LossOutside { loss: 3, .. }
    ));
    assert!(matches!(
        with(&|s| s.losses[3].bore = m(-1.0)),
        LineError::LossBore { loss: 3, .. }
    ));
    assert!(matches!(
        with(&|s| s.forebay = Level::from_m(f64::INFINITY)),
        LineError::Forebay(_)
    ));
    assert!(matches!(line().grade(flow(-0.01)), Err(LineError::Flow(_))));
    assert!(matches!(
        line().grade(flow(f64::NAN)),
        Err(LineError::Flow(_))
    ));
}

#[test]
fn jets_are_refused_with_the_reason() {
    let set = template(2).set(m(0.05)).unwrap();
    let high = NozzleSet {
        axis: Level::from_m(200.0),
        ..set.clone()
    };
    assert!(matches!(
        line().flow_for(&high),
        Err(LineError::NoHead { .. })
    ));
    let none = NozzleSet {
        nozzles: vec![],
        ..set.clone()
    };
    assert_eq!(line().flow_for(&none), Err(LineError::NoNozzle));
    let thin = NozzleSet {
        branch_bore: m(0.04),
        ..set.clone()
    };
    assert!(matches!(
        line().flow_for(&thin),
        Err(LineError::NozzleWiderThanBranch { nozzle: 0, .. })
    ));
    let bad = NozzleSet {
        branch_k: -0.1,
        ..set
    };
    assert!(matches!(
        line().flow_for(&bad),
        Err(LineError::Branch { .. })
    ));
    assert!(matches!(
        line().bore_for(flow(0.0), &template(1)),
        Err(LineError::Flow(_))
    ));
}

#[test]
fn nothing_but_numbers_comes_out() {
    let absurd = |change: &dyn Fn(&mut LineSpec)| {
        let mut spec = spec();
        change(&mut spec);
        Line::new(spec)
    };
    assert!(absurd(&|s| s.runs[0].bore = m(1e-200)).is_err());
    assert!(absurd(&|s| s.losses[0].bore = m(1e-200)).is_err());
    let choked = absurd(&|s| s.losses[0].k = LossCoefficient::new(1e306).unwrap()).unwrap();
    assert!(matches!(
        choked.grade(flow(5.0)),
        Err(LineError::LossBeyondCounting(_))
    ));
    assert!(choked.head_loss(flow(5.0)).is_err());
    assert!(matches!(
        line().grade(flow(1e300)),
        Err(LineError::Run { run: 0, .. })
    ));
    let hair = NozzleTemplate {
        branch_k: 0.0,
        ..template(1)
    }
    .set(m(1e-100))
    .unwrap();
    assert!(line().flow_for(&hair).is_err());
    for value in [0.0, 1e-310, 1e-200, 1e-12] {
        let grade = line().grade(flow(value)).unwrap();
        assert!(
            grade
                .nodes
                .iter()
                .all(|node| node.pressure.pa().is_finite())
        );
    }
}

#[test]
fn too_great_a_flow_comes_back_with_the_greatest() {
    let Err(LineError::FlowTooGreat { greatest, .. }) = line().bore_for(flow(5.0), &template(2))
    else {
        panic!("5 m3/s cannot pass");
    };
    let template = template(2);
    let most = line()
        .flow_for(&template.set(template.branch_bore).unwrap())
        .unwrap();
    assert!((q(most.grade.flow) - q(greatest)).abs() < 1e-12);
    // Just below it there is a nozzle; just above there is none.
    assert!(line().bore_for(greatest * 0.999_999, &template).is_ok());
    assert!(line().bore_for(greatest * 1.000_001, &template).is_err());
}

#[test]
fn a_high_point_under_suction_is_found_with_its_ends() {
    let mut spec = spec();
    spec.points[2] = point(100.0, 202.0);
    spec.losses.clear();
    let line = Line::new(spec).unwrap();
    // Still water: the pipe lies above 200 m between two places found by hand.
    let still = line.grade(flow(0.0)).unwrap();
    let stretches = still.below_atmosphere();
    assert_eq!(stretches.len(), 1);
    assert!((stretches[0].from.m() - (60.0 + 40.0 * 5.0 / 7.0)).abs() < 1e-9);
    assert!((stretches[0].to.m() - (100.0 + 200.0 * 2.0 / 52.0)).abs() < 1e-9);
    assert!((stretches[0].lowest_at.m() - 100.0).abs() < 1e-12);
    let atmosphere = AbsolutePressure::from_pa(80_000.0);
    let margin = still
        .vapour_margin(atmosphere, &water(), standard_gravity())
        .unwrap();
    // 80 kPa less 2 m of water less 1.23 kPa.
    assert!((margin.absolute.pa() - (80_000.0 - 2.0 * 999.70 * 9.80665)).abs() < 1.0);
    assert!((margin.margin.m() - (78_772.0 / (999.70 * 9.80665) - 2.0)).abs() < 1e-3);
    // Running water widens it.
    let running = line.grade(flow(0.06)).unwrap().below_atmosphere();
    assert!(running[0].from < stretches[0].from && running[0].to > stretches[0].to);
}

#[test]
fn the_uncertain_regime_is_named() {
    // Re 3000 in a bore of 0.1 m at 10 degC: 0.0003 m3/s.
    let grade = uniform(50.0, 0.1, 1e-5).grade(flow(3.08e-4)).unwrap();
    assert!(matches!(
        grade.cautions.as_slice(),
        [LineCaution::UncertainRegime { run: 0, .. }]
    ));
    let turbulent = uniform(50.0, 0.1, 1e-5).grade(flow(3e-3)).unwrap();
    assert!(turbulent.cautions.is_empty());
}

#[test]
fn greatest_power_lies_at_one_third_lost_in_a_rough_pipe() {
    let line = uniform(120.0, 0.15, 1.5e-2);
    let template = NozzleTemplate {
        axis: Level::from_m(52.0),
        branch_k: 0.0,
        ..template(1)
    };
    let curve = line.power_curve(&template, 20).unwrap();
    assert_eq!(curve.points.len(), 21);
    assert!((curve.greatest_power.lost_share - 1.0 / 3.0).abs() < 1e-3);
    let best = curve.greatest_power.jet_power;
    assert!(curve.points.iter().all(|point| point.jet_power <= best));
    assert!((curve.points[20].lost_share - 1.0).abs() < 1e-9);
    // In a smooth pipe losses go with a power of flow between 1.75 and 2.
    let smooth = uniform(120.0, 0.15, 0.0).power_curve(&template, 1).unwrap();
    let share = smooth.greatest_power.lost_share;
    assert!(share > 1.0 / 3.0 && share < 1.0 / 2.75, "{share}");
}

proptest! {
    #[test]
    fn energy_never_rises_and_balances(value in 0.0..0.3_f64) {
        let grade = line().grade(flow(value)).unwrap();
        for (a, b) in grade.nodes.iter().zip(grade.nodes.iter().skip(1)) {
            prop_assert!(b.energy <= a.energy);
            prop_assert!(b.chainage >= a.chainage);
        }
        let foot = grade.nodes.last().unwrap();
        let lost = grade.friction_loss + grade.local_loss;
        prop_assert!((200.0 - lost.m() - foot.energy.m()).abs() < 1e-11);
        prop_assert!(grade.residual.m().abs() < 1e-11);
        let short = line().head_loss(flow(value)).unwrap();
        prop_assert!((short - lost).m().abs() < 1e-11);
        for node in &grade.nodes {
            let v = node.velocity.get::<meter_per_second>();
            prop_assert!((node.energy.m() - node.grade.m() - v * v / (2.0 * 9.80665)).abs() < 1e-10);
            let density = water().density();
            let height = node.pressure.head(density, standard_gravity());
            prop_assert!((node.level + height - node.grade).m().abs() < 1e-10);
        }
        let lowest = grade.nodes[grade.lowest].pressure;
        prop_assert!(grade.nodes.iter().all(|node| node.pressure >= lowest));
    }

    #[test]
    fn loss_grows_with_flow_length_and_roughness_and_falls_with_bore(
        value in 0.005..0.5_f64, length in 10.0..2000.0_f64, bore in 0.05..1.0_f64, share in 0.0..0.04_f64,
    ) {
        let lost = |value, length, bore: f64, roughness: f64| {
            uniform(length, bore, roughness).grade(flow(value)).map(|grade| grade.friction_loss)
        };
        let here = lost(value, length, bore, share * bore).unwrap();
        prop_assert!(lost(value * 1.01, length, bore, share * bore).unwrap() > here);
        prop_assert!(lost(value, length * 1.01, bore, share * bore).unwrap() > here);
        prop_assert!(lost(value, length, bore, (share + 0.001) * bore).unwrap() > here);
        prop_assert!(lost(value, length, bore * 1.01, share * bore).unwrap() < here);
    }

    #[test]
    fn flow_and_bore_are_inverse(
        bore in 0.004..0.149_f64, count in 1_usize..7, k in 0.0..5.0_f64, axis in 0.0..199.0_f64,
    ) {
        let template = NozzleTemplate {
            branch_k: k,
            axis: Level::from_m(axis),
            ..template(count)
        };
        let there = line().flow_for(&template.set(m(bore)).unwrap()).unwrap();
        prop_assert!(there.solution.stop != Stop::Evaluations);
        prop_assert!(there.solution.residual.abs() < 1e-9, "{:?}", there.solution);
        let back = line().bore_for(there.grade.flow, &template).unwrap();
        prop_assert!((back.bore.get::<meter>() / bore - 1.0).abs() < 1e-9);
        prop_assert!(((back.jet_power / there.jet_power).get::<uom::si::ratio::ratio>() - 1.0).abs() < 1e-9);
        prop_assert!(back.solution.residual.abs() < 1e-9);
    }

    #[test]
    fn head_is_all_accounted_for_with_unequal_jets(
        bores in proptest::collection::vec(0.004..0.1_f64, 1..6), k in 0.0..3.0_f64,
    ) {
        let nozzles: Vec<Nozzle> = bores.iter().map(|bore| Nozzle::new(m(*bore), 0.98, 0.95).unwrap()).collect();
        let set = NozzleSet { nozzles, axis: Level::from_m(99.0), branch_k: k, branch_bore: m(0.12) };
        let solved = line().flow_for(&set).unwrap();
        let total: f64 = solved.jets.iter().map(|jet| q(jet.flow)).sum();
        prop_assert!((total / q(solved.grade.flow) - 1.0).abs() < 1e-13);
        let lost = solved.grade.friction_loss + solved.grade.local_loss;
        let rest = Head::from_m(101.0) - lost - solved.branch_loss - solved.net_head;
        prop_assert!(rest.m().abs() < 1e-9, "{rest:?}");
        for (jet, nozzle) in solved.jets.iter().zip(&set.nozzles) {
            // Each jet alone obeys its own nozzle.
            let alone = nozzle.flow(jet.net_head, standard_gravity()).unwrap();
            prop_assert!((q(alone) / q(jet.flow) - 1.0).abs() < 1e-13);
            prop_assert!(jet.pressure.pa() > 0.0);
            let v = jet.velocity.get::<meter_per_second>();
            prop_assert!((v - 0.98 * (2.0 * 9.80665 * jet.net_head.m()).sqrt()).abs() < 1e-12 * v);
        }
        let power: f64 = solved.jets.iter().map(|jet| jet.power.get::<watt>()).sum();
        prop_assert!((power / solved.jet_power.get::<watt>() - 1.0).abs() < 1e-14);
    }

    #[test]
    fn one_more_jet_gives_more_flow_and_less_head(count in 1_usize..6, bore in 0.01..0.1_f64) {
        let of = |count| line().flow_for(&template(count).set(m(bore)).unwrap()).unwrap();
        let (few, many) = (of(count), of(count + 1));
        prop_assert!(many.grade.flow > few.grade.flow);
        prop_assert!(many.net_head < few.net_head);
    }

    #[test]
    fn splitting_a_run_changes_nothing(at in 1.0..249.0_f64, value in 0.001..0.2_f64) {
        let whole = Line::new(LineSpec {
            points: vec![point(0.0, 198.0), point(250.0, 120.0)],
            runs: vec![run(250.0, 0.2, 1e-4)],
            losses: vec![],
            ..spec()
        }).unwrap();
        let split = Line::new(LineSpec {
            points: vec![point(0.0, 198.0), point(250.0, 120.0)],
            runs: vec![run(at, 0.2, 1e-4), run(250.0, 0.2, 1e-4)],
            losses: vec![],
            ..spec()
        }).unwrap();
        let (a, b) = (whole.grade(flow(value)).unwrap(), split.grade(flow(value)).unwrap());
        prop_assert!((a.friction_loss - b.friction_loss).m().abs() < 1e-11);
        prop_assert!(b.local_loss.m().abs() < 1e-300);
    }
}
