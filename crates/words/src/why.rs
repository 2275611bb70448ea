//! Why the engineering gives no figure: clauses that follow a place.

use crate::Words;
use crate::name::{clause, sentence};
use crate::text::{self, Key};
use hydraulics::fittings::FittingError;
use hydraulics::line::LineError;
use hydraulics::nozzle::NozzleError;
use hydraulics::surge::SurgeError;
use hydraulics::transient::TransientError;
use hydraulics::water::WaterError;
use pipes::RatingError;
use statics::{Input, WallError};
use uom::si::angle::degree;
use uom::si::f64::{Angle, Length};
use workbook::measure::Measure;
use workbook::units::Kind;

fn degrees(angle: Angle) -> f64 {
    angle.get::<degree>()
}

impl Words {
    fn bore(self, length: Length) -> String {
        self.full_or_dash(Measure::bore(length))
    }

    fn angle(self, degrees: f64) -> String {
        self.full_or_dash(Measure::new(degrees, Kind::Angle))
    }

    /// A plain number that may be none: the value an error carries.
    pub(crate) fn any_number(self, x: f64) -> String {
        self.full_or_dash(Measure::number(x))
    }

    pub(crate) fn rating_error(self, why: &RatingError) -> String {
        match why {
            RatingError::TooHot { wall, highest } => {
                text::why_too_hot(self, &self.full(*wall), &self.full(*highest))
            }
            RatingError::Temperature { .. } => self.say(Key::WHY_TEMPERATURE).to_owned(),
            RatingError::NoDerating => self.say(Key::WHY_NO_DERATING).to_owned(),
            RatingError::Wall(why) => self.wall_error(why),
            _ => self.say(Key::WHY_OTHER).to_owned(),
        }
    }

    pub(crate) fn wall_error(self, why: &WallError) -> String {
        let bore = |m: f64| self.full_or_dash(Measure::new(m, Kind::Bore));
        match why {
            WallError::NotFinite { input } => {
                text::why_wall_not_finite(self, self.say(wall_input(*input).0))
            }
            WallError::OutOfRange {
                input,
                value,
                least,
                greatest,
            } => {
                let (name, kind) = wall_input(*input);
                let full = |x: f64| self.full_or_dash(Measure::new(x, kind));
                text::why_wall_out_of_range(
                    self,
                    self.say(name),
                    &full(*value),
                    &full(*least),
                    &full(*greatest),
                )
            }
            WallError::NoBore {
                wall,
                half_diameter,
            } => text::why_wall_no_bore(self, &bore(*wall), &bore(*half_diameter)),
            WallError::NothingLeft { nominal, taken_off } => {
                text::why_wall_nothing_left(self, &bore(*nominal), &bore(*taken_off))
            }
            _ => self.say(Key::WHY_OTHER).to_owned(),
        }
    }

    pub(crate) fn water_error(self, why: &WaterError) -> String {
        match why {
            WaterError::Temperature(value) => {
                text::why_water_temperature(self, &self.full_or_dash((*value).into()))
            }
            WaterError::Solids(_) => self.say(Key::WHY_WATER_SOLIDS).to_owned(),
            WaterError::GrainDensity(_) => self.say(Key::WHY_WATER_GRAINS).to_owned(),
            _ => sentence(self.say(Key::WHY_OTHER)),
        }
    }

    pub(crate) fn fitting_error(self, why: &FittingError) -> String {
        match why {
            FittingError::Coefficient(value) => {
                text::why_fitting_coefficient(self, &self.any_number(*value))
            }
            FittingError::Bore(_) => self.say(Key::WHY_FITTING_BORE).to_owned(),
            FittingError::NotNarrower { wide, narrow } => {
                text::why_fitting_not_narrower(self, &self.bore(*narrow), &self.bore(*wide))
            }
            FittingError::Angle { angle, low, high } => text::why_fitting_angle(
                self,
                &self.angle(degrees(*angle)),
                &self.angle(*low),
                &self.angle(*high),
            ),
            FittingError::Ratio { ratio, low, high } => text::why_fitting_ratio(
                self,
                &self.any_number(*ratio),
                &self.any_number(*low),
                &self.any_number(*high),
            ),
            _ => self.say(Key::WHY_OTHER).to_owned(),
        }
    }

    pub(crate) fn nozzle_error(self, why: &NozzleError) -> String {
        match why {
            NozzleError::Bore(_) => self.say(Key::WHY_NOZZLE_BORE).to_owned(),
            NozzleError::VelocityCoefficient(value) => {
                text::why_nozzle_cv(self, &self.any_number(*value))
            }
            NozzleError::ContractionCoefficient(value) => {
                text::why_nozzle_contraction(self, &self.any_number(*value))
            }
            NozzleError::NeedleAngle(_) | NozzleError::Stroke(_) => {
                self.say(Key::WHY_NOZZLE_NEEDLE).to_owned()
            }
            NozzleError::NetHead(_) => self.say(Key::WHY_NOZZLE_HEAD).to_owned(),
            NozzleError::Flow(_) => self.say(Key::WHY_NOZZLE_FLOW).to_owned(),
            _ => self.say(Key::WHY_OTHER).to_owned(),
        }
    }

