//! Allievi's chain equations for a valve that closes linearly.

use super::quick::{SurgeError, not_negative, pipe_period, positive};
use crate::math;
use crate::quantity::{Acceleration, Head, PipeLength, Time, Velocity};
use uom::si::acceleration::meter_per_second_squared;
use uom::si::time::second;
use uom::si::velocity::meter_per_second;

/// Longest closing time computed, in phases; beyond it the rise is below a
/// thousandth of the pipe parameter.
pub const GREATEST_PHASES: f64 = 10_000.0;

/// Start times sampled in each smooth part of a phase.
const SAMPLES: u32 = 24;
/// Golden-section steps about the best sample: narrows it to a share of 1e-9.
const GOLDEN_STEPS: u32 = 45;

/// Why the chain cannot be computed.
#[derive(Debug, Clone, Copy, PartialEq)]
#[non_exhaustive]
pub enum AllieviError {
    /// The pipe parameter rho is not positive.
    PipeParameter(f64),
    /// The closing time in phases theta is not above 0 and at most 10 000
    /// ([`GREATEST_PHASES`]).
    Phases(f64),
}

impl core::fmt::Display for AllieviError {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        match self {
            Self::PipeParameter(value) => write!(f, "pipe parameter {value} is not above 0"),
            Self::Phases(value) => write!(
                f,
                "closing time of {value} phases is not above 0 and at most {GREATEST_PHASES}"
            ),
        }
    }
}

impl core::error::Error for AllieviError {}

/// What a linear closure does at the valve.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct AllieviClosure {
    /// Highest head over static head, at any time.
    pub highest: f64,
    /// Time of the highest head, in phases (2L/a).
    pub phase: f64,
    /// Highest head over static head at whole phases only, which is what
    /// charts show; the head between them can be higher.
    pub highest_at_whole_phases: f64,
}

/// Highest head at a valve that discharges to the air and whose opening falls
/// linearly to nothing.
///
/// # Equation
/// Allievi's chain (1913), one link per phase 2L/a:
/// z_i^2 + z_(i-1)^2 - 2 = 2 rho (n_(i-1) z_(i-1) - n_i z_i), with z^2 the head
/// over static head and n the open share; started from every instant of the
/// first phase, not only from its ends. Uniform pipe, no friction, no cavity.
///
/// `rho` is [`pipe_parameter`], `theta` the closing time over 2L/a.
///
/// # Errors
/// A pipe parameter that is not positive, a closing time not above 0 and at
/// most 10 000 phases.
///
/// # Example
/// ```
/// use hydraulics::surge::allievi_linear_closure;
/// // Within one phase the rise is that of Joukowsky, 2 rho.
/// let sudden = allievi_linear_closure(0.25, 0.5)?;
/// assert!((sudden.highest - 1.5).abs() < 1e-12);
/// # Ok::<(), hydraulics::surge::AllieviError>(())
/// ```
pub fn allievi_linear_closure(rho: f64, theta: f64) -> Result<AllieviClosure, AllieviError> {
    if !(rho > 0.0 && rho.is_finite()) {
        return Err(AllieviError::PipeParameter(rho));
    }
    if !(theta > 0.0 && theta <= GREATEST_PHASES) {
        return Err(AllieviError::Phases(theta));
    }
    let chain = Chain { rho, theta };
    // Head is smooth in the start time except where the closure ends.
    let kink = theta - theta.floor();
    let mut best = chain.highest(0.0);
    for (low, high) in [(0.0, kink), (kink, 1.0)] {
        let width = high - low;
        let at = |index: u32| low + width * f64::from(index) / f64::from(SAMPLES);
        let (index, found) = (0..=SAMPLES)
            .map(|index| (index, chain.highest(at(index))))
            .fold((0, (0.0, 0.0)), |best, next| {
                if next.1.0 > best.1.0 { next } else { best }
            });
        best = higher(best, found);
        let (mut a, mut b) = (at(index.saturating_sub(1)), at((index + 1).min(SAMPLES)));
        let golden = 0.5 * (5.0_f64.sqrt() - 1.0);
        for _ in 0..GOLDEN_STEPS {
            let reach = golden * (b - a);
            let (left, right) = (chain.highest(b - reach), chain.highest(a + reach));
            if left.0 < right.0 {
                a = b - reach;
            } else {
                b = a + reach;
            }
            best = higher(best, higher(left, right));
        }
    }
    Ok(AllieviClosure {
        highest: best.0,
        phase: best.1,
        highest_at_whole_phases: chain.highest(0.0).0,
    })
}

/// The higher of two heads with their times.
fn higher(a: (f64, f64), b: (f64, f64)) -> (f64, f64) {
    if b.0 > a.0 { b } else { a }
}

/// A closure, marched phase by phase.
#[derive(Debug, Clone, Copy)]
struct Chain {
    rho: f64,
    theta: f64,
}

impl Chain {
    /// Highest head over static head, and its phase, of the chain that starts
    /// at an instant of the first phase.
    fn highest(self, start: f64) -> (f64, f64) {
        let mut time = start;
        // Before the start the head is static and the valve fully open.
        let (mut head, mut flow) = (1.0, 1.0);
        let mut best = (1.0, 0.0);
        // Two phases beyond the end of the closure the swing repeats itself.
        while time <= self.theta + 2.0 {
            (head, flow) = self.link(head, flow, time);
            best = higher(best, (head, time));
            time += 1.0;
        }
        best
    }

