//! The grid: a group of figures for each kernel, as text of their bits.

use hydraulics::constants::{standard_atmosphere, standard_gravity};
use hydraulics::fittings::LossCoefficient;
use hydraulics::friction::{FrictionLaw, colebrook_factor, colebrook_factors, factor_si};
use hydraulics::line::{Line, LineSpec, LocalLoss, NozzleTemplate, Point, Run};
use hydraulics::math;
use hydraulics::quantity::{
    Length, Level, PipeLength, ThermodynamicTemperature, Time, Velocity, VolumeRate, unit,
};
use hydraulics::transient::{
    Characteristic, ClosingLaw, Event, Foot, FrictionModel, Grid, GridSpec, Model, RunOptions,
    Scratch, SurgeLine, SurgeSpec,
};
use hydraulics::water::Water;
use std::error::Error;

/// The name of a group, and its figures.
pub(crate) type Group = (&'static str, Vec<String>);

/// Computes every group.
///
/// # Errors
/// When a kernel refuses what the grid gives it, which none of them should.
pub(crate) fn groups() -> Result<Vec<Group>, Box<dyn Error>> {
    Ok(vec![
        ("math, one argument", one_argument()),
        ("math, two arguments", two_arguments()),
        ("Colebrook-White", colebrook()),
        ("water", water()?),
        ("steady line", steady_line()?),
        ("transient", transient()?),
        ("demo book", demo_book()),
    ])
}

/// The bits of a number, and the number for a reader.
fn bits(value: f64) -> String {
    format!("{:016x} {value:e}", value.to_bits())
}

/// Numbers from `from` to `to`, both above zero, evenly on a logarithmic scale.
fn spread(from: f64, to: f64, count: u32) -> impl Iterator<Item = f64> {
    let range = math::ln(to) - math::ln(from);
    (0..count).map(move |index| from * math::exp(range * f64::from(index) / f64::from(count - 1)))
}

fn one_argument() -> Vec<String> {
    let positive: [fn(f64) -> f64; 5] = [
        math::ln,
        math::log10,
        math::log2,
        math::ln_positive_normal,
        math::cbrt,
    ];
    let any: [fn(f64) -> f64; 7] = [
        math::exp,
        math::exp_m1,
        math::exp10,
        math::sinh,
        math::cosh,
        math::tanh,
        math::atan,
    ];
    let angle: [fn(f64) -> f64; 3] = [math::sin, math::cos, math::tan];
    let share: [fn(f64) -> f64; 3] = [math::asin, math::acos, math::ln_1p];
    let mut lines = Vec::new();
    for x in spread(1e-150, 1e150, 500) {
        lines.extend(positive.map(|function| bits(function(x))));
    }
    for x in spread(1e-12, 300.0, 300) {
        lines.extend(any.map(|function| bits(function(x))));
        lines.extend(any.map(|function| bits(function(-x))));
    }
    for x in spread(1e-9, 1e6, 500) {
        lines.extend(angle.map(|function| bits(function(x))));
    }
    for x in spread(1e-9, 0.999_999, 300) {
        lines.extend(share.map(|function| bits(function(x))));
        lines.extend(share.map(|function| bits(function(-x))));
    }
    lines
}

fn two_arguments() -> Vec<String> {
    let mut lines = Vec::new();
    for x in spread(1e-6, 1e6, 30) {
        for y in spread(1e-3, 12.0, 30) {
            let (sine, cosine) = math::sin_cos(x * y);
            lines.extend([
                bits(math::pow(x, y)),
                bits(math::pow(x, -y)),
                bits(math::atan2(x, -y)),
                bits(math::hypot(x, y)),
                bits(sine),
                bits(cosine),
            ]);
        }
        lines.extend((-9..=9).map(|power| bits(math::powi(x, power))));
    }
    lines
}

fn colebrook() -> Vec<String> {
    let mut lines = Vec::new();
    for roughness in std::iter::once(0.0).chain(spread(1e-9, 0.1, 60)) {
        let reynolds: Vec<f64> = spread(2300.0, 1e9, 120).collect();
        let roughnesses = vec![roughness; reynolds.len()];
        let mut factors = vec![0.0; reynolds.len()];
        // In one go, which may be vectorised, and one by one.
        colebrook_factors(&reynolds, &roughnesses, &mut factors);
        lines.extend(factors.iter().map(|&factor| bits(factor)));
        lines.extend(
            reynolds
                .iter()
                .map(|&re| bits(colebrook_factor(re, roughness))),
        );
        // Laminar, the bridge between, and turbulent.
        lines.extend(spread(1.0, 1e8, 80).map(|re| bits(factor_si(re, roughness))));
    }
    lines
}

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<unit::thermodynamic_temperature::degree_celsius>(value)
}

fn water() -> Result<Vec<String>, Box<dyn Error>> {
    let mut lines = Vec::new();
    for quarter in 0..=240_u32 {
        let water = Water::at(celsius(f64::from(quarter) / 4.0))?;
        lines.extend([
            bits(water.density().value),
            bits(water.dynamic_viscosity().value),
            bits(water.kinematic_viscosity().value),
            bits(water.vapour_pressure().pa()),
            bits(water.sound_speed().value),
            bits(water.bulk_modulus().value),
        ]);
    }
    Ok(lines)
}

