//! One of each thing that can be wrong or missing.

use hydraulics::fittings::FittingError;
use hydraulics::intake::IntakeError;
use hydraulics::line::{LineError, Point};
use hydraulics::nozzle::NozzleError;
use hydraulics::quantity::{Head, Level, PipeLength};
use hydraulics::surge::{SurgeError, WaveError};
use hydraulics::transient::TransientError;
use hydraulics::water::WaterError;
use pipes::{Material, OwnPipeError, RatingError};
use statics::{Input, WallError};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::angle::degree;
use uom::si::f64::{
    Acceleration, Angle, Length, MassConcentration, MassDensity, ThermodynamicTemperature, Time,
    Velocity, VolumeRate,
};
use uom::si::length::meter;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;
use uom::si::volume_rate::cubic_meter_per_second;
use workbook::entry::EntryTrouble;
use workbook::field::Field;
use workbook::figure::{Lack, Trouble};
use workbook::pipe_copy::PipeCopyError;
use workbook::reading::Unreadable;

pub(super) fn m(x: f64) -> Length {
    Length::new::<meter>(x)
}

pub(super) fn celsius(x: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(x)
}

pub(super) fn flow(x: f64) -> VolumeRate {
    VolumeRate::new::<cubic_meter_per_second>(x)
}

pub(super) fn at(x: f64) -> PipeLength {
    PipeLength::from_m(x)
}

pub(super) fn fitting_errors() -> Vec<FittingError> {
    vec![
        FittingError::Coefficient(-1.0),
        FittingError::Coefficient(-0.5),
        FittingError::Bore(m(0.0)),
        FittingError::NotNarrower {
            wide: m(0.1),
            narrow: m(0.2),
        },
        FittingError::Angle {
            angle: Angle::new::<degree>(200.0),
            low: 0.0,
            high: 180.0,
        },
        FittingError::Ratio {
            ratio: 0.1,
            low: 0.5,
            high: 10.0,
        },
    ]
}

pub(super) fn nozzle_errors() -> Vec<NozzleError> {
    vec![
        NozzleError::Bore(m(0.0)),
        NozzleError::VelocityCoefficient(1.2),
        NozzleError::ContractionCoefficient(0.0),
        NozzleError::NeedleAngle(Angle::new::<degree>(100.0)),
        NozzleError::Stroke(m(-1.0)),
        NozzleError::NetHead(Head::from_m(-1.0)),
        NozzleError::Flow(flow(-1.0)),
    ]
}

pub(super) fn wall_errors() -> Vec<WallError> {
    let mut all = vec![
        WallError::NoBore {
            wall: 0.1,
            half_diameter: 0.09,
        },
        WallError::NothingLeft {
            nominal: 0.003,
            taken_off: 0.0031,
        },
    ];
    for input in [
        Input::Diameter,
        Input::Wall,
        Input::Pressure,
        Input::Stress,
        Input::Modulus,
        Input::Poisson,
        Input::Ovality,
        Input::SafetyFactor,
        Input::JointFactor,
        Input::MillTolerance,
        Input::Corrosion,
        Input::ThreadDepth,
        Input::YieldStrength,
        Input::TensileStrength,
        Input::DesignFactor,
    ] {
        all.push(WallError::NotFinite { input });
        all.push(WallError::OutOfRange {
            input,
            value: 2.5,
            least: 0.1,
            greatest: 1.0,
        });
    }
    all
}

