//! Fittings whose loss is one number in a table.

use super::table::{attested, rows};
use super::{Attested, FittingError, Loss, LossCoefficient, Reference, ratio_within};
use crate::math;

/// A fitting of the fixed table, by its key.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct FixedLoss {
    /// Stable key, as kept in a saved book.
    pub key: &'static str,
    /// The loss.
    pub loss: Loss,
}

/// All fittings of `data/fixed_losses.csv`, in the order of the table.
pub fn fixed_losses() -> impl Iterator<Item = FixedLoss> {
    rows(include_str!("../data/fixed_losses.csv")).filter_map(|row| {
        let reference = match *row.get(2)? {
            "upstream" => Reference::Upstream,
            "downstream" => Reference::Downstream,
            "own" => Reference::Own,
            _ => return None,
        };
        Some(FixedLoss {
            key: row.first()?,
            loss: Loss {
                k: LossCoefficient::new(row.get(1)?.parse().ok()?).ok()?,
                reference,
                attested: attested(row.get(3)?),
                source: source(row.get(4)?),
            },
        })
    })
}

/// The source that a short key of the table stands for.
fn source(key: &str) -> &'static str {
    match key {
        "sanks-b6" => "Sanks, Pumping Station Design, Table B-6, page seen in a public copy",
        "sanks-b7" => "Sanks, Pumping Station Design, Table B-7, page seen in a public copy",
        "handling-9.2" => {
            "Table 9.2 of a handbook of materials handling (after Miller 1990), page excerpt seen"
        }
        "water-26-3" => "Table 26-3 of a public water systems handbook, page excerpt seen",
        _ => "from memory",
    }
}

/// The fitting with this key.
#[must_use]
pub fn fixed_loss(key: &str) -> Option<FixedLoss> {
    fixed_losses().find(|fixed| fixed.key == key)
}

/// Shape of the pipe's inlet.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Entrance {
    /// Bellmouth.
    Bellmouth,
    /// Rounded edge.
    Rounded,
    /// Sharp edge, flush with the wall.
    SharpFlush,
    /// Pipe projecting into the forebay.
    Projecting,
}

/// A tee or wye, and which way the water goes.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Tee {
    /// Straight through a tee; also the line past a draw-off.
    Line,
    /// Out of the branch of a tee: a draw-off, a manifold branch.
    Branch,
    /// Out of the branch, by the more cautious of two handbooks.
    BranchCautious,
    /// Straight through a cross.
    CrossLine,
    /// Out of the branch of a cross.
    CrossBranch,
    /// A wye of 45 degrees.
    Wye45,
}

/// A valve fully open.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum OpenValve {
    /// Ball valve.
    Ball,
    /// Butterfly valve, thin disc (25 lb class).
    ButterflyLight,
    /// Butterfly valve, thick disc (150 lb class).
    ButterflyHeavy,
    /// Gate valve, double disc.
    Gate,
    /// Gate valve with resilient seat.
    GateResilient,
    /// Knife gate.
    KnifeGate,
    /// Globe valve.
    Globe,
    /// Cone valve.
    Cone,
    /// Swing check valve.
    SwingCheck,
}

/// Loss at the pipe's inlet, on the velocity in the pipe.
#[must_use]
pub fn entrance(shape: Entrance) -> Loss {
    by_key(match shape {
        Entrance::Bellmouth => "entrance-bellmouth",
        Entrance::Rounded => "entrance-rounded",
        Entrance::SharpFlush => "entrance-sharp-flush",
        Entrance::Projecting => "entrance-projecting",
    })
}

/// Loss at a tee, on the velocity in the run before it.
#[must_use]
pub fn tee(tee: Tee) -> Loss {
    by_key(match tee {
        Tee::Line => "tee-line",
        Tee::Branch => "tee-branch",
        Tee::BranchCautious => "tee-branch-cautious",
        Tee::CrossLine => "cross-line",
        Tee::CrossBranch => "cross-branch",
        Tee::Wye45 => "wye-45",
    })
}

