//! The working behind a figure: its formula, the numbers put in, and the
//! published source, so that a reviewer can check it by hand.
//!
//! Made on demand from the findings; it computes nothing the stages did not.

use crate::book::Id;
use crate::evaluate::Findings;
use crate::field::Field;
use crate::figure::{CloneGap, Figure, Gap, Lack};
use crate::measure::Measure;
use crate::resolve::bends::Turn;
use crate::steady::roughness;
use crate::transient::Surge;
use crate::units::Kind;
use hydraulics::constants::STANDARD_GRAVITY_M_S2;
use hydraulics::quantity::PipeLength;
use hydraulics::surge::Restraint;
use pipes::{Basis, Pipe};
use uom::si::kinematic_viscosity::square_meter_per_second;
use uom::si::length::meter;
use uom::si::mass_density::kilogram_per_cubic_meter;
use uom::si::pressure::pascal;

/// A figure that can show its working.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum FigureKey {
    /// Gross head.
    GrossHead,
    /// Length of pipe.
    PipeLength,
    /// Velocity in a stretch.
    Velocity(Id),
    /// Friction loss of a stretch.
    FrictionLoss(Id),
    /// Loss of a fitting.
    FittingLoss(Id),
    /// Loss of a bend from the survey, by its station.
    BendLoss(Id),
    /// True deflection at a station.
    Deflection(Id),
    /// Closing error of the survey.
    ClosingError,
    /// Submergence the intake needs.
    SubmergenceNeeded,
    /// Class a stretch needs.
    ClassNeeded(Id),
    /// Head lost in all.
    Loss,
    /// The same as a share of gross head.
    LossShare,
    /// Net head.
    NetHead,
    /// Velocity of the jets.
    JetVelocity,
    /// Bore of the nozzles.
    NozzleBore,
    /// Diameter of the jets.
    JetDiameter,
    /// Power in the jets.
    JetPower,
    /// Lowest pressure.
    Lowest,
    /// Bore of a stretch's pipe.
    Bore(Id),
    /// Highest standing pressure of a stretch.
    Standing(Id),
    /// Pressure allowed in a stretch.
    Allowable(Id),
    /// Share of it used.
    Share(Id),
    /// Wave speed in a stretch.
    WaveSpeed(Id),
    /// Quick surge estimate of a stretch.
    QuickRise(Id),
    /// Highest pressure in a surge of a stretch.
    SurgeHighest(Id),
    /// Lowest pressure in a surge of a stretch.
    SurgeLowest(Id),
    /// Highest pressure in a surge over what is allowed.
    SurgeShare(Id),
    /// Suction in a surge over the collapse pressure allowed.
    SurgeCollapse(Id),
    /// Michaud's estimate of the closing.
    Michaud,
    /// Allievi's estimate of the closing.
    Allievi,
    /// Water starting time.
    WaterStarting,
    /// Collapse pressure of a stretch.
    Collapse(Id),
    /// Flow as a share of that of greatest power.
    GreatestPower,
    /// Mass of a stretch.
    Mass(Id),
}

/// What a number put into a formula is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Term {
    /// Forebay level.
    ForebayLevel,
    /// Level of the jets.
    JetLevel,
    /// Level of the pipe.
    PipeLevel,
    /// Flow.
    Flow,
    /// Bore.
    Bore,
    /// Outside diameter.
    OutsideDiameter,
    /// Least wall.
    WallLeast,
    /// Mean wall.
    WallMean,
    /// Lining.
    Lining,
    /// Length of pipe.
    Length,
    /// Horizontal length.
    PlanLength,
    /// Roughness.
    Roughness,
    /// Kinematic viscosity, m²/s.
    Viscosity,
    /// Reynolds number.
    Reynolds,
    /// Darcy friction factor.
    FrictionFactor,
    /// Velocity.
    Velocity,
    /// Loss coefficient.
    LossCoefficient,
    /// Friction loss.
    FrictionLoss,
    /// Local losses.
    LocalLoss,
    /// Branch loss.
    BranchLoss,
    /// Head lost.
    Loss,
    /// Gross head.
    GrossHead,
    /// Net head.
    NetHead,
    /// Velocity coefficient.
    VelocityCoefficient,
    /// Contraction coefficient.
    ContractionCoefficient,
    /// Number of jets.
    Jets,
    /// Density of water, kg/m³.
    WaterDensity,
    /// Density of the wall, kg/m³.
    WallDensity,
    /// Acceleration of free fall, m/s².
    Gravity,
    /// Velocity of the jet.
    JetVelocity,
    /// Diameter of the jet.
    JetDiameter,
    /// Rated pressure.
    RatedPressure,
    /// Temperature factor.
    TemperatureFactor,
    /// Wall temperature.
    WallTemperature,
    /// Allowable stress.
    AllowableStress,
    /// Net wall.
    WallNet,
    /// Joint factor.
    JointFactor,
    /// Standing pressure.
    Standing,
    /// Pressure allowed for the weakest part.
    Allowed,
    /// Bulk modulus of water.
    BulkModulus,
    /// Short-term modulus of the wall.
    ModulusShort,
    /// Long-term modulus of the wall.
    ModulusLong,
    /// Poisson ratio.
    Poisson,
    /// Wave speed.
    WaveSpeed,
    /// Ovality.
    Ovality,
    /// Safety factor.
    Safety,
    /// Pressure of the air.
    Atmosphere,
    /// Flow of greatest power.
    GreatestPowerFlow,
    /// Slope of the leg above a station, below the horizontal.
    SlopeAbove,
    /// Slope of the leg below a station, below the horizontal.
    SlopeBelow,
    /// Turn of the line on the plan.
    PlanTurn,
    /// Fall of the line as surveyed.
    SurveyedFall,
    /// Known fall of the line.
    KnownFall,
    /// Coefficient of the approach to the intake, s/m^0.5.
    ApproachCoefficient,
    /// Height of the intake's opening.
    IntakeHeight,
    /// Grade level.
    GradeLevel,
    /// How much stiffer the wall is in the cold.
    Stiffening,
    /// Closing time.
    ClosingTime,
    /// Time for a wave to run up the line and back.
    Period,
    /// Pressure in a surge.
    SurgePressure,
    /// Pressure below that of the air.
    Suction,
    /// Outside pressure allowed against collapse.
    CollapseAllowed,
    /// Share of air carried as bubbles.
    AirShare,
}

