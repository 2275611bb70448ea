//! How many digits each kind of quantity is shown with: the one table.

use workbook::units::{Kind, UnitSystem};

/// How many digits a kind is shown with, in the unit it is shown in.
#[derive(Debug, Clone, Copy)]
pub(super) struct Rule {
    /// Decimals for magnitudes below a bound, bounds rising.
    steps: &'static [(f64, i32)],
    /// Decimals from the last bound on.
    above: i32,
    /// Significant figures shown at least, so that small values do not vanish.
    pub(super) least: i32,
    /// Significant figures shown at most, so that large values do not claim
    /// what nobody knows.
    pub(super) most: i32,
    /// Whether zeros at the end of the decimals go.
    pub(super) trim: bool,
}

const RULE: Rule = Rule {
    steps: &[],
    above: 0,
    least: 0,
    most: 99,
    trim: false,
};

/// The one table of how figures are shown.
pub(super) fn rule(kind: Kind, system: UnitSystem) -> Rule {
    let us = system == UnitSystem::UsCustomary;
    match kind {
        // m, ft: chainage and lengths along the line.
        Kind::Distance => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // m, ft.
        Kind::Level => Rule { above: 1, ..RULE },
        // m, ft: net head and losses; a small loss keeps two figures.
        Kind::Head => Rule {
            steps: &[(10.0, 2), (1000.0, 1)],
            least: 2,
            ..RULE
        },
        // in: bores, walls, roughness.
        Kind::Bore if us => Rule {
            steps: &[(1.0, 3)],
            above: 2,
            least: 2,
            ..RULE
        },
        // mm: the same.
        Kind::Bore => Rule {
            steps: &[(100.0, 1)],
            least: 2,
            ..RULE
        },
        // L/s, gpm.
        Kind::Flow => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // psi.
        Kind::Pressure if us => Rule {
            steps: &[(10.0, 1)],
            least: 2,
            ..RULE
        },
        // bar.
        Kind::Pressure => Rule {
            steps: &[(10.0, 2)],
            above: 1,
            least: 2,
            ..RULE
        },
        // MPa, psi.
        Kind::Stress => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            most: 4,
            ..RULE
        },
        // °C, °F.
        Kind::Temperature => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // m/s, ft/s: water, jets and waves.
        Kind::Velocity => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // kW.
        Kind::Power => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 3,
            ..RULE
        },
        // s.
        Kind::Time => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // °.
        Kind::Angle => Rule {
            above: 1,
            trim: true,
            ..RULE
        },
        // %: a decimal up to just beyond the whole, so that a share just over
        // its limit does not read as the limit.
        Kind::Share => Rule {
            steps: &[(110.0, 1)],
            least: 2,
            ..RULE
        },
        // Counts and coefficients.
        Kind::Number => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 3,
            trim: true,
            ..RULE
        },
        // kg, lb.
        Kind::Mass => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // kg/m, lb/ft.
        Kind::MassPerLength => Rule {
            steps: &[(10.0, 2), (100.0, 1)],
            least: 2,
            ..RULE
        },
        // Money goes by hundredths.
        Kind::PricePerLength => Rule { above: 2, ..RULE },
    }
}

/// Decimals that still mean something of a kind, in the unit it is shown in:
/// beyond them stands noise of the change of units.
pub(super) fn most_decimals(kind: Kind) -> i32 {
    match kind {
        // A survey does not reach below the centimetre.
        Kind::Distance | Kind::Level | Kind::Temperature | Kind::Angle => 2,
        Kind::Head | Kind::Mass => 3,
        Kind::Share | Kind::PricePerLength => 4,
        Kind::Pressure | Kind::Velocity | Kind::Time | Kind::MassPerLength => 5,
        Kind::Flow | Kind::Power | Kind::Stress => 6,
        // Roughness of smooth pipe, in inches.
        Kind::Bore => 7,
        Kind::Number => 9,
    }
}

impl Rule {
    /// Decimals for this value; below zero, digits before the mark that are
    /// rounded away.
    pub(super) fn decimals(&self, x: f64, most_decimals: i32) -> i32 {
        let size = x.abs();
        let wanted = self
            .steps
            .iter()
            .find(|(bound, _)| size < *bound)
            .map_or(self.above, |(_, decimals)| *decimals);
        let Some(leading) = leading_place(size) else {
            return wanted;
        };
        wanted
            .max(self.least - 1 - leading)
            .min(self.most - 1 - leading)
            .min(most_decimals)
    }
}

/// The power of ten of the first significant digit; none for zero.
pub(super) fn leading_place(size: f64) -> Option<i32> {
    let text = format!("{size:e}");
    let (mantissa, exponent) = text.split_once('e')?;
    if mantissa == "0" {
        return None;
    }
    exponent.parse().ok()
}
