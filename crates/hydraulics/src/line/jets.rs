//! Line and jets in one solve.

use super::grade::Grade;
use super::layout::Line;
use super::spec::LineError;
use crate::math;
use crate::nozzle::{Nozzle, NozzleError, bore_for_flow, check_coefficients, jet_power};
use crate::quantity::{GaugePressure, Head, Length, Level, Power, Velocity, VolumeRate};
use crate::solve::{Bracket, Solution, Stop, Tolerance};
use uom::si::area::square_meter;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::volume_rate::cubic_meter_per_second;

/// Open nozzles at the foot of a line, each at the end of its own branch; the
/// branches are alike.
#[derive(Debug, Clone, PartialEq)]
pub struct NozzleSet {
    /// The open nozzles, equal or not.
    pub nozzles: Vec<Nozzle>,
    /// Level of the jet axis.
    pub axis: Level,
    /// Loss coefficient of manifold, branch and valve of each nozzle, on the
    /// velocity in the branch.
    pub branch_k: f64,
    /// Bore of the branch, just before the nozzle.
    pub branch_bore: Length,
}

/// Equal nozzles whose bore is to be found.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct NozzleTemplate {
    /// How many.
    pub count: usize,
    /// Velocity coefficient of each.
    pub velocity_coefficient: f64,
    /// Contraction coefficient of each.
    pub contraction_coefficient: f64,
    /// Level of the jet axis.
    pub axis: Level,
    /// Loss coefficient of manifold, branch and valve of each nozzle, on the
    /// velocity in the branch.
    pub branch_k: f64,
    /// Bore of the branch, just before the nozzle.
    pub branch_bore: Length,
}

/// One jet.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Jet {
    /// Bore of its nozzle.
    pub bore: Length,
    /// Flow through it.
    pub flow: VolumeRate,
    /// Net head: pressure head plus velocity head just before the nozzle,
    /// above the jet axis.
    pub net_head: Head,
    /// Gauge pressure just before the nozzle, at the level of the axis.
    pub pressure: GaugePressure,
    /// Velocity of the jet.
    pub velocity: Velocity,
    /// Diameter of the contracted jet.
    pub diameter: Length,
    /// Power in the jet.
    pub power: Power,
}

/// A line and its jets, in balance.
#[derive(Debug, Clone, PartialEq)]
pub struct Solved {
    /// The grade line.
    pub grade: Grade,
    /// Net head; of unequal jets the mean, weighted by flow.
    pub net_head: Head,
    /// Velocity of the jet; of unequal jets that of the widest.
    pub jet_velocity: Velocity,
    /// Diameter of the jet; of unequal jets that of the widest.
    pub jet_diameter: Length,
    /// Bore of the nozzle; of unequal nozzles the widest.
    pub bore: Length,
    /// Power in all jets together.
    pub jet_power: Power,
    /// Head lost in the branch; of unequal jets the mean, weighted by flow.
    pub branch_loss: Head,
    /// The jets, in the order of the nozzles.
    pub jets: Vec<Jet>,
    /// How the unknown was found: the root is the flow in m3/s, or the bore in
    /// m; the residual is in m of head.
    pub solution: Solution,
}

/// The branch that leads to each nozzle, in SI numbers.
#[derive(Debug, Clone, Copy)]
struct Branch {
    k: f64,
    area: f64,
}

impl Branch {
    fn new(k: f64, bore: Length) -> Result<Self, LineError> {
        let metres = bore.get::<meter>();
        if !(k >= 0.0 && k.is_finite() && metres > 0.0 && metres.is_finite()) {
            return Err(LineError::Branch { k, bore });
        }
        Ok(Self {
            k,
            area: math::PI * metres * metres / 4.0,
        })
    }

    /// Flow over sqrt(2 g H) of a nozzle, H the energy at the foot above the
    /// axis: Cd a / sqrt(1 + k (Cd a / A)^2).
    fn conductance(&self, nozzle: &Nozzle) -> f64 {
        let free = free_conductance(nozzle);
        let share = free / self.area;
        free / (1.0 + self.k * share * share).sqrt()
    }
}

/// Cd a of a nozzle, m2.
fn free_conductance(nozzle: &Nozzle) -> f64 {
    nozzle.discharge_coefficient() * nozzle.area().get::<square_meter>()
}

