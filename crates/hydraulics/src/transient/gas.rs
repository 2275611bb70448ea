//! The discrete gas cavity.

use super::error::TransientError;
use super::joint::flow_of;
use crate::solve::{Bracket, Tolerance};

/// The discrete gas cavity model: a little free gas stands at every node and
/// grows into a cavity where the pressure comes near that of vapour.
///
/// # Equation
/// V (E - z - hv) = constant (isothermal), the constant being `share` of the
/// cell's volume at the site's atmospheric pressure; dV/dt is what flows out
/// of the node less what flows in, taken at the end of each step (weight 1:
/// no oscillation of the cavity with itself). Wylie, Journal of Fluids
/// Engineering 106(3), 1984; Bergant, Simpson and Tijsseling, Journal of
/// Fluids and Structures 22, 2006 (paper found, pages not seen: from memory).
/// z is the node's own level, raised by what a surveyed high point beside it
/// stands above the straight line between nodes. V is above 0 by its equation, and what it takes up is kept in the balance
/// of volume.
///
/// # Validity
/// At a joint the gas stands on its upper side; below a joint that loses much
/// head the pressure may come out lower than that of vapour by that loss.
/// Cavities small against their cell. Peaks after a cavity collapses depend on
/// the grid (they do not converge): such a run is for a warning only.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GasCavity {
    /// Share of free gas at atmospheric pressure, above 0 and at most 1e-5;
    /// 1e-7 as Wylie 1984 (from memory).
    pub share: f64,
}

impl Default for GasCavity {
    fn default() -> Self {
        Self { share: 1e-7 }
    }
}

impl GasCavity {
    pub(super) fn check(self) -> Result<(), TransientError> {
        if self.share > 0.0 && self.share <= 1e-5 {
            Ok(())
        } else {
            Err(TransientError::GasCavity)
        }
    }
}

/// Head above `floor` (level plus vapour head) at a node with gas between two
/// pipes of one impedance.
///
/// `sum` is P + M, `void` the volume before, `constant` volume times head. The
/// positive root of (2 dt/B) x^2 + (V - dt (P + M - 2 floor)/B) x = constant.
pub(super) fn between(sum: f64, b: f64, floor: f64, void: f64, constant: f64, dt: f64) -> f64 {
    let per_head = dt / b;
    let square = 2.0 * per_head;
    let linear = void - per_head * (sum - 2.0 * floor);
    let root = (linear * linear + 4.0 * square * constant).sqrt();
    if linear > 0.0 {
        2.0 * constant / (linear + root)
    } else {
        (root - linear) / (2.0 * square)
    }
}

/// What is known of an end node with gas before it is solved.
#[derive(Debug, Clone, Copy)]
pub(super) struct EndNode {
    /// P that arrived.
    pub(super) p: f64,
    /// Impedance of its pipe.
    pub(super) b: f64,
    /// Half a cell's friction, s2/m5.
    pub(super) half: f64,
    /// Level plus vapour head.
    pub(super) floor: f64,
    /// Volume before.
    pub(super) void: f64,
    /// Volume times head above the floor.
    pub(super) constant: f64,
    /// Step.
    pub(super) dt: f64,
}

impl EndNode {
    /// Head above the floor, flow in, flow out at the end of the step, where `outflow` is the
    /// flow out at a head and rises with it.
    pub(super) fn solve(&self, outflow: impl Fn(f64) -> f64) -> (f64, f64, f64) {
        let flows = |x: f64| {
            let e = self.floor + x;
            (flow_of(self.b, self.half, self.p - e), outflow(e))
        };
        // Volume by continuity less volume by gas law, times the head: rises
        // through its only root.
        let mut balance = |x: f64| {
            let (q_in, q_out) = flows(x);
            x * (self.void + self.dt * (q_out - q_in)) - self.constant
        };
        let before = self.constant / self.void;
        let (mut low, mut high) = (before, before);
        for _ in 0..200 {
            if balance(low) <= 0.0 {
                break;
            }
            low *= 0.5;
        }
        for _ in 0..200 {
            if balance(high) >= 0.0 {
                break;
            }
            high *= 2.0;
        }
        let x = match Bracket::new(low, high, &mut balance) {
            Ok(bracket) => bracket.solve(Tolerance::default(), &mut balance).root,
            // Not finite: the caller contains it.
            Err(_) => f64::NAN,
        };
        let (q_in, q_out) = flows(x);
        (x, q_in, q_out)
    }
}
