//! Plastic pipe of the catalogue against published tables, cell by cell. Each
//! file in `data/pipes` names its source at its head.
#![expect(clippy::unwrap_used, reason = "the helpers of a test may fail it")]

use pipes::{Attested, Pipe, catalogue};
use uom::si::f64::ThermodynamicTemperature;
use uom::si::length::{inch, millimeter};
use uom::si::thermodynamic_temperature::degree_celsius;

mod pipes_common;
use pipes_common::{class, close, number, pipe, rows};

fn mm(length: uom::si::f64::Length) -> f64 {
    length.get::<millimeter>()
}

fn pe(od: &str, sdr: &str) -> Option<&'static Pipe> {
    catalogue().find(&format!("pe100-iso4427/{od}/sdr{sdr}"))
}

/// S = 10^(n/10) of the R10 series that a rounded SDR stands for.
fn series_number(sdr: f64) -> f64 {
    let exact = |n: i32| 10_f64.powf(f64::from(n) / 10.0);
    (4..=13)
        .map(exact)
        .min_by(|a, b| {
            (2.0 * a + 1.0 - sdr)
                .abs()
                .total_cmp(&(2.0 * b + 1.0 - sdr).abs())
        })
        .unwrap()
}

/// Up to the next tenth of a millimetre, past binary dust.
fn up_to_tenth(value: f64) -> f64 {
    (value * 10.0 - 1e-6).ceil() / 10.0
}

/// ISO 4065: dn/(2S+1) to 0.01 mm, then up to 0.1 mm.
fn iso4065(od: f64, sdr: f64) -> f64 {
    let exact = od / (2.0 * series_number(sdr) + 1.0);
    up_to_tenth((exact * 100.0).round() / 100.0)
}

#[test]
fn pe100_least_walls() {
    let (mut checked, mut outside) = (0, 0);
    for row in rows("pe100_least_walls.csv") {
        let (od, sdr) = (row["od_mm"].as_str(), row["sdr"].as_str());
        let Some(pipe) = pe(od, sdr) else {
            // What ISO 4427-2 leaves blank: SDR 33 and 41 under OD 225, and
            // cells where the least wall of 2.0 mm would be another SDR.
            let (od, sdr) = (number(&row, "od_mm"), number(&row, "sdr"));
            assert!(
                (sdr >= 33.0 && od < 225.0) || (od < 32.0 && sdr > 13.0),
                "{}",
                row["id"]
            );
            outside += 1;
            continue;
        };
        close(&row["id"], mm(pipe.wall_min), number(&row, "wall_mm"), 1e-9);
        let seen = row["status"] != "rule only";
        if seen {
            assert_eq!(pipe.dimensions.attested, Attested::Seen, "{}", row["id"]);
        }
        checked += 1;
    }
    assert_eq!((checked, outside), (145, 12));
}

#[test]
fn pe100_a_national_edition_least_and_greatest() {
    let mut checked = 0;
    for row in rows("pe100_ms1058.csv") {
        if row["note"] == "misprint" {
            continue;
        }
        let what = format!("OD {} SDR {}", row["od_mm"], row["sdr"]);
        let pipe = pe(&row["od_mm"], &row["sdr"]).expect(&what);
        close(&what, mm(pipe.wall_min), number(&row, "least_mm"), 1e-9);
        let tolerance = if row["note"].starts_with("greatest") {
            0.1 + 1e-9
        } else {
            1e-9
        };
        close(
            &what,
            mm(pipe.wall_max.unwrap()),
            number(&row, "greatest_mm"),
            tolerance,
        );
        checked += 1;
    }
    assert_eq!(checked, 87);
}

#[test]
fn pe100_the_2007_table_and_nothing_beside_it() {
    let table = rows("pe100_iso2007.csv");
    let mut checked = 0;
    for row in table.iter().filter(|row| row["note"].is_empty()) {
        let what = format!("OD {} SDR {}", row["od_mm"], row["sdr"]);
        let pipe = pe(&row["od_mm"], &row["sdr"]).expect(&what);
        close(&what, mm(pipe.wall_min), number(row, "least_mm"), 1e-9);
        checked += 1;
    }
    assert_eq!(checked, 102);
    // Up to OD 200 that table was seen whole: the catalogue has its cells and no others.
    for pipe in catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "pe100-iso4427")
    {
        if mm(pipe.outside_diameter) > 200.5 {
            continue;
        }
        let known = table
            .iter()
            .any(|row| pipe.id == format!("pe100-iso4427/{}/sdr{}", row["od_mm"], row["sdr"]));
        assert!(known, "{}", pipe.id);
    }
}

