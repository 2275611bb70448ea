//! Hoop stress and collapse against printed figures (`data/pipes/statics.csv`).

use serde_json::Value;
use statics::collapse::{FreeRing, free_ring};
use statics::hoop::barlow_stress;
use uom::si::f64::{Length, Pressure};
use uom::si::length::{inch, meter};
use uom::si::pressure::{kilopascal, pascal, psi};

mod pipes_common;
use pipes_common::{number, rows};

#[test]
fn printed_and_computed_figures() {
    let (mut printed, mut computed) = (0, 0);
    for row in rows("statics.csv") {
        let given: Value = serde_json::from_str(&row["inputs"]).unwrap();
        let input = |name: &str| given[name].as_f64().unwrap();
        let have = match row["id"].as_str() {
            "STR-03" => barlow_stress(
                Pressure::new::<kilopascal>(input("p_kPa")),
                Length::new::<meter>(input("D_m")),
                Length::new::<meter>(input("t_m")),
            )
            .unwrap()
            .get::<kilopascal>(),
            // r is the mean radius of the printed formula.
            "STR-05" => free_ring(&FreeRing {
                outside_diameter: Length::new::<inch>(2.0 * input("r_in") + input("t_in")),
                wall: Length::new::<inch>(input("t_in")),
                modulus: Pressure::new::<psi>(input("E_psi")),
                poisson: input("nu"),
                ovality: 0.0,
            })
            .unwrap()
            .critical
            .get::<psi>(),
            id if id.starts_with("BKL-") => free_ring(&FreeRing {
                outside_diameter: Length::new::<meter>(input("Dm_m") + input("t_m")),
                wall: Length::new::<meter>(input("t_m")),
                modulus: Pressure::new::<pascal>(input("E_Pa")),
                poisson: input("nu"),
                ovality: 0.0,
            })
            .unwrap()
            .critical
            .get::<pascal>(),
            // The page of the handling rule was not seen: level D, not tested.
            _ => {
                assert_eq!(row["level"], "D", "{}", row["id"]);
                continue;
            }
        };
        let want = number(&row, "expected");
        assert!(
            (have / want - 1.0).abs() <= number(&row, "tol_rel"),
            "{}: {have} against {want}",
            row["id"]
        );
        match row["level"].as_str() {
            "A" => printed += 1,
            _ => computed += 1,
        }
    }
    assert_eq!((printed, computed), (2, 4));
}
