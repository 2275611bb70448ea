//! Findings as JSON, for `cargo task evaluate` and for tests that compare a
//! print with what was computed.
//!
//! Every number is SI with its unit in the name; a number that is not known is
//! left out, and `gaps` says why. The schema made from these types is shipped
//! beside that of the file.

use crate::book::Book;
use crate::evaluate::Findings;
use crate::figure::{Figure, Gap};
use crate::measure::Measure;
use crate::relief::Collects;
use crate::resolve::bends::Made;
use crate::schedule::schedule;
use crate::transient::EventKind;
use crate::units::Kind;
use crate::verdict::{Check, CheckKind, Verdict, Weakest};
use hydraulics::quantity::PipeLength;
use schemars::JsonSchema;
use serde::Serialize;
use uom::si::length::meter;
use uom::si::linear_mass_density::kilogram_per_meter;
use uom::si::mass::kilogram;
use uom::si::pressure::pascal;

/// What a book, a stretch or a check comes to.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, JsonSchema)]
#[serde(rename_all = "snake_case")]
pub enum VerdictName {
    /// Within what is allowed, with margin.
    Holds,
    /// Within what is allowed, with little margin.
    Tight,
    /// A check it needs is not made, or cannot be trusted.
    Unsettled,
    /// Beyond what is allowed.
    Fails,
}

impl From<Verdict> for VerdictName {
    fn from(v: Verdict) -> VerdictName {
        match v {
            Verdict::Holds => VerdictName::Holds,
            Verdict::Tight => VerdictName::Tight,
            Verdict::Unsettled => VerdictName::Unsettled,
            Verdict::Fails => VerdictName::Fails,
        }
    }
}

/// The findings of one book.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct Report {
    /// The edition that computed it.
    pub computed_by: String,
    /// The book's key.
    pub book: String,
    /// The site's name.
    pub site: String,
    /// Whether the site is invented.
    pub invented: bool,
    /// The book's revision.
    pub revision: u64,
    /// The worst verdict of all stretches.
    pub verdict: VerdictName,
    /// Gross head, normal forebay level above the jets.
    pub gross_head_m: Option<f64>,
    /// Length of pipe along the slope.
    pub pipe_length_m: Option<f64>,
    /// Flow that passes with all jets open.
    pub flow_m3_s: Option<f64>,
    /// Head lost from forebay to nozzle.
    pub head_loss_m: Option<f64>,
    /// The same as a share of gross head.
    pub head_loss_share: Option<f64>,
    /// Net head at the nozzle.
    pub net_head_m: Option<f64>,
    /// Bore of each nozzle.
    pub nozzle_bore_m: Option<f64>,
    /// Diameter of each jet.
    pub jet_diameter_m: Option<f64>,
    /// Velocity of the jets.
    pub jet_velocity_m_s: Option<f64>,
    /// Power in all jets.
    pub jet_power_w: Option<f64>,
    /// Lowest pressure in running, gauge.
    pub lowest_pressure_pa: Option<f64>,
    /// Where that is, along the pipe.
    pub lowest_pressure_at_m: Option<f64>,
    /// Time for a pressure wave to run up the line and back.
    pub pipe_period_s: Option<f64>,
    /// The whole transient.
    pub surge: Option<SurgeReport>,
    /// Lengths below atmospheric pressure in running: from and to, along the
    /// pipe.
    pub below_atmosphere_m: Vec<(f64, f64)>,
    /// How the survey closes, where a known fall is entered.
    pub closing: Option<ClosingReport>,
    /// Water over the top of the intake at the lowest forebay level.
    pub intake_submergence_m: Option<f64>,
    /// What Gordon's criterion asks.
    pub intake_submergence_needed_m: Option<f64>,
    /// Every set of open jets.
    pub jet_sets: Vec<JetSetReport>,
    /// Stations, down the line.
    pub stations: Vec<StationReport>,
    /// Turns of the line, and how the pipe is turned.
    pub turns: Vec<TurnReport>,
    /// Places where air collects: a vent is needed.
    pub vents: Vec<VentReport>,
    /// Low points: a drain is needed.
    pub drains: Vec<DrainReport>,
    /// Changes of bore between stretches.
    pub reducers: Vec<ReducerReport>,
    /// Stretch by stretch, down the line.
    pub stretches: Vec<StretchReport>,
    /// Fittings.
    pub fittings: Vec<FittingReport>,
    /// Mass of pipe in all.
    pub pipe_mass_kg: Option<f64>,
    /// Every figure that is not known, and why.
    pub gaps: Vec<GapReport>,
    /// What was taken for granted, in words.
    pub assumptions: Vec<String>,
    /// Cautions, in words.
    pub cautions: Vec<String>,
}