#[test]
fn pe100_every_cell_follows_the_rule() {
    let mut checked = 0;
    for pipe in catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "pe100-iso4427")
    {
        let sdr: f64 = pipe.id.rsplit("sdr").next().unwrap().parse().unwrap();
        let od = mm(pipe.outside_diameter);
        let rule = iso4065(od, sdr);
        // Small walls are raised to 2.0, 2.3 or 3.0 mm.
        let least = match rule {
            r if r < 2.0 => 2.0,
            r if r > 2.0 && r < 2.3 => 2.3,
            r if r > 2.7 && r < 3.0 && od < 63.0 => 3.0,
            r => r,
        };
        close(&pipe.id, mm(pipe.wall_min), least, 1e-9);
        let greatest = least + up_to_tenth(0.1 * least + 0.1);
        close(&pipe.id, mm(pipe.wall_max.unwrap()), greatest, 1e-9);
        checked += 1;
    }
    assert_eq!(checked, 198);
}

#[test]
fn pe100_greatest_walls_and_bore() {
    for row in rows("pe100_tolerance.csv") {
        let pipe = pe(&row["od_mm"], &row["sdr"]).unwrap();
        let (least, greatest) = (number(&row, "least_mm"), number(&row, "greatest_mm"));
        close(&row["id"], mm(pipe.wall_max.unwrap()), greatest, 1e-9);
        close(
            &row["id"],
            mm(pipe.bore()),
            number(&row, "od_mm") - least - greatest,
            1e-9,
        );
    }
}

#[test]
fn pe100_nominal_pressures() {
    for row in rows("pe100_pn.csv") {
        let pipe = pe("250", &row["sdr"]).unwrap();
        let (symbol, printed, bar) = class(pipe);
        assert_eq!(symbol, "PN");
        let (want, level) = (number(&row, "bar"), row["level"].as_str());
        if row["sdr"] == "26" {
            // The trap: 6.3 in older tables, 6 in the edition used, 6.4 by formula.
            assert_eq!(
                (printed.as_str(), pipe.standard.as_str()),
                ("6", "ISO 4427-2:2019")
            );
            assert!(bar < want);
        } else {
            close(&row["id"], bar, want, 1e-9);
        }
        // 20 sigma/(SDR - 1) with 8 MPa agrees within the rounding to a PN.
        let formula = 160.0 / (number(&row, "sdr") - 1.0);
        assert!(
            bar <= formula * 1.0001 && bar > formula * 0.93,
            "SDR {}",
            row["sdr"]
        );
        let pipes::Rating::Class(rating) = &pipe.rating else {
            panic!("a class")
        };
        assert_eq!(rating.attested.is_seen(), level != "D", "{}", row["id"]);
    }
}

#[test]
fn pvcu_walls_of_a_makers_sheet() {
    let mut seen = 0;
    for row in rows("pvcu_iso1452.csv") {
        let pipe = pipe(&format!("pvcu-iso1452/{}/pn{}", row["od_mm"], row["pn"]));
        close(
            &row["id"],
            mm(pipe.wall_min),
            number(&row, "least_mm"),
            1e-9,
        );
        let (_, _, bar) = class(pipe);
        close(&row["id"], bar, number(&row, "pn"), 1e-9);
        if row["status"] == "maker" {
            close(
                &row["id"],
                mm(pipe.wall_max.unwrap()),
                number(&row, "greatest_mm"),
                1e-9,
            );
            assert_eq!(pipe.dimensions.attested, Attested::Seen, "{}", row["id"]);
            seen += 1;
        } else {
            // Walls no PVC table showed cannot give holds.
            assert_eq!(
                pipe.dimensions.attested,
                Attested::FromMemory,
                "{}",
                row["id"]
            );
        }
    }
    assert_eq!(seen, 41);
}

