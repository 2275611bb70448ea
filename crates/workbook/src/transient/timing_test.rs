#[test]
#[ignore]
fn timing() {
    use super::*;
    let mut book = crate::demo::demo("d");
    book.surge.closing_time_s = crate::Entry::typed(
        "20",
        "s",
        crate::units::Kind::Time,
        crate::reading::DecimalMark::Point,
    );
    book.surge.jets_kept_clear = true;
    let found = crate::resolve::resolve(&book);
    let steady = crate::steady::steady(&found);
    let setup = Setup::new(&found, &steady).unwrap();
    let moves = Moves::new(&found).unwrap();
    let t = |name: &str, f: &mut dyn FnMut()| {
        f();
        let t0 = std::time::Instant::now();
        for _ in 0..20 {
            f();
        }
        println!("{name} {:.3} ms", t0.elapsed().as_secs_f64() * 50.0);
    };
    t("setup", &mut || {
        std::hint::black_box(Setup::new(&found, &steady).unwrap());
    });
    let longest = moves.longest();
    t("coarse grid", &mut || {
        std::hint::black_box(
            hydraulics::transient::Grid::new(&setup.line, setup.coarse(longest)).unwrap(),
        );
    });
    t("fine grid", &mut || {
        std::hint::black_box(
            hydraulics::transient::Grid::new(&setup.line, setup.fine(longest)).unwrap(),
        );
    });
    let mut s = Solver::new(&setup, &moves);
    let coarse = hydraulics::transient::Grid::new(&setup.line, setup.coarse(longest)).unwrap();
    let fine = hydraulics::transient::Grid::new(&setup.line, setup.fine(longest)).unwrap();

    for start in [
        Start {
            event: EventKind::Closing,
            open: 2,
            opening: 1.0,
        },
        Start {
            event: EventKind::Closing,
            open: 2,
            opening: 0.1,
        },
        Start {
            event: EventKind::Blocked,
            open: 2,
            opening: 1.0,
        },
        Start {
            event: EventKind::Opening,
            open: 2,
            opening: 1.0,
        },
    ] {
        for (n, g) in [("coarse", &coarse), ("fine", &fine)] {
            t(&format!("{n} {start:?}"), &mut || {
                std::hint::black_box(
                    s.run(
                        g,
                        start,
                        &hydraulics::transient::RunOptions {
                            cavity: None,
                            ..hydraulics::transient::RunOptions::lean()
                        },
                    )
                    .unwrap(),
                );
            });
        }
    }
    let o = hydraulics::transient::RunOptions {
        duration: hydraulics::transient::Duration::PeriodsAfter(4.0),
        ..hydraulics::transient::RunOptions::lean()
    };
    t("gas", &mut || {
        std::hint::black_box(
            s.run(
                &coarse,
                Start {
                    event: EventKind::Blocked,
                    open: 2,
                    opening: 1.0,
                },
                &o,
            )
            .unwrap(),
        );
    });
    t("shown", &mut || {
        std::hint::black_box(
            s.run(
                &fine,
                Start {
                    event: EventKind::Closing,
                    open: 2,
                    opening: 0.1,
                },
                &hydraulics::transient::RunOptions::default(),
            )
            .unwrap(),
        );
    });
    t("solve", &mut || {
        std::hint::black_box(s.solve().unwrap());
    });
}
