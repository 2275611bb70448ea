//! Surge in words.

use super::*;
use workbook::closing::{ClosingStudy, Decides, Found, Proposal, Shortest, TwoSpeeds};
use workbook::resolve::drive::Speeds;
use workbook::schedule::{ClosingOrder, schedule};
use workbook::transient::{EVENTS, Start};

fn secs(x: f64) -> Time {
    Time::new::<second>(x)
}

#[test]
fn every_start_and_closing_speaks() {
    let book = book();
    let found = evaluate(&demo("demo"));
    for event in EVENTS {
        for (open, opening) in [(1, 1.0), (2, 0.1)] {
            let start = Start {
                event,
                open,
                opening,
            };
            said(&book, "start", |w| w.words.start(start));
            said(&book, "event", |w| w.words.name(event).to_owned());
            for check in [CheckKind::SurgePressure, CheckKind::LowestPressure] {
                for stretch in [Some(1), None] {
                    let decides = Decides {
                        start,
                        stretch,
                        check,
                    };
                    said(&book, "decides", |w| w.decides(&decides));
                }
            }
        }
    }
    let two = Speeds::Two {
        fast: secs(6.0),
        slow: secs(20.0),
        knee: 0.25,
    };
    let decides = Decides {
        start: Start {
            event: EventKind::Closing,
            open: 2,
            opening: 0.3,
        },
        stretch: Some(1),
        check: CheckKind::SurgePressure,
    };
    let proposal = Proposal {
        speeds: two,
        reserve: 0.25,
        verdict: Verdict::Tight,
    };
    for shortest in [
        Shortest::Time {
            time: secs(4.2),
            fails_at: secs(4.19),
            decides,
        },
        Shortest::AtOnce,
        Shortest::None { decides },
    ] {
        let found = Found {
            shortest,
            slowest: secs(60.0),
            proposal: Some(proposal.clone()),
            runs: 9,
        };
        sentences(&book, "found", |w| w.closing_found(&found));
    }
    let gained = TwoSpeeds {
        time: secs(4.0),
        one_speed: secs(9.0),
        proposal,
    };
    sentences(&book, "two speeds", |w| w.two_speeds_found(&gained));
    for reserve_holds in [true, false] {
        let order = ClosingOrder {
            speeds: two,
            full_stroke: secs(9.5),
            reserve: 0.25,
            with_reserve: secs(7.6),
            reserve_holds,
        };
        sentences(&book, "order", |w| w.closing_order(&order));
    }
    let mut trust = found.transient.surge.clone().unwrap().trust;
    trust.stretches[0].cells = 0;
    trust.balance.energy = 1e-4;
    for trust in [trust, found.transient.surge.unwrap().trust] {
        for line in 0..6 {
            sentences(&book, "trust", |w| w.words.trust(&trust)[line].clone());
        }
    }
}

#[test]
fn the_demo_orders_its_closing_time() {
    let book = demo("demo");
    let found = evaluate(&book);
    let words = Words::new(Language::English, UnitSystem::Metric).about(&book);
    let order = schedule(&book, &found).closing.unwrap();
    let plain = |text: String| text.replace(['\u{202f}', '\u{a0}'], " ");
    let text = plain(words.closing_order(&order));
    assert!(
        text.starts_with("15.0 s from full stroke to shut."),
        "{text}"
    );
    assert!(text.contains("as fast as 12.0 s"), "{text}");
    let mut study = ClosingStudy::new(&found).unwrap();
    while study.advance(200).unwrap().is_none() {}
    let text = plain(words.closing_found(study.found().unwrap()));
    println!("{text}");
    assert!(
        text.contains("shut from") && text.contains("stretch 1"),
        "{text}"
    );
}