#[test]
fn pvcu_second_sources() {
    let of = |od: &str| {
        let series = format!("pvcu-iso1452/{od}/");
        catalogue()
            .pipes
            .iter()
            .filter(move |pipe| pipe.id.starts_with(&series))
    };
    let mut checked = 0;
    for row in rows("pvcu_second.csv") {
        let want = number(&row, "least_mm");
        let od = number(&row, "od_mm");
        if row["sdr"] == "trap" {
            assert!(
                of(&row["od_mm"]).all(|pipe| (mm(pipe.wall_min) - want).abs() > 0.05),
                "{}",
                row["id"]
            );
        } else if row["sdr"].is_empty() {
            close(
                &row["id"],
                mm(pipe(&format!("pvcu-iso1452/{}/pn{}", row["od_mm"], row["pn"])).wall_min),
                want,
                1e-9,
            );
        } else {
            // By series: the rule must give the printed wall, and the catalogue
            // has a pipe with it where ISO 1452-2 makes a class of that series.
            let rule = iso4065(od, number(&row, "sdr")).max(1.5);
            close(&row["id"], rule, want, 1e-9);
            let is_class = !(row["sdr"] == "41" && od < 100.0);
            let kept = of(&row["od_mm"]).any(|pipe| (mm(pipe.wall_min) - want).abs() < 1e-9);
            assert_eq!(kept, is_class, "{}", row["id"]);
        }
        checked += 1;
    }
    assert_eq!(checked, 57);
}

#[test]
fn pvc_schedule_walls_and_ratings() {
    for row in rows("pvc_d1785.csv") {
        let pipe = pipe(&format!(
            "pvc-astm-d1785/{}/sch{}",
            row["nps"], row["schedule"]
        ));
        close(
            &row["id"],
            pipe.outside_diameter.get::<inch>(),
            number(&row, "od_in"),
            1e-9,
        );
        close(
            &row["id"],
            pipe.wall_min.get::<inch>(),
            number(&row, "least_in"),
            1e-9,
        );
    }
    for row in rows("pvc_d1785_ratings.csv") {
        let pipe = pipe(&format!(
            "pvc-astm-d1785/{}/sch{}",
            row["nps"], row["schedule"]
        ));
        let (symbol, printed, bar) = class(pipe);
        assert_eq!(
            (symbol.as_str(), printed),
            ("PR", format!("{} psi", row["psi"]))
        );
        close(
            &row["id"],
            bar,
            number(&row, "psi") * 0.068_947_572_93,
            1e-6,
        );
    }
    // Everywhere: within the rounding of 2 S t/(D - t), S 2000 psi.
    for pipe in catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "pvc-astm-d1785")
    {
        let (t, d) = (
            pipe.wall_min.get::<inch>(),
            pipe.outside_diameter.get::<inch>(),
        );
        let formula = 4000.0 * t / (d - t) * 0.068_947_572_93;
        let (_, _, bar) = class(pipe);
        assert!(
            bar < formula * 1.035 && bar > formula - 0.7,
            "{}: {bar} against {formula}",
            pipe.id
        );
    }
}

#[test]
fn pvc_sdr_walls_and_ratings() {
    let table = rows("pvc_d2241.csv");
    assert_eq!(table.len(), 50);
    for row in &table {
        let pipe = pipe(&format!("pvc-astm-d2241/{}/sdr{}", row["nps"], row["sdr"]));
        close(
            &row["id"],
            pipe.outside_diameter.get::<inch>(),
            number(row, "od_in"),
            1e-9,
        );
        close(
            &row["id"],
            pipe.wall_min.get::<inch>(),
            number(row, "least_in"),
            1e-9,
        );
        let (symbol, _, bar) = class(pipe);
        assert_eq!(symbol, "PR");
        close(&row["id"], bar, number(row, "psi") * 0.068_947_572_93, 1e-6);
    }
    // The rule OD/SDR gives every cell to a thousandth of an inch.
    for pipe in catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "pvc-astm-d2241")
    {
        let sdr: f64 = pipe.id.rsplit("sdr").next().unwrap().parse().unwrap();
        close(
            &pipe.id,
            pipe.wall_min.get::<inch>(),
            pipe.outside_diameter.get::<inch>() / sdr,
            0.001_01,
        );
    }
}