impl Line {
    /// The flow through given nozzles.
    ///
    /// # Equation
    /// Each branch passes q = G sqrt(2 g H) with
    /// G = Cd a / sqrt(1 + k (Cd a/A)^2) and H the energy at the foot above the
    /// jet axis, so that the flow Q solves forebay - axis - losses(Q) =
    /// Q^2 / (2 g (sum G)^2). The left side falls with Q and the right side
    /// rises: there is one root, and it lies between no flow and the flow
    /// without losses.
    ///
    /// # Errors
    /// A set that cannot be used ([`LineError::NoNozzle`],
    /// [`LineError::Branch`], [`LineError::NozzleWiderThanBranch`]), or no head
    /// above the jet axis ([`LineError::NoHead`]).
    ///
    /// # Example
    /// ```
    /// use hydraulics::constants::standard_gravity;
    /// use hydraulics::friction::FrictionLaw;
    /// use hydraulics::line::{Line, LineSpec, NozzleTemplate, Point, Run};
    /// use hydraulics::quantity::{Length, Level, PipeLength, ThermodynamicTemperature, unit};
    /// use hydraulics::water::Water;
    ///
    /// let mm = Length::new::<unit::length::millimeter>;
    /// let celsius = ThermodynamicTemperature::new::<unit::thermodynamic_temperature::degree_celsius>;
    /// let line = Line::new(LineSpec {
    ///     forebay: Level::from_m(160.0),
    ///     points: vec![
    ///         Point { chainage: PipeLength::from_m(0.0), level: Level::from_m(158.0) },
    ///         Point { chainage: PipeLength::from_m(400.0), level: Level::from_m(100.0) },
    ///     ],
    ///     runs: vec![Run {
    ///         to: PipeLength::from_m(400.0),
    ///         bore: mm(150.0),
    ///         friction: FrictionLaw::ColebrookWhite { roughness: mm(0.05) },
    ///     }],
    ///     losses: vec![],
    ///     water: Water::at(celsius(10.0))?,
    ///     gravity: standard_gravity(),
    /// })?;
    /// let template = NozzleTemplate {
    ///     count: 2,
    ///     velocity_coefficient: 0.97,
    ///     contraction_coefficient: 1.0,
    ///     axis: Level::from_m(101.0),
    ///     branch_k: 0.5,
    ///     branch_bore: mm(80.0),
    /// };
    /// let solved = line.flow_for(&template.set(mm(25.0))?)?;
    /// let back = line.bore_for(solved.grade.flow, &template)?;
    /// assert!((back.bore.get::<unit::length::millimeter>() - 25.0).abs() < 1e-9);
    /// # Ok::<(), Box<dyn std::error::Error>>(())
    /// ```
    pub fn flow_for(&self, set: &NozzleSet) -> Result<Solved, LineError> {
        let branch = Branch::new(set.branch_k, set.branch_bore)?;
        let Some(first) = set.nozzles.first() else {
            return Err(LineError::NoNozzle);
        };
        for (index, nozzle) in set.nozzles.iter().enumerate() {
            if nozzle.bore() > set.branch_bore {
                return Err(LineError::NozzleWiderThanBranch {
                    nozzle: index,
                    bore: nozzle.bore(),
                    branch: set.branch_bore,
                });
            }
        }
        let gross = self.gross_head(set.axis)?;
        let conductance: f64 = set
            .nozzles
            .iter()
            .map(|nozzle| branch.conductance(nozzle))
            .sum();
        let resistance = 1.0 / (2.0 * self.gravity * conductance * conductance);
        if !resistance.is_finite() {
            return Err(LineError::Nozzle(NozzleError::Bore(first.bore())));
        }
        let mut balance = |q: f64| gross - self.head_lost(q) - resistance * q * q;
        // A hair above the flow without losses, so that rounding cannot hide
        // the change of sign.
        let most = (gross / resistance).sqrt() * (1.0 + 1e-12);
        let solution = Bracket::new(0.0, most, &mut balance)
            .map_err(|_| LineError::NoHead {
                forebay: self.spec.forebay,
                axis: set.axis,
            })?
            .solve(Tolerance::default(), &mut balance);
        self.solved(set, &branch, solution.root, solution)
    }

    /// The bore of equal nozzles for a given flow.
    ///
    /// # Equation
    /// Net head is what the line and the branch leave; the bore follows from
    /// Q/n = Cd a sqrt(2 g Hn) in closed form.
    ///
    /// # Errors
    /// A template that cannot be used, a flow that is not positive, no head
    /// above the axis, or [`LineError::FlowTooGreat`] with the greatest flow
    /// the line can pass: that with every nozzle as wide as its branch.
    pub fn bore_for(
        &self,
        flow: VolumeRate,
        template: &NozzleTemplate,
    ) -> Result<Solved, LineError> {
        let branch = template.check()?;
        let q = flow.get::<cubic_meter_per_second>();
        if !(q > 0.0 && q.is_finite()) {
            return Err(LineError::Flow(flow));
        }
        let net = self.net_head_of(template)?(q);
        let too_great = || -> Result<Solved, LineError> {
            let widest = self.flow_for(&template.set(template.branch_bore)?)?;
            Err(LineError::FlowTooGreat {
                flow,
                greatest: widest.grade.flow,
            })
        };
        if net <= 0.0 {
            return too_great();
        }
        let each = q / template.jets();
        let bore = bore_for_flow(
            VolumeRate::new::<cubic_meter_per_second>(each),
            Head::from_m(net),
            self.spec.gravity,
            template.velocity_coefficient,
            template.contraction_coefficient,
        )?;
        if bore > template.branch_bore {
            return too_great();
        }
        let set = template.set(bore)?;
        let passed: f64 = set.nozzles.iter().map(free_conductance).sum();
        let needed = q / passed;
        let solution = Solution {
            root: bore.get::<meter>(),
            residual: net - needed * needed / (2.0 * self.gravity),
            iterations: 0,
            stop: Stop::ClosedForm,
        };
        self.solved(&set, &branch, q, solution)
    }