pub(super) fn line_errors() -> Vec<LineError> {
    let point = Point {
        chainage: at(1.0),
        level: Level::from_m(2.0),
    };
    let mut all = vec![
        LineError::TooFewPoints { count: 1 },
        LineError::NoRun,
        LineError::Forebay(Level::from_m(0.0)),
        LineError::Gravity(Acceleration::new::<meter_per_second_squared>(0.0)),
        LineError::PointNotFinite {
            point: 1,
            value: point,
        },
        LineError::ChainageNotRising {
            point: 1,
            before: at(2.0),
            chainage: at(1.0),
        },
        LineError::SteeperThanVertical {
            point: 1,
            rise: Head::from_m(3.0),
            length: at(1.0),
        },
        LineError::RunNotRising {
            run: 1,
            from: at(2.0),
            to: at(1.0),
        },
        LineError::RunsEndElsewhere {
            runs: at(2.0),
            points: at(1.0),
        },
        LineError::LossOutside {
            loss: 0,
            at: at(1.0),
        },
        LineError::LossBore {
            loss: 0,
            bore: m(0.0),
        },
        LineError::Flow(flow(-1.0)),
        LineError::NoNozzle,
        LineError::NozzleWiderThanBranch {
            nozzle: 0,
            bore: m(0.1),
            branch: m(0.05),
        },
        LineError::Branch {
            k: -1.0,
            bore: m(0.0),
        },
        LineError::NoHead {
            forebay: Level::from_m(1.0),
            axis: Level::from_m(2.0),
        },
        LineError::FlowTooGreat {
            flow: flow(0.2),
            greatest: flow(0.1),
        },
    ];
    all.extend(
        fitting_errors()
            .into_iter()
            .map(|error| LineError::Reducer { run: 0, error }),
    );
    all.extend(nozzle_errors().into_iter().map(LineError::Nozzle));
    all
}

pub(super) fn own_errors() -> Vec<OwnPipeError> {
    let mut all = vec![
        OwnPipeError::Blank {
            field: "designation",
        },
        OwnPipeError::Blank { field: "source" },
        OwnPipeError::Blank {
            field: "rating symbol",
        },
        OwnPipeError::WallsCrossed {
            least: 0.01,
            greatest: 0.005,
        },
        OwnPipeError::NoBore {
            wall_and_lining: 0.1,
            half_diameter: 0.09,
        },
        OwnPipeError::StressNeedsSteel {
            material: Material::Grp,
        },
        OwnPipeError::StressNeedsNominalWall,
        OwnPipeError::ModuliCrossed {
            short: 1e8,
            long: 1e9,
        },
        OwnPipeError::DeratingDisordered { index: 1 },
        OwnPipeError::DeratingEmpty,
    ];
    all.extend(wall_errors().into_iter().map(OwnPipeError::Wall));
    for field in [
        "outside_diameter",
        "wall_min",
        "poisson",
        "supply",
        "anything",
    ] {
        all.push(OwnPipeError::NotFinite { field });
        all.push(OwnPipeError::NotPositive { field, value: 0.0 });
        all.push(OwnPipeError::Missing { field });
        all.push(OwnPipeError::OutOfRange {
            field,
            value: 2.0,
            least: 0.0,
            greatest: 0.5,
        });
    }
    all
}

pub(super) fn entry_troubles() -> Vec<EntryTrouble> {
    let mut all: Vec<EntryTrouble> = [
        Unreadable::NotANumber,
        Unreadable::UnknownUnit {
            unit: "furlong".to_owned(),
        },
        Unreadable::Marks,
        Unreadable::OutOfRange,
        Unreadable::Negative,
        Unreadable::PlusMinus,
    ]
    .into_iter()
    .map(EntryTrouble::Unreadable)
    .collect();
    all.extend([
        EntryTrouble::Unit {
            unit: "furlong".to_owned(),
        },
        EntryTrouble::Disagrees {
            text: 1.0,
            kept: 2.0,
        },
        EntryTrouble::OutOfRange {
            value: 9.0,
            least: 0.5,
            most: 4.0,
        },
        EntryTrouble::NotWhole { value: 2.5 },
    ]);
    all
}

