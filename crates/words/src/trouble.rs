//! What is missing and what cannot be, with where and what to do.

use crate::about::About;
use crate::name::capital;
use crate::text::{self, Key};
use hydraulics::intake::IntakeError;
use hydraulics::line::LineError;
use pipes::OwnPipeError;
use workbook::figure::{Gap, Lack, Trouble};
use workbook::measure::Measure;
use workbook::pipe_copy::PipeCopyError;
use workbook::resolve::profile::MOST_STATIONS;
use workbook::units::Kind;

impl About<'_> {
    /// Why there is no figure.
    #[must_use]
    pub fn gap(self, gap: &Gap) -> String {
        match gap {
            Gap::Unsettled(lack) => self.lack(lack),
            Gap::Wrong(trouble) => self.trouble(trouble),
        }
    }

    /// What is missing.
    #[must_use]
    pub fn lack(self, lack: &Lack) -> String {
        let words = self.words;
        let said = match lack {
            Lack::Entry(field) => text::lack_entry(words, &self.field(*field)),
            Lack::Pipe(stretch) => text::lack_pipe(words, &self.stretch(*stretch)),
            Lack::Surge => words.say(Key::LACK_SURGE).to_owned(),
            Lack::Machine => words.say(Key::LACK_MACHINE).to_owned(),
            Lack::ValveTable => words.say(Key::LACK_VALVE_TABLE).to_owned(),
            Lack::NotConverged { moved } => {
                text::lack_converged(words, &words.figure(Measure::share(*moved)))
            }
            Lack::NotBalanced { left } => {
                text::lack_balanced(words, &words.figure(Measure::share(*left)))
            }
            Lack::ColumnParts { at } => text::lack_separation(words, &words.figure(*at)),
            Lack::Rating(fitting) => text::lack_rating(words, &self.fitting(*fitting)),
            Lack::Source(stretch) => text::lack_source(words, &self.stretch(*stretch)),
            _ => words.say(Key::LACK_MORE).to_owned(),
        };
        capital(&said)
    }

    /// What cannot be: what, where, and what to do.
    #[must_use]
    pub fn trouble(self, trouble: &Trouble) -> String {
        let words = self.words;
        let distance = |m: f64| words.full(Measure::new(m, Kind::Distance));
        let said = match trouble {
            Trouble::Entry(field, why) => text::trouble_entry(
                words,
                &self.field(*field),
                &words.entry_trouble(*field, why),
            ),
            Trouble::StationBehind { station, back_m } => {
                text::trouble_station_behind(words, &self.station(*station), &distance(*back_m))
            }
            Trouble::StationTooSteep {
                station,
                distance_m,
                fall_m,
            } => text::trouble_station_too_steep(
                words,
                &self.station(*station),
                &distance(*distance_m),
                &distance(fall_m.abs()),
            ),
            Trouble::StationRepeated { station } => {
                text::trouble_station_repeated(words, &self.station(*station))
            }
            Trouble::StationUpright { station } => {
                text::trouble_station_upright(words, &self.station(*station))
            }
            Trouble::NothingToSpread => words.say(Key::TROUBLE_NOTHING_TO_SPREAD).to_owned(),
            Trouble::Bend { station, why } => {
                text::trouble_bend(words, &self.station(*station), &words.fitting_error(why))
            }
            Trouble::Intake(why) => {
                let why = words.say(match why {
                    IntakeError::Height(_) => Key::WHY_FITTING_BORE,
                    _ => Key::WHY_VELOCITY,
                });
                text::trouble_intake(words, why)
            }
            Trouble::TooManyStations { count } => text::trouble_too_many_stations(
                words,
                &words.count(*count),
                &words.count(MOST_STATIONS),
            ),
            Trouble::StretchStart { stretch } => {
                text::trouble_stretch_start(words, &self.stretch(*stretch))
            }
            Trouble::FittingStation { fitting } => {
                text::trouble_fitting_station(words, &self.fitting(*fitting))
            }
            Trouble::PipeUnknown { stretch, pipe } => {
                text::trouble_pipe_unknown(words, &self.stretch(*stretch), &self.pipe(pipe))
            }
            Trouble::PipeCopy { pipe, why } => {
                text::trouble_pipe_copy(words, &self.pipe(pipe), &self.pipe_copy(why))
            }
            Trouble::OwnPipe { id, why } => {
                text::trouble_own_pipe(words, &self.own_pipe(*id), &self.own_pipe_error(why))
            }
            Trouble::NoHead { forebay, jets } => {
                text::trouble_no_head(words, &words.full(*forebay), &words.full(*jets))
            }
            Trouble::ForebayOrder { field } => {
                text::trouble_forebay_order(words, &self.field(*field))
            }
            Trouble::TemperatureOrder { field } => {
                text::trouble_temperature_order(words, &self.field(*field))
            }
            Trouble::Line(LineError::FlowTooGreat { flow, greatest }) => {
                text::trouble_too_much_flow(words, &words.figure(*flow), &words.figure(*greatest))
            }
            Trouble::Line(why) => text::trouble_line(words, &words.line_error(why)),
            Trouble::Nozzle(why) => text::trouble_jets(words, &words.nozzle_error(why)),
            Trouble::Water(why) => text::trouble_water(words, &words.water_error(why)),
            Trouble::Fitting { fitting, why } => {
                text::trouble_fitting(words, &self.fitting(*fitting), &words.fitting_error(why))
            }
            Trouble::Rating { stretch, why } => {
                text::trouble_rating(words, &self.stretch(*stretch), &words.rating_error(why))
            }
            Trouble::Wall { stretch, why } => {
                text::trouble_wall(words, &self.stretch(*stretch), &words.wall_error(why))
            }
            Trouble::Wave { stretch, .. } => text::trouble_wave(
                words,
                &self.stretch(*stretch),
                words.say(Key::WHY_WAVE_SPEED),
            ),
            Trouble::ValveRow { row } => text::trouble_valve_row(words, &words.count(row + 1)),
            Trouble::Transient(why) => words.transient_error(why),
            Trouble::Surge { stretch, why } => {
                text::trouble_surge(words, &self.stretch(*stretch), words.surge_error(why))
            }
            _ => words.say(Key::TROUBLE_OTHER).to_owned(),
        };
        capital(&said)
    }

    fn pipe_copy(self, why: &PipeCopyError) -> String {
        let words = self.words;
        match why {
            PipeCopyError::Material(name) => text::copy_material(words, name),
            PipeCopyError::Value { field, value } => {
                text::copy_value(words, field, &words.any_number(*value))
            }
            PipeCopyError::NoBore => words.say(Key::COPY_NO_BORE).to_owned(),
            PipeCopyError::Derating => words.say(Key::COPY_DERATING).to_owned(),
            _ => words.say(Key::COPY_OTHER).to_owned(),
        }
    }

    fn own_pipe_error(self, why: &OwnPipeError) -> String {
        let words = self.words;
        let bore = |m: f64| words.full(Measure::new(m, Kind::Bore));
        match why {
            OwnPipeError::Blank { field: "source" } => words.say(Key::OWN_BLANK_SOURCE).to_owned(),
            OwnPipeError::Blank {
                field: "designation",
            } => words.say(Key::OWN_BLANK_NAME).to_owned(),
            OwnPipeError::Blank { field } => text::own_missing(words, words.say(part(field).0)),
            OwnPipeError::NotFinite { field } => {
                text::own_not_finite(words, words.say(part(field).0))
            }
            OwnPipeError::NotPositive { field, .. } => {
                text::own_not_positive(words, words.say(part(field).0))
            }
            OwnPipeError::OutOfRange {
                field,
                value,
                least,
                greatest,
            } => {
                let (name, kind) = part(field);
                let full = |x: f64| words.full_or_dash(Measure::new(x, kind));
                text::own_out_of_range(
                    words,
                    words.say(name),
                    &full(*value),
                    &full(*least),
                    &full(*greatest),
                )
            }
            OwnPipeError::WallsCrossed { least, greatest } => {
                text::own_walls_crossed(words, &bore(*greatest), &bore(*least))
            }
            OwnPipeError::NoBore {
                wall_and_lining,
                half_diameter,
            } => text::own_no_bore(words, &bore(*wall_and_lining), &bore(*half_diameter)),
            OwnPipeError::Missing { field } => text::own_missing(words, words.say(part(field).0)),
            OwnPipeError::StressNeedsSteel { .. } => {
                words.say(Key::OWN_STRESS_NEEDS_STEEL).to_owned()
            }
            OwnPipeError::StressNeedsNominalWall => words.say(Key::OWN_NOMINAL_WALL).to_owned(),
            OwnPipeError::ModuliCrossed { .. } => words.say(Key::OWN_MODULI_CROSSED).to_owned(),
            OwnPipeError::DeratingDisordered { .. } | OwnPipeError::DeratingEmpty => {
                words.say(Key::OWN_DERATING).to_owned()
            }
            OwnPipeError::Wall(why) => capital(&words.wall_error(why)),
            _ => words.say(Key::OWN_OTHER).to_owned(),
        }
    }
}