/// One set of open jets.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct JetSetReport {
    /// How many are open.
    pub open: u32,
    /// Flow through all of them.
    pub flow_m3_s: f64,
    /// Net head.
    pub net_head_m: f64,
    /// Head lost.
    pub head_loss_m: f64,
    /// Power in the open jets.
    pub jet_power_w: f64,
}

/// How a survey closes on a known fall.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct ClosingReport {
    /// Fall from the first station to the last as surveyed.
    pub surveyed_fall_m: f64,
    /// The known fall.
    pub known_fall_m: f64,
    /// The first less the second.
    pub error_m: f64,
    /// Length of the legs it was spread over, where it was.
    pub spread_over_m: Option<f64>,
}

/// One station.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct StationReport {
    /// Its number in the book.
    pub station: u32,
    /// Its name.
    pub name: String,
    /// Chainage along the pipe.
    pub at_m: f64,
    /// Horizontal distance from the first station.
    pub horizontal_m: f64,
    /// Level of the pipe's axis.
    pub level_m: f64,
    /// Highest forebay level above the axis.
    pub static_head_m: Option<f64>,
    /// The same as gauge pressure.
    pub standing_pressure_pa: Option<f64>,
    /// Level of the grade line with all jets open.
    pub grade_line_m: Option<f64>,
    /// Running gauge pressure with all jets open.
    pub running_pressure_pa: Option<f64>,
    /// Level of the grade line with 1, 2, ... jets open.
    pub grade_line_by_jets_m: Vec<f64>,
    /// Running gauge pressure with 1, 2, ... jets open.
    pub running_pressure_by_jets_pa: Vec<f64>,
    /// Standing pressure over what the pipe may bear at its warmest wall.
    pub share_used: Option<f64>,
}

/// The turn of the line at a station.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct TurnReport {
    /// The station.
    pub station: u32,
    /// Chainage.
    pub at_m: f64,
    /// Turn in the vertical, above zero where the pipe steepens downhill.
    pub vertical_deg: f64,
    /// Turn on the plan, to the left below zero.
    pub plan_deg: Option<f64>,
    /// True deflection.
    pub deflection_deg: Option<f64>,
    /// "joints", "smooth", "mitre", or "fitting N".
    pub made: Option<String>,
    /// Loss coefficient of the bend the survey asks for.
    pub loss_coefficient: Option<f64>,
}

/// A place where air collects.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct VentReport {
    /// The station.
    pub station: u32,
    /// Chainage.
    pub at_m: f64,
    /// Whether it is a high point; else the pipe turns down there.
    pub high_point: bool,
}

/// A low point.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct DrainReport {
    /// The station.
    pub station: u32,
    /// Chainage.
    pub at_m: f64,
}

/// A change of bore between two stretches.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct ReducerReport {
    /// Chainage.
    pub at_m: f64,
    /// Bore above.
    pub from_bore_m: f64,
    /// Bore below.
    pub to_bore_m: f64,
    /// One outside diameter: a step in the bore, no reducer to order.
    pub step_only: bool,
}

