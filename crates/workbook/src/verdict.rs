//! Verdicts, and the checks they rest on.

use crate::book::Id;
use crate::figure::{Gap, Lack};
use crate::measure::Measure;
use hydraulics::quantity::PipeLength;

/// What a check, a stretch or the whole book comes to. Ordered from best to
/// worst, so that the worst of several is their maximum.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Verdict {
    /// Within what is allowed, with margin.
    Holds,
    /// Within what is allowed, with little margin.
    Tight,
    /// A check it needs is not made, or cannot be trusted.
    Unsettled,
    /// Beyond what is allowed.
    Fails,
}

/// What is checked.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum CheckKind {
    /// The head that the flow to pass would lose, against the gross head:
    /// beyond it the line cannot pass that flow at all.
    PassesFlow,
    /// Standing water from the highest forebay level, against the lasting
    /// pressure allowed at the warmest wall, of the weakest part.
    StandingPressure,
    /// The highest pressure of the whole transient against the same.
    SurgePressure,
    /// The lowest pressure of the steady line.
    LowestPressure,
    /// Full vacuum on the free pipe against its collapse pressure.
    Collapse,
}

/// The part of a stretch that bears least.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Weakest {
    /// The pipe itself.
    Pipe,
    /// A fitting.
    Fitting(Id),
    /// Manifold, valve and nozzle at the foot.
    Jets,
}

/// One check on one stretch.
#[derive(Debug, Clone, PartialEq)]
pub struct Check {
    /// What is checked.
    pub kind: CheckKind,
    /// What it comes to.
    pub verdict: Verdict,
    /// The figure that decides it.
    pub found: Option<Measure>,
    /// What is allowed.
    pub allowed: Option<Measure>,
    /// `found` over `allowed`: the share used.
    pub share: Option<f64>,
    /// Where along the pipe.
    pub at: Option<PipeLength>,
    /// Which part bears least, where that is a question.
    pub weakest: Option<Weakest>,
    /// What keeps it from being settled, or what is wrong.
    pub gap: Option<Gap>,
}

impl Check {
    /// A check that cannot be made, and why.
    #[must_use]
    pub fn unsettled(kind: CheckKind, gap: Gap) -> Check {
        Check {
            kind,
            verdict: Verdict::Unsettled,
            found: None,
            allowed: None,
            share: None,
            at: None,
            weakest: None,
            gap: Some(gap),
        }
    }

    /// A check of `found` against `allowed`, both of one kind and the second
    /// above zero: fails beyond it, is tight within `tight_margin` of it.
    #[must_use]
    pub fn against(kind: CheckKind, found: Measure, allowed: Measure, tight_margin: f64) -> Check {
        let share = found.value / allowed.value;
        // Written so that a share that is no number fails.
        let verdict = if share <= 1.0 - tight_margin {
            Verdict::Holds
        } else if share <= 1.0 {
            Verdict::Tight
        } else {
            Verdict::Fails
        };
        Check {
            kind,
            verdict,
            found: Some(found),
            allowed: Some(allowed),
            share: Some(share),
            at: None,
            weakest: None,
            gap: None,
        }
    }

    /// The same check, which for want of `lack` cannot give holds or tight.
    #[must_use]
    pub fn wanting(mut self, lack: Lack) -> Check {
        if self.verdict < Verdict::Unsettled {
            self.verdict = Verdict::Unsettled;
            self.gap = Some(Gap::Unsettled(lack));
        }
        self
    }
}

/// What a stretch comes to.
#[derive(Debug, Clone, PartialEq)]
pub struct StretchVerdict {
    /// The stretch.
    pub stretch: Id,
    /// The worst of its checks.
    pub verdict: Verdict,
    /// Every check, in the order of [`CheckKind`].
    pub checks: Vec<Check>,
    /// The place in `checks` of the one that decides: the first of the worst.
    pub deciding: usize,
}

impl StretchVerdict {
    /// The worst of these checks. With no check at all nothing is settled,
    /// so there must be one.
    #[must_use]
    pub fn of(stretch: Id, checks: Vec<Check>) -> Option<StretchVerdict> {
        let verdict = checks.iter().map(|c| c.verdict).max()?;
        let deciding = checks.iter().position(|c| c.verdict == verdict)?;
        Some(StretchVerdict {
            stretch,
            verdict,
            checks,
            deciding,
        })
    }

    /// The check that decides.
    #[must_use]
    pub fn deciding_check(&self) -> Option<&Check> {
        self.checks.get(self.deciding)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Kind;
    use proptest::prelude::*;

    fn bar(x: f64) -> Measure {
        Measure::new(x * 1e5, Kind::Pressure)
    }

    #[test]
    fn the_margin_parts_holds_from_tight_from_fails() {
        let v = |p| Check::against(CheckKind::StandingPressure, bar(p), bar(10.0), 0.1).verdict;
        assert_eq!(v(9.0), Verdict::Holds);
        assert_eq!(v(9.01), Verdict::Tight);
        assert_eq!(v(10.0), Verdict::Tight);
        assert_eq!(v(10.01), Verdict::Fails);
        assert_eq!(v(f64::NAN), Verdict::Fails);
    }

    #[test]
    fn a_want_never_hides_a_failure() {
        let c = Check::against(CheckKind::StandingPressure, bar(11.0), bar(10.0), 0.1);
        assert_eq!(c.wanting(Lack::Surge).verdict, Verdict::Fails);
        let c = Check::against(CheckKind::StandingPressure, bar(1.0), bar(10.0), 0.1);
        assert_eq!(c.wanting(Lack::Surge).verdict, Verdict::Unsettled);
    }

    proptest! {
        #[test]
        fn more_pressure_is_never_a_better_verdict(p in 0.0..20.0f64, more in 0.0..5.0f64) {
            let v = |p| Check::against(CheckKind::StandingPressure, bar(p), bar(10.0), 0.1).verdict;
            prop_assert!(v(p + more) >= v(p));
        }
    }
}