/// Loss of a valve fully open, on the velocity in its nominal bore.
#[must_use]
pub fn open_valve(valve: OpenValve) -> Loss {
    by_key(match valve {
        OpenValve::Ball => "valve-ball",
        OpenValve::ButterflyLight => "valve-butterfly-light",
        OpenValve::ButterflyHeavy => "valve-butterfly-heavy",
        OpenValve::Gate => "valve-gate",
        OpenValve::GateResilient => "valve-gate-resilient",
        OpenValve::KnifeGate => "valve-knife-gate",
        OpenValve::Globe => "valve-globe",
        OpenValve::Cone => "valve-cone",
        OpenValve::SwingCheck => "valve-swing-check",
    })
}

/// A fitting that a test proves to be in the table.
#[expect(
    clippy::expect_used,
    reason = "the table is part of the program, and a test looks every key up"
)]
fn by_key(key: &str) -> Loss {
    fixed_loss(key).expect("a key of the table").loss
}

/// Loss of an inlet flush with the wall whose edge is rounded to a radius, on
/// the velocity in the pipe.
///
/// # Equation
/// K = 0.0696 (1 - 0.569 r) L^2 + (L - 1)^2, L = 1 + 0.622 (1 - 0.30 sqrt r -
/// 0.70 r)^4, r the edge radius over the bore; 0.57 at r = 0 (sharp) and 0.03
/// from r = 1. Source: Rennels and Hudson, Pipe Flow, 2012, equations 9.2 and
/// 9.3, as coded in the open library fluids 1.3.1.
///
/// # Errors
/// A ratio outside 0..=1.
pub fn rounded_entrance(radius_over_bore: f64) -> Result<Loss, FittingError> {
    let r = ratio_within(radius_over_bore, 0.0, 1.0)?;
    let jet = 1.0 + 0.622 * math::powi(1.0 - 0.30 * r.sqrt() - 0.70 * r, 4);
    let k = 0.0696 * (1.0 - 0.569 * r) * jet * jet + (jet - 1.0) * (jet - 1.0);
    Ok(Loss {
        k: LossCoefficient::new(k)?,
        reference: Reference::Downstream,
        attested: Attested::Seen,
        source: "Rennels and Hudson, Pipe Flow, 2012, eq. 9.2 and 9.3, as coded in the open library fluids 1.3.1",
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_row_reads_and_every_key_is_its_own() {
        let table = include_str!("../data/fixed_losses.csv");
        let lines = table
            .lines()
            .filter(|line| !line.starts_with('#') && !line.trim().is_empty())
            .count()
            - 1;
        let fixed: Vec<_> = fixed_losses().collect();
        assert_eq!(fixed.len(), lines);
        for (index, one) in fixed.iter().enumerate() {
            assert!(fixed.iter().skip(index + 1).all(|two| two.key != one.key));
            assert!(
                one.loss.attested == Attested::FromMemory || one.loss.source != "from memory",
                "{}",
                one.key
            );
        }
    }

    #[test]
    fn every_named_fitting_is_in_the_table() {
        for shape in [
            Entrance::Bellmouth,
            Entrance::Rounded,
            Entrance::SharpFlush,
            Entrance::Projecting,
        ] {
            assert_eq!(entrance(shape).reference, Reference::Downstream);
        }
        for one in [
            Tee::Line,
            Tee::Branch,
            Tee::BranchCautious,
            Tee::CrossLine,
            Tee::CrossBranch,
            Tee::Wye45,
        ] {
            assert_eq!(tee(one).reference, Reference::Upstream);
        }
        for one in [
            OpenValve::Ball,
            OpenValve::ButterflyLight,
            OpenValve::ButterflyHeavy,
            OpenValve::Gate,
            OpenValve::GateResilient,
            OpenValve::KnifeGate,
            OpenValve::Globe,
            OpenValve::Cone,
            OpenValve::SwingCheck,
        ] {
            assert_eq!(open_valve(one).reference, Reference::Own);
        }
    }

    #[test]
    fn rounding_an_edge_only_helps() {
        let mut last = f64::INFINITY;
        for step in 0..=100 {
            let k = rounded_entrance(f64::from(step) / 100.0).unwrap().k.get();
            assert!(k < last);
            last = k;
        }
        assert!(rounded_entrance(1.1).is_err());
    }
}
