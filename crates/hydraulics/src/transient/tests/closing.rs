//! The shortest safe closing time.

use super::bench_line::{m, s};
use super::{Bench, Pipe};
use crate::nozzle::Needle;
use crate::quantity::Angle;
use crate::transient::{
    Characteristic, ClosingAnswer, ClosingLaw, ClosingSearch, Event, LawFamily, Run, RunOptions,
    Scratch, SearchSpec, StartCase, TwoSpeedSpec, two_speed,
};
use uom::si::angle::degree;
use uom::si::time::second;

fn needled() -> Bench {
    let pipe = Pipe {
        length: 600.0,
        bore: 0.25,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let needle = Needle::new(m(0.07), Angle::new::<degree>(25.0)).unwrap();
    Bench {
        characteristic: Characteristic::Needle {
            needle,
            travel: needle.full_stroke(),
        },
        ..Bench::uniform(200.0, pipe, 0.07)
    }
}

fn within(limit: f64) -> impl FnMut(&Run, &StartCase) -> bool {
    move |run, _| run.highest().m() <= limit
}

fn search(bench: &Bench, spec: &SearchSpec, limit: f64) -> (ClosingSearch, ClosingAnswer) {
    let line = bench.line();
    let grid = bench.grid(40);
    let search = ClosingSearch::new(&line, &grid, spec).unwrap();
    let answer = search
        .clone()
        .finish(&mut Scratch::new(), within(limit))
        .unwrap();
    (search, answer)
}

/// Whether a time holds from every start of a search.
fn holds(search: &ClosingSearch, family: &LawFamily, time: f64, limit: f64) -> bool {
    let law = family.law(s(time)).unwrap();
    search.models().iter().all(|model| {
        let event = Event::close(model.strokes(), &law).unwrap();
        let run = model
            .run(&event, &RunOptions::lean(), &mut Scratch::new())
            .unwrap();
        run.separation.is_none() && run.highest().m() <= limit
    })
}

/// It and ten longer times hold; 2 % less fails; and it is a part opening that
/// decides, because the needle bares its area fastest near shut.
#[test]
fn a_needle_closing_from_part_decides() {
    let bench = needled();
    let spec = SearchSpec::new(vec![vec![1.0]], s(40.0));
    let limit = 240.0;
    let (search, answer) = search(&bench, &spec, limit);
    let ClosingAnswer::Shortest {
        time,
        fails_at,
        decides,
    } = answer
    else {
        panic!("{answer:?}");
    };
    let time = time.get::<second>();
    assert!(time > 1.0 && time < 40.0);
    assert!(fails_at.get::<second>() < time && fails_at.get::<second>() > 0.99 * time);
    for more in 0..=10_u32 {
        let longer = time + (40.0 - time) * f64::from(more) / 10.0;
        assert!(
            holds(&search, &LawFamily::OneSpeed, longer, limit),
            "{longer}"
        );
    }
    assert!(!holds(&search, &LawFamily::OneSpeed, 0.98 * time, limit));
    assert!(decides.opening < 1.0, "{decides:?}");

    // At that rate the full closing is the milder one.
    let law = ClosingLaw::linear(fails_at).unwrap();
    let peak = |opening: f64| {
        let event = Event::close(&[opening], &law).unwrap();
        bench.run(40, &event, &RunOptions::lean()).highest().m()
    };
    assert!(peak(decides.opening) > limit);
    assert!(
        peak(1.0) < peak(decides.opening),
        "{} {}",
        peak(1.0),
        peak(decides.opening)
    );
}

#[test]
fn none_and_any_are_answers() {
    let bench = needled();
    let spec = SearchSpec::new(vec![vec![1.0]], s(10.0));
    let (_, answer) = search(&bench, &spec, 200.5);
    assert!(matches!(answer, ClosingAnswer::None { .. }), "{answer:?}");
    let slow = Pipe {
        length: 600.0,
        bore: 0.5,
        wave_speed: 300.0,
        roughness: 5e-5,
    };
    let mild = Bench::uniform(200.0, slow, 0.03);
    let (_, answer) = search(&mild, &spec, 1000.0);
    assert_eq!(answer, ClosingAnswer::Any);
}

#[test]
fn a_search_goes_on_where_it_stopped() {
    let bench = needled();
    let spec = SearchSpec::new(vec![vec![1.0]], s(20.0));
    let (mut piecemeal, whole) = search(&bench, &spec, 240.0);
    let mut scratch = Scratch::new();
    let mut before = 0.0;
    while piecemeal
        .advance(7, &mut scratch, within(240.0))
        .unwrap()
        .is_none()
    {
        assert!(piecemeal.progress() >= before);
        before = piecemeal.progress();
    }
    assert_eq!(piecemeal.answer(), Some(&whole));
    assert!(piecemeal.runs() > 10);
}

#[test]
fn fewer_than_ten_openings_or_longer_steps_are_refused() {
    let bench = needled();
    let (line, grid) = (bench.line(), bench.grid(20));
    let sound = SearchSpec::new(vec![vec![1.0]], s(10.0));
    let refused = |spec: SearchSpec| ClosingSearch::new(&line, &grid, &spec).is_err();
    assert!(!refused(sound.clone()));
    assert!(refused(SearchSpec {
        openings: 9,
        ..sound.clone()
    }));
    // L/(2a) is 0.3 s.
    assert!(refused(SearchSpec {
        step: Some(s(0.31)),
        ..sound.clone()
    }));
    assert!(refused(SearchSpec {
        sets: vec![],
        ..sound.clone()
    }));
    assert!(refused(SearchSpec {
        sets: vec![vec![1.0, 1.0]],
        ..sound.clone()
    }));
    assert!(refused(SearchSpec {
        tolerance: 0.0,
        ..sound
    }));
}

#[test]
fn two_speeds_close_sooner_where_the_last_part_decides() {
    let bench = needled();
    let (line, grid) = (bench.line(), bench.grid(40));
    let spec = SearchSpec::new(vec![vec![1.0]], s(40.0));
    let limit = 240.0;
    let (_, answer) = search(&bench, &spec, limit);
    let ClosingAnswer::Shortest { time, .. } = answer else {
        panic!("{answer:?}");
    };
    let among = TwoSpeedSpec {
        knees: vec![0.35, 0.5],
        slow: vec![1.0, 1.2],
    };
    let found = two_speed(
        &line,
        &grid,
        &spec,
        time,
        &among,
        &mut Scratch::new(),
        within(limit),
    )
    .unwrap()
    .unwrap();
    assert!(found.time < time * 0.95, "{found:?} {time:?}");
    let wanted = found.fast * (1.0 - found.knee) + found.slow * found.knee;
    assert!((wanted - found.time).get::<second>().abs() < 1e-9);
}

/// The worst of every set: with two jets the search closes each set from ten
/// openings.
#[test]
fn every_set_closes_from_every_opening() {
    let pipe = Pipe {
        length: 600.0,
        bore: 0.25,
        wave_speed: 1000.0,
        roughness: 5e-5,
    };
    let bench = Bench {
        nozzles: vec![0.05, 0.05],
        ..Bench::uniform(200.0, pipe, 0.05)
    };
    let spec = SearchSpec::new(SearchSpec::equal_sets(2), s(40.0));
    let (search, answer) = search(&bench, &spec, 230.0);
    assert_eq!(search.cases().len(), 20);
    let last = search.cases().last().unwrap();
    assert!(last.set == 1 && (last.opening - 0.1).abs() < 1e-12);
    assert_eq!(search.cases()[0].strokes, vec![1.0, 0.0]);
    let ClosingAnswer::Shortest { time, .. } = answer else {
        panic!("{answer:?}");
    };
    // One jet alone could close sooner.
    let alone = SearchSpec::new(vec![vec![1.0, 0.0]], s(40.0));
    let (_, answer) = self::search(&bench, &alone, 230.0);
    match answer {
        ClosingAnswer::Shortest { time: sooner, .. } => assert!(sooner <= time),
        ClosingAnswer::Any => {}
        ClosingAnswer::None { .. } => panic!("one jet alone never holds"),
    }
}