/// One stretch.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct StretchReport {
    /// Its number in the book.
    pub stretch: u32,
    /// Chainage of its upper end.
    pub from_m: Option<f64>,
    /// Chainage of its lower end.
    pub to_m: Option<f64>,
    /// True length.
    pub length_m: Option<f64>,
    /// The pipe's id.
    pub pipe: Option<String>,
    /// Its designation.
    pub designation: Option<String>,
    /// Its rating as printed.
    pub class: Option<String>,
    /// Outside diameter.
    pub outside_diameter_m: Option<f64>,
    /// Least wall.
    pub wall_least_m: Option<f64>,
    /// Bore.
    pub bore_m: Option<f64>,
    /// Mean velocity.
    pub velocity_m_s: Option<f64>,
    /// Friction loss.
    pub friction_loss_m: Option<f64>,
    /// Highest standing pressure, gauge.
    pub standing_pressure_pa: Option<f64>,
    /// The same as head of water.
    pub standing_head_m: Option<f64>,
    /// Class needed for it, at the temperature the pipe's rating is given at.
    pub class_needed_pa: Option<f64>,
    /// Pressure the pipe may bear at the warmest wall.
    pub allowed_pressure_pa: Option<f64>,
    /// Pressure the weakest part may bear.
    pub weakest_pressure_pa: Option<f64>,
    /// Standing pressure over that.
    pub share_used: Option<f64>,
    /// Highest pressure in a surge, gauge.
    pub surge_pressure_pa: Option<f64>,
    /// Where, along the pipe.
    pub surge_at_m: Option<f64>,
    /// The event that brings it about: `closing`, `blocked`, `opening`, `slam`.
    pub surge_event: Option<&'static str>,
    /// Jets that are open when it begins.
    pub surge_jets_open: Option<u32>,
    /// Stroke they stand at, as a share of full.
    pub surge_opening: Option<f64>,
    /// Highest pressure in a surge over what the weakest part may bear in one.
    pub surge_share_used: Option<f64>,
    /// Lowest pressure in a surge, gauge, from the lowest forebay level.
    pub surge_lowest_pa: Option<f64>,
    /// Outside over inside pressure at that lowest, as a share of the collapse
    /// pressure allowed.
    pub surge_collapse_share: Option<f64>,
    /// Quick surge estimate; settles nothing.
    pub quick_surge_m: Option<f64>,
    /// Wave speed.
    pub wave_speed_m_s: Option<f64>,
    /// Pressure of the air: full vacuum.
    pub vacuum_pa: Option<f64>,
    /// Outside pressure the free pipe stands, safety factor taken off.
    pub collapse_allowed_pa: Option<f64>,
    /// Mass of the length laid.
    pub mass_kg: Option<f64>,
    /// Mass per length.
    pub mass_kg_m: Option<f64>,
    /// Length to order, spare share included.
    pub order_length_m: Option<f64>,
    /// What to order, one line a way it is sold.
    pub orders: Vec<OrderReport>,
    /// The worst of its checks.
    pub verdict: VerdictName,
    /// Every check.
    pub checks: Vec<CheckReport>,
}

/// What to order.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct OrderReport {
    /// Coils, not straight lengths.
    pub coil: bool,
    /// Length of a piece.
    pub piece_m: f64,
    /// How many.
    pub pieces: u32,
    /// Joints between the pieces that lie in the stretch.
    pub joints: u32,
}

/// One check.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct CheckReport {
    /// What is checked.
    pub check: &'static str,
    /// What it comes to.
    pub verdict: VerdictName,
    /// The pressure that decides; for `passes_flow` there is none, but a head.
    pub found_pa: Option<f64>,
    /// The pressure allowed.
    pub allowed_pa: Option<f64>,
    /// The head that decides, for `passes_flow`.
    pub found_m: Option<f64>,
    /// The head there is, for `passes_flow`.
    pub allowed_m: Option<f64>,
    /// The first over the second.
    pub share: Option<f64>,
    /// Where, along the pipe.
    pub at_m: Option<f64>,
    /// The part that bears least: "pipe", "jets" or "fitting N".
    pub weakest: Option<String>,
    /// What keeps it from being settled, or what is wrong, in words.
    pub why: Option<String>,
}

/// One fitting.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct FittingReport {
    /// Its number in the book.
    pub fitting: u32,
    /// Chainage.
    pub at_m: Option<f64>,
    /// Loss coefficient of all of them together.
    pub loss_coefficient: Option<f64>,
    /// Rating entered.
    pub rating_pa: Option<f64>,
}

/// A figure that is not known.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct GapReport {
    /// The figure's name in this report.
    pub figure: String,
    /// `unsettled` for something missing, `wrong` for something that cannot
    /// be.
    pub state: &'static str,
    /// Why, in words.
    pub why: String,
}