pub(super) fn troubles() -> Vec<Trouble> {
    let velocity = Velocity::new::<meter_per_second>(-1.0);
    let (stretch, fitting, station) = (1, 91, 2);
    let mut all = vec![
        Trouble::StationBehind {
            station,
            back_m: 2.0,
        },
        Trouble::StationTooSteep {
            station,
            distance_m: 2.0,
            fall_m: -3.0,
        },
        Trouble::StationRepeated { station },
        Trouble::StationUpright { station },
        Trouble::NothingToSpread,
        Trouble::Intake(IntakeError::Velocity(velocity)),
        Trouble::Intake(IntakeError::Height(m(0.0))),
        Trouble::TooManyStations { count: 2001 },
        Trouble::StretchStart { stretch },
        Trouble::FittingStation { fitting },
        Trouble::FittingStation { fitting: 999 },
        Trouble::PipeUnknown {
            stretch,
            pipe: "nothing".to_owned(),
        },
        Trouble::NoHead {
            forebay: Level::from_m(1.0),
            jets: Level::from_m(2.0),
        },
        Trouble::ForebayOrder {
            field: Field::ForebayLowest,
        },
        Trouble::TemperatureOrder {
            field: Field::WarmestWater,
        },
        Trouble::Water(WaterError::Temperature(celsius(70.0))),
        Trouble::Water(WaterError::Solids(MassConcentration::default())),
        Trouble::Water(WaterError::GrainDensity(MassDensity::default())),
        Trouble::Rating {
            stretch,
            why: RatingError::TooHot {
                wall: celsius(50.0),
                highest: celsius(40.0),
            },
        },
        Trouble::Rating {
            stretch,
            why: RatingError::Temperature { kelvin: -1.0 },
        },
        Trouble::Rating {
            stretch,
            why: RatingError::NoDerating,
        },
        Trouble::Wave {
            stretch,
            why: WaveError::Poisson(0.7),
        },
    ];
    all.extend(
        entry_troubles()
            .into_iter()
            .map(|t| Trouble::Entry(Field::DesignFlow, t)),
    );
    all.extend(
        fitting_errors()
            .into_iter()
            .map(|why| Trouble::Fitting { fitting, why }),
    );
    all.extend(
        fitting_errors()
            .into_iter()
            .map(|why| Trouble::Bend { station, why }),
    );
    all.extend(nozzle_errors().into_iter().map(Trouble::Nozzle));
    all.extend(line_errors().into_iter().map(Trouble::Line));
    all.extend(
        wall_errors()
            .into_iter()
            .map(|why| Trouble::Wall { stretch, why }),
    );
    all.extend(wall_errors().into_iter().map(|why| Trouble::Rating {
        stretch,
        why: RatingError::Wall(why),
    }));
    all.extend(
        own_errors()
            .into_iter()
            .map(|why| Trouble::OwnPipe { id: 1, why }),
    );
    all.extend(
        [
            SurgeError::WaveSpeed(velocity),
            SurgeError::Velocity(velocity),
            SurgeError::PipeLength(at(0.0)),
            SurgeError::Time(Time::new::<second>(-1.0)),
            SurgeError::Gravity(Acceleration::default()),
            SurgeError::Head(Head::from_m(0.0)),
        ]
        .map(|why| Trouble::Surge { stretch, why }),
    );
    all.push(Trouble::ValveRow { row: 2 });
    all.extend(
        [
            TransientError::Line(LineError::NoRun),
            TransientError::StartsBelowVapour {
                chainage: at(24.5),
                grade: Level::from_m(101.0),
            },
            TransientError::GridTooFine {
                cells: 20_000,
                alteration: 0.02,
            },
            TransientError::GridTooCoarse { run: 1 },
            TransientError::TooLong { steps: 1e9 },
            TransientError::NotFinite {
                time: Time::new::<second>(1.0),
                chainage: at(24.5),
            },
            TransientError::WaveSpeed {
                run: 1,
                wave_speed: velocity,
            },
            TransientError::StartsDiffer,
        ]
        .map(Trouble::Transient),
    );
    all.extend(
        [
            PipeCopyError::Material("cheese".to_owned()),
            PipeCopyError::Value {
                field: "wall_min_m",
                value: -1.0,
            },
            PipeCopyError::NoBore,
            PipeCopyError::Derating,
        ]
        .map(|why| Trouble::PipeCopy {
            pipe: "nothing".to_owned(),
            why,
        }),
    );
    all
}

pub(super) fn lacks() -> Vec<Lack> {
    vec![
        Lack::Entry(Field::DesignFlow),
        Lack::Entry(Field::StationLevel(1)),
        Lack::Pipe(1),
        Lack::Surge,
        Lack::Machine,
        Lack::ValveTable,
        Lack::NotConverged { moved: 0.012 },
        Lack::NotBalanced { left: 0.002 },
        Lack::ColumnParts { at: at(151.0) },
        Lack::Rating(91),
        Lack::Rating(999),
        Lack::Source(2),
    ]
}