    pub(crate) fn line_error(self, why: &LineError) -> String {
        let key = match why {
            LineError::TooFewPoints { .. } => Key::WHY_LINE_POINTS,
            LineError::NoRun => Key::WHY_LINE_NO_PIPE,
            LineError::Forebay(_) | LineError::NoHead { .. } => Key::WHY_LINE_NO_HEAD,
            LineError::PointNotFinite { .. }
            | LineError::ChainageNotRising { .. }
            | LineError::SteeperThanVertical { .. } => Key::WHY_LINE_STATIONS,
            LineError::RunNotRising { .. } | LineError::RunsEndElsewhere { .. } => {
                Key::WHY_LINE_STRETCHES
            }
            LineError::Run { .. } => Key::WHY_LINE_FRICTION,
            LineError::LossOutside { .. } | LineError::LossBore { .. } => Key::WHY_LINE_FITTING,
            LineError::Reducer { error, .. } => {
                return text::why_line_reducer(self, &self.fitting_error(error));
            }
            LineError::Flow(_) => Key::WHY_LINE_FLOW,
            LineError::NozzleWiderThanBranch { bore, branch, .. } => {
                return text::why_line_nozzle_wide(self, &self.bore(*bore), &self.bore(*branch));
            }
            LineError::NoNozzle | LineError::Branch { .. } => Key::WHY_LINE_JETS,
            LineError::Nozzle(why) => return self.nozzle_error(why),
            LineError::FlowTooGreat { flow, greatest } => {
                let (flow, greatest) = (self.figure(*flow), self.figure(*greatest));
                return clause(&text::trouble_too_much_flow(self, &flow, &greatest)) + ".";
            }
            _ => Key::WHY_OTHER,
        };
        self.say(key).to_owned()
    }

    pub(crate) fn transient_error(self, why: &TransientError) -> String {
        match why {
            TransientError::Line(why) => text::trouble_transient(self, &self.line_error(why)),
            TransientError::StartsBelowVapour { chainage, .. } => {
                text::trouble_transient_starts(self, &self.figure(*chainage))
            }
            TransientError::GridTooFine { .. } | TransientError::GridTooCoarse { .. } => {
                self.say(Key::TROUBLE_TRANSIENT_GRID).to_owned()
            }
            TransientError::TooLong { .. } => self.say(Key::TROUBLE_TRANSIENT_LONG).to_owned(),
            TransientError::NotFinite { chainage, .. } => {
                text::trouble_transient_run(self, &self.figure(*chainage))
            }
            TransientError::WaveSpeed { .. } => {
                text::trouble_transient(self, self.say(Key::WHY_WAVE_SPEED))
            }
            _ => text::trouble_transient(self, &sentence(self.say(Key::WHY_OTHER))),
        }
    }

    pub(crate) fn surge_error(self, why: &SurgeError) -> &'static str {
        self.say(match why {
            SurgeError::WaveSpeed(_) => Key::WHY_WAVE_SPEED,
            SurgeError::Velocity(_) => Key::WHY_VELOCITY,
            SurgeError::PipeLength(_) => Key::WHY_LENGTH,
            SurgeError::Time(_) => Key::WHY_TIME,
            SurgeError::Head(_) => Key::WHY_LINE_NO_HEAD,
            _ => Key::WHY_OTHER,
        })
    }
}

fn wall_input(input: Input) -> (Key, Kind) {
    match input {
        Input::Diameter => (Key::WHY_INPUT_DIAMETER, Kind::Bore),
        Input::Wall => (Key::WHY_INPUT_WALL, Kind::Bore),
        Input::Pressure => (Key::WHY_INPUT_PRESSURE, Kind::Pressure),
        Input::Stress => (Key::WHY_INPUT_STRESS, Kind::Stress),
        Input::Modulus => (Key::WHY_INPUT_MODULUS, Kind::Stress),
        Input::Poisson => (Key::WHY_INPUT_POISSON, Kind::Number),
        Input::Ovality => (Key::WHY_INPUT_OVALITY, Kind::Share),
        Input::SafetyFactor => (Key::WHY_INPUT_SAFETY, Kind::Number),
        Input::JointFactor => (Key::WHY_INPUT_JOINT, Kind::Share),
        Input::MillTolerance => (Key::WHY_INPUT_MILL, Kind::Share),
        Input::Corrosion => (Key::WHY_INPUT_CORROSION, Kind::Bore),
        Input::ThreadDepth => (Key::WHY_INPUT_THREAD, Kind::Bore),
        Input::YieldStrength => (Key::WHY_INPUT_YIELD, Kind::Stress),
        Input::TensileStrength => (Key::WHY_INPUT_TENSILE, Kind::Stress),
        Input::DesignFactor => (Key::WHY_INPUT_DESIGN, Kind::Share),
        _ => (Key::WHY_INPUT_OTHER, Kind::Number),
    }
}