/// The words a report needs and this crate does not have.
#[derive(Clone, Copy)]
pub struct Sayings<'a> {
    /// Why there is no figure.
    pub gap: &'a dyn Fn(&Gap) -> String,
    /// An assumption.
    pub assumption: &'a dyn Fn(&crate::resolve::Assumption) -> String,
    /// A caution.
    pub caution: &'a dyn Fn(&crate::caution::Caution) -> String,
}

impl std::fmt::Debug for Sayings<'_> {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str("Sayings")
    }
}

/// Keeps the known, notes the rest.
struct Noting<'a> {
    say: Sayings<'a>,
    gaps: Vec<GapReport>,
}

impl Noting<'_> {
    fn take<T>(&mut self, name: &str, figure: &Figure<T>, si: impl Fn(&T) -> f64) -> Option<f64> {
        self.figure(name, figure).map(si)
    }

    fn figure<'f, T>(&mut self, name: &str, figure: &'f Figure<T>) -> Option<&'f T> {
        match figure {
            Ok(value) => Some(value),
            Err(gap) => {
                let state = match gap {
                    Gap::Unsettled(_) => "unsettled",
                    Gap::Wrong(_) => "wrong",
                };
                self.gaps.push(GapReport {
                    figure: name.to_owned(),
                    state,
                    why: (self.say.gap)(gap),
                });
                None
            }
        }
    }
}

fn si(value: impl Into<Measure>) -> f64 {
    value.into().value
}

/// The report of a book.
#[must_use]
pub fn report(book: &Book, found: &Findings, say: Sayings<'_>) -> Report {
    let mut n = Noting {
        say,
        gaps: Vec::new(),
    };
    let steady = &found.steady;
    let solved = &steady.solved;
    let plan = schedule(book, found);
    Report {
        computed_by: crate::format::program(),
        book: book.id.clone(),
        site: book.site.name.clone(),
        invented: book.invented,
        revision: book.revision,
        verdict: found.judged.verdict.into(),
        gross_head_m: n.take("gross_head_m", &found.resolved.gross_head, |x| x.m()),
        pipe_length_m: n.take("pipe_length_m", &found.resolved.profile.pipe_length, |x| {
            x.m()
        }),
        flow_m3_s: n.take("flow_m3_s", &steady.flow, |x| si(*x)),
        head_loss_m: n.take("head_loss_m", &steady.loss, |x| x.m()),
        head_loss_share: n.take("head_loss_share", &steady.loss_share, |x| *x),
        net_head_m: n.take("net_head_m", solved, |s| s.net_head.m()),
        nozzle_bore_m: solved.as_ref().ok().map(|s| s.bore.get::<meter>()),
        jet_diameter_m: solved.as_ref().ok().map(|s| s.jet_diameter.get::<meter>()),
        jet_velocity_m_s: solved.as_ref().ok().map(|s| si(s.jet_velocity)),
        jet_power_w: solved.as_ref().ok().map(|s| si(s.jet_power)),
        lowest_pressure_pa: n.take("lowest_pressure_pa", &steady.lowest, |l| l.pressure.pa()),
        lowest_pressure_at_m: steady.lowest.as_ref().ok().map(|l| l.at.m()),
        pipe_period_s: n.take("pipe_period_s", &found.transient.period, |t| si(*t)),
        surge: surge(found, &plan),
        below_atmosphere_m: steady
            .suction
            .iter()
            .flatten()
            .map(|s| (s.from.m(), s.to.m()))
            .collect(),
        closing: n
            .figure("closing", &found.resolved.profile.closing)
            .copied()
            .flatten()
            .map(|c| ClosingReport {
                surveyed_fall_m: c.surveyed.m(),
                known_fall_m: c.known.m(),
                error_m: c.error.m(),
                spread_over_m: c.spread_over.map(PipeLength::m),
            }),
        intake_submergence_m: n.take("intake_submergence_m", &found.intake.submergence, |s| {
            s.found.m()
        }),
        intake_submergence_needed_m: found
            .intake
            .submergence
            .as_ref()
            .ok()
            .map(|s| s.needed.get::<meter>()),
        stations: stations(found),
        turns: turns(found),
        vents: n
            .figure("vents", &found.relief.vents)
            .map(|vents| {
                vents
                    .iter()
                    .map(|v| VentReport {
                        station: v.station,
                        at_m: v.at.m(),
                        high_point: v.why == Collects::HighPoint,
                    })
                    .collect()
            })
            .unwrap_or_default(),
        drains: found
            .relief
            .drains
            .iter()
            .flatten()
            .map(|d| DrainReport {
                station: d.station,
                at_m: d.at.m(),
            })
            .collect(),
        reducers: plan
            .reducers
            .iter()
            .flatten()
            .map(|r| ReducerReport {
                at_m: r.at.m(),
                from_bore_m: r.from.get::<meter>(),
                to_bore_m: r.to.get::<meter>(),
                step_only: r.step_only,
            })
            .collect(),
        jet_sets: found
            .operation
            .sets
            .iter()
            .flatten()
            .map(|s| JetSetReport {
                open: s.open,
                flow_m3_s: si(s.flow),
                net_head_m: s.net_head.m(),
                head_loss_m: s.loss.m(),
                jet_power_w: si(s.power),
            })
            .collect(),
        stretches: (0..found.resolved.stretches.len())
            .map(|i| stretch(found, &plan, i, &mut n))
            .collect(),
        fittings: found
            .resolved
            .fittings
            .iter()
            .zip(&steady.fittings)
            .map(|(placed, (_, loss))| FittingReport {
                fitting: placed.id,
                at_m: n.take(&format!("fittings[{}].at_m", placed.id), &placed.at, |x| {
                    x.m()
                }),
                loss_coefficient: n.take(
                    &format!("fittings[{}].loss_coefficient", placed.id),
                    loss,
                    |l| l.k,
                ),
                rating_pa: placed.rating.clone().ok().flatten().map(|r| r.pa()),
            })
            .collect(),
        pipe_mass_kg: plan.mass.as_ref().ok().map(|m| m.get::<kilogram>()),
        gaps: n.gaps,
        assumptions: found.assumptions().map(|a| (say.assumption)(a)).collect(),
        cautions: found
            .judged
            .cautions
            .iter()
            .map(|c| (say.caution)(c))
            .collect(),
    }
}

