//! Wave speed and quick surge figures.

use crate::rows::{Record, off, records};
use hydraulics::constants::standard_gravity;
use hydraulics::quantity::{
    Acceleration, GaugePressure, Head, Length, MassDensity, PipeLength, Pressure, Time, Velocity,
};
use hydraulics::surge::{
    PipeWall, Restraint, allievi_limit, allievi_linear_closure, joukowsky, korteweg, michaud,
    pipe_period,
};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::{pascal, psi};
use uom::si::time::second;
use uom::si::velocity::{foot_per_second, meter_per_second};

const FOOT: f64 = 0.3048;

fn rho(value: f64) -> MassDensity {
    MassDensity::new::<kilogram_per_cubic_meter>(value)
}

fn pa(value: f64) -> Pressure {
    Pressure::new::<pascal>(value)
}

fn m_s(value: f64) -> Velocity {
    Velocity::new::<meter_per_second>(value)
}

/// Wave speed from the ratio of bore to wall; a rigid wall when `None`.
fn speed(density: f64, bulk: f64, wall: Option<(f64, f64)>, factor: f64) -> f64 {
    let (ratio, modulus) = wall.unwrap_or((1.0, 1e30));
    let wall = PipeWall {
        bore: Length::new::<meter>(ratio),
        thickness: Length::new::<meter>(1.0),
        modulus: pa(modulus),
        poisson: 0.0,
        restraint: Restraint::ExpansionJoints,
    };
    korteweg(rho(density), pa(bulk), &wall, factor)
        .unwrap()
        .get::<meter_per_second>()
}

/// Joukowsky rise as a pressure, Pa.
fn rise(density: f64, wave_speed: f64, change: f64) -> f64 {
    joukowsky(m_s(wave_speed), m_s(change), standard_gravity())
        .unwrap()
        .pressure(rho(density), standard_gravity())
        .pa()
}

/// Restraint named in a row of the computed table.
fn thin_factor(row: &Record) -> f64 {
    let restraint = match row.input_text("restraint").as_str() {
        "c1=1" => Restraint::ExpansionJoints,
        "anchored upstream 1-nu/2" => Restraint::UpstreamEnd,
        "anchored throughout 1-nu^2" => Restraint::Throughout,
        other => panic!("restraint {other}"),
    };
    restraint.thin_factor(row.input("nu"))
}

const PSI: f64 = 6_894.757_293_168;
/// Water of 62.4 lb/ft3, kg/m3.
const BOOK_WATER: f64 = 62.4 * 0.453_592_37 / (FOOT * FOOT * FOOT);