#[test]
fn pvco_walls_and_printed_bores() {
    let table = rows("pvco.csv");
    for row in &table {
        let pipe = pipe(&format!("pvco-iso16422/{}/pn{}", row["od_mm"], row["pn"]));
        close(&row["id"], mm(pipe.wall_min), number(row, "least_mm"), 1e-9);
        close(&row["id"], mm(pipe.bore()), number(row, "bore_mm"), 1e-9);
        // The wall carries its class: S = 10 (50/1.4)/PN, within the rounding of 0.1 mm.
        let s = 10.0 * (50.0 / 1.4) / number(row, "pn");
        assert!(
            mm(pipe.wall_min) > number(row, "od_mm") / (2.0 * s + 1.0) - 0.05,
            "{}",
            row["id"]
        );
    }
    let kept = catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "pvco-iso16422")
        .count();
    assert_eq!(kept, table.len(), "only cells seen are kept");
}

#[test]
fn pe4710_walls_diameters_and_ratings() {
    for row in rows("pe4710_walls.csv") {
        let pipe = pipe(&format!("pe4710-ips/{}/dr{}", row["nps"], row["dr"]));
        close(
            &row["id"],
            pipe.outside_diameter.get::<inch>(),
            number(&row, "od_in"),
            1e-9,
        );
        close(
            &row["id"],
            pipe.wall_min.get::<inch>(),
            number(&row, "least_in"),
            0.000_51,
        );
    }
    for row in rows("pe4710_diameters.csv") {
        let pipe = pipe(&format!("pe4710-ips/{}/dr17", row["nps"]));
        close(
            &row["id"],
            pipe.outside_diameter.get::<inch>(),
            number(&row, "od_in"),
            1e-9,
        );
    }
    let mut checked = 0;
    for row in rows("pe4710_ratings.csv") {
        if let Some(pipe) = catalogue().find(&format!("pe4710-ips/8/dr{}", row["dr"])) {
            let (_, _, bar) = class(pipe);
            close(
                &row["id"],
                bar,
                number(&row, "psi") * 0.068_947_572_93,
                1e-6,
            );
            checked += 1;
        }
    }
    assert_eq!(checked, 5);
}

/// The nominal stiffness is by definition E I / dm^3 with I = t^3 / 12 (EN
/// 1796 and ISO 7685, from memory): every wall gives its class at least that,
/// and, where the least wall of 3 mm does not govern, hardly more.
#[test]
fn grp_walls_give_the_class_its_stiffness_and_cannot_hold() {
    let pipes: Vec<_> = catalogue()
        .pipes
        .iter()
        .filter(|pipe| pipe.series == "grp-iso23856")
        .collect();
    assert_eq!(pipes.len(), 150);
    for pipe in pipes {
        let class: f64 = pipe
            .designation
            .rsplit(' ')
            .next()
            .unwrap()
            .parse()
            .unwrap();
        let size: f64 = pipe.designation.split(' ').nth(2).unwrap().parse().unwrap();
        let wall = pipe.wall_min.get::<millimeter>();
        close(&pipe.id, pipe.bore().get::<millimeter>(), size, 1e-9);
        let mean = pipe.outside_diameter.get::<millimeter>() - wall;
        let modulus = pipe.modulus_short.value.get::<uom::si::pressure::pascal>();
        let stiffness = modulus / 12.0 * (wall / mean).powi(3);
        assert!(stiffness >= class, "{}: {stiffness} N/m2", pipe.id);
        assert!(
            wall <= 3.0 || stiffness < 1.1 * class,
            "{}: {stiffness} N/m2",
            pipe.id
        );
        assert_eq!(pipe.dimensions.attested, Attested::FromMemory);
        let at = ThermodynamicTemperature::new::<degree_celsius>(20.0);
        assert_eq!(
            pipe.allowable(at).unwrap().attested,
            Attested::FromMemory,
            "{}",
            pipe.id
        );
    }
}