    /// Forebay above the jet axis, m; an error unless positive.
    pub(super) fn gross_head(&self, axis: Level) -> Result<f64, LineError> {
        let gross = (self.spec.forebay - axis).m();
        if gross > 0.0 && gross.is_finite() {
            Ok(gross)
        } else {
            Err(LineError::NoHead {
                forebay: self.spec.forebay,
                axis,
            })
        }
    }

    /// Head that line and branches leave for equal jets, m, as a function of
    /// the flow, m3/s; may be negative.
    pub(super) fn net_head_of(
        &self,
        template: &NozzleTemplate,
    ) -> Result<impl Fn(f64) -> f64 + '_, LineError> {
        let branch = template.check()?;
        let gross = self.gross_head(template.axis)?;
        let (gravity, jets) = (self.gravity, template.jets());
        Ok(move |flow: f64| {
            let velocity = flow / (jets * branch.area);
            gross - self.head_lost(flow) - branch.k * velocity * velocity / (2.0 * gravity)
        })
    }

    fn solved(
        &self,
        set: &NozzleSet,
        branch: &Branch,
        flow: f64,
        solution: Solution,
    ) -> Result<Solved, LineError> {
        let grade = self.grade(VolumeRate::new::<cubic_meter_per_second>(flow))?;
        let total: f64 = set
            .nozzles
            .iter()
            .map(|nozzle| branch.conductance(nozzle))
            .sum();
        let jets: Vec<Jet> = set
            .nozzles
            .iter()
            .map(|nozzle| self.jet(nozzle, branch, flow * branch.conductance(nozzle) / total))
            .collect::<Result<_, _>>()?;
        let Some(widest) = jets
            .iter()
            .max_by(|a, b| a.bore.get::<meter>().total_cmp(&b.bore.get::<meter>()))
        else {
            return Err(LineError::NoNozzle);
        };
        let share = |jet: &Jet| jet.flow.get::<cubic_meter_per_second>() / flow;
        let net_head = jets.iter().map(|jet| jet.net_head.m() * share(jet)).sum();
        let branch_loss = jets
            .iter()
            .map(|jet| {
                let velocity = jet.flow.get::<cubic_meter_per_second>() / branch.area;
                branch.k * velocity * velocity / (2.0 * self.gravity) * share(jet)
            })
            .sum();
        let power = jets.iter().map(|jet| jet.power.get::<watt>()).sum();
        Ok(Solved {
            net_head: Head::from_m(net_head),
            jet_velocity: widest.velocity,
            jet_diameter: widest.diameter,
            bore: widest.bore,
            jet_power: Power::new::<watt>(power),
            branch_loss: Head::from_m(branch_loss),
            grade,
            jets,
            solution,
        })
    }

    fn jet(&self, nozzle: &Nozzle, branch: &Branch, flow: f64) -> Result<Jet, LineError> {
        let spouting = flow / free_conductance(nozzle);
        let net = spouting * spouting / (2.0 * self.gravity);
        let approach = flow / branch.area;
        let pressure_head = Head::from_m(net - approach * approach / (2.0 * self.gravity));
        let net_head = Head::from_m(net);
        let flow = VolumeRate::new::<cubic_meter_per_second>(flow);
        let velocity = nozzle.jet_velocity(net_head, self.spec.gravity)?;
        let density = self.spec.water.density();
        Ok(Jet {
            bore: nozzle.bore(),
            flow,
            net_head,
            pressure: pressure_head.pressure(density, self.spec.gravity),
            velocity,
            diameter: nozzle.jet_diameter(),
            power: jet_power(density, flow, velocity),
        })
    }
}

impl NozzleTemplate {
    fn check(&self) -> Result<Branch, LineError> {
        check_coefficients(self.velocity_coefficient, self.contraction_coefficient)?;
        if self.count == 0 {
            return Err(LineError::NoNozzle);
        }
        Branch::new(self.branch_k, self.branch_bore)
    }

    /// Number of jets as a factor.
    #[expect(
        clippy::cast_precision_loss,
        reason = "a count of nozzles is far below 2^52"
    )]
    fn jets(&self) -> f64 {
        self.count as f64
    }

    /// The set of equal nozzles of this template with a given bore.
    ///
    /// # Errors
    /// [`LineError::Nozzle`] when bore or coefficients cannot be used.
    pub fn set(&self, bore: Length) -> Result<NozzleSet, LineError> {
        let nozzle = Nozzle::new(
            bore,
            self.velocity_coefficient,
            self.contraction_coefficient,
        )?;
        Ok(NozzleSet {
            nozzles: vec![nozzle; self.count],
            axis: self.axis,
            branch_k: self.branch_k,
            branch_bore: self.branch_bore,
        })
    }
}
