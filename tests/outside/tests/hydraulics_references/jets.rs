//! Nozzles, jets, greatest power, impulse wheels.

use crate::rows::{Record, off, records};
use hydraulics::constants::standard_gravity;
use hydraulics::fittings::LossCoefficient;
use hydraulics::friction::{DarcyFactor, FrictionLaw};
use hydraulics::line::{Line, LineSpec, LocalLoss, NozzleSet, NozzleTemplate, Point, Run};
use hydraulics::nozzle::{
    Nozzle, bore_for_flow, greatest_power_bore, jet_power, spouting_velocity,
};
use hydraulics::quantity::{
    Angle, AngularVelocity, Head, Length, Level, MassDensity, PipeLength, ThermodynamicTemperature,
    Velocity, VolumeRate,
};
use hydraulics::water::Water;
use hydraulics::wheel::{pitch_diameter, runner_efficiency};
use uom::si::angle::degree;
use uom::si::angular_velocity::revolution_per_minute;
use uom::si::length::{foot, inch, meter};
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::power::{horsepower, kilowatt, watt};
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::velocity::{foot_per_second, meter_per_second};
use uom::si::volume_rate::{cubic_meter_per_second, gallon_per_minute};

const GRAVITY: f64 = 9.806_65;
/// Pressure head of 1 psi of the table's water (62.4 lb/ft3), ft.
const FEET_PER_PSI: f64 = 144.0 / 62.4;

fn m(value: f64) -> Length {
    Length::new::<meter>(value)
}

fn rpm(value: f64) -> AngularVelocity {
    AngularVelocity::new::<revolution_per_minute>(value)
}

fn spout(head: f64) -> Velocity {
    spouting_velocity(Head::from_m(head), standard_gravity()).unwrap()
}

fn water() -> Water {
    Water::at(ThermodynamicTemperature::new::<degree_celsius>(15.0)).unwrap()
}

fn line(head: f64, length: f64, bore: f64, friction: FrictionLaw, k: f64) -> Line {
    Line::new(LineSpec {
        forebay: Level::from_m(head),
        points: vec![
            Point {
                chainage: PipeLength::from_m(0.0),
                level: Level::from_m(0.0),
            },
            Point {
                chainage: PipeLength::from_m(length),
                level: Level::from_m(0.0),
            },
        ],
        runs: vec![Run {
            to: PipeLength::from_m(length),
            bore: m(bore),
            friction,
        }],
        losses: vec![LocalLoss {
            at: PipeLength::from_m(length),
            k: LossCoefficient::new(k).unwrap(),
            bore: m(bore),
        }],
        water: water(),
        gravity: standard_gravity(),
    })
    .unwrap()
}

/// Manning's n that gives a Darcy factor in every flow: f = 8 g n^2 / R^(1/3).
fn manning(f: f64, bore: f64) -> FrictionLaw {
    let n = (f * (bore / 4.0).cbrt_own() / (8.0 * GRAVITY)).sqrt();
    FrictionLaw::Manning { n }
}

/// The house's own cube root.
trait CubeRoot {
    fn cbrt_own(self) -> f64;
}

impl CubeRoot for f64 {
    fn cbrt_own(self) -> f64 {
        hydraulics::math::cbrt(self)
    }
}

/// Greatest power over rho g, m4/s, of a pipe with a constant Darcy factor.
fn greatest_power_over_weight(head: f64, length: f64, bore: f64, f: f64) -> f64 {
    let template = NozzleTemplate {
        count: 1,
        velocity_coefficient: 1.0,
        contraction_coefficient: 1.0,
        axis: Level::from_m(0.0),
        branch_k: 0.0,
        branch_bore: m(bore),
    };
    let curve = line(head, length, bore, manning(f, bore), 0.0)
        .power_curve(&template, 1)
        .unwrap();
    assert!((curve.greatest_power.lost_share - 1.0 / 3.0).abs() < 1e-6);
    let density = water().density().get::<kilogram_per_cubic_meter>();
    curve.greatest_power.jet_power.get::<watt>() / (density * GRAVITY)
}

