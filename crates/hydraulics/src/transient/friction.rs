//! Friction in a transient.

use crate::line::{Line, RunLayout};
use crate::math;
use crate::solve::{Bracket, Tolerance};

/// How friction follows the flow.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default, Hash)]
pub struct FrictionModel {
    /// `false`: the Darcy factor of each run stays that of the start (from
    /// shut: that of the flow with every nozzle at full stroke). `true`: it
    /// follows the flow through a table of f(Re), laminar included (but for the
    /// half cells at the joints, which keep that of the start).
    pub by_reynolds: bool,
    /// Adds unsteady friction by Brunone's model with Vitkovsky's sign.
    pub unsteady: bool,
}

/// Shear decay coefficient of Vardy and Brown.
///
/// # Equation
/// C* = 0.00476 to Re 2300; above, 7.41 / Re^kappa with
/// kappa = log10(14.3 / Re^0.05) (Vardy and Brown, Journal of Hydraulic
/// Research 33(4), 1995, smooth pipes; from memory).
#[must_use]
pub fn shear_decay(reynolds: f64) -> f64 {
    if reynolds <= crate::friction::LAMINAR_LIMIT {
        0.004_76
    } else {
        let kappa = math::log10(14.3 / math::pow(reynolds, 0.05));
        7.41 / math::pow(reynolds, kappa)
    }
}

/// Brunone's coefficient k = sqrt(C*)/2.
///
/// # Equation
/// The unsteady part of the head gradient is
/// k/(2 g) (dV/dt + a sign(V) |dV/dx|): Brunone, Golia and Greco 1991 with the
/// sign of Vitkovsky, Lambert, Simpson and Bergant 2000 (as in Bergant,
/// Simpson and Vitkovsky, Journal of Hydraulic Research 39(3), 2001; from
/// memory), k from [`shear_decay`].
#[must_use]
pub fn brunone_coefficient(reynolds: f64) -> f64 {
    0.5 * shear_decay(reynolds).sqrt()
}

/// Share of D = (P - M)/2 that friction takes in one cell, against |D|: even
/// steps, straight between.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Table {
    per_step: f64,
    shares: Vec<f64>,
}

/// Table steps up to the flow of reference.
const STEPS_TO_REFERENCE: usize = 64;
/// The table ends at this many times the flow of reference.
const REACH: usize = 4;

impl Table {
    /// For a cell of length `dx` in a run, impedance `b`; `reference` is the
    /// flow that falls on a row exactly.
    pub(super) fn new(line: &Line, run: &RunLayout, dx: f64, b: f64, reference: f64) -> Self {
        let lost = |q: f64| line.gradient_si(run, q) * dx;
        let at_reference = b * reference + 0.5 * lost(reference);
        let steps = super::grid::count(STEPS_TO_REFERENCE);
        let share = |row: usize| {
            let d = at_reference * super::grid::count(row) / steps;
            if row == STEPS_TO_REFERENCE {
                return lost(reference) / d;
            }
            if row == 0 {
                // Laminar friction is a fixed share: that of a creeping flow.
                let creep = 1e-6 * reference;
                return lost(creep) / (b * creep + 0.5 * lost(creep));
            }
            // D = B Q + loss/2 rises with Q, so the root is bracketed.
            let mut balance = |q: f64| b * q + 0.5 * lost(q) - d;
            let loose = Tolerance {
                relative: 1e-10,
                ..Tolerance::default()
            };
            let q = Bracket::new(0.0, d / b, &mut balance)
                .map_or(0.0, |bracket| bracket.solve(loose, &mut balance).root);
            lost(q) / d
        };
        Self {
            per_step: steps / at_reference,
            shares: (0..=STEPS_TO_REFERENCE * REACH).map(share).collect(),
        }
    }

    /// Share taken at |D|; beyond the table it grows as rough friction does.
    pub(super) fn share(&self, d: f64) -> f64 {
        let place = d * self.per_step;
        let last = self.shares.len() - 1;
        let end = super::grid::count(last);
        if place >= end {
            let share = self.shares.get(last).copied().unwrap_or(0.0);
            let grown = share / (1.0 - share) * place / end;
            return grown / (1.0 + grown);
        }
        let row = super::grid::nearest((place - 0.5).max(0.0)).min(last - 1);
        match self.shares.get(row..row + 2) {
            Some([a, b]) => a + (b - a) * (place - super::grid::count(row)),
            _ => f64::NAN,
        }
    }
}