/// One number put in.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Input {
    /// Its symbol in the formula.
    pub symbol: &'static str,
    /// What it is.
    pub term: Term,
    /// How much. Viscosity, density and gravity come as plain numbers in the
    /// unit their [`Term`] names.
    pub value: Measure,
}

/// The working behind a figure.
#[derive(Debug, Clone, PartialEq)]
pub struct Working {
    /// The formula.
    pub formula: &'static str,
    /// Its published source, and those of the values put in.
    pub sources: Vec<String>,
    /// The numbers put in.
    pub inputs: Vec<Input>,
    /// What comes out.
    pub result: Measure,
}

fn input(symbol: &'static str, term: Term, value: impl Into<Measure>) -> Input {
    Input {
        symbol,
        term,
        value: value.into(),
    }
}

fn number(symbol: &'static str, term: Term, value: f64) -> Input {
    input(symbol, term, Measure::number(value))
}

fn gravity() -> Input {
    number("g", Term::Gravity, STANDARD_GRAVITY_M_S2)
}

fn stress(value: uom::si::f64::Pressure) -> Measure {
    Measure::new(value.get::<pascal>(), Kind::Stress)
}

impl Findings {
    /// The working behind a figure.
    ///
    /// # Errors
    /// The figure's own gap, where there is no figure.
    pub fn working(&self, key: FigureKey) -> Figure<Working> {
        match key {
            FigureKey::GrossHead => self.gross_head_working(),
            FigureKey::PipeLength => self.pipe_length_working(),
            FigureKey::Velocity(id) => self.velocity_working(id),
            FigureKey::FrictionLoss(id) => self.friction_working(id),
            FigureKey::FittingLoss(id) => self.fitting_working(id),
            FigureKey::BendLoss(id) => self.bend_working(id),
            FigureKey::Deflection(id) => self.deflection_working(id),
            FigureKey::ClosingError => self.closing_working(),
            FigureKey::SubmergenceNeeded => self.submergence_working(),
            FigureKey::ClassNeeded(id) => self.class_needed_working(id),
            FigureKey::Loss | FigureKey::LossShare => self.loss_working(key),
            FigureKey::NetHead => self.net_head_working(),
            FigureKey::JetVelocity
            | FigureKey::NozzleBore
            | FigureKey::JetDiameter
            | FigureKey::JetPower => self.jet_working(key),
            FigureKey::Lowest => self.lowest_working(),
            FigureKey::Bore(id) => self.bore_working(id),
            FigureKey::Standing(id) => self.standing_working(id),
            FigureKey::Allowable(id) => self.allowable_working(id),
            FigureKey::Share(id) => self.share_working(id),
            FigureKey::WaveSpeed(id) | FigureKey::QuickRise(id) => self.wave_working(key, id),
            FigureKey::SurgeHighest(id) | FigureKey::SurgeLowest(id) => self.surge_working(key, id),
            FigureKey::SurgeShare(id) => self.surge_share_working(id),
            FigureKey::SurgeCollapse(id) => self.surge_collapse_working(id),
            FigureKey::Michaud | FigureKey::Allievi => self.quick_closing_working(key),
            FigureKey::WaterStarting => self.water_starting_working(),
            FigureKey::Collapse(id) => self.collapse_working(id),
            FigureKey::GreatestPower => self.greatest_working(),
            FigureKey::Mass(id) => self.mass_working(id),
        }
    }

    fn index(&self, id: Id) -> Figure<usize> {
        self.resolved
            .stretches
            .iter()
            .position(|s| s.id == id)
            .ok_or(Gap::Unsettled(Lack::Pipe(id)))
    }

    fn pipe(&self, id: Id) -> Figure<&Pipe> {
        let i = self.index(id)?;
        Ok(&**self.resolved.stretches[i].pipe.clone_gap()?)
    }

    fn wall(&self, id: Id) -> Figure<&crate::walls::StretchWalls> {
        let i = self.index(id)?;
        self.walls
            .stretches
            .get(i)
            .ok_or(Gap::Unsettled(Lack::Pipe(id)))
    }

    fn run(&self, id: Id) -> Figure<hydraulics::line::RunLoss> {
        let i = self.index(id)?;
        self.steady
            .stretches
            .get(i)
            .map_or(Err(Gap::Unsettled(Lack::Pipe(id))), |(_, run)| run.clone())
    }

    fn water_density(&self) -> Figure<Input> {
        let density = self.resolved.cold_water.clone()?.density();
        Ok(number(
            "ρ",
            Term::WaterDensity,
            density.get::<kilogram_per_cubic_meter>(),
        ))
    }

