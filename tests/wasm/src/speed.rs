//! The same work timed natively and in the browser: `cargo task bench` runs
//! both in turns and prints their ratios.
//!
//! Seconds are only ever compared with seconds of the same command, and the
//! least of several is taken: whatever else the machine does only adds.

use hydraulics::friction::colebrook_factors;
use std::hint::black_box;
use workbook::demo::demo;
use workbook::evaluate;
use workbook::sweep::Sweep;

/// Numbers in an array of the friction loop.
const ARRAY: usize = 8192;
/// Time given to each measurement, as a batch that a clock of 0.1 ms can tell.
const BATCH_SECONDS: f64 = 0.02;
/// Batches of each measurement, taken in turns with the others.
const ROUNDS: usize = 15;

/// A thing timed: its name, and the least seconds that one run took.
pub type Timed = (&'static str, f64);

/// Colebrook-White over an array.
pub const COLEBROOK: &str = "colebrook";
/// Two logarithms of the platform in the same loop.
pub const TWO_LN: &str = "two-ln";
/// Everything found in the demo book.
pub const EVALUATION: &str = "evaluation";
/// The catalogue swept for the demo book.
pub const SWEEP: &str = "sweep";

/// Times everything by a clock that tells seconds from any start.
pub fn times(clock: impl Fn() -> f64) -> Vec<Timed> {
    let reynolds: Vec<f64> = (0..ARRAY).map(|index| 4e3 + 1.1e5 * index as f64).collect();
    let roughness: Vec<f64> = (0..ARRAY).map(|index| 1e-6 + 5e-6 * index as f64).collect();
    let (mut factors, mut logs) = (vec![0.0; ARRAY], vec![0.0; ARRAY]);
    let book = demo("bench");
    let mut colebrook = || {
        colebrook_factors(black_box(&reynolds), black_box(&roughness), &mut factors);
        black_box(&factors);
    };
    let mut two_ln = || {
        let pairs = black_box(&reynolds).iter().zip(black_box(&roughness));
        for (log, (re, rough)) in logs.iter_mut().zip(pairs) {
            *log = re.ln() + rough.ln();
        }
        black_box(&logs);
    };
    let mut evaluation = || {
        black_box(evaluate(black_box(&book)));
    };
    let mut sweep = || {
        let mut sweep = Sweep::new(black_box(&book));
        black_box(sweep.advance(usize::MAX / 2));
    };
    least(
        clock,
        [
            (COLEBROOK, &mut colebrook),
            (TWO_LN, &mut two_ln),
            (EVALUATION, &mut evaluation),
            (SWEEP, &mut sweep),
        ],
    )
}

fn least<const N: usize>(
    clock: impl Fn() -> f64,
    mut works: [(&'static str, &mut dyn FnMut()); N],
) -> Vec<Timed> {
    let time = |work: &mut dyn FnMut(), runs: u32| {
        let begun = clock();
        for _ in 0..runs {
            work();
        }
        clock() - begun
    };
    // How many runs make a batch; the first ones also warm everything up.
    let batches = works.each_mut().map(|(_, work)| {
        let mut runs = 1;
        while time(*work, runs) < BATCH_SECONDS {
            runs *= 2;
        }
        runs
    });
    let mut best = works.each_ref().map(|(name, _)| (*name, f64::INFINITY));
    for _ in 0..ROUNDS {
        for (((_, work), &runs), (_, best)) in works.iter_mut().zip(&batches).zip(&mut best) {
            *best = best.min(time(*work, runs) / f64::from(runs));
        }
    }
    best.to_vec()
}

/// The line that a harness prints for `cargo task bench` to read.
#[must_use]
pub fn line((name, seconds): &Timed) -> String {
    format!("timed {name} {seconds:e}")
}