fn stations(found: &Findings) -> Vec<StationReport> {
    let usable = &found.resolved.profile.usable;
    usable
        .iter()
        .zip(&found.stations)
        .map(|(s, f)| {
            let sets = f.sets.as_ref().map_or(&[][..], |sets| &sets[..]);
            StationReport {
                station: s.id,
                name: s.name.clone(),
                at_m: s.chainage.m(),
                horizontal_m: s.horizontal.m(),
                level_m: s.level.m(),
                static_head_m: f.static_head.as_ref().ok().map(|h| h.m()),
                standing_pressure_pa: f.standing.as_ref().ok().map(|p| p.pa()),
                grade_line_m: f.running.as_ref().ok().map(|r| r.grade.m()),
                running_pressure_pa: f.running.as_ref().ok().map(|r| r.pressure.pa()),
                grade_line_by_jets_m: sets.iter().map(|r| r.grade.m()).collect(),
                running_pressure_by_jets_pa: sets.iter().map(|r| r.pressure.pa()).collect(),
                share_used: f.share.as_ref().ok().copied(),
            }
        })
        .collect()
}

fn turns(found: &Findings) -> Vec<TurnReport> {
    let mut losses = found.steady.bends.iter().peekable();
    found
        .resolved
        .turns
        .iter()
        .map(|turn| {
            let loss = losses.next_if(|(station, _)| *station == turn.station);
            TurnReport {
                station: turn.station,
                at_m: turn.at.m(),
                vertical_deg: turn.vertical_deg(),
                plan_deg: turn.plan_deg.as_ref().ok().copied(),
                deflection_deg: turn.deflection_deg.as_ref().ok().copied(),
                made: turn.made.as_ref().ok().map(|made| match made {
                    Made::Taken => "joints".to_owned(),
                    Made::Smooth { .. } => "smooth".to_owned(),
                    Made::Mitre => "mitre".to_owned(),
                    Made::ByHand(id) => format!("fitting {id}"),
                }),
                loss_coefficient: loss.and_then(|(_, l)| l.as_ref().ok()).map(|l| l.k),
            }
        })
        .collect()
}