    fn gross_head_working(&self) -> Figure<Working> {
        Ok(Working {
            formula: "H = z_forebay − z_jets",
            sources: vec!["levels as entered; normal forebay level".to_owned()],
            inputs: vec![
                input(
                    "z_forebay",
                    Term::ForebayLevel,
                    self.resolved.forebay.normal.clone()?,
                ),
                input("z_jets", Term::JetLevel, self.resolved.jet_axis.clone()?),
            ],
            result: self.resolved.gross_head.clone()?.into(),
        })
    }

    fn pipe_length_working(&self) -> Figure<Working> {
        Ok(Working {
            formula: "L = Σ √(Δx² + Δz²), station by station",
            sources: vec!["survey as entered".to_owned()],
            inputs: vec![input(
                "Σ Δx",
                Term::PlanLength,
                self.resolved.profile.plan_length.clone()?,
            )],
            result: self.resolved.profile.pipe_length.clone()?.into(),
        })
    }

    fn velocity_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        Ok(Working {
            formula: "V = 4 Q / (π D²)",
            sources: vec!["continuity".to_owned()],
            inputs: vec![
                input("Q", Term::Flow, self.steady.flow.clone()?),
                input("D", Term::Bore, Measure::bore(pipe.bore())),
            ],
            result: self.run(id)?.velocity.into(),
        })
    }

    fn friction_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        let run = self.run(id)?;
        let age = self.resolved.limits.clone()?.roughness;
        let rough = match age {
            crate::book::RoughnessAge::Aged => &pipe.roughness_aged,
            crate::book::RoughnessAge::New => &pipe.roughness_new,
        };
        let viscosity = self.resolved.cold_water.clone()?.kinematic_viscosity();
        Ok(Working {
            formula: "h = f L V² / (2 g D);  1/√f = −2 log₁₀(ε/(3.7 D) + 2.51/(Re √f));  Re = V D/ν",
            sources: vec![
                "Darcy-Weisbach; Colebrook 1939, J. Inst. Civil Eng. 11, with 3.7 and 2.51"
                    .to_owned(),
                format!("roughness: {}", rough.source),
            ],
            inputs: vec![
                input("L", Term::Length, run.to - run.from),
                input("D", Term::Bore, Measure::bore(pipe.bore())),
                input("V", Term::Velocity, run.velocity),
                input("ε", Term::Roughness, Measure::bore(roughness(pipe, age))),
                number(
                    "ν",
                    Term::Viscosity,
                    viscosity.get::<square_meter_per_second>(),
                ),
                number("Re", Term::Reynolds, run.reynolds),
                number("f", Term::FrictionFactor, run.factor.unwrap_or(0.0)),
                gravity(),
            ],
            result: run.friction_loss.into(),
        })
    }

    fn fitting_working(&self, id: Id) -> Figure<Working> {
        let (_, loss) = self
            .steady
            .fittings
            .iter()
            .find(|(f, _)| *f == id)
            .ok_or(Gap::Unsettled(Lack::Rating(id)))?;
        let loss = loss.clone()?;
        let placed = self.resolved.fittings.iter().find(|f| f.id == id);
        let stretch = placed
            .and_then(|f| f.stretch)
            .ok_or(Gap::Unsettled(Lack::Rating(id)))?;
        let velocity = self.run(stretch)?.velocity;
        let v = velocity.get::<uom::si::velocity::meter_per_second>();
        Ok(Working {
            formula: "h = K V² / (2 g)",
            sources: vec![loss.source.to_owned()],
            inputs: vec![
                number("K", Term::LossCoefficient, loss.k),
                input("V", Term::Velocity, velocity),
                gravity(),
            ],
            result: Measure::new(loss.k * v * v / (2.0 * STANDARD_GRAVITY_M_S2), Kind::Head),
        })
    }

    fn turn(&self, station: Id) -> Figure<&Turn> {
        let turns = &self.resolved.turns;
        turns.iter().find(|t| t.station == station).ok_or_else(|| {
            let broken = self.resolved.profile.broken.clone();
            broken.unwrap_or(Gap::needs(Field::StationDistance(station)))
        })
    }

    fn bend_working(&self, station: Id) -> Figure<Working> {
        let turn = self.turn(station)?;
        let (_, loss) = self
            .steady
            .bends
            .iter()
            .find(|(at, _)| *at == station)
            .ok_or(Gap::needs(Field::StationTurn(station)))?;
        let loss = loss.clone()?;
        let velocity = self.run(turn.stretch.unwrap_or(1))?.velocity;
        let v = velocity.get::<uom::si::velocity::meter_per_second>();
        Ok(Working {
            formula: "h = K V² / (2 g)",
            sources: vec![loss.source.to_owned()],
            inputs: vec![
                number("K", Term::LossCoefficient, loss.k),
                input("V", Term::Velocity, velocity),
                gravity(),
            ],
            result: Measure::new(loss.k * v * v / (2.0 * STANDARD_GRAVITY_M_S2), Kind::Head),
        })
    }

    fn deflection_working(&self, station: Id) -> Figure<Working> {
        let turn = self.turn(station)?;
        let angle = |x: f64| Measure::new(x, Kind::Angle);
        Ok(Working {
            formula: "cos θ = cos α₁ cos α₂ cos h + sin α₁ sin α₂",
            sources: vec!["survey as entered".to_owned()],
            inputs: vec![
                input("α₁", Term::SlopeAbove, angle(turn.above_deg)),
                input("α₂", Term::SlopeBelow, angle(turn.below_deg)),
                input("h", Term::PlanTurn, angle(turn.plan_deg.clone()?)),
            ],
            result: angle(turn.deflection_deg.clone()?),
        })
    }

    fn closing_working(&self) -> Figure<Working> {
        let closing = self.resolved.profile.closing.clone()?;
        let closing = closing.ok_or(Gap::needs(Field::KnownFall))?;
        Ok(Working {
            formula: "e = Δz − Δz_known",
            sources: vec!["survey as entered".to_owned()],
            inputs: vec![
                input("Δz", Term::SurveyedFall, closing.surveyed),
                input("Δz_known", Term::KnownFall, closing.known),
            ],
            result: closing.error.into(),
        })
    }

    fn submergence_working(&self) -> Figure<Working> {
        let found = self.intake.submergence.clone()?;
        let needed = found.needed.get::<meter>();
        let height = found.height.get::<meter>();
        Ok(Working {
            formula: "S = c V √D",
            sources: vec![hydraulics::intake::SOURCE.to_owned()],
            inputs: vec![
                number("c", Term::ApproachCoefficient, found.coefficient()),
                input("V", Term::Velocity, found.velocity),
                input("D", Term::IntakeHeight, Measure::new(height, Kind::Bore)),
            ],
            result: Measure::new(needed, Kind::Head),
        })
    }

    fn class_needed_working(&self, id: Id) -> Figure<Working> {
        let wall = self.wall(id)?;
        let allowable = wall.allowable.clone_gap()?;
        Ok(Working {
            formula: "p_n = p / f_t",
            sources: vec![
                "careful rule after EN 805 (DP ≤ PFA), by analogy with water supply".to_owned(),
                allowable.source.clone(),
            ],
            inputs: vec![
                input("p", Term::Standing, wall.standing.clone()?.pressure),
                number("f_t", Term::TemperatureFactor, allowable.factor),
            ],
            result: wall.class_needed.clone()?.into(),
        })
    }

    fn loss_working(&self, key: FigureKey) -> Figure<Working> {
        let grade = self.steady.grade.clone_gap()?;
        let mut inputs = vec![
            input("h_f", Term::FrictionLoss, grade.friction_loss),
            input("h_K", Term::LocalLoss, grade.local_loss),
        ];
        inputs.push(input(
            "h_b",
            Term::BranchLoss,
            self.steady.branch_loss.clone()?,
        ));
        let sources = vec!["Darcy-Weisbach and local losses, summed along the line".to_owned()];
        if key == FigureKey::Loss {
            return Ok(Working {
                formula: "h = h_f + h_K + h_b",
                sources,
                inputs,
                result: self.steady.loss.clone()?.into(),
            });
        }
        inputs.push(input(
            "H",
            Term::GrossHead,
            self.resolved.gross_head.clone()?,
        ));
        Ok(Working {
            formula: "(h_f + h_K + h_b) / H",
            sources,
            inputs,
            result: Measure::share(self.steady.loss_share.clone()?),
        })
    }

    fn net_head_working(&self) -> Figure<Working> {
        let solved = self.steady.solved.clone_gap()?;
        Ok(Working {
            formula: "H_n = H − h: pressure head plus V²/(2 g) just before the nozzle, above the jets",
            sources: vec!["energy equation (Bernoulli with losses)".to_owned()],
            inputs: vec![
                input("H", Term::GrossHead, self.resolved.gross_head.clone()?),
                input("h", Term::Loss, self.steady.loss.clone()?),
            ],
            result: solved.net_head.into(),
        })
    }

    fn jet_working(&self, key: FigureKey) -> Figure<Working> {
        let solved = self.steady.solved.clone_gap()?;
        let jets = self.resolved.jets.clone_gap()?;
        let velocity = input("V_j", Term::JetVelocity, solved.jet_velocity);
        let cv = number("C_v", Term::VelocityCoefficient, jets.velocity_coefficient);
        let cc = number("C_c", Term::ContractionCoefficient, jets.contraction);
        let flow = input("Q", Term::Flow, solved.grade.flow);
        let count = number("n", Term::Jets, f64::from(jets.count));
        let (formula, source, inputs, result): (_, _, _, Measure) = match key {
            FigureKey::JetVelocity => (
                "V_j = C_v √(2 g H_n)",
                "Torricelli, with a velocity coefficient",
                vec![cv, input("H_n", Term::NetHead, solved.net_head), gravity()],
                solved.jet_velocity.into(),
            ),
            FigureKey::NozzleBore => (
                "d = √(4 Q / (π n C_c V_j))",
                "continuity through each nozzle",
                vec![flow, count, cc, velocity],
                Measure::bore(solved.bore),
            ),
            FigureKey::JetDiameter => (
                "d_j = √(4 Q / (π n V_j))",
                "continuity in each jet",
                vec![flow, count, velocity],
                Measure::bore(solved.jet_diameter),
            ),
            _ => (
                "P = ρ Q V_j² / 2",
                "kinetic energy of the jets",
                vec![self.water_density()?, flow, velocity],
                solved.jet_power.into(),
            ),
        };
        Ok(Working {
            formula,
            sources: vec![source.to_owned()],
            inputs,
            result,
        })
    }

    fn lowest_working(&self) -> Figure<Working> {
        let lowest = self.steady.lowest.clone()?;
        let grade = self.steady.low.clone_gap()?;
        let forebay = match self.resolved.forebay.lowest.clone()? {
            Some(level) => level,
            None => self.resolved.forebay.normal.clone()?,
        };
        let node = grade
            .nodes
            .get(grade.lowest)
            .ok_or(Gap::Unsettled(Lack::Surge))?;
        Ok(Working {
            formula: "p = ρ g (z_forebay − h − V²/(2 g) − z): grade line above the pipe",
            sources: vec!["energy equation (Bernoulli with losses)".to_owned()],
            inputs: vec![
                input("z_forebay", Term::ForebayLevel, forebay),
                input("z", Term::PipeLevel, node.level),
                input("V", Term::Velocity, node.velocity),
                self.water_density()?,
                gravity(),
            ],
            result: lowest.pressure.into(),
        })
    }

    fn bore_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        Ok(Working {
            formula: "D = D_o − 2 (e_mean + lining)",
            sources: vec![pipe.dimensions.source.clone()],
            inputs: vec![
                input(
                    "D_o",
                    Term::OutsideDiameter,
                    Measure::bore(pipe.outside_diameter),
                ),
                input("e_min", Term::WallLeast, Measure::bore(pipe.wall_min)),
                input("e_mean", Term::WallMean, Measure::bore(pipe.wall_mean())),
                input("lining", Term::Lining, Measure::bore(pipe.lining)),
            ],
            result: Measure::bore(pipe.bore()),
        })
    }

    fn standing_working(&self, id: Id) -> Figure<Working> {
        let standing = self.wall(id)?.standing.clone()?;
        let forebay = self.resolved.forebay.highest.clone()?;
        let density = self.resolved.cold_water.clone()?.density();
        let head = standing
            .pressure
            .head(density, hydraulics::constants::standard_gravity());
        Ok(Working {
            formula: "p = ρ g (z_forebay − z), at the lowest place of the stretch",
            sources: vec!["hydrostatics; highest forebay level".to_owned()],
            inputs: vec![
                input("z_forebay", Term::ForebayLevel, forebay),
                input("z", Term::PipeLevel, forebay - head),
                self.water_density()?,
                gravity(),
            ],
            result: standing.pressure.into(),
        })
    }

    fn allowable_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        let allowable = self.wall(id)?.allowable.clone()?;
        let temperature = input("T", Term::WallTemperature, allowable.temperature);
        let factor = number("f_T", Term::TemperatureFactor, allowable.factor);
        let (formula, inputs) = match allowable.basis {
            Basis::Class { rated, .. } => (
                "p_allowed = p_rated f_T",
                vec![
                    input("p_rated", Term::RatedPressure, rated),
                    factor,
                    temperature,
                ],
            ),
            Basis::Stress { wall, .. } => (
                "p_allowed = 2 S e / D_o · f_T, S with its joint factor",
                vec![
                    input("S", Term::AllowableStress, stress(wall.stress)),
                    input("e", Term::WallNet, Measure::bore(wall.net_wall)),
                    input(
                        "D_o",
                        Term::OutsideDiameter,
                        Measure::bore(pipe.outside_diameter),
                    ),
                    factor,
                    temperature,
                ],
            ),
        };
        Ok(Working {
            formula,
            sources: vec![allowable.source.clone()],
            inputs,
            result: allowable.pressure.into(),
        })
    }

    fn share_working(&self, id: Id) -> Figure<Working> {
        let wall = self.wall(id)?;
        Ok(Working {
            formula: "p / p_allowed, of the weakest of pipe, fittings and nozzles",
            sources: vec![
                "careful rule after EN 805 (DP ≤ PFA), by analogy with water supply".to_owned(),
            ],
            inputs: vec![
                input("p", Term::Standing, wall.standing.clone()?.pressure),
                input("p_allowed", Term::Allowed, wall.bearing.clone()?.pressure),
            ],
            result: Measure::share(wall.share.clone()?),
        })
    }

    fn wave_working(&self, key: FigureKey, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        let i = self.index(id)?;
        let quick = self
            .transient
            .quick
            .get(i)
            .map_or(Err(Gap::Unsettled(Lack::Surge)), |(_, q)| q.clone())?;
        if key == FigureKey::QuickRise(id) {
            return Ok(Working {
                formula: "Δh = a V / g, for a stop within 2 L/a: an estimate, settles nothing",
                sources: vec!["Joukowsky 1898".to_owned()],
                inputs: vec![
                    input("a", Term::WaveSpeed, quick.wave_speed),
                    input("V", Term::Velocity, self.run(id)?.velocity),
                    gravity(),
                ],
                result: quick.rise.into(),
            });
        }
        let water = self.resolved.cold_water.clone()?;
        let air = self.resolved.drive.air_share.clone()?;
        let formula = match (self.resolved.drive.restraint, air > 0.0) {
            (_, true) => {
                "1/(ρ a²) = 1/K + D c/(f_c E e) + α/p, with air carried as bubbles: not the careful choice"
            }
            (Restraint::Throughout, _) => {
                "a = √(K/ρ) / √(1 + K D c/(f_c E e)), pipe held throughout, thick wall reckoned"
            }
            (Restraint::UpstreamEnd, _) => {
                "a = √(K/ρ) / √(1 + K D c/(f_c E e)), pipe held at its upper end, thick wall reckoned"
            }
            (Restraint::ExpansionJoints, _) => {
                "a = √(K/ρ) / √(1 + K D c/(f_c E e)), pipe with expansion joints, thick wall reckoned"
            }
        };
        let mut sources = vec![
            "Korteweg 1878; Wylie and Streeter 1993".to_owned(),
            format!("modulus: {}", pipe.modulus_short.source),
        ];
        if quick.stiffening > 1.0 {
            sources.push(pipes::COLD_SOURCE.to_owned());
        }
        let mut more = vec![number("f_c", Term::Stiffening, quick.stiffening)];
        if air > 0.0 {
            more.push(input("α", Term::AirShare, Measure::share(air)));
        }
        Ok(Working {
            formula,
            sources,
            inputs: [
                vec![
                    input("K", Term::BulkModulus, stress(water.bulk_modulus())),
                    self.water_density()?,
                    input("D", Term::Bore, Measure::bore(pipe.bore())),
                    input("e", Term::WallMean, Measure::bore(pipe.wall_mean())),
                    input("E", Term::ModulusShort, stress(pipe.modulus_short.value)),
                    number("ν", Term::Poisson, pipe.poisson.value),
                ],
                more,
            ]
            .concat(),
            result: quick.wave_speed.into(),
        })
    }

    fn surge(&self) -> Figure<&Surge> {
        self.transient.surge.clone_gap()
    }

    /// The level of the pipe, or of the jets where the pressure is theirs, that
    /// a pressure at a grade level stands on.
    fn surge_working(&self, key: FigureKey, id: Id) -> Figure<Working> {
        let surge = self.surge()?;
        let wall = self.wall(id)?;
        let highest = key == FigureKey::SurgeHighest(id);
        let found = if highest {
            wall.surge.clone()?
        } else {
            wall.surge_lowest.clone()?
        };
        let level = self
            .resolved
            .profile
            .level_at(found.at)
            .ok_or(Gap::Unsettled(Lack::Pipe(id)))?;
        let density = self.resolved.cold_water.clone()?.density();
        let head = found
            .pressure
            .head(density, hydraulics::constants::standard_gravity());
        Ok(Working {
            formula: if highest {
                "p = ρ g (z_g − z), z_g the highest grade level of every event and start that counts"
            } else {
                "p = ρ g (z_g − z), z_g the lowest grade level of every event and start that counts, from the lowest forebay level"
            },
            sources: vec![
                "method of characteristics: Wylie and Streeter 1993, chapters 3 and 4 (from memory)"
                    .to_owned(),
            ],
            inputs: vec![
                input("z_g", Term::GradeLevel, level + head),
                input("z", Term::PipeLevel, level),
                self.water_density()?,
                gravity(),
                input("T", Term::ClosingTime, surge.closing),
                input("2 L/a", Term::Period, surge.period),
            ],
            result: found.pressure.into(),
        })
    }

    fn surge_share_working(&self, id: Id) -> Figure<Working> {
        let wall = self.wall(id)?;
        Ok(Working {
            formula: "p / p_allowed, of the weakest of pipe, fittings and nozzles",
            sources: vec![
                "careful rule after EN 805 (DP ≤ PFA), by analogy with water supply".to_owned(),
            ],
            inputs: vec![
                input("p", Term::SurgePressure, wall.surge.clone()?.pressure),
                input(
                    "p_allowed",
                    Term::Allowed,
                    wall.surge_bearing.clone()?.pressure,
                ),
            ],
            result: Measure::share(wall.surge_share.clone()?),
        })
    }

    fn surge_collapse_working(&self, id: Id) -> Figure<Working> {
        let wall = self.wall(id)?;
        let found = wall.collapse_in_surge.clone()?;
        Ok(Working {
            formula: "s / p_c, s the pressure below that of the air at the lowest",
            sources: vec![
                "Bresse; Timoshenko and Gere, Theory of Elastic Stability; ovality as in ASTM F1216 (from memory)"
                    .to_owned(),
            ],
            inputs: vec![
                input("s", Term::Suction, found.suction),
                input("p_c", Term::CollapseAllowed, wall.collapse.clone()?.allowed),
            ],
            result: Measure::share(found.share),
        })
    }

    fn quick_closing_working(&self, key: FigureKey) -> Figure<Working> {
        let quick = self.transient.quick_closing.clone()?;
        let period = input("2 L/a", Term::Period, self.transient.period.clone()?);
        let time = input("T", Term::ClosingTime, quick.closing);
        let length = input("L", Term::Length, quick.length);
        let velocity = input("V", Term::Velocity, quick.velocity);
        let wave = input("a", Term::WaveSpeed, quick.wave_speed);
        let head = input("H", Term::GrossHead, self.resolved.gross_head.clone()?);
        Ok(match key {
            FigureKey::Michaud => Working {
                formula: "Δh = 2 L V/(g T), for T above 2 L/a: an estimate, settles nothing",
                sources: vec!["Michaud 1878".to_owned()],
                inputs: vec![length, velocity, time, period, gravity()],
                result: quick.michaud.into(),
            },
            _ => Working {
                formula: "Δh by the chain of phases 2 L/a, area closed in a straight line, no friction: an estimate, settles nothing",
                sources: vec!["Allievi 1913".to_owned()],
                inputs: vec![head, velocity, wave, time, period, gravity()],
                result: quick.allievi.into(),
            },
        })
    }

    fn water_starting_working(&self) -> Figure<Working> {
        let surge = self.surge()?;
        let (length, velocity, net_head) = surge.running;
        Ok(Working {
            formula: "T_w = L V / (g H_n), all jets open, new pipe, highest forebay level",
            sources: vec!["momentum of the water (rigid column)".to_owned()],
            inputs: vec![
                input("L", Term::Length, length),
                input("V", Term::Velocity, velocity),
                input("H_n", Term::NetHead, net_head),
                gravity(),
            ],
            result: surge.water_starting.into(),
        })
    }

    fn collapse_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        let figures = self.wall(id)?.collapse.clone()?;
        Ok(Working {
            formula: "p = 2 E/(1 − ν²) (e/(D_o − e))³ · ((1 − q)/(1 + q)²)³ / S",
            sources: vec![
                "Bresse; Timoshenko and Gere, Theory of Elastic Stability; ovality as in ASTM F1216 (from memory)"
                    .to_owned(),
                format!("modulus: {}", pipe.modulus_short.source),
            ],
            inputs: vec![
                input("E", Term::ModulusShort, stress(pipe.modulus_short.value)),
                input("E_long", Term::ModulusLong, stress(pipe.modulus_long.value)),
                number("ν", Term::Poisson, pipe.poisson_for_collapse().value),
                input("e", Term::WallLeast, Measure::bore(pipe.wall_against_collapse())),
                input("D_o", Term::OutsideDiameter, Measure::bore(pipe.outside_diameter)),
                input("q", Term::Ovality, Measure::share(crate::walls::OVALITY)),
                number("S", Term::Safety, figures.safety),
                input("p_air", Term::Atmosphere, figures.vacuum),
            ],
            result: figures.allowed.into(),
        })
    }

    fn greatest_working(&self) -> Figure<Working> {
        let curve = self.operation.power.clone_gap()?;
        Ok(Working {
            formula: "Q / Q_P, Q_P the flow at which P is greatest (near one third of H lost)",
            sources: vec!["greatest of the power curve of this line, searched".to_owned()],
            inputs: vec![
                input("Q", Term::Flow, self.steady.flow.clone()?),
                input("Q_P", Term::GreatestPowerFlow, curve.greatest_power.flow),
            ],
            result: Measure::share(self.operation.share_of_greatest.clone()?),
        })
    }

    fn mass_working(&self, id: Id) -> Figure<Working> {
        let pipe = self.pipe(id)?;
        let i = self.index(id)?;
        let length: PipeLength = self.resolved.stretches[i].span.clone()?.length();
        let mass = pipe.mass_per_length() * length.get();
        Ok(Working {
            formula: "m = π e (D_o − e) ρ_w L, with the lining",
            sources: vec![format!("density: {}", pipe.density.source)],
            inputs: vec![
                input(
                    "D_o",
                    Term::OutsideDiameter,
                    Measure::bore(pipe.outside_diameter),
                ),
                input("e", Term::WallMean, Measure::bore(pipe.wall_mean())),
                number(
                    "ρ_w",
                    Term::WallDensity,
                    pipe.density.value.get::<kilogram_per_cubic_meter>(),
                ),
                input(
                    "L",
                    Term::Length,
                    Measure::new(length.get().get::<meter>(), Kind::Distance),
                ),
            ],
            result: Measure::new(mass.get::<uom::si::mass::kilogram>(), Kind::Mass),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::book::Book;
    use crate::demo::demo;
    use crate::evaluate::evaluate;
    use hydraulics::math::{acos, cos, sin};

    fn keys(stretches: &[Id], fittings: &[Id]) -> Vec<FigureKey> {
        let mut keys = vec![
            FigureKey::GrossHead,
            FigureKey::PipeLength,
            FigureKey::Loss,
            FigureKey::LossShare,
            FigureKey::NetHead,
            FigureKey::JetVelocity,
            FigureKey::NozzleBore,
            FigureKey::JetDiameter,
            FigureKey::JetPower,
            FigureKey::Lowest,
            FigureKey::GreatestPower,
            FigureKey::Michaud,
            FigureKey::Allievi,
            FigureKey::WaterStarting,
            FigureKey::ClosingError,
            FigureKey::SubmergenceNeeded,
            FigureKey::Deflection(3),
            FigureKey::BendLoss(3),
        ];
        for id in stretches {
            keys.extend([
                FigureKey::Velocity(*id),
                FigureKey::FrictionLoss(*id),
                FigureKey::Bore(*id),
                FigureKey::Standing(*id),
                FigureKey::Allowable(*id),
                FigureKey::Share(*id),
                FigureKey::WaveSpeed(*id),
                FigureKey::QuickRise(*id),
                FigureKey::Collapse(*id),
                FigureKey::Mass(*id),
                FigureKey::ClassNeeded(*id),
                FigureKey::SurgeHighest(*id),
                FigureKey::SurgeLowest(*id),
                FigureKey::SurgeShare(*id),
                FigureKey::SurgeCollapse(*id),
            ]);
        }
        keys.extend(fittings.iter().map(|id| FigureKey::FittingLoss(*id)));
        keys
    }

    fn get(w: &Working, symbol: &str) -> f64 {
        w.inputs
            .iter()
            .find(|i| i.symbol == symbol)
            .unwrap()
            .value
            .value
    }

    fn near(a: f64, b: f64) {
        assert!((a - b).abs() <= 1e-9 * b.abs().max(1e-12), "{a} is not {b}");
    }

    #[test]
    fn every_figure_of_the_demo_shows_its_working() {
        let found = evaluate(&demo("demo"));
        for key in keys(&[1, 2], &[1, 2, 3, 4]) {
            let w = found
                .working(key)
                .unwrap_or_else(|gap| panic!("{key:?}: {gap:?}"));
            assert!(!w.formula.is_empty() && !w.inputs.is_empty(), "{key:?}");
            assert!(w.sources.iter().all(|s| !s.trim().is_empty()), "{key:?}");
            assert!(w.result.value.is_finite());
            assert!(
                w.inputs.iter().all(|i| i.value.value.is_finite()),
                "{key:?}"
            );
        }
        let empty = evaluate(&Book::new("empty"));
        for key in keys(&[1], &[1]) {
            assert!(empty.working(key).is_err(), "{key:?}");
        }
    }

    // The formula as printed, with the numbers as shown, gives the result:
    // worked here by hand, apart from the stages.
    #[test]
    fn the_numbers_put_in_give_the_result() {
        let found = evaluate(&demo("demo"));
        let pi = std::f64::consts::PI;

        let w = found.working(FigureKey::Velocity(1)).unwrap();
        near(
            w.result.value,
            4.0 * get(&w, "Q") / (pi * get(&w, "D") * get(&w, "D")),
        );

        let w = found.working(FigureKey::FrictionLoss(2)).unwrap();
        let v = get(&w, "V");
        near(
            w.result.value,
            get(&w, "f") * get(&w, "L") * v * v / (2.0 * get(&w, "g") * get(&w, "D")),
        );

        let w = found.working(FigureKey::NetHead).unwrap();
        near(w.result.value, get(&w, "H") - get(&w, "h"));

        let w = found.working(FigureKey::JetVelocity).unwrap();
        near(
            w.result.value,
            get(&w, "C_v") * (2.0 * get(&w, "g") * get(&w, "H_n")).sqrt(),
        );

        let w = found.working(FigureKey::NozzleBore).unwrap();
        let d2 = 4.0 * get(&w, "Q") / (pi * get(&w, "n") * get(&w, "C_c") * get(&w, "V_j"));
        near(w.result.value, d2.sqrt());

        let w = found.working(FigureKey::JetPower).unwrap();
        let v = get(&w, "V_j");
        near(w.result.value, get(&w, "ρ") * get(&w, "Q") * v * v / 2.0);

        let w = found.working(FigureKey::Standing(2)).unwrap();
        near(
            w.result.value,
            get(&w, "ρ") * get(&w, "g") * (get(&w, "z_forebay") - get(&w, "z")),
        );

        let w = found.working(FigureKey::Collapse(1)).unwrap();
        let (nu, e, d, q) = (get(&w, "ν"), get(&w, "e"), get(&w, "D_o"), get(&w, "q"));
        let slender = e / (d - e);
        let oval = (1.0 - q) / ((1.0 + q) * (1.0 + q));
        near(
            w.result.value,
            2.0 * get(&w, "E") / (1.0 - nu * nu) * slender * slender * slender * oval * oval * oval
                / get(&w, "S"),
        );

        let w = found.working(FigureKey::Deflection(3)).unwrap();
        let rad = |s: &str| get(&w, s) * pi / 180.0;
        let (a, b, h) = (rad("α₁"), rad("α₂"), rad("h"));
        let cosine = cos(a) * cos(b) * cos(h) + sin(a) * sin(b);
        near(w.result.value, acos(cosine) * 180.0 / pi);

        let w = found.working(FigureKey::BendLoss(3)).unwrap();
        let v = get(&w, "V");
        near(w.result.value, get(&w, "K") * v * v / (2.0 * get(&w, "g")));

        let w = found.working(FigureKey::ClosingError).unwrap();
        near(w.result.value, get(&w, "Δz") - get(&w, "Δz_known"));

        let w = found.working(FigureKey::SubmergenceNeeded).unwrap();
        near(
            w.result.value,
            get(&w, "c") * get(&w, "V") * get(&w, "D").sqrt(),
        );

        let w = found.working(FigureKey::ClassNeeded(2)).unwrap();
        near(w.result.value, get(&w, "p") / get(&w, "f_t"));

        for key in [FigureKey::SurgeHighest(2), FigureKey::SurgeLowest(1)] {
            let w = found.working(key).unwrap();
            near(
                w.result.value,
                get(&w, "ρ") * get(&w, "g") * (get(&w, "z_g") - get(&w, "z")),
            );
        }
        let w = found.working(FigureKey::WaterStarting).unwrap();
        near(
            w.result.value,
            get(&w, "L") * get(&w, "V") / (get(&w, "g") * get(&w, "H_n")),
        );
        let w = found.working(FigureKey::Michaud).unwrap();
        near(
            w.result.value,
            2.0 * get(&w, "L") * get(&w, "V") / (get(&w, "g") * get(&w, "T")),
        );
        let w = found.working(FigureKey::SurgeShare(2)).unwrap();
        near(w.result.value, get(&w, "p") / get(&w, "p_allowed"));

        let w = found.working(FigureKey::WaveSpeed(1)).unwrap();
        let (d, e, nu) = (get(&w, "D"), get(&w, "e"), get(&w, "ν"));
        let c = 2.0 * e / d * (1.0 + nu) + d / (d + e) * (1.0 - nu * nu);
        let give = get(&w, "K") * d * c / (get(&w, "f_c") * get(&w, "E") * e);
        near(
            w.result.value,
            (get(&w, "K") / get(&w, "ρ")).sqrt() / (1.0 + give).sqrt(),
        );

        let w = found.working(FigureKey::QuickRise(1)).unwrap();
        near(w.result.value, get(&w, "a") * get(&w, "V") / get(&w, "g"));
    }
}