    /// Head and flow (over their static and full values) one phase on.
    fn link(self, head: f64, flow: f64, time: f64) -> (f64, f64) {
        let open = (1.0 - time / self.theta).max(0.0);
        let sum = 2.0 - head + 2.0 * self.rho * flow;
        let give = self.rho * open;
        // The positive root; below zero head the valve draws in.
        let root = (give * give + sum.abs()).sqrt();
        let speed = sum.abs() / (give + root);
        let sign = if sum < 0.0 { -1.0 } else { 1.0 };
        (sign * speed * speed, sign * speed * open)
    }
}

/// Rise of head when a valve closes linearly in the given time, by Allievi's
/// chain.
///
/// `velocity` is that at full opening, `head` the static head at the valve.
///
/// # Errors
/// A length, wave speed, head or gravity that is not positive, a negative
/// velocity or time, a closing time beyond 10 000 phases.
pub fn allievi(
    length: PipeLength,
    wave_speed: Velocity,
    velocity: Velocity,
    head: Head,
    closing_time: Time,
    gravity: Acceleration,
) -> Result<Head, SurgeError> {
    let period = pipe_period(length, wave_speed)?.get::<second>();
    let t = not_negative(closing_time.get::<second>(), SurgeError::Time(closing_time))?;
    let h = positive(head.m(), SurgeError::Head(head))?;
    let g = gravity.get::<meter_per_second_squared>();
    positive(g, SurgeError::Gravity(gravity))?;
    let v = not_negative(
        velocity.get::<meter_per_second>(),
        SurgeError::Velocity(velocity),
    )?;
    let rho = pipe_parameter(wave_speed, velocity, head, gravity);
    if v <= 0.0 || rho <= 0.0 {
        return Ok(Head::from_m(0.0));
    }
    // Any closure within one phase is as good as sudden.
    let theta = (t / period).max(0.5);
    let closure = allievi_linear_closure(rho, theta).map_err(|_| SurgeError::Time(closing_time))?;
    Ok(Head::from_m(h * (closure.highest - 1.0)))
}

/// Allievi's pipe parameter rho = a V0 / (2 g H0).
#[must_use]
pub fn pipe_parameter(
    wave_speed: Velocity,
    velocity: Velocity,
    head: Head,
    gravity: Acceleration,
) -> f64 {
    wave_speed.get::<meter_per_second>() * velocity.get::<meter_per_second>()
        / (2.0 * gravity.get::<meter_per_second_squared>() * head.m())
}

/// Allievi's limit head of long closures, over static head.
///
/// # Equation
/// 1 + (n/2) (n + sqrt(n^2 + 4)), n = rho/theta = L V0/(g H0 T): what the chain
/// tends to when the closure lasts many phases and the highest head comes late
/// (Allievi 1913; the "quick formula" of handbooks). Below the highest head
/// where that comes in the first phases.
#[must_use]
pub fn allievi_limit(rho: f64, theta: f64) -> f64 {
    let n = rho / theta;
    1.0 + n / 2.0 * (n + math::hypot(n, 2.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn nonsense_is_refused() {
        for (rho, theta) in [
            (0.0, 1.0),
            (-1.0, 1.0),
            (f64::NAN, 1.0),
            (1.0, 0.0),
            (1.0, 1e5),
        ] {
            assert!(allievi_linear_closure(rho, theta).is_err());
        }
    }

    #[test]
    fn typed_form_agrees_with_joukowsky_when_sudden() {
        let m_s = Velocity::new::<meter_per_second>;
        let g = crate::constants::standard_gravity();
        let length = PipeLength::from_m(500.0);
        let rise = allievi(
            length,
            m_s(1000.0),
            m_s(2.0),
            Head::from_m(100.0),
            Time::new::<second>(0.9),
            g,
        )
        .unwrap();
        let sudden = super::super::joukowsky(m_s(1000.0), m_s(2.0), g).unwrap();
        assert!((rise.m() - sudden.m()).abs() < 1e-9);
    }

    proptest! {
        #[test]
        fn within_one_phase_it_is_joukowsky(rho in 0.01..5.0_f64, theta in 0.01..1.0_f64) {
            let closure = allievi_linear_closure(rho, theta).unwrap();
            prop_assert!((closure.highest - 1.0 - 2.0 * rho).abs() < 1e-9);
        }

        #[test]
        fn slower_closures_never_exceed_joukowsky(rho in 0.01..5.0_f64, theta in 1.0..60.0_f64) {
            let closure = allievi_linear_closure(rho, theta).unwrap();
            prop_assert!(closure.highest - 1.0 <= 2.0 * rho * (1.0 + 1e-12));
            prop_assert!(closure.highest >= closure.highest_at_whole_phases);
            prop_assert!(closure.highest > 1.0);
        }

        #[test]
        fn long_closures_of_low_head_lines_tend_to_the_limit(rho in 2.0..5.0_f64) {
            let closure = allievi_linear_closure(rho, 100.0).unwrap();
            let limit = allievi_limit(rho, 100.0);
            prop_assert!((closure.highest - limit).abs() < 0.02 * (limit - 1.0));
        }
    }
}