/// A line of two pipes with a hump, and its jets: every figure of the solved
/// line, in the form that Rust prints, which tells any two numbers apart.
fn steady_line() -> Result<Vec<String>, Box<dyn Error>> {
    let metres = Length::new::<unit::length::meter>;
    let at = PipeLength::from_m;
    let point = |chainage: f64, level: f64| Point {
        chainage: at(chainage),
        level: Level::from_m(level),
    };
    let mut lines = Vec::new();
    for bore in spread(0.06, 0.6, 8) {
        for roughness in [0.0, 1.5e-6, 1e-4] {
            let friction = FrictionLaw::ColebrookWhite {
                roughness: metres(roughness),
            };
            let run = |to: f64, bore: f64| Run {
                to: at(to),
                bore: metres(bore),
                friction,
            };
            let line = Line::new(LineSpec {
                forebay: Level::from_m(181.5),
                points: vec![
                    point(0.0, 180.0),
                    point(60.0, 171.0),
                    point(95.0, 174.0),
                    point(240.0, 120.0),
                    point(410.0, 96.5),
                ],
                runs: vec![run(180.0, bore * 1.2), run(410.0, bore)],
                losses: vec![LocalLoss {
                    at: at(95.0),
                    k: LossCoefficient::new(0.35)?,
                    bore: metres(bore * 1.2),
                }],
                water: Water::at(celsius(8.0))?,
                gravity: standard_gravity(),
            })?;
            let template = NozzleTemplate {
                count: 2,
                velocity_coefficient: 0.97,
                contraction_coefficient: 0.9,
                axis: Level::from_m(96.0),
                branch_k: 0.4,
                branch_bore: metres(bore * 0.8),
            };
            for share in [0.05, 0.3] {
                let set = template.set(metres(bore * share))?;
                let solved = line.flow_for(&set)?;
                lines.push(format!("{solved:?}"));
                let half = VolumeRate::new::<unit::volume_rate::cubic_meter_per_second>(
                    solved.grade.flow.value / 2.0,
                );
                lines.push(format!("{:?}", line.bore_for(half, &template)?));
            }
        }
    }
    Ok(lines)
}

/// One closing of a line of two pipes with traces and pictures, and one that
/// parts the column, in the form that Rust prints.
fn transient() -> Result<Vec<String>, Box<dyn Error>> {
    let metres = Length::new::<unit::length::meter>;
    let at = PipeLength::from_m;
    let seconds = Time::new::<unit::time::second>;
    let friction = FrictionLaw::ColebrookWhite {
        roughness: metres(1e-5),
    };
    let run = |to: f64, bore: f64| Run {
        to: at(to),
        bore: metres(bore),
        friction,
    };
    let speed = Velocity::new::<unit::velocity::meter_per_second>;
    let line = SurgeLine::new(SurgeSpec {
        line: Line::new(LineSpec {
            forebay: Level::from_m(181.5),
            points: vec![
                Point {
                    chainage: at(0.0),
                    level: Level::from_m(178.0),
                },
                Point {
                    chainage: at(410.0),
                    level: Level::from_m(96.5),
                },
            ],
            runs: vec![run(180.0, 0.2), run(410.0, 0.16)],
            losses: vec![],
            water: Water::at(celsius(8.0))?,
            gravity: standard_gravity(),
        })?,
        wave_speeds: vec![speed(350.0), speed(480.0)],
        foot: Foot {
            nozzles: NozzleTemplate {
                count: 2,
                velocity_coefficient: 0.97,
                contraction_coefficient: 0.9,
                axis: Level::from_m(96.0),
                branch_k: 0.4,
                branch_bore: metres(0.1),
            }
            .set(metres(0.03))?,
            characteristic: Characteristic::Linear,
        },
        atmosphere: standard_atmosphere(),
    })?;
    let grid = Grid::new(&line, GridSpec::default())?;
    let mut lines = Vec::new();
    for (unsteady, time) in [(false, 12.0), (true, 12.0), (false, 0.5)] {
        let model_of = FrictionModel {
            unsteady,
            ..FrictionModel::default()
        };
        let model = Model::new(&line, &grid, &[1.0, 0.6], model_of)?;
        let event = Event::close(model.strokes(), &ClosingLaw::linear(seconds(time))?)?;
        let options = RunOptions {
            probes: vec![at(180.0)],
            pictures: 20,
            ..RunOptions::default()
        };
        let run = model.run(&event, &options, &mut Scratch::new())?;
        lines.push(format!("{run:?}"));
    }
    Ok(lines)
}

/// Everything found in the demo book, and the sweep over the catalogue for it,
/// in the form that Rust prints.
fn demo_book() -> Vec<String> {
    let book = workbook::demo::demo("demo");
    let mut sweep = workbook::sweep::Sweep::new(&book);
    let rows = sweep.advance(sweep.total());
    let found = workbook::evaluate(&book);
    // The second pass, with surge, over a part of the rows.
    let mut second = workbook::sweep::SurgeSweep::new(sweep, &rows, &found);
    let solved = second.advance(40);
    format!("{found:#?}")
        .lines()
        .map(str::to_owned)
        .chain(rows.iter().map(|row| format!("{row:?}")))
        .chain(solved.iter().map(|row| format!("{row:?}")))
        .collect()
}
