//! Power against flow through a given pipe.

use super::jets::NozzleTemplate;
use super::layout::Line;
use super::spec::LineError;
use crate::quantity::{Head, Power, VolumeRate};
use crate::solve::{Bracket, Tolerance};
use uom::si::power::watt;
use uom::si::volume_rate::cubic_meter_per_second;

/// One point of the curve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CurvePoint {
    /// Flow.
    pub flow: VolumeRate,
    /// Net head.
    pub net_head: Head,
    /// Power in the jets.
    pub jet_power: Power,
    /// Share of the gross head (forebay to jet axis) that is lost.
    pub lost_share: f64,
}

/// Power in the jets against flow, the nozzles changing with the flow.
#[derive(Debug, Clone, PartialEq)]
pub struct PowerCurve {
    /// Points at evenly spaced flows from 0 to the greatest.
    pub points: Vec<CurvePoint>,
    /// The point of greatest power: near one third of the head lost. A limit
    /// to stay away from, not a target.
    pub greatest_power: CurvePoint,
    /// Flow at which all head is lost.
    pub greatest_flow: VolumeRate,
}

/// Flows sampled before the greatest power is closed in on.
const SAMPLES: u32 = 32;
/// Golden-section steps: narrows the flow to a share of 1e-9.
const GOLDEN_STEPS: u32 = 45;

impl Line {
    /// Power against flow, in `steps` even steps (at least 1).
    ///
    /// # Equation
    /// P = rho g Q Cv^2 Hn(Q), Hn what line and branches leave. Where losses
    /// go with Q^2 the greatest power lies where exactly one third of the head
    /// is lost (with Q^1.8, at 1/2.8). The nozzles are taken as wide as the
    /// flow needs: near the greatest flow that is wider than their branches.
    ///
    /// # Errors
    /// A template that cannot be used, or no head above the axis.
    pub fn power_curve(
        &self,
        template: &NozzleTemplate,
        steps: usize,
    ) -> Result<PowerCurve, LineError> {
        let net_head = self.net_head_of(template)?;
        let gross = self.gross_head(template.axis)?;
        let most = self.flow_losing(gross, template, &net_head)?;
        let factor = self.spec.water.density_si()
            * self.gravity
            * template.velocity_coefficient
            * template.velocity_coefficient;
        let point = |flow: f64| {
            let net = if flow < most {
                net_head(flow).max(0.0)
            } else {
                0.0
            };
            CurvePoint {
                flow: VolumeRate::new::<cubic_meter_per_second>(flow),
                net_head: Head::from_m(net),
                jet_power: Power::new::<watt>(factor * flow * net),
                lost_share: (gross - net) / gross,
            }
        };
        let best = greatest(most, |flow| flow * net_head(flow));
        #[expect(
            clippy::cast_precision_loss,
            reason = "a count of points is far below 2^52"
        )]
        let points = (0..=steps.max(1))
            .map(|step| point(most * (step as f64 / steps.max(1) as f64)))
            .collect();
        Ok(PowerCurve {
            points,
            greatest_power: point(best),
            greatest_flow: VolumeRate::new::<cubic_meter_per_second>(most),
        })
    }

    /// The flow that loses all head, m3/s.
    fn flow_losing(
        &self,
        gross: f64,
        template: &NozzleTemplate,
        net_head: impl Fn(f64) -> f64,
    ) -> Result<f64, LineError> {
        // Double until all head is lost: every law loses without bound.
        let area = self
            .runs
            .iter()
            .map(|run| run.area)
            .fold(f64::INFINITY, f64::min);
        let mut most = area * (2.0 * self.gravity * gross).sqrt();
        for _ in 0..200 {
            if net_head(most) <= 0.0 {
                break;
            }
            most *= 2.0;
        }
        let mut net_head = |flow: f64| net_head(flow);
        Ok(Bracket::new(0.0, most, &mut net_head)
            .map_err(|_| LineError::NoHead {
                forebay: self.spec.forebay,
                axis: template.axis,
            })?
            .solve(Tolerance::default(), &mut net_head)
            .root)
    }
}

/// Where a function of one hump between 0 and `end` is greatest: the best of a
/// row of samples, then golden-section search about it.
fn greatest(end: f64, function: impl Fn(f64) -> f64) -> f64 {
    let sample = |index: u32| end * f64::from(index) / f64::from(SAMPLES);
    let best = (1..SAMPLES)
        .max_by(|a, b| function(sample(*a)).total_cmp(&function(sample(*b))))
        .unwrap_or(1);
    let (mut low, mut high) = (sample(best - 1), sample(best + 1));
    let golden = 0.5 * (5.0_f64.sqrt() - 1.0);
    for _ in 0..GOLDEN_STEPS {
        let reach = golden * (high - low);
        if function(high - reach) < function(low + reach) {
            low = high - reach;
        } else {
            high = low + reach;
        }
    }
    0.5 * (low + high)
}