fn stretch(
    found: &Findings,
    plan: &crate::schedule::Schedule,
    index: usize,
    n: &mut Noting<'_>,
) -> StretchReport {
    let placed = &found.resolved.stretches[index];
    let id = placed.id;
    let name = |what: &str| format!("stretches[{id}].{what}");
    let wall = found.walls.stretches.get(index);
    let pipe = placed.pipe.as_ref().ok();
    let run = found.steady.stretches.get(index).map(|(_, r)| r);
    let quick = found.transient.quick.get(index).map(|(_, q)| q);
    let peaks = found.transient.peaks.as_ref().ok();
    let highest = peaks
        .and_then(|p| p.stretches.get(index))
        .map(|s| &s.highest);
    let order = plan
        .lines
        .iter()
        .find(|(s, _)| *s == id)
        .and_then(|(_, l)| l.as_ref().ok());
    let verdict = found.judged.stretches.iter().find(|v| v.stretch == id);
    n.take(&name("pipe"), &placed.pipe, |_| 0.0);
    StretchReport {
        stretch: id,
        from_m: n.take(&name("from_m"), &placed.span, |s| s.from.m()),
        to_m: placed.span.as_ref().ok().map(|s| s.to.m()),
        length_m: placed.span.as_ref().ok().map(|s| s.length().m()),
        pipe: pipe.map(|p| p.id.clone()),
        designation: pipe.map(|p| p.designation.clone()),
        class: pipe.map(|p| crate::sweep::class(p)),
        outside_diameter_m: pipe.map(|p| p.outside_diameter.get::<meter>()),
        wall_least_m: pipe.map(|p| p.wall_min.get::<meter>()),
        bore_m: pipe.map(|p| p.bore().get::<meter>()),
        velocity_m_s: run.and_then(|r| n.take(&name("velocity_m_s"), r, |r| si(r.velocity))),
        friction_loss_m: run
            .and_then(|r| r.as_ref().ok())
            .map(|r| r.friction_loss.m()),
        standing_pressure_pa: wall.and_then(|w| {
            n.take(&name("standing_pressure_pa"), &w.standing, |s| {
                s.pressure.pa()
            })
        }),
        standing_head_m: order
            .and_then(|o| o.highest_static.as_ref().ok())
            .map(|h| h.m()),
        class_needed_pa: wall
            .and_then(|w| w.class_needed.as_ref().ok())
            .map(|p| p.pa()),
        allowed_pressure_pa: wall.and_then(|w| {
            n.take(&name("allowed_pressure_pa"), &w.allowable, |a| {
                a.pressure.get::<pascal>()
            })
        }),
        weakest_pressure_pa: wall
            .and_then(|w| w.bearing.as_ref().ok())
            .map(|b| b.pressure.pa()),
        share_used: wall.and_then(|w| w.share.as_ref().ok().copied()),
        surge_pressure_pa: wall
            .and_then(|w| n.take(&name("surge_pressure_pa"), &w.surge, |s| s.pressure.pa())),
        surge_at_m: wall.and_then(|w| w.surge.as_ref().ok()).map(|s| s.at.m()),
        surge_event: highest.map(|s| event(s.by.event)),
        surge_jets_open: highest.map(|s| s.by.open),
        surge_opening: highest.map(|s| s.by.opening),
        surge_share_used: wall.and_then(|w| w.surge_share.as_ref().ok().copied()),
        surge_lowest_pa: wall
            .and_then(|w| w.surge_lowest.as_ref().ok())
            .map(|s| s.pressure.pa()),
        surge_collapse_share: wall
            .and_then(|w| w.collapse_in_surge.as_ref().ok())
            .map(|c| c.share),
        quick_surge_m: quick.and_then(|q| n.take(&name("quick_surge_m"), q, |q| q.rise.m())),
        wave_speed_m_s: quick
            .and_then(|q| q.as_ref().ok())
            .map(|q| si(q.wave_speed)),
        vacuum_pa: wall
            .and_then(|w| w.collapse.as_ref().ok())
            .map(|c| c.vacuum.pa()),
        collapse_allowed_pa: wall.and_then(|w| {
            n.take(&name("collapse_allowed_pa"), &w.collapse, |c| {
                c.allowed.get::<pascal>()
            })
        }),
        mass_kg: order.map(|o| o.mass.get::<kilogram>()),
        mass_kg_m: order.map(|o| o.mass_per_length.get::<kilogram_per_meter>()),
        order_length_m: order.map(|o| o.order_length.m()),
        orders: order
            .map(|o| {
                o.orders
                    .iter()
                    .map(|x| OrderReport {
                        coil: x.kind == pipes::SupplyKind::Coil,
                        piece_m: x.piece.get::<meter>(),
                        pieces: x.pieces,
                        joints: x.joints,
                    })
                    .collect()
            })
            .unwrap_or_default(),
        verdict: verdict.map_or(VerdictName::Unsettled, |v| v.verdict.into()),
        checks: verdict
            .map(|v| v.checks.iter().map(|c| check(c, n)).collect())
            .unwrap_or_default(),
    }
}