fn wheel(row: &Record) -> f64 {
    let ratio = |key| row.input(key);
    let diameter = |velocity: Velocity, ratio: f64| {
        pitch_diameter(velocity, ratio, rpm(row.input("N_rpm"))).unwrap()
    };
    match row.id() {
        "TUX-05" | "TUX-19" | "TUX-32" => {
            let jet = spout(row.input("H_m")) * row.input("Cv");
            diameter(jet, ratio("u_over_c")).get::<meter>()
        }
        "TUX-13" | "TUX-15" => diameter(spout(row.input("H_m")), ratio("phi")).get::<meter>(),
        "TUX-24" => {
            let spouting = spout(row.input("H_ft") * 0.3048);
            diameter(spouting, ratio("phi")).get::<foot>()
        }
        "TUX-08" => {
            let turned = Angle::new::<degree>(180.0 - row.input("exit_angle_deg"));
            100.0 * runner_efficiency(ratio("u_over_c"), turned, 1.0).unwrap()
        }
        "TUX-11" => {
            let turned = Angle::new::<degree>(row.input("deflection_deg"));
            runner_efficiency(ratio("u_over_c"), turned, row.input("k")).unwrap()
        }
        "TUX-21" => {
            // The wheel's speed over that of the jet, from its size.
            let u = row.input("N_rpm") * std::f64::consts::PI * row.input("D_m") / 60.0;
            let x = u / spout(row.input("H_eff_m")).get::<meter_per_second>();
            let turned = Angle::new::<degree>(row.input("deflection_deg"));
            runner_efficiency(x, turned, row.input("k")).unwrap()
        }
        other => panic!("{other} is not used"),
    }
}

fn jet(row: &Record) -> f64 {
    let flow = VolumeRate::new::<cubic_meter_per_second>;
    let bore = |q: f64, head: f64, cv: f64| {
        bore_for_flow(flow(q), Head::from_m(head), standard_gravity(), cv, 1.0)
            .unwrap()
            .get::<meter>()
    };
    match row.id() {
        "TUX-06" => {
            let head = row.input("H_m");
            let q = row.input("P_kW") / (row.input("eta") * GRAVITY * head);
            bore(q, head, row.input("Cv"))
        }
        "TUX-07" => {
            let u = row.input("N_rpm") * std::f64::consts::PI * row.input("D_m") / 60.0;
            let velocity = Velocity::new::<meter_per_second>(u / row.input("u_over_c"));
            let density = MassDensity::new::<kilogram_per_cubic_meter>(1000.0);
            jet_power(density, flow(row.input("Q_m3_s")), velocity).get::<kilowatt>()
        }
        "TUX-16" => Nozzle::new(m(row.input("D_m") / 12.0), row.input("Cv"), 1.0)
            .unwrap()
            .flow(Head::from_m(row.input("H_m")), standard_gravity())
            .unwrap()
            .get::<cubic_meter_per_second>(),
        "TUX-20" => {
            let each = Nozzle::new(m(row.input("D_m") / 15.0), row.input("Cv"), 1.0)
                .unwrap()
                .flow(Head::from_m(row.input("H_m")), standard_gravity())
                .unwrap();
            // As many as it takes.
            (row.input("Q_m3_s") / each.get::<cubic_meter_per_second>()).ceil()
        }
        "TUX-22" => {
            let head = row.input("H_eff_m");
            let q = row.input("P_kW") / (row.input("eta_runner") * GRAVITY * head);
            bore(q / row.input("jets"), head, 1.0)
        }
        // A third of the area each: the same velocity.
        "TUX-25" => {
            let head = row.input("H_ft") * 0.3048;
            let total = row.input("A_total_ft2") * 0.3048 * 0.3048;
            let q = total * spout(head).get::<meter_per_second>();
            bore(q / 3.0, head, 1.0) / 0.3048
        }
        other => panic!("{other} is not used"),
    }
}

