//! Steel and ductile iron of the catalogue against published tables. Each file
//! in `data/pipes` names its source at its head.
#![expect(clippy::unwrap_used, reason = "the helpers of a test may fail it")]

use pipes::{Attested, Pipe, catalogue};
use uom::si::length::{inch, millimeter};

mod pipes_common;
use pipes_common::{class, close, number, pipe, rows};

fn mm(length: uom::si::f64::Length) -> f64 {
    length.get::<millimeter>()
}

/// The catalogue keeps pipes that go by two names once.
fn b36(nps: &str, schedule: &str) -> &'static Pipe {
    let size: f64 = nps.parse().unwrap();
    let schedule = match schedule {
        "STD" if size <= 10.0 => "40",
        "XS" if size <= 8.0 => "80",
        "20" if size >= 20.0 => "STD",
        other => other,
    };
    pipe(&format!("steel-asme-b36-10/{nps}/{schedule}"))
}

#[test]
fn b36_10_diameters_walls_and_bores() {
    let table = rows("steel_b36_10.csv");
    assert_eq!(table.len(), 72);
    for row in &table {
        let pipe = b36(&row["nps"], &row["schedule"]);
        close(
            &row["id"],
            mm(pipe.outside_diameter),
            number(row, "od_mm"),
            1e-9,
        );
        close(
            &row["id"],
            mm(pipe.wall_mean()),
            number(row, "wall_mm"),
            1e-9,
        );
        close(&row["id"], mm(pipe.bore()), number(row, "bore_mm"), 1e-6);
        assert_eq!(pipe.dimensions.attested, Attested::Seen, "{}", row["id"]);
    }
    for row in rows("steel_sch40_bores.csv") {
        // The inch bores of an older book: within the rounding of the mm sizes.
        close(
            &row["nps"],
            b36(&row["nps"], "40").bore().get::<inch>(),
            number(&row, "bore_in"),
            0.005,
        );
    }
}

#[test]
fn en_10220_usual_walls_and_listed_bores() {
    let mut checked = 0;
    for row in rows("steel_usual_walls.csv") {
        if number(&row, "od_mm") < 21.0 {
            continue;
        }
        let od = if row["od_mm"] == "457.2" {
            "457"
        } else {
            row["od_mm"].as_str()
        };
        let pipe = pipe(&format!(
            "steel-en10220-{}/{od}/{}",
            row["kind"], row["wall_mm"]
        ));
        close(
            &row["id"],
            mm(pipe.wall_mean()),
            number(&row, "wall_mm"),
            1e-9,
        );
        let off = if row["od_mm"] == "457.2" { 0.201 } else { 1e-6 };
        close(&row["id"], mm(pipe.bore()), number(&row, "bore_mm"), off);
        checked += 1;
    }
    assert!(checked >= 40, "{checked}");
}

#[test]
fn ductile_iron_diameters_and_walls() {
    let mut checked = 0;
    for row in rows("ductile_iron.csv") {
        let (dn, class) = (row["dn"].as_str(), row["class"].as_str());
        let pipe = match class {
            "K9" | "DE" => pipe(&format!("ductile-iron-k9/{dn}/k9")),
            class => pipe(&format!(
                "ductile-iron-iso2531/{dn}/{}",
                class.to_lowercase()
            )),
        };
        let have = match row["what"].as_str() {
            "od" => mm(pipe.outside_diameter),
            "min" => mm(pipe.wall_min),
            _ => mm(pipe.wall_mean()),
        };
        close(
            &row["id"],
            have,
            number(&row, "mm"),
            number(&row, "tolerance_mm") + 1e-9,
        );
        assert_eq!(pipe.dimensions.attested, Attested::Seen, "{}", row["id"]);
        checked += 1;
    }
    assert_eq!(checked, 86);
}

#[test]
fn ductile_iron_ratings() {
    for row in rows("ductile_iron_k9_pfa.csv") {
        let (symbol, _, bar) = class(pipe(&format!("ductile-iron-k9/{}/k9", row["dn"])));
        assert_eq!(symbol, "PFA");
        close(&row["dn"], bar, number(&row, "bar"), 1e-9);
    }
    // PFA = 20 e 420 / (3 (DE - e)): no class is above it by more than 2 %.
    for pipe in catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series.starts_with("ductile-iron"))
    {
        let (e, de) = (mm(pipe.wall_min), mm(pipe.outside_diameter));
        let rule = 20.0 * e * 420.0 / (3.0 * (de - e));
        let (_, _, bar) = class(pipe);
        assert!(bar <= rule * 1.02, "{}: {bar} bar against {rule}", pipe.id);
    }
}

#[test]
fn cement_lining_is_taken_off_the_bore_twice() {
    for row in rows("ductile_iron_lining.csv") {
        for pipe in catalogue()
            .pipes
            .iter()
            .filter(|pipe| pipe.series.starts_with("ductile-iron"))
        {
            let dn: f64 = pipe.id.split('/').nth(1).unwrap().parse().unwrap();
            if dn < number(&row, "dn_from") || dn > number(&row, "dn_to") {
                continue;
            }
            close(&pipe.id, mm(pipe.lining), number(&row, "mm"), 1e-9);
            let bore =
                mm(pipe.outside_diameter) - 2.0 * mm(pipe.wall_mean()) - 2.0 * mm(pipe.lining);
            close(&pipe.id, mm(pipe.bore()), bore, 1e-9);
        }
    }
}