fn event(kind: EventKind) -> &'static str {
    match kind {
        EventKind::Closing => "closing",
        EventKind::Blocked => "blocked",
        EventKind::Opening => "opening",
        EventKind::LoadLost => "load_lost",
        EventKind::Slam => "slam",
    }
}

/// The surge of the line as a whole.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct SurgeReport {
    /// Time from full stroke to shut.
    pub closing_s: f64,
    /// The reserve asked for holds: the drive may be that much faster.
    pub reserve_holds: bool,
    /// Time for a wave to run up the line and back.
    pub period_s: f64,
    /// Water starting time, all jets open.
    pub water_starting_s: f64,
    /// Highest grade level at the foot.
    pub foot_highest_m: f64,
    /// Every kind of event, from its worst start.
    pub events: Vec<EventReport>,
    /// Time step of the run shown.
    pub step_s: f64,
    /// Cells over the line.
    pub cells: usize,
    /// Greatest alteration of a wave speed, as a share.
    pub altered_share: f64,
    /// How far half the step moves the peak, as a share of the rise.
    pub moved_share: f64,
    /// What the balance of volume leaves over, as a share.
    pub volume_left_share: f64,
    /// What the balance of energy leaves over, as a share.
    pub energy_left_share: f64,
    /// How much the coarser grid falls short, as a share of the rise.
    pub coarse_error_share: f64,
}

/// One kind of event.
#[derive(Debug, Clone, PartialEq, Serialize, JsonSchema)]
pub struct EventReport {
    /// `closing`, `blocked`, `opening`, `load_lost`, `slam`.
    pub event: &'static str,
    /// Whether the verdicts rest on it.
    pub counts: bool,
    /// Jets open when it begins.
    pub jets_open: u32,
    /// Stroke they stand at, as a share of full.
    pub opening: f64,
    /// Highest grade level at the foot.
    pub foot_highest_m: f64,
    /// Lowest grade level at the foot.
    pub foot_lowest_m: f64,
    /// The water column parts.
    pub column_parts: bool,
}

fn surge(found: &Findings, plan: &crate::schedule::Schedule) -> Option<SurgeReport> {
    let surge = found.transient.surge.as_ref().ok()?;
    let trust = &surge.trust;
    Some(SurgeReport {
        closing_s: si(surge.closing),
        reserve_holds: plan.closing.as_ref().is_ok_and(|c| c.reserve_holds),
        period_s: si(surge.period),
        water_starting_s: si(surge.water_starting),
        foot_highest_m: surge.foot_highest.0.m(),
        events: surge
            .events
            .iter()
            .map(|e| EventReport {
                event: event(e.start.event),
                counts: e.counts,
                jets_open: e.start.open,
                opening: e.start.opening,
                foot_highest_m: e.foot_highest.m(),
                foot_lowest_m: e.foot_lowest.m(),
                column_parts: e.parted.is_some(),
            })
            .collect(),
        step_s: si(trust.step),
        cells: trust.cells,
        altered_share: trust
            .stretches
            .iter()
            .map(|s| s.altered.abs())
            .fold(0.0, f64::max),
        moved_share: trust.moved,
        volume_left_share: trust.balance.volume,
        energy_left_share: trust.balance.energy,
        coarse_error_share: trust.coarse_error,
    })
}

