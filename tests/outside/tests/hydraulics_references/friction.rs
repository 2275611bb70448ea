//! Friction factors and head losses.

use crate::rows::{off, records};
use hydraulics::friction::{
    DarcyFactor, RelativeRoughness, ReynoldsNumber, colebrook_white, darcy_factor, darcy_weisbach,
    laminar,
};
use hydraulics::quantity::{Acceleration, Length, PipeLength, Velocity};
use hydraulics::solve::{Bracket, Tolerance};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::length::meter;
use uom::si::velocity::meter_per_second;

const FOOT: f64 = 0.3048;

fn factor(reynolds: f64, roughness: f64) -> f64 {
    darcy_factor(
        ReynoldsNumber::new(reynolds).unwrap(),
        RelativeRoughness::new(roughness).unwrap(),
    )
    .get()
}

/// Head lost, in the units the arguments are in.
fn loss(f: f64, length: f64, bore: f64, velocity: f64, gravity: f64) -> f64 {
    darcy_weisbach(
        DarcyFactor::new(f).unwrap(),
        PipeLength::from_m(length),
        Length::new::<meter>(bore),
        Velocity::new::<meter_per_second>(velocity),
        Acceleration::new::<meter_per_second_squared>(gravity),
    )
    .unwrap()
    .m()
}

#[test]
fn the_whole_grid_to_the_last_digits() {
    let mut worst = 0.0_f64;
    for row in records("friction_grid.csv") {
        let reynolds = row.number("reynolds");
        let expected = row.number("factor");
        let re = ReynoldsNumber::new(reynolds).unwrap();
        let regime = row.text("regime");
        let found = if regime == "laminar" {
            // Whatever the roughness.
            assert!(off(factor(reynolds, 0.05), expected) < 1e-15);
            laminar(re).get()
        } else {
            let roughness = row.number("relative_roughness");
            let roughness = RelativeRoughness::new(roughness).unwrap();
            if regime == "turbulent" {
                assert!(off(darcy_factor(re, roughness).get(), expected) < 1e-15);
            }
            // The equation's own value, also where the regime is uncertain.
            colebrook_white(re, roughness).unwrap().get()
        };
        assert!(off(found, expected) < 1e-15, "{}: {found}", row.id());
        worst = worst.max(off(found, expected));
    }
    println!("worst relative difference {worst:e}");
}

#[test]
fn the_printed_loss_table_of_schedule_40_pipe() {
    // The table's own rounding is up to half a unit in three digits, and its
    // makers' viscosity is inferred: 1.3 % is what Colebrook-White itself
    // differs by.
    for row in records("friction_table_schedule_40.csv") {
        let bore = row.number("bore_in") / 12.0;
        let velocity = row.number("velocity_ft_s");
        let reynolds = velocity * bore / 1.217e-5;
        let f = factor(reynolds, 0.000_15 / bore);
        let found = loss(f, 100.0, bore, velocity, 32.174);
        let expected = row.number("loss_ft_per_100_ft");
        assert!(
            off(found, expected) < 0.013,
            "{}: {found} {expected}",
            row.id()
        );
    }
}

#[test]
fn worked_examples() {
    for row in records("friction_facts.csv") {
        let area = |bore: f64| std::f64::consts::PI * bore * bore / 4.0;
        let found = match row.id() {
            "FRX-01" => {
                let bore = row.input("D_m");
                let velocity = row.input("Q_m3_s") / area(bore);
                let reynolds = velocity * bore / row.input("nu_m2_s");
                factor(reynolds, row.input("eps_mm") / 1000.0 / bore)
            }
            "FRX-03" | "FRX-04" => {
                let bore = row.input("D_ft");
                let reynolds = |v: f64| v * bore / row.input("nu_ft2_s");
                let f = |v: f64| factor(reynolds(v), row.input("eps_over_D"));
                let mut balance =
                    |v: f64| loss(f(v), row.input("L_ft"), bore, v, 32.2) - row.input("hf_ft");
                let velocity = Bracket::new(0.1, 100.0, &mut balance)
                    .unwrap()
                    .solve(Tolerance::default(), &mut balance)
                    .root;
                if row.id() == "FRX-03" {
                    velocity
                } else {
                    f(velocity)
                }
            }
            "FRX-06" | "FRX-12" | "FRX-13" => {
                let bore = row.input("D_m");
                let velocity = row.input("Q_m3_s") / area(bore);
                let reynolds = row.input("rho") * velocity * bore / row.input("mu_Pa_s");
                let f = factor(reynolds, row.input("eps_mm") / 1000.0 / bore);
                match row.id() {
                    "FRX-12" => f,
                    "FRX-06" => loss(f, row.input("L_m"), bore, velocity, 9.806_65),
                    _ => {
                        let head = velocity * velocity / (2.0 * 9.806_65);
                        loss(f, row.input("L_m"), bore, velocity, 9.806_65)
                            + row.input("sumK") * head
                    }
                }
            }
            "FRX-08" => {
                let (bore, velocity) = (row.input("D_m"), row.input("V_m_s"));
                let reynolds = row.input("rho") * velocity * bore / row.input("mu_Pa_s");
                loss(
                    factor(reynolds, 0.0),
                    row.input("L_m"),
                    bore,
                    velocity,
                    9.806_65,
                )
            }
            "FRX-11" => {
                let bore = row.input("D_m");
                let mut balance = |q: f64| {
                    let velocity = q / area(bore);
                    let f = factor(velocity * bore / row.input("nu_m2_s"), row.input("eps"));
                    loss(f, row.input("L_m"), bore, velocity, 9.806_65) - row.input("hf_m")
                };
                Bracket::new(0.001, 10.0, &mut balance)
                    .unwrap()
                    .solve(Tolerance::default(), &mut balance)
                    .root
            }
            "FRX-14" => loss(
                row.input("f_given"),
                row.input("L_ft"),
                row.input("D_ft"),
                row.input("V_ft_s"),
                row.input("g"),
            ),
            other => panic!("{other} is not used"),
        };
        row.check(found);
    }
}

#[test]
fn both_unit_systems_give_one_answer() {
    // Dimensionless groups: the same pipe in feet.
    let f = factor(2e5, 1e-3);
    let metric = loss(f, 100.0, 0.2, 2.0, 9.806_65);
    let feet = loss(f, 100.0 / FOOT, 0.2 / FOOT, 2.0 / FOOT, 9.806_65 / FOOT);
    assert!(off(feet * FOOT, metric) < 1e-14);
}