fn textbook(row: &Record) -> f64 {
    let sized = || row.input("D_m") / row.input("t_m");
    let bulk = || row.input("K_Pa");
    match row.id() {
        "WHX-01" | "WHX-02" | "EXW-1" => speed(row.input("rho"), bulk(), None, 1.0),
        "WHX-03" => speed(
            row.input("rho"),
            bulk(),
            Some((sized(), row.input("E_Pa"))),
            1.0,
        ),
        "WHX-04" | "WHX-07" => {
            let a = speed(row.input("rho"), bulk(), None, 1.0);
            rise(row.input("rho"), a, row.input("dV_m_s")) / 1e6
        }
        "WHX-06" => {
            let a = speed(
                row.input("rho"),
                bulk(),
                Some((sized(), row.input("E_Pa"))),
                1.0,
            );
            rise(row.input("rho"), a, row.input("dV_m_s")) / 1e6
        }
        "WHX-08" => {
            let wall = (row.input("D_over_t"), row.input("E_Pa"));
            let a = speed(row.input("rho"), bulk(), Some(wall), 1.0);
            period(row.input("L_m"), a)
        }
        "WHX-09" => {
            let wall = (row.input("D_over_t"), row.input("E_Pa"));
            let a = speed(row.input("rho"), bulk(), Some(wall), 1.0);
            rise(row.input("rho"), a, row.input("dV_m_s")) / 1e6
        }
        // The pipe beyond the reach of the first reflection: L less a T/2.
        "WHX-13" => {
            let (a, t) = (row.input("a_m_s"), row.input("T_s"));
            let reach = t / period(1.0, a);
            row.input("L_m") - reach
        }
        "WHX-17" => {
            let bore = row.input("D_ft");
            let change = row.input("dQ_cfs") / (std::f64::consts::PI * bore * bore / 4.0);
            rise(BOOK_WATER, row.input("c_ft_s") * FOOT, change * FOOT) / PSI
        }
        "WHX-19" => {
            let a = speed(BOOK_WATER, row.input("K_psi") * PSI, None, 1.0);
            let bore = row.input("D_in") / 12.0;
            let change = row.input("Q_cfs") / (std::f64::consts::PI * bore * bore / 4.0);
            rise(BOOK_WATER, a, change * FOOT) / PSI
        }
        "WHX-20" => {
            let wall = (row.input("DR") - 2.0, row.input("E_psi") * PSI);
            let a = speed(BOOK_WATER, row.input("K_psi") * PSI, Some(wall), 1.0);
            m_s(a).get::<foot_per_second>()
        }
        // The book turns feet into psi by 0.43.
        "WHX-21" => {
            let g = Acceleration::new::<meter_per_second_squared>(row.input("g") * FOOT);
            let a = m_s(row.input("a_ft_s") * FOOT);
            let v = m_s(row.input("dV_ft_s") * FOOT);
            0.43 * joukowsky(a, v, g).unwrap().m() / FOOT
        }
        // The rise of a column slowed steadily is half of Michaud's.
        "WHX-22" => {
            let bore = row.input("D_m");
            let v = row.input("Q_l_s") / 1000.0 / (std::f64::consts::PI * bore * bore / 4.0);
            let g = Acceleration::new::<meter_per_second_squared>(row.input("g"));
            let slow = Time::new::<second>(row.input("T_s"));
            let head = michaud(
                PipeLength::from_m(row.input("L_m")),
                m_s(1e6),
                m_s(v),
                slow,
                g,
            );
            0.5 * head.unwrap().m() * 1000.0
        }
        "EXW-3" => {
            let wall = (sized(), row.input("E_Pa"));
            let a = speed(row.input("rho"), bulk(), Some(wall), 1.0);
            period(row.input("L_m"), a)
        }
        // Allievi's limit: n = L V / (g H T), rise over static head; the row
        // was computed with 9.81 m/s2.
        "EXW-7c" => {
            let n = row.input("L_m") * row.input("V_m_s")
                / (9.81 * row.input("H_m") * row.input("t_s"));
            let rise = Head::from_m((allievi_limit(n, 1.0) - 1.0) * row.input("H_m"));
            let g = Acceleration::new::<meter_per_second_squared>(9.81);
            let pressure: GaugePressure = rise.pressure(rho(row.input("rho")), g);
            pressure.pa() / 1000.0
        }
        "EXS-11" | "EXS-7.3" => {
            let wall = (row.input("SDR") - 2.0, row.input("E_Pa"));
            speed(1000.0, 2.2e9, Some(wall), 1.0)
        }
        "SUR-PE-US-11.3" => {
            let wall = (row.input("DR") - 2.0, row.input("E_psi") * PSI);
            let a = speed(BOOK_WATER, row.input("K_psi") * PSI, Some(wall), 1.0);
            pa(rise(BOOK_WATER, a, FOOT)).get::<psi>()
        }
        other => panic!("{other} is not used"),
    }
}

fn period(length: f64, wave_speed: f64) -> f64 {
    pipe_period(PipeLength::from_m(length), m_s(wave_speed))
        .unwrap()
        .get::<second>()
}

#[test]
fn every_row() {
    for row in records("surge_facts.csv") {
        let found = if row.id().starts_with("WSP-") {
            let wall = (row.input("Di_over_t"), row.input("E_Pa"));
            speed(
                row.input("rho"),
                row.input("K_Pa"),
                Some(wall),
                thin_factor(&row),
            )
        } else {
            textbook(&row)
        };
        row.check(found);
    }
}

#[test]
fn linear_closure_against_the_chain_solved_elsewhere() {
    for row in records("allievi_linear_closure.csv") {
        let closure = allievi_linear_closure(row.number("rho"), row.number("theta")).unwrap();
        let highest = row.number("highest");
        assert!(
            off(closure.highest, highest) < 1e-9,
            "{}: {closure:?} {highest}",
            row.id()
        );
        let whole = row.number("highest_at_whole_phases");
        assert!(
            off(closure.highest_at_whole_phases, whole) < 1e-12,
            "{}",
            row.id()
        );
    }
}