fn check(check: &Check, n: &Noting<'_>) -> CheckReport {
    CheckReport {
        check: match check.kind {
            CheckKind::PassesFlow => "passes_flow",
            CheckKind::StandingPressure => "standing_pressure",
            CheckKind::SurgePressure => "surge_pressure",
            CheckKind::LowestPressure => "lowest_pressure",
            CheckKind::Collapse => "collapse",
        },
        verdict: check.verdict.into(),
        found_pa: of_kind(check.found, Kind::Pressure),
        allowed_pa: of_kind(check.allowed, Kind::Pressure),
        found_m: of_kind(check.found, Kind::Head),
        allowed_m: of_kind(check.allowed, Kind::Head),
        share: check.share,
        at_m: check.at.map(PipeLength::m),
        weakest: check.weakest.map(|w| match w {
            Weakest::Pipe => "pipe".to_owned(),
            Weakest::Jets => "jets".to_owned(),
            Weakest::Fitting(id) => format!("fitting {id}"),
        }),
        why: check.gap.as_ref().map(|gap| (n.say.gap)(gap)),
    }
}

fn of_kind(measure: Option<Measure>, kind: Kind) -> Option<f64> {
    measure.filter(|m| m.kind == kind).map(|m| m.value)
}

/// The JSON Schema of a report, as shipped.
#[must_use]
pub fn schema() -> String {
    let schema = schemars::schema_for!(Report);
    let mut text = serde_json::to_string_pretty(&schema).unwrap_or_default();
    text.push('\n');
    text
}

/// The exit code of `cargo task evaluate`: 0 when all holds or is tight, 1
/// when anything fails, 3 when nothing fails but something is unsettled.
#[must_use]
pub fn exit_code(verdict: Verdict) -> u8 {
    match verdict {
        Verdict::Holds | Verdict::Tight => 0,
        Verdict::Fails => 1,
        Verdict::Unsettled => 3,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::demo;
    use crate::evaluate::evaluate;

    fn of(book: &Book) -> Report {
        let say = Sayings {
            gap: &|gap| format!("{gap:?}"),
            assumption: &|a| format!("{a:?}"),
            caution: &|c| format!("{c:?}"),
        };
        report(book, &evaluate(book), say)
    }

    #[test]
    fn the_demo_reports_every_figure() {
        let r = of(&demo("demo"));
        assert_eq!(r.gaps, vec![]);
        let json = serde_json::to_value(&r).unwrap();
        let nulls: Vec<&String> = json
            .as_object()
            .unwrap()
            .iter()
            .filter(|(_, v)| v.is_null())
            .map(|(k, _)| k)
            .collect();
        assert!(nulls.is_empty(), "{nulls:?}");
        assert_eq!(r.stations.len(), 15);
        for station in &r.stations {
            let json = serde_json::to_value(station).unwrap();
            assert!(json.as_object().unwrap().values().all(|v| !v.is_null()));
            assert_eq!(station.grade_line_by_jets_m.len(), 2);
        }
        assert_eq!(r.turns.len(), 13);
        assert_eq!(
            r.turns
                .iter()
                .filter(|t| t.loss_coefficient.is_some())
                .count(),
            2
        );
        assert_eq!(exit_code(Verdict::Unsettled), 3);
    }

    #[test]
    fn an_empty_book_reports_why_not() {
        let r = of(&Book::new("empty"));
        assert_eq!(r.verdict, VerdictName::Unsettled);
        for figure in ["gross_head_m", "flow_m3_s", "stretches[1].pipe"] {
            assert!(r.gaps.iter().any(|g| g.figure == figure), "{figure}");
        }
        assert!(r.gaps.iter().all(|g| !g.why.is_empty()));
    }

    #[test]
    fn the_schema_names_every_field_with_its_meaning() {
        let schema: serde_json::Value = serde_json::from_str(&schema()).unwrap();
        let properties = schema["properties"].as_object().unwrap();
        for (name, property) in properties {
            assert!(property["description"].is_string(), "{name}");
        }
    }
}