/// A nozzle on a 6 in pipe under 200 ft: the printed equation is
/// H = (1.04 + 640 d^4) v^2/(2 g), d in ft, so the pipe loses
/// 640 (0.5 ft)^4 = 40 velocity heads.
fn nozzle_on_a_pipe(row: &Record) -> f64 {
    let bore = Length::new::<inch>(6.0);
    let head = row.input("head_ft") * 0.3048;
    let velocity_coefficient = 1.0 / row.input("K_nozzle").sqrt();
    let nozzle = Nozzle::new(
        Length::new::<inch>(row.input("nozzle_in")),
        velocity_coefficient,
        1.0,
    )
    .unwrap();
    let smooth = FrictionLaw::Manning { n: 0.007 };
    let set = NozzleSet {
        nozzles: vec![nozzle],
        axis: Level::from_m(0.0),
        branch_k: 0.0,
        branch_bore: bore,
    };
    // A hand's breadth of pipe, so that all loss is the printed one.
    let solved = line(head, 0.001, bore.get::<meter>(), smooth, 40.0)
        .flow_for(&set)
        .unwrap();
    // The book's horsepower is of water of 62.4 lb/ft3.
    let density = water().density().get::<kilogram_per_cubic_meter>();
    let book = 62.4 * 0.453_592_37 / (0.3048 * 0.3048 * 0.3048);
    solved.jet_power.get::<horsepower>() * book / density
}

#[test]
fn every_row() {
    for row in records("jets_and_wheels.csv") {
        let id = row.id();
        let found = if id.starts_with("NZT-V") {
            let head = row.input("head_ft") * 0.3048;
            spout(head).get::<foot_per_second>()
        } else if id.starts_with("NZT-") {
            let head = row.input("p_psi") * FEET_PER_PSI * 0.3048;
            Nozzle::new(Length::new::<inch>(row.input("nozzle_in")), 1.0, 1.0)
                .unwrap()
                .flow(Head::from_m(head), standard_gravity())
                .unwrap()
                .get::<gallon_per_minute>()
        } else if id.starts_with("NOZ-") {
            let f = DarcyFactor::new(row.input("f")).unwrap();
            let length = PipeLength::from_m(row.input("L_m"));
            greatest_power_bore(m(row.input("D_m")), length, f)
                .unwrap()
                .get::<meter>()
        } else if id.starts_with("TUX-23-") {
            nozzle_on_a_pipe(&row)
        } else {
            match id {
                "TUX-27" => {
                    let f = DarcyFactor::new(row.input("f")).unwrap();
                    let length = PipeLength::new(Length::new::<foot>(row.input("L_ft")));
                    greatest_power_bore(Length::new::<inch>(row.input("D_in")), length, f)
                        .unwrap()
                        .get::<foot>()
                }
                "TUX-30" => {
                    row.input("gamma_kN_m3")
                        * greatest_power_over_weight(
                            row.input("H_m"),
                            row.input("L_m"),
                            row.input("D_m"),
                            row.input("f"),
                        )
                }
                "TUX-31" => {
                    // The book's water weighs 9.81 kN/m3.
                    let head = row.input("p_Pa") / 9810.0;
                    9.81 * greatest_power_over_weight(
                        head,
                        row.input("L_m"),
                        row.input("D_m"),
                        4.0 * row.input("f_fanning"),
                    )
                }
                "TUX-06" | "TUX-07" | "TUX-16" | "TUX-20" | "TUX-22" | "TUX-25" => jet(&row),
                _ => wheel(&row),
            }
        };
        row.check(found);
    }
}

#[test]
fn the_closed_form_and_the_power_curve_agree() {
    // Constant factor, long pipe: the nozzle of the curve's best point is that
    // of the closed form.
    let (head, length, bore, f) = (100.0, 2000.0, 0.2, 0.02);
    let friction = manning(f, bore);
    let template = NozzleTemplate {
        count: 1,
        velocity_coefficient: 1.0,
        contraction_coefficient: 1.0,
        axis: Level::from_m(0.0),
        branch_k: 0.0,
        branch_bore: m(bore),
    };
    let line = line(head, length, bore, friction, 0.0);
    let best = line.power_curve(&template, 1).unwrap().greatest_power;
    let solved = line.bore_for(best.flow, &template).unwrap();
    let closed = greatest_power_bore(
        m(bore),
        PipeLength::from_m(length),
        DarcyFactor::new(f).unwrap(),
    )
    .unwrap();
    assert!(off(solved.bore.get::<meter>(), closed.get::<meter>()) < 1e-6);
}
