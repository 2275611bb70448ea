//! What joins two reaches, or a reach to the forebay or the foot.

/// The root of a Q + s Q|Q| = x, for a above 0 and s from 0 up. One branch
/// for both directions, no cancellation.
#[inline]
pub(super) fn flow_of(a: f64, s: f64, x: f64) -> f64 {
    2.0 * x / (a + (a * a + 4.0 * s * x.abs()).sqrt())
}

/// A joint: losses and rigid water in one place.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub(super) struct Joint {
    /// Head over flow squared, s2/m5: local losses, change of bore, friction
    /// of lumped runs.
    pub(super) loss: f64,
    /// Head over rate of change of flow, s2/m2: sum of l/(g A) of lumped runs.
    pub(super) inertia: f64,
}

impl Joint {
    /// Flow through the joint from head `from` with impedance `a1` and half
    /// friction `h1` behind it, to `to` with `a2` and `h2`; `before` is the flow a
    /// step of `dt` ago (implicit Euler for the inertia).
    #[inline]
    pub(super) fn flow(
        &self,
        (from, a1, h1): (f64, f64, f64),
        (to, a2, h2): (f64, f64, f64),
        before: f64,
        dt: f64,
    ) -> f64 {
        let mass = self.inertia / dt;
        flow_of(
            a1 + a2 + mass,
            h1 + h2 + self.loss,
            from - to + mass * before,
        )
    }

    /// Flow out through nozzles of conductance `c` = 2 g G^2, m5/s2, from head
    /// `from` above their axis.
    #[inline]
    pub(super) fn outflow(
        &self,
        (from, a1, h1): (f64, f64, f64),
        c: f64,
        before: f64,
        dt: f64,
    ) -> f64 {
        if c <= 0.0 {
            return 0.0;
        }
        let mass = self.inertia / dt;
        flow_of(
            c * (a1 + mass),
            1.0 + c * (h1 + self.loss),
            c * (from + mass * before),
        )
    }
}