/// What the catalogue calls a figure of an own pipe, as the user knows it, and
/// what it measures.
fn part(field: &str) -> (Key, Kind) {
    match field {
        "outside_diameter" => (Key::FIELD_OWN_OUTSIDE, Kind::Bore),
        "wall_min" | "wall" => (Key::FIELD_OWN_WALL, Kind::Bore),
        "wall_max" => (Key::OWN_PART_WALL_MAX, Kind::Bore),
        "lining" => (Key::FIELD_OWN_LINING, Kind::Bore),
        "bore" => (Key::FIELD_OWN_BORE, Kind::Bore),
        "thread depth" | "thread_depth" => (Key::FIELD_OWN_THREAD, Kind::Bore),
        "corrosion" => (Key::FIELD_OWN_CORROSION, Kind::Bore),
        "mill_tolerance" => (Key::FIELD_OWN_MILL, Kind::Share),
        "joint_factor" => (Key::FIELD_OWN_JOINT, Kind::Share),
        "pressure" | "rating symbol" | "rating number" => (Key::FIELD_OWN_RATING, Kind::Pressure),
        "rating temperature" => (Key::FIELD_OWN_RATING_TEMPERATURE, Kind::Temperature),
        "yield_strength" => (Key::FIELD_OWN_YIELD, Kind::Stress),
        "tensile_strength" => (Key::FIELD_OWN_TENSILE, Kind::Stress),
        "roughness_new" => (Key::FIELD_OWN_ROUGHNESS_NEW, Kind::Bore),
        "roughness_aged" => (Key::FIELD_OWN_ROUGHNESS_AGED, Kind::Bore),
        "modulus_short" => (Key::FIELD_OWN_MODULUS_SHORT, Kind::Stress),
        "modulus_long" => (Key::FIELD_OWN_MODULUS_LONG, Kind::Stress),
        "supply" => (Key::FIELD_OWN_SUPPLY, Kind::Distance),
        "poisson" => (Key::OWN_PART_POISSON, Kind::Number),
        "expansion" => (Key::OWN_PART_EXPANSION, Kind::Number),
        "density" => (Key::OWN_PART_DENSITY, Kind::Number),
        "derating" | "derating temperature" | "derating factor" => {
            (Key::OWN_PART_DERATING, Kind::Number)
        }
        _ => (Key::OWN_PART_OTHER, Kind::Number),
    }
}
